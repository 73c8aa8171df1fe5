"""Invariants in other axes: the exact form where x, y, z are renamed, the turned space elsewhere."""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tensorsym.groups.point_group import point_group_in_setting, standard_point_groups
from tensorsym.invariants.axes import SNAP, signed_axes, space_in_axes
from tensorsym.invariants.projection import orthonormal_basis, projected
from tensorsym.invariants.solver import invariant_space
from tensorsym.tensors.axes import turned
from tests.groups.settings import ALL_SETTINGS, setting_of
from tests.invariants.kinds import KINDS

QUARTER = np.array([[0.0, 1.0, 0.0], [-1.0, 0.0, 0.0], [0.0, 0.0, 1.0]])
CYCLIC = np.array([[0.0, 1.0, 0.0], [0.0, 0.0, 1.0], [1.0, 0.0, 0.0]])
HALF_ABOUT_X = np.diag([1.0, -1.0, -1.0])
CHOSEN = ["symmetric", "magnetoelectric", "piezoelectric", "hall", "elastic"]


def about_z(degrees):
    """Return axes turned about z."""
    cosine, sine = np.cos(np.radians(degrees)), np.sin(np.radians(degrees))
    return np.array([[cosine, sine, 0.0], [-sine, cosine, 0.0], [0.0, 0.0, 1.0]])


def random_axes(seed):
    """Return random right-handed axes."""
    matrix = np.linalg.qr(np.random.default_rng(seed).normal(size=(3, 3)))[0]
    return matrix * np.linalg.det(matrix)


def form(space):
    """Return what a space says, without the group it says it of."""
    return space.expressions, space.zero


@pytest.mark.parametrize(
    ("setting", "axes", "other"),
    [
        ("121", CYCLIC, "211"),
        ("121", CYCLIC.T, "112"),
        ("1m1", CYCLIC.T, "11m"),
        ("12/m1", CYCLIC, "2/m11"),
        ("mm2", CYCLIC, "m2m"),
        ("mm2", CYCLIC.T, "2mm"),
        ("321", QUARTER, "312"),
        ("312", QUARTER, "321"),
        ("3m1", QUARTER, "31m"),
        ("-3m1", QUARTER.T, "-31m"),
        ("-62m", QUARTER, "-6m2"),
        ("321", about_z(30.0), "312"),
        ("3m1", about_z(-90.0), "31m"),
        ("-6m2", about_z(150.0), "-62m"),
    ],
)
@pytest.mark.parametrize("name", CHOSEN)
def test_renamed_axes_give_the_other_setting(setting, axes, other, name):
    """In axes that carry one setting onto another the form is exactly that of the other setting."""
    here = space_in_axes(invariant_space(point_group_in_setting(setting), KINDS[name]), axes)

    assert form(here) == form(invariant_space(point_group_in_setting(other), KINDS[name]))


@pytest.mark.parametrize("group", standard_point_groups(), ids=lambda group: group.hermann_mauguin)
@pytest.mark.parametrize("axes", [QUARTER, CYCLIC, HALF_ABOUT_X], ids=["quarter", "cyclic", "half"])
@pytest.mark.parametrize("name", CHOSEN)
def test_renamed_axes_stay_exact(group, axes, name):
    """In axes that only rename x, y, z coefficients stay Fractions, and the space is the turned one."""
    space = invariant_space(group, KINDS[name])
    here = space_in_axes(space, axes)

    assert all(isinstance(value, Fraction) for terms in here.expressions.values() for _, value in terms)
    assert same_span(here.basis(), [turned(tensor, axes) for tensor in space.basis()])


def same_span(one, other):
    """Tell whether two lists of tensors, both independent, span one space."""
    one, other = (np.array(rows).reshape(len(rows), -1) if len(rows) else np.zeros((0, 1)) for rows in (one, other))
    if not len(one) or not len(other):
        return len(one) == len(other)
    rest = other - other @ np.linalg.pinv(one) @ one
    return len(one) == len(other) and np.abs(rest).max() < 1e-9 * max(1.0, np.abs(other).max())


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
@settings(max_examples=8)
@given(seed=st.integers(0, 2**32 - 1), name=st.sampled_from([*CHOSEN, "cyclic", "photoelastic"]))
def test_space_in_any_axes_is_the_turned_one(group, seed, name):
    """In general axes the dimension is the exact one, and the basis spans the turned tensors."""
    space, axes = invariant_space(group, KINDS[name]), random_axes(seed)
    here = space_in_axes(space, axes)

    assert here.dimension == space.dimension
    assert here.certificate == space.certificate
    assert np.abs(here.coefficients()[:, list(here.free)] - np.eye(here.dimension)).max(initial=0.0) < 1e-9
    assert same_span(here.basis(), [turned(tensor, axes) for tensor in space.basis()])


