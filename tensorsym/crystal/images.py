"""Where each operation of a crystal carries each of its atoms."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.pairs import pairs_within, plane_distances
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.crystal.symmetry import CrystalSymmetry

SLACK = 3.0
"""An image may miss its atom by this many times symprec: both atoms and the operation itself are inexact."""


def atom_images(crystal: Crystal, symmetry: CrystalSymmetry | None = None) -> NDArray[np.intp]:
    """Return the atom on which each operation puts each atom.

    Parameters
    ----------
    crystal : Crystal
        The structure.
    symmetry : CrystalSymmetry, optional
        Its symmetry at another tolerance than its own.

    Returns
    -------
    ndarray of int, shape (operations, atoms), read-only
        ``images[g, i]`` is the atom, counted from 0, to which ``symmetry.rotations[g], symmetry.translations[g]``
        carries atom i; each row is a permutation.

    Raises
    ------
    StructureError
        If an operation carries an atom onto no atom of its species, or the cell is a supercell that breaks the class.

    Examples
    --------
    >>> from tensorsym.crystal.crystal import Crystal
    >>> pair = Crystal(np.diag([3.0, 3.0, 5.0]), np.array([[0.2, 0, 0], [0.8, 0, 0]]), ("C", "C"))
    >>> sorted(set(map(tuple, atom_images(pair).tolist())))
    [(0, 1), (1, 0)]
    """
    images, _ = atom_images_and_misses(crystal, symmetry or crystal.symmetry)
    return images


def atom_images_and_misses(crystal: Crystal, symmetry: CrystalSymmetry) -> tuple[NDArray[np.intp], NDArray[np.float64]]:
    """Return the images, and by how much each misses its atom.

    Returns
    -------
    images : ndarray of int, shape (operations, atoms), read-only
        See `atom_images`.
    misses : ndarray, shape (operations, atoms, 3), read-only
        Image minus atom, in Å and the file's axes, for the atom at which the image arrives.
    """
    if not symmetry.cell_keeps_class:
        msg = "the cell is a supercell whose shape breaks the class, so its atoms cannot be followed one by one"
        raise StructureError(msg, where=crystal.source or None, hint="give the primitive or the conventional cell")
    positions, lattice = crystal.positions, crystal.lattice
    reach = min(SLACK * symmetry.symprec, 0.45 * float(plane_distances(lattice).min()))
    images = np.empty((len(symmetry.rotations), len(positions)), dtype=np.intp)
    misses = np.empty((*images.shape, 3))
    for number, (rotation, translation) in enumerate(zip(symmetry.rotations, symmetry.translations, strict=True)):
        carried = positions @ rotation.T + translation
        image = _nearest(carried, crystal, reach)
        if not np.array_equal(np.sort(image), np.arange(len(image))):
            msg = f"an operation found at symprec {symmetry.symprec:g} does not carry the atoms onto one another"
            raise StructureError(msg, where=crystal.source or None, hint="use a smaller symprec")
        apart = carried - positions[image]
        images[number], misses[number, image] = image, (apart - np.rint(apart)) @ lattice
    for array in (images, misses):
        array.setflags(write=False)
    return images, misses


def _nearest(carried: NDArray[np.float64], crystal: Crystal, reach: float) -> NDArray[np.intp]:
    """Return the nearest atom of the same species within reach of each place, -1 where there is none."""
    pairs = pairs_within(carried, crystal.positions, crystal.lattice, reach)
    alike = np.flatnonzero(crystal.numbers[pairs.first] == crystal.numbers[pairs.second])
    farthest_first = alike[np.argsort(-pairs.distance[alike], kind="stable")]
    image = np.full(len(carried), -1)
    image[pairs.first[farthest_first]] = pairs.second[farthest_first]
    return image
