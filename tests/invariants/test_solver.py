"""The exact solver against sympy's null spaces, and what makes its choice of components canonical."""

from __future__ import annotations

from fractions import Fraction
from functools import lru_cache, reduce

import numpy as np
import pytest
import sympy
from sympy import QQ
from sympy.polys.matrices import DomainMatrix

from tensorsym.groups.operations import Basis
from tensorsym.groups.point_group import point_group_in_setting
from tensorsym.invariants.solver import invariant_space
from tensorsym.tensors.kind import TensorKind
from tests.groups.settings import ALL_SETTINGS, setting_of
from tests.invariants.kinds import KINDS
from tests.truths.float_groups import element, float_group, moved, settings, with_parity

RECTANGULAR = [group for group in ALL_SETTINGS if group.basis is Basis.CARTESIAN]
SOLVED_BY_SYMPY = ["vector", "magnetisation", "symmetric", "magnetoelectric", "piezoelectric", "hall", "elastic"]
ROOT = QQ.algebraic_field(sympy.sqrt(3))
HALF_ROOT = ROOT.from_sympy(sympy.sqrt(3) / 2)


def exact(matrix, field):
    """Return a Cartesian matrix exactly: its entries are 0, 1, 1/2 and half the root of 3, with signs."""
    values = {0.0: field(0), 1.0: field(1), 0.5: field(QQ(1, 2)), round(3**0.5 / 2, 9): HALF_ROOT}
    rows = [[values[abs(round(entry, 9)) + 0.0] * int(np.sign(entry)) for entry in row] for row in matrix.tolist()]
    return np.array(rows, dtype=object)


@lru_cache(maxsize=256)
def null_space_by_sympy(setting, kind, field):
    """Return the null space of all (D(g) - 1) and of the index symmetry, on all 3**rank components, as row vectors."""
    size = 3**kind.rank
    words = np.arange(size).reshape((3,) * kind.rank)
    unit = np.eye(size, dtype=int).astype(object)
    equations = [unit * 0]
    for text in settings()[setting]:
        matrix = element(text)
        power = reduce(np.kron, [exact(matrix, field)] * kind.rank)
        equations.append(int(with_parity(matrix, kind)) * power - unit)
    equations += [sign * unit[words.transpose(order).ravel()] - unit for order, sign in kind.permutations]
    stacked = np.vstack(equations)
    rows = [[field.convert(entry) for entry in row] for row in stacked[stacked.any(axis=1)].tolist()]
    return DomainMatrix(rows or [[field.zero] * size], (len(rows) or 1, size), field).to_sparse().nullspace()


def exact_basis(space, field):
    """Return our basis as exact rows over all 3**rank components."""
    components = space.components
    rows = [[field.zero] * len(components.of_word) for _ in space.free]
    for word, number in enumerate(components.of_word):
        for free, coefficient in space.expressions.get(number, ()):
            value = field(QQ(coefficient.numerator, coefficient.denominator))
            rows[space.free.index(free)][word] = value * components.sign[word]
    return DomainMatrix(rows, (len(rows), len(components.of_word)), field)


def same_space(ours, theirs):
    """Tell whether two sets of exact rows span one space: each has the rank of both together."""
    return ours.to_sparse().vstack(theirs).rank() == ours.shape[0] == theirs.shape[0]


@pytest.mark.parametrize("group", RECTANGULAR, ids=setting_of)
@pytest.mark.parametrize("name", SOLVED_BY_SYMPY)
def test_space_is_the_null_space_of_sympy(group, name):
    """In rectangular axes our basis spans sympy's null space of (D(g) - 1) for the generators, exactly."""
    space = invariant_space(group, KINDS[name])

    theirs = null_space_by_sympy(group.setting, KINDS[name], QQ)

    assert theirs.shape[0] == space.dimension
    assert not space.dimension or same_space(exact_basis(space, QQ), theirs)


