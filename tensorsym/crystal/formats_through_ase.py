"""Formats that ASE reads and we do not, when ASE is installed: a short list of plain text formats with a lattice."""

from __future__ import annotations

import re
import tempfile
import warnings
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Mapping

MARKS: Mapping[str, tuple[str, ...]] = {
    "aims": (r"lattice_vector(\s+[-+.\dEe]+){3}", r"atom(_frac)?(\s+[-+.\dEe]+){3}"),
    "castep-cell": (r"%block\s+lattice_", r"%block\s+positions_"),
    "res": (r"titl\b", r"cell(\s+[.\d]+){7}", r"sfac\s"),
}
"""ASE's name of each format, and how the lines by which it is known begin."""


def parts_through_ase(text: str, source: str) -> StructureParts | None:
    """Return the structure in a text of one of the formats of `MARKS`, None if it is none or ASE is not there.

    Raises
    ------
    StructureError
        If the text bears the marks of a format and ASE cannot read it.
    """
    name = next((name for name, marks in MARKS.items() if all(_begins_a_line(mark, text) for mark in marks)), None)
    if name is None:
        return None
    try:
        from ase.io import read as read_with_ase
    except ImportError as error:
        msg = f"looks like the format {name!r}, for which ASE is needed"
        raise StructureError(msg, where=source, hint="pip install ase") from error
    try:
        with warnings.catch_warnings(), tempfile.TemporaryDirectory() as folder:
            warnings.simplefilter("ignore")
            path = Path(folder) / "structure"
            path.write_text(text, encoding="utf-8")
            atoms: Any = read_with_ase(path, format=name)
    except Exception as error:  # ASE raises whatever its parsers meet; told with the file's name
        msg = f"cannot be read as {name!r}: {type(error).__name__} {error}"
        raise StructureError(msg, where=source) from error
    notes = (f"read by ASE as {name!r}",)
    cell, places = np.array(atoms.cell, dtype=float), np.array(atoms.get_positions())
    return StructureParts(name, cell, places, atoms.get_chemical_symbols(), cartesian=True, notes=notes)


def _begins_a_line(mark: str, text: str) -> bool:
    return re.search(rf"^[ \t]*{mark}", text, re.IGNORECASE | re.MULTILINE) is not None
