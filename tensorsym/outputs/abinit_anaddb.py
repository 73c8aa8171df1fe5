"""The tensors that anaddb of ABINIT prints (layout of version 9.6); the text holds the cell, but no atoms.

Strains and stresses run in the handbook's order. Piezoelectric tables have six rows of strain and three columns of the
field. Born charges have rows for the displacement and columns for the field: they are handed on transposed.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from tensorsym.catalog.properties import property_named
from tensorsym.outputs.abinit_netcdf import STRESSED
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import Lines
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix

if TYPE_CHECKING:
    from tensorsym.outputs.content import Content

FORMAT = "anaddb output of ABINIT"

NO_ATOMS = "the text holds no atoms: give the structure file first, its cell as printed here"


class Title(NamedTuple):
    """One kind of table."""

    pattern: str
    """Regular expression found in the title line."""
    property: str
    """Name in the catalogue."""
    unit: str
    """Unit of the record."""
    scale: float
    """What the printed numbers are multiplied by to stand in `unit`: a power of ten, or 1."""


TITLES = (
    Title(r"Electronic dielectric tensor", "dielectric", "1", 1.0),
    Title(r"Relaxed ion dielectric tensor", "dielectric", "1", 1.0),
    Title(r"Elastic Tensor \(", "elastic-stiffness", "GPa", 100.0),
    Title(r"Compliance Tensor \(", "elastic-compliance", "GPa^-1", 0.01),
    Title(r"Proper piezoelectric constants \(", "piezoelectric-stress", "C/m^2", 1.0),
    Title(r"Piezoelectric d tensor \(", "piezoelectric", "pC/N", 1.0),
    Title(r"Piezoelectric g tensor \(", "piezoelectric-voltage", "m^2/C", 1.0),
    Title(r"Piezoelectric h tensor \(", "piezoelectric-stiffness", "GN/C", 1.0),
    Title(r"Non-linear optical coefficients d \(pm/V\)", "second-harmonic", "pm/V", 1.0),
    Title(r"Total EO tensor \(pm/V\)", "pockels", "pm/V", 1.0),
)  # fmt: skip

_COMPILED = tuple((re.compile(title.pattern), title) for title in TITLES)
_CHARGES = re.compile(r"Effective charge tensors after|Effective charge tensors before")
_INTERNAL = re.compile(r"Force-response internal strain tensor")
_RAMAN = re.compile(r"First-order change in the electronic dielectric")


def looks_like_anaddb(head: str) -> bool:
    """Tell the output by the name of the program in its first lines."""
    return re.search(r"Version \S+ +of ANADDB", head[:2000]) is not None


def read_anaddb(content: Content) -> OutputFile:
    """Return the tensors of an anaddb output.

    Raises
    ------
    OutputFileError
        If a table is cut off or holds other words than numbers; the line is named.
    """
    lines = Lines(content.lines(), content.source)
    records: list[TensorRecord] = []
    finished = False
    for line in lines:
        record = _record_under(line, lines)
        if record is not None:
            records.append(record)
        finished |= "the run completed" in line
    notes = () if finished else ("the run did not finish: the file ends without its closing line",)
    return OutputFile(None, tuple(records), FORMAT, (NO_ATOMS, *notes))


def _record_under(line: str, lines: Lines) -> TensorRecord | None:
    title = next((title for pattern, title in _COMPILED if pattern.search(line)), None)
    if title is not None:
        return _tensor(title, line, lines)
    if _CHARGES.search(line):
        return _charges(lines)
    if _INTERNAL.search(line):
        return _internal_strain(lines)
    return _raman(lines) if _RAMAN.search(line) else None


def _tensor(title: Title, line: str, lines: Lines) -> TensorRecord:
    row = property_named(title.property)
    if row.kind.rank == 2:
        table = lines.table(3, 3, row.name)
        values, order = table.values, ""
    else:
        stands_upright = title.property not in ("elastic-stiffness", "elastic-compliance", "second-harmonic", "pockels")
        rows, columns = (3, 6) if title.property == "second-harmonic" else (6, 6 if row.kind.rank == 4 else 3)
        table = lines.table(rows, columns, row.name)
        matrix = table.values.T if stands_upright else table.values
        values, order = from_matrix(matrix, row.kind, row.factors, VOIGT_ORDER), VOIGT_ORDER
    clamped = "clamped" in line or "Electronic" in line or "Non-linear" in line
    return TensorRecord(
        row.name,
        _label(title, line),
        values * title.scale,
        title.unit,
        order=order,
        digits=table.digits * title.scale,
        line=table.line,
        contribution="electronic" if clamped else "total",
        notes=(STRESSED,) if "stress" in line and row.kind.rank == 4 else (),
    )


def _label(title: Title, line: str) -> str:
    """Return the words in parentheses that say which tensor it is."""
    if title.property == "dielectric":
        return "electronic, clamped ion" if "Electronic" in line else "relaxed ion"
    found = re.search(r"\(((?:clamped|relaxed)[^)]*)\)", line)
    if found is None:
        return ""
    fixed = ", fixed electric field" if title.property.startswith("elastic") else ""
    return f"{found[1]}{fixed}"


def _charges(lines: Lines) -> TensorRecord | None:
    lines.skip_to(r"^ *atom +displacement", "Born charges")
    rows = []
    first = lines.number + 1
    digits = 0.0
    for line in lines:
        if not re.match(r"^ +\d+ +\d+ ", line):
            break
        one = Lines([line], f"{lines.source}, line {lines.number}").table(1, 3, "Born charges", most_skipped=0)
        rows.append(one.values[0])
        digits = max(digits, one.digits)
    tensors = np.array(rows).reshape(-1, 3, 3) if rows and len(rows) % 3 == 0 else None
    if tensors is None:
        raise lines.cut_off("Born charges", len(rows))
    return TensorRecord(
        "born-charge",
        "after charge neutrality; rows field, columns displacement (transposed)",
        tensors.transpose(0, 2, 1),
        "e",
        digits=digits,
        line=first,
        per_site=True,
        site_labels=tuple(str(number) for number in range(1, len(tensors) + 1)),
    )


def _internal_strain(lines: Lines) -> TensorRecord:
    lines.skip_to(r"Atom +dir +strainxx", "internal strain")
    row = property_named("internal-strain")
    tables = []
    first = lines.number + 1
    for line in lines:
        if not re.match(r"^ +\d+ +[xyz] ", line):
            break
        one = Lines([line], f"{lines.source}, line {lines.number}")
        tables.append(one.table(1, 6, "internal strain", most_skipped=0))
    if not tables or len(tables) % 3:
        raise lines.cut_off("internal strain", len(tables))
    matrices = np.array([table.values[0] for table in tables]).reshape(-1, 3, 6)
    return TensorRecord(
        row.name,
        "force response",
        np.array([from_matrix(matrix, row.kind, row.factors, VOIGT_ORDER) for matrix in matrices]),
        "hartree/bohr",
        order=VOIGT_ORDER,
        digits=max(table.digits for table in tables),
        line=first,
        per_site=True,
        site_labels=tuple(str(number) for number in range(1, len(matrices) + 1)),
    )


def _raman(lines: Lines) -> TensorRecord:
    lines.skip_to(r"^ *atom +displacement", "the Raman tensors")
    tables = []
    for line in lines:
        words = line.split()
        if len(words) == 5 and words[0].isdigit():
            head = Lines([line], f"{lines.source}, line {lines.number}").table(1, 3, "a Raman tensor", most_skipped=0)
            rest = lines.table(2, 3, "a Raman tensor", most_skipped=0)
            tables.append((np.vstack([head.values, rest.values]), max(head.digits, rest.digits), rest.line - 1))
        elif words:
            break
    if not tables or len(tables) % 3:
        raise lines.cut_off("the Raman tensors", len(tables))
    return TensorRecord(
        "raman-atomic",
        "susceptibility under displacement, first index displacement, sum over atoms made zero",
        np.array([values for values, _, _ in tables]).reshape(-1, 3, 3, 3),
        "bohr^-1",
        digits=tables[0][1],
        line=tables[0][2],
        per_site=True,
        site_labels=tuple(str(number + 1) for number in range(len(tables) // 3)),
    )
