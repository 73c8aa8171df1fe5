"""Point operations as integer matrices in a crystal basis: exact, hashable, and described in words."""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum
from math import gcd
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

Matrix = tuple[tuple[int, int, int], tuple[int, int, int], tuple[int, int, int]]
"""Three rows of three integers; a column is the image of a basis vector."""

Direction = tuple[int, int, int]
"""Coprime components along the basis vectors, the last non-zero one positive."""

IDENTITY: Matrix = ((1, 0, 0), (0, 1, 0), (0, 0, 1))


class Basis(Enum):
    """The crystal bases in which every crystallographic operation is an integer matrix."""

    CARTESIAN = "cartesian"
    """Unit vectors along x, y, z."""
    HEXAGONAL = "hexagonal"
    """a along x, b at 120 degrees from it, c along z; a and b of unit length."""


@dataclass(frozen=True, slots=True)
class Operation:
    """An exact point operation, with or without reversal of time.

    Examples
    --------
    >>> three = Operation(((0, -1, 0), (1, -1, 0), (0, 0, 1)), Basis.HEXAGONAL)
    >>> three.words
    '3-fold turn about z'
    >>> (three @ three @ three).matrix == IDENTITY
    True
    """

    matrix: Matrix
    """Integer matrix in `basis`."""
    basis: Basis = Basis.CARTESIAN
    """Basis of `matrix`."""
    reverses_time: bool = False
    """True for an antiunitary operation of a magnetic group."""

    def __matmul__(self, other: Operation) -> Operation:
        """Return the operation `other` followed by this one."""
        return Operation(product(self.matrix, other.matrix), self.basis, self.reverses_time != other.reverses_time)

    @property
    def determinant(self) -> int:
        """1 for a turn, -1 for an operation that changes the hand."""
        return determinant(self.matrix)

    @property
    def trace(self) -> int:
        """Trace of the matrix, the same in every basis."""
        return self.matrix[0][0] + self.matrix[1][1] + self.matrix[2][2]

    @property
    def symbol(self) -> str:
        """Hermann-Mauguin symbol of the operation: 1, 2, 3, 4, 6, -1, m, -3, -4, -6."""
        return symbol_of(self.matrix)

    @property
    def direction(self) -> Direction | None:
        """Axis of the turn, or normal of the mirror, in the basis; None for 1 and -1."""
        return axis_of(self.matrix)

    @property
    def words(self) -> str:
        """The operation in words, with its axis."""
        symbol, along = self.symbol, direction_in_words(self.direction, self.basis)
        text = {"1": "identity", "-1": "inversion", "m": f"mirror perpendicular to {along}"}.get(symbol)
        if text is None and symbol.startswith("-"):
            text = f"{symbol[1]}-fold turn with inversion about {along}"
        elif text is None:
            text = f"{symbol}-fold turn about {along}"
        if self._turns_backwards():
            text += ", backwards"
        return f"{text}, with time reversal" if self.reverses_time else text

    def cartesian(self) -> NDArray[np.float64]:
        """Return the orthogonal 3x3 matrix in the Cartesian axes of the standard frame."""
        import numpy as np

        matrix = np.array(self.matrix, dtype=np.float64)
        if self.basis is Basis.CARTESIAN:
            return matrix
        vectors = np.array([[1.0, -0.5, 0.0], [0.0, np.sqrt(0.75), 0.0], [0.0, 0.0, 1.0]])
        return np.asarray(vectors @ matrix @ np.linalg.inv(vectors))

    def cartesian_direction(self) -> tuple[float, float, float] | None:
        """Return the unit vector along `direction` in the standard frame."""
        if self.direction is None:
            return None
        u, v, w = self.direction
        vector = (u - v / 2, v * 0.75**0.5, w) if self.basis is Basis.HEXAGONAL else (u, v, w)
        length = sum(component * component for component in vector) ** 0.5
        return vector[0] / length, vector[1] / length, vector[2] / length

    def _turns_backwards(self) -> bool:
        """Tell a turn by more than 180 degrees, seen against its axis, from its inverse."""
        axis = self.direction
        if axis is None or self.symbol in {"2", "m"}:
            return False
        sign = self.determinant
        probe = next(unit for unit in IDENTITY if not _parallel(unit, axis))
        image = tuple(sign * sum(row[k] * probe[k] for k in range(3)) for row in self.matrix)
        return determinant((axis, probe, image)) < 0  # type: ignore[arg-type]


def product(left: Matrix, right: Matrix) -> Matrix:
    """Return the matrix product."""
    columns = tuple(zip(*right, strict=True))
    return tuple(  # type: ignore[return-value]
        tuple(row[0] * column[0] + row[1] * column[1] + row[2] * column[2] for column in columns) for row in left
    )


def determinant(matrix: Matrix) -> int:
    """Return the determinant."""
    (a, b, c), (d, e, f), (g, h, i) = matrix
    return a * (e * i - f * h) - b * (d * i - f * g) + c * (d * h - e * g)


def symbol_of(matrix: Matrix) -> str:
    """Return the Hermann-Mauguin symbol of a crystallographic operation in any lattice basis."""
    sign = determinant(matrix)
    order = {3: "1", -1: "2", 0: "3", 1: "4", 2: "6"}[sign * (matrix[0][0] + matrix[1][1] + matrix[2][2])]
    return order if sign > 0 else {"1": "-1", "2": "m"}.get(order, f"-{order}")


def axis_of(matrix: Matrix) -> Direction | None:
    """Return the lattice direction that the operation keeps or inverts; None for 1 and -1."""
    sign = determinant(matrix)
    rows = [
        tuple(sign * entry - (row == column) for column, entry in enumerate(line)) for row, line in enumerate(matrix)
    ]
    for first, second in ((0, 1), (0, 2), (1, 2)):
        (a, b, c), (d, e, f) = rows[first], rows[second]
        cross = (b * f - c * e, c * d - a * f, a * e - b * d)
        if any(cross):
            return _primitive(cross)
    return None


def direction_in_words(direction: Direction | None, basis: Basis) -> str:
    """Return x, y or z for a Cartesian axis of the standard frame, else the direction in square brackets."""
    axes = {(1, 0, 0): "x", (0, 0, 1): "z"}
    axes[(1, 2, 0) if basis is Basis.HEXAGONAL else (0, 1, 0)] = "y"
    if direction is None:
        return ""
    if direction in axes:
        return axes[direction]
    return "[" + "".join(str(component) for component in direction) + "]"


def _primitive(vector: tuple[int, int, int]) -> Direction:
    divisor = gcd(*vector)
    last = next(component for component in reversed(vector) if component)
    divisor = divisor if last > 0 else -divisor
    return vector[0] // divisor, vector[1] // divisor, vector[2] // divisor


def _parallel(one: tuple[int, int, int], other: tuple[int, int, int]) -> bool:
    return all(one[i] * other[j] == one[j] * other[i] for i, j in ((0, 1), (0, 2), (1, 2)))
