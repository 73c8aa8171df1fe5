"""The second road: the number of invariants as an average of characters, without any elimination."""

from __future__ import annotations

from collections import Counter
from fractions import Fraction
from functools import lru_cache
from typing import TYPE_CHECKING

from tensorsym.groups.operations import IDENTITY, Matrix, Operation, determinant, product

if TYPE_CHECKING:
    from tensorsym.groups.point_group import PointGroup
    from tensorsym.tensors.kind import TensorKind


def invariant_count(group: PointGroup, kind: TensorKind) -> int:
    """Return the dimension of the invariants, ``(1/|G|) sum over g of chi(g)``.

    Examples
    --------
    >>> from tensorsym.groups.symbols import point_group_named
    >>> from tensorsym.tensors.law import parse_law
    >>> invariant_count(point_group_named("32"), parse_law("P_i = d_ijk sigma_jk").kind)
    2
    """
    total = sum((times * _character(sample, kind) for sample, times in _classes(group.operations)), Fraction(0))
    average = total / group.order
    assert average.denominator == 1, "an average of characters is a whole number"  # noqa: S101  a broken group, not input
    return int(average)


def character(operation: Operation, kind: TensorKind) -> Fraction:
    """Return the trace of an operation on the tensors of a kind.

    With index symmetry the trace is the signed average over the index group of products of traces of powers, one
    factor for each cycle of the permutation (the cycle index; Weyl, The Classical Groups, 1946, memory).
    """
    return _character(_sample(operation), kind)


_Sample = tuple[tuple[int, ...], int, bool]
"""Traces of the first powers, determinant and time reversal: all that a character depends on."""


@lru_cache(maxsize=4096)
def _character(sample: _Sample, kind: TensorKind) -> Fraction:
    traces, hand, reverses_time = sample
    total = 0
    for cycles, weight in _cycle_types(kind).items():
        term = weight
        for length in cycles:
            term *= traces[(length - 1) % len(traces)]
        total += term
    value = Fraction(total, len(kind.index_group)) - kind.traceless
    negative = (kind.axial and hand < 0) != (kind.time_odd and reverses_time)
    return -value if negative else value


@lru_cache(maxsize=512)
def _cycle_types(kind: TensorKind) -> Counter[tuple[int, ...]]:
    """Return the signed number of index permutations of each cycle type."""
    types: Counter[tuple[int, ...]] = Counter()
    for permutation, sign in kind.index_group:
        types[_cycles(permutation)] += sign
    return types


def _cycles(permutation: tuple[int, ...]) -> tuple[int, ...]:
    seen: set[int] = set()
    lengths = []
    for start in range(len(permutation)):
        length, place = 0, start
        while place not in seen:
            seen.add(place)
            place = permutation[place]
            length += 1
        if length:
            lengths.append(length)
    return tuple(sorted(lengths))


@lru_cache(maxsize=256)
def _classes(operations: tuple[Operation, ...]) -> tuple[tuple[_Sample, int], ...]:
    return tuple(Counter(_sample(operation) for operation in operations).items())


@lru_cache(maxsize=1024)
def _sample(operation: Operation) -> _Sample:
    traces = []
    power: Matrix = operation.matrix
    for _ in range(12):
        traces.append(power[0][0] + power[1][1] + power[2][2])
        if power == IDENTITY:
            break
        power = product(power, operation.matrix)
    return tuple(traces), determinant(operation.matrix), operation.reverses_time
