"""The settings that the tests of this room run over."""

from __future__ import annotations

from tensorsym.groups.classes import CLASSES
from tensorsym.groups.point_group import point_group_in_setting, standard_point_groups

ALL_SETTINGS = [point_group_in_setting(row.setting) for row in CLASSES]
STANDARD = list(standard_point_groups())


def setting_of(group):
    """Return the name of a case."""
    return group.setting
