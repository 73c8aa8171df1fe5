"""Quantum ESPRESSO pw.x input and output: the cell and its atoms (INPUT_PW description, from memory)."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.numbers_in import finite_number, line_at, numbers_in
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from numpy.typing import NDArray


AXES = "the file's Cartesian axes, given by its lattice vectors"
BOHR = 0.529177210903
"""Bohr radius in angstrom (CODATA 2018)."""

_SITE = re.compile(r"^\s*\d+\s+(\S+)\s+tau\(\s*\d+\s*\)\s*=\s*\(([^)]*)\)", re.MULTILINE)
_AXIS = re.compile(r"a\((\d)\)\s*=\s*\(([^)]*)\)")
_SETTING = re.compile(r"([a-zA-Z_]+(?:\(\d\))?)\s*=\s*('[^']*'|[^,\s/!]+)")


def looks_like_pw_output(text: str) -> bool:
    """Tell an output of pw.x or ph.x by the table of its cell."""
    return "crystal axes: (cart. coord. in units of alat)" in text


def read_pw_output(text: str, source: str) -> Crystal:
    """Return the first geometry printed by pw.x or ph.x."""
    alat = re.search(r"(?:lattice parameter \(alat\)|celldm\(1\))\s*=\s*([-\d.]+)", text)
    axes = dict(_AXIS.findall(text))
    if alat is None or not {"1", "2", "3"} <= axes.keys():
        raise StructureError("holds no complete cell", where=source, hint="the file may be cut off")
    scale = finite_number(alat[1], source, text[: alat.start()].count("\n") + 1, "lattice parameter") * BOHR
    lattice = np.array([numbers_in(axes[key], 3, source, 0, f"crystal axis {key}") for key in "123"]) * scale
    species, cartesian = [], []
    for match in _SITE.finditer(text):
        if int(match[0].split()[0]) <= len(species):
            break
        species.append(_element(match[1]))
        cartesian.append(numbers_in(match[2], 3, source, text[: match.start()].count("\n") + 1, "position"))
    if not species:
        raise StructureError("holds no positions", where=source, hint="the file may be cut off")
    positions = np.array(cartesian) * scale @ _inverse(lattice, source)
    return Crystal(lattice, positions, species, source=source, format="pw.x output", axes_words=AXES)


def looks_like_pw_input(text: str) -> bool:
    """Tell an input of pw.x by its name list and its cards."""
    return bool(re.search(r"&system", text, re.IGNORECASE)) and "ATOMIC_POSITIONS" in text.upper()


def read_pw_input(text: str, source: str) -> Crystal:
    """Return the crystal that an input of pw.x describes."""
    plain = "\n".join(line.split("!")[0] for line in text.splitlines())
    settings = {key.lower(): value.strip("'\"") for key, value in _SETTING.findall(plain)}
    lines = plain.splitlines()
    lattice, alat = _input_cell(settings, lines, source)
    number, unit = _card(lines, "ATOMIC_POSITIONS", source)
    species, rows = [], []
    for offset in range(int(finite_number(settings.get("nat", "0"), source, 0, "nat"))):
        line = line_at(lines, number + 1 + offset, source, f"position {offset + 1}")
        label, _, rest = line.strip().partition(" ")
        species.append(_element(label))
        rows.append(numbers_in(rest, 3, source, number + 2 + offset, f"position {offset + 1}"))
    positions = np.array(rows).reshape(-1, 3)
    if unit != "crystal":
        factor = {"bohr": BOHR, "angstrom": 1.0}.get(unit, alat)
        positions = positions * factor @ _inverse(lattice, source)
    return Crystal(lattice, positions, species, source=source, format="pw.x input", axes_words=AXES)


def _input_cell(settings: dict[str, str], lines: list[str], source: str) -> tuple[NDArray[np.float64], float]:
    ibrav = int(finite_number(settings.get("ibrav", "0"), source, 0, "ibrav"))
    if "celldm(1)" in settings:
        alat = finite_number(settings["celldm(1)"], source, 0, "celldm(1)") * BOHR
    else:
        alat = finite_number(settings.get("a", "1"), source, 0, "A")
    if ibrav == 0:
        number, unit = _card(lines, "CELL_PARAMETERS", source)
        rows = [numbers_in(line_at(lines, number + 1 + row, source, "the cell"), 3, source, number + 2 + row, "lattice vector")
                for row in range(3)]  # fmt: skip
        factor = {"bohr": BOHR, "angstrom": 1.0}.get(unit, alat)
        return np.array(rows) * factor, alat
    ratio_b, ratio_c = (
        _ratio(settings, letter, f"celldm({number})", alat, source) for letter, number in (("b", 2), ("c", 3))
    )
    shape = _bravais(ibrav, ratio_b, ratio_c)
    if shape is None:
        msg = f"ibrav = {ibrav} is not read from an input"
        raise StructureError(msg, where=source, hint="give the pw.x output, or use ibrav = 0 with CELL_PARAMETERS")
    return np.array(shape) * alat, alat


def _ratio(settings: dict[str, str], letter: str, key: str, alat: float, source: str) -> float:
    if key in settings:
        return finite_number(settings[key], source, 0, key)
    return finite_number(settings[letter], source, 0, letter.upper()) / alat if letter in settings else 1.0


def _bravais(ibrav: int, b: float, c: float) -> list[list[float]] | None:
    """Return the lattice vectors of a Bravais index in units of a."""
    return {
        1: [[1, 0, 0], [0, 1, 0], [0, 0, 1]],
        2: [[-0.5, 0, 0.5], [0, 0.5, 0.5], [-0.5, 0.5, 0]],
        3: [[0.5, 0.5, 0.5], [-0.5, 0.5, 0.5], [-0.5, -0.5, 0.5]],
        4: [[1, 0, 0], [-0.5, 0.75**0.5, 0], [0, 0, c]],
        6: [[1, 0, 0], [0, 1, 0], [0, 0, c]],
        7: [[0.5, -0.5, c / 2], [0.5, 0.5, c / 2], [-0.5, -0.5, c / 2]],
        8: [[1, 0, 0], [0, b, 0], [0, 0, c]],
    }.get(ibrav)


def _card(lines: list[str], name: str, source: str) -> tuple[int, str]:
    """Return the number of the line of a card and its unit."""
    for number, line in enumerate(lines):
        if line.strip().upper().startswith(name):
            unit = line.strip()[len(name) :].strip(" (){}").lower()
            return number, unit or "alat"
    msg = f"holds no card {name}"
    raise StructureError(msg, where=source)


def _element(label: str) -> str:
    found = re.match(r"[A-Z][a-z]?", label.capitalize() if label.islower() or label.isupper() else label)
    return found[0] if found else label


def _inverse(lattice: NDArray[np.float64], source: str) -> NDArray[np.float64]:
    if abs(np.linalg.det(lattice)) < 1e-9:
        raise StructureError("the lattice vectors span no volume", where=source, hint="check the cell")
    return np.asarray(np.linalg.inv(lattice))
