"""Named properties: rows of facts read from ``properties.json``."""

from __future__ import annotations

import json
import pkgutil
from dataclasses import dataclass
from functools import cached_property, lru_cache
from typing import TYPE_CHECKING

from tensorsym.errors import UnknownNameError, nearest_names
from tensorsym.tensors.law import Law, parse_law

if TYPE_CHECKING:
    from tensorsym.tensors.kind import TensorKind


@dataclass(frozen=True)
class Property:
    """One property of crystals, as the field knows it."""

    name: str
    """Name in lower case, words joined by hyphens."""
    title: str
    """Name in words."""
    aliases: tuple[str, ...]
    """Other names it answers to."""
    symbol: str
    """Symbol of its components."""
    law: str
    """The law that defines it, in the syntax of `tensorsym.tensors.law.parse_law`."""
    equations: tuple[str, ...]
    """Index equations beyond the law."""
    regime: str
    """``equilibrium``, ``transport``, ``optical`` or ``local``."""
    site: bool
    """True for a property of one atomic site, held to the group of the site."""
    unit: str
    """Unit in SI, or the field's own for charges (e), band energies (eV) and shifts (1e-6)."""
    matrix_factors: tuple[int, ...] | None
    """One factor for each pair of `kind.pairs` where the trade's differ from the law's; None for those of the law."""
    traceless: bool
    """True when the trace vanishes by definition."""
    cautions: tuple[str, ...]
    """What can hurt in measuring it."""
    source: str
    """Where the definition stands; ``(memory)`` marks what was recalled and not looked up."""

    @cached_property
    def parsed(self) -> Law:
        """The law, parsed."""
        return parse_law(self.law, self.equations, self.regime, traceless=self.traceless)

    @property
    def kind(self) -> TensorKind:
        """Rank, parity, time behaviour and index symmetry."""
        return self.parsed.kind

    @property
    def factors(self) -> tuple[int, ...]:
        """Factor of the shear digits of each index pair in matrix notation."""
        return self.parsed.factors if self.matrix_factors is None else self.matrix_factors


def all_properties() -> tuple[Property, ...]:
    """Return every property of the catalogue."""
    return tuple(_rows().values())


def property_named(name: str) -> Property:
    """Return the property with a name or alias, in any case, with blanks or underscores for hyphens.

    Raises
    ------
    UnknownNameError
        If there is none; the nearest names are offered.

    Examples
    --------
    >>> property_named("Piezoelectric").law
    'P_i = d_ijk sigma_jk'
    """
    key = _plain(name)
    found = _names().get(key)
    if found is None:
        msg = f"{name!r} is no property of the catalogue"
        hint = "`tensorsym properties` lists them, or give a law with --law"
        raise UnknownNameError(msg, nearest=nearest_names(key, _names()), hint=hint)
    return _rows()[found]


def properties_matching(word: str) -> tuple[Property, ...]:
    """Return the properties whose name, title, aliases or law hold a word, in any case.

    Raises
    ------
    UnknownNameError
        If there is none; the nearest names are offered.

    Examples
    --------
    >>> [row.name for row in properties_matching("gyration")]
    ['optical-activity', 'electrogyration', 'piezogyration', 'acoustic-gyration']
    """
    wanted = _plain(word)
    found = tuple(
        row
        for row in all_properties()
        if any(wanted in _plain(text) for text in (row.name, row.title, *row.aliases, row.law))
    )
    if not found:
        msg = f"no property matches {word!r}"
        hint = "`tensorsym properties` without a word lists all"
        raise UnknownNameError(msg, nearest=nearest_names(wanted, _names()), hint=hint)
    return found


def _plain(name: str) -> str:
    """Return a name as the catalogue spells names: lower case, words joined by hyphens."""
    return "-".join(name.casefold().replace("_", " ").replace("-", " ").split())


@lru_cache(maxsize=1)
def _rows() -> dict[str, Property]:
    # importlib.resources would load tempfile, shutil and more at every start, about 17 ms.
    content = pkgutil.get_data("tensorsym.catalog", "properties.json") or b""
    return {
        row["name"]: Property(
            name=row["name"],
            title=row["title"],
            aliases=tuple(row["aliases"]),
            symbol=row["symbol"],
            law=row["law"],
            equations=tuple(row["equations"]),
            regime=row["regime"],
            site=row["site"],
            unit=row["unit"],
            matrix_factors=None if row["factors"] is None else tuple(row["factors"]),
            traceless=row["traceless"],
            cautions=tuple(row["cautions"]),
            source=row["source"],
        )
        for row in json.loads(content)["properties"]
    }


@lru_cache(maxsize=1)
def _names() -> dict[str, str]:
    names = {_plain(alias): row.name for row in _rows().values() for alias in row.aliases}
    return names | {name: name for name in _rows()}
