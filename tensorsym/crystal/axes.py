"""Axes of a crystal or a class by name or in Miller notation."""

from __future__ import annotations

from functools import partial
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.axis_words import words_for, words_in_cell
from tensorsym.crystal.frame import placed_group
from tensorsym.crystal.ieee_axes import SENSES_OPEN, ieee_matrix
from tensorsym.crystal.international_axes import WORDS as INTERNATIONAL_WORDS
from tensorsym.crystal.international_axes import c_along_z, international_matrix
from tensorsym.crystal.miller import NOTEWORTHY, MillerAxes, MillerDirection, axes_from_directions, directions_in_text
from tensorsym.crystal.reference_cell import reference_cell
from tensorsym.errors import AxesError, nearest_names
from tensorsym.groups.operations import Basis
from tensorsym.tensors.axes import Axes, read_only

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.groups.point_group import PointGroup

__all__ = ["NAMES", "axes_for", "axes_for_group", "words_for"]

NAMES = ("file", "ieee", "international")
"""Names that `axes_for` knows, beside Miller notation."""

EXPECTED = "file, ieee, international, or Miller notation such as 'x=[110] z=(001)'"

_IDENTITY = read_only(np.eye(3))

_LENGTHS_MATTER = 1e-6
"""Axes of a class that differ by more than this between cells of different lengths depend on them."""


def axes_for(crystal: Crystal, spec: str) -> Axes:
    """Return axes of a crystal.

    Parameters
    ----------
    crystal : Crystal
        The structure.
    spec : str
        ``file``: the Cartesian axes of the file. ``ieee``: IEEE Std 176-1987, see `tensorsym.crystal.ieee_axes`.
        ``international``: the standard setting of International Tables, see `tensorsym.crystal.international_axes`.
        Otherwise Miller notation of two or three axes, ``x=[110] z=(001)``: square brackets for a direction,
        parentheses for the normal of a plane, three or (hexagonal) four indices, ``-1`` or a bar for negative ones.

    Returns
    -------
    Axes
        Seen from the file's Cartesian axes.

    Raises
    ------
    AxesError
        If the text is none of these, or its directions are not perpendicular.

    Examples
    --------
    >>> from tensorsym.crystal.crystal import Crystal
    >>> polonium = Crystal(3.35 * np.eye(3), np.zeros((1, 3)), ("Po",))
    >>> axes_for(polonium, "x=[110] z=[001]").words
    'x along [110], z along [001], y = z x x'
    """
    name = spec.strip().lower()
    if name == "file":
        return Axes("file", _IDENTITY, partial(_file_words, crystal))
    if name == "ieee":
        matrix = read_only(ieee_matrix(crystal.symmetry))
        senses = "" if crystal.point_group.is_centrosymmetric else f"; {SENSES_OPEN}"
        return Axes("ieee", matrix, partial(_told, matrix, crystal, f"IEEE Std 176-1987{senses}"))
    if name == "international":
        matrix = read_only(international_matrix(crystal.symmetry))
        return Axes("international", matrix, partial(_told, matrix, crystal, INTERNATIONAL_WORDS))
    directions = _directions(spec)
    cell = reference_cell(crystal)
    _refuse_four_indices(directions, is_hexagonal=cell.is_hexagonal)
    built = axes_from_directions(directions, cell.vectors)
    words = _as_written(directions) + _made_perpendicular(built) + (f"; {cell.words}" if cell.words else "")
    return Axes(spec, read_only(built.matrix), words)


