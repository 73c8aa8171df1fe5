"""Matrix notation: pairs of indices as one index from 1 to 6, with the factors of each convention.

A matrix entry is the tensor component times the factor of each of its shear digits (4, 5, 6). Stiffness-like pairs have
factor 1 and compliance-like pairs factor 2 (Nye, Physical Properties of Crystals, 1985, ch. VIII; IEEE Std 176-1987).
Mandel notation has the square root of 2 on every shear digit, so that matrices multiply like the tensors.
"""

from __future__ import annotations

from functools import lru_cache
from itertools import product
from typing import TYPE_CHECKING

from tensorsym.errors import ShapeError, UsageError

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from tensorsym.tensors.kind import TensorKind

VOIGT_ORDER = "11 22 33 23 13 12"
"""Order of the pairs in handbooks (IEEE Std 176-1987, table 1)."""

MANDEL = 2**0.5
"""Factor of every shear digit in Mandel notation."""


def pair_order(text: str) -> tuple[tuple[int, int], ...]:
    """Return the six index pairs of an order written as ``11 22 33 23 13 12`` or ``xx yy zz xy yz zx``.

    Raises
    ------
    UsageError
        If the text is not the six pairs, each once.

    Examples
    --------
    >>> pair_order("xx yy zz xy yz zx")
    ((0, 0), (1, 1), (2, 2), (0, 1), (1, 2), (0, 2))
    """
    return _pair_order(text)


@lru_cache(maxsize=512)
def matrix_shape(kind: TensorKind) -> tuple[int, ...]:
    """Return the shape of a kind in matrix notation: 6 for every pair, 3 for every other index.

    >>> from tensorsym.tensors.law import parse_law
    >>> matrix_shape(parse_law("P_i = d_ijk sigma_jk").kind)
    (3, 6)
    """
    return tuple(6 if place in kind.pairs else 3 for place in range(kind.rank) if place - 1 not in kind.pairs)


def indices_of_entry(kind: TensorKind, position: Sequence[int]) -> tuple[int, ...]:
    """Return the tensor indices 0, 1, 2 of a matrix entry in the handbook's order, its position counted from 0.

    >>> from tensorsym.tensors.law import parse_law
    >>> indices_of_entry(parse_law("P_i = d_ijk sigma_jk").kind, (0, 3))
    (0, 1, 2)
    """
    pairs = pair_order(VOIGT_ORDER)
    indices: list[int] = []
    for entry in position:
        indices.extend(pairs[entry] if len(indices) in kind.pairs else (entry,))
    return tuple(indices)


def to_matrix(
    values: NDArray[np.float64], kind: TensorKind, factors: Sequence[float], order: str = VOIGT_ORDER
) -> NDArray[np.float64]:
    """Return a tensor in matrix notation.

    Parameters
    ----------
    values : ndarray of shape (3,) * rank
        Tensor components; the two components of a pair are averaged.
    kind : TensorKind
        Says which indices are pairs.
    factors : sequence of float
        Factor of the shear digits of each pair, in the order of `kind.pairs`.
    order : str
        Order of the pairs.

    Returns
    -------
    ndarray of shape `matrix_shape(kind)`
    """
    import numpy as np

    entries, weights = _entries(kind, tuple(factors), order)
    shape = matrix_shape(kind)
    counts = np.bincount(entries)
    sums = np.bincount(entries, weights=values.reshape(-1) * weights)
    return (sums / counts).reshape(shape)


def from_matrix(
    matrix: NDArray[np.float64], kind: TensorKind, factors: Sequence[float], order: str = VOIGT_ORDER
) -> NDArray[np.float64]:
    """Return the tensor that a matrix writes; the inverse of `to_matrix`.

    Raises
    ------
    ShapeError
        If the matrix has another shape than `matrix_shape(kind)`.

    Examples
    --------
    >>> import numpy as np
    >>> from tensorsym.tensors.law import parse_law
    >>> law = parse_law("P_i = d_ijk sigma_jk")
    >>> d = np.zeros((3, 6)); d[0, 3] = 5.0
    >>> from_matrix(d, law.kind, law.factors)[0, 1, 2]
    np.float64(2.5)
    """
    entries, weights = _entries(kind, tuple(factors), order)
    if matrix.shape != matrix_shape(kind):
        msg = f"a matrix of shape {matrix.shape} does not fit"
        raise ShapeError(msg, expected=f"shape {matrix_shape(kind)}")
    return (matrix.reshape(-1)[entries] / weights).reshape((3,) * kind.rank)


@lru_cache(maxsize=512)
def _entries(kind: TensorKind, factors: tuple[float, ...], order: str) -> tuple[NDArray[np.intp], NDArray[np.float64]]:
    """Return for every component the matrix entry that holds it, and the factor between the two, both flat."""
    import numpy as np

    if len(factors) != len(kind.pairs):
        msg = f"{len(factors)} factors were given for {len(kind.pairs)} index pairs"
        raise UsageError(msg)
    digit = {pair: number for number, pair in enumerate(pair_order(order))}
    entries, weights = [], []
    for indices in product(range(3), repeat=kind.rank):
        entry, weight, place = 0, 1.0, 0
        while place < kind.rank:
            if place in kind.pairs:
                low, high = sorted(indices[place : place + 2])
                entry, weight = 6 * entry + digit[low, high], weight * _shear_factor(kind, factors, place, low != high)
                place += 2
            else:
                entry, place = 3 * entry + indices[place], place + 1
        entries.append(entry)
        weights.append(weight)
    return np.array(entries, dtype=np.intp), np.array(weights)


def _shear_factor(kind: TensorKind, factors: tuple[float, ...], place: int, is_shear: bool) -> float:  # noqa: FBT001
    return factors[kind.pairs.index(place)] if is_shear else 1.0


@lru_cache(maxsize=64)
def _pair_order(text: str) -> tuple[tuple[int, int], ...]:
    places = {"1": 0, "2": 1, "3": 2, "x": 0, "y": 1, "z": 2}
    words = text.lower().replace(",", " ").split()
    try:
        pairs = [tuple(sorted(places[letter] for letter in word)) for word in words]
    except KeyError:
        pairs = []
    if len(pairs) != 6 or sorted(pairs) != [(0, 0), (0, 1), (0, 2), (1, 1), (1, 2), (2, 2)]:
        msg = f"{text!r} is no order of the six index pairs"
        raise UsageError(msg, expected=f"the six pairs, each once, such as '{VOIGT_ORDER}' or 'xx yy zz xy yz zx'")
    return tuple(pairs)  # type: ignore[arg-type]
