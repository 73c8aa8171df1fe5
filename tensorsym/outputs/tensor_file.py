"""The plain tensor file, schema ``tensorsym/tensor/1``: read with every key checked, written whole or not at all."""

from __future__ import annotations

import json
import math
import os
import tempfile
from decimal import Decimal
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from tensorsym.catalog.properties import property_named
from tensorsym.errors import ShapeError, TensorFileError, TensorsymError, nearest_names
from tensorsym.outputs.record import TensorRecord
from tensorsym.tensors.axes import axes_from_matrix
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix, matrix_shape

if TYPE_CHECKING:
    from os import PathLike

    from numpy.typing import NDArray

    from tensorsym.catalog.properties import Property

SCHEMA = "tensorsym/tensor/1"
KEYS = ("schema", "property", "unit", "axes", "notation", "order", "values", "sigma", "label", "record", "structure")


def read_tensor_document(text: str, source: str) -> tuple[TensorRecord, ...]:
    """Return the tensors of a document, or of a list of documents.

    Raises
    ------
    TensorFileError
        If the text is no such document; the key, or the row and column, is named.
    """
    try:
        document = json.loads(text, parse_float=Decimal, parse_constant=Decimal)
    except (ValueError, RecursionError) as error:
        msg = f"is no JSON document: {error}"
        raise TensorFileError(msg, where=source, hint="the file may be cut off") from error
    parts = (
        document
        if isinstance(document, list)
        else document.get("tensors", [document])
        if isinstance(document, dict)
        else []
    )
    if not parts:
        raise TensorFileError("holds no tensor", where=source, expected=f"an object with schema {SCHEMA}")
    many = len(parts) > 1
    return tuple(
        _record(part, f"{source}, tensor {number}" if many else source) for number, part in enumerate(parts, 1)
    )


def _record(document: Any, source: str) -> TensorRecord:
    if not isinstance(document, dict):
        raise TensorFileError("a tensor is an object with keys", where=source, expected=", ".join(KEYS[:7]))
    for key in document:
        if key not in KEYS:
            msg = f"{key!r} is no key of a tensor"
            raise TensorFileError(msg, where=source, nearest=nearest_names(key, KEYS), expected=", ".join(KEYS))
    if document.get("schema") != SCHEMA:
        msg = f"schema {document.get('schema')!r}"
        raise TensorFileError(msg, where=source, expected=SCHEMA)
    for key in ("property", "values"):
        if key not in document:
            msg = f"the key {key!r} is missing"
            raise TensorFileError(msg, where=source)
    try:
        row = property_named(str(document["property"]))
        notation = document.get("notation") or "full"
        order = document.get("order") or VOIGT_ORDER
        values = _tensor(document["values"], row, str(notation), str(order), source)
        sigma = document.get("sigma")
        spread = None if sigma is None else _sigma(sigma, row, str(notation), str(order), source)
        axes = _axes(document.get("axes", "file"))
    except TensorsymError as error:
        raise TensorFileError(
            error.message, where=error.where or source, expected=error.expected, nearest=error.nearest, hint=error.hint
        ) from error
    return TensorRecord(
        row.name,
        str(document.get("label", "")),
        values,
        str(document.get("unit", row.unit)),
        axes=axes,
        order=str(order) if notation == "voigt" else "",
        digits=_last_place(document["values"]),
        sigma=spread,
        per_site=values.ndim > row.kind.rank,
    )


def _tensor(values: Any, row: Property, notation: str, order: str, source: str) -> NDArray[np.float64]:
    array = np.array(_numbers(values, source, "values", ()), dtype=float)
    shapes = {"voigt": matrix_shape(row.kind), "full": (3,) * row.kind.rank}
    if notation == "full" and row.site and array.shape[1:] == shapes["full"]:
        return array
    if notation not in shapes:
        msg = f"notation {notation!r}"
        raise TensorFileError(msg, where=source, expected="voigt or full")
    if array.shape != shapes[notation]:
        msg = f"values of shape {array.shape} do not fit {row.name} in {notation} notation"
        raise ShapeError(msg, where=source, expected=f"shape {shapes[notation]}")
    return from_matrix(array, row.kind, row.factors, order) if notation == "voigt" else array


