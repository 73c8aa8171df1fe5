"""Axes by name or in Miller notation, built from a crystal and told in crystal directions."""

from __future__ import annotations

import re
from functools import partial
from itertools import product
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.errors import AxesError, nearest_names
from tensorsym.tensors.axes import Axes, read_only

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.groups.point_group import PointGroup

CONVENTIONS = ("file", "ieee", "international")
"""Names that `axes_for` knows, beside Miller text."""

ALIGNED = 0.05
"""Directions closer than this, in degrees, are told as parallel."""

PERPENDICULAR = 0.5
"""Largest deviation from a right angle, in degrees, between axes given in Miller notation."""

_ASSIGNMENT = re.compile(r"([xyz])\s*=\s*([\[(<]?)([^\])>=]*)([\])>]?)")
_INDEX = re.compile(r"-?\d")


def axes_for(crystal: Crystal, spec: str) -> Axes:
    """Return axes of a crystal.

    Parameters
    ----------
    crystal : Crystal
        The structure.
    spec : str
        ``file``: the Cartesian axes of the file. ``ieee``: IEEE Std 176-1987, section 3.2, from the standard cell.
        ``international``: x along a, z along the cross product of a and b (unique axis b: y along b, x along a),
        from the standard cell. Or two or three of x, y, z in Miller notation: ``x=[110] z=(001)``, brackets for a
        direction, parentheses for the normal of a plane; indices refer to `miller_cell`.

    Raises
    ------
    AxesError
        If the text is none of these, or the directions are zero, parallel or not perpendicular.
    """
    if spec == "file":
        return Axes("file", _IDENTITY, partial(_file_words, crystal))
    if spec in ("ieee", "international"):
        cell = crystal.symmetry.standard_cell
        matrix = read_only(_ieee(crystal, cell) if spec == "ieee" else _international(crystal, cell))
        name = "IEEE 176" if spec == "ieee" else "International Tables"
        words = f"{name}: {words_for(matrix, crystal)}"
        if spec == "ieee":
            words += "; senses that the standard takes from the sign of a coefficient are not known from the structure"
        return Axes(spec, matrix, words)
    if "=" in spec:
        matrix = read_only(axes_from_miller(spec, miller_cell(crystal)))
        return Axes(spec, matrix, words_for(matrix, crystal))
    msg = f"{spec!r} names no axes"
    raise AxesError(
        msg, expected="file, ieee, international or Miller text such as 'x=[110] z=(001)'",
        nearest=nearest_names(spec, CONVENTIONS),
    )  # fmt: skip


def _file_words(crystal: Crystal) -> str:
    return f"{words_for(_IDENTITY, crystal)} ({crystal.axes_words})"


_IDENTITY = read_only(np.eye(3))


def axes_for_group(group: PointGroup, spec: str) -> Axes:
    """Return axes in Miller notation for a class given by its symbol alone.

    The cell of a class has unknown lengths, so only axes that do not depend on them are accepted.

    Raises
    ------
    AxesError
        If the text is no Miller notation or depends on lengths or angles that the class leaves open.
    """
    if "=" not in spec:
        msg = f"{spec!r} needs a structure file: a class has no cell"
        raise AxesError(msg, expected="Miller text such as 'x=[110] z=(001)', or 'standard'")
    one, other = (axes_from_miller(spec, cell) for cell in _sample_cells(group))
    if np.abs(one - other).max() > 1e-9:
        msg = f"{spec!r} depends on lengths of the cell that class {group.hermann_mauguin} leaves open"
        raise AxesError(msg, hint="give a structure file")
    return Axes(spec, read_only(one), spec)


