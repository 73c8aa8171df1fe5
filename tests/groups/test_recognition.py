from __future__ import annotations

from itertools import product

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tensorsym.errors import GroupSymbolError
from tensorsym.groups.operations import IDENTITY
from tensorsym.groups.recognition import class_of_rotations, frame_directions
from tests.groups.settings import ALL_SETTINGS, STANDARD, setting_of
from tests.truths.float_groups import as_set

HEXAGON = np.array([[1.0, -0.5, 0.0], [0.0, 0.75**0.5, 0.0], [0.0, 0.0, 1.0]])
STEPS = st.tuples(st.integers(0, 2), st.integers(1, 2), st.sampled_from([-2, -1, 1, 2]))


@st.composite
def unimodular_matrices(draw):
    """Draw an integer matrix of determinant 1 or -1: a random lattice basis."""
    matrix = np.eye(3, dtype=int)[draw(st.permutations(range(3)))]
    for row, offset, factor in draw(st.lists(STEPS, max_size=5)):
        matrix[row] += factor * matrix[(row + offset) % 3]
    return matrix * draw(st.sampled_from([1, -1]))


def in_lattice_basis(group, basis):
    """Return the operations of a group as integer matrices in another lattice basis, whose columns are given."""
    inverse = np.rint(np.linalg.inv(basis)).astype(int)
    matrices = [inverse @ np.array(operation.matrix) @ basis for operation in group.operations]
    return frozenset(tuple(map(tuple, matrix.tolist())) for matrix in matrices)


def lattice_vectors(group, lengths, turn):
    """Return columns a, b, c of a lattice with the metric of the group's system, turned anyhow."""
    x, y, z = lengths
    if group.system == "triclinic":
        return turn @ np.array([[x, 0.3, -0.2], [0.0, y, 0.4], [0.0, 0.0, z]])
    if group.system == "cubic":
        return turn * x
    if group.system in ("trigonal", "hexagonal"):
        return turn @ HEXAGON @ np.diag([x, x, z])
    return turn @ np.diag([x, x if group.system == "tetragonal" else y, z])


def completed_frame(candidate, vectors, senses):
    """Return a right-handed frame whose rows lie along the candidate's directions, free axes chosen anyhow."""
    rows = {
        place: sense * (vectors @ direction) / np.linalg.norm(vectors @ direction)
        for place, (direction, sense) in enumerate(zip(candidate, senses, strict=True))
        if direction is not None
    }
    if not rows:
        return np.linalg.qr(vectors)[0].T
    if len(rows) == 1:
        ((place, axis),) = rows.items()
        second = np.cross(axis, [0.36, 0.48, -0.8])
        second /= np.linalg.norm(second)
        frame = [axis, second, np.cross(axis, second)]
        return np.array([frame[(row - place) % 3] for row in range(3)])
    x, z = rows[0], rows[2]
    return np.array([x, np.cross(z, x), z])


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
@settings(max_examples=10)
@given(basis=unimodular_matrices())
def test_class_is_recognised_in_any_lattice_basis(group, basis):
    """The class does not depend on the lattice basis in which the rotations are written, nor on the setting."""
    assert class_of_rotations(in_lattice_basis(group, basis)) == group.hermann_mauguin


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
@settings(max_examples=10)
@given(
    basis=unimodular_matrices(),
    lengths=st.tuples(*[st.floats(2.0, 9.0)] * 3),
    seed=st.integers(0, 2**32 - 1),
    senses=st.tuples(*[st.sampled_from([1, -1])] * 3),
)
def test_frame_carries_the_rotations_onto_the_standard_group(group, basis, lengths, seed, senses):
    """Each candidate, its axes in either sense, turns the crystal's operations into the standard Cartesian ones."""
    turn = np.linalg.qr(np.random.default_rng(seed).normal(size=(3, 3)))[0]
    vectors = lattice_vectors(group, lengths, turn) @ basis
    rotations = in_lattice_basis(group, basis)
    cartesian = [vectors @ np.array(rotation) @ np.linalg.inv(vectors) for rotation in rotations]

    found = frame_directions(rotations)

    standard = next(other for other in STANDARD if other.hermann_mauguin == found.hermann_mauguin)
    expected = as_set(operation.cartesian() for operation in standard.operations)
    frames = [completed_frame(candidate, vectors, senses) for candidate in found.candidates]
    assert frames
    assert all(np.abs(frame @ frame.T - np.eye(3)).max() < 1e-9 for frame in frames)
    assert all(as_set(frame @ matrix @ frame.T for matrix in cartesian) == expected for frame in frames)


@pytest.mark.parametrize(
    ("symbol", "candidates"),
    [("1", 1), ("2", 1), ("222", 6), ("mm2", 2), ("4", 1), ("422", 4), ("-42m", 2), ("32", 3), ("622", 6), ("m-3m", 6)],
)
def test_number_of_candidates(symbol, candidates):
    """Every choice of like axes is offered: six orders of three axes, each of the secondary axes once."""
    group = next(group for group in STANDARD if group.hermann_mauguin == symbol)

    assert len(frame_directions(frozenset(operation.matrix for operation in group.operations)).candidates) == candidates


@pytest.mark.parametrize(
    "rotations",
    [
        frozenset(),
        frozenset({IDENTITY, ((0, -1, 0), (1, 0, 0), (0, 0, 1))}),
        frozenset({((0, -1, 0), (1, -1, 0), (0, 0, 1))}),
    ],
    ids=["none", "4 without its square", "3 alone"],
)
def test_incomplete_group_is_refused(rotations):
    """Rotations that form no class are refused with their number and kinds, not given a neighbour's name."""
    with pytest.raises(GroupSymbolError, match=f"{len(rotations)} rotations form none of the 32 classes"):
        class_of_rotations(rotations)
    with pytest.raises(GroupSymbolError, match="the cell may be distorted"):
        frame_directions(rotations)


@pytest.mark.parametrize(
    "matrix",
    [((1, 1, 0), (0, 1, 0), (0, 0, 1)), ((2, 0, 0), (0, 1, 0), (0, 0, 1)), ((0, 0, 0), (0, 0, 0), (0, 0, 0))],
    ids=["shear", "stretch", "zero"],
)
def test_matrix_that_is_no_operation_is_refused(matrix):
    """A matrix that belongs to no finite group ends in the error for group symbols, not in a foreign one."""
    with pytest.raises(GroupSymbolError):
        class_of_rotations(frozenset({IDENTITY, matrix}))


def test_classes_are_told_apart_by_their_counts():
    """No two of the 32 classes have the same numbers of operations of each kind, so recognition is unique."""
    counts = [tuple(sorted(operation.symbol for operation in group.operations)) for group in STANDARD]

    assert all(one != other for (i, one), (j, other) in product(enumerate(counts), repeat=2) if i < j)
