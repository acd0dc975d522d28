"""Standard properties of reactions, of formation and of substances as functions of temperature.

    ΔrH° = Σ ν H°,  ΔrS° = Σ ν S°,  ΔrG° = ΔrH° − T ΔrS°,  ln K = −ΔrG°/(RT)

(IUPAC Green Book, 3rd ed., 2007, section 2.11). Gases at 1 bar, condensed phases pure, solutes 1 mol/kg.
Every function takes a compiled sum of substances and a temperature in kelvin; with a record it also says
how the number came about.
"""

from __future__ import annotations

import math
from itertools import pairwise

from thermofuncs.combination import Combination, Member
from thermofuncs.errors import NotAFunctionOfData, OutsideDouble, UncertaintyUnknown
from thermofuncs.substances.forms import REFERENCE_TEMPERATURE
from thermofuncs.units import R
from thermofuncs.working import Record, shown

LARGEST_LN_K = math.log(1.7976931348623157e308)
SMALLEST_LN_K = math.log(2.2250738585072014e-308)
LN10 = math.log(10.0)
DEFINITIONS = "IUPAC Green Book, 3rd ed., 2007, section 2.11"


def cautions(table: Combination, temperature: float, record: Record) -> None:
    """Add the cautions that hold at a temperature [K]: extrapolation, and the notes of the data rows."""
    for member, row in table.rows_at(temperature):
        x = member.substance
        if not x.t_low <= temperature <= x.t_high:
            record.caution(
                f"{x.label} is extrapolated with a constant Cp: its data ends at"
                f" {x.t_low if temperature < x.t_low else x.t_high:g} K, and T is {temperature:g} K."
            )
        for note in row.notes_at(temperature):
            record.caution(f"{x.label}: {note}")


def _members(table: Combination, temperature: float, record: Record, *, wanted: str) -> None:
    """Record what each substance contributes, with its data row."""
    for member, row in table.rows_at(temperature):
        single = Combination(
            member.substance.label, [Member(1.0, member.substance)],
            atm=table.atm, extrapolate=table.extrapolate,
        )
        h, s = single.h_and_s(temperature)
        values = {
            "H": (h * R * temperature / 1000, "kJ/mol"),
            "S": (s * R, "J/(mol K)"),
            "Cp": (single.cp(temperature) * R, "J/(mol K)"),
        }
        for letter in wanted.split():
            value, unit = values[letter]
            record.step(
                f"{letter}°({member.substance.label})",
                f"{letter}° of the data row at T",
                f"ν = {member.coefficient:+.12g}, T = {temperature:.12g} K",
                value, unit, str(row.source),
            )
    cautions(table, temperature, record)


def _merged(table: Combination, temperature: float) -> str:
    low, high = table.interval(temperature)
    return f"coefficients merged over {low:.7g} to {high:.7g} K, T = {temperature:.12g} K"


def heat_capacity(table: Combination, temperature: float, record: Record | None = None) -> float:
    """ΔCp°, or Cp° of one substance. [J/(mol K)]

    Parameters
    ----------
    table : Combination.
    temperature : float. [K]
    record : Record, filled where given.
    """
    cp = table.cp(temperature)
    value = cp * R
    if record is not None:
        _members(table, temperature, record, wanted="Cp")
        record.step("ΣνCp°/R", "Σ ν Cp°/R", _merged(table, temperature), cp, "1")
        record.step("ΣνCp°", "R Σ ν Cp°/R", f"{shown(R, 12)} × {shown(cp)}", value, "J/(mol K)", DEFINITIONS)
    return value


def entropy(table: Combination, temperature: float, record: Record | None = None) -> float:
    """ΔS°, or S° of one substance. [J/(mol K)] Parameters as in heat_capacity."""
    table.need_more_than_gibbs("entropy")
    s = table.h_and_s(temperature)[1]
    value = s * R
    if record is not None:
        _members(table, temperature, record, wanted="S")
        record.step("ΣνS°/R", "Σ ν S°/R", _merged(table, temperature), s, "1")
        record.step("ΣνS°", "R Σ ν S°/R", f"{shown(R, 12)} × {shown(s)}", value, "J/(mol K)", DEFINITIONS)
    return value


def enthalpy(table: Combination, temperature: float, record: Record | None = None) -> float:
    """ΔH°. [kJ/mol] Parameters as in heat_capacity."""
    table.need_more_than_gibbs("enthalpy")
    h = table.h_and_s(temperature)[0]
    value = h * R * temperature / 1000
    if record is not None:
        _members(table, temperature, record, wanted="H")
        record.step("ΣνH°/(RT)", "Σ ν H°/(RT)", _merged(table, temperature), h, "1")
        record.step(
            "ΣνH°", "RT Σ ν H°/(RT)", f"{shown(R, 12)} × {temperature:.12g} × {shown(h)} / 1000",
            value, "kJ/mol", DEFINITIONS,
        )
    return value


