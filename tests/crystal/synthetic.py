"""Crystals made for the tests: one of every class, with atoms in general positions, in any orientation and cell."""

from __future__ import annotations

import numpy as np

from tensorsym.crystal.crystal import Crystal
from tensorsym.groups.operations import Basis
from tensorsym.groups.point_group import standard_point_group, standard_point_groups

CLASSES = tuple(group.hermann_mauguin for group in standard_point_groups())

_LATTICES = {
    "triclinic": [[5.1, 0.3, 0.7], [-0.6, 6.2, 0.4], [0.2, -0.5, 7.3]],
    "monoclinic": [[5.1, 0.0, -0.9], [0.0, 6.2, 0.0], [0.0, 0.0, 7.3]],
    "orthorhombic": [[6.2, 0.0, 0.0], [0.0, 7.3, 0.0], [0.0, 0.0, 5.1]],
    "tetragonal": [[6.2, 0.0, 0.0], [0.0, 6.2, 0.0], [0.0, 0.0, 7.3]],
    "trigonal": [[6.2, 0.0, 0.0], [-3.1, 6.2 * 0.75**0.5, 0.0], [0.0, 0.0, 7.3]],
    "hexagonal": [[6.2, 0.0, 0.0], [-3.1, 6.2 * 0.75**0.5, 0.0], [0.0, 0.0, 7.3]],
    "cubic": [[9.2, 0.0, 0.0], [0.0, 9.2, 0.0], [0.0, 0.0, 9.2]],
}
"""Cells in the standard frame of a class; lengths and angles are invented."""

_PLACES = {"Xe": (0.137, 0.293, 0.421), "Kr": (0.332, 0.091, 0.174)}
"""General positions, invented; two of them, so that no accident adds a symmetry."""


def crystal_of_class(hermann_mauguin, turn=None, basis=None, noise=0.0, **fields):
    """Return a crystal of a class.

    `turn` is an orthogonal matrix of determinant 1 that carries the standard frame to the crystal's place, `basis` a
    whole-numbered matrix whose rows are the new cell vectors, `noise` the size in Å of random displacements and of
    random changes of the lattice.
    """
    group = standard_point_group(hermann_mauguin)
    lattice = np.array(_LATTICES[group.system])
    positions, species = [], []
    for label, place in _PLACES.items():
        for operation in group.operations:
            positions.append(np.array(operation.matrix) @ place)
            species.append(label)
    positions = np.array(positions)
    if turn is not None:
        lattice = lattice @ np.array(turn).T
    if basis is not None:
        positions = positions @ np.linalg.inv(basis)
        lattice = np.array(basis) @ lattice
    random = np.random.default_rng(20240501)
    lattice = lattice + noise * random.uniform(-1, 1, (3, 3))
    positions = positions + noise / 10.0 * random.uniform(-1, 1, positions.shape)
    return Crystal(lattice, positions, tuple(species), **fields)


def random_turn(seed):
    """Return a random orthogonal matrix of determinant 1."""
    matrix, _ = np.linalg.qr(np.random.default_rng(seed).normal(size=(3, 3)))
    return matrix * np.linalg.det(matrix)


def matrices_of_class(hermann_mauguin, frame):
    """Return the operations of a class whose standard axes are the rows of a frame, as Cartesian matrices."""
    operations = standard_point_group(hermann_mauguin).operations
    return np.array([frame.T @ operation.cartesian() @ frame for operation in operations])


def largest_gap(some, others):
    """Return how far the worst of some matrices is from its nearest among others, and the other way round."""
    gaps = np.abs(some[:, None] - others[None]).max(axis=(2, 3))
    return max(gaps.min(axis=0).max(), gaps.min(axis=1).max())


def is_hexagonal(hermann_mauguin):
    """Tell whether a class has hexagonal axes."""
    return standard_point_group(hermann_mauguin).basis is Basis.HEXAGONAL
