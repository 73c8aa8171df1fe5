"""Symmetrised tensors handed back as a tensor file."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from tensorsym.outputs.record import TensorRecord
from tensorsym.outputs.tensor_file import tensor_document, write_document

if TYPE_CHECKING:
    from os import PathLike

    from tensorsym.tasks.check import TensorVerdict
    from tensorsym.tasks.check_file import CheckReport
    from tensorsym.tasks.check_sites import SiteVerdict


def write_symmetrised(report: CheckReport, path: str | PathLike[str], *, force: bool = False) -> None:
    """Write the symmetrised tensors of a check, each with a record of what was done; one document, or a list of them.

    Raises
    ------
    TensorFileError
        If the file exists and `force` is not set, or cannot be written.
    """
    documents = [_document(report, verdict) for verdict in report.verdicts]
    write_document(documents[0] if len(documents) == 1 else documents, path, force=force)


def _document(report: CheckReport, verdict: TensorVerdict | SiteVerdict) -> dict[str, Any]:
    same_axes = verdict.axes.name == "file"
    record = TensorRecord(
        verdict.row.name,
        verdict.label,
        verdict.symmetrised,
        verdict.unit,
        axes=None if same_axes else verdict.axes.matrix,
    )
    symmetry = report.crystal.symmetry
    done = {
        "done": "projected onto the tensors that the class allows",
        "source": report.source,
        "structure": report.crystal.source,
        "space_group": symmetry.number,
        "class": symmetry.group.hermann_mauguin,
        "symprec": symmetry.symprec,
        "residual_before": verdict.residual,
        "axes": verdict.axes.words,
    }
    return tensor_document(record, done)
