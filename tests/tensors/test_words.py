from __future__ import annotations

from itertools import product

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tensorsym.tensors.kind import TensorKind
from tensorsym.tensors.words import PAIR_DIGIT, components_of, digits_of, indices_of, word_of

ELASTIC = TensorKind(4, permutations=(((1, 0, 2, 3), 1), ((2, 3, 0, 1), 1)))
STRAIN_MODULI = TensorKind(3, permutations=(((0, 2, 1), 1),))
ANTISYMMETRIC = TensorKind(2, permutations=(((1, 0), -1),))
THIRD = TensorKind(6, permutations=(((1, 0, 2, 3, 4, 5), 1), ((2, 3, 0, 1, 4, 5), 1), ((0, 1, 4, 5, 2, 3), 1)))
FOURTH = TensorKind(8, permutations=(
    ((1, 0, 2, 3, 4, 5, 6, 7), 1), ((2, 3, 0, 1, 4, 5, 6, 7), 1), ((2, 3, 4, 5, 6, 7, 0, 1), 1),
))  # fmt: skip
TOTAL = TensorKind(4, permutations=(((1, 2, 3, 0), 1), ((1, 0, 2, 3), 1)))
KINDS = [TensorKind(0), TensorKind(1), TensorKind(3), ANTISYMMETRIC, STRAIN_MODULI, ELASTIC, TOTAL, THIRD]


@pytest.mark.parametrize(
    ("kind", "count"),
    [
        (TensorKind(0), 1),
        (TensorKind(2), 9),
        (TensorKind(2, permutations=(((1, 0), 1),)), 6),
        (ANTISYMMETRIC, 3),
        (STRAIN_MODULI, 18),
        (TensorKind(4, permutations=(((1, 0, 2, 3), 1), ((0, 1, 3, 2), 1))), 36),
        (ELASTIC, 21),
        (TOTAL, 15),
        (THIRD, 56),
        (FOURTH, 126),
        (TensorKind(3, permutations=(((1, 0, 2), -1), ((0, 2, 1), -1))), 1),
        (TensorKind(4, permutations=(((1, 0, 2, 3), -1), ((0, 2, 1, 3), -1), ((0, 1, 3, 2), -1))), 0),
    ],
)
def test_number_of_components_without_a_crystal(kind, count):
    """The kinds of the handbooks have 1, 9, 6, 3, 18, 36, 21, 15, 56 and 126 components (combinations, counted)."""
    assert len(components_of(kind).words) == count


@pytest.mark.parametrize("kind", KINDS)
def test_components_cover_every_word_once(kind):
    """Each word belongs to one component or to none, and the multiplicities add up to the words that do not vanish."""
    components = components_of(kind)

    members = [components.of_word.count(number) for number in range(len(components.words))]
    assert tuple(members) == components.multiplicity
    assert sum(members) == sum(sign != 0 for sign in components.sign)
    assert len(components.of_word) == 3**kind.rank


@pytest.mark.parametrize("kind", KINDS)
def test_signs_obey_the_index_symmetry(kind):
    """A tensor spread from its components satisfies every equation of the index group."""
    components = components_of(kind)
    numbers = np.arange(1.0, len(components.words) + 1)
    values = [sign * (numbers[number] if number >= 0 else 0.0) for number, sign in
              zip(components.of_word, components.sign, strict=True)]  # fmt: skip
    tensor = np.array(values).reshape((3,) * kind.rank)

    assert all(np.array_equal(tensor, sign * tensor.transpose(order)) for order, sign in kind.index_group)


@pytest.mark.parametrize("kind", KINDS)
def test_representative_word_stands_for_itself(kind):
    """Every component is named by one of its own words, with the sign 1, and no two share a name."""
    components = components_of(kind)

    assert [components.of_word[word] for word in components.words] == list(range(len(components.words)))
    assert all(components.sign[word] == 1 for word in components.words)
    assert len(set(components.digits)) == len(components.digits)


@pytest.mark.parametrize(
    ("kind", "digits"),
    [
        (TensorKind(2, permutations=(((1, 0), 1),)), "11 22 33 12 13 23"),
        (TensorKind(2), "11 22 33 12 13 21 23 31 32"),
        (ANTISYMMETRIC, "12 13 23"),
        (STRAIN_MODULI, "11 22 33 12 13 14 15 16 21 23 24 25 26 31 32 34 35 36"),
        (ELASTIC, "11 22 33 12 13 14 15 16 23 24 25 26 34 35 36 44 45 46 55 56 66"),
    ],
)
def test_names_and_order_of_preference(kind, digits):
    """Components with equal indices come first, the others by their digits, upper halves named (handbook practice)."""
    assert " ".join(components_of(kind).digits) == digits


def test_third_order_names_are_sorted():
    """Third-order constants are named by increasing digits, as Brugger 1965 does (memory)."""
    digits = components_of(THIRD).digits

    assert all(list(name) == sorted(name) for name in digits)
    assert {"111", "123", "144", "456", "666"} <= set(digits)


@given(st.integers(0, 6).flatmap(lambda rank: st.tuples(*[st.integers(0, 2)] * rank)))
def test_words_and_indices_are_inverse(indices):
    """A word made of indices gives them back."""
    assert indices_of(word_of(indices), len(indices)) == tuple(indices)


def test_words_count_in_the_order_of_arrays():
    """Word n is the n-th component of a C-ordered array of the same rank."""
    order = [word_of(indices) for indices in product(range(3), repeat=4)]

    assert order == list(range(81))


@pytest.mark.parametrize(
    ("pair", "digit"),
    [
        ((0, 0), 1),
        ((1, 1), 2),
        ((2, 2), 3),
        ((1, 2), 4),
        ((2, 1), 4),
        ((0, 2), 5),
        ((2, 0), 5),
        ((0, 1), 6),
        ((1, 0), 6),
    ],
)
def test_digit_of_a_pair(pair, digit):
    """Pairs are numbered 11 22 33 23 13 12 (IEEE Std 176-1987, table 1; memory)."""
    assert PAIR_DIGIT[pair[0]][pair[1]] == digit
    assert digits_of((0, *pair), (1,)) == (1, digit)


def test_digits_without_pairs():
    """Indices outside pairs keep their own digits from 1 to 3."""
    assert digits_of((2, 0, 1, 1), ()) == (3, 1, 2, 2)
