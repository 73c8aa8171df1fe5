from __future__ import annotations

import gzip
import subprocess
import sys

import numpy as np
import pytest

from tensorsym.errors import InputError, OutputFileError
from tensorsym.outputs.read import read_output
from tests.conftest import ROOT
from tests.outputs.group_average import residual

DATA = ROOT / "tests" / "data" / "outputs"
QUARTZ, SIC = DATA / "OUTCAR.quartz.0006.001.gz", DATA / "OUTCAR.sic.trimmed.gz"
LI2O, SILICON = DATA / "OUTCAR.li2o.trimmed.gz", DATA / "OUTCAR.silicon.trimmed.gz"
RAW = "electronic, clamped ion, before the code symmetrised it"


def text_of(path):
    """Return the text of a packed file."""
    return gzip.decompress(path.read_bytes()).decode()


def written(folder, text):
    """Write a text where a reader can find it."""
    path = folder / "OUTCAR"
    path.write_text(text, encoding="utf-8")
    return path


def record_of(path, name, label):
    """Return the record of a property with a label."""
    return next(record for record in read_output(path).tensors if (record.property, record.label) == (name, label))


# Read by eye in the files: path, property, label, component, value, line of the first row (of the file in tests/).
SEEN = [
    (QUARTZ, "dielectric", "electronic, clamped ion", (2, 2), 2.547899, 5688),
    (QUARTZ, "piezoelectric-stress", RAW, (0, 0, 0), -1.15872, 5697),
    (QUARTZ, "piezoelectric-stress", RAW, (0, 1, 2), -0.49469, 5697),
    (QUARTZ, "piezoelectric-stress", RAW, (1, 2, 0), 0.49474, 5697),
    (QUARTZ, "piezoelectric-stress", RAW, (1, 0, 1), 1.15868, 5697),
    (QUARTZ, "piezoelectric-stress", "electronic, clamped ion", (1, 0, 1), 0.16795, 5704),
    (QUARTZ, "born-charge", "rows field, columns displacement", (0, 1, 2), -0.31585, 5711),
    (QUARTZ, "born-charge", "rows field, columns displacement", (8, 2, 0), 0.50235, 5711),
    (SIC, "dielectric", "ionic contribution", (0, 1), 0.001419, 203),
    (SIC, "piezoelectric-stress", RAW, (2, 2, 1), 0.47773, 108),
    (SIC, "piezoelectric-stress", "ionic contribution", (2, 0, 1), 0.06242, 224),
    (SIC, "internal-strain", "", (1, 0, 1, 2), -699.03398, 133),
    (SIC, "internal-strain", "", (0, 1, 0, 2), 698.91648, 133),
    (SIC, "elastic-stiffness", "ionic contribution", (0, 0, 1, 2), -2915.0618, 212),
    (LI2O, "elastic-stiffness", "clamped ion, before the code symmetrised it", (0, 1, 2, 2), 4.1926, 200),
    (LI2O, "elastic-stiffness", "clamped ion, before the code symmetrised it", (1, 2, 0, 0), -0.7103, 200),
    (LI2O, "elastic-stiffness", "clamped ion, before the code symmetrised it", (2, 0, 1, 1), -1.4731, 200),
    (LI2O, "elastic-stiffness", "clamped ion, symmetrised by the code", (0, 1, 0, 1), 588.3846, 212),
    (LI2O, "elastic-stiffness", "ionic contribution", (1, 2, 1, 2), -2.0812, 412),
    (LI2O, "elastic-stiffness", "total, relaxed ion", (0, 0, 0, 0), 1986.3391, 424),
    (LI2O, "internal-strain", "from strained cells", (0, 0, 1, 2), -0.38226, 226),
    (LI2O, "internal-strain", "from strained cells", (1, 1, 0, 2), 0.38485, 226),
    (SILICON, "piezoelectric-stress", "electronic, clamped ion", (0, 1, 2), 0.0, 98),
]


