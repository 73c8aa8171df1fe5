"""The verdicts of a check as one JSON document."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from tensorsym.report.allowed_json import axes_document, group_document, structure_document
from tensorsym.tasks.demands import statements_on

if TYPE_CHECKING:
    from collections.abc import Sequence

    from tensorsym.tasks.check import TensorVerdict
    from tensorsym.tasks.check_file import CheckReport
    from tensorsym.tasks.check_many import CheckedFile
    from tensorsym.tasks.check_sites import SiteVerdict


def check_document(report: CheckReport) -> dict[str, Any]:
    """Return the document, schema ``tensorsym/check/1``."""
    return {
        "schema": "tensorsym/check/1",
        "source": report.source,
        "format": report.format,
        "structure": structure_document(report.crystal),
        "group": group_document(report.crystal.symmetry.group),
        "axes": axes_document(report.axes, report.elements_in_words),
        "verdict": report.verdict,
        "tensors": [
            verdict_document(verdict) | _diagnosis(report, number) for number, verdict in enumerate(report.verdicts)
        ],
        "notes": list(report.notes),
    }


def checks_document(files: Sequence[CheckedFile]) -> dict[str, Any]:
    """Return the document of many files, schema ``tensorsym/checks/1``."""
    return {
        "schema": "tensorsym/checks/1",
        "files": [
            check_document(checked.report)
            if checked.report is not None
            else {"schema": "tensorsym/check/1", "source": checked.source, "error": str(checked.error)}
            for checked in files
        ],
    }


def _diagnosis(report: CheckReport, number: int) -> dict[str, Any]:
    """Return what may be wrong with an inconsistent tensor, or what a consistent one does not exclude."""
    diagnosis = report.diagnoses.get(number)
    spots = report.blind_spots.get(number, ())
    blind = {"blind_spots": [{"kind": spot.kind, "sentence": spot.sentence} for spot in spots]}
    if diagnosis is None:
        return blind
    return {
        "explanations": [
            {
                "kind": explanation.kind,
                "sentence": explanation.sentence,
                "change": explanation.change,
                "residual_before": explanation.residual_before,
                "residual_after": explanation.residual_after,
                "evidence": explanation.evidence,
                "axes": explanation.axes.matrix.tolist(),
            }
            for explanation in diagnosis.explanations
        ],
        "ambiguous": diagnosis.is_ambiguous,
        "kept": [{"operation": item.operation, "residual": item.residual} for item in diagnosis.kept],
        "broken": [{"operation": item.operation, "residual": item.residual} for item in diagnosis.broken],
    }


def verdict_document(verdict: TensorVerdict | SiteVerdict) -> dict[str, Any]:
    """Return the part of one tensor."""
    return {
        "property": verdict.row.name,
        "label": verdict.label,
        "verdict": verdict.verdict,
        "residual": verdict.residual,
        "size": verdict.size,
        "unit": verdict.unit,
        "threshold": verdict.threshold.relative,
        "threshold_source": verdict.threshold.source,
        "noise": verdict.threshold.absolute,
        "axes": axes_document(verdict.axes, verdict.elements_in_words),
        "worst": [
            {
                "component": offence.component,
                "value": offence.value,
                "allowed_value": offence.allowed_value,
                "rule": offence.rule,
                "operation": offence.operation,
                "change": offence.change,
            }
            for offence in verdict.worst
        ],
        "certificate": {
            "elimination": verdict.certificate.by_elimination,
            "characters": verdict.certificate.by_characters,
            "agree": verdict.certificate.agree,
        },
        "physics": [
            {"name": item.name, "holds": item.holds, "sentence": item.sentence, "value": item.value}
            for item in statements_on(verdict)
        ],
        "notes": list(verdict.notes),
    }
