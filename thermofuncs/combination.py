"""A weighted sum of substances merged into one table of coefficients over the temperature.

A reaction, a formation from the elements and a single substance are all such sums. The table is
compiled once; a temperature then costs one search and one polynomial, whatever the number of substances.
A temperature on the joint of two intervals belongs to the lower one.
"""

from __future__ import annotations

import math
from bisect import bisect_left
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from thermofuncs.errors import NothingToExtrapolate, OnlyGibbsEnergy, OutsideRange
from thermofuncs.substances.forms import Interval, anchored, enthalpy, entropy, heat_capacity
from thermofuncs.substances.records import Segment, Substance, SubstanceRow

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Array = NDArray[np.float64]
    Formula = Callable[["Coefficients", Array], Array]

CHUNK = 10_000  # temperatures at a time: the arrays of one chunk stay in the cache of the processor
STANDARD_EXPONENTS = (-2.0, -1.0, 0.0, 1.0, 2.0, 3.0, 4.0)
EXTRAPOLATION_LIMITS = (1.0, 20000.0)
ATM_IN_BAR = 1.01325
NARROWEST = 2.0  # a row with a narrower range is a value at one temperature, with no Cp to continue [K]


@dataclass(frozen=True, slots=True)
class Member:
    """A substance and its coefficient in the sum."""

    coefficient: float
    substance: Substance


@dataclass(frozen=True, slots=True)
class Coefficients:
    """The merged coefficients of one interval.

    Parameters
    ----------
    cp, h, s : tuple of 7. Of Cp/R, H/(RT) and S/R, by the exponents −2 to 4, already divided.
    b1, b2 : float. Integration constants of H/R [K] and S/R.
    others : tuple of (exponent, coefficient of Cp/R) for exponents beyond those seven.
    """

    cp: tuple[float, ...]
    h: tuple[float, ...]
    s: tuple[float, ...]
    b1: float
    b2: float
    others: tuple[tuple[float, float], ...]


def merged(terms: dict[float, float], b1: float, b2: float) -> Coefficients:
    """Coefficients from the terms of Cp/R and the integration constants."""
    a = [terms.pop(n, 0.0) for n in STANDARD_EXPONENTS]
    h = (-a[0], a[1], a[2], a[3] / 2, a[4] / 3, a[5] / 4, a[6] / 5)
    s = (-a[0] / 2, -a[1], a[2], a[3], a[4] / 2, a[5] / 3, a[6] / 4)
    others = tuple((n, c) for n, c in sorted(terms.items()) if c != 0.0)
    return Coefficients(tuple(a), h, s, b1, b2, others)


