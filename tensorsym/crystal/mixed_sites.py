"""From listed sites to atoms: images by the operations, special positions made exact, shared places made one.

A position printed with few digits misses the special position it stands for, so its images by the operations that
should keep it lie a little apart. They are one atom, at the mean of the images.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.pairs import pairs_within
from tensorsym.crystal.validation import MOST_ATOMS, TOO_CLOSE
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from numpy.typing import NDArray

    from tensorsym.crystal.space_group_operations import SpaceGroupOperations

NOTEWORTHY = 0.01
"""Å. Atoms moved by more than this deserve a note."""

OVERFULL = 1.05
"""Largest sum of occupancies of one place, rounding of the printed ones included."""

FULL = 1e-3
"""An occupancy this close to 1 is full."""


@dataclass(frozen=True, slots=True, eq=False)
class ListedSite:
    """A site as a file lists it."""

    label: str
    """Name in the file, for messages."""
    composition: Mapping[str, float]
    """Occupancy of each species."""
    position: NDArray[np.float64]
    """Shape (3,): fractional coordinates."""
    where: str
    """File and line."""


@dataclass(frozen=True, slots=True, eq=False)
class Atoms:
    """The atoms of a cell."""

    positions: NDArray[np.float64]
    """Shape (n, 3): fractional coordinates."""
    species: tuple[str, ...]
    """Species labels."""
    notes: tuple[str, ...]
    """What was merged or moved."""


def species_label(composition: Mapping[str, float]) -> str:
    """Return one label for what sits on a place, the same for the same composition.

    >>> species_label({"Si": 1.0}), species_label({"Na": 0.5, "K": 0.5}), species_label({"O": 0.25})
    ('Si', 'K0.5Na0.5', 'O0.25')
    """
    if len(composition) == 1:
        species, amount = next(iter(composition.items()))
        return species if abs(amount - 1.0) < FULL else f"{species}{amount:.4g}"
    ordered = sorted(composition.items(), key=lambda item: (-round(item[1], 4), item[0]))
    return "".join(f"{species}{amount:.4g}" for species, amount in ordered)


def element_in(text: str) -> str:
    """Return the species of a type symbol without its charge or oxidation state.

    >>> element_in("Fe3+"), element_in("O2-"), element_in("D"), element_in("Si")
    ('Fe', 'O', 'D', 'Si')
    """
    found = re.match(r"[A-Za-z]{1,3}", text)
    return found[0].capitalize() if found else text


def atoms_of_sites(
    sites: Sequence[ListedSite], operations: SpaceGroupOperations, lattice: NDArray[np.float64], source: str
) -> Atoms:
    """Return the atoms that the operations make of the listed sites.

    Raises
    ------
    StructureError
        If there are too many, or one place would hold more than one atom.
    """
    positions, owners, notes = [], [], []
    for number, site in enumerate(sites):
        images, moved = _images(site, operations, lattice)
        if moved > NOTEWORTHY:
            notes.append(f"{site.label} moved by {moved:.2g} Å onto the special position that it nearly occupies")
        positions.append(images)
        owners += [number] * len(images)
        if len(owners) > MOST_ATOMS:
            msg = f"makes more than {MOST_ATOMS} atoms"
            raise StructureError(msg, where=source, hint="check the symmetry operations")
    return _merged(sites, np.concatenate(positions), np.array(owners), lattice, notes)


def _images(
    site: ListedSite, operations: SpaceGroupOperations, lattice: NDArray[np.float64]
) -> tuple[NDArray[np.float64], float]:
    """Return the distinct images of a site, in the cell, and how far it moved onto its special position."""
    place = site.position
    apart = operations.rotations @ place + operations.translations - place
    apart -= np.rint(apart)
    stays = np.linalg.norm(apart @ lattice, axis=1) < TOO_CLOSE
    shift = apart[stays].mean(axis=0) if stays.any() else np.zeros(3)
    images = operations.rotations @ (place + shift) + operations.translations
    images -= np.floor(np.round(images, 12))
    pairs = pairs_within(images, images, lattice, TOO_CLOSE)
    repeated = np.unique(pairs.second[pairs.first < pairs.second])
    kept = np.delete(images, repeated, axis=0)
    return kept, float(np.linalg.norm(shift @ lattice))


def _merged(
    sites: Sequence[ListedSite],
    positions: NDArray[np.float64],
    owners: NDArray[np.intp],
    lattice: NDArray[np.float64],
    notes: list[str],
) -> Atoms:
    """Make one atom of those that share a place."""
    pairs = pairs_within(positions, positions, lattice, TOO_CLOSE)
    first = np.arange(len(positions))
    for one, other in zip(pairs.first.tolist(), pairs.second.tolist(), strict=True):
        if one < other:
            first[other] = min(first[other], first[one])
    members: dict[int, list[int]] = {}
    for atom, leader in enumerate(first.tolist()):
        members.setdefault(leader, []).append(atom)
    labels, told = [], dict.fromkeys(notes)
    for atoms in members.values():
        sharing = [sites[owner] for owner in dict.fromkeys(owners[atoms].tolist())]
        label, note = _shared(sharing)
        labels.append(label)
        told.update(dict.fromkeys([note] if note else []))
    if any(label[-1].isdigit() for label in labels):
        told["some sites are mixed or partly occupied: each composition counts as a species of its own"] = None
    return Atoms(positions[list(members)], tuple(labels), tuple(told))


def _shared(sharing: Sequence[ListedSite]) -> tuple[str, str]:
    """Return the label of one place, and a note when a site was listed more than once."""
    if len(sharing) == 1:
        return species_label(sharing[0].composition), ""
    composition: dict[str, float] = {}
    for site in sharing:
        for species, amount in site.composition.items():
            composition[species] = composition.get(species, 0.0) + amount
    if sum(composition.values()) <= OVERFULL:
        return species_label(composition), ""
    names = ", ".join(site.label for site in sharing)
    if len({species_label(site.composition) for site in sharing}) == 1:
        return species_label(sharing[0].composition), f"{names} are one atom by symmetry and are kept once"
    msg = f"{names} occupy one place, {sum(composition.values()):.3g} atoms in all"
    raise StructureError(msg, where=sharing[-1].where, expected="occupancies that add up to 1 at most")
