from __future__ import annotations

import subprocess
import sys

import pytest

from tests.house.source import ROOT, modules_of_the_package

HEAVY = ("numpy", "sympy", "spglib", "pymatgen", "scipy", "click", "flint", "pint", "ase", "pandas", "matplotlib")
LIGHT_ROOMS = ("errors", "exact", "groups", "tensors", "invariants", "catalog")

COMMAND = """
import sys
from tensorsym.cli.main import main
sys.argv = ["tensorsym", {arguments}]
try:
    main()
except SystemExit as end:
    assert not end.code, end.code
"""


def heavy_packages_loaded_by(code):
    """Return the heavy packages that a fresh interpreter holds after running the code."""
    probe = f"{code}\nimport sys\nprint('loaded', *sorted(set({HEAVY}) & set(sys.modules)))"
    run = subprocess.run([sys.executable, "-c", probe], cwd=ROOT, capture_output=True, text=True, check=False)
    assert run.returncode == 0, run.stderr
    return set(run.stdout.splitlines()[-1].split()) - {"loaded"}


def test_probe_sees_a_heavy_package():
    """The probe reports a package that the code does load."""
    assert heavy_packages_loaded_by("import numpy") == {"numpy"}


def test_facade_is_light():
    """`import tensorsym` loads no heavy package."""
    assert heavy_packages_loaded_by("import tensorsym") == set()


@pytest.mark.parametrize("room", LIGHT_ROOMS)
def test_exact_rooms_are_light(room):
    """All modules of a room that answers for a named group load without arrays, files or symbols."""
    names = [module.name for module in modules_of_the_package() if module.room == room]

    assert names
    assert heavy_packages_loaded_by("\n".join(f"import {name}" for name in names)) <= {"flint"}


def test_help_is_light():
    """`tensorsym --help` answers with click alone."""
    assert heavy_packages_loaded_by(COMMAND.format(arguments="'--help'")) <= {"click"}


def test_named_group_needs_no_crystal():
    """`tensorsym allowed 3m piezoelectric` loads nothing that reads crystals or shows symbols."""
    loaded = heavy_packages_loaded_by(COMMAND.format(arguments="'allowed', '3m', 'piezoelectric'"))

    assert loaded <= {"click", "flint", "numpy"}
