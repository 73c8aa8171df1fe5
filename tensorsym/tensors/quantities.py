"""The physical quantities that laws are written with, read from ``quantities.json``."""

from __future__ import annotations

import json
from dataclasses import dataclass
from functools import lru_cache
from pkgutil import get_data

from tensorsym.errors import LawError, nearest_names


@dataclass(frozen=True, slots=True)
class Quantity:
    """One quantity as laws use it."""

    name: str
    """Name in laws, such as ``sigma``."""
    title: str
    """Name in words, such as ``stress``."""
    rank: int
    """Number of indices it carries."""
    axial: bool
    """True when it keeps its sign ``-(-1)**rank`` under inversion."""
    time_odd: bool
    """True when time reversal changes its sign."""
    symmetric: bool
    """True when its two indices can be exchanged."""
    voigt: int
    """Factor of its shear entries in a Voigt vector: 1 for stress, 2 for strain."""
    conjugate: tuple[str, ...]
    """Quantities whose product with it is an energy density."""
    driven_by: tuple[str, ...]
    """Quantities whose product with it is a rate of dissipation."""


def quantity_named(name: str) -> Quantity:
    """Return the quantity of that name; trailing digits or primes make distinct copies of one quantity.

    Raises
    ------
    LawError
        If no quantity has the name.

    Examples
    --------
    >>> quantity_named("sigma").title
    'stress'
    >>> quantity_named("E1").rank
    1
    """
    quantities, aliases = _table()
    for candidate in (name, name.rstrip("0123456789'")):
        known = aliases.get(candidate, candidate)
        if known in quantities:
            return quantities[known]
    msg = f"{name!r} is no quantity that laws know"
    raise LawError(msg, nearest=nearest_names(name, [*quantities, *aliases]), hint=f"known: {' '.join(quantities)}")


@lru_cache(maxsize=1)
def _table() -> tuple[dict[str, Quantity], dict[str, str]]:
    document = json.loads(get_data("tensorsym.tensors", "quantities.json") or b"")
    quantities = {
        name: Quantity(
            name=name,
            title=row["title"],
            rank=row["rank"],
            axial=row["axial"],
            time_odd=row["time_odd"],
            symmetric=row["symmetric"],
            voigt=row["voigt"],
            conjugate=tuple(row["conjugate"]),
            driven_by=tuple(row.get("driven_by", ())),
        )
        for name, row in document["quantities"].items()
    }
    return quantities, document["aliases"]