def axes_from_miller(text: str, cell: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the rows x, y, z that Miller text states for a cell with rows a, b, c.

    >>> axes_from_miller("x=[110] z=(001)", np.eye(3)).round(4).tolist()
    [[0.7071, 0.7071, 0.0], [-0.7071, 0.7071, 0.0], [0.0, 0.0, 1.0]]
    """
    found: dict[str, NDArray[np.float64]] = {}
    rest = text
    for match in _ASSIGNMENT.finditer(text):
        axis, opening, body, closing = match.groups()
        if axis in found:
            msg = f"axis {axis} is given twice in {text!r}"
            raise AxesError(msg)
        found[axis] = _direction(body, (opening, closing), cell, text)
        rest = rest.replace(match[0], "", 1)
    if rest.strip(" ,;") or len(found) < 2:
        msg = f"{text!r} does not give two axes"
        raise AxesError(msg, expected="two or three of x, y, z, such as 'x=[110] z=(001)'")
    return _right_handed(found, text)


def words_for(matrix: NDArray[np.float64], crystal: Crystal) -> str:
    """Return axes in crystal directions (see `miller_cell`), such as ``x along [100], z along [001], y = z x x``."""
    cell = miller_cell(crystal)
    told = {name: _direction_words(vector, cell) for name, vector in zip("xyz", matrix, strict=True)}
    if not told["y"].startswith("along") and told["x"].startswith("along") and told["z"].startswith("along"):
        told["y"] = ""
    words = [f"{name} {text}" for name, text in told.items() if text]
    return ", ".join(words) + ("" if told["y"] else ", y = z x x")


def miller_cell(crystal: Crystal) -> NDArray[np.float64]:
    """Return the cell that Miller indices refer to: the file's own unless it is smaller than the conventional one."""
    standard = crystal.symmetry.standard_cell
    ratio = abs(float(np.linalg.det(standard) / np.linalg.det(crystal.lattice)))
    return crystal.lattice if abs(ratio - 1.0) < 1e-3 else standard


def _ieee(crystal: Crystal, cell: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the axes of IEEE Std 176-1987, section 3.2 (from memory), as rows in the file's axes."""
    a, b, c = cell
    system, symbol = crystal.symmetry.group.system, crystal.symmetry.group.hermann_mauguin
    if system == "triclinic":
        lengths = np.linalg.norm(cell, axis=1)
        c, a, b = cell[np.argsort(lengths)]
        return _z_and_y(c, np.cross(c, a))
    if system == "monoclinic":
        unique = int(np.argmax([abs(_unit(vector) @ crystal.symmetry.frame[1]) for vector in cell]))
        y = crystal.symmetry.frame[1]
        others = sorted((vector for number, vector in enumerate(cell) if number != unique), key=np.linalg.norm)
        return _z_and_y(others[0], y)
    if system == "orthorhombic":
        c, a, b = sorted(cell, key=np.linalg.norm)
        if symbol == "mm2":
            polar = crystal.symmetry.frame[2]
            a, _b = sorted((v for v in cell if abs(_unit(v) @ polar) < 0.5), key=np.linalg.norm)
            c = polar
        return _z_and_x(c, a)
    if system == "cubic":
        return _z_and_x(c, a)
    if symbol in ("-42m", "32", "3m", "-3m"):
        # x along a two-fold axis, or perpendicular to the mirror where there is none.
        return _z_and_x(crystal.symmetry.frame[2], crystal.symmetry.frame[0])
    return _z_and_x(c, a)


def _international(crystal: Crystal, cell: NDArray[np.float64]) -> NDArray[np.float64]:
    a, b, _ = cell
    if crystal.symmetry.group.system == "monoclinic":
        y = crystal.symmetry.frame[1]
        y = y if y @ b > 0 else -y
        return np.array([_unit(a - (a @ y) * y), y, np.cross(_unit(a - (a @ y) * y), y)])
    return _z_and_x(np.cross(a, b), a)


def _z_and_x(z: NDArray[np.float64], x: NDArray[np.float64]) -> NDArray[np.float64]:
    z = _unit(z)
    x = _unit(x - (x @ z) * z)
    return np.array([x, np.cross(z, x), z])


def _z_and_y(z: NDArray[np.float64], y: NDArray[np.float64]) -> NDArray[np.float64]:
    z = _unit(z)
    y = _unit(y - (y @ z) * z)
    return np.array([np.cross(y, z), y, z])


def _direction(body: str, brackets: tuple[str, str], cell: NDArray[np.float64], text: str) -> NDArray[np.float64]:
    """Return the unit vector of ``[uvw]`` or the normal of ``(hkl)``; four indices are hexagonal ones."""
    plain = re.sub(r"(\d)[\u0304\u0305]", r"-\1", body).replace("−", "-")
    parts = plain.replace(",", " ").split()
    indices = [int(part) for part in (parts if len(parts) > 1 else _INDEX.findall(plain.replace(" ", "")))]
    if len(indices) not in (3, 4) or not any(indices) or brackets not in (("[", "]"), ("(", ")")):
        msg = f"{brackets[0]}{body}{brackets[1]} in {text!r} is no direction"
        raise AxesError(msg, expected="[uvw] for a direction or (hkl) for the normal of a plane, not all zero")
    if brackets == ("[", "]"):
        if len(indices) == 4:
            u, v, _, w = indices
            indices = [2 * u + v, 2 * v + u, w]
        return _unit(np.array(indices) @ cell)
    if len(indices) == 4:
        del indices[2]
    return _unit(np.linalg.inv(cell) @ np.array(indices))


def _right_handed(found: dict[str, NDArray[np.float64]], text: str) -> NDArray[np.float64]:
    """Complete two axes, or check three, and make them exactly perpendicular."""
    for one, other in (("x", "y"), ("x", "z"), ("y", "z")):
        if one in found and other in found:
            angle = float(np.degrees(np.arccos(np.clip(found[one] @ found[other], -1.0, 1.0))))
            if abs(angle - 90.0) > PERPENDICULAR:
                msg = f"{one} and {other} in {text!r} are at {angle:.2f} degrees"
                raise AxesError(msg, expected="perpendicular axes", hint="mind [uvw] against (hkl)")
    x = found["x"] if "x" in found else np.cross(found["y"], found["z"])
    y = found["y"] if "y" in found else np.cross(found["z"], x)
    z = found["z"] if "z" in found else np.cross(x, y)
    matrix = np.array([x, y, z])
    if np.linalg.det(matrix) < 0:
        msg = f"the axes in {text!r} are left-handed"
        raise AxesError(msg, hint="reverse one of them")
    left, _, right = np.linalg.svd(matrix)
    return np.asarray(left @ right)


def _direction_words(vector: NDArray[np.float64], cell: NDArray[np.float64]) -> str:
    """Return ``along [uvw]``, ``perpendicular to (hkl)``, or the angle from the nearest short direction."""
    along = _angles(vector, _SHORT_DIRECTIONS @ cell)
    if along.min() < ALIGNED:
        return f"along [{_index_text(int(np.argmax(along < ALIGNED)))}]"
    normal = _angles(vector, _SHORT_DIRECTIONS @ np.linalg.inv(cell).T)
    if normal.min() < ALIGNED:
        return f"perpendicular to ({_index_text(int(np.argmax(normal < ALIGNED)))})"
    nearest = int(np.argmin(along))
    return f"{along[nearest]:.1f} degrees from [{_index_text(nearest)}]"


def _index_text(number: int) -> str:
    return "".join(str(index) for index in _SHORT_DIRECTIONS[number])


def _angles(one: NDArray[np.float64], others: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the angles between a vector and the rows of a matrix, in degrees, precise also near zero."""
    cross = np.linalg.norm(np.cross(one, others), axis=1)
    return np.asarray(np.degrees(np.arctan2(cross, others @ one)))


def _unit(vector: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.asarray(vector / np.linalg.norm(vector))


def _sample_cells(group: PointGroup) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return two cells of the class's system with different free lengths and angles, in the standard frame."""
    if group.system == "cubic":
        return np.eye(3), np.eye(3)
    if group.system in ("trigonal", "hexagonal"):
        plane = [[1.0, 0.0, 0.0], [-0.5, 0.75**0.5, 0.0]]
        return np.array([*plane, [0.0, 0.0, 1.1]]), np.array([*plane, [0.0, 0.0, 1.7]])
    if group.system == "tetragonal":
        return np.diag([1.0, 1.0, 1.1]), np.diag([1.0, 1.0, 1.7])
    if group.system == "orthorhombic":
        return np.diag([1.0, 1.2, 1.5]), np.diag([1.0, 1.7, 0.8])
    one, other = np.diag([1.0, 1.2, 1.5]), np.diag([1.0, 1.7, 0.8])
    one[2, 0], other[2, 0] = -0.2, -0.4
    if group.system == "triclinic":
        one[1, 0], other[1, 0], one[2, 1], other[2, 1] = 0.1, 0.3, 0.2, 0.1
    return one, other


_SHORT_DIRECTIONS = np.array(
    sorted(
        (indices for indices in product(range(-3, 4), repeat=3) if any(indices) and np.gcd.reduce(indices) == 1),
        key=lambda indices: (sum(map(abs, indices)), [-index for index in indices]),
    )
)
"""Directions and plane normals by which axes are told, the shortest first."""
