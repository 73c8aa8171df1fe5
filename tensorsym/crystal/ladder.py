"""The group over a ladder of tolerances: where it holds, where it changes, and which atoms decide."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.images import atom_images_and_misses
from tensorsym.crystal.symmetry import CrystalSymmetry, symmetry_of
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal

STEPS = (1e-5, 1e-4, 1e-3, 1e-2, 1e-1)
"""Tolerances in Å."""

NEAR = 10.0
"""A change of the group within this factor of the tolerance in use deserves a warning."""

MOST_NAMED = 3
"""Largest number of atoms that a warning names."""


@dataclass(frozen=True, slots=True)
class LadderStep:
    """The group at one tolerance."""

    symprec: float
    """Å."""
    number: int
    """Number of the space group."""
    international: str
    """Short Hermann-Mauguin symbol of the space group."""
    point_group: str
    """Short Hermann-Mauguin symbol of the class."""


def ladder_of(crystal: Crystal) -> tuple[LadderStep, ...]:
    """Return the group at each tolerance of `STEPS`; a tolerance at which none is found is left out."""
    steps = []
    for symprec in STEPS:
        found = _symmetry_or_none(crystal, symprec)
        if found is not None:
            steps.append(LadderStep(symprec, found.number, found.international, found.group.hermann_mauguin))
    return tuple(steps)


def plateaus_in_words(ladder: Sequence[LadderStep]) -> str:
    """Return the ladder in words, such as ``P1 (1) at 1e-05, Fm-3m (225) from 0.0001 to 0.1``.

    >>> steps = [(1e-5, 1, "P1", "1"), (1e-4, 225, "Fm-3m", "m-3m"), (1e-3, 225, "Fm-3m", "m-3m")]
    >>> plateaus_in_words([LadderStep(*step) for step in steps])
    'P1 (1) at 1e-05, Fm-3m (225) from 0.0001 to 0.001'
    """
    plateaus: list[list[LadderStep]] = []
    for step in ladder:
        if plateaus and plateaus[-1][0].number == step.number:
            plateaus[-1].append(step)
        else:
            plateaus.append([step])
    words = []
    for steps in plateaus:
        first, last = steps[0], steps[-1]
        span = f"at {first.symprec:g}" if first is last else f"from {first.symprec:g} to {last.symprec:g}"
        words.append(f"{first.international} ({first.number}) {span}")
    return ", ".join(words)


def warnings_near(crystal: Crystal, symprec: float) -> tuple[str, ...]:
    """Return one line for each side on which the group changes within a factor `NEAR`, and for a broken supercell."""
    warnings = []
    if not crystal.symmetry.cell_keeps_class:
        warnings.append(
            "the cell is a supercell whose shape breaks the class: the group given is that of the crystal itself"
        )
    for other in (symprec / NEAR, symprec * NEAR):
        found = _symmetry_or_none(crystal, other)
        if found is None or found.number == crystal.symmetry.number:
            continue
        line = (
            f"at symprec {other:g} the space group is {found.international} ({found.number}), class "
            f"{found.group.hermann_mauguin}, not {crystal.symmetry.international} ({crystal.symmetry.number})"
        )
        higher, at = (found, other) if other > symprec else (crystal.symmetry, symprec)
        warnings.append(f"{line}; {_movers_in_words(crystal, higher, at)}")
    return tuple(warnings)


def displacements_to(crystal: Crystal, symmetry: CrystalSymmetry) -> NDArray[np.float64]:
    """Return how far each atom has to move to sit exactly where a group wants it.

    Every atom goes to the mean of the places at which the operations of the group arrive. The cell is left as it is,
    and the crystal as a whole is not shifted.

    Returns
    -------
    ndarray of shape (atoms, 3)
        Displacements in Å, in the file's axes.
    """
    _, misses = atom_images_and_misses(crystal, symmetry)
    displacements = misses.mean(axis=0)
    return np.asarray(displacements - displacements.mean(axis=0))


def _symmetry_or_none(crystal: Crystal, symprec: float) -> CrystalSymmetry | None:
    try:
        return symmetry_of(crystal, symprec)
    except StructureError:
        return None


def _movers_in_words(crystal: Crystal, symmetry: CrystalSymmetry, symprec: float) -> str:
    try:
        distances = np.linalg.norm(displacements_to(crystal, symmetry), axis=1)
    except StructureError:
        return f"no atom alone decides what is equal within {symprec:g} Å"
    largest = float(distances.max())
    if largest < symprec * 1e-3:
        return "the shape of the cell decides, not the atoms"
    worst = [index for index in np.argsort(-distances, kind="stable") if distances[index] > 0.5 * largest]
    named = ", ".join(f"{crystal.species[index]} (atom {index + 1})" for index in worst[:MOST_NAMED])
    more = f" and {len(worst) - MOST_NAMED} more" if len(worst) > MOST_NAMED else ""
    return f"farthest from {symmetry.international}: {named}{more}, by up to {largest:.2g} Å"
