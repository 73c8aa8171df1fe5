"""The inequivalent sites of a crystal, each with its own group and where the elements of that group lie."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.frame import placed_group
from tensorsym.crystal.images import SLACK, atom_images
from tensorsym.errors import GroupSymbolError, StructureError
from tensorsym.groups.placement import elements_in_words

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.groups.point_group import PointGroup

__all__ = ["Site", "atom_images", "site_rotations", "sites_of"]


@dataclass(frozen=True, slots=True, eq=False)
class Site:
    """One set of equivalent atoms, seen from its first atom."""

    label: str
    """Species and running number among the sites of that species, such as ``O2`` or ``(K0.5Na0.5)1``."""
    species: str
    """What sits there."""
    atoms: tuple[int, ...]
    """Numbers of the equivalent atoms in the file's cell, counted from 0; all else here is said of the first."""
    position: NDArray[np.float64]
    """Shape (3,), read-only: fractional coordinates in the file's cell."""
    wyckoff: str
    """Wyckoff position in the standard setting, such as ``6c``: multiplicity in the conventional cell, and letter."""
    oriented_symbol: str
    """Oriented site-symmetry symbol in the standard setting, such as ``.2.``."""
    group: PointGroup
    """The class of the site's group in its standard setting."""
    frame: NDArray[np.float64]
    """Shape (3, 3), read-only: rows are unit x, y, z of that standard frame in the file's Cartesian axes."""
    rotations: NDArray[np.intc]
    """Shape (order, 3, 3), read-only: the operations that leave the site alone, in the cell of the operations."""

    def __repr__(self) -> str:
        """Return label, Wyckoff position and symmetry."""
        return f"Site({self.label}, {self.wyckoff}, {self.oriented_symbol}, {self.group.hermann_mauguin})"

    @property
    def site_group(self) -> str:
        """Short Hermann-Mauguin symbol of the site's class."""
        return self.group.hermann_mauguin

    @property
    def elements_in_words(self) -> str:
        """Where the elements of the site's group lie in the file's Cartesian axes."""
        return elements_in_words(self.group, tuple(map(tuple, self.frame.T.tolist())))


def sites_of(crystal: Crystal) -> tuple[Site, ...]:
    """Return the inequivalent sites in the order of the file.

    Raises
    ------
    StructureError
        If the symmetry cannot be found.

    Examples
    --------
    >>> from tensorsym.crystal.crystal import Crystal
    >>> sites_of(Crystal(4.12 * np.eye(3), np.array([[0, 0, 0], [0.5, 0.5, 0.5]]), ("Cs", "Cl")))
    (Site(Cs1, 1a, m-3m, m-3m), Site(Cl1, 1b, m-3m, m-3m))
    """
    counts: Counter[str] = Counter()
    sites = []
    for first in np.unique(crystal.symmetry.equivalent_atoms).tolist():
        counts[crystal.species[first]] += 1
        sites.append(_site(crystal, first, counts[crystal.species[first]]))
    return tuple(sites)


def site_rotations(crystal: Crystal, atom: int) -> NDArray[np.intc]:
    """Return the rotations that leave an atom where it is, modulo the lattice of the operations' cell.

    Returns
    -------
    ndarray of int, shape (order, 3, 3), read-only
    """
    symmetry = crystal.symmetry
    place = crystal.positions[atom] @ crystal.lattice @ np.linalg.inv(symmetry.cell)
    apart = symmetry.rotations @ place + symmetry.translations - place
    apart -= np.rint(apart)
    stays = np.linalg.norm(apart @ symmetry.cell, axis=1) <= SLACK * symmetry.symprec
    rotations = np.ascontiguousarray(np.unique(symmetry.rotations[stays], axis=0))
    rotations.setflags(write=False)
    return rotations


def _site(crystal: Crystal, first: int, number: int) -> Site:
    symmetry = crystal.symmetry
    atoms = np.flatnonzero(symmetry.equivalent_atoms == first)
    conventional = len(atoms) * abs(np.linalg.det(symmetry.standard_cell) / np.linalg.det(crystal.lattice))
    rotations = site_rotations(crystal, first)
    try:
        placed = placed_group(rotations, symmetry.cell)
    except GroupSymbolError as error:
        msg = f"the operations that leave atom {first + 1} alone form no group at symprec {symmetry.symprec:g}"
        raise StructureError(msg, where=crystal.source or None, hint="use a smaller symprec") from error
    species = crystal.species[first]
    return Site(
        f"{species}{number}" if species.isalpha() else f"({species}){number}",
        species,
        tuple(atoms.tolist()),
        crystal.positions[first],
        f"{round(conventional)}{symmetry.wyckoffs[first]}",
        symmetry.site_symmetry_symbols[first],
        placed.group,
        placed.frame,
        rotations,
    )
