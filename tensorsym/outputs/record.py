"""What a reader of outputs hands on: tensors with their axes, unit, order, precision and place in the file."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal


@dataclass(frozen=True, slots=True, eq=False)
class TensorRecord:
    """One tensor, or one tensor an atom, as a file holds it."""

    property: str
    """Name in the catalogue."""
    label: str
    """Which tensor of the file it is, in words, such as ``electronic, clamped ion``."""
    values: NDArray[np.float64]
    """Shape (3,) * rank, or (atoms, 3, ..., 3) when `per_site`; Cartesian, in `axes`, read-only."""
    unit: str
    """Unit of the values."""
    axes: NDArray[np.float64] | None = None
    """Shape (3, 3): rows are x, y, z of the tensor in the structure's Cartesian axes; None when they are its own."""
    order: str = ""
    """Order of the index pairs as printed, such as ``11 22 33 12 23 13``; empty without matrix notation."""
    digits: float | None = None
    """Size of one unit in the last printed place, in the unit of the values; None when the file has all digits."""
    sigma: NDArray[np.float64] | float | None = None
    """Standard deviation of the components, in the unit of the values; None when the file tells none."""
    line: int = 0
    """Line of the file where the numbers begin, counted from 1; 0 when it has no lines."""
    per_site: bool = False
    """True for one tensor an atom."""
    site_labels: tuple[str, ...] = ()
    """Names of the sites as the file gives them, one for each tensor of `values`; empty when it gives none."""
    contribution: str = ""
    """Which part of the response it is: ``electronic``, ``ionic``, ``total``; empty when nothing is said."""
    complete: bool = True
    """False for a part that is no material tensor by itself: it obeys symmetry, but need not be positive, say."""
    notes: tuple[str, ...] = ()
    """What the reader has to know."""

    def __post_init__(self) -> None:
        """Keep the arrays as they are read."""
        for name in ("values", "axes", "sigma"):
            array = getattr(self, name)
            if isinstance(array, np.ndarray):
                kept = np.array(array, dtype=float)
                kept.setflags(write=False)
                object.__setattr__(self, name, kept)

    def __repr__(self) -> str:
        """Return property, label, shape and unit on one line."""
        told = f", {self.label}" if self.label else ""
        return f"TensorRecord({self.property}{told}, shape {self.values.shape}, {self.unit})"


@dataclass(frozen=True, slots=True, eq=False)
class OutputFile:
    """An output of a calculation: its structure, if it holds one, and its tensors."""

    crystal: Crystal | None
    """The structure, None when the file holds none."""
    tensors: tuple[TensorRecord, ...]
    """The tensors in the order of the file."""
    format: str
    """Name of the format in words."""
    notes: tuple[str, ...] = ()
    """What the reader has to know of the file."""

    def __repr__(self) -> str:
        """Return format and the properties held on one line."""
        held = ", ".join(dict.fromkeys(record.property for record in self.tensors))
        return f"OutputFile({self.format}: {held or 'no tensor'})"
