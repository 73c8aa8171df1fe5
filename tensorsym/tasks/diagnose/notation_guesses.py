"""The hypotheses that the numbers were written down in another notation than stated.

Matrix order, factors of 2 on shear entries, and index positions exchanged.
"""

from __future__ import annotations

from itertools import permutations, product
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.tasks.diagnose.explanation import Explanation, evidence
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix, matrix_shape, to_matrix

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.tasks.diagnose.case import Case

KNOWN_ORDERS = (
    "11 22 33 12 23 13",
    "11 22 33 12 13 23",
    "11 22 33 23 12 13",
    "11 22 33 13 23 12",
    "11 22 33 13 12 23",
    "11 12 13 22 23 33",
    "11 12 22 13 23 33",
)
"""Orders of the index pairs other than the handbook's: the shear entries in every sequence, and triangles by rows."""

SHEAR_FACTORS = (0.5, 2.0)


def reordered(case: Case, order: str) -> NDArray[np.float64]:
    """Return the tensor that the same matrix writes when its pairs stand in another order."""
    row = case.verdict.row
    matrix = to_matrix(case.values, row.kind, row.factors, VOIGT_ORDER)
    return from_matrix(matrix, row.kind, row.factors, order)


def order_explanations(case: Case) -> list[Explanation]:
    """Return the explanations by another matrix order; none for a kind without index pairs."""
    if not case.verdict.row.kind.pairs:
        return []
    return [
        _explanation(
            case,
            "matrix-order",
            f"the index pairs stand in the order {order}, not {VOIGT_ORDER}",
            f"read the matrix with --order '{order}'",
            reordered(case, order),
            len(KNOWN_ORDERS),
        )
        for order in KNOWN_ORDERS
    ]


def shear_explanations(case: Case) -> list[Explanation]:
    """Return the explanations by a factor 1/2 or 2 on the shear entries of one pair or of all pairs (then 1/4 or 4)."""
    kind = case.verdict.row.kind
    if not kind.pairs:
        return []
    scalings = [(factor,) * len(kind.pairs) for factor in SHEAR_FACTORS]
    if len(kind.pairs) > 1:
        scalings += [
            tuple(factor if place == pair else 1.0 for place in range(len(kind.pairs)))
            for factor, pair in product(SHEAR_FACTORS, range(len(kind.pairs)))
        ]
    found = []
    for scaling in scalings:
        words = ", ".join(
            f"{factor:g} on the shear entries of index pair {number + 1}"
            for number, factor in enumerate(scaling)
            if factor != 1.0
        )
        found.append(
            _explanation(
                case,
                "shear-factor",
                f"the shear entries carry another factor than the convention of {case.verdict.row.name}",
                f"multiply: {words}",
                _sheared(case, scaling),
                len(scalings),
            )
        )
    return found


def transposed_explanations(case: Case) -> list[Explanation]:
    """Return the explanations by index positions exchanged.

    An exchange of positions commutes with every turn of the crystal, so only the index symmetry of the kind can tell.
    """
    kind = case.verdict.row.kind
    own = {permutation for permutation, _ in kind.index_group}
    others = [order for order in permutations(range(kind.rank)) if order not in own] if kind.rank <= 4 else []
    found = []
    for order in others:
        letters = "ijkl"[: kind.rank]
        moved = "".join(letters[place] for place in order)
        found.append(
            _explanation(
                case,
                "transposed",
                f"the index positions are exchanged: what is printed as {letters} is {moved}",
                f"transpose the tensor to {moved}",
                case.values.transpose(order),
                len(others),
            )
        )
    return found


def double_explanations(case: Case, axes_best: list[Explanation]) -> list[Explanation]:
    """Return the explanations by other axes and another matrix order at once."""
    if not case.verdict.row.kind.pairs:
        return []
    found = []
    frame_turns = [(explanation, explanation.axes) for explanation in axes_best]
    for order in KNOWN_ORDERS:
        values = reordered(case, order)
        for explanation, axes in frame_turns:
            turn = axes.matrix @ case.verdict.axes.matrix.T @ case.turn
            residual = case.residual(values, turn)
            before = case.verdict.residual
            found.append(
                Explanation(
                    "axes",
                    f"{explanation.sentence}, and the index pairs stand in the order {order}",
                    f"{explanation.change}, with --order '{order}'",
                    before,
                    residual,
                    evidence(before, residual, case.floor, case.constraints, 0, 24.0 * 4 * len(KNOWN_ORDERS)),
                    values,
                    axes,
                )
            )
    return found


def _sheared(case: Case, scaling: tuple[float, ...]) -> NDArray[np.float64]:
    row = case.verdict.row
    matrix = to_matrix(case.values, row.kind, row.factors)
    place = 0
    shape = matrix_shape(row.kind)
    for axis, length in enumerate(shape):
        if length == 6:
            weights = np.where(np.arange(6) < 3, 1.0, scaling[row.kind.pairs.index(place)])
            matrix = matrix * weights.reshape([-1 if number == axis else 1 for number in range(len(shape))])
        place += 2 if length == 6 else 1
    return from_matrix(matrix, row.kind, row.factors)


def _explanation(
    case: Case, kind: str, sentence: str, change: str, values: NDArray[np.float64], choices: float
) -> Explanation:
    before, after = case.verdict.residual, case.residual(values, case.turn)
    weight = evidence(before, after, case.floor, case.constraints, 0, choices)
    return Explanation(kind, sentence, change, before, after, weight, values, case.verdict.axes)
