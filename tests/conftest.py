"""What all tests share: where the example crystals and the outside data are, and repeatable generated cases."""

from __future__ import annotations

import os
from pathlib import Path

import pytest
from hypothesis import settings

ROOT = Path(__file__).resolve().parent.parent

# The same cases in every run, and no time limit that a busy machine could break.
settings.register_profile("tensorsym", derandomize=True, deadline=None, database=None)
settings.load_profile("tensorsym")


@pytest.fixture(scope="session")
def structures_folder() -> Path:
    """Return the folder of the shipped example crystals."""
    return ROOT / "structures"


@pytest.fixture(scope="session")
def data_folder() -> Path:
    """Return the folder of published outside data, or skip: it is no part of the project.

    The environment variable TENSORSYM_DATA names it; otherwise it is `shared/data` beside the clone.
    """
    folder = Path(os.environ.get("TENSORSYM_DATA", ROOT.parent / "shared" / "data"))
    if not folder.is_dir():
        pytest.skip(f"outside data are not at {folder}; set TENSORSYM_DATA")
    return folder
