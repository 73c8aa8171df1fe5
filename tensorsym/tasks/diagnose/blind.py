"""What symmetry could not have seen: mistakes that turn every allowed tensor into another allowed one.

Each mistake is made on a generic allowed tensor; it is unseen when the result still obeys the class and is another
tensor.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.tasks.check import verdict_on
from tensorsym.tasks.diagnose.axes_guesses import proper_renamings, renaming_in_words
from tensorsym.tasks.diagnose.case import Case
from tensorsym.tasks.diagnose.notation_guesses import order_explanations, shear_explanations, transposed_explanations

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from tensorsym.tasks.check import TensorVerdict
    from tensorsym.tensors.axes import Axes

UNSEEN = 1e-9
"""A residual below this is zero to rounding."""


@dataclass(frozen=True, slots=True)
class BlindSpot:
    """One mistake that a clean verdict does not exclude."""

    kind: str
    """The kind of mistake, as in `tensorsym.tasks.diagnose.explanation.KINDS`, or ``factor``, ``sign``."""
    sentence: str
    """The mistake in words."""


def blind_spots(verdict: TensorVerdict, named: Sequence[Axes] = ()) -> tuple[BlindSpot, ...]:
    """Return the mistakes that symmetry cannot see for the class, property and axes of a verdict.

    Parameters
    ----------
    verdict : TensorVerdict
        Gives the class, the property and the axes; its numbers are not used.
    named : sequence of Axes
        Conventions that may have been confused with the axes of the verdict.
    """
    if not verdict.space.dimension:
        return ()
    generic = _generic(verdict)
    case = Case(verdict_on(verdict, generic))
    spots = [
        BlindSpot("factor", "an overall factor, and with it the unit"),
        BlindSpot("sign", "the overall sign"),
    ]
    if verdict.group.is_enantiomorphic and verdict.row.kind.axial == (verdict.row.kind.rank % 2 == 0):
        spots.append(BlindSpot("hand", "the hand of the crystal: the other enantiomorph has the opposite signs"))
    spots += _notation_spots(case)
    spots += _axes_spots(case, named)
    return tuple(spots)


def _generic(verdict: TensorVerdict) -> NDArray[np.float64]:
    """Return an allowed tensor in the verdict's axes without accidental relations."""
    basis = verdict.placed_space.basis()
    weights = np.random.default_rng(7).uniform(0.5, 2.0, size=len(basis))
    return np.asarray(np.tensordot(weights, basis, axes=1))


def _notation_spots(case: Case) -> list[BlindSpot]:
    spots = []
    orders = [item for item in order_explanations(case) if case.residual(item.values, case.turn) < UNSEEN]
    if orders:
        harmless = sum(not _is_unseen(case, item.values) for item in orders)
        sentence = f"the order of the index pairs ({len(orders)} other orders fit, {harmless} of them without a change)"
        spots.append(BlindSpot("matrix-order", sentence))
    shear = [explanation for explanation in shear_explanations(case) if _is_unseen(case, explanation.values)]
    if shear:
        spots.append(BlindSpot("shear-factor", "a factor of 2 on the shear entries"))
    turned_over = [item for item in transposed_explanations(case) if _is_unseen(case, item.values)]
    if turned_over:
        spots.append(BlindSpot("transposed", "a transposed tensor"))
    return spots


def _axes_spots(case: Case, named: Sequence[Axes]) -> list[BlindSpot]:
    spots = []
    own = case.verdict.axes
    for axes in named:
        relative = axes.matrix @ own.matrix.T
        if _is_unseen_turn(case, relative):
            spots.append(BlindSpot("axes", f"the {axes.name} axes in place of these ({axes.words})"))
    renamed = [renaming for renaming in proper_renamings()[1:] if _is_unseen_turn(case, renaming)]
    if renamed:
        spots.append(BlindSpot("axes", f"axes renamed, such as {renaming_in_words(renamed[0])}"))
    return spots


def _is_unseen(case: Case, values: NDArray[np.float64]) -> bool:
    changed = float(np.linalg.norm(values - case.values)) > 1e-6 * float(np.linalg.norm(values))
    return changed and case.residual(values, case.turn) < UNSEEN


def _is_unseen_turn(case: Case, relative: NDArray[np.float64]) -> bool:
    from tensorsym.tensors.axes import turned

    return _is_unseen(case, turned(case.values, relative))
