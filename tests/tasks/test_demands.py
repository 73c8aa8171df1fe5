"""Demands of physics on published tensors and on ones spoiled in one place."""

from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.read import read
from tensorsym.tasks.check import check_tensor
from tensorsym.tasks.check_file import check_file
from tensorsym.tasks.demands import statements_on
from tests.conftest import ROOT

# Stiffness in GPa: quartz, Bechmann 1958; lithium niobate, Warner, Onoe and Coquin 1967; copper, handbooks (memory).
PUBLISHED = {
    "quartz-p3121": {"c11": 86.74, "c33": 107.2, "c44": 57.94, "c12": 6.99, "c13": 11.91, "c14": -17.91},
    "lithium-niobate": {"c11": 203.0, "c33": 245.0, "c44": 60.0, "c12": 53.0, "c13": 75.0, "c14": 9.0},
    "copper": {"c11": 168.4, "c12": 121.4, "c44": 75.4},
}


def stiffness(name, **changed):
    """Return the verdict on a published stiffness with some constants changed."""
    crystal = read(ROOT / "structures" / f"{name}.cif")
    from tensorsym.tasks.allowed import allowed

    form = allowed(crystal, "elastic-stiffness")
    constants = PUBLISHED[name] | changed
    values = np.tensordot([constants[key] for key in form.independent_components], form.basis(), axes=1)
    return check_tensor(crystal, values, "elastic-stiffness", unit="GPa")


@pytest.mark.parametrize("name", list(PUBLISHED))
def test_published_crystals_are_stable(name):
    """Crystals that exist have a positive elastic energy for every strain."""
    statements = statements_on(stiffness(name))

    assert [statement.holds for statement in statements] == [True, True]


# One closed condition of Mouhat and Coudert 2014 (memory) broken at a time.
@pytest.mark.parametrize(
    ("name", "changed"),
    [
        ("copper", {"c12": 170.0}),
        ("copper", {"c44": -1.0}),
        ("copper", {"c12": -85.0}),
        ("quartz-p3121", {"c14": 50.0}),
        ("quartz-p3121", {"c13": 80.0}),
        ("lithium-niobate", {"c44": -5.0}),
    ],
)
def test_broken_condition_is_seen(name, changed):
    """A crystal that breaks one closed condition of its class is called unstable, with the strain that does it."""
    first = statements_on(stiffness(name, **changed))[0]

    assert not first.holds
    assert first.value <= 0
    assert "not stable" in first.sentence


def test_cubic_closed_form_agrees_with_the_eigenvalue():
    """The smallest Mandel eigenvalue of copper is c11 - c12, smaller than 2 c44 (by hand)."""
    assert statements_on(stiffness("copper"))[0].value == pytest.approx(168.4 - 121.4)


def test_sum_rule_of_a_real_run(data_folder):
    """The Born charges of the SiC run add up to 0.195 e, as the shared index of the data states."""
    report = check_file(data_folder / "vasp" / "OUTCAR.lepsilon.gz")
    rule = next(item for verdict in report.verdicts for item in statements_on(verdict) if item.name == "sum-rule")

    assert rule.value == pytest.approx(0.195, abs=2e-3)


def test_failing_on_physics():
    """A file fails on what it is asked to fail on."""
    report = check_file(ROOT / "tests" / "data" / "outputs" / "OUTCAR.quartz.0006.001.gz")

    assert not report.fails("inconsistent")
    assert not report.fails("any")
