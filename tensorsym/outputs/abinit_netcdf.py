"""The structure and tensors of the netCDF file that anaddb of ABINIT writes (files of versions 8 and 9)."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, NamedTuple

import numpy as np

from tensorsym.catalog.properties import property_named
from tensorsym.crystal.elements import element_named
from tensorsym.crystal.formats_pw_input import BOHR
from tensorsym.crystal.parts import StructureParts
from tensorsym.errors import OutputFileError
from tensorsym.outputs.netcdf_variables import variables_of
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import CUT_OFF, LARGEST
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.outputs.content import Content

FORMAT = "netCDF output of ABINIT"


class Variable(NamedTuple):
    """What a variable holds."""

    property: str
    """Name in the catalogue."""
    label: str
    """Which tensor it is."""
    unit: str
    """Its unit."""
    contribution: str
    """``electronic`` or ``total``."""


_CLAMPED, _RELAXED = "clamped ion", "relaxed ion"
_CORRECTED = f"{_RELAXED} with stress corrected"

VARIABLES = {
    "emacro_cart": Variable("dielectric", f"electronic, {_CLAMPED}", "1", "electronic"),
    "emacro_cart_rlx": Variable("dielectric", _RELAXED, "1", "total"),
    "free_stress_dielectric_tensor": Variable("dielectric", f"{_RELAXED}, free of stress", "1", "total"),
    "elastic_constants_clamped_ion": Variable("elastic-stiffness", _CLAMPED, "GPa", "electronic"),
    "elastic_constants_relaxed_ion": Variable("elastic-stiffness", _RELAXED, "GPa", "total"),
    "elastic_constants_relaxed_ion_stress_corrected": Variable("elastic-stiffness", _CORRECTED, "GPa", "total"),
    "elastic_tensor_relaxed_ion_fixed_D": Variable("elastic-stiffness", f"{_RELAXED}, fixed D", "GPa", "total"),
    "compliance_constants_clamped_ion": Variable("elastic-compliance", _CLAMPED, "GPa^-1", "electronic"),
    "compliance_constants_relaxed_ion": Variable("elastic-compliance", _RELAXED, "GPa^-1", "total"),
    "compliance_constants_relaxed_ion_stress_corrected": Variable("elastic-compliance", _CORRECTED, "GPa^-1", "total"),
    "piezo_clamped_ion": Variable("piezoelectric-stress", _CLAMPED, "C/m^2", "electronic"),
    "piezo_relaxed_ion": Variable("piezoelectric-stress", _RELAXED, "C/m^2", "total"),
    "d_tensor_relaxed_ion": Variable("piezoelectric", _RELAXED, "pC/N", "total"),
    "g_tensor_relaxed_ion": Variable("piezoelectric-voltage", _RELAXED, "m^2/C", "total"),
    "h_tensor_relaxed_ion": Variable("piezoelectric-stiffness", _RELAXED, "GN/C", "total"),
    "dchide": Variable("second-order-dielectric", "susceptibility in a field", "a.u.", "electronic"),
    "becs_cart": Variable("born-charge", "rows field, columns displacement (transposed)", "e", ""),
    "dchidt": Variable("raman-atomic", "susceptibility under displacement, first index displacement", "bohr^-1", ""),
    "internal_strain_tensor": Variable("internal-strain", "force response", "hartree/bohr", ""),
}
"""Matrices run in the handbook's order of pairs. A variable of zeros was not calculated."""

_STRUCTURE = (
    "primitive_vectors", "reduced_atom_positions", "atom_species", "atomic_numbers",
)  # fmt: skip


STRESSED = "corrected for the stress of the cell: under stress the two index pairs need not be exchangeable"
"""Note on tensors that may lack the exchange of pairs and still be invariant."""


def read_abinit_netcdf(content: Content) -> OutputFile:
    """Return structure and tensors of a netCDF output of anaddb.

    Raises
    ------
    InputError
        If the file is damaged, or holds no structure.
    """
    variables = variables_of(content, (*_STRUCTURE, *VARIABLES))
    crystal = _crystal(variables, content.source)
    labels = tuple(f"{number} {name}" for number, name in enumerate(crystal.species, 1))
    records = [
        _record(name, meaning, variables[name], labels, content.source)
        for name, meaning in VARIABLES.items()
        if name in variables and np.any(variables[name])
    ]
    return OutputFile(crystal, tuple(records), FORMAT)


def _crystal(variables: Mapping[str, NDArray[Any]], source: str) -> Crystal:
    missing = [name for name in _STRUCTURE if name not in variables]
    if missing:
        msg = f"holds no {', '.join(missing)}"
        raise OutputFileError(msg, where=source, expected="the netCDF file that anaddb of ABINIT writes")
    try:
        numbers = [round(float(number)) for number in np.ravel(variables["atomic_numbers"])]
        atoms = [str(numbers[int(kind) - 1]) for kind in np.ravel(variables["atom_species"])]
    except (IndexError, KeyError, ValueError, OverflowError) as error:
        raise OutputFileError("its list of atoms is damaged", where=source) from error
    species = [element_named(atom, source) for atom in atoms]
    parts = StructureParts(
        FORMAT,
        BOHR * np.asarray(variables["primitive_vectors"], dtype=float),
        variables["reduced_atom_positions"],
        species,
    )
    return parts.crystal(source)


def _record(name: str, meaning: Variable, variable: NDArray[Any], labels: tuple[str, ...], source: str) -> TensorRecord:
    row = property_named(meaning.property)
    array = np.array(variable, dtype=float)
    if not (np.abs(array) < LARGEST).all():
        place = ", ".join(str(index + 1) for index in np.argwhere(~(np.abs(array) < LARGEST))[0])
        msg = f"the number at ({place}) is not finite, or too large"
        raise OutputFileError(msg, where=f"{source}, {name}")
    try:
        values, order = _tensors(name, array, len(labels))
    except ValueError as error:
        msg = f"an array of shape {array.shape} is no {row.name}"
        raise OutputFileError(msg, where=f"{source}, {name}", hint=CUT_OFF) from error
    return TensorRecord(
        row.name,
        meaning.label,
        values,
        meaning.unit,
        order=order,
        per_site=row.site,
        site_labels=labels if row.site else (),
        contribution=meaning.contribution,
        notes=(STRESSED,) if "stress" in meaning.label and row.kind.rank == 4 else (),
    )


def _tensors(name: str, array: NDArray[np.float64], atoms: int) -> tuple[NDArray[np.float64], str]:
    """Return the full tensors of a variable, and the order of the pairs if it is in matrix notation."""
    row = property_named(VARIABLES[name].property)
    if name == "becs_cart":
        return array.reshape(atoms, 3, 3).transpose(0, 2, 1), ""
    if name == "dchidt":
        return array.reshape(3, 3, 3, atoms).transpose(3, 2, 1, 0), ""
    if name == "internal_strain_tensor":
        blocks = array.reshape(6, atoms, 3).transpose(1, 2, 0)
        return np.array([from_matrix(block, row.kind, row.factors, VOIGT_ORDER) for block in blocks]), VOIGT_ORDER
    if name == "dchide" or row.kind.rank == 2:
        return array.reshape((3,) * row.kind.rank), ""
    matrix = array.T.copy() if array.shape == (6, 3) else array
    return from_matrix(matrix, row.kind, row.factors, VOIGT_ORDER), VOIGT_ORDER
