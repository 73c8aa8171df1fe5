"""Start-up of whole processes, against a bare interpreter and against one that imports numpy."""

from __future__ import annotations

import subprocess
import sys

from tests.benchmarks.timing import median_ratio
from tests.house.source import ROOT


def process(*arguments):
    """Return a call that runs a fresh interpreter to its end."""
    return lambda: subprocess.run([sys.executable, *arguments], cwd=ROOT, capture_output=True, check=True)


def test_help():
    """`tensorsym --help` takes at most 5 bare interpreter starts."""
    ratio = median_ratio(process("-m", "tensorsym", "--help"), process("-c", "pass"), pairs=21)
    print(f"\n--help: {ratio:.2f} bare starts")

    assert ratio <= 5


def test_named_group():
    """A question about a named group takes at most 2.5 processes that only import numpy."""
    question = process("-m", "tensorsym", "allowed", "3m", "piezoelectric")
    ratio = median_ratio(question, process("-c", "import numpy"), pairs=21)
    print(f"\nallowed 3m piezoelectric: {ratio:.2f} imports of numpy")

    assert ratio <= 2.5
