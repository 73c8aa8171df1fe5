"""The content of a file as readers of outputs take it: its first part, its lines one by one, or all of it."""

from __future__ import annotations

import bz2
import gzip
import io
import lzma
import zlib
from contextlib import contextmanager
from functools import cached_property
from pathlib import Path
from typing import IO, TYPE_CHECKING, cast

from tensorsym.errors import OutputFileError

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator
    from os import PathLike

HEAD = 65536
"""How many bytes the format is told by."""

LARGEST_WHOLE = 256 * 1024 * 1024
"""Files that must be held as a whole are refused above this size in bytes, after decompression."""

LARGEST_READ = 16 * 1024 * 1024 * 1024
"""Reading line by line stops after this many bytes, after decompression."""

LONGEST_LINE = 1024 * 1024
"""A line longer than this, in bytes, is refused."""

_COMPRESSIONS = ((b"\x1f\x8b", gzip.open), (b"BZh", bz2.open), (b"\xfd7zXZ\x00", lzma.open))


class Content:
    """The content of a file, decompressed if gzip, bzip2 or xz packed it.

    Parameters
    ----------
    path : path-like
        The file.

    Raises
    ------
    OutputFileError
        If the file cannot be read or is empty.
    """

    def __init__(self, path: str | PathLike[str]) -> None:
        self.path = Path(path)
        self.source = str(path)
        if not self.start.strip():
            raise OutputFileError("is empty", where=self.source)

    @cached_property
    def start(self) -> bytes:
        """The first bytes, at most `HEAD` of them."""
        with _told(self.source), self._opened() as handle:
            return handle.read(HEAD)

    @cached_property
    def head(self) -> str:
        """The first part as text; a binary file gives an empty one."""
        return "" if self.is_binary else self.start.decode("utf-8", errors="replace").lstrip("\ufeff")

    @property
    def is_binary(self) -> bool:
        """True when the first part holds a zero byte."""
        return b"\0" in self.start

    @cached_property
    def data(self) -> bytes:
        """All bytes.

        Raises
        ------
        OutputFileError
            If there are more than `LARGEST_WHOLE`.
        """
        with _told(self.source), self._opened() as handle:
            data = handle.read(LARGEST_WHOLE + 1)
        if len(data) > LARGEST_WHOLE:
            msg = f"is larger than {LARGEST_WHOLE // 2**20} MB"
            raise OutputFileError(msg, where=self.source)
        return data

    @cached_property
    def text(self) -> str:
        """All of it as text, with plain line ends.

        Raises
        ------
        OutputFileError
            If it is too large or binary.
        """
        if b"\0" in self.data:
            raise OutputFileError("is a binary file, not text", where=self.source)
        text = self.data.decode("utf-8", errors="replace").lstrip("\ufeff")
        return text.replace("\r\n", "\n").replace("\r", "\n")

    def lines(self) -> Iterator[str]:
        """Yield the lines without their ends, holding one at a time.

        Raises
        ------
        OutputFileError
            If a line is too long or binary; its number is named.
        """
        with _told(self.source), self._opened() as handle:
            stream, read = io.BufferedReader(cast("io.RawIOBase", handle), 1 << 20), 0
            for number in range(1, LARGEST_READ):
                line = stream.readline(LONGEST_LINE)
                read += len(line)
                if not line:
                    return
                where = f"{self.source}, line {number}"
                if b"\0" in line:
                    raise OutputFileError("binary data", where=where, hint="the file may be damaged")
                if len(line) == LONGEST_LINE or read > LARGEST_READ:
                    raise OutputFileError("the line, or the file up to it, is too long", where=where)
                yield line.decode("utf-8", errors="replace").rstrip("\r\n")

    def _opened(self) -> IO[bytes]:
        with self.path.open("rb") as handle:
            mark = handle.read(6)
        how = next((opener for start, opener in _COMPRESSIONS if mark.startswith(start)), open)
        return cast("Callable[[Path, str], IO[bytes]]", how)(self.path, "rb")


@contextmanager
def _told(where: str) -> Iterator[None]:
    """Turn the failures of the operating system and of decompression into one line."""
    try:
        yield
    except FileNotFoundError as error:
        raise OutputFileError("no such file", where=where, hint="check the path") from error
    except IsADirectoryError as error:
        raise OutputFileError("is a folder, not a file", where=where) from error
    except (EOFError, gzip.BadGzipFile, lzma.LZMAError, zlib.error) as error:
        msg = f"cannot be decompressed: {error}"
        raise OutputFileError(msg, where=where, hint="the file may be cut off") from error
    except (OSError, ValueError) as error:
        if isinstance(error, OutputFileError):
            raise
        msg = f"cannot be read: {getattr(error, 'strerror', None) or error}"
        raise OutputFileError(msg, where=where) from error
