from __future__ import annotations

import numpy as np
import pytest

from tensorsym.groups.operations import (
    IDENTITY,
    Basis,
    Operation,
    axis_of,
    determinant,
    direction_in_words,
    product,
    symbol_of,
)
from tests.groups.settings import ALL_SETTINGS, STANDARD, setting_of

EVERY_OPERATION = sorted(
    {operation for group in ALL_SETTINGS for operation in group.operations},
    key=lambda one: (one.basis.value, one.matrix),
)


def named(operation):
    """Return the name of a case."""
    return f"{operation.basis.value[:3]}-{operation.words}"


@pytest.mark.parametrize("operation", EVERY_OPERATION, ids=named)
def test_cartesian_matrix_is_orthogonal(operation):
    """The Cartesian matrix is orthogonal with the determinant and trace of the exact one."""
    matrix = operation.cartesian()

    assert np.abs(matrix @ matrix.T - np.eye(3)).max() < 1e-14
    assert np.linalg.det(matrix) == pytest.approx(operation.determinant, abs=1e-14)
    assert np.trace(matrix) == pytest.approx(operation.trace, abs=1e-14)


@pytest.mark.parametrize("operation", EVERY_OPERATION, ids=named)
def test_direction_is_kept_or_reversed(operation):
    """The direction of a turn is kept; that of an operation that changes the hand is reversed."""
    direction = operation.cartesian_direction()

    if operation.symbol in ("1", "-1"):
        assert direction is None
    else:
        assert np.linalg.norm(direction) == pytest.approx(1.0, abs=1e-14)
        assert operation.cartesian() @ direction == pytest.approx(
            operation.determinant * np.array(direction), abs=1e-14
        )


@pytest.mark.parametrize("operation", EVERY_OPERATION, ids=named)
def test_symbol_is_the_order_of_the_turn(operation):
    """The turn in the operation comes back to the identity after as many steps as its symbol says, not before."""
    steps = {"m": 2}.get(operation.symbol) or int(operation.symbol.lstrip("-"))
    turn = operation.determinant * operation.cartesian()

    powers = [np.linalg.matrix_power(turn, n) for n in range(1, steps + 1)]

    assert [np.allclose(power, np.eye(3)) for power in powers] == [False] * (steps - 1) + [True]


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_words_tell_operations_apart(group):
    """No two operations of a group are described by the same words."""
    assert len({operation.words for operation in group.operations}) == group.order


@pytest.mark.parametrize(
    ("matrix", "basis", "words"),
    [
        (IDENTITY, Basis.CARTESIAN, "identity"),
        (((-1, 0, 0), (0, -1, 0), (0, 0, -1)), Basis.CARTESIAN, "inversion"),
        (((-1, 0, 0), (0, 1, 0), (0, 0, 1)), Basis.CARTESIAN, "mirror perpendicular to x"),
        (((1, 0, 0), (0, -1, 0), (0, 0, 1)), Basis.CARTESIAN, "mirror perpendicular to y"),
        (((0, -1, 0), (1, 0, 0), (0, 0, 1)), Basis.CARTESIAN, "4-fold turn about z"),
        (((0, 1, 0), (-1, 0, 0), (0, 0, 1)), Basis.CARTESIAN, "4-fold turn about z, backwards"),
        (((0, 1, 0), (-1, 0, 0), (0, 0, -1)), Basis.CARTESIAN, "4-fold turn with inversion about z"),
        (((0, 1, 0), (1, 0, 0), (0, 0, -1)), Basis.CARTESIAN, "2-fold turn about [110]"),
        (((0, 0, 1), (1, 0, 0), (0, 1, 0)), Basis.CARTESIAN, "3-fold turn about [111]"),
        (((0, 1, 0), (0, 0, 1), (1, 0, 0)), Basis.CARTESIAN, "3-fold turn about [111], backwards"),
        (((0, -1, 0), (1, -1, 0), (0, 0, 1)), Basis.HEXAGONAL, "3-fold turn about z"),
        (((1, -1, 0), (1, 0, 0), (0, 0, 1)), Basis.HEXAGONAL, "6-fold turn about z"),
        (((0, 1, 0), (-1, 1, 0), (0, 0, 1)), Basis.HEXAGONAL, "6-fold turn about z, backwards"),
        (((1, -1, 0), (0, -1, 0), (0, 0, -1)), Basis.HEXAGONAL, "2-fold turn about x"),
        (((-1, 1, 0), (0, 1, 0), (0, 0, -1)), Basis.HEXAGONAL, "2-fold turn about y"),
        (((-1, 1, 0), (0, 1, 0), (0, 0, 1)), Basis.HEXAGONAL, "mirror perpendicular to x"),
    ],
)
def test_words(matrix, basis, words):
    """An operation worked out by hand is described by its kind, its axis and the sense of its turn."""
    assert Operation(matrix, basis).words == words


