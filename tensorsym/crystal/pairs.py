"""Pairs of points that lie close together in a periodic cell, found without comparing all with all."""

from __future__ import annotations

from itertools import product
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

ALL_WITH_ALL = 10_000
"""Up to this many pairs every one is looked at, which is quicker than sorting the points into bins."""

_MOST_BINS = 2**20


class Pairs(NamedTuple):
    """Close pairs of a point of a first set and a point of a second one."""

    first: NDArray[np.intp]
    """Shape (pairs,): number of the point in the first set."""
    second: NDArray[np.intp]
    """Shape (pairs,): number of the point in the second set."""
    distance: NDArray[np.float64]
    """Shape (pairs,): distance in Å between the nearest periodic images."""


def plane_distances(lattice: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the distances in Å between the lattice planes (100), (010) and (001) of a cell, shape (3,)."""
    return np.asarray(1.0 / np.linalg.norm(np.linalg.inv(lattice), axis=0))


def pairs_within(
    first: NDArray[np.float64], second: NDArray[np.float64], lattice: NDArray[np.float64], reach: float
) -> Pairs:
    """Return the pairs no further apart than a reach.

    Parameters
    ----------
    first, second : ndarray of shape (n, 3), (m, 3)
        Fractional coordinates.
    lattice : ndarray of shape (3, 3)
        Rows are the lattice vectors in Å.
    reach : float
        Largest distance in Å; less than half of every distance between lattice planes.

    Examples
    --------
    >>> points = np.array([[0.01, 0.0, 0.0], [0.99, 0.0, 0.0], [0.5, 0.5, 0.5]])
    >>> pairs_within(points, points, 5.0 * np.eye(3), 0.2).second.tolist()
    [0, 1, 0, 1, 2]
    """
    if len(first) * len(second) <= ALL_WITH_ALL:
        one, other = (index.ravel() for index in np.indices((len(first), len(second))))
    else:
        one, other = _candidates(first % 1.0, second % 1.0, lattice, reach)
    apart = first[one] - second[other]
    apart -= np.rint(apart)
    distance = np.sqrt(((apart @ lattice) ** 2).sum(axis=1))
    near = distance <= reach
    return Pairs(one[near], other[near], distance[near])


def _candidates(
    first: NDArray[np.float64], second: NDArray[np.float64], lattice: NDArray[np.float64], reach: float
) -> tuple[NDArray[np.intp], NDArray[np.intp]]:
    """Return the pairs whose bins are the same or touch; a bin is at least `reach` wide."""
    counts = np.clip((plane_distances(lattice) / reach).astype(np.int64), 1, _MOST_BINS)
    bins, others = ((points * counts).astype(np.int64) % counts for points in (first, second))
    strides = np.array([counts[1] * counts[2], counts[2], 1])
    keys = others @ strides
    order = np.argsort(keys, kind="stable")
    keys = keys[order]
    found: list[tuple[NDArray[np.intp], NDArray[np.intp]]] = []
    for step in product(*(range(-1, 2) if count > 2 else range(count) for count in counts)):
        wanted = ((bins + step) % counts) @ strides
        start, stop = np.searchsorted(keys, wanted, "left"), np.searchsorted(keys, wanted, "right")
        length = stop - start
        place = np.arange(length.sum()) - np.repeat(np.cumsum(length) - length, length)
        found.append((np.repeat(np.arange(len(first)), length), order[np.repeat(start, length) + place]))
    return np.concatenate([one for one, _ in found]), np.concatenate([other for _, other in found])
