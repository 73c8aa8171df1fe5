"""The tensors of a VASP OUTCAR. Its matrix order is XX YY ZZ XY YZ ZX (VASP manual; seen in real files)."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from tensorsym.catalog.properties import property_named
from tensorsym.crystal.read import crystal_in_text
from tensorsym.errors import OutputFileError
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.tensors.notation import from_matrix

if TYPE_CHECKING:
    from numpy.typing import NDArray

ORDER = "11 22 33 12 23 13"
"""Order of the index pairs in elastic and piezoelectric tables."""

ELEMENTARY = 16.02176634
"""C/m^2 of one elementary charge times angstrom per cubic angstrom (CODATA 2018)."""


class Table(NamedTuple):
    """One kind of table: how its heading begins, how many rows and columns, what it holds."""

    heading: str
    rows: int
    columns: int
    property: str
    label: str
    unit: str


_CLAMPED, _IONIC, _RAW = "electronic, clamped ion", "ionic contribution", "before the code symmetrised it"
_TABLES = (
    Table(r"MACROSCOPIC STATIC DIELECTRIC TENSOR IONIC", 3, 3, "dielectric", _IONIC, "1"),
    Table(r"MACROSCOPIC STATIC DIELECTRIC TENSOR", 3, 3, "dielectric", _CLAMPED, "1"),
    Table(r"PIEZOELECTRIC TENSOR IONIC CONTR.*C/m", 3, 6, "piezoelectric-stress", _IONIC, "C/m^2"),
    Table(r"PIEZOELECTRIC TENSOR +for.*e +Angst", 3, 6, "piezoelectric-stress", f"{_CLAMPED}, {_RAW}", "e angstrom"),
    Table(r"PIEZOELECTRIC TENSOR +for.*C/m", 3, 6, "piezoelectric-stress", _CLAMPED, "C/m^2"),
    Table(r"SYMMETRIZED ELASTIC MODULI", 6, 6, "elastic-stiffness", "clamped ion, symmetrised by the code", "kbar"),
    Table(r"ELASTIC MODULI (?:IONIC CONTR|CONTR FROM IONIC)", 6, 6, "elastic-stiffness", _IONIC, "kbar"),
    Table(r"TOTAL ELASTIC MODULI", 6, 6, "elastic-stiffness", "total, relaxed ion", "kbar"),
    Table(r"^ *ELASTIC MODULI", 6, 6, "elastic-stiffness", f"clamped ion, {_RAW}", "kbar"),
)
"""Headings are tried in this order, so the longer of two that begin alike stands first."""

_NUMBER = re.compile(r"[-+]?\d+\.\d*(?:[EeDd][-+]?\d+)?")
_LONGEST_HEAD = 6
_BORN = re.compile(r"BORN EFFECTIVE CHARGES")
_GRADIENT = re.compile(r"Electric field gradients \(V/A\^2\)")


def looks_like_outcar(text: str) -> bool:
    """Tell an OUTCAR by its first line."""
    return "vasp." in text[:200]


def read_vasp_outcar(text: str, source: str) -> OutputFile:
    """Return structure and tensors of an OUTCAR; of several like tables the last one counts.

    Raises
    ------
    OutputFileError
        If a table is cut off or holds asterisks or other words in place of numbers.
    """
    lines = text.splitlines()
    crystal = crystal_in_text(text, source)
    found: dict[tuple[str, str, str], TensorRecord] = {}
    for number, line in enumerate(lines):
        if "TENSOR" in line or "MODULI" in line:
            table = next((table for table in _TABLES if re.search(table.heading, line)), None)
            if table is not None and "FIELD DIRECTION" not in line:
                found[table.property, table.label, table.unit] = _tensor(lines, number, table, source)
        elif _BORN.search(line):
            found["born-charge", "", ""] = _born_charges(lines, number, len(crystal.species), source)
        elif _GRADIENT.search(line):
            found["efg", "", ""] = _gradients(lines, number, len(crystal.species), source)
    notes = () if "General timing and accounting" in text else ("the run did not finish: it ends without its timings",)
    volume = abs(float(np.linalg.det(crystal.lattice)))
    return OutputFile(crystal, tuple(_with_noise(found, volume)), "OUTCAR", notes)


def _tensor(lines: list[str], number: int, table: Table, source: str) -> TensorRecord:
    rows, begin = _rows(lines, number + 1, table.rows, table.columns, source)
    matrix = np.array([[float(word) for word in row] for row in rows])
    row = property_named(table.property)
    values = from_matrix(matrix, row.kind, row.factors, ORDER) if table.columns == 6 else matrix
    return TensorRecord(
        table.property,
        table.label,
        values,
        table.unit,
        order=ORDER if table.columns == 6 else "",
        digits=_last_place(rows),
        line=begin + 1,
    )


def _rows(lines: list[str], start: int, count: int, columns: int, source: str) -> tuple[list[list[str]], int]:
    """Return the words of the rows of numbers that follow, skipping rules and column heads."""
    place = start
    while place < len(lines) and place < start + _LONGEST_HEAD and not _NUMBER.search(lines[place]):
        if "*" in lines[place]:
            break
        place += 1
    rows = []
    for offset in range(count):
        if place + offset >= len(lines):
            msg = f"the table of line {start} is cut off after {offset} of {count} rows"
            raise OutputFileError(msg, where=source, hint="the run may not have finished")
        line = lines[place + offset]
        words = _NUMBER.findall(line)
        if len(words) != columns or "*" in line or "nan" in line.lower():
            msg = f"{line.strip()!r} is no row of {columns} numbers"
            raise OutputFileError(
                msg, where=f"{source}, line {place + offset + 1}", hint="the table may be cut off or overflown"
            )
        rows.append(words)
    return rows, place


def _born_charges(lines: list[str], number: int, atoms: int, source: str) -> TensorRecord:
    tensors, rows_seen = [], []
    place = number + 1
    for atom in range(atoms):
        while place < len(lines) and not re.match(rf"\s*ion\s+{atom + 1}\s*$", lines[place]):
            place += 1
            if place > number + 4 * atoms + 8:
                break
        rows, place = _rows(lines, place + 1, 3, 3, source)
        rows_seen += rows
        tensors.append([[float(word) for word in row] for row in rows])
        place += 3
    return TensorRecord(
        "born-charge",
        "rows field, columns displacement",
        np.array(tensors),
        "e",
        digits=_last_place(rows_seen),
        line=number + 2,
        per_site=True,
    )


def _gradients(lines: list[str], number: int, atoms: int, source: str) -> TensorRecord:
    rows, begin = _rows(lines, number + 1, atoms, 6, source)
    tensors = []
    for row in rows:
        xx, yy, zz, xy, xz, yz = (float(word) for word in row)
        tensors.append([[xx, xy, xz], [xy, yy, yz], [xz, yz, zz]])
    return TensorRecord(
        "efg",
        "",
        np.array(tensors),
        "V/angstrom^2",
        order="11 22 33 12 13 23",
        digits=_last_place(rows),
        line=begin + 1,
        per_site=True,
    )


def _last_place(rows: list[list[str]]) -> float:
    """Return the size of one unit in the last printed place, the coarsest of all words."""
    places = [len(re.split(r"[EeDd]", word)[0].partition(".")[2]) for row in rows for word in row]
    return 10.0 ** -min(places)


def _with_noise(found: dict[tuple[str, str, str], TensorRecord], volume: float) -> list[TensorRecord]:
    """Give the two printings of the piezoelectric tensor the difference between them as their noise."""
    from dataclasses import replace

    raw = next((record for record in found.values() if record.unit == "e angstrom"), None)
    mended = found.get(("piezoelectric-stress", _CLAMPED, "C/m^2"))
    if raw is None or mended is None:
        return list(found.values())
    scale = ELEMENTARY / volume
    difference: NDArray[np.float64] = raw.values * scale - mended.values
    sigma = math.sqrt(float((difference**2).mean()))
    sigma = max(sigma, 0.3 * (mended.digits or 0.0))
    note = "its noise is the difference of the two printings, before and after the code symmetrised them"
    replaced = {
        id(raw): replace(raw, sigma=sigma / scale, notes=(note,)),
        id(mended): replace(mended, sigma=sigma, notes=(note,)),
    }
    return [replaced.get(id(record), record) for record in found.values()]
