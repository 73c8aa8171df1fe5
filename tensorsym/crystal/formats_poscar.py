"""POSCAR and CONTCAR of VASP, versions 4 and 5."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.elements import is_element
from tensorsym.crystal.numbers_in import finite_number, line_at, vectors_at, whole_number
from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

_REAL = r"[+-]?(?:\d+\.?\d*|\.\d+)(?:[EeDd][+-]?\d+)?"
_START = re.compile(
    rf"[^\n]*\n[ \t]*(?:{_REAL}|{_REAL}[ \t]+{_REAL}[ \t]+{_REAL})[ \t]*(?:[!#][^\n]*)?\n"
    rf"(?:[ \t]*{_REAL}[ \t]+{_REAL}[ \t]+{_REAL}[ \t]*(?:[!#][^\n]*)?\n){{3}}"
)


def looks_like_poscar(text: str) -> bool:
    """Tell a POSCAR by its second to fifth line: a scale and three vectors."""
    return bool(_START.match(text))


def read_poscar(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return the structure of a POSCAR.

    Raises
    ------
    StructureError
        If a line is missing or not what it should be, or `index` is not 0.
    """
    if index not in (None, 0, -1):
        msg = f"there is no structure {index}: a POSCAR holds one"
        raise StructureError(msg, where=source)
    lines = text.splitlines()
    line_at(lines, 5, source, "the species")
    vectors = np.array(vectors_at(lines, 2, 3, source, "lattice vector"))
    scale = _scale(lines[1], vectors, source)
    names, counts, place = _species(lines, source)
    mode = line_at(lines, place, source, "the kind of coordinates").strip()
    if mode[:1] in "sS" and mode:
        place += 1
        mode = line_at(lines, place, source, "the kind of coordinates").strip()
    rows = np.array(vectors_at(lines, place + 1, sum(counts), source, "position")).reshape(-1, 3)
    cartesian = mode[:1] in tuple("cCkK")
    notes: tuple[str, ...] = ()
    if not names:
        names, notes = _names_elsewhere(lines, place, counts)
    species = [name for name, count in zip(names, counts, strict=True) for _ in range(count)]
    return StructureParts(
        "POSCAR", vectors * scale, rows * scale if cartesian else rows, species, cartesian, notes=notes,
    )  # fmt: skip


def _scale(line: str, vectors: NDArray[np.float64], source: str) -> NDArray[np.float64]:
    """Return what the components along x, y, z are multiplied by; a negative number is minus the volume."""
    words = re.split(r"[!#]", line)[0].split()
    if len(words) not in (1, 3):
        msg = f"scale: {line.strip()[:60]!r}"
        raise StructureError(msg, where=f"{source}, line 2", expected="one number, or three")
    values = np.array([finite_number(word, source, 2, "scale") for word in words])
    if len(values) == 1 and values[0] < 0:
        volume = abs(float(np.linalg.det(vectors)))
        values = np.cbrt(-values / volume) if volume else values
    if not (values > 0).all():
        msg = f"scale: {line.strip()[:60]!r} is not positive"
        raise StructureError(msg, where=f"{source}, line 2", expected="a factor, or minus the volume in Å^3")
    return values * np.ones(3)


def _species(lines: Sequence[str], source: str) -> tuple[list[str], list[int], int]:
    """Return names (none in version 4), counts, and the place of the next line."""
    words = re.split(r"[!#]", lines[5])[0].split()
    place = 5
    names: list[str] = []
    if words and not words[0].isdigit():
        names = [re.split(r"[_/]", word)[0] for word in words]
        place = 6
    line = re.split(r"[!#]", line_at(lines, place, source, "the numbers of atoms"))[0]
    counts = [whole_number(word, source, place + 1, "number of atoms") for word in line.split()]
    if names and len(names) != len(counts):
        msg = f"{len(names)} species and {len(counts)} numbers of atoms"
        raise StructureError(msg, where=f"{source}, lines {place} and {place + 1}", expected="one number for each")
    return names, counts, place + 1


def _names_elsewhere(lines: Sequence[str], place: int, counts: Sequence[int]) -> tuple[list[str], tuple[str, ...]]:
    """Return the names that a version 4 file has in its comment or behind its positions, else invented ones."""
    in_comment = [found for found in re.findall(r"[A-Z][a-z]?", lines[0]) if is_element(found)]
    if len(in_comment) == len(counts):
        return in_comment, ("the species are taken from the comment line",)
    starts = [sum(counts[:number]) for number in range(len(counts))]
    behind = [[word for word in lines[place + 1 + start].split()[3:] if is_element(word)] for start in starts]
    if all(behind):
        return [words[-1] for words in behind], ("the species are taken from behind the positions",)
    return [f"X{number + 1}" for number in range(len(counts))], ("the file names no species: they are called X1, X2",)
