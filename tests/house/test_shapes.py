from __future__ import annotations

import ast

import pytest

from tests.house import shapes
from tests.house.source import Module, modules_of_the_package

RULES = (shapes.long_modules, shapes.long_functions, shapes.empty_names)
LONGEST = "def rows():\n" + "    pass\n" * shapes.FUNCTION_LINES
DOCUMENTED = "def rows():\n    '''Long.\n" + "\n" * 80 + "    '''\n" + "    pass\n" * shapes.FUNCTION_LINES

FAULTS = [
    (shapes.long_modules, "rows", "pass\n" * (shapes.MODULE_LINES + 1)),
    (shapes.long_functions, "rows", LONGEST + "    pass\n"),
    (shapes.long_functions, "rows", DOCUMENTED + "    pass\n"),
    (shapes.long_functions, "rows", "class Rows:\n    async " + LONGEST.replace("    ", "        ") + "        pass\n"),
    (shapes.empty_names, "utils", ""),
    (shapes.empty_names, "helpers", ""),
    (shapes.empty_names, "rows", "def get_rows():\n    pass"),
    (shapes.empty_names, "rows", "def _process_rows():\n    pass"),
    (shapes.empty_names, "rows", "class Rows:\n    def get_rank(self):\n        pass"),
]

SOUND = [
    "pass\n" * shapes.MODULE_LINES,
    LONGEST,
    DOCUMENTED,
    "def targets():\n    pass\ndef __getattr__(name):\n    pass",
]


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.__name__)
def test_package_keeps_rule(rule):
    """Our own source gives the rule nothing to complain about."""
    assert rule(modules_of_the_package()) == []


@pytest.mark.parametrize(("rule", "name", "source"), FAULTS)
def test_planted_fault_is_found(rule, name, source):
    """A module with one fault gets exactly one complaint, which names the module."""
    complaints = rule([Module(f"tensorsym.exact.{name}", source)])

    assert len(complaints) == 1
    assert complaints[0].startswith(f"tensorsym.exact.{name}")


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.__name__)
@pytest.mark.parametrize("source", SOUND)
def test_module_within_the_caps_passes(rule, source):
    """A module at the cap, and names that only resemble empty ones, get no complaint."""
    assert rule([Module("tensorsym.exact.rows", source)]) == []


@pytest.mark.parametrize(
    ("source", "lines"),
    [
        ("def f(): return 1", 1),
        ("def f():\n    '''Only a docstring.'''", 0),
        ("def f():\n    '''Docstring.'''\n\n    x = 1\n\n    return x", 3),
    ],
)
def test_docstring_is_not_counted(source, lines):
    """The length of a function is that of its statements."""
    assert shapes.body_lines(ast.parse(source).body[0]) == lines
