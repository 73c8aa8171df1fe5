"""Any text is a law or is refused as one; nothing else may happen."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tensorsym.errors import LawError, UsageError
from tensorsym.tensors.law import REGIMES, Law, parse_law
from tensorsym.tensors.quantities import quantity_named

VECTORS, TENSORS, SCALARS = (
    ["E", "P", "J", "B", "H", "M", "nabla", "k", "E1", "B'"],
    ["sigma", "epsilon", "ε"],
    ["T", "S"],
)
WORDS = [
    "P_i", "E_j", "d_ijk", "sigma_jk", "sigma_{jk}", "=", "-", "+", "2", "1/2", "T", "nabla_k", "epsilon_kl", "ε", "i",
    "_", "{", "}", "_{}", "_i", "*", "(", "E1_j", "E'_k", "c_ijklmnopq", "\n", "\u2212", "é", "𝛔_ij", "J_i", "0", "'",
]  # fmt: skip


@settings(max_examples=200)
@given(st.lists(st.sampled_from(WORDS), max_size=9).map(" ".join), st.sampled_from([*REGIMES, None]))
def test_words_of_laws_in_any_order(text, regime):
    """Pieces of laws thrown together are a law or a usage error, whose line is one line."""
    try:
        law = parse_law(text, regime=regime)
    except UsageError as refused:
        assert len(str(refused).splitlines()) <= text.count("\n") + 1  # noqa: PT017  either outcome is right
    else:
        assert isinstance(law, Law)
        assert law.kind.rank <= 10


@settings(max_examples=150)
@given(st.text(max_size=40))
def test_any_text(text):
    """Any text at all is a law or a usage error."""
    try:
        law = parse_law(text)
    except UsageError as refused:
        assert refused.message  # noqa: PT017  either outcome is right
    else:
        assert isinstance(law, Law)


@given(st.text(alphabet="cdijk_{}=-+2 '\u2212", max_size=20))
def test_any_index_equation(equation):
    """Any text as an index equation adds symmetry or is a usage error."""
    try:
        law = parse_law("P_i = c_ijk E1_j E2_k", (equation,), "optical")
    except UsageError as refused:
        assert refused.message  # noqa: PT017  either outcome is right
    else:
        assert len(law.kind.index_group) in (1, 2, 3, 6)


@st.composite
def written_laws(draw):
    """Draw a well-formed law, its quantities and the regime."""
    names = draw(st.lists(st.sampled_from([*VECTORS, *TENSORS, *SCALARS]), min_size=1, max_size=4))
    letters = iter("ijklmnopqr")
    terms = [(name, "".join(next(letters) for _ in range(quantity_named(name).rank))) for name in names]
    indices = "".join(draw(st.permutations("".join(index for _, index in terms))))
    spelled = [f"{name}_{index}" if index else name for name, index in [*terms, ("c", indices)]]
    text = f"{spelled[0]} = {spelled[-1]} {' '.join(spelled[1:-1])}"
    return text, [quantity_named(name) for name in names], draw(st.sampled_from([*REGIMES, None]))


@given(written_laws())
def test_well_formed_law_is_read(case):
    """A well-formed law is read: rank and parity are the sum over its quantities, time behaviour as the regime says."""
    text, quantities, regime = case

    law = parse_law(text, regime=regime)

    assert law.kind.rank == sum(quantity.rank for quantity in quantities)
    assert law.kind.axial == (sum(quantity.axial for quantity in quantities) % 2 == 1)
    odd = sum(quantity.time_odd for quantity in quantities) % 2 == 1
    assert law.kind.time_odd == (odd and regime not in ("transport", "optical"))
    assert len(law.factors) == len(law.kind.pairs)


@given(written_laws(), st.integers(0, 60), st.sampled_from("?!^%&;:~|<>[]\\/"))
def test_foreign_character_is_marked(case, place, character):
    """A character that no law holds is marked where it stands, unless the text breaks even before it."""
    text, _, _ = case
    place = min(place, len(text))

    with pytest.raises(LawError) as refused:
        parse_law(text[:place] + character + text[place:])

    position = int(refused.value.where.rpartition("(character ")[2].rstrip(")"))
    assert position <= place + 1 or "more than once" in refused.value.message
