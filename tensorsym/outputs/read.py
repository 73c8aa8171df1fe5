"""One way in for outputs and tensor files: the content decides which reader is called."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from tensorsym.crystal.read import text_of
from tensorsym.errors import OutputFileError
from tensorsym.outputs.plain_text import read_bare_matrix
from tensorsym.outputs.tensor_file import read_tensor_document
from tensorsym.outputs.vasp_outcar import looks_like_outcar, read_vasp_outcar

if TYPE_CHECKING:
    from os import PathLike

    from tensorsym.outputs.record import OutputFile, TensorRecord

EXPECTED = "a VASP OUTCAR with tensors, or a structure file followed by a tensor file"


def read_output(path: str | PathLike[str], *, symprec: float = 1e-3) -> OutputFile:
    """Return structure and tensors of an output.

    Raises
    ------
    InputError
        If the file cannot be read or is no output known.
    """
    text, source = text_of(path), str(path)
    if looks_like_outcar(text):
        output = read_vasp_outcar(text, source)
        crystal = output.crystal and replace(output.crystal, symprec=symprec)
        return replace(output, crystal=crystal)
    raise OutputFileError("is no output known to hold tensors", where=source, expected=EXPECTED)


def read_tensors(
    path: str | PathLike[str],
    *,
    property: str | None = None,
    order: str | None = None,
    unit: str | None = None,
    atoms: int = 0,
) -> tuple[TensorRecord, ...]:
    """Return the tensors of a tensor file in our JSON form, or of a bare matrix.

    Raises
    ------
    InputError
        If the file cannot be read as either.
    """
    text, source = text_of(path), str(path)
    if text.lstrip()[:1] == "{" or (text.lstrip()[:1] == "[" and '"' in text):
        return read_tensor_document(text, source)
    return read_bare_matrix(text, source, property=property, order=order, unit=unit, atoms=atoms)
