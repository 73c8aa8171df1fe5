"""The clamped-ion tensors in the main output of ABINIT (layout of version 9.6); the structure is not read.

Each line holds one component and its two perturbations. For n atoms, perturbation 1 to n is a displacement, n + 2 the
field, n + 3 the strains xx yy zz, n + 4 the strains yz xz xy.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.catalog.properties import property_named
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import Lines
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from numpy.typing import NDArray

    from tensorsym.outputs.content import Content

FORMAT = "main output of ABINIT"

NO_STRUCTURE = "the structure is not read from this output: give the structure file first, in its axes"

_ENTRY = re.compile(r"^ +([123]) +(\d+) +([123]) +(\d+) +\S+ +\S+ *$")
_TITLE = re.compile(
    r"^ +(Dielectric tensor|Effective charges|Rigid-atom elastic tensor|Rigid-atom proper piezoelectric tensor) ?, "
    r"in cartesian coordinates"
)


class _Entry:
    """One printed component."""

    def __init__(self, found: re.Match[str], lines: Lines) -> None:
        self.first = int(found[1]) - 1, int(found[2])
        self.second = int(found[3]) - 1, int(found[4])
        self.line = lines.number
        table = Lines([found[0]], f"{lines.source}, line {lines.number}").table(1, 2, "a component", most_skipped=0)
        self.value, self.digits = float(table.values[0, 0]), table.digits


def looks_like_abinit(head: str) -> bool:
    """Tell the output by the name of the program in its first lines."""
    return re.search(r"Version \S+ +of ABINIT\b", head[:2000]) is not None


def read_abinit(content: Content) -> OutputFile:
    """Return the tensors of a main output.

    Raises
    ------
    OutputFileError
        If a list of components is not whole or holds other words than numbers.
    """
    lines = Lines(content.lines(), content.source)
    records: list[TensorRecord] = []
    finished = False
    for line in lines:
        finished |= "Calculation completed" in line
        if title := _TITLE.match(line):
            records.append(_record(title[1], lines))
    notes = () if finished else ("the run did not finish: the file ends without its closing line",)
    return OutputFile(None, tuple(records), FORMAT, (NO_STRUCTURE, *notes))


def _record(title: str, lines: Lines) -> TensorRecord:
    entries, from_phonons = _entries(lines)
    if not entries:
        raise lines.cut_off(title, 0)
    if title == "Effective charges":
        return _charges(entries, from_phonons=from_phonons, lines=lines)
    digits, line = max(entry.digits for entry in entries), entries[0].line
    if title == "Dielectric tensor":
        square: dict[tuple[int, ...], float] = {(e.first[0], e.second[0]): e.value for e in entries}
        values = _filled(square, (3, 3), title, lines)
        return TensorRecord(
            "dielectric", "electronic, clamped ion", values, "1", digits=digits, line=line, contribution="electronic"
        )
    name, unit = ("elastic-stiffness", "hartree/bohr^3") if "elastic" in title else ("piezoelectric-stress", "e/bohr^2")
    row = property_named(name)
    strains = min(entry.second[1] for entry in entries)
    by_pairs: dict[tuple[int, ...], float] = {
        (
            _pair(entry.first, strains) if "elastic" in title else entry.first[0],
            _pair(entry.second, strains),
        ): entry.value
        for entry in entries
    }
    matrix = _filled(by_pairs, (6, 6) if "elastic" in title else (3, 6), title, lines)
    return TensorRecord(
        name,
        "clamped ion",
        from_matrix(matrix, row.kind, row.factors, VOIGT_ORDER),
        unit,
        order=VOIGT_ORDER,
        digits=digits,
        line=line,
        contribution="electronic",
    )


def _entries(lines: Lines) -> tuple[list[_Entry], bool]:
    """Return the components that follow, and whether the title says that they come from displacements."""
    found: list[_Entry] = []
    from_phonons = False
    blanks = 0
    for line in lines:
        entry = _ENTRY.match(line)
        if entry is not None:
            found.append(_Entry(entry, lines))
            blanks = 0
            continue
        from_phonons |= "from phonon response" in line
        blanks += not line.strip()
        if found and (line.strip() or blanks > 1):
            lines.put_back(line)
            break
    return found, from_phonons


def _pair(place: tuple[int, int], strains: int) -> int:
    """Return the number, from 0, of a strain in the handbook's order."""
    direction, perturbation = place
    return direction + 3 * (perturbation - strains)


def _charges(entries: Sequence[_Entry], *, from_phonons: bool, lines: Lines) -> TensorRecord:
    places: dict[tuple[int, ...], float] = {}
    for entry in entries:
        field, moved = (entry.first, entry.second) if from_phonons else (entry.second, entry.first)
        places[moved[1] - 1, field[0], moved[0]] = entry.value
    atoms = 1 + max(place[0] for place in places)
    way = "displacements" if from_phonons else "fields"
    return TensorRecord(
        "born-charge",
        f"from {way}; first index field, second displacement",
        _filled(places, (atoms, 3, 3), "Effective charges", lines),
        "e",
        digits=max(entry.digits for entry in entries),
        line=entries[0].line,
        per_site=True,
        site_labels=tuple(str(number) for number in range(1, atoms + 1)),
    )


def _filled(
    places: Mapping[tuple[int, ...], float],
    shape: tuple[int, ...],
    title: str,
    lines: Lines,
) -> NDArray[np.float64]:
    """Return the array whose components were printed, all of them.

    Raises
    ------
    OutputFileError
        If one is missing or does not belong.
    """
    values = np.full(shape, np.nan)
    for place, value in places.items():
        if all(0 <= index < size for index, size in zip(place, shape, strict=True)):
            values[place] = value
    if np.isnan(values).any():
        raise lines.cut_off(title, len(places))
    return values
