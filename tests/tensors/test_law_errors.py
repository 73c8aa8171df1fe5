"""Laws that are none: each is refused with the character marked at which it goes wrong."""

from __future__ import annotations

import pytest

from tensorsym.errors import LawError, UnknownNameError, UsageError
from tensorsym.tensors.law import parse_law

CUBE = "P_i = c_ijk E1_j E2_k"


@pytest.mark.parametrize(
    ("text", "marked", "message"),
    [
        ("", ">>end<< (character 1)", "a law has one equals sign"),
        ("P_i d_ijk sigma_jk", ">>end<< (character 19)", "a law has one equals sign"),
        ("P_i = d_ijk = sigma_jk", "P_i  >>=<<  d_ijk = sigma_jk (character 5)", "a law has one equals sign"),
        ("P_i E_j = d_ij", "P_i  >>E<< _j = d_ij (character 5)", "the left side of a law is one quantity"),
        ("= d_i", ">>=<<  d_i (character 1)", "the left side of a law is one quantity"),
        ("i = d", ">>i<<  = d (character 1)", "the left side of a law is one quantity"),
        ("P_i =", "P_i = >>end<< (character 6)", "the right side names no coefficient"),
        ("P_i = 2 epsilon0", ">>end<< (character 17)", "the right side names no coefficient"),
        ("P_i = d?", "P_i = d >>?<< (character 8)", "'?' has no meaning here"),
        ("P_i = d^2_ij E_j", "P_i = d >>^<< 2_ij E_j (character 8)", "'^' has no meaning here"),
        ("P_i = d_ij_k E_j", "P_i = d_ij >>_<< k E_j (character 11)", "'_' has no meaning here"),
        ("P_i = d_{ijk sigma_jk", "P_i = d >>_<< {ijk sigma_jk (character 8)", "'_' has no meaning here"),
        ("P_i = (d_ij) E_j", "P_i =  >>(<< d_ij) E_j (character 7)", "'(' has no meaning here"),
        ("P_i = d_{i1} E_j", "P_i = d_ >>{<< i1} E_j (character 9)", "indices are letters"),
        ("P_ij = d_ijk E_k", ">>P<< _ij = d_ijk E_k (character 1)", "P (polarisation) carries 1 indices, not 2"),
        ("P = d_k E_k", ">>P<<  = d_k E_k (character 1)", "P (polarisation) carries 1 indices, not 0"),
        ("P_i = d_ij T_j", "P_i = d_ij  >>T<< _j (character 12)", "T (temperature) carries 0 indices, not 1"),
        ("P_i = d_ijk sigm_jk", "P_i = d_ijk  >>s<< igm_jk (character 13)", "'sigm' is no quantity that laws know"),
        ("Pol_i = d_ij E_j", ">>P<< ol_i = d_ij E_j (character 1)", "'Pol' is no quantity that laws know"),
        ("P_i = d_iij E_j", "P_i =  >>d<< _iij E_j (character 7)", "index 'i' stands twice in d"),
        ("P_i = d_ij E_i", "P_i = d_ij  >>E<< _i (character 12)", "index 'i' stands more than once beside d"),
        ("P_i = d_ij E_j E_j", "P_i = d_ij E_j  >>E<< _j (character 16)", "index 'j' stands more than once beside d"),
        ("P_i = d_ijk sigma_jj", "P_i = d_ijk  >>s<< igma_jj (character 13)", "'j' stands more than once beside d"),
        ("P_i = d_i E_j", "P_i = d_i  >>E<< _j (character 11)", "index 'j' of E is missing in d_i"),
        ("P_i = d_jk sigma_jk", ">>P<< _i = d_jk sigma_jk (character 1)", "index 'i' of P is missing in d_jk"),
        ("P_i = d_ijk E_j", "P_i = d_ij >>k<<  E_j (character 11)", "index 'k' of d stands on no quantity"),
        ("P_i = d_ij E_j + E_j", "P_i = d_ij E_j  >>+<<  E_j (character 16)", "sums are no laws"),
        ("P_i = p_i T + T", "P_i = p_i T  >>+<<  T (character 13)", "sums are no laws"),
        ("P_i = p_i T - T", "P_i = p_i T  >>-<<  T (character 13)", "sums are no laws"),
    ],
)
def test_law_is_refused_where_it_goes_wrong(text, marked, message):
    """The error marks the character, counts it from 1, and says what is wrong there."""
    with pytest.raises(LawError) as refused:
        parse_law(text)

    assert marked in refused.value.where
    assert message in refused.value.message
    assert "\n" not in str(refused.value)


