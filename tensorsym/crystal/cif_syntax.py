"""The syntax of CIF 1.1: data blocks of named items and loops, with the line of each.

Source: Hall, Allen and Brown, Acta Cryst. A47, 655 (1991); International Tables for Crystallography, vol. G (2006),
chapter 2.2, from memory.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, NamedTuple

from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

MOST_VALUES = 5_000_000
"""Largest number of values in a file."""

_TOKEN = re.compile(
    r"""
    (?P<space>\s+ | \#[^\n]*)
    | (?P<text>(?<![^\n]);(?P<inside>.*?)\n;(?=\s|\Z))
    | (?P<quoted>'(?P<single>(?:[^'\n]|'(?=\S))*)'(?=\s|\Z) | "(?P<double>(?:[^"\n]|"(?=\S))*)"(?=\s|\Z))
    | (?P<word>\S+)
    """,
    re.VERBOSE | re.DOTALL,
)


class Value(NamedTuple):
    """One value of an item."""

    text: str
    """The text without its quotes; empty for ``.`` and ``?``."""
    line: int
    """Line in the file, counted from 1."""


@dataclass(slots=True)
class Block:
    """One data block."""

    name: str
    """Name behind ``data_``."""
    line: int
    """Line on which it begins."""
    columns: dict[str, list[Value]] = field(default_factory=dict)
    """Values of every item by its name in lower case, dots written as underscores; one value unless it is looped."""

    def first(self, *names: str) -> Value | None:
        """Return the first value that is there under one of the names."""
        for name in names:
            for value in self.columns.get(name, ()):
                if value.text:
                    return value
        return None

    def column(self, *names: str) -> list[Value]:
        """Return all values under the first of the names that is there."""
        return next((self.columns[name] for name in names if name in self.columns), [])


class _Token(NamedTuple):
    kind: str
    text: str
    line: int


def cif_blocks(text: str, source: str) -> list[Block]:
    """Return the data blocks of a CIF.

    Raises
    ------
    StructureError
        If a value has no name, a name no value, or a loop a row that is cut short.

    Examples
    --------
    >>> block = cif_blocks("data_a  _cell_length_a 5.4(1) loop_ _atom_site_label Si1 'O 2'", "")[0]
    >>> block.first("_cell_length_a").text, [value.text for value in block.column("_atom_site_label")]
    ('5.4(1)', ['Si1', 'O 2'])
    """
    blocks: list[Block] = []
    tokens = list(_tokens(text, source))
    place = 0
    while place < len(tokens):
        kind, word, line = tokens[place]
        place += 1
        if kind == "data":
            blocks.append(Block(word, line))
        elif kind == "save":
            continue
        elif not blocks:
            msg = f"{word!r} stands before any data_ block"
            raise StructureError(msg, where=f"{source}, line {line}", expected="a CIF that begins with data_")
        elif kind == "name":
            if place == len(tokens) or tokens[place].kind != "value":
                msg = f"{word} has no value"
                raise StructureError(msg, where=f"{source}, line {line}", hint="the file may be cut off")
            blocks[-1].columns[word] = [Value(*tokens[place][1:])]
            place += 1
        elif kind == "loop":
            place = _read_loop(blocks[-1], tokens, place, line, source)
        else:
            msg = f"the value {word[:40]!r} belongs to no item"
            raise StructureError(msg, where=f"{source}, line {line}", hint="quote values that hold blanks")
    return blocks


def _read_loop(block: Block, tokens: Sequence[_Token], place: int, line: int, source: str) -> int:
    names = []
    while place < len(tokens) and tokens[place].kind == "name":
        names.append(tokens[place].text)
        place += 1
    start = place
    while place < len(tokens) and tokens[place].kind == "value":
        place += 1
    values = [Value(token.text, token.line) for token in tokens[start:place]]
    if not names or len(values) % len(names):
        msg = f"the loop has {len(values)} values for {len(names)} items"
        last = values[-1].line if values else line
        raise StructureError(
            msg, where=f"{source}, lines {line} to {last}", expected="whole rows", hint="the file may be cut off"
        )
    for number, name in enumerate(names):
        block.columns[name] = values[number :: len(names)]
    return place


def _tokens(text: str, source: str) -> Iterator[_Token]:
    line, count = 1, 0
    for found in _TOKEN.finditer(text):
        if found["space"] is None:
            count += 1
            if count > MOST_VALUES:
                msg = f"holds more than {MOST_VALUES} values"
                raise StructureError(msg, where=source)
            yield _token(found, line)
        line += found[0].count("\n")


def _token(found: re.Match[str], line: int) -> _Token:
    if found["text"] is not None:
        return _Token("value", found["inside"].strip(), line)
    if found["quoted"] is not None:
        return _Token("value", found["single"] if found["single"] is not None else found["double"], line)
    word = found["word"]
    folded = word.lower()
    if word.startswith("_"):
        return _Token("name", folded.replace(".", "_"), line)
    for start, kind in (
        ("data_", "data"),
        ("loop_", "loop"),
        ("save_", "save"),
        ("global_", "save"),
        ("stop_", "save"),
    ):
        if folded.startswith(start):
            return _Token(kind, word[len(start) :], line)
    return _Token("value", "" if word in (".", "?") else word, line)
