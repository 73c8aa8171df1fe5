"""The axes that a tensor may be in when it is not in those it claims: conventions of standards, readers and codes."""

from __future__ import annotations

from functools import partial
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.axes import axes_for, words_for
from tensorsym.tensors.axes import Axes, read_only

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal

SAME = 1e-3
"""Axes closer than this (largest matrix entry) are not tried twice."""


def named_axes(crystal: Crystal) -> list[Axes]:
    """Return the axes to try, the structure's own first, no two alike.

    Beside the file's axes: IEEE 176, International Tables, the two conventions by which readers of CIF files place a
    cell given by lengths and angles (a along x with b in the xy plane; c along z with a in the xz plane), both for the
    cell of the file and for the standard cell.
    """
    lattice = crystal.lattice
    candidates = [_told_shortly(axes_for(crystal, name), crystal) for name in ("file", "ieee", "international")]
    for name, matrix in (("a along x, b in xy", _a_along_x(lattice)), ("c along z, a in xz", _c_along_z(lattice))):
        candidates.append(Axes(name, read_only(matrix), partial(words_for, matrix, crystal)))
    kept: list[Axes] = []
    for axes in candidates:
        if all(np.abs(axes.matrix - other.matrix).max() > SAME for other in kept):
            kept.append(axes)
    return kept


def _told_shortly(axes: Axes, crystal: Crystal) -> Axes:
    """Return the axes told by crystal directions alone, found only when read."""
    return Axes(axes.name, axes.matrix, partial(words_for, axes.matrix, crystal))


def _a_along_x(lattice: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the axes with x along a and b in the xy plane, as rows."""
    x = _unit(lattice[0])
    z = _unit(np.cross(lattice[0], lattice[1]))
    return np.array([x, np.cross(z, x), z])


def _c_along_z(lattice: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the axes with z along c and a in the xz plane, as rows."""
    z = _unit(lattice[2])
    y = _unit(np.cross(lattice[2], lattice[0]))
    return np.array([np.cross(y, z), y, z])


def _unit(vector: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.asarray(vector / np.linalg.norm(vector))
