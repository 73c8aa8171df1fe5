"""Numbers held against a crystal's symmetry: the question after a calculation or a measurement."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from functools import cached_property
from typing import TYPE_CHECKING

from tensorsym.catalog.properties import Property, property_named
from tensorsym.crystal.directions import direction_namer
from tensorsym.errors import ShapeError
from tensorsym.groups.placement import element_in_words, elements_in_words
from tensorsym.invariants.axes import space_in_axes
from tensorsym.invariants.projection import orthonormal_basis, projected
from tensorsym.invariants.relations import combination_text, matrix_factor, matrix_relations
from tensorsym.invariants.solver import invariant_space
from tensorsym.outputs.units import property_in_unit
from tensorsym.tasks.noise import WORKING_SIZE, Threshold, noise_threshold
from tensorsym.tensors.axes import Axes, read_only, turned
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix, matrix_shape
from tensorsym.tensors.words import components_of

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import ArrayLike, NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.groups.point_group import PointGroup
    from tensorsym.invariants.space import Certificate, InvariantSpace

MOST_SHOWN = 8
"""Largest number of offending components listed."""

NEGLIGIBLE = 1e-12
"""Deviations below this share of the norm are rounding and are not listed."""


@dataclass(frozen=True, slots=True)
class Offence:
    """One component that deviates from what symmetry allows."""

    component: str
    """Name in matrix notation, such as ``d14``."""
    value: float
    """Value as given, matrix notation, in the tensor's unit and axes."""
    allowed_value: float
    """Value in the closest allowed tensor."""
    rule: str
    """What symmetry says of it: ``0`` or an expression of independent components."""
    operation: str
    """The operation that changes it most, in words; or the exchange of indices that should leave it alone."""
    change: float
    """By how much that operation changes the value, in the tensor's unit."""


@dataclass(frozen=True, eq=False)
class TensorVerdict:
    """The verdict on one tensor."""

    row: Property
    """The catalogue's row."""
    crystal: Crystal
    """The structure that the tensor belongs to."""
    label: str
    """Which tensor of the file this is, in words; empty when there is only one."""
    group: PointGroup
    """The class that the tensor was held against."""
    axes: Axes
    """Axes of the components, seen from the structure's Cartesian axes."""
    turn: NDArray[np.float64]
    """Rows are the unit vectors of `axes` in the standard frame of the class; shape (3, 3)."""
    values: NDArray[np.float64]
    """The tensor as given, shape (3,) * rank, in `axes`, read-only."""
    unit: str
    """Unit of the values."""
    residual: float
    """``||T - <T>|| / ||T||`` over all components; 0 for a tensor that is exactly zero."""
    size: float
    """``||T||`` over all 3**rank components, in the unit."""
    threshold: Threshold
    """The largest residual put down to noise, and where that bound comes from."""
    notes: tuple[str, ...] = ()
    """What the reader has to know."""

    def __repr__(self) -> str:
        """Return one line: property, verdict, residual, threshold."""
        return (
            f"TensorVerdict({self.row.name}, {self.verdict}, residual {self.residual:.2g}, "
            f"threshold {self.threshold.relative:.2g} from {self.threshold.source})"
        )

    @property
    def verdict(self) -> str:
        """``unconstrained`` (symmetry leaves every component free), ``consistent`` or ``inconsistent``."""
        if not self.is_consistent:
            return "inconsistent"
        return "unconstrained" if self.space.dimension == len(self.space.components.words) else "consistent"

    @property
    def is_consistent(self) -> bool:
        """False when the deviation is larger than the noise."""
        return self.residual <= self.threshold.relative or self.size * self.residual <= self.threshold.absolute

    @property
    def space(self) -> InvariantSpace:
        """The allowed tensors in the standard frame, with their certificate."""
        return invariant_space(self.group, self.row.kind)

    @property
    def certificate(self) -> Certificate:
        """The number of independent components by two roads."""
        return self.space.certificate

    @cached_property
    def symmetrised(self) -> NDArray[np.float64]:
        """The closest allowed tensor, same shape, unit and axes as `values`, read-only."""
        standard = turned(self.values, self.turn.T)
        basis = orthonormal_basis(self.group, self.row.kind)
        return read_only(turned(projected(standard, basis), self.turn))

    @cached_property
    def placed_space(self) -> InvariantSpace:
        """The allowed tensors in the tensor's own axes."""
        return space_in_axes(self.space, self.turn)

    @property
    def elements_in_words(self) -> str:
        """Where the symmetry elements lie in the tensor's axes."""
        return elements_in_words(self.group, tuple(map(tuple, self.turn.tolist())), direction_namer(self.crystal))

    @cached_property
    def worst(self) -> tuple[Offence, ...]:
        """The components that deviate most, at most `MOST_SHOWN`, worst first, each with the operation behind it."""
        return _offences(self)


