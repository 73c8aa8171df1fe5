"""The tensors of a ph.x output of Quantum ESPRESSO: dielectric tensor, Born charges, Raman and electro-optic tensors.

The code symmetrises before it prints. Rows of the charges are the field (or polarisation), columns the displacement.
Layouts seen in files of versions 6.0 to 7.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.read import crystal_in_text
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import Lines, Table

if TYPE_CHECKING:
    from collections.abc import Callable

    from tensorsym.outputs.content import Content

FORMAT = "ph.x output of Quantum ESPRESSO"

FROM_FORCES = "from forces in a field; rows field, columns displacement"
FROM_POLARISATION = "from polarisation under displacement; rows polarisation, columns displacement"
ATOMIC_RAMAN = "susceptibility under displacement, first index displacement"
CHI2 = "derivative of the permittivity in a field, twice chi^2"

_OF_INTEREST = re.compile(r"in cartesian axis|JOB DONE|Raman tensor \(A\^2\)")
_CHARGES = re.compile(r"Effective charges \(d (Force / dE|P / du)\) in cartesian axis(.*)")


def looks_like_phonon_output(head: str) -> bool:
    """Tell an output of ph.x by the name of the program."""
    return "Program PHONON" in head[:5000]


def read_phonon_output(content: Content) -> OutputFile:
    """Return structure and tensors of a ph.x output; of like tensors the last one counts.

    Raises
    ------
    InputError
        If cell or positions are missing, or a table is cut off or holds other words than numbers.
    """
    crystal = crystal_in_text(content.text, content.source)
    labels = tuple(f"{number} {name}" for number, name in enumerate(crystal.species, 1))
    lines = Lines(content.text.splitlines(), content.source)
    found: dict[tuple[str, str, str], TensorRecord] = {}
    finished = False
    for line in lines:
        if _OF_INTEREST.search(line):
            finished |= "JOB DONE" in line
            record = _record_under(line, lines, labels)
            if record is not None:
                found[record.property, record.label, record.unit] = record
    notes = () if finished else ("the run did not finish: the file ends without its closing line",)
    return OutputFile(crystal, tuple(found.values()), FORMAT, notes)


def _record_under(line: str, lines: Lines, labels: tuple[str, ...]) -> TensorRecord | None:
    if charges := _CHARGES.search(line):
        label = FROM_FORCES if "Force" in charges[1] else FROM_POLARISATION
        if "asr" in charges[2]:
            label += ", before the sum rule" if "without" in charges[2] else ", after the sum rule"
        tables = matrices_under(lines, len(labels), 1, "Born charges", atom_heading)
        return site_record("born-charge", label, tables, (3, 3), "e", labels)
    if "Dielectric constant in cartesian axis" in line:
        table = lines.table(3, 3, "the dielectric tensor")
        return TensorRecord(
            "dielectric", "electronic", table.values, "1", digits=table.digits, line=table.line,
            contribution="electronic",
        )  # fmt: skip
    if "Raman tensor (au^-1) in cartesian axis" in line:
        tables = matrices_under(lines, len(labels), 3, "the Raman tensor", atom_heading)
        return site_record("raman-atomic", ATOMIC_RAMAN, tables, (3, 3, 3), "bohr^-1", labels)
    if "Raman tensor (A^2)" in line:
        tables = matrices_under(lines, 3 * len(labels), 1, "the Raman tensor", polarised_heading)
        return site_record("raman-atomic", f"{ATOMIC_RAMAN}, times the volume", tables, (3, 3, 3), "angstrom^2", labels)
    if "Electro-optic tensor in cartesian axis" in line:
        tables = [lines.table(3, 3, "the electro-optic tensor") for _ in range(3)]
        values = np.array([table.values for table in tables])
        return TensorRecord(
            "second-order-dielectric", CHI2, values, "Rydberg a.u.", digits=tables[0].digits, line=tables[0].line
        )
    return None


def site_record(
    name: str, label: str, tables: list[Table], shape: tuple[int, ...], unit: str, labels: tuple[str, ...]
) -> TensorRecord:
    """Return a record of one tensor an atom from tables that follow one another."""
    return TensorRecord(
        name,
        label,
        np.array([table.values for table in tables]).reshape(len(labels), *shape),
        unit,
        digits=max(table.digits for table in tables) or None,
        line=tables[0].line,
        per_site=True,
        site_labels=labels,
    )


def matrices_under(lines: Lines, blocks: int, tables: int, what: str, heading: Callable[[int], str]) -> list[Table]:
    """Return `tables` tables of 3 x 3 under each of `blocks` headings.

    Raises
    ------
    OutputFileError
        If a heading or a row is missing; the line is named.
    """
    found = []
    for block in range(blocks):
        lines.skip_to(heading(block), what)
        found += [lines.table(3, 3, what, most_skipped=2) for _ in range(tables)]
    return found


def atom_heading(block: int) -> str:
    """Return the pattern of the heading of an atom, counted from 0."""
    return rf"^ *atom +#? *{block + 1}(?!\d)"


def polarised_heading(block: int) -> str:
    """Return the pattern of the heading of an atom and a direction of its displacement, both counted together."""
    return rf"^ *atom +# +{block // 3 + 1} +pol\. +{block % 3 + 1}(?!\d)"
