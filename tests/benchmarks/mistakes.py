"""Planted mistakes: allowed tensors of all classes, with noise, spoiled in one known way."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from tensorsym.catalog.properties import property_named
from tensorsym.crystal.crystal import Crystal
from tensorsym.groups.operations import Basis
from tensorsym.invariants.solver import invariant_space
from tensorsym.tasks.diagnose.axes_guesses import proper_renamings
from tensorsym.tasks.diagnose.notation_guesses import KNOWN_ORDERS
from tensorsym.tensors.axes import turned
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix, to_matrix

PROPERTIES = (
    "piezoelectric", "piezoelectric-stress", "second-harmonic", "pockels", "elastic-stiffness", "elastic-compliance",
    "photoelastic", "piezo-optic", "electrostriction", "dielectric", "thermal-expansion", "piezomagnetic",
)  # fmt: skip

MISTAKES = ("axes", "rotation", "matrix-order", "shear-factor", "entry", "lower-group")


@dataclass(frozen=True)
class Spoiled:
    """A tensor with one planted mistake."""

    crystal: Crystal
    property: str
    values: np.ndarray
    sigma: float
    mistake: str
    size_of_mistake: float


def crystal_of(group):
    """Return a crystal of a class in its standard frame: one atom in general position, one species at the origin."""
    if group.basis is Basis.HEXAGONAL:
        a, c = 5.0, 6.3
        lattice = np.array([[a, 0, 0], [-a / 2, a * 0.75**0.5, 0], [0, 0, c]])
    else:
        lattice = np.diag(_edges(group.system))
        if group.system in ("monoclinic", "triclinic"):
            lattice[2, 0] = -1.3
        if group.system == "triclinic":
            lattice[1, 0], lattice[2, 1] = 0.7, 0.9
    places = [np.zeros(3)]
    species = ["X"]
    for label, start in (("A", np.array([0.1137, 0.2561, 0.3929])), ("B", np.array([0.2913, 0.0779, 0.1531]))):
        for operation in group.operations:
            image = np.array(operation.matrix) @ start % 1.0
            places.append(image)
            species.append(label)
    return Crystal(lattice, np.array(places), tuple(species))


def _edges(system):
    return {"cubic": [7.0, 7.0, 7.0], "tetragonal": [6.0, 6.0, 7.3]}.get(system, [5.6, 6.7, 7.9])


def spoiled(group, name, mistake, noise, generator):
    """Return a spoiled tensor, or None when the mistake leaves no trace in this class."""
    row = property_named(name)
    space = invariant_space(group, row.kind)
    if not space.dimension or mistake not in possible(row, group):
        return None
    crystal = crystal_of(group)
    if crystal.symmetry.group != group:
        return None
    basis = space.basis()
    clean = np.tensordot(generator.normal(size=len(basis)), basis, axes=1)
    clean = turned(clean, crystal.symmetry.frame.T)
    clean /= np.linalg.norm(clean)
    wrong = _with_mistake(clean, row, group, crystal, mistake, generator)
    rough = generator.normal(size=clean.shape)
    rough = noise * _index_symmetric(rough, row.kind) / clean.size**0.5
    return Spoiled(crystal, name, wrong + rough, noise / clean.size**0.5, mistake, float(np.linalg.norm(wrong - clean)))


def possible(row, group):
    """Return the mistakes that can be made with a property."""
    found = ["axes", "rotation", "entry"]
    if row.kind.pairs:
        found += ["matrix-order", "shear-factor"]
    if group.order > 2:
        found.append("lower-group")
    return found


def _with_mistake(clean, row, group, crystal, mistake, generator):
    if mistake == "axes":
        return turned(clean, proper_renamings()[generator.integers(1, 24)])
    if mistake == "rotation":
        matrix = np.linalg.qr(generator.normal(size=(3, 3)))[0]
        return turned(clean, matrix * np.sign(np.linalg.det(matrix)))
    if mistake == "matrix-order":
        matrix = to_matrix(clean, row.kind, row.factors, KNOWN_ORDERS[generator.integers(0, 3)])
        return from_matrix(matrix, row.kind, row.factors, VOIGT_ORDER)
    if mistake == "shear-factor":
        factor = generator.choice([0.5, 2.0])
        return from_matrix(to_matrix(clean, row.kind, row.factors), row.kind, [f * factor for f in row.factors])
    if mistake == "entry":
        matrix = to_matrix(clean, row.kind, row.factors)
        places = np.argwhere(np.abs(matrix) > 0.05 * np.abs(matrix).max())
        place = tuple(places[generator.integers(len(places))])
        matrix[place] *= generator.choice([-1.0, 10.0, 0.1])
        if matrix.ndim == 2 and matrix.shape[0] == matrix.shape[1]:
            matrix[place[::-1]] = matrix[place]
        return from_matrix(matrix, row.kind, row.factors)
    return clean + 0.3 * _of_subgroup(row, group, crystal, generator)


def _of_subgroup(row, group, crystal, generator):
    """Return a tensor that keeps only the operations of the class's first generator."""
    from dataclasses import replace

    lower = replace(group, setting=f"{group.setting} first", generators=group.generators[:1])
    basis = invariant_space(lower, row.kind).basis()
    part = np.tensordot(generator.normal(size=len(basis)), basis, axes=1)
    return turned(part / np.linalg.norm(part), crystal.symmetry.frame.T)


def _index_symmetric(values, kind):
    total = sum(sign * values.transpose(permutation) for permutation, sign in kind.index_group)
    return total / len(kind.index_group)
