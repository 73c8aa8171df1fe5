from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.formats_pw_input import BOHR
from tensorsym.crystal.pw_lattices import lattice_of_index
from tensorsym.crystal.read import crystal_in_text, read
from tensorsym.errors import StructureError
from tests.conftest import ROOT
from tests.crystal.texts import PW_INPUT, PW_OUTPUT, PW_XML

ROCK_SALT = """&system
  ibrav={ibrav}, {cell}
  nat=2, ntyp=2
/
{card}
ATOMIC_POSITIONS {unit}
Na 0 0 0
Cl {place}
"""


def printed_lattices():
    """Return ibrav, the six numbers of its cell, and the axes that pw.x itself printed for them."""
    for line in (ROOT / "tests" / "data" / "crystal" / "pw_lattices.txt").read_text().splitlines():
        if not line.startswith("#"):
            ibrav, cell, axes = line.split(";")
            rows = [[float(word) for word in axis.split()] for axis in axes.split(",")]
            yield pytest.param(int(ibrav), (1.0, *map(float, cell.split())), rows, id=f"ibrav{ibrav}")


@pytest.mark.parametrize(("ibrav", "cell", "printed"), list(printed_lattices()))
def test_lattices_are_those_that_pw_x_prints(ibrav, cell, printed):
    """Every lattice agrees with the axes in a run of pw.x 6.7 (tests/data/crystal/pw_lattices.txt), six decimals."""
    assert np.abs(lattice_of_index(ibrav, cell, "") - printed).max() < 6e-7


@pytest.mark.parametrize("ibrav", [5, 12, 13, 14])
def test_impossible_cosines_are_refused(ibrav):
    """Angles that make no cell are refused with the cosines."""
    with pytest.raises(StructureError, match=f"ibrav = {ibrav}: the cosines 1.5, 0, 0 make no cell"):
        lattice_of_index(ibrav, (1.0, 1, 1, 1.5, 0, 0), "file")


@pytest.mark.parametrize(("ibrav", "cell", "card", "unit", "place"), [
    (2, "celldm(1)=10.6", "", "(alat)", "0.5 0.5 0.5"),
    (2, "celldm(1)=10.6", "", "", "0.5 0.5 0.5"),
    (2, "A=5.6", "", "{angstrom}", "2.8 2.8 2.8"),
    (2, "celldm(1) = 10.6d0", "", "crystal", "0.5 0.5 0.5"),
    (0, "celldm(1)=10.6", "CELL_PARAMETERS alat\n-.5 0 .5\n0 .5 .5\n-.5 .5 0", "alat", "0.5 0.5 0.5"),
    (0, "", "CELL_PARAMETERS {bohr}\n0 5.3 5.3\n5.3 0 5.3\n5.3 5.3 0", "crystal", "0.5 0.5 0.5"),
    (0, "", "CELL_PARAMETERS (angstrom)\n0 2.8 2.8\n2.8 0 2.8\n2.8 2.8 0", "bohr", "5.2912338 5.2912338 5.2912338"),
    (0, "", "CELL_PARAMETERS\n0 5.3 5.3\n5.3 0 5.3\n5.3 5.3 0", "bohr", "5.3 5.3 5.3"),
])  # fmt: skip
def test_units_and_cards_are_understood(ibrav, cell, card, unit, place):
    """Rock salt comes out of every way to write it."""
    text = ROCK_SALT.format(ibrav=ibrav, cell=cell, card=card, unit=unit, place=place)
    crystal = crystal_in_text(text, "file")

    assert crystal.format == "pw.x input"
    assert crystal.symmetry.number == 225


def test_cosines_are_put_in_their_places():
    """A monoclinic cell by A, B, C and cosAC equals the one by celldm."""
    body = "\nnat=1, ntyp=1\n/\nATOMIC_SPECIES\nPo 1 a\nATOMIC_POSITIONS crystal\nPo 0 0 0\n"
    one = crystal_in_text(f"&SYSTEM\nibrav=-12, A=3.0, B=4.0, C=5.0, cosAC=-0.2{body}", "file")
    other = crystal_in_text(
        f"&SYSTEM\nibrav=-12, celldm(1)={3 / BOHR:.12f}, celldm(2)={4 / 3:.12f}, celldm(3)={5 / 3:.12f}, "
        f"celldm(5)=-0.2{body}",
        "file",
    )

    assert one.lattice == pytest.approx(other.lattice, abs=1e-9)
    assert one.point_group.hermann_mauguin == "2/m"


