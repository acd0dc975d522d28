"""A fit: its parameters with standard uncertainties and limits, at the reference temperature."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property, lru_cache
from typing import cast

from thermofuncs.errors import OptionsClash
from thermofuncs.fits.distributions import limit_factor
from thermofuncs.fits.estimators import solve
from thermofuncs.fits.laws import CLARKE_GLEW, CLARKE_GLEW_SLOPE, Coefficients, Law, log_value, read_law
from thermofuncs.fits.measures import Measure, read_measure
from thermofuncs.fits.points import Points, plain_points, read_points
from thermofuncs.fits.quantities import (
    ANTOINE_CONSTANTS,
    Quantity,
    Valued,
    antoine_constants,
    exponential,
    found_name,
    quantities,
    valued,
)
from thermofuncs.fits.settings import PLAIN, Settings
from thermofuncs.fits.weighted import Solution

STANDARD_TEMPERATURE = 298.15
KEPT_POINTS = 200  # fits of so many points are kept


@dataclass(frozen=True, slots=True)
class Estimate:
    """A quantity of a fit.

    Parameters
    ----------
    name, symbol, unit, relation : str.
    value : float.
    u : float or None. Standard uncertainty; None where no points are left over.
    low, high : float or None. Limits at the fit's level.
    gradient : tuple. Derivatives by the inner coefficients: of the logarithm for an exponential.
    """

    name: str
    symbol: str
    unit: str
    relation: str
    value: float
    u: float | None
    low: float | None
    high: float | None
    gradient: Coefficients


class Fit:
    """A law fitted to points.

    Parameters
    ----------
    law : Law.
    measure : Measure. What the column holds.
    points : Points.
    settings : Settings.
    """

    def __init__(self, law: Law, measure: Measure, points: Points, settings: Settings) -> None:
        settings.check(nonlinear=law.nonlinear, with_u=points.u_logs is not None)
        self.law = law
        self.measure = measure
        self.points = points
        self.settings = settings
        self.solution: Solution = solve(law, points, settings)
        self.quantities: dict[str, Quantity] = quantities(law, measure)

    @property
    def degrees(self) -> int:
        """Degrees of freedom, n − p."""
        return self.points.size - self.law.count

    @cached_property
    def reference(self) -> float:
        """The temperature that parameters are reported at. [K]"""
        if self.settings.reference is not None:
            return self.settings.reference
        if self.points.low <= STANDARD_TEMPERATURE <= self.points.high:
            return STANDARD_TEMPERATURE
        return self.points.mean

    @property
    def student(self) -> int | None:
        """Degrees of freedom of the limits; None where they are normal."""
        return None if self.settings.known else self.degrees

    @cached_property
    def factor(self) -> float:
        """How many standard uncertainties the limits stand off."""
        return limit_factor(self.settings.level, self.student)

    @property
    def names(self) -> tuple[str, ...]:
        """The names of all quantities."""
        constants = ANTOINE_CONSTANTS if self.law.nonlinear else ()
        return (*constants, *self.quantities)

    def name_of(self, text: str) -> str:
        """The quantity that a typed name means; UnknownQuantity where it means none."""
        return text if text in self.quantities else found_name(text, self.law, dict.fromkeys(self.names))

    def valued(self, name: str) -> Valued:
        """The sum behind a quantity, with its derivatives by the coefficients."""
        s, law = self.solution, self.law
        if law.nonlinear and name in ANTOINE_CONSTANTS:
            return antoine_constants(s.coefficients, s.theta, self.measure, self.settings.scale)[name]
        return valued(self.quantities[name], law, s.coefficients, self.reference, s.theta)

    def value(self, name: str) -> float:
        """A quantity's value alone, by its exact name."""
        value = self.valued(name)[0]
        quantity = self.quantities.get(name)
        return exponential(value) if quantity is not None and quantity.exponential else value

    def u(self, name: str) -> float | None:
        """A quantity's standard uncertainty alone, by its exact name; None where no points are left over."""
        value, gradient = self.valued(name)
        u = self.u_of(gradient)
        quantity = self.quantities.get(name)
        return exponential(value) * u if u is not None and quantity is not None and quantity.exponential else u

    def estimate(self, name: str) -> Estimate:
        """A quantity with its uncertainty and limits, by its exact name."""
        sum_, gradient = self.valued(name)
        u = self.u_of(gradient)
        low = high = None
        if u is not None:
            low, high = sum_ - self.factor * u, sum_ + self.factor * u
        quantity = self.quantities.get(name)
        if quantity is None:
            scale, unit = self.settings.scale, self.measure.unit
            of = {"A": "1", "B": scale, "C": scale}[name]
            log = "ln" if self.measure.scale == "ln" else "lg"
            relation = f"{log}(p/({unit})) = A − B/(C + t), t in {scale}"
            return Estimate(name, name, of, relation, sum_, u, low, high, gradient)
        value = sum_
        if quantity.exponential:
            value = exponential(sum_)
            u = None if u is None else value * u
            low, high = (None if x is None else exponential(x) for x in (low, high))
        return Estimate(name, quantity.symbol, quantity.unit, quantity.relation, value, u, low, high, gradient)

    def u_of(self, gradient: Coefficients) -> float | None:
        """The standard uncertainty of what has these derivatives by the coefficients."""
        variance = self.solution.variance_of(gradient)
        return None if variance is None else math.sqrt(variance)

    def covariance_of(self, one: Coefficients, other: Coefficients) -> float | None:
        """The covariance of two quantities with these derivatives by the coefficients."""
        s = self.solution
        if s.variance is None:
            return None
        terms = [
            a * b * c for a, row in zip(one, s.covariance, strict=True) for b, c in zip(row, other, strict=True)
        ]  # fmt: skip
        return math.fsum(terms) * s.variance

    def correlation(self, one: str, other: str) -> float | None:
        """The correlation of two quantities, by their exact names."""
        first, second = self.valued(one)[1], self.valued(other)[1]
        both, u, v = self.covariance_of(first, second), self.u_of(first), self.u_of(second)
        return None if both is None or not u or not v else max(-1.0, min(1.0, both / (u * v)))

    def log_at(self, temperature: float) -> Valued:
        """The fitted logarithm at a temperature [K], with its derivatives: for Eyring that of K‡."""
        return log_value(self.law, self.solution.coefficients, temperature, self.solution.theta)

    def outside(self, temperature: float) -> float:
        """How far a temperature lies outside the points, negative below them. [K]"""
        if temperature < self.points.low:
            return temperature - self.points.low
        return max(0.0, temperature - self.points.high)


