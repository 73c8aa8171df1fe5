"""Space group, class and standard frame of a crystal: the only caller of spglib's search."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from inspect import signature
from typing import TYPE_CHECKING, Any

import numpy as np

from tensorsym.crystal.frame import PlacedGroup, placed_group
from tensorsym.errors import GroupSymbolError, StructureError
from tensorsym.groups.symbols import point_group_of_space_group

if TYPE_CHECKING:
    from numpy.typing import NDArray
    from spglib import SpglibDataset

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

    That is the file's cell, unless it is a supercell whose shape breaks the class: then the standard cell.
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
    to_standard: NDArray[np.float64]
    """Shape (3, 3), read-only: P of spglib, ``(a b c)_file = (a b c)_standard P``, not idealised."""
    symprec: float
    """Å. Atoms within this distance of their image count as equivalent."""
    symmetrised_cell: NDArray[np.float64]
    """Shape (3, 3), read-only: `cell` with exactly the metric that the class demands, stretched but not turned."""
    cell_keeps_class: bool
    """False when the file's cell is a supercell whose shape breaks the class: then `cell` is `standard_cell`."""

    def __repr__(self) -> str:
        """Return space group, class and tolerance."""
        return (
            f"CrystalSymmetry({self.international} ({self.number}), class {self.group.hermann_mauguin}, "
            f"symprec {self.symprec:g})"
        )

    @property
    def standard_cell(self) -> NDArray[np.float64]:
        """Shape (3, 3): rows are the symmetrised cell of the standard setting, in Å and the file's axes."""
        return (
            _standard_cell(self.symmetrised_cell, self.to_standard) if self.cell_keeps_class else self.symmetrised_cell
        )

    def cartesian_rotations(self) -> NDArray[np.float64]:
        """Return the rotations in the file's Cartesian axes, orthogonal to rounding, shape (n, 3, 3)."""
        standard = np.array([operation.cartesian() for operation in self.group.operations])
        exact = self.frame.T @ standard @ self.frame
        rough = self.cell.T @ self.rotations @ np.linalg.inv(self.cell.T)
        return np.asarray(exact[np.argmax(np.einsum("nij,mij->nm", rough, exact), axis=1)])


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
        If no symmetry is found; the message tells spglib's reason.
    """
    lattice, where = crystal.lattice, crystal.source or None
    found = _search(lattice, crystal.positions, crystal.numbers, symprec, where)
    rotations, translations, cell = found.rotations, found.translations, lattice
    placed = _placed(rotations, cell)
    keeps_class = placed is not None and placed.group.hermann_mauguin == _class_of(found.number)
    if not keeps_class:
        cell = _standard_cell(lattice, found.transformation_matrix)
        rotations, translations = _standard_operations(found, symprec, where)
        placed = _placed(rotations, cell)
    if placed is None:
        msg = f"the operations found at symprec {symprec:g} do not form the class of {found.international}"
        raise StructureError(msg, where=where, hint="use a smaller symprec")
    for array in (
        rotations,
        translations,
        found.crystallographic_orbits,
        found.transformation_matrix,
        placed.cell,
    ):
        array.setflags(write=False)
    return CrystalSymmetry(
        found.number, found.international, found.hall_number, placed.group, placed.frame, cell, rotations,
        translations, tuple(found.wyckoffs), tuple(found.site_symmetry_symbols), found.crystallographic_orbits,
        found.transformation_matrix, symprec, placed.cell, keeps_class,
    )  # fmt: skip


def _standard_cell(lattice: NDArray[np.float64], to_standard: NDArray[np.float64]) -> NDArray[np.float64]:
    standard = np.asarray(np.linalg.solve(to_standard.T, lattice), dtype=np.float64)
    standard.setflags(write=False)
    return standard


@lru_cache(maxsize=230)
def _class_of(number: int) -> str:
    return point_group_of_space_group(number).hermann_mauguin


def _placed(rotations: NDArray[np.intc], cell: NDArray[np.float64]) -> PlacedGroup | None:
    try:
        return placed_group(rotations, cell)
    except GroupSymbolError:
        return None


def _standard_operations(
    found: SpglibDataset, symprec: float, where: str | None
) -> tuple[NDArray[np.intc], NDArray[np.float64]]:
    """Return the operations in the standard cell with the file's origin, for a file whose cell breaks the class."""
    again = _search(found.std_lattice, found.std_positions, found.std_types, symprec, where)
    shift = found.origin_shift
    return again.rotations, again.translations + again.rotations @ shift - shift


def _search(
    lattice: NDArray[np.float64],
    positions: NDArray[np.float64],
    numbers: NDArray[np.intc],
    symprec: float,
    where: str | None,
) -> SpglibDataset:
    """Return what spglib finds, or its reason for failing as an error of ours."""
    import spglib

    failure = getattr(spglib, "SpglibError", RuntimeError)
    found, cause = None, None
    cell: Any = (lattice, positions, numbers)
    try:
        found = spglib.get_symmetry_dataset(cell, symprec=symprec, **_asks_for_reason())
    except failure as error:
        cause = error
    if found is None:
        msg = f"no symmetry found at symprec {symprec:g}: {cause or 'spglib gives no reason'}"
        hint = "try another symprec, and look for atoms that are too close"
        raise StructureError(msg, where=where, hint=hint) from cause
    return found


@lru_cache(maxsize=1)
def _asks_for_reason() -> dict[str, Any]:
    """Return the option by which one call of spglib 2.7 and 2.8 raises its reason; later versions always do."""
    import spglib

    return {"_throw": True} if "_throw" in signature(spglib.get_symmetry_dataset).parameters else {}
