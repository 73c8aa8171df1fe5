"""A crystal that answers questions: reading and asking in one object, for Python."""

from __future__ import annotations

from dataclasses import fields
from typing import TYPE_CHECKING, Any

from tensorsym.crystal import convert
from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.read import read as read_crystal
from tensorsym.tasks.allowed import allowed
from tensorsym.tasks.check import check_tensor

if TYPE_CHECKING:
    from collections.abc import Sequence
    from os import PathLike

    from numpy.typing import ArrayLike

    from tensorsym.catalog.properties import Property
    from tensorsym.tasks.allowed import AllowedForm
    from tensorsym.tasks.check import TensorVerdict


class StudiedCrystal(Crystal):
    """A crystal with the questions that can be put to it."""

    def allowed(
        self,
        property: str | Property | None = None,
        *,
        law: str | None = None,
        equations: Sequence[str] = (),
        regime: str | None = None,
        axes: str | None = None,
    ) -> AllowedForm:
        """Return the form of a property that the crystal allows; see `tensorsym.tasks.allowed.allowed`."""
        return allowed(self, property, law=law, equations=equations, regime=regime, axes=axes)

    def check(self, values: ArrayLike, property: str | Property, **options: Any) -> TensorVerdict:
        """Return the verdict on a tensor of the crystal; see `tensorsym.tasks.check.check_tensor`."""
        return check_tensor(self, values, property, **options)


def read(path: str | PathLike[str], *, symprec: float = 1e-3, index: int | None = None) -> StudiedCrystal:
    """Return the crystal in a file, ready to be asked; see `tensorsym.crystal.read.read`."""
    return studied(read_crystal(path, symprec=symprec, index=index))


def from_pymatgen(structure: Any, *, symprec: float = 1e-3) -> StudiedCrystal:
    """Return the crystal of a pymatgen Structure or Molecule."""
    return studied(convert.from_pymatgen(structure, symprec=symprec))


def from_ase(atoms: Any, *, symprec: float = 1e-3) -> StudiedCrystal:
    """Return the crystal of an ASE Atoms object."""
    return studied(convert.from_ase(atoms, symprec=symprec))


def studied(crystal: Crystal) -> StudiedCrystal:
    """Return the same crystal with the questions attached."""
    return StudiedCrystal(**{field.name: getattr(crystal, field.name) for field in fields(Crystal)})
