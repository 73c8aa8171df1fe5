"""Numbers from the lines of a file, with the line named when one is missing or no number."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Sequence

CUT_OFF = "the file may be cut off"

_NUMBER = re.compile(r"[+-]?(?:\d+\.?\d*|\.\d+)(?:[EeDd][+-]?\d+)?")
_NOT_FINITE = re.compile(r"[+-]?(?:nan|inf(?:inity)?)|\*+", re.IGNORECASE)


def numbers_in(line: str, count: int, source: str, number: int, what: str) -> list[float]:
    """Return the first `count` numbers of a line.

    Parameters
    ----------
    line : str
        The line.
    count : int
        How many numbers it must begin with.
    source : str
        File, for the message.
    number : int
        Line number counted from 1, for the message.
    what : str
        What the numbers are, for the message.

    Raises
    ------
    StructureError
        If there are fewer, or one is no finite number.
    """
    words = line.split()[:count]
    values = [finite_number(word, source, number, what) for word in words]
    if len(values) < count:
        msg = f"{what}: {len(values)} numbers in {line.strip()[:60]!r}"
        raise StructureError(msg, where=f"{source}, line {number}", expected=f"{count} numbers", hint=CUT_OFF)
    return values


def finite_number(word: str, source: str, number: int, what: str) -> float:
    """Return a word as a finite number; Fortran exponents (``1.0D-3``) are understood.

    Raises
    ------
    StructureError
        If it is none.

    Examples
    --------
    >>> finite_number("1.5D-1", "", 1, "length")
    0.15
    """
    where = f"{source}, line {number}" if number else source
    if _NUMBER.fullmatch(word):
        value = float(word.upper().replace("D", "E"))
        if math.isfinite(value):
            return value
    if _NUMBER.fullmatch(word) or _NOT_FINITE.fullmatch(word):
        msg = f"{what}: {word[:40]!r} is not finite"
        raise StructureError(msg, where=where)
    msg = f"{what}: {word[:40]!r} is no number"
    raise StructureError(msg, where=where)


def whole_number(word: str, source: str, number: int, what: str) -> int:
    """Return a word as a whole number that is not negative.

    Raises
    ------
    StructureError
        If it is none.
    """
    if not re.fullmatch(r"\+?\d{1,9}", word):
        msg = f"{what}: {word[:40]!r} is no whole number"
        raise StructureError(msg, where=f"{source}, line {number}" if number else source)
    return int(word)


def line_at(lines: Sequence[str], index: int, source: str, what: str) -> str:
    """Return a line, or say that the file ends before it.

    Raises
    ------
    StructureError
        If the file has fewer lines.
    """
    if index >= len(lines):
        msg = f"the file ends after line {len(lines)}, before {what}"
        raise StructureError(msg, where=source, hint=CUT_OFF)
    return lines[index]


def line_number(text: str, place: int) -> int:
    """Return the number, counted from 1, of the line in which a place of a text lies."""
    return text.count("\n", 0, place) + 1


def vectors_at(
    lines: Sequence[str], start: int, count: int, source: str, what: str, skip: int = 0
) -> list[list[float]]:
    """Return three numbers from each of `count` lines, the first `skip` words of each left out.

    Raises
    ------
    StructureError
        If the file ends before, or a line does not hold them.
    """
    rows = []
    for row in range(count):
        told = f"{what} {row + 1} of {count}"
        line = line_at(lines, start + row, source, told)
        words = line.split(maxsplit=skip)
        rest = words[skip] if len(words) > skip else ""
        rows.append(numbers_in(rest, 3, source, start + row + 1, told))
    return rows


def chosen(items: Sequence[int], index: int | None, source: str, what: str, notes: list[str]) -> int:
    """Return the item asked for, the first when none is asked for, with a note if there are more.

    Raises
    ------
    StructureError
        If there is no such item.
    """
    try:
        item = items[index or 0]
    except IndexError:
        msg = f"there is no {what} {index} among {len(items)}" if items else f"holds no {what}"
        raise StructureError(msg, where=source, hint=CUT_OFF if not items else None) from None
    if index is None and len(items) > 1:
        notes.append(f"the file holds {len(items)} of these: the first {what} is used")
    return item
