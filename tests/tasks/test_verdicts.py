"""Verdicts on tensors: real outputs, planted faults, thresholds, refused numbers."""

from __future__ import annotations

import json

import numpy as np
import pytest

from tensorsym.crystal.read import read
from tensorsym.errors import ShapeError, TensorFileError, UsageError
from tensorsym.invariants.solver import invariant_space
from tensorsym.tasks.allowed import allowed
from tensorsym.tasks.check import check_tensor
from tensorsym.tasks.check_file import check_file
from tensorsym.tasks.check_sites import check_site_tensors
from tensorsym.tasks.diagnose.blind import blind_spots
from tensorsym.tasks.diagnose.diagnosis import diagnose
from tensorsym.tasks.mend import write_symmetrised
from tests.conftest import ROOT

STRUCTURES = sorted((ROOT / "structures").glob("*.cif"))
QUARTZ = ROOT / "structures" / "quartz-p3121.cif"
OUTCAR = ROOT / "tests" / "data" / "outputs" / "OUTCAR.quartz.0006.001.gz"
VASP_ORDER = "xx yy zz xy yz zx"


def quartz_d(d11=2.31, d14=-0.727):
    """Return the matrix of quartz, numbers of Bechmann 1958 (memory)."""
    return np.array([[d11, -d11, 0, d14, 0, 0], [0, 0, 0, 0, -d14, -2 * d11], [0] * 6])


def test_real_output_obeys_its_class():
    """The VASP run on quartz agrees with its class; residuals as an independent group average found them.

    Shared index of the data: piezoelectric e*Angst block 7e-5, C/m^2 block 1.6e-10, Born charges 2.5e-5.
    """
    report = check_file(OUTCAR)
    residuals = {(verdict.row.name, verdict.unit): verdict.residual for verdict in report.verdicts}

    assert report.verdict == "consistent"
    assert residuals["piezoelectric-stress", "e angstrom"] == pytest.approx(7e-5, rel=0.2)
    assert residuals["piezoelectric-stress", "C/m^2"] < 1e-9
    assert residuals["born-charge", "e"] == pytest.approx(2.5e-5, rel=0.2)


def test_handbook_order_is_refused_for_the_codes_order():
    """Read in the handbook's order, the rows that VASP prints miss the class by 0.755 (shared index of the data)."""
    report = check_file(OUTCAR)
    verdict = next(item for item in report.verdicts if item.unit == "C/m^2")
    from tensorsym.tensors.notation import to_matrix

    printed = to_matrix(verdict.values, verdict.row.kind, verdict.row.factors, "11 22 33 12 23 13")
    wrong = check_tensor(report.crystal, printed, verdict.row)

    assert wrong.residual == pytest.approx(0.755, abs=0.005)
    first = diagnose(wrong, report.crystal).explanations[0]
    assert (first.kind, first.residual_after < 1e-3) == ("matrix-order", True)


@pytest.mark.parametrize("path", STRUCTURES, ids=lambda path: path.stem)
@pytest.mark.parametrize("name", ["piezoelectric-stress", "elastic-stiffness", "dielectric"])
def test_allowed_tensors_pass_and_random_ones_do_not(path, name):
    """A combination of the basis passes; a random tensor passes only where nothing is forbidden."""
    crystal = read(path)
    generator = np.random.default_rng(3)
    form = allowed(crystal, name)
    good = np.tensordot(generator.normal(size=form.independent), form.basis(), axes=1)
    bad = generator.normal(size=(3,) * form.kind.rank)

    assert check_tensor(crystal, good, name).residual < 1e-6
    assert check_tensor(crystal, bad, name).is_consistent == (form.independent == bad.size)


def test_forbidden_component_is_named_with_its_operation():
    """A d33 planted in quartz is the worst offender, and a two-fold axis across z changes its sign."""
    values = quartz_d()
    values[2, 2] = 0.5
    worst = check_tensor(read(QUARTZ), values, "piezoelectric").worst[0]

    assert (worst.component, worst.rule) == ("d33", "0")
    assert worst.operation.startswith("2 along")
    assert worst.change == pytest.approx(1.0)


@pytest.mark.parametrize(
    ("options", "source"),
    [
        ({"sigma": 0.01}, "sigma"),
        ({"digits": 1.0}, "printed digits"),
        ({"tolerance": 0.1}, "tolerance"),
        ({}, "working accuracy"),
    ],
)
def test_threshold_says_where_it_comes_from(options, source):
    """The threshold is that of the best knowledge of the noise, and names it."""
    assert check_tensor(read(QUARTZ), quartz_d(), "piezoelectric", **options).threshold.source == source


def test_noise_within_sigma_is_no_alarm():
    """Noise of one sigma passes, the same deviation with a tenth of sigma stated does not."""
    noisy = quartz_d() + 0.02 * np.random.default_rng(2).normal(size=(3, 6))
    crystal = read(QUARTZ)

    assert check_tensor(crystal, noisy, "piezoelectric", sigma=0.02).is_consistent
    assert not check_tensor(crystal, noisy, "piezoelectric", sigma=0.002).is_consistent


