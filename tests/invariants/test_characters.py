from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest

from tensorsym.groups.point_group import standard_point_groups
from tensorsym.invariants.characters import character, invariant_count
from tensorsym.tensors.kind import TensorKind
from tests.invariants.kinds import KINDS
from tests.truths.float_groups import float_count

GROUPS = standard_point_groups()
OPERATIONS = sorted({operation for group in GROUPS for operation in group.operations}, key=repr)


def powers(operation, count):
    """Return the traces of the first powers of the Cartesian matrix, in floating point."""
    matrix = operation.cartesian()
    return [np.trace(np.linalg.matrix_power(matrix, n)) for n in range(1, count + 1)]


FORMULAS = {
    "vector": lambda t: t[0],
    "rank2": lambda t: t[0] ** 2,
    "symmetric": lambda t: (t[0] ** 2 + t[1]) / 2,
    "antisymmetric": lambda t: (t[0] ** 2 - t[1]) / 2,
    "piezoelectric": lambda t: t[0] * (t[0] ** 2 + t[1]) / 2,
    "total3": lambda t: (t[0] ** 3 + 3 * t[0] * t[1] + 2 * t[2]) / 6,
    "cyclic": lambda t: (t[0] ** 3 + 2 * t[2]) / 3,
    "photoelastic": lambda t: ((t[0] ** 2 + t[1]) / 2) ** 2,
    "elastic": lambda t: (((t[0] ** 2 + t[1]) / 2) ** 2 + (t[1] ** 2 + t[3]) / 2) / 2,
    "rank4": lambda t: t[0] ** 4,
}
NOT_IN_THE_TABLE = ["pseudoscalar", "antisymmetric", "rank3", "total3", "cyclic", "rank4"]


def named(operation):
    """Return the name of a case."""
    return f"{operation.basis.value}-{operation.words}"


@pytest.mark.parametrize("operation", OPERATIONS, ids=named)
def test_character_is_the_formula_of_the_trade(operation):
    """The trace on symmetric and nested products is the formula from traces of powers (Hamermesh; memory)."""
    traces = powers(operation, 4)

    characters = {name: float(character(operation, KINDS[name])) for name in FORMULAS}

    assert characters == pytest.approx({name: formula(traces) for name, formula in FORMULAS.items()}, abs=1e-10)


@pytest.mark.parametrize("operation", OPERATIONS, ids=named)
def test_pseudotensor_has_the_sign_of_the_determinant(operation):
    """An axial kind has the character of the polar one times the determinant."""
    assert character(operation, KINDS["gyration"]) == operation.determinant * character(operation, KINDS["symmetric"])


def test_traceless_kind_loses_the_trace():
    """Leaving out the trace takes the identity's character 1 away from every operation."""
    symmetric = KINDS["symmetric"]
    traceless = TensorKind(2, permutations=symmetric.permutations, traceless=True)

    assert all(character(operation, traceless) == character(operation, symmetric) - 1 for operation in OPERATIONS)


def test_character_is_exact():
    """A character is a Fraction, of a whole value on crystallographic operations."""
    values = [character(operation, KINDS["elastic"]) for operation in OPERATIONS]

    assert all(isinstance(value, Fraction) and value.denominator == 1 for value in values)


@pytest.mark.parametrize("name", NOT_IN_THE_TABLE)
@pytest.mark.parametrize("group", GROUPS, ids=lambda group: group.hermann_mauguin)
def test_count_is_the_rank_of_a_floating_average(group, name):
    """The average of characters is the rank of the group average built from Rodrigues' matrices."""
    assert invariant_count(group, KINDS[name]) == float_count(group.setting, KINDS[name])
