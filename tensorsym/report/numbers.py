"""Numbers as people read them."""

from __future__ import annotations

ROUNDING = 1e-15
"""Relative deviations below this are rounding of the arithmetic."""


def short(value: float, digits: int = 5) -> str:
    """Return a number with a few significant digits, without needless zeros.

    >>> short(0.0), short(-0.158423), short(123456.0), short(2.5e-7)
    ('0', '-0.15842', '1.2346e+05', '2.5e-07')
    """
    return f"{value:.{digits}g}" if value else "0"


def residual(value: float) -> str:
    """Return a residual or threshold with two significant digits.

    >>> residual(1.0), residual(0.00031), residual(2.6e-16)
    ('1', '3.1e-04', '< 1e-15')
    """
    if value == 0:
        return "0"
    if value < ROUNDING:
        return f"< {ROUNDING:g}"
    return f"{value:.2g}" if value >= 0.01 else f"{value:.1e}"
