"""The allowed form as LaTeX, to be put between dollar signs or into an equation."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from tensorsym.exact.surds import surd_near
from tensorsym.tensors.notation import matrix_shape

if TYPE_CHECKING:
    from tensorsym.invariants.relations import Coefficient, Combination
    from tensorsym.tasks.allowed import AllowedForm

_GREEK = {
    "alpha", "beta", "gamma", "delta", "epsilon", "zeta", "eta", "theta", "kappa", "lambda", "mu", "nu", "xi", "pi",
    "rho", "sigma", "tau", "phi", "chi", "psi", "omega", "Gamma", "Delta", "Lambda", "Pi", "Sigma", "Omega",
}  # fmt: skip


def allowed_latex(form: AllowedForm) -> str:
    r"""Return the form as a LaTeX matrix, or as aligned relations beyond two indices of matrix notation.

    Examples
    --------
    >>> from tensorsym.tasks.allowed import allowed
    >>> print(allowed_latex(allowed("4mm", "pyroelectric")))
    % pyroelectric, class 4mm; standard axes of the class: 4 along z, m perpendicular to x, m perpendicular to (1,1,0)
    p = \begin{pmatrix}
      0 & 0 & p_{3}
    \end{pmatrix}
    """
    shape = matrix_shape(form.kind)
    name = form.row.name if form.row else form.law.text
    comment = f"% {name}, class {form.group.hermann_mauguin}; {form.axes_in_words}: {form.elements_in_words}"
    symbol = _symbol(form.symbol)
    if len(shape) > 2:
        lines = [rf"  {_name(key)} &= {_sum(terms)} \\" for key, terms in form.combinations.items()]
        body = "\n".join([r"\begin{aligned}", *lines, r"\end{aligned}"])
        return f"{comment}\n{body}"
    rows = shape[0] if len(shape) == 2 else 1
    columns = shape[-1] if shape else 1
    cells = [
        [
            _sum(form.entry(((row,) if len(shape) == 2 else ()) + ((column,) if shape else ())))
            for column in range(columns)
        ]
        for row in range(rows)
    ]
    body = " \\\\\n".join("  " + " & ".join(row) for row in cells)
    return f"{comment}\n{symbol} = \\begin{{pmatrix}}\n{body}\n\\end{{pmatrix}}"


def _sum(terms: Combination) -> str:
    text = " + ".join(_term(name, value) for name, value in terms) or "0"
    return text.replace("+ -", "- ")


def _term(name: str, value: Coefficient) -> str:
    surd = surd_near(value)
    if surd is None:
        return f"{float(value):.6g}\\,{_name(name)}"
    above, below = abs(surd.rational.numerator), surd.rational.denominator
    root = rf"\sqrt{{{surd.radicand}}}" if surd.radicand != 1 else ""
    number = (str(above) if above != 1 or (not root and below != 1) else "") + root
    if below != 1:
        number = rf"\tfrac{{{number}}}{{{below}}}"
    return f"{'-' if surd.rational < 0 else ''}{number}{_name(name)}"


def _name(name: str) -> str:
    symbol, digits = re.fullmatch(r"(.*?)(\d*)", name).groups()  # type: ignore[union-attr]
    return f"{_symbol(symbol)}_{{{digits}}}" if digits else _symbol(symbol)


def _symbol(symbol: str) -> str:
    if symbol in _GREEK:
        return f"\\{symbol}"
    return symbol if len(symbol) == 1 else rf"\mathrm{{{symbol}}}"
