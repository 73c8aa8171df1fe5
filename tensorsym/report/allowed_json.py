"""The allowed form as one JSON document."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from tensorsym.groups.point_group import PointGroup
    from tensorsym.tasks.allowed import AllowedForm
    from tensorsym.tensors.axes import Axes


def allowed_document(form: AllowedForm) -> dict[str, Any]:
    """Return the document, schema ``tensorsym/allowed/1``."""
    return {
        "schema": "tensorsym/allowed/1",
        "property": form.row.name if form.row else None,
        "title": form.row.title if form.row else None,
        "law": form.law.text,
        "symbol": form.symbol,
        "unit": form.row.unit if form.row else None,
        "group": group_document(form.group),
        "structure": structure_document(form.crystal) if form.crystal else None,
        "axes": axes_document(form.axes, form.elements_in_words),
        "rank": form.kind.rank,
        "matrix_factors": list(form.factors),
        "independent": form.independent,
        "independent_components": list(form.independent_components),
        "relations": form.relations,
        "zero": list(form.zero),
        "zero_because": {element: list(names) for element, names in form.reasons.items()},
        "basis": form.basis().tolist(),
        "certificate": {
            "elimination": form.certificate.by_elimination,
            "characters": form.certificate.by_characters,
            "agree": form.certificate.agree,
        },
        "notes": list(form.notes),
        "cautions": list(form.row.cautions) if form.row else [],
        "source": form.row.source if form.row else None,
    }


def group_document(group: PointGroup) -> dict[str, Any]:
    """Return the part that names a class."""
    return {
        "hermann_mauguin": group.hermann_mauguin,
        "schoenflies": group.schoenflies,
        "order": group.order,
        "system": group.system,
        "setting": group.setting,
    }


def axes_document(axes: Axes | None, elements: str) -> dict[str, Any]:
    """Return the part that states axes: name, words, rows in the reference axes, where the elements lie."""
    return {
        "name": axes.name if axes else "standard",
        "words": axes.words if axes else "standard axes of the class",
        "matrix": axes.matrix.tolist() if axes else [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]],
        "elements": elements,
    }


def structure_document(crystal: Any) -> dict[str, Any]:
    """Return the part that names a crystal."""
    symmetry = crystal.symmetry
    return {
        "title": crystal.title,
        "source": crystal.source,
        "space_group": symmetry.international,
        "number": symmetry.number,
        "symprec": symmetry.symprec,
        "atoms": len(crystal.species),
    }
