from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tensorsym.errors import AxesError
from tensorsym.tensors.axes import Axes, axes_from_matrix, read_only, turned

QUARTER = np.array([[0.0, 1.0, 0.0], [-1.0, 0.0, 0.0], [0.0, 0.0, 1.0]])
SEEDS = st.integers(0, 2**32 - 1)


def orthogonal(generator):
    """Return a random orthogonal matrix of either hand."""
    return np.linalg.qr(generator.normal(size=(3, 3)))[0]


@given(SEEDS)
def test_vector_is_multiplied_by_the_matrix(seed):
    """A vector turns as the matrix times it."""
    generator = np.random.default_rng(seed)
    vector, matrix = generator.normal(size=3), orthogonal(generator)

    assert turned(vector, matrix) == pytest.approx(matrix @ vector, abs=1e-13)


@given(SEEDS)
def test_rank_two_is_multiplied_on_both_sides(seed):
    """A tensor of rank 2 turns as M T M^T."""
    generator = np.random.default_rng(seed)
    tensor, matrix = generator.normal(size=(3, 3)), orthogonal(generator)

    assert turned(tensor, matrix) == pytest.approx(matrix @ tensor @ matrix.T, abs=1e-13)


@given(SEEDS)
def test_rank_four_is_the_full_sum(seed):
    """A tensor of rank 4 turns as the sum over all four indices, written out for numpy.einsum."""
    generator = np.random.default_rng(seed)
    tensor, m = generator.normal(size=(3,) * 4), orthogonal(generator)

    assert turned(tensor, m) == pytest.approx(np.einsum("ia,jb,kc,ld,abcd->ijkl", m, m, m, m, tensor), abs=1e-12)


@given(SEEDS, st.integers(0, 5))
def test_two_turns_are_one(seed, rank):
    """Turning by one matrix and then another is turning by their product."""
    generator = np.random.default_rng(seed)
    tensor, one, other = generator.normal(size=(3,) * rank), orthogonal(generator), orthogonal(generator)

    assert turned(turned(tensor, one), other) == pytest.approx(turned(tensor, other @ one), abs=1e-11)


@given(SEEDS, st.integers(0, 5))
def test_there_and_back(seed, rank):
    """The transposed matrix undoes a turn, and the length of the tensor is kept."""
    generator = np.random.default_rng(seed)
    tensor, matrix = generator.normal(size=(3,) * rank), orthogonal(generator)
    there = turned(tensor, matrix)

    assert turned(there, matrix.T) == pytest.approx(tensor, abs=1e-11)
    assert np.linalg.norm(there) == pytest.approx(np.linalg.norm(tensor), rel=1e-12)


def test_turn_leaves_its_argument_alone():
    """The array that is turned keeps its values."""
    tensor = np.arange(27.0).reshape(3, 3, 3)

    turned(tensor, QUARTER)

    assert np.array_equal(tensor, np.arange(27.0).reshape(3, 3, 3))


def test_new_axes_are_the_rows():
    """A vector along the first row has the new components 1, 0, 0."""
    assert turned(QUARTER[0], QUARTER) == pytest.approx([1.0, 0.0, 0.0])


def test_axes_are_kept_with_their_name_and_words():
    """Axes carry name, matrix and words, and cannot be written to."""
    axes = axes_from_matrix("mine", QUARTER.tolist(), "x along [010]")

    assert (axes.name, axes.words) == ("mine", "x along [010]")
    assert np.array_equal(axes.matrix, QUARTER)
    assert repr(axes) == "Axes(mine: x along [010])"
    with pytest.raises(ValueError, match="read-only"):
        axes.matrix[0, 0] = 1.0


def test_words_may_be_found_later():
    """Words given as a function are asked for when they are read."""
    asked = []
    axes = Axes("file", np.eye(3), lambda: asked.append(1) or "x along a")

    assert not asked
    assert axes.words == "x along a"


@pytest.mark.parametrize("tilt", [1e-9, 5e-7])
def test_small_rounding_is_made_orthogonal(tilt):
    """Rows within the tolerance are accepted and made orthogonal to rounding."""
    matrix = axes_from_matrix("mine", np.eye(3) + tilt * np.array([[0, 1, 0], [0, 0, 0], [0, 0, 0]]), "").matrix

    assert np.abs(matrix @ matrix.T - np.eye(3)).max() < 1e-15
    assert np.abs(matrix - np.eye(3)).max() < tilt


@pytest.mark.parametrize(
    ("matrix", "message"),
    [
        (
            np.diag([1.0, 1.0, 1.1]),
            "not perpendicular unit vectors .*; expected orthogonal within 1e-06; give more digits",
        ),
        (np.ones((3, 3)), "not perpendicular unit vectors"),
        (np.zeros((3, 3)), "not perpendicular unit vectors"),
        (np.eye(3)[[1, 0, 2]], "left-handed; reverse one row"),
        (-np.eye(3), "left-handed"),
        (np.eye(2), r"a matrix of shape \(2, 2\) gives no axes; expected 3 rows of 3 finite numbers"),
        (np.full((3, 3), math.nan), "gives no axes"),
        ([[math.inf, 0, 0], [0, 1, 0], [0, 0, 1]], "gives no axes"),
        ([[1, 0, 0], [0, 1, 0], [0, 1]], "a 3x3 matrix of numbers"),
        ("x y z", "a 3x3 matrix of numbers"),
        ([["a", "b", "c"]] * 3, "a 3x3 matrix of numbers"),
        (None, "gives no axes|a 3x3 matrix of numbers"),
        ([], "gives no axes"),
    ],
)
def test_matrix_that_gives_no_axes_is_refused(matrix, message):
    """A matrix of the wrong shape, with numbers that are none, skew or left-handed, is refused with the reason."""
    with pytest.raises(AxesError, match=message):
        axes_from_matrix("mine", matrix, "")


def test_read_only_has_no_negative_zero():
    """A read-only copy shows 0 for -0, is C-ordered and leaves its source alone."""
    source = np.array([[-0.0, 1.0], [2.0, 3.0]], order="F")

    copy = read_only(source)

    assert not np.signbit(copy[0, 0])
    assert np.signbit(source[0, 0])
    assert copy.flags.c_contiguous
    assert not copy.flags.writeable
