"""Estimators beside plain weights: error constant in the value, errors in T, and the robust one."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from thermofuncs.errors import NoConvergence, PointsDoNotDetermine
from thermofuncs.fits.laws import Law, basis, enthalpy, log_value
from thermofuncs.fits.points import Floats, Points
from thermofuncs.fits.robust import HUBER, huber
from thermofuncs.fits.settings import Settings
from thermofuncs.fits.weighted import WIDER, Solution, line_of, rows_of, scaling, weighted

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Array = NDArray[np.float64]

ITERATIONS = 200
LARGEST_EXPONENT = 300.0  # of a value whose square is to be a number
SETTLED = 1e-13  # relative change of the weights at which an iteration ends


def solve(law: Law, points: Points, settings: Settings) -> Solution:
    """The solution for a law's points by the estimator that the settings ask for.

    Raises
    ------
    PointsDoNotDetermine, NoConvergence
        There is no solution.
    """
    weights = None if points.u_logs is None else [1.0 / (u * u) for u in points.u_logs]
    if settings.robust:
        return _robust(law, points, settings, weights)
    if settings.constant_in_value:
        return _constant_in_value(law, points, settings)
    if settings.orthogonal:
        return _orthogonal(law, points, settings)
    if settings.u_temperature:
        return _effective_variance(law, points, settings)
    name = "least squares of the logarithm" if weights is None else "least squares of the logarithm, weights 1/u²"
    return weighted(law, points, settings, weights, name)


def _robust(law: Law, points: Points, settings: Settings, weights: Floats | None) -> Solution:
    name = f"Huber's M-estimator, c = {HUBER}, scale by the median absolute residual"
    base = weights or [1.0] * points.size

    def solution(factors: Floats) -> Solution:
        both = [w * f for w, f in zip(base, factors, strict=True)]
        return weighted(law, points, settings, both, name)

    def residuals(factors: Floats) -> Floats:
        return [math.sqrt(w) * r for w, r in zip(base, solution(factors).residuals, strict=True)]

    found = huber(residuals, points.size, law.count)
    if not found.settled:
        raise NoConvergence(law=law.name, why="the robust weights still change", remedy=WIDER)
    last = solution(found.factors)
    left_over = points.size > law.count
    # the covariance of Huber's estimator is that of the stated weights, times its own variance
    return last._replace(
        covariance=_covariance_at(law, points, base, last.theta), weights=base, factors=found.factors,
        variance=found.variance if left_over else None, deviation=found.scale if left_over else None,
    )  # fmt: skip


def _covariance_at(law: Law, points: Points, weights: Floats, theta: float) -> tuple[tuple[float, ...], ...]:
    """The covariance of the coefficients around θ for these weights, for a unit weight of variance 1."""
    from thermofuncs.fits.linear import linear_least_squares  # noqa: PLC0415  arrays, for these estimators alone

    rows = [basis(law.count, t, theta)[1:] for t in points.temperatures]
    found = linear_least_squares(rows, points.logs, weights)
    if not found.full_rank:
        raise PointsDoNotDetermine(law=law.name, parameters=law.count)
    return rows_of(found.covariance)


def _constant_in_value(law: Law, points: Points, settings: Settings) -> Solution:
    """Least squares of the value itself: the weights of the logarithms are those of the fitted values.

    Each residual (y − ŷ)/ŷ of the logarithm has the weight ŷ²/u², so that the sum is Σ[(y − ŷ)/u]².
    """
    import numpy as np  # noqa: PLC0415  arrays and the solver, for these estimators alone

    from thermofuncs.fits.nonlinear import nonlinear_least_squares  # noqa: PLC0415  as above

    height, slope, theta = line_of(points, None)
    observed = [b + law.offset(t) for b, t in zip(points.logs, points.temperatures, strict=True)]
    top = max(observed)  # values are taken relative to the largest, so that none overflows
    y = np.array([math.exp(b - top) for b in observed])
    shifts = np.array([law.offset(t) - top for t in points.temperatures])
    stated = points.u_logs
    u = np.ones(points.size) if stated is None else y * np.array(stated)  # of the value, as stated

    def values(c: Array) -> Array:
        logs = np.array([log_value(law, tuple(c.tolist()), t, theta)[0] for t in points.temperatures])
        fitted: Array = np.exp(logs + shifts)
        return fitted

    def derivatives(c: Array) -> Array:
        rows: Array = np.array([log_value(law, tuple(c.tolist()), t, theta)[1] for t in points.temperatures])
        return values(c)[:, None] * rows

    start = (height, slope, *([0.0] * (law.count - 2)))
    found = nonlinear_least_squares(values, derivatives, y, start, 1.0 / (u * u))
    if not found.full_rank or not np.all(np.isfinite(found.parameters)):
        raise NoConvergence(law=law.name, why="no parameters give the least squares of the values", remedy=WIDER)
    fitted = values(found.parameters)
    # without stated uncertainties the residual deviation is one of the value, in its own unit
    unit = math.exp(min(top, LARGEST_EXPONENT)) if stated is None else 1.0
    squares = found.squares * unit**2
    variance, deviation = scaling(settings, squares, found.degrees)
    return Solution(
        tuple(found.parameters.tolist()), theta, rows_of(found.covariance / unit**2), variance,
        ((fitted * unit / u) ** 2).tolist(), (found.residuals / fitted).tolist(), squares, deviation,
        f"least squares of {law.symbol} itself, weights by the fitted {law.symbol}",
    )  # fmt: skip


def _effective_variance(law: Law, points: Points, settings: Settings) -> Solution:
    """Weights 1/(u² + (d ln y/dT)² u_T²), iterated with the fitted slope (Orear 1982, citation from memory)."""
    name = "effective variance: least squares with weights 1/(u² + (d ln y/dT · u_T)²), iterated"
    stated = points.u_logs or []
    weights = [1.0 / (u * u) for u in stated]
    for _ in range(ITERATIONS):
        found = weighted(law, points, settings, weights, name)
        before, weights = weights, [
            1.0 / (u * u + (slope_of(law, found, t) * settings.u_temperature) ** 2)
            for u, t in zip(stated, points.temperatures, strict=True)
        ]  # fmt: skip
        if all(abs(a - b) <= SETTLED * b for a, b in zip(before, weights, strict=True)):
            return found
    raise NoConvergence(law=law.name, why="the effective variances still change", remedy=WIDER)


def slope_of(law: Law, found: Solution, temperature: float) -> float:
    """The slope of the fitted logarithm by temperature. [1/K]"""
    of_form = enthalpy(law, found.coefficients, temperature, found.theta)[0] / temperature**2
    return of_form + (1.0 / temperature if law.family == "Eyring" else 0.0)


def _orthogonal(law: Law, points: Points, settings: Settings) -> Solution:
    """Orthogonal distance regression over T and the logarithm."""
    import numpy as np  # noqa: PLC0415  arrays and the solver, for this estimator alone

    from thermofuncs.fits.orthogonal import orthogonal_regression  # noqa: PLC0415  as above

    height, slope, theta = line_of(points, None)
    observed = [b + law.offset(t) for b, t in zip(points.logs, points.temperatures, strict=True)]

    def curve(c: Array, t: Array) -> Array:
        coefficients = tuple(c.tolist())
        return np.array([log_value(law, coefficients, x, theta)[0] + law.offset(x) for x in t.tolist()])

    def by_parameters(_: Array, t: Array) -> Array:
        return np.array([basis(law.count, x, theta) for x in t.tolist()])

    def by_abscissa(c: Array, t: Array) -> Array:
        coefficients = tuple(c.tolist())
        slopes = [enthalpy(law, coefficients, x, theta)[0] / x**2 for x in t.tolist()]
        eyring = 1.0 / t if law.family == "Eyring" else 0.0
        return np.array(slopes) + eyring

    found = orthogonal_regression(
        curve, by_parameters, by_abscissa, points.temperatures, observed, settings.u_temperature, points.u_logs or 1.0,
        (height, slope, *([0.0] * (law.count - 2))),
    )  # fmt: skip
    variance, deviation = scaling(settings, found.squares, points.size - law.count)
    return Solution(
        tuple(found.parameters.tolist()), theta, rows_of(found.covariance), variance, found.weights.tolist(),
        found.residuals.tolist(), found.squares, deviation, "orthogonal distance regression over T and the logarithm",
    )  # fmt: skip
