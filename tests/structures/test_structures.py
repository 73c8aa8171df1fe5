"""The shipped crystals are what they say: space group, formula, density, source."""

from __future__ import annotations

import re

import numpy as np
import pytest
import spglib
from ase.data import atomic_numbers, covalent_radii
from pymatgen.core import Composition, Structure
from pymatgen.core.operations import SymmOp

from tensorsym.crystal.read import read
from tests.conftest import ROOT

FILES = sorted((ROOT / "structures").glob("*.cif"))

# Formula (chemistry), formula units in the cell (the sources named in the files) and density in g/cm^3 from handbooks
# (CRC Handbook of Chemistry and Physics, mineral data; all memory). The densities of alloclasite and of lead zirconate
# titanate are those that their sources compute from the cell: they show that nothing is mistyped, no more.
CONTENT = {
    "albite": ("NaAlSi3O8", 4, 2.62),
    "alloclasite": ("CoAsS", 2, 6.19),
    "anatase": ("TiO2", 4, 3.89),
    "barium-titanate-orthorhombic": ("BaTiO3", 2, 6.02),
    "barium-titanate-tetragonal": ("BaTiO3", 1, 6.02),
    "beta-manganese": ("Mn", 20, 7.24),
    "beta-quartz": ("SiO2", 3, 2.53),
    "boron-phosphate": ("BPO4", 2, 2.81),
    "caesium-chloride": ("CsCl", 1, 3.99),
    "calcite": ("CaCO3", 6, 2.71),
    "chalcopyrite": ("CuFeS2", 4, 4.19),
    "chromia": ("Cr2O3", 6, 5.22),
    "copper": ("Cu", 4, 8.93),
    "corundum": ("Al2O3", 6, 3.98),
    "fluorapatite": ("Ca5P3O12F", 2, 3.19),
    "fluorite": ("CaF2", 4, 3.18),
    "forsterite-pbnm": ("Mg2SiO4", 4, 3.22),
    "gallium-arsenide": ("GaAs", 4, 5.32),
    "gypsum": ("CaSO6H4", 4, 2.31),
    "haematite": ("Fe2O3", 6, 5.26),
    "ilmenite": ("FeTiO3", 6, 4.79),
    "lead-zirconate-titanate-monoclinic": ("PbZr0.52Ti0.48O3", 2, 8.0),
    "lithium-iodate": ("LiIO3", 2, 4.49),
    "lithium-niobate": ("LiNbO3", 6, 4.64),
    "magnesium": ("Mg", 2, 1.74),
    "manganese-fluoride": ("MnF2", 2, 3.93),
    "paratellurite": ("TeO2", 4, 6.02),
    "perovskite-pnma": ("CaTiO3", 4, 4.03),
    "potassium-dihydrogen-phosphate": ("KH2PO4", 4, 2.34),
    "pyrite": ("FeS2", 4, 5.01),
    "quartz-p3121": ("SiO2", 3, 2.65),
    "quartz-p3221": ("SiO2", 3, 2.65),
    "rock-salt": ("NaCl", 4, 2.16),
    "rutile": ("TiO2", 2, 4.25),
    "sanidine": ("KAlSi3O8", 4, 2.56),
    "scheelite": ("CaWO4", 4, 6.12),
    "selenium": ("Se", 3, 4.81),
    "silicon": ("Si", 8, 2.33),
    "silver-selenide": ("Ag2Se", 4, 8.22),
    "sodium-chlorate": ("NaClO3", 4, 2.49),
    "strontium-titanate": ("SrTiO3", 1, 5.12),
    "tellurium": ("Te", 3, 6.24),
    "tungsten-carbide": ("WC", 1, 15.67),
    "wurtzite-zno": ("ZnO", 2, 5.61),
    "zinc-blende": ("ZnS", 4, 4.09),
}

MASS = {
    "H": 1.008, "Li": 6.94, "B": 10.81, "C": 12.011, "N": 14.007, "O": 15.999, "F": 18.998, "Na": 22.990, "Mg": 24.305,
    "Al": 26.982, "Si": 28.085, "P": 30.974, "S": 32.06, "Cl": 35.45, "K": 39.098, "Ca": 40.078, "Ti": 47.867,
    "Cr": 51.996, "Mn": 54.938, "Fe": 55.845, "Co": 58.933, "Cu": 63.546, "Zn": 65.38, "Ga": 69.723, "As": 74.922,
    "Se": 78.971, "Sr": 87.62, "Zr": 91.224, "Nb": 92.906, "Ag": 107.868, "Te": 127.60, "I": 126.904, "Cs": 132.905,
    "Ba": 137.327, "W": 183.84, "Pb": 207.2,
}  # fmt: skip
"""Standard atomic weights (IUPAC 2021, abridged; memory)."""

