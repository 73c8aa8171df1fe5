"""Paired timing: two pieces of work in turn, so that a noisy machine slows both."""

from __future__ import annotations

import statistics
import time
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Callable


def seconds(work: Callable[[], object]) -> float:
    """Return the wall time of one call."""
    start = time.perf_counter()
    work()
    return time.perf_counter() - start


def median_ratio(slow: Callable[[], object], fast: Callable[[], object], pairs: int = 5) -> float:
    """Return the median over pairs of the time of `slow` divided by that of `fast`."""
    return statistics.median(seconds(slow) / seconds(fast) for _ in range(pairs))
