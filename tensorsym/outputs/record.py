"""What a reader of outputs hands on: tensors with their axes, unit, order, precision and place in the file."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal


@dataclass(frozen=True, eq=False)
class TensorRecord:
    """One tensor, or one tensor an atom, as a file holds it."""

    property: str
    """Name in the catalogue."""
    label: str
    """Which tensor of the file it is, in words, such as ``electronic, clamped ion``."""
    values: NDArray[np.float64]
    """Shape (3,) * rank, or (atoms, 3, ..., 3) when `per_site`; Cartesian, in `axes`."""
    unit: str
    """Unit of the values as printed."""
    axes: NDArray[np.float64] | None = None
    """Rows are x, y, z of the tensor in the structure's Cartesian axes; None when they are the structure's own."""
    order: str = ""
    """Order of the index pairs as printed; empty without matrix notation."""
    digits: float | None = None
    """Size of one unit in the last printed place, in the unit of the values."""
    sigma: NDArray[np.float64] | float | None = None
    """Standard deviation of the components."""
    line: int = 0
    """Line of the file where the numbers begin, counted from 1."""
    per_site: bool = False
    """True for one tensor an atom."""
    notes: tuple[str, ...] = ()
    """What the reader has to know."""


@dataclass(frozen=True, eq=False)
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
