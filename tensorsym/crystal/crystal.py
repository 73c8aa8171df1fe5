"""A crystal as read: lattice, atoms, the axes they came in; everything symmetry says of it is found when first asked."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from typing import TYPE_CHECKING, Any

import numpy as np

from tensorsym.errors import StructureError
from tensorsym.tensors.axes import read_only

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike, NDArray

    from tensorsym.crystal.ladder import LadderStep
    from tensorsym.crystal.sites import Site
    from tensorsym.crystal.symmetry import CrystalSymmetry
    from tensorsym.groups.point_group import PointGroup

MOST_ATOMS = 100_000
"""Largest number of atoms accepted."""

CLOSEST = 0.1
"""Atoms closer than this, in angstrom, are an error of the file."""

SMALLEST_VOLUME = 1e-3
"""Cells smaller than this, in cubic angstrom, are singular."""


@dataclass(frozen=True, eq=False)
class Crystal:
    """A crystal structure in the Cartesian axes of its file."""

    lattice: NDArray[np.float64]
    """Shape (3, 3), angstrom, read-only; rows are a, b, c in the file's Cartesian axes."""
    positions: NDArray[np.float64]
    """Shape (n, 3), fractional, read-only."""
    species: tuple[str, ...]
    """One label an atom; a mixed site carries all its species with their occupancies, such as ``K0.5Na0.5``."""
    title: str = ""
    """Name of the crystal in the file, or its formula."""
    source: str = ""
    """Path it was read from."""
    format: str = ""
    """Name of the format in words."""
    axes_words: str = "the Cartesian axes of the file"
    """Where the Cartesian axes come from, in words."""
    symprec: float = 1e-3
    """Distance in angstrom within which atoms count as equivalent."""
    notes: tuple[str, ...] = ()
    """What the reader has to know of the reading."""

    def __repr__(self) -> str:
        """Return one line: title, atoms, format."""
        return f"{type(self).__name__}({self.title}, {len(self.species)} atoms, {self.format})"

    @cached_property
    def numbers(self) -> tuple[int, ...]:
        """One whole number an atom, equal for equal species."""
        known = {label: number for number, label in enumerate(dict.fromkeys(self.species), start=1)}
        return tuple(known[label] for label in self.species)

    @cached_property
    def symmetry(self) -> CrystalSymmetry:
        """Space group, class and standard frame at `symprec`."""
        from tensorsym.crystal.symmetry import symmetry_of

        return symmetry_of(self, self.symprec)

    @property
    def point_group(self) -> PointGroup:
        """The crystal class."""
        return self.symmetry.group

    @cached_property
    def ladder(self) -> tuple[LadderStep, ...]:
        """The group at tolerances from 1e-5 to 1e-1 angstrom."""
        from tensorsym.crystal.ladder import ladder_of

        return ladder_of(self)

    @cached_property
    def sites(self) -> tuple[Site, ...]:
        """The inequivalent sites with their groups."""
        from tensorsym.crystal.sites import sites_of

        return sites_of(self)

    @property
    def symmetry_warnings(self) -> tuple[str, ...]:
        """Warnings that the group depends on the tolerance; empty on a plateau."""
        from tensorsym.crystal.ladder import ladder_warnings

        return ladder_warnings(self)

    def at(self, symprec: float) -> Crystal:
        """Return the same crystal with another tolerance."""
        return replace(self, symprec=symprec)