def test_labelled_species_stay_apart():
    """Fe1 and Fe2 are different for pw.x and for us, and a note says so."""
    text = (
        ROCK_SALT.format(ibrav=2, cell="A=5", card="", unit="", place=".5 .5 .5")
        .replace("Na ", "Fe1 ")
        .replace("Cl ", "Fe2 ")
    )
    crystal = crystal_in_text(text, "file")

    assert crystal.species == ("Fe1", "Fe2")
    assert "Fe1 and Fe2 are kept apart, as pw.x does" in crystal.notes


@pytest.mark.parametrize(("text", "message"), [
    (PW_INPUT.replace("nat = 4,", ""), "&SYSTEM holds no nat"),
    (PW_INPUT.replace("ibrav = 4,", ""), "&SYSTEM holds no ibrav"),
    (PW_INPUT.replace("ibrav = 4", "ibrav = 44"), "line 5: ibrav = 44 is no lattice; expected -13, -12"),
    (PW_INPUT.replace(", A = 3.25", ""), r"neither celldm\(1\) nor A is given"),
    (PW_INPUT.replace("ibrav = 4", "ibrav = 0"), "holds no card CELL_PARAMETERS"),
    (PW_INPUT.replace("ATOMIC_POSITIONS crystal", "ATOMIC_POSITIONS furlong"), "'furlong' is no unit of length"),
    (PW_INPUT.replace("ATOMIC_POSITIONS crystal", "ATOMIC_POSITIONS crystal_sg"), "by space group .* are not read"),
    (PW_INPUT.replace("nat = 4", "nat = 9"), "position 5 of 9"),
    (PW_INPUT.replace("nat = 4", "nat = four"), "nat: 'four' is no whole number"),
    (PW_INPUT.replace("C = 5.207\n", "C = wide\n"), "line 5: c: 'wide' is no number"),
    (PW_INPUT[: PW_INPUT.index("ATOMIC_POSITIONS")], "holds no card ATOMIC_POSITIONS"),
    ("&SYSTEM\n ibrav=2\nATOMIC_POSITIONS\n", "the name list &SYSTEM is not closed"),
])  # fmt: skip
def test_broken_input_is_told(text, message):
    """A damaged input is refused with what is missing and where."""
    with pytest.raises(StructureError, match=message):
        crystal_in_text(text, "scf.in")


@pytest.mark.parametrize(("text", "message"), [
    (PW_OUTPUT.replace("lattice parameter", "parameter"), "holds no complete cell"),
    (PW_OUTPUT[: PW_OUTPUT.index("a(3)")], "holds no complete cell; the file may be cut off"),
    (PW_OUTPUT[: PW_OUTPUT.index("Cartesian axes")], "holds 0 of 4 positions; the file may be cut off"),
    (PW_OUTPUT[:-60], "holds 3 of 4 positions"),
    (PW_XML.replace("<cell>", "<box>").replace("</cell>", "</box>"), "a geometry holds no cell"),
    (PW_XML[: PW_XML.index("<cell>")], "the XML is broken"),
])  # fmt: skip
def test_broken_output_is_told(text, message):
    """A cut or damaged output is refused with what is missing."""
    with pytest.raises(StructureError, match=message):
        crystal_in_text(text, "scf.out")


@pytest.mark.parametrize(("name", "number"), [
    ("run_alas_zincblende/scf.in", 216), ("run_alas_zincblende/scf.out", 216), ("run_alas_zincblende/ph.out", 216),
    ("run_alas_wurtzite/scf.in", 186), ("run_alas_wurtzite/scf.out", 186), ("run_alas_wurtzite/ph.out", 186),
    ("reference/ex17_bn2d.ph.out", 187), ("xml/ph.out", 227),
])  # fmt: skip
def test_outside_files_have_the_recorded_groups(data_folder, name, number):
    """Real outputs have the space groups that an independent calculation recorded in the index of the data."""
    assert read(data_folder / "qe" / name).symmetry.number == number
