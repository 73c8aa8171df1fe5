"""What the reader of a format hands over: the parts of a crystal, not yet checked as a whole."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.crystal import SYMPREC, Crystal
from tensorsym.crystal.validation import checked_lattice

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike

FILE_AXES = "the Cartesian axes of the file, given by its lattice vectors"


@dataclass(frozen=True, slots=True, eq=False)
class StructureParts:
    """Lattice and atoms as a file gives them."""

    format: str
    """Format in words."""
    lattice: ArrayLike
    """Shape (3, 3): rows a, b, c in Å."""
    positions: ArrayLike
    """Shape (n, 3): fractional coordinates, or Cartesian ones in Å."""
    species: Sequence[str]
    """One label for each position."""
    cartesian: bool = False
    """True when the positions are Cartesian."""
    title: str = ""
    """Name of the crystal; empty when the file tells none."""
    axes_words: str = FILE_AXES
    """Where the Cartesian axes come from."""
    notes: tuple[str, ...] = ()
    """What the reader has to know."""

    def crystal(self, source: str, symprec: float = SYMPREC) -> Crystal:
        """Return the crystal, every check made.

        Raises
        ------
        StructureError
            If the parts make no crystal.
        """
        lattice = np.array(self.lattice, dtype=float)
        positions = np.array(self.positions, dtype=float).reshape(-1, 3)
        if self.cartesian:
            positions = positions @ np.linalg.inv(checked_lattice(lattice, source or None))
        return Crystal(
            lattice, positions, tuple(self.species), self.title, source, self.format, self.axes_words, symprec,
            self.notes,
        )  # fmt: skip
