"""Axes told in crystal directions: ``x along [100], z along [001], y = z x x``."""

from __future__ import annotations

from itertools import product
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.reference_cell import reference_cell

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray

    from tensorsym.crystal.crystal import Crystal

ALIGNED = 0.05
"""Degrees. Directions closer than this are told as parallel."""

LARGEST_INDEX = 3
"""Largest index of a direction by which axes are told."""


def words_for(matrix: ArrayLike, crystal: Crystal) -> str:
    """Return axes in directions of a crystal.

    Parameters
    ----------
    matrix : array_like of shape (3, 3)
        Rows are unit x, y, z in the file's Cartesian axes.
    crystal : Crystal
        The structure; indices refer to `tensorsym.crystal.reference_cell.reference_cell`.

    Examples
    --------
    >>> from tensorsym.crystal.crystal import Crystal
    >>> words_for(np.eye(3), Crystal(np.diag([3.0, 4.0, 5.0]), np.zeros((1, 3)), ("Po",)))
    'x along [100], y along [010], z along [001]'
    """
    cell = reference_cell(crystal)
    told = words_in_cell(np.asarray(matrix, dtype=float), cell.vectors)
    return f"{told}; {cell.words}" if cell.words else told


def words_in_cell(matrix: NDArray[np.float64], cell: NDArray[np.float64]) -> str:
    """Return axes in directions of a cell with rows a, b, c; y is left to the others where it is no edge."""
    x, y, z = (_direction_in_words(axis, cell) for axis in matrix)
    if y.startswith("along") and max(abs(int(index)) for index in _indices_in(y)) == 1:
        return f"x {x}, y {y}, z {z}"
    exact = "from" not in x + z
    return f"x {x}, z {z}, y = z x x" if exact else f"x {x}, y {y}, z {z}"


def index_text(indices: ArrayLike) -> str:
    """Return indices without blanks, ``1-10``."""
    return "".join(str(int(index)) for index in np.asarray(indices))


def _direction_in_words(axis: NDArray[np.float64], cell: NDArray[np.float64]) -> str:
    """Return ``along [uvw]``, ``perpendicular to (hkl)``, or the angle from the nearest simple direction."""
    along = _angles(axis, _SHORT_FIRST @ cell)
    if along.min() < ALIGNED:
        return f"along [{index_text(_SHORT_FIRST[np.argmax(along < ALIGNED)])}]"
    normal = _angles(axis, _SHORT_FIRST @ np.linalg.inv(cell).T)
    if normal.min() < ALIGNED:
        return f"perpendicular to ({index_text(_SHORT_FIRST[np.argmax(normal < ALIGNED)])})"
    nearest = int(np.argmin(along[:_SIMPLE]))
    return f"{along[nearest]:.1f} degrees from [{index_text(_SHORT_FIRST[nearest])}]"


def _indices_in(words: str) -> list[str]:
    inside = words[words.index("[") + 1 : words.index("]")]
    return [digit for digit in inside if digit.isdigit()]


def _angles(one: NDArray[np.float64], others: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the angles between a vector and the rows of a matrix, in degrees, precise also near zero."""
    across = np.linalg.norm(np.cross(one, others), axis=1)
    return np.asarray(np.degrees(np.arctan2(across, others @ one)))


_SHORT_FIRST = np.array(
    sorted(
        (
            indices
            for indices in product(range(-LARGEST_INDEX, LARGEST_INDEX + 1), repeat=3)
            if np.gcd.reduce(indices) == 1
        ),
        key=lambda indices: (max(map(abs, indices)) > 1, sum(map(abs, indices)), [-index for index in indices]),
    )
)
"""Directions by which axes are told, shape (n, 3): those with indices 0 and 1 first, then by the sum of their sizes."""

_SIMPLE = 26
"""Number of directions whose indices are no larger than 1."""
