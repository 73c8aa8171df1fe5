"""The group over a ladder of tolerances: where it is on a plateau, and where it changes."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from tensorsym.crystal.crystal import Crystal

STEPS = (1e-5, 1e-4, 1e-3, 1e-2, 1e-1)
"""Tolerances of the ladder, in angstrom."""

NEAR = 10.0
"""A change of group within this factor of the tolerance in use is warned of."""


@dataclass(frozen=True, slots=True)
class LadderStep:
    """The group at one tolerance; number 0 and empty symbols where none was found."""

    symprec: float
    """Tolerance, angstrom."""
    number: int
    """Number of the space group."""
    international: str
    """Its short Hermann-Mauguin symbol."""
    point_group: str
    """Short Hermann-Mauguin symbol of the class."""
    reason: str = ""
    """Why no group was found."""


def ladder_of(crystal: Crystal) -> tuple[LadderStep, ...]:
    """Return the group of a crystal at every tolerance of `STEPS`."""
    return tuple(step_at(crystal, symprec) for symprec in STEPS)


def step_at(crystal: Crystal, symprec: float) -> LadderStep:
    """Return the group of a crystal at one tolerance; a failure is a step without a group, with its reason."""
    from tensorsym.crystal.symmetry import symmetry_of

    try:
        symmetry = symmetry_of(crystal, symprec)
    except StructureError as error:
        return LadderStep(symprec, 0, "", "", error.message)
    return LadderStep(symprec, symmetry.number, symmetry.international, symmetry.group.hermann_mauguin)


def warnings_near(crystal: Crystal, symprec: float) -> tuple[str, ...]:
    """Return a warning for each side on which the group changes within a factor `NEAR` of a tolerance."""
    here = crystal.symmetry
    warnings = []
    for step in crystal.ladder:
        side = step.symprec / symprec
        if step.number in (here.number, 0) or not 1 / (NEAR * 1.01) <= side <= NEAR * 1.01:
            continue
        warnings.append(
            f"the group depends on the tolerance: {here.international} ({here.number}) at symprec {symprec:g}, "
            f"but {step.international} ({step.number}), class {step.point_group}, at {step.symprec:g}"
        )
    return tuple(warnings)
