"""The allowed form of real crystals and classes: names, relations, basis, axes."""

from __future__ import annotations

import numpy as np
import pytest

from tensorsym.catalog.properties import all_properties
from tensorsym.crystal.read import read
from tensorsym.errors import AxesError, GroupSymbolError, UnknownNameError, UsageError
from tensorsym.tasks.allowed import allowed
from tensorsym.tasks.symbols import symbolic_form
from tensorsym.tensors.axes import turned
from tests.conftest import ROOT

STRUCTURES = sorted((ROOT / "structures").glob("*.cif"))
CHECKED = ("piezoelectric", "elastic-compliance", "dielectric", "pyroelectric", "photoelastic", "optical-activity")


# Nye, Physical Properties of Crystals (1985), appendix B, and IEEE Std 176-1987 (memory); listed in the shared facts as
# the relations every implementation gets wrong once.
@pytest.mark.parametrize(
    ("group", "name", "component", "expression"),
    [
        ("3", "elastic-stiffness", "c66", "(c11 - c12)/2"),
        ("6/mmm", "elastic-compliance", "s66", "2 (s11 - s12)"),
        ("32", "piezoelectric", "d26", "-2 d11"),
        ("32", "piezoelectric", "d25", "-d14"),
        ("32", "piezoelectric-stress", "e26", "-e11"),
        ("3m", "piezoelectric", "d16", "-2 d22"),
        ("3m", "piezoelectric", "d21", "-d22"),
        ("3m", "piezoelectric", "d24", "d15"),
        ("3", "elastic-stiffness", "c56", "c14"),
        ("3", "elastic-stiffness", "c46", "-c15"),
        ("-3m", "elastic-compliance", "s56", "2 s14"),
    ],
)
def test_relation_is_the_handbooks(group, name, component, expression):
    """A dependent component is written as the handbook prints it, matrix factors included."""
    assert allowed(group, name).relations[component] == expression


@pytest.mark.parametrize("path", STRUCTURES, ids=lambda path: path.stem)
@pytest.mark.parametrize("name", CHECKED)
def test_basis_is_invariant_under_the_crystals_own_rotations(path, name):
    """Every basis tensor in the file's axes survives every rotation that spglib found in the file's lattice."""
    crystal = read(path)
    form = allowed(crystal, name)
    lattice = crystal.lattice.T
    for rotation in crystal.symmetry.rotations:
        matrix = lattice @ rotation @ np.linalg.inv(lattice)
        sign = np.sign(np.linalg.det(matrix)) if form.kind.axial else 1.0
        for tensor in form.basis():
            assert np.abs(sign * turned(tensor, matrix) - tensor).max() < 1e-6


@pytest.mark.parametrize("group", ["32", "-43m", "6mm", "2", "4"])
def test_symbols_agree_with_the_basis(group):
    """Putting numbers for the symbols gives the matrix of the same combination of basis tensors."""
    form = allowed(group, "piezoelectric")
    values = np.random.default_rng(1).normal(size=form.independent)
    matrix = symbolic_form(form).subs(dict(zip(_symbols(form), values, strict=True)))
    tensor = np.tensordot(values, form.basis(), axes=1)

    expected = np.array([[tensor[i, j, k] * (1 if j == k else 2) for j, k in _PAIRS] for i in range(3)])
    assert np.abs(np.array(matrix.tolist(), dtype=float) - expected).max() < 1e-12


_PAIRS = ((0, 0), (1, 1), (2, 2), (1, 2), (0, 2), (0, 1))


def _symbols(form):
    import sympy

    return [sympy.Symbol(name, real=True) for name in form.independent_components]


@pytest.mark.parametrize("row", all_properties(), ids=lambda row: row.name)
def test_named_and_lawful_questions_agree(row):
    """A property asked for by its law has the same independent components as by its name."""
    by_name = allowed("3m", row.name)
    by_law = allowed("3m", law=row.law, equations=row.equations, regime=row.regime)

    assert by_law.independent >= by_name.independent
    assert by_law.independent - by_name.independent <= row.traceless


def test_zero_components_name_the_element_behind_them():
    """In class 32 the three-fold axis forbids d33 no more than the two-fold axis does, and d36 by itself."""
    reasons = allowed("32", "piezoelectric").reasons

    assert "d36" in reasons["3 along z"]
    assert "d31" in reasons["2 along x"]


def test_axes_in_miller_notation():
    """Turning zinc blende by 45 degrees about z gives the form with d31 = -d32 (common practice)."""
    form = allowed("-43m", "piezoelectric", axes="x=[110] z=(001)")

    assert form.independent_components == ("d15",)
    assert form.relations["d32"] == "-d15/2"


@pytest.mark.parametrize(
    ("arguments", "options", "error", "says"),
    [
        (("32",), {}, UsageError, "give either"),
        (("32", "piezoelectric"), {"law": "P_i = p_i T"}, UsageError, "give either"),
        (("32", "piezolectric"), {}, UnknownNameError, "nearest: piezoelectric"),
        (("33m", "piezoelectric"), {}, GroupSymbolError, "nearest"),
        (("32", "piezoelectric"), {"axes": "iee"}, AxesError, "nearest: ieee"),
        (("4mm", "piezoelectric"), {"axes": "x=[101] y=[010]"}, AxesError, "lengths"),
    ],
)
def test_wrong_questions_are_refused(arguments, options, error, says):
    """An incomplete or impossible question says what is wrong and what would be right."""
    with pytest.raises(error, match=says):
        allowed(*arguments, **options)
