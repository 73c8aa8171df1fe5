"""The variables of a netCDF file: the classic format through scipy, netCDF 4 through h5py if it is installed."""

from __future__ import annotations

import io
from typing import TYPE_CHECKING, Any

import numpy as np

from tensorsym.errors import OutputFileError
from tensorsym.outputs.rows import CUT_OFF

if TYPE_CHECKING:
    from collections.abc import Iterable

    from numpy.typing import NDArray

    from tensorsym.outputs.content import Content

CLASSIC, NETCDF_4 = b"CDF", b"\x89HDF"
"""First bytes of the two formats."""


def looks_like_netcdf(start: bytes) -> bool:
    """Tell the format by its first bytes."""
    return start.startswith((CLASSIC, NETCDF_4))


def variables_of(content: Content, names: Iterable[str]) -> dict[str, NDArray[Any]]:
    """Return those variables of a netCDF file that are there, as arrays.

    Parameters
    ----------
    content : Content
        The file.
    names : iterable of str
        Names that are looked for.

    Raises
    ------
    OutputFileError
        If the file is damaged, or in netCDF 4 and h5py is not installed.
    """
    if content.start.startswith(CLASSIC):
        return _classic(content, names)
    try:
        import h5py  # type: ignore[import-untyped, import-not-found, unused-ignore]
    except ModuleNotFoundError as error:
        raise OutputFileError(
            "is in netCDF 4, for which h5py is needed", where=content.source, hint="pip install h5py"
        ) from error
    try:
        with h5py.File(io.BytesIO(content.data), "r") as file:
            return {name: np.array(file[name]) for name in names if name in file}
    except (OSError, RuntimeError, KeyError, ValueError, TypeError) as error:
        msg = f"is a damaged netCDF file: {str(error)[:80]}"
        raise OutputFileError(msg, where=content.source, hint=CUT_OFF) from error


def _classic(content: Content, names: Iterable[str]) -> dict[str, NDArray[Any]]:
    from scipy.io import netcdf_file

    try:
        with netcdf_file(io.BytesIO(content.data), "r", mmap=False) as file:
            return {name: np.array(file.variables[name].data) for name in names if name in file.variables}
    except Exception as error:  # scipy lets whatever a damaged header leads to through
        msg = f"is a damaged netCDF file: {str(error)[:80]}"
        raise OutputFileError(msg, where=content.source, hint=CUT_OFF) from error
