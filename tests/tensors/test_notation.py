from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tensorsym.errors import ShapeError, UsageError
from tensorsym.tensors.kind import TensorKind
from tensorsym.tensors.law import parse_law
from tensorsym.tensors.notation import (
    MANDEL,
    VOIGT_ORDER,
    from_matrix,
    indices_of_entry,
    matrix_shape,
    pair_order,
    to_matrix,
)
from tests.truths.float_groups import index_symmetric_basis

LAWS = {
    "d": "P_i = d_ijk sigma_jk",
    "e": "P_i = e_ijk epsilon_jk",
    "converse d": "epsilon_jk = d_ijk E_i",
    "d, pair first": "epsilon_jk = d_jki E_i",
    "c": "sigma_ij = c_ijkl epsilon_kl",
    "s": "epsilon_ij = s_ijkl sigma_kl",
    "p": "eta_ij = p_ijkl epsilon_kl",
    "pi": "eta_ij = pi_ijkl sigma_kl",
    "Q": "epsilon_ij = Q_ijkl P_k P_l",
    "f": "P_i = f_ijkl nabla_j epsilon_kl",
    "C": "sigma_ij = C_ijklmn epsilon_kl epsilon_mn",
    "S": "epsilon_ij = S_ijklmn sigma_kl sigma_mn",
    "nonlinear d": "P_i = h_ijklm sigma_jk sigma_lm",
    "no pair": "E_i = S_ij nabla_j T",
}
ORDERS = [VOIGT_ORDER, "11 22 33 12 23 13", "xx yy zz xy yz zx", "33 22 11 12 13 23", "XX,YY,ZZ,YZ,XZ,XY"]
VASP = "xx yy zz xy yz zx"


def random_tensor(kind, seed=0):
    """Return a random tensor with the index symmetry of a kind."""
    basis = index_symmetric_basis(kind)
    return np.tensordot(np.random.default_rng(seed).normal(size=len(basis)), basis, axes=1)


def voigt(tensor, factor):
    """Return a symmetric tensor as a vector of six, by hand."""
    return np.array(
        [tensor[0, 0], tensor[1, 1], tensor[2, 2], factor * tensor[1, 2], factor * tensor[0, 2], factor * tensor[0, 1]]
    )


def symmetric(seed):
    """Return a random symmetric tensor of rank 2."""
    half = np.random.default_rng(seed).normal(size=(3, 3))
    return half + half.T


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize("text", LAWS.values(), ids=LAWS)
def test_matrix_and_back(text, order):
    """Matrix notation keeps a tensor of the kind exactly, whatever the order of the pairs."""
    law = parse_law(text)
    tensor = random_tensor(law.kind)

    matrix = to_matrix(tensor, law.kind, law.factors, order)

    assert matrix.shape == matrix_shape(law.kind)
    assert from_matrix(matrix, law.kind, law.factors, order) == pytest.approx(tensor, abs=1e-15)


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize("text", LAWS.values(), ids=LAWS)
def test_tensor_and_back(text, order):
    """Any matrix of the right shape is the matrix of the tensor it writes."""
    law = parse_law(text)
    matrix = np.random.default_rng(3).normal(size=matrix_shape(law.kind))

    tensor = from_matrix(matrix, law.kind, law.factors, order)

    assert tensor.shape == (3,) * law.kind.rank
    assert to_matrix(tensor, law.kind, law.factors, order) == pytest.approx(matrix, abs=1e-15)


@pytest.mark.parametrize(
    ("name", "shape", "factors"),
    [
        ("d", (3, 6), (2,)),
        ("e", (3, 6), (1,)),
        ("converse d", (3, 6), (2,)),
        ("d, pair first", (6, 3), (2,)),
        ("c", (6, 6), (1, 1)),
        ("s", (6, 6), (2, 2)),
        ("p", (6, 6), (1, 1)),
        ("pi", (6, 6), (1, 2)),
        ("f", (3, 3, 6), (1,)),
        ("C", (6, 6, 6), (1, 1, 1)),
        ("S", (6, 6, 6), (2, 2, 2)),
        ("nonlinear d", (3, 6, 6), (2, 2)),
        ("no pair", (3, 3), ()),
    ],
)
def test_shape_and_factors(name, shape, factors):
    """Strain-like digits of what multiplies stress have the factor 2, stress-like digits have none (Nye; memory)."""
    law = parse_law(LAWS[name])

    assert matrix_shape(law.kind) == shape
    assert law.factors == factors


