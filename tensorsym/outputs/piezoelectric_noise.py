"""The noise of a piezoelectric tensor that is printed twice, before and after the code symmetrised it."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from tensorsym.outputs.record import TensorRecord

CHARGE_PER_AREA = 16.02176634
"""C/m^2 in one elementary charge times angstrom per cubic angstrom (CODATA 2018, exact)."""

ROUNDING = 0.3
"""Standard deviation of a rounded number, in units of its last place: 1/sqrt(12)."""

NOTE = "its noise is the difference of the two printings, before and after the code symmetrised them"


def with_noise_of_two_printings(records: tuple[TensorRecord, ...], volume: float) -> tuple[TensorRecord, ...]:
    """Return the records, the two printings of the clamped-ion tensor with their difference as standard deviation.

    Parameters
    ----------
    records : tuple of TensorRecord
        Records of one file.
    volume : float
        Volume of the cell in cubic angstrom.
    """
    clamped = [
        record
        for record in records
        if record.property == "piezoelectric-stress" and record.contribution == "electronic"
    ]
    raw = next((record for record in clamped if record.unit == "e angstrom"), None)
    symmetrised = next((record for record in clamped if record.unit == "C/m^2"), None)
    if raw is None or symmetrised is None:
        return records
    scale = CHARGE_PER_AREA / volume
    difference = raw.values * scale - symmetrised.values
    sigma = max(math.sqrt(float((difference**2).mean())), ROUNDING * (symmetrised.digits or 0.0))
    sigmas = {id(raw): sigma / scale, id(symmetrised): sigma}
    return tuple(
        replace(record, sigma=sigmas[id(record)], notes=(*record.notes, NOTE)) if id(record) in sigmas else record
        for record in records
    )
