"""A molecule as a crystal: in an empty box that lies along the molecule's own axes, so that it hides no operation."""

from __future__ import annotations

from itertools import product
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike, NDArray

VACUUM = 20.0
"""Å around the molecule."""

LARGEST = 500
"""Largest number of atoms of a molecule."""

ALIKE = 0.02
"""Å. Distances that agree this well are taken as equal when the axes are looked for; symprec decides afterwards."""

AXES = "the Cartesian axes of the molecule's coordinates"

CRYSTALLOGRAPHIC = (1, 2, 3, 4, 6)
"""Orders that an operation of a crystal class can have."""


def molecule_in_box(places: ArrayLike, species: Sequence[str], source: str, what: str) -> StructureParts:
    """Return a molecule in an empty box, its centre in the middle.

    The box is hexagonal when the molecule has a single axis of order 3 or 6, cubic otherwise, and its edges lie along
    the axes and mirror normals of the molecule. Operations that no crystal class has (order 5, 7, 8, linear molecules)
    are lost, and a note says so.

    Parameters
    ----------
    places : array_like of shape (n, 3)
        Cartesian coordinates in Å.
    species : sequence of str
        What sits on each.
    source, what : str
        File, and format in words.

    Raises
    ------
    StructureError
        If there are no atoms or too many.

    Examples
    --------
    >>> water = molecule_in_box([[0, 0, 0], [0.76, 0.59, 0], [-0.76, 0.59, 0]], ["O", "H", "H"], "", "XYZ")
    >>> water.crystal("").point_group.hermann_mauguin
    'mm2'
    """
    coordinates = np.array(places, dtype=float).reshape(-1, 3)
    if not 1 <= len(coordinates) <= LARGEST or not np.isfinite(coordinates).all():
        msg = f"a molecule of {len(coordinates)} atoms, or with coordinates that are not finite"
        raise StructureError(msg, where=source or None, expected=f"1 to {LARGEST} atoms")
    centred = coordinates - coordinates.mean(axis=0)
    operations, is_linear = _operations(centred, species)
    frame, hexagonal = _box_directions(operations, centred)
    edge = 2.0 * float(np.linalg.norm(centred, axis=1).max()) + VACUUM
    cell = np.array([[1.0, 0, 0], [-0.5, np.sqrt(0.75), 0], [0, 0, 1]]) if hexagonal else np.eye(3)
    lattice = edge * cell @ frame
    orders = sorted({_order(operation) for operation in operations} - set(CRYSTALLOGRAPHIC))
    notes = ["a molecule in an empty box along its own axes: only the point group has a meaning"]
    if is_linear or orders:
        why = "an axis of infinite order" if is_linear else f"an operation of order {orders[-1]}"
        notes.append(f"the molecule has {why}, which no crystal class has: the class is the part that fits the box")
    return StructureParts(
        f"molecule ({what})", lattice, centred + lattice.sum(axis=0) / 2, species, cartesian=True, axes_words=AXES,
        notes=tuple(notes),
    )  # fmt: skip


def _operations(places: NDArray[np.float64], species: Sequence[str]) -> tuple[list[NDArray[np.float64]], bool]:
    """Return the orthogonal matrices that carry a centred molecule onto itself, and whether it is linear.

    Two atoms in different directions fix an operation up to the side of their plane; every pair of atoms that is alike
    is tried as their image. A linear molecule gets the two-fold turns that any box along it shares.
    """
    lengths = np.linalg.norm(places, axis=1)
    off_centre = [number for number in np.argsort(lengths, kind="stable").tolist() if lengths[number] > ALIKE]
    if not off_centre:
        return [np.eye(3)], True
    first = off_centre[0]
    across = [number for number in off_centre if np.linalg.norm(np.cross(places[first], places[number])) > ALIKE]
    if not across:
        return [np.eye(3), 2.0 * np.outer(places[first], places[first]) / lengths[first] ** 2 - np.eye(3)], True
    second = across[0]
    basis = np.array([places[first], places[second], np.cross(places[first], places[second])])
    found: list[NDArray[np.float64]] = []
    candidates = [_alike(number, lengths, species) for number in (first, second)]
    for one, other in product(*candidates):
        if abs(places[one] @ places[other] - places[first] @ places[second]) > ALIKE * (lengths[one] + lengths[other]):
            continue
        for side in (1.0, -1.0):
            image = np.array([places[one], places[other], side * np.cross(places[one], places[other])])
            left, _, right = np.linalg.svd(image.T @ np.linalg.inv(basis).T)
            if _keeps(left @ right, places, species):
                found.append(left @ right)
    return found, False


def _alike(number: int, lengths: NDArray[np.float64], species: Sequence[str]) -> list[int]:
    return [
        other
        for other, label in enumerate(species)
        if label == species[number] and abs(lengths[other] - lengths[number]) < ALIKE
    ]


def _keeps(operation: NDArray[np.float64], places: NDArray[np.float64], species: Sequence[str]) -> bool:
    labels = np.array(species)
    distance = np.linalg.norm((places @ operation.T)[:, None] - places[None], axis=2)
    distance[labels[:, None] != labels[None]] = np.inf
    return bool((distance.min(axis=1) < 3 * ALIKE).all())


def _box_directions(
    operations: Sequence[NDArray[np.float64]], places: NDArray[np.float64]
) -> tuple[NDArray[np.float64], bool]:
    """Return rows x, y, z of the box, and whether it is hexagonal."""
    axes: list[tuple[int, NDArray[np.float64]]] = []
    for operation in operations:
        proper = operation * np.sign(np.linalg.det(operation))
        order = _order(proper)
        if order > 1:
            axes.append((order, np.linalg.svd(proper - np.eye(3))[2][2]))
    axes.sort(key=lambda item: -item[0])
    threefold = [axis for order, axis in axes if order in (3, 6)]
    single = bool(threefold) and all(abs(axis @ threefold[0]) > 0.99 for axis in threefold)
    if threefold and not single:
        axes = [item for item in axes if item[0] in (2, 4)]
    elif single:
        axes = [item for item in axes if item[0] in (3, 6)] + [item for item in axes if item[0] == 2]
    if not axes:
        return np.eye(3), False
    z = axes[0][1]
    across = [axis for _, axis in axes if abs(axis @ z) < 0.01] or [np.eye(3)[int(np.argmin(np.abs(z)))], *places]
    x = across[0] - (across[0] @ z) * z
    x /= np.linalg.norm(x)
    return np.array([x, np.cross(z, x), z]), single


def _order(operation: NDArray[np.float64]) -> int:
    """Return the smallest power that gives the identity, at most 60."""
    power = operation
    for order in range(1, 60):
        if abs(power - np.eye(3)).max() < 0.05:
            return order
        power = power @ operation
    return 60
