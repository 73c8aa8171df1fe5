"""Arrays of numbers as tensors of a property: full, in matrix notation, or one an atom."""

from __future__ import annotations

import math
from itertools import groupby
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.errors import ShapeError
from tensorsym.tensors.notation import from_matrix, matrix_shape

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from tensorsym.catalog.properties import Property


def shaped(
    values: NDArray[np.float64], row: Property, order: str, atoms: int, source: str
) -> tuple[NDArray[np.float64], bool, bool]:
    """Return an array as full tensors.

    Parameters
    ----------
    values : ndarray
        Numbers in rows, as a file without keys holds them: in matrix notation, in full with any grouping of the
        indices into rows, the matrix with rows and columns exchanged (6 x 3 for 3 x 6), or one tensor an atom.
    row : Property
        What they are.
    order : str
        Order of the index pairs.
    atoms : int
        Number of atoms of the structure, 0 if not known.
    source : str
        File, for the message.

    Returns
    -------
    values : ndarray of shape (3,) * rank or (atoms, 3, ..., 3)
        The tensors.
    per_site : bool
        True for one tensor an atom.
    in_pairs : bool
        True if the numbers were in matrix notation.

    Raises
    ------
    ShapeError
        If the numbers do not fit.
    """
    rank, matrix = row.kind.rank, matrix_shape(row.kind)
    one, size, matrix_size = (3,) * rank, 3**rank, math.prod(matrix)
    grouped = _groups_indices(values.shape)
    if row.site and atoms > 1 and values.size == atoms * size and grouped:
        return values.reshape(atoms, *one), True, False
    if values.size == size and grouped and values.shape != matrix:
        return values.reshape(one), False, False
    if values.size == matrix_size:
        if values.shape == matrix or max(values.shape, default=1) == values.size:
            return from_matrix(values.reshape(matrix), row.kind, row.factors, order), False, matrix != one
        if values.shape == matrix[::-1]:
            return from_matrix(values.T.copy(), row.kind, row.factors, order), False, matrix != one
    if row.site and atoms > 1 and values.size == atoms * matrix_size and values.shape[-1] == matrix[-1]:
        blocks = values.reshape(atoms, *matrix)
        return np.array([from_matrix(block, row.kind, row.factors, order) for block in blocks]), True, matrix != one
    msg = f"{_words(values.shape)} do not fit {row.name}"
    raise ShapeError(msg, where=source, expected=_expected(row, matrix, atoms))


def _groups_indices(shape: Sequence[int]) -> bool:
    """Tell whether the last dimension holds whole indices: 3, 9, 27, ... numbers a row, or all in one row."""
    if len(shape) < 2:
        return True
    last = shape[-1]
    while last > 1 and last % 3 == 0:
        last //= 3
    return last == 1


def _words(shape: Sequence[int]) -> str:
    if len(shape) < 2:
        return f"{math.prod(shape)} numbers"
    return f"numbers in {' x '.join(map(str, shape))}"


def _expected(row: Property, matrix: Sequence[int], atoms: int) -> str:
    rank = row.kind.rank
    full = f"{3**rank} numbers in full"
    if rank == 2:
        full = "3 x 3 numbers"
    if tuple(matrix) != (3,) * rank:
        full = f"{' x '.join(map(str, matrix))} numbers in matrix notation, or {full}"
    if row.site and atoms > 1:
        full += f", or as many for each of the {atoms} atoms"
    return full


def rectangular(
    rows: Sequence[Sequence[float]], row: Property, source: str, lines: Sequence[int]
) -> NDArray[np.float64]:
    """Return rows of equal length as a matrix; rows of unequal length make one flat list if they end a full tensor.

    Raises
    ------
    ShapeError
        If the rows differ and do not make a full tensor; the first that differs is named.
    """
    lengths = [len(list(group)) for _, group in groupby(rows, key=len)]
    if len(lengths) == 1:
        return np.array(rows, dtype=float)
    flat = np.array([number for numbers in rows for number in numbers])
    if flat.size == 3**row.kind.rank:
        return flat
    msg = f"{len(rows[lengths[0]])} numbers in a row where the first row has {len(rows[0])}"
    raise ShapeError(msg, where=f"{source}, line {lines[lengths[0]]}")