class Combination:
    """A weighted sum of substances, compiled.

    Parameters
    ----------
    label : str. What is shown.
    members : sequence of Member.
    atm : bool. Gases at a standard pressure of 1 atm instead of 1 bar.
    extrapolate : bool. Continue each substance with a constant Cp from the end of its range.
    """

    def __init__(
        self, label: str, members: Sequence[Member], *, atm: bool = False, extrapolate: bool = False
    ) -> None:
        self.label = label
        self.members = tuple(members)
        self.atm = atm
        self.extrapolate = extrapolate
        self.data_low = max(m.substance.t_low for m in members)
        self.data_high = min(m.substance.t_high for m in members)
        self.gas_moles = math.fsum(m.coefficient for m in members if m.substance.phase == "g")
        self.only_gibbs = next(
            (m.substance.label for m in members if any(x.row.gibbs_only for x in m.substance.segments)), ""
        )
        stretches = [(m, self._stretches(m.substance)) for m in members]
        low, high = EXTRAPOLATION_LIMITS if extrapolate else (self.data_low, self.data_high)
        if low >= high:
            raise OutsideRange(argument="T", what=label, given="any temperature", ranges=self._ranges())
        joints = {interval.t_high for _, parts in stretches for interval, _ in parts}
        self.t_low = low
        self.uppers = [t for t in sorted(joints) if low < t < high] + [high]
        self.table = [
            self._merge(stretches, 0.5 * (a + b))
            for a, b in zip([low, *self.uppers[:-1]], self.uppers, strict=True)
        ]

    @property
    def t_high(self) -> float:
        """Upper limit of the common range. [K]"""
        return self.uppers[-1]

    def _stretches(self, substance: Substance) -> list[tuple[Interval, Segment]]:
        """The intervals of a substance over its segments, cut to them, and continued where asked."""
        parts: list[tuple[Interval, Segment]] = []
        for segment in substance.segments:
            for x in segment.row.intervals:
                low, high = max(x.t_low, segment.t_low), min(x.t_high, segment.t_high)
                if low < high:
                    parts.append((Interval(low, high, x.terms, x.b1, x.b2), segment))
        first, last = parts[0][0], parts[-1][0]
        if self.extrapolate:
            if substance.t_high - substance.t_low < NARROWEST:
                raise NothingToExtrapolate(substance=substance.label, at=f"{substance.t_low:g} to {substance.t_high:g}")
            below = continued(first, first.t_low, EXTRAPOLATION_LIMITS[0], first.t_low)
            above = continued(last, last.t_high, last.t_high, EXTRAPOLATION_LIMITS[1])
            parts = [(below, substance.segments[0]), *parts, (above, substance.segments[-1])]
        return parts

    def _merge(
        self, stretches: list[tuple[Member, list[tuple[Interval, Segment]]]], middle: float
    ) -> Coefficients:
        terms: dict[float, float] = {}
        b1: list[float] = []
        b2: list[float] = []
        for member, parts in stretches:
            interval = next(x for x, _ in parts if x.t_low <= middle <= x.t_high)
            for n, c in interval.terms:
                terms[n] = terms.get(n, 0.0) + member.coefficient * c
            b1.append(member.coefficient * interval.b1)
            b2.append(member.coefficient * interval.b2)
            if self.atm and member.substance.phase == "g":
                b2.append(-member.coefficient * math.log(ATM_IN_BAR))
        return merged(terms, math.fsum(b1), math.fsum(b2))

    def _ranges(self) -> str:
        """The range of each substance, for a sentence."""
        return "; ".join(
            f"{m.substance.label} {m.substance.t_low:g} to {m.substance.t_high:g} K"
            + (f", where it {m.substance.stops}" if m.substance.stops else "")
            for m in self.members
        )

    def outside(self, temperature: float) -> OutsideRange:
        """The error for a temperature [K] outside the range."""
        remark = (
            f' {temperature:g} looks like degrees Celsius: write "{temperature:g} degC".'
            if 0 <= temperature < min(self.data_low, 200.0)
            and self.data_low <= temperature + 273.15 <= self.data_high
            else ""
        )
        limits = f"{self.t_low:g} to {self.t_high:g} K"
        ranges = limits if len(self.members) == 1 and not self.members[0].substance.stops else (
            f"{limits} ({self._ranges()})"
        )
        return OutsideRange(
            argument="T", what=self.label, given=f"{temperature:g} K", ranges=ranges + "." + remark
        )

    def at(self, temperature: float) -> Coefficients:
        """The coefficients that hold at a temperature [K]; OutsideRange where none do."""
        if not self.t_low <= temperature <= self.uppers[-1]:
            raise self.outside(temperature)
        return self.table[bisect_left(self.uppers, temperature)]

    def need_more_than_gibbs(self, name: str) -> None:
        """Refuse a property of a sum in which a substance has a Gibbs energy alone."""
        if self.only_gibbs:
            raise OnlyGibbsEnergy(substance=self.only_gibbs, property=name)

    def interval(self, temperature: float) -> tuple[float, float]:
        """Limits of the merged interval at a temperature. [K]"""
        i = bisect_left(self.uppers, temperature)
        return (self.uppers[i - 1] if i else self.t_low), self.uppers[i]

    def cp(self, temperature: float) -> float:
        """Cp/R at a temperature [K]."""
        self.need_more_than_gibbs("heat capacity")
        c = self.at(temperature)
        a1, a2, a3, a4, a5, a6, a7 = c.cp
        r = 1.0 / temperature
        value = (a1 * r + a2) * r + a3
        value += temperature * (a4 + temperature * (a5 + temperature * (a6 + temperature * a7)))
        for n, x in c.others:
            value += x * temperature**n
        return value

    def h_and_s(self, temperature: float) -> tuple[float, float]:
        """H/(RT) and S/R at a temperature [K]."""
        c = self.at(temperature)
        log, r = math.log(temperature), 1.0 / temperature
        a1, a2, a3, a4, a5, a6, a7 = c.h
        h = (a2 * log + a1 * r + c.b1) * r + a3
        h += temperature * (a4 + temperature * (a5 + temperature * (a6 + temperature * a7)))
        a1, a2, a3, a4, a5, a6, a7 = c.s
        s = (a1 * r + a2) * r + a3 * log + c.b2
        s += temperature * (a4 + temperature * (a5 + temperature * (a6 + temperature * a7)))
        for n, x in c.others:
            power = x * temperature**n
            h += power / (n + 1)
            s += power / n
        return h, s

    def minus_g(self, temperature: float) -> float:
        """−G/(RT) at a temperature [K], which is ln K for a reaction: S/R − H/(RT) as one polynomial.

        The operations are those of the array path in their order, so that both give the same bits wherever
        both logarithms do.
        """
        c = self.at(temperature)
        a1, a2, a3, a4, a5, a6, a7 = c.cp
        log, r = math.log(temperature), 1.0 / temperature
        value = temperature * (a7 / 20)
        value = (value + a6 / 12) * temperature
        value = (value + a5 / 6) * temperature
        value = (value + a4 / 2) * temperature
        value += (c.b2 - a3) + a3 * log
        value += r * ((a1 / 2) * r - (a2 + c.b1) - a2 * log)
        for n, x in c.others:
            value += x / (n * (n + 1)) * temperature**n
        return value

    def _by_interval(self, temperatures: Array, formula: Formula) -> Array:
        """Apply a formula over a flat array, chunk by chunk and interval by interval."""
        import numpy as np  # noqa: PLC0415  a bare import of the engine does not load the array path

        result = np.empty_like(temperatures)
        low, high = self.t_low, self.uppers[-1]
        for start in range(0, temperatures.size, CHUNK):
            t = temperatures[start : start + CHUNK]
            out = result[start : start + CHUNK]
            t_min, t_max = float(t.min()), float(t.max())
            if not (low <= t_min and t_max <= high):
                raise self.outside(t_min if not low <= t_min else t_max)
            first, last = bisect_left(self.uppers, t_min), bisect_left(self.uppers, t_max)
            if first == last:
                out[:] = formula(self.table[first], t)
                continue
            for i in range(first, last + 1):
                inside = t <= self.uppers[i]
                if i > first:
                    inside &= t > self.uppers[i - 1]
                places = np.flatnonzero(inside)
                out[places] = formula(self.table[i], t.take(places))
        return result

    def cp_array(self, temperatures: Array) -> Array:
        """Cp/R over a flat array of temperatures [K]."""
        self.need_more_than_gibbs("heat capacity")
        return self._by_interval(temperatures, _cp_array)

    def h_array(self, temperatures: Array) -> Array:
        """H/(RT) over a flat array of temperatures [K]."""
        self.need_more_than_gibbs("enthalpy")
        return self._by_interval(temperatures, _h_array)

    def s_array(self, temperatures: Array) -> Array:
        """S/R over a flat array of temperatures [K]."""
        self.need_more_than_gibbs("entropy")
        return self._by_interval(temperatures, _s_array)

    def minus_g_array(self, temperatures: Array) -> Array:
        """−G/(RT) over a flat array of temperatures [K], which is ln K for a reaction."""
        return self._by_interval(temperatures, _minus_g_array)

    def rows_at(self, temperature: float) -> list[tuple[Member, SubstanceRow]]:
        """Each member with the data row that it is at a temperature [K]."""
        found = []
        for m in self.members:
            segments = m.substance.segments
            row = next((s.row for s in segments if temperature <= s.t_high), segments[-1].row)
            found.append((m, row))
        return found


