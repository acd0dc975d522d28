"""A range of a million temperatures against bare numpy and against a loop over a reference implementation.

Run: python tests/benchmarks/ranges.py
The bare evaluation is one reaction-level polynomial of ln K, without search for intervals or checks, over the
same array in the same chunks. The reference implementation is Cantera, a test dependency; it loops over fewer
temperatures and is scaled to one temperature.
"""

from __future__ import annotations

from functools import partial
from typing import Any

import cantera
import numpy as np
from timing import line, medians

import thermofuncs
from thermofuncs import compiled
from thermofuncs.combination import CHUNK
from thermofuncs.substances import find_substance
from thermofuncs.units import R

REACTION = "CO(g) + 2 H2(g) = CH3OH(g)"
NUMBERS = {"CO(g)": -1.0, "H2(g)": -2.0, "CH3OH(g)": 1.0}
COUNT, LOOPED = 1_000_000, 2_000
LOW, HIGH = 300.0, 3000.0


def bare(coefficients: tuple[float, ...], temperatures: Any) -> Any:
    """One polynomial of ln K in chunks: c0/T² + c1/T + c2 ln T/T + c3 + c4 ln T + T (c5 + … T (c8))."""
    c0, c1, c2, c3, c4, c5, c6, c7, c8 = coefficients
    result = np.empty_like(temperatures)
    for start in range(0, temperatures.size, CHUNK):
        t = temperatures[start : start + CHUNK]
        log, r = np.log(t), 1.0 / t
        result[start : start + CHUNK] = (
            (c0 * r + c1 + c2 * log) * r + (c3 + c4 * log) + t * (c5 + t * (c6 + t * (c7 + t * c8)))
        )
    return result


def polynomial() -> tuple[float, ...]:
    """The coefficients of ln K below the joint."""
    c = compiled.reaction(REACTION, None, False, False).at(500.0)
    a1, a2, a3, a4, a5, a6, a7 = c.cp
    return (a1 / 2, -(a2 + c.b1), -a2, c.b2 - a3, a3, a4 / 2, a5 / 6, a6 / 12, a7 / 20)


def gases() -> dict[str, Any]:
    """The gases of the reaction in the reference implementation."""
    found = {}
    for name in NUMBERS:
        row = find_substance(name).segments[0].row
        numbers: list[float] = [len(row.intervals)]
        for x in row.intervals:
            terms = dict(x.terms)
            numbers += [x.t_low, x.t_high, *(terms.get(float(n), 0.0) for n in range(-2, 5)), x.b1, x.b2]
        found[name] = cantera.Nasa9PolyMultiTempRegion(row.t_low, row.t_high, 1e5, numbers)
    return found


def looped(temperatures: list[float]) -> list[float]:
    """Ln K temperature by temperature from the reference implementation."""
    species = [(n, THEIRS[name]) for name, n in NUMBERS.items()]
    scale = 1000 * R
    return [sum(n * (x.s(t) - x.h(t) / t) for n, x in species) / scale for t in temperatures]


THEIRS = gases()


def main() -> None:
    """Print the ratios."""
    rng = np.random.default_rng(7)
    arrays = {
        "below the joint": np.sort(rng.uniform(LOW, 999.0, COUNT)),
        "sorted": np.sort(rng.uniform(LOW, HIGH, COUNT)),
        "random order": rng.uniform(LOW, HIGH, COUNT),
    }
    coefficients = polynomial()
    some = rng.uniform(LOW, HIGH, LOOPED)
    check = thermofuncs.call("LNK", REACTION, some)
    print(f"largest difference from the reference implementation: {abs(check - looped(some.tolist())).max():.1e}")
    print(f"{'a million temperatures of one reaction':<78}{'ratio':>9}   wanted")
    for order, temperatures in arrays.items():
        found = medians(
            {
                "ours": partial(thermofuncs.call, "LNK", REACTION, temperatures),
                "bare": partial(bare, coefficients, temperatures),
                "loop": partial(looped, temperatures[:LOOPED].tolist()),
            },
            9,
        )
        print(line(f"{order}: to bare numpy", found["ours"] / found["bare"], "at most 2"))
        per_loop = found["loop"] / LOOPED
        print(line(f"{order}: loop of the reference to ours", per_loop * COUNT / found["ours"], "at least 40"))


if __name__ == "__main__":
    main()
