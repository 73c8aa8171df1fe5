"""Crystals from the objects of other libraries, told by what they carry, without importing them."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import numpy as np

from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.formats_cif import site_label
from tensorsym.errors import StructureError

AXES = "the Cartesian axes of the object, given by its lattice vectors"

VACUUM = 20.0
"""Edge added around a molecule, angstrom: its cell is an empty box."""


def from_pymatgen(structure: Any, *, symprec: float = 1e-3) -> Crystal:
    """Return the crystal of a pymatgen Structure, or of a Molecule put into an empty cubic box.

    Raises
    ------
    StructureError
        If the object is neither.
    """
    if not hasattr(structure, "cart_coords"):
        msg = f"{type(structure).__name__} is no pymatgen Structure or Molecule"
        raise StructureError(msg)
    species = [site_label(site) for site in structure]
    if hasattr(structure, "lattice"):
        found = Crystal(
            structure.lattice.matrix,
            structure.frac_coords,
            species,
            source="",
            format="pymatgen Structure",
            axes_words=AXES,
        )
    else:
        found = _boxed(structure.cart_coords, species)
    return replace(found, symprec=symprec)


def from_ase(atoms: Any, *, symprec: float = 1e-3) -> Crystal:
    """Return the crystal of an ASE Atoms object with a cell.

    Raises
    ------
    StructureError
        If the object is no Atoms object, or has no cell.
    """
    if not hasattr(atoms, "get_scaled_positions"):
        msg = f"{type(atoms).__name__} is no ASE Atoms object"
        raise StructureError(msg)
    species = list(atoms.get_chemical_symbols())
    cell = np.array(atoms.cell)
    if abs(np.linalg.det(cell)) < 1e-9:
        return replace(_boxed(atoms.get_positions(), species), symprec=symprec)
    positions = atoms.get_scaled_positions(wrap=False)
    return Crystal(cell, positions, species, source="", format="ASE Atoms", axes_words=AXES, symprec=symprec)


def _boxed(coordinates: Any, species: list[str]) -> Crystal:
    """Put a molecule with its centre into the middle of an empty cubic box, which adds no symmetry lower than its own.

    The box has the full cubic group about its centre; a molecule with axes of five-fold or higher order, or turned against
    the box, keeps only what both share, and a note says so.
    """
    places = np.array(coordinates, dtype=float)
    edge = float(np.ptp(places, axis=0).max()) + VACUUM
    positions = (places - places.mean(axis=0)) / edge + 0.5
    note = "a molecule in a cubic box: operations that the box does not share are not found"
    return Crystal(np.eye(3) * edge, positions, species, source="", format="molecule", axes_words=AXES, notes=(note,))
