from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.formats_cif import cell_in_our_axes, read_cif
from tensorsym.crystal.read import crystal_in_text
from tensorsym.errors import StructureError
from tests.crystal.texts import CIF

CELL = """data_{name}
_cell_length_a 4.0
_cell_length_b 4.0
_cell_length_c {c}
_cell_angle_alpha 90
_cell_angle_beta 90
_cell_angle_gamma 90
"""
SITES = """loop_
_atom_site_label
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
_atom_site_occupancy
"""


def cif(sites, symmetry="_space_group_name_H-M_alt 'P 1'", name="a", c="4.0"):
    """Return a CIF of a tetragonal or cubic cell."""
    return f"{CELL.format(name=name, c=c)}{symmetry}\n{SITES}{sites}\n"


@pytest.mark.parametrize("seed", range(10))
def test_axes_are_ours(seed):
    """Axis c lies along z, a in the xz plane on the side of x, the set is right-handed, and the cell is as given."""
    random = np.random.default_rng(seed)
    lengths, angles = random.uniform(2, 9, 3), random.uniform(70, 115, 3)
    a, b, c = cell_in_our_axes(*lengths, *angles)

    assert c[:2] == pytest.approx([0, 0])
    assert a[1] == 0 < a[0]
    assert np.linalg.det([a, b, c]) > 0
    assert [np.linalg.norm(vector) for vector in (a, b, c)] == pytest.approx(lengths)
    cosines = [b @ c / lengths[1] / lengths[2], a @ c / lengths[0] / lengths[2], a @ b / lengths[0] / lengths[1]]
    assert np.degrees(np.arccos(cosines)) == pytest.approx(angles)


def test_axes_are_told():
    """The crystal says that the axes are ours."""
    assert "c along z, a in the xz plane" in crystal_in_text(CIF, "file").axes_words


def test_rounded_special_positions_are_exact():
    """0.3333 and 0.6667 on a 3-fold axis are a third and two thirds."""
    positions = crystal_in_text(CIF, "file").positions

    assert np.abs(3 * positions[:, :2] - np.rint(3 * positions[:, :2])).max() < 1e-12


def test_mixed_site_is_one_species():
    """Two elements that share a place become one label, the same whichever is listed first."""
    one = crystal_in_text(cif("Na1 0 0 0 0.5\nK1 0 0 0 0.5\nCl1 .5 .5 .5 1"), "file")
    other = crystal_in_text(cif("K1 0 0 0 0.5\nNa1 0 0 0 0.5\nCl1 .5 .5 .5 1"), "file")

    assert one.species == other.species == ("K0.5Na0.5", "Cl")
    assert any("mixed or partly occupied" in note for note in one.notes)


def test_partly_empty_site_is_its_own_species():
    """A half-filled oxygen is not the same as a full one, and the group shows it."""
    half = crystal_in_text(cif("O1 0 0 0 1\nO2 .5 .5 .5 0.5"), "file")
    full = crystal_in_text(cif("O1 0 0 0 1\nO2 .5 .5 .5 1"), "file")

    assert half.species == ("O", "O0.5")
    assert (half.symmetry.number, full.symmetry.number) == (221, 229)


def test_oxidation_states_do_not_tell_atoms_apart():
    """Fe2+ and Fe3+ are the same species, and a note says so."""
    text = cif("Fe2+ 0 0 0 1\nFe3+ .5 .5 .5 1").replace("_atom_site_label", "_atom_site_type_symbol")
    crystal = crystal_in_text(text, "file")

    assert crystal.species == ("Fe", "Fe")
    assert any("oxidation states" in note for note in crystal.notes)


def test_deuterium_is_not_hydrogen():
    """D is a species of its own."""
    assert crystal_in_text(cif("D1 0 0 0 1\nH1 .5 .5 .5 1"), "file").species == ("D", "H")


def test_site_listed_with_its_own_image_is_kept_once():
    """A file that lists all atoms of the cell and the operations too has no atom twice, and a note says so."""
    listing = "loop_\n_symmetry_equiv_pos_as_xyz\nx,y,z\n-x,-y,-z"
    crystal = crystal_in_text(cif("O1 .1 .2 .3 1\nO2 .9 .8 .7 1", listing), "file")

    assert len(crystal.species) == 2
    assert any("O1, O2 are one atom by symmetry" in note for note in crystal.notes)


def test_overfull_place_is_refused():
    """Two whole atoms of different elements cannot share a place; the error names both and the line."""
    with pytest.raises(StructureError, match=r"line 1\d: Na1, K1 occupy one place, 2 atoms in all"):
        crystal_in_text(cif("Na1 0 0 0 1\nK1 0 0 0 1"), "file")


def test_first_block_with_atoms_is_used():
    """Blocks without atoms are passed over; with several structures the first is used and a note says so."""
    text = "data_global\n_journal_year 1999\n" + cif("Po1 0 0 0 1") + cif("Po1 0 0 0 1", name="b", c="5.0")
    first = crystal_in_text(text, "file")

    assert first.point_group.hermann_mauguin == "m-3m"
    assert any("2 data blocks hold structures: the first, 'a'" in note for note in first.notes)
    assert crystal_in_text(text, "file", index=-1).point_group.hermann_mauguin == "4/mmm"


