from __future__ import annotations

from math import cos, radians, sin

import pytest

from tensorsym.groups.placement import direction_in_axes, elements_in_words
from tensorsym.groups.point_group import point_group_in_setting
from tests.groups.settings import ALL_SETTINGS, setting_of


@pytest.mark.parametrize(
    ("setting", "words"),
    [
        ("1", "no element"),
        ("-1", "the centre of inversion"),
        ("121", "2 along y"),
        ("112", "2 along z"),
        ("1m1", "m perpendicular to y"),
        ("12/m1", "2 along y, m perpendicular to y"),
        ("mm2", "m perpendicular to x, m perpendicular to y, 2 along z"),
        ("321", "3 along z, 2 along x"),
        ("312", "3 along z, 2 along y"),
        ("3m1", "3 along z, m perpendicular to x"),
        ("31m", "3 along z, m perpendicular to y"),
        ("-42m", "-4 along z, 2 along x, m perpendicular to (1,1,0)"),
        ("-4m2", "-4 along z, m perpendicular to x, 2 along (1,1,0)"),
        ("-62m", "-6 along z, 2 along x, m perpendicular to y"),
        ("-6m2", "-6 along z, m perpendicular to x, 2 along y"),
        ("m-3m", "4 along z, m perpendicular to z, -3 along (1,1,1), m perpendicular to (1,1,0)"),
    ],
)
def test_elements_in_the_standard_frame(setting, words):
    """Where the elements of the symbol lie is said in its order (International Tables, vol. A, memory)."""
    assert elements_in_words(point_group_in_setting(setting)) == words


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_every_setting_has_words_of_its_own(group):
    """No two settings of a class have the same words, so the words tell the setting."""
    same = [other.setting for other in ALL_SETTINGS if elements_in_words(other) == elements_in_words(group)]

    assert same == [group.setting]


@pytest.mark.parametrize(
    ("turn", "words"),
    [
        (((0, 1, 0), (-1, 0, 0), (0, 0, 1)), "3 along z, 2 along y"),
        (((0, 0, 1), (1, 0, 0), (0, 1, 0)), "3 along x, 2 along y"),
        (((1, 0, 0), (0, -1, 0), (0, 0, -1)), "3 along z, 2 along x"),
        (((1, 0, 0), (0, 0, 1), (0, -1, 0)), "3 along y, 2 along x"),
    ],
)
def test_elements_in_renamed_axes(turn, words):
    """In axes that rename x, y, z the elements of class 32 are said along the new names."""
    assert elements_in_words(point_group_in_setting("321"), turn) == words


def test_namer_is_asked_for_skew_directions_only():
    """A direction that is none of the axes is named by the function given; the axes keep their letters."""
    asked = []
    words = elements_in_words(
        point_group_in_setting("-42m"), None, lambda direction: asked.append(direction) or "[110]"
    )

    assert words == "-4 along z, 2 along x, m perpendicular to [110]"
    assert asked == [pytest.approx((0.5**0.5, 0.5**0.5, 0.0))]


@pytest.mark.parametrize(
    ("direction", "words"),
    [
        ((1.0, 0.0, 0.0), "x"),
        ((0.0, 0.0, -1.0), "z"),
        ((1.0, -1.0, 0.0), "(-1,1,0)"),
        ((0.6, 0.0, 0.8), "(3,0,4)"),
        ((1.0, 1.0, -2.0), "(-1,-1,2)"),
        ((cos(radians(10)), sin(radians(10)), 0.0), "(0.985, 0.174, 0.000)"),
        ((cos(radians(10)), -sin(radians(10)), 0.0), "(-0.985, 0.174, 0.000)"),
    ],
)
def test_direction_in_axes(direction, words):
    """A direction is an axis, small whole numbers, or cosines; its last component that does not vanish is positive."""
    assert direction_in_axes(direction) == words
