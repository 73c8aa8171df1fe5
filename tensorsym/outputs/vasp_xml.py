"""The tensors of a vasprun.xml: dielectric tensors and Born charges."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.formats_vasprun import looks_like_vasprun, xml_elements
from tensorsym.crystal.read import crystal_in_text
from tensorsym.errors import OutputFileError
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import CUT_OFF, Lines, Table
from tensorsym.outputs.totals import with_totals
from tensorsym.outputs.vasp_tables import CLAMPED, IONIC

if TYPE_CHECKING:
    from xml.etree.ElementTree import Element

    from tensorsym.outputs.content import Content

__all__ = ["looks_like_vasprun", "read_vasprun_tensors"]

FORMAT = "vasprun.xml"

_DIELECTRIC = {
    "epsilon": (CLAMPED, "electronic"),
    "epsilon_scf": (CLAMPED, "electronic"),
    "epsilon_rpa": ("independent particles, clamped ion", "independent"),
    "epsilon_ion": (IONIC, "ionic"),
}
_BULKY = ("kpoints", "dos", "eigenvalues", "projected", "scstep", "dynmat")
"""Parts that are dropped as soon as they are passed."""


def read_vasprun_tensors(content: Content) -> OutputFile:
    """Return structure and tensors of a vasprun.xml; of like tensors the last one counts.

    Rows of the Born charges are the field, columns the displacement.

    Raises
    ------
    InputError
        If the structure is missing, or a tensor is cut off or holds other words than numbers.
    """
    text, source = content.text, content.source
    crystal = crystal_in_text(text, source)
    labels = tuple(f"{number} {name}" for number, name in enumerate(crystal.species, 1))
    found: dict[str, TensorRecord] = {}
    finished = False
    for element in xml_elements(text, source, stop_at_break=True):
        name = element.get("name", "")
        if element.tag == "varray" and name in _DIELECTRIC:
            found[name] = _dielectric(element, source)
        elif element.tag == "array" and name == "born_charges":
            found[name] = _charges(element, labels, source)
        elif element.tag in _BULKY:
            element.clear()
        finished |= element.tag == "modeling"
    notes = () if finished else ("the run did not finish: the XML breaks off",)
    return OutputFile(crystal, with_totals(tuple(found.values())), FORMAT, notes)


def _dielectric(element: Element, source: str) -> TensorRecord:
    name = element.get("name", "")
    label, contribution = _DIELECTRIC[name]
    table = _table(element, name, source)
    complete = contribution != "ionic"
    return TensorRecord(
        "dielectric", label, table.values, "1", digits=table.digits, contribution=contribution, complete=complete
    )


def _charges(element: Element, labels: tuple[str, ...], source: str) -> TensorRecord:
    sets = [child for child in element.iter("set") if child.find("v") is not None]
    if len(sets) != len(labels):
        msg = f"Born charges of {len(sets)} of {len(labels)} atoms"
        raise OutputFileError(msg, where=source, hint=CUT_OFF)
    tables = [_table(child, f"Born charges of atom {label}", source) for label, child in zip(labels, sets, strict=True)]
    return TensorRecord(
        "born-charge",
        "rows field, columns displacement",
        np.array([table.values for table in tables]),
        "e",
        digits=max(table.digits for table in tables),
        per_site=True,
        site_labels=labels,
    )


def _table(element: Element, what: str, source: str) -> Table:
    rows = Lines((row.text or "" for row in element.iter("v")), f"{source}, {what}")
    return rows.table(3, 3, what, most_skipped=0)
