"""All hypotheses tried on one inconsistent tensor, weighed against one another and told in the order of their worth."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from tensorsym.crystal.axes import words_for
from tensorsym.tasks.diagnose.axes_guesses import axes_explanations
from tensorsym.tasks.diagnose.case import Case
from tensorsym.tasks.diagnose.entry import entry_explanations
from tensorsym.tasks.diagnose.explanation import Explanation, evidence
from tensorsym.tasks.diagnose.lower_group import OperationResidual, lower_group_explanations, operation_residuals
from tensorsym.tasks.diagnose.named_axes import named_axes
from tensorsym.tasks.diagnose.notation_guesses import (
    double_explanations,
    order_explanations,
    shear_explanations,
    transposed_explanations,
)
from tensorsym.tasks.diagnose.rotation import best_rotation
from tensorsym.tasks.diagnose.tolerance import tolerance_explanations
from tensorsym.tensors.axes import Axes, read_only

if TYPE_CHECKING:
    from tensorsym.crystal.crystal import Crystal
    from tensorsym.tasks.check import TensorVerdict

MOST_TOLD = 6
"""Largest number of explanations told."""

WORTH_TELLING = 2.0
"""Evidence below which an explanation is no better than noise."""

EQUAL_WORTH = 3.0
"""Two explanations whose evidence differs by less than this cannot be told apart."""


@dataclass(frozen=True, eq=False)
class Diagnosis:
    """What may be wrong with a tensor, the most likely first."""

    explanations: tuple[Explanation, ...]
    """At most `MOST_TOLD`, by falling evidence."""
    kept: tuple[OperationResidual, ...]
    """Operations of the class that the tensor obeys within its noise, as given."""
    broken: tuple[OperationResidual, ...]
    """Operations that it breaks, the worst first."""

    def __repr__(self) -> str:
        """Return one line with the kinds in order."""
        return f"Diagnosis({', '.join(explanation.kind for explanation in self.explanations)})"

    @property
    def is_ambiguous(self) -> bool:
        """True when the first explanation is not clearly better than the second."""
        return len(self.explanations) > 1 and (
            self.explanations[0].evidence - self.explanations[1].evidence < EQUAL_WORTH
        )


def diagnose(verdict: TensorVerdict, crystal: Crystal) -> Diagnosis:
    """Return the explanations of an inconsistent tensor.

    Cheap hypotheses come first (axes by convention, notation, one wrong number, a lower group); a free rotation and
    pairs of mistakes are only searched when none of them brings the residual down to the noise.
    """
    case = Case(verdict)
    named = named_axes(crystal)
    frame = crystal.symmetry.frame
    by_axes = axes_explanations(case, named, frame)
    found = [
        *by_axes,
        *order_explanations(case),
        *shear_explanations(case),
        *transposed_explanations(case),
        *entry_explanations(case),
        *lower_group_explanations(case),
        *tolerance_explanations(case, crystal),
    ]
    if not any(_explains(case, explanation) for explanation in found):
        found += double_explanations(case, by_axes)
        found += _rotation_explanations(case, crystal)
    ranked = _ranked(found)
    told = [explanation for explanation in ranked if explanation.evidence > WORTH_TELLING][: MOST_TOLD - 1]
    if not told and verdict.residual > NOISE_AT_MOST:
        # Too few conditions to prove anything, yet too large for noise: tell what would repair it.
        told = [item for item in ranked if item.residual_after <= _noise_bound(case) and item.kind != "lower-group"][:3]
    if not told or verdict.residual < NOISE_AT_MOST:
        told.append(_noise(case))
    bound = 2 * max(verdict.threshold.relative, case.floor)
    residuals = operation_residuals(case)
    return Diagnosis(
        tuple(told),
        tuple(item for item in residuals if item.residual <= bound),
        tuple(item for item in reversed(residuals) if item.residual > bound),
    )


NOISE_AT_MOST = 0.1
"""Residuals above this are not offered as noise when anything else explains them."""


def _explains(case: Case, explanation: Explanation) -> bool:
    """Tell whether an explanation leaves no more than noise, while conditions remain that could have failed."""
    return explanation.residual_after <= _noise_bound(case) and explanation.evidence > WORTH_TELLING


def _noise_bound(case: Case) -> float:
    """Return the relative residual that noise explains."""
    return max(case.verdict.threshold.relative, 3 * case.floor)


def _ranked(found: list[Explanation]) -> list[Explanation]:
    """Return the explanations by falling evidence, of those alike in kind and effect only the simplest."""
    ranked: list[Explanation] = []
    for explanation in sorted(found, key=lambda item: -item.evidence):
        alike = (
            other
            for other in ranked
            if other.kind == explanation.kind and explanation.residual_after > 0.5 * other.residual_after
        )
        if next(alike, None) is None:
            ranked.append(explanation)
    return ranked


def _rotation_explanations(case: Case, crystal: Crystal) -> list[Explanation]:
    turn, after = best_rotation(case, case.values)
    fitted = min(case.constraints, 3)
    matrix = read_only(turn @ crystal.symmetry.frame)
    words = words_for(matrix, crystal)
    before = case.verdict.residual
    return [
        Explanation(
            "rotation",
            f"the numbers are in other axes, of no convention tried: {words}",
            "read the tensor in these axes, or find out how the sample or cell was turned",
            before,
            after,
            evidence(before, after, case.floor, case.constraints, fitted, 10.0),
            case.values,
            Axes("rotated", matrix, words),
        )
    ]


def _noise(case: Case) -> Explanation:
    verdict = case.verdict
    return Explanation(
        "noise",
        f"plain noise: deviations of {verdict.residual:.1e} of the tensor's size, without the pattern of another cause",
        "use the symmetrised tensor (--write), converge the calculation further, or state sigma",
        verdict.residual,
        verdict.residual,
        0.0,
        verdict.symmetrised,
        verdict.axes,
    )
