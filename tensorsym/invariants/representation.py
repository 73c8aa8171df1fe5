"""The matrices by which operations act on the tensors of a kind."""

from __future__ import annotations

from fractions import Fraction
from itertools import product
from typing import TYPE_CHECKING, Any

from tensorsym.groups.operations import Basis
from tensorsym.tensors.words import components_of, indices_of

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.groups.operations import Operation
    from tensorsym.tensors.kind import TensorKind


def representation_matrix(operation: Operation, kind: TensorKind) -> NDArray[Any]:
    """Return D(g) on the components of a kind: ``(g T)_c = sum over d of D_cd T_d``.

    Components are those of `tensorsym.tensors.words.components_of`, in the Cartesian axes of the standard frame.

    Returns
    -------
    ndarray of shape (n, n)
        Exact (dtype object, Fractions) for operations in rectangular axes, floating for those of the hexagonal basis,
        whose Cartesian matrices hold the square root of 3.

    Examples
    --------
    >>> from tensorsym.groups.symbols import point_group_named
    >>> from tensorsym.tensors.kind import TensorKind
    >>> representation_matrix(point_group_named("m").generators[0], TensorKind(1)).tolist()
    [[Fraction(1, 1), Fraction(0, 1), Fraction(0, 1)], [Fraction(0, 1), Fraction(-1, 1), Fraction(0, 1)], \
[Fraction(0, 1), Fraction(0, 1), Fraction(1, 1)]]
    """
    import numpy as np

    exact = operation.basis is Basis.CARTESIAN
    matrix: Any = [[Fraction(entry) for entry in row] for row in operation.matrix] if exact else operation.cartesian()
    negative = (kind.axial and operation.determinant < 0) != (kind.time_odd and operation.reverses_time)
    zero, sign = (Fraction(0), Fraction(-1 if negative else 1)) if exact else (0.0, -1.0 if negative else 1.0)
    components = components_of(kind)
    size = len(components.words)
    result = np.full((size, size), zero, dtype=object if exact else float)
    for row, word in enumerate(components.words):
        for source, weight in _image_words(indices_of(word, kind.rank), matrix):
            column = components.of_word[source]
            if column >= 0:
                result[row, column] += sign * weight * components.sign[source]
    return result


def projector(operations: tuple[Operation, ...], kind: TensorKind) -> NDArray[Any]:
    """Return the projector onto the invariants, ``(1/|G|) sum over g of D(g)``, on the components of a kind.

    This is the projector onto the identity irrep; its trace is the number of independent components.
    """
    import numpy as np

    matrices = np.stack([representation_matrix(operation, kind) for operation in operations])
    order: Any = Fraction(len(operations)) if matrices.dtype == object else len(operations)
    return np.asarray(matrices.sum(axis=0) / order)


def _image_words(indices: tuple[int, ...], matrix: Any) -> list[tuple[int, Any]]:
    """Return the words that feed a component, each with the product of matrix entries that multiplies it."""
    choices = [[(column, matrix[index][column]) for column in range(3) if matrix[index][column]] for index in indices]
    words = []
    for combination in product(*choices):
        word, weight = 0, 1
        for column, entry in combination:
            word, weight = 3 * word + column, weight * entry
        words.append((word, weight))
    return words
