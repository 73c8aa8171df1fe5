from __future__ import annotations

from collections import Counter
from itertools import product

import numpy as np
import pytest

from tensorsym.groups.operations import Basis
from tensorsym.groups.point_group import point_group_in_setting, standard_point_group, standard_point_groups
from tests.groups.settings import ALL_SETTINGS, STANDARD, setting_of
from tests.truths.float_groups import as_set, float_group, settings
from tests.truths.reading import rows

CLASSES = rows("classes.txt")
KINDS = ("1", "2", "3", "4", "6", "-1", "m", "-3", "-4", "-6")


@pytest.mark.parametrize("row", CLASSES, ids=lambda row: row["class"])
def test_class_has_the_facts_of_international_tables(row):
    """Order, system and Schoenflies symbol of every class are those of International Tables, vol. A (memory)."""
    group = standard_point_group(row["class"])

    assert (group.order, group.system, group.schoenflies) == (int(row["order"]), row["system"], row["schoenflies"])


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_operations_are_of_the_right_kinds(group):
    """Every setting has as many operations of each kind as International Tables, vol. A, gives (memory)."""
    row = next(row for row in CLASSES if row["class"] == group.hermann_mauguin)

    counts = Counter(operation.symbol for operation in group.operations)

    assert {kind: counts[kind] for kind in KINDS} == {kind: int(row[kind]) for kind in KINDS}


def test_all_classes_are_there():
    """There are 32 classes, each once."""
    assert [group.hermann_mauguin for group in standard_point_groups()] == [row["class"] for row in CLASSES]
    assert len(CLASSES) == 32


@pytest.mark.parametrize(
    ("what", "count"),
    [("is_centrosymmetric", 11), ("is_enantiomorphic", 11)],
)
def test_number_of_classes(what, count):
    """Eleven classes have a centre, eleven hold only turns (International Tables, vol. A, table 3.2.2.1, memory)."""
    assert sum(getattr(group, what) for group in STANDARD) == count


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_operations_are_those_built_from_directions(group):
    """The Cartesian operations are those that Rodrigues' formula gives for the directions of International Tables."""
    ours = as_set(operation.cartesian() for operation in group.operations)

    assert ours == as_set(float_group(group.setting))
    assert len(ours) == group.order


def test_every_setting_is_checked_against_directions():
    """The independent list of directions names the same settings as the package."""
    assert set(settings()) == {group.setting for group in ALL_SETTINGS}


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_products_stay_in_the_group(group):
    """The product of any two operations is an operation, and none is listed twice."""
    operations = set(group.operations)

    assert len(operations) == group.order
    assert {one @ other for one, other in product(operations, repeat=2)} == operations


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_every_operation_has_its_inverse(group):
    """Each operation times exactly one operation is the identity, which stands first."""
    identity = group.operations[0]

    assert identity.symbol == "1"
    assert all(sum(one @ other == identity for other in group.operations) == 1 for one in group.operations)


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_named_elements_are_in_the_group(group):
    """The elements of the symbol are operations, the generators first among them, and one basis holds them all."""
    assert set(group.elements) <= set(group.operations)
    assert group.elements[: len(group.generators)] == group.generators
    assert {operation.basis for operation in group.operations} == {group.basis}


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_settings_are_turned_copies_of_their_class(group):
    """Some turn that keeps z, or exchanges the axes, carries every setting onto the standard one of its class."""
    standard = as_set(float_group(standard_point_group(group.hermann_mauguin).setting))
    thirty, eighth = np.pi / 6, np.pi / 4
    turns = [
        np.array([[np.cos(angle), -np.sin(angle), 0], [np.sin(angle), np.cos(angle), 0], [0, 0, 1]])
        for angle in (0.0, thirty, eighth)
    ]
    cyclic = np.array([[0.0, 1.0, 0.0], [0.0, 0.0, 1.0], [1.0, 0.0, 0.0]])
    turns += [cyclic, cyclic.T]

    copies = [as_set(turn @ matrix @ turn.T for matrix in float_group(group.setting)) for turn in turns]

    assert standard in copies


def test_groups_are_keys():
    """Two look-ups give equal groups with one hash, and settings of one class differ."""
    one, other = point_group_in_setting("321"), point_group_in_setting("312")

    assert one == point_group_in_setting("321")
    assert hash(one) == hash(point_group_in_setting("321"))
    assert one != other
    assert len({one: 1, other: 2, point_group_in_setting("321"): 3}) == 2


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_basis_belongs_to_the_system(group):
    """Trigonal and hexagonal classes are written in the hexagonal basis, all others in rectangular axes."""
    assert (group.basis is Basis.HEXAGONAL) == (group.system in ("trigonal", "hexagonal"))
