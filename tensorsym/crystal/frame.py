"""The standard frame of a group of integer rotations, placed in the Cartesian axes of the lattice they act on.

Which lattice directions may be x, y and z is exact and depends on the rotations alone, so it is prepared once for each
set; batches of crystals meet few distinct ones. What is left for a crystal is a handful of small products.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from itertools import product
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from tensorsym.groups.point_group import PointGroup, standard_point_group
from tensorsym.groups.recognition import frame_directions

if TYPE_CHECKING:
    from numpy.typing import NDArray

EXACT = 1e-10
"""A metric that the rotations change by no more than this share of itself needs no symmetrising."""

_MOST_STEPS = 8

SQUARE = 1e-6
"""A direction this close to perpendicular to the file's axis has no nearer sense."""

_SENSES = np.array([3.0, 2.0, 1.0])
"""The sense of such a direction: the one with the larger of these components."""

_TIES = np.eye(3) + 1e-3 * np.array([[0.0, 0.31, 0.17], [0.07, 0.0, 0.13], [0.05, 0.11, 0.0]])
"""Weights of the entries of a frame: how close it is to the file's axes, and a fixed choice between equal ones."""


_CROSS_WITH_Y = np.array(
    [
        [0.0, -_TIES[1, 2], _TIES[1, 1]],
        [_TIES[1, 2], 0.0, -_TIES[1, 0]],
        [-_TIES[1, 1], _TIES[1, 0], 0.0],
    ]
)
"""Carries a row x to the vector product of x and the weights of y."""


class PlacedGroup(NamedTuple):
    """A point group and where its standard frame lies."""

    group: PointGroup
    """The class in its standard setting."""
    frame: NDArray[np.float64]
    """Shape (3, 3), read-only: rows are unit x, y, z of the standard frame in the lattice's Cartesian axes."""
    cell: NDArray[np.float64]
    """Shape (3, 3): the lattice with exactly the metric that the group demands, stretched but not turned."""


@dataclass(frozen=True, slots=True, eq=False)
class _Preparation:
    """The part that depends on the rotations alone."""

    group: PointGroup
    average: NDArray[np.float64]
    """Shape (9, 9): carries a metric to its mean over the group."""
    axes: str
    """Which axes the candidates give: "", "y", "z" or "xz"."""
    first: NDArray[np.float64]
    """Shape (m, 3): lattice components of x (or of the single axis)."""
    second: NDArray[np.float64]
    """Shape (m, 3): lattice components of z."""


def placed_group(rotations: NDArray[np.intc], lattice: NDArray[np.float64]) -> PlacedGroup:
    """Return the class of a group of rotations and its standard frame, right-handed and as close to the axes as it can.

    Several frames put the same standard group onto the crystal (a 4-fold class may be turned by 90 degrees, a class 4
    by any angle about z). The one closest to the Cartesian axes is taken: largest trace, so that the frame is the unit
    matrix or a renaming of the axes where that is possible.

    Parameters
    ----------
    rotations : ndarray of int, shape (n, 3, 3)
        Matrices that act on columns of fractional coordinates; repetitions are allowed.
    lattice : ndarray of shape (3, 3)
        Rows are the lattice vectors. A lattice that the rotations change slightly is symmetrised first: the mean metric
        with the least turn and stretch.

    Raises
    ------
    GroupSymbolError
        If the rotations form none of the 32 classes.

    Examples
    --------
    >>> quarter = np.array([np.linalg.matrix_power([[0, -1, 0], [1, 0, 0], [0, 0, 1]], n) for n in range(4)])
    >>> placed = placed_group(quarter, np.diag([3.0, 3.0, 5.0]))
    >>> placed.group.hermann_mauguin, placed.frame.tolist()
    ('4', [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]])
    """
    prepared = _prepared(np.ascontiguousarray(rotations, dtype=np.intc).tobytes())
    cell = _symmetrised(lattice, prepared.average)
    if prepared.axes == "":
        frame = np.eye(3)
    elif prepared.axes == "xz":
        frame = closest_frame(prepared.first @ cell, prepared.second @ cell)
    else:
        frame = _closest_turn(_unit(prepared.first[0] @ cell), "xyz".index(prepared.axes))
    frame += 0.0
    frame.setflags(write=False)
    return PlacedGroup(prepared.group, frame, cell)


