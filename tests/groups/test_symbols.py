from __future__ import annotations

from functools import lru_cache

import pytest
import spglib

from tensorsym.errors import GroupSymbolError
from tensorsym.groups.classes import CLASSES, SAME_SETTING
from tensorsym.groups.point_group import point_group_in_setting
from tensorsym.groups.symbols import point_group_named, point_group_of_space_group
from tests.groups.settings import ALL_SETTINGS, STANDARD, setting_of

# spglib 2.7 and 2.8 warn at every call that their way of reporting failures will change.
quiet_spglib = pytest.mark.filterwarnings("ignore:Set OLD_ERROR_HANDLING:DeprecationWarning")


@lru_cache(maxsize=1)
def first_hall_numbers():
    """Return the first Hall number, that of the standard setting, of every space-group number."""
    numbers = {}
    for hall in range(1, 531):
        numbers.setdefault(spglib.get_spacegroup_type(hall).number, hall)
    return numbers


@quiet_spglib
@pytest.mark.parametrize("number", range(1, 231))
def test_space_group_gives_the_operations_of_spglib(number):
    """The operations of every space group's class, setting included, are the rotations of spglib's database."""
    rotations = spglib.get_symmetry_from_database(first_hall_numbers()[number])["rotations"]

    group = point_group_named(f"no{number}")

    assert {operation.matrix for operation in group.operations} == {
        tuple(map(tuple, rotation)) for rotation in rotations.tolist()
    }


@quiet_spglib
@pytest.mark.parametrize("number", range(1, 231))
def test_space_group_gives_the_class_of_spglib(number):
    """Hermann-Mauguin and Schoenflies symbols of every space group's class are those that spglib prints."""
    theirs = spglib.get_spacegroup_type(first_hall_numbers()[number])

    group = point_group_of_space_group(number)

    assert point_group_named(theirs.pointgroup_international).hermann_mauguin == group.hermann_mauguin
    assert theirs.schoenflies.partition("^")[0] == group.schoenflies


@pytest.mark.parametrize("group", ALL_SETTINGS, ids=setting_of)
def test_setting_names_itself(group):
    """The symbol of a setting gives that setting."""
    assert point_group_named(group.setting) == group


@pytest.mark.parametrize("group", STANDARD, ids=setting_of)
@pytest.mark.parametrize("spelled", [str.lower, str.upper, str])
def test_class_is_named_by_both_notations(group, spelled):
    """Short Hermann-Mauguin and Schoenflies symbols, in any case, give the standard setting of the class."""
    assert point_group_named(group.hermann_mauguin) == group
    assert point_group_named(spelled(group.schoenflies)) == group


@pytest.mark.parametrize(
    ("symbol", "setting"),
    [
        ("2/m 2/m 2/m", "mmm"),
        ("4/m 2/m 2/m", "4/mmm"),
        ("-3 2/m", "-3m1"),
        ("-3 2/m 1", "-3m1"),
        ("-3 1 2/m", "-31m"),
        ("6/m 2/m 2/m", "6/mmm"),
        ("2/m -3", "m-3"),
        ("4/m -3 2/m", "m-3m"),
        ("m3m", "m-3m"),
        ("m3", "m-3"),
        ("1 2/m 1", "12/m1"),
        ("1 2 1", "121"),
        ("1 1 2", "112"),
        ("1 1 2/m", "112/m"),
        ("2 1 1", "211"),
        ("m 1 1", "m11"),
        ("32", "321"),
        ("3 1 2", "312"),
        ("3m", "3m1"),
        ("3 1 m", "31m"),
        ("-3m", "-3m1"),
        ("-42m", "-42m"),
        ("-4m2", "-4m2"),
        ("-62m", "-62m"),
        ("-6m2", "-6m2"),
        ("2mm", "2mm"),
        ("m2m", "m2m"),
        ("\u22123m", "-3m1"),
        ("\u201343m", "-43m"),
        ("3\u0305m", "-3m1"),
        ("m3\u0305m", "m-3m"),
        ("4\u03052m", "-42m"),
        ("\\bar{4}3m", "-43m"),
        ("$m\\overline{3}m$", "m-3m"),
        ("D_{3d}", "-3m1"),
        ("D_3d", "-3m1"),
        ("d3D", "-3m1"),
        ("S6", "-3"),
        ("C3i", "-3"),
        ("C1h", "1m1"),
        ("Vd", "-42m"),
        ("V", "222"),
        ("Vh", "mmm"),
        ("S2", "-1"),
        ("C_i", "-1"),
        ("5", "121"),
        ("152", "321"),
        ("149", "312"),
        ("no. 222", "m-3m"),
        ("222", "222"),
        ("no 32", "mm2"),
        ("#160", "3m1"),
        ("225", "m-3m"),
        (" -3 m ", "-3m1"),
    ],
)
def test_spelling(symbol, setting):
    """Full symbols, other settings, older Schoenflies symbols, bars of every kind and space-group numbers are read."""
    assert point_group_named(symbol).setting == setting


@pytest.mark.parametrize(
    ("symbol", "nearest"),
    [("-43n", "-43m"), ("D7", "D6"), ("6/mm", "6/mmm"), ("m-3mm", "m-3m"), ("C4z", "C4"), ("-3n", "-3")],
)
def test_unknown_symbol_offers_the_nearest(symbol, nearest):
    """A symbol that is none is refused, quoted, with the nearest that are."""
    with pytest.raises(GroupSymbolError, match=r"is no point group; expected .*; nearest: ") as refused:
        point_group_named(symbol)

    assert repr(symbol) in refused.value.message
    assert nearest in refused.value.nearest


@pytest.mark.parametrize("symbol", ["", " ", "0", "231", "no 0", "no231", "999", "1000", "-1000", "x" * 5000, "²", "٣"])
def test_nonsense_is_refused(symbol):
    """Text that names nothing ends in the error for group symbols, however odd."""
    with pytest.raises(GroupSymbolError, match="is no point group"):
        point_group_named(symbol)


@pytest.mark.parametrize("number", [0, -1, 231, 10**9])
def test_number_out_of_range_is_refused(number):
    """Only the numbers 1 to 230 name space groups."""
    with pytest.raises(GroupSymbolError, match=f"{number} is no space-group number; expected 1 to 230"):
        point_group_of_space_group(number)


@pytest.mark.parametrize(("symbol", "setting"), SAME_SETTING.items())
def test_other_symbols_lead_to_settings(symbol, setting):
    """Every alternative symbol names a setting that exists, and hides none."""
    assert point_group_named(symbol) == point_group_in_setting(setting)
    assert symbol not in {row.setting for row in CLASSES}
