"""The verdicts of a check as a screen of text."""

from __future__ import annotations

from typing import TYPE_CHECKING

from tensorsym.report.numbers import residual, short
from tensorsym.report.tables import paragraph
from tensorsym.tasks.demands import statements_on

if TYPE_CHECKING:
    from tensorsym.tasks.check import Offence, TensorVerdict
    from tensorsym.tasks.check_file import CheckReport
    from tensorsym.tasks.check_many import CheckedFile
    from tensorsym.tasks.check_sites import SiteVerdict
    from tensorsym.tasks.diagnose.diagnosis import Diagnosis

WORDS = {
    "consistent": "consistent",
    "inconsistent": "NOT CONSISTENT",
    "unconstrained": "nothing to hold it to: the class leaves every component free",
}


def check_text(report: CheckReport) -> str:
    """Return the screen of a check: the crystal, then each tensor with its verdict and its worst components."""
    symmetry = report.crystal.symmetry
    group = symmetry.group
    lines = [
        (
            f"{report.crystal.title}   {symmetry.international} ({symmetry.number})   "
            f"class {group.hermann_mauguin} ({group.schoenflies}), order {group.order}"
        ),
        paragraph("axes:", [report.axes.words]),
        paragraph("     ", [report.elements_in_words]),
    ]
    lines += [paragraph("Note:", [note]) for note in report.notes]
    return "\n\n".join(["\n".join(lines), *_verdicts(report), _summary(report)])


def summary_line(checked: CheckedFile) -> str:
    """Return one line for a file of many: its verdict, and what is worst in it."""
    if checked.report is None:
        reason = str(checked.error).removeprefix(f"{checked.source}: ")
        return f"{checked.source}: not checked: {reason}"
    report = checked.report
    bad = [number for number, verdict in enumerate(report.verdicts) if not verdict.is_consistent]
    count = len(report.verdicts)
    if not bad:
        return f"{checked.source}: consistent, {count} {'tensor' if count == 1 else 'tensors'}"
    worst = max(bad, key=lambda number: report.verdicts[number].residual)
    cause = report.diagnoses[worst].explanations[0].kind if worst in report.diagnoses else "site"
    verdict = report.verdicts[worst]
    return (
        f"{checked.source}: NOT CONSISTENT, {len(bad)} of {count}, worst {verdict.row.name} "
        f"{residual(verdict.residual)} ({cause})"
    )


def _verdicts(report: CheckReport) -> list[str]:
    parts = []
    for number, verdict in enumerate(report.verdicts):
        lines = [verdict_text(verdict)]
        if number in report.diagnoses:
            lines += _explanations(report.diagnoses[number])
        elif report.blind_spots.get(number):
            lines.append(paragraph("    blind here:", [spot.sentence for spot in report.blind_spots[number]], "; "))
        parts.append("\n".join(lines))
    return parts


def _explanations(diagnosis: Diagnosis) -> list[str]:
    """Return the explanations, numbered, the most likely first; of two that cannot be told apart it says so."""
    lines = []
    for number, explanation in enumerate(diagnosis.explanations, 1):
        head = "most likely" if number == 1 and not diagnosis.is_ambiguous else "possible"
        lines.append(paragraph(f"  {number} {head}:", [explanation.sentence]))
        after = residual(explanation.residual_after)
        lines.append(paragraph("      ", [f"residual {after} then; {explanation.change}"]))
    if diagnosis.is_ambiguous:
        lines.append("    the first explanations cannot be told apart by symmetry")
    if diagnosis.kept:
        lines.append(
            paragraph("    kept:", list(dict.fromkeys(item.operation for item in diagnosis.kept))[:MOST_LISTED])
        )
    if diagnosis.broken:
        broken = [f"{item.operation} ({residual(item.residual)})" for item in diagnosis.broken]
        lines.append(paragraph("    broken:", list(dict.fromkeys(broken))[:MOST_LISTED]))
    return lines


MOST_LISTED = 8
"""Operations listed as kept or broken."""


def verdict_text(verdict: TensorVerdict | SiteVerdict) -> str:
    """Return the paragraph of one tensor."""
    name = f"{verdict.row.name}, {verdict.label}" if verdict.label else verdict.row.name
    lines = [
        f"{name}     {WORDS[verdict.verdict]}",
        (
            f"    residual {residual(verdict.residual)}, size {_sized(verdict.size, verdict.unit)}, "
            f"threshold {residual(verdict.threshold.relative)} ({verdict.threshold.source})"
        ),
    ]
    if verdict.verdict == "inconsistent":
        lines += [_offence(offence, verdict.unit) for offence in verdict.worst]
    for statement in statements_on(verdict):
        lines.append(paragraph("    physics:" if statement.holds else "    PHYSICS BROKEN:", [statement.sentence]))
    lines += [paragraph("    note:", [note]) for note in verdict.notes]
    return "\n".join(lines)


def _offence(offence: Offence, unit: str) -> str:
    rule = "must vanish" if offence.rule == "0" else f"must equal {offence.rule}"
    if offence.rule == offence.component:
        rule = "is tied to others"
    return paragraph(
        f"    {offence.component} = {short(offence.value)}",
        [
            f"{rule}: allowed {_sized(offence.allowed_value, unit)}",
            f"changed by {short(offence.change)} under {offence.operation}",
        ],
    )


def _sized(value: float, unit: str) -> str:
    return short(value) if unit in ("", "1") else f"{short(value)} {unit}"


def _summary(report: CheckReport) -> str:
    bad = sum(verdict.verdict == "inconsistent" for verdict in report.verdicts)
    total = len(report.verdicts)
    noun = "tensor" if total == 1 else "tensors"
    if not bad:
        return f"{total} {noun}, all consistent with the symmetry."
    return f"{bad} of {total} {noun} not consistent with the symmetry."
