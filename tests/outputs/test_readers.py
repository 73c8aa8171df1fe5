"""Readers of outputs: numbers where the eye finds them in the file, and the residuals of an independent index."""

from __future__ import annotations

import json

import numpy as np
import pytest

from tensorsym.errors import OutputFileError, TensorsymError
from tensorsym.outputs.read import read_output, read_tensors
from tensorsym.tasks.check_file import check_file
from tests.conftest import ROOT

DATA = ROOT / "tests" / "data" / "outputs"
OUTCAR = DATA / "OUTCAR.quartz.0006.001.gz"
PHONON = DATA / "alas-wurtzite.ph.out"


def test_outcar_numbers_stand_where_they_are_printed():
    """Numbers read by eye from the OUTCAR: e_x,xx, its shear, and the first Born charge."""
    records = {(record.property, record.unit): record for record in read_output(OUTCAR).tensors}
    piezo = records["piezoelectric-stress", "C/m^2"].values
    charges = records["born-charge", "e"].values

    assert piezo[0, 0, 0] == pytest.approx(-0.16795, abs=2e-5)
    assert piezo[0, 1, 2] == piezo[0, 2, 1] == pytest.approx(-0.07170, abs=2e-5)
    assert charges[0, 0, 0] == pytest.approx(2.984, abs=2e-3)


def test_phonon_output_numbers_stand_where_they_are_printed():
    """Numbers read by eye from the ph.x output; of the dielectric tensor the last printing counts."""
    output = read_output(PHONON)
    dielectric = next(record for record in output.tensors if record.property == "dielectric")
    charges = next(record for record in output.tensors if "forces" in record.label)

    assert dielectric.values[0, 0] == pytest.approx(13.057665523)
    assert charges.values[2, 2, 2] == pytest.approx(-2.39920)
    assert output.crystal.symmetry.number == 186


def test_phonon_output_obeys_its_class():
    """The code symmetrises what it prints: residuals below 1e-15 (shared index of the data)."""
    assert all(verdict.residual < 1e-14 for verdict in check_file(PHONON).verdicts)


# Residuals of the shared index of the data, found there by an independent group average.
@pytest.mark.parametrize(
    ("name", "property", "unit", "label", "residual"),
    [
        ("OUTCAR.lepsilon.gz", "born-charge", "e", "", 2.9e-5),
        ("OUTCAR.lepsilon.gz", "piezoelectric-stress", "e angstrom", "", 2e-2),
        ("OUTCAR.total_tensor.Li2O.gz", "elastic-stiffness", "kbar", "before", 3.0e-3),
        ("vasprun.dfpt.xml.gz", "dielectric", "1", "clamped", 7e-7),
        ("OUTCAR.silicon.gz", "dielectric", "1", "clamped", 6e-7),
    ],
)
def test_real_outputs_have_the_residuals_of_the_index(data_folder, name, property, unit, label, residual):
    """Outside outputs give the residuals that their index states."""
    verdicts = [
        verdict
        for verdict in check_file(data_folder / "vasp" / name).verdicts
        if verdict.row.name == property and verdict.unit == unit and label in verdict.label
    ]

    assert verdicts[0].residual == pytest.approx(residual, rel=0.15)


def test_document_with_structure_and_tensors(tmp_path):
    """A document of a database is read with structure, property, order and unit; the unit decides d or e."""
    path = tmp_path / "row.json"
    matrix = np.zeros((3, 6))
    matrix[0, 3] = matrix[1, 4] = matrix[2, 5] = -0.158
    poscar = "ZnS\n1.0\n5.4 0 0\n0 5.4 0\n0 0 5.4\nZn S\n4 4\ndirect\n" + "".join(
        f"{x} {y} {z}\n"
        for shift in (0.0, 0.25)
        for x, y, z in (
            (shift, shift, shift),
            (shift, shift + 0.5, shift + 0.5),
            (shift + 0.5, shift, shift + 0.5),
            (shift + 0.5, shift + 0.5, shift),
        )
    )
    tensors = {"piezoelectric": {"values": matrix.tolist(), "unit": "C/m^2", "notation": "voigt"}}
    path.write_text(json.dumps({"poscar": poscar, "tensors": tensors}), encoding="utf-8")
    report = check_file(path)

    assert report.crystal.symmetry.number == 216
    assert report.verdicts[0].row.name == "piezoelectric-stress"
    assert report.verdict == "consistent"


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        ("(        1.89232", "(       ********", "no row of 3 numbers"),
        ("Ey  (        0.00000        1.89232        0.00000 )", "Ey  (  nan 0 0 )", "no row of 3 numbers"),
    ],
)
def test_damaged_phonon_output_names_the_line(tmp_path, old, new, says):
    """Asterisks or NaN in place of numbers are refused with the line."""
    path = tmp_path / "ph.out"
    path.write_text(PHONON.read_text(encoding="utf-8").replace(old, new, 1), encoding="utf-8")

    with pytest.raises(OutputFileError, match=says):
        read_output(path)


def test_cut_phonon_output_is_refused(tmp_path):
    """A table that ends before its last row is refused."""
    text = PHONON.read_text(encoding="utf-8")
    path = tmp_path / "ph.out"
    path.write_text(text[: text.index("Ez  (        0.00000       -0.00000        2.22330 )")], encoding="utf-8")

    with pytest.raises(OutputFileError, match="cut off"):
        read_output(path)


def test_bare_matrix_needs_its_property(tmp_path):
    """Numbers without a name are refused with the option to give."""
    path = tmp_path / "m.txt"
    path.write_text("1 0 0\n0 1 0\n0 0 1\n", encoding="utf-8")

    with pytest.raises(TensorsymError, match="--property"):
        read_tensors(path)
    assert read_tensors(path, property="dielectric")[0].values.trace() == 3.0
