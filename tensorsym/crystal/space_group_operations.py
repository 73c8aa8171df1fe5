"""Space-group operations from their text, ``-y, x-y, z+1/3``, or from the name of the space group."""

from __future__ import annotations

import re
import warnings
from fractions import Fraction
from functools import lru_cache
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from tensorsym.errors import StructureError, nearest_names

if TYPE_CHECKING:
    from numpy.typing import NDArray

SETTINGS = 530
"""Number of settings in spglib's table of space groups."""

_TERM = re.compile(r"([+-]?)(?:(\d+(?:\.\d*)?|\.\d+)(?:/(\d+))?)?\*?([xyz]?)")
_SMALL = 1e-3
"""Decimal translations this close to a multiple of 1/24 are meant as one (0.3333 for 1/3)."""


class SpaceGroupOperations(NamedTuple):
    """Operations ``x' = W x + w`` on fractional coordinates."""

    rotations: NDArray[np.float64]
    """Shape (n, 3, 3): whole numbers."""
    translations: NDArray[np.float64]
    """Shape (n, 3)."""


def operation_in_text(text: str, where: str) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return W and w of an operation written as coordinates.

    Raises
    ------
    StructureError
        If the text is no operation, or one that changes volumes.

    Examples
    --------
    >>> rotation, translation = operation_in_text("-Y, X-Y, 1/3+Z", "")
    >>> rotation.astype(int).tolist(), translation.round(4).tolist()
    ([[0, -1, 0], [1, -1, 0], [0, 0, 1]], [0.0, 0.0, 0.3333])
    """
    parts = text.lower().replace(" ", "").split(",")
    rotation, translation = np.zeros((3, 3)), np.zeros(3)
    if len(parts) != 3 or not all(_read_coordinate(part, *row) for part, *row in zip(
        parts, rotation, np.split(translation, 3), strict=True
    )):  # fmt: skip
        msg = f"{text!r} is no symmetry operation"
        raise StructureError(msg, where=where, expected="three coordinates such as '-y, x-y, z+1/3'")
    if abs(abs(np.linalg.det(rotation)) - 1.0) > 1e-9:
        msg = f"the operation {text!r} does not keep volumes"
        raise StructureError(msg, where=where)
    return rotation, translation


def operations_of_space_group(name: str, where: str) -> SpaceGroupOperations:
    """Return the operations of a space group given by Hermann-Mauguin or Hall symbol, or by number.

    A name that stands for several settings means the first of them in spglib's table (standard origin choice 1,
    hexagonal axes, unique axis b).

    Raises
    ------
    StructureError
        If the name is unknown.
    """
    names = _settings_by_name()
    plain = _plain(name)
    if plain not in names:
        msg = f"{name!r} is no space group"
        raise StructureError(
            msg, where=where, expected="a Hermann-Mauguin symbol, a Hall symbol or a number from 1 to 230",
            nearest=nearest_names(plain, names), hint="list the symmetry operations in the file",
        )  # fmt: skip
    return _operations_of_setting(names[plain])


@lru_cache(maxsize=64)
def _operations_of_setting(hall_number: int) -> SpaceGroupOperations:
    import spglib

    with warnings.catch_warnings():
        warnings.simplefilter("ignore", DeprecationWarning)
        table = spglib.get_symmetry_from_database(hall_number)
    if table is None:
        msg = f"spglib has no setting {hall_number}"
        raise StructureError(msg)
    return SpaceGroupOperations(table["rotations"].astype(float), table["translations"].astype(float))


@lru_cache(maxsize=1)
def _settings_by_name() -> dict[str, int]:
    """Return the number of the first setting for every name of a space group."""
    import spglib

    found: dict[str, int] = {}
    with warnings.catch_warnings():
        warnings.simplefilter("ignore", DeprecationWarning)
        settings = [spglib.get_spacegroup_type(number) for number in range(1, SETTINGS + 1)]
    for setting in settings:
        if setting is None:
            continue
        symbols = [setting.international_short, setting.international_full, *setting.international.split("=")]
        symbols += [re.sub(r"(?<=\s)1(?=\s|$)", "", symbol.strip()) for symbol in symbols if symbol.count(" ") == 3]
        with_choice = [f"{symbol}:{setting.choice}" for symbol in symbols if setting.choice]
        for name in (*with_choice, setting.hall_symbol, *symbols, str(setting.number)):
            found.setdefault(_plain(name), setting.hall_number)
    return found


def _plain(name: str) -> str:
    return re.sub(r"[\s_'\"]", "", name).lower()


def _read_coordinate(text: str, row: NDArray[np.float64], translation: NDArray[np.float64]) -> bool:
    """Add the terms of one coordinate to a row of W and an entry of w; False if there is anything else."""
    place = 0
    while place < len(text):
        found = _TERM.match(text, place)
        if not found or found.end() == place or not (found[2] or found[4]) or (place and not found[1]):
            return False
        place = found.end()
        size = Fraction(found[2] or 1) / int(found[3] or 1) if found[3] != "0" else None
        if size is None:
            return False
        value = float(-size if found[1] == "-" else size)
        if found[4]:
            row["xyz".index(found[4])] += value
        else:
            translation[0] += _exact(value)
    return bool(text)


def _exact(value: float) -> float:
    """Return the multiple of 1/24 that a rounded decimal stands for, else the number itself."""
    nearest = round(24 * value) / 24
    return nearest if abs(nearest - value) < _SMALL else value
