"""The solution of a law's points by least squares with given weights."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, NamedTuple

from thermofuncs.errors import NoConvergence, PointsDoNotDetermine
from thermofuncs.fits.laws import Coefficients, Law, basis, log_value
from thermofuncs.fits.points import Floats, Points
from thermofuncs.fits.settings import Settings
from thermofuncs.fits.straight import straight_line

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Array = NDArray[np.float64]

Matrix = tuple[tuple[float, ...], ...]
WIDER = "Look for a point that does not belong, or measure over a wider range."


class Solution(NamedTuple):
    """A fit's coefficients in the inner form, with what the statistics need.

    Parameters
    ----------
    coefficients : tuple. Of the inner form around θ.
    theta : float. [K]
    covariance : tuple of rows. Of the coefficients, for a unit weight of variance 1.
    variance : float or None. What the covariance is multiplied with: s², 1 where the uncertainties are known;
        None where no points are left over.
    weights : list of float or None. Of the residuals; None for equal ones.
    residuals : list of float. Of the fitted logarithm, observed minus fitted.
    squares : float. Weighted sum of squared residuals.
    deviation : float or None. Residual standard deviation: of the logarithm, or in units of the weights.
    estimator : str. Its name, for a person.
    condition : float or None. Of the scaled design, where one was decomposed.
    factors : list of float or None. What the robust estimator multiplied the weights with.
    """

    coefficients: Coefficients
    theta: float
    covariance: Matrix
    variance: float | None
    weights: Floats | None
    residuals: Floats
    squares: float
    deviation: float | None
    estimator: str
    condition: float | None = None
    factors: Floats | None = None

    def variance_of(self, gradient: Coefficients) -> float | None:
        """The variance of what has these derivatives by the coefficients; None where no points are left over."""
        if self.variance is None:
            return None
        terms = [
            a * b * c for a, row in zip(gradient, self.covariance, strict=True) if a
            for b, c in zip(gradient, row, strict=True)
        ]  # fmt: skip
        return max(0.0, math.fsum(terms)) * self.variance


def weighted(law: Law, points: Points, settings: Settings, weights: Floats | None, name: str) -> Solution:
    """The solution with these weights.

    Parameters
    ----------
    law, points, settings : what is fitted, and how.
    weights : list of float or None. 1/u², or None for equal ones.
    name : str. The estimator's.

    Raises
    ------
    PointsDoNotDetermine
        The columns of the design depend on each other in double precision.
    NoConvergence
        Antoine's C + T would not be positive.
    """
    if law.count == 2:
        return _line(law, points, settings, weights, name)
    return (_antoine if law.nonlinear else _columns)(law, points, settings, weights, name)


def scaling(settings: Settings, squares: float, degrees: int) -> tuple[float | None, float | None]:
    """The variance that multiplies the covariance, and the residual standard deviation."""
    square = squares / degrees if degrees > 0 else None
    return (1.0 if settings.known else square), (None if square is None else math.sqrt(square))


def line_of(points: Points, weights: Floats | None) -> tuple[float, float, float]:
    """Height and slope of the straight line, and its centre as a temperature [K]: where a search starts."""
    line = straight_line([1.0 / t for t in points.temperatures], points.logs, weights)
    return line.height, line.slope, 1.0 / line.centre


def rows_of(array: Array) -> Matrix:
    """An array as rows of floats."""
    return tuple(map(tuple, array.tolist()))


def _line(law: Law, points: Points, settings: Settings, weights: Floats | None, name: str) -> Solution:
    line = straight_line([1.0 / t for t in points.temperatures], points.logs, weights)
    if not line.spread > 0.0:
        raise PointsDoNotDetermine(law=law.name, parameters=law.count)
    variance, deviation = scaling(settings, line.squares, len(points.logs) - 2)
    covariance = ((1.0 / line.sum_of_weights, 0.0), (0.0, 1.0 / line.spread))
    return Solution(
        (line.height, line.slope), 1.0 / line.centre, covariance, variance, weights, line.residuals, line.squares,
        deviation, name,
    )  # fmt: skip


def _columns(law: Law, points: Points, settings: Settings, weights: Floats | None, name: str) -> Solution:
    # arrays are for more than two columns: a straight line in a cell does without
    from thermofuncs.fits.linear import linear_least_squares  # noqa: PLC0415

    if weights is None:
        theta = points.mean
    else:
        reciprocal = math.fsum([w / t for w, t in zip(weights, points.temperatures, strict=True)])
        theta = math.fsum(weights) / reciprocal
    found = linear_least_squares([basis(law.count, t, theta)[1:] for t in points.temperatures], points.logs, weights)
    if not found.full_rank:
        raise PointsDoNotDetermine(law=law.name, parameters=law.count)
    variance, deviation = scaling(settings, found.squares, found.degrees)
    return Solution(
        tuple(found.coefficients.tolist()), theta, rows_of(found.covariance), variance, weights,
        found.residuals.tolist(), found.squares, deviation, name, found.condition,
    )  # fmt: skip


def _antoine(law: Law, points: Points, settings: Settings, weights: Floats | None, name: str) -> Solution:
    """Antoine's equation by its form around θ, α + β x/(1 + γ x) with x = 1/θ − 1/T, from the straight line."""
    import numpy as np  # noqa: PLC0415  arrays and the solver: only this law needs them

    from thermofuncs.fits.nonlinear import nonlinear_least_squares  # noqa: PLC0415  as above

    height, slope, theta = line_of(points, weights)

    def values(c: Array) -> Array:
        return np.array([log_value(law, tuple(c.tolist()), t, theta)[0] for t in points.temperatures])

    def derivatives(c: Array) -> Array:
        return np.array([log_value(law, tuple(c.tolist()), t, theta)[1] for t in points.temperatures])

    found = nonlinear_least_squares(values, derivatives, points.logs, (height, slope, 0.0), weights)
    if not found.full_rank:
        raise PointsDoNotDetermine(law=law.name, parameters=law.count)
    c = tuple(found.parameters.tolist())
    if c[2] <= -theta or any(1.0 + c[2] * (t - theta) / (t * theta) <= 0.0 for t in points.temperatures):
        raise NoConvergence(law=law.name, why="C + T would not be positive at every point", remedy=WIDER)
    variance, deviation = scaling(settings, found.squares, found.degrees)
    return Solution(
        c, theta, rows_of(found.covariance), variance, weights, found.residuals.tolist(), found.squares, deviation,
        f"nonlinear {name}",
    )  # fmt: skip
