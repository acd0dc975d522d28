"""Orthogonal distance regression: errors in both variables, with known standard uncertainties.

The sum Σ[(y − f(ξ; β))²/u_y² + (x − ξ)²/u_x²] is the least over the parameters β and the true abscissae ξ
together (Deming, Statistical Adjustment of Data, 1943; for the line York, Can. J. Phys. 44 (1966) 1079,
citations from memory).
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from thermofuncs.fits.linear import linear_least_squares
from thermofuncs.fits.nonlinear import nonlinear_least_squares

Array = NDArray[np.float64]
Curve = Callable[[Array, Array], Array]


@dataclass(frozen=True, slots=True)
class OrthogonalFit:
    """The solution of an orthogonal distance regression.

    Parameters
    ----------
    parameters : array (p,).
    covariance : array (p, p). For stated uncertainties that are known.
    squares : float. The least sum of squares, of both variables.
    abscissae : array (n,). The estimates of the true x.
    weights : array (n,). 1/(u_y² + (∂f/∂x)² u_x²) at the solution, which the covariance is made with.
    residuals : array (n,). y − f(x), at x as measured.
    """

    parameters: Array
    covariance: Array
    squares: float
    abscissae: Array
    weights: Array
    residuals: Array


def orthogonal_regression(
    curve: Curve,
    by_parameters: Curve,
    by_abscissa: Curve,
    x: ArrayLike,
    y: ArrayLike,
    u_x: ArrayLike,
    u_y: ArrayLike,
    start: Sequence[float],
) -> OrthogonalFit:
    """Orthogonal distance regression of a curve.

    Parameters
    ----------
    curve, by_parameters, by_abscissa : callables of parameters (p,) and abscissae (n,): f (n,), ∂f/∂β (n, p)
        and ∂f/∂x (n,).
    x, y : arrays (n,).
    u_x, u_y : arrays (n,), or numbers. Standard uncertainties above 0.
    start : sequence of p numbers.
    """
    measured = np.asarray(x, dtype=np.float64)
    values = np.asarray(y, dtype=np.float64)
    n, p = measured.size, len(start)
    in_x = np.broadcast_to(np.asarray(u_x, dtype=np.float64), (n,))
    in_y = np.broadcast_to(np.asarray(u_y, dtype=np.float64), (n,))

    def model(unknown: Array) -> Array:  # the shifts of x are in units of u_x
        return np.concatenate([curve(unknown[:p], measured + in_x * unknown[p:]) / in_y, unknown[p:]])

    def derivatives(unknown: Array) -> Array:
        moved = measured + in_x * unknown[p:]
        rows = np.zeros((2 * n, p + n))
        rows[:n, :p] = by_parameters(unknown[:p], moved) / in_y[:, None]
        rows[:n, p:] = np.diag(by_abscissa(unknown[:p], moved) * in_x / in_y)
        rows[n:, p:] = np.eye(n)
        return rows

    found = nonlinear_least_squares(
        model, derivatives, np.concatenate([values / in_y, np.zeros(n)]), [*start, *[0.0] * n]
    )
    parameters = found.parameters[:p]
    abscissae = measured + in_x * found.parameters[p:]
    weights = 1.0 / (in_y**2 + (by_abscissa(parameters, abscissae) * in_x) ** 2)
    at_end = linear_least_squares(by_parameters(parameters, abscissae), values, weights, intercept=False)
    residuals = values - curve(parameters, measured)
    return OrthogonalFit(parameters, at_end.covariance, found.squares, abscissae, weights, residuals)
