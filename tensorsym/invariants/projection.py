"""Projection of numbers onto the invariants, by the orthogonal projector onto the exact basis."""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING

from tensorsym.invariants.solver import invariant_space

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from tensorsym.groups.point_group import PointGroup
    from tensorsym.tensors.kind import TensorKind


@lru_cache(maxsize=2048)
def orthonormal_basis(group: PointGroup, kind: TensorKind) -> NDArray[np.float64]:
    """Return an orthonormal basis of the invariants, shape (dimension, 3**rank), read-only, in the standard frame.

    Its number of rows comes from the exact solver; only the directions are floating.
    """
    import numpy as np

    space = invariant_space(group, kind)
    rows = space.basis().reshape(space.dimension, 3**kind.rank)
    basis = np.ascontiguousarray(np.linalg.qr(rows.T)[0].T) if space.dimension else rows
    basis.setflags(write=False)
    return basis


def projected(values: NDArray[np.float64], basis: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the allowed tensor closest to the given one: ``B (B^T B)^-1 B^T T``, equal to ``(1/|G|) sum of g T``.

    Parameters
    ----------
    values : ndarray of shape (3,) * rank
        Components in the standard frame.
    basis : ndarray of shape (dimension, 3**rank)
        Orthonormal invariants from `orthonormal_basis`.
    """
    return ((basis @ values.reshape(-1)) @ basis).reshape(values.shape)
