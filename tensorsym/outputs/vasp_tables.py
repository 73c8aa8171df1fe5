"""Tables of a VASP OUTCAR that hold one tensor of the crystal.

The order of their index pairs is XX YY ZZ XY YZ ZX (seen in files of VASP 5.3 to 5.4), shear columns carry no factor.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, NamedTuple

from tensorsym.catalog.properties import property_named
from tensorsym.outputs.record import TensorRecord
from tensorsym.tensors.notation import from_matrix

if TYPE_CHECKING:
    from tensorsym.outputs.rows import Lines

ORDER = "11 22 33 12 23 13"
"""Order of the index pairs in elastic and piezoelectric tables."""

CLAMPED = "electronic, clamped ion"
IONIC = "ionic contribution"
RELAXED = "total, relaxed ion"
RAW = "before the code symmetrised it"


class Title(NamedTuple):
    """One kind of table: its title line, and what stands below it."""

    pattern: str
    """Regular expression found in the title line."""
    rows: int
    """Number of rows."""
    columns: int
    """Number of columns."""
    property: str
    """Name in the catalogue."""
    label: str
    """Which tensor it is."""
    unit: str
    """Unit as printed, in the spelling of the catalogue."""
    contribution: str
    """``electronic``, ``ionic`` or ``total``."""


_RPA = f"{CLAMPED}, local fields in RPA"
_NO_FIELDS = f"{CLAMPED}, without local fields"
_CLAMPED_STIFFNESS, _RAW_STIFFNESS = "clamped ion, symmetrised by the code", f"clamped ion, {RAW}"

TITLES = (
    Title(r"MACROSCOPIC STATIC DIELECTRIC TENSOR IONIC", 3, 3, "dielectric", IONIC, "1", "ionic"),
    Title(r"MACROSCOPIC STATIC DIELECTRIC TENSOR.*RPA", 3, 3, "dielectric", _RPA, "1", "electronic"),
    Title(r"MACROSCOPIC STATIC DIELECTRIC TENSOR.*excluding", 3, 3, "dielectric", _NO_FIELDS, "1", "electronic"),
    Title(r"MACROSCOPIC STATIC DIELECTRIC TENSOR", 3, 3, "dielectric", CLAMPED, "1", "electronic"),
    Title(r"PIEZOELECTRIC TENSOR IONIC CONTR.*C/m", 3, 6, "piezoelectric-stress", IONIC, "C/m^2", "ionic"),
    Title(
        r"PIEZOELECTRIC TENSOR.*for field in.*e +Angst", 3, 6, "piezoelectric-stress", f"{CLAMPED}, {RAW}",
        "e angstrom", "electronic",
    ),
    Title(r"PIEZOELECTRIC TENSOR.*for field in.*C/m", 3, 6, "piezoelectric-stress", CLAMPED, "C/m^2", "electronic"),
    Title(r"SYMMETRIZED ELASTIC MODULI", 6, 6, "elastic-stiffness", _CLAMPED_STIFFNESS, "kbar", "electronic"),
    Title(r"ELASTIC MODULI (?:IONIC CONTR|CONTR FROM IONIC)", 6, 6, "elastic-stiffness", IONIC, "kbar", "ionic"),
    Title(r"TOTAL ELASTIC MODULI", 6, 6, "elastic-stiffness", RELAXED, "kbar", "total"),
    Title(r"^ *ELASTIC MODULI", 6, 6, "elastic-stiffness", _RAW_STIFFNESS, "kbar", "electronic"),
)  # fmt: skip
"""Tried in this order: of two that begin alike the longer one stands first."""

_COMPILED = tuple((re.compile(title.pattern), title) for title in TITLES)


def titled(line: str) -> Title | None:
    """Return the kind of table that a line announces, None if it announces none.

    >>> titled("  TOTAL ELASTIC MODULI (kBar)").label
    'total, relaxed ion'
    >>> titled(" PIEZOELECTRIC TENSOR FIELD DIRECTION 1  (C/m^2)") is None
    True
    """
    return next((title for pattern, title in _COMPILED if pattern.search(line)), None)


def tensor_under(title: Title, lines: Lines) -> TensorRecord:
    """Return the tensor that follows its title line.

    Raises
    ------
    OutputFileError
        If the table is cut off or a word is no number.
    """
    table = lines.table(title.rows, title.columns, f"the table of {title.property}")
    row = property_named(title.property)
    in_pairs = title.columns == 6
    return TensorRecord(
        title.property,
        title.label,
        from_matrix(table.values, row.kind, row.factors, ORDER) if in_pairs else table.values,
        title.unit,
        order=ORDER if in_pairs else "",
        digits=table.digits,
        line=table.line,
        contribution=title.contribution,
        complete=title.contribution != "ionic",
    )
