"""The shipped crystals are what they say: space group, formula, density, source."""

from __future__ import annotations

import re

import numpy as np
import pytest

from tensorsym.crystal.read import read
from tests.conftest import ROOT

FILES = sorted((ROOT / "structures").glob("*.cif"))

# Densities in g/cm^3 from handbooks (CRC Handbook of Chemistry and Physics, mineral data; memory).
DENSITY = {
    "albite": 2.62, "anatase": 3.89, "barium-titanate-orthorhombic": 6.02, "barium-titanate-tetragonal": 6.02,
    "beta-manganese": 7.24, "beta-quartz": 2.53, "boron-phosphate": 2.81, "caesium-chloride": 3.99, "calcite": 2.71,
    "chalcopyrite": 4.19, "chromia": 5.22, "copper": 8.93, "corundum": 3.98, "fluorapatite": 3.19, "fluorite": 3.18,
    "forsterite-pbnm": 3.22, "gallium-arsenide": 5.32, "gypsum": 2.31, "haematite": 5.26, "ilmenite": 4.79,
    "lithium-niobate": 4.64, "magnesium": 1.74, "manganese-fluoride": 3.93, "paratellurite": 6.02,
    "perovskite-pnma": 4.03, "potassium-dihydrogen-phosphate": 2.34, "pyrite": 5.01, "quartz-p3121": 2.65,
    "quartz-p3221": 2.65, "rock-salt": 2.16, "rutile": 4.25, "sanidine": 2.56, "scheelite": 6.12, "selenium": 4.81,
    "silicon": 2.33, "sodium-chlorate": 2.49, "strontium-titanate": 5.12, "tellurium": 6.24, "tungsten-carbide": 15.67,
    "wurtzite-zno": 5.61, "zinc-blende": 4.09,
}  # fmt: skip

MASS = {
    "H": 1.008, "Li": 6.94, "B": 10.81, "C": 12.011, "N": 14.007, "O": 15.999, "F": 18.998, "Na": 22.990, "Mg": 24.305,
    "Al": 26.982, "Si": 28.085, "P": 30.974, "S": 32.06, "Cl": 35.45, "K": 39.098, "Ca": 40.078, "Ti": 47.867,
    "Cr": 51.996, "Mn": 54.938, "Fe": 55.845, "Cu": 63.546, "Zn": 65.38, "Ga": 69.723, "As": 74.922, "Se": 78.971,
    "Sr": 87.62, "Nb": 92.906, "Te": 127.60, "Cs": 132.905, "Ba": 137.327, "W": 183.84,
}  # fmt: skip
"""Standard atomic weights (IUPAC 2021, abridged; memory)."""


def written_number(path):
    """Return the space-group number that a file states."""
    return int(re.search(r"_symmetry_Int_Tables_number (\d+)", path.read_text(encoding="utf-8"))[1])


def mass_of(label):
    """Return the mass of a species label, mixed sites by their occupancies."""
    parts = re.findall(r"([A-Z][a-z]?)([\d.]*)", label)
    return sum(MASS[element] * float(amount or 1) for element, amount in parts)


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_space_group_is_the_one_written(path):
    """The space group found is the one that the file states, at 1e-3 angstrom and at 1e-4 as well."""
    crystal = read(path)

    assert crystal.symmetry.number == written_number(path)
    assert crystal.at(1e-4).symmetry.number == written_number(path)


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_density_is_that_of_handbooks(path):
    """The cell holds the right atoms: its density is within 2 % of the handbook's."""
    crystal = read(path)
    volume = abs(np.linalg.det(crystal.lattice))
    density = sum(map(mass_of, crystal.species)) * 1.66053907 / volume

    assert density == pytest.approx(DENSITY[path.stem], rel=0.02)


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_source_is_named(path):
    """Every file names where its parameters come from."""
    assert re.search(r"^# Cell and positions: .+\d{4}", path.read_text(encoding="utf-8"), re.MULTILINE)


def test_collection_spans_all_systems():
    """At least 24 crystals, all seven systems, centric and acentric classes."""
    groups = [read(path).symmetry.group for path in FILES]

    assert len(FILES) >= 24
    assert {group.system for group in groups} == {
        "triclinic", "monoclinic", "orthorhombic", "tetragonal", "trigonal", "hexagonal", "cubic",
    }  # fmt: skip
    assert {group.is_centrosymmetric for group in groups} == {True, False}
