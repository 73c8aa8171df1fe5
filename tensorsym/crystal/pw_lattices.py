"""The lattices that pw.x of Quantum ESPRESSO builds from ``ibrav`` and six numbers.

Source: the description of ``ibrav`` in INPUT_PW (from memory); the tests hold every lattice against the axes
that pw.x 6.7 prints.
"""

from __future__ import annotations

from math import sqrt
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from numpy.typing import NDArray

Rows = list[list[float]]


def lattice_of_index(ibrav: int, cell: Sequence[float], where: str) -> NDArray[np.float64]:
    """Return the lattice vectors as rows, in the unit of a.

    Parameters
    ----------
    ibrav : int
        Index of the Bravais lattice; 0 has no lattice of its own.
    cell : sequence of 6 numbers
        a, b/a, c/a and three cosines: those of celldm(4) to celldm(6).
    where : str
        File and line, for the message.

    Raises
    ------
    StructureError
        If there is no such index, or the cosines make no cell.

    Examples
    --------
    >>> lattice_of_index(2, (2.0, 1, 1, 0, 0, 0), "").tolist()
    [[-1.0, 0.0, 1.0], [0.0, 1.0, 1.0], [-1.0, 1.0, 0.0]]
    """
    if ibrav not in _LATTICES:
        msg = f"ibrav = {ibrav} is no lattice"
        raise StructureError(msg, where=where, expected=", ".join(str(index) for index in sorted(_LATTICES)))
    a, b, c, *cosines = cell
    try:
        rows = _LATTICES[ibrav](b, c, *cosines)
    except (ValueError, ZeroDivisionError) as error:
        msg = f"ibrav = {ibrav}: the cosines {', '.join(f'{cosine:g}' for cosine in cosines)} make no cell"
        raise StructureError(msg, where=where) from error
    return a * np.array(rows, dtype=float)


def cosines_in_order(ibrav: int, cos_ab: float, cos_ac: float, cos_bc: float) -> tuple[float, float, float]:
    """Return celldm(4) to celldm(6) for the cosines cosAB, cosAC, cosBC."""
    if ibrav in (0, 14):
        return cos_bc, cos_ac, cos_ab
    if ibrav in (-12, -13):
        return 0.0, cos_ac, 0.0
    return cos_ab, 0.0, 0.0


def _rhombohedral(c: float) -> Rows:
    x, y, z = sqrt((1 - c) / 2), sqrt((1 - c) / 6), sqrt((1 + 2 * c) / 3)
    return [[x, -y, z], [0, 2 * y, z], [-x, -y, z]]


def _rhombohedral_along_diagonal(c: float) -> Rows:
    y, z = sqrt((1 - c) / 6), sqrt((1 + 2 * c) / 3)
    u, v = (z - 2 * sqrt(2) * y) / sqrt(3), (z + sqrt(2) * y) / sqrt(3)
    return [[u, v, v], [v, u, v], [v, v, u]]


def _triclinic(b: float, c: float, alpha: float, beta: float, gamma: float) -> Rows:
    sine = sqrt(1 - gamma**2)
    height = sqrt(1 + 2 * alpha * beta * gamma - alpha**2 - beta**2 - gamma**2) / sine
    return [[1, 0, 0], [b * gamma, b * sine, 0], [c * beta, c * (alpha - beta * gamma) / sine, c * height]]


_LATTICES: dict[int, Callable[..., Rows]] = {
    1: lambda *_: [[1, 0, 0], [0, 1, 0], [0, 0, 1]],
    2: lambda *_: [[-0.5, 0, 0.5], [0, 0.5, 0.5], [-0.5, 0.5, 0]],
    3: lambda *_: [[0.5, 0.5, 0.5], [-0.5, 0.5, 0.5], [-0.5, -0.5, 0.5]],
    -3: lambda *_: [[-0.5, 0.5, 0.5], [0.5, -0.5, 0.5], [0.5, 0.5, -0.5]],
    4: lambda _b, c, *_: [[1, 0, 0], [-0.5, sqrt(3) / 2, 0], [0, 0, c]],
    5: lambda _b, _c, gamma, *_: _rhombohedral(gamma),
    -5: lambda _b, _c, gamma, *_: _rhombohedral_along_diagonal(gamma),
    6: lambda _b, c, *_: [[1, 0, 0], [0, 1, 0], [0, 0, c]],
    7: lambda _b, c, *_: [[0.5, -0.5, c / 2], [0.5, 0.5, c / 2], [-0.5, -0.5, c / 2]],
    8: lambda b, c, *_: [[1, 0, 0], [0, b, 0], [0, 0, c]],
    9: lambda b, c, *_: [[0.5, b / 2, 0], [-0.5, b / 2, 0], [0, 0, c]],
    -9: lambda b, c, *_: [[0.5, -b / 2, 0], [0.5, b / 2, 0], [0, 0, c]],
    91: lambda b, c, *_: [[1, 0, 0], [0, b / 2, -c / 2], [0, b / 2, c / 2]],
    10: lambda b, c, *_: [[0.5, 0, c / 2], [0.5, b / 2, 0], [0, b / 2, c / 2]],
    11: lambda b, c, *_: [[0.5, b / 2, c / 2], [-0.5, b / 2, c / 2], [-0.5, -b / 2, c / 2]],
    12: lambda b, c, gamma, *_: [[1, 0, 0], [b * gamma, b * sqrt(1 - gamma**2), 0], [0, 0, c]],
    -12: lambda b, c, _, beta, *__: [[1, 0, 0], [0, b, 0], [c * beta, 0, c * sqrt(1 - beta**2)]],
    13: lambda b, c, gamma, *_: [[0.5, 0, -c / 2], [b * gamma, b * sqrt(1 - gamma**2), 0], [0.5, 0, c / 2]],
    -13: lambda b, c, _, beta, *__: [[0.5, b / 2, 0], [-0.5, b / 2, 0], [c * beta, 0, c * sqrt(1 - beta**2)]],
    14: _triclinic,
}
"""Rows of the lattice in units of a, for b/a, c/a and celldm(4) to celldm(6)."""
