"""The crystal: lattice, atoms and their symmetry, in the Cartesian axes of the file they came from."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass, replace
from functools import cached_property, reduce
from math import gcd
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.ladder import LadderStep, ladder_of, warnings_near
from tensorsym.crystal.sites import Site, sites_of
from tensorsym.crystal.symmetry import CrystalSymmetry, symmetry_of
from tensorsym.crystal.validation import checked_lattice, checked_positions, checked_symprec, refuse_overlaps

if TYPE_CHECKING:
    from typing import Self

    from numpy.typing import NDArray

    from tensorsym.groups.point_group import PointGroup

SYMPREC = 1e-3
"""Default distance in Å within which atoms count as equivalent."""

LEFT_HANDED = "the cell is left-handed: it is kept as it is, the Cartesian axes are right-handed all the same"


@dataclass(frozen=True, eq=False)
class Crystal:
    """A crystal structure in the Cartesian axes of its file.

    Raises
    ------
    StructureError
        If the lattice spans no cell, a number is not finite, or two atoms overlap.

    Examples
    --------
    >>> import numpy as np
    >>> caesium_chloride = Crystal(4.12 * np.eye(3), np.array([[0, 0, 0], [0.5, 0.5, 0.5]]), ("Cs", "Cl"))
    >>> caesium_chloride
    Crystal(CsCl, 2 atoms)
    >>> caesium_chloride.symmetry.international, caesium_chloride.point_group.hermann_mauguin
    ('Pm-3m', 'm-3m')
    """

    lattice: NDArray[np.float64]
    """Shape (3, 3), read-only: rows are a, b, c in Å, in the file's Cartesian axes."""
    positions: NDArray[np.float64]
    """Shape (n, 3), read-only: fractional coordinates, as the file gives them."""
    species: tuple[str, ...]
    """What sits on each position: ``Si``, or ``K0.5Na0.5`` on a site that is mixed or partly empty."""
    title: str = ""
    """Name of the crystal; its formula when the file tells none."""
    source: str = ""
    """Path of the file, empty for a structure made in Python."""
    format: str = ""
    """Format of the file in words, such as ``CIF``."""
    axes_words: str = "Cartesian axes of the lattice vectors as given"
    """Where the Cartesian axes come from."""
    symprec: float = SYMPREC
    """Å. Atoms within this distance of their image count as equivalent."""
    notes: tuple[str, ...] = ()
    """What the reader of the file has to know."""

    def __post_init__(self) -> None:
        """Check everything once, so that no later step has to."""
        where = self.source or None
        species = tuple(map(str, self.species))
        lattice = checked_lattice(self.lattice, where)
        positions = checked_positions(self.positions, species, where)
        refuse_overlaps(lattice, positions, species, where)
        left_handed = float(np.linalg.det(lattice)) < 0 and LEFT_HANDED not in self.notes
        for name, value in {
            "lattice": lattice,
            "positions": positions,
            "species": species,
            "title": self.title or _formula(species),
            "symprec": checked_symprec(self.symprec),
            "notes": (*self.notes, LEFT_HANDED) if left_handed else tuple(self.notes),
        }.items():
            object.__setattr__(self, name, value)

    def __repr__(self) -> str:
        """Return title, number of atoms and source on one line."""
        source = f", {self.source}" if self.source else ""
        return f"{type(self).__name__}({self.title}, {len(self.species)} atoms{source})"

    @property
    def formula(self) -> str:
        """Species and how many of each, in lowest terms, in the order of the file: ``SiO2``."""
        return _formula(self.species)

    def at(self, symprec: float) -> Self:
        """Return the same crystal, its symmetry found at another tolerance."""
        return replace(self, symprec=symprec)

    @cached_property
    def numbers(self) -> NDArray[np.intc]:
        """Shape (n,), read-only: 1, 2, ... for each distinct species, in the order of the file."""
        known: dict[str, int] = {}
        numbers = np.array([known.setdefault(label, len(known) + 1) for label in self.species], dtype=np.intc)
        numbers.setflags(write=False)
        return numbers

    @cached_property
    def symmetry(self) -> CrystalSymmetry:
        """Space group, class and standard frame at `symprec`."""
        return symmetry_of(self, self.symprec)

    @property
    def point_group(self) -> PointGroup:
        """The class of the crystal in its standard setting; `symmetry.frame` says where its axes lie."""
        return self.symmetry.group

    @cached_property
    def ladder(self) -> tuple[LadderStep, ...]:
        """The group at five tolerances from 1e-5 to 1e-1 Å."""
        return ladder_of(self)

    @cached_property
    def symmetry_warnings(self) -> tuple[str, ...]:
        """One line for each side, tighter or looser, on which the group changes within a factor ten of `symprec`."""
        return warnings_near(self, self.symprec)

    @cached_property
    def sites(self) -> tuple[Site, ...]:
        """The sites that no operation of the crystal carries into one another."""
        return sites_of(self)


def _formula(species: tuple[str, ...]) -> str:
    counts = Counter(species)
    divisor = reduce(gcd, counts.values(), 0)
    parts = []
    for label, count in counts.items():
        amount = count // divisor if divisor else 0
        plain = label.isalpha()
        parts.append((label if plain else f"({label})") + (str(amount) if amount > 1 else ""))
    return "".join(parts)