@lru_cache(maxsize=4096)
def _prepared(rotations: bytes) -> _Preparation:
    matrices = np.frombuffer(rotations, dtype=np.intc).reshape(-1, 3, 3)
    found = frame_directions(frozenset(tuple(map(tuple, matrix)) for matrix in matrices.tolist()))
    # The mean of W^T G W; a rotation that a centred cell lists several times is listed as often as every other one.
    average = np.einsum("nki,nlj->ijkl", matrices, matrices).reshape(9, 9) / len(matrices)
    axes = "".join(name for name, direction in zip("xyz", found.candidates[0], strict=True) if direction is not None)
    candidates = [[direction for direction in candidate if direction is not None] for candidate in found.candidates]
    if axes == "xz":
        senses = np.array(list(product((1.0, -1.0), repeat=2)))
        table = np.array(candidates, dtype=float)[:, None, :, :] * senses[None, :, :, None]
    else:
        table = np.array(candidates[:1], dtype=float)
    table = table.reshape(-1, max(len(axes), 1), 3)
    group = standard_point_group(found.hermann_mauguin)
    return _Preparation(group, average, axes, table[:, 0], table[:, -1])


def _symmetrised(lattice: NDArray[np.float64], average: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the lattice that has the mean metric, stretched but not turned against the given one.

    Newton's method for ``B B^T = mean``: each step squares the deviation, and a symmetrical stretch turns nothing.
    """
    for _ in range(_MOST_STEPS):
        metric = lattice @ lattice.T
        excess = (average @ metric.reshape(9)).reshape(3, 3) - metric
        deviation = float(abs(excess).max() / metric.max())
        if deviation <= EXACT:
            break
        lattice = lattice + 0.5 * excess @ np.linalg.inv(lattice).T
        if deviation * deviation <= EXACT:
            break
    return lattice


def closest_frame(x: NDArray[np.float64], z: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the frame closest to the unit matrix among candidates for x and z, each pair perpendicular.

    Parameters
    ----------
    x, z : ndarray of shape (n, 3)
        Directions of any length.

    Returns
    -------
    ndarray of shape (3, 3)
        Rows are unit x, y = z x x and z.
    """
    x = x / np.sqrt((x * x).sum(axis=1))[:, None]
    z = z / np.sqrt((z * z).sum(axis=1))[:, None]
    # The weight of y = z x x in the trace is a triple product, (z x x).t = z.(x x t): y is built for the best alone.
    closeness = x @ _TIES[0] + z @ _TIES[2] + ((x @ _CROSS_WITH_Y) * z).sum(axis=1)
    best = int(np.argmax(closeness))
    (a, b, c), (d, e, f) = x[best].tolist(), z[best].tolist()
    return np.array([[a, b, c], [e * c - f * b, f * a - d * c, d * b - e * a], [d, e, f]])


def _closest_turn(axis: NDArray[np.float64], place: int) -> NDArray[np.float64]:
    """Return the frame closest to the unit matrix among all whose row `place` lies along the axis, in either sense.

    The least turn that carries one unit vector onto another goes about their common normal.
    """
    aligned = float(axis[place])
    if aligned < -SQUARE or (aligned < SQUARE and float(axis @ _SENSES) < 0):
        axis, aligned = -axis, -aligned
    turn = np.zeros((3, 3))
    turn[place], turn[:, place] = axis, -axis
    turn[place, place] = 0.0
    return np.asarray(np.eye(3) + turn + turn @ turn / (1.0 + aligned))


def _unit(vector: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.asarray(vector / np.sqrt(vector @ vector))
