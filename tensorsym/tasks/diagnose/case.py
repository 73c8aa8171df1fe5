"""What every hypothesis works on: a tensor, the group it was held against, and fast residuals of altered readings."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.invariants.projection import orthonormal_basis
from tensorsym.tensors.words import components_of

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.tasks.check import TensorVerdict


@dataclass(frozen=True, eq=False)
class Case:
    """An inconsistent tensor and the arithmetic that all hypotheses share."""

    verdict: TensorVerdict
    """The verdict to be explained."""

    @property
    def values(self) -> NDArray[np.float64]:
        """The tensor as given, shape (3,) * rank, in its axes."""
        return self.verdict.values

    @property
    def turn(self) -> NDArray[np.float64]:
        """Rows are the tensor's axes in the standard frame."""
        return self.verdict.turn

    @cached_property
    def basis(self) -> NDArray[np.float64]:
        """Orthonormal invariants in the standard frame, shape (dimension, 3**rank)."""
        return orthonormal_basis(self.verdict.group, self.verdict.row.kind)

    @cached_property
    def constraints(self) -> int:
        """Number of independent conditions that the class sets on the components that the kind leaves."""
        return len(components_of(self.verdict.row.kind).words) - len(self.basis)

    @cached_property
    def floor(self) -> float:
        """Relative residual below which nothing can be told: the tensor's own noise, or rounding."""
        size = self.verdict.size
        own = self.verdict.threshold.absolute / size if size else 0.0
        return max(own, SMALLEST)

    def residual(self, values: NDArray[np.float64], turn: NDArray[np.float64]) -> float:
        """Return the relative residual of a tensor in axes whose rows in the standard frame are given."""
        return float(self.residuals(values, turn[None])[0])

    def residuals(self, values: NDArray[np.float64], turns: NDArray[np.float64]) -> NDArray[np.float64]:
        """Return the relative residuals of a tensor read in many axes, shape (n,).

        Parameters
        ----------
        values : ndarray of shape (3,) * rank
        turns : ndarray of shape (n, 3, 3)
            Rows of each are the unit vectors of the axes in the standard frame.
        """
        size = float(np.linalg.norm(values))
        if not size:
            return np.zeros(len(turns))
        standard = carried(values, turns.transpose(0, 2, 1))
        outside = standard - (standard @ self.basis.T) @ self.basis
        return np.asarray(np.linalg.norm(outside, axis=1) / size)


SMALLEST = 1e-7
"""Relative residuals below this are all alike to a diagnosis."""


def carried(values: NDArray[np.float64], matrices: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return a tensor turned by each of many matrices, shape (n, 3**rank).

    ``T'_ij.. = m_ia m_jb .. T_ab..`` for every matrix m of shape (n, 3, 3).
    """
    count, rank = len(matrices), values.ndim
    flat = np.broadcast_to(values.reshape(-1), (count, values.size))
    for _ in range(rank):
        # Turn the first index and put it last; after `rank` rounds the order is restored.
        flat = (flat.reshape(count, 3, -1).transpose(0, 2, 1) @ matrices.transpose(0, 2, 1)).reshape(count, -1)
    return flat
