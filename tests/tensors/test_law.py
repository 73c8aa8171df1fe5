"""What laws mean: rank, parity, time behaviour, index symmetry and matrix factors, worked out by hand."""

from __future__ import annotations

import pytest

from tensorsym.catalog.properties import all_properties
from tensorsym.tensors.kind import TensorKind
from tensorsym.tensors.law import parse_law

EQUILIBRIUM, TRANSPORT, OPTICAL, LOCAL = "equilibrium", "transport", "optical", "local"
POLAR, AXIAL = False, True
EVEN, ODD = False, True

# law, regime, rank, axial, odd in time, generators of the index symmetry, matrix factors
LAWS = [
    ("P_i = p_i T", EQUILIBRIUM, 1, POLAR, EVEN, [], ()),
    ("S = p_i E_i", EQUILIBRIUM, 1, POLAR, EVEN, [], ()),
    ("S = c T", EQUILIBRIUM, 0, POLAR, EVEN, [], ()),
    ("M_i = q_i T", EQUILIBRIUM, 1, AXIAL, ODD, [], ()),
    ("D_i = a_ij E_j", EQUILIBRIUM, 2, POLAR, EVEN, [("10", 1)], ()),
    ("D_i = epsilon_ij E_j", EQUILIBRIUM, 2, POLAR, EVEN, [("10", 1)], ()),
    ("M_i = a_ij H_j", EQUILIBRIUM, 2, POLAR, EVEN, [("10", 1)], ()),
    ("epsilon_ij = a_ij T", EQUILIBRIUM, 2, POLAR, EVEN, [("10", 1)], ()),
    ("M_i = a_ij E_j", EQUILIBRIUM, 2, AXIAL, ODD, [], ()),
    ("P_i = a_ij H_j", EQUILIBRIUM, 2, AXIAL, ODD, [], ()),
    ("P_i = d_ijk sigma_jk", EQUILIBRIUM, 3, POLAR, EVEN, [("021", 1)], (2,)),
    ("epsilon_jk = d_ijk E_i", EQUILIBRIUM, 3, POLAR, EVEN, [("021", 1)], (2,)),
    ("epsilon_ij = d_kij E_k", EQUILIBRIUM, 3, POLAR, EVEN, [("021", 1)], (2,)),
    ("P_i = e_ijk epsilon_jk", EQUILIBRIUM, 3, POLAR, EVEN, [("021", 1)], (1,)),
    ("sigma_jk = -e_ijk E_i", EQUILIBRIUM, 3, POLAR, EVEN, [("021", 1)], (1,)),
    ("E_i = -g_ijk sigma_jk", EQUILIBRIUM, 3, POLAR, EVEN, [("021", 1)], (2,)),
    ("E_i = -h_ijk epsilon_jk", EQUILIBRIUM, 3, POLAR, EVEN, [("021", 1)], (1,)),
    ("M_i = q_ijk sigma_jk", EQUILIBRIUM, 3, AXIAL, ODD, [("021", 1)], (2,)),
    ("P_i = c_ijk E_j E_k", EQUILIBRIUM, 3, POLAR, EVEN, [("021", 1), ("102", 1)], ()),
    ("P_i = c_ijk E_j E_k", OPTICAL, 3, POLAR, EVEN, [("021", 1)], (1,)),
    ("P_i = c_ijk E1_j E2_k", OPTICAL, 3, POLAR, EVEN, [], ()),
    ("P_i = c_ijk E1_j E2_k", LOCAL, 3, POLAR, EVEN, [], ()),
    ("P_i = c_ijkl E_j E_k E_l", OPTICAL, 4, POLAR, EVEN, [("0213", 1), ("0132", 1)], ()),
    ("P_i = c_ijkl E1_j E2_k E3_l", OPTICAL, 4, POLAR, EVEN, [], ()),
    ("P_i = c_ijkl E1_j E1_k E2_l", OPTICAL, 4, POLAR, EVEN, [("0213", 1)], (1,)),
    ("eta_ij = r_ijk E_k", OPTICAL, 3, POLAR, EVEN, [("102", 1)], (1,)),
    ("eta_ij = p_ijkl epsilon_kl", OPTICAL, 4, POLAR, EVEN, [("1023", 1), ("0132", 1)], (1, 1)),
    ("eta_ij = w_ijkl sigma_kl", OPTICAL, 4, POLAR, EVEN, [("1023", 1), ("0132", 1)], (1, 2)),
    ("sigma_ij = c_ijkl epsilon_kl", EQUILIBRIUM, 4, POLAR, EVEN, [("1023", 1), ("0132", 1), ("2301", 1)], (1, 1)),
    ("epsilon_ij = s_ijkl sigma_kl", EQUILIBRIUM, 4, POLAR, EVEN, [("1023", 1), ("0132", 1), ("2301", 1)], (2, 2)),
    ("sigma_ij = c_ijkl epsilon_kl", None, 4, POLAR, EVEN, [("1023", 1), ("0132", 1), ("2301", 1)], (1, 1)),
    ("sigma_ij = c_ijkl epsilon_kl", LOCAL, 4, POLAR, EVEN, [("1023", 1), ("0132", 1)], (1, 1)),
    ("epsilon_ij = Q_ijkl P_k P_l", EQUILIBRIUM, 4, POLAR, EVEN, [("1023", 1), ("0132", 1)], (2, 1)),
    ("epsilon_ij = N_ijkl M_k M_l", EQUILIBRIUM, 4, POLAR, EVEN, [("1023", 1), ("0132", 1)], (2, 1)),
    ("P_i = f_ijkl nabla_j epsilon_kl", EQUILIBRIUM, 4, POLAR, EVEN, [("0132", 1)], (1,)),
    (
        "sigma_ij = C_ijklmn epsilon_kl epsilon_mn",
        EQUILIBRIUM,
        6,
        POLAR,
        EVEN,
        [("102345", 1), ("013245", 1), ("012354", 1), ("014523", 1), ("230145", 1)],
        (1, 1, 1),
    ),
    ("J_i = a_ij E_j", TRANSPORT, 2, POLAR, EVEN, [("10", 1)], ()),
    ("J_i = a_ij E_j", LOCAL, 2, POLAR, ODD, [], ()),
    ("q_i = -k_ij nabla_j T", TRANSPORT, 2, POLAR, EVEN, [("10", 1)], ()),
    ("N_i = -a_ij nabla_j n", TRANSPORT, 2, POLAR, EVEN, [("10", 1)], ()),
    ("E_i = S_ij nabla_j T", TRANSPORT, 2, POLAR, EVEN, [], ()),
    ("E_i = R_ijk J_j B_k", TRANSPORT, 3, AXIAL, EVEN, [("102", -1)], ()),
    ("E_i = R_ijkl J_j B_k B_l", TRANSPORT, 4, POLAR, EVEN, [("0132", 1), ("1023", 1)], (1, 1)),
    ("E_i = R_ijklm J_j B_k B_l B_m", TRANSPORT, 5, AXIAL, EVEN, [("01324", 1), ("01243", 1), ("10234", -1)], ()),
    ("E_i = S_ijk nabla_j T B_k", TRANSPORT, 3, AXIAL, EVEN, [], ()),
    ("E_i = w_ijkl J_j sigma_kl", TRANSPORT, 4, POLAR, EVEN, [("0132", 1), ("1023", 1)], (1, 2)),
    ("sigma_ij = v_ijkl edot_kl", TRANSPORT, 4, POLAR, EVEN, [("1023", 1), ("0132", 1), ("2301", 1)], (1, 1)),
]


