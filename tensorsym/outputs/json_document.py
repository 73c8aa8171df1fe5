"""JSON documents of databases: tensors under names the field knows, with a pymatgen structure or a POSCAR as text."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, NamedTuple

import numpy as np

from tensorsym.crystal.formats_json import crystal_in_document
from tensorsym.errors import OutputFileError, TensorsymError
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import typical_place
from tensorsym.outputs.tensor_file import array_of, decimals_in
from tensorsym.outputs.units import property_in_unit
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix, matrix_shape

if TYPE_CHECKING:
    from collections.abc import Iterator

    from tensorsym.crystal.crystal import Crystal

FORMAT = "JSON document"

DEEPEST = 8
"""How deep a tensor may lie in a document."""


class Name(NamedTuple):
    """What stands under a key."""

    property: str
    """Name in the catalogue."""
    unit: str
    """Unit when the document gives none."""
    contribution: str
    """``electronic``, ``ionic``, ``total`` or empty."""


_PARTS = {"total": "total", "ionic": "ionic", "electronic": "electronic", "static": "electronic"}

NAMES = {
    "elastic_tensor": Name("elastic-stiffness", "GPa", ""),
    "elastic_tensor_original": Name("elastic-stiffness", "GPa", ""),
    "stiffness_tensor": Name("elastic-stiffness", "GPa", ""),
    "elastic-stiffness": Name("elastic-stiffness", "GPa", ""),
    "compliance_tensor": Name("elastic-compliance", "TPa^-1", ""),
    "elastic-compliance": Name("elastic-compliance", "TPa^-1", ""),
    "piezoelectric": Name("piezoelectric", "C/m^2", ""),
    "piezoelectric_tensor": Name("piezoelectric", "C/m^2", ""),
    "piezoelectric-stress": Name("piezoelectric-stress", "C/m^2", ""),
    "piezo_tensor": Name("piezoelectric-stress", "C/m^2", ""),
    "piezo_ionic_tensor": Name("piezoelectric-stress", "C/m^2", "ionic"),
    "dielectric": Name("dielectric", "1", ""),
    "dielectric-electronic": Name("dielectric", "1", "electronic"),
    "dielectric-ionic": Name("dielectric", "1", "ionic"),
    "dielectric-total": Name("dielectric", "1", "total"),
    "dielectric_tensor": Name("dielectric", "1", ""),
    "epsilon_static": Name("dielectric", "1", "electronic"),
    "epsilon_ionic": Name("dielectric", "1", "ionic"),
    "poly_electronic": Name("dielectric", "1", "electronic"),
    "born": Name("born-charge", "e", ""),
    "born_charges": Name("born-charge", "e", ""),
    "born_effective_charges": Name("born-charge", "e", ""),
}
"""Keys of public databases and of the sets published with papers (common practice); voigt order is the handbook's."""

_GROUPS = {
    "dielectric": Name("dielectric", "1", ""),
    "piezo": Name("piezoelectric-stress", "C/m^2", ""),
    "piezoelectric": Name("piezoelectric-stress", "C/m^2", ""),
}
"""Keys under which ``total``, ``ionic`` and ``electronic`` stand."""

LEFT_OUT = ("elastic-stiffness-turned", "elastic_tensor_ieee", "ieee_format", "ieee_format_tensor")
"""Tensors turned to axes that the document does not state."""


def read_json_document(document: Any, source: str) -> OutputFile:
    """Return structure and tensors of a document.

    Parameters
    ----------
    document : object
        What `tensorsym.outputs.tensor_file.parsed_json` returns.
    source : str
        File, for messages.

    Raises
    ------
    OutputFileError
        If a tensor is damaged.
    StructureError
        If a structure is there and damaged.
    """
    notes: list[str] = []
    records = []
    for key, name, node in _tensors_in(document, 0, notes):
        try:
            records.append(_record(key, name, node))
        except TensorsymError as error:
            raise OutputFileError(
                error.message, where=f"{source}, {key}", expected=error.expected, nearest=error.nearest, hint=error.hint
            ) from error
    crystal = _crystal(document, source)
    if crystal is None and not records:
        raise OutputFileError(
            "holds no tensor and no structure that is known", where=source, expected=f"keys such as {', '.join(NAMES)}"
        )
    return OutputFile(crystal, tuple(records), FORMAT, tuple(notes))


def _crystal(document: Any, source: str) -> Crystal | None:
    return crystal_in_document(document, source) if _holds_structure(document, 0) else None


def _holds_structure(node: Any, depth: int) -> bool:
    if depth > DEEPEST:
        return False
    if isinstance(node, dict):
        if isinstance(node.get("poscar"), str) or (isinstance(node.get("sites"), list) and "lattice" in node):
            return True
        return any(_holds_structure(child, depth + 1) for child in node.values())
    return isinstance(node, list) and any(_holds_structure(child, depth + 1) for child in node[:3])


def _tensors_in(node: Any, depth: int, notes: list[str]) -> Iterator[tuple[str, Name, Any]]:
    """Yield key, meaning and value of what a document holds under known names."""
    if depth > DEEPEST or not isinstance(node, dict):
        return
    for key, child in node.items():
        if key in LEFT_OUT:
            notes.append(f"{key} is left out: the axes that it was turned to are not stated")
        elif key in _GROUPS and isinstance(child, dict) and "values" not in child:
            for part, contribution in _PARTS.items():
                if isinstance(child.get(part), list):
                    yield f"{key}.{part}", _GROUPS[key]._replace(contribution=contribution), child[part]
        elif key in NAMES and (isinstance(child, list) or (isinstance(child, dict) and "values" in child)):
            yield key, NAMES[key], child
        elif key != "structure":
            yield from _tensors_in(child, depth + 1, notes)


def _record(key: str, name: Name, node: Any) -> TensorRecord:
    stated = node if isinstance(node, dict) else {}
    values = stated.get("values", node)
    row, unit, notes = property_in_unit(name.property, str(stated.get("unit") or name.unit))
    array = array_of(values, "values")
    order = str(stated.get("order") or VOIGT_ORDER)
    matrix, full = matrix_shape(row.kind), (3,) * row.kind.rank
    in_pairs = array.shape == matrix and matrix != full
    if in_pairs:
        tensor = from_matrix(array, row.kind, row.factors, order)
    elif array.shape == full or (row.site and array.shape[1:] == full):
        tensor = array
    else:
        msg = f"values of shape {array.shape} do not fit {row.name}"
        raise OutputFileError(msg, expected=f"shape {matrix} or {full}")
    return TensorRecord(
        row.name,
        key,
        np.asarray(tensor),
        unit,
        order=order if in_pairs else "",
        digits=typical_place(decimals_in(values)),
        per_site=tensor.ndim > row.kind.rank,
        contribution=name.contribution,
        complete=name.contribution != "ionic",
        notes=notes,
    )
