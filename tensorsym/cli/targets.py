"""What a TARGET on the command line means: a structure file or the symbol of a group."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

from tensorsym.errors import GroupSymbolError, StructureError
from tensorsym.groups.symbols import point_group_named

if TYPE_CHECKING:
    from tensorsym.crystal.crystal import Crystal
    from tensorsym.groups.point_group import PointGroup


def target_named(text: str, symprec: float) -> Crystal | PointGroup:
    """Return the crystal in a file, or the point group that a symbol names.

    Raises
    ------
    GroupSymbolError
        If there is no such file and the text is no symbol.
    StructureError
        If the text looks like a path to a file that is not there, or the file cannot be read.
    """
    path = Path(text)
    if path.is_file():
        from tensorsym.crystal.read import read

        return read(path, symprec=symprec)
    try:
        return point_group_named(text)
    except GroupSymbolError:
        if path.suffix or path.parent != Path():
            msg = "no such file" if not path.is_dir() else "is a folder, not a structure file"
            raise StructureError(msg, where=text, hint="check the path, or give a group symbol such as 3m") from None
        raise
