"""Tables of a VASP OUTCAR that hold one tensor an atom.

Born charges: rows are the field, columns the displacement. Field gradients: columns xx yy zz xy xz yz. Internal strain:
columns xx yy zz xy yz zx. All seen in files, except the chemical shift, whose layout is known from pymatgen's parser.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.catalog.properties import property_named
from tensorsym.errors import OutputFileError
from tensorsym.outputs.record import TensorRecord
from tensorsym.outputs.rows import CUT_OFF, Table
from tensorsym.outputs.vasp_tables import ORDER, RAW
from tensorsym.tensors.notation import from_matrix

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike

    from tensorsym.outputs.rows import Lines

GRADIENT_ORDER = "11 22 33 12 13 23"
"""Order of the columns of field gradients, another than that of elastic tables."""

_STRAIN = re.compile(r"INTERNAL STRAIN TENSOR FOR ION +(\d+) +for displacements")
_STRAIN_SECTION = re.compile(r"INTERNAL STRAIN TENSORS FROM (STRAINED CELLS|DISPLACED ATOMS)")
_BORN = re.compile(r"BORN EFFECTIVE CHARGES +\(")
_GRADIENTS = re.compile(r"Electric field gradients \(V/A\^2\)")
_SHIFTS = re.compile(r"^ *(UN)?SYMMETRIZED TENSORS *$")
_ION = r"^ *ion +\d+ *$"


class SiteTables:
    """The tables of sites met so far.

    Parameters
    ----------
    species : sequence of str
        The species of the atoms, in the order of the file.
    """

    def __init__(self, species: Sequence[str]) -> None:
        self._labels = tuple(f"{number} {name}" for number, name in enumerate(species, 1))
        self._strains: list[Table] = []
        self._section = ""

    def record_under(self, line: str, lines: Lines) -> TensorRecord | None:
        """Return the record that the table under a title line completes, None if it completes none.

        Raises
        ------
        OutputFileError
            If the table is cut off or a word is no number.
        """
        if _BORN.search(line):
            return self._born_charges(line, lines)
        if _GRADIENTS.search(line):
            return self._gradients(lines)
        if shifts := _SHIFTS.search(line):
            return self._shifts(lines, raw=bool(shifts[1]))
        if section := _STRAIN_SECTION.search(line):
            self._section = f"from {section[1].lower()}"
        elif strain := _STRAIN.search(line):
            return self._strain(int(strain[1]), lines)
        return None

    def refuse_if_unfinished(self, lines: Lines) -> None:
        """Raise if the file ended among the tables of the atoms.

        Raises
        ------
        OutputFileError
            If internal strain was read for some atoms only.
        """
        if self._strains:
            msg = f"internal strain is there for {len(self._strains)} of {len(self._labels)} atoms"
            raise OutputFileError(msg, where=f"{lines.source}, line {lines.number}", hint=CUT_OFF)

    def _born_charges(self, line: str, lines: Lines) -> TensorRecord:
        label = "rows field, columns displacement"
        if "excluding" in line:
            label += ", without local fields"
        tables = self._matrices("Born charges", lines)
        return self._record("born-charge", label, [table.values for table in tables], "e", tables, "")

    def _shifts(self, lines: Lines, *, raw: bool) -> TensorRecord:
        tables = self._matrices("chemical shifts", lines)
        label = "without core" + (f", {RAW}" if raw else ", symmetrised by the code")
        return self._record("chemical-shift", label, [table.values for table in tables], "1e-6", tables, "")

    def _gradients(self, lines: Lines) -> TensorRecord:
        table = lines.table(len(self._labels), 6, "the table of field gradients")
        xx, yy, zz, xy, xz, yz = table.values.T
        tensors = np.array([[xx, xy, xz], [xy, yy, yz], [xz, yz, zz]]).transpose(2, 0, 1)
        return self._record("efg", "", tensors, "V/angstrom^2", [table], GRADIENT_ORDER)

    def _strain(self, ion: int, lines: Lines) -> TensorRecord | None:
        """Take the table of one atom; the one of the last atom completes the record."""
        if ion != len(self._strains) + 1:
            msg = f"internal strain of atom {ion} where that of atom {len(self._strains) + 1} should stand"
            raise OutputFileError(msg, where=f"{lines.source}, line {lines.number}")
        self._strains.append(lines.table(3, 6, f"internal strain of atom {ion}"))
        if ion < len(self._labels):
            return None
        tables, self._strains = self._strains, []
        row = property_named("internal-strain")
        tensors = [from_matrix(table.values, row.kind, row.factors, ORDER) for table in tables]
        return self._record("internal-strain", self._section, tensors, "eV/angstrom", tables, ORDER)

    def _matrices(self, what: str, lines: Lines) -> list[Table]:
        """Return one 3 x 3 table an atom, each under the number of its atom."""
        tables = []
        for atom in range(1, len(self._labels) + 1):
            heading = lines.skip_to(_ION, f"{what} of atom {atom}")
            if int(heading.split()[-1]) != atom:
                msg = f"{what}: {heading.strip()} where atom {atom} should stand"
                raise OutputFileError(msg, where=f"{lines.source}, line {lines.number}")
            tables.append(lines.table(3, 3, f"{what} of atom {atom}", most_skipped=0))
        return tables

    def _record(
        self, name: str, label: str, tensors: ArrayLike, unit: str, tables: Sequence[Table], order: str
    ) -> TensorRecord:
        return TensorRecord(
            name,
            label,
            np.array(tensors),
            unit,
            order=order,
            digits=max(table.digits for table in tables),
            line=tables[0].line,
            per_site=True,
            site_labels=self._labels,
        )