@pytest.mark.parametrize("operation", EVERY_OPERATION, ids=named)
def test_backwards_is_the_inverse(operation):
    """Of a turn by 60, 90 or 120 degrees and its inverse exactly one is called backwards."""
    inverse = next(
        other for other in EVERY_OPERATION if other.basis is operation.basis and (operation @ other).matrix == IDENTITY
    )

    assert ("backwards" in operation.words) + ("backwards" in inverse.words) == (operation.matrix != inverse.matrix)


@pytest.mark.parametrize("operation", EVERY_OPERATION, ids=named)
def test_forward_turn_is_right_handed(operation):
    """A turn that is not called backwards is counterclockwise seen against its direction."""
    if operation.symbol in ("1", "-1", "2", "m"):
        assert "backwards" not in operation.words
        return
    turn = operation.determinant * operation.cartesian()
    axial = np.array([turn[2, 1] - turn[1, 2], turn[0, 2] - turn[2, 0], turn[1, 0] - turn[0, 1]])

    assert (axial @ operation.cartesian_direction() > 0) == ("backwards" not in operation.words)


def test_time_reversal_is_carried_and_said():
    """Two antiunitary operations give an ordinary one, one gives an antiunitary one, and the words tell."""
    mirror = Operation(((-1, 0, 0), (0, 1, 0), (0, 0, 1)), reverses_time=True)
    turn = Operation(((-1, 0, 0), (0, -1, 0), (0, 0, 1)))

    assert not (mirror @ mirror).reverses_time
    assert (turn @ mirror).reverses_time
    assert mirror.words == "mirror perpendicular to x, with time reversal"


@pytest.mark.parametrize("group", STANDARD, ids=setting_of)
def test_product_of_operations_is_that_of_their_matrices(group):
    """`@` multiplies exactly as Cartesian matrices do, the right-hand operation first."""
    first, last = group.operations[0], group.operations[-1]
    generator = (group.generators or (first,))[-1]

    assert np.allclose((generator @ last).cartesian(), generator.cartesian() @ last.cartesian(), atol=1e-14)


def test_product_and_determinant_agree_with_numpy():
    """The integer product and determinant are those of numpy on a matrix without symmetry."""
    one, other = ((1, 2, 3), (0, 1, 4), (5, 6, 0)), ((2, 0, 1), (1, 3, 0), (0, 1, 1))

    assert product(one, other) == tuple(map(tuple, (np.array(one) @ np.array(other)).tolist()))
    assert determinant(one) == round(np.linalg.det(np.array(one)))


@pytest.mark.parametrize(
    ("direction", "basis", "words"),
    [
        ((1, 0, 0), Basis.CARTESIAN, "x"),
        ((0, 1, 0), Basis.CARTESIAN, "y"),
        ((0, 1, 0), Basis.HEXAGONAL, "[010]"),
        ((1, 2, 0), Basis.HEXAGONAL, "y"),
        ((0, 0, 1), Basis.HEXAGONAL, "z"),
        ((1, -1, 0), Basis.CARTESIAN, "[1-10]"),
        (None, Basis.CARTESIAN, ""),
    ],
)
def test_direction_in_words(direction, basis, words):
    """Cartesian axes go by their letters: in the hexagonal basis y lies along [120] and b along [010]."""
    assert direction_in_words(direction, basis) == words


def test_symbol_and_axis_hold_in_a_skew_basis():
    """A 3-fold turn is recognised, with its direction, in rhombohedral axes, where it permutes the basis vectors."""
    turn = ((0, 0, 1), (1, 0, 0), (0, 1, 0))

    assert (symbol_of(turn), axis_of(turn)) == ("3", (1, 1, 1))
