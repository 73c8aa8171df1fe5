"""Exact elimination over the rationals, by python-flint."""

from __future__ import annotations

from dataclasses import dataclass
from math import gcd
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence


@dataclass(frozen=True, slots=True)
class ReducedRows:
    """Reduced row echelon form of an integer matrix, without its zero rows."""

    pivots: tuple[int, ...]
    """Column of the leading entry of each row, increasing."""
    rows: tuple[tuple[int, ...], ...]
    """Numerators; the entry at a pivot equals `denominator`."""
    denominator: int
    """Positive common denominator of all entries."""


def reduced_rows(matrix: Sequence[Sequence[int]]) -> ReducedRows:
    """Return the reduced row echelon form of an integer matrix over the rationals.

    Examples
    --------
    >>> reduced_rows([[2, 3, 0], [2, 3, 4]])
    ReducedRows(pivots=(0, 2), rows=((2, 3, 0), (0, 0, 2)), denominator=2)
    """
    from flint import fmpz_mat

    if not matrix or not matrix[0]:
        return ReducedRows((), (), 1)
    form, denominator, rank = fmpz_mat([list(row) for row in matrix]).rref()
    whole = [[int(entry) for entry in row] for row in form.tolist()[:rank]]
    divisor = gcd(int(denominator), *(entry for row in whole for entry in row))
    divisor = divisor if int(denominator) > 0 else -divisor
    rows = tuple(tuple(entry // divisor for entry in row) for row in whole)
    pivots = tuple(next(column for column, entry in enumerate(row) if entry) for row in rows)
    return ReducedRows(pivots, rows, int(denominator) // divisor)


def null_space(matrix: Sequence[Sequence[int]], columns: int) -> tuple[tuple[int, ...], ...]:
    """Return integer vectors that span ``{v : matrix v = 0}``, one for each column without a pivot.

    Examples
    --------
    >>> null_space([[1, 1, 0]], 3)
    ((-1, 1, 0), (0, 0, 1))
    """
    reduced = reduced_rows(matrix)
    taken = set(reduced.pivots)
    vectors = []
    for free in range(columns):
        if free in taken:
            continue
        vector = [0] * columns
        vector[free] = reduced.denominator
        for pivot, row in zip(reduced.pivots, reduced.rows, strict=True):
            vector[pivot] = -row[free]
        vectors.append(primitive(vector))
    return tuple(vectors)


def primitive(vector: Sequence[int]) -> tuple[int, ...]:
    """Return the vector divided by the greatest common divisor of its entries.

    >>> primitive([4, -6, 0])
    (2, -3, 0)
    """
    divisor = gcd(*vector)
    return tuple(entry // divisor for entry in vector) if divisor > 1 else tuple(vector)
