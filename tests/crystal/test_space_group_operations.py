from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.space_group_operations import operation_in_text, operations_of_space_group
from tensorsym.errors import StructureError


@pytest.mark.parametrize(("text", "rotation", "translation"), [
    ("x,y,z", [[1, 0, 0], [0, 1, 0], [0, 0, 1]], [0, 0, 0]),
    ("-y, x-y, z+1/3", [[0, -1, 0], [1, -1, 0], [0, 0, 1]], [0, 0, 1 / 3]),
    ("1/2+X,1/2-Y,-Z", [[1, 0, 0], [0, -1, 0], [0, 0, -1]], [0.5, 0.5, 0]),
    ("+x+.5,y-0.25,z+0.3333", [[1, 0, 0], [0, 1, 0], [0, 0, 1]], [0.5, -0.25, 1 / 3]),
    ("z,x,y", [[0, 0, 1], [1, 0, 0], [0, 1, 0]], [0, 0, 0]),
    ("-x+y+2/3,y+1/3,-z+5/6", [[-1, 1, 0], [0, 1, 0], [0, 0, -1]], [2 / 3, 1 / 3, 5 / 6]),
])  # fmt: skip
def test_operations_are_read(text, rotation, translation):
    """Coordinates in any order, with fractions or decimals, give the matrix and the exact translation."""
    found = operation_in_text(text, "file")

    assert found[0].tolist() == rotation
    assert found[1] == pytest.approx(translation, abs=1e-15)


@pytest.mark.parametrize("text", ["", "x,y", "x,y,z,t", "x,y,w", "x,,z", "x y,z,x", "x,y,z+1/0", "x,y,2(z)", "x,y,z+"])
def test_nonsense_is_refused(text):
    """Anything else is refused with the text and an example."""
    with pytest.raises(StructureError, match="is no symmetry operation; expected three coordinates"):
        operation_in_text(text, "file")


# Numbers of operations of the conventional cell: International Tables for Crystallography, vol. A (memory).
@pytest.mark.parametrize(("name", "order"), [
    ("P1", 1), ("P -1", 2), ("P 21/c", 4), ("P2_1/c", 4), ("P 1 21/n 1", 4), ("P 21/n", 4), ("C 2/c", 8), ("I 2/a", 8),
    ("P n m a", 8), ("P b n m", 8), ("I41/amd", 32), ("R -3 c", 36), ("R -3 c:H", 36), ("R -3 c:R", 12), ("P 63/m", 12),
    ("F d -3 m", 192), ("F d -3 m:2", 192), ("152", 6), ("227", 192), ("P 31 2 1", 6), ('-R 3 2"c', 36),
])  # fmt: skip
def test_named_groups_have_their_operations(name, order):
    """Names with and without blanks, settings, numbers and Hall symbols have the right number of operations."""
    operations = operations_of_space_group(name, "file")

    assert len(operations.rotations) == len(operations.translations) == order
    assert np.abs(np.abs(np.linalg.det(operations.rotations)) - 1).max() < 1e-12


def test_unknown_group_offers_the_nearest():
    """A misspelt name is refused with names that exist."""
    with pytest.raises(StructureError, match=r"'P n m q' is no space group.*nearest: .*pnm"):
        operations_of_space_group("P n m q", "file")
