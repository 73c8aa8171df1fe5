from __future__ import annotations

import os
import pickle
from concurrent.futures import ThreadPoolExecutor

import numpy as np
import pytest
import spglib

from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.read import read
from tensorsym.crystal.symmetry import symmetry_of
from tensorsym.errors import StructureError
from tests.conftest import ROOT
from tests.crystal.synthetic import CLASSES, crystal_of_class, random_turn

STRUCTURES = sorted((ROOT / "structures").glob("*.cif"))
ROCK_SALT = [[0, 0, 0], [0, 0.5, 0.5], [0.5, 0, 0.5], [0.5, 0.5, 0]]


def rock_salt(edge=5.64, *, primitive=False, copies=(1, 1, 1)):
    """Return rock salt in its cubic cell, in its primitive cell, or in a supercell."""
    if primitive:
        return Crystal(
            edge / 2 * np.array([[0, 1, 1], [1, 0, 1], [1, 1, 0]]), [[0, 0, 0], [0.5, 0.5, 0.5]], ("Na", "Cl")
        )
    sites = [(np.array(place) + shift * np.array([0.5, 0.5, 0.5]), label) for shift, label in ((0, "Na"), (1, "Cl"))
             for place in ROCK_SALT]  # fmt: skip
    steps = [np.array(step) for step in np.ndindex(*copies)]
    positions = [(place + step) / copies for place, _ in sites for step in steps]
    species = [label for _, label in sites for _ in steps]
    return Crystal(np.diag(edge * np.array(copies)), np.array(positions), tuple(species))


@pytest.mark.filterwarnings("ignore")  # pymatgen's own
@pytest.mark.parametrize("path", STRUCTURES, ids=lambda path: path.stem)
def test_shipped_structures_agree_with_pymatgen(path):
    """pymatgen, which reads the CIF with its own parser, finds the same space group and number of atoms."""
    from pymatgen.io.cif import CifParser
    from pymatgen.symmetry.analyzer import SpacegroupAnalyzer

    crystal = read(path)
    structure = CifParser(path).parse_structures(primitive=False)[0]

    assert len(structure) == len(crystal.species)
    assert SpacegroupAnalyzer(structure, symprec=1e-3).get_space_group_number() == crystal.symmetry.number


@pytest.mark.parametrize("name", CLASSES)
def test_cartesian_rotations_match_the_integer_ones(name):
    """Each orthogonal matrix is the one of its own integer rotation."""
    symmetry = crystal_of_class(name, random_turn(7)).symmetry
    rough = symmetry.cell.T @ symmetry.rotations @ np.linalg.inv(symmetry.cell.T)

    assert np.abs(symmetry.cartesian_rotations() - rough).max() < 1e-8


@pytest.mark.parametrize("copies", [(1, 1, 2), (2, 1, 1), (1, 2, 3)])
def test_supercell_that_breaks_the_class_keeps_the_crystal_s_class(copies):
    """The shape of a supercell does not change the crystal: the class is still that of rock salt."""
    symmetry = rock_salt(copies=copies).symmetry

    assert (symmetry.number, symmetry.group.hermann_mauguin) == (225, "m-3m")
    assert not symmetry.cell_keeps_class
    assert np.abs(symmetry.frame - np.eye(3)).max() < 1e-12


def test_supercell_that_keeps_the_class_keeps_its_cell():
    """In a 2 x 2 x 2 supercell all rotations are whole-numbered, and the operations are those of the file's cell."""
    crystal = rock_salt(copies=(2, 2, 2))

    assert crystal.symmetry.cell_keeps_class
    assert crystal.symmetry.cell is crystal.lattice
    assert len(crystal.symmetry.rotations) == 48 * 4 * 8


def test_primitive_and_conventional_cell_agree():
    """The class, the frame and the volume of the standard cell do not depend on which cell was given."""
    one, other = rock_salt(primitive=True).symmetry, rock_salt().symmetry

    assert one.number == other.number == 225
    assert np.abs(one.frame - other.frame).max() < 1e-12
    assert np.linalg.det(one.standard_cell) == pytest.approx(np.linalg.det(other.standard_cell))


def test_left_handed_cell_keeps_its_space_group():
    """alpha-quartz in a left-handed cell is still P3_121, not its mirror image, and a note tells the hand."""
    quartz = read(ROOT / "structures" / "quartz-p3121.cif")
    swap = [1, 0, 2]
    mirrored = Crystal(quartz.lattice[swap], quartz.positions[:, swap], quartz.species)

    assert mirrored.symmetry.international == "P3_121"
    assert np.linalg.det(mirrored.symmetry.frame) > 0
    assert np.linalg.det(mirrored.symmetry.standard_cell) > 0
    assert any("left-handed" in note for note in mirrored.notes)


def test_reason_of_failure_is_told():
    """Spglib's own reason is in the error, and its error is the cause."""
    crystal = rock_salt()
    crystal.positions.setflags(write=True)
    crystal.positions[1] = crystal.positions[0]

    with pytest.raises(StructureError, match="too close distance between atoms") as caught:
        symmetry_of(crystal, 1e-3)

    assert isinstance(caught.value.__cause__, spglib.SpglibError)


def test_failure_without_a_reason_is_told(monkeypatch):
    """A spglib that returns nothing gives the same error, without a reason."""
    monkeypatch.setattr(spglib, "get_symmetry_dataset", lambda *_, **__: None)

    with pytest.raises(StructureError, match="spglib gives no reason"):
        symmetry_of(rock_salt(), 1e-3)


def test_nothing_global_is_touched():
    """Neither the environment nor spglib's switch changes, so other users of spglib see no difference."""
    before = os.environ.get("SPGLIB_OLD_ERROR_HANDLING"), getattr(spglib.error, "OLD_ERROR_HANDLING", None)
    symmetry_of(rock_salt(), 1e-3)

    assert (os.environ.get("SPGLIB_OLD_ERROR_HANDLING"), getattr(spglib.error, "OLD_ERROR_HANDLING", None)) == before


def test_threads_agree():
    """Many crystals at once give what one after the other gives."""
    crystals = [crystal_of_class(name, random_turn(seed)) for seed in (1, 2) for name in CLASSES]
    with ThreadPoolExecutor(4) as pool:
        numbers = list(pool.map(lambda crystal: symmetry_of(crystal, 1e-3).number, crystals))

    assert numbers == [symmetry_of(crystal, 1e-3).number for crystal in crystals]


def test_symmetry_can_be_pickled_and_told_in_a_line():
    """A result crosses processes, and its repr is one short line."""
    symmetry = rock_salt().symmetry
    copy = pickle.loads(pickle.dumps(symmetry))

    assert repr(copy) == repr(symmetry) == "CrystalSymmetry(Fm-3m (225), class m-3m, symprec 0.001)"
    assert np.array_equal(copy.frame, symmetry.frame)


@pytest.mark.parametrize("name", ["frame", "cell", "rotations", "translations", "equivalent_atoms", "symmetrised_cell"])
def test_arrays_are_read_only(name):
    """No array of a result can be written to."""
    assert not getattr(rock_salt().symmetry, name).flags.writeable