def kind_of(rank, axial, time_odd, generators):
    """Return the kind that was worked out by hand."""
    spelled = tuple((tuple(int(place) for place in order), sign) for order, sign in generators)
    return TensorKind(rank, axial, time_odd, spelled)


@pytest.mark.parametrize(("text", "regime", "rank", "axial", "time_odd", "generators", "factors"), LAWS)
def test_meaning_of_a_law(text, regime, rank, axial, time_odd, generators, factors):
    """Rank, parity, time behaviour, index symmetry and matrix factors are those worked out by hand.

    Sources: Nye, Physical Properties of Crystals (1985); Birss, Symmetry and Magnetism (1966) (memory).
    """
    law = parse_law(text, regime=regime)
    by_hand = kind_of(rank, axial, time_odd, generators)

    assert (law.kind.rank, law.kind.axial, law.kind.time_odd) == (rank, axial, time_odd)
    assert set(law.kind.index_group) == set(by_hand.index_group)
    assert law.factors == factors


@pytest.mark.parametrize(
    "text",
    [
        "P_i=d_ijk sigma_jk",
        "  P_i   =   d_ijk    sigma_jk  ",
        "P_i = d_ijk * sigma_jk",
        "P_i = d_ijk · sigma_jk",
        "P_i = -d_ijk sigma_jk",
        "P_i = \u2212d_ijk sigma_jk",
        "-P_i = d_ijk sigma_jk",
        "P_i = 2 d_ijk sigma_jk",
        "P_i = 1/2 d_ijk sigma_jk",
        "P_i = epsilon0 d_ijk sigma_jk",
        "P_i = ε0 d_ijk sigma_jk",
        "P_i = i d_ijk sigma_jk",
        "P_i = d_ijk σ_jk",
        "P_i = d_ijk stress_jk",
        "P_{i} = d_{ijk} sigma_{jk}",
        "P_{i} = d_{i j k} sigma_{j,k}",
        "P_a = d_abc sigma_bc",
        "P_{α} = d_{αβγ} σ_{βγ}",
        "P_i = d_ijk\tsigma_jk",
        "P'_i = d'_ijk sigma'_jk",
        "P1_i = d36_ijk sigma2_jk",
    ],
)
def test_spelling_of_a_law(text):
    """Blanks, dots, braces, Greek letters, primes, letters, leading signs, numbers and constants change no meaning."""
    plain, spelled = parse_law("P_i = d_ijk sigma_jk"), parse_law(text)

    assert (spelled.kind, spelled.factors) == (plain.kind, plain.factors)
    assert spelled.text == text


