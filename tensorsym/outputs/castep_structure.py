"""The geometry in the text output of CASTEP (layout of version 16)."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import OutputFileError
from tensorsym.outputs.rows import CUT_OFF, Lines

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal

_ATOM = re.compile(r"^ *x +([A-Z][a-z]?)(?::\S+)? +\d+ +(.*?) +x *$")


class Geometry:
    """The lattice and the atoms met last."""

    def __init__(self) -> None:
        self._lattice: NDArray[np.float64] | None = None
        self._species: list[str] = []
        self._positions: list[list[float]] = []

    def take(self, line: str, lines: Lines) -> None:
        """Take what follows a title line, if it is one of a lattice or of a list of atoms.

        Raises
        ------
        OutputFileError
            If it is cut off or holds other words than numbers.
        """
        if "Real Lattice(A)" in line:
            self._lattice = lines.table(3, 6, "the lattice", most_skipped=0).values[:, :3]
        elif "Fractional coordinates of atoms" in line:
            self._take_atoms(lines)

    def crystal(self, source: str, title: str) -> Crystal:
        """Return the crystal.

        Raises
        ------
        InputError
            If lattice or atoms are missing, or make no crystal.
        """
        species = self._known_species(source)
        if self._lattice is None:
            raise OutputFileError("holds no lattice before its tensors", where=source, hint=CUT_OFF)
        return StructureParts(title, self._lattice, self._positions, species).crystal(source)

    def labels(self, source: str) -> tuple[str, ...]:
        """Return number and species of each atom.

        Raises
        ------
        OutputFileError
            If no atoms have been met.
        """
        return tuple(f"{number} {name}" for number, name in enumerate(self._known_species(source), 1))

    def _known_species(self, source: str) -> list[str]:
        if not self._species:
            raise OutputFileError("holds no atoms before its tensors", where=source, hint=CUT_OFF)
        return self._species

    def _take_atoms(self, lines: Lines) -> None:
        self._species, self._positions = [], []
        for line in lines:
            if found := _ATOM.match(line):
                row = Lines([found[2]], f"{lines.source}, line {lines.number}").table(1, 3, "a position", 0)
                self._species.append(found[1])
                self._positions.append(row.values[0].tolist())
            elif self._species or not line.strip():
                return
