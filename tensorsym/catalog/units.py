"""Which property a unit means: names of the field such as ``piezoelectric`` stand for several coefficients.

d in C/N, e in C/m^2, g in V m/N and h in V/m are all called piezoelectric coefficients, but their matrices carry
different factors on shear. The unit decides.
"""

from __future__ import annotations

from functools import lru_cache
from typing import Any

from tensorsym.catalog.properties import Property, all_properties


def property_in_unit(row: Property, unit: str | None) -> Property:
    """Return the property of the same family and kind whose dimension the unit has; the row itself when none has.

    Parameters
    ----------
    row : Property
        The property as named.
    unit : str, optional
        The unit of the numbers.

    Examples
    --------
    >>> from tensorsym.catalog.properties import property_named
    >>> property_in_unit(property_named("piezoelectric"), "C/m^2").name
    'piezoelectric-stress'
    >>> property_in_unit(property_named("elastic"), "1/GPa").name
    'elastic-compliance'
    """
    if unit is None or unit == row.unit:
        return row
    dimension = _dimension(unit)
    if dimension is None or dimension == _dimension(row.unit):
        return row
    family = row.name.split("-")[0]
    for other in all_properties():
        same = other.name.split("-")[0] == family and other.kind == row.kind
        if same and _dimension(other.unit) == dimension:
            return other
    return row


@lru_cache(maxsize=512)
def _dimension(unit: str) -> Any:
    """Return the dimension of a unit, None when it is no unit that pint knows."""
    import pint

    try:
        return _registry()(unit).dimensionality if unit != "1" else _registry()("").dimensionality
    except (pint.errors.PintError, AttributeError, ValueError, TypeError):
        return None


@lru_cache(maxsize=1)
def _registry() -> Any:
    import pint

    return pint.UnitRegistry()
