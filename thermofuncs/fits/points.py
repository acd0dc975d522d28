"""The measured points of a fit: read from columns, blanks left out, in one canonical order."""

from __future__ import annotations

import math
from collections.abc import Sequence
from math import isfinite
from operator import lt
from typing import NamedTuple

from thermofuncs.errors import (
    DifferentLengths,
    NotAboveZeroInRange,
    OutsideNumbers,
    TextInRange,
    TooFewPoints,
)
from thermofuncs.fits.laws import Law
from thermofuncs.fits.measures import Measure
from thermofuncs.units import kelvin

Floats = list[float]
COLDEST, HOTTEST = 1e-6, 1e9  # temperatures that squares and reciprocals can be taken of [K]
LARGEST = 1e60  # a logarithm, or its uncertainty, whose weighted square is a number
SMALLEST_U = 1e-60


class Points(NamedTuple):
    """Points in canonical order: by temperature, then value, then uncertainty.

    Parameters
    ----------
    temperatures : sequence of float. [K]
    logs : list of float. The logarithm that the law fits: of K, k or p in the standard unit, for Eyring of K‡.
    u_logs : list of float or None. Standard uncertainties of the logarithms; None where none are given.
    rows : sequence of int. The place of each point among the rows as given.
    given : int. How many rows were given, with those that have a blank.
    """

    temperatures: Sequence[float]
    logs: Floats
    u_logs: Floats | None
    rows: Sequence[int]
    given: int

    @property
    def size(self) -> int:
        """How many points there are."""
        return len(self.temperatures)

    @property
    def left_out(self) -> int:
        """How many rows have a blank."""
        return self.given - self.size

    @property
    def low(self) -> float:
        """Lowest temperature. [K]"""
        return self.temperatures[0]

    @property
    def high(self) -> float:
        """Highest temperature. [K]"""
        return self.temperatures[-1]

    @property
    def mean(self) -> float:
        """The temperature at the mean of 1/T. [K]"""
        return self.size / math.fsum([1.0 / t for t in self.temperatures])


def read_points(
    law: Law,
    measure: Measure,
    temperatures: Sequence[object],
    values: Sequence[object],
    uncertainties: Sequence[object] | None = None,
    scale: str = "K",
) -> Points:
    """The points of columns of cells.

    Parameters
    ----------
    law : Law.
    measure : Measure. What ``values`` holds.
    temperatures, values, uncertainties : sequences. One cell for each point; None or an empty text is blank,
        and a row with a blank is left out. A temperature is a number in ``scale`` or a quantity text.
    scale : str. The scale of bare temperatures.

    Raises
    ------
    DifferentLengths, TextInRange, NotAboveZeroInRange
        The columns do not go together, or a cell cannot be used.
    BelowAbsoluteZero, NotAQuantity, WrongDimension, UnknownUnit
        A temperature cannot be read.
    TooFewPoints
        There are not as many different temperatures as the law has parameters.
    """
    n = len(temperatures)
    columns = [("T", temperatures), ("y", values)]
    if uncertainties is not None:
        columns.append(("u", uncertainties))
    for name, column in columns[1:]:
        if len(column) != n:
            raise DifferentLengths(first="T", n_first=n, second=name, n_second=len(column))
    kept = [i for i in range(n) if not any(c[i] is None or c[i] == "" for _, c in columns)]
    t = _temperatures(temperatures, kept, scale)
    y = _numbers("y", values, kept)
    u = None if uncertainties is None else _numbers("u", uncertainties, kept)
    if measure.scale == "value":
        _positive("y", y, kept, measure.symbol, ", as its logarithm is taken")
    if u is not None:
        _positive("u", u, kept, "a standard uncertainty", "")
    if t and (min(t) <= COLDEST or max(t) >= HOTTEST):
        raise OutsideNumbers(what="T", detail=f", {min(t):g} to {max(t):g} K", remedy="Check the unit of T.")
    order = sorted(range(len(t)), key=lambda i: (t[i], y[i], u[i] if u is not None else 0.0, kept[i]))
    t, y = [t[i] for i in order], [y[i] for i in order]
    u_logs = None if u is None else [measure.u_ln(b, u[i]) for i, b in zip(order, y, strict=True)]
    return _logarithms(law, measure, t, y, u_logs, [kept[i] for i in order], n)


