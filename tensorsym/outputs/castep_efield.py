"""The tensors in the ``.efield`` file of CASTEP: the permittivity at zero frequency, oscillator strengths by frequency.

The columns run xx yy zz yz zx xy. The strength of one of several modes of equal frequency is not invariant, their sum
is: so modes of equal frequency are added.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import OutputFileError
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import CUT_OFF, Lines

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.outputs.content import Content

FORMAT = ".efield file of CASTEP"

ORDER = "11 22 33 23 13 12"
"""Order of the six columns."""

SAME_FREQUENCY = 0.01
"""cm^-1. Modes this close are taken for one set."""


def looks_like_efield(head: str) -> bool:
    """Tell the file by the lines of its head."""
    return "BEGIN header" in head[:200] and "Oscillator Q" in head[:2000]


def read_efield(content: Content) -> OutputFile:
    """Return structure and tensors of an ``.efield`` file.

    Raises
    ------
    InputError
        If the head or a table is cut off or holds other words than numbers.
    """
    lines = Lines(content.lines(), content.source)
    crystal = _crystal(lines)
    records: list[TensorRecord] = []
    for line in lines:
        if "BEGIN Oscillator Strengths" in line:
            records += _strengths(lines, 3 * len(crystal.species))
        elif "BEGIN permittivity" in line:
            table = lines.table(1, 7, "the permittivity", most_skipped=0)
            label = f"at {table.values[0, 0]:g} cm^-1"
            tensor = _symmetric(table.values[0, 1:])
            records.append(
                TensorRecord("dielectric", label, tensor, "1", order=ORDER, digits=table.digits, line=table.line)
            )
    return OutputFile(crystal, tuple(records), FORMAT)


def _crystal(lines: Lines) -> Crystal:
    lines.skip_to(r"Unit cell vectors \(A\)", "the cell")
    lattice = lines.table(3, 3, "the cell", most_skipped=0).values
    lines.skip_to(r"Fractional Co-ordinates", "the atoms")
    species: list[str] = []
    positions: list[list[float]] = []
    for line in lines:
        if "END header" in line:
            return StructureParts(FORMAT, lattice, positions, species).crystal(lines.source)
        found = re.match(r"^ *\d+((?: +[-+]?\d*\.\d+){3}) +([A-Z][a-z]?)\b", line)
        if found is None:
            msg = f"{line.strip()[:60]!r} is no atom"
            raise OutputFileError(msg, where=f"{lines.source}, line {lines.number}")
        positions.append([float(word) for word in found[1].split()])
        species.append(found[2])
    raise lines.cut_off("the head", len(species))


def _strengths(lines: Lines, modes: int) -> list[TensorRecord]:
    table = lines.table(modes, 7, "oscillator strengths", most_skipped=0)
    closing = next(lines, "")
    if "END" not in closing:
        msg = f"{modes} modes where {closing.strip()[:60]!r} follows"
        raise OutputFileError(msg, where=f"{lines.source}, line {lines.number}", hint=CUT_OFF)
    frequencies, strengths = table.values[:, 0], table.values[:, 1:]
    breaks = np.flatnonzero(np.diff(frequencies) > SAME_FREQUENCY) + 1
    records = []
    for group in np.split(np.arange(modes), breaks):
        tensor = _symmetric(strengths[group].sum(axis=0))
        if np.abs(tensor).max() <= 100 * table.digits:  # the acoustic modes, which have no strength
            continue
        count = f"{len(group)} modes" if len(group) > 1 else "mode"
        records.append(
            TensorRecord(
                "electric-susceptibility",
                f"oscillator strength of {count} at {frequencies[group[0]]:.2f} cm^-1",
                tensor,
                "(D/angstrom)^2/amu",
                order=ORDER,
                digits=table.digits,
                line=table.line + int(group[0]),
            )
        )
    return records


def _symmetric(six: NDArray[np.float64]) -> NDArray[np.float64]:
    xx, yy, zz, yz, zx, xy = six
    return np.array([[xx, xy, zx], [xy, yy, yz], [zx, yz, zz]])
