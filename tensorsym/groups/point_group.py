"""Point groups: a symbol, its elements in the standard frame, and every operation that they generate."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

from tensorsym.groups.classes import CLASSES, ClassRow
from tensorsym.groups.operations import IDENTITY, Basis, Direction, Matrix, Operation

_DIRECTIONS: dict[Basis, dict[str, Direction]] = {
    Basis.CARTESIAN: {
        "x": (1, 0, 0), "y": (0, 1, 0), "z": (0, 0, 1), "xy": (1, 1, 0), "yx": (1, -1, 0), "xyz": (1, 1, 1),
    },
    Basis.HEXAGONAL: {"x": (1, 0, 0), "y": (1, 2, 0), "z": (0, 0, 1)},
}  # fmt: skip

_TURNS: dict[tuple[Basis, str, str], Matrix] = {
    (Basis.CARTESIAN, "2", "x"): ((1, 0, 0), (0, -1, 0), (0, 0, -1)),
    (Basis.CARTESIAN, "2", "y"): ((-1, 0, 0), (0, 1, 0), (0, 0, -1)),
    (Basis.CARTESIAN, "2", "z"): ((-1, 0, 0), (0, -1, 0), (0, 0, 1)),
    (Basis.CARTESIAN, "2", "xy"): ((0, 1, 0), (1, 0, 0), (0, 0, -1)),
    (Basis.CARTESIAN, "4", "z"): ((0, -1, 0), (1, 0, 0), (0, 0, 1)),
    (Basis.CARTESIAN, "3", "xyz"): ((0, 0, 1), (1, 0, 0), (0, 1, 0)),
    (Basis.HEXAGONAL, "2", "x"): ((1, -1, 0), (0, -1, 0), (0, 0, -1)),
    (Basis.HEXAGONAL, "2", "y"): ((-1, 1, 0), (0, 1, 0), (0, 0, -1)),
    (Basis.HEXAGONAL, "2", "z"): ((-1, 0, 0), (0, -1, 0), (0, 0, 1)),
    (Basis.HEXAGONAL, "3", "z"): ((0, -1, 0), (1, -1, 0), (0, 0, 1)),
    (Basis.HEXAGONAL, "6", "z"): ((1, -1, 0), (1, 0, 0), (0, 0, 1)),
}
"""Proper part of every element that a row of `CLASSES` names, as a matrix in its basis."""


@dataclass(frozen=True, slots=True)
class PointGroup:
    """A crystal class in one setting of the standard frame: z principal, x secondary, monoclinic unique axis y.

    Groups compare and hash by their setting.
    """

    setting: str
    """Symbol that tells where the elements lie, such as ``321``."""
    hermann_mauguin: str
    """Short Hermann-Mauguin symbol of the class, such as ``32``."""
    schoenflies: str
    """Schoenflies symbol, such as ``D3``."""
    system: str
    """Crystal system in lower case."""
    basis: Basis
    """Basis of the operations."""
    generators: tuple[Operation, ...]
    """Elements of the symbol that generate the group."""
    elements: tuple[Operation, ...]
    """All elements that the symbol names, the generators first."""

    def __hash__(self) -> int:
        """Hash by the setting, which names the group; groups are keys of caches."""
        return hash(self.setting)

    @property
    def operations(self) -> tuple[Operation, ...]:
        """Every operation of the group, the identity first."""
        return _closure(self.basis, self.generators)

    @property
    def order(self) -> int:
        """Number of operations."""
        return len(self.operations)

    @property
    def is_enantiomorphic(self) -> bool:
        """True when every operation is a turn, so that the crystal comes in two hands."""
        return all(operation.determinant > 0 for operation in self.operations)

    @property
    def is_centrosymmetric(self) -> bool:
        """True when the inversion is in the group."""
        return any(operation.symbol == "-1" for operation in self.operations)


def point_group_in_setting(setting: str) -> PointGroup:
    """Return the point group of a setting.

    >>> point_group_in_setting("3m1").elements[1].words
    'mirror perpendicular to x'
    """
    return _groups()[setting]


def standard_point_group(hermann_mauguin: str) -> PointGroup:
    """Return the class with this short symbol in its standard setting.

    >>> standard_point_group("2").setting
    '121'
    """
    return next(group for group in _groups().values() if group.hermann_mauguin == hermann_mauguin)


def standard_point_groups() -> tuple[PointGroup, ...]:
    """Return the 32 classes, each in its standard setting.

    >>> len(standard_point_groups())
    32
    """
    first: dict[str, PointGroup] = {}
    for group in _groups().values():
        first.setdefault(group.hermann_mauguin, group)
    return tuple(first.values())


@lru_cache(maxsize=1)
def _groups() -> dict[str, PointGroup]:
    return {row.setting: _built(row) for row in CLASSES}


def _built(row: ClassRow) -> PointGroup:
    basis = Basis.HEXAGONAL if row.system in ("trigonal", "hexagonal") else Basis.CARTESIAN
    generating, _, named = row.elements.partition("|")
    generators = tuple(_element(text, basis) for text in generating.split())
    others = tuple(_element(text, basis) for text in named.split())
    return PointGroup(
        row.setting, row.hermann_mauguin, row.schoenflies, row.system, basis, generators, generators + others
    )


def _element(text: str, basis: Basis) -> Operation:
    symbol, _, direction = text.partition(":")
    if symbol == "-1":
        return Operation(_inverted(IDENTITY), basis)
    if symbol == "m":
        return Operation(_inverted(_TURNS[basis, "2", direction]), basis)
    if symbol.startswith("-"):
        return Operation(_inverted(_TURNS[basis, symbol[1:], direction]), basis)
    return Operation(_TURNS[basis, symbol, direction], basis)


def _inverted(matrix: Matrix) -> Matrix:
    return tuple(tuple(-entry for entry in row) for row in matrix)  # type: ignore[return-value]


@lru_cache(maxsize=256)
def _closure(basis: Basis, generators: tuple[Operation, ...]) -> tuple[Operation, ...]:
    identity = Operation(IDENTITY, basis)
    found = {identity: None}
    waiting = [identity]
    while waiting:
        operation = waiting.pop(0)
        for generator in generators:
            image = generator @ operation
            if image not in found:
                found[image] = None
                waiting.append(image)
    return tuple(found)
