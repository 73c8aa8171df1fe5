"""What a structure must fulfil before anything is asked of it, told in one line when it does not."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

import numpy as np

from tensorsym.crystal.pairs import pairs_within, plane_distances
from tensorsym.errors import StructureError, UsageError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike, NDArray

MOST_ATOMS = 100_000
"""Largest number of atoms in a cell."""

TOO_CLOSE = 0.1
"""Å. No two atoms of a crystal are this close; such a pair is one site listed twice or a wrong unit."""

SAME_PLACE = 1e-3
"""Å. Atoms of one species this close are the same atom listed twice."""

THINNEST_CELL = 2.5 * TOO_CLOSE
"""Å. A cell whose lattice planes are closer than this has no volume to speak of."""

LONGEST_EDGE = 1e4
"""Å. A cell edge longer than this is in a wrong unit."""


def checked_lattice(values: ArrayLike, where: str | None) -> NDArray[np.float64]:
    """Return the lattice as a read-only array of shape (3, 3), rows a, b, c in Å.

    Raises
    ------
    StructureError
        If it is no such array, holds a number that is not finite, spans no volume, or is too large.
    """
    lattice = _finite(values, "lattice", where)
    if lattice.shape != (3, 3):
        msg = f"a lattice of shape {lattice.shape}"
        raise StructureError(msg, where=where, expected="three vectors of three components, in Å")
    volume = abs(float(np.linalg.det(lattice)))
    edges = np.linalg.norm(lattice, axis=1)
    if not volume > 1e-9 * float(edges.prod()) or float(plane_distances(lattice).min()) < THINNEST_CELL:
        msg = f"the lattice vectors span no proper cell: volume {volume:.3g} Å^3, edges {_listed(edges)} Å"
        raise StructureError(msg, where=where, hint="check the lattice vectors and their unit (Å)")
    if float(edges.max()) > LONGEST_EDGE:
        msg = f"cell edges of {_listed(edges)} Å"
        raise StructureError(msg, where=where, expected=f"at most {LONGEST_EDGE:g} Å", hint="check the unit")
    return lattice


def checked_positions(values: ArrayLike, species: Sequence[str], where: str | None) -> NDArray[np.float64]:
    """Return the fractional coordinates as a read-only array of shape (n, 3).

    Raises
    ------
    StructureError
        If there are none or too many, one is not finite, or their number is not that of the species.
    """
    positions = _finite(values, "positions", where)
    count = len(species)
    if not count:
        raise StructureError("the structure holds no atoms", where=where)
    if positions.shape != (count, 3):
        msg = f"positions of shape {positions.shape} for {count} species"
        raise StructureError(msg, where=where, expected=f"shape ({count}, 3), fractional coordinates")
    if count > MOST_ATOMS:
        msg = f"{count} atoms are too many"
        raise StructureError(msg, where=where, expected=f"at most {MOST_ATOMS}", hint="give the unit cell")
    return positions


def refuse_overlaps(
    lattice: NDArray[np.float64], positions: NDArray[np.float64], species: Sequence[str], where: str | None
) -> None:
    """Raise if two atoms share a place.

    Raises
    ------
    StructureError
        If two atoms are closer than `TOO_CLOSE`; the message names them.
    """
    pairs = pairs_within(positions, positions, lattice, TOO_CLOSE)
    clash = np.flatnonzero(pairs.first < pairs.second)
    if not clash.size:
        return
    worst = clash[np.argmin(pairs.distance[clash])]
    one, other, distance = int(pairs.first[worst]), int(pairs.second[worst]), float(pairs.distance[worst])
    if species[one] == species[other] and distance < SAME_PLACE:
        msg = f"atoms {one + 1} and {other + 1} are the same {species[one]} atom listed twice"
        raise StructureError(msg, where=where, hint="delete one of them")
    msg = f"atoms {one + 1} ({species[one]}) and {other + 1} ({species[other]}) overlap: {distance:.3g} Å apart"
    raise StructureError(
        msg, where=where, expected=f"at least {TOO_CLOSE} Å", hint="check the positions and the unit of the lattice"
    )


def checked_symprec(symprec: Any) -> float:
    """Return a tolerance in Å.

    Raises
    ------
    UsageError
        If it is not a positive finite number.
    """
    if not (isinstance(symprec, int | float | np.floating) and math.isfinite(symprec) and symprec > 0):
        msg = f"symprec {symprec!r} is no tolerance"
        raise UsageError(msg, expected="a positive distance in Å, such as 1e-3")
    return float(symprec)


def _finite(values: ArrayLike, what: str, where: str | None) -> NDArray[np.float64]:
    try:
        array = np.array(values, dtype=float, order="C")
    except (TypeError, ValueError) as error:
        msg = f"the {what} are no array of numbers ({error})"
        raise StructureError(msg, where=where) from error
    if not np.isfinite(array).all():
        place = ", ".join(str(index + 1) for index in np.argwhere(~np.isfinite(array))[0])
        msg = f"the {what} hold a number that is not finite, at ({place})"
        raise StructureError(msg, where=where)
    array.setflags(write=False)
    return array


def _listed(values: NDArray[np.float64]) -> str:
    return ", ".join(f"{value:.4g}" for value in values)
