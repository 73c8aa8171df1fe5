"""A second road to every group and invariant, in floating point: turns by Rodrigues' formula, groups by multiplication.

Nothing here uses the package except the names of kinds: index permutations, parity and time behaviour.
"""

from __future__ import annotations

from functools import lru_cache
from pathlib import Path

import numpy as np

HALF, TALL = 0.5, 3**0.5 / 2
DIRECTIONS = {
    "x": (1.0, 0.0, 0.0),
    "y": (0.0, 1.0, 0.0),
    "z": (0.0, 0.0, 1.0),
    "xy": (1.0, 1.0, 0.0),
    "xyz": (1.0, 1.0, 1.0),
    "h": (TALL, HALF, 0.0),
    "k": (HALF, TALL, 0.0),
}
SAME = 1e-9


def turn(order, direction):
    """Return the matrix of a turn by 360/order degrees about a direction (Rodrigues)."""
    x, y, z = np.array(direction) / np.linalg.norm(direction)
    cross = np.array([[0.0, -z, y], [z, 0.0, -x], [-y, x, 0.0]])
    angle = 2 * np.pi / order
    return np.eye(3) + np.sin(angle) * cross + (1 - np.cos(angle)) * cross @ cross


def element(text):
    """Return the matrix of an element such as ``-4:z``, ``m:x`` or ``-1``."""
    symbol, _, where = text.partition(":")
    if symbol == "-1":
        return -np.eye(3)
    if symbol == "m":
        return -turn(2, DIRECTIONS[where])
    sign = -1.0 if symbol.startswith("-") else 1.0
    return sign * turn(int(symbol.lstrip("-")), DIRECTIONS[where])


@lru_cache(maxsize=1)
def settings():
    """Return the generating elements of every setting, read from ``elements.txt``."""
    lines = (Path(__file__).parent / "elements.txt").read_text(encoding="utf-8").splitlines()
    return {line.split()[0]: tuple(line.split()[1:]) for line in lines if line and not line.startswith("#")}


@lru_cache(maxsize=64)
def float_group(setting):
    """Return every operation of a setting as Cartesian matrices, shape (order, 3, 3)."""
    generators = [element(text) for text in settings()[setting]]
    found = [np.eye(3)]
    for matrix in found:
        for generator in generators:
            image = generator @ matrix
            if all(np.abs(image - known).max() > SAME for known in found):
                found.append(image)
    return np.array(found)


def as_set(matrices):
    """Return matrices as a set of rounded tuples, to compare two lists in any order."""
    return {tuple((np.rint(np.asarray(matrix).ravel() * 1e6) + 0.0).tolist()) for matrix in matrices}


def moved(tensors, matrix):
    """Return a stack of tensors moved by a matrix, index by index, by `numpy.einsum`."""
    letters = "abcdefghij"[: tensors.ndim - 1]
    for letter in letters:
        tensors = np.einsum(f"Z{letter},z{letters}->z{letters.replace(letter, 'Z')}", matrix, tensors)
    return tensors


def with_parity(matrix, kind):
    """Return the sign that an operation adds on a pseudotensor."""
    return -1.0 if kind.axial and np.linalg.det(matrix) < 0 else 1.0


@lru_cache(maxsize=256)
def index_symmetric_basis(kind):
    """Return an orthonormal basis of all tensors with the index symmetry of a kind, shape (n, 3, .., 3)."""
    rank, size = kind.rank, 3**kind.rank
    every = np.eye(size).reshape((size, *(3,) * rank))
    average = np.zeros_like(every)
    for permutation, sign in kind.index_group:
        average += sign * every.transpose(0, *(1 + place for place in permutation))
    average = average.reshape(size, size) / len(kind.index_group)
    if kind.traceless:
        trace = np.eye(3).reshape(9)
        average = average - np.outer(trace, trace) / 3
        values, vectors = np.linalg.eigh(average)
        return vectors[:, values > HALF].T.reshape(-1, 3, 3)
    # Orbits of index words share no component: one row of the average stands for each.
    kept = {}
    for row in average[np.abs(average).max(axis=1) > SAME]:
        kept.setdefault(int(np.flatnonzero(np.abs(row) > SAME)[0]), row / np.linalg.norm(row))
    return np.array(list(kept.values())).reshape(-1, *(3,) * rank)


@lru_cache(maxsize=256)
def tensor_average(setting, rank, axial):
    """Return the average over a group of the Kronecker power ``R x R x ...``, shape (3**rank, 3**rank)."""
    matrices = float_group(setting)
    signs = np.rint(np.linalg.det(matrices)) if axial else np.ones(len(matrices))
    left, right = (_powers(matrices, part) for part in (rank // 2, rank - rank // 2))
    mean = np.einsum("gij,gkl->ikjl", left * signs[:, None, None] / len(matrices), right, optimize=True)
    return mean.reshape(3**rank, 3**rank)


def _powers(matrices, rank):
    powers = np.ones((len(matrices), 1, 1))
    for _ in range(rank):
        size = 3 * powers.shape[1]
        powers = np.einsum("gij,gkl->gikjl", powers, matrices).reshape(-1, size, size)
    return powers


def float_projector(setting, kind):
    """Return the orthogonal projector onto the invariants of a kind, shape (3**rank, 3**rank)."""
    flat = index_symmetric_basis(kind).reshape(-1, 3**kind.rank)
    return flat.T @ flat @ tensor_average(setting, kind.rank, kind.axial)


def float_count(setting, kind):
    """Return the number of invariants as the rank of the averaged representation, whose eigenvalues are 0 and 1."""
    flat = index_symmetric_basis(kind).reshape(-1, 3**kind.rank)
    average = flat @ tensor_average(setting, kind.rank, kind.axial) @ flat.T
    return int(np.sum(np.linalg.eigvalsh(average) > HALF))
