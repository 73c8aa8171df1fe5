from __future__ import annotations

import re
import sys

import numpy as np
import pytest

from tensorsym.catalog.properties import property_named
from tensorsym.crystal.crystal import Crystal
from tensorsym.errors import InputError, OutputFileError
from tensorsym.outputs.read import read_output
from tensorsym.tensors.notation import to_matrix
from tests.conftest import ROOT
from tests.outputs.group_average import residual

SELENIUM = ROOT / "tests" / "data" / "outputs" / "selenium.anaddb.out"
BOHR = 0.529177210903

# The cell is printed in the text; the relaxed positions are those of the netCDF file of the same run.
CRYSTAL = Crystal(
    BOHR * np.array([[8.2505443, 0.0, 0.0], [-4.1252721, 7.1451810, 0.0], [0.0, 0.0, 9.3617033]]),
    np.array([[0.229713528, 0, 1 / 3], [0, 0.229713528, 2 / 3], [-0.229713528, -0.229713528, 0]]),
    ("Se", "Se", "Se"),
)


def record_of(name, label):
    """Return the record of a property with a label."""
    return next(r for r in read_output(SELENIUM).tensors if (r.property, r.label) == (name, label))


# Read by eye in the file.
SEEN = [
    ("dielectric", "electronic, clamped ion", (2, 2), 16.94114370),
    ("dielectric", "relaxed ion", (0, 0), 18.34956521),
    ("elastic-stiffness", "relaxed ion, fixed electric field", (0, 0, 1, 2), 5.05699),
    ("elastic-stiffness", "relaxed ion with stress corrected, fixed electric field", (2, 2, 0, 0), 2.99453),
    ("elastic-compliance", "relaxed ion, fixed electric field", (0, 1, 0, 1), 3.8242578e-2 / 4),
    ("piezoelectric-stress", "clamped ion", (0, 1, 2), 0.15307113),
    ("piezoelectric-stress", "relaxed ion", (1, 0, 1), 0.69566348),
    ("piezoelectric", "relaxed ion", (1, 0, 1), 26.35880209 / 2),
    ("piezoelectric-voltage", "relaxed ion", (1, 0, 1), 0.14587101 / 2),
    ("piezoelectric-stiffness", "relaxed ion", (1, 0, 1), 4.28178336),
    ("born-charge", "after charge neutrality; rows field, columns displacement (transposed)", (0, 2, 1), 1.007870),
    ("born-charge", "after charge neutrality; rows field, columns displacement (transposed)", (0, 1, 2), 0.2905825),
    ("internal-strain", "force response", (0, 0, 2, 2), -0.2108033),
    ("internal-strain", "force response", (1, 2, 0, 1), 0.0403508),
]


@pytest.mark.parametrize(("name", "label", "place", "value"), SEEN)
def test_number_stands_where_the_eye_finds_it(name, label, place, value):
    """A number of the text becomes the right component, shear factors of d, g and s taken out, 10^2 GPa put in."""
    assert record_of(name, label).values[place] == pytest.approx(value, rel=1e-5)


@pytest.mark.parametrize("record", read_output(SELENIUM).tensors, ids=lambda r: f"{r.property} {r.label[:20]}")
def test_everything_obeys_class_32(record):
    """An independent average leaves at most the 1e-6 of the shared index (C 8e-7, e 4e-7, Born 1e-7)."""
    assert residual(CRYSTAL, record) < 3e-6


def test_stress_correction_loses_the_exchange_of_pairs():
    """The corrected stiffness differs from its exchange by the 2.7 % of the index, and a note says that it may."""
    record = record_of("elastic-stiffness", "relaxed ion with stress corrected, fixed electric field")
    row = property_named("elastic-stiffness")
    matrix = to_matrix(record.values, row.kind, row.factors)

    assert np.linalg.norm(matrix - matrix.T) / np.linalg.norm(matrix) == pytest.approx(0.027, abs=1e-3)
    assert any("exchangeable" in note for note in record.notes)


def test_relaxed_d_is_e_times_s():
    """D = e s with the factors of 2 in their places: a check of e, s and d against one another."""
    e, d = record_of("piezoelectric-stress", "relaxed ion"), record_of("piezoelectric", "relaxed ion")
    s = record_of("elastic-compliance", "relaxed ion with stress correction, fixed electric field")
    s_plain = record_of("elastic-compliance", "relaxed ion, fixed electric field")
    products = [1000 * np.einsum("ijk,jklm->ilm", e.values, c.values) for c in (s, s_plain)]

    assert min(np.abs(product - d.values).max() for product in products) < 1e-3


