"""One possible cause of a disagreement, what it would repair, and how much it has to assume."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from tensorsym.tensors.axes import Axes

KINDS = (
    "axes",
    "rotation",
    "matrix-order",
    "shear-factor",
    "transposed",
    "hand",
    "entry",
    "lower-group",
    "structure-tolerance",
    "noise",
)
"""The causes that a diagnosis knows."""


@dataclass(frozen=True, eq=False)
class Explanation:
    """A cause that would bring the residual down."""

    kind: str
    """One of `KINDS`."""
    sentence: str
    """The cause in one sentence."""
    change: str
    """What to change, as an instruction."""
    residual_before: float
    """Relative residual as given."""
    residual_after: float
    """Relative residual when the cause is taken away."""
    evidence: float
    """Natural logarithm of how much better the explanation predicts the numbers than noise does, assumptions paid."""
    values: NDArray[np.float64]
    """The tensor as it reads once the cause is taken away, shape (3,) * rank, in `axes`."""
    axes: Axes
    """Axes of those values, seen from the structure's Cartesian axes."""

    def __repr__(self) -> str:
        """Return one line."""
        return f"Explanation({self.kind}: {self.residual_before:.2g} -> {self.residual_after:.2g}, {self.sentence})"


def evidence(before: float, after: float, floor: float, constraints: int, fitted: int, choices: float) -> float:
    """Return how much an explanation is worth.

    Each condition that symmetry sets and the explanation did not spend on fitting itself is met better by the factor
    ``before / after``; every alternative that was tried costs its share (Schwarz 1978, in the form for an unknown scale
    of noise).

    Parameters
    ----------
    before, after : float
        Relative residuals without and with the explanation.
    floor : float
        Relative residual below which nothing can be told.
    constraints : int
        Number of independent conditions of the class.
    fitted : int
        How many of them the explanation uses up (3 for a free rotation, 1 for one replaced number).
    choices : float
        Number of alternatives of its kind that could have been named.
    """
    gain = math.log(max(before, floor) / max(after, floor))
    return (constraints - fitted) * gain - math.log(max(choices, 1.0))
