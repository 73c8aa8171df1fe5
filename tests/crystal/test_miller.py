from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.miller import axes_from_directions, directions_in_text
from tensorsym.errors import AxesError

CUBE = np.eye(3)
HEXAGONAL = np.array([[3.0, 0.0, 0.0], [-1.5, 3.0 * 0.75**0.5, 0.0], [0.0, 0.0, 5.0]])
OBLIQUE = np.array([[5.1, 0.0, -0.9], [0.3, 6.2, 0.4], [0.0, 0.0, 7.3]])
BAR = "\u0305"


def unit(*vector):
    """Return a vector divided by its length."""
    return np.array(vector) / np.linalg.norm(vector)


@pytest.mark.parametrize(("text", "normal", "indices"), [
    ("x=[110]", False, (1, 1, 0)), ("x=[1-10]", False, (1, -1, 0)), ("x=[-1-1 0]", False, (-1, -1, 0)),
    ("x=[1 -1 0]", False, (1, -1, 0)), ("x=[1,-1,0]", False, (1, -1, 0)), ("x = ( 0 0 12 )", True, (0, 0, 12)),
    (f"x=[11{BAR}0]", False, (1, -1, 0)), ("x=[1\u22121 0]".replace(" ", ""), False, (1, -1, 0)),
    ("x=[2-1-10]", False, (3, 0, 0)), ("x=(10-10)", True, (1, 0, 0)), ("x=[01-10]", False, (1, 2, 0)),
    ("X=(0001)", True, (0, 0, 1)),
])  # fmt: skip
def test_indices_are_read(text, normal, indices):
    """Three and four indices, compact or parted, with minus signs or bars, are read."""
    found = directions_in_text(f"{text} z=[001]")["x"]

    assert (found.is_normal, found.indices) == (normal, indices)


# Miller and Bravais: [2-1-10] is along a1, [01-10] is 90 degrees from it, (hki0) is normal to [hki0] (common practice).
@pytest.mark.parametrize(("text", "expected"), [
    ("[2-1-10]", (1, 0, 0)), ("[100]", (1, 0, 0)), ("[01-10]", (0, 1, 0)), ("[120]", (0, 1, 0)), ("[0001]", (0, 0, 1)),
    ("(10-10)", (0.75**0.5, 0.5, 0)), ("(01-10)", (0, 1, 0)), ("(0001)", (0, 0, 1)), ("(2-1-10)", (1, 0, 0)),
    ("(11-20)", (0.5, 0.75**0.5, 0)),
])  # fmt: skip
def test_hexagonal_directions_lie_where_they_should(text, expected):
    """Four indices give the directions that everybody means by them."""
    direction = directions_in_text(f"x={text} y=[001]")["x"]

    assert direction.vector(HEXAGONAL) == pytest.approx(expected, abs=1e-12)


@pytest.mark.parametrize("indices", [(1, 0, 0), (0, 1, 0), (1, 1, 2), (1, -2, 3)])
def test_normal_is_perpendicular_to_its_plane(indices):
    """The normal of (hkl) is perpendicular to every [uvw] with hu + kv + lw = 0."""
    h, k, l = indices  # noqa: E741  the letters of the field
    normal = directions_in_text(f"x=({h} {k} {l}) y=[001]")["x"].vector(OBLIQUE)
    in_plane = [(k, -h, 0), (l, 0, -h), (0, l, -k)]

    assert np.abs([np.array(direction) @ OBLIQUE @ normal for direction in in_plane]).max() < 1e-12


@pytest.mark.parametrize(("text", "expected"), [
    ("x=[110] z=(001)", [unit(1, 1, 0), unit(-1, 1, 0), (0, 0, 1)]),
    ("z=(001), x=[110]", [unit(1, 1, 0), unit(-1, 1, 0), (0, 0, 1)]),
    ("x=[100] y=[010]", [(1, 0, 0), (0, 1, 0), (0, 0, 1)]), ("y=[001] z=[100]", [(0, 1, 0), (0, 0, 1), (1, 0, 0)]),
    ("x=[1-10] y=[11-2] z=[111]", [unit(1, -1, 0), unit(1, 1, -2), unit(1, 1, 1)]),
    ("x=[1-10]; z=[111]", [unit(1, -1, 0), unit(1, 1, -2), unit(1, 1, 1)]),
])  # fmt: skip
def test_two_or_three_axes_make_a_right_handed_set(text, expected):
    """The third axis follows from the other two, whichever they are and in whatever order they stand."""
    built = axes_from_directions(directions_in_text(text), CUBE)

    assert built.matrix == pytest.approx(np.array(expected), abs=1e-12)
    assert np.linalg.det(built.matrix) == pytest.approx(1.0)


def test_nearly_perpendicular_axes_are_made_so():
    """Within half a degree the second axis gives way to the first, and the deviation is told."""
    cell = np.array([[1.0, 0, 0], [0.005, 1.0, 0], [0, 0, 1.0]])
    built = axes_from_directions(directions_in_text("x=[100] y=[010]"), cell)

    assert built.matrix == pytest.approx(np.eye(3), abs=1e-12)
    assert built.deviation == pytest.approx(np.degrees(0.005), rel=1e-3)


@pytest.mark.parametrize(("text", "message"), [
    ("x=[100]", "gives one axis only; expected two or three"), ("x=[100] x=[010]", "axis x is given twice"),
    ("x=[000] z=[001]", r"\[000\] .* is no direction"), ("x=[10] z=[001]", "is no direction"),
    ("x=[10000] z=[001]", "is no direction"), ("x=[100) z=[001]", "is no direction"),
    ("x=[] z=[001]", "is no direction"),
    ("x=[1.5 0 0] z=[001]", "is no direction"), ("x=<100> z=[001]", "'x=<100>' in .* is no axis"),
    ("x=[100] w=[001]", "'w=.001.' in .* is no axis"), ("x=[100] z=[001] about", "'about' in .* is no axis"),
    ("x=[2-100] z=[001]", r"first three indices of \[2-100\] add up to 1; expected zero"),
])  # fmt: skip
def test_nonsense_is_refused(text, message):
    """Whatever is no direction is refused with what was expected; these are errors of usage."""
    with pytest.raises(AxesError, match=message) as caught:
        directions_in_text(text)

    assert caught.value.exit_code == 2


@pytest.mark.parametrize(("text", "message"), [
    ("x=[110] y=[100]", r"x=\[110\] and y=\[100\] are 45.00 degrees apart; expected 90 degrees within 0.5"),
    ("x=[100] y=[-100]", "are 180.00 degrees apart"), ("x=[100] z=(100)", "are 0.00 degrees apart"),
    ("x=[010] y=[100] z=[001]", "are left-handed; reverse one of them or leave z out"),
])  # fmt: skip
def test_axes_that_do_not_fit_are_refused(text, message):
    """The error says the angle between the two, or that the hand is wrong."""
    with pytest.raises(AxesError, match=message):
        axes_from_directions(directions_in_text(text), CUBE)
