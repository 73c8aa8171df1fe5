"""Numbers from the lines of a file, with the line named when one is missing or no number."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Sequence


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
        msg = f"{what}: {len(values)} numbers in {line.strip()!r}"
        raise StructureError(
            msg, where=f"{source}, line {number}", expected=f"{count} numbers", hint="the file may be cut off"
        )
    return values


def finite_number(word: str, source: str, number: int, what: str) -> float:
    """Return a word as a finite number; Fortran exponents (``1.0D-3``) are understood.

    Raises
    ------
    StructureError
        If it is none.
    """
    try:
        value = float(word.replace("D", "E").replace("d", "e"))
    except ValueError:
        msg = f"{what}: {word!r} is no number"
        raise StructureError(msg, where=f"{source}, line {number}") from None
    if not math.isfinite(value):
        msg = f"{what}: {word!r} is not finite"
        raise StructureError(msg, where=f"{source}, line {number}")
    return value


def line_at(lines: Sequence[str], index: int, source: str, what: str) -> str:
    """Return a line, or say that the file ends before it.

    Raises
    ------
    StructureError
        If the file has fewer lines.
    """
    if index >= len(lines):
        msg = f"the file ends after line {len(lines)}, before {what}"
        raise StructureError(msg, where=source, hint="the file may be cut off")
    return lines[index]
