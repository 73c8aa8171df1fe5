from __future__ import annotations

import numpy as np
import pytest

from tensorsym.invariants.projection import orthonormal_basis, projected
from tensorsym.invariants.solver import invariant_space
from tests.groups.settings import ALL_SETTINGS, setting_of
from tests.invariants.kinds import KINDS
from tests.truths.float_groups import float_group, float_projector, moved, with_parity

UP_TO_FOUR = [
    "vector",
    "magnetisation",
    "rank2",
    "gyration",
    "piezoelectric",
    "hall",
    "cyclic",
    "elastic",
    "photoelastic",
]


@pytest.mark.parametrize("name", UP_TO_FOUR)
@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_exact_basis_spans_what_a_group_average_keeps(group, name):
    """B (B^T B)^-1 B^T on the exact basis is the floating-point average (1/|G|) sum of D(g), for every setting."""
    kind = KINDS[name]
    space = invariant_space(group, kind)
    rows = space.basis().reshape(space.dimension, 3**kind.rank)

    onto_basis = rows.T @ np.linalg.solve(rows @ rows.T, rows) if space.dimension else np.zeros((3**kind.rank,) * 2)

    assert np.abs(onto_basis - float_projector(group.setting, kind)).max() < 1e-12


@pytest.mark.parametrize("name", ["symmetric", "piezoelectric", "elastic", "rank4"])
@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_projection_is_the_average_of_the_images(group, name):
    """The projected tensor is the mean of its images under all operations, and projecting again changes nothing."""
    kind = KINDS[name]
    tensor = np.random.default_rng(2).normal(size=(3,) * kind.rank)
    symmetrised = sum(sign * tensor.transpose(order) for order, sign in kind.index_group) / len(kind.index_group)
    matrices = float_group(group.setting)
    mean = sum(with_parity(matrix, kind) * moved(symmetrised[None], matrix)[0] for matrix in matrices) / len(matrices)
    basis = orthonormal_basis(group, kind)

    once = projected(tensor, basis)

    assert once == pytest.approx(mean, abs=1e-12)
    assert projected(once, basis) == pytest.approx(once, abs=1e-12)
    assert np.sum((tensor - once) * once) == pytest.approx(0.0, abs=1e-10)


@pytest.mark.parametrize("name", KINDS)
def test_basis_is_orthonormal_and_protected(name):
    """Rows are orthonormal, as many as the exact dimension, and cannot be written to."""
    group = next(group for group in ALL_SETTINGS if group.setting == "3m1")
    basis = orthonormal_basis(group, KINDS[name])

    assert basis.shape == (invariant_space(group, KINDS[name]).dimension, 3 ** KINDS[name].rank)
    assert basis @ basis.T == pytest.approx(np.eye(len(basis)), abs=1e-13)
    assert not basis.flags.writeable


def test_nothing_allowed_projects_to_zero():
    """Where nothing is allowed the projection of anything is zero, with its shape kept."""
    group = next(group for group in ALL_SETTINGS if group.setting == "m-3m")
    tensor = np.ones((3, 3, 3))

    assert np.array_equal(projected(tensor, orthonormal_basis(group, KINDS["piezoelectric"])), np.zeros((3, 3, 3)))
