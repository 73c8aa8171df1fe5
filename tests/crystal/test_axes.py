from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.axes import axes_for, axes_for_group, words_for
from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.read import read
from tensorsym.crystal.reference_cell import reference_cell
from tensorsym.errors import AxesError
from tensorsym.groups.symbols import point_group_named
from tests.conftest import ROOT
from tests.crystal.synthetic import CLASSES, crystal_of_class, random_turn
from tests.crystal.test_symmetry import rock_salt

HALF = 0.5**0.5


@pytest.mark.parametrize("spec", ["file", "ieee", "international", "x=[100] z=(001)"])
@pytest.mark.parametrize("name", CLASSES)
def test_axes_are_right_handed_and_told(name, spec):
    """Whatever the class and the orientation, axes are right-handed, exact, read-only, and told in words."""
    if spec.startswith("x") and name in {"1", "-1", "2", "m", "2/m"}:
        spec = "z=[001] y=(010)"
    axes = axes_for(crystal_of_class(name, random_turn(1)), spec)

    assert np.abs(axes.matrix @ axes.matrix.T - np.eye(3)).max() < 1e-9
    assert np.linalg.det(axes.matrix) > 0
    assert not axes.matrix.flags.writeable
    assert all(f"{axis} " in axes.words for axis in "xyz")


@pytest.mark.parametrize("spec", ["file", "ieee", "international"])
def test_names_are_forgiven_their_case(spec):
    """Case and blanks around a name do not matter."""
    assert axes_for(rock_salt(), f" {spec.upper()} ").name == spec


def test_file_axes_say_where_they_come_from():
    """The file's axes are the unit matrix and tell crystal directions and origin."""
    axes = axes_for(read(ROOT / "structures" / "quartz-p3121.cif"), "file")

    assert np.array_equal(axes.matrix, np.eye(3))
    assert axes.words.startswith("x along [100], z along [001], y = z x x (c along z, a in the xz plane")


def test_miller_indices_refer_to_the_conventional_cell():
    """In a primitive cell [110] is that of the cubic cell, and the words say so."""
    primitive = axes_for(rock_salt(primitive=True), "x=[110] z=(001)")
    conventional = axes_for(rock_salt(), "x=[110] z=(001)")

    assert primitive.matrix == pytest.approx(np.array([[HALF, HALF, 0], [-HALF, HALF, 0], [0, 0, 1]]), abs=1e-12)
    assert primitive.matrix == pytest.approx(conventional.matrix, abs=1e-12)
    assert primitive.words.endswith("indices of the conventional cell, which is not the file's")
    assert conventional.words == "x along [110], z perpendicular to (001), y = z x x"


def test_unusual_setting_keeps_its_own_indices():
    """In a file in the setting Pbnm the indices are those of the file."""
    crystal = read(ROOT / "structures" / "forsterite-pbnm.cif")

    assert reference_cell(crystal).is_of_file
    assert axes_for(crystal, "x=[001] z=[010]").matrix == pytest.approx(np.array([[0, 0, 1], [1, 0, 0], [0, 1, 0]]))


def test_four_indices_need_a_hexagonal_cell():
    """Four indices have a meaning in a hexagonal cell only."""
    hexagonal = read(ROOT / "structures" / "wurtzite-zno.cif")

    assert axes_for(hexagonal, "x=[2-1-10] z=(0001)").matrix == pytest.approx(np.eye(3), abs=1e-12)
    with pytest.raises(AxesError, match=r"\[2-1-10\] has four indices, and the cell is not hexagonal"):
        axes_for(rock_salt(), "x=[2-1-10] z=(0001)")


def test_made_perpendicular_is_told():
    """Axes that miss the right angle by a fraction of a degree are made exact, and the words say by how much."""
    cell = np.array([[4.0, 0, 0], [0.02, 5.0, 0], [0, 0.03, 6.0]])
    axes = axes_for(Crystal(cell, np.zeros((1, 3)), ("Po",)), "x=[100] y=[010]")

    assert "made perpendicular, 0.23 degrees off" in axes.words


@pytest.mark.parametrize("spec", ["", "iee", "cubic", "axes"])
def test_unknown_name_is_refused_with_what_there_is(spec):
    """A name that is none is refused with the names that are."""
    with pytest.raises(AxesError, match="names no axes; expected file, ieee, international, or Miller notation"):
        axes_for(rock_salt(), spec)


@pytest.mark.parametrize(("matrix", "words"), [
    (np.eye(3), "x along [100], y along [010], z along [001]"),
    ([[HALF, HALF, 0], [-HALF, HALF, 0], [0, 0, 1]], "x along [110], y along [-110], z along [001]"),
    ([[0, -1, 0], [1, 0, 0], [0, 0, 1]], "x along [0-10], y along [100], z along [001]"),
    ([[np.cos(0.05), np.sin(0.05), 0], [-np.sin(0.05), np.cos(0.05), 0], [0, 0, 1]],
     "x 2.9 degrees from [100], y 2.9 degrees from [010], z along [001]"),
])  # fmt: skip
def test_axes_are_told_in_directions(matrix, words):
    """Simple directions are named, others by their angle from the nearest simple one."""
    assert words_for(matrix, rock_salt()) == words


