"""The text of a file, decompressed, with every way of failing told in one line."""

from __future__ import annotations

import bz2
import codecs
import gzip
import lzma
import zlib
from pathlib import Path
from typing import IO, TYPE_CHECKING, cast

from tensorsym.errors import StructureError

if TYPE_CHECKING:
    from collections.abc import Callable
    from os import PathLike

LARGEST_FILE = 512 * 1024 * 1024
"""Files larger than this, in bytes after decompression, are refused."""

EXPECTED = "CIF, POSCAR, vasprun.xml, OUTCAR, Quantum ESPRESSO input or output, XSF, XYZ or pymatgen JSON"

_COMPRESSIONS = ((b"\x1f\x8b", gzip.open), (b"BZh", bz2.open), (b"\xfd7zXZ\x00", lzma.open))

_MARKS = ((codecs.BOM_UTF8, "utf-8-sig"), (codecs.BOM_UTF16_LE, "utf-16"), (codecs.BOM_UTF16_BE, "utf-16"))


def text_of(path: str | PathLike[str]) -> str:
    """Return the text of a file; gzip, bzip2 and xz are told by their first bytes and undone.

    Raises
    ------
    StructureError
        If it cannot be read, is empty, too large or not text.
    """
    where = str(path)
    data = _bytes_of(Path(path), where)
    if len(data) > LARGEST_FILE:
        msg = f"is larger than {LARGEST_FILE // 2**20} MB"
        raise StructureError(msg, where=where)
    if not data.strip():
        raise StructureError("is empty", where=where)
    encoding = next((name for mark, name in _MARKS if data.startswith(mark)), "utf-8")
    if encoding != "utf-16" and b"\0" in data[:65536]:
        raise StructureError("is a binary file, not text", where=where, expected=EXPECTED)
    return data.decode(encoding, errors="replace").replace("\r\n", "\n").replace("\r", "\n")


def plain_name(path: str | PathLike[str]) -> str:
    """Return the name of a file without its folder and without the suffix of a compression.

    >>> plain_name("run/POSCAR.gz")
    'POSCAR'
    """
    name = Path(path)
    return name.stem if name.suffix.lower() in (".gz", ".bz2", ".xz") else name.name


def _bytes_of(path: Path, where: str) -> bytes:
    try:
        with path.open("rb") as handle:
            start = handle.read(6)
        opened = cast(
            "Callable[[Path, str], IO[bytes]]",
            next((how for mark, how in _COMPRESSIONS if start.startswith(mark)), open),
        )
        with opened(path, "rb") as handle:
            return handle.read(LARGEST_FILE + 1)
    except FileNotFoundError as error:
        raise StructureError("no such file", where=where, hint="check the path") from error
    except IsADirectoryError as error:
        raise StructureError("is a folder, not a file", where=where) from error
    except (EOFError, gzip.BadGzipFile, lzma.LZMAError, zlib.error) as error:
        msg = f"cannot be decompressed: {error}"
        raise StructureError(msg, where=where, hint="the file may be cut off") from error
    except (OSError, ValueError) as error:
        msg = f"cannot be read: {getattr(error, 'strerror', None) or error}"
        raise StructureError(msg, where=where) from error
