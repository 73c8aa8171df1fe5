"""Generated groups, kinds, axes and laws."""

from __future__ import annotations

import numpy as np
from hypothesis import assume
from hypothesis import strategies as st

from tensorsym.errors import UsageError
from tensorsym.groups.classes import CLASSES
from tensorsym.groups.point_group import point_group_in_setting
from tensorsym.tensors.kind import TensorKind

SEEDS = st.integers(0, 2**32 - 1)


def groups():
    """Draw a point group in any setting."""
    return st.sampled_from([row.setting for row in CLASSES]).map(point_group_in_setting)


@st.composite
def kinds(draw, max_rank=4):
    """Draw a kind with up to two random signed permutations as index symmetry; contradictions are left out."""
    rank = draw(st.integers(0, max_rank))
    signed = st.tuples(st.permutations(range(rank)).map(tuple), st.sampled_from([1, 1, -1]))
    generators = tuple(draw(st.lists(signed, max_size=2)))
    try:
        return TensorKind(rank, draw(st.booleans()), draw(st.booleans()), generators)
    except UsageError:
        assume(False)  # noqa: FBT003  the way to say that a drawn case does not count


def random_tensor(kind, seed):
    """Return a random tensor with the index symmetry of a kind."""
    tensor = np.random.default_rng(seed).normal(size=(3,) * kind.rank)
    return sum(sign * tensor.transpose(order) for order, sign in kind.index_group) / len(kind.index_group)


def random_axes(seed):
    """Return random right-handed axes."""
    matrix = np.linalg.qr(np.random.default_rng(seed).normal(size=(3, 3)))[0]
    return matrix * np.linalg.det(matrix)