@pytest.mark.parametrize("setting", ["3", "321", "312", "3m1", "31m", "-3m1", "6", "-6", "622", "6mm", "-62m", "-6m2"])
@pytest.mark.parametrize("name", ["vector", "gyration", "magnetoelectric", "piezoelectric"])
def test_space_is_the_null_space_with_roots_of_three(setting, name):
    """In hexagonal axes our rational basis spans sympy's null space over Q(sqrt 3): no root was lost."""
    space = invariant_space(point_group_in_setting(setting), KINDS[name])

    theirs = null_space_by_sympy(setting, KINDS[name], ROOT)

    assert theirs.shape[0] == space.dimension
    assert not space.dimension or same_space(exact_basis(space, ROOT), theirs)


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
@pytest.mark.parametrize("name", ["symmetric", "magnetoelectric", "piezoelectric", "cyclic", "elastic", "photoelastic"])
def test_independent_components_are_the_earliest(group, name):
    """The independent components are the pivots of the reduced basis: no earlier choice in the order is possible."""
    space = invariant_space(group, KINDS[name])
    rows = sympy.zeros(space.dimension, len(space.components.words))
    for number, terms in space.expressions.items():
        for free, coefficient in terms:
            rows[space.free.index(free), number] = sympy.Rational(coefficient.numerator, coefficient.denominator)

    reduced, pivots = DomainMatrix.from_Matrix(rows).to_field().rref() if space.dimension else (None, ())

    assert tuple(pivots) == space.free
    assert reduced is None or reduced.to_Matrix() == rows


@pytest.mark.parametrize(
    ("setting", "kind"),
    [
        ("3m1", TensorKind(6)),
        ("-42m", TensorKind(6, axial=True)),
        ("622", TensorKind(5)),
        ("6/mmm", TensorKind(6)),
        ("23", TensorKind(5)),
        ("312", TensorKind(6, permutations=(((1, 0, 2, 3, 4, 5), 1), ((0, 1, 2, 3, 5, 4), -1)))),
    ],
)
def test_high_rank_is_invariant(setting, kind):
    """Every basis tensor of rank 5 or 6 is unchanged under all operations, and has the index symmetry."""
    tensors = invariant_space(point_group_in_setting(setting), kind).basis()

    assert len(tensors)
    for matrix in float_group(setting):
        assert np.abs(with_parity(matrix, kind) * moved(tensors, matrix) - tensors).max() < 1e-11
    for order, sign in kind.index_group:
        assert np.array_equal(sign * tensors.transpose(0, *(1 + place for place in order)), tensors)


@pytest.mark.parametrize("setting", ["1", "12/m1", "4mm", "321", "6/mmm", "-43m", "m-3m"])
def test_rank_seven_and_eight_have_their_certificate(setting):
    """Without index symmetry ranks 7 and 8 are solved, and the characters agree."""
    group = point_group_in_setting(setting)
    for rank in (7, 8):
        assert invariant_space.__wrapped__(group, TensorKind(rank)).certificate.agree


def test_isotropic_like_form_of_the_cube():
    """The rank 4 tensor of m-3m without index symmetry has 4 components: 1111, 1122, 1212 and 1221 (Nye; memory)."""
    space = invariant_space(point_group_in_setting("m-3m"), TensorKind(4))

    assert [space.components.digits[number] for number in space.free] == ["1111", "1122", "1212", "1221"]


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_antisymmetry_in_four_indices_leaves_nothing(group):
    """Four indices cannot all differ in three dimensions, so a totally antisymmetric rank 4 has no component at all."""
    swaps = ((1, 0, 2, 3), (0, 2, 1, 3), (0, 1, 3, 2))
    space = invariant_space(group, TensorKind(4, permutations=tuple((swap, -1) for swap in swaps)))

    assert space.dimension == 0
    assert space.certificate.agree
    assert space.basis().shape == (0, 3, 3, 3, 3)


def test_coefficients_are_exact():
    """Coefficients are Fractions, so c66 is (c11 - c12)/2 and not nearly."""
    space = invariant_space(point_group_in_setting("321"), KINDS["elastic"])
    number = space.components.digits.index("66")

    assert {space.components.digits[free]: value for free, value in space.expressions[number]} == {
        "11": Fraction(1, 2),
        "12": Fraction(-1, 2),
    }


def test_answer_is_kept():
    """The same question returns the same object, so asking often costs nothing."""
    group = point_group_in_setting("321")

    assert invariant_space(group, KINDS["elastic"]) is invariant_space(group, KINDS["elastic"])
