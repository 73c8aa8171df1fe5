"""The Cartesian axes of the standard setting of International Tables for Crystallography, vol. A, for a crystal.

The Tables fix cells, not Cartesian axes. Ours lie in the standard cell as in every CIF we read: c along z, a in the xz
plane, b completing a right-handed set; so x, y, z lie along a, b, c wherever the cell has right angles.
"""

from __future__ import annotations

from functools import lru_cache
from itertools import product
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.symmetry import CrystalSymmetry

WORDS = "the cell of the standard setting with c along z and a in the xz plane"

SAME_METRIC = 1e-6
"""Relative. A change of the cell that keeps its metric this well is a turn of the cell onto itself."""

_GRID = 24
"""Translations of space-group operations are multiples of 1/24 in a standard setting."""


def international_matrix(symmetry: CrystalSymmetry) -> NDArray[np.float64]:
    """Return the axes of the standard setting: rows are unit x, y, z in the file's Cartesian axes, shape (3, 3).

    Several cells show the same standard setting: that of I-42d and the same turned by 180 degrees about [110], say.
    The one with axes closest to the file's is taken, so that a file in the standard setting keeps its axes.
    """
    cell = symmetry.standard_cell
    frames = [c_along_z(turn.T @ cell) for turn in _turns_of_setting(symmetry, cell)]
    traces = [float(np.trace(frame)) for frame in frames]
    return frames[int(np.argmax(np.array(traces) > max(traces) - 1e-6))]


def c_along_z(cell: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the axes with c along z and a in the xz plane, as rows, for a right-handed cell with rows a, b, c."""
    z = cell[2] / np.linalg.norm(cell[2])
    y = np.cross(cell[2], cell[0])
    y /= np.linalg.norm(y)
    return np.array([np.cross(y, z), y, z])


def _turns_of_setting(symmetry: CrystalSymmetry, cell: NDArray[np.float64]) -> list[NDArray[np.float64]]:
    """Return the changes of the standard cell by proper turns after which the operations read the same."""
    metric = cell @ cell.T
    turns = _proper_turns()
    kept = np.abs(turns.transpose(0, 2, 1) @ metric @ turns - metric).max(axis=(1, 2)) < SAME_METRIC * metric.max()
    change = symmetry.to_standard if symmetry.cell_keeps_class else np.eye(3)
    rotations = np.rint(change @ symmetry.rotations @ np.linalg.inv(change))
    translations = symmetry.translations @ change.T
    wanted = _reading(rotations, translations)
    backs = np.rint(np.linalg.inv(turns[kept]))
    return [
        turn
        for turn, back in zip(turns[kept], backs, strict=True)
        if _reading(back @ rotations @ turn, translations @ back.T) == wanted
    ]


def _reading(rotations: NDArray[np.float64], translations: NDArray[np.float64]) -> bytes:
    """Return operations in a form that can be compared whatever the origin is.

    Where a covector q is kept by W, q.w modulo 1 does not depend on the origin: it tells screws, glides, centring.
    """
    kept = (_COVECTORS @ rotations == _COVECTORS).all(axis=2)
    told = np.where(kept, np.rint(_GRID * (translations @ _COVECTORS.T)) % _GRID, -1.0)
    rows = np.concatenate([np.rint(rotations).reshape(len(rotations), 9), told], axis=1).astype(np.int64)
    return np.unique(rows, axis=0).tobytes()


@lru_cache(maxsize=1)
def _proper_turns() -> NDArray[np.float64]:
    """Return all matrices of determinant 1 with entries -1, 0 and 1, shape (n, 3, 3), the identity first."""
    matrices = np.array(list(product((0.0, 1.0, -1.0), repeat=9))).reshape(-1, 3, 3)
    matrices = matrices[np.abs(np.linalg.det(matrices) - 1.0) < 0.5]
    return np.asarray(matrices[np.argsort(np.abs(matrices - np.eye(3)).sum(axis=(1, 2)), kind="stable")])


_COVECTORS = np.array(list(product((0.0, 1.0, -1.0), repeat=3)))
"""Whole-numbered covectors, shape (27, 3): enough to span those that any operation keeps in a standard cell."""
