from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.read import crystal_in_text
from tensorsym.errors import StructureError
from tests.crystal.texts import POSCAR

HEAD = "{comment}\n{scale}\n4 0 0\n0 4 0\n0 0 4\n"
BODY = "Cs Cl\n1 1\nDirect\n0 0 0\n.5 .5 .5\n"


def poscar(body=BODY, comment="invented", scale="1.0"):
    """Return a POSCAR of a cubic cell."""
    return HEAD.format(comment=comment, scale=scale) + body


@pytest.mark.parametrize(("text", "edge"), [
    (poscar(), 4.0), (poscar(scale="2.0"), 8.0), (poscar(scale="-125.0"), 5.0), (poscar(scale="1.5 1.5 1.5"), 6.0),
    (poscar("Cs Cl\n1 1\nCartesian\n0 0 0\n2 2 2\n", scale="2.0"), 8.0),
    (poscar("Cs Cl\n1 1\nkartesisch\n0 0 0\n2 2 2\n", scale="-125"), 5.0),
    (poscar("Cs Cl\n1 1\nSelective dynamics\nDirect\n0 0 0 T T F\n.5 .5 .5 F F F\n"), 4.0),
    (poscar("Cs Cl ! species\n1 1 ! numbers\nDirect\n0 0 0 Cs\n.5 .5 .5 Cl\n\n0 0 0\n0 0 0\n"), 4.0),
    (poscar("Cs_sv Cl/hash\n1 1\nDirect\n0 0 0\n.5D0 5.0E-1 .5\n"), 4.0),
])  # fmt: skip
def test_variants_give_the_same_crystal(text, edge):
    """Scale, volume, Cartesian coordinates, selective dynamics, suffixes and velocities are understood."""
    crystal = crystal_in_text(text, "file")

    assert crystal.symmetry.number == 221
    assert crystal.species == ("Cs", "Cl")
    assert crystal.lattice == pytest.approx(edge * np.eye(3))
    assert crystal.positions[1] == pytest.approx([0.5, 0.5, 0.5])


@pytest.mark.parametrize(("text", "species", "note"), [
    (poscar("1 1\nDirect\n0 0 0\n.5 .5 .5\n", comment="Cs1 Cl1"), ("Cs", "Cl"), "from the comment line"),
    (poscar("1 1\nDirect\n0 0 0 Cs\n.5 .5 .5 Cl\n"), ("Cs", "Cl"), "from behind the positions"),
    (poscar("1 1\nDirect\n0 0 0\n.5 .5 .5\n"), ("X1", "X2"), "names no species"),
])  # fmt: skip
def test_version_four_finds_its_species(text, species, note):
    """A file without a line of species takes them from where they are, and a note says from where."""
    crystal = crystal_in_text(text, "file")

    assert crystal.species == species
    assert any(note in line for line in crystal.notes)


@pytest.mark.parametrize(("text", "message"), [
    (poscar("Cs Cl\n1 1\nDirect\n0 0 0\n"), "ends after line 9, before position 2 of 2; the file may be cut off"),
    (poscar("Cs Cl\n1 1\nDirect\n0 0 0\n.5 .5\n"), "line 10: position 2 of 2: 2 numbers in '.5 .5'; expected 3"),
    (poscar("Cs Cl\n1 1\nDirect\n0 0 0\n.5 .5 nan\n"), "line 10: position 2 of 2: 'nan' is not finite"),
    (poscar("Cs Cl\n1 one\nDirect\n0 0 0\n.5 .5 .5\n"), "line 7: number of atoms: 'one' is no whole number"),
    (poscar("Cs Cl\n1\nDirect\n0 0 0\n"), "lines 6 and 7: 2 species and 1 numbers of atoms"),
    (poscar("Cs Cl\n"), "ends after line 6, before the numbers of atoms"),
    (poscar(scale="0.0"), "line 2: scale: '0.0' is not positive"),
    (poscar("Cs Cl\n1 1\nDirect\n0 0 0\n0 0 0.001\n"), r"1 \(Cs\) and 2 \(Cl\) overlap: 0.004 Å apart"),
    (POSCAR.replace("0.0000000000 0.0000000000 5.2070000000", "0 0 0"), "span no proper cell"),
    (poscar("Cs\n0\nDirect\n"), "holds no atoms"),
])  # fmt: skip
def test_broken_poscar_is_told_with_its_line(text, message):
    """A damaged POSCAR is refused with the line and what was expected."""
    with pytest.raises(StructureError, match=message):
        crystal_in_text(text, "POSCAR")


def test_there_is_one_structure():
    """Asking for a second structure is refused."""
    with pytest.raises(StructureError, match="there is no structure 1: a POSCAR holds one"):
        crystal_in_text(POSCAR, "POSCAR", index=1)
