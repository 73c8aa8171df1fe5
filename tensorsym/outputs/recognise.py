"""Which reader a file needs, told by its content and never by its name."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

from tensorsym.errors import OutputFileError, UnknownNameError, nearest_names
from tensorsym.outputs.abinit_anaddb import looks_like_anaddb, read_anaddb
from tensorsym.outputs.abinit_netcdf import read_abinit_netcdf
from tensorsym.outputs.abinit_output import looks_like_abinit, read_abinit
from tensorsym.outputs.castep_efield import looks_like_efield, read_efield
from tensorsym.outputs.castep_output import looks_like_castep, read_castep
from tensorsym.outputs.espresso_dynamical import looks_like_dynamical_matrix, read_dynamical_matrix
from tensorsym.outputs.espresso_phonon import looks_like_phonon_output, read_phonon_output
from tensorsym.outputs.espresso_tensors import looks_like_espresso_tensors, read_espresso_tensors
from tensorsym.outputs.netcdf_variables import looks_like_netcdf
from tensorsym.outputs.vasp_outcar import looks_like_outcar, read_vasp_outcar
from tensorsym.outputs.vasp_xml import looks_like_vasprun, read_vasprun_tensors

if TYPE_CHECKING:
    from collections.abc import Callable

    from tensorsym.outputs.content import Content
    from tensorsym.outputs.record import OutputFile


class Reader(NamedTuple):
    """A format of outputs that hold tensors."""

    name: str
    """Name by which it can be asked for."""
    words: str
    """The format in words."""
    is_in: Callable[[Content], bool]
    """Tells it by the first part of the file."""
    read: Callable[[Content], OutputFile]
    """Reads a file of that format."""


def _text(looks: Callable[[str], bool]) -> Callable[[Content], bool]:
    """Return the test of a content by the test of its text."""
    return lambda content: looks(content.head)


def _is_netcdf(content: Content) -> bool:
    return looks_like_netcdf(content.start)


READERS = (
    Reader("vasp-outcar", "VASP OUTCAR", _text(looks_like_outcar), read_vasp_outcar),
    Reader("vasp-xml", "vasprun.xml", _text(looks_like_vasprun), read_vasprun_tensors),
    Reader("espresso-phonon", "ph.x output of Quantum ESPRESSO", _text(looks_like_phonon_output), read_phonon_output),
    Reader("espresso-dynamical", "its dynamical matrix", _text(looks_like_dynamical_matrix), read_dynamical_matrix),
    Reader("espresso-tensors", "its tensors.xml", _text(looks_like_espresso_tensors), read_espresso_tensors),
    Reader("abinit-anaddb", "anaddb output of ABINIT", _text(looks_like_anaddb), read_anaddb),
    Reader("abinit", "main output of ABINIT", _text(looks_like_abinit), read_abinit),
    Reader("abinit-netcdf", "netCDF output of ABINIT", _is_netcdf, read_abinit_netcdf),
    Reader("castep", "CASTEP output", _text(looks_like_castep), read_castep),
    Reader("castep-efield", "its .efield file", _text(looks_like_efield), read_efield),
)
"""Readers of calculations, in the order in which they are tried."""


def reader_for(content: Content, name: str | None = None) -> Reader | None:
    """Return the reader for a file, None if no format of calculations is recognised.

    Parameters
    ----------
    content : Content
        The file.
    name : str, optional
        Name of a reader that is to be used, whatever the content looks like.

    Raises
    ------
    UnknownNameError
        If no reader has that name.
    """
    if name is None:
        return next((reader for reader in READERS if reader.is_in(content)), None)
    found = next((reader for reader in READERS if reader.name == name), None)
    if found is None:
        names = [reader.name for reader in READERS]
        msg = f"{name!r} is no reader"
        raise UnknownNameError(msg, nearest=nearest_names(name, names), expected=", ".join(names))
    return found


def refused(content: Content) -> OutputFileError:
    """Return the error for a file that holds no tensors as far as can be told."""
    formats = ", ".join(reader.words for reader in READERS)
    what = "is a binary file" if content.is_binary else "is no output known to hold tensors"
    expected = f"{formats}, a JSON document, or a structure file followed by a tensor file"
    return OutputFileError(what, where=content.source, expected=expected)