@pytest.mark.parametrize(
    ("name", "indices", "place", "factor"),
    [
        ("s", (0, 0, 1, 1), (0, 1), 1),
        ("s", (0, 0, 1, 2), (0, 3), 2),
        ("s", (1, 2, 1, 2), (3, 3), 4),
        ("s", (0, 1, 0, 2), (5, 4), 4),
        ("c", (0, 1, 0, 2), (5, 4), 1),
        ("d", (0, 1, 2), (0, 3), 2),
        ("d", (2, 2, 2), (2, 2), 1),
        ("e", (0, 1, 2), (0, 3), 1),
        ("pi", (0, 1, 1, 1), (5, 1), 1),
        ("pi", (1, 1, 0, 1), (1, 5), 2),
        ("C", (0, 1, 0, 1, 1, 2), (5, 5, 3), 1),
        ("S", (0, 0, 0, 1, 1, 2), (0, 5, 3), 4),
    ],
)
def test_entry_is_the_component_times_the_factor(name, indices, place, factor):
    """Each matrix entry is the tensor component times the factor that Nye gives (ch. VII and VIII; memory)."""
    law = parse_law(LAWS[name])
    tensor = random_tensor(law.kind)

    assert to_matrix(tensor, law.kind, law.factors)[place] == pytest.approx(factor * tensor[indices])


def test_stiffness_times_strain_is_stress():
    """The matrix product c epsilon is the contraction, with strain as engineers write it."""
    law = parse_law(LAWS["c"])
    c, strain = random_tensor(law.kind), symmetric(1)
    stress = np.einsum("ijkl,kl", c, strain)

    assert to_matrix(c, law.kind, law.factors) @ voigt(strain, 2) == pytest.approx(voigt(stress, 1))


def test_compliance_is_the_inverse_of_stiffness():
    """The inverse matrix of c is the s that inverts the contraction on symmetric tensors."""
    stiff, soft = parse_law(LAWS["c"]), parse_law(LAWS["s"])
    matrix = np.diag([9.0, 8, 7, 3, 2, 4]) + np.ones((6, 6))
    c = from_matrix(matrix, stiff.kind, stiff.factors)
    s = from_matrix(np.linalg.inv(matrix), soft.kind, soft.factors)
    stress = symmetric(2)

    assert np.einsum("ijkl,klmn,mn", c, s, stress) == pytest.approx(stress)


def test_moduli_times_stress_is_polarisation():
    """The matrix product d sigma is the contraction, and so is e epsilon."""
    d, e = parse_law(LAWS["d"]), parse_law(LAWS["e"])
    moduli, constants = random_tensor(d.kind, 4), random_tensor(e.kind, 5)
    tensor = symmetric(6)

    polarisation = np.einsum("ijk,jk", moduli, tensor)
    assert to_matrix(moduli, d.kind, d.factors) @ voigt(tensor, 1) == pytest.approx(polarisation)
    polarisation = np.einsum("ijk,jk", constants, tensor)
    assert to_matrix(constants, e.kind, e.factors) @ voigt(tensor, 2) == pytest.approx(polarisation)


def test_converse_effect_has_the_transposed_matrix():
    """Strain by a field is d transposed times the field, with strain as engineers write it."""
    law = parse_law(LAWS["d"])
    d, field = random_tensor(law.kind), np.array([1.0, -2.0, 0.5])
    strain = np.einsum("ijk,i", d, field)

    assert to_matrix(d, law.kind, law.factors).T @ field == pytest.approx(voigt(strain, 2))


def test_stress_constants_are_moduli_times_stiffness():
    """The matrix product e = d c is the contraction over both indices of the strain."""
    d, e, c = (parse_law(LAWS[name]) for name in ("d", "e", "c"))
    moduli, stiffness = random_tensor(d.kind, 7), random_tensor(c.kind, 8)
    constants = np.einsum("ijk,jklm", moduli, stiffness)

    product = to_matrix(moduli, d.kind, d.factors) @ to_matrix(stiffness, c.kind, c.factors)

    assert product == pytest.approx(to_matrix(constants, e.kind, e.factors))


def test_third_order_energy():
    """(1/6) C eta eta eta in matrix notation, with engineers' strain, is the sum over all six indices."""
    law = parse_law(LAWS["C"])
    constants, strain = random_tensor(law.kind, 9), symmetric(10)
    six = voigt(strain, 2)

    energy = np.einsum("ijklmn,ij,kl,mn", constants, strain, strain, strain)

    assert np.einsum("abc,a,b,c", to_matrix(constants, law.kind, law.factors), six, six, six) == pytest.approx(energy)