def continued(interval: Interval, at: float, t_low: float, t_high: float) -> Interval:
    """An interval continued with the constant Cp of one of its ends.

    Parameters
    ----------
    interval : Interval.
    at : float. The end that is continued. [K]
    t_low, t_high : float. Limits of the continuation. [K]
    """
    cp = heat_capacity(interval, at)
    terms = ((0.0, cp),)
    return anchored(t_low, t_high, terms, enthalpy(interval, at) * at, entropy(interval, at), at)


def _cp_array(c: Coefficients, t: Array) -> Array:
    """Cp/R of one interval."""
    a1, a2, a3, a4, a5, a6, a7 = c.cp
    r = 1.0 / t
    value: Array = (a1 * r + a2) * r + a3
    value += t * (a4 + t * (a5 + t * (a6 + t * a7)))
    for n, x in c.others:
        value += x * t**n
    return value


def _h_array(c: Coefficients, t: Array) -> Array:
    """H/(RT) of one interval."""
    import numpy as np  # noqa: PLC0415  as above

    a1, a2, a3, a4, a5, a6, a7 = c.h
    r = 1.0 / t
    value: Array = (a2 * np.log(t) + a1 * r + c.b1) * r + a3
    value += t * (a4 + t * (a5 + t * (a6 + t * a7)))
    for n, x in c.others:
        value += x * t**n / (n + 1)
    return value


def _s_array(c: Coefficients, t: Array) -> Array:
    """S/R of one interval."""
    import numpy as np  # noqa: PLC0415  as above

    a1, a2, a3, a4, a5, a6, a7 = c.s
    r = 1.0 / t
    value: Array = (a1 * r + a2) * r + a3 * np.log(t) + c.b2
    value += t * (a4 + t * (a5 + t * (a6 + t * a7)))
    for n, x in c.others:
        value += x * t**n / n
    return value


def _minus_g_array(c: Coefficients, t: Array) -> Array:
    """S/R − H/(RT) as one polynomial: half the work of the two."""
    import numpy as np  # noqa: PLC0415  as above

    a1, a2, a3, a4, a5, a6, a7 = c.cp
    log, r = np.log(t), 1.0 / t
    value: Array = t * (a7 / 20)
    for a in (a6 / 12, a5 / 6, a4 / 2):
        value += a
        value *= t
    part = a3 * log
    part += c.b2 - a3
    value += part
    part = (a1 / 2) * r
    part -= a2 + c.b1
    part -= a2 * log
    part *= r
    value += part
    for n, x in c.others:
        value += x / (n * (n + 1)) * t**n
    return value
