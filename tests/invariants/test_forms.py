"""Whole forms against the handbooks; the handbooks, recalled, against a floating-point group."""

from __future__ import annotations

from collections import Counter
from fractions import Fraction

import numpy as np
import pytest

from tensorsym.groups.point_group import point_group_in_setting, standard_point_groups
from tensorsym.invariants.relations import matrix_relations
from tensorsym.invariants.solver import invariant_space
from tensorsym.invariants.space import spread_components
from tensorsym.tensors.law import parse_law
from tensorsym.tensors.notation import from_matrix, matrix_shape
from tests.truths.float_groups import float_count, float_group, moved, with_parity
from tests.truths.reading import all_tables, forms

FORMS = [form for table in all_tables() for form in forms(table)]
# Nye names p25 and p52 of 3 and -3 where the order of the digits makes us name p15 and p46; all else is named alike.
NAMED_ALIKE = [form for form in FORMS if not (form.table == "photoelastic" and form.setting in {"3", "-3"})]
WHOLE = [
    table for table in all_tables() if table not in {"piezoelectric_e_ieee", "flexoelectric", "third_order_elastic"}
]
MATRICES = [form for form in FORMS if form.table not in {"hall", "flexoelectric", "third_order_elastic"}]


def law_of(form):
    """Return the law of a table."""
    return parse_law(form.head["law"], form.equations, form.head["regime"])


def pattern(form, law, name):
    """Return the full tensor that has one independent component of a printed matrix equal to 1."""
    matrix = np.zeros(matrix_shape(law.kind))
    for digits, terms in form.entries.items():
        matrix[tuple(int(digit) - 1 for digit in digits)] = float(terms.get(name, 0))
    return matrix if law.kind.rank == 2 else from_matrix(matrix, law.kind, law.factors)


def listed_pattern(form, law, name):
    """Return the full tensor that has one independent component of a printed list equal to 1."""
    space = invariant_space(point_group_in_setting(form.setting), law.kind)
    values = [float(form.entries.get(digits, {}).get(name, 0)) for digits in space.components.digits]
    return (spread_components(law.kind) @ values).reshape((3,) * law.kind.rank)


def printed_tensors(form, law):
    """Return one full tensor for each independent component that the handbook prints."""
    one = pattern if form in MATRICES else listed_pattern
    return np.array([one(form, law, name) for name in form.symbols]).reshape((len(form.symbols), *(3,) * law.kind.rank))


def in_printed_names(terms, printed):
    """Return a combination of our independent components in terms of those that the handbook names."""
    total = Counter()
    for ours, coefficient in terms:
        for name, value in printed[ours].items():
            total[name] += coefficient * value
    return {name: value for name, value in total.items() if value}


@pytest.mark.parametrize("form", FORMS, ids=repr)
def test_form_is_the_printed_one(form):
    """Every component is exactly the combination of independent ones that the handbook prints, zeros included."""
    law = law_of(form)
    space = invariant_space(point_group_in_setting(form.setting), law.kind)
    symbol = form.head["symbol"]
    printed = {symbol + digits: terms for digits, terms in form.entries.items() if digits in space.components.digits}

    found = matrix_relations(space, symbol, law.factors)

    assert {name: in_printed_names(terms, printed) for name, terms in found.items()} == printed


@pytest.mark.parametrize("form", NAMED_ALIKE, ids=repr)
def test_printed_independent_components_are_ours(form):
    """The components named independent are those of the handbook, each standing for itself."""
    law = law_of(form)
    space = invariant_space(point_group_in_setting(form.setting), law.kind)
    symbol = form.head["symbol"]

    assert {symbol + space.components.digits[number] for number in space.free} == set(form.symbols)
    assert all(form.entries[name.removeprefix(symbol)] == {name: Fraction(1)} for name in form.symbols)


@pytest.mark.parametrize("form", FORMS, ids=repr)
def test_printed_form_is_invariant_in_floating_point(form):
    """What is recalled of a handbook holds under matrices built by Rodrigues' formula, so it is no slip of memory."""
    law = law_of(form)
    tensors = printed_tensors(form, law)

    errors = [
        np.abs(with_parity(matrix, law.kind) * moved(tensors, matrix) - tensors).max(initial=0.0)
        for matrix in float_group(form.setting)
    ]

    assert max(errors) < 1e-12


@pytest.mark.parametrize("form", FORMS, ids=repr)
def test_printed_form_is_complete_in_floating_point(form):
    """The handbook's independent components are as many as a floating-point group average leaves."""
    assert len(form.symbols) == float_count(form.setting, law_of(form).kind)


@pytest.mark.parametrize("form", MATRICES, ids=repr)
def test_printed_matrix_has_the_index_symmetry(form):
    """The lower half of a printed matrix agrees with the upper one, with the factors of its shear digits."""
    law = law_of(form)
    tensors = printed_tensors(form, law)

    swapped = [sign * tensors.transpose(0, *(1 + place for place in order)) for order, sign in law.kind.index_group]

    assert max(np.abs(tensor - tensors).max(initial=0.0) for tensor in swapped) == 0


@pytest.mark.parametrize("table", WHOLE)
def test_table_covers_all_classes(table):
    """The tables of ranks 2 to 4 that handbooks print whole leave out none of the 32 classes."""
    covered = {point_group_in_setting(form.setting).hermann_mauguin for form in forms(table)}

    assert covered == {group.hermann_mauguin for group in standard_point_groups()}
