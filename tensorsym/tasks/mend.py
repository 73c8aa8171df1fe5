"""Symmetrised tensors handed back as a tensor file."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from tensorsym.errors import UsageError
from tensorsym.outputs.record import TensorRecord
from tensorsym.outputs.tensor_file import tensor_document, write_document
from tensorsym.tasks.check import check_tensor

if TYPE_CHECKING:
    from os import PathLike

    from tensorsym.tasks.check import TensorVerdict
    from tensorsym.tasks.check_file import CheckReport
    from tensorsym.tasks.check_sites import SiteVerdict
    from tensorsym.tasks.diagnose.diagnosis import Diagnosis
    from tensorsym.tasks.diagnose.explanation import Explanation


def write_symmetrised(
    report: CheckReport, path: str | PathLike[str], *, accept: int | None = None, force: bool = False
) -> None:
    """Write the symmetrised tensors of a check, each with a record of what was done; one document, or a list of them.

    Parameters
    ----------
    report : CheckReport
        The check.
    path : path-like
        Where to write.
    accept : int, optional
        Number, from 1, of the explanation to apply first to every inconsistent tensor.
    force : bool
        Replace an existing file.

    Raises
    ------
    UsageError
        If a tensor has no explanation of that number, or one that no other reading of the numbers mends.
    TensorFileError
        If the file exists and `force` is not set, or cannot be written.
    """
    documents = []
    for number, verdict in enumerate(report.verdicts):
        chosen, change = verdict, ""
        if accept is not None and number in report.diagnoses:
            explanation = _explanation(report.diagnoses[number], accept, verdict.row.name)
            chosen, change = _mended(report, verdict, explanation), explanation.change
        documents.append(_document(report, chosen, change, verdict.residual))
    write_document(documents[0] if len(documents) == 1 else documents, path, force=force)


_OTHER_READING = ("axes", "rotation", "matrix-order", "shear-factor", "transposed", "hand", "entry", "noise")
"""Causes that another reading of the numbers takes away; the others are about the structure."""


def _explanation(diagnosis: Diagnosis, number: int, name: str) -> Explanation:
    if not 1 <= number <= len(diagnosis.explanations):
        msg = f"{name} has no explanation {number}"
        raise UsageError(msg, expected=f"1 to {len(diagnosis.explanations)}")
    explanation = diagnosis.explanations[number - 1]
    if explanation.kind not in _OTHER_READING:
        msg = f"explanation {number} of {name} ({explanation.kind}) is about the structure, not about the numbers"
        raise UsageError(msg, hint=explanation.change)
    return explanation


def _mended(report: CheckReport, verdict: TensorVerdict | SiteVerdict, explanation: Explanation) -> TensorVerdict:
    return check_tensor(
        report.crystal,
        explanation.values,
        verdict.row,
        axes=explanation.axes,
        unit=verdict.unit,
        label=verdict.label,
    )


def _document(
    report: CheckReport, verdict: TensorVerdict | SiteVerdict, change: str, residual_before: float
) -> dict[str, Any]:
    same_axes = verdict.axes.name == "file"
    record = TensorRecord(
        verdict.row.name,
        verdict.label,
        verdict.symmetrised,
        verdict.unit,
        axes=None if same_axes else verdict.axes.matrix,
        per_site=verdict.symmetrised.ndim > verdict.row.kind.rank,
    )
    symmetry = report.crystal.symmetry
    steps = ([change] if change else []) + ["projected onto the tensors that the class allows"]
    done = {
        "steps": steps,
        "source": report.source,
        "structure": report.crystal.source,
        "space_group": symmetry.number,
        "class": symmetry.group.hermann_mauguin,
        "symprec": symmetry.symprec,
        "residual_before": residual_before,
        "residual_of_this_reading": verdict.residual,
        "axes": verdict.axes.words,
    }
    return tensor_document(record, done)
