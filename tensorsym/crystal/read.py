"""One way in for structure files: the format is told by the content, then its reader is called."""

from __future__ import annotations

import bz2
import gzip
import lzma
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

from tensorsym.crystal import formats_cif, formats_json, formats_qe, formats_text, formats_vasp
from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Callable
    from os import PathLike

    from tensorsym.crystal.crystal import Crystal

LARGEST_FILE = 512 * 1024 * 1024
"""Files larger than this, in bytes after decompression, are refused."""

Reader = "Callable[[str, str], Crystal]"

_COMPRESSIONS = ((b"\x1f\x8b", gzip.open), (b"BZh", bz2.open), (b"\xfd7zXZ", lzma.open))


def read(path: str | PathLike[str], *, symprec: float = 1e-3) -> Crystal:
    """Return the crystal in a file.

    Parameters
    ----------
    path : path-like
        CIF, POSCAR or CONTCAR, vasprun.xml, OUTCAR, Quantum ESPRESSO pw.x input or output, XSF, extended XYZ or a JSON
        document with a pymatgen structure; compressed by gzip, bzip2 or xz or not. The content decides, not the name.
    symprec : float
        Distance in angstrom within which atoms count as equivalent.

    Raises
    ------
    StructureError
        If the file is missing, empty, not text, of no known format, damaged, or describes no possible crystal.
    """
    text = text_of(path)
    source = str(path)
    return replace(_reader(text, source)(text, source), symprec=symprec)


def text_of(path: str | PathLike[str]) -> str:
    """Return the text of a file, decompressed.

    Raises
    ------
    StructureError
        If it cannot be read, is empty, too large or not text.
    """
    where = str(path)
    try:
        with Path(path).open("rb") as handle:
            start = handle.read(6)
        opener = next((opener for magic, opener in _COMPRESSIONS if start.startswith(magic)), open)
        with opener(path, "rb") as handle:  # type: ignore[operator]
            data = handle.read(LARGEST_FILE + 1)
    except FileNotFoundError as error:
        raise StructureError("no such file", where=where, hint="check the path") from error
    except IsADirectoryError as error:
        raise StructureError("is a folder, not a file", where=where) from error
    except (OSError, EOFError, lzma.LZMAError) as error:
        msg = f"cannot be read: {getattr(error, 'strerror', None) or error}"
        raise StructureError(msg, where=where) from error
    if len(data) > LARGEST_FILE:
        msg = f"is larger than {LARGEST_FILE // 2**20} MB"
        raise StructureError(msg, where=where)
    if not data.strip():
        raise StructureError("is empty", where=where)
    if b"\0" in data[:4096]:
        raise StructureError("is a binary file, not text", where=where, expected=EXPECTED)
    return data.decode("utf-8", errors="replace").replace("\r\n", "\n")


EXPECTED = "CIF, POSCAR, vasprun.xml, OUTCAR, Quantum ESPRESSO pw.x input or output, XSF, extended XYZ or pymatgen JSON"


def _reader(text: str, source: str) -> Callable[[str, str], Crystal]:
    """Return the reader of the first format whose marks the text carries."""
    for marks, reader in _FORMATS:
        if marks(text):
            return reader
    raise StructureError("is of no format known", where=source, expected=EXPECTED)


_FORMATS: tuple[tuple[Callable[[str], bool], Callable[[str, str], Crystal]], ...] = (
    (formats_json.looks_like_json, formats_json.read_json),
    (formats_vasp.looks_like_vasprun, formats_vasp.read_vasprun),
    (formats_vasp.looks_like_outcar, formats_vasp.read_outcar),
    (formats_qe.looks_like_pw_output, formats_qe.read_pw_output),
    (formats_qe.looks_like_pw_input, formats_qe.read_pw_input),
    (formats_cif.looks_like_cif, formats_cif.read_cif),
    (formats_text.looks_like_xsf, formats_text.read_xsf),
    (formats_text.looks_like_xyz, formats_text.read_xyz),
    (formats_vasp.looks_like_poscar, formats_vasp.read_poscar),
)