@pytest.mark.parametrize("name", ["c", "s"])
def test_energy_is_half_the_quadratic_form(name):
    """Stress times strain is one number, whether summed over nine components or over six digits."""
    law = parse_law(LAWS[name])
    tensor, given = random_tensor(law.kind, 11), symmetric(12)
    six = voigt(given, 2 if name == "c" else 1)

    energy = np.einsum("ij,ijkl,kl", given, tensor, given)

    assert six @ to_matrix(tensor, law.kind, law.factors) @ six == pytest.approx(energy)


def test_mandel_products_are_contractions():
    """In Mandel's notation the matrix of c contracted with s is the product of their matrices."""
    kind = parse_law(LAWS["c"]).kind
    one, other = random_tensor(kind, 13), random_tensor(kind, 14)
    contracted = np.einsum("ijkl,klmn", one, other)
    pairs_only = parse_law(LAWS["p"], regime="optical").kind
    mandel = (MANDEL, MANDEL)

    product = to_matrix(one, kind, mandel) @ to_matrix(other, kind, mandel)

    assert product == pytest.approx(to_matrix(contracted, pairs_only, mandel))


def test_mandel_matrix_has_the_norm_of_the_tensor():
    """Mandel's matrix has the eigenvalues and the norm of the tensor, which Voigt's has not."""
    kind = parse_law(LAWS["c"]).kind
    tensor = random_tensor(kind, 15)
    nine = np.linalg.eigvalsh(tensor.reshape(9, 9))
    kept = nine[np.argsort(np.abs(nine))][3:]

    matrix = to_matrix(tensor, kind, (MANDEL, MANDEL))

    assert np.linalg.norm(matrix) == pytest.approx(np.linalg.norm(tensor))
    assert np.linalg.eigvalsh(matrix) == pytest.approx(np.sort(kept))
    assert from_matrix(matrix, kind, (MANDEL, MANDEL)) == pytest.approx(tensor)


def test_mandel_identity():
    """The unit tensor on symmetric tensors is the unit matrix in Mandel's notation, not in Voigt's."""
    kind, delta = parse_law(LAWS["c"]).kind, np.eye(3)
    unit = (np.einsum("ik,jl->ijkl", delta, delta) + np.einsum("il,jk->ijkl", delta, delta)) / 2

    assert to_matrix(unit, kind, (MANDEL, MANDEL)) == pytest.approx(np.eye(6))
    assert to_matrix(unit, kind, (1, 1)) == pytest.approx(np.diag([1, 1, 1, 0.5, 0.5, 0.5]))


def test_published_slip_of_the_shear_factor():
    """The product d c with a published 3m set gives its e; without the 2 in d16 the odd 32.4 comes out.

    Source: PMC2912932 with its erratum (c in 10^10 N/m^2, d in pC/N), see the facts of the project.
    """
    c11, c12, c13, c14, c33, c44, c66 = 20.96, 8.29, 6.46, -2.66, 17.65, 2.10, 6.33
    stiffness = np.array([
        [c11, c12, c13, c14, 0, 0], [c12, c11, c13, -c14, 0, 0], [c13, c13, c33, 0, 0, 0],
        [c14, -c14, 0, c44, 0, 0], [0, 0, 0, 0, c44, c14], [0, 0, 0, 0, c14, c66],
    ])  # fmt: skip
    d15, d22, d31, d33 = 2190, -511, -34, 74
    law, stiff = parse_law(LAWS["d"]), parse_law(LAWS["c"])
    moduli = np.array([[0, 0, 0, 0, d15, -2 * d22], [-d22, d22, 0, d15, 0, 0], [d31, d31, d33, 0, 0, 0]], dtype=float)

    constants = (
        np.einsum(
            "ijk,jklm->ilm",
            from_matrix(moduli, law.kind, law.factors),
            from_matrix(stiffness, stiff.kind, stiff.factors),
        )
        / 100
    )  # 1e-12 C/N times 1e10 N/m^2
    moduli[0, 5] = -d22

    assert constants[0, 0, 2] == pytest.approx(18.80, abs=0.005)
    assert constants[1, 1, 1] == pytest.approx(-6.49, abs=0.05)
    assert constants[2, 0, 0] == pytest.approx(-5.16, abs=0.005)
    assert constants[2, 2, 2] == pytest.approx(8.67, abs=0.005)
    assert (moduli @ stiffness)[0, 4] / 100 == pytest.approx(32.4, abs=0.05)