quiet_spglib = pytest.mark.filterwarnings("ignore:Set OLD_ERROR_HANDLING:DeprecationWarning")
quiet_pymatgen = pytest.mark.filterwarnings(
    "ignore:Issues encountered while parsing CIF. . fractional coordinates rounded"
)

REPELLING = frozenset({"O", "F"})


def written_number(path):
    """Return the space-group number that a file states."""
    return int(re.search(r"_symmetry_Int_Tables_number (\d+)", path.read_text(encoding="utf-8"))[1])


def amounts_in(labels):
    """Return the amount of each element in species labels, mixed sites by their occupancies."""
    amounts = {}
    for label in labels:
        for element, amount in re.findall(r"([A-Z][a-z]?)([\d.]*)", label):
            amounts[element] = amounts.get(element, 0.0) + float(amount or 1)
    return amounts


def least_distance(first, second):
    """Return the shortest distance in angstrom that two elements may have in these crystals.

    Atoms that repel each other, as oxygen and oxygen do, keep more than 2.15 angstrom (the edge of a carbonate group is
    2.22); all others keep 0.77 of the sum of the covalent radii (Cordero et al., Dalton Trans. 2008, 2832, from ase).
    """
    if first in REPELLING and second in REPELLING:
        return 2.15
    return 0.77 * sum(covalent_radii[atomic_numbers[element]] for element in (first, second))


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_space_group_is_the_one_written(path):
    """The space group found is the one that the file states, at 1e-3 angstrom and at 1e-4 as well."""
    crystal = read(path)

    assert crystal.symmetry.number == written_number(path)
    assert crystal.at(1e-4).symmetry.number == written_number(path)


@quiet_spglib
@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_operations_are_those_of_the_space_group(path):
    """The list of operations in a file is the space group of the number written there, by spglib's reading."""
    texts = re.findall(r"^'([^']*,[^']*)'$", path.read_text(encoding="utf-8"), re.MULTILINE)
    operations = [SymmOp.from_xyz_str(text) for text in texts]
    found = spglib.get_spacegroup_type_from_symmetry(
        np.rint([operation.rotation_matrix for operation in operations]).astype(int),
        np.array([operation.translation_vector for operation in operations]),
        lattice=read(path).lattice,
    )

    assert found is not None
    assert found.number == written_number(path)


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_formula_is_that_of_the_crystal(path):
    """The cell holds the stated number of formula units, element by element."""
    formula, units, _ = CONTENT[path.stem]
    expected = {str(element): amount * units for element, amount in Composition(formula).items()}

    assert amounts_in(read(path).species) == pytest.approx(expected, abs=1e-9)


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_density_is_that_of_handbooks(path):
    """Cell edges and contents fit together: the density is within 2 % of the handbook's."""
    crystal = read(path)
    volume = abs(np.linalg.det(crystal.lattice))
    mass = sum(MASS[element] * amount for element, amount in amounts_in(crystal.species).items())

    assert mass * 1.66053907 / volume == pytest.approx(CONTENT[path.stem][2], rel=0.02)


@quiet_pymatgen
@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_atoms_keep_their_distance(path):
    """No two atoms are nearer than chemistry lets them be: a site put in the wrong origin setting shows here."""
    structure = Structure.from_file(path)
    centres, neighbours, _, distances = structure.get_neighbor_list(3.2)
    elements = [site.species.elements[0].symbol for site in structure]
    too_near = [
        f"{elements[i]}-{elements[j]} {distance:.3f}"
        for i, j, distance in zip(centres, neighbours, distances, strict=True)
        if distance < least_distance(elements[i], elements[j])
    ]

    assert too_near == []


@quiet_pymatgen
@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_pymatgen_reads_the_same_atoms(path):
    """Another reader makes as many atoms of the file, with the same amounts."""
    structure = Structure.from_file(path)
    crystal = read(path)

    assert len(structure) == len(crystal.species)
    assert amounts_in(crystal.species) == pytest.approx(structure.composition.get_el_amt_dict(), abs=1e-9)


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
