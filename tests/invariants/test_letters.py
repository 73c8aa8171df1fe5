from __future__ import annotations

from functools import reduce

import numpy as np
import pytest

from tensorsym.groups.operations import Basis
from tensorsym.groups.point_group import standard_point_groups
from tensorsym.invariants.letters import MODULUS, index_moves, letter_action, operation_move, plane_move
from tensorsym.tensors.kind import TensorKind
from tests.invariants.kinds import KINDS

OPERATIONS = sorted({operation for group in standard_point_groups() for operation in group.operations}, key=repr)
LETTERS = {
    Basis.CARTESIAN: np.eye(3, dtype=complex),
    Basis.HEXAGONAL: np.array([[1, 1j, 0], [1, -1j, 0], [0, 0, 1]]),
}


def named(operation):
    """Return the name of a case."""
    return f"{operation.basis.value}-{operation.words}"


def as_matrix(images, phases, modulus):
    """Return the monomial matrix of images and phases."""
    matrix = np.zeros((len(images), len(images)), dtype=complex)
    matrix[list(images), range(len(images))] = np.exp(2j * np.pi * np.array(phases) / modulus)
    return matrix


def on_letters(operation):
    """Return the Cartesian matrix in the basis of the letters."""
    vectors = LETTERS[operation.basis].T
    return np.linalg.inv(vectors) @ operation.cartesian() @ vectors


@pytest.mark.parametrize("operation", OPERATIONS, ids=named)
def test_letters_are_permuted_with_phases(operation):
    """In x, y, z or in x + iy, x - iy, z the Cartesian matrix is the permutation with the phases stated."""
    images, phases = letter_action(operation)

    assert as_matrix(images, phases, MODULUS[operation.basis]) == pytest.approx(on_letters(operation), abs=1e-14)


@pytest.mark.parametrize("operation", OPERATIONS, ids=named)
@pytest.mark.parametrize("kind", [TensorKind(0, axial=True), TensorKind(1), TensorKind(3, axial=True)], ids=str)
def test_words_move_as_products_of_letters(operation, kind):
    """A word moves as its letters do, the phases added, a pseudotensor with the sign of the determinant."""
    move = operation_move(operation, kind)
    sign = operation.determinant if kind.axial else 1

    expected = sign * reduce(np.kron, [on_letters(operation)] * kind.rank, np.eye(1))

    assert as_matrix(move.images, move.phases, MODULUS[operation.basis]) == pytest.approx(expected, abs=1e-13)


@pytest.mark.parametrize("operation", [one for one in OPERATIONS if one.basis is Basis.HEXAGONAL], ids=named)
@pytest.mark.parametrize("plane", [0, 1, 2, 3])
def test_words_of_the_plane_move_alone(operation, plane):
    """Words of the two letters of the plane move among themselves, the z beside them giving one more sign."""
    kind = TensorKind(3)
    move = plane_move(operation, kind, plane)
    beside = operation.cartesian()[2, 2] ** (3 - plane)

    expected = beside * reduce(np.kron, [on_letters(operation)[:2, :2]] * plane, np.eye(1))

    assert as_matrix(move.images, move.phases, MODULUS[Basis.HEXAGONAL]) == pytest.approx(expected, abs=1e-13)


@pytest.mark.parametrize("basis", Basis)
@pytest.mark.parametrize("name", ["symmetric", "antisymmetric", "piezoelectric", "hall", "cyclic", "elastic"])
def test_index_symmetry_moves_words(basis, name):
    """A move of the index symmetry permutes the places of letters, with half a turn for a minus sign."""
    kind = KINDS[name]
    values = np.random.default_rng(0).normal(size=(3,) * kind.rank)

    for move, (order, sign) in zip(index_moves(kind, basis), kind.permutations, strict=True):
        moved = as_matrix(move.images, move.phases, MODULUS[basis]).T @ values.ravel()
        assert moved == pytest.approx(sign * np.array([values[tuple(index[place] for place in order)]
                                                       for index in np.ndindex(values.shape)]))  # fmt: skip


def test_time_reversal_adds_half_a_turn():
    """An antiunitary operation adds half a turn on kinds odd in time."""
    from dataclasses import replace

    operation = next(one for one in OPERATIONS if one.basis is Basis.HEXAGONAL)
    antiunitary = replace(operation, reverses_time=True)
    plain, odd = TensorKind(1), TensorKind(1, time_odd=True)

    assert operation_move(antiunitary, plain).phases == operation_move(operation, plain).phases
    difference = np.subtract(operation_move(antiunitary, odd).phases, operation_move(operation, odd).phases)
    assert set(difference % 6) == {3}
