"""A bare matrix of numbers in text: rows separated by line ends, numbers by blanks or commas."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from tensorsym.errors import ShapeError, TensorFileError, UsageError
from tensorsym.outputs.record import TensorRecord
from tensorsym.outputs.rows import is_usable, typical_place
from tensorsym.outputs.shapes import rectangular, shaped
from tensorsym.outputs.units import property_in_unit
from tensorsym.tensors.notation import VOIGT_ORDER

if TYPE_CHECKING:
    from tensorsym.outputs.content import Content

MOST_NUMBERS = 1_000_000
"""More numbers than this are no tensor that can be checked."""

_SPACING = re.compile(r"[\s,;\[\](){}]+")
_NUMBER = re.compile(r"[-+]?(?:\d+\.?\d*|\.\d+)(?:[EeDd][-+]?\d+)?")


def read_bare_matrix(
    content: Content, *, property: str | None, order: str | None, unit: str | None, atoms: int
) -> tuple[TensorRecord, ...]:
    """Return the tensor that a bare matrix writes.

    Parameters
    ----------
    content : Content
        Rows of numbers separated by blanks, commas or brackets; ``#`` begins a comment.
    property : str
        Name of the property.
    order : str, optional
        Order of the index pairs, the handbook's when absent.
    unit : str, optional
        Unit of the numbers, that of the catalogue when absent.
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
        msg = f"{content.source} says not what it holds"
        raise UsageError(
            msg, expected="the name of its property", hint="--property NAME, and --order for matrix notation"
        )
    row, told_unit, notes = property_in_unit(property, unit)
    words, lines = _words(content)
    values = rectangular(
        [[_finite(word, line, content.source) for word in found] for found, line in zip(words, lines, strict=True)],
        row,
        content.source,
        lines,
    )
    tensor, per_site, in_pairs = shaped(values, row, order or VOIGT_ORDER, atoms, content.source)
    record = TensorRecord(
        row.name,
        "",
        tensor,
        told_unit,
        order=(order or VOIGT_ORDER) if in_pairs else "",
        digits=typical_place(word for found in words for word in found),
        line=lines[0],
        per_site=per_site,
        notes=notes,
    )
    return (record,)


def _words(content: Content) -> tuple[list[list[str]], list[int]]:
    """Return the words of the rows that hold any, and their lines."""
    rows: list[list[str]] = []
    lines: list[int] = []
    count = 0
    for number, line in enumerate(content.lines(), 1):
        words = [word for word in _SPACING.split(line.lstrip("\ufeff").partition("#")[0]) if word]
        if words and not rows and not _NUMBER.fullmatch(words[0]):
            _finite(words[0], number, content.source)
        count += len(words)
        if count > MOST_NUMBERS:
            msg = f"more than {MOST_NUMBERS} numbers"
            raise ShapeError(msg, where=f"{content.source}, line {number}")
        if words:
            rows.append(words)
            lines.append(number)
    if not rows:
        raise TensorFileError("holds no numbers", where=content.source)
    return rows, lines


def _finite(word: str, number: int, source: str) -> float:
    where = f"{source}, line {number}"
    if not _NUMBER.fullmatch(word):
        if re.fullmatch(r"[-+]?(nan|inf(inity)?)", word, re.IGNORECASE):
            msg = f"{word!r} is not finite"
            raise TensorFileError(msg, where=where)
        msg = f"{word[:40]!r} is no number"
        raise TensorFileError(msg, where=where)
    value = float(word.upper().replace("D", "E"))
    if not is_usable(value):
        msg = f"{word[:40]!r} is too large"
        raise TensorFileError(msg, where=where)
    return value
