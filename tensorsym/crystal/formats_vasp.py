"""POSCAR, OUTCAR and vasprun.xml: the cell and its atoms."""

from __future__ import annotations

import re
import xml.etree.ElementTree as ET
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.numbers_in import finite_number, line_at, numbers_in
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Iterable


AXES = "the file's Cartesian axes, given by its lattice vectors"

_SPECIES = re.compile(r"[A-Z][a-z]?(?:_\w+|/\w+)?")


def looks_like_poscar(text: str) -> bool:
    """Tell a POSCAR: a number in line 2, three vectors after it."""
    lines = text.splitlines()
    try:
        return len(lines) > 6 and bool(lines[1].split()) and all(len(_floats(line)) == 3 for line in lines[2:5])
    except ValueError:
        return False


def _floats(line: str) -> list[float]:
    return [float(word) for word in line.split()[:3]]


def read_poscar(text: str, source: str) -> Crystal:
    """Return the crystal in a POSCAR or CONTCAR (VASP manual, POSCAR)."""
    lines = text.splitlines()
    scale_words = line_at(lines, 1, source, "the scaling factor").split()
    scales = [finite_number(word, source, 2, "scaling factor") for word in scale_words[:3]]
    lattice = np.array([numbers_in(lines[2 + row], 3, source, 3 + row, "lattice vector") for row in range(3)])
    if len(scales) == 3:
        lattice = lattice * np.array(scales)
    elif scales[0] < 0:
        volume = abs(float(np.linalg.det(lattice)))
        lattice = lattice * (abs(scales[0]) / volume) ** (1 / 3) if volume else lattice
    else:
        lattice = lattice * scales[0]
    labels, counts, place = _species_and_counts(lines, source)
    if line_at(lines, place, source, "the positions")[:1].lower() == "s":
        place += 1
    cartesian = line_at(lines, place, source, "the positions").strip()[:1].lower() in ("c", "k")
    total = sum(counts)
    rows = [
        numbers_in(line_at(lines, place + 1 + row, source, f"position {row + 1} of {total}"), 3, source, place + 2 + row,
                   f"position {row + 1}")
        for row in range(total)
    ]  # fmt: skip
    positions = np.array(rows).reshape(-1, 3)
    if cartesian:
        _check_volume(lattice, source)
        positions = (
            positions * scales[0] @ np.linalg.inv(lattice) if scales[0] > 0 else positions @ np.linalg.inv(lattice)
        )
    species = [label for label, count in zip(labels, counts, strict=True) for _ in range(count)]
    if labels[0].startswith("atom "):
        species = _labels_behind(lines[place + 1 : place + 1 + total]) or species
    title = lines[0].strip() if not _is_formula_list(lines[0]) else ""
    return Crystal(lattice, positions, species, source=source, format="POSCAR", axes_words=AXES, title=title)


def _species_and_counts(lines: list[str], source: str) -> tuple[list[str], list[int], int]:
    """Return labels, counts and the number of the line after them; old files name the species in the title at best."""
    words = line_at(lines, 5, source, "the species").split()
    if words and all(word.isdigit() for word in words):
        counts = [int(word) for word in words]
        title = lines[0].split()
        named = len(title) == len(counts) and all(_SPECIES.fullmatch(word) for word in title)
        return title if named else [f"atom {number + 1}" for number in range(len(counts))], counts, 6
    labels = [re.split(r"[_/]", word)[0] for word in words]
    count_words = line_at(lines, 6, source, "the numbers of atoms").split()
    if len(count_words) < len(labels) or not labels or not all(word.isdigit() for word in count_words[: len(labels)]):
        msg = f"{len(labels)} species for the numbers of atoms {' '.join(count_words)!r}"
        raise StructureError(msg, where=f"{source}, line 7", expected="one whole number for each species")
    return labels, [int(word) for word in count_words[: len(labels)]], 7


