"""The plain tensor file, schema ``tensorsym/tensor/1``: read with every key checked, written whole or not at all."""

from __future__ import annotations

import json
import math
import secrets
from decimal import Decimal
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from tensorsym.errors import ShapeError, TensorFileError, TensorsymError, nearest_names
from tensorsym.outputs.record import TensorRecord
from tensorsym.outputs.rows import LARGEST, is_usable, typical_place
from tensorsym.outputs.units import property_in_unit
from tensorsym.tensors.axes import axes_from_matrix
from tensorsym.tensors.notation import VOIGT_ORDER, from_matrix, matrix_shape, pair_order

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence
    from os import PathLike

    from numpy.typing import NDArray

    from tensorsym.catalog.properties import Property

SCHEMA = "tensorsym/tensor/1"

KEYS = (
    "schema", "property", "unit", "axes", "notation", "order", "values", "sigma", "factors", "label", "sites", "record",
    "structure", "comment",
)  # fmt: skip
"""Keys of a document; `schema`, `property` and `values` must be there.

``factors`` are those of the shear digits of each index pair, where they are not those of the catalogue; ``sites`` names
the atoms of a property of sites; ``record``, ``structure`` and ``comment`` are kept for people.
"""

MOST_DOCUMENTS = 10_000
"""Most tensors of one file."""


def parsed_json(text: str, source: str) -> Any:
    """Return a JSON document with its decimal numbers as printed.

    Raises
    ------
    TensorFileError
        If it is no JSON document, or names a key twice; line and column are named.
    """
    try:
        return json.loads(text, parse_float=Decimal, parse_constant=Decimal, object_pairs_hook=_without_doubles)
    except TensorFileError as error:
        raise TensorFileError(error.message, where=source, hint=error.hint) from error
    except json.JSONDecodeError as error:
        msg = f"is no JSON document: {error.msg}"
        where = f"{source}, line {error.lineno}, column {error.colno}"
        raise TensorFileError(msg, where=where, hint="the file may be cut off") from error
    except (ValueError, RecursionError, ArithmeticError) as error:
        msg = f"is no JSON document: {str(error)[:100]}"
        raise TensorFileError(msg, where=source) from error


def looks_like_tensor_document(document: Any) -> bool:
    """Tell our documents from other JSON by their keys."""
    first = document[0] if isinstance(document, list) and document else document
    if not isinstance(first, dict) or (isinstance(first.get("sites"), list) and "values" not in first):
        return False
    held = first.get("tensors")
    if isinstance(held, list) and held:
        first = held[0]
    return isinstance(first, dict) and (str(first.get("schema", "")).startswith("tensorsym/") or "values" in first)


def read_tensor_document(document: Any, source: str) -> tuple[TensorRecord, ...]:
    """Return the tensors of a document, or of a list of documents.

    Parameters
    ----------
    document : object
        What `parsed_json` returns.
    source : str
        File, for messages.

    Raises
    ------
    TensorFileError
        If it is no such document; the key, or the row and column, is named.
    """
    parts = document.get("tensors", [document]) if isinstance(document, dict) else document
    if not isinstance(parts, list) or not parts:
        raise TensorFileError("holds no tensor", where=source, expected=f"an object with schema {SCHEMA}")
    if len(parts) > MOST_DOCUMENTS:
        msg = f"holds {len(parts)} tensors"
        raise TensorFileError(msg, where=source, expected=f"at most {MOST_DOCUMENTS}")
    many = len(parts) > 1
    return tuple(
        _record(part, f"{source}, tensor {number}" if many else source) for number, part in enumerate(parts, 1)
    )


