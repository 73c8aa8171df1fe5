from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.molecule import molecule_in_box
from tensorsym.errors import StructureError
from tensorsym.groups.point_group import standard_point_group
from tests.crystal.synthetic import CLASSES, largest_gap, matrices_of_class, random_turn


def molecule_of_class(name, turn):
    """Return places and species of a molecule of a class, four sets of atoms in general positions."""
    places, species = [], []
    for label, place in (
        ("C", (1.1, 0.47, 1.9)),
        ("N", (2.3, 1.2, 0.55)),
        ("O", (0.4, 1.6, 1.3)),
        ("F", (0.7, 0.2, 3.1)),
    ):
        for operation in standard_point_group(name).operations:
            places.append(turn @ operation.cartesian() @ place)
            species.append(label)
    return np.array(places), species


@pytest.mark.parametrize("seed", [0, 1])
@pytest.mark.parametrize("name", CLASSES)
def test_class_of_a_molecule_is_found_in_any_orientation(name, seed):
    """A molecule of each class has that class, and its elements lie where they were put."""
    turn = np.eye(3) if seed == 0 else random_turn(seed)
    crystal = molecule_in_box(*molecule_of_class(name, turn), "", "test").crystal("")

    assert crystal.point_group.hermann_mauguin == name
    assert largest_gap(matrices_of_class(name, crystal.symmetry.frame), matrices_of_class(name, turn.T)) < 1e-8


def test_five_fold_molecule_is_noted():
    """A ring of five has an axis that no crystal class has; what fits the box is given and a note says so."""
    angles = 2 * np.pi * np.arange(5) / 5
    ring = np.stack([np.cos(angles), np.sin(angles), 0 * angles], axis=1)
    parts = molecule_in_box(1.2 * ring, ["C"] * 5, "", "test")

    assert any("operation of order 10" in note or "operation of order 5" in note for note in parts.notes)
    assert parts.crystal("").point_group.hermann_mauguin == "mm2"


@pytest.mark.parametrize(("places", "species", "expected"), [
    ([[0, 0, 0], [0, 0, 1.1]], ["C", "O"], "4mm"), ([[1, 1, 1], [0, 0, 0], [-1, -1, -1]], ["O", "C", "O"], "4/mmm"),
    ([[3, 2, 1]], ["He"], "m-3m"),
])  # fmt: skip
def test_linear_molecules_are_noted(places, species, expected):
    """Axes of infinite order are told, and the box keeps a 4-fold axis along them."""
    parts = molecule_in_box(places, species, "", "test")

    assert any("infinite order" in note for note in parts.notes)
    assert parts.crystal("").point_group.hermann_mauguin == expected


@pytest.mark.parametrize("places", [np.zeros((0, 3)), [[0, 0, float("nan")]]])
def test_no_molecule_is_refused(places):
    """No atoms, or coordinates that are not finite, make no molecule."""
    with pytest.raises(StructureError, match="a molecule of"):
        molecule_in_box(places, ["C"] * len(places), "file", "test")
