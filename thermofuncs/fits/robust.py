"""Huber's M-estimator by iterated weights."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import fsum
from statistics import median

HUBER = 1.345  # in units of the scale: 95 % efficient where the errors are normal
NORMAL_QUARTILE = 0.6744897501960817  # of the standard normal: the median deviation over it estimates σ
ITERATIONS = 200
SETTLED = 1e-12


@dataclass(frozen=True, slots=True)
class RobustWeights:
    """The end of the iteration.

    Parameters
    ----------
    factors : list of float. Between 0 and 1, of each point.
    scale : float. Median absolute residual over 0.6745, of residuals in units of their stated weights.
    variance : float. What the covariance of unit variance is multiplied with.
    settled : bool. Whether the iteration came to rest.
    """

    factors: list[float]
    scale: float
    variance: float
    settled: bool


def huber(residuals_for: Callable[[list[float]], list[float]], n: int, parameters: int) -> RobustWeights:
    """Weights of Huber's estimator.

    Parameters
    ----------
    residuals_for : callable. The residuals, in units of the stated weights, of a fit with these factors.
    n, parameters : int. Numbers of points and parameters.

    Notes
    -----
    Huber, Robust Statistics, Wiley 1981 (citation from memory): ψ with c = 1.345, scale by the median absolute
    residual, covariance with the small-sample factor K = 1 + (p/n) var(ψ')/mean(ψ')².
    """
    factors = [1.0] * n
    residuals = residuals_for(factors)
    scale = _scale(residuals)
    settled = scale == 0.0
    for _ in range(ITERATIONS):
        if settled:
            break
        factors = [min(1.0, HUBER * scale / abs(r)) if r else 1.0 for r in residuals]
        before, residuals = residuals, residuals_for(factors)
        scale = _scale(residuals)
        change = max(abs(a - b) for a, b in zip(residuals, before, strict=True))
        settled = change <= SETTLED * max(map(abs, residuals)) or scale == 0.0
    limit = HUBER * scale
    inside = [1.0 if abs(r) <= limit else 0.0 for r in residuals]
    mean = fsum(inside) / n
    spread = mean * (1.0 - mean)
    clipped = fsum([min(r * r, limit * limit) for r in residuals])
    correction = 1.0 + parameters / n * spread / mean**2
    variance = correction**2 * clipped / (n - parameters) / mean**2 if n > parameters else 0.0
    return RobustWeights(factors, scale, variance, settled)


def _scale(residuals: list[float]) -> float:
    return median(map(abs, residuals)) / NORMAL_QUARTILE

