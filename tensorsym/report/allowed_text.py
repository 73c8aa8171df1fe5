"""The allowed form as a screen of text."""

from __future__ import annotations

from typing import TYPE_CHECKING

from tensorsym.invariants.relations import combination_text
from tensorsym.report.tables import LARGEST_GRID, matrix_grids, paragraph
from tensorsym.tensors.notation import matrix_shape

if TYPE_CHECKING:
    from tensorsym.tasks.allowed import AllowedForm

LONGEST_LIST = 400
"""Lists of component names longer than this are counted, not printed."""


def allowed_text(form: AllowedForm) -> str:
    """Return the screen of an allowed form: what, for which crystal, in which axes, the form, why, how sure.

    Examples
    --------
    >>> from tensorsym.tasks.allowed import allowed
    >>> print(allowed_text(allowed("4mm", "pyroelectric")).splitlines()[-1])
    Two roads agree: elimination 1, characters 1.
    """
    parts = [_header(form), *_matrix(form), _counts(form)]
    return "\n\n".join(part for part in parts if part)


def _header(form: AllowedForm) -> str:
    title = form.row.title if form.row else "Property of the law"
    unit = form.row.unit if form.row else ""
    lines = [f"{title}     {form.law.text}     {unit}".rstrip()]
    group = f"class {form.group.hermann_mauguin} ({form.group.schoenflies}), order {form.group.order}"
    if form.group.setting != form.group.hermann_mauguin:
        group += f", setting {form.group.setting}"
    if form.crystal is not None:
        symmetry = form.crystal.symmetry
        group = f"{form.crystal.title}   {symmetry.international} ({symmetry.number})   {group}"
    lines.append(group)
    lines.append(paragraph("axes:", [form.axes_in_words]))
    lines.append(paragraph("     ", [form.elements_in_words]))
    return "\n".join(lines)


def _matrix(form: AllowedForm) -> list[str]:
    shape = matrix_shape(form.kind)
    size = 1
    for length in shape:
        size *= length
    if not form.independent or size >= LARGEST_GRID:
        return []
    grids = matrix_grids(form.kind, shape, lambda position: combination_text(form.entry(position)))
    if any(factor != 1 for factor in form.factors):
        grids.append(_factors(form))
    return grids


def _factors(form: AllowedForm) -> str:
    """Return how matrix entries follow from tensor components."""
    weights = [
        f"{factor} for each shear digit (4, 5, 6) of pair {number}"
        if len(form.factors) > 1
        else f"{factor} for a shear digit (4, 5, 6)"
        for number, factor in enumerate(form.factors, 1)
        if factor != 1
    ]
    return paragraph("matrix entry = tensor component times", weights)


def _counts(form: AllowedForm) -> str:
    lines = []
    if form.independent:
        lines.append(_listed(f"{form.independent} independent:", form.independent_components))
        tied = [f"{name} = {text}" for name, text in form.relations.items()]
        if tied:
            lines.append(_listed("Tied:", tied))
    else:
        lines.append(f"No component is allowed: {form.symbol} vanishes.")
    for element, names in form.reasons.items():
        because = "only by" if element.startswith("the elements") else "because of"
        lines.append(_listed(f"Zero {because} {element}:", names))
    if not form.reasons and form.zero:
        lines.append(f"Zero: {len(form.zero)} components.")
    if not form.zero:
        lines.append("No component must vanish.")
    lines += [paragraph("Note:", [note]) for note in form.notes]
    if form.row:
        lines += [paragraph("Caution:", [caution]) for caution in form.row.cautions]
    certificate = form.certificate
    verdict = "Two roads agree" if certificate.agree else "THE TWO ROADS DISAGREE, please report this"
    lines.append(f"{verdict}: elimination {certificate.by_elimination}, characters {certificate.by_characters}.")
    return "\n".join(lines)


def _listed(head: str, names: tuple[str, ...] | list[str]) -> str:
    return (
        paragraph(head, names) if len(names) <= LONGEST_LIST else f"{head} {len(names)} components (use --format json)"
    )
