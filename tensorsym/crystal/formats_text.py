"""XSF and extended XYZ."""

from __future__ import annotations

import re

import numpy as np

from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.elements import element_named
from tensorsym.crystal.numbers_in import finite_number, line_at, numbers_in
from tensorsym.errors import StructureError

AXES = "the file's Cartesian axes, given by its lattice vectors"

_LATTICE = re.compile(r'lattice\s*=\s*"([^"]*)"', re.IGNORECASE)
_PROPERTIES = re.compile(r"properties\s*=\s*(\S+)", re.IGNORECASE)


def looks_like_xsf(text: str) -> bool:
    """Tell an XSF by its key words."""
    return bool(re.search(r"^\s*PRIMVEC", text, re.MULTILINE) and re.search(r"^\s*PRIMCOORD", text, re.MULTILINE))


def read_xsf(text: str, source: str) -> Crystal:
    """Return the crystal in an XSF file (primitive cell, Cartesian positions in angstrom)."""
    lines = text.splitlines()
    start = next(number for number, line in enumerate(lines) if line.strip().startswith("PRIMVEC"))
    lattice = np.array(
        [numbers_in(line_at(lines, start + row, source, "the lattice"), 3, source, start + row + 1, "lattice vector")
         for row in (1, 2, 3)]
    )  # fmt: skip
    begin = next(number for number, line in enumerate(lines) if line.strip().startswith("PRIMCOORD"))
    count = int(numbers_in(line_at(lines, begin + 1, source, "the number of atoms"), 1, source, begin + 2, "number")[0])
    species, cartesian = [], []
    for row in range(count):
        line = line_at(lines, begin + 2 + row, source, f"atom {row + 1} of {count}")
        label, _, rest = line.strip().partition(" ")
        species.append(element_named(label, f"{source}, line {begin + 3 + row}"))
        cartesian.append(numbers_in(rest, 3, source, begin + 3 + row, f"position {row + 1}"))
    return Crystal(
        lattice, _fractional(cartesian, lattice, source), species, source=source, format="XSF", axes_words=AXES
    )


def looks_like_xyz(text: str) -> bool:
    """Tell an extended XYZ: a number, then a line with a lattice."""
    lines = text.splitlines()
    return len(lines) > 2 and lines[0].strip().isdigit() and bool(_LATTICE.search(lines[1]))


def read_xyz(text: str, source: str) -> Crystal:
    """Return the first frame of an extended XYZ file with a lattice."""
    lines = text.splitlines()
    count = int(lines[0])
    lattice_words = _LATTICE.search(lines[1])
    numbers = [
        finite_number(word, source, 2, "lattice") for word in (lattice_words[1] if lattice_words else "").split()
    ]
    if len(numbers) != 9:
        msg = f"the lattice has {len(numbers)} numbers"
        raise StructureError(msg, where=f"{source}, line 2", expected="9 numbers, three vectors after one another")
    lattice = np.array(numbers).reshape(3, 3)
    label_column, position_column = _columns(lines[1])
    species, cartesian = [], []
    for row in range(count):
        words = line_at(lines, 2 + row, source, f"atom {row + 1} of {count}").split()
        if len(words) < position_column + 3:
            msg = f"atom {row + 1} has {len(words)} columns"
            raise StructureError(msg, where=f"{source}, line {3 + row}", expected=f"at least {position_column + 3}")
        species.append(words[label_column])
        cartesian.append(numbers_in(" ".join(words[position_column:]), 3, source, 3 + row, f"position {row + 1}"))
    return Crystal(
        lattice, _fractional(cartesian, lattice, source), species, source=source, format="extended XYZ", axes_words=AXES
    )


def _columns(line: str) -> tuple[int, int]:
    """Return the columns of the species and of the first coordinate."""
    found = _PROPERTIES.search(line)
    columns, place = {"species": 0, "pos": 1}, 0
    if found:
        parts = found[1].split(":")
        for name, width in zip(parts[0::3], parts[2::3], strict=False):
            columns[name] = place
            place += int(width) if width.isdigit() else 1
    return columns["species"], columns["pos"]


def _fractional(cartesian: list[list[float]], lattice: np.ndarray, source: str) -> np.ndarray:
    if abs(np.linalg.det(lattice)) < 1e-9:
        raise StructureError("the lattice vectors span no volume", where=source, hint="check the cell")
    return np.asarray(np.array(cartesian).reshape(-1, 3) @ np.linalg.inv(lattice))
