"""How much of a deviation the numbers themselves explain: sigma, printed digits, or the working accuracy."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

WORKING_ACCURACY = 5e-3
"""Relative deviation that a tensor without a stated uncertainty is granted.

Common practice: finite-difference and perturbation runs obey their symmetry to a few parts in a thousand before they
are symmetrised, however many digits are printed.
"""

WORKING_SIZE = {
    ("piezoelectric-stress", "C/m^2"): 2e-4,
    ("piezoelectric-stress", "e angstrom"): 2e-3,
    ("born-charge", "e"): 5e-3,
    ("dielectric", "1"): 2e-3,
    ("elastic-stiffness", "kbar"): 5.0,
    ("elastic-stiffness", "GPa"): 0.5,
}
"""Size a component that a calculation cannot tell from zero, by property and unit (common practice).

A tensor that should vanish is judged by this and not by a relative deviation, which means nothing there.
"""

SIGMAS = 3.0
"""How many standard deviations count as noise."""


@dataclass(frozen=True, slots=True)
class Threshold:
    """The largest relative residual that is put down to noise."""

    relative: float
    """Bound on ``||T - <T>|| / ||T||``."""
    absolute: float
    """Size of the noise of the tensor in its own unit (norm over all 3**rank components); 0 when not known."""
    source: str
    """``tolerance``, ``sigma``, ``printed digits``, ``working accuracy`` or ``working size``."""


def noise_threshold(
    norm: float,
    words: int,
    forbidden_share: float,
    *,
    sigma: NDArray[np.float64] | float | None = None,
    digits: float | None = None,
    tolerance: float | None = None,
    working_size: float = 0.0,
) -> Threshold:
    """Return the threshold for a tensor.

    Parameters
    ----------
    norm : float
        Norm of the tensor over all components.
    words : int
        Number of components, 3**rank (times the number of sites).
    forbidden_share : float
        Share of the tensor space that symmetry forbids, 0 to 1: that share of random noise shows in the residual.
    sigma : float or ndarray of shape (3,) * rank, optional
        Standard deviation of the components.
    digits : float, optional
        One unit in the last printed place, in the unit of the tensor.
    tolerance : float, optional
        Relative bound asked for by the user; it overrides everything.
    working_size : float
        Size of a component that cannot be told from zero, see `WORKING_SIZE`; used when no sigma is stated.
    """
    import numpy as np

    if sigma is not None:
        spread = np.asarray(sigma, dtype=float)
        total = float(np.sum(spread**2)) if spread.ndim else float(spread) ** 2 * words
        absolute, source = SIGMAS * (total * forbidden_share) ** 0.5, "sigma"
    else:
        absolute, source = (0.5 * digits * words**0.5, "printed digits") if digits else (0.0, "working accuracy")
        if working_size * words**0.5 > absolute:
            absolute, source = working_size * words**0.5, "working size"
    if tolerance is not None:
        return Threshold(tolerance, absolute, "tolerance")
    relative = absolute / norm if norm > 0 else 0.0
    if sigma is None and relative < WORKING_ACCURACY:
        return Threshold(WORKING_ACCURACY, absolute, "working accuracy")
    return Threshold(relative, absolute, source)
