"""What must hold for any group and any kind."""

from __future__ import annotations

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from tensorsym.groups.point_group import point_group_in_setting
from tensorsym.invariants.axes import space_in_axes
from tensorsym.invariants.characters import invariant_count
from tensorsym.invariants.projection import orthonormal_basis, projected
from tensorsym.invariants.solver import invariant_space
from tensorsym.tensors.axes import turned
from tests.groups.settings import ALL_SETTINGS
from tests.properties.strategies import SEEDS, groups, kinds, random_axes, random_tensor
from tests.truths.float_groups import as_set, float_count, float_group, moved, with_parity

CLOSE = 1e-11


def subgroups():
    """Return all pairs of settings of which the first, in the same axes, is a proper subgroup of the second."""
    sets = {group.setting: as_set(float_group(group.setting)) for group in ALL_SETTINGS}
    return [(small, large) for small in sets for large in sets if sets[small] < sets[large]]


SUBGROUPS = subgroups()


@given(groups(), kinds(), SEEDS)
def test_allowed_tensor_is_left_alone(group, kind, seed):
    """A random combination of the basis is unchanged under every operation of the group."""
    space = invariant_space(group, kind)
    tensor = np.tensordot(np.random.default_rng(seed).normal(size=space.dimension), space.basis(), axes=1)

    for matrix in float_group(group.setting):
        assert np.abs(with_parity(matrix, kind) * moved(tensor[None], matrix)[0] - tensor).max() < CLOSE


@given(groups(), kinds(), SEEDS)
def test_allowed_tensor_has_the_index_symmetry(group, kind, seed):
    """A random combination of the basis satisfies every index equation exactly."""
    space = invariant_space(group, kind)
    tensor = np.tensordot(np.random.default_rng(seed).normal(size=space.dimension), space.basis(), axes=1)

    assert all(np.array_equal(sign * tensor.transpose(order), tensor) for order, sign in kind.index_group)


@settings(max_examples=120)
@given(groups(), kinds() | kinds(max_rank=5))
def test_three_roads_to_the_dimension(group, kind):
    """Elimination, characters and the rank of a floating-point average agree for any index symmetry."""
    dimension = invariant_space(group, kind).dimension

    assert dimension == invariant_count(group, kind) == float_count(group.setting, kind)


@given(groups(), kinds(), SEEDS)
def test_projected_tensor_passes(group, kind, seed):
    """The projection of any tensor is allowed: projecting again changes nothing, and what is left is perpendicular."""
    tensor = random_tensor(kind, seed)
    basis = orthonormal_basis(group, kind)

    once = projected(tensor, basis)

    assert np.abs(projected(once, basis) - once).max() < CLOSE
    assert abs(np.sum((tensor - once) * once)) < CLOSE
    assert np.linalg.norm(once) <= np.linalg.norm(tensor) + CLOSE


@given(groups(), kinds(), SEEDS)
def test_projected_tensor_is_given_by_its_independent_components(group, kind, seed):
    """The independent components of an allowed tensor give all its components."""
    space = invariant_space(group, kind)
    tensor = projected(random_tensor(kind, seed), orthonormal_basis(group, kind))
    values = tensor.ravel()[[space.components.words[number] for number in space.free]]

    assert np.abs(np.tensordot(values, space.basis(), axes=1) - tensor).max() < CLOSE


@settings(max_examples=200)
@given(st.sampled_from(SUBGROUPS), kinds())
def test_subgroup_allows_at_least_as_much(pair, kind):
    """What a group allows, each of its subgroups allows too."""
    small, large = pair
    space = invariant_space(point_group_in_setting(large), kind)
    basis = orthonormal_basis(point_group_in_setting(small), kind)
    tensors = space.basis()

    assert len(basis) >= space.dimension
    for tensor in tensors:
        assert np.abs(projected(tensor, basis) - tensor).max() < CLOSE


def test_pairs_of_groups_are_many():
    """The pairs of a group and a subgroup in the same axes include the well-known ones."""
    assert {("321", "622"), ("23", "m-3m"), ("121", "222"), ("-4", "-42m"), ("mm2", "4mm"), ("1", "m-3m")} <= set(
        SUBGROUPS
    )


@given(groups(), kinds(max_rank=3), SEEDS)
def test_axes_there_and_back(group, kind, seed):
    """An allowed tensor, written in random axes by the space there and turned back, is the tensor it was."""
    space, axes = invariant_space(group, kind), random_axes(seed)
    here = space_in_axes(space, axes)
    tensor = projected(random_tensor(kind, seed), orthonormal_basis(group, kind))
    there = turned(tensor, axes)
    values = there.ravel()[[here.components.words[number] for number in here.free]]

    rebuilt = np.tensordot(values, here.basis(), axes=1)

    assert here.dimension == space.dimension
    assert np.abs(turned(rebuilt, axes.T) - tensor).max() < 1e-4


@given(groups(), kinds())
def test_relations_are_exact(group, kind):
    """Every coefficient of a relation is a Fraction, and the certificate agrees."""
    space = invariant_space(group, kind)

    assert all(type(value).__name__ == "Fraction" for terms in space.expressions.values() for _, value in terms)
    assert space.certificate.agree
