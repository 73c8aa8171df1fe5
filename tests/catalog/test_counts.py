"""The kinds of catalogue rows against cited numbers of components, by a floating-point group average.

The average knows nothing of the package's groups or solver: a wrong parity or index symmetry of a row shows here.
"""

from __future__ import annotations

from functools import lru_cache

import numpy as np
import pytest

from tensorsym.catalog.properties import all_properties, property_named
from tensorsym.groups.point_group import standard_point_group
from tensorsym.invariants.characters import invariant_count
from tests.truths.float_groups import float_count, float_group
from tests.truths.reading import rows

COLUMNS = {
    "T1": "pyroelectric electrocaloric polarisation hydrostatic-piezoelectric",
    "T2": "magnetisation pyromagnetic",
    "T3": "dielectric impermeability magnetic-susceptibility thermal-expansion conductivity resistivity"
    " thermal-conductivity diffusion displacement-ellipsoid raman effective-mass",
    "T4": "seebeck peltier thomson born-charge g-tensor hyperfine chemical-shift",
    "T5": "optical-activity",
    "T6": "magnetoelectric photogalvanic-circular spin-polarisation-current natural-optical-activity",
    "T7": "piezoelectric piezoelectric-stress piezoelectric-voltage piezoelectric-stiffness converse-piezoelectric"
    " pockels photogalvanic-linear internal-strain magnetoelectric-ehh",
    "T8": "piezomagnetic magnetoelectric-hee electrogyration",
    "T9": "hall righi-leduc faraday",
    "T10": "second-harmonic optical-rectification hyper-raman",
    "T11": "elastic-stiffness elastic-compliance viscosity thermal-elastic-stiffness",
    "T12": "photoelastic piezo-optic kerr cotton-mouton electrostriction magnetostriction piezoresistance"
    " magnetoresistance elastoresistance",
    "T13": "flexoelectric photon-drag",
    "T14": "third-order-elastic third-order-compliance",
}
SETTINGS = {"2": "112", "m": "11m", "2/m": "112/m", "32": "321", "3m": "3m1", "-3m": "-3m1"}
TABLE = [
    (row["class"], name, int(row[column]))
    for row in rows("counts.txt")
    for column, names in COLUMNS.items()
    for name in names.split()
]
PRINTED = [
    ("electrostriction", "3m", 8, "Cho and Yamanouchi 1987, abstract"),
    ("second-order-dielectric", "3m", 3, "Cho and Yamanouchi 1987, abstract"),
    ("third-order-piezoelectric", "3m", 13, "Cho and Yamanouchi 1987, abstract"),
    ("third-order-elastic", "3m", 14, "Cho and Yamanouchi 1987, abstract"),
    ("third-order-susceptibility", "1", 81, "International Tables D, table 1.7.2.4"),
    ("third-order-susceptibility", "m", 41, "International Tables D, table 1.7.2.4"),
    ("third-order-susceptibility", "4", 21, "International Tables D, table 1.7.2.4"),
    ("sum-frequency", "4", 7, "International Tables D, ch. 1.1.4.8"),
    ("sum-frequency", "-6", 2, "International Tables D, ch. 1.1.4.8"),
    ("strain-gradient-elasticity", "-1", 171, "Auffray, Quang and He 2013 (memory)"),
    ("strain-gradient-elasticity", "2/m", 91, "Auffray, Quang and He 2013 (memory)"),
    ("strain-gradient-elasticity", "mmm", 51, "Auffray, Quang and He 2013 (memory)"),
    ("strain-gradient-elasticity", "-3m", 34, "Auffray, Quang and He 2013 (memory)"),
    ("strain-gradient-elasticity", "4/mmm", 28, "Auffray, Quang and He 2013 (memory)"),
    ("strain-gradient-elasticity", "6/mmm", 22, "Auffray, Quang and He 2013 (memory)"),
    ("strain-gradient-elasticity", "m-3m", 11, "Auffray, Quang and He 2013 (memory)"),
    ("strain-gradient-coupling", "1", 108, "Auffray, He and Le Quang 2019 (memory): 6 x 18"),
    ("second-harmonic-kleinman", "1", 10, "Kleinman 1962 (memory)"),
    ("third-harmonic", "1", 30, "Boyd 2008, ch. 1 (memory): 3 x 10"),
    ("third-harmonic", "m-3m", 2, "Boyd 2008, ch. 1 (memory)"),
    ("nernst", "m-3m", 1, "as the Hall coefficient"),
    ("nernst", "1", 27, "no exchange of heat and charge current"),
    ("second-harmonic-kleinman", "32", 1, "Kleinman 1962 (memory): d14 vanishes"),
    ("second-harmonic-kleinman", "422", 0, "Kleinman 1962 (memory)"),
    ("efg", "m-3m", 0, "Slichter 1990: none at a cubic site (memory)"),
    ("efg", "4/mmm", 1, "Slichter 1990: one at an axial site (memory)"),
    ("efg", "1", 5, "Slichter 1990: traceless and symmetric (memory)"),
    ("zero-field-splitting", "mmm", 2, "Abragam and Bleaney 1970: D and E (memory)"),
    ("magnetic-anisotropy-fourth", "m-3m", 2, "one cubic constant and the constant (M.M)^2"),
    ("octupole", "-43m", 1, "xyz"),
    ("spin-hall", "m-3m", 1, "Seemann et al. 2015 (memory)"),
    ("heat-capacity", "m-3m", 1, "a scalar"),
]
TIME_ODD = (
    "magnetisation pyromagnetic toroidal-moment magnetoelectric piezomagnetic magnetoelectric-hee piezomagnetoelectric"
)
AXIAL = (
    "magnetisation pyromagnetic magnetoelectric optical-activity spin-polarisation-current photogalvanic-circular hall"
    " nernst ettingshausen righi-leduc faraday electrogyration piezomagnetic magnetoelectric-hee spin-hall"
    " piezogyration piezomagnetoelectric"
)


