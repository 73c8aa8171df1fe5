"""The form of a property as sympy expressions."""

from __future__ import annotations

from itertools import product
from typing import TYPE_CHECKING, Any

from tensorsym.exact.surds import surd_near
from tensorsym.tensors.notation import matrix_shape

if TYPE_CHECKING:
    from tensorsym.invariants.relations import Coefficient
    from tensorsym.tasks.allowed import AllowedForm


def symbolic_form(form: AllowedForm) -> Any:
    """Return the form in matrix notation as a sympy Matrix, or an N-dimensional array beyond two indices.

    Examples
    --------
    >>> from tensorsym.tasks.allowed import allowed
    >>> symbolic_form(allowed("4/mmm", "dielectric")).is_diagonal()
    True
    """
    import sympy

    shape = matrix_shape(form.kind)
    entries = [_entry(form, position, sympy) for position in product(*(range(size) for size in shape))]
    if len(shape) == 2:
        return sympy.Matrix(shape[0], shape[1], entries)
    return sympy.Array(entries, shape) if shape else entries[0]


def _entry(form: AllowedForm, position: tuple[int, ...], sympy: Any) -> Any:
    terms = (_number(value, sympy) * sympy.Symbol(name, real=True) for name, value in form.entry(position))
    return sum(terms, sympy.Integer(0))


def _number(value: Coefficient, sympy: Any) -> Any:
    surd = surd_near(value)
    if surd is None:
        return sympy.Float(value)
    return sympy.Rational(surd.rational.numerator, surd.rational.denominator) * sympy.sqrt(surd.radicand)
