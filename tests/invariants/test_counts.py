"""Numbers of independent components against cited tables, by elimination, by characters and by a floating average."""

from __future__ import annotations

import pytest

from tensorsym.groups.point_group import standard_point_group, standard_point_groups
from tensorsym.invariants.characters import invariant_count
from tensorsym.invariants.solver import invariant_space
from tensorsym.tensors.kind import TensorKind
from tensorsym.tensors.law import parse_law
from tests.truths.float_groups import float_count
from tests.truths.reading import rows

LAWS = {
    "T1": ("P_i = p_i T", (), "equilibrium"),
    "T2": ("M_i = q_i T", (), "equilibrium"),
    "T3": ("D_i = e_ij E_j", (), "equilibrium"),
    "T4": ("E_i = S_ij nabla_j T", (), "transport"),
    "T5": ("P_i = g_ij B_j", ("g_ij = g_ji",), "optical"),
    "T6": ("M_i = a_ij E_j", (), "equilibrium"),
    "T7": ("P_i = d_ijk sigma_jk", (), "equilibrium"),
    "T8": ("M_i = q_ijk sigma_jk", (), "equilibrium"),
    "T9": ("E_i = R_ijk J_j B_k", (), "transport"),
    "T10": ("P_i = d_ijk E_j E_k", (), "optical"),
    "T11": ("sigma_ij = c_ijkl epsilon_kl", (), "equilibrium"),
    "T12": ("eta_ij = p_ijkl epsilon_kl", (), "optical"),
    "T13": ("P_i = f_ijkl nabla_j epsilon_kl", (), "equilibrium"),
    "T14": ("sigma_ij = C_ijklmn epsilon_kl epsilon_mn", (), "equilibrium"),
}
FACTS = [(row["class"], column, int(row[column])) for row in rows("counts.txt") for column in LAWS]
TABLES_D = [tuple(row.values()) for row in rows("international_tables_d.txt")]
SIXTH = TensorKind(6, permutations=(((1, 0, 2, 3, 4, 5), 1), ((1, 2, 3, 4, 5, 0), 1)))


def kind_from(rank, symmetry):
    """Return a polar kind whose index symmetry is written as permutations of the places 1, 2, ..."""
    swaps = [] if symmetry == "-" else symmetry.split(",")
    return TensorKind(int(rank), permutations=tuple((tuple(int(place) - 1 for place in swap), 1) for swap in swaps))


@pytest.mark.parametrize(("name", "column", "count"), FACTS)
def test_count_is_that_of_the_table(name, column, count):
    """Elimination and characters both give the number of the table (counted; agrees with Nye and Brugger)."""
    certificate = invariant_space(standard_point_group(name), parse_law(*LAWS[column]).kind).certificate

    assert (certificate.by_elimination, certificate.by_characters, certificate.agree) == (count, count, True)


@pytest.mark.parametrize(("name", "column", "count"), FACTS)
def test_table_is_counted_again(name, column, count):
    """A floating-point group average, built without the package's groups, gives the number of the table."""
    assert float_count(standard_point_group(name).setting, parse_law(*LAWS[column]).kind) == count


@pytest.mark.parametrize(("place", "name", "rank", "symmetry", "count"), TABLES_D)
def test_count_is_that_of_international_tables(place, name, rank, symmetry, count):
    """The number printed in International Tables (or the paper named) comes out by both roads."""
    certificate = invariant_space(standard_point_group(name), kind_from(rank, symmetry)).certificate

    assert (certificate.by_elimination, certificate.by_characters) == (int(count), int(count)), place


@pytest.mark.parametrize(
    ("name", "count"), [(row["class"], int(row["parameters"])) for row in rows("crystal_field.txt")]
)
def test_totally_symmetric_rank_six_counts_crystal_field_parameters(name, count):
    """Traces peeled off, the totally symmetric tensor of rank 6 holds k = 0 and the parameters with k = 2, 4 and 6."""
    assert invariant_space(standard_point_group(name), SIXTH).dimension == count + 1


@pytest.mark.parametrize(
    ("column", "classes"),
    [("T1", 10), ("T5", 15), ("T7", 20), ("T2", 13), ("T6", 18)],
    ids=["polar", "optically active", "piezoelectric", "axial vector", "axial rank 2"],
)
def test_number_of_classes_with_the_property(column, classes):
    """As many classes allow the property as Nye, appendix B, says: 10 polar, 15 optically active, 20 piezoelectric.

    The axial ones are counted from the same table as all numbers here.
    """
    kind = parse_law(*LAWS[column]).kind

    assert sum(invariant_count(group, kind) > 0 for group in standard_point_groups()) == classes


@pytest.mark.parametrize("group", standard_point_groups(), ids=lambda group: group.hermann_mauguin)
@pytest.mark.parametrize("rank", range(6))
def test_trivial_kinds_of_every_rank(group, rank):
    """Without index symmetry a tensor of any rank has as many invariants as the characters say, and of rank 0 one."""
    certificate = invariant_space(group, TensorKind(rank)).certificate

    assert certificate.agree
    assert rank > 0 or certificate.by_elimination == 1


@pytest.mark.parametrize("group", standard_point_groups(), ids=lambda group: group.hermann_mauguin)
def test_pseudoscalar_lives_in_the_enantiomorphic_classes(group):
    """An axial tensor of rank 0 is allowed exactly where the crystal comes in two hands."""
    assert invariant_space(group, TensorKind(0, axial=True)).dimension == group.is_enantiomorphic


@pytest.mark.parametrize("group", standard_point_groups(), ids=lambda group: group.hermann_mauguin)
@pytest.mark.parametrize("rank", [1, 3, 5])
def test_centre_of_inversion_forbids_odd_ranks(group, rank):
    """No polar tensor of odd rank survives in a centrosymmetric class; in every other class one of rank 5 does."""
    dimension = invariant_space(group, TensorKind(rank)).dimension

    assert dimension == 0 if group.is_centrosymmetric else dimension > 0 or rank < 5


@pytest.mark.parametrize("group", standard_point_groups(), ids=lambda group: group.hermann_mauguin)
def test_traceless_tensor_has_one_component_less(group):
    """The trace of a symmetric tensor of rank 2 is invariant in every class, so leaving it out costs one component."""
    symmetric, traceless = (TensorKind(2, permutations=(((1, 0), 1),), traceless=flag) for flag in (False, True))
    certificate = invariant_space(group, traceless).certificate

    assert certificate.agree
    assert certificate.by_elimination == invariant_count(group, symmetric) - 1
