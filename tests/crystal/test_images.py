from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.images import atom_images, atom_images_and_misses
from tensorsym.crystal.read import read
from tensorsym.errors import StructureError
from tests.conftest import ROOT
from tests.crystal.synthetic import CLASSES, crystal_of_class, random_turn
from tests.crystal.test_symmetry import rock_salt


@pytest.mark.parametrize("name", CLASSES)
def test_images_are_permutations_and_compose(name):
    """Every row is a permutation, species are kept, and the product of two operations permutes as their product."""
    crystal = crystal_of_class(name, random_turn(1))
    images, rotations = atom_images(crystal), crystal.symmetry.rotations
    rows = {tuple(row): number for number, row in enumerate(images.tolist())}
    one, other = len(images) - 1, len(images) // 2

    assert (np.sort(images, axis=1) == np.arange(len(crystal.species))).all()
    assert (crystal.numbers[images] == crystal.numbers).all()
    product = rows[tuple(images[one][images[other]].tolist())]
    assert np.array_equal(rotations[one] @ rotations[other], rotations[product])


def test_orbits_are_spglib_s():
    """The atoms that images connect are those that spglib calls equivalent."""
    crystal = read(ROOT / "structures" / "calcite.cif")

    assert np.array_equal(atom_images(crystal).min(axis=0), crystal.symmetry.equivalent_atoms)


def test_misses_sum_to_the_way_back():
    """An atom displaced by a known amount from a special position is missed by its images by that amount on average."""
    crystal = Crystal(4.0 * np.eye(3), [[0, 0, 0], [0.5, 0.5, 0.502]], ("Cs", "Cl"), symprec=0.02)
    _, misses = atom_images_and_misses(crystal, crystal.symmetry)

    assert crystal.point_group.hermann_mauguin == "m-3m"
    relative = misses.mean(axis=0)[1] - misses.mean(axis=0)[0]
    assert relative == pytest.approx([0.0, 0.0, -0.008], abs=1e-9)


def test_supercell_that_breaks_the_class_has_no_images():
    """Atoms of such a supercell cannot be followed, and the error says what to give instead."""
    with pytest.raises(StructureError, match=r"supercell whose shape breaks the class.*primitive"):
        atom_images(rock_salt(copies=(1, 1, 2)))
