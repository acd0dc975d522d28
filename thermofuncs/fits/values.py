"""Statistics of a fit by name, for a single cell."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass

from thermofuncs.errors import NoStatistic
from thermofuncs.fits.fitting import Fit
from thermofuncs.fits.statistics import Tested, aicc, chi_square, curvature, lack_of_fit, r_squared, runs


@dataclass(frozen=True, slots=True)
class Statistic:
    """A statistic of a fit.

    Parameters
    ----------
    name, what : str. What was asked for, and what that is.
    value : float.
    """

    name: str
    what: str
    value: float


TESTS: dict[str, tuple[Callable[[Fit], Tested | None], str]] = {
    "chi2": (chi_square, "no uncertainties are stated, or no points are left over"),
    "curvature": (curvature, "the points are too few for one more parameter"),
    "lack_of_fit": (lack_of_fit, "no temperatures are repeated, or too few are different"),
    "runs": (runs, "the residuals have one sign"),
}
NUMBERS: dict[str, tuple[Callable[[Fit], float | None], str, str]] = {
    "n": (lambda fit: float(fit.points.size), "points", ""),
    "dof": (lambda fit: float(fit.degrees), "degrees of freedom, n − p", ""),
    "T_ref": (lambda fit: fit.reference, "reference temperature, in K", ""),
    "s": (lambda fit: fit.solution.deviation, "residual standard deviation", "no points are left over"),
    "R2": (r_squared, "R² of the logarithm", "the values are all equal"),
    "AICc": (aicc, "Akaike's criterion corrected for few points", "the points are too few, or the fit is robust"),
}
_CALL = re.compile(r"(p|r|t)\(([^()]*(?:\([^()]*\)[^()]*)*)\)")


def statistic_of(fit: Fit, text: str) -> Statistic | None:
    """A statistic by its name, or None where the name is not one.

    Parameters
    ----------
    fit : Fit.
    text : str. ``n``, ``dof``, ``T_ref``, ``s``, ``R2``, ``AICc``, ``chi2``, ``p(chi2)``, ``p(curvature)``,
        ``t(curvature)``, ``p(lack_of_fit)``, ``p(runs)``, or the correlation of two quantities ``r(drH,drS)``.

    Raises
    ------
    NoStatistic
        These points do not give it.
    UnknownQuantity
        A correlation of something that the law does not have.
    """
    name = text.strip()
    if name in NUMBERS:
        of, what, why = NUMBERS[name]
        return Statistic(name, what, _there(of(fit), name, why))
    if name == "chi2":
        test = chi_square(fit)
        return Statistic(name, "Σ(r/u)²", _there(None if test is None else test.statistic, name, TESTS["chi2"][1]))
    found = _CALL.fullmatch(name)
    if found is None:
        return None
    kind, inside = found.groups()
    if kind == "r":
        one, _, other = inside.partition(",")
        names = fit.name_of(one), fit.name_of(other)
        return Statistic(name, "correlation", _there(fit.correlation(*names), name, "no points are left over"))
    if inside not in TESTS:
        return None
    run, why = TESTS[inside]
    tested = run(fit)
    value = None if tested is None else tested.probability if kind == "p" else tested.statistic
    what = inside if tested is None else f"{'probability' if kind == 'p' else 'statistic'} of {tested.what}"
    return Statistic(name, what, _there(value, name, why))


def _there(value: float | None, name: str, why: str) -> float:
    if value is None:
        raise NoStatistic(what=name, why=why)
    return value
