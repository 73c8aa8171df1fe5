"""Components by name: what a handbook prints for each, in matrix notation, as text and as exact coefficients."""

from __future__ import annotations

from fractions import Fraction
from math import gcd, lcm
from typing import TYPE_CHECKING

from tensorsym.exact.surds import Surd, surd_near
from tensorsym.tensors.words import indices_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from tensorsym.invariants.space import InvariantSpace
    from tensorsym.tensors.kind import TensorKind

Coefficient = Fraction | float
Combination = tuple[tuple[str, Coefficient], ...]
"""Names of independent components, each with its coefficient."""


def matrix_factor(kind: TensorKind, factors: Sequence[int], word: int) -> int:
    """Return the factor between a matrix entry and the tensor component with these indices.

    >>> from tensorsym.tensors.law import parse_law
    >>> law = parse_law("epsilon_ij = s_ijkl sigma_kl")
    >>> from tensorsym.tensors.words import word_of
    >>> [matrix_factor(law.kind, law.factors, word_of(indices)) for indices in ((0, 0, 1, 2), (0, 1, 0, 1))]
    [2, 4]
    """
    indices = indices_of(word, kind.rank)
    product = 1
    for place, factor in zip(kind.pairs, factors, strict=True):
        if indices[place] != indices[place + 1]:
            product *= factor
    return product


def component_names(space: InvariantSpace, symbol: str) -> tuple[str, ...]:
    """Return the name of every component, such as ``d14``."""
    return tuple(symbol + digits for digits in space.components.digits)


def matrix_relations(space: InvariantSpace, symbol: str, factors: Sequence[int]) -> dict[str, Combination]:
    """Return every allowed component as a combination of independent ones, all in matrix notation.

    Examples
    --------
    >>> from tensorsym.groups.symbols import point_group_named
    >>> from tensorsym.invariants.solver import invariant_space
    >>> from tensorsym.tensors.law import parse_law
    >>> law = parse_law("P_i = d_ijk sigma_jk")
    >>> space = invariant_space(point_group_named("32"), law.kind)
    >>> matrix_relations(space, law.symbol, law.factors)["d26"]
    (('d11', Fraction(-2, 1)),)
    """
    names = component_names(space, symbol)
    scale = [matrix_factor(space.kind, factors, word) for word in space.components.words]
    return {
        names[number]: tuple(
            (names[free], coefficient * Fraction(scale[number], scale[free])) for free, coefficient in terms
        )
        for number, terms in sorted(space.expressions.items())
    }


def combination_text(combination: Combination) -> str:
    """Return a combination as a handbook prints it; ``0`` for an empty one.

    Examples
    --------
    >>> combination_text((("c11", Fraction(1, 2)), ("c12", Fraction(-1, 2))))
    '(c11 - c12)/2'
    >>> combination_text((("s11", Fraction(2)), ("s12", Fraction(-2))))
    '2 (s11 - s12)'
    >>> combination_text((("d14", -(3**0.5) / 2),))
    '-sqrt(3)/2 d14'
    """
    if not combination:
        return "0"
    surds = [surd_near(coefficient) for _, coefficient in combination]
    names = [name for name, _ in combination]
    if all(surd is not None and surd.radicand == 1 for surd in surds):
        return _rational_text(names, [surd.rational for surd in surds if surd is not None])
    parts = [
        _term_text(name, coefficient, surd)
        for name, (_, coefficient), surd in zip(names, combination, surds, strict=True)
    ]
    return " + ".join(parts).replace("+ -", "- ")


def _rational_text(names: Sequence[str], coefficients: Sequence[Fraction]) -> str:
    below = lcm(*(coefficient.denominator for coefficient in coefficients))
    above = gcd(*(int(coefficient * below) for coefficient in coefficients))
    whole = [int(coefficient * below) // above for coefficient in coefficients]
    terms = " + ".join(_whole_text(factor, name) for factor, name in zip(whole, names, strict=True))
    terms = terms.replace("+ -", "- ")
    if len(names) == 1:
        sign, terms = ("-", names[0]) if whole[0] < 0 else ("", names[0])
        front = sign + (f"{above} " if above != 1 else "")
    else:
        terms = f"({terms})" if above != 1 or below != 1 else terms
        front = f"{above} " if above != 1 else ""
    return f"{front}{terms}/{below}" if below != 1 else f"{front}{terms}"


def _whole_text(factor: int, name: str) -> str:
    return {1: name, -1: f"-{name}"}.get(factor, f"{factor} {name}")


def _term_text(name: str, coefficient: Coefficient, surd: Surd | None) -> str:
    if surd is None:
        return f"{float(coefficient):.6g} {name}"
    if surd.radicand == 1:
        return _rational_text([name], [surd.rational])
    above, below = abs(surd.rational.numerator), surd.rational.denominator
    root = (f"{above} " if above != 1 else "") + f"sqrt({surd.radicand})" + (f"/{below}" if below != 1 else "")
    return f"{'-' if surd.rational < 0 else ''}{root} {name}"