def test_text_says_that_it_holds_no_atoms():
    """The text gives no crystal and a note with the next step."""
    output = read_output(SELENIUM)

    assert output.crystal is None
    assert any("structure file first" in note for note in output.notes)


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        ("     16.25695581     -0.00000000", "     ***********     -0.00000000", "line 165.*no row of 3"),
        ("   0.6585612   0.1221124", "   0.6585612      NaN   ", "line 241.*no row of 6"),
        ("  3  z     0.0698897  -0.0698896", "", "internal strain: cut off after 8 rows"),
        ("         3         3    2.516518E-01", "", "Born charges: cut off after 8 rows"),
    ],
)
def test_damage_is_told_with_its_line(tmp_path, old, new, says):
    """Asterisks, NaN and missing rows are refused."""
    text = SELENIUM.read_text(encoding="utf-8")
    assert old in text
    path = tmp_path / "anaddb.out"
    path.write_text(text.replace(old, new, 1), encoding="utf-8")

    with pytest.raises(OutputFileError, match=says):
        read_output(path)


def test_unfinished_run_is_told(tmp_path):
    """A run without its closing line gives a note."""
    path = tmp_path / "anaddb.out"
    path.write_text(SELENIUM.read_text(encoding="utf-8").replace("the run completed", ""), encoding="utf-8")

    assert any("did not finish" in note for note in read_output(path).notes)


def netcdf_of(path, change=None):
    """Write the numbers of the text as the classic netCDF file that anaddb writes, variables laid out as there."""
    from scipy.io import netcdf_file

    text = SELENIUM.read_text(encoding="utf-8")
    start = text.index("Proper piezoelectric constants (relaxed ion)")
    words = re.findall(r"-?\d+\.\d{8}", text[start : text.index("Piezoelectric d tensor", start)])
    charges = re.findall(
        r"^ +\d +\d +(\S+) +(\S+) +(\S+)$", text[text.index("imposition of the charge") :], re.MULTILINE
    )
    arrays = {
        "primitive_vectors": CRYSTAL.lattice / BOHR,
        "reduced_atom_positions": np.array(CRYSTAL.positions),
        "atom_species": np.array([1, 1, 1]),
        "atomic_numbers": np.array([34.0]),
        "piezo_relaxed_ion": np.array(words, dtype=float).reshape(6, 3).T,
        "becs_cart": np.array(charges[:9], dtype=float).reshape(3, 3, 3),
        "elastic_constants_clamped_ion": np.zeros((6, 6)),
    }
    if change is not None:
        change(arrays)
    with netcdf_file(str(path), "w") as file:
        for name, array in arrays.items():
            sizes = [f"{name}_{axis}" for axis in range(array.ndim)]
            for size, length in zip(sizes, array.shape, strict=True):
                file.createDimension(size, length)
            file.createVariable(name, "i4" if array.dtype.kind == "i" else "f8", sizes)[:] = array
    return path


def test_netcdf_agrees_with_the_text(tmp_path):
    """Text and netCDF of one run give the same tensors and the same transposition; a variable of zeros is left out."""
    output = read_output(netcdf_of(tmp_path / "anaddb.nc"))
    piezoelectric, charges = output.tensors

    assert output.crystal.symmetry.number in (152, 154)
    assert piezoelectric.values == pytest.approx(record_of("piezoelectric-stress", "relaxed ion").values)
    assert charges.values == pytest.approx(record_of("born-charge", SEEN[-4][1]).values)
    assert residual(output.crystal, piezoelectric) < 1e-6


def _without_positions(arrays):
    del arrays["reduced_atom_positions"]


def _with_nan(arrays):
    arrays["piezo_relaxed_ion"][1, 2] = np.nan


def _with_unknown_element(arrays):
    arrays["atomic_numbers"][0] = 999


def _with_two_charges(arrays):
    arrays["becs_cart"] = arrays["becs_cart"][:2]


@pytest.mark.parametrize(
    ("change", "says"),
    [
        (_without_positions, "holds no reduced_atom_positions"),
        (_with_nan, r"piezo_relaxed_ion: the number at \(2, 3\) is not finite"),
        (_with_unknown_element, "999 is no atomic number"),
        (_with_two_charges, "becs_cart.*is no born-charge"),
    ],
)
def test_damaged_netcdf_is_refused(tmp_path, change, says):
    """Missing variables, wrong shapes and numbers that are not finite are refused with the variable's name."""
    with pytest.raises(InputError, match=says):
        read_output(netcdf_of(tmp_path / "anaddb.nc", change))


