"""From a symbol as people write it to a point group."""

from __future__ import annotations

import re

from tensorsym.errors import GroupSymbolError, nearest_names
from tensorsym.groups.classes import CLASSES, SAME_SETTING, SPACE_GROUP_RANGES
from tensorsym.groups.point_group import PointGroup, point_group_in_setting

_MINUS = str.maketrans({"−": "-", "–": "-", "‑": "-", "¯": "-", "_": "", " ": "", "{": "", "}": "", "$": ""})
_NUMBER = re.compile(r"(?:no\.?|sg|#)?([0-9]{1,3})", re.IGNORECASE)
_SPACE_GROUPS = 230


def point_group_named(symbol: str) -> PointGroup:
    """Return the point group that a symbol names.

    Parameters
    ----------
    symbol : str
        Hermann-Mauguin symbol, short (``-3m``), full (``-3 2/m``) or of a setting (``-31m``, ``-6m2``, ``112``);
        Schoenflies symbol (``D3d``); or a space-group number (``152``; where the digits are also a class, as in
        ``222``, the class is meant and ``no222`` gives the space group).

    Raises
    ------
    GroupSymbolError
        If the symbol names no point group.

    Examples
    --------
    >>> point_group_named("D3").hermann_mauguin, point_group_named("3 2").setting, point_group_named("152").setting
    ('32', '321', '321')
    """
    plain = _plain(symbol)
    for setting in (plain, SAME_SETTING.get(plain, "")):
        if setting in _SETTINGS:
            return point_group_in_setting(setting)
    if plain in _SCHOENFLIES:
        return point_group_in_setting(_SCHOENFLIES[plain])
    number = _NUMBER.fullmatch(plain)
    if number and 1 <= int(number[1]) <= _SPACE_GROUPS:
        return point_group_of_space_group(int(number[1]))
    known = [row.setting for row in CLASSES] + [row.hermann_mauguin for row in CLASSES] + list(_SCHOENFLIES.values())
    names = dict.fromkeys([*known, *(row.schoenflies for row in CLASSES)])
    msg = f"{symbol!r} is no point group"
    raise GroupSymbolError(
        msg,
        expected="a Hermann-Mauguin or Schoenflies symbol or a space-group number from 1 to 230",
        nearest=nearest_names(plain, names),
    )


def point_group_of_space_group(number: int) -> PointGroup:
    """Return the point group of a space group, in the setting of its standard space-group symbol.

    Raises
    ------
    GroupSymbolError
        If the number is not from 1 to 230.

    Examples
    --------
    >>> point_group_of_space_group(149).setting
    '312'
    """
    for last, setting in SPACE_GROUP_RANGES:
        if 1 <= number <= last:
            return point_group_in_setting(setting)
    msg = f"{number} is no space-group number"
    raise GroupSymbolError(msg, expected=f"1 to {_SPACE_GROUPS}")


def _plain(symbol: str) -> str:
    r"""Return the symbol in lower case with a leading minus for every bar, without blanks.

    >>> _plain("3\u0305m"), _plain(r"\bar{3} 2/m")
    ('-3m', '-32/m')
    """
    text = re.sub(r"(\d)[\u0304\u0305]", r"-\1", symbol)
    return re.sub(r"\\bar|\\overline", "-", text).translate(_MINUS).lower()


_SETTINGS = {row.setting for row in CLASSES}
_SCHOENFLIES: dict[str, str] = {}
for _row in CLASSES:
    _SCHOENFLIES.setdefault(_row.schoenflies.lower(), _row.setting)
