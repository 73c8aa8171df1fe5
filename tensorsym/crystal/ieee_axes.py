"""The axes of IEEE Std 176-1987, section 3.2, for a crystal.

Source: IEEE Standard on Piezoelectricity, ANSI/IEEE Std 176-1987, sections 3.2.1 to 3.2.6, from memory.

triclinic: the three shortest vectors, c < a < b, alpha and beta obtuse; z along c, y normal to (010).
monoclinic: b along the two-fold axis or mirror normal; a and c the shortest vectors normal to it, c < a, beta obtuse;
y along b, z along c.
orthorhombic: c < a < b; x, y, z along a, b, c; in mm2 c is the polar axis whatever its length, and a < b.
tetragonal: z along c, x along a; in -42m a lies along the two-fold axis.
trigonal and hexagonal: z along c, x along a; a lies along a two-fold axis or normal to a mirror, of which the smallest
cell decides where both are there twice; without either it is that of the smallest cell.
cubic: x, y, z along a, b, c.

The standard fixes the senses of some axes by the signs of piezoelectric constants, which a structure does not tell:
of the senses left open, those closest to the file's axes are taken.
"""

from __future__ import annotations

from itertools import product
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.frame import closest_frame

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from tensorsym.crystal.symmetry import CrystalSymmetry

SENSES_OPEN = (
    "senses that IEEE 176 takes from the signs of piezoelectric constants are not known from a structure: "
    "those closest to the file's axes are taken"
)

_BY_ELEMENTS = ("-42m", "32", "3m", "-3m", "-62m")
"""Classes whose x is given by their elements, as in the standard frame of the class."""

_MOST_STEPS = 1000


def ieee_matrix(symmetry: CrystalSymmetry) -> NDArray[np.float64]:
    """Return the axes of IEEE Std 176-1987: rows are unit x, y, z in the file's Cartesian axes, shape (3, 3)."""
    group, frame = symmetry.group, symmetry.frame
    cell = symmetry.standard_cell
    if group.system == "triclinic":
        return _triclinic(cell)
    if group.system == "monoclinic":
        return _monoclinic(frame[1], cell)
    if group.system == "cubic" or group.hermann_mauguin in _BY_ELEMENTS:
        return frame
    if group.system == "orthorhombic":
        return _orthorhombic(cell, frame[2] if group.hermann_mauguin == "mm2" else None)
    a, b, c = cell
    edges = [a, b] if group.system == "tetragonal" else [a, b, a + b]
    return _closest(edges, [c])


def _triclinic(cell: NDArray[np.float64]) -> NDArray[np.float64]:
    c, a, b = cell[np.argsort(np.linalg.norm(cell, axis=1), kind="stable")]
    a = -a if a @ c > 0 else a
    b = -b if b @ c > 0 else b
    if np.linalg.det([a, b, c]) < 0:
        a, b, c = -a, -b, -c
    return _from_y_and_z(np.cross(c, a), c)


def _monoclinic(unique: NDArray[np.float64], cell: NDArray[np.float64]) -> NDArray[np.float64]:
    across = [vector for vector in cell if abs(vector @ unique) < 0.01 * np.linalg.norm(vector)]
    c, a = shortest_pair(across[0], across[1])
    a = -a if a @ c > 0 else a
    frames = []
    for sense in (1.0, -1.0):
        z, y = sense * c, unique
        y = -y if np.cross(y, z) @ (sense * a) < 0 else y
        frames.append(_from_y_and_z(y, z))
    return max(frames, key=lambda rows: float(np.trace(rows)))


def _orthorhombic(cell: NDArray[np.float64], polar: NDArray[np.float64] | None) -> NDArray[np.float64]:
    by_length = sorted(cell, key=lambda vector: float(np.linalg.norm(vector)))
    if polar is not None:
        by_length.sort(key=lambda vector: abs(vector @ polar) < 0.5 * np.linalg.norm(vector))
    c, a, _ = by_length
    return _closest([a], [c])


def shortest_pair(
    one: NDArray[np.float64], other: NDArray[np.float64]
) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return the two shortest vectors that span the same plane lattice, the shorter first (Gauss's reduction)."""
    short, long = sorted((one, other), key=lambda vector: float(vector @ vector))
    for _ in range(_MOST_STEPS):
        long = long - np.rint((long @ short) / (short @ short)) * short
        if long @ long >= (short @ short) * (1.0 - 1e-9):
            break
        short, long = long, short
    return short, long


def _closest(x: Sequence[NDArray[np.float64]], z: Sequence[NDArray[np.float64]]) -> NDArray[np.float64]:
    pairs = [(sense * one, turn * other) for one, other in product(x, z) for sense, turn in product((1, -1), repeat=2)]
    return closest_frame(np.array([pair[0] for pair in pairs]), np.array([pair[1] for pair in pairs]))


def _from_y_and_z(y: NDArray[np.float64], z: NDArray[np.float64]) -> NDArray[np.float64]:
    y, z = y / np.linalg.norm(y), z / np.linalg.norm(z)
    return np.array([np.cross(y, z), y, z])
