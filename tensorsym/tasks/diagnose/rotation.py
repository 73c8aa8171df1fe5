"""The hypothesis of a free rotation: the axes, whatever they are, in which the numbers obey the class best.

The residual is minimised over all rotations by damped Gauss-Newton steps from many starts at once. A small turn
changes a tensor by the generators of rotations on each index, so no derivative is taken numerically.
"""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.tasks.diagnose.case import carried

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.tasks.diagnose.case import Case

STARTS = 64
STEPS = 24
KEPT_AFTER_FIRST_STEPS = 12
FIRST_STEPS = 6

_GENERATORS = np.array(
    [
        [[0.0, 0.0, 0.0], [0.0, 0.0, -1.0], [0.0, 1.0, 0.0]],
        [[0.0, 0.0, 1.0], [0.0, 0.0, 0.0], [-1.0, 0.0, 0.0]],
        [[0.0, -1.0, 0.0], [1.0, 0.0, 0.0], [0.0, 0.0, 0.0]],
    ]
)


def best_rotation(case: Case, values: NDArray[np.float64]) -> tuple[NDArray[np.float64], float]:
    """Return the axes in which the tensor obeys the class best, and the residual there.

    Returns
    -------
    turn : ndarray of shape (3, 3)
        Rows are the unit vectors of those axes in the standard frame: read in them, the tensor has the residual.
    residual : float
        Relative residual.
    """
    size = float(np.linalg.norm(values))
    turns = np.concatenate([case.turn.T[None] @ _spread_rotations(), case.turn.T[None]])
    costs = _costs(case, values, turns)
    damping = np.full(len(turns), 1e-2 * size * size)
    for step in range(STEPS):
        if step == FIRST_STEPS:
            best = np.argsort(costs)[:KEPT_AFTER_FIRST_STEPS]
            turns, costs, damping = turns[best], costs[best], damping[best]
        trial = _rotations(_steps(case, values, turns, damping)) @ turns
        trial_costs = _costs(case, values, trial)
        better = trial_costs < costs
        turns = np.where(better[:, None, None], trial, turns)
        costs = np.where(better, trial_costs, costs)
        damping = np.where(better, damping * 0.2, damping * 5.0)
    best_one = int(np.argmin(costs))
    return turns[best_one].T, float(np.sqrt(costs[best_one])) / size if size else 0.0


def _costs(case: Case, values: NDArray[np.float64], turns: NDArray[np.float64]) -> NDArray[np.float64]:
    outside = _outside(case, carried(values, turns))
    return np.asarray((outside**2).sum(axis=1))


def _outside(case: Case, tensors: NDArray[np.float64]) -> NDArray[np.float64]:
    return tensors - (tensors @ case.basis.T) @ case.basis


def _steps(
    case: Case, values: NDArray[np.float64], turns: NDArray[np.float64], damping: NDArray[np.float64]
) -> NDArray[np.float64]:
    """Return the damped Gauss-Newton step of every start, as rotation vectors, shape (n, 3)."""
    tensors = carried(values, turns)
    residuals = _outside(case, tensors)
    slopes = np.stack([_outside(case, _slope(tensors, generator, values.ndim)) for generator in _GENERATORS], axis=2)
    normal = slopes.transpose(0, 2, 1) @ slopes
    normal += damping[:, None, None] * np.eye(3)
    gradient = (slopes.transpose(0, 2, 1) @ residuals[:, :, None])[:, :, 0]
    return np.asarray(-np.linalg.solve(normal, gradient[:, :, None])[:, :, 0])


def _slope(tensors: NDArray[np.float64], generator: NDArray[np.float64], rank: int) -> NDArray[np.float64]:
    """Return how tensors change under a small turn: the generator on each index in turn, summed."""
    count = len(tensors)
    total = np.zeros_like(tensors)
    for place in range(rank):
        shaped = tensors.reshape(count, 3**place, 3, -1)
        total += np.einsum("ab,nlbr->nlar", generator, shaped).reshape(count, -1)
    return total


def _rotations(vectors: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the rotation matrices of rotation vectors (Rodrigues' formula), shape (n, 3, 3)."""
    angles = np.linalg.norm(vectors, axis=1)
    safe = np.where(angles > 1e-12, angles, 1.0)
    cross = np.einsum("na,aij->nij", vectors / safe[:, None], _GENERATORS)
    sine, cosine = np.sin(angles)[:, None, None], np.cos(angles)[:, None, None]
    return np.asarray(np.eye(3) + sine * cross + (1 - cosine) * (cross @ cross))


@lru_cache(maxsize=1)
def _spread_rotations() -> NDArray[np.float64]:
    """Return rotations spread evenly over all orientations, always the same ones."""
    generator = np.random.default_rng(20240229)
    quaternions = generator.normal(size=(STARTS, 4))
    w, x, y, z = (quaternions / np.linalg.norm(quaternions, axis=1)[:, None]).T
    return np.array(
        [
            [1 - 2 * (y * y + z * z), 2 * (x * y - z * w), 2 * (x * z + y * w)],
            [2 * (x * y + z * w), 1 - 2 * (x * x + z * z), 2 * (y * z - x * w)],
            [2 * (x * z - y * w), 2 * (y * z + x * w), 1 - 2 * (x * x + y * y)],
        ]
    ).transpose(2, 0, 1)
