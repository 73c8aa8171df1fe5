"""Where the elements of a group lie in given axes, in words."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from tensorsym.groups.operations import Operation
    from tensorsym.groups.point_group import PointGroup

Rows = tuple[tuple[float, ...], ...]
"""Three rows: the unit vectors of the axes in the standard frame."""

_SHARP = 1e-3
_LARGEST_INDEX = 4


def element_in_words(element: Operation, turn: Rows | None = None, namer: Callable[..., str] | None = None) -> str:
    """Return an element with its direction, such as ``2 along x`` or ``m perpendicular to (1,1,0)``.

    Parameters
    ----------
    element : Operation
        An operation in the standard frame.
    turn : 3 rows of 3 numbers, optional
        Unit vectors of the axes in the standard frame; None for the standard frame itself.
    namer : callable, optional
        Names a direction of the standard frame that is none of these axes.

    Examples
    --------
    >>> from tensorsym.groups.symbols import point_group_named
    >>> element_in_words(point_group_named("3m").elements[1], ((0, 1, 0), (-1, 0, 0), (0, 0, 1)))
    'm perpendicular to y'
    """
    direction = element.cartesian_direction()
    if direction is None:
        return "the centre of inversion" if element.symbol == "-1" else "no element"
    placed = direction if turn is None else [sum(row[k] * direction[k] for k in range(3)) for row in turn]
    where = direction_in_axes(placed)
    if namer is not None and where not in ("x", "y", "z"):
        where = namer(direction)
    return f"m perpendicular to {where}" if element.symbol == "m" else f"{element.symbol} along {where}"


def elements_in_words(group: PointGroup, turn: Rows | None = None, namer: Callable[..., str] | None = None) -> str:
    """Return where all elements of the group's symbol lie.

    >>> from tensorsym.groups.symbols import point_group_named
    >>> elements_in_words(point_group_named("32"))
    '3 along z, 2 along x'
    """
    return ", ".join(element_in_words(element, turn, namer) for element in group.elements) or "no element"


def direction_in_axes(direction: Sequence[float]) -> str:
    """Return x, y or z, else small whole numbers, else the direction cosines.

    >>> direction_in_axes((0.0, -1.0, 0.0)), direction_in_axes((0.7071, 0.7071, 0.0)), direction_in_axes((0.6, 0.8, 0))
    ('y', '(1,1,0)', '(3,4,0)')
    """
    last = next(component for component in reversed(direction) if abs(component) > _SHARP)
    sense = 1 if last > 0 else -1
    smallest = min(abs(component) for component in direction if abs(component) > _SHARP)
    for multiple in range(1, _LARGEST_INDEX):
        scaled = [sense * multiple * component / smallest for component in direction]
        if all(abs(value - round(value)) < _SHARP * multiple / smallest for value in scaled):
            whole = tuple(round(value) for value in scaled)
            if max(map(abs, whole)) > _LARGEST_INDEX:
                break
            axes = {"1,0,0": "x", "0,1,0": "y", "0,0,1": "z"}
            return axes.get(",".join(map(str, whole)), "(" + ",".join(map(str, whole)) + ")")
    return "(" + ", ".join(f"{sense * component + 0.0:.3f}" for component in direction) + ")"
