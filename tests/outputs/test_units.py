from __future__ import annotations

import time

import pytest

from tensorsym.catalog.properties import all_properties, property_named
from tensorsym.outputs.units import FORMS, fits, property_in_unit


@pytest.mark.parametrize("row", all_properties(), ids=lambda row: row.name)
def test_unit_of_the_catalogue_fits(row):
    """The unit that the catalogue gives a property fits it, and raises no note."""
    assert fits(row.unit, row)
    assert property_in_unit(row.name, row.unit) == (row, row.unit, ())
    assert property_in_unit(row.name, None) == (row, row.unit, ())


@pytest.mark.parametrize(
    ("name", "unit"),
    [
        ("elastic-stiffness", "kbar"), ("elastic-stiffness", "kBar"), ("elastic-stiffness", "10^10 N/m^2"),
        ("elastic-stiffness", "GPa"), ("elastic-stiffness", "dyn/cm^2"), ("elastic-compliance", "1/TPa"),
        ("elastic-compliance", "TPa^-1"), ("piezoelectric", "pm/V"), ("piezoelectric", "10^-12 C/N"),
        ("piezoelectric", "pC/N"), ("piezoelectric-stress", "C/m2"), ("piezoelectric-stress", "uC/cm^2"),
        ("dielectric", "1"), ("dielectric", "dimensionless"), ("born-charge", "|e|"), ("born-charge", "e"),
        ("efg", "V/Å^2"), ("efg", "V/angstrom^2"), ("thermal-expansion", "1e-6/K"), ("thermal-expansion", "ppm/K"),
        ("displacement-ellipsoid", "Å^2"), ("conductivity", "S/cm"), ("chemical-shift", "ppm"),
    ],
)  # fmt: skip
def test_usual_spellings_fit(name, unit):
    """The spellings that files use are understood (common practice)."""
    assert fits(unit, property_named(name))


@pytest.mark.parametrize(
    ("name", "unit", "expected"),
    [
        ("piezoelectric", "C/m^2", "piezoelectric-stress"),
        ("piezoelectric", "pC/N", "piezoelectric"),
        ("Piezoelectric", "m^2/C", "piezoelectric-voltage"),
        ("piezoelectric", "GV/m", "piezoelectric-stiffness"),
        ("elastic", "1/TPa", "elastic-compliance"),
        ("elastic tensor", "GPa", "elastic-stiffness"),
    ],
)
def test_unit_decides_the_form(name, unit, expected):
    """A general name becomes the form that has the unit's dimension (IEEE Std 176-1987: d, e, g, h)."""
    assert property_in_unit(name, unit)[0].name == expected


@pytest.mark.parametrize(
    ("name", "unit"),
    [("piezoelectric-strain", "C/m^2"), ("elastic-stiffness", "1/TPa"), ("dielectric", "F/m"), ("hyperfine", "mT")],
)
def test_particular_name_is_kept_with_a_note(name, unit):
    """A particular name is not changed by its unit; that the unit is another is told."""
    row, kept, notes = property_in_unit(name, unit)

    if name in FORMS:
        pytest.fail("a general name")
    assert row == property_named(name)
    assert kept == unit
    assert "symmetry cannot tell" in notes[0] or "says that this is" in notes[0]


@pytest.mark.parametrize("unit", ["arb. u.", "a.u.", "Rydberg a.u.", "(D/angstrom)^2/amu (", "$", "'''", "x" * 500])
def test_unknown_unit_is_let_through(unit):
    """A unit that nobody knows is kept without a word: there is nothing to hold it against."""
    assert property_in_unit("raman", unit)[1:] == (unit, ())


@pytest.mark.parametrize("unit", ["10^9^9^9", "9^(9*9^9)", "m**99999999999", "10**10**10", "((((((((((((1))))))))))))"])
def test_malicious_unit_costs_nothing(unit):
    """Towers of powers are not worked out."""
    start = time.perf_counter()
    fits(unit, property_named("dielectric"))

    assert time.perf_counter() - start < 2.0
