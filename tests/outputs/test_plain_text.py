from __future__ import annotations

import numpy as np
import pytest

from tensorsym.errors import ShapeError, TensorFileError, UnknownNameError, UsageError
from tensorsym.outputs.plain_text import MOST_NUMBERS
from tensorsym.outputs.read import read_tensors

PIEZO = np.arange(18.0).reshape(3, 6) + 0.25
ELASTIC = np.arange(36.0).reshape(6, 6) + 0.5


def written(folder, text):
    """Write a text where a reader can find it."""
    path = folder / "matrix.txt"
    path.write_text(text, encoding="utf-8")
    return path


def rows(array):
    """Return an array as rows of text."""
    return "\n".join(" ".join(map(str, row)) for row in np.atleast_2d(array)) + "\n"


def one_of(folder, text, name, **options):
    """Return the only record of a text."""
    (record,) = read_tensors(written(folder, text), property=name, **options)
    return record


@pytest.mark.parametrize(
    "text",
    [
        rows(PIEZO),
        "# strain form\n\n" + rows(PIEZO).replace(" ", ", "),
        rows(PIEZO).replace(" ", "\t").replace("\n", "  # a row\n"),
        "[" + ",\n".join(str(row.tolist()) for row in PIEZO) + "]\n",
        rows(PIEZO.reshape(1, -1)),
        rows(PIEZO.T),
        "\ufeff" + rows(PIEZO).replace("\n", "\r\n"),
    ],
)
def test_ways_to_write_a_matrix(tmp_path, text):
    """Blanks, commas, tabs, brackets, comments, one row, and rows and columns exchanged are all understood."""
    record = one_of(tmp_path, text, "piezoelectric-stress")

    assert record.values[1, 1, 2] == record.values[1, 2, 1] == PIEZO[1, 3]
    assert record.values[2, 0, 0] == PIEZO[2, 0]
    assert record.order == "11 22 33 23 13 12"


@pytest.mark.parametrize(
    ("name", "shape"),
    [
        ("pyroelectric", (3,)), ("pyroelectric", (3, 1)), ("dielectric", (3, 3)), ("dielectric", (9,)),
        ("piezoelectric", (3, 9)), ("piezoelectric", (9, 3)), ("piezoelectric", (27,)), ("piezoelectric", (27, 1)),
        ("elastic-stiffness", (9, 9)), ("elastic-stiffness", (81,)), ("elastic-stiffness", (27, 3)),
        ("heat-capacity", (1,)),
    ],
)  # fmt: skip
def test_full_tensor_in_any_grouping(tmp_path, name, shape):
    """A full tensor is read however its indices are grouped into rows."""
    array = np.arange(1.0, np.prod(shape) + 1).reshape(shape)
    record = one_of(tmp_path, rows(array), name)

    assert (record.values.ravel() == array.ravel()).all()
    assert record.order == ""


def test_order_is_followed(tmp_path):
    """The order given says where the columns belong."""
    record = one_of(tmp_path, rows(ELASTIC), "elastic-stiffness", order="xx yy zz xy yz zx")

    assert record.values[0, 1, 1, 2] == ELASTIC[3, 4]
    assert record.order == "xx yy zz xy yz zx"


def test_one_matrix_an_atom(tmp_path):
    """A property of sites may be given as matrices after one another, one for each atom."""
    record = one_of(tmp_path, rows(np.arange(18).reshape(6, 3)), "born-charge", atoms=2)

    assert record.per_site
    assert record.values.shape == (2, 3, 3)
    assert record.values[1, 0].tolist() == [9, 10, 11]


@pytest.mark.parametrize(
    ("text", "digits"),
    [
        ("2.31 0 0\n0 2.31 0\n0 0 -0.727\n", 1e-2),
        ("2.5 0 0\n0 2.512 0\n0 0 2.501\n", 1e-3),
        ("2 0 0\n0 2 0\n0 0 3\n", None),
        ("2.31E1 0 0\n0 2.31E1 0\n0 0 4.5D-3\n", 1e-1),
    ],
)
def test_digits_are_those_printed(tmp_path, text, digits):
    """The last place is the usual one of the numbers, whatever zeros were dropped."""
    assert one_of(tmp_path, text, "dielectric").digits == (pytest.approx(digits) if digits else None)


