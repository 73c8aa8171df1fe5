"""The catalogue as text and JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from collections.abc import Sequence

    from tensorsym.catalog.properties import Property


def properties_text(rows: Sequence[Property]) -> str:
    """Return one line a property: name, rank, law, unit; with title and source when there is only one."""
    if len(rows) == 1:
        return _one(rows[0])
    width = max(len(row.name) for row in rows)
    law = max(len(row.law) for row in rows)
    return "\n".join(
        f"{row.name.ljust(width)}  {row.kind.rank}  {row.law.ljust(law)}  {row.unit}".rstrip() for row in rows
    )


def _one(row: Property) -> str:
    lines = [
        row.name,
        f"  {row.title}",
        f"  law: {row.law}   {'; '.join(row.equations)}".rstrip(),
        f"  unit: {row.unit}",
    ]
    lines.append(f"  rank {row.kind.rank}, {'axial' if row.kind.axial else 'polar'}, {row.regime}")
    if row.aliases:
        lines.append(f"  also: {', '.join(row.aliases)}")
    lines += [f"  caution: {caution}" for caution in row.cautions]
    lines.append(f"  source: {row.source}")
    return "\n".join(lines)


def properties_document(rows: Sequence[Property]) -> dict[str, Any]:
    """Return the document, schema ``tensorsym/properties/1``."""
    return {
        "schema": "tensorsym/properties/1",
        "properties": [
            {
                "name": row.name,
                "title": row.title,
                "aliases": list(row.aliases),
                "symbol": row.symbol,
                "law": row.law,
                "equations": list(row.equations),
                "regime": row.regime,
                "rank": row.kind.rank,
                "axial": row.kind.axial,
                "time_odd": row.kind.time_odd,
                "unit": row.unit,
                "matrix_factors": list(row.factors),
                "site": row.site,
                "cautions": list(row.cautions),
                "source": row.source,
            }
            for row in rows
        ],
    }
