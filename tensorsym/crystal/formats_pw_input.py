"""Input of pw.x of Quantum ESPRESSO (INPUT_PW, from memory)."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from tensorsym.crystal.numbers_in import finite_number, vectors_at, whole_number
from tensorsym.crystal.parts import StructureParts
from tensorsym.crystal.pw_lattices import cosines_in_order, lattice_of_index
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from numpy.typing import NDArray

BOHR = 0.529177210903
"""Bohr radius in Å (CODATA 2018)."""

_SYSTEM = re.compile(r"&system\b(.*?)^\s*(?:/|&end)", re.IGNORECASE | re.DOTALL | re.MULTILINE)
_SETTING = re.compile(r"([A-Za-z_]+(?:\(\s*\d+\s*\))?)\s*=\s*('[^']*'|\"[^\"]*\"|[^,\s]+)")


class Setting(NamedTuple):
    """One value of the name list."""

    value: str
    """The value without quotes."""
    line: int
    """Line in the file."""


def looks_like_pw_input(text: str) -> bool:
    """Tell an input of pw.x by its name list and its cards."""
    return bool(re.search(r"^\s*&system\b", text, re.IGNORECASE | re.MULTILINE)) and bool(
        re.search(r"^\s*(ATOMIC_POSITIONS|ATOMIC_SPECIES|CELL_PARAMETERS)", text, re.IGNORECASE | re.MULTILINE)
    )


def read_pw_input(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return the structure that an input of pw.x describes.

    Raises
    ------
    StructureError
        If a setting or a card is missing, or positions are given by space group.
    """
    if index not in (None, 0, -1):
        msg = f"there is no structure {index}: an input of pw.x holds one"
        raise StructureError(msg, where=source)
    plain = "\n".join(line.split("!")[0] for line in text.splitlines())
    lines = [line.split("#")[0] for line in plain.splitlines()]
    settings = _settings(plain, source)
    lattice, alat = _lattice(settings, lines, source)
    place, unit = _card(lines, "ATOMIC_POSITIONS", source)
    if unit == "crystal_sg":
        msg = "positions by space group (crystal_sg) are not read"
        raise StructureError(msg, where=f"{source}, line {place + 1}", hint="give the output of pw.x")
    count = whole_number(_setting(settings, "nat", source), source, settings["nat"].line, "nat")
    rows = np.array(vectors_at(lines, place + 1, count, source, "position", skip=1)).reshape(-1, 3)
    species = [lines[place + 1 + row].split()[0] for row in range(count)]
    factor = 1.0 if unit == "crystal" else _length(unit, alat, f"{source}, line {place + 1}")
    return StructureParts(
        "pw.x input", lattice, rows * factor, species, cartesian=unit != "crystal", notes=notes_on_labels(species),
    )  # fmt: skip


def notes_on_labels(species: Sequence[str]) -> tuple[str, ...]:
    """Return a note when labels tell atoms of one element apart, as pw.x does.

    >>> notes_on_labels(["Fe1", "Fe2", "O"])
    ('Fe1 and Fe2 are kept apart, as pw.x does',)
    """
    labels: dict[str, list[str]] = {}
    for label in dict.fromkeys(species):
        labels.setdefault(re.sub(r"[\d_\-].*", "", label), []).append(label)
    return tuple(f"{' and '.join(names)} are kept apart, as pw.x does" for names in labels.values() if len(names) > 1)


def _settings(plain: str, source: str) -> dict[str, Setting]:
    found = _SYSTEM.search(plain)
    if not found:
        raise StructureError("the name list &SYSTEM is not closed", where=source, hint="the file may be cut off")
    first = plain.count("\n", 0, found.start(1)) + 1
    return {
        re.sub(r"\s", "", item[1]).lower(): Setting(item[2].strip("'\""), first + found[1].count("\n", 0, item.start()))
        for item in _SETTING.finditer(found[1])
    }


def _setting(settings: Mapping[str, Setting], name: str, source: str) -> str:
    if name not in settings:
        msg = f"&SYSTEM holds no {name}"
        raise StructureError(msg, where=source)
    return settings[name].value


def _number(settings: Mapping[str, Setting], name: str, default: float, source: str) -> float:
    if name not in settings:
        return default
    return finite_number(settings[name].value, source, settings[name].line, name)


def _lattice(settings: Mapping[str, Setting], lines: Sequence[str], source: str) -> tuple[NDArray[np.float64], float]:
    """Return the lattice and the length alat, in Å."""
    text = _setting(settings, "ibrav", source)
    where = f"{source}, line {settings['ibrav'].line}"
    ibrav = int(finite_number(text, source, settings["ibrav"].line, "ibrav"))
    celldm = [_number(settings, f"celldm({number})", 0.0, source) for number in range(1, 7)]
    if celldm[0]:
        alat = celldm[0] * BOHR
        shape = [celldm[1] or 1.0, celldm[2] or 1.0, *celldm[3:]]
    else:
        alat = _number(settings, "a", 0.0, source)
        cosines = [_number(settings, name, 0.0, source) for name in ("cosab", "cosac", "cosbc")]
        ratios = [_number(settings, name, alat, source) / alat if alat else 1.0 for name in "bc"]
        shape = [*ratios, *cosines_in_order(ibrav, *cosines)]
    if ibrav:
        if not alat:
            raise StructureError("neither celldm(1) nor A is given", where=where)
        return lattice_of_index(ibrav, (alat, *shape), where), alat
    place, unit = _card(lines, "CELL_PARAMETERS", source)
    rows = np.array(vectors_at(lines, place + 1, 3, source, "lattice vector"))
    if not unit and not alat:
        return rows * BOHR, float(np.linalg.norm(rows[0])) * BOHR
    rows = rows * _length(unit or "alat", alat, f"{source}, line {place + 1}")
    return rows, alat or float(np.linalg.norm(rows[0]))


def _length(unit: str, alat: float, where: str) -> float:
    """Return a unit of length in Å."""
    lengths = {"": alat, "alat": alat, "bohr": BOHR, "angstrom": 1.0}
    if unit not in lengths:
        msg = f"{unit!r} is no unit of length"
        raise StructureError(msg, where=where, expected="alat, bohr, angstrom or crystal")
    if not lengths[unit]:
        raise StructureError("the unit alat is not given", where=where, expected="celldm(1) or A in &SYSTEM")
    return lengths[unit]


def _card(lines: Sequence[str], name: str, source: str) -> tuple[int, str]:
    """Return the place of a card and its unit in lower case."""
    for place, line in enumerate(lines):
        words = re.split(r"[\s(){}]+", line.strip())
        if words[0].upper() == name:
            return place, "".join(words[1:2]).lower()
    msg = f"holds no card {name}"
    raise StructureError(msg, where=source)
