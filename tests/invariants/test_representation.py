from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from functools import lru_cache

import numpy as np
import pytest

from tensorsym.groups.operations import Basis
from tensorsym.groups.point_group import standard_point_groups
from tensorsym.invariants.characters import character, invariant_count
from tensorsym.invariants.representation import projector, representation_matrix
from tensorsym.invariants.solver import invariant_space
from tensorsym.invariants.space import spread_components
from tensorsym.tensors.axes import turned
from tensorsym.tensors.kind import TensorKind
from tensorsym.tensors.words import components_of
from tests.invariants.kinds import KINDS

GROUPS = standard_point_groups()
RECTANGULAR = [group for group in GROUPS if group.basis is Basis.CARTESIAN]
HEXAGONAL = [group for group in GROUPS if group.basis is Basis.HEXAGONAL]
CHOSEN = ["magnetisation", "symmetric", "gyration", "piezoelectric", "hall", "elastic"]
EXACT = ["vector", "symmetric", "magnetoelectric", "piezoelectric", "cyclic", "elastic"]


def class_of(group):
    """Return the name of a case."""
    return group.hermann_mauguin


@lru_cache(maxsize=64)
def matrices(group, kind):
    """Return D(g) for all operations, whole numbers where they are exact."""
    found = [representation_matrix(operation, kind) for operation in group.operations]
    if group.basis is Basis.HEXAGONAL:
        return np.array(found)
    assert all(entry.denominator == 1 for matrix in found for entry in matrix.ravel())
    return np.array(found).astype(int)


@pytest.mark.parametrize("group", GROUPS, ids=class_of)
@pytest.mark.parametrize("name", CHOSEN)
def test_matrices_multiply_like_the_operations(group, name):
    """D(g) D(h) = D(gh) for all pairs: exactly in rectangular axes, to rounding where the square root of 3 enters."""
    kind = KINDS[name]
    all_of_them = matrices(group, kind)
    place = {operation: number for number, operation in enumerate(group.operations)}
    table = [[place[one @ other] for other in group.operations] for one in group.operations]

    error = np.einsum("gij,hjk->ghik", all_of_them, all_of_them) - all_of_them[np.array(table)]

    assert np.abs(error).max() <= (0 if group.basis is Basis.CARTESIAN else 1e-13)


@pytest.mark.parametrize("group", GROUPS, ids=class_of)
@pytest.mark.parametrize("name", CHOSEN)
def test_trace_is_the_character(group, name):
    """The trace of D(g) is the character from the cycle index, for every operation."""
    kind = KINDS[name]
    traces = np.trace(matrices(group, kind), axis1=1, axis2=2)
    characters = [float(character(operation, kind)) for operation in group.operations]

    assert traces == pytest.approx(characters, abs=1e-12)


@pytest.mark.parametrize("group", GROUPS, ids=class_of)
@pytest.mark.parametrize("name", CHOSEN)
def test_matrix_turns_components_as_tensors_turn(group, name):
    """D(g) on components is the Cartesian matrix on every index, times the sign of a pseudotensor."""
    kind = KINDS[name]
    components = components_of(kind)
    numbers = np.random.default_rng(5).normal(size=len(components.words))
    tensor = (spread_components(kind) @ numbers).reshape((3,) * kind.rank)

    for operation, matrix in zip(group.operations, matrices(group, kind), strict=True):
        sign = -1 if kind.axial and operation.determinant < 0 else 1
        expected = sign * turned(tensor, operation.cartesian()).ravel()[list(components.words)]
        assert matrix @ numbers == pytest.approx(expected, abs=1e-12)


@pytest.mark.parametrize("name", CHOSEN)
def test_time_reversal_turns_the_sign_of_odd_kinds(name):
    """An antiunitary operation acts as the unitary one, with the sign -1 on kinds odd in time."""
    kind = KINDS[name]
    mirror = GROUPS[3].generators[0]
    antiunitary = replace(mirror, reverses_time=True)
    sign = -1 if kind.time_odd else 1

    assert np.array_equal(representation_matrix(antiunitary, kind), sign * representation_matrix(mirror, kind))
    assert character(antiunitary, kind) == sign * character(mirror, kind)


@pytest.mark.parametrize("group", RECTANGULAR, ids=class_of)
@pytest.mark.parametrize("name", EXACT)
def test_projector_equals_that_onto_the_exact_basis(group, name):
    """(1/|G|) sum of D(g) is B^T (B W B^T)^-1 B W with W the multiplicities, exactly: no rounding, no tolerance."""
    kind = KINDS[name]
    space = invariant_space(group, kind)
    weights = np.array([Fraction(times) for times in space.components.multiplicity])
    basis = np.full((space.dimension, len(weights)), Fraction(0), dtype=object)
    for number, terms in space.expressions.items():
        for free, coefficient in terms:
            basis[space.free.index(free), number] = coefficient
    gram = (basis * weights) @ basis.T

    ours = projector(group.operations, kind)

    if not space.dimension:
        assert not ours.any()
        return
    # Orbits share no component, so that B W B^T is diagonal.
    lengths = np.diagonal(gram)
    assert ours.dtype == object
    assert (gram == np.diag(lengths)).all()
    assert (ours == basis.T @ (basis * weights / lengths[:, None])).all()


@pytest.mark.parametrize("group", HEXAGONAL, ids=class_of)
@pytest.mark.parametrize("name", EXACT)
def test_projector_equals_that_onto_the_basis_with_roots(group, name):
    """The same where the square root of 3 enters, to rounding."""
    kind = KINDS[name]
    space = invariant_space(group, kind)
    basis, weights = space.coefficients(), np.array(space.components.multiplicity)
    gram = (basis * weights) @ basis.T

    assert projector(group.operations, kind) == pytest.approx(
        basis.T @ np.linalg.solve(gram, basis * weights), abs=1e-12
    )


@pytest.mark.parametrize("group", GROUPS, ids=class_of)
@pytest.mark.parametrize("name", ["magnetisation", "piezoelectric", "elastic"])
def test_projector_is_one(group, name):
    """The average of all D(g) is its own square, is kept by every D(g), and its trace is the number of invariants."""
    kind = KINDS[name]
    average = projector(group.operations, kind).astype(float)
    all_of_them = matrices(group, kind)

    assert average @ average == pytest.approx(average, abs=1e-12)
    assert np.abs(all_of_them @ average - average).max() < 1e-12
    assert np.trace(average) == pytest.approx(invariant_count(group, kind), abs=1e-12)


def test_rectangular_matrices_are_exact():
    """In rectangular axes the entries are Fractions, so that nothing is lost."""
    matrix = representation_matrix(RECTANGULAR[-1].generators[0], TensorKind(2))

    assert {type(entry) for entry in matrix.ravel()} == {Fraction}
