"""XSF: the structure part."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from tensorsym.crystal.elements import element_named
from tensorsym.crystal.numbers_in import chosen, line_at, vectors_at, whole_number
from tensorsym.crystal.parts import StructureParts

if TYPE_CHECKING:
    from collections.abc import Sequence

_START = re.compile(r"^[ \t]*(PRIMVEC|PRIMCOORD)[ \t]*\d*[ \t]*$", re.MULTILINE)


def looks_like_xsf(text: str) -> bool:
    """Tell an XSF by its key words."""
    return bool(_START.search(text))


def read_xsf(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return a structure of an XSF file: primitive vectors, Cartesian positions, Å.

    Parameters
    ----------
    text, source : str
        The file and its name.
    index : int, optional
        Which step of an animated file, from 0.

    Raises
    ------
    StructureError
        If vectors or positions are missing or cut off.
    """
    lines = [line.split("#")[0] for line in text.splitlines()]
    notes: list[str] = []
    place = chosen(_places(lines, "PRIMCOORD"), index, source, "PRIMCOORD", notes)
    vectors = [start for start in _places(lines, "PRIMVEC") if start < place]
    start = chosen(vectors, -1, source, "PRIMVEC", notes)
    lattice = vectors_at(lines, start + 1, 3, source, "lattice vector")
    words = line_at(lines, place + 1, source, "the number of atoms").split()
    count = whole_number(words[0] if words else "", source, place + 2, "number of atoms")
    positions = vectors_at(lines, place + 2, count, source, "position", skip=1)
    species = [
        element_named(lines[place + 2 + row].split()[0], f"{source}, line {place + 3 + row}") for row in range(count)
    ]
    return StructureParts("XSF", lattice, positions, species, cartesian=True, notes=tuple(notes))


def _places(lines: Sequence[str], word: str) -> list[int]:
    return [number for number, line in enumerate(lines) if line.split()[:1] == [word]]