def test_printed_order_of_vasp():
    """VASP prints XX YY ZZ XY YZ ZX: its fourth column is c16 of the handbook, not c14 (VASP manual; memory)."""
    law = parse_law(LAWS["e"])
    printed = np.arange(18.0).reshape(3, 6)

    tensor = from_matrix(printed, law.kind, law.factors, VASP)

    assert tensor[0, 0, 1] == printed[0, 3]
    assert tensor[0, 1, 2] == printed[0, 4]
    assert to_matrix(tensor, law.kind, law.factors) == pytest.approx(printed[:, [0, 1, 2, 4, 5, 3]])


@given(st.permutations(VOIGT_ORDER.split()))
def test_any_order_of_the_pairs_is_read(pairs):
    """Every order of the six pairs is a permutation of the columns."""
    law = parse_law(LAWS["d"])
    tensor = random_tensor(law.kind)
    columns = [VOIGT_ORDER.split().index(pair) for pair in pairs]

    assert to_matrix(tensor, law.kind, law.factors, " ".join(pairs)) == pytest.approx(
        to_matrix(tensor, law.kind, law.factors)[:, columns]
    )


@pytest.mark.parametrize(
    "text", ["11 22 33 32 31 21", "XX YY ZZ ZY ZX YX", "11,22,33,23,13,12", "  11 22 33 23 13 12 "]
)
def test_spelling_of_an_order(text):
    """Either order within a pair, letters or digits, blanks or commas, mean the same."""
    assert pair_order(text) == pair_order(VOIGT_ORDER)


@pytest.mark.parametrize(
    "text",
    [
        "",
        "11 22 33 23 13",
        "11 22 33 23 13 13",
        "11 22 33 44 55 66",
        "1 2 3 4 5 6",
        "11 22 33 23 13 12 12",
        "11 22 33 23 13 123",
        "abc",
        "é",
    ],
)
def test_wrong_order_is_refused(text):
    """An order that leaves out or repeats a pair, or names none, is refused with an example."""
    with pytest.raises(
        UsageError, match="is no order of the six index pairs; expected the six pairs, each once, such as"
    ):
        pair_order(text)


@pytest.mark.parametrize("shape", [(6, 3), (3, 3), (3, 3, 3), (18,), ()])
def test_matrix_of_the_wrong_shape_is_refused(shape):
    """A matrix that does not fit the kind is refused with the shape that does."""
    law = parse_law(LAWS["d"])

    with pytest.raises(ShapeError, match=r"does not fit; expected shape \(3, 6\)"):
        from_matrix(np.zeros(shape), law.kind, law.factors)


@pytest.mark.parametrize("factors", [(), (1, 2)])
def test_wrong_number_of_factors_is_refused(factors):
    """There is one factor for each pair."""
    law = parse_law(LAWS["d"])

    with pytest.raises(UsageError, match=f"{len(factors)} factors were given for 1 index pairs"):
        to_matrix(np.zeros((3, 3, 3)), law.kind, factors)


def test_unequal_halves_of_a_pair_are_averaged():
    """A tensor that breaks the symmetry of a pair is written with the mean of both components."""
    law = parse_law(LAWS["e"])
    tensor = np.zeros((3, 3, 3))
    tensor[0, 1, 2], tensor[0, 2, 1] = 1.0, 3.0

    assert to_matrix(tensor, law.kind, law.factors)[0, 3] == 2.0


@pytest.mark.parametrize("text", LAWS.values(), ids=LAWS)
def test_indices_of_every_entry(text):
    """The indices of an entry are those of the tensor component that it writes."""
    law = parse_law(text)
    tensor = random_tensor(law.kind)
    matrix = to_matrix(tensor, law.kind, (1,) * len(law.factors))

    assert all(
        tensor[indices_of_entry(law.kind, place)] == pytest.approx(entry) for place, entry in np.ndenumerate(matrix)
    )


def test_scalar_and_vector_have_no_pairs():
    """Ranks 0 and 1 are written as they are."""
    vector = np.array([1.0, 2.0, 3.0])

    assert to_matrix(vector, TensorKind(1), ()) == pytest.approx(vector)
    assert to_matrix(np.array(5.0), TensorKind(0), ()) == pytest.approx(5.0)
