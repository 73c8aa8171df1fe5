"""What physics demands of a tensor beyond symmetry: stability, positive energies, sum rules."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.tasks.check_sites import SiteVerdict
from tensorsym.tensors.notation import MANDEL, to_matrix

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.tasks.check import TensorVerdict

POSITIVE = frozenset({
    "dielectric", "impermeability", "conductivity", "resistivity", "thermal-conductivity", "diffusion", "viscosity",
    "elastic-stiffness", "elastic-compliance",
})  # fmt: skip
"""Properties whose quadratic form is an energy or a rate of dissipation, and so must be positive."""

PARTS = ("ionic", "contribution")
"""Words in a label that mark a part of a tensor, of which nothing is demanded."""

CHARGE_LEFT = 0.05
"""Largest sum of Born charges over the cell, in e an atom, that is put down to the sampling (common practice)."""


@dataclass(frozen=True, slots=True)
class Statement:
    """One demand of physics and whether the numbers meet it."""

    name: str
    """``positive``, ``major-symmetry`` or ``sum-rule``."""
    holds: bool
    """False when the numbers break the demand."""
    sentence: str
    """The demand and the number behind the verdict."""
    value: float
    """The deciding number: smallest eigenvalue, relative asymmetry, or largest sum."""


def statements_on(verdict: TensorVerdict | SiteVerdict) -> tuple[Statement, ...]:
    """Return what physics says of the tensors of a verdict; empty where it demands nothing.

    Stability of a crystal is a positive elastic energy for every strain (Born and Huang, Dynamical Theory of Crystal
    Lattices, 1954); the closed forms for each class follow from it (Mouhat and Coudert, Phys. Rev. B 90, 224104, 2014).
    """
    if isinstance(verdict, SiteVerdict):
        return (_sum_rule(verdict),) if verdict.row.name == "born-charge" else ()
    if verdict.row.name not in POSITIVE or any(word in verdict.label for word in PARTS):
        return ()
    matrix = _quadratic_form(verdict)
    return (_positive(verdict, matrix), _symmetric(verdict, matrix))


def _quadratic_form(verdict: TensorVerdict) -> NDArray[np.float64]:
    """Return the tensor as a square matrix whose eigenvalues do not depend on axes: Mandel notation for rank 4."""
    kind = verdict.row.kind
    return verdict.values if kind.rank == 2 else to_matrix(verdict.values, kind, (MANDEL,) * len(kind.pairs))


def _positive(verdict: TensorVerdict, matrix: NDArray[np.float64]) -> Statement:
    values, vectors = np.linalg.eigh((matrix + matrix.T) / 2)
    smallest = float(values[0])
    what = "stable" if verdict.row.name.startswith("elastic") else "positive definite"
    unit = "" if verdict.unit == "1" else f" {verdict.unit}"
    sentence = f"{what}: smallest eigenvalue {smallest:.5g}{unit}"
    if smallest <= 0:
        mode = ", ".join(f"{component + 0.0:.2f}" for component in vectors[:, 0])
        order = "11 22 33 23 13 12" if len(matrix) == 6 else "1 2 3"
        sentence = f"not {what}: eigenvalue {smallest:.5g}{unit} for ({mode}) in the order {order}"
    return Statement("positive", smallest > 0, sentence, smallest)


def _symmetric(verdict: TensorVerdict, matrix: NDArray[np.float64]) -> Statement:
    size = float(np.linalg.norm(matrix))
    asymmetry = float(np.linalg.norm(matrix - matrix.T)) / (2 * size) if size else 0.0
    holds = asymmetry <= max(verdict.threshold.relative, 1e-6)
    law = "the energy is one function" if verdict.row.parsed.regime == "equilibrium" else "Onsager's relations"
    return Statement(
        "major-symmetry", holds, f"symmetric, as {law} demands: asymmetry {asymmetry:.1e} of the size", asymmetry
    )


def _sum_rule(verdict: SiteVerdict) -> Statement:
    total = verdict.values.sum(axis=0)
    place = np.unravel_index(int(np.argmax(np.abs(total))), total.shape)
    largest = float(abs(total[place]))
    name = verdict.row.symbol + "".join(str(int(index) + 1) for index in place)
    bound = CHARGE_LEFT * len(verdict.values)
    sentence = f"the charges of the cell add up to at most {largest:.3g} e ({name}); {bound:.3g} e is granted"
    return Statement("sum-rule", largest <= bound, sentence, largest)
