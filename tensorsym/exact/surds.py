"""Numbers of the form rational times square root, recognised from their floating value for display."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from math import isqrt, sqrt

LARGEST_DENOMINATOR = 1024
"""Squares of coefficients are compared with fractions up to this denominator."""

TOLERANCE = 1e-10
"""Relative distance within which a floating number is displayed as the exact one."""


@dataclass(frozen=True, slots=True)
class Surd:
    """The number ``rational * sqrt(radicand)``."""

    rational: Fraction
    """Rational factor, with the sign."""
    radicand: int = 1
    """Square-free positive integer."""

    def __float__(self) -> float:
        """Return the floating value."""
        return float(self.rational) * sqrt(self.radicand)


def surd_near(value: float | Fraction) -> Surd | None:
    """Return the simple exact number that a floating one stands for, or None.

    Examples
    --------
    >>> surd_near(-0.75)
    Surd(rational=Fraction(-3, 4), radicand=1)
    >>> surd_near(3**0.5 / 2)
    Surd(rational=Fraction(1, 2), radicand=3)
    >>> surd_near(3.14159265)
    >>> surd_near(1e-9)
    """
    if isinstance(value, Fraction):
        return Surd(value)
    square = Fraction(value * value).limit_denominator(LARGEST_DENOMINATOR)
    if not square or abs(float(square) - value * value) > 2 * TOLERANCE * max(1.0, value * value):
        return None
    # sqrt(p/q) = sqrt(p q)/q, and the largest square in p q is taken out.
    outside, inside = _square_part(square.numerator * square.denominator)
    return Surd(Fraction(outside if value > 0 else -outside, square.denominator), inside)


def _square_part(number: int) -> tuple[int, int]:
    """Return (s, n) with ``number = s**2 * n`` and n free of squares; n = 1 for zero."""
    for root in range(isqrt(number), 1, -1):
        if number % (root * root) == 0:
            return root, number // (root * root)
    return (1, number) if number else (0, 1)