def crystal_from(
    lattice: ArrayLike,
    positions: ArrayLike,
    species: Sequence[str],
    *,
    source: str,
    format: str,
    axes_words: str,
    title: str = "",
    notes: Sequence[str] = (),
) -> Crystal:
    """Return a checked crystal; the fields are those of `Crystal`.

    Raises
    ------
    StructureError
        If numbers are not finite, the cell has no volume, shapes do not fit or atoms overlap.
    """
    vectors, places = _finite(lattice, "lattice", source), _finite(positions, "positions", source)
    if vectors.shape != (3, 3):
        msg = f"the lattice has shape {vectors.shape}"
        raise StructureError(msg, where=source, expected="three vectors of three numbers")
    volume = float(np.linalg.det(vectors))
    if abs(volume) < SMALLEST_VOLUME:
        msg = f"the lattice vectors span no volume ({abs(volume):.2g} cubic angstrom)"
        raise StructureError(msg, where=source, hint="check the cell")
    if not 0 < len(species) <= MOST_ATOMS:
        msg = f"{len(species)} atoms"
        raise StructureError(msg, where=source, expected=f"1 to {MOST_ATOMS} atoms")
    if places.shape != (len(species), 3):
        msg = f"{len(species)} species for positions of shape {places.shape}"
        raise StructureError(msg, where=source, expected="three coordinates an atom")
    _check_overlap(vectors, places, species, source)
    if volume < 0:
        notes = (*notes, "the cell is left-handed: it is kept as it is, and the axes of all answers are right-handed")
    return Crystal(
        lattice=read_only(vectors),
        positions=read_only(places),
        species=tuple(species),
        title=" ".join((title or formula(species)).split())[:120],
        source=source,
        format=format,
        axes_words=axes_words,
        notes=tuple(notes),
    )


def formula(species: Sequence[str]) -> str:
    """Return the formula of the cell divided by its common factor.

    >>> formula(["Si", "O", "O", "Si", "O", "O"])
    'SiO2'
    """
    from collections import Counter
    from math import gcd

    counts = Counter(species)
    divisor = gcd(*counts.values())
    return "".join(f"{label}{count // divisor if count > divisor else ''}" for label, count in counts.items())


def _finite(values: ArrayLike, what: str, source: str) -> NDArray[np.float64]:
    try:
        array = np.array(values, dtype=float)
    except (TypeError, ValueError) as error:
        msg = f"the {what} are no array of numbers"
        raise StructureError(msg, where=source or None) from error
    if not np.isfinite(array).all():
        place: Any = tuple(int(index) + 1 for index in np.argwhere(~np.isfinite(array))[0])
        msg = f"{what}: the number at {place} is not finite"
        raise StructureError(msg, where=source or None)
    return array


def _check_overlap(
    lattice: NDArray[np.float64], positions: NDArray[np.float64], species: Sequence[str], source: str
) -> None:
    """Refuse atoms closer than `CLOSEST`, by sorting into slices along one axis, so that large cells stay cheap."""
    wrapped = positions - np.floor(positions)
    spacing = 1.0 / np.linalg.norm(np.linalg.inv(lattice), axis=0)
    axis = int(np.argmax(spacing))
    order = np.argsort(wrapped[:, axis], kind="stable")
    reach = CLOSEST / spacing[axis]
    level = wrapped[order, axis]
    # Atoms near the lower face meet those near the upper face of the next cell: append them again, one cell up.
    low = order[level < reach]
    order, level = np.concatenate([order, low]), np.concatenate([level, level[: len(low)] + 1.0])
    last = np.searchsorted(level, level + reach, side="right")
    for first in np.flatnonzero(last - np.arange(len(level)) > 1):
        rivals = order[first + 1 : last[first]]
        rivals = rivals[rivals != order[first]]
        difference = positions[order[first]] - positions[rivals]
        distances = np.linalg.norm((difference - np.rint(difference)) @ lattice, axis=1)
        if len(distances) and distances.min() < CLOSEST:
            one, other = sorted((int(order[first]), int(rivals[np.argmin(distances)])))
            msg = (
                f"atoms {one + 1} ({species[one]}) and {other + 1} ({species[other]}) are "
                f"{distances.min():.3f} angstrom apart"
            )
            raise StructureError(
                msg, where=source or None, expected=f"at least {CLOSEST} angstrom", hint="remove one of them"
            )