# Standard symbols and numbers: International Tables for Crystallography, vol. A (memory).
@pytest.mark.parametrize(("symmetry", "number"), [
    ("_symmetry_space_group_name_H-M 'P m -3 m'", 221), ("_space_group_IT_number 221", 221),
    ("_space_group_name_H-M_alt 'F m -3 m'", 225), ("_symmetry_Int_Tables_number 229", 229),
    ("_space_group_name_Hall '-P 4 2 3'", 221), ("_symmetry_space_group_name_H-M 'P4/mmm'", 221),
])  # fmt: skip
def test_group_without_operations_is_looked_up(symmetry, number):
    """A file that names the space group and lists no operations is expanded from the table, with a note."""
    crystal = crystal_in_text(cif("Po1 0 0 0 1", symmetry), "file")

    assert crystal.symmetry.number == number
    assert any("taken from the table" in note for note in crystal.notes)


def test_no_symmetry_at_all_is_noted():
    """Without operations and names the sites are the atoms of the cell."""
    crystal = crystal_in_text(cif("Po1 0 0 0 1", ""), "file")

    assert len(crystal.species) == 1
    assert any("states no symmetry" in note for note in crystal.notes)


def test_magnetic_operations_give_the_atoms():
    """Operations of a magnetic file expand the atoms; that moments are not read is noted."""
    listing = (
        "loop_\n_space_group_symop_magn_operation.xyz\nx,y,z,+1\n-x,-y,-z,-1\n"
        "loop_\n_space_group_symop_magn_centering.xyz\nx,y,z,+1\nx+1/2,y+1/2,z+1/2,-1\n"
    )
    crystal = crystal_in_text(cif("O1 .1 .2 .3 1", listing), "file")

    assert len(crystal.species) == 4
    assert any("magnetic moments are not read" in note for note in crystal.notes)


def test_sites_without_coordinates_are_left_out():
    """Unlocated hydrogen is left out with a note, dummy atoms without."""
    crystal = crystal_in_text(cif("O1 0 0 0 1\nH1 ? ? ? 1"), "file")

    assert crystal.species == ("O",)
    assert any("without coordinates are left out: H1" in note for note in crystal.notes)


def test_nearly_special_position_is_noted():
    """An atom 0.04 Å off a centre of inversion is put onto it, and a note tells by how much it moved."""
    listing = "loop_\n_symmetry_equiv_pos_as_xyz\nx,y,z\n-x,-y,-z"
    crystal = crystal_in_text(cif("O1 0.01 0 0 1", listing), "file")

    assert crystal.positions.tolist() == [[0.0, 0.0, 0.0]]
    assert any("O1 moved by 0.04" in note for note in crystal.notes)


BAD = [
    (CIF.replace("_cell_length_c 5.207\n", ""), "_cell_length_c is missing"),
    (CIF.replace("5.207", "-5.207"), "a cell edge of -5.2 Å|a cell edge of -5.207 Å"),
    (CIF.replace("_cell_angle_gamma 120", "_cell_angle_gamma 190"), "no cell has the angles 90, 90, 190"),
    (CIF.replace("_cell_angle_alpha 90", "_cell_angle_alpha 30"), "no cell has the angles 30, 90, 120"),
    (CIF.replace("_cell_length_a 3.25(1)", "_cell_length_a long"), "line 4: _cell_length_a: 'long' is no number"),
    (CIF.replace("x,y,z\n", "x,y\n", 1), "line 12: 'x,y' is no symmetry operation"),
    (CIF.replace("x,y,z\n", "2x,y,z\n", 1), "line 12: the operation '2x,y,z' does not keep volumes"),
    (CIF.replace("Zn1 Zn2+ 0.3333 0.6667 0", "Zn1 Zn2+ 0.3333 0.6667"), "the loop has 9 values for 5 items"),
    (CIF.replace("0.3333 0.6667 0\n", "0.3333 here 0\n"), "line 30: fractional coordinate: 'here' is no number"),
    (CIF.replace("data_ZnO\n", ""), "stands before any data_ block|is of no format known"),
    (cif("Po1 0 0 0 1.7"), "site Po1 has occupancy 1.7; expected 0 to 1"),
    (cif("Po1 0 0 0 1", "_symmetry_space_group_name_H-M 'P m 3 q'"), "'P m 3 q' is no space group.*nearest"),
    (cif("Po1 ? ? ? 1"), "no site has coordinates"),
]


@pytest.mark.parametrize(("text", "message"), BAD, ids=[message[:24] for _, message in BAD])
def test_broken_cif_is_told_with_its_line(text, message):
    """A damaged CIF is refused with the file, the line and what was expected."""
    with pytest.raises(StructureError, match=message) as caught:
        read_cif(text, "a.cif").crystal("a.cif")

    assert str(caught.value).startswith("a.cif")


def test_block_that_is_not_there():
    """Asking for a block that the file does not have says how many there are."""
    with pytest.raises(StructureError, match="there is no structure 3 among 1"):
        crystal_in_text(CIF, "file", index=3)


@pytest.mark.filterwarnings("ignore")  # pymatgen's own
@pytest.mark.parametrize("label", ["Si1", "O2"])
def test_sites_agree_with_pymatgen_after_its_own_writer(label):
    """A CIF as pymatgen writes it, symmetrised, is read back to the same space group and density."""
    from pymatgen.core import Lattice, Structure
    from pymatgen.io.cif import CifWriter

    structure = Structure.from_spacegroup(
        "P3_121", Lattice.hexagonal(4.9134, 5.4052), ["Si", "O"], [[0.4697, 0, 1 / 3], [0.4135, 0.2669, 0.7858]]
    )
    crystal = crystal_in_text(str(CifWriter(structure, symprec=1e-3)), "file")

    assert crystal.symmetry.number == 152
    assert crystal.species.count(label[:-1]) == structure.composition[label[:-1]]
    assert np.linalg.det(crystal.lattice) == pytest.approx(structure.volume)