@pytest.mark.parametrize("name", CHOSEN)
def test_own_axes_change_nothing(name):
    """Asked for in the standard axes the space itself comes back."""
    space = invariant_space(point_group_in_setting("321"), KINDS[name])

    assert space_in_axes(space, np.eye(3)) is space


@pytest.mark.parametrize("degrees", [60, 120, 180, 240, 300])
@pytest.mark.parametrize("setting", ["6", "622", "6mm", "-62m", "6/mmm"])
def test_sixths_of_a_turn_are_renamings(setting, degrees):
    """Axes turned by multiples of 60 degrees about the principal axis show a hexagonal class in its own form."""
    space = invariant_space(point_group_in_setting(setting), KINDS["elastic"])

    here = space_in_axes(space, about_z(degrees))

    assert form(here) == form(space)


@pytest.mark.parametrize("degrees", [60, 180, 300])
def test_half_turn_changes_signs_in_a_trigonal_class(degrees):
    """Class 32 in axes turned by 60 or 180 degrees about z has the same relations among components, of other sign."""
    space = invariant_space(point_group_in_setting("321"), KINDS["piezoelectric"])
    axes = about_z(degrees)
    here = space_in_axes(space, axes)

    assert form(here) == form(space)
    first = turned(space.basis()[0], axes)
    assert first == pytest.approx(-space.basis()[0], abs=1e-12)


@pytest.mark.parametrize("setting", ["222", "4", "m-3m"])
def test_rectangular_classes_know_no_sixths(setting):
    """Axes turned by 60 degrees are general ones for a rectangular class."""
    space = invariant_space(point_group_in_setting(setting), KINDS["elastic"])

    assert signed_axes(space, about_z(60.0)) is None


@pytest.mark.parametrize(("tilt", "snaps"), [(0.3 * SNAP, True), (3 * SNAP, False)])
def test_nearly_renamed_axes_are_renamed(tilt, snaps):
    """Axes within the stated distance of a renaming count as it, others do not."""
    space = invariant_space(point_group_in_setting("321"), KINDS["piezoelectric"])
    axes = about_z(np.degrees(tilt)) @ QUARTER

    assert (signed_axes(space, axes) is not None) == snaps


@pytest.mark.parametrize("setting", ["3", "-3"])
def test_seven_elastic_constants_become_six_after_a_turn(setting):
    """Class 3 has 7 elastic constants; about z there are axes in which c15 vanishes and 6 are left (Nye; memory)."""
    group, kind = point_group_in_setting(setting), KINDS["elastic"]
    c = projected(np.random.default_rng(8).normal(size=(3,) * 4), orthonormal_basis(group, kind))
    c14, c15 = c[0, 0, 1, 2], c[0, 0, 0, 2]
    angle = np.degrees(np.arctan2(c15, c14)) / 3

    there = [turned(c, about_z(sense * angle))[0, 0, 0, 2] for sense in (1, -1)]

    assert invariant_space(group, kind).dimension == 7
    assert min(abs(value) for value in there) < 1e-12 < abs(c15)


def test_published_form_in_ieee_like_axes_of_zinc_blende():
    """Class -43m, x along [110], y along [-110], z along c: -e24 = e31 = -e32 = e15 replace e14 (by hand)."""
    axes = np.array([[1.0, 1.0, 0.0], [-1.0, 1.0, 0.0], [0.0, 0.0, 2**0.5]]) / 2**0.5
    space = space_in_axes(invariant_space(point_group_in_setting("-43m"), KINDS["piezoelectric"]), axes)
    digits = space.components.digits

    found = {digits[number]: dict(terms) for number, terms in space.expressions.items()}

    (name,) = (digits[number] for number in space.free)
    assert name == "15"
    assert {key: value[space.free[0]] for key, value in found.items()} == pytest.approx(
        {"15": 1.0, "24": -1.0, "31": 1.0, "32": -1.0}
    )
