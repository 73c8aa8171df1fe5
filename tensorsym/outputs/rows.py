"""Rows of printed numbers: taken from numbered lines, with their last printed place and the line of every fault."""

from __future__ import annotations

import math
import re
from itertools import chain
from statistics import median_high
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from tensorsym.errors import OutputFileError

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator, Sequence

    from numpy.typing import NDArray

CUT_OFF = "the run may not have finished, or the file may be cut off"

LARGEST = 1e100
"""Numbers of this size and above are refused: their squares no longer fit."""

_NUMBER = re.compile(r"[-+]?\d+\.\d*(?:[EeDd][-+]?\d+)?|[-+]?\.\d+(?:[EeDd][-+]?\d+)?")
_NO_NUMBER = re.compile(r"\*{2,}|(?<![A-Za-z])(?:nan|[-+]?inf(?:inity)?)(?![A-Za-z])", re.IGNORECASE)


class Table(NamedTuple):
    """Rows of numbers as printed."""

    values: NDArray[np.float64]
    """Shape (rows, columns)."""
    digits: float
    """Size of one unit in the last printed place, the coarsest of all numbers."""
    line: int
    """Line of the first row, counted from 1."""


class Lines:
    """The lines of a file in order, with the number of the last one taken.

    Parameters
    ----------
    lines : iterable of str
        The lines without their ends.
    source : str
        File, for messages.
    """

    def __init__(self, lines: Iterable[str], source: str) -> None:
        self._rest: Iterator[str] = iter(lines)
        self.source = source
        self.number = 0

    def __iter__(self) -> Iterator[str]:
        """Return itself: a loop goes on behind the last line taken."""
        return self

    def __next__(self) -> str:
        """Return the next line."""
        line = next(self._rest)
        self.number += 1
        return line

    def put_back(self, line: str) -> None:
        """Let the line taken last be the next one again."""
        self._rest = chain((line,), self._rest)
        self.number -= 1

    def table(self, rows: int, columns: int, what: str, most_skipped: int = 8) -> Table:
        """Return the next rows of numbers, with the rules and column heads before them skipped.

        Parameters
        ----------
        rows, columns : int
            How many numbers there must be; only words with a decimal point are numbers.
        what : str
            What they are, for the message.
        most_skipped : int
            How many lines before the first row are passed over.

        Raises
        ------
        OutputFileError
            If the table is cut off or a word is no finite number; the line is named.
        """
        begun = self.number
        found: list[list[str]] = []
        for line in self:
            words = _NUMBER.findall(line)
            overflown = _NO_NUMBER.search(line)
            if not found and not words and overflown is None and self.number - begun <= most_skipped:
                continue
            if len(words) != columns or overflown is not None or not all(map(is_usable, _values(words))):
                raise self._no_row(line, columns, what, found)
            found.append(words)
            if len(found) == rows:
                return Table(numbers_in_words(found), last_place(found), self.number - rows + 1)
        msg = f"{what}, begun in line {begun}, is cut off after {len(found)} of {rows} rows"
        raise OutputFileError(msg, where=f"{self.source}, line {self.number}", hint=CUT_OFF)

    def skip_to(self, pattern: str, what: str, most_skipped: int = 8) -> str:
        """Take lines up to the one in which a pattern is found, and return that one.

        Raises
        ------
        OutputFileError
            If it is not among the next `most_skipped` lines.
        """
        begun = self.number
        for line in self:
            if re.search(pattern, line):
                return line
            if self.number - begun >= most_skipped:
                break
        msg = f"{what}: the next part is missing"
        raise OutputFileError(msg, where=f"{self.source}, line {self.number}", hint=CUT_OFF)

    def cut_off(self, what: str, found: int) -> OutputFileError:
        """Return the error for a part that ends before it is whole."""
        msg = f"{what}: cut off after {found} rows"
        return OutputFileError(msg, where=f"{self.source}, line {self.number}", hint=CUT_OFF)

    def _no_row(self, line: str, columns: int, what: str, found: Sequence[object]) -> OutputFileError:
        cause = _NO_NUMBER.search(line)
        msg = f"{what}: {line.strip()[:70]!r} is no row of {columns} numbers"
        hint = CUT_OFF if found else None
        if cause is None and len(_NUMBER.findall(line)) == columns:
            hint = "a number is too large"
        if cause is not None:
            hint = "the number did not fit its columns" if "*" in cause[0] else "the calculation has failed"
        return OutputFileError(msg, where=f"{self.source}, line {self.number}", hint=hint)


def is_usable(number: float) -> bool:
    """Tell a finite number that is not absurdly large.

    >>> is_usable(-1e9), is_usable(1e300), is_usable(float("nan"))
    (True, False, False)
    """
    return abs(number) < LARGEST


def numbers_in_words(rows: Sequence[Sequence[str]]) -> NDArray[np.float64]:
    """Return words as numbers; Fortran exponents (``1.0D-3``) are understood.

    >>> numbers_in_words([["1.5", "-2.0D-1"]]).tolist()
    [[1.5, -0.2]]
    """
    return np.array([_values(row) for row in rows])


def _values(words: Iterable[str]) -> list[float]:
    return [float(word.replace("D", "E").replace("d", "e")) for word in words]


def last_place(rows: Iterable[Iterable[str]]) -> float:
    """Return the size of one unit in the last printed place, the coarsest of all words that have decimals.

    A zero printed with an exponent says nothing, and words without decimals neither.

    >>> last_place([["1.250", "-3.5E+02"]])
    10.0
    >>> last_place([["7", "8"]])
    0.0
    """
    places = []
    for row in rows:
        for word in row:
            digits, _, exponent = word.upper().replace("D", "E").partition("E")
            decimals = digits.partition(".")[2]
            if decimals and (not exponent or float(digits)):
                places.append(int(exponent or 0) - len(decimals))
    return math.pow(10.0, max(places)) if places else 0.0


def typical_place(words: Iterable[str]) -> float | None:
    """Return the size of one unit in the last place of numbers that somebody typed or a program shortened.

    Trailing zeros may have been dropped, so the middle of the last places is taken, of two the coarser; where exponents
    are used the coarsest, since such numbers share their significant digits. Zeros and whole numbers say nothing.

    >>> typical_place(["0.5", "0.123456", "-0.123461", "0"])
    1e-06
    >>> typical_place(["2.31", "-0.727"])
    0.01
    >>> typical_place(["1.25e2", "3.14e-1"])
    1.0
    """
    places, exponents = [], False
    for word in words:
        digits, _, exponent = word.upper().replace("D", "E").partition("E")
        decimals = digits.partition(".")[2]
        if decimals and float(digits):
            places.append(int(exponent or 0) - len(decimals))
            exponents |= bool(exponent)
    if not places:
        return None
    return math.pow(10.0, max(places) if exponents else median_high(places))
