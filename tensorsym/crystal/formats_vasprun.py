"""vasprun.xml of VASP, and a guard for all XML."""

from __future__ import annotations

import io
import re
import xml.etree.ElementTree as ET
from typing import TYPE_CHECKING

from tensorsym.crystal.numbers_in import CUT_OFF, chosen, numbers_in
from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Iterator


def looks_like_vasprun(text: str) -> bool:
    """Tell a vasprun.xml by its root."""
    return "<modeling>" in text[:2000]


def read_vasprun(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return a geometry of a vasprun.xml.

    Parameters
    ----------
    text, source : str
        The file and its name.
    index : int, optional
        Which geometry, from 0 (the initial one); the first when absent.

    Raises
    ------
    StructureError
        If the XML is broken before the geometry, or holds a document type.
    """
    species: list[str] = []
    found: list[tuple[list[list[float]], list[list[float]]]] = []
    for element in xml_elements(text, source, stop_at_break=index is not None):
        if element.tag == "array" and element.get("name") == "atoms":
            species = [(row[0].text or "").strip() for row in element.iter("rc") if len(row)]
        elif element.tag == "structure":
            found.append((_vectors(element, "basis", source), _vectors(element, "positions", source)))
            if index is None and species:
                break
    if not species:
        raise StructureError("holds no list of atoms", where=source, hint=CUT_OFF)
    notes: list[str] = []
    lattice, positions = found[chosen(range(len(found)), index, source, "geometry", notes)]
    return StructureParts("vasprun.xml", lattice, positions, species)


def xml_elements(text: str, source: str, *, stop_at_break: bool = False) -> Iterator[ET.Element]:
    """Yield the elements of an XML document as they end.

    Parameters
    ----------
    text, source : str
        The document and its name.
    stop_at_break : bool
        Stop, and do not raise, where the document breaks off: calculations do.

    Raises
    ------
    StructureError
        If the document is broken, or declares a document type or entities, which may swell without bound.
    """
    head = text.upper()
    if "<!DOCTYPE" in head or "<!ENTITY" in head:
        raise StructureError(
            "the XML declares a document type or entities", where=source, hint="delete the declaration"
        )
    body = re.sub(r"\A\s*<\?xml[^>]*\?>", "", text)  # the declared encoding has been undone with the file
    try:
        for _, element in ET.iterparse(io.BytesIO(body.encode("utf-8"))):  # noqa: S314  entities are refused above
            yield element
    except ET.ParseError as error:
        if not stop_at_break:
            msg = f"the XML is broken: {error}"
            raise StructureError(msg, where=source, hint=CUT_OFF) from error


def _vectors(structure: ET.Element, name: str, source: str) -> list[list[float]]:
    array = structure.find(f".//varray[@name='{name}']")
    if array is None:
        msg = f"a structure holds no {name}"
        raise StructureError(msg, where=source)
    return [
        numbers_in(row.text or "", 3, source, 0, f"{name}, vector {number + 1}")
        for number, row in enumerate(array.iter("v"))
    ]
