from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tensorsym.exact.orbits import Move, phased_orbits


@pytest.mark.parametrize(
    ("size", "moves", "modulus", "orbit", "phase", "first"),
    [
        pytest.param(3, [], 2, (0, 1, 2), (0, 0, 0), (0, 1, 2), id="no moves, every word alone"),
        pytest.param(0, [], 2, (), (), (), id="no words"),
        pytest.param(2, [Move([1, 0], [0, 0])], 2, (0, 0), (0, 0), (0,), id="a swap joins two words"),
        pytest.param(2, [Move([1, 0], [1, 1])], 2, (0, 0), (0, 1), (0,), id="a swap with a sign"),
        pytest.param(2, [Move([1, 0], [0, 1])], 2, (-1, -1), None, (), id="a swap that comes back with a sign"),
        pytest.param(
            3, [Move([0, 1, 2], [0, 1, 0])], 2, (0, -1, 1), None, (0, 2), id="a sign on a fixed word kills it"
        ),
        pytest.param(
            3, [Move([1, 2, 0], [2, 2, 2])], 6, (0, 0, 0), (0, 2, 4), (0,), id="a third of a turn on each step"
        ),
        pytest.param(
            3, [Move([1, 2, 0], [1, 1, 1])], 6, (-1, -1, -1), None, (), id="a closed walk that gathers a half"
        ),
        pytest.param(
            4,
            [Move([1, 0, 2, 3], [0] * 4), Move([0, 1, 3, 2], [0] * 4), Move([0, 1, 2, 3], [0, 0, 1, 1])],
            2,
            (0, 0, -1, -1),
            None,
            (0,),
            id="one orbit lives, the other dies",
        ),
        pytest.param(
            4,
            [Move([1, 0, 3, 2], [0, 0, 1, 1]), Move([2, 3, 0, 1], [0, 0, 0, 0])],
            2,
            (-1,) * 4,
            None,
            (),
            id="two signs that disagree",
        ),
    ],
)
def test_orbits_of_hand_made_moves(size, moves, modulus, orbit, phase, first):
    """Words that moves join share an orbit with the gathered phase; a closed walk with a phase kills the orbit."""
    found = phased_orbits(size, moves, modulus)

    assert found.orbit == orbit
    assert found.first == first
    assert phase is None or found.phase == phase


def test_dead_orbits_are_not_numbered():
    """Surviving orbits are numbered from 0 without gaps, in the order of their first words."""
    killing = Move([0, 1, 2, 3, 4], [1, 0, 1, 0, 0])
    joining = Move([0, 4, 2, 3, 1], [0, 0, 0, 0, 0])

    found = phased_orbits(5, [killing, joining], 2)

    assert found.orbit == (-1, 0, -1, 1, 0)
    assert found.first == (1, 3)


@st.composite
def moves_with_modulus(draw):
    """Draw a size, a modulus and up to three moves."""
    size = draw(st.integers(1, 7))
    modulus = draw(st.sampled_from([1, 2, 3, 6]))
    phases = st.lists(st.integers(0, modulus - 1), min_size=size, max_size=size)
    move = st.builds(Move, st.permutations(range(size)), phases)
    return size, modulus, draw(st.lists(move, max_size=3))


@given(moves_with_modulus())
def test_orbits_span_the_common_fixed_vectors(case):
    """The indicator vectors with their phases are fixed by every move, and numpy finds no more fixed vectors."""
    size, modulus, moves = case
    found = phased_orbits(size, moves, modulus)
    vectors = np.zeros((len(found.first), size), dtype=complex)
    for word, orbit in enumerate(found.orbit):
        if orbit >= 0:
            vectors[orbit, word] = np.exp(2j * np.pi * found.phase[word] / modulus)

    stacked = np.zeros((1, size), dtype=complex)
    for move in moves:
        action = np.zeros((size, size), dtype=complex)
        action[list(move.images), range(size)] = np.exp(2j * np.pi * np.array(move.phases) / modulus)
        stacked = np.vstack([stacked, action - np.eye(size)])

    assert np.abs(stacked @ vectors.T).max(initial=0.0) < 1e-12
    assert len(vectors) == size - np.linalg.matrix_rank(stacked, tol=1e-9)
