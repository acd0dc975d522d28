"""Medians and ratios for the benchmarks, which print and assert nothing."""

from __future__ import annotations

import statistics
import time
from collections.abc import Callable


def medians(works: dict[str, Callable[[], object]], rounds: int) -> dict[str, float]:
    """Median time of each work, the works taking turns so that a busy moment meets all of them. [s]

    Parameters
    ----------
    works : mapping of a name to what is timed.
    rounds : int. Turns of each.
    """
    times: dict[str, list[float]] = {name: [] for name in works}
    for work in works.values():
        work()
    for _ in range(rounds):
        for name, work in works.items():
            started = time.perf_counter()
            work()
            times[name].append(time.perf_counter() - started)
    return {name: statistics.median(found) for name, found in times.items()}


def line(what: str, ratio: float, bound: str) -> str:
    """A line of the report."""
    return f"{what:<78}{ratio:>9.2f}   {bound}"
