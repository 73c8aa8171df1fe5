from __future__ import annotations

import re

import pytest

from tensorsym.catalog.properties import Property, all_properties, properties_matching, property_named
from tensorsym.errors import UnknownNameError
from tensorsym.tensors.law import REGIMES

ROWS = all_properties()
SPELLINGS = [(text, row.name) for row in ROWS for text in (row.name, *row.aliases)]
HARM = {
    "high voltage": (
        "pyroelectric electrocaloric piezoelectric converse-piezoelectric electrostriction pockels kerr flexoelectric"
        " piezo-electro-optic third-order-dielectric electrogyration"
    ),
    "laser": (
        "second-harmonic sum-frequency third-harmonic pockels kerr photoelastic piezo-optic optical-activity raman"
        " hyper-raman faraday cotton-mouton photogalvanic-linear photogalvanic-circular photon-drag"
        " optical-rectification"
    ),
    "magnet": (
        "hall nernst ettingshausen righi-leduc magnetoresistance faraday cotton-mouton magnetostriction piezomagnetic"
        " magnetoelectric g-tensor hyperfine zero-field-splitting chemical-shift efg knight-shift"
    ),
    "cryogen": "heat-capacity superfluid-stiffness elastoresistance hall magnetoresistance",
    "pressure": "hydrostatic-piezoelectric linear-compressibility optical-pressure third-order-elastic",
    "furnace": "thermal-expansion diffusion electromigration",
    "radiation": "displacement-ellipsoid anharmonic-displacement quartic-displacement",
}
CAUTIONS = sorted({text for row in ROWS for text in row.cautions})

each_row = pytest.mark.parametrize("row", ROWS, ids=lambda row: row.name)


def test_catalogue_is_long_enough():
    """The catalogue holds the 70 properties that are promised, of every rank from 0 to 6, and rank 8."""
    assert len(ROWS) >= 70
    assert {row.kind.rank for row in ROWS} == {0, 1, 2, 3, 4, 5, 6, 8}


def test_every_spelling_is_unique():
    """No name or alias stands for two properties."""
    assert len({text for text, _ in SPELLINGS}) == len(SPELLINGS)


@pytest.mark.parametrize("text", [text for text, _ in SPELLINGS])
def test_spelling_is_plain(text):
    """Names and aliases are lower-case words joined by hyphens."""
    assert re.fullmatch(r"[a-z0-9]+(-[a-z0-9]+)*", text)


@each_row
def test_law_parses_to_the_symbol_of_the_row(row):
    """The law is one that the parser takes, and its coefficient is the symbol printed."""
    assert row.parsed.symbol == row.symbol
    assert row.parsed.text == row.law


@each_row
def test_row_is_complete(row):
    """Every row has a title, a unit, a known regime and a source that names a book, paper or standard with its year."""
    assert row.title
    assert row.unit
    assert row.regime in REGIMES
    assert re.search(r"\b(18|19|20)\d\d\b", row.source)


@each_row
def test_one_factor_for_each_pair(row):
    """Matrix notation has one factor, 1 or 2, for each of its index pairs."""
    assert len(row.factors) == len(row.kind.pairs)
    assert set(row.factors) <= {1, 2}


@each_row
def test_factors_of_the_row_are_not_those_of_the_law(row):
    """A row states its factors only where the trade's differ from those that the law gives."""
    assert row.matrix_factors != row.parsed.factors


@pytest.mark.parametrize(("spelling", "name"), SPELLINGS)
@pytest.mark.parametrize(
    "written",
    [str, str.upper, lambda text: text.replace("-", " "), lambda text: f" {text.replace('-', '_')} "],
    ids=["as it is", "capitals", "blanks", "underscores"],
)
def test_property_answers_to_every_spelling(spelling, name, written):
    """A name or alias is found in any case and with blanks or underscores for hyphens."""
    assert property_named(written(spelling)).name == name


@pytest.mark.parametrize(
    ("name", "nearest"),
    [
        ("piezolectric", "piezoelectric"),
        ("Thermal expansoin", "thermal-expansion"),
        ("elastic_stifness", "elastic-stiffness"),
        ("secondharmonic", "second-harmonic"),
        ("magnetoelectrik", "magnetoelectric"),
        ("halll", "hall"),
    ],
)
def test_unknown_name_offers_the_nearest(name, nearest):
    """A misspelt name is refused in one line that quotes it and offers the property meant first."""
    with pytest.raises(UnknownNameError, match=re.escape(repr(name))) as caught:
        property_named(name)

    assert caught.value.nearest[0] == nearest
    assert caught.value.exit_code == 2
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize("name", ["", "   ", "qqqqqqqqqqqq", "\x00", "-"])
def test_senseless_name_is_refused(name):
    """A name that resembles nothing is refused and the message says where all names are listed."""
    with pytest.raises(UnknownNameError, match="tensorsym properties"):
        property_named(name)


