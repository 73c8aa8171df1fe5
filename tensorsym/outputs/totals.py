"""The relaxed-ion tensor as the sum of its two printed parts, for codes that leave the sum to the reader."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from tensorsym.outputs.record import TensorRecord

SUMMED = ("dielectric", "piezoelectric-stress")
"""Properties whose ionic part is printed apart."""


def with_totals(records: tuple[TensorRecord, ...]) -> tuple[TensorRecord, ...]:
    """Return the records, and behind each ionic part the sum with the electronic part of the same unit.

    Nothing is added where a total is there already, or where several electronic parts leave the choice open.
    """
    done: list[TensorRecord] = []
    for record in records:
        done.append(record)
        if record.property in SUMMED and record.contribution == "ionic":
            alike = [other for other in records if (other.property, other.unit) == (record.property, record.unit)]
            electronic = [other for other in alike if other.contribution == "electronic"]
            if len(electronic) == 1 and not any(other.contribution == "total" for other in alike):
                done.append(_sum(electronic[0], record))
    return tuple(done)


def _sum(electronic: TensorRecord, ionic: TensorRecord) -> TensorRecord:
    lines = f", printed in lines {electronic.line} and {ionic.line}" if ionic.line else ""
    return replace(
        ionic,
        label="total, relaxed ion",
        values=electronic.values + ionic.values,
        digits=max(electronic.digits or 0.0, ionic.digits or 0.0) or None,
        sigma=electronic.sigma,
        contribution="total",
        complete=True,
        notes=(f"the sum of the electronic and the ionic part{lines}",),
    )
