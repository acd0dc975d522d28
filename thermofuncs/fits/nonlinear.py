"""Nonlinear least squares with analytic derivatives."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from thermofuncs.fits.linear import linear_least_squares

Array = NDArray[np.float64]
Model = Callable[[Array], Array]
TOLERANCE = 1e-15  # relative, of the solver's step, sum of squares and gradient
EVALUATIONS = 20_000
POLISHING_STEPS = 30


@dataclass(frozen=True, slots=True)
class NonlinearFit:
    """The solution of a nonlinear least-squares problem.

    Parameters
    ----------
    parameters : array (p,).
    covariance : array (p, p). For a unit weight of variance 1, from the derivatives at the solution.
    squares : float. Weighted sum of squared residuals.
    residuals : array (n,). Observed minus fitted.
    degrees : int. n − p.
    full_rank : bool. Whether the derivatives at the solution are independent.
    """

    parameters: Array
    covariance: Array
    squares: float
    residuals: Array
    degrees: int
    full_rank: bool

    @property
    def residual_deviation(self) -> float:
        """s, the square root of the weighted sum of squares over the degrees of freedom."""
        return float(np.sqrt(self.squares / self.degrees))

    @property
    def standard_deviations(self) -> Array:
        """Standard deviations of the parameters, scaled by the residuals."""
        return self.residual_deviation * np.sqrt(np.diag(self.covariance))


def nonlinear_least_squares(
    model: Model, derivatives: Model, y: ArrayLike, start: Sequence[float], weights: ArrayLike | None = None
) -> NonlinearFit:
    """Least squares of y over a model.

    Parameters
    ----------
    model : callable. The fitted values (n,) for parameters (p,).
    derivatives : callable. Their derivatives (n, p).
    y : array (n,).
    start : sequence of p numbers.
    weights : array (n,) or None. 1/u², or None for equal ones.

    Returns
    -------
    NonlinearFit

    Notes
    -----
    Two searches of scipy.optimize.least_squares start from one place, Levenberg-Marquardt (Moré 1978, from memory) and
    the reflective trust region; the lower sum of squares is taken. Gauss-Newton steps through the QR
    engine then carry it on as long as they lower the sum or shorten, which gains the last digits.
    """
    # heavy, and only a nonlinear law needs it
    from scipy.optimize import least_squares  # noqa: PLC0415

    values = np.asarray(y, dtype=np.float64)
    root = np.ones_like(values) if weights is None else np.sqrt(np.asarray(weights, dtype=np.float64))
    large = np.sqrt(np.finfo(np.float64).max / max(1, values.size)) * 1e-6

    def residual(p: Array) -> Array:
        difference = root * (model(p) - values)
        return np.nan_to_num(np.clip(difference, -large, large), nan=large)

    def jacobian(p: Array) -> Array:
        rows = root[:, None] * derivatives(p)
        return np.nan_to_num(np.clip(rows, -large, large), nan=0.0)

    best = np.asarray(start, dtype=np.float64)
    lowest = _squares(residual(best))
    with np.errstate(all="ignore"):  # a search may step where the model is not finite, and turns back
        for method in ("lm", "trf") if values.size >= best.size else ("trf",):
            found = least_squares(
                residual, np.asarray(start, dtype=np.float64), jacobian, method=method, x_scale="jac",
                xtol=TOLERANCE, ftol=TOLERANCE, gtol=TOLERANCE, max_nfev=EVALUATIONS,
            )  # fmt: skip
            squares = _squares(found.fun)
            if squares < lowest:
                best, lowest = found.x, squares
        best = _polished(residual, jacobian, best)
    fitted = model(best)
    at_end = linear_least_squares(
        derivatives(best), values - fitted, None if weights is None else root**2, intercept=False
    )
    squares = _squares(root * (values - fitted))
    return NonlinearFit(best, at_end.covariance, squares, values - fitted, at_end.degrees, at_end.full_rank)


def _squares(residuals: Array) -> float:
    return float(np.sum(residuals * residuals))


def _polished(residual: Model, jacobian: Model, parameters: Array) -> Array:
    """Parameters after Gauss-Newton steps, each shorter than the one before or with a lower sum of squares."""
    lowest, length = _squares(residual(parameters)), np.inf
    for _ in range(POLISHING_STEPS):
        step = linear_least_squares(jacobian(parameters), -residual(parameters), intercept=False)
        if not step.full_rank:
            break
        moved = parameters + step.coefficients
        relative = float(np.max(np.abs(step.coefficients) / np.maximum(np.abs(parameters), 1e-300)))
        squares = _squares(residual(moved))
        if not squares <= lowest * (1.0 + 1e-12) or relative >= length:
            break
        parameters, lowest, length = moved, squares, relative
        if relative < np.finfo(np.float64).eps:
            break
    return parameters
