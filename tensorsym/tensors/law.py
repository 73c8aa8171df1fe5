"""Laws such as ``P_i = d_ijk sigma_jk``: the text, the quantities in it, and the tensor kind that follows."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from tensorsym.errors import LawError, UnknownNameError, nearest_names
from tensorsym.tensors.kind import SignedPermutation, TensorKind
from tensorsym.tensors.quantities import Quantity, quantity_named

if TYPE_CHECKING:
    from collections.abc import Sequence

REGIMES = ("equilibrium", "transport", "optical", "local")
"""How exchange symmetry follows: from the free energy, from Onsager, or not at all (the last two)."""

_CONSTANTS = frozenset({"epsilon0", "eps0", "ε0", "mu0", "μ0", "i", "hbar"})
_TOKEN = re.compile(
    r"(?P<space>[\s*·⋅]+)|(?P<number>\d+(?:/\d+)?)|(?P<sign>[-+−])"
    r"|(?P<name>[^\W\d_]+\d*'*)(?:_(?:\{(?P<braced>[^{}]*)\}|(?P<bare>[a-zA-Z]+)))?"
)


@dataclass(frozen=True, slots=True)
class Term:
    """A quantity or the coefficient, with its index letters."""

    name: str
    """Name as written."""
    indices: str
    """One letter an index."""
    position: int
    """Offset of the term in the text."""


@dataclass(frozen=True, slots=True)
class Law:
    """A linear (or multilinear) law and the kind of its coefficient."""

    text: str
    """The law as written."""
    symbol: str
    """Symbol of the coefficient."""
    regime: str | None
    """One of `REGIMES`, or None when nothing beyond the law itself is assumed."""
    left: Quantity
    """The quantity on the left."""
    sources: tuple[Quantity, ...]
    """The quantities that multiply the coefficient."""
    kind: TensorKind
    """Rank, parity, time behaviour and index symmetry of the coefficient."""
    factors: tuple[int, ...]
    """Factor of matrix notation for every index pair of `kind.pairs`: matrix entry = product of factors of its shear
    digits (4, 5, 6) times the tensor component."""


def parse_law(text: str, equations: Sequence[str] = (), regime: str | None = None, *, traceless: bool = False) -> Law:
    """Return the law that the text states.

    Parameters
    ----------
    text : str
        ``LEFT = COEFFICIENT SOURCE SOURCE ...``, each a name with ``_`` and its index letters; the first name right of
        the equals sign is the coefficient, the others are known quantities, as is the left side. Signs, numbers and
        the constants epsilon0, mu0, i may stand before it and do not count. Copies told apart by a digit (``E1_j
        E2_k``) are not exchangeable; equal ones (``E_j E_k``) are.
    equations : sequence of str
        Further index equations, such as ``chi_ijk = chi_ikj`` or ``R_ijk = -R_jik``.
    regime : str, optional
        ``equilibrium``: the coefficient is a derivative of a free energy, so conjugate quantities exchange;
        ``transport``: Onsager's relations without a magnetic order, fluxes and forces exchange, with a sign for every
        magnetic factor; otherwise the law alone decides. None takes ``equilibrium`` when left and source are
        conjugate, else the law alone.
    traceless : bool
        The coefficient is a symmetric tensor of rank 2 without trace.

    Raises
    ------
    LawError
        If the text is no such law; the message marks the place.

    Examples
    --------
    >>> law = parse_law("P_i = d_ijk sigma_jk")
    >>> law.symbol, law.kind.permutations, law.factors
    ('d', (((0, 2, 1), 1),), (2,))
    >>> parse_law("E_i = R_ijk J_j B_k", regime="transport").kind.permutations
    (((1, 0, 2), -1),)
    """
    if regime is not None and regime not in REGIMES:
        msg = f"{regime!r} is no regime of a law"
        raise UnknownNameError(msg, expected=", ".join(REGIMES), nearest=nearest_names(regime, REGIMES))
    left_term, coefficient, source_terms = _terms(text)
    left = _quantity(left_term, text)
    sources = tuple(_quantity(term, text) for term in source_terms)
    _check_indices(text, left_term, coefficient, source_terms)
    places = [
        tuple(coefficient.indices.index(letter) for letter in term.indices) for term in (left_term, *source_terms)
    ]
    quantities = (left, *sources)
    symmetries = [
        *_symmetric_pairs(quantities, places, len(coefficient.indices)),
        *_equal_factors(source_terms, places[1:], len(coefficient.indices)),
        *_exchange(quantities, places, len(coefficient.indices), regime),
        *(_equation(equation, coefficient) for equation in equations),
    ]
    dissipative = regime in ("transport", "optical")
    kind = TensorKind(
        rank=len(coefficient.indices),
        axial=sum(quantity.axial for quantity in quantities) % 2 == 1,
        time_odd=not dissipative and sum(quantity.time_odd for quantity in quantities) % 2 == 1,
        permutations=tuple(dict.fromkeys(symmetries)),
        traceless=traceless,
    )
    factors = tuple(_factor(place, quantities, places) for place in kind.pairs)
    return Law(text, coefficient.name, regime, left, sources, kind, factors)


def _terms(text: str) -> tuple[Term, Term, list[Term]]:
    """Split the text into left side, coefficient and sources."""
    left_text, equals, _ = text.partition("=")
    if not equals or text.count("=") > 1:
        raise _error("a law has one equals sign", text, len(left_text))
    left = [term for term in _scan(text, 0, len(left_text)) if term.name not in _CONSTANTS]
    right = [term for term in _scan(text, len(left_text) + 1, len(text)) if term.name not in _CONSTANTS]
    if len(left) != 1:
        place = left[1].position if left else 0
        raise _error("the left side of a law is one quantity", text, place)
    if not right:
        raise _error("the right side names no coefficient", text, len(text))
    return left[0], right[0], right[1:]


def _scan(text: str, start: int, stop: int) -> list[Term]:
    terms: list[Term] = []
    place = start
    while place < stop:
        found = _TOKEN.match(text, place, stop)
        if found is None:
            msg = f"{text[place]!r} has no meaning here"
            raise _error(msg, text, place)
        if found["sign"] and terms:
            raise _error("a sign stands only in front of a product, and sums are no laws", text, place)
        if found["name"]:
            indices = (found["braced"] if found["braced"] is not None else found["bare"]) or ""
            indices = re.sub(r"[\s,]", "", indices)
            if not indices.isalpha() and indices:
                raise _error("indices are letters", text, found.end("name") + 1)
            terms.append(Term(found["name"], indices, place))
        place = found.end()
    return terms


def _quantity(term: Term, text: str) -> Quantity:
    try:
        quantity = quantity_named(term.name)
    except LawError as error:
        raise LawError(
            error.message, where=_marked(text, term.position), nearest=error.nearest, hint=error.hint
        ) from None
    if len(term.indices) != quantity.rank:
        msg = f"{term.name} ({quantity.title}) carries {quantity.rank} indices, not {len(term.indices)}"
        raise _error(msg, text, term.position)
    return quantity


def _check_indices(text: str, left: Term, coefficient: Term, sources: Sequence[Term]) -> None:
    """Every letter stands once in the coefficient and once elsewhere."""
    for letter in coefficient.indices:
        if coefficient.indices.count(letter) > 1:
            msg = f"index {letter!r} stands twice in {coefficient.name}"
            raise _error(msg, text, coefficient.position)
    outside: dict[str, Term] = {}
    for term in (left, *sources):
        for letter in term.indices:
            if letter in outside:
                msg = f"index {letter!r} stands more than once beside {coefficient.name}"
                raise _error(msg, text, term.position)
            if letter not in coefficient.indices:
                msg = f"index {letter!r} of {term.name} is missing in {coefficient.name}_{coefficient.indices}"
                raise _error(msg, text, term.position)
            outside[letter] = term
    for offset, letter in enumerate(coefficient.indices):
        if letter not in outside:
            msg = f"index {letter!r} of {coefficient.name} stands on no quantity"
            raise _error(msg, text, text.find(coefficient.indices, coefficient.position) + offset)


def _symmetric_pairs(
    quantities: Sequence[Quantity], places: Sequence[tuple[int, ...]], rank: int
) -> list[SignedPermutation]:
    return [
        (_exchanged(rank, (pair[0],), (pair[1],)), 1)
        for quantity, pair in zip(quantities, places, strict=True)
        if quantity.symmetric
    ]


def _equal_factors(terms: Sequence[Term], places: Sequence[tuple[int, ...]], rank: int) -> list[SignedPermutation]:
    """Return the exchanges of factors that are the same quantity, such as ``E_j E_k``."""
    last: dict[str, tuple[int, ...]] = {}
    found: list[SignedPermutation] = []
    for term, place in zip(terms, places, strict=True):
        if term.name in last and place:
            found.append((_exchanged(rank, last[term.name], place), 1))
        last[term.name] = place
    return found


def _exchange(
    quantities: Sequence[Quantity], places: Sequence[tuple[int, ...]], rank: int, regime: str | None
) -> list[SignedPermutation]:
    """Return the exchange of the left side with its partner among the sources."""
    left, *sources = quantities
    partners = left.driven_by if regime == "transport" else left.conjugate
    if regime not in (None, "equilibrium", "transport"):
        return []
    for quantity, place in zip(sources, places[1:], strict=True):
        if quantity.name in partners and len(place) == len(places[0]) > 0:
            magnetic = sum(q.axial and q.time_odd for q in sources if q is not quantity)
            sign = -1 if regime == "transport" and magnetic % 2 else 1
            return [(_exchanged(rank, places[0], place), sign)]
    return []


def _equation(equation: str, coefficient: Term) -> SignedPermutation:
    """Return the signed permutation that ``chi_ijk = -chi_ikj`` states."""
    left_text, equals, _ = equation.partition("=")
    left = _scan(equation, 0, len(left_text))
    right = _scan(equation, len(left_text) + 1, len(equation)) if equals else []
    if len(left) != 1 or len(right) != 1:
        raise _error("an index equation has one component on each side", equation, len(left_text))
    for term in (left[0], right[0]):
        if term.name != coefficient.name or len(term.indices) != len(coefficient.indices):
            msg = f"expected {coefficient.name} with {len(coefficient.indices)} indices"
            raise _error(msg, equation, term.position)
    if sorted(left[0].indices) != sorted(right[0].indices) or len(set(left[0].indices)) != len(left[0].indices):
        raise _error("both sides need the same letters, each once", equation, right[0].position)
    factor = next((token.start() for token in _TOKEN.finditer(equation) if token["number"]), None)
    if factor is not None:
        raise _error("an index equation has no factor but a sign", equation, factor)
    permutation = tuple(left[0].indices.index(letter) for letter in right[0].indices)
    return permutation, -1 if sum(map(equation.count, "-−")) % 2 else 1


def _factor(place: int, quantities: Sequence[Quantity], places: Sequence[tuple[int, ...]]) -> int:
    """Return the matrix factor of the pair that begins at `place`."""
    for number, (quantity, pair) in enumerate(zip(quantities, places, strict=True)):
        if quantity.symmetric and set(pair) == {place, place + 1}:
            return quantity.voigt if number == 0 else 2 // quantity.voigt
    return 1


def _exchanged(rank: int, first: tuple[int, ...], second: tuple[int, ...]) -> tuple[int, ...]:
    permutation = list(range(rank))
    for one, other in zip(first, second, strict=True):
        permutation[one], permutation[other] = other, one
    return tuple(permutation)


def _error(message: str, text: str, position: int) -> LawError:
    return LawError(message, where=_marked(text, position))


def _marked(text: str, position: int) -> str:
    """Return where an error is, with the character itself marked in the text.

    >>> _marked("P_i = d?", 7)
    'P_i = d >>?<< (character 8)'
    """
    inside = f" >>{text[position]}<< " if position < len(text) else " >>end<< "
    return f"{text[:position]}{inside}{text[position + 1 :]}".strip() + f" (character {position + 1})"
