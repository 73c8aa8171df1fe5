"""The same invariants in other axes: exact where the axes only rename x, y, z, numerical elsewhere.

The dimension always comes from the exact space; in general axes the elimination only chooses which components are named
independent, so no tolerance decides how many there are.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from tensorsym.errors import UsageError
from tensorsym.groups.operations import Basis
from tensorsym.invariants.solver import eliminated_blocks
from tensorsym.invariants.space import Block, InvariantSpace, spread_components
from tensorsym.tensors.axes import turned
from tensorsym.tensors.words import components_of, indices_of, word_of

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

SNAP = 1e-4
"""Axes this close (largest matrix entry) to a renaming of x, y, z are treated as one; 1e-4 is 0.006 degrees."""

NEGLIGIBLE = 1e-6
"""Coefficients below this are rounding, of the lattice as printed too, and stand for zero."""

SignedAxes = tuple[tuple[int, int], tuple[int, int], tuple[int, int]]
"""For each new axis: the standard axis it lies along and the sense, 1 or -1."""


def space_in_axes(space: InvariantSpace, matrix: NDArray[np.float64]) -> InvariantSpace:
    """Return a space with components along other axes.

    Parameters
    ----------
    space : InvariantSpace
        Invariants in the standard frame.
    matrix : ndarray of shape (3, 3)
        Rows are the new unit vectors x, y, z in the standard frame.

    Examples
    --------
    >>> import numpy as np
    >>> from tensorsym.groups.symbols import point_group_named
    >>> from tensorsym.invariants.solver import invariant_space
    >>> from tensorsym.tensors.law import parse_law
    >>> space = invariant_space(point_group_named("3m"), parse_law("P_i = d_ijk sigma_jk").kind)
    >>> space_in_axes(space, np.array([[0, 1, 0], [-1, 0, 0], [0, 0, 1]]))
    InvariantSpace(3m1, rank 3, dimension 4: 11 33 15 31)
    """
    signed = signed_axes(space, matrix)
    if signed is None:
        return replace(space, blocks=_numerical_blocks(space, matrix), turn=_as_tuple(matrix))
    if signed == ((0, 1), (1, 1), (2, 1)):
        return space
    exact = [[float(sense * (column == axis)) for column in range(3)] for axis, sense in signed]
    return replace(space, blocks=_renamed_blocks(space, signed), turn=_as_tuple(exact))


def signed_axes(space: InvariantSpace, matrix: NDArray[np.float64]) -> SignedAxes | None:
    """Return the renaming of x, y, z that the axes amount to for this group, or None.

    In the hexagonal basis the group looks the same from axes turned by 60 degrees about z, so those count too.
    """
    import numpy as np

    turns = range(6) if space.group.basis is Basis.HEXAGONAL else range(1)
    for number in turns:
        cosine, sine = np.cos(number * np.pi / 3), np.sin(number * np.pi / 3)
        candidate = matrix @ np.array([[cosine, -sine, 0.0], [sine, cosine, 0.0], [0.0, 0.0, 1.0]])
        whole = np.rint(candidate)
        if np.abs(candidate - whole).max() < SNAP:
            return tuple((int(np.flatnonzero(row)[0]), int(row.sum())) for row in whole)  # type: ignore[return-value]
    return None


def _renamed_blocks(space: InvariantSpace, signed: SignedAxes) -> tuple[Block, ...]:
    """Carry the integer basis over to the new names and choose the free components again."""
    components, rank = space.components, space.kind.rank
    new_number: dict[int, list[tuple[int, int]]] = {}
    for number, word in enumerate(components.words):
        renamed = [signed[index] for index in indices_of(word, rank)]
        old = word_of(axis for axis, _ in renamed)
        if components.of_word[old] >= 0:
            sign = components.sign[old]
            for _, sense in renamed:
                sign *= sense
            new_number.setdefault(components.of_word[old], []).append((number, sign))
    vectors = []
    for block in space.blocks:
        for row in block.rows:
            vector = {}
            for old, entry in zip(block.components, row, strict=True):
                for number, sign in new_number[old]:
                    vector[number] = sign * int(entry)
            vectors.append({number: entry for number, entry in vector.items() if entry})
    return eliminated_blocks(vectors)


def _numerical_blocks(space: InvariantSpace, matrix: NDArray[np.float64]) -> tuple[Block, ...]:
    import numpy as np

    if not space.dimension:
        return ()
    components = components_of(space.kind)
    full = np.stack([turned(tensor, matrix) for tensor in space.basis()]).reshape(space.dimension, -1)
    spread = spread_components(space.kind)
    rows = full @ spread / np.array(components.multiplicity)
    rows, pivots = _reduced(rows)
    if len(pivots) != space.dimension:
        msg = "the axes are too ill-conditioned to name independent components"
        raise UsageError(msg, hint="use axes that are perpendicular unit vectors")
    rows[np.abs(rows) < NEGLIGIBLE] = 0.0
    present = np.flatnonzero(np.any(rows != 0.0, axis=0))
    return (
        Block(
            tuple(int(number) for number in present),
            pivots,
            tuple(tuple(float(entry) for entry in row[present]) for row in rows),
        ),
    )


def _reduced(rows: NDArray[np.float64]) -> tuple[NDArray[np.float64], tuple[int, ...]]:
    """Return the reduced rows with the earliest usable columns as pivots; the number of rows is the known rank."""
    import numpy as np

    rows = np.linalg.qr(rows.T)[0].T
    pivots: list[int] = []
    for column in range(rows.shape[1]):
        level = len(pivots)
        if level == len(rows):
            break
        best = level + int(np.argmax(np.abs(rows[level:, column])))
        if abs(rows[best, column]) < 1e-6:
            continue
        rows[[level, best]] = rows[[best, level]]
        rows[level] /= rows[level, column]
        others = np.arange(len(rows)) != level
        rows[others] -= np.outer(rows[others, column], rows[level])
        pivots.append(column)
    return rows, tuple(pivots)


def _as_tuple(matrix: object) -> tuple[tuple[float, ...], ...]:
    return tuple(tuple(float(entry) for entry in row) for row in matrix)  # type: ignore[attr-defined]
