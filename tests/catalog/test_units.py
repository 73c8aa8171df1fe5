"""Units of the catalogue against the dimensions of the quantities in each law."""

from __future__ import annotations

import pint
import pytest

from tensorsym.catalog.properties import all_properties
from tensorsym.tensors.quantities import quantity_named

UNITS = pint.UnitRegistry()
DIMENSIONS = {
    "T": "K",
    "S": "J m^-3 K^-1",
    "p": "Pa",
    "Q": "1",
    "n": "m^-3",
    "U": "J m^-3",
    "W": "1",
    "w": "W m^-3",
    "E": "V/m",
    "D": "C m^-2",
    "P": "C m^-2",
    "J": "A m^-2",
    "q": "W m^-2",
    "N": "m^-2 s^-1",
    "nabla": "m^-1",
    "F": "N",
    "u": "m",
    "k": "m^-1",
    "l": "1",
    "B": "T",
    "H": "A/m",
    "M": "A/m",
    "s": "m^-3",
    "m": "1",
    "tau": "A",
    "K": "W m^-2",
    "Js": "A m^-2",
    "sigma": "Pa",
    "epsilon": "1",
    "edot": "s^-1",
    "eta": "1",
    "chi": "1",
    "G": "1",
}
OF_A_SITE = {"U": "J", "P": "C m", "M": "A m^2"}
CONSTANTS = {"epsilon0": "F/m", "mu0": "H/m", "hbar": "J s"}
BY_CONVENTION = {
    "deformation-potential": "energy of a band, not per volume",
    "effective-mass": "energy of a band, not per volume",
    "magnetic-anisotropy": "M a unit vector",
    "magnetic-anisotropy-fourth": "M a unit vector",
    "g-tensor": "in Bohr magnetons",
    "hyperfine": "energy over Planck's constant",
    "zero-field-splitting": "energy over Planck's constant",
    "chemical-shift": "relative to the free nucleus",
    "knight-shift": "relative to the free nucleus",
}


def unit_of_the_law(row):
    """Return left side over sources and constants, in SI."""
    table = DIMENSIONS | OF_A_SITE if row.site else DIMENSIONS
    unit = UNITS(table[row.parsed.left.name])
    for source in row.parsed.sources:
        unit = unit / UNITS(table[source.name])
    left, right = (text.split() for text in row.law.split("="))
    for name, constant in CONSTANTS.items():
        unit = unit * UNITS(constant) ** (left.count(name) - right.count(name))
    return UNITS.Quantity(1.0) * unit


@pytest.mark.parametrize(
    "row", [row for row in all_properties() if row.name not in BY_CONVENTION], ids=lambda row: row.name
)
def test_unit_is_that_of_the_law(row):
    """Left side over sources has the dimension of the unit printed, and the unit is SI: no power of ten is lost."""
    expected = unit_of_the_law(row).to_base_units()
    stated = (UNITS.Quantity(1.0) * UNITS(row.unit)).to_base_units()

    assert stated.dimensionality == expected.dimensionality
    assert row.unit == "e" or stated.magnitude == pytest.approx(expected.magnitude)


@pytest.mark.parametrize("name", BY_CONVENTION)
def test_exception_is_one(name):
    """A row excused from its law's dimension does differ from it, so the list of excuses stays short."""
    row = next(row for row in all_properties() if row.name == name)

    assert (UNITS.Quantity(1.0) * UNITS(row.unit)).dimensionality != unit_of_the_law(row).dimensionality


@pytest.mark.parametrize("name", sorted(DIMENSIONS))
def test_quantity_is_known(name):
    """The dimensions above are of quantities that laws know."""
    assert quantity_named(name).name == name