def check_tensor(
    crystal: Crystal,
    values: ArrayLike,
    property: str | Property,
    *,
    axes: Axes | None = None,
    order: str = VOIGT_ORDER,
    unit: str | None = None,
    sigma: ArrayLike | None = None,
    digits: float | None = None,
    tolerance: float | None = None,
    label: str = "",
    notes: tuple[str, ...] = (),
) -> TensorVerdict:
    """Return the verdict on a tensor of a crystal.

    Parameters
    ----------
    crystal : Crystal
        The structure, in whose Cartesian axes the tensor is given unless `axes` says otherwise.
    values : array_like
        Shape (3,) * rank, or the shape of matrix notation.
    property : str or Property
        Name in the catalogue; a family name such as ``piezoelectric`` means the member whose unit is given.
    axes : Axes, optional
        Axes of the components, seen from the structure's Cartesian axes.
    order : str
        Order of the index pairs in matrix notation.
    unit : str, optional
        Unit of the values; the catalogue's SI unit when absent.
    sigma : float or array_like, optional
        Standard deviations, of the shape of `values`.
    digits : float, optional
        One unit in the last printed place.
    tolerance : float, optional
        Relative residual to accept, in place of what sigma or digits give.

    Raises
    ------
    ShapeError
        If the numbers do not fit the property or are not finite.
    UnknownNameError
        If no property has the name.
    """
    row = property if isinstance(property, Property) else property_named(property)
    if unit is not None and not isinstance(property, Property):
        row, unit, told = property_in_unit(property, unit)
        notes = (*notes, *told)
    tensor = full_tensor(values, row, order)
    spread = None if sigma is None else _full_sigma(sigma, row, order)
    group, frame = crystal.symmetry.group, crystal.symmetry.frame
    axes = axes or file_axes(crystal)
    turn = axes.matrix @ frame.T
    basis = orthonormal_basis(group, row.kind)
    residual, size = _residual(tensor, turn, basis)
    share = 1.0 - len(basis) / tensor.size
    threshold = noise_threshold(
        size,
        tensor.size,
        share,
        sigma=spread,
        digits=digits,
        tolerance=tolerance,
        working_size=WORKING_SIZE.get((row.name, unit or row.unit), 0.0),
    )
    return TensorVerdict(
        row,
        crystal,
        label,
        group,
        axes,
        turn,
        read_only(tensor),
        unit or row.unit,
        residual,
        size,
        threshold,
        notes,
    )


def verdict_on(verdict: TensorVerdict, values: NDArray[np.float64]) -> TensorVerdict:
    """Return the verdict on other numbers for the same class, property and axes, with no noise stated."""
    group, row, turn = verdict.group, verdict.row, verdict.turn
    residual, size = _residual(values, turn, orthonormal_basis(group, row.kind))
    threshold = noise_threshold(size, values.size, 1.0)
    return replace(
        verdict,
        values=read_only(values),
        residual=residual,
        size=size,
        threshold=threshold,
        notes=(),
    )


def full_tensor(values: ArrayLike, row: Property, order: str = VOIGT_ORDER) -> NDArray[np.float64]:
    """Return the numbers as a tensor of shape (3,) * rank.

    Raises
    ------
    ShapeError
        If they have neither that shape nor the shape of matrix notation, or one is not finite.
    """
    import numpy as np

    try:
        array = np.asarray(values, dtype=float)
    except (TypeError, ValueError) as error:
        msg = f"the values of {row.name} are no array of numbers"
        raise ShapeError(msg, expected=_expected_shape(row)) from error
    if not np.isfinite(array).all():
        place = ", ".join(str(index + 1) for index in np.argwhere(~np.isfinite(array))[0])
        msg = f"the value of {row.name} at position ({place}) is not a finite number"
        raise ShapeError(msg)
    if array.shape == (3,) * row.kind.rank:
        return array
    if array.shape == matrix_shape(row.kind):
        return from_matrix(array, row.kind, row.factors, order)
    msg = f"values of shape {array.shape} do not fit {row.name}"
    raise ShapeError(msg, expected=_expected_shape(row))