@pytest.mark.parametrize(
    ("values", "says"),
    [
        (np.zeros((6, 3)), "expected shape \\(3, 3, 3\\) or \\(3, 6\\)"),
        (np.where(np.arange(18).reshape(3, 6) == 8, np.nan, 1.0), "position \\(2, 3\\)"),
        ([["a"] * 6] * 3, "no array of numbers"),
    ],
)
def test_bad_numbers_are_refused(values, says):
    """Numbers of another shape, not finite or no numbers at all are refused, with the place."""
    with pytest.raises(ShapeError, match=says):
        check_tensor(read(QUARTZ), values, "piezoelectric")


@pytest.mark.parametrize("path", STRUCTURES, ids=lambda path: path.stem)
def test_site_tensors_are_projected_once_and_for_all(path):
    """Symmetrised site tensors are consistent, and the number of free components is the same by two roads."""
    from tensorsym.catalog.properties import property_named

    crystal = read(path)
    row = property_named("born-charge")
    random = np.random.default_rng(4).normal(size=(len(crystal.species), 3, 3))
    first = check_site_tensors(crystal, random, row)

    assert first.certificate.agree
    assert first.certificate.by_elimination == sum(
        invariant_space(site.group, row.kind).dimension for site in crystal.sites
    )
    assert check_site_tensors(crystal, first.symmetrised, row).residual < 1e-10


@pytest.mark.parametrize(
    ("spoil", "kind"),
    [
        (lambda d: d[:, [0, 1, 2, 5, 3, 4]], "matrix-order"),
        (lambda d: d * np.array([1, 1, 1, 0.5, 0.5, 0.5]), "shear-factor"),
        (lambda d: np.where(np.arange(18).reshape(3, 6) == 1, -d, d), "entry"),
        (lambda d: np.array([d[2], d[0], d[1]])[:, [2, 0, 1, 5, 3, 4]], "axes"),
    ],
)
def test_planted_mistake_is_named_first(spoil, kind):
    """One mistake in the tensor of quartz is the first explanation, and taking it away leaves nothing."""
    crystal = read(QUARTZ)
    verdict = check_tensor(crystal, spoil(quartz_d()), "piezoelectric")
    diagnosis = diagnose(verdict, crystal)
    best = diagnosis.explanations[0]

    assert not verdict.is_consistent
    assert best.kind == kind
    assert best.residual_after < 1e-6


def test_free_rotation_is_found():
    """A tensor in axes turned by an arbitrary angle is explained by a rotation that leaves nothing."""
    from scipy.spatial.transform import Rotation

    from tensorsym.catalog.properties import property_named
    from tensorsym.tensors.axes import turned
    from tensorsym.tensors.notation import from_matrix

    row = property_named("piezoelectric")
    crystal = read(QUARTZ)
    tensor = from_matrix(quartz_d(), row.kind, row.factors)
    odd = turned(tensor, Rotation.from_rotvec([0.4, -0.7, 0.2]).as_matrix())
    best = diagnose(check_tensor(crystal, odd, row), crystal).explanations[0]

    assert best.kind == "rotation"
    assert best.residual_after < 1e-5


def test_blind_spots_of_a_cubic_crystal():
    """In a cubic crystal in standard axes the matrix order of the stiffness cannot be seen, nor factor and sign."""
    crystal = read(ROOT / "structures" / "rock-salt.cif")
    c11, c12, c44 = 48.7, 12.4, 12.6
    matrix = np.diag([c11 - c12] * 3 + [c44] * 3)
    matrix[:3, :3] += c12
    kinds = {spot.kind for spot in blind_spots(check_tensor(crystal, matrix, "elastic-stiffness"))}

    assert {"factor", "sign", "matrix-order", "shear-factor"} <= kinds
    assert "hand" not in kinds


def test_hand_is_a_blind_spot_of_quartz():
    """The other enantiomorph has the opposite signs, which symmetry cannot see."""
    kinds = {spot.kind for spot in blind_spots(check_tensor(read(QUARTZ), quartz_d(), "piezoelectric"))}

    assert "hand" in kinds


def test_mended_tensor_reads_back(tmp_path):
    """What --write saves, with the first explanation applied, is consistent when it is read again."""
    spoiled = tmp_path / "d.json"
    spoiled.write_text(
        json.dumps(
            {
                "schema": "tensorsym/tensor/1",
                "property": "piezoelectric",
                "notation": "voigt",
                "values": quartz_d()[:, [0, 1, 2, 5, 3, 4]].tolist(),
            }
        ),
        encoding="utf-8",
    )
    report = check_file(QUARTZ, spoiled)
    mended = tmp_path / "mended.json"
    write_symmetrised(report, mended, accept=1)

    again = check_file(QUARTZ, mended)
    assert report.verdict == "inconsistent"
    assert again.verdict == "consistent"
    assert again.verdicts[0].residual < 1e-12
    with pytest.raises(TensorFileError, match="exists already"):
        write_symmetrised(report, mended)
    with pytest.raises(UsageError, match="no explanation 99"):
        write_symmetrised(report, tmp_path / "other.json", accept=99)


def test_broken_index_symmetry_is_told_as_such():
    """A stiffness with c12 unlike c21 is charged to the exchange of indices, not to an operation of the crystal."""
    crystal = read(ROOT / "structures" / "perovskite-pnma.cif")
    matrix = np.diag([390.0, 370.0, 360.0, 90.0, 100.0, 80.0])
    matrix[0, 1], matrix[1, 0] = 110.0, 60.0
    worst = check_tensor(crystal, matrix, "elastic-stiffness").worst[0]

    assert worst.operation == "exchange of indices ijkl = klij"
