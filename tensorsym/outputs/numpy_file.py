"""A tensor in numpy's own file format; nothing in it is ever unpickled."""

from __future__ import annotations

import io
import math
from typing import TYPE_CHECKING

import numpy as np

from tensorsym.errors import ShapeError, TensorFileError, UsageError
from tensorsym.outputs.plain_text import MOST_NUMBERS
from tensorsym.outputs.record import TensorRecord
from tensorsym.outputs.rows import LARGEST
from tensorsym.outputs.shapes import shaped
from tensorsym.outputs.units import property_in_unit
from tensorsym.tensors.notation import VOIGT_ORDER

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from tensorsym.outputs.content import Content

MARK = b"\x93NUMPY"
"""First bytes of the format."""


def looks_like_numpy_file(start: bytes) -> bool:
    """Tell the format by its first bytes."""
    return start.startswith(MARK)


def read_numpy_file(
    content: Content, *, property: str | None, order: str | None, unit: str | None, atoms: int
) -> tuple[TensorRecord, ...]:
    """Return the tensor of a ``.npy`` file; see `tensorsym.outputs.plain_text.read_bare_matrix` for the parameters.

    Raises
    ------
    TensorFileError
        If the file is damaged, holds objects, or numbers that are not real and finite.
    ShapeError
        If the array does not fit the property.
    UsageError
        If no property is named.
    """
    if property is None:
        msg = f"{content.source} says not what it holds"
        raise UsageError(
            msg, expected="the name of its property", hint="--property NAME, and --order for matrix notation"
        )
    row, told_unit, notes = property_in_unit(property, unit)
    array = _array(content)
    if not (np.abs(array) < LARGEST).all():
        place = ", ".join(str(index + 1) for index in np.argwhere(~(np.abs(array) < LARGEST))[0])
        msg = f"the number at ({place}) is not finite, or too large"
        raise TensorFileError(msg, where=content.source)
    tensor, per_site, in_pairs = shaped(array, row, order or VOIGT_ORDER, atoms, content.source)
    told_order = (order or VOIGT_ORDER) if in_pairs else ""
    return (TensorRecord(row.name, "", tensor, told_unit, order=told_order, per_site=per_site, notes=notes),)


def _array(content: Content) -> NDArray[np.float64]:
    stream = io.BytesIO(content.data)
    try:
        version = np.lib.format.read_magic(stream)
        read_header = {(1, 0): np.lib.format.read_array_header_1_0, (2, 0): np.lib.format.read_array_header_2_0}
        shape, _, dtype = read_header[version](stream)
        if math.prod(shape) > MOST_NUMBERS:
            msg = f"an array of shape {shape} is too large"
            raise ShapeError(msg, where=content.source, expected=f"at most {MOST_NUMBERS} numbers")
        if dtype.kind not in "iuf":
            msg = f"an array of {dtype}"
            raise TensorFileError(msg, where=content.source, expected="real numbers")
        stream.seek(0)
        return np.asarray(np.load(stream, allow_pickle=False), dtype=float)
    except KeyError as error:
        raise TensorFileError("is of an unknown version of the .npy format", where=content.source) from error
    except (ValueError, OSError, EOFError, SyntaxError, TypeError, MemoryError) as error:
        if isinstance(error, TensorFileError | ShapeError):
            raise
        msg = f"is a damaged .npy file: {str(error)[:100]}"
        raise TensorFileError(msg, where=content.source, hint="the file may be cut off") from error
