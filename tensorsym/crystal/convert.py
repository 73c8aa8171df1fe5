"""Crystals from the objects of other libraries, told by what they carry; nothing of those libraries is imported."""

from __future__ import annotations

from typing import Any

import numpy as np

from tensorsym.crystal.crystal import SYMPREC, Crystal
from tensorsym.crystal.mixed_sites import element_in, species_label
from tensorsym.crystal.molecule import molecule_in_box
from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import StructureError

AXES = "the Cartesian axes of the object, given by its lattice vectors"


def from_pymatgen(structure: Any, *, symprec: float = SYMPREC) -> Crystal:
    """Return the crystal of a pymatgen Structure, or of a Molecule in an empty box along its own axes.

    Oxidation states and spins do not tell atoms apart; mixed and partly empty sites are species of their own.

    Parameters
    ----------
    structure : pymatgen Structure, Molecule, or an object like them
        Read, never changed.
    symprec : float
        Distance in Å within which atoms count as equivalent.

    Raises
    ------
    StructureError
        If the object is neither, or describes no possible crystal.
    """
    if not hasattr(structure, "cart_coords") or not hasattr(structure, "sites"):
        msg = f"{type(structure).__name__} is no pymatgen Structure or Molecule"
        raise StructureError(msg, expected="an object with sites and cart_coords")
    species = [_label(site) for site in structure.sites]
    if getattr(structure, "lattice", None) is None:
        return molecule_in_box(structure.cart_coords, species, "", "pymatgen").crystal("", symprec)
    return StructureParts(
        "pymatgen Structure", structure.lattice.matrix, structure.frac_coords, species, axes_words=AXES
    ).crystal("", symprec)


def from_ase(atoms: Any, *, symprec: float = SYMPREC) -> Crystal:
    """Return the crystal of an ASE Atoms object, or of one without a cell as a molecule.

    Parameters
    ----------
    atoms : ase.Atoms, or an object like it
        Read, never changed.
    symprec : float
        Distance in Å within which atoms count as equivalent.

    Raises
    ------
    StructureError
        If the object is no Atoms object, or describes no possible crystal.
    """
    if not hasattr(atoms, "get_chemical_symbols") or not hasattr(atoms, "cell"):
        msg = f"{type(atoms).__name__} is no ASE Atoms object"
        raise StructureError(msg, expected="an object with cell, positions and get_chemical_symbols")
    species, places = list(atoms.get_chemical_symbols()), np.array(atoms.get_positions())
    cell = np.array(atoms.cell, dtype=float)
    if not cell.any() or not np.any(atoms.pbc):
        return molecule_in_box(places, species, "", "ASE").crystal("", symprec)
    notes = () if np.all(atoms.pbc) else ("not periodic along every axis: taken as a crystal with the cell as it is",)
    return StructureParts("ASE Atoms", cell, places, species, cartesian=True, axes_words=AXES, notes=notes).crystal(
        "", symprec
    )


def _label(site: Any) -> str:
    composition: dict[str, float] = {}
    for species, amount in site.species.items():
        element = element_in(str(species))
        composition[element] = composition.get(element, 0.0) + float(amount)
    return species_label(composition)
