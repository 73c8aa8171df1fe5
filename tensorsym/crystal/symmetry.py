"""Space group, class and standard frame of a crystal. The only caller of spglib's search."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from inspect import signature
from typing import TYPE_CHECKING, Any

import numpy as np

from tensorsym.crystal.frame import placed_group
from tensorsym.errors import GroupSymbolError, StructureError
from tensorsym.groups.point_group import standard_point_group

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.groups.point_group import PointGroup


@dataclass(frozen=True, slots=True, eq=False)
class CrystalSymmetry:
    """The symmetry of a crystal at one tolerance."""

    number: int
    """Number of the space group, International Tables for Crystallography, vol. A."""
    international: str
    """Short Hermann-Mauguin symbol of the space group in its standard setting, such as ``P3_121``."""
    hall_number: int
    """Number of the setting in spglib's list of Hall symbols."""
    group: PointGroup
    """The class in its standard setting."""
    frame: NDArray[np.float64]
    """Shape (3, 3), read-only: rows are unit x, y, z of the standard frame in the file's Cartesian axes."""
    cell: NDArray[np.float64]
    """Shape (3, 3), read-only: rows are the lattice vectors, in Å and the file's axes, that the operations refer to.

    The file's own cell, unless that is a supercell whose shape breaks the class: then the standard cell.
    """
    rotations: NDArray[np.intc]
    """Shape (n, 3, 3), read-only: ``x' = W x + w`` on columns of fractional coordinates of `cell`."""
    translations: NDArray[np.float64]
    """Shape (n, 3), read-only: the w of each operation."""
    wyckoffs: tuple[str, ...]
    """Wyckoff letter of each atom."""
    site_symmetry_symbols: tuple[str, ...]
    """Oriented site-symmetry symbol of each atom, in the standard setting of the space group."""
    equivalent_atoms: NDArray[np.intc]
    """Shape (atoms,), read-only: the first atom that each is equivalent to, counted from 0."""
    standard_cell: NDArray[np.float64]
    """Shape (3, 3), read-only: rows are the conventional cell of the standard setting, in Å and the file's axes."""
    symprec: float
    """Å. Atoms within this distance of their image count as equivalent."""

    def __repr__(self) -> str:
        """Return space group, class and tolerance."""
        return (
            f"CrystalSymmetry({self.international} ({self.number}), class {self.group.hermann_mauguin}, "
            f"symprec {self.symprec:g})"
        )

    @property
    def is_of_file_cell(self) -> bool:
        """False when the file's cell is a supercell whose shape breaks the class of the crystal."""
        return self.cell is not self.standard_cell


def symmetry_of(crystal: Crystal, symprec: float) -> CrystalSymmetry:
    """Return the symmetry of a crystal at a tolerance.

    Parameters
    ----------
    crystal : Crystal
        The structure; its Cartesian axes are those of the result.
    symprec : float
        Distance in Å within which atoms count as equivalent.

    Raises
    ------
    StructureError
        If spglib finds no symmetry; the message tells its reason.
    """
    found = _dataset(crystal, symprec)
    lattice = crystal.lattice
    standard = np.linalg.solve(found.transformation_matrix.T, lattice)
    rotations, translations, cell = found.rotations, found.translations, lattice
    placed = _placed(rotations, cell, crystal)
    if placed is None or placed.group.hermann_mauguin != found.pointgroup.strip():
        cell = standard
        rotations, translations = _operations_of_setting(found)
        placed = _placed(rotations, cell, crystal) or _refuse(crystal, found.pointgroup)
    for array in (rotations, translations, found.equivalent_atoms, standard):
        array.setflags(write=False)
    return CrystalSymmetry(
        found.number, found.international, found.hall_number, placed.group, placed.frame, cell, rotations,
        translations, tuple(found.wyckoffs), tuple(found.site_symmetry_symbols), found.equivalent_atoms, standard,
        symprec,
    )  # fmt: skip