def test_unit_decides_the_form(tmp_path):
    """Given in C/m^2, the general name means e, without the factor of d; a unit that fits nothing is told."""
    e = one_of(tmp_path, rows(PIEZO), "piezoelectric", unit="C/m^2")
    odd = one_of(tmp_path, rows(PIEZO), "piezoelectric", unit="kg")

    assert e.property == "piezoelectric-stress"
    assert e.values[0, 1, 2] == PIEZO[0, 3]
    assert odd.values[0, 1, 2] == PIEZO[0, 3] / 2
    assert any("kg is none of piezoelectric" in note for note in odd.notes)


@pytest.mark.parametrize(
    ("text", "kind", "says"),
    [
        ("1 0 0\n0 x1 0\n0 0 1\n", TensorFileError, "line 2: 'x1' is no number"),
        ("1 0 0\n0 nan 0\n0 0 1\n", TensorFileError, "line 2: 'nan' is not finite"),
        ("1 0 0\n0 -Infinity 0\n0 0 1\n", TensorFileError, "line 2: '-Infinity' is not finite"),
        ("1 0 0\n0 1e999 0\n0 0 1\n", TensorFileError, "line 2: '1e999' is too large"),
        ("1 0 0\n0 1_0 0\n0 0 1\n", TensorFileError, "line 2: '1_0' is no number"),
        ("1 0 0\n0 1\n0 0 1\n", ShapeError, "line 2: 2 numbers in a row where the first row has 3"),
        ("1 0\n0 1\n", ShapeError, "numbers in 2 x 2 do not fit dielectric; expected 3 x 3"),
        ("1 0 0 0\n", ShapeError, "numbers in 1 x 4 do not fit"),
        ("# nothing\n", TensorFileError, "holds no numbers"),
        ("Hello, world\n", TensorFileError, "line 1: 'Hello' is no number"),
    ],
)
def test_fault_is_named(tmp_path, text, kind, says):
    """Words that are no numbers, rows of unequal length and wrong shapes are refused with their line."""
    with pytest.raises(kind, match=says):
        read_tensors(written(tmp_path, text), property="dielectric")


@pytest.mark.parametrize(
    ("name", "shape", "says"),
    [
        ("piezoelectric", (2, 6), "3 x 6 numbers in matrix notation, or 27 numbers in full"),
        ("elastic-stiffness", (5, 6), "6 x 6 numbers in matrix notation, or 81 numbers in full"),
        ("elastic-stiffness", (12, 3), "6 x 6 numbers in matrix notation"),
        ("efg", (2, 3), "3 x 3 numbers, or as many for each of the 4 atoms"),
    ],
)
def test_expected_shapes_are_told(tmp_path, name, shape, says):
    """A wrong shape is answered with the shapes that fit."""
    with pytest.raises(ShapeError, match=says):
        read_tensors(written(tmp_path, rows(np.ones(shape))), property=name, atoms=4)


def test_property_must_be_named(tmp_path):
    """Numbers without a name are wrong usage, told with the option to give; so is an unknown name."""
    path = written(tmp_path, "1 0 0\n0 1 0\n0 0 1\n")

    with pytest.raises(UsageError, match="--property NAME"):
        read_tensors(path)
    with pytest.raises(UnknownNameError, match="nearest: dielectric"):
        read_tensors(path, property="dielctric")
    with pytest.raises(UsageError, match="no order of the six index pairs"):
        read_tensors(written(tmp_path, rows(PIEZO)), property="piezoelectric", order="11 22")


def test_endless_text_is_refused(tmp_path):
    """More numbers than any tensor has are refused where they become too many."""
    with pytest.raises(ShapeError, match="more than"):
        read_tensors(written(tmp_path, "1 2 3\n" * (MOST_NUMBERS // 3 + 1)), property="dielectric")
