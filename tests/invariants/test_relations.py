from __future__ import annotations

from fractions import Fraction

import pytest

from tensorsym.catalog.properties import property_named
from tensorsym.groups.point_group import point_group_in_setting
from tensorsym.invariants.relations import combination_text, component_names, matrix_factor, matrix_relations
from tensorsym.invariants.solver import invariant_space
from tensorsym.tensors.kind import TensorKind
from tensorsym.tensors.law import parse_law
from tensorsym.tensors.words import word_of
from tests.truths.reading import linear, rows


@pytest.mark.parametrize(
    ("setting", "name", "component", "expression"), [tuple(row.values()) for row in rows("relations.txt")]
)
def test_relation_that_is_often_wrong(setting, name, component, expression):
    """Relations with the factors of matrix notation are those of Nye, for the named property of the catalogue."""
    row = property_named(name)
    space = invariant_space(point_group_in_setting(setting), row.kind)

    relations = matrix_relations(space, component[0], row.factors)

    assert dict(relations[component]) == linear(expression)


@pytest.mark.parametrize(
    ("combination", "text"),
    [
        ((), "0"),
        ((("d11", Fraction(1)),), "d11"),
        ((("d11", Fraction(-1)),), "-d11"),
        ((("d11", Fraction(-2)),), "-2 d11"),
        ((("c14", Fraction(1, 2)),), "c14/2"),
        ((("c14", Fraction(-3, 2)),), "-3 c14/2"),
        ((("c11", Fraction(1, 2)), ("c12", Fraction(-1, 2))), "(c11 - c12)/2"),
        ((("s11", Fraction(2)), ("s12", Fraction(-2))), "2 (s11 - s12)"),
        ((("C111", Fraction(1)), ("C222", Fraction(-1)), ("C112", Fraction(1))), "C111 - C222 + C112"),
        (
            (("C111", Fraction(-1, 2)), ("C112", Fraction(-1, 4)), ("C222", Fraction(3, 4))),
            "(-2 C111 - C112 + 3 C222)/4",
        ),
        ((("d14", -(3**0.5) / 2),), "-sqrt(3)/2 d14"),
        ((("d14", 2 * 3**0.5),), "2 sqrt(3) d14"),
        ((("d11", 0.25), ("d14", -(3**0.5) / 4)), "d11/4 - sqrt(3)/4 d14"),
        ((("d11", 0.75), ("d14", -0.5)), "(3 d11 - 2 d14)/4"),
        ((("d11", 0.123456789),), "0.123457 d11"),
    ],
)
def test_combination_reads_like_a_handbook(combination, text):
    """A combination is written with one denominator and one common factor, roots where the value is one."""
    assert combination_text(combination) == text


@pytest.mark.parametrize(
    ("text", "indices", "factor"),
    [
        ("epsilon_ij = s_ijkl sigma_kl", (0, 0, 1, 1), 1),
        ("epsilon_ij = s_ijkl sigma_kl", (0, 0, 1, 2), 2),
        ("epsilon_ij = s_ijkl sigma_kl", (0, 1, 0, 2), 4),
        ("sigma_ij = c_ijkl epsilon_kl", (0, 1, 0, 2), 1),
        ("P_i = d_ijk sigma_jk", (1, 1, 2), 2),
        ("P_i = d_ijk sigma_jk", (1, 2, 2), 1),
        ("P_i = e_ijk epsilon_jk", (1, 1, 2), 1),
        ("sigma_ij = C_ijklmn epsilon_kl epsilon_mn", (0, 1, 0, 1, 0, 1), 1),
    ],
)
def test_matrix_factor(text, indices, factor):
    """Compliance has 1, 2 and 4, d has 2 on its shear digits, stiffness and e have none (Nye, ch. VIII; memory)."""
    law = parse_law(text)

    assert matrix_factor(law.kind, law.factors, word_of(indices)) == factor


def test_names_follow_the_digits():
    """Names are the symbol and the digits, pairs as one digit, in the order of preference."""
    space = invariant_space(point_group_in_setting("321"), TensorKind(3, permutations=(((0, 2, 1), 1),)))

    assert component_names(space, "d")[:6] == ("d11", "d22", "d33", "d12", "d13", "d14")


def test_vanishing_components_have_no_relation():
    """Only allowed components are listed: a component is either in a relation or in the zeros, never in both."""
    law = parse_law("P_i = d_ijk sigma_jk")
    space = invariant_space(point_group_in_setting("321"), law.kind)
    names = component_names(space, "d")

    relations = set(matrix_relations(space, "d", law.factors))

    assert relations == {"d11", "d12", "d14", "d25", "d26"}
    assert relations | {names[number] for number in space.zero} == set(names)
    assert len(relations) + len(space.zero) == len(names)
