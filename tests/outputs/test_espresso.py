from __future__ import annotations

import numpy as np
import pytest

from tensorsym.errors import InputError
from tensorsym.outputs.read import read_output
from tests.conftest import ROOT
from tests.outputs.group_average import residual

DATA = ROOT / "tests" / "data" / "outputs"
PHONON, ZINC_BLENDE = DATA / "alas-wurtzite.ph.out", DATA / "alas-zincblende.ph.out"
MATRIX, TENSORS = DATA / "alas-wurtzite.dynG", DATA / "alas-wurtzite.tensors.xml"
FORCES, POLARISATION = "from forces", "from polarisation"


def record_of(path, name, label="", unit=""):
    """Return the first record of a property whose label and unit begin like this."""
    return next(
        record
        for record in read_output(path).tensors
        if record.property == name and record.label.startswith(label) and record.unit.startswith(unit)
    )


# Read by eye in the files.
SEEN = [
    (PHONON, "dielectric", "", "", (2, 2), 10.569832411),
    (PHONON, "born-charge", FORCES, "", (0, 2, 2), 2.22330),
    (PHONON, "born-charge", POLARISATION, "", (0, 0, 0), 1.89249),
    (PHONON, "raman-atomic", "", "bohr", (0, 0, 0, 2), 0.339482492),
    (PHONON, "raman-atomic", "", "angstrom", (0, 0, 0, 1), 5.94167355224),
    (ZINC_BLENDE, "dielectric", "", "", (0, 0), 9.426697587),
    (ZINC_BLENDE, "raman-atomic", "", "bohr", (1, 2, 0, 1), 1.02496314),
    (MATRIX, "dielectric", "", "", (2, 2), 10.5698324110),
    (MATRIX, "born-charge", POLARISATION, "", (0, 0, 0), 1.89249),
    (MATRIX, "raman-atomic", "", "", (0, 0, 0, 1), 5.94167355224),
    (TENSORS, "dielectric", "", "", (0, 0), 13.057665523),
    (TENSORS, "born-charge", POLARISATION, "", (0, 2, 2), 2.22337),
    (TENSORS, "raman-atomic", "", "", (0, 0, 0, 2), 0.339482492),
]


@pytest.mark.parametrize(("path", "name", "label", "unit", "place", "value"), SEEN)
def test_number_stands_where_the_eye_finds_it(path, name, label, unit, place, value):
    """A number of a file becomes the right component; of the dielectric tensor the last printing counts."""
    assert record_of(path, name, label, unit).values[place] == pytest.approx(value, abs=6e-6)


@pytest.mark.parametrize(("path", "number"), [(PHONON, 186), (MATRIX, 186), (ZINC_BLENDE, 216)])
def test_everything_obeys_the_class(path, number):
    """Quantum ESPRESSO symmetrises what it prints: residuals of the shared index below 1e-15 (here 1e-12)."""
    output = read_output(path)

    assert output.crystal.symmetry.number == number
    assert max(residual(output.crystal, record) for record in output.tensors) < 1e-12


@pytest.mark.parametrize("name", ["dielectric", "born-charge", "raman-atomic"])
def test_three_files_of_one_run_agree(name):
    """The printed output, the dynamical matrix and tensors.xml hold the same tensors."""
    from_output, from_xml = record_of(PHONON, name, unit=""), record_of(TENSORS, name)
    scale = from_output.digits

    assert np.abs(from_output.values - from_xml.values).max() < scale
    if name != "raman-atomic":  # the dynamical matrix holds it in other units
        assert np.abs(record_of(MATRIX, name).values - from_xml.values).max() < 1e-10


@pytest.mark.parametrize(
    ("path", "places"), [(PHONON, (1e-9, 1e-5)), (MATRIX, (1e-12, 1e-12)), (TENSORS, (None, None))]
)
def test_printed_places(path, places):
    """The last printed places are those seen in the files; the XML holds all digits."""
    digits = (record_of(path, "dielectric").digits, record_of(path, "born-charge", FORCES).digits)

    assert digits == pytest.approx(places)


def test_asymmetric_charges_keep_their_rows(tmp_path):
    """Rows are the field in ph.x; the second block of a matrix file has rows of displacement (invented numbers)."""
    printed = PHONON.read_text(encoding="utf-8")
    printed = printed.replace("Ex  (        1.89232        0.00000", "Ex  (        1.89232        0.70000")
    matrix = MATRIX.read_text(encoding="utf-8")
    block = matrix.index("Effective Charges U-E")
    row = matrix.index("0.189", block)
    end = matrix.index("\n", row)
    matrix = matrix[:row] + "0.189249000000E+01 0.700000000000E+00 0.000000000000E+00" + matrix[end:]
    for name, text in (("ph.out", printed), ("dynG", matrix)):
        (tmp_path / name).write_text(text, encoding="utf-8")

    assert record_of(tmp_path / "ph.out", "born-charge", FORCES).values[0, 0, 1] == 0.7
    assert record_of(tmp_path / "dynG", "born-charge", POLARISATION).values[0, 1, 0] == 0.7


