"""One way in for outputs and tensor files: the content decides which reader is called."""

from __future__ import annotations

import json
from dataclasses import replace
from typing import TYPE_CHECKING, Any

from tensorsym.errors import OutputFileError, TensorFileError
from tensorsym.outputs.content import Content
from tensorsym.outputs.json_document import read_json_document
from tensorsym.outputs.numpy_file import looks_like_numpy_file, read_numpy_file
from tensorsym.outputs.phonopy_born import looks_like_born, read_born
from tensorsym.outputs.plain_text import read_bare_matrix
from tensorsym.outputs.recognise import reader_for, refused
from tensorsym.outputs.record import OutputFile
from tensorsym.outputs.tensor_file import looks_like_tensor_document, parsed_json, read_tensor_document

if TYPE_CHECKING:
    from collections.abc import Iterator
    from os import PathLike

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.outputs.record import TensorRecord

BORN = "phonopy-born"
"""Name of the reader of BORN files, which need a structure file beside them."""

TENSOR_FILE = "tensor file"


def read_output(path: str | PathLike[str], *, symprec: float = 1e-3, reader: str | None = None) -> OutputFile:
    """Return structure and tensors of an output.

    Parameters
    ----------
    path : path-like
        Output of a calculation, or a JSON document that holds tensors; compressed by gzip, bzip2 or xz or not.
    symprec : float
        Distance in angstrom within which atoms of the structure count as equivalent.
    reader : str, optional
        Name of the reader to use, in place of the one that the content asks for.

    Raises
    ------
    InputError
        If the file cannot be read or is no output known.
    UnknownNameError
        If there is no reader of that name.
    """
    content = Content(path)
    found = reader_for(content, reader)
    if found is not None:
        return _at(found.read(content), symprec)
    if _is_json(content):
        document = _first_document(content)
        if looks_like_tensor_document(document):
            return OutputFile(None, read_tensor_document(document, content.source), TENSOR_FILE)
        return _at(read_json_document(document, content.source), symprec)
    raise refused(content)


def read_documents(path: str | PathLike[str], *, symprec: float = 1e-3) -> Iterator[OutputFile]:
    """Yield what each line of a file with one JSON document a line holds.

    Raises
    ------
    InputError
        If a line is no such document; its number is named.
    """
    content = Content(path)
    for number, line in enumerate(content.lines(), 1):
        if line.strip():
            where = f"{content.source}, line {number}"
            yield _at(read_json_document(parsed_json(line, where), where), symprec)


def read_tensors(
    path: str | PathLike[str],
    *,
    property: str | None = None,
    order: str | None = None,
    unit: str | None = None,
    atoms: int = 0,
    crystal: Crystal | None = None,
    reader: str | None = None,
) -> tuple[TensorRecord, ...]:
    """Return the tensors of a tensor file in our JSON form, of a bare matrix, a ``.npy`` file, or of an output.

    Parameters
    ----------
    path : path-like
        The file.
    property, order, unit : str, optional
        What a bare matrix or array holds; files that say so themselves do not need them.
    atoms : int
        Number of atoms of the structure, for properties of a site.
    crystal : Crystal, optional
        The structure, for a BORN file, which holds the charges of some atoms only.
    reader : str, optional
        Name of the reader of an output.

    Raises
    ------
    InputError
        If the file cannot be read as any of them.
    """
    content = Content(path)
    if reader == BORN or (reader is None and property is None and looks_like_born(content.head)):
        return read_born(content, crystal)
    found = reader_for(content, reader)
    if found is not None:
        return found.read(content).tensors
    atoms = atoms or (len(crystal.species) if crystal is not None else 0)
    if looks_like_numpy_file(content.start):
        return read_numpy_file(content, property=property, order=order, unit=unit, atoms=atoms)
    if content.is_binary:
        raise TensorFileError("is a binary file, not text", where=content.source)
    if _is_json(content):
        document = _first_document(content)
        if isinstance(document, dict) and not looks_like_tensor_document(document) and "schema" not in document:
            return _of_foreign_document(document, content.source)
        if not _is_bare(document):
            return read_tensor_document(document, content.source)
    return read_bare_matrix(content, property=property, order=order, unit=unit, atoms=atoms)


def _is_json(content: Content) -> bool:
    start = content.head.lstrip()
    return start[:1] == "{" or start[:1] == "["


def _first_document(content: Content) -> Any:
    """Return the document of a JSON file, the first one when there is one a line."""
    try:
        return parsed_json(content.text, content.source)
    except TensorFileError as error:
        cause = error.__cause__
        if not (isinstance(cause, json.JSONDecodeError) and cause.msg == "Extra data"):
            raise
    return parsed_json(next(content.lines()), f"{content.source}, line 1")


def _of_foreign_document(document: Any, source: str) -> tuple[TensorRecord, ...]:
    try:
        return read_json_document(document, source).tensors
    except OutputFileError:
        return read_tensor_document(document, source)  # its message names the keys that are missing


def _is_bare(document: Any) -> bool:
    """Tell nested lists of numbers, which are a bare matrix in brackets."""
    while isinstance(document, list) and document:
        document = document[0]
    return not isinstance(document, list | dict | str)


def _at(output: OutputFile, symprec: float) -> OutputFile:
    crystal = output.crystal
    return output if crystal is None else replace(output, crystal=replace(crystal, symprec=symprec))
