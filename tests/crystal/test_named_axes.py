from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.axes import axes_for
from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.ieee_axes import shortest_pair
from tensorsym.crystal.read import read
from tests.conftest import ROOT
from tests.crystal.synthetic import (
    CLASSES,
    crystal_of_class,
    is_hexagonal,
    largest_gap,
    matrices_of_class,
    random_turn,
)

STRUCTURES = sorted((ROOT / "structures").glob("*.cif"))


def elements(crystal, matrix, symbol):
    """Return the axes of all operations with a symbol, in the axes whose rows are given."""
    operations = [found for found in crystal.point_group.operations if found.symbol == symbol]
    return np.array([matrix @ crystal.symmetry.frame.T @ found.cartesian_direction() for found in operations])


def lies_along(directions, axis):
    """Tell whether one of some directions lies along an axis."""
    return bool((np.abs(directions[:, axis]) > 1 - 1e-9).any())


# IEEE Std 176-1987, section 3.2 (memory): where the elements of each class lie in the standard's axes.
@pytest.mark.parametrize(("name", "symbol", "axis"), [
    ("2", "2", 1), ("m", "m", 1), ("2/m", "2", 1), ("mm2", "2", 2), ("4", "4", 2), ("-4", "-4", 2), ("422", "4", 2),
    ("-42m", "-4", 2), ("-42m", "2", 0), ("3", "3", 2), ("32", "3", 2), ("32", "2", 0), ("3m", "m", 0), ("-3m", "2", 0),
    ("6", "6", 2), ("-6", "-6", 2), ("622", "2", 0), ("6mm", "m", 0), ("-62m", "2", 0), ("23", "2", 2), ("432", "4", 2),
    ("-43m", "-4", 2), ("-43m", "-4", 0), ("222", "2", 0), ("mmm", "m", 2),
])  # fmt: skip
@pytest.mark.parametrize("seed", [1, 2])
def test_elements_lie_where_ieee_176_has_them(name, symbol, axis, seed):
    """In any orientation the IEEE axes put the elements of a class where the standard says (memory)."""
    crystal = crystal_of_class(name, random_turn(seed))

    assert lies_along(elements(crystal, axes_for(crystal, "ieee").matrix, symbol), axis)


@pytest.mark.parametrize("name", ["222", "mmm"])
def test_orthorhombic_edges_are_ordered(name):
    """C < a < b: z lies along the shortest edge, y along the longest (IEEE Std 176-1987, 3.2.3, memory)."""
    crystal = crystal_of_class(name, random_turn(3))
    x, y, z = np.abs(
        axes_for(crystal, "ieee").matrix @ (crystal.lattice / np.linalg.norm(crystal.lattice, axis=1)[:, None]).T
    )
    by_length = np.argsort(np.linalg.norm(crystal.lattice, axis=1))

    assert [int(np.argmax(row)) for row in (z, x, y)] == by_length.tolist()


def test_polar_orthorhombic_axis_is_z_whatever_its_length():
    """In mm2 z is the polar axis, and x lies along the shorter of the other two (IEEE Std 176-1987, 3.2.3, memory)."""
    crystal = crystal_of_class("mm2")
    short = Crystal(crystal.lattice @ np.diag([1.3, 1.0, 1.0]), crystal.positions, crystal.species)

    assert np.abs(axes_for(crystal, "ieee").matrix[[0, 2]]) == pytest.approx(np.array([[1, 0, 0], [0, 0, 1]]))
    assert np.abs(axes_for(short, "ieee").matrix[[0, 2]]) == pytest.approx(np.array([[0, 1, 0], [0, 0, 1]]))


@pytest.mark.parametrize("name", ["2", "m", "2/m"])
@pytest.mark.parametrize("seed", [1, 2, 3])
def test_monoclinic_axes_follow_the_two_shortest_vectors(name, seed):
    """Z lies along the shortest vector normal to b, x on the side of the next one, at an obtuse angle (memory)."""
    crystal = crystal_of_class(name, random_turn(seed), basis=((1, 0, 0), (0, 1, 0), (2, 0, 1)))
    matrix = axes_for(crystal, "ieee").matrix
    steps = [np.array(step) @ crystal.lattice for step in np.ndindex(9, 9, 9)]
    steps = [step - 4 * crystal.lattice.sum(axis=0) for step in steps]
    flat = sorted((s for s in steps if abs(s @ matrix[1]) < 1e-6 and s @ s > 1e-6), key=np.linalg.norm)
    c = flat[0] if flat[0] @ matrix[2] > 0 else -flat[0]
    a = next(s for s in flat if np.linalg.norm(np.cross(s, c)) > 1e-6 and s @ matrix[0] > 0)

    assert matrix @ c == pytest.approx([0, 0, np.linalg.norm(c)], abs=1e-9)
    assert a @ c < 1e-9
    assert matrix[1] @ a == pytest.approx(0, abs=1e-9)


