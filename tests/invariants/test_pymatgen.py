"""A general library's own symmetrisation as another road, over all shipped crystals."""

from __future__ import annotations

from functools import lru_cache
from pathlib import Path

import numpy as np
import pytest
from pymatgen.core import Structure
from pymatgen.core.tensors import Tensor

from tensorsym.catalog.properties import property_named
from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.read import read
from tensorsym.invariants.projection import orthonormal_basis, projected
from tensorsym.tensors.axes import turned
from tests.properties.strategies import random_axes, random_tensor

FILES = sorted((Path(__file__).resolve().parents[2] / "structures").glob("*.cif"))
STAND_INS = ["H", "Li", "Be", "B", "C", "N", "O", "F", "Na", "Mg"]
POLAR = ["pyroelectric", "dielectric", "piezoelectric", "photoelastic"]

pytestmark = pytest.mark.filterwarnings("ignore::DeprecationWarning:spglib", "ignore:Set OLD_ERROR_HANDLING")


@lru_cache(maxsize=64)
def crystal_and_structure(path):
    """Return a shipped crystal, and the same cell for pymatgen with one element for each kind of occupation."""
    crystal = read(path)
    return crystal, Structure(crystal.lattice, [STAND_INS[number] for number in crystal.numbers], crystal.positions)


def projected_by_us(tensor, crystal, kind):
    """Return the allowed tensor closest to one in the crystal's own Cartesian axes."""
    frame = crystal.symmetry.frame
    standard = projected(turned(tensor, frame), orthonormal_basis(crystal.point_group, kind))
    return turned(standard, frame.T)


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
@pytest.mark.parametrize("name", POLAR)
def test_projection_is_that_of_pymatgen(path, name):
    """A random tensor in the file's axes is projected onto what `Tensor.fit_to_structure` of pymatgen makes of it."""
    crystal, structure = crystal_and_structure(path)
    kind = property_named(name).kind
    tensor = random_tensor(kind, seed=len(path.stem))
    theirs = Tensor(tensor).fit_to_structure(structure, symprec=crystal.symprec)

    assert np.abs(projected_by_us(tensor, crystal, kind) - np.asarray(theirs)).max() < 1e-6


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
@pytest.mark.parametrize("name", ["piezoelectric", "elastic-stiffness"])
def test_projection_is_that_of_pymatgen_in_a_turned_cell(path, name):
    """The same when the cell lies anyhow in its Cartesian axes, so that no axis of the crystal is x, y or z."""
    crystal, structure = crystal_and_structure(path)
    lattice = crystal.lattice @ random_axes(seed=len(path.stem))
    there = Crystal(lattice, crystal.positions, crystal.species)
    kind = property_named(name).kind
    tensor = random_tensor(kind, seed=1)

    theirs = Tensor(tensor).fit_to_structure(Structure(lattice, structure.species, crystal.positions), crystal.symprec)

    assert np.abs(projected_by_us(tensor, there, kind) - np.asarray(theirs)).max() < 1e-6
