"""The hypothesis that one printed number is wrong: mistyped, or with its sign flipped."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from tensorsym.tasks.diagnose.explanation import Explanation, evidence
from tensorsym.tensors.axes import turned
from tensorsym.tensors.notation import from_matrix, to_matrix

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.tasks.diagnose.case import Case

SIGN_FLIP = 0.02
"""A replaced value within this share of minus the printed one is called a flipped sign."""


def entry_explanations(case: Case) -> list[Explanation]:
    """Return, for every number of the matrix, the explanation that this one alone is wrong.

    The value that brings the residual down most follows from one projection: with r the forbidden part of the tensor
    and d that of a unit change of the entry, it is the printed value minus ``(r.d)/(d.d)``. In a matrix that is
    symmetric as printed the wrong number stands in both places.
    """
    row = case.verdict.row
    if len(case.basis) == 3**row.kind.rank or case.constraints < 2:
        return []
    printed = to_matrix(case.values, row.kind, row.factors)
    patterns = _patterns(printed.shape, symmetric=_is_symmetric(printed))
    wrong_part = _forbidden(case, case.values)
    size = float(np.linalg.norm(case.values))
    found = []
    for positions in patterns:
        unit = np.zeros(printed.shape)
        for position in positions:
            unit[position] = 1.0
        change = from_matrix(unit, row.kind, row.factors)
        direction = _forbidden(case, change)
        length = float(direction @ direction)
        if length < 1e-12 * float((change**2).sum()):
            continue
        step = -float(wrong_part @ direction) / length
        after = float(np.linalg.norm(wrong_part + step * direction)) / size
        mended = case.values + step * change
        found.append(
            _explanation(case, positions[0], printed, step=step, after=after, choices=len(patterns), values=mended)
        )
    return found


def _explanation(
    case: Case,
    position: tuple[int, ...],
    printed: NDArray[np.float64],
    *,
    step: float,
    after: float,
    choices: int,
    values: NDArray[np.float64],
) -> Explanation:
    verdict = case.verdict
    old, new = float(printed[position]), float(printed[position] + step)
    name = verdict.row.symbol + "".join(str(index + 1) for index in position)
    flipped = abs(new + old) <= SIGN_FLIP * abs(old)
    what = f"the sign of {name} is flipped" if flipped else f"{name} = {old:.6g} is a wrong number"
    return Explanation(
        "entry",
        f"one number is at odds with all others: {what}",
        f"replace {name} = {old:.6g} by {new:.6g}",
        verdict.residual,
        after,
        # A flipped sign leaves nothing to be fitted.
        evidence(verdict.residual, after, case.floor, case.constraints, 0 if flipped else 1, 2 * choices),
        values,
        verdict.axes,
    )


def _forbidden(case: Case, values: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the part of a tensor that the class forbids, flat, in the standard frame."""
    flat = turned(values, case.turn.T).reshape(-1)
    return np.asarray(flat - (case.basis @ flat) @ case.basis)


def _is_symmetric(matrix: NDArray[np.float64]) -> bool:
    square = matrix.ndim == 2 and matrix.shape[0] == matrix.shape[1]
    return square and bool(np.allclose(matrix, matrix.T, rtol=0.0, atol=1e-9 * np.abs(matrix).max()))


def _patterns(shape: tuple[int, ...], *, symmetric: bool) -> list[tuple[tuple[int, ...], ...]]:
    positions = [tuple(int(index) for index in position) for position in np.ndindex(*shape)]
    if not symmetric:
        return [(position,) for position in positions]
    return [
        (position, position[::-1]) if position[0] != position[1] else (position,)
        for position in positions
        if position[0] <= position[1]
    ]