def enthalpy_increment(table: Combination, temperature: float, record: Record | None = None) -> float:
    """H°(T) − H°(298.15 K). [kJ/mol] Parameters as in heat_capacity."""
    table.need_more_than_gibbs("enthalpy")
    h = table.h_and_s(temperature)[0] * temperature
    h_reference = table.h_and_s(REFERENCE_TEMPERATURE)[0] * REFERENCE_TEMPERATURE
    value = (h - h_reference) * R / 1000
    if record is not None:
        _members(table, temperature, record, wanted="H")
        record.step("H°(T)/R", "H°(T)/R", _merged(table, temperature), h, "K")
        record.step(
            "H°(298.15 K)/R", "H°(298.15 K)/R", _merged(table, REFERENCE_TEMPERATURE), h_reference, "K"
        )
        record.step(
            "H°(T) − H°(298.15 K)", "R [H°(T)/R − H°(298.15 K)/R]",
            f"{shown(R, 12)} × ({shown(h)} − {shown(h_reference)}) / 1000", value, "kJ/mol", DEFINITIONS,
        )
    return value


def gibbs_energy(table: Combination, temperature: float, record: Record | None = None) -> float:
    """ΔG°. [kJ/mol] Parameters as in heat_capacity."""
    value = table.minus_g(temperature) * -R * temperature / 1000
    if record is not None:
        h, s = _terms(table, temperature, record)
        record.step(
            "ΣνG°", "RT [Σ ν H°/(RT) − Σ ν S°/R], summed as one polynomial",
            f"{shown(R, 12)} × {temperature:.12g} × ({shown(h)} − {shown(s)}) / 1000",
            value, "kJ/mol", DEFINITIONS,
        )
    return value


def _terms(table: Combination, temperature: float, record: Record) -> tuple[float, float]:
    """Record Σ ν H°/(RT) and Σ ν S°/R at a temperature [K], and give them."""
    h, s = table.h_and_s(temperature)
    _members(table, temperature, record, wanted="H S")
    record.step("ΣνH°/(RT)", "Σ ν H°/(RT)", _merged(table, temperature), h, "1")
    record.step("ΣνS°/R", "Σ ν S°/R", _merged(table, temperature), s, "1")
    return h, s


def ln_k(table: Combination, temperature: float, record: Record | None = None) -> float:
    """Natural logarithm of the standard equilibrium constant.

    Parameters
    ----------
    table : Combination. A reaction.
    temperature : float. [K]
    record : Record, filled where given: also with the slope of ln K, and with what the Gibbs energy at
        298.15 K would have given had it been held constant.
    """
    value = table.minus_g(temperature)
    if record is not None:
        h, s = _terms(table, temperature, record)
        _slope_and_frozen(table, temperature, record, h, value)
        record.step(
            "ln K", "ΔrS°/R − ΔrH°/(RT), summed as one polynomial", f"{shown(s)} − {shown(h)}", value, "1",
            DEFINITIONS,
        )
    return value


def _slope_and_frozen(
    table: Combination, temperature: float, record: Record, h: float, value: float
) -> None:
    if table.only_gibbs:
        return
    slope = h / temperature
    word = "rises" if slope > 0 else "falls" if slope < 0 else "does not move"
    sign = "positive" if slope > 0 else "negative" if slope < 0 else "zero"
    record.step(
        "d ln K/dT",
        f"ΔrH°/(RT²): ΔrH° is {sign} here, so K {word} with temperature",
        f"{shown(h)} / {temperature:.12g}", slope, "1/K", "van 't Hoff equation",
    )
    if not table.t_low <= REFERENCE_TEMPERATURE <= table.t_high:
        return
    h0, s0 = table.h_and_s(REFERENCE_TEMPERATURE)
    frozen = (s0 - h0) * REFERENCE_TEMPERATURE / temperature
    factor = (frozen - value) / LN10
    record.step(
        "ln K, were ΔrG°(298.15 K) held constant",
        f"−ΔrG°(298.15 K)/(RT), for comparison only: K would be off by a factor of 10^{factor:+.3f}",
        f"{shown(s0 - h0)} × 298.15 / {temperature:.12g}", frozen, "1",
        "not used: ΔrG° changes with temperature",
    )


