from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.convert import from_ase, from_pymatgen
from tensorsym.errors import StructureError, UsageError

pytestmark = pytest.mark.filterwarnings("ignore")  # pymatgen's and ASE's own


def test_pymatgen_structure_keeps_its_axes():
    """Lattice, order of atoms and Cartesian axes are those of the object, which is not changed."""
    from pymatgen.core import Lattice, Structure

    structure = Structure(
        Lattice([[0, 2.8, 2.8], [2.8, 0, 2.8], [2.8, 2.8, 0]]), ["Na+", "Cl-"], [[0, 0, 0], [0.5] * 3]
    )
    before = structure.copy()
    crystal = from_pymatgen(structure, symprec=1e-4)

    assert structure == before
    assert np.array_equal(crystal.lattice, structure.lattice.matrix)
    assert (crystal.species, crystal.symmetry.number, crystal.symprec) == (("Na", "Cl"), 225, 1e-4)
    assert np.abs(crystal.symmetry.frame - np.eye(3)).max() < 1e-12


def test_pymatgen_molecule_has_its_point_group():
    """Ammonia has the class 3m (C3v), its mirror planes where they are."""
    from pymatgen.core import Molecule

    angles = 2 * np.pi * np.arange(3) / 3
    hydrogens = np.stack([0.94 * np.cos(angles), 0.94 * np.sin(angles), -0.38 + 0 * angles], axis=1)
    crystal = from_pymatgen(Molecule(["N", "H", "H", "H"], [[0, 0, 0], *hydrogens]))

    assert crystal.point_group.hermann_mauguin == "3m"
    assert np.abs(crystal.symmetry.frame[2]) == pytest.approx([0, 0, 1])


def test_ase_atoms_keep_their_axes():
    """Cell, places and species are those of the object."""
    from ase.build import bulk

    atoms = bulk("ZnS", "zincblende", a=5.41)
    crystal = from_ase(atoms)

    assert np.array_equal(crystal.lattice, atoms.cell.array)
    assert (crystal.species, crystal.symmetry.number) == (("Zn", "S"), 216)


def test_ase_molecule_has_its_point_group():
    """Water without a cell has the class mm2 (C2v)."""
    from ase.build import molecule

    assert from_ase(molecule("H2O")).point_group.hermann_mauguin == "mm2"


def test_ase_slab_is_noted():
    """A layer that is periodic in two directions is taken with its cell, and a note says so."""
    from ase.build import graphene

    crystal = from_ase(graphene(vacuum=8.0))

    assert crystal.point_group.hermann_mauguin == "6/mmm"
    assert any("not periodic along every axis" in note for note in crystal.notes)


@pytest.mark.parametrize("convert", [from_pymatgen, from_ase])
@pytest.mark.parametrize("thing", [None, 3, "POSCAR", np.eye(3)])
def test_other_objects_are_refused(convert, thing):
    """What is no structure is refused by its type."""
    with pytest.raises(StructureError, match=f"{type(thing).__name__} is no"):
        convert(thing)


def test_impossible_tolerance_is_refused():
    """The tolerance is checked here too."""
    from ase.build import bulk

    with pytest.raises(UsageError, match="is no tolerance"):
        from_ase(bulk("Cu"), symprec=-1)
