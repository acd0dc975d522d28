"""Statistics of a fit: goodness, the tests of curvature, lack of fit and runs of signs, and of chi-square."""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass

from thermofuncs.errors import NotValid
from thermofuncs.fits.distributions import as_few_runs, chi_square_above, f_above, two_sided
from thermofuncs.fits.estimators import solve
from thermofuncs.fits.fitting import Fit
from thermofuncs.fits.laws import with_one_more


@dataclass(frozen=True, slots=True)
class Tested:
    """A test.

    Parameters
    ----------
    statistic : float.
    probability : float. Of a statistic at least so extreme, were the null hypothesis true.
    what : str. What the statistic is.
    """

    statistic: float
    probability: float
    what: str


def _weights(fit: Fit) -> list[float]:
    return fit.solution.weights or [1.0] * fit.points.size


def total_squares(fit: Fit) -> float:
    """Weighted sum of squares of the logarithms around their weighted mean."""
    w, y = _weights(fit), fit.points.logs
    mean = math.fsum([a * b for a, b in zip(w, y, strict=True)]) / math.fsum(w)
    return math.fsum([a * (b - mean) ** 2 for a, b in zip(w, y, strict=True)])


def r_squared(fit: Fit) -> float | None:
    """R² of the logarithm, weighted as the fit; None where the values are all equal."""
    total = total_squares(fit)
    squares = math.fsum([w * r * r for w, r in zip(_weights(fit), fit.solution.residuals, strict=True)])
    return 1.0 - squares / total if total > 0.0 else None


def aicc(fit: Fit) -> float | None:
    """Akaike's criterion corrected for few points; None where these are too few, or the fit robust.

    Notes
    -----
    n ln(Σwr²/n) + 2k + 2k(k + 1)/(n − k − 1) with k = p + 1, the variance being one more parameter; with
    known uncertainties χ² in place of the first term and k = p (Hurvich & Tsai, Biometrika 76 (1989) 297,
    citation from memory).
    Smaller is better, between laws fitted to the same points with the same weights.
    """
    if fit.settings.robust:
        return None  # its sum of squares is no likelihood
    n, squares = fit.points.size, fit.solution.squares
    k = fit.law.count + (not fit.settings.known)
    if n - k - 1 <= 0 or (squares <= 0.0 and not fit.settings.known):
        return None
    first = squares if fit.settings.known else n * math.log(squares / n)
    return first + 2.0 * k + 2.0 * k * (k + 1.0) / (n - k - 1.0)


def chi_square(fit: Fit) -> Tested | None:
    """Chi-square of stated uncertainties, with the probability of a larger one; None where none are stated."""
    if fit.points.u_logs is None or fit.degrees < 1 or fit.settings.robust:
        return None
    value = fit.solution.squares
    return Tested(value, chi_square_above(value, fit.degrees), "chi-square")


def curvature(fit: Fit) -> Tested | None:
    """Whether one more term in the heat capacity is needed: two-sided, by its estimate over its uncertainty.

    For a straight line it is ΔrCp° (for Arrhenius a temperature dependence of Ea), added and fitted in the
    same way; for Clarke-Glew its highest term, for Antoine C. None where the points are too few.
    """
    law, points = fit.law, fit.points
    what = {2: "ΔCp added to the straight line", 3: "ΔCp", 4: "dΔCp/dT"}[law.count]
    solution, degrees = fit.solution, fit.degrees
    larger = with_one_more(law)
    if larger is not None:
        degrees = points.size - larger.count
        if degrees < 1 or len(set(points.temperatures)) < larger.count:
            return None
        try:
            solution = solve(larger, points, fit.settings)
        except NotValid:
            return None  # the points do not determine the term: there is no test of it
    elif law.nonlinear:
        what = "C of Antoine's equation"
    count = larger.count if larger is not None else law.count
    variance = solution.variance_of((*([0.0] * (count - 1)), 1.0))
    if variance is None or variance <= 0.0 or degrees < 1:
        return None
    t = solution.coefficients[-1] / math.sqrt(variance)
    return Tested(t, two_sided(t, None if fit.settings.known else degrees), what)


def lack_of_fit(fit: Fit) -> Tested | None:
    """Lack of fit against the scatter of replicates, where temperatures repeat; None where it cannot be told."""
    groups = _groups(fit)
    pure = sum(len(members) - 1 for members in groups)
    lacking = len(groups) - fit.law.count
    if pure < 1 or lacking < 1:
        return None
    w, r = _weights(fit), fit.solution.residuals
    within = []
    for members in groups:
        mean = math.fsum([w[i] * r[i] for i in members]) / math.fsum([w[i] for i in members])
        within += [w[i] * (r[i] - mean) ** 2 for i in members]
    error = math.fsum(within)
    between = math.fsum([a * b * b for a, b in zip(w, r, strict=True)]) - error
    if error <= 0.0:
        return None
    ratio = max(0.0, between) / lacking / (error / pure)
    return Tested(ratio, f_above(ratio, lacking, pure), f"F with {lacking} and {pure} degrees of freedom")


def _groups(fit: Fit) -> list[list[int]]:
    """The points of each temperature, in order."""
    groups: dict[float, list[int]] = {}
    for i, t in enumerate(fit.points.temperatures):
        groups.setdefault(t, []).append(i)
    return list(groups.values())


def runs(fit: Fit) -> Tested | None:
    """Runs of signs of the residuals in the order of T, of their mean where T repeats; None for one sign."""
    w, r = _weights(fit), fit.solution.residuals
    sums = [math.fsum([w[i] * r[i] for i in members]) for members in _groups(fit)]
    signs = [a > 0.0 for a in sums if a]
    positive = sum(signs)
    negative = len(signs) - positive
    if not positive or not negative:
        return None
    count = 1 + sum(a != b for a, b in itertools.pairwise(signs))
    return Tested(float(count), as_few_runs(count, positive, negative), "runs of signs")
