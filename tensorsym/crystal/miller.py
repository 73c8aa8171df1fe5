"""Miller notation: directions [uvw] and [uvtw], plane normals (hkl) and (hkil), and axes written with them."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from tensorsym.errors import AxesError

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import NDArray

PERPENDICULAR = 0.5
"""Largest deviation from a right angle, in degrees, between axes in Miller notation."""

NOTEWORTHY = 1e-3
"""Degrees. A larger deviation from a right angle is told."""

EXAMPLE = "two or three of x, y, z, such as 'x=[110] z=(001)'"

_ASSIGNMENT = re.compile(r"([xyz])\s*=\s*([\[(])([^\])=]*)([\])])", re.IGNORECASE)
_MINUS = re.compile("[\u2212\u2013\u2010\u2011]")
_BAR = re.compile("(\\d)[\u0304\u0305]")


class MillerDirection(NamedTuple):
    """A direction of a lattice, or the normal of its planes."""

    is_normal: bool
    """True for the normal of planes."""
    indices: tuple[int, int, int]
    """Three indices, of the direct or of the reciprocal lattice."""
    text: str
    """As it was written."""
    is_hexagonal: bool
    """True when it was written with four indices."""

    def vector(self, cell: NDArray[np.float64]) -> NDArray[np.float64]:
        """Return the unit vector for a cell whose rows are a, b, c, in the axes of the cell."""
        vector = np.linalg.inv(cell) @ self.indices if self.is_normal else self.indices @ cell
        return np.asarray(vector / np.linalg.norm(vector))


class MillerAxes(NamedTuple):
    """Axes built from Miller notation."""

    matrix: NDArray[np.float64]
    """Shape (3, 3): rows are unit x, y, z in the axes of the cell, exactly perpendicular."""
    deviation: float
    """Degrees. Largest deviation of the given directions from right angles."""


def directions_in_text(text: str) -> dict[str, MillerDirection]:
    """Return the directions that a text gives to x, y and z, in its order.

    Raises
    ------
    AxesError
        If an axis is given twice, fewer than two are given, or something else stands in the text.

    Examples
    --------
    >>> {axis: found.indices for axis, found in directions_in_text("x=[2-1-10], z=(0001)").items()}
    {'x': (3, 0, 0), 'z': (0, 0, 1)}
    """
    found: dict[str, MillerDirection] = {}
    rest = text
    for match in _ASSIGNMENT.finditer(text):
        axis = match[1].lower()
        if axis in found:
            msg = f"axis {axis} is given twice in {text!r}"
            raise AxesError(msg, expected=EXAMPLE)
        found[axis] = _direction(match[2], match[3], match[4], text)
        rest = rest.replace(match[0], "", 1)
    if rest.strip(" ,;"):
        msg = f"{rest.strip(' ,;')!r} in {text!r} is no axis"
        raise AxesError(msg, expected=EXAMPLE)
    if len(found) < 2:
        msg = f"{text!r} gives one axis only"
        raise AxesError(msg, expected=EXAMPLE, hint="a second one fixes the turn about the first")
    return found


def axes_from_directions(directions: Mapping[str, MillerDirection], cell: NDArray[np.float64]) -> MillerAxes:
    """Return the axes that two or three directions give in a cell; the first one is kept exactly.

    Raises
    ------
    AxesError
        If two are not perpendicular within `PERPENDICULAR` degrees, or three are left-handed.

    Examples
    --------
    >>> axes_from_directions(directions_in_text("x=[110] z=(001)"), np.eye(3)).matrix.round(4).tolist()
    [[0.7071, 0.7071, 0.0], [-0.7071, 0.7071, 0.0], [0.0, 0.0, 1.0]]
    """
    vectors = {axis: direction.vector(cell) for axis, direction in directions.items()}
    deviation = 0.0
    for one, other in (("x", "y"), ("x", "z"), ("y", "z")):
        if one in vectors and other in vectors:
            angle = float(np.degrees(np.arccos(np.clip(vectors[one] @ vectors[other], -1.0, 1.0))))
            if abs(angle - 90.0) > PERPENDICULAR:
                msg = f"{one}={directions[one].text} and {other}={directions[other].text} are {angle:.2f} degrees apart"
                raise AxesError(
                    msg,
                    expected=f"90 degrees within {PERPENDICULAR}",
                    hint="[uvw] is a direction, (hkl) a plane normal",
                )
            deviation = max(deviation, abs(angle - 90.0))
    first, second = list(vectors)[:2]
    across = vectors[second] - (vectors[first] @ vectors[second]) * vectors[first]
    exact = {first: vectors[first], second: across / np.linalg.norm(across)}
    third = next(axis for axis in "xyz" if axis not in exact)
    after, last = {"x": ("y", "z"), "y": ("z", "x"), "z": ("x", "y")}[third]
    exact[third] = np.cross(exact[after], exact[last])
    if third in vectors and exact[third] @ vectors[third] < 0:
        msg = f"the three axes {', '.join(f'{axis}={directions[axis].text}' for axis in 'xyz')} are left-handed"
        raise AxesError(msg, hint=f"reverse one of them or leave {third} out")
    return MillerAxes(np.array([exact[axis] for axis in "xyz"]), deviation)


def _direction(opening: str, body: str, closing: str, text: str) -> MillerDirection:
    written = opening + body.strip() + closing
    indices = _indices(body)
    if (opening, closing) not in (("[", "]"), ("(", ")")) or len(indices) not in (3, 4) or not any(indices):
        msg = f"{written} in {text!r} is no direction"
        raise AxesError(msg, expected="[uvw] for a direction or (hkl) for the normal of a plane, not all zero")
    is_normal, is_hexagonal = opening == "(", len(indices) == 4
    if is_hexagonal:
        one, two, three, four = indices
        if one + two + three:
            msg = f"the first three indices of {written} add up to {one + two + three}"
            raise AxesError(msg, expected="zero, as for every hexagonal direction or plane")
        indices = [one, two, four] if is_normal else [one - three, two - three, four]
    return MillerDirection(is_normal, (indices[0], indices[1], indices[2]), written, is_hexagonal)


def _indices(body: str) -> list[int]:
    """Return the whole numbers of ``1-10``, ``1 -1 0`` or ``1,-1,0``; an empty list if there is anything else."""
    plain = _MINUS.sub("-", _BAR.sub(r"-\1", body)).strip()
    parts = re.split(r"[\s,]+", plain)
    if len(parts) < 3:
        parts = re.findall(r"[+-]?\d|.", "".join(parts))
    return [int(part) for part in parts] if all(re.fullmatch(r"[+-]?\d{1,3}", part) for part in parts) else []
