"""Outputs of pw.x and ph.x of Quantum ESPRESSO: the text, and the XML of pw.x."""

from __future__ import annotations

import re
from itertools import islice
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.formats_pw_input import BOHR, notes_on_labels
from tensorsym.crystal.formats_vasprun import xml_elements
from tensorsym.crystal.numbers_in import CUT_OFF, chosen, finite_number, line_number, numbers_in
from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    import xml.etree.ElementTree as ET

    from numpy.typing import NDArray

_ALAT = re.compile(r"(?:lattice parameter \(a(?:lat|_0)\)|celldm\s*\(1\))\s*=\s*(\S+)")
_AXIS = re.compile(r"a\(([123])\)\s*=\s*\(([^)]*)\)")
_ATOM = re.compile(
    r"^[ \t]*(\d+)[ \t]+(\S+)[ \t]+(?:\S+[ \t]+)?tau\([ \t]*\d+[ \t]*\)[ \t]*=[ \t]*\(([^)\n]*)\)", re.MULTILINE
)
_COUNT = re.compile(r"number of atoms/cell\s*=\s*(\d+)")
_FRACTIONAL = re.compile(r"positions \(cryst\. coord\.\)")
_SPACED = re.compile(r"(?<=\d)-(?=\d)")


def looks_like_pw_output(text: str) -> bool:
    """Tell an output of pw.x or ph.x by the table of its cell."""
    return "crystal axes: (cart. coord. in units of a" in text or bool(
        re.search(r"Program (PWSCF|PHONON)", text[:5000])
    )


def read_pw_output(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return the geometry with which a run of pw.x or ph.x began.

    Raises
    ------
    StructureError
        If cell or positions are missing or cut off, or `index` is not 0.
    """
    if index not in (None, 0):
        msg = f"only the first geometry of an output of pw.x is read, not {index}"
        raise StructureError(msg, where=source, hint="give the XML of the run")
    found = _ALAT.search(text)
    axes = list(islice(_AXIS.finditer(text), 3))
    if found is None or [match[1] for match in axes] != ["1", "2", "3"]:
        raise StructureError("holds no complete cell", where=source, hint=CUT_OFF)
    alat = finite_number(found[1], source, line_number(text, found.start()), "lattice parameter") * BOHR
    lattice = alat * np.array([
        numbers_in(_SPACED.sub(" -", match[2]), 3, source, line_number(text, match.start()), f"a({match[1]})")
        for match in axes
    ])  # fmt: skip
    start = _FRACTIONAL.search(text)
    species, rows = _atoms(text, start.end() if start else 0, source)
    return StructureParts(
        "output of Quantum ESPRESSO", lattice, rows if start else alat * rows, species, cartesian=start is None,
        notes=notes_on_labels(species),
    )  # fmt: skip


def looks_like_pw_xml(text: str) -> bool:
    """Tell the XML of pw.x by its root."""
    return bool(re.search(r"<(qes:)?espresso\b", text[:2000]))


def read_pw_xml(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return a geometry of the XML of pw.x.

    Parameters
    ----------
    text, source : str
        The file and its name.
    index : int, optional
        Which geometry, from 0 (that of the input).

    Raises
    ------
    StructureError
        If the XML is broken before the geometry.
    """
    found: list[ET.Element] = []
    for element in xml_elements(text, source, stop_at_break=index is not None):
        if element.tag == "atomic_structure":
            found.append(element)
            if index is None:
                break
    structure = found[chosen(range(len(found)), index, source, "geometry", [])]
    vectors = [structure.find(f"cell/a{number}") for number in (1, 2, 3)]
    atoms = structure.findall("atomic_positions/atom")
    if any(vector is None for vector in vectors) or not atoms:
        raise StructureError("a geometry holds no cell or no atomic_positions", where=source)
    lattice = [_vector(vector, source, "lattice vector") for vector in vectors if vector is not None]
    rows = [_vector(atom, source, f"position {number + 1}") for number, atom in enumerate(atoms)]
    species = [atom.get("name", "") for atom in atoms]
    return StructureParts(
        "XML of pw.x", BOHR * np.array(lattice), BOHR * np.array(rows), species, cartesian=True,
        notes=notes_on_labels(species),
    )  # fmt: skip


def _atoms(text: str, start: int, source: str) -> tuple[list[str], NDArray[np.float64]]:
    """Return labels and positions of the first list of atoms behind a place, in units of the list."""
    species: list[str] = []
    rows = []
    for match in _ATOM.finditer(text, start):
        if int(match[1]) != len(species) + 1:
            break
        species.append(match[2])
        line = line_number(text, match.start())
        rows.append(numbers_in(_SPACED.sub(" -", match[3]), 3, source, line, f"position {match[1]}"))
    count = _COUNT.search(text)
    if not species or (count and int(count[1]) != len(species)):
        msg = f"holds {len(species)} of {count[1] if count else 'all'} positions"
        raise StructureError(msg, where=source, hint=CUT_OFF)
    return species, np.array(rows)


def _vector(element: ET.Element, source: str, what: str) -> list[float]:
    return numbers_in(element.text or "", 3, source, 0, what)
