"""A file, or a structure and a tensor file, held against symmetry: every tensor in it gets a verdict."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

from tensorsym.crystal.axes import axes_for
from tensorsym.crystal.directions import direction_namer
from tensorsym.crystal.read import read
from tensorsym.errors import OutputFileError, UsageError
from tensorsym.groups.placement import elements_in_words
from tensorsym.outputs.read import read_output, read_tensors
from tensorsym.tasks.check import TensorVerdict, check_tensor, file_axes
from tensorsym.tasks.check_sites import SiteVerdict, check_site_tensors
from tensorsym.tasks.demands import statements_on
from tensorsym.tensors.axes import Axes, axes_from_matrix

if TYPE_CHECKING:
    from collections.abc import Sequence
    from os import PathLike

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.outputs.record import TensorRecord
    from tensorsym.tasks.diagnose.blind import BlindSpot
    from tensorsym.tasks.diagnose.diagnosis import Diagnosis


@dataclass(frozen=True, eq=False)
class CheckReport:
    """The verdicts on all tensors of a file."""

    crystal: Crystal
    """The structure they were held against."""
    source: str
    """The file that the tensors came from."""
    format: str
    """Its format, in words."""
    axes: Axes
    """The Cartesian axes of the structure."""
    verdicts: tuple[TensorVerdict | SiteVerdict, ...]
    """One a tensor, in the order of the file."""
    notes: tuple[str, ...]
    """What the reader has to know."""

    @cached_property
    def diagnoses(self) -> dict[int, Diagnosis]:
        """What may be wrong with each inconsistent tensor (not of a site), by its number in `verdicts`."""
        from tensorsym.tasks.diagnose.diagnosis import diagnose

        return {
            number: diagnose(verdict, self.crystal)
            for number, verdict in enumerate(self.verdicts)
            if isinstance(verdict, TensorVerdict) and not verdict.is_consistent
        }

    @cached_property
    def blind_spots(self) -> dict[int, tuple[BlindSpot, ...]]:
        """What a clean verdict does not exclude, by the number of the tensor in `verdicts`."""
        from tensorsym.tasks.diagnose.blind import blind_spots
        from tensorsym.tasks.diagnose.named_axes import named_axes

        named = named_axes(self.crystal)
        return {
            number: blind_spots(verdict, named)
            for number, verdict in enumerate(self.verdicts)
            if isinstance(verdict, TensorVerdict) and verdict.is_consistent
        }

    def __repr__(self) -> str:
        """Return one line."""
        return f"CheckReport({self.source}, {self.verdict}, {len(self.verdicts)} tensors)"

    @property
    def verdict(self) -> str:
        """``inconsistent`` if any tensor is, else ``consistent``."""
        return "consistent" if all(verdict.is_consistent for verdict in self.verdicts) else "inconsistent"

    def fails(self, on: str) -> bool:
        """Tell whether the file fails on ``inconsistent``, ``unstable`` (a demand of physics broken) or ``any``."""
        broken = any(not item.holds for verdict in self.verdicts for item in statements_on(verdict))
        wrong = self.verdict == "inconsistent"
        return {"inconsistent": wrong, "unstable": broken, "any": wrong or broken}[on]

    @property
    def elements_in_words(self) -> str:
        """Where the symmetry elements lie in the structure's axes."""
        symmetry = self.crystal.symmetry
        turn = tuple(map(tuple, symmetry.frame.T.tolist()))
        return elements_in_words(symmetry.group, turn, direction_namer(self.crystal))


def check_file(
    path: str | PathLike[str],
    tensor_path: str | PathLike[str] | None = None,
    *,
    property: str | None = None,
    order: str | None = None,
    axes: str | None = None,
    unit: str | None = None,
    sigma: float | None = None,
    tolerance: float | None = None,
    symprec: float = 1e-3,
    reader: str | None = None,
) -> CheckReport:
    """Return the verdicts on the tensors of a file.

    Parameters
    ----------
    path : path-like
        An output that holds structure and tensors, or a structure file when `tensor_path` is given.
    tensor_path : path-like, optional
        A tensor file in our JSON form, or a bare matrix of numbers in text.
    property : str, optional
        Name of the property of a bare matrix; with an output, check only this property.
    order : str, optional
        Order of the index pairs of a bare matrix.
    axes : str, optional
        Axes of the numbers, in place of those that the file states.
    unit : str, optional
        Unit of a bare matrix.
    sigma : float, optional
        Standard deviation of every component, in place of what the file states.
    tolerance : float, optional
        Relative residual to accept.
    symprec : float
        Distance in angstrom within which atoms count as equivalent.
    reader : str, optional
        Name of the reader of the output, in place of the one that the content asks for.

    Raises
    ------
    InputError
        If a file cannot be read, or holds no structure or no tensor.
    """
    if tensor_path is None:
        output = read_output(path, symprec=symprec, reader=reader)
        crystal, records, form, notes = output.crystal, output.tensors, output.format, output.notes
        if crystal is None:
            raise OutputFileError("holds no structure", where=str(path), hint="give the structure file first")
    else:
        crystal = read(path, symprec=symprec)
        records = read_tensors(tensor_path, property=property, order=order, unit=unit, crystal=crystal, reader=reader)
        form, notes = "tensor file", ()
    chosen = _chosen(records, property, str(tensor_path or path))
    verdicts = tuple(_verdict(crystal, record, axes, sigma, tolerance) for record in chosen)
    told = (*notes, *crystal.notes, *crystal.symmetry_warnings)
    return CheckReport(crystal, str(tensor_path or path), form, file_axes(crystal), verdicts, told)


def _chosen(records: Sequence[TensorRecord], property: str | None, where: str) -> Sequence[TensorRecord]:
    if not records:
        raise OutputFileError(
            "holds no tensor", where=where, expected="an output with tensors, or a second file with them"
        )
    if property is None:
        return records
    from tensorsym.catalog.properties import property_named

    row = property_named(property)
    family = row.name.split("-")[0]
    chosen = [record for record in records if record.property == row.name]
    # A family name such as piezoelectric takes the members that the file holds.
    chosen = chosen or [record for record in records if record.property.split("-")[0] == family == row.name]
    if not chosen:
        held = ", ".join(dict.fromkeys(record.property for record in records))
        msg = f"no tensor of {row.name} in {where}"
        raise UsageError(msg, expected=f"one of those it holds: {held}")
    return chosen


def _verdict(
    crystal: Crystal, record: TensorRecord, axes: str | None, sigma: float | None, tolerance: float | None
) -> TensorVerdict | SiteVerdict:
    from tensorsym.catalog.properties import property_named

    row = property_named(record.property)
    placed = axes_for(crystal, axes) if axes else _stated_axes(crystal, record)
    if record.per_site:
        return check_site_tensors(
            crystal,
            record.values,
            row,
            axes=placed,
            unit=record.unit,
            digits=record.digits,
            sigma=sigma,
            tolerance=tolerance,
            label=record.label,
            notes=record.notes,
        )
    return check_tensor(
        crystal,
        record.values,
        row,
        axes=placed,
        unit=record.unit,
        digits=record.digits,
        sigma=record.sigma if sigma is None else sigma,
        tolerance=tolerance,
        label=record.label,
        notes=record.notes,
    )


def _stated_axes(crystal: Crystal, record: TensorRecord) -> Axes:
    if record.axes is None:
        return file_axes(crystal)
    return axes_from_matrix("tensor file", record.axes, "axes given by a matrix in the tensor file")
