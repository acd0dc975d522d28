"""Many fits at once over arrays: one series of values in each column."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from thermofuncs.errors import DifferentLengths, NotAboveZeroInRange, OptionsClash, TooFewPoints
from thermofuncs.fits.distributions import limit_factor
from thermofuncs.fits.laws import Law, basis, read_law
from thermofuncs.fits.linear import linear_least_squares
from thermofuncs.fits.measures import Measure, read_measure
from thermofuncs.fits.quantities import found_name, quantities

Array = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class ManyEstimates:
    """A quantity of many fits.

    Parameters
    ----------
    value, u, low, high : arrays (m,). With the standard uncertainty and the limits by Student's t.
    unit : str.
    """

    value: Array
    u: Array
    low: Array
    high: Array
    unit: str


@dataclass(frozen=True, slots=True)
class ManyFits:
    """Fits of one law to many series by equally weighted least squares of the logarithm.

    Parameters
    ----------
    law, measure : what was fitted.
    coefficients : array (p, m). Of the inner form.
    theta : array (m,) or (1,). [K]
    covariance : array (p, p) or (p, p, m). For a unit variance.
    variance : array (m,). Of the residuals.
    degrees : int. n − p.
    """

    law: Law
    measure: Measure
    coefficients: Array
    theta: Array
    covariance: Array
    variance: Array
    degrees: int

    def estimates(self, name: str, reference: float, level: float = 0.95) -> ManyEstimates:
        """A quantity at a reference temperature [K], of every series.

        Parameters
        ----------
        name : str. Such as ``drH``; of the linear ones.
        reference : float. [K]
        level : float.
        """
        known = {n: q for n, q in quantities(self.law, self.measure).items() if not q.exponential}
        quantity = known[found_name(name, self.law, known)]
        of_log, of_enthalpy, of_cp, of_slope = quantity.weights(reference)
        rows = _rows(self.law, reference, self.theta)
        gradient = of_log * rows[0] + of_enthalpy * rows[1] + of_cp * rows[2] + of_slope * rows[3]
        value = np.einsum("pm,pm->m", np.broadcast_to(gradient, self.coefficients.shape), self.coefficients)
        if quantity.plus is not None:
            value = value + quantity.plus(reference)
        if self.covariance.ndim == 2:
            inner = np.einsum("pm,pq,qm->m", gradient, self.covariance, gradient)
        else:
            inner = np.einsum("pm,pqm,qm->m", gradient, self.covariance, gradient)
        u = np.sqrt(inner * self.variance)
        half = limit_factor(level, self.degrees) * u
        return ManyEstimates(value, u, value - half, value + half, quantity.unit)


def _rows(law: Law, t: float, theta: Array) -> tuple[Array, Array, Array, Array]:
    """Derivatives by the coefficients (p, m) of the logarithm, T² its slope, the slope of that, and once more."""
    p, m = law.count, theta.size
    rows = np.zeros((4, p, m))
    if p == 2:
        rows[0, 0], rows[0, 1] = 1.0, (t - theta) / (t * theta)
    else:  # the series share their temperatures, so there is one θ
        rows[0, :, 0] = basis(p, t, float(theta[0]))
    rows[1, 1] = 1.0
    for k in range(2, p):
        d = t - theta
        rows[1, k] = d if k == 2 else 0.5 * d * d
        rows[2, k] = 1.0 if k == 2 else d
        rows[3, k] = 0.0 if k == 2 else 1.0
    return rows[0], rows[1], rows[2], rows[3]


def fit_many(law: str, temperatures: ArrayLike, values: ArrayLike, y_is: str | None = None) -> ManyFits:
    """Fit a law to many series in one call, by equally weighted least squares of the logarithm.

    Parameters
    ----------
    law : str. Any but Antoine.
    temperatures : array (n,), shared by the series, or (n, m) for a law of two parameters. [K]
    values : array (n, m). One series in each column, all of what ``y_is`` says.
    y_is : str or None. As for a single fit.

    Returns
    -------
    ManyFits

    Raises
    ------
    TooFewPoints, DifferentLengths, NotAboveZeroInRange, OptionsClash
        The arrays cannot be fitted.

    Notes
    -----
    The formulas are those of the single fit, with numpy's sums in place of exactly rounded ones.
    """
    read = read_law(law)
    measure = read_measure(y_is, read)
    t, y = np.asarray(temperatures, dtype=np.float64), np.asarray(values, dtype=np.float64)
    shared = t.ndim == 1
    if y.ndim != 2 or len(t) != len(y) or not (shared or t.shape == y.shape):
        raise DifferentLengths(first="T", n_first=t.shape, second="y", n_second=y.shape)
    if read.nonlinear or (not shared and read.count > 2):
        raise OptionsClash(first=f"the law {read.name}", second="many series", why="fit them one by one")
    for name, array, positive in (("T", t, True), ("y", y, measure.scale == "value")):
        if not np.all(np.isfinite(array)) or (positive and not float(array.min(initial=1.0)) > 0.0):
            raise NotAboveZeroInRange(argument=name, given="a value", place="?", what="a finite number", why="")
    if len(t) <= read.count:
        raise TooFewPoints(
            law=read.name, parameters=read.count + 1, given=f"{len(t)} points", remedy="Many fits need one point more."
        )
    logs = _logs(read, measure, t if not shared else t[:, None], y)
    return _shared(read, measure, t, logs) if shared else _lines(read, measure, t, logs)


def _logs(law: Law, measure: Measure, t: Array, y: Array) -> Array:
    """The fitted logarithms (n, m)."""
    if measure.scale == "value":
        logs: Array = np.log(y)
    else:
        logs = y * measure.to_ln(1.0) - measure.ln_factor * (y - 1.0) if measure.ln_factor else y * measure.to_ln(1.0)
    if measure.scale == "value" and measure.ln_factor:
        logs += measure.ln_factor
    return logs - (law.offset(1.0) + np.log(t)) if law.family == "Eyring" else logs


def _lines(law: Law, measure: Measure, t: Array, logs: Array) -> ManyFits:
    """The straight line of each series in closed form."""
    n = len(t)
    d = np.reciprocal(t)
    centre = d.sum(axis=0) / n
    np.subtract(centre, d, out=d)
    height = logs.sum(axis=0) / n
    logs = logs - height
    spread = np.einsum("nm,nm->m", d, d)
    if not float(spread.min()) > 0.0:
        raise TooFewPoints(law=law.name, parameters=2, given="equal ones in a series", remedy="Leave it out.")
    slope = np.einsum("nm,nm->m", d, logs) / spread
    logs -= slope * d
    variance = np.einsum("nm,nm->m", logs, logs) / (n - 2)
    covariance = np.zeros((2, 2, height.size))
    covariance[0, 0], covariance[1, 1] = 1.0 / n, 1.0 / spread
    return ManyFits(law, measure, np.stack([height, slope]), 1.0 / centre, covariance, variance, n - 2)


def _shared(law: Law, measure: Measure, t: Array, logs: Array) -> ManyFits:
    """One decomposition for all series, which share their temperatures."""
    n = len(t)
    theta = n / float(np.sum(1.0 / t))
    design = np.array([basis(law.count, x, theta) for x in t.tolist()])
    one = linear_least_squares(design[:, 1:], logs[:, 0])
    if not one.full_rank:
        raise TooFewPoints(
            law=law.name, parameters=law.count, given="too few", remedy="Measure at more temperatures."
        )
    centred = logs - logs.mean(axis=0)
    columns = design[:, 1:] - design[:, 1:].mean(axis=0)
    slopes = one.covariance[1:, 1:] @ (columns.T @ centred)
    residuals = centred - columns @ slopes
    heights = logs.mean(axis=0) - design[:, 1:].mean(axis=0) @ slopes
    variance = np.einsum("nm,nm->m", residuals, residuals) / (n - law.count)
    coefficients = np.concatenate([heights[None, :], slopes])
    return ManyFits(law, measure, coefficients, np.array([theta]), one.covariance, variance, n - law.count)