@pytest.mark.parametrize(("path", "name", "label", "place", "value", "line"), SEEN)
def test_number_stands_where_the_eye_finds_it(path, name, label, place, value, line):
    """A number of a table becomes the right component, and the record tells the line where its table begins."""
    record = record_of(path, name, label)

    assert record.values[place] == value
    assert record.line == line


# Residuals of the shared index of the data, found there by an independent group average.
RESIDUALS = [
    (QUARTZ, "piezoelectric-stress", RAW, 7e-5),
    (QUARTZ, "born-charge", "rows field, columns displacement", 2.5e-5),
    (SIC, "piezoelectric-stress", RAW, 2e-2),
    (SIC, "piezoelectric-stress", "electronic, clamped ion", 1e-5),
    (SIC, "born-charge", "rows field, columns displacement", 2.9e-5),
    (LI2O, "elastic-stiffness", "clamped ion, before the code symmetrised it", 3.0e-3),
    (SILICON, "dielectric", "electronic, clamped ion", 6e-7),
]


@pytest.mark.parametrize(("path", "name", "label", "expected"), RESIDUALS)
def test_residual_is_that_of_the_index(path, name, label, expected):
    """A plain group average of what was read gives the residual that the index of the data states."""
    output = read_output(path)
    record = next(record for record in output.tensors if (record.property, record.label) == (name, label))

    assert residual(output.crystal, record) == pytest.approx(expected, rel=0.08)


@pytest.mark.parametrize(
    ("path", "label", "number"),
    [(LI2O, "clamped ion, symmetrised by the code", 225), (LI2O, "total, relaxed ion", 225)],
)
def test_what_the_code_symmetrised_obeys_the_class(path, label, number):
    """Symmetrised tables have a residual of rounding only (index: 1e-15), in the first geometry of the file."""
    output = read_output(path)
    record = next(record for record in output.tensors if record.label == label)

    assert output.crystal.symmetry.number == number
    assert residual(output.crystal, record) < 1e-14


def test_handbook_order_would_break_quartz():
    """Read in the order of handbooks, the piezoelectric table of quartz has the residual 0.755 of the index."""
    output = read_output(QUARTZ)
    record = record_of(QUARTZ, "piezoelectric-stress", "electronic, clamped ion")
    wrong = np.array(record.values)
    for row in range(3):
        xy, yz, zx = record.values[row, 0, 1], record.values[row, 1, 2], record.values[row, 2, 0]
        for (a, b), value in zip(((1, 2), (2, 0), (0, 1)), (xy, yz, zx), strict=True):
            wrong[row, a, b] = wrong[row, b, a] = value

    assert residual(output.crystal, type(record)("", "", wrong, "")) == pytest.approx(0.755, abs=1e-3)


def test_born_charges_of_quartz_are_not_symmetric():
    """The antisymmetric part of quartz's Born charges is the legitimate 11.5 % of the index."""
    values = record_of(QUARTZ, "born-charge", "rows field, columns displacement").values
    antisymmetric = values - values.transpose(0, 2, 1)

    assert np.linalg.norm(antisymmetric) / np.linalg.norm(values) == pytest.approx(0.115, abs=2e-3)


def test_born_charges_of_sic_miss_neutrality():
    """The sum of SiC's Born charges is the 0.195 e of the index."""
    values = record_of(SIC, "born-charge", "rows field, columns displacement").values

    assert values.sum(axis=0)[0, 0] == pytest.approx(0.195, abs=1e-3)


@pytest.mark.parametrize(
    ("path", "name", "label", "digits", "unit", "order"),
    [
        (QUARTZ, "dielectric", "electronic, clamped ion", 1e-6, "1", ""),
        (QUARTZ, "piezoelectric-stress", RAW, 1e-5, "e angstrom", "11 22 33 12 23 13"),
        (QUARTZ, "born-charge", "rows field, columns displacement", 1e-5, "e", ""),
        (LI2O, "elastic-stiffness", "total, relaxed ion", 1e-4, "kbar", "11 22 33 12 23 13"),
        (LI2O, "internal-strain", "from displaced atoms", 1e-5, "eV/angstrom", "11 22 33 12 23 13"),
    ],
)
def test_record_tells_precision_unit_and_order(path, name, label, digits, unit, order):
    """The last printed place, the unit and the order of the columns are those seen in the file."""
    record = record_of(path, name, label)

    assert record.digits == pytest.approx(digits)
    assert (record.unit, record.order) == (unit, order)
    assert not record.values.flags.writeable


