"""Units as files state them: whether they fit a property, and which of its forms they decide.

Symmetry cannot see a unit, so one that does not fit is told and not refused: the trade gives a hyperfine coupling in
MHz, mT and cm^-1 alike. But strain-like and stress-like forms differ by factors of 2 in matrix notation, and there the
unit is what tells them apart.
"""

from __future__ import annotations

import re
from functools import lru_cache
from typing import TYPE_CHECKING, Any

from tensorsym.catalog.properties import property_named

if TYPE_CHECKING:
    from tensorsym.catalog.properties import Property

FORMS = {
    "piezoelectric": ("piezoelectric", "piezoelectric-stress", "piezoelectric-voltage", "piezoelectric-stiffness"),
    "elastic": ("elastic-stiffness", "elastic-compliance"),
    "elasticity": ("elastic-stiffness", "elastic-compliance"),
    "elastic-tensor": ("elastic-stiffness", "elastic-compliance"),
    "elastic-constants": ("elastic-stiffness", "elastic-compliance"),
}
"""Names that stand for several properties, and these, the usual one first."""

LONGEST = 60
"""Most characters of a unit that is looked at."""

_RISKY = re.compile(r"(?:\^|\*\*)\s*(?:\(|-?\d{4}|[^\s*/]*(?:\^|\*\*))|a\.\s*u")
"""Powers that would take for ever, and atomic units, which are a different unit for every quantity."""

_SPELLINGS = (("Å", "angstrom"), ("Angst", "angstrom"), ("GP^-1", "GPa^-1"), ("kBar", "kbar"), ("|e|", "e"), ("µ", "u"))
_POWER = re.compile(r"(?<=[A-Za-z])(?=-?\d)")


def property_in_unit(name: str, unit: str | None) -> tuple[Property, str, tuple[str, ...]]:
    """Return the property that a name and a unit mean together, its unit, and what the reader has to know.

    Parameters
    ----------
    name : str
        Name as the file or the user gives it.
    unit : str or None
        Unit as given; None or empty stands for that of the catalogue.

    Raises
    ------
    UnknownNameError
        If the name is no property.

    Examples
    --------
    >>> row, unit, notes = property_in_unit("piezoelectric", "C/m^2")
    >>> row.name, unit
    ('piezoelectric-stress', 'C/m^2')
    >>> notes
    ('the unit C/m^2 says that this is piezoelectric-stress, not piezoelectric (C/N)',)
    """
    row = property_named(name)
    if not unit or unit == row.unit:
        return row, row.unit, ()
    fitting = fits(unit, row)
    if fitting is False:
        for form in FORMS.get("-".join(name.casefold().replace("_", " ").split()), ()):
            other = property_named(form)
            if fits(unit, other):
                note = f"the unit {unit} says that this is {other.name}, not {row.name} ({row.unit})"
                return other, unit, (note,)
        return row, unit, (f"the unit {unit} is none of {row.name} ({row.unit}); symmetry cannot tell",)
    return row, unit, ()


def fits(unit: str, row: Property) -> bool | None:
    """Return whether a unit has the dimension of a property; None when the unit is not known.

    >>> fits("GPa", property_named("elastic-stiffness")), fits("GPa", property_named("piezoelectric"))
    (True, False)
    >>> fits("arbitrary units", property_named("dielectric")) is None
    True
    """
    given, expected = _dimension(unit), _dimension(row.unit)
    return None if given is None or expected is None else given == expected


@lru_cache(maxsize=256)
def _dimension(unit: str) -> Any:
    """Return the dimension of a unit as pint tells it, None when pint does not know the unit."""
    import pint

    text = unit.strip()
    for spelling, known in _SPELLINGS:
        text = text.replace(spelling, known)
    if len(text) > LONGEST or _RISKY.search(text):
        return None
    if re.fullmatch(r"(?:\d[\d.eE^+-]*)?", text):
        return _registry().dimensionless.dimensionality
    words = [_POWER.sub("^", word) if word[-1:].isdigit() and "^" not in word else word for word in text.split()]
    try:
        return _registry().parse_expression(" * ".join(words).replace("* / *", "/")).dimensionality
    except (pint.PintError, AttributeError, TypeError, ValueError, SyntaxError, ArithmeticError, AssertionError):
        return None
    except Exception as error:  # pint hands on what Python's own tokenizer raises for text that is no expression
        if type(error).__module__ == "tokenize":
            return None
        raise


@lru_cache(maxsize=1)
def _registry() -> Any:
    import pint

    return pint.UnitRegistry()
