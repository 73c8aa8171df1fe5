"""Letters in which every operation of a class is a permutation with phases.

In a rectangular basis the letters are the unit vectors x, y, z. In the hexagonal basis they are x + iy, x - iy and z:
a turn about z multiplies a word by a root of unity, a two-fold axis across it or a mirror along it swaps the first two.
"""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING

from tensorsym.exact.orbits import Move
from tensorsym.groups.operations import Basis, Operation
from tensorsym.tensors.words import indices_of, word_of

if TYPE_CHECKING:
    from tensorsym.tensors.kind import TensorKind

MODULUS = {Basis.CARTESIAN: 2, Basis.HEXAGONAL: 6}
"""Number of phases that a full turn is divided into."""

_SIXTHS = {(1, 0): 0, (1, 1): 1, (0, 1): 2, (-1, 0): 3, (-1, -1): 4, (0, -1): 5}
"""Direction of a short hexagonal lattice vector, in sixths of a turn from x."""


def letter_action(operation: Operation) -> tuple[tuple[int, int, int], tuple[int, int, int]]:
    """Return the image of each letter and the phase it gathers, in units of a turn divided by `MODULUS`.

    >>> from tensorsym.groups.symbols import point_group_named
    >>> three, two = point_group_named("32").generators
    >>> letter_action(three), letter_action(two)
    (((0, 1, 2), (4, 2, 0)), ((1, 0, 2), (0, 0, 3)))
    """
    matrix = operation.matrix
    if operation.basis is Basis.CARTESIAN:
        columns = list(zip(*matrix, strict=True))
        images = tuple(next(row for row in range(3) if column[row]) for column in columns)
        phases = tuple((1 - column[image]) // 2 for column, image in zip(columns, images, strict=True))
        return images, phases  # type: ignore[return-value]
    sixths = _SIXTHS[matrix[0][0], matrix[1][0]]
    phase_z = 0 if matrix[2][2] > 0 else 3
    if operation.determinant * matrix[2][2] > 0:
        return (0, 1, 2), (-sixths % 6, sixths, phase_z)
    return (1, 0, 2), (sixths, -sixths % 6, phase_z)


def operation_move(operation: Operation, kind: TensorKind) -> Move:
    """Return how an operation moves the letter words of a kind, parity and time reversal included."""
    images, phases = letter_action(operation)
    return _word_move(images, phases, kind.rank, _start(operation, kind))


def plane_move(operation: Operation, kind: TensorKind, plane: int) -> Move:
    """Return the move of words of `plane` letters from the first two, the other letters of the kind being z."""
    images, phases = letter_action(operation)
    start = _start(operation, kind) + (kind.rank - plane) * phases[2]
    return _word_move(images[:2], phases[:2], plane, start % MODULUS[operation.basis])


def _start(operation: Operation, kind: TensorKind) -> int:
    """Return the phase of a scalar with the parity and time behaviour of the kind."""
    negative = (kind.axial and operation.determinant < 0) != (kind.time_odd and operation.reverses_time)
    return MODULUS[operation.basis] // 2 if negative else 0


@lru_cache(maxsize=512)
def index_moves(kind: TensorKind, basis: Basis) -> tuple[Move, ...]:
    """Return how the index symmetry moves the words of a kind, with phases as `MODULUS` counts them."""
    half = MODULUS[basis] // 2
    size = 3**kind.rank
    spelled = [indices_of(word, kind.rank) for word in range(size)]
    return tuple(
        Move([word_of([indices[place] for place in permutation]) for indices in spelled], [half * (sign < 0)] * size)
        for permutation, sign in kind.permutations
    )


@lru_cache(maxsize=2048)
def _word_move(images: tuple[int, ...], phases: tuple[int, ...], rank: int, start: int) -> Move:
    """Extend the action on letters to words; phases are left unreduced sums, taken modulo by the orbit search."""
    words, gathered = [0], [start]
    for _ in range(rank):
        words = [len(images) * word + image for word in words for image in images]
        gathered = [so_far + phase for so_far in gathered for phase in phases]
    return Move(words, gathered)
