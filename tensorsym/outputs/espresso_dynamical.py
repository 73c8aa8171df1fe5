"""The tensors of a dynamical-matrix file that ph.x of Quantum ESPRESSO writes at Gamma (layout of versions 6 and 7)."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.formats_pw_input import BOHR, notes_on_labels
from tensorsym.crystal.numbers_in import line_at, numbers_in, vectors_at, whole_number
from tensorsym.crystal.parts import StructureParts
from tensorsym.crystal.pw_lattices import lattice_of_index
from tensorsym.errors import OutputFileError
from tensorsym.outputs.espresso_phonon import (
    ATOMIC_RAMAN,
    FROM_FORCES,
    FROM_POLARISATION,
    atom_heading,
    matrices_under,
    polarised_heading,
    site_record,
)
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import Lines

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.outputs.content import Content

FORMAT = "dynamical-matrix file of Quantum ESPRESSO"


def looks_like_dynamical_matrix(head: str) -> bool:
    """Tell the file by its first line."""
    return head.lstrip().startswith("Dynamical matrix file")


def read_dynamical_matrix(content: Content) -> OutputFile:
    """Return structure and tensors of a dynamical-matrix file.

    The rows of Z_{alpha}{s,beta} are the field, those of Z_{s,alpha}{beta} the displacement: the second are handed on
    transposed, so that the first index is the polarisation in both.

    Raises
    ------
    InputError
        If the head is damaged, or a table is cut off or holds other words than numbers.
    """
    text_lines = content.text.splitlines()
    crystal = _crystal(text_lines, content.source)
    labels = tuple(f"{number} {name}" for number, name in enumerate(crystal.species, 1))
    lines = Lines(text_lines, content.source)
    records = [record for line in lines if (record := _record_under(line, lines, labels)) is not None]
    return OutputFile(crystal, tuple(records), FORMAT)


def _record_under(line: str, lines: Lines, labels: tuple[str, ...]) -> TensorRecord | None:
    atoms = len(labels)
    if "Dielectric Tensor:" in line:
        table = lines.table(3, 3, "the dielectric tensor")
        return TensorRecord(
            "dielectric", "electronic", table.values, "1", digits=table.digits, line=table.line,
            contribution="electronic",
        )  # fmt: skip
    if "Effective Charges E-U" in line:
        tables = matrices_under(lines, atoms, 1, "Born charges", atom_heading)
        return site_record("born-charge", FROM_FORCES, tables, (3, 3), "e", labels)
    if "Effective Charges U-E" in line:
        tables = matrices_under(lines, atoms, 1, "Born charges", atom_heading)
        turned = [table._replace(values=table.values.T) for table in tables]
        return site_record("born-charge", f"{FROM_POLARISATION} (transposed)", turned, (3, 3), "e", labels)
    if "Raman tensor (A^2)" in line:
        tables = matrices_under(lines, 3 * atoms, 1, "the Raman tensor", polarised_heading)
        return site_record("raman-atomic", f"{ATOMIC_RAMAN}, times the volume", tables, (3, 3, 3), "angstrom^2", labels)
    return None


def _crystal(lines: Sequence[str], source: str) -> Crystal:
    words = line_at(lines, 2, source, "the numbers of types and atoms").split()
    if len(words) < 9:
        msg = f"{' '.join(words)[:60]!r} is not the numbers of types and atoms, ibrav and celldm"
        raise OutputFileError(msg, where=f"{source}, line 3")
    types, atoms = (whole_number(word, source, 3, "number of types or atoms") for word in words[:2])
    cell = numbers_in(" ".join(words[3:]), 6, source, 3, "celldm")
    start = 3
    if words[2] == "0":
        lattice = np.array(vectors_at(lines, 4, 3, source, "lattice vector"))
        start = 7
    else:
        lattice = lattice_of_index(_index(words[2], source), (1.0, *cell[1:]), f"{source}, line 3")
    names = [_type_name(line_at(lines, start + row, source, "a type"), source, start + row) for row in range(types)]
    species, positions = _atoms(lines, start + types, atoms, names, source)
    length = cell[0] * BOHR
    parts = StructureParts(
        FORMAT, length * lattice, length * positions, species, cartesian=True, notes=notes_on_labels(species)
    )
    return parts.crystal(source)


def _index(word: str, source: str) -> int:
    if not re.fullmatch(r"-?\d{1,3}", word):
        msg = f"{word[:20]!r} is no ibrav"
        raise OutputFileError(msg, where=f"{source}, line 3")
    return int(word)


def _type_name(line: str, source: str, row: int) -> str:
    found = re.search(r"'\s*(\w[^']*?)\s*'", line)
    if found is None:
        msg = f"{line.strip()[:60]!r} names no species"
        raise OutputFileError(msg, where=f"{source}, line {row + 1}")
    return found[1]


def _atoms(
    lines: Sequence[str], start: int, count: int, names: Sequence[str], source: str
) -> tuple[list[str], NDArray[np.float64]]:
    """Return species and positions, in units of the lattice parameter."""
    positions = vectors_at(lines, start, count, source, "position", skip=2)
    species = []
    for row in range(start, start + count):
        kind = whole_number(lines[row].split()[1], source, row + 1, "type of an atom")
        if not 1 <= kind <= len(names):
            msg = f"type {kind} of {len(names)}"
            raise OutputFileError(msg, where=f"{source}, line {row + 1}")
        species.append(names[kind - 1])
    return species, np.array(positions)
