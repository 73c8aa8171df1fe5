from __future__ import annotations

from fractions import Fraction
from math import cos, pi, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tensorsym.exact.surds import Surd, surd_near


@pytest.mark.parametrize(
    ("value", "rational", "radicand"),
    [
        (1.0, 1, 1),
        (-0.75, Fraction(-3, 4), 1),
        (1 / 3, Fraction(1, 3), 1),
        (sqrt(3) / 2, Fraction(1, 2), 3),
        (-sqrt(2), -1, 2),
        (sqrt(2 / 3), Fraction(1, 3), 6),
        (1 / sqrt(3), Fraction(1, 3), 3),
        (cos(pi / 6) ** 3, Fraction(3, 8), 3),
        (sqrt(12), 2, 3),
    ],
)
def test_simple_number_is_recognised(value, rational, radicand):
    """The floating value of a rational times a root is written as that number."""
    assert surd_near(value) == Surd(Fraction(rational), radicand)


@pytest.mark.parametrize("value", [pi, 2.718281828, cos(pi / 7), 0.1234567891, 2 ** (1 / 3), 1e-9, 0.0])
def test_other_number_is_not_dressed_up(value):
    """A number that is no simple root stays a floating number, and so does one too small to tell from zero."""
    assert surd_near(value) is None


def test_fraction_is_kept():
    """An exact number of any denominator is returned as it is."""
    assert surd_near(Fraction(12345, 67891)) == Surd(Fraction(12345, 67891))


@given(st.integers(-30, 30), st.integers(1, 12), st.sampled_from([1, 2, 3, 6]))
def test_recognised_number_has_the_value(above, below, radicand):
    """What is recognised has the value that was given, and a radicand without squares."""
    value = above / below * sqrt(radicand)

    found = surd_near(value)

    assert found is None or float(found) == pytest.approx(value, rel=1e-9, abs=1e-12)
    assert found is not None or above == 0