def _labels_behind(lines: list[str]) -> list[str] | None:
    labels = [line.split()[3] if len(line.split()) > 3 else "" for line in lines]
    return labels if all(_SPECIES.fullmatch(label) for label in labels) else None


def _is_formula_list(title: str) -> bool:
    return bool(title.split()) and all(re.fullmatch(r"[A-Z][a-z]?\d*", word) for word in title.split())


def _check_volume(lattice: np.ndarray, source: str) -> None:
    if abs(np.linalg.det(lattice)) < 1e-9:
        raise StructureError("the lattice vectors span no volume", where=source, hint="check the cell")


def looks_like_outcar(text: str) -> bool:
    """Tell an OUTCAR by its first lines."""
    return "vasp." in text[:200] and "direct lattice vectors" in text


def read_outcar(text: str, source: str) -> Crystal:
    """Return the first geometry of an OUTCAR: it has more digits, and a finite-difference run ends displaced."""
    lines = text.splitlines()
    labels = [match[1] for match in re.finditer(r"VRHFIN\s*=\s*([A-Za-z]+)", text)]
    counts_line = _first(lines, "ions per type", source)
    counts = [int(word) for word in lines[counts_line].split("=")[1].split()]
    if len(labels) < len(counts):
        msg = f"{len(labels)} species for {len(counts)} numbers of ions"
        raise StructureError(msg, where=f"{source}, line {counts_line + 1}")
    start = _first(lines, "direct lattice vectors", source)
    lattice = [numbers_in(line_at(lines, start + 1 + row, source, "the lattice"), 3, source, start + 2 + row, "lattice vector")
               for row in range(3)]  # fmt: skip
    total = sum(counts)
    begin = _first(lines, "position of ions in fractional coordinates", source)
    positions = [
        numbers_in(line_at(lines, begin + 1 + row, source, f"position {row + 1} of {total}"), 3, source, begin + 2 + row,
                   f"position {row + 1}")
        for row in range(total)
    ]  # fmt: skip
    species = [label.capitalize() for label, count in zip(labels, counts, strict=False) for _ in range(count)]
    return Crystal(lattice, positions, species, source=source, format="OUTCAR", axes_words=AXES)


def _first(lines: Iterable[str], mark: str, source: str) -> int:
    for number, line in enumerate(lines):
        if mark in line:
            return number
    msg = f"holds no line with {mark!r}"
    raise StructureError(msg, where=source, hint="the file may be cut off")


def looks_like_vasprun(text: str) -> bool:
    """Tell a vasprun.xml by its root element."""
    return "<modeling>" in text[:2000]


def read_vasprun(text: str, source: str) -> Crystal:
    """Return the initial structure of a vasprun.xml."""
    if "<!DOCTYPE" in text[:4096] or "<!ENTITY" in text:
        raise StructureError("declares XML entities, which no vasprun.xml does", where=source)
    try:
        root = ET.fromstring(text)  # noqa: S314  entities are refused above
    except ET.ParseError as error:
        msg = f"is no well-formed XML: {error}"
        raise StructureError(msg, where=source, hint="the run may not have finished") from error
    structure = root.find("structure[@name='initialpos']")
    structure = structure if structure is not None else root.find(".//structure")
    atoms = root.find("atominfo/array[@name='atoms']/set")
    if structure is None or atoms is None:
        raise StructureError("holds no structure or no list of atoms", where=source)
    species = [(row.findtext("c") or "").strip() for row in atoms.iter("rc")]
    lattice = _vectors(structure.find("crystal/varray[@name='basis']"), source, "lattice vector")
    positions = _vectors(structure.find("varray[@name='positions']"), source, "position")
    return Crystal(lattice, positions, species, source=source, format="vasprun.xml", axes_words=AXES)


def _vectors(element: ET.Element | None, source: str, what: str) -> list[list[float]]:
    if element is None:
        msg = f"holds no {what}s"
        raise StructureError(msg, where=source)
    return [
        numbers_in(row.text or "", 3, f"{source}, {what} {number}", number, what)
        for number, row in enumerate(element, 1)
    ]
