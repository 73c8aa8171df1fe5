"""JSON documents that hold a pymatgen structure, or a POSCAR as text."""

from __future__ import annotations

import json
from dataclasses import replace
from typing import TYPE_CHECKING, Any

import numpy as np

from tensorsym.crystal.formats_poscar import read_poscar
from tensorsym.crystal.mixed_sites import element_in, species_label
from tensorsym.crystal.molecule import molecule_in_box
from tensorsym.crystal.numbers_in import CUT_OFF, chosen
from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Iterator

    from tensorsym.crystal.crystal import Crystal

DEEPEST = 6
"""How deep a structure may lie in a document."""

MOST_CHILDREN = 1000
"""How many entries of a list are looked through."""

_FIRST_LOOK = ("structure", "final_structure", "initial_structure")
"""Keys that are looked into before the others."""


def looks_like_json(text: str) -> bool:
    """Tell JSON by its first character and its first name."""
    start = text.lstrip()[:200].replace(" ", "").replace("\n", "")
    return start.startswith(('{"', "[{", "[[", "{}", "[]"))


def read_json(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return a structure of a JSON document.

    Parameters
    ----------
    text, source : str
        The file and its name.
    index : int, optional
        Which of the structures, from 0; the first when absent.

    Raises
    ------
    StructureError
        If it is no JSON, or holds no sound structure.
    """
    try:
        document = json.loads(text)
    except json.JSONDecodeError as error:
        if error.msg != "Extra data":
            msg = f"is no JSON document: {error}"
            raise StructureError(msg, where=source, hint=CUT_OFF) from error
        return _of_lines(text, source, index)
    except (ValueError, RecursionError) as error:
        msg = f"is no JSON document: {error}"
        raise StructureError(msg, where=source) from error
    return parts_in_document(document, source, index)


def crystal_in_document(document: Any, source: str) -> Crystal:
    """Return the first crystal that a JSON document holds as a pymatgen structure or as the text of a POSCAR.

    Raises
    ------
    StructureError
        If it holds none, or a damaged one.
    """
    return parts_in_document(document, source).crystal(source)


def parts_in_document(document: Any, source: str, index: int | None = None) -> StructureParts:
    """Return what a document holds as a structure: see `read_json`."""
    found = list(_structures_in(document, 0)) if index else [next(_structures_in(document, 0), None)]
    try:
        structure = found[index or 0]
    except IndexError:
        msg = f"there is no structure {index} among {len(found)}"
        raise StructureError(msg, where=source) from None
    if structure is None:
        raise StructureError("holds no structure", where=source, expected="a pymatgen structure with lattice and sites")
    if isinstance(structure, str):
        return read_poscar(structure, source)
    try:
        species = [_label(site) for site in structure["sites"]]
        if structure.get("lattice") is None:
            places = [site["xyz"] for site in structure["sites"]]
            return molecule_in_box(places, species, source, "pymatgen JSON")
        lattice = np.array(structure["lattice"]["matrix"], dtype=float)
        positions = np.array([site["abc"] for site in structure["sites"]], dtype=float)
    except (AttributeError, KeyError, TypeError, IndexError, ValueError) as error:
        msg = f"the structure is damaged at {str(error)[:80]}"
        raise StructureError(msg, where=source, expected="lattice.matrix, and abc and species of every site") from error
    return StructureParts("pymatgen JSON", lattice, positions, species)


def _of_lines(text: str, source: str, index: int | None) -> StructureParts:
    """Return a structure of a file with one document a line."""
    lines = [(number, line) for number, line in enumerate(text.splitlines(), 1) if line.strip()]
    notes: list[str] = []
    number, line = lines[chosen(range(len(lines)), index, source, "document", notes)]
    where = f"{source}, line {number}"
    try:
        document = json.loads(line)
    except (ValueError, RecursionError) as error:
        msg = f"is no JSON document: {error}"
        raise StructureError(msg, where=where) from error
    parts = parts_in_document(document, where)
    return replace(parts, notes=(*notes, *parts.notes))


def _structures_in(node: Any, depth: int) -> Iterator[Any]:
    if depth > DEEPEST or not isinstance(node, dict | list):
        return
    if isinstance(node, dict):
        if isinstance(node.get("sites"), list) and ("lattice" in node or node.get("@class") == "Molecule"):
            yield node
            return
        if isinstance(node.get("poscar"), str):
            yield node["poscar"]
        children = [node[key] for key in _FIRST_LOOK if key in node]
        children += [child for key, child in node.items() if key not in _FIRST_LOOK]
    else:
        children = node[:MOST_CHILDREN]
    for child in children:
        yield from _structures_in(child, depth + 1)


def _label(site: dict[str, Any]) -> str:
    composition: dict[str, float] = {}
    for item in site["species"]:
        element = element_in(str(item["element"]))
        composition[element] = composition.get(element, 0.0) + float(item.get("occu", 1.0))
    return species_label(composition)
