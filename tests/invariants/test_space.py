from __future__ import annotations

import numpy as np
import pytest

from tensorsym.groups.point_group import point_group_in_setting, standard_point_groups
from tensorsym.invariants.solver import invariant_space
from tensorsym.invariants.space import Certificate, spread_components
from tests.invariants.kinds import KINDS

GROUPS = standard_point_groups()
CHOSEN = ["symmetric", "magnetoelectric", "piezoelectric", "hall", "cyclic", "elastic"]


@pytest.mark.parametrize("group", GROUPS, ids=lambda group: group.hermann_mauguin)
@pytest.mark.parametrize("name", CHOSEN)
def test_components_are_free_tied_or_zero(group, name):
    """Every component is in one block or vanishes; the independent ones stand for themselves."""
    space = invariant_space(group, KINDS[name])
    blocked = [number for block in space.blocks for number in block.components]

    assert sorted([*blocked, *space.zero]) == list(range(len(space.components.words)))
    assert set(space.expressions) == set(blocked)
    assert all(space.expressions[free] == ((free, 1),) for free in space.free)
    assert all(terms for terms in space.expressions.values())
    assert len(space.free) == space.dimension


@pytest.mark.parametrize("group", GROUPS, ids=lambda group: group.hermann_mauguin)
@pytest.mark.parametrize("name", CHOSEN)
def test_coefficients_write_the_expressions(group, name):
    """Row k of the coefficients is the tensor whose k-th independent component is 1 and all other ones 0."""
    space = invariant_space(group, KINDS[name])
    matrix = space.coefficients()

    assert np.array_equal(matrix[:, list(space.free)], np.eye(space.dimension))
    assert not matrix[:, list(space.zero)].any()
    assert all(
        matrix[:, number] == pytest.approx([float(dict(terms).get(free, 0)) for free in space.free])
        for number, terms in space.expressions.items()
    )


@pytest.mark.parametrize("name", KINDS)
def test_basis_spreads_the_coefficients(name):
    """Full basis tensors hold each component at every word that it fills, with its sign."""
    space = invariant_space(point_group_in_setting("321"), KINDS[name])
    basis = space.basis()

    assert basis.shape == (space.dimension, *(3,) * KINDS[name].rank)
    assert basis.reshape(space.dimension, 3 ** KINDS[name].rank)[:, list(space.components.words)] == pytest.approx(
        space.coefficients()
    )


@pytest.mark.parametrize("name", KINDS)
def test_spread_counts_the_words(name):
    """Spreading fills as many words of a component as its multiplicity says, each with 1 or -1."""
    spread = spread_components(KINDS[name])
    space = invariant_space(point_group_in_setting("1"), KINDS[name])

    assert tuple((spread != 0).sum(axis=0)) == space.components.multiplicity
    assert set(np.unique(spread)) <= {-1.0, 0.0, 1.0}


def test_one_line_says_what_it_is():
    """The short form names the setting, the rank, the dimension and the independent components."""
    space = invariant_space(point_group_in_setting("321"), KINDS["piezoelectric"])

    assert repr(space) == "InvariantSpace(321, rank 3, dimension 2: 11 14)"


def test_short_form_stays_short():
    """With many independent components only the first eight are named."""
    assert len(repr(invariant_space(point_group_in_setting("1"), KINDS["rank4"]))) < 100


def test_certificate_tells_disagreement():
    """Two roads that give different numbers do not agree."""
    assert Certificate(2, 2).agree
    assert not Certificate(2, 3).agree


def test_indices_of_a_component():
    """A component has the indices of the word that stands for it."""
    space = invariant_space(point_group_in_setting("321"), KINDS["piezoelectric"])

    assert [space.indices(number) for number in space.free] == [(0, 0, 0), (0, 1, 2)]
