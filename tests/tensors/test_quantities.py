from __future__ import annotations

import json
from importlib import resources

import pytest

from tensorsym.errors import LawError
from tensorsym.tensors.quantities import quantity_named

DOCUMENT = json.loads(resources.files("tensorsym.tensors").joinpath("quantities.json").read_text(encoding="utf-8"))
NAMES = list(DOCUMENT["quantities"])
CONJUGATE = [(name, other) for name in NAMES for other in quantity_named(name).conjugate]
DRIVEN = [(name, other) for name in NAMES for other in quantity_named(name).driven_by]


@pytest.mark.parametrize(("name", "other"), CONJUGATE)
def test_product_of_conjugates_is_an_energy(name, other):
    """Two conjugate quantities have one rank, and neither inversion nor time reversal changes their product."""
    one, partner = quantity_named(name), quantity_named(other)

    assert one.rank == partner.rank
    assert one.axial == partner.axial
    assert one.time_odd == partner.time_odd
    assert one.symmetric == partner.symmetric


@pytest.mark.parametrize(("name", "other"), CONJUGATE)
def test_voigt_factors_of_conjugates_make_an_energy(name, other):
    """Sum over six digits = sum over nine components: where tensors are symmetric the factors multiply to 2."""
    one, partner = quantity_named(name), quantity_named(other)

    assert one.voigt * partner.voigt == (2 if one.symmetric else 1)


@pytest.mark.parametrize(("name", "other"), DRIVEN)
def test_flux_and_force_dissipate(name, other):
    """A flux times its force is a true scalar that time reversal turns around, as dissipation must."""
    one, partner = quantity_named(name), quantity_named(other)

    assert one.rank == partner.rank
    assert one.axial == partner.axial
    assert one.time_odd != partner.time_odd
    assert name in partner.driven_by


@pytest.mark.parametrize("name", NAMES)
def test_quantity_makes_sense(name):
    """A name answers for itself; only rank 2 is symmetric or has a matrix factor, which is 1 or 2."""
    quantity = quantity_named(name)

    assert quantity.name == name
    assert quantity.title
    assert quantity.rank in (0, 1, 2)
    assert quantity.rank == 2 or not quantity.symmetric
    assert quantity.voigt in ((1, 2) if quantity.symmetric else (1,))


@pytest.mark.parametrize(("alias", "name"), DOCUMENT["aliases"].items())
def test_alias_leads_to_a_quantity(alias, name):
    """Every other name leads to a quantity and hides none."""
    assert quantity_named(alias).name == name
    assert alias not in NAMES


@pytest.mark.parametrize(
    ("name", "rank", "axial", "time_odd"),
    [
        ("E", 1, False, False),
        ("P", 1, False, False),
        ("J", 1, False, True),
        ("B", 1, True, True),
        ("H", 1, True, True),
        ("M", 1, True, True),
        ("nabla", 1, False, False),
        ("q", 1, False, True),
        ("k", 1, False, True),
        ("T", 0, False, False),
        ("sigma", 2, False, False),
        ("epsilon", 2, False, False),
        ("edot", 2, False, True),
        ("theta", 1, True, False),
    ],
)
def test_parity_and_time_behaviour(name, rank, axial, time_odd):
    """Fields and fluxes behave as in Birss, Symmetry and Magnetism (1966), table 1 (memory)."""
    quantity = quantity_named(name)

    assert (quantity.rank, quantity.axial, quantity.time_odd) == (rank, axial, time_odd)


@pytest.mark.parametrize(
    ("copy", "name"), [("E1", "E"), ("E2", "E"), ("E'", "E"), ("sigma3", "sigma"), ("ε", "epsilon")]
)
def test_copies_and_greek_letters(copy, name):
    """A digit or prime makes a copy of a quantity; Greek letters are read."""
    assert quantity_named(copy).name == name


@pytest.mark.parametrize(("name", "nearest"), [("sigm", "sigma"), ("epsilom", "epsilon"), ("nable", "nabla")])
def test_unknown_quantity_offers_the_nearest(name, nearest):
    """A misspelt quantity is refused with the nearest names and the list of all."""
    with pytest.raises(LawError, match=f"'{name}' is no quantity that laws know") as refused:
        quantity_named(name)

    assert nearest in refused.value.nearest
    assert refused.value.hint.startswith("known: ")
