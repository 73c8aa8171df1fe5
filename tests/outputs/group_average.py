"""A second road to every residual: the plain average over the operations that spglib finds, in numpy."""

from __future__ import annotations

import warnings

import numpy as np
import spglib


def residual(crystal, record):
    """Return ``||T - <T>|| / ||T||`` for a polar tensor, or for the tensors of all atoms together."""
    kinds = {name: number for number, name in enumerate(dict.fromkeys(crystal.species), 1)}
    cell = (crystal.lattice, crystal.positions, [kinds[name] for name in crystal.species])
    with warnings.catch_warnings():
        warnings.simplefilter("ignore", DeprecationWarning)  # spglib announces another way of reporting errors
        operations = spglib.get_symmetry(cell, symprec=crystal.symprec)
    columns = crystal.lattice.T
    total = np.zeros_like(record.values)
    for rotation, translation in zip(operations["rotations"], operations["translations"], strict=True):
        left, _, right = np.linalg.svd(columns @ rotation @ np.linalg.inv(columns))
        matrix = left @ right  # orthogonal, however few digits the lattice has
        moved = _turned(record.values, matrix, first=int(record.per_site))
        if record.per_site:
            total[_images(crystal, rotation, translation)] += moved
        else:
            total += moved
    average = total / len(operations["rotations"])
    return float(np.linalg.norm(record.values - average) / np.linalg.norm(record.values))


def _turned(values, matrix, first):
    for place in range(first, values.ndim):
        values = np.moveaxis(np.tensordot(values, matrix, axes=(place, 1)), -1, place)
    return values


def _images(crystal, rotation, translation):
    images = []
    for position in crystal.positions:
        difference = crystal.positions - (rotation @ position + translation)
        difference = (difference - np.round(difference)) @ crystal.lattice
        images.append(int(np.argmin(np.linalg.norm(difference, axis=1))))
    return images
