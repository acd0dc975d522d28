"""Vapour pressure from published constants, and the temperature that has a vapour pressure.

    Antoine:        log p = A − B/(C + t)          (Antoine, C. R. Acad. Sci. 107 (1888) 681, from memory)
    five-constant:  ln p = C1 + C2/T + C3 ln T + C4 T^C5, p in Pa, T in K
                    (Perry's Chemical Engineers' Handbook, 8th ed., 2008, Table 2-8)

The name of a form says the logarithm and the units, because published constants differ in all three.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache

from thermofuncs.errors import (
    NotAboveZero,
    NoVapourPressure,
    OutsideConstantsRange,
    ThermofuncsError,
    UnknownVapourForm,
    WrongCount,
)
from thermofuncs.relations import finite, from_logarithm, numbers
from thermofuncs.unit_spellings import read_unit
from thermofuncs.units import convert, factor, kelvin
from thermofuncs.working import Record, shown

ANTOINE = "Antoine equation"
FIVE_CONSTANT = "five-constant correlation, Perry's Chemical Engineers' Handbook, 8th ed., Table 2-8"
LN10 = math.log(10.0)
REMEDY = "Check the constants against the form."
SEARCH = (10.0, 4000.0, 400)  # lowest and highest temperature [K] of the search, and its points


@dataclass(frozen=True, slots=True)
class Form:
    """A vapour-pressure form.

    Parameters
    ----------
    name : Antoine or five-constant.
    logarithm : lg or ln.
    pressure : str. The unit of p in the logarithm.
    temperature : str. The scale of t.
    """

    name: str
    logarithm: str
    pressure: str
    temperature: str

    @property
    def count(self) -> int:
        """How many constants the form has."""
        return 3 if self.name == "Antoine" else 5


@lru_cache(maxsize=256)
def read_form(text: str) -> Form:
    """The form that a text names, such as ``Antoine lg mmHg degC`` or ``five-constant``.

    Raises
    ------
    UnknownVapourForm
        The text names no form; the sentence says which word is not understood.
    """
    words = text.split()
    if [word.casefold() for word in words] == ["five-constant"]:
        return Form("five-constant", "ln", "Pa", "K")
    if len(words) < 4 or words[0].casefold() != "antoine":
        raise UnknownVapourForm(given=text, why="which is not a form")
    logarithm = words[1]
    if logarithm not in {"lg", "ln"}:
        raise UnknownVapourForm(given=text, why=f"where {logarithm} should be lg (decadic) or ln (natural)")
    pressure, temperature = " ".join(words[2:-1]), words[-1]
    for unit, needed in ((pressure, "pressure"), (temperature, "temperature")):
        try:
            measured = read_unit(unit, "form").dimension
        except ThermofuncsError as error:
            raise UnknownVapourForm(given=text, why=f"where {unit} is no unit of {needed}") from error
        if measured != needed:
            raise UnknownVapourForm(given=text, why=f"where {unit} is no unit of {needed}")
    return Form("Antoine", logarithm, pressure, read_unit(temperature).spelling)


def _constants(form: Form, cells: Sequence[object], t: float | None, record: Record | None) -> list[float]:
    """The constants of a form, with its temperature range checked where it stands behind them."""
    values = numbers(cells, "constants")
    if len(values) not in {form.count, form.count + 2}:
        limits = f"with the lowest and highest temperature in {form.temperature}"
        needed = f"{form.count}, or {form.count + 2} {limits},"
        raise WrongCount(argument="constants", given=len(values), needed=needed)
    if form.name == "Antoine" and values[1] <= 0.0:
        raise NoVapourPressure(
            what="constants",
            why="B is not positive, and this form is A − B/(C + t): give B with the other sign.",
        )
    if len(values) > form.count:
        low, high = (kelvin(limit, "constants", form.temperature) for limit in values[form.count :])
        if t is not None and not low <= t <= high:
            raise OutsideConstantsRange(given=f"{t:.10g}", low=f"{low:.10g}", high=f"{high:.10g}")
    elif record is not None:
        record.caution(
            "The range of the constants is not given, so an extrapolation cannot be seen: "
            "write its two limits behind the constants."
        )
    return values


def _ln_pressure(c: Sequence[float], temperature: float) -> float:
    """ln(p/Pa) of the five-constant form at a temperature [K]."""
    try:
        power = c[3] * temperature ** c[4]
    except OverflowError:
        power = math.inf
    return finite(c[0] + c[1] / temperature + c[2] * math.log(temperature) + power, "ln p")


def vapour_pressure(form: str, constants: Sequence[object], temperature: float, record: Record | None = None) -> float:
    """The vapour pressure at a temperature.

    Parameters
    ----------
    form : str. ``Antoine``, ``lg`` or ``ln``, a pressure unit and a temperature scale, such as
        ``Antoine lg mmHg degC``; or ``five-constant`` (ln, Pa, K).
    constants : sequence of float. A, B, C, or C1 to C5, as the form's units want them; behind them, where
        known, the lowest and the highest temperature that they hold at, in the form's scale.
    temperature : float. Above 0. [K]
    record : Record, filled where given.

    Returns
    -------
    float. [bar]

    Raises
    ------
    UnknownVapourForm
        The form is not in the closed list.
    WrongCount, BlankInRange, TextInRange
        The constants are not as many numbers as the form has.
    NoVapourPressure, OutsideConstantsRange, OutsideNumbers
        The constants give no pressure at this temperature.

    Examples
    --------
    >>> round(vapour_pressure("Antoine lg mmHg degC", [8.07131, 1730.63, 233.426], 373.15), 4)  # bar
    1.0134
    """
    read = read_form(form)
    values = _constants(read, constants, temperature, record)
    into_bar = factor(read.pressure, "bar")
    if read.name == "five-constant":
        ln_p = _ln_pressure(values, temperature)
        in_form = from_logarithm(ln_p, "The vapour pressure", REMEDY)
        if record is not None:
            c1, c2, c3, c4, c5 = (shown(value, 12) for value in values[:5])
            at = f"{temperature:.12g}"
            text = f"{c1} + {c2}/{at} + {c3} × ln {at} + {c4} × {at}^{c5}"
            record.step("ln(p/Pa)", "C1 + C2/T + C3 ln T + C4 T^C5", text, ln_p, "1", FIVE_CONSTANT)
            record.step("p", "exp(ln p)", f"exp({shown(ln_p)})", in_form, "Pa", FIVE_CONSTANT)
    else:
        t = convert(temperature, "K", read.temperature, "t")
        a, b, c = values[:3]
        if c + t <= 0.0:
            raise NoVapourPressure(
                what="t",
                why=f"C + t is {c + t:.6g} and must be positive: check the scale of t in the form and C.",
            )
        logarithm = finite(a - b / (c + t), "The logarithm of the vapour pressure")
        ln_p = logarithm * LN10 if read.logarithm == "lg" else logarithm
        in_form = from_logarithm(ln_p, "The vapour pressure", REMEDY)
        if record is not None:
            symbol = f"{read.logarithm}(p/{read.pressure})"
            text = f"{shown(a, 12)} − {shown(b, 12)} / ({shown(c, 12)} + {shown(t, 12)})"
            record.step("t", "t in the scale of the form", f"{temperature:.12g} K", t, read.temperature)
            record.step(symbol, "A − B/(C + t)", text, logarithm, "1", ANTOINE)
            inverse = f"10^{symbol}" if read.logarithm == "lg" else f"exp({symbol})"
            record.step("p", inverse, shown(logarithm), in_form, read.pressure, ANTOINE)
    value = in_form * into_bar
    if record is not None:
        record.step("p", "p × factor", f"{shown(in_form)} × {into_bar:.15g}", value, "bar")
    return value


def vapour_temperature(form: str, constants: Sequence[object], pressure: float, record: Record | None = None) -> float:
    """The temperature at which the vapour pressure has a value.

    Parameters
    ----------
    form, constants : as in vapour_pressure.
    pressure : float. Above 0. [bar]
    record : Record, filled where given.

    Returns
    -------
    float. In closed form for Antoine; for five constants the root of ln p(T) − ln p with the vapour
    pressure rising, the lowest where there are several. [K]

    Raises
    ------
    NotAboveZero
        The pressure is not positive.
    NoVapourPressure, OutsideConstantsRange
        No temperature has this pressure.
    UnknownVapourForm, WrongCount, BlankInRange, TextInRange
        As in vapour_pressure.

    Examples
    --------
    >>> round(vapour_temperature("Antoine lg mmHg degC", [8.07131, 1730.63, 233.426], 1.01325), 2)  # K
    373.15
    """
    if pressure <= 0.0:
        raise NotAboveZero(argument="p", given=f"{pressure:.6g} bar", what="a pressure")
    read = read_form(form)
    values = _constants(read, constants, None, record)
    into_form = factor("bar", read.pressure)
    in_form = finite(pressure * into_form, "p")
    if record is not None:
        record.step("p", "p × factor", f"{pressure:.12g} × {into_form:.15g}", in_form, read.pressure)
    if read.name == "five-constant":
        value = _root(values, math.log(in_form), record)
    else:
        value = _antoine_temperature(read, values, in_form, record)
    _constants(read, values, value, None)
    return value


def _antoine_temperature(read: Form, values: list[float], in_form: float, record: Record | None) -> float:
    """The temperature [K] of B/(A − log p) − C."""
    a, b, c = values[:3]
    logarithm = math.log10(in_form) if read.logarithm == "lg" else math.log(in_form)
    if logarithm >= a:
        raise NoVapourPressure(
            what="p",
            why=f"{in_form:.6g} {read.pressure} is at or above the limit of the constants, where log p = A.",
        )
    t = b / (a - logarithm) - c
    value = kelvin(t, "the temperature of p", read.temperature)
    if record is not None:
        text = f"{shown(b, 12)} / ({shown(a, 12)} − {shown(logarithm, 12)}) − {shown(c, 12)}"
        record.step("t", "B/(A − log p) − C", text, t, read.temperature, ANTOINE)
        record.step("T", "t in kelvin", f"{t:.12g} {read.temperature}", value, "K")
    return value


def _root(values: list[float], ln_p: float, record: Record | None) -> float:
    """The lowest temperature [K] at which ln p of five constants rises through a value."""
    # scipy.optimize is heavy, and only this search needs it
    from scipy.optimize import brentq  # noqa: PLC0415

    low, high, count = SEARCH
    if len(values) > 5:
        low, high = values[5:7]
    points = [low * (high / low) ** (i / count) for i in range(count)] + [high]

    def difference(temperature: float) -> float:
        return _ln_pressure(values, temperature) - ln_p

    heights = [difference(t) for t in points]
    rising = [(t, u) for t, u, x, y in zip(points, points[1:], heights, heights[1:], strict=False) if x <= 0.0 < y]
    if not rising and heights[-1] != 0.0:
        raise NoVapourPressure(what="p", why=f"no temperature from {low:.6g} to {high:.6g} K has this vapour pressure.")
    value = float(brentq(difference, *rising[0], xtol=1e-10, rtol=1e-14)) if rising else high
    if record is not None:
        if len(rising) > 1:
            record.caution(f"The vapour pressure has this value {len(rising)} times; the lowest is given.")
        text = f"ln p = {shown(ln_p)}, between {low:.6g} and {high:.6g} K"
        record.step("T", "root of C1 + C2/T + C3 ln T + C4 T^C5 = ln p", text, value, "K", FIVE_CONSTANT)
    return value
