"""Tensors of atomic sites held against the crystal: each against its site group, and equivalent ones to one another.

One projection does both. An operation carries the tensor of atom i onto the atom it carries i to; averaging the whole
set over the space group leaves at every atom the part that its site group allows, and makes equivalent atoms agree.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.directions import direction_namer
from tensorsym.crystal.sites import atom_images
from tensorsym.errors import ShapeError
from tensorsym.groups.operations import Operation
from tensorsym.groups.placement import direction_in_axes, elements_in_words
from tensorsym.groups.point_group import standard_point_group
from tensorsym.invariants.characters import character
from tensorsym.invariants.solver import invariant_space
from tensorsym.invariants.space import Certificate
from tensorsym.tasks.check import MOST_SHOWN, NEGLIGIBLE, Offence, file_axes
from tensorsym.tasks.noise import WORKING_SIZE, Threshold, noise_threshold
from tensorsym.tensors.axes import Axes, read_only

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray

    from tensorsym.catalog.properties import Property
    from tensorsym.crystal.crystal import Crystal
    from tensorsym.groups.point_group import PointGroup


@dataclass(frozen=True, eq=False)
class SiteVerdict:
    """The verdict on one tensor an atom."""

    row: Property
    """The catalogue's row."""
    label: str
    """Which tensors of the file these are, in words."""
    crystal: Crystal
    """The structure."""
    axes: Axes
    """Axes of the components, seen from the structure's Cartesian axes."""
    values: NDArray[np.float64]
    """Shape (atoms, 3, ..., 3), read-only: the tensors as given, in `axes`."""
    unit: str
    """Unit of the values."""
    symmetrised: NDArray[np.float64]
    """The closest allowed set of tensors, same shape, read-only."""
    residual: float
    """Norm of the difference over norm of the tensors, all atoms together."""
    size: float
    """Norm over all atoms and components, in the unit."""
    threshold: Threshold
    """The largest residual put down to noise."""
    certificate: Certificate
    """Number of independent components of the whole set: from the trace of the projector, and from characters of the
    site groups."""
    notes: tuple[str, ...] = ()
    """What the reader has to know."""

    def __repr__(self) -> str:
        """Return one line: property, verdict, residual."""
        return f"SiteVerdict({self.row.name}, {len(self.values)} atoms, {self.verdict}, residual {self.residual:.2g})"

    @property
    def group(self) -> PointGroup:
        """The crystal class."""
        return self.crystal.symmetry.group

    @property
    def verdict(self) -> str:
        """``unconstrained``, ``consistent`` or ``inconsistent``."""
        within = self.residual <= self.threshold.relative or self.size * self.residual <= self.threshold.absolute
        if not within:
            return "inconsistent"
        free = self.certificate.by_elimination == self.values.size
        return "unconstrained" if free else "consistent"

    @property
    def is_consistent(self) -> bool:
        """False when the deviation is larger than the noise."""
        return self.verdict != "inconsistent"

    @property
    def elements_in_words(self) -> str:
        """Where the symmetry elements of the class lie in these axes."""
        turn = self.axes.matrix @ self.crystal.symmetry.frame.T
        return elements_in_words(self.group, tuple(map(tuple, turn.tolist())), direction_namer(self.crystal))

    @cached_property
    def worst(self) -> tuple[Offence, ...]:
        """The components that deviate most, worst first, each with the operation behind it."""
        return _offences(self)


def check_site_tensors(
    crystal: Crystal,
    values: ArrayLike,
    row: Property,
    *,
    axes: Axes | None = None,
    unit: str | None = None,
    digits: float | None = None,
    sigma: float | None = None,
    tolerance: float | None = None,
    label: str = "",
    notes: tuple[str, ...] = (),
) -> SiteVerdict:
    """Return the verdict on one tensor an atom, such as Born charges.

    Parameters
    ----------
    crystal : Crystal
        The structure; atoms in its order.
    values : array_like of shape (atoms, 3, ..., 3)
        The tensors, in the structure's Cartesian axes unless `axes` says otherwise.
    row : Property
        The catalogue's row.
    axes, unit, digits, sigma, tolerance, label, notes
        As for `tensorsym.tasks.check.check_tensor`.

    Raises
    ------
    ShapeError
        If there is not one tensor of the right shape for every atom.
    """
    tensors = np.asarray(values, dtype=float)
    expected = (len(crystal.species), *(3,) * row.kind.rank)
    if tensors.shape != expected:
        msg = f"tensors of shape {tensors.shape} do not fit {row.name} of {len(crystal.species)} atoms"
        raise ShapeError(msg, where=label or None, expected=f"shape {expected}")
    if not np.isfinite(tensors).all():
        atom = int(np.argwhere(~np.isfinite(tensors))[0][0])
        msg = f"the tensor of atom {atom + 1} ({crystal.species[atom]}) holds a number that is not finite"
        raise ShapeError(msg, where=label or None)
    axes = axes or file_axes(crystal)
    images, rotations = atom_images(crystal), _rotations_in(crystal, axes)
    symmetrised = np.mean(
        [_carried(tensors, image, rotation, row) for image, rotation in zip(images, rotations, strict=True)], axis=0
    )
    size, deviation = float(np.linalg.norm(tensors)), float(np.linalg.norm(tensors - symmetrised))
    certificate = _certificate(crystal, row, images)
    share = 1.0 - certificate.by_elimination / tensors.size
    threshold = noise_threshold(
        size,
        tensors.size,
        share,
        sigma=sigma,
        digits=digits,
        tolerance=tolerance,
        working_size=WORKING_SIZE.get((row.name, unit or row.unit), 0.0),
    )
    return SiteVerdict(
        row,
        label,
        crystal,
        axes,
        read_only(tensors),
        unit or row.unit,
        read_only(symmetrised),
        deviation / size if size else 0.0,
        size,
        threshold,
        certificate,
        notes,
    )


