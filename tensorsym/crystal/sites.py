"""Inequivalent sites, their groups, and how operations carry atoms to one another."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.errors import StructureError
from tensorsym.groups.recognition import class_of_rotations

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal


@dataclass(frozen=True, slots=True)
class Site:
    """One set of equivalent atoms."""

    label: str
    """Species and running number, such as ``O2``."""
    species: str
    """Species of the atoms."""
    atoms: tuple[int, ...]
    """Numbers of the atoms, counted from 0, the first one representing the site."""
    wyckoff: str
    """Wyckoff letter with the multiplicity in the cell of the file, such as ``6c``."""
    oriented_symbol: str
    """Oriented site-symmetry symbol of the International Tables."""
    site_group: str
    """Short Hermann-Mauguin symbol of the site's class."""
    operations: tuple[int, ...]
    """Numbers of the space-group operations that leave the first atom in place."""


def sites_of(crystal: Crystal) -> tuple[Site, ...]:
    """Return the inequivalent sites in the order of their first atoms."""
    symmetry = crystal.symmetry
    images = atom_images(crystal)
    equivalent = np.array(symmetry.equivalent_atoms)
    counts: dict[str, int] = {}
    sites = []
    for first in dict.fromkeys(equivalent.tolist()):
        species = crystal.species[first]
        counts[species] = counts.get(species, 0) + 1
        atoms = tuple(int(index) for index in np.flatnonzero(equivalent == first))
        keeping = np.flatnonzero(images[:, first] == first)
        matrices = frozenset(tuple(map(tuple, matrix)) for matrix in symmetry.rotations[keeping].tolist())
        sites.append(
            Site(
                f"{species}{counts[species]}",
                species,
                atoms,
                f"{len(atoms)}{symmetry.wyckoffs[first]}",
                symmetry.site_symmetry_symbols[first],
                class_of_rotations(matrices),
                tuple(int(index) for index in keeping),
            )
        )
    return tuple(sites)


def atom_images(crystal: Crystal) -> NDArray[np.intp]:
    """Return where every operation carries every atom, shape (operations, atoms).

    Raises
    ------
    StructureError
        If an operation carries an atom to no atom of its species within a few times the tolerance.
    """
    symmetry = crystal.symmetry
    if not symmetry.is_of_file_cell:
        msg = "the cell is a supercell whose shape breaks the class, so its atoms cannot be followed one by one"
        raise StructureError(msg, where=crystal.source or None, hint="give the primitive or the conventional cell")
    positions, numbers = crystal.positions, np.array(crystal.numbers)
    images = np.empty((len(symmetry.rotations), len(positions)), dtype=np.intp)
    for number in np.unique(numbers):
        members = np.flatnonzero(numbers == number)
        moved = positions[members] @ symmetry.rotations.transpose(0, 2, 1) + symmetry.translations[:, None]
        difference = moved[:, :, None] - positions[members][None, None]
        difference -= np.rint(difference)
        distance = np.linalg.norm(difference @ crystal.lattice, axis=3)
        images[:, members] = members[np.argmin(distance, axis=2)]
        worst = float(distance.min(axis=2).max())
        if worst > 10 * symmetry.symprec:
            msg = (
                f"an operation carries a {crystal.species[members[0]]} atom {worst:.3g} angstrom beside the nearest one"
            )
            raise StructureError(msg, where=crystal.source or None, hint="try another --symprec")
    return images