def _record(document: Any, source: str) -> TensorRecord:
    if not isinstance(document, dict):
        raise TensorFileError("a tensor is an object with keys", where=source, expected=", ".join(KEYS[:7]))
    try:
        _check_keys(document)
        row, unit, notes = property_in_unit(_text(document, "property", ""), _text(document, "unit", "") or None)
        reading = _Reading(document, row)
        values = reading.tensor(document["values"], "values")
        axes = _axes(document.get("axes", "file"))
        sites = _site_labels(document, values, row)
        sigma = reading.sigma(document.get("sigma"))
    except TensorsymError as error:
        where = f"{source}, {error.where}" if error.where else source
        raise TensorFileError(
            error.message, where=where, expected=error.expected, nearest=error.nearest, hint=error.hint
        ) from error
    return TensorRecord(
        row.name,
        _text(document, "label", ""),
        values,
        unit,
        axes=axes,
        order=reading.order if reading.in_pairs else "",
        digits=typical_place(decimals_in(document["values"])),
        sigma=sigma,
        per_site=values.ndim > row.kind.rank,
        site_labels=sites,
        notes=notes,
    )


def _without_doubles(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    document = dict(pairs)
    if len(document) < len(pairs):
        names = [key for key, _ in pairs]
        double = next(key for key in names if names.count(key) > 1)
        msg = f"the key {double[:40]!r} is there twice"
        raise TensorFileError(msg, hint="delete one of them")
    return document


def _check_keys(document: dict[str, Any]) -> None:
    for key in document:
        if key not in KEYS:
            msg = f"{key!r} is no key of a tensor"
            raise TensorFileError(msg, nearest=nearest_names(key, KEYS), expected=", ".join(KEYS))
    if document.get("schema") != SCHEMA:
        msg = f"schema {document['schema']!r}" if "schema" in document else "the key 'schema' is missing"
        raise TensorFileError(msg, expected=SCHEMA)
    for key in ("property", "values"):
        if key not in document:
            msg = f"the key {key!r} is missing"
            raise TensorFileError(msg)


def _text(document: dict[str, Any], key: str, default: str) -> str:
    value = document.get(key)
    if value is None:
        return default
    if not isinstance(value, str):
        msg = f"{key} is {str(value)[:40]}"
        raise TensorFileError(msg, expected="text")
    return value


class _Reading:
    """How the numbers of a document are read: notation, order and factors."""

    def __init__(self, document: dict[str, Any], row: Property) -> None:
        self.row = row
        self.notation = _text(document, "notation", "full")
        if self.notation not in ("voigt", "full"):
            msg = f"notation {self.notation!r}"
            raise TensorFileError(msg, expected="voigt or full")
        self.order = _text(document, "order", "") or VOIGT_ORDER
        pair_order(self.order)
        self.factors = self._factors(document.get("factors"))
        self.shape = matrix_shape(row.kind) if self.notation == "voigt" else (3,) * row.kind.rank
        self.in_pairs = self.notation == "voigt" and bool(row.kind.pairs)

    def _factors(self, factors: Any) -> Sequence[float]:
        if factors is None:
            return self.row.factors
        numbers = _numbers(factors, "factors", ())
        count = len(self.row.kind.pairs)
        if not isinstance(numbers, list) or len(numbers) != count or not all(isinstance(n, float) for n in numbers):
            msg = f"factors {str(factors)[:40]} do not fit {self.row.name}"
            raise TensorFileError(msg, expected=f"a list of {count} numbers, one for each index pair")
        if not all(number > 0 for number in numbers):
            raise TensorFileError("a factor is not positive", expected="factors of shear digits, such as 1 or 2")
        return numbers

    def tensor(self, values: Any, key: str) -> NDArray[np.float64]:
        """Return numbers as full tensors."""
        array = array_of(values, key)
        per_site = self.row.site and array.ndim == len(self.shape) + 1 and array.shape[1:] == self.shape
        if array.shape != self.shape and not per_site:
            msg = f"{key} of shape {array.shape} do not fit {self.row.name} in {self.notation} notation"
            many = f", or (atoms, {', '.join(map(str, self.shape))})" if self.row.site else ""
            raise ShapeError(msg, expected=f"shape {self.shape}{many}")
        if not self.in_pairs:
            return array
        blocks = [
            from_matrix(block, self.row.kind, self.factors, self.order) for block in (array if per_site else [array])
        ]
        return np.array(blocks) if per_site else blocks[0]

    def sigma(self, sigma: Any) -> NDArray[np.float64] | float | None:
        """Return the standard deviation of the full tensors' components."""
        if sigma is None:
            return None
        numbers = _numbers(sigma, "sigma", ())
        if float(np.min(np.array(numbers, dtype=float), initial=0.0)) < 0.0:
            raise TensorFileError("sigma holds a negative number", expected="standard deviations")
        return self.tensor(sigma, "sigma") if isinstance(numbers, list) else float(numbers)


def array_of(node: Any, key: str) -> NDArray[np.float64]:
    """Return nested lists as an array.

    Raises
    ------
    TensorFileError
        If rows have different lengths, or an entry is no finite number; its place is named.
    """
    return np.array(_numbers(node, key, ()), dtype=float)


def _numbers(node: Any, key: str, place: tuple[int, ...]) -> Any:
    """Return nested lists of finite floats; rows must have equal lengths."""
    if isinstance(node, list):
        parts = [_numbers(child, key, (*place, number)) for number, child in enumerate(node, 1)]
        if len({len(part) if isinstance(part, list) else -1 for part in parts}) > 1:
            msg = f"{key}{_at(place)}: the rows have different lengths"
            raise TensorFileError(msg)
        return parts
    if isinstance(node, bool) or not isinstance(node, int | float | Decimal):
        msg = f"{key}{_at(place)}: {str(node)[:40]!r} is no number"
        raise TensorFileError(msg)
    try:
        number = float(node)
    except OverflowError:
        number = math.inf
    if not is_usable(number):
        msg = f"{key}{_at(place)}: {str(node)[:40]} is {'too large' if abs(number) >= LARGEST else 'not finite'}"
        raise TensorFileError(msg)
    return number


def _at(place: tuple[int, ...]) -> str:
    return f" at ({', '.join(map(str, place))})" if place else ""


def _axes(axes: Any) -> NDArray[np.float64] | None:
    if axes is None or axes == "file":
        return None
    if not isinstance(axes, list):
        msg = f"axes {str(axes)[:40]!r}"
        raise TensorFileError(msg, expected="'file' or a 3x3 matrix whose rows are x, y, z")
    return axes_from_matrix("tensor file", array_of(axes, "axes"), "tensor file").matrix


def _site_labels(document: dict[str, Any], values: NDArray[np.float64], row: Property) -> tuple[str, ...]:
    labels = document.get("sites")
    if labels is None:
        return ()
    count = len(values) if values.ndim > row.kind.rank else 1
    if not isinstance(labels, list) or len(labels) != count:
        msg = f"sites {str(labels)[:40]}"
        raise TensorFileError(msg, expected=f"a list of {count} names, one for each tensor")
    return tuple(map(str, labels))


def decimals_in(node: Any) -> Iterator[str]:
    """Yield the numbers with a decimal point or exponent in what `parsed_json` returned, as printed."""
    if isinstance(node, list):
        for child in node:
            yield from decimals_in(child)
    elif isinstance(node, Decimal):
        places = -int(node.as_tuple().exponent)  # none, or very many, come from an exponent in the file only
        yield f"{node:f}" if 0 < places < 40 else f"{node:E}"


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
    if record.site_labels:
        document["sites"] = list(record.site_labels)
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
    text = json.dumps(document, indent=1, allow_nan=False) + "\n"
    beside = target.with_name(f".{target.name}.{secrets.token_hex(8)}.tmp")
    try:
        try:
            with beside.open("x", encoding="utf-8") as stream:
                stream.write(text)
            beside.replace(target)
        finally:
            beside.unlink(missing_ok=True)
    except OSError as error:
        msg = f"cannot be written: {error.strerror or error}"
        raise TensorFileError(msg, where=str(path)) from error
