"""A bare matrix of numbers in text."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.catalog.properties import property_named
from tensorsym.errors import ShapeError, TensorFileError, UsageError
from tensorsym.outputs.record import TensorRecord
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix, matrix_shape

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.catalog.properties import Property

MOST_NUMBERS = 3**10


def read_bare_matrix(
    text: str, source: str, *, property: str | None, order: str | None, unit: str | None, atoms: int
) -> tuple[TensorRecord, ...]:
    """Return the tensor that a bare matrix writes.

    Parameters
    ----------
    text : str
        Rows of numbers separated by blanks or commas; ``#`` begins a comment.
    source : str
        File, for messages.
    property : str
        Name of the property.
    order : str, optional
        Order of the index pairs.
    unit : str, optional
        Unit of the numbers.
    atoms : int
        Number of atoms of the structure, for properties of a site: that many matrices after one another.

    Raises
    ------
    TensorFileError
        If a word is no number.
    ShapeError
        If the numbers do not fit the property.
    UsageError
        If no property is named.
    """
    if property is None:
        msg = f"{source} is a bare matrix"
        raise UsageError(
            msg, expected="the name of its property", hint="--property NAME, and --order for matrix notation"
        )
    row = property_named(property)
    words = [
        (number, word)
        for number, line in enumerate(text.splitlines(), 1)
        for word in line.split("#")[0].replace(",", " ").split()
    ]
    values = np.array([_number(word, number, source) for number, word in words])
    tensor, per_site = _shaped(values, row, order or VOIGT_ORDER, atoms, source)
    return (
        TensorRecord(
            row.name,
            "",
            tensor,
            unit or row.unit,
            order=order or VOIGT_ORDER,
            digits=_last_place([w for _, w in words]),
            per_site=per_site,
        ),
    )


def _number(word: str, number: int, source: str) -> float:
    try:
        value = float(word.replace("D", "E").replace("d", "e"))
    except ValueError:
        msg = f"{word!r} is no number"
        raise TensorFileError(msg, where=f"{source}, line {number}") from None
    if not math.isfinite(value):
        msg = f"{word!r} is not finite"
        raise TensorFileError(msg, where=f"{source}, line {number}")
    return value


def _shaped(
    values: NDArray[np.float64], row: Property, order: str, atoms: int, source: str
) -> tuple[NDArray[np.float64], bool]:
    full, matrix = (3,) * row.kind.rank, matrix_shape(row.kind)
    size, matrix_size = 3**row.kind.rank, int(np.prod(matrix))
    if row.site and len(values) == atoms * size and atoms > 1:
        return values.reshape(atoms, *full), True
    if len(values) == size:
        return values.reshape(full), False
    if len(values) == matrix_size:
        return from_matrix(values.reshape(matrix), row.kind, row.factors, order), False
    msg = f"{len(values)} numbers do not fit {row.name}"
    expected = f"{matrix_size} in matrix notation {matrix}, or {size}" if matrix != full else f"{size}"
    raise ShapeError(msg, where=source, expected=expected)


def _last_place(words: list[str]) -> float | None:
    places = [len(match[1]) for word in words if (match := re.fullmatch(r"[-+]?\d*\.(\d+)", word))]
    return 10.0 ** -min(places) if places else None