@pytest.mark.parametrize(
    ("equation", "marked", "message"),
    [
        ("c_ijk", "c_ijk >>end<< (character 6)", "one component on each side"),
        ("", ">>end<< (character 1)", "one component on each side"),
        ("c_ijk = c_ikj c_jik", "c_ijk  >>=<<  c_ikj c_jik (character 7)", "one component on each side"),
        ("c_ijk = 0", "c_ijk  >>=<<  0 (character 7)", "one component on each side"),
        ("c_ijk = d_ikj", "c_ijk =  >>d<< _ikj (character 9)", "expected c with 3 indices"),
        ("c_ijk = c_ij", "c_ijk =  >>c<< _ij (character 9)", "expected c with 3 indices"),
        ("c_ij = c_ji", ">>c<< _ij = c_ji (character 1)", "expected c with 3 indices"),
        ("c_ijk = c_ijl", "c_ijk =  >>c<< _ijl (character 9)", "both sides need the same letters, each once"),
        ("c_iij = c_iji", "c_iij =  >>c<< _iji (character 9)", "both sides need the same letters, each once"),
        ("c_ijk = 2 c_ikj", "c_ijk =  >>2<<  c_ikj (character 9)", "no factor but a sign"),
        ("3 c_ijk = c_ikj", ">>3<<  c_ijk = c_ikj (character 1)", "no factor but a sign"),
        ("c_ijk = c_ikj = c_jik", "c_ijk = c_ikj  >>=<<  c_jik (character 15)", "'=' has no meaning here"),
        ("c_ijk ~ c_ikj", "c_ijk  >>~<<  c_ikj (character 7)", "'~' has no meaning here"),
    ],
)
def test_equation_is_refused_where_it_goes_wrong(equation, marked, message):
    """An index equation that is none is refused with its character marked, not the law's."""
    with pytest.raises(LawError) as refused:
        parse_law(CUBE, (equation,), "optical")

    assert marked in refused.value.where
    assert message in refused.value.message


@pytest.mark.parametrize("equations", [("c_ijk = c_ikj", "c_ijk = -c_ikj"), ("c_ijk = -c_jki",), ("c_ijk = -c_ijk",)])
def test_contradictory_equations_are_refused(equations):
    """Equations that leave only zero are refused, with what to look at."""
    with pytest.raises(UsageError, match="every component vanishes; check their signs"):
        parse_law(CUBE, equations, "optical")


def test_unknown_quantity_offers_the_nearest():
    """The nearest known quantities are offered, and all of them listed."""
    with pytest.raises(LawError, match="nearest: sigma; known: ") as refused:
        parse_law("P_i = d_ijk sigm_jk")

    assert refused.value.nearest == ("sigma",)


@pytest.mark.parametrize(
    ("regime", "nearest"), [("thermal", ()), ("equilibrum", ("equilibrium",)), ("opical", ("optical",))]
)
def test_unknown_regime_offers_the_nearest(regime, nearest):
    """A regime that is none is refused with the four that are."""
    with pytest.raises(UnknownNameError, match="expected equilibrium, transport, optical, local") as refused:
        parse_law("P_i = d_ij E_j", regime=regime)

    assert refused.value.nearest[: len(nearest)] == nearest


def test_rank_beyond_the_largest_is_refused():
    """A law of rank 11 is refused by the number, not by running out of memory."""
    letters = "abcdefghijk"
    sources = " ".join(f"E{number}_{letter}" for number, letter in enumerate(letters[1:]))

    with pytest.raises(UsageError, match="rank 11 is out of range; expected a rank from 0 to 10"):
        parse_law(f"P_a = c_{letters} {sources}", regime="optical")