def _rotations_in(crystal: Crystal, axes: Axes) -> NDArray[np.float64]:
    """Return the operations as orthogonal matrices in the tensor's axes, shape (n, 3, 3)."""
    return np.asarray(axes.matrix @ crystal.symmetry.cartesian_rotations() @ axes.matrix.T)


def _carried(
    tensors: NDArray[np.float64], image: NDArray[np.intp], rotation: NDArray[np.float64], row: Property
) -> NDArray[np.float64]:
    """Return the set of tensors after one operation: that of atom i stands at the atom that i is carried to."""
    flat = tensors
    for place in range(1, row.kind.rank + 1):
        flat = np.moveaxis(np.tensordot(flat, rotation, axes=([place], [1])), -1, place)
    if row.kind.axial and np.linalg.det(rotation) < 0:
        flat = -flat
    moved = np.empty_like(flat)
    moved[image] = flat
    return moved


def _certificate(crystal: Crystal, row: Property, images: NDArray[np.intp]) -> Certificate:
    """Count the free components of all atoms by two roads, both exact.

    The trace of the averaging operator counts the character of every operation once for each atom it leaves in place;
    the other road adds, site by site, the invariants of the site's class.
    """
    atoms = np.arange(images.shape[1])
    total = Fraction(0)
    for matrix, image in zip(crystal.symmetry.rotations.tolist(), images, strict=True):
        operation = Operation(tuple(map(tuple, matrix)))  # type: ignore[arg-type]
        total += int((image == atoms).sum()) * character(operation, row.kind)
    by_sites = sum(invariant_space(standard_point_group(site.site_group), row.kind).dimension for site in crystal.sites)
    return Certificate(by_sites, int(total / len(images)))


def _offences(verdict: SiteVerdict) -> tuple[Offence, ...]:
    crystal, values = verdict.crystal, verdict.values
    deviation = np.abs(values - verdict.symmetrised)
    images, rotations = atom_images(crystal), _rotations_in(crystal, verdict.axes)
    carried = [
        _carried(values, image, rotation, verdict.row) for image, rotation in zip(images, rotations, strict=True)
    ]
    offences = []
    for flat in np.argsort(-deviation.reshape(-1), kind="stable")[:MOST_SHOWN]:
        place = tuple(int(index) for index in np.unravel_index(flat, values.shape))
        if deviation[place] <= NEGLIGIBLE * verdict.size:
            break
        changes = [abs(float(other[place] - values[place])) for other in carried]
        strongest = int(np.argmax(changes))
        atom, indices = place[0], "".join(str(index + 1) for index in place[1:])
        source = int(np.flatnonzero(images[strongest] == atom)[0])
        rule = "its own image under the site's group" if source == atom else f"the image of that of atom {source + 1}"
        offences.append(
            Offence(
                f"{verdict.row.symbol}{indices} of atom {atom + 1} ({crystal.species[atom]})",
                float(values[place]),
                float(verdict.symmetrised[place]),
                rule,
                _operation_words(rotations[strongest], verdict),
                changes[strongest],
            )
        )
    return tuple(offences)


def _operation_words(rotation: NDArray[np.float64], verdict: SiteVerdict) -> str:
    """Return an orthogonal matrix as an element with its direction."""
    sign = round(float(np.linalg.det(rotation)))
    order = {3: "1", -1: "2", 0: "3", 1: "4", 2: "6"}[round(sign * float(np.trace(rotation)))]
    if order == "1":
        return "a translation" if sign > 0 else "the inversion"
    axis = np.linalg.svd(sign * rotation - np.eye(3))[2][2]
    where = direction_in_axes(axis.tolist())
    if where not in ("x", "y", "z"):
        turn = verdict.axes.matrix @ verdict.crystal.symmetry.frame.T
        where = direction_namer(verdict.crystal)(axis @ turn)
    if sign < 0 and order == "2":
        return f"m perpendicular to {where}"
    return f"{order if sign > 0 else '-' + order} along {where}"
