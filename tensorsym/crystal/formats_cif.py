"""CIF: cell, operations and sites, placed in axes of our own."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.cif_syntax import Block, Value, cif_blocks
from tensorsym.crystal.elements import is_element
from tensorsym.crystal.mixed_sites import ListedSite, atoms_of_sites, element_in
from tensorsym.crystal.numbers_in import finite_number
from tensorsym.crystal.parts import StructureParts
from tensorsym.crystal.space_group_operations import (
    SpaceGroupOperations,
    operation_in_text,
    operations_of_space_group,
)
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

AXES = "c along z, a in the xz plane, b completing a right-handed set: ours, since a CIF gives no Cartesian axes"

_EDGES = ("_cell_length_a", "_cell_length_b", "_cell_length_c")
_ANGLES = ("_cell_angle_alpha", "_cell_angle_beta", "_cell_angle_gamma")
_COORDINATES = ("_atom_site_fract_x", "_atom_site_fract_y", "_atom_site_fract_z")
_OPERATIONS = (
    "_space_group_symop_operation_xyz", "_symmetry_equiv_pos_as_xyz", "_space_group_symop_magn_operation_xyz",
)  # fmt: skip
_CENTRINGS = "_space_group_symop_magn_centering_xyz"
_GROUP_NAMES = (
    "_space_group_name_hall", "_symmetry_space_group_name_hall", "_space_group_name_h-m_alt",
    "_symmetry_space_group_name_h-m", "_space_group_name_h-m_full", "_space_group_it_number",
    "_symmetry_int_tables_number",
)  # fmt: skip
_TITLES = (
    "_chemical_name_common", "_chemical_name_mineral", "_chemical_name_systematic", "_chemical_formula_structural",
)  # fmt: skip


def looks_like_cif(text: str) -> bool:
    """Tell a CIF by a data block and the name of an item."""
    return bool(re.search(r"^\s*data_", text, re.MULTILINE | re.IGNORECASE)) and bool(
        re.search(r"^\s*(_cell|_atom_site|_symmetry|_space_group|_chemical)", text, re.MULTILINE | re.IGNORECASE)
    )


def read_cif(text: str, source: str, index: int | None = None) -> StructureParts:
    """Return a structure of a CIF, in the cell of the file.

    Parameters
    ----------
    text, source : str
        The file and its name.
    index : int, optional
        Which of the data blocks with atoms, from 0; the first when absent, with a note if there are more.

    Raises
    ------
    StructureError
        If the syntax is broken, or no block has cell and atoms.
    """
    blocks = cif_blocks(text, source)
    with_atoms = [block for block in blocks if block.column(*_COORDINATES) and block.first(*_EDGES)]
    if not with_atoms:
        missing = "cell lengths" if any(block.column(*_COORDINATES) for block in blocks) else "fractional coordinates"
        msg = f"no data block holds a crystal structure: no {missing}"
        raise StructureError(msg, where=source, expected=f"{_EDGES[0]} and {_COORDINATES[0]}")
    try:
        block = with_atoms[index or 0]
    except IndexError:
        msg = f"there is no structure {index} among {len(with_atoms)}"
        raise StructureError(msg, where=source) from None
    notes = []
    if index is None and len(with_atoms) > 1:
        notes.append(f"{len(with_atoms)} data blocks hold structures: the first, {block.name!r}, is used")
    return _structure(block, source, notes)


def cell_in_our_axes(a: float, b: float, c: float, alpha: float, beta: float, gamma: float) -> NDArray[np.float64]:
    """Return the lattice vectors as rows: c along z, a in the xz plane with positive x; angles in degrees.

    Raises
    ------
    StructureError
        If no cell has these angles.

    Examples
    --------
    >>> cell_in_our_axes(1, 1, 2, 90, 90, 120).round(3).tolist()
    [[1.0, 0.0, 0.0], [-0.5, 0.866, 0.0], [0.0, 0.0, 2.0]]
    """
    cos_alpha, cos_beta, cos_gamma = (_cosine(angle) for angle in (alpha, beta, gamma))
    sin_beta = float(np.sqrt(max(1.0 - cos_beta**2, 0.0)))
    x = (cos_gamma - cos_alpha * cos_beta) / sin_beta if sin_beta else 1.0
    square = 1.0 - x * x - cos_alpha**2
    if not square > 0 or not all(0 < angle < 180 for angle in (alpha, beta, gamma)):
        msg = f"no cell has the angles {alpha:g}, {beta:g}, {gamma:g} degrees"
        raise StructureError(msg)
    return np.array(
        [[a * sin_beta, 0.0, a * cos_beta], [b * x, b * float(np.sqrt(square)), b * cos_alpha], [0.0, 0.0, c]]
    )


def _structure(block: Block, source: str, notes: list[str]) -> StructureParts:
    cell = _cell(block, source)
    try:
        lattice = cell_in_our_axes(*cell)
    except StructureError as error:
        raise StructureError(error.message, where=f"{source}, data block {block.name!r}") from error
    sites = _sites(block, source, notes)
    atoms = atoms_of_sites(sites, _operations(block, cell, source, notes), lattice, source)
    title = block.first(*_TITLES)
    return StructureParts(
        "CIF", lattice, atoms.positions, atoms.species, axes_words=AXES, notes=(*notes, *atoms.notes),
        title=" ".join(title.text.split()) if title else "",
    )  # fmt: skip


def _cell(block: Block, source: str) -> list[float]:
    edges = [_number(block.first(name), name, source, block) for name in _EDGES]
    angles = [_number(block.first(name) or Value("90", block.line), name, source, block) for name in _ANGLES]
    if min(edges) <= 0:
        msg = f"a cell edge of {min(edges):g} Å"
        raise StructureError(msg, where=f"{source}, data block {block.name!r}", expected="a positive length")
    return edges + angles


def _sites(block: Block, source: str, notes: list[str]) -> list[ListedSite]:
    coordinates = [block.column(name) for name in _COORDINATES]
    rows = list(zip(*coordinates, strict=False))
    labels, types = block.column("_atom_site_label"), block.column("_atom_site_type_symbol")
    occupancies, flags = block.column("_atom_site_occupancy"), block.column("_atom_site_calc_flag")
    if any(len(column) != len(rows) for column in (*coordinates, labels or types)):
        msg = "the sites do not all have a name and three coordinates"
        raise StructureError(msg, where=f"{source}, data block {block.name!r}")
    sites, unplaced, charges = [], [], set()
    for number, row in enumerate(rows):
        name = (types[number : number + 1] or [Value("", 0)])[0].text or _element_of_label(labels[number].text)
        label = labels[number].text if labels else name
        if flags[number : number + 1] and flags[number].text.lower() == "dum":
            continue
        if not all(value.text for value in row):
            unplaced.append(label)
            continue
        where = f"{source}, line {row[0].line}"
        place = np.array([_coordinate(value, source) for value in row])
        occupancy = occupancies[number] if occupancies else Value("", 0)
        amount = _number(occupancy, "occupancy", source, block) if occupancy.text else 1.0
        if not 0 <= amount <= 1.05:
            msg = f"site {label} has occupancy {amount:g}"
            raise StructureError(msg, where=where, expected="0 to 1")
        charges.add((element_in(name), name))
        if amount:
            sites.append(ListedSite(label, {element_in(name): min(amount, 1.0)}, place, where))
    if unplaced:
        notes.append(f"sites without coordinates are left out: {', '.join(unplaced[:5])}")
    if len({element for element, _ in charges}) < len(charges):
        notes.append("oxidation states do not tell atoms apart: the same element is the same species")
    if not sites:
        raise StructureError("no site has coordinates", where=f"{source}, data block {block.name!r}")
    return sites


def _operations(block: Block, cell: Sequence[float], source: str, notes: list[str]) -> SpaceGroupOperations:
    listed = next((column for name in _OPERATIONS if (column := [v for v in block.column(name) if v.text])), [])
    if listed:
        return _listed_operations(listed, block, source, notes)
    name = block.first(*_GROUP_NAMES)
    if name is None:
        notes.append("the file states no symmetry: its sites are taken as all atoms of the cell")
        return SpaceGroupOperations(np.eye(3)[None], np.zeros((1, 3)))
    where = f"{source}, line {name.line}"
    if name.text.lstrip().upper().startswith("R") and np.ptp(cell[:3]) == 0 and np.ptp(cell[3:]) == 0:
        return operations_of_space_group(name.text.partition(":")[0] + ":R", where)
    notes.append(f"operations taken from the table of space groups for {name.text!r}: the file lists none")
    return operations_of_space_group(name.text, where)


def _listed_operations(listed: Sequence[Value], block: Block, source: str, notes: list[str]) -> SpaceGroupOperations:
    found = [operation_in_text(_without_time(value.text), f"{source}, line {value.line}") for value in listed]
    if block.column(_OPERATIONS[2]):
        notes.append("magnetic moments are not read: the group is that of the atoms alone")
    rotations, translations = np.array([pair[0] for pair in found]), np.array([pair[1] for pair in found])
    centrings = [
        operation_in_text(_without_time(value.text), f"{source}, line {value.line}")[1]
        for value in block.column(_CENTRINGS)
    ] or [np.zeros(3)]
    return SpaceGroupOperations(
        np.tile(rotations, (len(centrings), 1, 1)), np.concatenate([translations + shift for shift in centrings])
    )


def _without_time(text: str) -> str:
    """Return ``x,y,z`` of a magnetic operation ``x,y,z,-1``."""
    return ",".join(text.split(",")[:3]) if text.count(",") == 3 else text


def _number(value: Value | None, name: str, source: str, block: Block) -> float:
    """Return a number without its standard uncertainty, ``4.9134(2)``."""
    if value is None or not value.text:
        msg = f"{name} is missing"
        raise StructureError(msg, where=f"{source}, data block {block.name!r}")
    return finite_number(re.sub(r"\(\d*\)$", "", value.text), source, value.line, name)


def _coordinate(value: Value, source: str) -> float:
    whole, _, divisor = re.sub(r"\(\d*\)$", "", value.text).partition("/")
    number = finite_number(whole, source, value.line, "fractional coordinate")
    return number / finite_number(divisor, source, value.line, "fractional coordinate") if divisor else number


def _element_of_label(label: str) -> str:
    """Return the element that a site's name begins with.

    >>> [_element_of_label(label) for label in ("Si1", "OW2", "CL1", "H12A")]
    ['Si', 'O', 'C', 'H']
    """
    letters = (re.match(r"[A-Za-z]*", label) or [""])[0]
    for candidate in (letters[:2] if letters[1:2].islower() else "", letters[:1], letters[:2].capitalize()):
        if is_element(candidate):
            return candidate
    return letters or label


def _cosine(angle: float) -> float:
    """Return the cosine, exact for the angles of a conventional cell."""
    exact = {90.0: 0.0, 60.0: 0.5, 120.0: -0.5}
    return exact.get(round(angle, 10), float(np.cos(np.radians(angle))))
