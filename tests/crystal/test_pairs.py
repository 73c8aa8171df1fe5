from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal import pairs
from tensorsym.crystal.pairs import pairs_within, plane_distances

LATTICE = np.array([[7.0, 0.3, 0.0], [-2.0, 8.0, 0.5], [1.0, 1.5, 9.0]])


def all_images(first, second, lattice, reach):
    """Return the close pairs by looking at 27 images of every pair."""
    steps = np.array(list(np.ndindex(3, 3, 3))) - 1.0
    apart = (first % 1)[:, None, None] - (second % 1)[None, :, None] + steps
    near = np.linalg.norm(apart @ lattice, axis=3).min(axis=2) <= reach
    return {(int(one), int(other)) for one, other in np.argwhere(near)}


@pytest.mark.parametrize("reach", [0.05, 0.4, 1.5])
@pytest.mark.parametrize("direct", [True, False])
def test_pairs_are_those_of_a_full_search(reach, direct, monkeypatch):
    """Both ways, comparing all with all and sorting into bins, find what 27 images of every pair show."""
    monkeypatch.setattr(pairs, "ALL_WITH_ALL", 10**9 if direct else 0)
    random = np.random.default_rng(5)
    first, second = random.uniform(-1, 2, (120, 3)), random.uniform(-1, 2, (150, 3))
    found = pairs_within(first, second, LATTICE, reach)

    assert set(zip(found.first.tolist(), found.second.tolist(), strict=True)) == all_images(
        first, second, LATTICE, reach
    )
    assert len(found.first) == len(set(zip(found.first.tolist(), found.second.tolist(), strict=True)))


def test_many_points_are_quick_and_complete():
    """Of fifty thousand points on a grid, each is near itself only."""
    grid = np.stack(np.meshgrid(*(np.arange(37) / 37,) * 3), axis=-1).reshape(-1, 3)
    found = pairs_within(grid, grid, 100.0 * np.eye(3), 0.1)

    assert np.array_equal(found.first, found.second)
    assert len(found.first) == len(grid)


def test_distances_of_planes():
    """The planes (100) of a sheared cell are closer than its edge is long."""
    assert plane_distances(np.array([[2.0, 0, 0], [2.0, 2.0, 0], [0, 0, 5.0]])) == pytest.approx([2**0.5, 2.0, 5.0])
