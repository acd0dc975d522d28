"""Relations between typed reaction properties: ΔrG°, ln K, ΔrH°, ΔrS°, ΔrCp°, and sums over a reaction.

    ln K = −ΔrG°/(RT),  ΔrG° = ΔrH° − T ΔrS°,  d ln K/dT = ΔrH°/(RT²)

(IUPAC Green Book, 3rd ed., 2007, section 2.11). Nothing is looked up here: each number comes from a cell,
and what a cell cannot show, such as the temperature that a Gibbs energy belongs to, is asked for.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

from thermofuncs.errors import (
    BlankInRange,
    DifferentLengths,
    GibbsEnergyOfAnotherTemperature,
    OutsideNumbers,
    TextInRange,
)
from thermofuncs.units import R
from thermofuncs.working import Record, shown

DEFINITIONS = "IUPAC Green Book, 3rd ed., 2007, section 2.11"
KIRCHHOFF = "Kirchhoff's law with constant ΔrCp°, and " + DEFINITIONS
VAN_T_HOFF = "van 't Hoff equation integrated, Clarke & Glew, Trans. Faraday Soc. 62 (1966) 539"

SAME_TEMPERATURE = 0.5  # K, within which a typed ΔrG° may be used
SILENT_DISTANCE = 50.0  # K, over which a constant ΔrH° is a caution
SILENT_DISTANCE_WITH_CP = 300.0  # K, over which a constant ΔrCp° is a caution
LARGE_MOLAR_ENERGY = 20000.0  # kJ/mol, above which a number looks like joules
CANCELLATION = 1000.0

# Largest and median error of lg K over eleven reactions carried from 298.15 K (a test recomputes them).
CONSTANT_ENTHALPY_ERROR = "off by up to 0.23 (median 0.05) at 500 K and up to 0.81 (median 0.20) at 1000 K"
CONSTANT_CP_ERROR = "off by up to 0.03 at 500 K and up to 0.33 (median 0.12) at 1000 K"


def finite(value: float, what: str) -> float:
    """The value itself, refused where it is no number of the double range."""
    if math.isfinite(value):
        return value
    raise OutsideNumbers(what=what, detail="", remedy="Check the units and the sizes of the arguments.")


def total(terms: Sequence[float], what: str) -> float:
    """The exactly rounded sum of terms, refused where a term or the sum is outside the double range."""
    for term in terms:
        finite(term, what)
    try:
        return math.fsum(terms)
    except OverflowError:
        return finite(math.inf, what)


def ln_ratio(above: float, below: float) -> float:
    """The logarithm of a ratio of positive numbers, to full precision where they are near and far apart."""
    if 0.5 < above / below < 2.0:
        return math.log1p((above - below) / below)
    return math.log(above) - math.log(below)


def from_logarithm(ln_value: float, what: str, remedy: str) -> float:
    """The exponential of a logarithm, refused with its value where a cell cannot hold it."""
    try:
        value = math.exp(ln_value)
    except OverflowError:
        value = math.inf
    if value < 2.2250738585072014e-308 or math.isinf(value):
        detail = f", with a natural logarithm of {ln_value:.6g}"
        raise OutsideNumbers(what=what, detail=detail, remedy=remedy)
    return value


def looks_like_joules(record: Record | None, argument: str, value: float, largest: float = LARGE_MOLAR_ENERGY) -> None:
    """Caution where a molar energy [kJ/mol] is so large that joules were probably typed."""
    if record is not None and abs(value) > largest:
        record.caution(f"{argument} is {value:.6g} kJ/mol, which is unusually large: is the number in J/mol?")


def ln_k_from_gibbs_energy(
    gibbs_energy: float, temperature: float, belongs_to: float, record: Record | None = None
) -> float:
    """The logarithm of K from a typed reaction Gibbs energy.

    Parameters
    ----------
    gibbs_energy : float. ΔrG°. [kJ/mol]
    temperature : float. At which ln K is wanted, above 0. [K]
    belongs_to : float. The temperature that ΔrG° holds at. [K]
    record : Record, filled where given.

    Returns
    -------
    float. ln K. [1]

    Raises
    ------
    GibbsEnergyOfAnotherTemperature
        The two temperatures differ by more than 0.5 K.

    Notes
    -----
    ln K = −ΔrG°/(RT), IUPAC Green Book, 3rd ed., 2007, section 2.11.

    Examples
    --------
    >>> round(ln_k_from_gibbs_energy(-28.62, 298.15, 298.15), 3)  # dimensionless
    11.545
    """
    if abs(belongs_to - temperature) > SAME_TEMPERATURE:
        raise GibbsEnergyOfAnotherTemperature(belongs_to=f"{belongs_to:.10g}", wanted=f"{temperature:.10g}")
    value = finite(-gibbs_energy * 1000.0 / (R * temperature), "ln K")
    if record is not None:
        looks_like_joules(record, "drg", gibbs_energy)
        if belongs_to != temperature:
            record.caution(f"ΔrG° belongs to {belongs_to:.10g} K and is used at {temperature:.10g} K.")
        record.step(
            "ln K",
            "−ΔrG°/(RT)",
            f"−{shown(gibbs_energy, 12)} × 1000 / ({R:.15g} × {temperature:.12g})",
            value,
            "1",
            DEFINITIONS,
        )
    return value


def gibbs_energy_from_ln_k(ln_k: float, temperature: float, record: Record | None = None) -> float:
    """ΔrG° from ln K at the same temperature.

    Parameters
    ----------
    ln_k : float. [1]
    temperature : float. Above 0. [K]
    record : Record, filled where given.

    Returns
    -------
    float. ΔrG° = −RT ln K (IUPAC Green Book, 3rd ed., 2007, section 2.11). [kJ/mol]
    """
    value = finite(-R * temperature * ln_k / 1000.0, "ΔrG°")
    if record is not None:
        numbers = f"−{R:.15g} × {temperature:.12g} × {shown(ln_k, 12)} / 1000"
        record.step("ΔrG°", "−RT ln K", numbers, value, "kJ/mol", DEFINITIONS)
    return value


def gibbs_energy_from_h_s(
    enthalpy: float,
    entropy: float,
    temperature: float,
    heat_capacity: float | None = None,
    *,
    reference: float = 298.15,
    record: Record | None = None,
) -> float:
    """ΔrG° at a temperature from ΔrH° and ΔrS°, with ΔrCp° where it is known.

    Parameters
    ----------
    enthalpy : float. ΔrH° at the reference temperature. [kJ/mol]
    entropy : float. ΔrS° at the reference temperature. [J/(mol K)]
    temperature : float. Above 0. [K]
    heat_capacity : float, optional. ΔrCp°, taken as constant; left out, ΔrH° and ΔrS° are. [J/(mol K)]
    reference : float. The temperature that ΔrH° and ΔrS° belong to. [K]
    record : Record, filled where given.

    Returns
    -------
    float. ΔrG°. [kJ/mol]

    Notes
    -----
    ΔrG° = ΔrH° + ΔrCp° (T − T₀) − T [ΔrS° + ΔrCp° ln(T/T₀)]: Kirchhoff's law with a constant ΔrCp°.

    Examples
    --------
    >>> round(gibbs_energy_from_h_s(178.3, 160.6, 1100.0), 2)  # kJ/mol
    1.64
    """
    h, s = enthalpy, entropy
    if heat_capacity is not None:
        h = enthalpy + heat_capacity * (temperature - reference) / 1000.0
        s = entropy + heat_capacity * ln_ratio(temperature, reference)
    value = finite(h - temperature * s / 1000.0, "ΔrG°")
    if record is not None:
        looks_like_joules(record, "drh", enthalpy)
        if heat_capacity is not None:
            cp = shown(heat_capacity, 12)
            record.step(
                "ΔrH°(T)",
                "ΔrH° + ΔrCp° (T − T₀)",
                f"{shown(enthalpy, 12)} + {cp} × ({temperature:.12g} − {reference:.12g}) / 1000",
                h,
                "kJ/mol",
                KIRCHHOFF,
            )
            record.step(
                "ΔrS°(T)",
                "ΔrS° + ΔrCp° ln(T/T₀)",
                f"{shown(entropy, 12)} + {cp} × ln({temperature:.12g}/{reference:.12g})",
                s,
                "J/(mol K)",
                KIRCHHOFF,
            )
        record.step(
            "ΔrG°",
            "ΔrH° − T ΔrS°",
            f"{shown(h)} − {temperature:.12g} × {shown(s)} / 1000",
            value,
            "kJ/mol",
            DEFINITIONS,
        )
        _distance_caution(record, reference, temperature, "ΔrH° and ΔrS° are", heat_capacity)
    return value


def ln_k_from_h_s(
    enthalpy: float,
    entropy: float,
    temperature: float,
    heat_capacity: float | None = None,
    *,
    reference: float = 298.15,
    record: Record | None = None,
) -> float:
    """The logarithm of K at a temperature from ΔrH° and ΔrS°, with ΔrCp° where it is known.

    Parameters, cautions and sources as in gibbs_energy_from_h_s; then ln K = −ΔrG°/(RT). [1]
    """
    gibbs_energy = gibbs_energy_from_h_s(
        enthalpy, entropy, temperature, heat_capacity, reference=reference, record=record
    )
    return ln_k_from_gibbs_energy(gibbs_energy, temperature, temperature, record)


def ln_k_carried(
    ln_k: float,
    t1: float,
    t2: float,
    enthalpy: float,
    heat_capacity: float | None = None,
    *,
    record: Record | None = None,
) -> float:
    """The logarithm of K carried from one temperature to another.

    Parameters
    ----------
    ln_k : float. At ``t1``. [1]
    t1, t2 : float. Above 0. [K]
    enthalpy : float. ΔrH° at ``t1``. [kJ/mol]
    heat_capacity : float, optional. ΔrCp°, taken as constant; left out, ΔrH° is. [J/(mol K)]
    record : Record, filled where given.

    Returns
    -------
    float. ln K at ``t2``. [1]

    Notes
    -----
    ln K₂ = ln K₁ + ΔrH°(T₁)/R (1/T₁ − 1/T₂) + ΔrCp°/R [ln(T₂/T₁) + T₁/T₂ − 1]: the van 't Hoff equation
    integrated with a constant ΔrCp° (Clarke & Glew, Trans. Faraday Soc. 62 (1966) 539, shortened after
    the heat capacity; citation from memory).

    Examples
    --------
    >>> round(ln_k_carried(0.0, 300.0, 320.0, 50.0), 4)  # dimensionless
    1.2528
    """
    from_enthalpy = enthalpy * 1000.0 / R * (1.0 / t1 - 1.0 / t2)
    from_cp = 0.0
    if heat_capacity is not None:
        from_cp = heat_capacity / R * (ln_ratio(t2, t1) + (t1 - t2) / t2)
    value = finite(ln_k + from_enthalpy + from_cp, "ln K")
    if record is not None:
        looks_like_joules(record, "drh", enthalpy)
        record.step(
            "ΔrH° term",
            "ΔrH°(T₁)/R (1/T₁ − 1/T₂)",
            f"{shown(enthalpy, 12)} × 1000 / {R:.15g} × (1/{t1:.12g} − 1/{t2:.12g})",
            from_enthalpy,
            "1",
            VAN_T_HOFF,
        )
        if heat_capacity is not None:
            record.step(
                "ΔrCp° term",
                "ΔrCp°/R [ln(T₂/T₁) + T₁/T₂ − 1]",
                f"{shown(heat_capacity, 12)} / {R:.15g} × [ln({t2:.12g}/{t1:.12g}) + {t1:.12g}/{t2:.12g} − 1]",
                from_cp,
                "1",
                VAN_T_HOFF,
            )
        record.step(
            "ln K(T₂)",
            "ln K(T₁) + ΔrH° term + ΔrCp° term",
            f"{shown(ln_k, 12)} + {shown(from_enthalpy)} + {shown(from_cp)}",
            value,
            "1",
            VAN_T_HOFF,
        )
        _distance_caution(record, t1, t2, "ΔrH° is", heat_capacity)
    return value


def _distance_caution(
    record: Record, from_temperature: float, to_temperature: float, what: str, heat_capacity: float | None
) -> None:
    """Caution where a property is held constant over a long way, with the typical size of the error."""
    distance = abs(to_temperature - from_temperature)
    if heat_capacity is None and distance > SILENT_DISTANCE:
        record.caution(
            f"{what} held constant over {distance:.6g} K. In eleven common reactions carried from 298.15 K "
            f"lg K is then {CONSTANT_ENTHALPY_ERROR}: give drcp."
        )
    elif heat_capacity is not None and distance > SILENT_DISTANCE_WITH_CP:
        record.caution(
            f"ΔrCp° is held constant over {distance:.6g} K. In eleven common reactions carried from "
            f"298.15 K lg K is then {CONSTANT_CP_ERROR}."
        )


def numbers(cells: Sequence[object], argument: str) -> list[float]:
    """The cells of a range as numbers.

    Parameters
    ----------
    cells : sequence. The cells in row order; a blank one is None.
    argument : str. The argument that an error names.

    Raises
    ------
    BlankInRange, TextInRange
        A cell is blank, or holds no number.
    """
    found: list[float] = []
    for place, cell in enumerate(cells, 1):
        if cell is None:
            raise BlankInRange(argument=argument, place=place)
        if isinstance(cell, bool) or not isinstance(cell, (int, float)):
            raise TextInRange(argument=argument, place=place, given=repr(cell))
        found.append(float(cell))
    return found


def reaction_sum(coefficients: Sequence[object], values: Sequence[object], record: Record | None = None) -> float:
    """Σ ν x over the substances of a reaction.

    Parameters
    ----------
    coefficients : sequence of float. ν, negative for reactants. [1]
    values : sequence of float. x, one for each coefficient, in one unit.
    record : Record, filled where given.

    Returns
    -------
    float. [unit of ``values``]

    Raises
    ------
    BlankInRange, TextInRange
        A cell is blank or holds no number: it is never taken for zero.
    DifferentLengths
        There are not as many values as coefficients.

    Notes
    -----
    Hess's law; the sign convention of ν is that of the IUPAC Green Book, 3rd ed., 2007, section 2.11.
    """
    nu, x = numbers(coefficients, "coefficients"), numbers(values, "values")
    if len(nu) != len(x):
        raise DifferentLengths(first="coefficients", n_first=len(nu), second="values", n_second=len(x))
    terms = [a * b for a, b in zip(nu, x, strict=True)]
    value = total(terms, "Σνx")
    if record is not None:
        for place, (a, b, term) in enumerate(zip(nu, x, terms, strict=True), 1):
            record.step(f"ν x ({place})", "ν × x", f"{shown(a, 12)} × {shown(b, 12)}", term, "unit of values")
        text = " + ".join(shown(term) for term in terms)
        record.step("Σ ν x", "sum over the substances", text, value, "unit of values", DEFINITIONS)
        if len({a > 0 for a in nu if a}) < 2:
            record.caution("All coefficients have one sign: reactants count negative, products positive.")
        size = math.fsum(map(abs, terms))
        if size > CANCELLATION * abs(value) and value:
            record.caution(
                f"The sum is a small difference of large terms ({size:.3g} in all): an error in one of them "
                f"weighs {size / abs(value):.2g} times as much in the result."
            )
    return value