@pytest.mark.parametrize("seed", [1, 2, 3])
def test_triclinic_axes_follow_the_three_shortest_vectors(seed):
    """Z lies along the shortest vector, y is normal to it and to the next one, alpha and beta are obtuse (memory)."""
    crystal = crystal_of_class("1", random_turn(seed), basis=((1, 0, 0), (1, 1, 0), (0, -1, 1)))
    matrix = axes_for(crystal, "ieee").matrix
    steps = [(np.array(step) - 4) @ crystal.lattice for step in np.ndindex(9, 9, 9)]
    by_length = sorted((s for s in steps if s @ s > 1e-6), key=np.linalg.norm)
    c = by_length[0] if by_length[0] @ matrix[2] > 0 else -by_length[0]
    a = next(s for s in by_length if np.linalg.norm(np.cross(s, c)) > 1e-6)
    a = a if a @ c < 0 else -a

    assert matrix @ c == pytest.approx([0, 0, np.linalg.norm(c)], abs=1e-9)
    assert matrix[1] @ a == pytest.approx(0, abs=1e-9)
    assert matrix[0] @ a > 0


@pytest.mark.parametrize("name", CLASSES)
def test_ieee_axes_belong_to_the_crystal(name):
    """Turning a crystal turns its IEEE axes with it: the elements lie in them as before."""
    turn = random_turn(6)
    here, there = (axes_for(crystal_of_class(name, matrix), "ieee").matrix for matrix in (None, turn))

    assert largest_gap(matrices_of_class(name, here.T), matrices_of_class(name, (there @ turn).T)) < 1e-8


@pytest.mark.parametrize(
    "name", ["4", "-4", "4/m", "422", "4mm", "4/mmm", "3", "-3", "6", "-6", "6/m", "622", "6mm", "6/mmm"]
)
def test_uniaxial_x_lies_along_an_edge(name):
    """Without an element that decides, x lies along an a axis of the smallest cell (IEEE Std 176-1987, memory)."""
    crystal = crystal_of_class(name, random_turn(8))
    x = axes_for(crystal, "ieee").matrix[0]
    a, b, _ = crystal.lattice
    edges = [a, b, a + b] if is_hexagonal(name) else [a, b]

    assert max(abs(x @ edge) / np.linalg.norm(edge) for edge in edges) == pytest.approx(1.0)


def test_senses_are_said_to_be_open():
    """The words say which senses a structure cannot tell, where there are any: not with an inversion centre."""
    assert "not known from a structure" in axes_for(crystal_of_class("32"), "ieee").words
    assert "not known from a structure" not in axes_for(crystal_of_class("-3m"), "ieee").words


@pytest.mark.parametrize("path", STRUCTURES, ids=lambda path: path.stem)
def test_file_in_its_standard_setting_keeps_its_axes(path):
    """The international axes of a CIF in its standard setting are those of the file."""
    crystal = read(path)
    matrix = axes_for(crystal, "international").matrix

    if np.abs(np.abs(crystal.symmetry.to_standard) - np.eye(3)).max() < 1e-6:
        assert np.abs(matrix - np.eye(3)).max() < 1e-9
    else:
        assert path.stem in {"albite", "forsterite-pbnm", "gypsum"}


# Pnma from Pbnm: a b c of Pbnm are c a b of Pnma (International Tables, vol. A, table of settings; memory).
def test_setting_pbnm_is_turned_to_pnma():
    """x, y, z of Pnma lie along b, c, a of Pbnm."""
    matrix = axes_for(read(ROOT / "structures" / "forsterite-pbnm.cif"), "international").matrix

    assert np.abs(matrix) == pytest.approx(np.array([[0, 1, 0], [0, 0, 1], [1, 0, 0]]), abs=1e-9)


@pytest.mark.parametrize("stem", ["quartz-p3121", "chalcopyrite", "pyrite", "zinc-blende", "lithium-niobate"])
def test_international_axes_do_not_depend_on_the_cell_given(stem):
    """Another basis of the same lattice gives the same axes: they belong to the crystal and its orientation."""
    crystal = read(ROOT / "structures" / f"{stem}.cif")
    basis = np.array([[1, 0, 0], [1, 1, 0], [0, 1, 1]])
    other = Crystal(basis @ crystal.lattice, crystal.positions @ np.linalg.inv(basis), crystal.species)

    assert axes_for(other, "international").matrix == pytest.approx(axes_for(crystal, "international").matrix, abs=1e-9)


def test_shortest_pair_of_a_plane_lattice():
    """Gauss's reduction finds the two shortest vectors of a stretched basis."""
    one, other = np.array([1.0, 0.0, 0.0]), np.array([0.2, 1.1, 0.0])
    found = shortest_pair(other + 7 * one, 3 * (other + 7 * one) + one)

    assert sorted(np.linalg.norm(vector) for vector in found) == pytest.approx([1.0, np.hypot(0.2, 1.1)])
