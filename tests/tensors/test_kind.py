from __future__ import annotations

from itertools import permutations, product

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tensorsym.errors import UsageError
from tensorsym.tensors.kind import MAX_RANK, TensorKind

SWAP = (((1, 0), 1),)


@pytest.mark.parametrize(
    ("rank", "generators", "order"),
    [
        (0, (), 1),
        (3, (), 1),
        (2, SWAP, 2),
        (3, (((0, 2, 1), 1),), 2),
        (3, (((1, 2, 0), 1),), 3),
        (3, (((1, 0, 2), 1), ((0, 2, 1), 1)), 6),
        (4, (((1, 0, 2, 3), 1), ((0, 1, 3, 2), 1)), 4),
        (4, (((1, 0, 2, 3), 1), ((2, 3, 0, 1), 1)), 8),
        (4, (((1, 2, 3, 0), 1), ((1, 0, 2, 3), 1)), 24),
        (6, (((1, 0, 2, 3, 4, 5), 1), ((2, 3, 0, 1, 4, 5), 1), ((0, 1, 4, 5, 2, 3), 1)), 48),
        (8, (((1, 0, 2, 3, 4, 5, 6, 7), 1), ((2, 3, 4, 5, 6, 7, 0, 1), 1), ((2, 3, 0, 1, 4, 5, 6, 7), 1)), 384),
    ],
    ids=[
        "scalar",
        "none",
        "symmetric",
        "d",
        "cyclic",
        "total",
        "photoelastic",
        "elastic",
        "total 4",
        "third",
        "fourth",
    ],
)
def test_order_of_the_index_group(rank, generators, order):
    """The generators of a handbook's index symmetry give a group of the order that combinatorics says."""
    group = TensorKind(rank, permutations=generators).index_group

    assert len(group) == order
    assert group[0] == (tuple(range(rank)), 1)


@st.composite
def signed_permutations(draw):
    """Draw a rank and up to two signed permutations of its indices."""
    rank = draw(st.integers(1, 4))
    signed = st.tuples(st.permutations(range(rank)).map(tuple), st.sampled_from([1, -1]))
    return rank, tuple(draw(st.lists(signed, max_size=2)))


def only_zero_is_left(rank, generators):
    """Tell, by numpy, whether the index equations force every component to vanish."""
    words = np.arange(3**rank).reshape((3,) * rank)
    equations = [np.eye(3**rank) - sign * np.eye(3**rank)[words.transpose(order).ravel()] for order, sign in generators]
    return bool(equations) and np.linalg.matrix_rank(np.vstack(equations)) == 3**rank


@given(signed_permutations())
def test_index_group_is_closed_or_refused(case):
    """Generators give a group closed under products with its signs, or are refused and then leave only zero."""
    rank, generators = case
    try:
        signs = dict(TensorKind(rank, permutations=generators).index_group)
    except UsageError as refused:
        assert "contradict one another" in refused.message  # noqa: PT017  either outcome is right in its place
        assert only_zero_is_left(rank, generators)
        return
    assert set(generators) <= set(signs.items())
    assert all(
        signs[tuple(one[place] for place in other)] == signs[one] * signs[other]
        for one, other in product(signs, repeat=2)
    )


@pytest.mark.parametrize(
    ("rank", "generators"),
    [
        (2, (((1, 0), 1), ((1, 0), -1))),
        (3, (((1, 2, 0), -1),)),
        (2, (((0, 1), -1),)),
        (3, (((1, 0, 2), 1), ((0, 2, 1), 1), ((2, 1, 0), -1))),
        (3, (((1, 0, 2), 1), ((0, 2, 1), -1))),
    ],
    ids=["both signs", "odd cycle", "minus itself", "mixed", "symmetric and antisymmetric"],
)
def test_contradiction_is_refused_at_once(rank, generators):
    """Index equations that leave only zero are refused when the kind is made, with what to look at."""
    with pytest.raises(UsageError, match="contradict one another, so that every component vanishes; check their signs"):
        TensorKind(rank, permutations=generators)


@pytest.mark.parametrize("rank", [-1, MAX_RANK + 1, 100])
def test_rank_out_of_range_is_refused(rank):
    """The rank is from 0 to 10."""
    with pytest.raises(UsageError, match=f"rank {rank} is out of range; expected a rank from 0 to 10"):
        TensorKind(rank)


@pytest.mark.parametrize(
    "generator", [((0, 1), 1), ((0, 1, 1), 1), ((0, 1, 3), 1), ((1, 2, 3), 1), ((0, 2, 1), 0), ((0, 2, 1), 2)]
)
def test_generator_that_does_not_fit_is_refused(generator):
    """A generator is a permutation of all indices with the sign 1 or -1."""
    with pytest.raises(UsageError, match="is no signed permutation of 3 indices"):
        TensorKind(3, permutations=(generator,))


@pytest.mark.parametrize("kind", [{"rank": 2}, {"rank": 2, "permutations": (((1, 0), -1),)}, {"rank": 0}, {"rank": 3}])
def test_traceless_needs_a_symmetric_matrix(kind):
    """Only a symmetric tensor of rank 2 has a trace to leave out."""
    with pytest.raises(UsageError, match="only a symmetric tensor of rank 2 can be declared traceless"):
        TensorKind(**kind, traceless=True)


@pytest.mark.parametrize(
    ("rank", "generators", "pairs"),
    [
        (2, SWAP, ()),
        (3, (((0, 2, 1), 1),), (1,)),
        (3, (((1, 0, 2), 1),), (0,)),
        (3, (((1, 0, 2), -1),), ()),
        (3, (((2, 1, 0), 1),), ()),
        (3, (((1, 0, 2), 1), ((0, 2, 1), 1)), ()),
        (4, (((1, 0, 2, 3), 1), ((0, 1, 3, 2), 1)), (0, 2)),
        (4, (((0, 1, 3, 2), 1),), (2,)),
        (4, (((0, 2, 1, 3), 1),), (1,)),
        (4, (((2, 3, 0, 1), 1),), ()),
        (5, (((0, 2, 1, 3, 4), 1), ((0, 1, 2, 4, 3), 1)), (1, 3)),
    ],
)
def test_pairs_are_neighbours_symmetric_with_each_other_only(rank, generators, pairs):
    """Matrix notation joins two neighbouring indices that exchange with one another and with no third."""
    assert TensorKind(rank, permutations=generators).pairs == pairs


def test_generators_of_one_group_give_one_group():
    """Two sets of generators of the same symmetry give the same signed permutations."""
    one = TensorKind(3, permutations=(((1, 0, 2), 1), ((0, 2, 1), 1)))
    other = TensorKind(3, permutations=(((1, 2, 0), 1), ((2, 1, 0), 1)))

    assert set(one.index_group) == set(other.index_group) == {(order, 1) for order in permutations(range(3))}
