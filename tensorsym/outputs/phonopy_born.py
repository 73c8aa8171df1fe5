"""The BORN file of phonopy: a dielectric tensor, and Born charges of the atoms that symmetry does not relate.

Line 1 is a factor or a comment, line 2 the dielectric tensor, each further line one charge: nine numbers, row by row.
The file declares neither which index of a charge is the field, nor which atoms are meant: the first of each set of
equivalent atoms of the structure that goes with it (phonopy's documentation, from memory), or all atoms.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.sites import atom_images
from tensorsym.errors import OutputFileError
from tensorsym.outputs.record import TensorRecord
from tensorsym.outputs.rows import Lines, Table, numbers_in_words, typical_place

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.outputs.content import Content

_NUMBER = r"[-+]?(?:\d+\.?\d*|\.\d+)(?:[EeDd][-+]?\d{1,2})?"
_NINE = re.compile(rf"^\s*(?:{_NUMBER}\s+){{8}}{_NUMBER}\s*$")
UNDECLARED = "the file does not say which index is the field; symmetry cannot tell"
FILLED = "the charges of equivalent atoms are those of the first one, carried by the space group"


def looks_like_born(head: str) -> bool:
    """Tell the file by its lines: one that is no tensor, then nine numbers on each."""
    lines = [line for line in head.splitlines()[:4] if line.strip()]
    return len(lines) > 2 and not _NINE.match(lines[0]) and all(map(_NINE.match, lines[1:3]))


def read_born(content: Content, crystal: Crystal | None) -> tuple[TensorRecord, ...]:
    """Return the tensors of a BORN file.

    Parameters
    ----------
    content : Content
        The file.
    crystal : Crystal, optional
        The structure that goes with it; without it the charges are left out.

    Raises
    ------
    OutputFileError
        If a line does not hold nine numbers, or there are charges for another number of atoms.
    """
    rows = _rows(content)
    first = rows[0]
    dielectric = TensorRecord(
        "dielectric", "electronic, clamped ion", first.values.reshape(3, 3), "1", digits=first.digits or None,
        line=first.line, contribution="electronic",
    )  # fmt: skip
    if crystal is None or len(rows) == 1:
        return (dielectric,)
    charges = np.array([row.values.reshape(3, 3) for row in rows[1:]])
    values, notes = _for_all_atoms(charges, crystal, content.source)
    labels = tuple(f"{number} {name}" for number, name in enumerate(crystal.species, 1))
    born = TensorRecord(
        "born-charge", "as printed", values, "e", digits=max(row.digits for row in rows[1:]) or None,
        line=rows[1].line, per_site=True, site_labels=labels, notes=notes,
    )  # fmt: skip
    return dielectric, born


def _rows(content: Content) -> list[Table]:
    lines = Lines(content.lines(), content.source)
    found: list[Table] = []
    for line in lines:
        words = line.partition("#")[0].split()
        if lines.number == 1 or not words:
            continue
        if not _NINE.match(" ".join(words)):
            msg = f"{line.strip()[:60]!r} is not nine numbers"
            raise OutputFileError(msg, where=f"{lines.source}, line {lines.number}")
        found.append(Table(numbers_in_words([words]), typical_place(words) or 0.0, lines.number))
    if not found:
        raise OutputFileError("holds no dielectric tensor", where=content.source)
    return found


def _for_all_atoms(
    charges: NDArray[np.float64], crystal: Crystal, source: str
) -> tuple[NDArray[np.float64], tuple[str, ...]]:
    """Return one charge an atom, those of the first of each set of equivalent atoms carried to the others."""
    atoms = len(crystal.species)
    if len(charges) == atoms:
        return charges, (UNDECLARED,)
    symmetry = crystal.symmetry
    independent = np.unique(symmetry.equivalent_atoms)
    if len(charges) != len(independent):
        msg = f"{len(charges)} charges"
        expected = f"{len(independent)}, one for each set of equivalent atoms, or {atoms}, one for each atom"
        raise OutputFileError(msg, where=source, expected=expected)
    values = np.empty((atoms, 3, 3))
    for image, rotation in zip(atom_images(crystal)[::-1], symmetry.cartesian_rotations()[::-1], strict=True):
        for charge, atom in zip(charges, independent, strict=True):
            values[image[atom]] = rotation @ charge @ rotation.T
    for charge, atom in zip(charges, independent, strict=True):
        values[atom] = charge
    return values, (UNDECLARED, FILLED)
