"""Reading the cited tables of this folder.

A table of forms has a head of ``key: value`` lines (`source` is required) and blocks. A block begins with
``groups SETTING ...`` and holds either the matrix as a handbook prints it, entries without blanks inside, or lines
``independent NAME ...`` and ``NAME = NAME = expression``. Expressions are linear: ``d11``, ``-2d22``, ``(c11-c12)/2``.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from fractions import Fraction
from pathlib import Path

FOLDER = Path(__file__).parent


@dataclass(frozen=True, eq=False)
class Form:
    """One form of one table, in one setting."""

    table: str
    """Stem of the file."""
    setting: str
    """Setting of the class."""
    head: dict[str, str]
    """Head of the table: source, law, regime, equations, symbol."""
    entries: dict[str, dict[str, Fraction]] = field(default_factory=dict)
    """Digits of every component that does not vanish, with its expression."""

    def __repr__(self):
        """Return table and setting, the name of the case."""
        return f"{self.table}-{self.setting}"

    @property
    def symbols(self):
        """Independent components, in the order of their first appearance."""
        return list(dict.fromkeys(name for terms in self.entries.values() for name in terms))

    @property
    def equations(self):
        """Index equations beyond the law."""
        return tuple(text.strip() for text in self.head.get("equations", "").split(";") if text.strip())


def forms(table):
    """Return all forms of a table, one for each setting of each block."""
    head, blocks = _blocks((FOLDER / "forms" / f"{table}.txt").read_text(encoding="utf-8"))
    assert head["source"], "every table names its source"
    return [Form(table, setting, head, _entries(lines)) for settings, lines in blocks for setting in settings]


def all_tables():
    """Return the stems of all tables of forms."""
    return sorted(path.stem for path in (FOLDER / "forms").glob("*.txt"))


def rows(name):
    """Return the rows of a plain table as dictionaries, its first line naming the columns."""
    lines = [line for line in (FOLDER / name).read_text(encoding="utf-8").splitlines() if line and line[0] != "#"]
    columns = lines[0].split()
    return [dict(zip(columns, line.split(), strict=True)) for line in lines[1:]]


def linear(text):
    """Return a linear expression as name -> coefficient; empty for ``0``.

    >>> linear("(c11-c12)/2")
    {'c11': Fraction(1, 2), 'c12': Fraction(-1, 2)}
    """
    if text == "0":
        return {}
    whole = re.fullmatch(r"([+-]?)(\d*)\((.+)\)(?:/(\d+))?", text)
    if whole:
        factor = Fraction(int(f"{whole[1]}{whole[2] or 1}"), int(whole[4] or 1))
        return {name: factor * value for name, value in linear(whole[3]).items()}
    terms = re.findall(r"([+-]?)(\d*)([A-Za-z]+\d+)(?:/(\d+))?", text)
    assert "".join(f"{s}{n}{name}{'/' + d if d else ''}" for s, n, name, d in terms) == text, f"cannot read {text!r}"
    return {name: Fraction(int(f"{sign}{number or 1}"), int(below or 1)) for sign, number, name, below in terms}


def _blocks(text):
    head, blocks = {}, []
    for line in text.splitlines():
        stripped = line.strip()
        if not stripped or stripped.startswith("#"):
            continue
        if stripped.startswith("groups "):
            blocks.append((stripped.split()[1:], []))
        elif blocks:
            blocks[-1][1].append(stripped)
        else:
            key, _, value = stripped.partition(":")
            head[key] = f"{head[key]} {value.strip()}" if key in head else value.strip()
    return head, blocks


def _entries(lines):
    if any("=" in line or line.startswith("independent") for line in lines):
        return _listed(lines)
    found = {}
    for row, line in enumerate(lines, start=1):
        for column, text in enumerate(line.split(), start=1):
            terms = linear(text)
            if terms:
                found[f"{row}{column}"] = terms
    return found


def _listed(lines):
    found = {}
    for line in lines:
        if line.startswith("independent"):
            found |= {_digits(name): {name: Fraction(1)} for name in line.split()[1:]}
        else:
            *names, expression = line.replace(" ", "").split("=")
            found |= {_digits(name): linear(expression) for name in names}
    return found


def _digits(name):
    return name.lstrip("abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ")
