"""Quantiles and probabilities of Student's t, the normal, chi-square and F distributions, and of runs of signs.

The functions stand in scipy.special, which loads in a fraction of the time of the statistics package.
"""

from __future__ import annotations

import math
from functools import lru_cache


@lru_cache(maxsize=256)
def limit_factor(level: float, degrees: int | None) -> float:
    """By how many standard uncertainties the two-sided limits stand off.

    Parameters
    ----------
    level : float. The level of confidence, between 0 and 1.
    degrees : int or None. Degrees of freedom of Student's t; None for the normal distribution.
    """
    # loaded by the first limit: a value alone does not pay for it
    from scipy.special import ndtri, stdtrit  # noqa: PLC0415

    upper = 0.5 * (1.0 + level)
    return float(ndtri(upper) if degrees is None else stdtrit(degrees, upper))


def two_sided(statistic: float, degrees: int | None) -> float:
    """The probability of a statistic at least so far from zero, by Student's t or, with None, the normal."""
    from scipy.special import ndtr, stdtr  # noqa: PLC0415  as above

    below = -abs(statistic)
    return 2.0 * float(ndtr(below) if degrees is None else stdtr(degrees, below))


def chi_square_above(value: float, degrees: int) -> float:
    """The probability of a larger chi-square."""
    from scipy.special import chdtrc  # noqa: PLC0415  as above

    return float(chdtrc(degrees, value))


def f_above(value: float, above: int, below: int) -> float:
    """The probability of a larger ratio of variances with these degrees of freedom."""
    from scipy.special import fdtrc  # noqa: PLC0415  as above

    return float(fdtrc(above, below, value))


def as_few_runs(runs: int, positive: int, negative: int) -> float:
    """The probability of so few runs of signs, or fewer, in a random order of them.

    Notes
    -----
    The exact distribution of Wald & Wolfowitz, Ann. Math. Statist. 11 (1940) 147 (citation from
    memory).
    """
    ways = 0
    for r in range(2, runs + 1):
        k, odd = divmod(r, 2)
        if odd:
            ways += math.comb(positive - 1, k) * math.comb(negative - 1, k - 1)
            ways += math.comb(positive - 1, k - 1) * math.comb(negative - 1, k)
        else:
            ways += 2 * math.comb(positive - 1, k - 1) * math.comb(negative - 1, k - 1)
    return ways / math.comb(positive + negative, positive)
