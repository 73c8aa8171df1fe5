"""One way in for structure files: the format is told by the content, then its reader is called."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

from tensorsym.crystal import (
    formats_cif,
    formats_json,
    formats_outcar,
    formats_poscar,
    formats_pw_input,
    formats_pw_output,
    formats_vasprun,
    formats_xsf,
    formats_xyz,
)
from tensorsym.crystal.crystal import SYMPREC, Crystal
from tensorsym.crystal.formats_through_ase import parts_through_ase
from tensorsym.crystal.text_file import EXPECTED, plain_name, text_of
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Callable
    from os import PathLike

    from tensorsym.crystal.parts import StructureParts

__all__ = ["crystal_in_text", "read", "text_of"]


class Format(NamedTuple):
    """A format of structure files."""

    is_in: Callable[[str], bool]
    """Tells the format by the content."""
    parts: Callable[[str, str, int | None], StructureParts]
    """Reads a text of that format."""
    names: tuple[str, ...]
    """Parts of file names, in lower case, by which a damaged file is still known."""


FORMATS = (
    Format(formats_json.looks_like_json, formats_json.read_json, (".json",)),
    Format(formats_vasprun.looks_like_vasprun, formats_vasprun.read_vasprun, ("vasprun",)),
    Format(formats_pw_output.looks_like_pw_xml, formats_pw_output.read_pw_xml, ("data-file-schema",)),
    Format(formats_outcar.looks_like_outcar, formats_outcar.read_outcar, ("outcar",)),
    Format(formats_pw_output.looks_like_pw_output, formats_pw_output.read_pw_output, ()),
    Format(formats_cif.looks_like_cif, formats_cif.read_cif, (".cif", ".mcif")),
    Format(formats_pw_input.looks_like_pw_input, formats_pw_input.read_pw_input, ()),
    Format(formats_xsf.looks_like_xsf, formats_xsf.read_xsf, (".xsf",)),
    Format(formats_poscar.looks_like_poscar, formats_poscar.read_poscar, ("poscar", "contcar", ".vasp")),
    Format(formats_xyz.looks_like_xyz, formats_xyz.read_xyz, (".xyz", ".extxyz")),
)
"""In the order in which they are tried."""


def read(path: str | PathLike[str], *, symprec: float = SYMPREC, index: int | None = None) -> Crystal:
    """Return the crystal in a file.

    Parameters
    ----------
    path : path-like
        CIF, POSCAR or CONTCAR, vasprun.xml, OUTCAR, input, output or XML of Quantum ESPRESSO, XSF, XYZ (extended, or
        a molecule), a JSON document with a pymatgen structure; compressed by gzip, bzip2 or xz or not. The content
        decides, not the name. A few more text formats are read if ASE is installed.
    symprec : float
        Distance in Å within which atoms count as equivalent.
    index : int, optional
        Which structure of a file that holds several, from 0, negative ones from the end. When absent it is the first,
        and a note says that there are more.

    Raises
    ------
    StructureError
        If the file is missing, empty, not text, of no known format, damaged, or describes no possible crystal.
    UsageError
        If symprec is no positive number.
    """
    return crystal_in_text(text_of(path), str(path), symprec=symprec, index=index)


def crystal_in_text(text: str, source: str, *, symprec: float = SYMPREC, index: int | None = None) -> Crystal:
    """Return the crystal that the text of a file describes; see `read`.

    Raises
    ------
    StructureError
        If it describes none.
    """
    found = next((known for known in FORMATS if known.is_in(text)), None)
    name = plain_name(source).lower()
    if found is None:
        parts = parts_through_ase(text, source)
        found = next((known for known in FORMATS if any(mark in name for mark in known.names)), None)
        if parts is not None:
            return parts.crystal(source, symprec)
    if found is None:
        raise StructureError("is of no format known", where=source, expected=EXPECTED)
    try:
        return found.parts(text, source, index).crystal(source, symprec)
    except RecursionError as error:
        raise StructureError("is nested too deeply", where=source) from error
