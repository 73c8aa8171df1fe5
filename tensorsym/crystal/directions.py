"""Directions of a crystal told as ``[uvw]``."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from tensorsym.crystal.crystal import Crystal

LARGEST_INDEX = 6
"""Directions with larger indices are told by their cosines."""


def direction_namer(crystal: Crystal) -> Callable[[Sequence[float]], str]:
    """Return a function that names directions given in the crystal's standard frame.

    Indices refer to the conventional cell. A direction without small indices is told by its cosines in the file's axes.
    """
    symmetry = crystal.symmetry
    to_indices = symmetry.frame @ np.linalg.inv(symmetry.standard_cell)

    def name(direction: Sequence[float]) -> str:
        indices = np.asarray(direction) @ to_indices
        last = indices[np.flatnonzero(np.abs(indices) > 1e-3 * np.abs(indices).max())[-1]]
        indices /= np.abs(indices).max() * np.sign(last)
        for multiple in range(1, LARGEST_INDEX + 1):
            whole = np.rint(multiple * indices)
            if np.abs(multiple * indices - whole).max() < 0.01:
                return "[" + "".join(str(int(index)) for index in whole) + "]"
        cosines = np.asarray(direction) @ symmetry.frame
        return "(" + ", ".join(f"{cosine + 0.0:.3f}" for cosine in cosines) + ")"

    return name
