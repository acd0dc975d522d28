"""Linear least squares by a QR decomposition of the centred, column-scaled, weighted design."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]
RANK_TOLERANCE = 1e-14  # of the smallest to the largest diagonal of R, below which columns depend on each other


@dataclass(frozen=True, slots=True)
class LinearFit:
    """The solution of a linear least-squares problem.

    Parameters
    ----------
    coefficients : array (p,). The intercept first, where there is one.
    covariance : array (p, p). For a unit weight of variance 1: multiply with s² where u are but weights.
    squares : float. Weighted sum of squared residuals.
    residuals : array (n,). [unit of y]
    degrees : int. n − p.
    condition : float. Of the centred and scaled design, in the 2-norm.
    full_rank : bool. Whether the columns are independent.
    """

    coefficients: Array
    covariance: Array
    squares: float
    residuals: Array
    degrees: int
    condition: float
    full_rank: bool

    @property
    def residual_deviation(self) -> float:
        """s, the square root of the weighted sum of squares over the degrees of freedom."""
        return float(np.sqrt(self.squares / self.degrees))

    @property
    def standard_deviations(self) -> Array:
        """Standard deviations of the coefficients, scaled by the residuals."""
        return self.residual_deviation * np.sqrt(np.diag(self.covariance))


def linear_least_squares(
    columns: ArrayLike, y: ArrayLike, weights: ArrayLike | None = None, *, intercept: bool = True
) -> LinearFit:
    """Least squares of y over the columns of a design.

    Parameters
    ----------
    columns : array (n, q). Without the column of ones.
    y : array (n,).
    weights : array (n,) or None. 1/u², or None for equal ones.
    intercept : bool. Fit a constant too.

    Returns
    -------
    LinearFit

    Notes
    -----
    With an intercept the columns and y are centred at their weighted means, which is the first step of the
    decomposition written out; each column is scaled to length 1, and R comes from Householder reflections
    (Björck, Numerical Methods for Least Squares Problems, SIAM 1996, citation from memory). The residuals are
    taken from the uncentred design, and their projection corrects the solution once.
    """
    x = np.asarray(columns, dtype=np.float64)
    values = np.asarray(y, dtype=np.float64)
    n, q = x.shape
    w = None if weights is None else np.asarray(weights, dtype=np.float64)
    root = np.ones(n) if w is None else np.sqrt(w)
    total = float(n) if w is None else float(w.sum())
    means, mean = np.zeros(q), 0.0
    if intercept:
        means = _mean(x, w, total)
        mean = float(_mean(values[:, None], w, total)[0])
    rows = (x - means) * root[:, None]
    lengths = np.sqrt(np.einsum("ij,ij->j", rows, rows))
    lengths[lengths == 0.0] = 1.0
    orthogonal, upper = np.linalg.qr(rows / lengths)
    diagonal = np.abs(np.diag(upper))
    full_rank = bool(q == 0 or diagonal.min() > RANK_TOLERANCE * max(1.0, float(diagonal.max())))
    p = q + intercept
    if not full_rank:
        nothing = np.full((p, p), np.nan)
        return LinearFit(nothing[0], nothing, np.nan, np.full(n, np.nan), n - p, np.inf, full_rank=False)
    inverse = np.linalg.inv(upper)
    slopes = np.zeros(q)
    constant = mean
    residuals = values - mean
    for _ in range(2):
        change = (inverse @ (orthogonal.T @ (root * residuals))) / lengths
        slopes = slopes + change
        residuals = (values - mean) - (x - means) @ slopes
        if intercept:
            shift = float(_mean(residuals[:, None], w, total)[0])
            constant += shift
            residuals = residuals - shift
    scaled = inverse / lengths[:, None]
    covariance = scaled @ scaled.T
    coefficients = slopes
    if intercept:
        coefficients = np.concatenate(([constant - float(means @ slopes)], slopes))
        cross = -covariance @ means
        covariance = np.block([
            [np.array([[1.0 / total - means @ cross]]), cross[None, :]],
            [cross[:, None], covariance],
        ])  # fmt: skip
    squares = float(np.sum((root * residuals) ** 2))
    condition = float(np.linalg.cond(upper)) if q else 1.0
    return LinearFit(coefficients, covariance, squares, residuals, n - p, condition, full_rank=True)


def _mean(columns: Array, w: Array | None, total: float) -> Array:
    """Weighted means of columns."""
    mean: Array = (columns if w is None else columns * w[:, None]).sum(axis=0) / total
    return mean
