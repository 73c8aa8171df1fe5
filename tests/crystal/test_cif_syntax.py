from __future__ import annotations

import pytest

from tensorsym.crystal import cif_syntax
from tensorsym.crystal.cif_syntax import Value, cif_blocks
from tensorsym.errors import StructureError


def values(text):
    """Return the items of the only block as plain text."""
    (block,) = cif_blocks(text, "file")
    return {name: [value.text for value in column] for name, column in block.columns.items()}


# The examples follow International Tables for Crystallography, vol. G, chapter 2.2 (memory).
@pytest.mark.parametrize(("text", "expected"), [
    ("data_a\n_x 'it's here'", {"_x": ["it's here"]}),
    ('data_a\n_x "a # no comment"', {"_x": ["a # no comment"]}),
    ("data_a\n_x 1 # a comment\n_y 2", {"_x": ["1"], "_y": ["2"]}),
    ("data_a\n_x a#b", {"_x": ["a#b"]}),
    ("data_a\n_x\n;first\n second\n;\n_y 1", {"_x": ["first\n second"], "_y": ["1"]}),
    ("data_a\n_x ;no_text", {"_x": [";no_text"]}),
    ("data_a\nloop_\n_x\n_y\n1 2\n3\n4\n", {"_x": ["1", "3"], "_y": ["2", "4"]}),
    ("data_a\nLOOP_ _X 1 2 _Y 3", {"_x": ["1", "2"], "_y": ["3"]}),
    ("data_a\n_x ?\n_y .\n_z '?'", {"_x": [""], "_y": [""], "_z": ["?"]}),
    ("data_a\n_cell.length_a 3", {"_cell_length_a": ["3"]}),
    ("data_a\n_x ''", {"_x": [""]}),
])  # fmt: skip
def test_values_are_read(text, expected):
    """Quotes, comments, text fields, loops and absent values are read as the standard writes them."""
    assert values(text) == expected


def test_lines_are_counted():
    """Every value knows its line, also behind a text field."""
    (block,) = cif_blocks("data_a\n_x\n;one\ntwo\n;\n_y 5\n", "file")

    assert block.column("_y") == [Value("5", 6)]


@pytest.mark.parametrize(("text", "message"), [
    ("data_a\n_x", "line 2: _x has no value; the file may be cut off"),
    ("data_a\n_x _y 1", "line 2: _x has no value"),
    ("data_a\n_x 1 2", "line 2: the value '2' belongs to no item"),
    ("data_a\nloop_\n_x\n_y\n1 2 3", "lines 2 to 5: the loop has 3 values for 2 items"),
    ("data_a\nloop_\n1 2", "the loop has 2 values for 0 items"),
    ("_x 1\ndata_a", "line 1: '_x' stands before any data_ block"),
])  # fmt: skip
def test_broken_syntax_is_told_with_its_line(text, message):
    """A value without a name, a name without a value or a short row is refused with its line."""
    with pytest.raises(StructureError, match=message):
        cif_blocks(text, "file")


def test_number_of_values_is_limited(monkeypatch):
    """A file with more values than any crystal needs is refused."""
    monkeypatch.setattr(cif_syntax, "MOST_VALUES", 10)

    with pytest.raises(StructureError, match="holds more than 10 values"):
        cif_blocks("data_a\nloop_\n_x\n" + "1 " * 20, "file")


def test_first_skips_absent_values():
    """The first value that is there counts, over several names."""
    (block,) = cif_blocks("data_a\n_x ?\n_y 3", "file")

    assert block.first("_x", "_y").text == "3"
    assert block.first("_z") is None
