"""JSON documents that hold a pymatgen structure, or a POSCAR as text."""

from __future__ import annotations

import json
from typing import Any

from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.formats_vasp import AXES, read_poscar
from tensorsym.errors import StructureError

DEEPEST = 6
"""How deep a structure may lie in a document."""


def looks_like_json(text: str) -> bool:
    """Tell JSON by its first character."""
    return text.lstrip()[:1] in ("{", "[")


def read_json(text: str, source: str) -> Crystal:
    """Return the first structure found in a JSON document."""
    try:
        document = json.loads(text)
    except (ValueError, RecursionError) as error:
        msg = f"is no JSON document: {error}"
        raise StructureError(msg, where=source, hint="the file may be cut off") from error
    return crystal_in_document(document, source)


def crystal_in_document(document: Any, source: str) -> Crystal:
    """Return the crystal that a JSON document holds as a pymatgen structure or as the text of a POSCAR.

    Raises
    ------
    StructureError
        If it holds none, or a damaged one.
    """
    found = _structure_in(document, 0)
    if isinstance(found, str):
        return read_poscar(found, source)
    if found is None:
        raise StructureError("holds no structure", where=source, expected="a pymatgen structure with lattice and sites")
    try:
        lattice = found["lattice"]["matrix"]
        positions = [site["abc"] for site in found["sites"]]
        species = [_label(site) for site in found["sites"]]
    except (KeyError, TypeError, IndexError) as error:
        msg = f"the structure lacks {error}"
        raise StructureError(msg, where=source, expected="lattice.matrix, and abc and species of every site") from error
    return Crystal(lattice, positions, species, source=source, format="JSON", axes_words=AXES)


def _structure_in(node: Any, depth: int) -> Any:
    if depth > DEEPEST:
        return None
    if isinstance(node, dict):
        if isinstance(node.get("lattice"), dict) and isinstance(node.get("sites"), list):
            return node
        if isinstance(node.get("poscar"), str):
            return node["poscar"]
        children = [node[key] for key in ("structure", "final_structure", "initial_structure") if key in node]
        children += [child for child in node.values() if isinstance(child, dict | list)]
    elif isinstance(node, list):
        children = node[:20]
    else:
        return None
    return next((found for child in children if (found := _structure_in(child, depth + 1)) is not None), None)


def _label(site: dict[str, Any]) -> str:
    species = site["species"]
    if len(species) == 1 and abs(float(species[0].get("occu", 1)) - 1) < 1e-6:
        return str(species[0]["element"])
    return "".join(
        f"{item['element']}{float(item['occu']):.4g}" for item in sorted(species, key=lambda i: i["element"])
    )
