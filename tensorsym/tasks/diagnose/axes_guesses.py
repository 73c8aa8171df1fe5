"""The hypothesis that the numbers are in other axes than stated: named ones, renamed ones, or any at all."""

from __future__ import annotations

from itertools import permutations, product
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.tasks.diagnose.explanation import Explanation, evidence
from tensorsym.tensors.axes import Axes, read_only

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from tensorsym.tasks.diagnose.case import Case

SPELLED = {"file": "structure's own", "ieee": "IEEE 176", "international": "International Tables"}
"""Axes that the command line knows by name, and what they are called."""

NAMED_CHOICES = 4.0
RENAMED_CHOICES = 24.0


def proper_renamings() -> NDArray[np.float64]:
    """Return the 24 right-handed renamings of x, y, z as matrices, the identity first.

    >>> proper_renamings().shape
    (24, 3, 3)
    """
    found = []
    for order in permutations(range(3)):
        for senses in product((1.0, -1.0), repeat=3):
            matrix = np.zeros((3, 3))
            matrix[range(3), order] = senses
            if np.linalg.det(matrix) > 0:
                found.append(matrix)
    return np.array(found)


def axes_explanations(case: Case, named: Sequence[Axes], frame: NDArray[np.float64]) -> list[Explanation]:
    """Return the explanations by named axes and by named axes with x, y, z renamed.

    Parameters
    ----------
    case : Case
        The disagreement.
    named : sequence of Axes
        Conventions to try, seen from the structure's Cartesian axes; the structure's own axes among them.
    frame : ndarray of shape (3, 3)
        Rows are the standard frame in the structure's Cartesian axes.
    """
    renamings = proper_renamings()
    candidates: list[tuple[Axes, float]] = [(axes, NAMED_CHOICES) for axes in named]
    for axes in named:
        for renaming in renamings[1:]:
            matrix = read_only(renaming @ axes.matrix)
            name = f"{SPELLED.get(axes.name, axes.name)} renamed"
            candidates.append((Axes(name, matrix, renaming_in_words(renaming)), RENAMED_CHOICES * NAMED_CHOICES))
    matrices = np.array([axes.matrix for axes, _ in candidates])
    residuals = case.residuals(case.values, matrices @ frame.T)
    return [
        _explanation(case, axes, choices, float(residual))
        for (axes, choices), residual in zip(candidates, residuals, strict=True)
    ]


def renaming_in_words(renaming: NDArray[np.float64]) -> str:
    """Return a renaming of axes in words.

    >>> renaming_in_words(proper_renamings()[0])
    'x = x, y = y, z = z'
    """
    words = []
    for new, row in zip("xyz", renaming, strict=True):
        old = int(np.flatnonzero(row)[0])
        words.append(f"{new} = {'-' if row[old] < 0 else ''}{'xyz'[old]}")
    return ", ".join(words)


def _explanation(case: Case, axes: Axes, choices: float, residual: float) -> Explanation:
    before = case.verdict.residual
    if axes.name in SPELLED:
        sentence = f"the numbers are in the {SPELLED[axes.name]} axes: {axes.words}"
        change = f"read them with --axes {axes.name}"
    else:
        sentence = f"the numbers are in other axes, {axes.name}: {axes.words}"
        change = "accept this explanation, or state these axes in the tensor file"
    return Explanation(
        kind="axes",
        sentence=sentence,
        change=change,
        residual_before=before,
        residual_after=residual,
        evidence=evidence(before, residual, case.floor, case.constraints, 0, choices),
        values=case.values,
        axes=axes,
    )
