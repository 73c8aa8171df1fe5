from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.read import crystal_in_text, read
from tensorsym.errors import StructureError
from tests.conftest import ROOT
from tests.crystal.texts import OUTCAR, VASPRUN

MOVED = """
 POSITION                                       TOTAL-FORCE (eV/Angst)
 -----------------------------------------------------------------------------------
      0.10000      1.87639      0.00000         0.000000      0.000000      0.000000
      1.62500      0.93819      2.60350         0.000000      0.000000      0.000000
      0.00000      1.87639      1.98907         0.000000      0.000000      0.000000
      1.62500      0.93819      4.59257         0.000000      0.000000      0.000000
"""
ENTITY = (
    '<?xml version="1.0"?><!DOCTYPE lolz [<!ENTITY lol "lol"><!ENTITY lol2 "&lol;&lol;">]><modeling>&lol2;</modeling>'
)


def test_first_geometry_of_outcar_is_used():
    """The undisplaced geometry comes first; a displaced one is taken only when asked for."""
    assert crystal_in_text(OUTCAR + MOVED, "OUTCAR").point_group.hermann_mauguin == "6mm"
    assert crystal_in_text(OUTCAR + MOVED, "OUTCAR", index=-1).point_group.hermann_mauguin == "1"


def test_real_outcar_of_quartz():
    """The OUTCAR of Phonopy-Spectroscopy (see tests/data/outputs/ORIGINS.md) holds P3_221, 9 atoms."""
    crystal = read(ROOT / "tests" / "data" / "outputs" / "OUTCAR.quartz.0006.001.gz")

    assert (crystal.symmetry.number, crystal.formula, len(crystal.species)) == (154, "SiO2", 9)


@pytest.mark.parametrize(("name", "number"), [
    ("OUTCAR.EFG-JVASP-12148.gz", 129), ("OUTCAR.lepsilon.gz", 160), ("OUTCAR.quartz.0006.001.gz", 154),
    ("OUTCAR.silicon.gz", 227), ("OUTCAR.total_tensor.Li2O.gz", 225), ("vasprun.dfpt.unconverged.xml.gz", 227),
    ("vasprun.dfpt.xml.gz", 167),
])  # fmt: skip
def test_outside_files_have_the_recorded_groups(data_folder, name, number):
    """Real outputs have the space groups that an independent calculation recorded in the index of the data."""
    assert read(data_folder / "vasp" / name).symmetry.number == number


def test_fused_numbers_of_outcar_are_parted():
    """Columns that touch because of a minus sign are still three numbers."""
    fused = OUTCAR.replace("-1.625000000 2.814582562", "-1.625000000-2.814582562")
    crystal = crystal_in_text(fused, "OUTCAR")

    assert crystal.lattice[1] == pytest.approx([-1.625, -2.814582562, 0.0])


@pytest.mark.parametrize(("text", "message"), [
    (OUTCAR.replace("ions per type", "ions"), "holds no species and numbers of ions"),
    (OUTCAR.replace("VRHFIN =O", "VRHFI =O"), "names 1 species for 2 types of ions"),
    (OUTCAR.replace("2   2", "2   2999999999"), "line 4: 3000000001 ions are too many"),
    (OUTCAR.replace("direct lattice vectors", "lattice"), "holds no lattice vectors"),
    (OUTCAR[: OUTCAR.index("position of ions")], "holds no geometry; the file may be cut off"),
    (OUTCAR[:-30], "position 4 of 4"),
    (OUTCAR.replace("0.38200000", "**********"), r"position 3 of 4: '\*+' is not finite"),
])  # fmt: skip
def test_broken_outcar_is_told(text, message):
    """A cut or damaged OUTCAR is refused with what is missing."""
    with pytest.raises(StructureError, match=message):
        crystal_in_text(text, "OUTCAR")


@pytest.mark.parametrize(("text", "message"), [
    (ENTITY, "declares a document type or entities"),
    (VASPRUN[: VASPRUN.index("<structure")], "the XML is broken.*the file may be cut off"),
    (VASPRUN.replace('name="atoms"', 'name="others"'), "holds no list of atoms"),
    (VASPRUN.replace('name="positions"', 'name="velocities"'), "a structure holds no positions"),
    (VASPRUN.replace("structure", "other"), "holds no geometry"),
])  # fmt: skip
def test_broken_vasprun_is_told(text, message):
    """Entities are refused unread, and a cut or damaged file is told with what is missing."""
    with pytest.raises(StructureError, match=message):
        crystal_in_text(text, "vasprun.xml")


def test_declared_encoding_does_not_matter():
    """The encoding in the XML declaration was undone when the file was read; even an unknown one is no obstacle."""
    assert crystal_in_text(VASPRUN.replace("ISO-8859-1", "klingon"), "vasprun.xml").symmetry.number == 186


def test_vasprun_cut_behind_its_geometry_is_read():
    """A calculation that broke off after the first geometry is still good for its structure."""
    assert crystal_in_text(VASPRUN[: VASPRUN.index("</modeling>")], "vasprun.xml").symmetry.number == 186


def test_geometry_that_is_not_there():
    """Asking for a step that was never made says how many there are."""
    with pytest.raises(StructureError, match="there is no geometry 4 among 1"):
        crystal_in_text(VASPRUN, "vasprun.xml", index=4)


def test_later_geometry_of_vasprun():
    """The last of two structures is taken when asked for."""
    start, stop = VASPRUN.index("<structure"), VASPRUN.index("</modeling>")
    second = VASPRUN[start:stop].replace("0.3820000000", "0.3750000000")
    crystal = crystal_in_text(VASPRUN[:stop] + second + VASPRUN[stop:], "vasprun.xml", index=-1)

    assert np.sort(crystal.positions[:, 2])[1] == pytest.approx(0.375)