@pytest.mark.parametrize(
    ("word", "names"),
    [
        ("gyration", ["optical-activity", "electrogyration", "piezogyration", "acoustic-gyration"]),
        ("HARMONIC", ["second-harmonic", "second-harmonic-kleinman", "third-harmonic", "quadrupole-second-harmonic"]),
        ("shg", ["second-harmonic", "second-harmonic-kleinman"]),
        ("third order elastic", ["third-order-elastic", "third-order-compliance"]),
        ("nabla_j T", ["thermal-conductivity", "seebeck", "thomson", "nernst", "righi-leduc"]),
        ("elasto_optic", ["photoelastic"]),
    ],
)
def test_search_finds_names_titles_aliases_and_laws(word, names):
    """A word is looked for in name, title, aliases and law, in any case and with any joining sign."""
    found = [row.name for row in properties_matching(word)]

    assert set(names) <= set(found)
    assert found == [row.name for row in ROWS if row.name in found]


def test_search_that_finds_nothing_is_refused():
    """A word in no row is refused with the nearest names."""
    with pytest.raises(UnknownNameError, match="no property matches 'pockel effect'") as caught:
        properties_matching("pockel effect")

    assert "pockels" in caught.value.nearest


@pytest.mark.parametrize(("word", "name"), [(word, name) for word, names in HARM.items() for name in names.split()])
def test_dangerous_measurement_has_its_caution(word, name):
    """A property measured with high voltage, lasers, magnets and the like says so (common practice)."""
    assert any(word in caution.casefold() for caution in property_named(name).cautions)


@pytest.mark.parametrize("caution", CAUTIONS)
def test_caution_defers_to_local_rules(caution):
    """Each caution ends with whose rules hold on the spot: code, licensed practice, limits, officer."""
    assert re.search(r"(code|licensed practice|rules|officer|local exposure limits)\.$", caution)


@pytest.mark.parametrize(
    ("name", "factors", "source"),
    [
        ("piezoelectric", (2,), "Nye 1985, ch. VII: d14 = 2 d123"),
        ("converse-piezoelectric", (2,), "Nye 1985, ch. VII: the same d, strain on the left"),
        ("piezoelectric-stress", (1,), "IEEE Std 176-1987: e14 = e123"),
        ("piezoelectric-voltage", (2,), "IEEE Std 176-1987: g14 = 2 g123"),
        ("piezoelectric-stiffness", (1,), "IEEE Std 176-1987: h14 = h123"),
        ("elastic-stiffness", (1, 1), "Nye 1985, ch. VIII: c44 = c2323"),
        ("elastic-compliance", (2, 2), "Nye 1985, ch. VIII: s14 = 2 s1123, s44 = 4 s2323"),
        ("photoelastic", (1, 1), "Nye 1985, ch. XIII: p44 = p2323"),
        ("piezo-optic", (1, 2), "Nye 1985, ch. XIII: pi44 = 2 pi2323"),
        ("pockels", (1,), "Nye 1985, ch. XIII: r41 = r231"),
        ("second-harmonic", (1,), "International Tables D (2013), ch. 1.7: d14 = d123"),
        ("piezoresistance", (1, 2), "Smith 1954: pi44 = 2 pi2323"),
        ("electrostriction", (2, 2), "Sundar and Newnham 1992: Q44 = 4 Q2323"),
        ("kerr", (1, 1), "Yariv and Yeh 1984: field vector 2 E2 E3, s44 = s2323"),
        ("third-order-elastic", (1, 1, 1), "Brugger 1964: C144 = C112323"),
        ("third-order-compliance", (2, 2, 2), "Brugger 1964: S144 = 4 S112323"),
        ("piezomagnetic", (2,), "as the piezoelectric d"),
        ("viscosity", (1, 1), "as the stiffness"),
        ("flexoelectric", (1,), "Zubko 2013: strain with its factor 2"),
    ],
    ids=lambda value: value if isinstance(value, str) and value.islower() else None,
)
def test_factors_are_those_of_the_trade(name, factors, source):
    """Matrix entries are tensor components times the factors of the handbook named (from memory)."""
    assert property_named(name).factors == factors, source


@pytest.mark.parametrize("name", ["efg", "zero-field-splitting", "quadrupole"])
def test_traceless_by_definition(name):
    """The Laplace equation or the convention of the Hamiltonian takes the trace away."""
    assert property_named(name).kind.traceless


def test_only_these_are_traceless():
    """No other row loses its trace."""
    assert sum(row.traceless for row in ROWS) == 3


@pytest.mark.parametrize(
    "name",
    ["efg", "g-tensor", "hyperfine", "zero-field-splitting", "chemical-shift", "born-charge", "displacement-ellipsoid"],
)
def test_property_of_a_site(name):
    """What belongs to one atom is held to the group of its site, not of the crystal."""
    assert property_named(name).site


def test_rows_cannot_be_changed():
    """A row is shared by all who ask for it, so nobody may write into it."""
    row = property_named("piezoelectric")

    with pytest.raises(AttributeError):
        row.unit = "m/V"
    assert property_named("piezoelectric") is row
    assert isinstance(row, Property)
