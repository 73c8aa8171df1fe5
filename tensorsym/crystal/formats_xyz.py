"""XYZ, extended with a lattice, and plain as a molecule."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from tensorsym.crystal.elements import element_named
from tensorsym.crystal.molecule import molecule_in_box
from tensorsym.crystal.numbers_in import chosen, line_at, numbers_in, vectors_at, whole_number
from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Sequence

_LATTICE = re.compile(r"lattice\s*=\s*[\"'{]([^\"'}]*)[\"'}]", re.IGNORECASE)
_PROPERTIES = re.compile(r"properties\s*=\s*\"?([^\s\"]+)", re.IGNORECASE)
_START = re.compile(
    r"\s*\d+[ \t]*\n(?:[^\n]*(?:lattice|properties)\s*=|[^\n]*\n[ \t]*[A-Za-z\d]+(?:[ \t]+[-+.\d]+){3})", re.IGNORECASE
)


def looks_like_xyz(text: str) -> bool:
    """Tell an XYZ file by a number of atoms, a comment and a line that begins with an element."""
    return bool(_START.match(text))


def read_xyz(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return a structure of an XYZ file; without ``Lattice="..."`` in its comment it is a molecule.

    Parameters
    ----------
    text, source : str
        The file and its name.
    index : int, optional
        Which frame, from 0.

    Raises
    ------
    StructureError
        If a frame is cut off or not what it should be.
    """
    lines = text.splitlines()
    notes: list[str] = []
    place = chosen(_frames(lines, source), index, source, "frame", notes)
    count = whole_number(lines[place].strip(), source, place + 1, "number of atoms")
    comment = line_at(lines, place + 1, source, "the comment")
    name, start = _columns(comment, f"{source}, line {place + 2}")
    positions = vectors_at(lines, place + 2, count, source, "position", skip=start)
    species = [
        element_named(lines[place + 2 + row].split()[name], f"{source}, line {place + 3 + row}") for row in range(count)
    ]
    found = _LATTICE.search(comment)
    if found is None:
        return molecule_in_box(positions, species, source, "XYZ")
    values = numbers_in(found[1], 9, source, place + 2, "Lattice")
    lattice = [values[:3], values[3:6], values[6:]]
    return StructureParts("extended XYZ", lattice, positions, species, cartesian=True, notes=tuple(notes))


def _frames(lines: Sequence[str], source: str) -> list[int]:
    """Return the line of the number of atoms of each frame."""
    starts, place = [], 0
    while place < len(lines):
        if not lines[place].strip():
            place += 1
            continue
        starts.append(place)
        place += 2 + whole_number(lines[place].strip(), source, place + 1, "number of atoms")
    return starts


def _columns(comment: str, where: str) -> tuple[int, int]:
    """Return the column of the species and the first column of the positions."""
    found = _PROPERTIES.search(comment)
    if found is None:
        return 0, 1
    fields = found[1].split(":")
    columns, place = {}, 0
    for name, width in zip(fields[::3], fields[2::3], strict=False):
        columns[name.lower()] = place
        place += int(width) if width.isdigit() else 1
    species = columns.get("species", columns.get("element", columns.get("z")))
    if species is None or "pos" not in columns:
        msg = f"Properties={found[1]} name no species and positions"
        raise StructureError(msg, where=where, expected="species:S:1:pos:R:3")
    return species, columns["pos"]