def lg_k(table: Combination, temperature: float, record: Record | None = None) -> float:
    """Decadic logarithm of the standard equilibrium constant. Parameters as in ln_k."""
    natural = ln_k(table, temperature, record)
    value = natural / LN10
    if record is not None:
        record.step("lg K", "ln K / ln 10", f"{shown(natural)} / {LN10:.12g}", value, "1")
    return value


def outside_double(natural: float) -> OutsideDouble:
    """The error for a K, of natural logarithm ``natural``, that no number can hold."""
    where = "above" if natural > 0 else "below"
    return OutsideDouble(what="K", lnk=f"{natural:.6g}", where=where, use="LNK")


def equilibrium_constant(table: Combination, temperature: float, record: Record | None = None) -> float:
    """The standard equilibrium constant. Parameters as in ln_k.

    Raises
    ------
    OutsideDouble: K is too large or too small for a number in a cell.
    """
    natural = ln_k(table, temperature, record)
    if not SMALLEST_LN_K <= natural <= LARGEST_LN_K:
        raise outside_double(natural)
    value = math.exp(natural)
    if record is not None:
        record.step("K", "exp(ln K)", f"exp({shown(natural)})", value, "1")
    return value


def u_ln_k(table: Combination, temperature: float, record: Record | None = None) -> float:
    """Standard uncertainty of ln K from the uncertainties of ΔfH° and S° in the data rows.

    u² = Σ ν² {[u(ΔfH°)/(RT)]² + [u(S°)/R]²}, the rows taken as independent (JCGM 100:2008, eq. 10).
    Parameters as in ln_k.

    Raises
    ------
    UncertaintyUnknown: a row does not state it.
    """
    table.at(temperature)
    if all(not row.composition for _, row in table.rows_at(temperature)):
        raise NotAFunctionOfData(what=table.label)
    parts: list[float] = []
    for member, row in table.rows_at(temperature):
        for name, u in (("ΔfH°", row.u_formation_enthalpy), ("S°", row.u_entropy)):
            if u.kind == "unknown":
                raise UncertaintyUnknown(property=name, substance=member.substance.label)
        contributions = (
            ("u(ΔfH°)", row.u_formation_enthalpy.value, member.coefficient / (R * temperature), "J/mol"),
            ("u(S°)", row.u_entropy.value, member.coefficient / R, "J/(mol K)"),
        )
        for name, u_value, sensitivity, unit in contributions:
            parts.append(u_value * sensitivity)
            if record is not None:
                record.step(
                    f"{name} of {member.substance.label}", "as the data row states it",
                    f"sensitivity of ln K {shown(sensitivity)}", u_value, unit, str(row.source),
                )
    value = math.hypot(*parts)
    if record is not None:
        cautions(table, temperature, record)
        record.step(
            "u(ln K)", "√Σ (sensitivity × u)²", f"{len(parts)} contributions", value, "1",
            "JCGM 100:2008, eq. 10, inputs independent",
        )
        record.caution("u(ln K) takes the data rows as independent and the heat capacities as exact.")
    return value


def extremes_and_samples(table: Combination, low: float, high: float) -> list[float]:
    """Temperatures between which ln K is smooth and close to monotonic, ends and joints included. [K]"""
    joints = [low, *(t for t in table.uppers if low < t < high), high]
    points: list[float] = []
    for a, b in pairwise(joints):
        count = max(4, math.ceil(48 * math.log(b / a)))
        points += [a * (b / a) ** (i / count) for i in range(count)]
    return [*points, high]


def equilibrium_temperatures(
    table: Combination, ln_k_wanted: float, low: float, high: float
) -> list[float]:
    """Every temperature between two limits at which ln K has a value, ascending. [K]

    Parameters
    ----------
    table : Combination. A reaction.
    ln_k_wanted : float.
    low, high : float. Limits within the data's range. [K]
    """
    table.need_more_than_gibbs("temperature dependence")
    from scipy.optimize import brentq  # noqa: PLC0415  heavy, and only a search needs it

    def difference(t: float) -> float:
        return table.minus_g(t) - ln_k_wanted

    def slope(t: float) -> float:
        return table.h_and_s(t)[0]

    points = extremes_and_samples(table, low, high)
    slopes = [slope(t) for t in points]
    turning = [
        brentq(slope, a, b, xtol=1e-9)
        for a, b, x, y in zip(points, points[1:], slopes, slopes[1:], strict=False)
        if x * y < 0
    ]
    points = sorted({*points, *turning})
    values = [difference(t) for t in points]
    roots = [t for t, v in zip(points, values, strict=True) if v == 0.0]
    roots += [
        brentq(difference, a, b, xtol=1e-12, rtol=1e-15)
        for a, b, x, y in zip(points, points[1:], values, values[1:], strict=False)
        if x * y < 0
    ]
    return sorted(roots)
