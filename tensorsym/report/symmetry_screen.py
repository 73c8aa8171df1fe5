"""The symmetry of a structure as text and JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from tensorsym.crystal.axes import axes_for
from tensorsym.crystal.directions import direction_namer
from tensorsym.groups.placement import elements_in_words
from tensorsym.report.allowed_json import axes_document, group_document
from tensorsym.report.tables import paragraph

if TYPE_CHECKING:
    from tensorsym.crystal.crystal import Crystal


def symmetry_text(crystal: Crystal) -> str:
    """Return the screen: groups, axes, sites, ladder, warnings."""
    symmetry, group = crystal.symmetry, crystal.symmetry.group
    lines = [
        f"{crystal.title}   {len(crystal.species)} atoms   {crystal.format}",
        (
            f"space group {symmetry.international} ({symmetry.number})   class {group.hermann_mauguin} "
            f"({group.schoenflies}), order {group.order}, {group.system}"
        ),
        paragraph("axes:", [axes_for(crystal, "file").words]),
        paragraph("     ", [_elements(crystal)]),
        "",
        "site        atoms  Wyckoff  site symmetry  class",
    ]
    lines += [
        f"{site.label:<12}{len(site.atoms):>5}  {site.wyckoff:<7}  {site.oriented_symbol:<13}  {site.site_group}"
        for site in crystal.sites
    ]
    lines += ["", "tolerance (angstrom)  space group"]
    lines += [
        f"{step.symprec:<20g}  {step.international} ({step.number})"
        if step.number
        else f"{step.symprec:<20g}  none found"
        for step in crystal.ladder
    ]
    notes = [paragraph("Note:", [note]) for note in (*crystal.notes, *crystal.symmetry_warnings)]
    return "\n".join([*lines, *([""] if notes else []), *notes])


def symmetry_document(crystal: Crystal) -> dict[str, Any]:
    """Return the document, schema ``tensorsym/symmetry/1``."""
    symmetry = crystal.symmetry
    return {
        "schema": "tensorsym/symmetry/1",
        "title": crystal.title,
        "source": crystal.source,
        "format": crystal.format,
        "atoms": len(crystal.species),
        "point_group": symmetry.group.hermann_mauguin,
        "schoenflies": symmetry.group.schoenflies,
        "group": group_document(symmetry.group),
        "space_group": symmetry.international,
        "number": symmetry.number,
        "symprec": symmetry.symprec,
        "axes": axes_document(axes_for(crystal, "file"), _elements(crystal)),
        "frame": symmetry.frame.tolist(),
        "lattice": crystal.lattice.tolist(),
        "sites": [
            {
                "label": site.label,
                "species": site.species,
                "atoms": [atom + 1 for atom in site.atoms],
                "wyckoff": site.wyckoff,
                "site_symmetry": site.oriented_symbol,
                "site_group": site.site_group,
            }
            for site in crystal.sites
        ],
        "ladder": [
            {
                "symprec": step.symprec,
                "number": step.number,
                "space_group": step.international,
                "point_group": step.point_group,
            }
            for step in crystal.ladder
        ],
        "notes": [*crystal.notes, *crystal.symmetry_warnings],
    }


def _elements(crystal: Crystal) -> str:
    symmetry = crystal.symmetry
    return elements_in_words(symmetry.group, tuple(map(tuple, symmetry.frame.T.tolist())), direction_namer(crystal))
