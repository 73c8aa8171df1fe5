"""Space group, class and standard frame of a crystal. The only caller of spglib's search."""

from __future__ import annotations

import os
import threading
from contextlib import contextmanager
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, NoReturn

import numpy as np

from tensorsym.crystal.frame import PlacedGroup, placed_group
from tensorsym.errors import GroupSymbolError, StructureError

if TYPE_CHECKING:
    from collections.abc import Iterator

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

    def cartesian_rotations(self) -> NDArray[np.float64]:
        """Return the rotations as orthogonal matrices in the file's Cartesian axes, shape (n, 3, 3), exact to rounding."""
        standard = np.array([operation.cartesian() for operation in self.group.operations])
        ideal = self.frame.T @ standard @ self.frame
        rough = self.cell.T @ self.rotations @ np.linalg.inv(self.cell.T)
        nearest = np.argmax(np.einsum("nij,mij->nm", rough, ideal), axis=1)
        return np.asarray(ideal[nearest])

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
    placed = _placed(rotations, cell)
    if placed is None or placed.group.hermann_mauguin != found.pointgroup.strip():
        cell = standard
        rotations, translations = _operations_of_setting(found)
        placed = _placed(rotations, cell) or _refuse(crystal, found.pointgroup)
    for array in (rotations, translations, found.equivalent_atoms, standard):
        array.setflags(write=False)
    return CrystalSymmetry(
        found.number, found.international, found.hall_number, placed.group, placed.frame, cell, rotations,
        translations, tuple(found.wyckoffs), tuple(found.site_symmetry_symbols), found.equivalent_atoms, standard,
        symprec,
    )  # fmt: skip


def _dataset(crystal: Crystal, symprec: float) -> Any:
    """Return spglib's data set, or its reason for having none."""
    import spglib

    where = crystal.source or None
    with _reasons_kept():
        try:
            found = spglib.get_symmetry_dataset((crystal.lattice, crystal.positions, crystal.numbers), symprec=symprec)
        except Exception as error:  # spglib's own type of error, whose place differs between versions
            msg = f"no symmetry found at symprec {symprec:g}: {error}"
            raise StructureError(msg, where=where, hint="try another symprec") from error
    if found is None:
        msg = f"no symmetry found at symprec {symprec:g}"
        raise StructureError(msg, where=where, hint="try another symprec, check for overlapping atoms")
    return found


_SWITCH = "SPGLIB_OLD_ERROR_HANDLING"
_LOCK = threading.Lock()


@contextmanager
def _reasons_kept() -> Iterator[None]:
    """Make spglib raise its reason; its default returns None and loses it. Other threads wait meanwhile."""
    with _LOCK:
        before = os.environ.get(_SWITCH)
        os.environ[_SWITCH] = "0"
        try:
            yield
        finally:
            if before is None:
                del os.environ[_SWITCH]
            else:
                os.environ[_SWITCH] = before


def _placed(rotations: NDArray[np.intc], cell: NDArray[np.float64]) -> PlacedGroup | None:
    try:
        return placed_group(rotations, cell)
    except GroupSymbolError:
        return None


def _operations_of_setting(found: Any) -> tuple[NDArray[np.intc], NDArray[np.float64]]:
    """Return the operations of the standard setting from spglib's table."""
    import spglib

    table = spglib.get_symmetry_from_database(found.hall_number)
    return table["rotations"], table["translations"]


def _refuse(crystal: Crystal, point_group: str) -> NoReturn:
    msg = f"the operations found form no group of class {point_group}"
    raise StructureError(msg, where=crystal.source or None, hint="try another symprec")
