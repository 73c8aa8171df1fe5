"""The hypothesis that the structure's class depends on the tolerance with which atoms count as equivalent."""

from __future__ import annotations

from typing import TYPE_CHECKING

from tensorsym.invariants.characters import invariant_count
from tensorsym.invariants.projection import orthonormal_basis, projected
from tensorsym.tasks.diagnose.explanation import Explanation, evidence
from tensorsym.tensors.axes import turned
from tensorsym.tensors.words import components_of

if TYPE_CHECKING:
    from tensorsym.crystal.crystal import Crystal
    from tensorsym.tasks.diagnose.case import Case


def tolerance_explanations(case: Case, crystal: Crystal) -> list[Explanation]:
    """Return the explanations by the class that the structure has at other tolerances."""
    from tensorsym.crystal.symmetry import symmetry_of

    verdict = case.verdict
    found = []
    seen = {crystal.symmetry.number}
    for step in crystal.ladder:
        if step.number in seen:
            continue
        seen.add(step.number)
        symmetry = symmetry_of(crystal, step.symprec)
        turn = verdict.axes.matrix @ symmetry.frame.T
        standard = turned(verdict.values, turn.T)
        outside = standard - projected(standard, orthonormal_basis(symmetry.group, verdict.row.kind))
        after = float((outside**2).sum() ** 0.5) / verdict.size if verdict.size else 0.0
        conditions = len(components_of(verdict.row.kind).words) - invariant_count(symmetry.group, verdict.row.kind)
        found.append(
            Explanation(
                "structure-tolerance",
                f"at symprec {step.symprec:g} the structure has space group {step.international} ({step.number}), "
                f"class {symmetry.group.hermann_mauguin}, which the numbers fit",
                f"run the check with --symprec {step.symprec:g}, and decide whether the atoms really deviate",
                verdict.residual,
                after,
                evidence(verdict.residual, after, case.floor, conditions, 0, float(len(crystal.ladder))),
                verdict.values,
                verdict.axes,
            )
        )
    return found
