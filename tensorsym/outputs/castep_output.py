"""The tensors in the text output of CASTEP: Born charges, permittivities, Raman tensors of totally symmetric modes."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.outputs.castep_structure import Geometry
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import Lines, Table

if TYPE_CHECKING:
    from tensorsym.outputs.content import Content

FORMAT = "CASTEP output"

UNDECLARED = "the file does not say which index of a Born charge is the field; symmetry cannot tell"

_MODE = re.compile(r"^ \+ +(\d+) +(-?\d+\.\d+) +([a-z]) ")
_SPECIES = re.compile(r"^ \+ ([a-z]) +(\S+) +\d+ +\| +((?:-?\d+(?:\.\d+)? +)+)\+")
_RAMAN = re.compile(r"Mode number: +(\d+) +Raman tensor")
_CLOSED = re.compile(r"Finalisation time|Total time +=|Overall parallel efficiency")


def looks_like_castep(head: str) -> bool:
    """Tell the output by its banner."""
    return "CASTEP" in head[:5000] and "Ab Initio Total Energy Program" in head[:5000]


def read_castep(content: Content) -> OutputFile:
    """Return structure and tensors of a CASTEP output, the geometry that was printed last before them.

    Raises
    ------
    InputError
        If there is no geometry, or a table is cut off or holds other words than numbers.
    """
    lines = Lines(content.lines(), content.source)
    geometry, modes = Geometry(), _Modes()
    records: list[TensorRecord] = []
    finished = False
    for line in lines:
        if not records:
            geometry.take(line, lines)
        modes.take(line)
        finished |= _CLOSED.search(line) is not None
        if re.match(r"^ +Born Effective Charges *$", line):
            records.append(_charges(lines, geometry.labels(lines.source)))
        elif "Optical Permittivity (f->infinity)" in line:
            records += _permittivities(lines)
        elif found := _RAMAN.search(line):
            records += modes.record(int(found[1]), lines)
    notes = modes.notes if finished else (*modes.notes, "the run did not finish: the file ends without its timings")
    return OutputFile(geometry.crystal(content.source, FORMAT), tuple(records), FORMAT, notes)


class _Modes:
    """Vibrations at the zone centre, and which of them are totally symmetric."""

    def __init__(self) -> None:
        self._species: dict[int, tuple[str, str]] = {}
        self._symmetric: dict[str, str] = {}
        self._left_out = 0

    @property
    def notes(self) -> tuple[str, ...]:
        """What is told of the modes that were left out."""
        if not self._left_out:
            return ()
        return (f"Raman tensors of {self._left_out} modes that are not totally symmetric are left out",)

    def take(self, line: str) -> None:
        """Take a line of the list of modes or of the character table; the first of each counts."""
        if found := _MODE.match(line):
            self._species.setdefault(int(found[1]), (found[2], found[3]))
        elif (found := _SPECIES.match(line)) and all(float(word) == 1.0 for word in found[3].split()):
            self._symmetric.setdefault(found[1], found[2])

    def record(self, mode: int, lines: Lines) -> tuple[TensorRecord, ...]:
        """Return the Raman tensor that follows, none if its mode is not totally symmetric or the tensor is zero."""
        first = lines.table(1, 4, "a Raman tensor", most_skipped=0)
        rest = lines.table(2, 3, "a Raman tensor", most_skipped=0)
        values = np.vstack([first.values[:, :3], rest.values])
        frequency, species = self._species.get(mode, ("", ""))
        if not values.any():
            return ()
        if species not in self._symmetric:
            self._left_out += 1
            return ()
        label = f"mode {mode}, {frequency} cm^-1, {self._symmetric[species]}"
        unit = "angstrom/amu^0.5"
        return (TensorRecord("raman", label, values, unit, digits=rest.digits, line=first.line),)


def _charges(lines: Lines, labels: tuple[str, ...]) -> TensorRecord:
    lines.skip_to(r"^ +-+ *$", "Born charges")
    tables: list[Table] = [lines.table(3, 3, f"the Born charge of atom {label}", most_skipped=0) for label in labels]
    return TensorRecord(
        "born-charge",
        "as printed",
        np.array([table.values for table in tables]),
        "e",
        digits=max(table.digits for table in tables),
        line=tables[0].line,
        per_site=True,
        site_labels=labels,
        notes=(UNDECLARED,),
    )


def _permittivities(lines: Lines) -> tuple[TensorRecord, ...]:
    """Return the two tensors printed side by side (layout from memory)."""
    table = lines.table(3, 6, "the permittivities")
    clamped = TensorRecord(
        "dielectric", "electronic, clamped ion", table.values[:, :3], "1", digits=table.digits, line=table.line,
        contribution="electronic",
    )  # fmt: skip
    relaxed = TensorRecord(
        "dielectric", "relaxed ion", table.values[:, 3:], "1", digits=table.digits, line=table.line,
        contribution="total",
    )  # fmt: skip
    return clamped, relaxed
