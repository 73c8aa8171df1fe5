from __future__ import annotations

import pytest

from tensorsym.errors import InputError
from tensorsym.outputs.read import read_output
from tests.conftest import ROOT
from tests.outputs.group_average import residual

DATA = ROOT / "tests" / "data" / "outputs"
OUTPUT, EFIELD = DATA / "BC2N-Pmm2-Raman.castep", DATA / "BN_R3m.test.efield"


def damaged(folder, path, old, new):
    """Write a file with one place changed."""
    text = path.read_text(encoding="utf-8")
    assert old in text
    changed = folder / path.name
    changed.write_text(text.replace(old, new, 1), encoding="utf-8")
    return changed


# Read by eye in the files.
@pytest.mark.parametrize(
    ("path", "label", "place", "value"),
    [
        (OUTPUT, "as printed", (0, 1, 1), 1.29414),
        (OUTPUT, "as printed", (3, 2, 2), -1.49030),
        (OUTPUT, "mode 8, 1135.449291 cm^-1, A1", (1, 1), 0.0761),
        (OUTPUT, "mode 12, 1290.768470 cm^-1, A1", (2, 2), -0.2097),
        (EFIELD, "at 0 cm^-1", (2, 2), 4.755787),
        (EFIELD, "oscillator strength of mode at 726.90 cm^-1", (2, 2), 4.042331),
        (EFIELD, "oscillator strength of 2 modes at 1371.81 cm^-1", (0, 0), 17.325141 + 12.535760),
    ],
)
def test_number_stands_where_the_eye_finds_it(path, label, place, value):
    """A number of a file becomes the right component."""
    record = next(record for record in read_output(path).tensors if record.label == label)

    assert record.values[place] == pytest.approx(value)


@pytest.mark.parametrize(("path", "number", "count"), [(OUTPUT, 25, 4), (EFIELD, 160, 3)])
def test_everything_obeys_the_class(path, number, count):
    """Born charges, A1 modes and sums over equal frequencies are invariant, as the shared index of the data says."""
    output = read_output(path)

    assert output.crystal.symmetry.number == number
    assert len(output.tensors) == count
    assert max(residual(output.crystal, record) for record in output.tensors) < 1e-6


def test_other_modes_are_left_out_and_told():
    """Only the totally symmetric modes give Raman tensors; how many others there are is said."""
    output = read_output(OUTPUT)

    assert [record.label.split(",")[0] for record in output.tensors[1:]] == ["mode 8", "mode 11", "mode 12"]
    assert any("6 modes that are not totally symmetric" in note for note in output.notes)


def test_permittivities_side_by_side(tmp_path):
    """The clamped and the relaxed permittivity stand side by side (layout from memory, numbers invented)."""
    block = (
        "        Optical Permittivity (f->infinity)             DC Permittivity (f=0)\n"
        "        ----------------------------------             ---------------------\n"
        "         2.50000     0.10000     0.00000        6.10000     0.20000     0.00000\n"
        "         0.10000     2.60000     0.00000        0.20000     6.20000     0.00000\n"
        "         0.00000     0.00000     2.70000        0.00000     0.00000     6.30000\n"
    )
    place = "                   Born Effective Charges"
    clamped, relaxed = read_output(damaged(tmp_path, OUTPUT, place, block + place)).tensors[:2]

    assert clamped.values.diagonal().tolist() == [2.5, 2.6, 2.7]
    assert relaxed.values[0, 1] == relaxed.values[1, 0] == 0.2


@pytest.mark.parametrize(
    ("path", "old", "new", "says"),
    [
        (OUTPUT, "1.10729     0.00000", "*******     0.00000", "line 482.*no row of 3"),
        (OUTPUT, "   2.5280000   0.0000000", "         NaN   0.0000000", "line 218.*no row of 6"),
        (OUTPUT, "0.500000   0.000000   0.124544", "0.500000   0.000000", "line 240.*no row of 3"),
        (OUTPUT, "Fractional coordinates of atoms", "", "no atoms before"),
        (EFIELD, "17.325141      12.535760", "*********      12.535760", "line 19.*no row of 7"),
        (EFIELD, "     2     0.331459", "     2     ********", "line 12.*is no atom"),
        (EFIELD, " END header", "", "is no atom"),
        (EFIELD, " END Oscillator Strengths\n", "", "6 modes where"),
    ],
)
def test_damage_is_told_with_its_line(tmp_path, path, old, new, says):
    """Asterisks, NaN and missing parts are refused."""
    with pytest.raises(InputError, match=says):
        read_output(damaged(tmp_path, path, old, new))