def file_axes(crystal: Crystal) -> Axes:
    """Return the Cartesian axes of the structure itself."""
    from tensorsym.crystal.axes import axes_for

    return axes_for(crystal, "file")


def _expected_shape(row: Property) -> str:
    full, matrix = (3,) * row.kind.rank, matrix_shape(row.kind)
    return f"shape {full}" + (f" or {matrix} in matrix notation" if matrix != full else "")


def _full_sigma(sigma: ArrayLike, row: Property, order: str) -> NDArray[np.float64]:
    import numpy as np

    spread = np.asarray(sigma, dtype=float)
    if spread.ndim:
        spread = np.abs(full_tensor(spread, row, order))
    if not np.isfinite(spread).all() or (spread < 0).any():
        msg = f"sigma of {row.name} must be finite and not negative"
        raise ShapeError(msg)
    return spread


def _residual(
    tensor: NDArray[np.float64], turn: NDArray[np.float64], basis: NDArray[np.float64]
) -> tuple[float, float]:
    """Return the relative residual and the norm of a tensor, both found in the standard frame."""
    flat = turned(tensor, turn.T).reshape(-1)
    outside = flat - (basis @ flat) @ basis
    size = math.sqrt(flat.dot(flat))
    return math.sqrt(outside.dot(outside)) / size if size else 0.0, size


def _offences(verdict: TensorVerdict) -> tuple[Offence, ...]:
    import numpy as np

    row, space = verdict.row, verdict.placed_space
    components = components_of(row.kind)
    given, allowed = verdict.values.reshape(-1), verdict.symmetrised.reshape(-1)
    scale = np.array([matrix_factor(row.kind, row.factors, word) for word in components.words])
    words = np.array(components.words)
    deviation = np.abs(given - allowed)[words] * scale
    order = np.argsort(-deviation, kind="stable")[:MOST_SHOWN]
    relations = matrix_relations(space, row.symbol, row.factors)
    names, free = [row.symbol + digits for digits in components.digits], set(space.free)
    images = np.concatenate([_images(verdict), _exchanged(verdict)])
    offences = []
    for number in order:
        if deviation[number] <= NEGLIGIBLE * max(verdict.size, verdict.threshold.absolute):
            break
        word, name = words[number], names[number]
        changes = np.abs(images[:, word] - given[word]) * scale[number]
        strongest = int(np.argmax(changes))
        rule = name if number in free else combination_text(relations[name]) if name in relations else "0"
        operation = _cause_in_words(verdict, strongest)
        offences.append(
            Offence(
                name,
                float(given[word] * scale[number]),
                float(allowed[word] * scale[number]),
                rule,
                operation,
                float(changes[strongest]),
            )
        )
    return tuple(offences)


def _images(verdict: TensorVerdict) -> NDArray[np.float64]:
    """Return the tensor carried by every operation of the group, shape (order, 3**rank), in the tensor's axes."""
    import numpy as np

    kind, turn = verdict.row.kind, verdict.turn
    images = []
    for operation in verdict.group.operations:
        matrix = turn @ operation.cartesian() @ turn.T
        sign = -1.0 if kind.axial and operation.determinant < 0 else 1.0
        images.append(sign * turned(verdict.values, matrix).reshape(-1))
    return np.array(images)


def _exchanged(verdict: TensorVerdict) -> NDArray[np.float64]:
    """Return the tensor after every exchange of indices that its kind allows, shape (number, 3**rank)."""
    import numpy as np

    group = verdict.row.kind.index_group
    return np.array([sign * verdict.values.transpose(order).reshape(-1) for order, sign in group])


def _cause_in_words(verdict: TensorVerdict, number: int) -> str:
    """Return the operation, or the exchange of indices, of a number in the list of both."""
    operations = verdict.group.operations
    if number < len(operations):
        turn = tuple(map(tuple, verdict.turn.tolist()))
        return element_in_words(operations[number], turn, direction_namer(verdict.crystal))
    order, sign = verdict.row.kind.index_group[number - len(operations)]
    letters = "ijklmnpqrs"[: len(order)]
    return f"exchange of indices {letters} = {'-' if sign < 0 else ''}{''.join(letters[place] for place in order)}"
