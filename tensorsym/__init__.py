"""Tensor properties of the real crystal: what symmetry allows, and numbers held to it.

Every name below is loaded when it is first used, so that ``import tensorsym`` costs nothing.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from tensorsym.catalog.properties import Property as Property
    from tensorsym.catalog.properties import all_properties as all_properties
    from tensorsym.catalog.properties import property_named as property_named
    from tensorsym.errors import TensorsymError as TensorsymError
    from tensorsym.groups.symbols import point_group_named as point_group_named
    from tensorsym.tasks.allowed import AllowedForm as AllowedForm
    from tensorsym.tasks.allowed import allowed as allowed
    from tensorsym.tasks.check import TensorVerdict as TensorVerdict
    from tensorsym.tasks.check import check_tensor as check_tensor
    from tensorsym.tasks.check_file import CheckReport as CheckReport
    from tensorsym.tasks.check_file import check_file as check_file
    from tensorsym.tasks.studied import StudiedCrystal as StudiedCrystal
    from tensorsym.tasks.studied import from_ase as from_ase
    from tensorsym.tasks.studied import from_pymatgen as from_pymatgen
    from tensorsym.tasks.studied import read as read
    from tensorsym.tensors.law import parse_law as parse_law

_HOMES = {
    "AllowedForm": "tensorsym.tasks.allowed",
    "CheckReport": "tensorsym.tasks.check_file",
    "Property": "tensorsym.catalog.properties",
    "StudiedCrystal": "tensorsym.tasks.studied",
    "TensorVerdict": "tensorsym.tasks.check",
    "TensorsymError": "tensorsym.errors",
    "all_properties": "tensorsym.catalog.properties",
    "allowed": "tensorsym.tasks.allowed",
    "check_file": "tensorsym.tasks.check_file",
    "check_tensor": "tensorsym.tasks.check",
    "from_ase": "tensorsym.tasks.studied",
    "from_pymatgen": "tensorsym.tasks.studied",
    "parse_law": "tensorsym.tensors.law",
    "point_group_named": "tensorsym.groups.symbols",
    "property_named": "tensorsym.catalog.properties",
    "read": "tensorsym.tasks.studied",
}

__all__ = sorted(_HOMES)  # noqa: PLE0605  the table is the list


def __getattr__(name: str) -> Any:
    """Load a public name from its room."""
    if name in _HOMES:
        value = getattr(import_module(_HOMES[name]), name)
        globals()[name] = value
        return value
    msg = f"module 'tensorsym' has no attribute {name!r}"
    raise AttributeError(msg)


def __dir__() -> list[str]:
    return list(__all__)