@pytest.mark.parametrize("share", [0.02, 0.2, 0.9])
def test_cut_netcdf_is_refused(tmp_path, share):
    """A netCDF file that was cut off is refused and not half read."""
    data = netcdf_of(tmp_path / "whole.nc").read_bytes()
    path = tmp_path / "cut.nc"
    path.write_bytes(data[: int(share * len(data))])

    with pytest.raises(OutputFileError, match="damaged netCDF"):
        read_output(path)


MAIN = SELENIUM.with_name("selenium.trimmed.abo")
GPA, COULOMB_PER_AREA = 29421.015697, 57.2147656  # of one hartree/bohr^3, of one e/bohr^2 (CODATA 2018)


def main_record(name, label):
    """Return the record of a property whose label begins like this, from the main output."""
    return next(r for r in read_output(MAIN).tensors if r.property == name and r.label.startswith(label))


# Read by eye in the main output.
@pytest.mark.parametrize(
    ("name", "label", "place", "value"),
    [
        ("dielectric", "electronic", (2, 2), 16.9411436978),
        ("born-charge", "from fields", (0, 2, 1), 1.0078700730),
        ("born-charge", "from fields", (1, 1, 2), -0.1452912523),
        ("born-charge", "from displacements", (0, 1, 2), 0.2905825889),
        ("born-charge", "from displacements", (1, 2, 0), -0.8728410212),
        ("elastic-stiffness", "clamped ion", (0, 0, 1, 2), 0.0006870323),
        ("piezoelectric-stress", "clamped ion", (1, 0, 1), 0.0076283308),
    ],
)
def test_main_output_is_placed_by_its_perturbations(name, label, place, value):
    """A component lands where its two perturbations say."""
    assert main_record(name, label).values[place] == value


def test_main_output_agrees_with_anaddb():
    """Main output and anaddb of one run give the same tensors, units taken into account."""
    piezoelectric = main_record("piezoelectric-stress", "clamped ion").values * COULOMB_PER_AREA
    charges = main_record("born-charge", "from fields").values
    neutral = charges - charges.mean(axis=0)

    assert np.abs(piezoelectric - record_of("piezoelectric-stress", "clamped ion").values).max() < 1e-6
    assert main_record("elastic-stiffness", "clamped ion").values[0, 0, 0, 0] * GPA == pytest.approx(107.377413)
    assert np.abs(neutral - record_of("born-charge", SEEN[-4][1]).values).max() < 1e-6


@pytest.mark.parametrize("record", read_output(MAIN).tensors, ids=lambda r: f"{r.property} {r.label[:20]}")
def test_main_output_obeys_class_32(record):
    """An independent average leaves at most the 1e-6 of the shared index."""
    assert residual(CRYSTAL, record) < 2e-6


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        ("   3    5   3    5        16.9411436978        -0.0000000000\n", "", "Dielectric tensor: cut off after 8"),
        ("   1    6   1    6         0.0036496847", "   1    6   1    6         ************", "no row of 2 numbers"),
        (
            "   2    1   3    5         1.0078700730",
            "   2    8   3    5         1.0078700730",
            "Effective charges: cut",
        ),
    ],
)
def test_damaged_main_output_is_refused(tmp_path, old, new, says):
    """Missing and misplaced components and asterisks are refused."""
    text = MAIN.read_text(encoding="utf-8")
    assert old in text
    path = tmp_path / "se.abo"
    path.write_text(text.replace(old, new, 1), encoding="utf-8")

    with pytest.raises(OutputFileError, match=says):
        read_output(path)


def test_netcdf_4_without_its_package(tmp_path, monkeypatch):
    """A file in netCDF 4 is answered with the package to install when that is not there."""
    monkeypatch.setitem(sys.modules, "h5py", None)
    path = tmp_path / "anaddb.nc"
    path.write_bytes(b"\x89HDF\r\n\x1a\n" + bytes(100))

    with pytest.raises(OutputFileError, match=r"netCDF 4.*pip install h5py"):
        read_output(path)


def test_damaged_netcdf_4_is_refused(tmp_path):
    """What only begins like netCDF 4 is refused."""
    pytest.importorskip("h5py")
    path = tmp_path / "anaddb.nc"
    path.write_bytes(b"\x89HDF\r\n\x1a\n" + bytes(100))

    with pytest.raises(OutputFileError, match="damaged netCDF"):
        read_output(path)