def axes_for_group(group: PointGroup, spec: str) -> Axes:
    """Return axes of a class given by its symbol alone, whose cell has unknown lengths.

    Parameters
    ----------
    group : PointGroup
        The class in one of its settings.
    spec : str
        ``ieee`` and, for monoclinic and orthorhombic classes, ``international``: the standard setting of the class.
        Miller notation is accepted where it does not depend on the lengths and angles that the class leaves open.

    Returns
    -------
    Axes
        Seen from the standard frame of the setting.

    Raises
    ------
    AxesError
        If the text is none of these, or depends on what the class leaves open.

    Examples
    --------
    >>> from tensorsym.groups.symbols import point_group_named
    >>> axes_for_group(point_group_named("32"), "x=[120] z=[001]").matrix.round().astype(int).tolist()
    [[0, 1, 0], [-1, 0, 0], [0, 0, 1]]
    """
    name = spec.strip().lower()
    if name == "ieee" or (name == "international" and group.system in ("monoclinic", "orthorhombic")):
        matrices = np.array([operation.matrix for operation in group.operations], dtype=np.intc)
        matrix = placed_group(matrices, _basis_vectors(group)).frame
        return Axes(name, matrix, f"{words_in_cell(matrix, _basis_vectors(group))} (standard setting of the class)")
    if name == "international":
        return Axes(name, _IDENTITY, f"{words_in_cell(_IDENTITY, _basis_vectors(group))} (setting of the symbol)")
    if name == "file":
        msg = f"class {group.hermann_mauguin} has no file whose axes could be meant"
        raise AxesError(msg, expected="standard, ieee, international or Miller notation")
    directions = _directions(spec)
    _refuse_four_indices(directions, is_hexagonal=group.basis is Basis.HEXAGONAL)
    one, other = (axes_from_directions(directions, cell).matrix for cell in _sample_cells(group))
    if np.abs(one - other).max() > _LENGTHS_MATTER:
        msg = f"{spec!r} depends on lengths or angles that class {group.hermann_mauguin} leaves open"
        raise AxesError(msg, hint="give a structure file in place of the class")
    return Axes(spec, read_only(one), _as_written(directions))


def _directions(spec: str) -> dict[str, MillerDirection]:
    if "=" in spec:
        return directions_in_text(spec)
    msg = f"{spec!r} names no axes"
    raise AxesError(msg, expected=EXPECTED, nearest=nearest_names(spec, NAMES))


def _file_words(crystal: Crystal) -> str:
    return _told(_IDENTITY, crystal, crystal.axes_words)


def _told(matrix: NDArray[np.float64], crystal: Crystal, origin: str) -> str:
    return f"{words_for(matrix, crystal)} ({origin})"


def _as_written(directions: Mapping[str, MillerDirection]) -> str:
    told = {
        axis: f"{axis} {'perpendicular to' if found.is_normal else 'along'} {found.text}"
        for axis, found in sorted(directions.items())
    }
    missing = next((axis for axis in "xyz" if axis not in told), None)
    if missing:
        told[missing] = {"x": "x = y x z", "y": "y = z x x", "z": "z = x x y"}[missing]
    return ", ".join(told.values())


def _made_perpendicular(built: MillerAxes) -> str:
    return f"; made perpendicular, {built.deviation:.2g} degrees off" if built.deviation > NOTEWORTHY else ""


def _refuse_four_indices(directions: Mapping[str, MillerDirection], *, is_hexagonal: bool) -> None:
    written = next((found.text for found in directions.values() if found.is_hexagonal), None)
    if written and not is_hexagonal:
        msg = f"{written} has four indices, and the cell is not hexagonal"
        raise AxesError(msg, expected="three indices")


def _basis_vectors(group: PointGroup) -> NDArray[np.float64]:
    """Return the vectors of the group's basis as rows, in its standard frame."""
    if group.basis is Basis.CARTESIAN:
        return np.eye(3)
    return np.array([[1.0, 0.0, 0.0], [-0.5, np.sqrt(0.75), 0.0], [0.0, 0.0, 1.0]])


def _sample_cells(group: PointGroup) -> list[NDArray[np.float64]]:
    """Return two cells with lengths and angles as different as the class allows, c along z, a in the xz plane."""
    matrices = np.array([operation.matrix for operation in group.operations], dtype=float)
    cells = []
    for shape in (
        [[1.0, 0.1, 0.2], [0.1, 1.3, -0.15], [0.2, -0.15, 1.7]],
        [[1.0, -0.2, 0.3], [-0.2, 0.8, 0.1], [0.3, 0.1, 2.9]],
    ):
        metric = np.mean(matrices.transpose(0, 2, 1) @ np.array(shape) @ matrices, axis=0)
        root = np.linalg.cholesky(metric)
        cells.append(root @ c_along_z(root).T)
    return cells
