"""The space of tensors that a group leaves alone: exact, in blocks, with its certificate."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from typing import TYPE_CHECKING

from tensorsym.tensors.words import Components, components_of, indices_of

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from tensorsym.groups.point_group import PointGroup
    from tensorsym.tensors.kind import TensorKind


@dataclass(frozen=True, slots=True)
class Certificate:
    """Two independent counts of the invariants."""

    by_elimination: int
    """Number of independent components found by the solver."""
    by_characters: int
    """The same number from ``(1/|G|) sum of characters``."""

    @property
    def agree(self) -> bool:
        """True when both roads give the same number."""
        return self.by_elimination == self.by_characters


@dataclass(frozen=True, slots=True)
class Block:
    """Components that depend on one another and on nothing else.

    Component ``components[j]`` equals the sum over k of ``rows[k][j] / denominator`` times component ``free[k]``.
    """

    components: tuple[int, ...]
    """Numbers of the components, in the order of preference."""
    free: tuple[int, ...]
    """Numbers of the components chosen as independent."""
    rows: tuple[tuple[int, ...], ...] | tuple[tuple[float, ...], ...]
    """Numerators, one row for each free component: whole numbers, or floating ones in general axes."""
    denominator: int = 1
    """Common denominator."""


@dataclass(frozen=True, eq=False)
class InvariantSpace:
    """All tensors of a kind that a point group allows, in the standard frame or in axes turned from it.

    Components are numbered as in `tensorsym.tensors.words.components_of`.
    """

    group: PointGroup
    """The point group."""
    kind: TensorKind
    """The kind of tensor."""
    blocks: tuple[Block, ...]
    """The allowed components; what stands in no block vanishes."""
    certificate: Certificate
    """The dimension by two roads."""
    turn: tuple[tuple[float, ...], ...] | None = None
    """Rows are the unit vectors of the axes in the standard frame; None for the standard frame itself."""

    def __repr__(self) -> str:
        """Return one line with the dimension and the independent components."""
        return (
            f"InvariantSpace({self.group.setting}, rank {self.kind.rank}, dimension {self.dimension}: "
            f"{' '.join(self.components.digits[number] for number in self.free[:8])})"
        )

    @property
    def components(self) -> Components:
        """The components of the kind before the group acts."""
        return components_of(self.kind)

    @property
    def dimension(self) -> int:
        """Number of independent components."""
        return sum(len(block.free) for block in self.blocks)

    @cached_property
    def free(self) -> tuple[int, ...]:
        """Numbers of the independent components, in the order of preference."""
        return tuple(sorted(number for block in self.blocks for number in block.free))

    @cached_property
    def expressions(self) -> dict[int, tuple[tuple[int, Fraction | float], ...]]:
        """Every allowed component as ``((independent component, coefficient), ...)``.

        Coefficients are Fractions, or floats in general axes.
        """
        return {
            number: tuple(
                (free, _coefficient(row[place], block.denominator))
                for free, row in zip(block.free, block.rows, strict=True)
                if row[place]
            )
            for block in self.blocks
            for place, number in enumerate(block.components)
        }

    @cached_property
    def zero(self) -> tuple[int, ...]:
        """Numbers of the components that must vanish."""
        return tuple(number for number in range(len(self.components.words)) if number not in self.expressions)

    def coefficients(self) -> NDArray[np.float64]:
        """Return the matrix (dimension, number of components): row k is the tensor with free component k equal to 1."""
        import numpy as np

        place = {number: row for row, number in enumerate(self.free)}
        matrix = np.zeros((self.dimension, len(self.components.words)))
        for block in self.blocks:
            rows = [place[number] for number in block.free]
            matrix[np.ix_(rows, block.components)] = np.array(block.rows, dtype=float) / block.denominator
        return matrix

    def basis(self) -> NDArray[np.float64]:
        """Return the basis as full tensors, shape (dimension, 3, ..., 3), in the standard frame."""
        import numpy as np

        full = spread_components(self.kind) @ self.coefficients().T
        return np.ascontiguousarray(full.T).reshape((self.dimension, *(3,) * self.kind.rank))

    def indices(self, number: int) -> tuple[int, ...]:
        """Return the indices 0, 1, 2 of a component."""
        return indices_of(self.components.words[number], self.kind.rank)


def _coefficient(numerator: float, denominator: int) -> Fraction | float:
    return Fraction(numerator, denominator) if isinstance(numerator, int) else numerator / denominator


def spread_components(kind: TensorKind) -> NDArray[np.float64]:
    """Return the matrix (3**rank, number of components) that writes components into a full tensor."""
    import numpy as np

    components = components_of(kind)
    matrix = np.zeros((3**kind.rank, len(components.words)))
    numbers, signs = np.array(components.of_word), np.array(components.sign)
    filled = np.flatnonzero(numbers >= 0)
    matrix[filled, numbers[filled]] = signs[filled]
    return matrix