def test_total_is_the_sum_of_the_parts():
    """The relaxed-ion dielectric and piezoelectric tensors are electronic plus ionic; only the ionic is incomplete."""
    records = {(r.property, r.contribution): r for r in read_output(SIC).tensors if r.unit in ("1", "C/m^2")}
    total = records["piezoelectric-stress", "total"].values

    assert total[0, 0, 0] == pytest.approx(0.52799 + 0.05868)
    assert [r.complete for r in records.values()] == [c != "ionic" for _, c in records]


def test_noise_of_two_printings():
    """The standard deviation of quartz's tensor is the spread between its two printings, in the unit of each."""
    raw = record_of(QUARTZ, "piezoelectric-stress", RAW)
    symmetrised = record_of(QUARTZ, "piezoelectric-stress", "electronic, clamped ion")
    volume = abs(np.linalg.det(read_output(QUARTZ).crystal.lattice))
    scale = 16.02176634 / volume
    spread = np.sqrt(np.mean((raw.values * scale - symmetrised.values) ** 2))

    assert symmetrised.sigma == pytest.approx(spread)
    assert raw.sigma == pytest.approx(spread / scale)


GRADIENTS = """
 Electric field gradients (V/A^2)
---------------------------------------------------------------------
 ion       V_xx      V_yy      V_zz      V_xy      V_xz      V_yz
---------------------------------------------------------------------
   1      -4.766    -4.700     9.466     0.100     0.200     0.300
   2      35.231    35.230   -70.461    -0.400    -0.500    -0.600
---------------------------------------------------------------------
"""


def test_field_gradients_have_their_own_order(tmp_path):
    """Columns of field gradients run xx yy zz xy xz yz (layout of a real file, numbers invented)."""
    record = read_output(written(tmp_path, text_of(SIC) + GRADIENTS)).tensors[-1]

    assert record.property == "efg"
    assert record.values[1, 0].tolist() == [35.231, -0.4, -0.5]
    assert record.values[1, 1, 2] == record.values[1, 2, 1] == -0.6
    assert record.site_labels == ("1 Si", "2 C")


SHIFTS = """
  ---------------------------------------------------------------------------------
  Absolute Chemical Shift tensors
  ---------------------------------------------------------------------------------
  UNSYMMETRIZED TENSORS
  ion    1
    10.100000   0.200000   0.300000
     0.400000  10.500000   0.600000
     0.700000   0.800000  10.900000
  ion    2
    20.000000   0.000000   0.000000
     0.000000  20.000000   0.000000
     0.000000   0.000000  20.000000
  SYMMETRIZED TENSORS
  ion    1
    10.500000   0.300000   0.300000
     0.300000  10.500000   0.300000
     0.300000   0.300000  10.500000
  ion    2
    20.000000   0.000000   0.000000
     0.000000  20.000000   0.000000
     0.000000   0.000000  20.000000
"""


def test_chemical_shifts(tmp_path):
    """Both blocks of shifts are read (layout known from pymatgen's parser, numbers invented)."""
    raw, symmetrised = read_output(written(tmp_path, text_of(SIC) + SHIFTS)).tensors[-2:]

    assert raw.property == symmetrised.property == "chemical-shift"
    assert raw.values[0, 1].tolist() == [0.4, 10.5, 0.6]
    assert symmetrised.values[0, 2, 0] == 0.3