@lru_cache(maxsize=1024)
def counted(group_class, kind):
    """Return the number of components by group average; rows of one kind share it."""
    return float_count(SETTINGS.get(group_class, group_class), kind)


def strain_representation(matrix):
    """Return how a Cartesian operation acts on the six components of a strain."""
    pairs = [(0, 0), (1, 1), (2, 2), (1, 2), (0, 2), (0, 1)]
    moved = [
        matrix @ np.array([[float({i, j} == {a, b}) for j in range(3)] for i in range(3)]) @ matrix.T for a, b in pairs
    ]
    return np.array([[strain[pair] for strain in moved] for pair in pairs])


@pytest.mark.parametrize(("group_class", "name", "count"), TABLE)
def test_count_is_that_of_the_table(group_class, name, count):
    """The row has as many components in the class as Nye's tables say (counted; `tests/truths/counts.txt`)."""
    assert counted(group_class, property_named(name).kind) == count


@pytest.mark.parametrize(("name", "group_class", "count", "source"), PRINTED)
def test_count_is_that_of_the_paper(name, group_class, count, source):
    """The row has as many components in the class as the paper or book named says."""
    assert counted(group_class, property_named(name).kind) == count, source


@pytest.mark.parametrize(("group_class", "count"), [("1", 126), ("m-3m", 11)])
def test_fourth_order_elastic_count(group_class, count):
    """Fourth-order stiffness, a quartic form of strain, has 126 components, 11 in class m-3m (Brendel 1979, memory).

    The form is counted by Molien's formula, the row by the package's characters, since rank 8 is too large to average.
    """
    matrices = [strain_representation(matrix) for matrix in float_group(SETTINGS.get(group_class, group_class))]
    p1, p2, p3, p4 = (np.array([np.trace(np.linalg.matrix_power(m, n)) for m in matrices]) for n in (1, 2, 3, 4))
    quartic = np.mean(p1**4 + 6 * p1**2 * p2 + 3 * p2**2 + 8 * p1 * p3 + 6 * p4) / 24

    assert quartic == pytest.approx(count)
    assert invariant_count(standard_point_group(group_class), property_named("fourth-order-elastic").kind) == count


def test_time_odd_rows():
    """Just these equilibrium properties need magnetic order (Birss 1966; International Tables D, ch. 1.5; memory)."""
    assert {row.name for row in all_properties() if row.kind.time_odd} == set(TIME_ODD.split())


def test_axial_rows():
    """Just these are pseudotensors (Nye 1985; Birss 1966; memory)."""
    assert {row.name for row in all_properties() if row.kind.axial} == set(AXIAL.split())
