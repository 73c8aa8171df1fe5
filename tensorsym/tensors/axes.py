"""Axes as part of every number, and the change from one set of axes to another."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from tensorsym.errors import AxesError

if TYPE_CHECKING:
    from collections.abc import Callable

    import numpy as np
    from numpy.typing import ArrayLike, NDArray

TOLERANCE = 1e-6
"""How far a matrix of axes may be from orthogonal before it is refused; within it, it is made orthogonal."""


@dataclass(frozen=True, slots=True, eq=False)
class Axes:
    """Right-handed Cartesian axes, seen from reference axes.

    Reference axes are the Cartesian axes of the structure file, or the standard frame for a group given by its symbol.
    """

    name: str
    """``file``, ``standard``, ``ieee``, ``international`` or the text they were asked with."""
    matrix: NDArray[np.float64]
    """Shape (3, 3), read-only; rows are unit vectors x, y, z of these axes in the reference axes."""
    told: str | Callable[[], str]
    """The axes in crystal directions, or what finds the words when they are first read."""

    @property
    def words(self) -> str:
        """The axes in crystal directions, such as ``x along [100], z along [001], y = z x x``."""
        return self.told if isinstance(self.told, str) else self.told()

    def __repr__(self) -> str:
        """Return the name and the words."""
        return f"Axes({self.name}: {self.words})"


def axes_from_matrix(name: str, matrix: ArrayLike, words: str) -> Axes:
    """Return axes whose x, y, z are the rows of a matrix.

    Raises
    ------
    AxesError
        If the rows are not perpendicular unit vectors within `TOLERANCE`, or are left-handed.
    """
    import numpy as np

    try:
        given = np.array(matrix, dtype=float)
    except (TypeError, ValueError) as error:
        msg = "axes are given by a 3x3 matrix of numbers"
        raise AxesError(msg) from error
    if given.shape != (3, 3) or not np.isfinite(given).all():
        msg = f"a matrix of shape {given.shape} gives no axes"
        raise AxesError(msg, expected="3 rows of 3 finite numbers, the unit vectors x, y, z")
    deviation = float(np.abs(given @ given.T - np.eye(3)).max())
    if deviation > TOLERANCE:
        msg = f"the rows of the matrix of axes are not perpendicular unit vectors (off by {deviation:.1e})"
        raise AxesError(msg, expected=f"orthogonal within {TOLERANCE:g}", hint="give more digits")
    if np.linalg.det(given) < 0:
        msg = "the matrix of axes is left-handed"
        raise AxesError(msg, hint="reverse one row")
    left, _, right = np.linalg.svd(given)
    return Axes(name, read_only(left @ right), words)


def turned(values: NDArray[np.float64], matrix: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return a tensor's components in other axes, ``T'_ij.. = m_ia m_jb .. T_ab..``.

    Parameters
    ----------
    values : ndarray of shape (3,) * rank
        Components in the old axes.
    matrix : ndarray of shape (3, 3)
        Rows are the new unit vectors in the old axes.

    Examples
    --------
    >>> import numpy as np
    >>> quarter = np.array([[0.0, 1.0, 0.0], [-1.0, 0.0, 0.0], [0.0, 0.0, 1.0]])
    >>> turned(np.array([1.0, 0.0, 0.0]), quarter)
    array([ 0., -1.,  0.])
    """
    shape, transposed = values.shape, matrix.T
    for _ in shape:
        values = values.reshape(3, -1).T @ transposed
    return values.reshape(shape)


def read_only(array: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return a C-ordered copy that cannot be written to, negative zeros made positive."""
    import numpy as np

    copy = np.array(array, dtype=float, order="C") + 0.0
    copy.setflags(write=False)
    return copy
