from __future__ import annotations

from fractions import Fraction
from math import gcd

import pytest
from hypothesis import given
from hypothesis import strategies as st
from sympy import Matrix, Rational

from tensorsym.exact.rows import null_space, primitive, reduced_rows

ENTRIES = st.one_of(st.integers(-4, 4), st.just(0), st.integers(-(10**12), 10**12))


@st.composite
def integer_matrices(draw):
    """Draw an integer matrix of up to 5 rows and 6 columns, of small, zero and large entries."""
    columns = draw(st.integers(1, 6))
    return draw(st.lists(st.lists(ENTRIES, min_size=columns, max_size=columns), min_size=1, max_size=5))


@given(integer_matrices())
def test_reduced_rows_are_those_of_sympy(matrix):
    """Pivots and entries of the reduced form are those of sympy's `Matrix.rref`."""
    form, pivots = Matrix(matrix).rref()

    found = reduced_rows(matrix)

    assert found.pivots == tuple(pivots)
    rows = [[Rational(entry, found.denominator) for entry in row] for row in found.rows]
    assert Matrix(rows) == form[: len(pivots), :] if rows else not pivots


@given(integer_matrices())
def test_reduced_rows_have_the_smallest_denominator(matrix):
    """The denominator is positive and shares no factor with all numerators, so the form is unique."""
    found = reduced_rows(matrix)

    assert found.denominator > 0
    assert gcd(found.denominator, *(entry for row in found.rows for entry in row)) == 1


@given(integer_matrices())
def test_null_space_is_that_of_sympy(matrix):
    """The vectors are those of sympy's `Matrix.nullspace`, scaled to coprime integers."""
    columns = len(matrix[0])

    found = null_space(matrix, columns)

    theirs = [[Fraction(int(entry.p), int(entry.q)) for entry in vector] for vector in Matrix(matrix).nullspace()]
    free = [max(place for place, entry in enumerate(vector) if entry) for vector in theirs]
    assert [[Fraction(entry, ours[last]) for entry in ours] for ours, last in zip(found, free, strict=True)] == theirs


@given(integer_matrices())
def test_null_space_vanishes_and_is_primitive(matrix):
    """Every vector is sent to zero exactly and has coprime entries."""
    found = null_space(matrix, len(matrix[0]))

    assert all(sum(a * b for a, b in zip(row, vector, strict=True)) == 0 for row in matrix for vector in found)
    assert all(gcd(*vector) == 1 for vector in found)


@pytest.mark.parametrize("matrix", [[], [[]]])
def test_nothing_reduces_to_nothing(matrix):
    """An empty matrix has no rows and the denominator 1."""
    found = reduced_rows(matrix)

    assert (found.pivots, found.rows, found.denominator) == ((), (), 1)


@pytest.mark.parametrize("matrix", [[], [[0, 0, 0]]])
def test_null_space_of_nothing_is_everything(matrix):
    """Without equations every unit vector solves them."""
    assert null_space(matrix, 3) == ((1, 0, 0), (0, 1, 0), (0, 0, 1))


def test_full_rank_leaves_no_null_space():
    """An invertible matrix sends only zero to zero."""
    assert null_space([[2, 1], [1, 1]], 2) == ()


@pytest.mark.parametrize(
    ("vector", "expected"), [([4, -6, 0], (2, -3, 0)), ([0, 0], (0, 0)), ([0, -5], (0, -1)), ([3, 4], (3, 4))]
)
def test_primitive_vector(vector, expected):
    """The common divisor is taken out, signs are kept, and zero stays zero."""
    assert primitive(vector) == expected
