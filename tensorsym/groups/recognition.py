"""The class of a set of integer rotations in any lattice basis, and the directions of its standard frame.

Everything here is exact: rotations are integer matrices, a class is told by how many operations of each kind it has
(International Tables for Crystallography, vol. A), and directions are lattice directions with integer components.
"""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass
from functools import lru_cache
from itertools import permutations

from tensorsym.errors import GroupSymbolError
from tensorsym.groups.operations import Direction, Matrix, axis_of, symbol_of
from tensorsym.groups.point_group import standard_point_groups


@dataclass(frozen=True, slots=True)
class FrameDirections:
    """Lattice directions that may serve as axes of the standard frame of a class.

    Each candidate is ``(x, y, z)`` with None for an axis that the class leaves free or that follows from the other
    two. All candidates, and any of them with senses reversed, put the group onto the same standard group.
    """

    hermann_mauguin: str
    """Short symbol of the class."""
    candidates: tuple[tuple[Direction | None, Direction | None, Direction | None], ...]
    """Choices of axes in lattice components."""


def class_of_rotations(rotations: frozenset[Matrix]) -> str:
    """Return the short Hermann-Mauguin symbol of the class of a group of integer matrices.

    Raises
    ------
    GroupSymbolError
        If the matrices form none of the 32 classes.

    Examples
    --------
    >>> class_of_rotations(frozenset({((1, 0, 0), (0, 1, 0), (0, 0, 1)), ((-1, 0, 0), (0, -1, 0), (0, 0, 1))}))
    '2'
    """
    counts: Counter[str] = Counter()
    try:
        counts.update(map(symbol_of, rotations))
        return _class_by_counts()[frozenset(counts.items())]
    except KeyError:  # no such class, or a matrix with the trace of no operation
        msg = f"{len(rotations)} rotations form none of the 32 classes ({dict(counts)})"
        raise GroupSymbolError(msg, hint="the cell may be distorted more than the tolerance") from None


@lru_cache(maxsize=4096)
def frame_directions(rotations: frozenset[Matrix]) -> FrameDirections:
    """Return the class of a group of integer matrices and the lattice directions of its standard frame.

    Raises
    ------
    GroupSymbolError
        If the matrices form none of the 32 classes.

    Examples
    --------
    >>> mirror_in_x = ((-1, 0, 0), (0, 1, 0), (0, 0, 1))
    >>> frame_directions(frozenset({((1, 0, 0), (0, 1, 0), (0, 0, 1)), mirror_in_x})).candidates
    ((None, (1, 0, 0), None),)
    """
    symbol = class_of_rotations(rotations)
    axes: dict[str, list[Direction]] = {}
    for matrix in sorted(rotations):
        direction = axis_of(matrix)
        kind = symbol_of(matrix)
        if direction is not None and direction not in axes.setdefault(kind, []):
            axes[kind].append(direction)
    return FrameDirections(symbol, tuple(_candidates(symbol, axes)))


def _candidates(
    symbol: str, axes: dict[str, list[Direction]]
) -> list[tuple[Direction | None, Direction | None, Direction | None]]:
    if symbol in ("1", "-1"):
        return [(None, None, None)]
    if symbol in ("2", "m", "2/m"):
        return [(None, (axes.get("2") or axes["m"])[0], None)]
    if symbol in _THREE_AXES:
        return [(x, None, z) for x, z in permutations(axes[_THREE_AXES[symbol]], 2)]
    if symbol == "mm2":
        return [(x, None, axes["2"][0]) for x in axes["m"]]
    principal = next(axes[kind][0] for kind in ("6", "-6", "4", "-4", "3", "-3") if kind in axes)
    if symbol not in _SECONDARY:
        return [(None, None, principal)]
    return [(x, None, principal) for x in axes[_SECONDARY[symbol]] if x != principal]


_THREE_AXES = {"222": "2", "mmm": "2", "23": "2", "m-3": "2", "432": "4", "-43m": "-4", "m-3m": "4"}
"""Classes whose frame is spanned by three like axes, and the element whose axes they are."""

_SECONDARY = {
    "422": "2", "4mm": "m", "-42m": "2", "4/mmm": "2", "32": "2", "3m": "m", "-3m": "2", "622": "2", "6mm": "m",
    "-62m": "2", "6/mmm": "2",
}  # fmt: skip
"""Uniaxial classes with secondary elements: the element that x lies along or that x is normal to."""


@lru_cache(maxsize=1)
def _class_by_counts() -> dict[frozenset[tuple[str, int]], str]:
    return {
        frozenset(Counter(operation.symbol for operation in group.operations).items()): group.hermann_mauguin
        for group in standard_point_groups()
    }