def _sigma(sigma: Any, row: Property, notation: str, order: str, source: str) -> NDArray[np.float64] | float:
    if not isinstance(sigma, list):
        return float(_numbers(sigma, source, "sigma", ()))
    return np.abs(_tensor(sigma, row, notation, order, source))


def _numbers(node: Any, source: str, key: str, place: tuple[int, ...]) -> Any:
    """Return nested lists of finite floats; rows must have equal lengths."""
    if isinstance(node, list):
        parts = [_numbers(child, source, key, (*place, number)) for number, child in enumerate(node, 1)]
        if len({len(part) if isinstance(part, list) else -1 for part in parts}) > 1:
            msg = f"{key}{_at(place)}: the rows have different lengths"
            raise TensorFileError(msg, where=source)
        return parts
    if isinstance(node, bool) or not isinstance(node, int | float | Decimal):
        msg = f"{key}{_at(place)}: {node!r} is no number"
        raise TensorFileError(msg, where=source)
    if not math.isfinite(float(node)):
        msg = f"{key}{_at(place)}: {node} is not finite"
        raise TensorFileError(msg, where=source)
    return float(node)


def _at(place: tuple[int, ...]) -> str:
    return f" at ({', '.join(map(str, place))})" if place else ""


def _axes(axes: Any) -> NDArray[np.float64] | None:
    if axes == "file":
        return None
    if isinstance(axes, str):
        msg = f"axes {axes!r}"
        raise TensorFileError(msg, expected="'file' or a 3x3 matrix whose rows are x, y, z")
    return axes_from_matrix("tensor file", np.array(_numbers(axes, "axes", "axes", ())), "tensor file").matrix


def _last_place(node: Any) -> float | None:
    """Return one unit in the last printed place of the coarsest number that has decimals; None for whole numbers."""
    exponents: list[int] = []

    def collect(child: Any) -> None:
        if isinstance(child, list):
            for grandchild in child:
                collect(grandchild)
        elif isinstance(child, Decimal) and child != 0:
            exponents.append(int(child.as_tuple().exponent))

    collect(node)
    return 10.0 ** max(exponents) if exponents else None


def tensor_document(record: TensorRecord, done: dict[str, Any] | None = None) -> dict[str, Any]:
    """Return the document of a tensor, in full notation, with a record of what was done to it."""
    document: dict[str, Any] = {
        "schema": SCHEMA,
        "property": record.property,
        "unit": record.unit,
        "axes": "file" if record.axes is None else record.axes.tolist(),
        "notation": "full",
        "values": record.values.tolist(),
    }
    if record.label:
        document["label"] = record.label
    return document | {"record": done} if done else document


def write_document(document: Any, path: str | PathLike[str], *, force: bool = False) -> None:
    """Write a JSON document whole or not at all.

    Raises
    ------
    TensorFileError
        If the file exists and `force` is not set, or cannot be written.
    """
    target = Path(path)
    if target.exists() and not force:
        raise TensorFileError("exists already", where=str(path), hint="--force replaces it")
    try:
        handle, name = tempfile.mkstemp(dir=target.parent, prefix=f".{target.name}.", suffix=".tmp")
        try:
            with os.fdopen(handle, "w", encoding="utf-8") as stream:
                json.dump(document, stream, indent=1)
                stream.write("\n")
            Path(name).replace(target)
        except BaseException:
            Path(name).unlink(missing_ok=True)
            raise
    except OSError as error:
        msg = f"cannot be written: {error.strerror or error}"
        raise TensorFileError(msg, where=str(path)) from error
