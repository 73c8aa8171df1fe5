from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.frame import closest_frame, placed_group
from tensorsym.errors import GroupSymbolError
from tests.crystal.synthetic import CLASSES, crystal_of_class, largest_gap, matrices_of_class, random_turn

SKEW = ((1, 0, 0), (1, 1, 0), (-1, 2, 1))
LEFT_HANDED = ((0, 1, 0), (1, 0, 0), (0, 0, 1))
CYCLIC = np.array([[0.0, 1.0, 0.0], [0.0, 0.0, 1.0], [1.0, 0.0, 0.0]])
BASES = [pytest.param(None, id="own-cell"), pytest.param(SKEW, id="skew"), pytest.param(LEFT_HANDED, id="left-handed")]


@pytest.mark.parametrize("basis", BASES)
@pytest.mark.parametrize("seed", [1, 2])
@pytest.mark.parametrize("name", CLASSES)
def test_frame_puts_the_class_onto_the_crystal(name, seed, basis):
    """In any orientation and cell the standard operations, turned by the frame, are those that were built in."""
    turn = random_turn(seed)
    symmetry = crystal_of_class(name, turn, basis).symmetry

    assert symmetry.group.hermann_mauguin == name
    assert largest_gap(matrices_of_class(name, symmetry.frame), matrices_of_class(name, turn.T)) < 1e-8


@pytest.mark.parametrize("name", CLASSES)
def test_frame_agrees_with_integer_rotations(name):
    """The turned standard operations are A^T W A^-T of the rotations that spglib finds."""
    symmetry = crystal_of_class(name, random_turn(3), SKEW).symmetry
    across = symmetry.cell.T
    found = across @ np.unique(symmetry.rotations, axis=0) @ np.linalg.inv(across)

    assert largest_gap(matrices_of_class(name, symmetry.frame), found) < 1e-8


@pytest.mark.parametrize("name", CLASSES)
def test_standard_crystal_has_the_unit_frame(name):
    """A crystal whose axes are standard keeps the axes of its file."""
    assert np.abs(crystal_of_class(name).symmetry.frame - np.eye(3)).max() < 1e-12


@pytest.mark.parametrize("name", CLASSES)
def test_renamed_axes_give_a_renaming(name):
    """A crystal whose x, y, z are renamed gets a frame that renames them back, up to senses and equivalent axes."""
    frame = crystal_of_class(name, CYCLIC).symmetry.frame

    if name in {"3", "-3", "32", "3m", "-3m", "6", "-6", "6/m", "622", "6mm", "-62m", "6/mmm"}:
        assert np.abs(np.abs(frame[2]) - np.abs(CYCLIC.T[2])).max() < 1e-12
    else:
        assert np.abs(np.abs(frame) - np.rint(np.abs(frame))).max() < 1e-12


@pytest.mark.parametrize("name", CLASSES)
def test_frame_of_noisy_cell_is_exactly_orthogonal(name):
    """Noise in the lattice moves the frame by no more than its own size and never bends it."""
    turn = random_turn(4)
    symmetry = crystal_of_class(name, turn, noise=2e-5, symprec=1e-3).symmetry
    frame = symmetry.frame

    assert symmetry.group.hermann_mauguin == name
    assert np.abs(frame @ frame.T - np.eye(3)).max() < 1e-9
    assert np.linalg.det(frame) > 0
    assert largest_gap(matrices_of_class(name, frame), matrices_of_class(name, turn.T)) < 1e-4


@pytest.mark.parametrize("name", CLASSES)
def test_symmetrised_cell_is_exact_and_near(name):
    """The symmetrised cell has a metric that every rotation keeps, and is no further from the file's than the noise."""
    symmetry = crystal_of_class(name, random_turn(5), noise=2e-5).symmetry
    cell, rotations = symmetry.symmetrised_cell, symmetry.rotations
    metric = cell @ cell.T

    assert np.abs(rotations.transpose(0, 2, 1) @ metric @ rotations - metric).max() < 1e-8 * metric.max()
    assert np.abs(cell - symmetry.cell).max() < 1e-4


def test_frame_is_read_only():
    """Nobody can change a frame that others hold."""
    with pytest.raises(ValueError, match="read-only"):
        crystal_of_class("32").symmetry.frame[0, 0] = 2.0


def test_rotations_that_form_no_class_are_refused():
    """A set that is no group, such as a lone 3-fold turn, gives no frame."""
    with pytest.raises(GroupSymbolError, match="none of the 32 classes"):
        placed_group(np.array([[[0, -1, 0], [1, -1, 0], [0, 0, 1]]]), np.eye(3))


def test_closest_frame_does_not_depend_on_the_order_of_equals():
    """Of two frames equally close to the file's axes the same one is taken, whichever comes first."""
    half = np.sqrt(0.5)
    x, z = np.array([[half, half, 0.0], [half, -half, 0.0]]), np.array([[0.0, 0.0, 1.0], [0.0, 0.0, 1.0]])

    assert np.array_equal(closest_frame(x, z), closest_frame(x[::-1], z[::-1]))