def test_oblique_axes_are_told_as_normals():
    """In a monoclinic crystal x is no direction of small indices but the normal of (100)."""
    words = words_for(np.eye(3), read(ROOT / "structures" / "gypsum.cif"))

    assert words == "x perpendicular to (100), y along [010], z along [001]"


@pytest.mark.parametrize("cell", ["skew", "sixty"])
def test_skew_cells_are_not_conventional(cell):
    """A skew cell of a cubic crystal, and a hexagonal one with 60 degrees, are not those that indices refer to."""
    basis = ((1, 0, 0), (1, 1, 0), (0, 0, 1))
    crystal = crystal_of_class("432" if cell == "skew" else "622", basis=basis)
    reference = reference_cell(crystal)

    assert not reference.is_of_file
    assert np.linalg.norm(reference.vectors[0]) == pytest.approx(np.linalg.norm(crystal.lattice[0]))


@pytest.mark.parametrize("symbol", ["32", "6mm", "4mm", "mm2", "2", "1", "432", "-62m"])
def test_class_in_its_standard_setting_has_ieee_axes_already(symbol):
    """For a class in its standard setting nothing is to be turned."""
    assert axes_for_group(point_group_named(symbol), "ieee").matrix == pytest.approx(np.eye(3), abs=1e-12)


@pytest.mark.parametrize(("symbol", "x", "z"), [
    ("112", (0, 0, 1), None), ("31m", None, (0, 0, 1)), ("-4m2", None, (0, 0, 1)), ("-6m2", None, (0, 0, 1)),
    ("2mm", None, (1, 0, 0)),
])  # fmt: skip
def test_class_in_another_setting_is_turned(symbol, x, z):
    """A setting is turned so that its elements lie where the standard setting has them."""
    group = point_group_named(symbol)
    matrix = axes_for_group(group, "ieee").matrix
    turned = np.array([matrix @ operation.cartesian() @ matrix.T for operation in group.operations])
    standard = point_group_named(group.hermann_mauguin)
    wanted = np.array([operation.cartesian() for operation in standard.operations])

    assert np.abs(turned[:, None] - wanted[None]).max(axis=(2, 3)).min(axis=1).max() < 1e-12
    assert x is None or np.abs(matrix[1]) == pytest.approx(x)
    assert z is None or np.abs(matrix[2]) == pytest.approx(z)


@pytest.mark.parametrize(("symbol", "spec"), [
    ("m-3m", "x=[11-2] z=[111]"), ("6mm", "x=[2-1-10] z=[0001]"), ("4mm", "x=[110] z=(001)"), ("32", "x=[120] z=[001]"),
    ("mmm", "x=[010] z=[100]"), ("2", "y=[010] z=[001]"), ("2", "x=(100) y=[010]"), ("112", "x=[100] z=[001]"),
    ("1", "z=[001] y=(010)"),
])  # fmt: skip
def test_class_takes_directions_that_need_no_lengths(symbol, spec):
    """Directions that the class alone fixes are accepted."""
    matrix = axes_for_group(point_group_named(symbol), spec).matrix

    assert np.abs(matrix @ matrix.T - np.eye(3)).max() < 1e-12


@pytest.mark.parametrize(("symbol", "spec"), [
    ("4mm", "x=[101] y=[010]"), ("mmm", "x=[110] z=[001]"), ("32", "x=[100] z=(012)"), ("2", "x=[100] y=[010]"),
])  # fmt: skip
def test_class_refuses_directions_that_need_lengths(symbol, spec):
    """What depends on lengths or angles that a class leaves open needs a structure file."""
    with pytest.raises(AxesError, match=r"depends on lengths or angles|degrees apart"):
        axes_for_group(point_group_named(symbol), spec)


@pytest.mark.parametrize(("symbol", "spec", "message"), [
    ("32", "file", "has no file"), ("32", "nowhere", "names no axes"), ("4mm", "x=[2-1-10] z=[0001]", "not hexagonal"),
])  # fmt: skip
def test_class_refuses_what_it_cannot_have(symbol, spec, message):
    """A class has no file, and only hexagonal ones have four indices."""
    with pytest.raises(AxesError, match=message):
        axes_for_group(point_group_named(symbol), spec)


def test_international_setting_of_a_class():
    """A monoclinic class with unique axis c is turned to unique axis b; a trigonal setting is standard already."""
    assert np.abs(axes_for_group(point_group_named("112"), "international").matrix[1]) == pytest.approx([0, 0, 1])
    assert np.array_equal(axes_for_group(point_group_named("31m"), "international").matrix, np.eye(3))