def test_last_printing_counts(tmp_path):
    """Of two tables of one title the later is used, with a note when they differ."""
    text = text_of(SIC)
    changed = text.replace("3.716432    -0.204640    -0.204640", "3.000000    -0.204640    -0.204640", 1)
    record = next(r for r in read_output(written(tmp_path, changed)).tensors if r.property == "dielectric")

    assert record.values[0, 0] == 3.716432
    assert any("different numbers" in note for note in record.notes)
    assert not any("different" in note for note in record_of(SIC, "dielectric", record.label).notes)


@pytest.mark.parametrize("cut", [99, 109, 120, 124, 127, 135, 141, 214, 225])
def test_cut_in_a_table_names_the_line(tmp_path, cut):
    """A file that ends within a table is refused, and the line is named."""
    lines = text_of(SIC).splitlines()[:cut]

    with pytest.raises(OutputFileError, match=rf"line {cut}: .*may (not have finished|be cut off)"):
        read_output(written(tmp_path, "\n".join(lines) + "\n"))


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        ("  x     0.67813", "  x     *******", r"line 108: .*no row of 6 numbers.*did not fit its columns"),
        ("  x     0.67813", "  x     NaN    ", r"line 108: .*no row of 6 numbers.*calculation has failed"),
        ("    1     2.54988", "    1     2.54988 1.5", r"line 122: .*no row of 3 numbers"),
        (" XY       -2915.0618", " XY       ", r"line 215: .*no row of 6 numbers"),
        (" ion    2\n    1    -2.35452", " ion    3\n    1    -2.35452", r"line 125: .*where atom 2 should stand"),
        ("FOR ION    2 for displ", "FOR ION    3 for displ", "internal strain of atom 3 where that of atom 2"),
    ],
)
def test_damaged_table_names_the_line(tmp_path, old, new, says):
    """Asterisks, NaN, a number too many or too few, and an atom out of order are refused with their line."""
    text = text_of(SIC)
    assert old in text

    with pytest.raises(OutputFileError, match=says):
        read_output(written(tmp_path, text.replace(old, new, 1)))


def test_unfinished_run_is_told(tmp_path):
    """A run that ends without timings gives its whole tables and a note."""
    text = text_of(SIC).partition(" General timing")[0]
    output = read_output(written(tmp_path, text))

    assert len(output.tensors) == len(read_output(SIC).tensors)
    assert any("did not finish" in note for note in output.notes)
    assert read_output(SIC).notes == ()


def test_second_run_is_refused(tmp_path):
    """Two outputs in one file are refused with the line where the second begins."""
    text = text_of(SIC)

    with pytest.raises(OutputFileError, match=rf"line {text.count(chr(10)) + 1}: a second run"):
        read_output(written(tmp_path, text + text))


def test_output_without_positions_is_refused(tmp_path):
    """A file that ends before its first geometry is refused."""
    text = text_of(SIC).partition(" position of ions in fractional")[0]

    with pytest.raises(InputError, match="cut off"):
        read_output(written(tmp_path, text))


READS = """
import resource, sys
from tensorsym.outputs.read import read_output
count = len(read_output(sys.argv[1]).tensors)
print(count, resource.getrusage(resource.RUSAGE_SELF).ru_maxrss)
"""


def read_apart(path):
    """Return the number of tensors read in a fresh process, and the most memory it took in kB."""
    done = subprocess.run(
        [sys.executable, "-c", READS, str(path)], cwd=ROOT, capture_output=True, text=True, check=True
    )
    return tuple(map(int, done.stdout.split()))


def test_million_lines_are_read_in_bounded_memory(tmp_path):
    """A million lines more, 60 MB, take less than a tenth of that in memory beside what the small file takes."""
    head, mark, tail = text_of(SIC).partition(" MACROSCOPIC STATIC")
    path = tmp_path / "OUTCAR"
    with path.open("w", encoding="utf-8") as stream:
        stream.write(head)
        for _ in range(1000):
            stream.write("    POTLOK:  cpu time    3.1200: real time    3.1185  and so on\n" * 1000)
        stream.write(mark + tail)
    (few, small), (many, large) = read_apart(SIC), read_apart(path)

    assert few == many == len(read_output(SIC).tensors)
    assert large - small < path.stat().st_size / 1024 / 10
