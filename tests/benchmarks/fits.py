"""Fits against a reference implementation in the same run: ratios of medians, no test asserts a time.

The reference implementation is statsmodels: ordinary least squares of ln K over 1/T, with standard errors and
confidence intervals. Its columns are ready arrays; the engine gets the cells as a worksheet hands them over. "New
points" are other ones in each call; otherwise the cells ask for parts of one fit, which the engine keeps.

    python tests/benchmarks/fits.py
"""

from __future__ import annotations

import itertools
import math
import statistics
import time
from collections.abc import Callable

import numpy as np
import statsmodels.api as sm

from thermofuncs.catalogue import evaluate
from thermofuncs.fits.many import fit_many

ROUNDS = 15
CALLS = 300
SERIES = 10_000


def seconds(function: Callable[[], object], calls: int) -> float:
    """The time of one call, over several."""
    start = time.perf_counter()
    for _ in range(calls):
        function()
    return (time.perf_counter() - start) / calls


def main() -> None:
    """Print the ratios."""
    temperatures = np.linspace(283.15, 328.15, 10)
    random = np.random.default_rng(20240901)
    constants = np.exp(12.0 - 3500.0 / temperatures + 0.01 * random.standard_normal(10))
    t_cells = [[float(t)] for t in temperatures]
    k_cells = [[float(k)] for k in constants]
    new_cells = itertools.cycle(
        [[float(k)] for k in constants * (1.0 + 1e-3 * random.standard_normal(10))] for _ in range(2 * CALLS)
    )
    design, logs = sm.add_constant(1.0 / temperatures), np.log(constants)

    def reference() -> object:
        fitted = sm.OLS(logs, design).fit()
        return fitted.params, fitted.bse, fitted.conf_int()

    def new(quantity: str) -> Callable[[], object]:
        return lambda: evaluate("FITVALUE", ["van't Hoff", quantity, t_cells, next(new_cells)])

    def reference_from_cells() -> object:
        fitted = sm.OLS(np.log(constants), sm.add_constant(1.0 / temperatures)).fit()
        return fitted.params, fitted.bse, fitted.conf_int()

    calls: dict[str, Callable[[], object]] = {
        "reference that makes its columns": reference_from_cells,
        "FITVALUE drH, new points": new("drH"),
        "FITVALUE u(drH), new points": new("u(drH)"),
        "FITVALUE low(drH), new points": new("low(drH)"),
        "FITVALUE drH": lambda: evaluate("FITVALUE", ["van't Hoff", "drH", t_cells, k_cells]),
        "FITVALUE u(drH)": lambda: evaluate("FITVALUE", ["van't Hoff", "u(drH)", t_cells, k_cells]),
        "FITVALUE low(drH)": lambda: evaluate("FITVALUE", ["van't Hoff", "low(drH)", t_cells, k_cells]),
        "FITVALUE drCp, Clarke-Glew": lambda: evaluate("FITVALUE", ["Clarke-Glew", "drCp", t_cells, k_cells]),
        "FIT, whole table": lambda: evaluate("FIT", ["van't Hoff", t_cells, k_cells]),
    }
    for function in (reference, *calls.values()):
        function()
    ratios: dict[str, list[float]] = {name: [] for name in calls}
    base = []
    for _ in range(ROUNDS):  # both in each round, so that a slow moment of the machine meets both
        base.append(seconds(reference, CALLS))
        for name, function in calls.items():
            ratios[name].append(base[-1] / seconds(function, CALLS))
    print(f"reference implementation, ten points with intervals: {1e6 * statistics.median(base):.0f} us")
    for name, found in ratios.items():
        print(f"{name:32s} {statistics.median(found):8.1f} times as fast")

    many_t = temperatures[:, None] + random.uniform(-1.0, 1.0, (10, SERIES))
    many_k = np.exp(12.0 - 3500.0 / many_t + 0.01 * random.standard_normal((10, SERIES)))
    array_call = statistics.median(
        seconds(lambda: fit_many("van't Hoff", many_t, many_k).estimates("drH", 298.15), 1) for _ in range(ROUNDS)
    )
    start = time.perf_counter()
    for i in range(SERIES):
        fitted = sm.OLS(np.log(many_k[:, i]), sm.add_constant(1.0 / many_t[:, i])).fit()
        if not math.isfinite(fitted.params[1] + fitted.bse[1] + fitted.conf_int()[1, 0]):
            raise ArithmeticError
    loop = time.perf_counter() - start
    print(f"{SERIES} fits of ten points: loop of the reference {loop:.2f} s, one array call {1e3 * array_call:.2f} ms")
    print(f"{'one array call':28s} {loop / array_call:8.1f} times as fast")


if __name__ == "__main__":
    main()
