"""The tensors of a VASP OUTCAR, read line by line; of several like tables the last one counts."""

from __future__ import annotations

import re
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.read import crystal_in_text
from tensorsym.errors import OutputFileError
from tensorsym.outputs.piezoelectric_noise import with_noise_of_two_printings
from tensorsym.outputs.record import OutputFile
from tensorsym.outputs.rows import Lines
from tensorsym.outputs.totals import with_totals
from tensorsym.outputs.vasp_site_tables import SiteTables
from tensorsym.outputs.vasp_tables import tensor_under, titled

if TYPE_CHECKING:
    from tensorsym.crystal.crystal import Crystal
    from tensorsym.outputs.content import Content
    from tensorsym.outputs.record import TensorRecord

FORMAT = "OUTCAR"

MOST_LINES_BEFORE = 2_000_000
"""The first geometry is looked for in this many lines."""

_OF_INTEREST = re.compile(r"TENSOR|MODULI|EFFECTIVE CHARGES|field gradients|General timing|^ vasp\.\d")
_GEOMETRY = re.compile(r"position of ions in fractional coordinates")
_COUNTS = re.compile(r"ions per type *= *([\d ]+)")


def looks_like_outcar(head: str) -> bool:
    """Tell an OUTCAR by its first line."""
    return re.match(r"\s*vasp\.\d", head) is not None


def read_vasp_outcar(content: Content) -> OutputFile:
    """Return structure and tensors of an OUTCAR.

    The structure is the first one printed: a calculation by finite differences ends on a displaced one.

    Raises
    ------
    InputError
        If lattice or positions are missing, a table is cut off or holds other words than numbers, or a second run
        follows; the line is named.
    """
    lines = Lines(content.lines(), content.source)
    crystal = _first_crystal(lines)
    sites = SiteTables(crystal.species)
    found: dict[tuple[str, str, str], TensorRecord] = {}
    finished = False
    for line in lines:
        if not _OF_INTEREST.search(line):
            continue
        if line.startswith(" vasp."):
            msg = "a second run begins here"
            raise OutputFileError(
                msg, where=f"{lines.source}, line {lines.number}", hint="give the output of one run at a time"
            )
        finished |= "General timing" in line
        title = titled(line)
        record = tensor_under(title, lines) if title else sites.record_under(line, lines)
        if record is not None:
            key = (record.property, record.label, record.unit)
            found[key] = _told_if_changed(record, found.get(key))
    sites.refuse_if_unfinished(lines)
    records = with_totals(with_noise_of_two_printings(tuple(found.values()), _volume(crystal)))
    notes = () if finished else ("the run did not finish: the file ends without its timings",)
    return OutputFile(crystal, records, FORMAT, notes)


def _first_crystal(lines: Lines) -> Crystal:
    """Return the crystal of the lines up to the end of the first geometry, which are taken."""
    head: list[str] = []
    counts = 0
    for line in lines:
        head.append(line)
        if found := _COUNTS.search(line):
            counts = sum(int(word) for word in found[1].split())
        if _GEOMETRY.search(line) or lines.number > MOST_LINES_BEFORE:
            break
    head += [line for _, line in zip(range(counts), lines, strict=False)]
    return crystal_in_text("\n".join(head) + "\n", lines.source)


def _told_if_changed(record: TensorRecord, earlier: TensorRecord | None) -> TensorRecord:
    """Add a note when an earlier table of the same title held other numbers."""
    if earlier is None or np.allclose(record.values, earlier.values, rtol=0.0, atol=1.5 * (record.digits or 0.0)):
        return record
    note = f"lines {earlier.line} and {record.line} print it with different numbers: the later ones are used"
    return replace(record, notes=(*record.notes, note))


def _volume(crystal: Crystal) -> float:
    return abs(float(np.linalg.det(crystal.lattice)))
