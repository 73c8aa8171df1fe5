"""OUTCAR of VASP: the lattice, the species and a geometry."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from tensorsym.crystal.numbers_in import CUT_OFF, chosen, line_number, numbers_in
from tensorsym.crystal.parts import StructureParts
from tensorsym.crystal.validation import MOST_ATOMS
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Iterator

_LATTICE = re.compile(r"direct lattice vectors +reciprocal lattice vectors *\n")
_FRACTIONAL = re.compile(r"position of ions in fractional coordinates[^\n]*\n")
_MOVED = re.compile(r"POSITION +TOTAL-FORCE[^\n]*\n[^\n]*\n")
_TYPES = re.compile(r"VRHFIN *= *([A-Za-z]+)")
_POTENTIALS = re.compile(r"TITEL *= *\S+ +([A-Z][a-z]?)")
_COUNTS = re.compile(r"ions per type *= *([\d ]+)")
_SPACED = re.compile(r"(?<=\d)-(?=\d)")


def looks_like_outcar(text: str) -> bool:
    """Tell an OUTCAR by its first line and its lattice, or by the lines of its potentials."""
    return bool(re.match(r"\s*vasp\.\d", text)) or (
        bool(_COUNTS.search(text)) and bool(re.search(r"direct lattice vectors", text))
    )


def read_outcar(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return a geometry of an OUTCAR.

    The first one, printed as fractional coordinates, has most digits, and is the undisplaced one of a calculation by
    finite differences.

    Parameters
    ----------
    text, source : str
        The file and its name.
    index : int, optional
        Which geometry, from 0: the first, then those printed with the forces.

    Raises
    ------
    StructureError
        If lattice, species or positions are missing or cut off.
    """
    species = _species(text, source)
    starts = [found.end() for found in (_FRACTIONAL.search(text),) if found]
    if index is not None:
        starts += [found.end() for found in _MOVED.finditer(text)]
    place = chosen(starts, index, source, "geometry", [])
    fractional = place == starts[0] and _FRACTIONAL.search(text) is not None
    lattices = [found.end() for found in _LATTICE.finditer(text)]
    if not lattices:
        raise StructureError("holds no lattice vectors", where=source, hint=CUT_OFF)
    before = max((start for start in lattices if start < place), default=lattices[0])
    lattice = list(_rows(text, lattices[0] if fractional else before, 3, source, "lattice vector"))
    positions = list(_rows(text, place, len(species), source, "position"))
    return StructureParts("OUTCAR", lattice, positions, species, cartesian=not fractional)


def _species(text: str, source: str) -> list[str]:
    counts = _COUNTS.search(text)
    names = _TYPES.findall(text) or _POTENTIALS.findall(text)
    if not counts or not names:
        raise StructureError("holds no species and numbers of ions", where=source, hint=CUT_OFF)
    numbers = [int(word) for word in counts[1].split()]
    if sum(numbers) > MOST_ATOMS:
        msg = f"{sum(numbers)} ions are too many"
        raise StructureError(msg, where=f"{source}, line {line_number(text, counts.start())}")
    if len(names) < len(numbers):
        msg = f"names {len(names)} species for {len(numbers)} types of ions"
        raise StructureError(msg, where=f"{source}, line {line_number(text, counts.start())}")
    return [name for name, number in zip(names, numbers, strict=False) for _ in range(number)]


def _rows(text: str, place: int, count: int, source: str, what: str) -> Iterator[list[float]]:
    first = line_number(text, place)
    for row in range(count):
        end = text.find("\n", place)
        line = text[place : end if end >= 0 else len(text)]
        place += len(line) + 1
        yield numbers_in(_SPACED.sub(" -", line), 3, source, first + row, f"{what} {row + 1} of {count}")
