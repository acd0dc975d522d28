"""What a fit says at other temperatures, and at which temperature it has a value."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from thermofuncs.errors import NoFittedTemperature
from thermofuncs.fits.estimators import slope_of
from thermofuncs.fits.fitting import Fit

SEARCH = (0.2, 5.0, 400)  # of the lowest and the highest temperature of the points, and steps between
PRECISION = 1e-13  # relative, of a temperature


@dataclass(frozen=True, slots=True)
class Prediction:
    """The logarithm of the measured quantity at a temperature.

    Parameters
    ----------
    temperature : float. [K]
    log : float. In the standard unit.
    u : float or None. Standard uncertainty of the fitted line; None where no points are left over.
    confidence, prediction : float or None. Half widths, at the fit's level, for the line and for a new point.
    outside : float. How far outside the points, negative below them. [K]
    """

    temperature: float
    log: float
    u: float | None
    confidence: float | None
    prediction: float | None
    outside: float


def predict(fit: Fit, temperature: float) -> Prediction:
    """The logarithm at a temperature [K], with limits."""
    value, gradient = fit.log_at(temperature)
    log = value + fit.law.offset(temperature)
    outside = fit.outside(temperature)
    u = fit.u_of(gradient)
    if u is None:
        return Prediction(temperature, log, None, None, None, outside)
    new = math.sqrt(u * u + _new_point(fit, temperature, log))
    return Prediction(temperature, log, u, fit.factor * u, fit.factor * new, outside)


def _new_point(fit: Fit, temperature: float, log: float) -> float:
    """The variance of the logarithm of one new point.

    Equal weights: that of the residuals. Stated uncertainties: a new point is taken to have their root mean
    square, with the slope's part where T has an error. Error constant in the value: that of the residuals
    over the fitted value.
    """
    s = fit.solution
    unit = 1.0 if fit.settings.known else (s.deviation or 0.0) ** 2
    stated = fit.points.u_logs
    if fit.settings.constant_in_value:
        fitted = [fit.log_at(t)[0] + fit.law.offset(t) for t in fit.points.temperatures]
        mean = math.fsum([math.exp(2.0 * (x - log)) / w for x, w in zip(fitted, s.weights or [], strict=True)])
        return unit * mean / fit.points.size
    if stated is None:
        return unit
    square = math.fsum([u * u for u in stated]) / len(stated)
    return unit * (square + (slope_of(fit.law, s, temperature) * fit.settings.u_temperature) ** 2)


@dataclass(frozen=True, slots=True)
class FittedTemperature:
    """The temperature at which a fit has a value.

    Parameters
    ----------
    temperature : float. The root nearest to the points. [K]
    low, high : float or None. Limits; None where the fit sets none.
    u : float or None. Standard uncertainty, by the slope. [K]
    others : tuple of float. Further roots. [K]
    outside : float. How far outside the points, negative below them. [K]
    """

    temperature: float
    low: float | None
    high: float | None
    u: float | None
    others: tuple[float, ...]
    outside: float


def temperature_of(fit: Fit, log: float, given: str) -> FittedTemperature:
    """The temperature at which the fitted logarithm, in the standard unit, has a value.

    Parameters
    ----------
    fit : Fit.
    log : float.
    given : str. The value as it was asked for, for a sentence.

    Raises
    ------
    NoFittedTemperature
        The fit does not have the value between a fifth of the lowest and five times the highest temperature.

    Notes
    -----
    The limits are the temperatures at which the value stands on the fit's confidence band (for a line
    Fieller's theorem, J. R. Statist. Soc. B 16 (1954) 175, citation from memory), so they are not symmetric.
    """
    low, high = SEARCH[0] * fit.points.low, SEARCH[1] * fit.points.high
    if fit.law.nonlinear:  # below −C there is no vapour pressure
        gamma, theta = fit.solution.coefficients[2], fit.solution.theta
        low = max(low, gamma / (1.0 + gamma / theta) * (1.0 + 1e-9))

    def difference(t: float) -> float:
        return fit.log_at(t)[0] + fit.law.offset(t) - log

    grid = _grid(low, high, fit)
    roots = [_root(difference, a, b) for a, b in _changes(difference, grid)]
    if not roots:
        ends = f"{fit.measure.log_name} = {difference(low) + log:.6g} to {difference(high) + log:.6g}"
        raise NoFittedTemperature(given=given, low=f"{low:.6g}", high=f"{high:.6g}", ends=ends)
    middle = 1.0 / fit.points.mean
    roots.sort(key=lambda t: abs(1.0 / t - middle))
    root = roots[0]
    slope = slope_of(fit.law, fit.solution, root)
    u_log = fit.u_of(fit.log_at(root)[1])
    u = None if u_log is None or slope == 0.0 else abs(u_log / slope)
    limits: tuple[float | None, float | None] = (None, None)
    if u_log is not None:

        def beyond(t: float) -> float:
            return abs(difference(t)) - fit.factor * (fit.u_of(fit.log_at(t)[1]) or 0.0)

        limits = _limits(beyond, root, grid) if u_log else (root, root)
    return FittedTemperature(root, *limits, u, tuple(sorted(roots[1:])), fit.outside(root))


def _grid(low: float, high: float, fit: Fit) -> list[float]:
    """Temperatures evenly spaced in 1/T, with those of the points."""
    steps = SEARCH[2]
    even = [1.0 / (1.0 / high + (1.0 / low - 1.0 / high) * i / steps) for i in range(steps + 1)]
    return sorted({low, high, *even, *fit.points.temperatures})


def _changes(difference: Callable[[float], float], grid: list[float]) -> list[tuple[float, float]]:
    """The steps of a grid on which a function changes its sign, or ends at zero."""
    values = [difference(t) for t in grid]
    pairs = zip(grid, grid[1:], values, values[1:], strict=False)
    found = [(a, b) for a, b, x, y in pairs if (x < 0.0 < y) or (y < 0.0 < x) or y == 0.0]
    return [(grid[0], grid[0]), *found] if values[0] == 0.0 else found


def _root(difference: Callable[[float], float], a: float, b: float) -> float:
    """The root between two temperatures."""
    # heavy, and only this search needs it
    from scipy.optimize import brentq  # noqa: PLC0415

    for end in (a, b):
        if difference(end) == 0.0:
            return end
    return float(brentq(difference, a, b, xtol=1e-12, rtol=PRECISION))


def _limits(
    beyond: Callable[[float], float], root: float, grid: list[float]
) -> tuple[float | None, float | None]:
    """The nearest temperatures below and above a root at which a function turns positive."""

    def first(side: list[float]) -> float | None:
        before = root
        for t in side:
            if beyond(t) >= 0.0:
                return _root(beyond, min(before, t), max(before, t))
            before = t
        return None

    return first([t for t in reversed(grid) if t < root]), first([t for t in grid if t > root])
