"""What each point does to a fit: residual, leverage, Cook's distance."""

from __future__ import annotations

import math
from dataclasses import dataclass

from thermofuncs.fits.fitting import Fit

LEVERAGE_OF_ONE = 1.0 - 1e-10  # above it the fit passes through the point and its residual says nothing


@dataclass(frozen=True, slots=True)
class PointDiagnosis:
    """A point of a fit.

    Parameters
    ----------
    row : int. Its place among the rows as given, from 0.
    temperature : float. [K]
    observed, fitted, residual : float. Of the logarithm; the residual over the fitted value where the error is
        constant in the value.
    standardised : float or None. Residual over its own standard deviation; None where it has none.
    leverage : float. Between 0 and 1.
    cook : float or None. Cook's distance.
    """

    row: int
    temperature: float
    observed: float
    fitted: float
    residual: float
    standardised: float | None
    leverage: float
    cook: float | None


def diagnose(fit: Fit) -> list[PointDiagnosis]:
    """Each point of a fit, in canonical order.

    Notes
    -----
    hᵢ = wᵢ gᵢᵀ (GᵀWG)⁻¹ gᵢ; rᵢ √wᵢ/(s √(1 − hᵢ)); Dᵢ = (standardised)² hᵢ/(p (1 − hᵢ)) (Cook, Technometrics
    19 (1977) 15, citation from memory), with s = 1 where the uncertainties are known.
    """
    s, points = fit.solution, fit.points
    weights = s.weights or [1.0] * points.size
    deviation = 1.0 if fit.settings.known else s.deviation
    found = []
    for i, t in enumerate(points.temperatures):
        fitted, gradient = fit.log_at(t)
        offset = fit.law.offset(t)
        inner = math.fsum(
            a * b * c for a, row in zip(gradient, s.covariance, strict=True) for b, c in zip(row, gradient, strict=True)
        )
        leverage = min(1.0, weights[i] * inner)
        residual = s.residuals[i]
        standardised = cook = None
        if deviation and leverage < LEVERAGE_OF_ONE:
            standardised = residual * math.sqrt(weights[i]) / (deviation * math.sqrt(1.0 - leverage))
            cook = standardised**2 * leverage / (fit.law.count * (1.0 - leverage))
        observed = points.logs[i] + offset
        found.append(
            PointDiagnosis(points.rows[i], t, observed, fitted + offset, residual, standardised, leverage, cook)
        )
    return found
