"""The cell that Miller indices refer to: the file's own when it is conventional, else the conventional one."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal

ANGLE = 0.1
"""Degrees. Angles of a cell this close to 90 or 120 are that."""

SMALLER = 0.999
"""A cell with less than this share of the conventional volume is not conventional."""


class ReferenceCell(NamedTuple):
    """The cell that Miller indices of a crystal refer to."""

    vectors: NDArray[np.float64]
    """Shape (3, 3): rows are a, b, c in Å and the file's Cartesian axes, with the metric that the class demands."""
    is_of_file: bool
    """True when it is the cell of the file."""
    is_hexagonal: bool
    """True when a and b are alike, at 120 degrees from each other and 90 from c: four indices have a meaning."""

    @property
    def words(self) -> str:
        """Which cell it is; empty for the file's own."""
        return "" if self.is_of_file else "indices of the conventional cell, which is not the file's"


def reference_cell(crystal: Crystal) -> ReferenceCell:
    """Return the file's own cell if its shape is that of a conventional one, else the standard conventional cell.

    A conventional cell is not smaller than the standard one and has the right angles (and the 120 degrees) of its
    system. An unusual setting, such as Pbnm, is conventional.
    """
    symmetry = crystal.symmetry
    standard = symmetry.standard_cell
    own = symmetry.symmetrised_cell if symmetry.cell_keeps_class else crystal.lattice
    ratio = abs(float(np.linalg.det(own) / np.linalg.det(standard)))
    if ratio > SMALLER and _has_shape(own, symmetry.group.system):
        return ReferenceCell(own, is_of_file=True, is_hexagonal=_is_hexagonal(own))
    return ReferenceCell(standard, is_of_file=False, is_hexagonal=_is_hexagonal(standard))


def angles_of(cell: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return alpha, beta, gamma in degrees.

    >>> angles_of(np.array([[1, 0, 0], [0, 1, 0], [1, 0, 1.0]])).round(3).tolist()
    [90.0, 45.0, 90.0]
    """
    unit = cell / np.linalg.norm(cell, axis=1)[:, None]
    cosines = np.array([unit[1] @ unit[2], unit[0] @ unit[2], unit[0] @ unit[1]])
    return np.asarray(np.degrees(np.arccos(np.clip(cosines, -1.0, 1.0))))


def _has_shape(cell: NDArray[np.float64], system: str) -> bool:
    right = int((np.abs(angles_of(cell) - 90.0) < ANGLE).sum())
    if system in ("trigonal", "hexagonal"):
        return _is_hexagonal(cell)
    return right >= {"triclinic": 0, "monoclinic": 2}.get(system, 3)


def _is_hexagonal(cell: NDArray[np.float64]) -> bool:
    lengths = np.linalg.norm(cell, axis=1)
    wanted = np.array([90.0, 90.0, 120.0])
    return bool((np.abs(angles_of(cell) - wanted) < ANGLE).all() and abs(lengths[0] / lengths[1] - 1.0) < 1e-3)