def test_charges_before_and_after_the_sum_rule(tmp_path):
    """Newer versions print both sets, each under its own label (headings of version 7, numbers of the run)."""
    text = PHONON.read_text(encoding="utf-8")
    place = text.rindex("          Effective charges (d Force / dE) in cartesian axis")
    block = text[place : text.index("          Effective charges (d P / du)", place)]
    both = block.replace("axis\n", "axis without acoustic sum rule applied (asr)\n", 1) + block.replace(
        "axis\n", "axis with asr applied: \n", 1
    ).replace("1.89232", "1.80000")
    path = tmp_path / "ph.out"
    path.write_text(text[:place] + both + text[place + len(block) :], encoding="utf-8")
    labels = {r.label.rpartition(", ")[2]: r.values[0, 0, 0] for r in read_output(path).tensors if "rule" in r.label}

    assert labels == {"before the sum rule": 1.89232, "after the sum rule": 1.8}


def test_lattice_written_in_the_matrix_file(tmp_path):
    """With ibrav 0 the dynamical matrix holds its lattice vectors (layout from memory), the crystal is the same."""
    text = MATRIX.read_text(encoding="utf-8").splitlines()
    text[2] = text[2].replace("  2    4   4", "  2    4   0")
    text[3:3] = [
        "Basis vectors",
        "      1.000000000    0.000000000    0.000000000",
        "     -0.500000000    0.866025403784439    0.000000000",
        "      0.000000000    0.000000000    1.640000000",
    ]
    path = tmp_path / "dynG"
    path.write_text("\n".join(text) + "\n", encoding="utf-8")

    assert read_output(path).crystal.lattice == pytest.approx(read_output(MATRIX).crystal.lattice)


DAMAGES = [
    (PHONON, "Ex  (        1.89232", "Ex  (        *******", "line 181.*no row of 3 numbers.*did not fit"),
    (PHONON, "(      13.020936816", "(                NaN", "line 174.*no row of 3 numbers"),
    (PHONON, "           atom      2   Al", "           atom      7   Al", "next part is missing"),
    (MATRIX, "'Al  '", "", "line 4: .*names no species"),
    (MATRIX, "    1    1     -0.0000000000", "    1    5     -0.0000000000", "line 6: type 5 of 2"),
    (MATRIX, "  2    4   4   7.4780000", "  2    4  99   7.4780000", "line 3.*ibrav"),
    (MATRIX, "  2    4   4   7.4780000", "  2   -4   4   7.4780000", "line 3.*whole number"),
    (TENSORS, "</DIELECTRIC_CONSTANT>", " 1.0 </DIELECTRIC_CONSTANT>", "holds 10 numbers"),
    (TENSORS, "</EF_TENSORS>", "", "XML is broken"),
    (TENSORS, "E+00", "E+999", "EFFECTIVE_CHARGES_EU.*no row of 1 numbers.*too large"),
]


@pytest.mark.parametrize(("path", "old", "new", "says"), DAMAGES)
def test_damage_is_told_with_its_place(tmp_path, path, old, new, says):
    """Whatever is damaged in a file of Quantum ESPRESSO is refused with its line or element."""
    text = path.read_text(encoding="utf-8")
    assert old in text
    damaged = tmp_path / path.name
    damaged.write_text(text.replace(old, new, 1), encoding="utf-8")

    with pytest.raises(InputError, match=says):
        read_output(damaged)


@pytest.mark.parametrize("share", [0.3, 0.45, 0.6])
def test_cut_matrix_file_is_refused(tmp_path, share):
    """A dynamical matrix that ends within a table is refused."""
    text = MATRIX.read_text(encoding="utf-8")
    start, end = text.index("Dielectric Tensor"), text.index("Diagonalizing")
    path = tmp_path / "dynG"
    path.write_text(text[: start + int(share * (end - start))], encoding="utf-8")

    with pytest.raises(InputError, match=r"cut off|no row"):
        read_output(path)


def test_unfinished_run_is_told(tmp_path):
    """An output without its closing line gives a note."""
    path = tmp_path / "ph.out"
    path.write_text(PHONON.read_text(encoding="utf-8").replace("JOB DONE", ""), encoding="utf-8")

    assert any("did not finish" in note for note in read_output(path).notes)
    assert read_output(PHONON).notes == ()