def plain_points(law: Law, measure: Measure, temperatures: Sequence[float], values: Sequence[float]) -> Points | None:
    """The points of two columns of floats, in kelvin, without a look at each; None where one is no good number."""
    t, y, rows = temperatures, values, range(len(values))
    if len(t) != len(y):
        return None
    if not all(map(lt, t, t[1:])):
        t, y, rows = zip(*sorted(zip(t, y, rows)))  # type: ignore[assignment]  # noqa: B905  of one length
    # a sum that is finite has finite terms
    if not t or t[0] <= COLDEST or t[-1] >= HOTTEST or not isfinite(sum(t) + sum(y)):
        return None
    if measure.scale == "value" and min(y) <= 0.0:
        return None
    return _logarithms(law, measure, t, y, None, rows, len(rows))


def _logarithms(
    law: Law, measure: Measure, t: Sequence[float], y: Sequence[float], u_logs: Floats | None,
    rows: Sequence[int], given: int,
) -> Points:
    """The points of sorted columns."""
    if not t or t[0] == t[-1] or (law.count > 2 and len(set(t)) < law.count):
        distinct = len(set(t))
        different = f"{len(t)} point{_s(len(t))} at {distinct} temperature{_s(distinct)}"
        if len(t) < given:
            different += f" (rows with a blank left out: {given - len(t)})"
        remedy = (
            "Measure at another temperature." if law.count == 2
            else "Measure at more temperatures, or fit a law with fewer parameters."
        )  # fmt: skip
        raise TooFewPoints(law=law.name, parameters=law.count, given=different, remedy=remedy)
    logs = list(map(math.log if measure.is_plain else measure.to_ln, y))
    if measure.scale != "value" and not max(map(abs, logs)) < LARGEST:
        raise OutsideNumbers(what="y", detail=f", {min(y):g} to {max(y):g}", remedy="Check what y_is says of y.")
    if u_logs is not None and (min(u_logs) <= SMALLEST_U or max(u_logs) >= LARGEST):
        raise OutsideNumbers(
            what="u", detail=f": as uncertainty of the logarithm {min(u_logs):g} to {max(u_logs):g}",
            remedy="Check that u is in the unit of y.",
        )  # fmt: skip
    if law.family == "Eyring":
        logs = [a - law.offset(b) for a, b in zip(logs, t, strict=True)]
    return Points(t, logs, u_logs, rows, given)


def _s(number: int) -> str:
    return "" if number == 1 else "s"


def _numbers(argument: str, column: Sequence[object], kept: Sequence[int]) -> Floats:
    """The kept cells of a column as finite numbers."""
    numbers = []
    for i in kept:
        cell = column[i]
        if isinstance(cell, bool) or not isinstance(cell, int | float) or not isfinite(cell):
            raise TextInRange(argument=argument, place=i + 1, given=repr(cell))
        numbers.append(float(cell))
    return numbers


def _temperatures(column: Sequence[object], kept: Sequence[int], scale: str) -> Floats:
    """The kept cells of a column as temperatures. [K]"""
    found = []
    for i in kept:
        cell = column[i]
        if isinstance(cell, bool) or not isinstance(cell, int | float | str):
            raise TextInRange(argument="T", place=i + 1, given=repr(cell))
        found.append(kelvin(cell if isinstance(cell, str) else float(cell), f"T, cell number {i + 1},", scale))
    return found


def _positive(argument: str, numbers: Floats, kept: Sequence[int], what: str, why: str) -> None:
    """Refuse a number that is not above zero."""
    for place, number in zip(kept, numbers, strict=True):
        if not number > 0.0:
            given = f"{number:g}"
            raise NotAboveZeroInRange(argument=argument, given=given, place=place + 1, what=what, why=why)
