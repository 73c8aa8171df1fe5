from __future__ import annotations

import pytest

from tests.house import arrows
from tests.house.source import Import, Module, modules_of_the_package

RULES = (
    arrows.upward_arrows,
    arrows.rooms_without_floor,
    arrows.facade_imports,
    arrows.import_cycles,
    arrows.packages_outside_home,
)

LOCAL = "def show():\n    import {}\n"
TYPING = "from typing import TYPE_CHECKING\nif TYPE_CHECKING:\n    import {}\n"

FAULTS = [
    (arrows.upward_arrows, "groups.symbols", "from tensorsym.tasks.check import check"),
    (arrows.upward_arrows, "groups.symbols", "from tensorsym.tensors.kind import TensorKind"),
    (arrows.upward_arrows, "exact.rows", "import tensorsym.groups.symbols"),
    (arrows.upward_arrows, "crystal.read", "from tensorsym.outputs.read import read_output"),
    (arrows.upward_arrows, "tasks.check", LOCAL.format("tensorsym.report.text")),
    (arrows.upward_arrows, "tasks.check", TYPING.format("tensorsym.report.text")),
    (arrows.upward_arrows, "report.text", "from ..cli import main"),
    (arrows.upward_arrows, "catalog.rows", "import importlib\nimportlib.import_module('tensorsym.invariants.solver')"),
    (arrows.upward_arrows, "cli.main", "from tensorsym.page.server import serve"),
    (arrows.upward_arrows, "errors", "from tensorsym.groups.symbols import NAMES"),
    (arrows.rooms_without_floor, "attic.chest", ""),
    (arrows.facade_imports, "cli.main", "import tensorsym"),
    (arrows.facade_imports, "cli.main", "import tensorsym as ts"),
    (arrows.facade_imports, "tasks.check", "from tensorsym import groups"),
    (arrows.facade_imports, "tasks.check", "from tensorsym import read"),
    (arrows.facade_imports, "tasks.check", LOCAL.format("tensorsym")),
    (arrows.packages_outside_home, "cli.main", "import pymatgen.core"),
    (arrows.packages_outside_home, "tasks.check", "import spglib"),
    (arrows.packages_outside_home, "tasks.check", LOCAL.format("spglib")),
    (arrows.packages_outside_home, "tasks.check", "from scipy.linalg import null_space"),
    (arrows.packages_outside_home, "report.latex", "import sympy"),
    (arrows.packages_outside_home, "groups.symbols", LOCAL.format("sympy")),
    (arrows.packages_outside_home, "tasks.plot", LOCAL.format("matplotlib.pyplot")),
    (arrows.packages_outside_home, "outputs.units", "import pint"),
    (arrows.packages_outside_home, "report.text", "import click"),
    (arrows.packages_outside_home, "invariants.solver", "import flint"),
    (arrows.packages_outside_home, "tasks.check", LOCAL.format("pandas")),
    (arrows.packages_outside_home, "exact.rows", "import numpy as np"),
    (arrows.packages_outside_home, "groups.symbols", "class Group:\n    import numpy"),
    (arrows.packages_outside_home, "tensors.axes", "try:\n    import numpy\nexcept ImportError:\n    pass"),
    (arrows.packages_outside_home, "invariants.solver", "from numpy import array"),
    (arrows.packages_outside_home, "catalog.rows", "import numpy"),
    (arrows.packages_outside_home, "report.text", "import numpy"),
    (arrows.packages_outside_home, "report.json", "import numpy"),
    (arrows.packages_outside_home, "cli.main", "import numpy"),
    (arrows.packages_outside_home, "errors", LOCAL.format("numpy")),
    (arrows.packages_outside_home, "", "import numpy"),
]

SOUND = [
    ("tasks.check", "from tensorsym.crystal.read import read\nfrom tensorsym.errors import ShapeError\nimport numpy"),
    ("outputs.read", "import json\nfrom tensorsym.crystal.read import read\nimport spglib\nimport pymatgen.io.vasp"),
    ("tensors.axes", "from tensorsym.exact.rows import rank\n" + LOCAL.format("numpy")),
    ("groups.operations", TYPING.format("numpy")),
    ("exact.rows", "import flint"),
    ("cli.main", "import click\nfrom tensorsym.report.text import lines\nfrom . import options"),
    ("report.latex", LOCAL.format("sympy")),
    ("", "def read(path):\n    from tensorsym.crystal.read import read\n    return read(path)"),
    ("__main__", "from tensorsym.cli.main import main"),
]


def planted(name, source):
    """Return a module of the package with this source."""
    return Module(f"tensorsym.{name}".rstrip("."), source)


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.__name__)
def test_package_keeps_rule(rule):
    """Our own source gives the rule nothing to complain about."""
    assert rule(modules_of_the_package()) == []


@pytest.mark.parametrize(("rule", "name", "source"), FAULTS)
def test_planted_fault_is_found(rule, name, source):
    """A module with one fault gets exactly one complaint, which names the module."""
    complaints = rule([planted(name, source)])

    assert len(complaints) == 1
    assert complaints[0].startswith(f"tensorsym.{name}".rstrip("."))


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.__name__)
@pytest.mark.parametrize(("name", "source"), SOUND)
def test_allowed_imports_pass(rule, name, source):
    """What the floors and homes allow gets no complaint."""
    assert rule([planted(name, source)]) == []


@pytest.mark.parametrize(
    "sources",
    [
        {"groups.a": "import tensorsym.groups.b", "groups.b": "from tensorsym.groups.a import thing"},
        {"groups.a": "from . import b", "groups.b": "from tensorsym.groups import c", "groups.c": "from .a import x"},
    ],
)
def test_ring_of_imports_is_found(sources):
    """Modules that import each other on loading are named as a ring."""
    complaints = arrows.import_cycles([planted(name, source) for name, source in sources.items()])

    assert len(complaints) == 1
    assert all(f"tensorsym.{name}" in complaints[0] for name in sources)


@pytest.mark.parametrize("back", [LOCAL, TYPING])
def test_late_import_makes_no_ring(back):
    """An import inside a function or for the type checker closes no ring."""
    modules = [planted("groups.a", "import tensorsym.groups.b"), planted("groups.b", back.format("tensorsym.groups.a"))]

    assert arrows.import_cycles(modules) == []


def test_reader_sees_every_room():
    """The modules read are those of the package: each room that has a folder is among them."""
    rooms = {module.room for module in modules_of_the_package()}

    assert {"errors", "exact", "groups", "tensors", "invariants", "catalog", "crystal", "outputs", "tasks"} <= rooms


def test_reader_resolves_relative_imports():
    """Dots are counted from the module, and from the folder in a package's own file."""
    module = Module("tensorsym.groups.symbols", "from .classes import NAMES\nfrom ..exact import rows")
    package = Module("tensorsym.groups", "from .classes import NAMES", is_package=True)

    assert [found.target for found in module.imports] == ["tensorsym.groups.classes.NAMES", "tensorsym.exact.rows"]
    assert [found.target for found in package.imports] == ["tensorsym.groups.classes.NAMES"]


def test_reader_tells_the_moment():
    """Imports of the module, of a function and for types are told apart, also after `else`."""
    source = "import a\ndef f():\n    import b\nif TYPE_CHECKING:\n    import c\nelse:\n    import d\n"

    assert Module("tensorsym.groups.symbols", source).imports == (
        Import("a", 1, "module"),
        Import("b", 3, "function"),
        Import("c", 5, "typing"),
        Import("d", 7, "module"),
    )
