from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.read import read
from tests.conftest import ROOT
from tests.crystal.synthetic import CLASSES, crystal_of_class, largest_gap, matrices_of_class, random_turn
from tests.crystal.test_symmetry import rock_salt

# International Tables for Crystallography, vol. A (memory): Wyckoff position and site symmetry.
KNOWN = [
    ("rutile", [("Ti1", "2a", "m.mm", "mmm"), ("O1", "4f", "m.2m", "mm2")]),
    ("fluorite", [("Ca1", "4a", "m-3m", "m-3m"), ("F1", "8c", "-43m", "-43m")]),
    (
        "strontium-titanate",
        [("Sr1", "1a", "m-3m", "m-3m"), ("Ti1", "1b", "m-3m", "m-3m"), ("O1", "3c", "4/mm.m", "4/mmm")],
    ),
    ("calcite", [("Ca1", "6b", "-3.", "-3"), ("C1", "6a", "32", "32"), ("O1", "18e", ".2", "2")]),
    ("quartz-p3121", [("Si1", "3a", ".2.", "2"), ("O1", "6c", "1", "1")]),
    ("wurtzite-zno", [("Zn1", "2b", "3m.", "3m"), ("O1", "2b", "3m.", "3m")]),
]


@pytest.mark.parametrize(("name", "expected"), KNOWN, ids=[name for name, _ in KNOWN])
def test_sites_are_those_of_the_tables(name, expected):
    """Wyckoff positions and site symmetries of well-known crystals are those of International Tables (memory)."""
    sites = read(ROOT / "structures" / f"{name}.cif").sites

    assert [(site.label, site.wyckoff, site.oriented_symbol, site.site_group) for site in sites] == expected


def test_atoms_are_shared_out_among_the_sites():
    """Every atom belongs to exactly one site."""
    crystal = read(ROOT / "structures" / "calcite.cif")
    atoms = [atom for site in crystal.sites for atom in site.atoms]

    assert sorted(atoms) == list(range(len(crystal.species)))


@pytest.mark.parametrize("name", CLASSES)
def test_general_positions_have_no_symmetry(name):
    """Atoms in general positions have site group 1, and the orbit is as long as the order of the class."""
    crystal = crystal_of_class(name, random_turn(2))

    assert [(site.site_group, len(site.atoms)) for site in crystal.sites] == [("1", crystal.point_group.order)] * 2


def test_order_of_site_group_times_orbit_is_order_of_class():
    """Orbit and stabiliser multiply to the order of the group, per primitive cell."""
    crystal = rock_salt(primitive=True)

    assert all(site.group.order * len(site.atoms) == 48 for site in crystal.sites)


def test_frame_of_a_site_puts_its_class_onto_its_rotations():
    """The site's own operations are those of its class, turned by its frame."""
    crystal = read(ROOT / "structures" / "rutile.cif")
    across = crystal.symmetry.cell.T
    for site in crystal.sites:
        found = across @ site.rotations @ np.linalg.inv(across)
        assert largest_gap(matrices_of_class(site.site_group, site.frame), found) < 1e-10


def test_elements_of_a_site_are_told_in_the_file_s_axes():
    """The two-fold axis of oxygen in rutile lies along [110] (International Tables, memory)."""
    oxygen = read(ROOT / "structures" / "rutile.cif").sites[1]

    assert oxygen.elements_in_words.endswith("2 along (1,1,0)")


def test_sites_of_a_broken_supercell_are_those_of_the_crystal():
    """The site symmetry does not depend on the shape of the supercell."""
    sites = rock_salt(copies=(1, 1, 2)).sites

    assert [(site.label, site.wyckoff, site.site_group) for site in sites] == [
        ("Na1", "4a", "m-3m"),
        ("Cl1", "4b", "m-3m"),
    ]
