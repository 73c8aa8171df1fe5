from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.read import read
from tensorsym.errors import OutputFileError
from tensorsym.outputs.read import read_tensors
from tests.conftest import ROOT
from tests.outputs.group_average import residual

DATA = ROOT / "tests" / "data" / "outputs"
BORN, POSCAR = DATA / "al2o3.BORN", DATA / "al2o3.POSCAR"


def test_numbers_stand_where_the_eye_finds_them():
    """The charges printed are those of atoms 1 and 13, as the comment of the file says."""
    dielectric, charges = read_tensors(BORN, crystal=read(POSCAR))

    assert dielectric.values[2, 2] == 3.21878866
    assert charges.values[0, 0, 1] == -0.02948662
    assert charges.values[12, 2, 1] == 0.35087130
    assert (dielectric.line, charges.line) == (2, 3)
    assert charges.digits == pytest.approx(1e-8)


def test_filled_set_obeys_the_space_group():
    """The charges carried to equivalent atoms have a residual of rounding only (shared index: 4e-15)."""
    crystal = read(POSCAR)
    _, charges = read_tensors(BORN, crystal=crystal)

    assert crystal.symmetry.number == 167
    assert charges.values.shape == (30, 3, 3)
    assert residual(crystal, charges) < 1e-14
    assert np.abs(charges.values.sum(axis=0)).max() < 1e-5
    assert any("carried by the space group" in note for note in charges.notes)


def test_charges_of_all_atoms_are_taken_as_they_are(tmp_path):
    """A file with a line for every atom is not filled in (numbers invented)."""
    path = tmp_path / "BORN"
    rows = [" ".join(map(str, np.diag([value] * 3).ravel())) for value in (2.5, *np.linspace(1, 2, 30).round(3))]
    path.write_text("14.4\n" + "\n".join(rows) + "\n", encoding="utf-8")
    _, charges = read_tensors(path, crystal=read(POSCAR))

    assert charges.values[29, 0, 0] == 2.0
    assert not any("carried" in note for note in charges.notes)


def test_without_structure_only_the_dielectric_tensor():
    """Without a structure nobody can say which atoms the charges belong to."""
    assert [record.property for record in read_tensors(BORN)] == ["dielectric"]


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        ("2.96008813", "********", "line 3: .*is not nine numbers"),
        ("   2.92614183", "", "line 3: .*is not nine numbers"),
        ("\n  -2.07328119", "\n 1 0 0 0 1 0 0 0 1\n  -2.07328119", "3 charges; expected 2, one for each set"),
    ],
)
def test_damage_is_told(tmp_path, old, new, says):
    """Words that are no numbers, short lines and a wrong count of charges are refused."""
    text = BORN.read_text(encoding="utf-8")
    assert old in text
    path = tmp_path / "BORN"
    path.write_text(text.replace(old, new, 1), encoding="utf-8")

    with pytest.raises(OutputFileError, match=says):
        read_tensors(path, crystal=read(POSCAR), reader="phonopy-born")