def fit(
    law: str,
    temperatures: Sequence[object],
    values: Sequence[object],
    y_is: str | None = None,
    uncertainties: Sequence[object] | None = None,
    settings: Settings = PLAIN,
) -> Fit:
    """Fit a law to measured points.

    Parameters
    ----------
    law : str. ``van't Hoff``, ``Clarke-Glew``, ``Arrhenius``, ``Eyring``, ``Clausius-Clapeyron`` or ``Antoine``.
    temperatures : sequence (n,). Numbers in the settings' scale or quantity texts; None is blank. [K]
    values : sequence (n,). What ``y_is`` says; None is blank.
    y_is : str or None. ``K``, ``ln K``, ``lg K``, ``pK``, or the unit of a rate constant or a pressure.
    uncertainties : sequence (n,) or None. Standard uncertainties of ``values``, in their unit.
    settings : Settings.

    Returns
    -------
    Fit

    Raises
    ------
    UnknownLaw, UnknownColumn, RequiredHere, OptionsClash
        What is asked for cannot be read, or does not go together.
    DifferentLengths, TextInRange, NotAboveZeroInRange
        A column cannot be used.
    TooFewPoints, PointsDoNotDetermine, NoConvergence
        The points give no fit.

    Examples
    --------
    >>> found = fit("van't Hoff", [290.0, 300.0, 310.0], [1.00, 1.52, 2.23])
    >>> round(found.estimate("drH").value, 1)  # kJ/mol
    30.0
    """
    read = read_law(law)
    if settings.slope:
        if read is not CLARKE_GLEW:
            raise OptionsClash(first="cp_slope", second=f"the law {read.name}", why="it is a term of Clarke-Glew")
        read = CLARKE_GLEW_SLOPE
    measure = read_measure(y_is, read)
    if len(values) <= KEPT_POINTS and {*map(type, temperatures), *map(type, values)} == {float}:
        t, y = cast("tuple[float, ...]", tuple(temperatures)), cast("tuple[float, ...]", tuple(values))
        if uncertainties is None:
            return _kept(read, measure, t, y, None, settings)
        if set(map(type, uncertainties)) == {float}:
            return _kept(read, measure, t, y, cast("tuple[float, ...]", tuple(uncertainties)), settings)
    points = read_points(read, measure, temperatures, values, uncertainties, settings.scale)
    return Fit(read, measure, points, settings)


# Several cells of a sheet ask for parts of one fit; among floats alone equal cells are the same cells.
@lru_cache(maxsize=256)
def _kept(
    law: Law, measure: Measure, t: tuple[float, ...], y: tuple[float, ...], u: tuple[float, ...] | None,
    settings: Settings,
) -> Fit:  # fmt: skip
    points = plain_points(law, measure, t, y) if u is None and settings.scale == "K" else None
    if points is None:
        points = read_points(law, measure, t, y, u, settings.scale)
    return Fit(law, measure, points, settings)