@pytest.mark.parametrize(
    ("equations", "generators"),
    [
        ((), [("021", 1)]),
        (("c_ijk = c_jik",), [("021", 1), ("102", 1)]),
        (("c_ijk = c_jki",), [("021", 1), ("120", 1)]),
        (("c_abc = c_bac",), [("021", 1), ("102", 1)]),
        (("c_{i,j,k} = c_{j,i,k}",), [("021", 1), ("102", 1)]),
    ],
)
def test_equations_add_index_symmetry(equations, generators):
    """Index equations add to the symmetry of the law, whatever letters they use."""
    law = parse_law("P_i = c_ijk E_j E_k", equations, "optical")

    assert set(law.kind.index_group) == set(kind_of(3, POLAR, EVEN, generators).index_group)


@pytest.mark.parametrize(
    "equation", ["c_ijk = -c_ikj", "-c_ijk = c_ikj", "c_ijk = \u2212c_ikj", "-c_ikj = c_ijk", "c_ijk = - c_ikj"]
)
def test_sign_of_an_equation_counts_on_either_side(equation):
    """A minus on one side of an index equation makes it antisymmetric, on whichever side it stands."""
    law = parse_law("P_i = c_ijk E1_j E2_k", (equation,), "optical")

    assert law.kind.permutations == (((0, 2, 1), -1),)


@pytest.mark.parametrize("equation", ["-c_ijk = -c_ikj", "c_ijk = --c_ikj"])
def test_two_minus_signs_make_plus(equation):
    """Two minus signs in an index equation are none."""
    law = parse_law("P_i = c_ijk E1_j E2_k", (equation,), "optical")

    assert law.kind.permutations == (((0, 2, 1), 1),)


@pytest.mark.parametrize("order", ["jki", "kij", "jik", "kji", "ikj", "ijk"])
def test_equation_states_what_it_says(order):
    """``(p, s)`` of an equation says T[i_p0, i_p1, ...] = s T[i_0, i_1, ...]: letters of both sides are matched."""
    law = parse_law("P_i = c_ijk E1_j E2_k", (f"c_ijk = c_{order}",), "optical")
    ((permutation, sign),) = law.kind.permutations

    assert (tuple("ijk"[place] for place in permutation), sign) == (tuple(order), 1)


def test_law_keeps_its_parts():
    """The parsed law names its coefficient, its quantities and its regime."""
    law = parse_law("E_i = R_ijk J_j B_k", regime="transport")

    assert (law.symbol, law.left.name, [source.name for source in law.sources]) == ("R", "E", ["J", "B"])
    assert law.regime == "transport"


@pytest.mark.parametrize("regime", ["equilibrium", "transport", "optical", "local", None])
def test_order_of_sources_does_not_matter(regime):
    """Sources may stand in any order: the coefficient's own indices say what belongs where."""
    one = parse_law("E_i = R_ijk J_j B_k", regime=regime)
    other = parse_law("E_i = R_ijk B_k J_j", regime=regime)

    assert one.kind == other.kind


def test_traceless_is_passed_on():
    """A tensor declared traceless is of a traceless kind."""
    assert parse_law("E_i = V_ij u_j", ("V_ij = V_ji",), "local", traceless=True).kind.traceless


@pytest.mark.parametrize("row", all_properties(), ids=lambda row: row.name)
def test_catalogue_law_is_parsed(row):
    """Every law of the catalogue parses, with one matrix factor for each pair."""
    assert row.kind.rank <= 8
    assert len(row.factors) == len(row.kind.pairs)
