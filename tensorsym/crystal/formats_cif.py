"""CIF: parsed by pymatgen, placed in axes of our own."""

from __future__ import annotations

import warnings
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.crystal import Crystal
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from numpy.typing import NDArray


AXES = "a CIF has no Cartesian axes; ours are c along z, a in the xz plane"


def looks_like_cif(text: str) -> bool:
    """Tell a CIF by its data block and its cell."""
    return "data_" in text and "_cell_length_a" in text.lower()


def read_cif(text: str, source: str) -> Crystal:
    """Return the first structure of a CIF, in its own (usually conventional) cell.

    The cell is given by lengths and angles alone, so the Cartesian axes are ours: z along c, x in the plane of a and c on
    the side of a, y completing a right-handed set.
    """
    from pymatgen.io.cif import CifParser

    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore")
            structures = CifParser.from_str(text).parse_structures(primitive=False)
    except Exception as error:  # pymatgen raises whatever its parser meets; told with the file's name
        msg = f"cannot be read as CIF: {error}"
        raise StructureError(msg, where=source, hint="check the cell, the operations and the atom loop") from error
    if not structures:
        raise StructureError("holds no crystal structure", where=source)
    structure = structures[0]
    notes = []
    if len(structures) > 1:
        notes.append(f"the file holds {len(structures)} structures; the first is used")
    lattice = cell_in_our_axes(*structure.lattice.abc, *structure.lattice.angles)
    species = [site_label(site) for site in structure]
    if any(has_oxidation_state(site) for site in structure):
        notes.append("oxidation states are not used to tell atoms apart")
    return Crystal(
        lattice, structure.frac_coords, species, source=source, format="CIF", axes_words=AXES,
        title=_title(text, structure.composition.reduced_formula), notes=notes,
    )  # fmt: skip


def cell_in_our_axes(a: float, b: float, c: float, alpha: float, beta: float, gamma: float) -> NDArray[np.float64]:
    """Return the lattice vectors as rows: c along z, a in the xz plane with positive x; angles in degrees.

    >>> cell_in_our_axes(1, 1, 2, 90, 90, 120).round(3).tolist()
    [[1.0, 0.0, 0.0], [-0.5, 0.866, 0.0], [0.0, 0.0, 2.0]]
    """
    cos_alpha, cos_beta, cos_gamma = (_cosine(angle) for angle in (alpha, beta, gamma))
    sin_beta = float(np.sqrt(1.0 - cos_beta**2))
    x = (cos_gamma - cos_alpha * cos_beta) / sin_beta
    y = float(np.sqrt(max(1.0 - x * x - cos_alpha**2, 0.0)))
    return np.array([[a * sin_beta, 0.0, a * cos_beta], [b * x, b * y, b * cos_alpha], [0.0, 0.0, c]])


def site_label(site: object) -> str:
    """Return the species of a pymatgen site, with occupancies when it is mixed or partly empty."""
    amounts: dict[str, float] = {}
    for species, amount in site.species.items():  # type: ignore[attr-defined]
        symbol = getattr(species, "symbol", str(species))
        amounts[symbol] = amounts.get(symbol, 0.0) + float(amount)
    if len(amounts) == 1 and abs(sum(amounts.values()) - 1.0) < 1e-6:
        return next(iter(amounts))
    return "".join(f"{symbol}{amount:.4g}" for symbol, amount in sorted(amounts.items()))


def has_oxidation_state(site: object) -> bool:
    """Tell whether a pymatgen site carries an oxidation state other than zero."""
    return any(getattr(species, "oxi_state", None) for species in site.species)  # type: ignore[attr-defined]


def _cosine(angle: float) -> float:
    """Return the cosine, exact for the angles of a conventional cell."""
    exact = {90.0: 0.0, 60.0: 0.5, 120.0: -0.5}
    return exact.get(round(angle, 10), float(np.cos(np.radians(angle))))


def _title(text: str, fallback: str) -> str:
    for key in ("_chemical_name_mineral", "_chemical_name_common", "_chemical_name_systematic"):
        for line in text.splitlines():
            if line.lower().startswith(key):
                name = line[len(key) :].strip().strip("'\"")
                if name and name not in ("?", "."):
                    return name
    return fallback
