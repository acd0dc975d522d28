"""A heat capacity typed as a sum of powers of the temperature, Cp = Σ c Tⁿ, and its integrals.

    ∫ Cp dT   = Σ c (T₂ⁿ⁺¹ − T₁ⁿ⁺¹)/(n + 1),  c ln(T₂/T₁) where n = −1
    ∫ Cp/T dT = Σ c (T₂ⁿ − T₁ⁿ)/n,            c ln(T₂/T₁) where n = 0

(elementary calculus; the first is H(T₂) − H(T₁), the second S(T₂) − S(T₁) at constant pressure.)
"""

from __future__ import annotations

import math
from collections.abc import Sequence

from thermofuncs.errors import DifferentLengths
from thermofuncs.relations import ln_ratio, numbers, total
from thermofuncs.working import Record, shown

DEFINITION = "sum of powers of T"


def _pairs(exponents: Sequence[object], constants: Sequence[object]) -> list[tuple[float, float]]:
    """Exponents with their constants."""
    n, c = numbers(exponents, "exponents"), numbers(constants, "constants")
    if len(n) != len(c):
        raise DifferentLengths(first="exponents", n_first=len(n), second="constants", n_second=len(c))
    return list(zip(n, c, strict=True))


def _power(temperature: float, exponent: float) -> float:
    """Tⁿ, infinite where it is outside the double range."""
    try:
        return float(temperature**exponent)
    except OverflowError:
        return math.inf


def _power_integral(t1: float, t2: float, exponent: float) -> float:
    """∫ Tᵐ⁻¹ dT with m = exponent, over t1 to t2."""
    logarithm = ln_ratio(t2, t1)
    if exponent == 0.0:
        return logarithm
    # expm1 keeps the digits where T₂ − T₁ or m is small
    try:
        return _power(t1, exponent) * math.expm1(exponent * logarithm) / exponent
    except OverflowError:
        return math.inf


def heat_capacity_sum(
    exponents: Sequence[object],
    constants: Sequence[object],
    temperature: float,
    record: Record | None = None,
) -> float:
    """Cp as a sum of powers of the temperature.

    Parameters
    ----------
    exponents : sequence of float. n of Tⁿ; any real number. [1]
    constants : sequence of float. c, one for each exponent, for T in kelvin. [unit of Cp per Kⁿ]
    temperature : float. Above 0. [K]
    record : Record, filled where given.

    Returns
    -------
    float. Σ c Tⁿ. [unit of Cp that the constants have]

    Raises
    ------
    DifferentLengths, BlankInRange, TextInRange
        The two ranges do not go together, or hold something else than numbers.
    OutsideNumbers
        The sum is outside the double range.

    Examples
    --------
    >>> round(heat_capacity_sum([0, 1, -2], [44.22, 8.79e-3, -8.62e5], 500.0), 3)  # J/(mol K)
    45.167
    """
    pairs = _pairs(exponents, constants)
    terms = [c * _power(temperature, n) for n, c in pairs]
    value = total(terms, "Σ c Tⁿ")
    if record is not None:
        for (n, c), term in zip(pairs, terms, strict=True):
            relation = f"{shown(c, 12)} × {temperature:.12g}^{shown(n, 12)}"
            record.step(f"c T^{n:g}", "c Tⁿ", relation, term, "unit of Cp", DEFINITION)
        text = " + ".join(shown(term) for term in terms)
        record.step("Σ c Tⁿ", "sum of the terms", text, value, "unit of Cp", DEFINITION)
        _scale_caution(record, [temperature])
    return value


def heat_capacity_integral(
    exponents: Sequence[object],
    constants: Sequence[object],
    t1: float,
    t2: float,
    *,
    over_t: bool = False,
    record: Record | None = None,
) -> float:
    """The integral of Cp, or of Cp/T, between two temperatures.

    Parameters
    ----------
    exponents, constants : as in heat_capacity_sum.
    t1, t2 : float. Limits, above 0. [K]
    over_t : bool. Whether Cp/T is integrated.
    record : Record, filled where given.

    Returns
    -------
    float. ∫ Cp dT [unit of Cp × K], or ∫ Cp/T dT [unit of Cp].

    Raises
    ------
    DifferentLengths, BlankInRange, TextInRange, OutsideNumbers
        As in heat_capacity_sum.

    Examples
    --------
    >>> heat_capacity_integral([0], [75.3], 298.15, 308.15)  # J/mol, where Cp is in J/(mol K)
    753.0
    """
    pairs = _pairs(exponents, constants)
    raised = 0.0 if over_t else 1.0
    terms = [c * _power_integral(t1, t2, n + raised) for n, c in pairs]
    value = total(terms, "The integral of Σ c Tⁿ")
    if record is not None:
        inside, unit = ("c Tⁿ⁻¹", "unit of Cp") if over_t else ("c Tⁿ", "unit of Cp × K")
        for (n, c), term in zip(pairs, terms, strict=True):
            relation = f"{shown(c, 12)}, n = {n:g}, {t1:.12g} to {t2:.12g} K"
            record.step(f"∫ n={n:g}", f"∫ {inside} dT", relation, term, unit, DEFINITION)
        text = " + ".join(shown(term) for term in terms)
        record.step("∫ Cp/T dT" if over_t else "∫ Cp dT", "sum of the terms", text, value, unit, DEFINITION)
        _scale_caution(record, [t1, t2])
    return value


def _scale_caution(record: Record, temperatures: Sequence[float]) -> None:
    """Caution that the range of typed constants is not known."""
    span = " and ".join(f"{t:.6g} K" for t in temperatures)
    record.caution(
        f"The range of the constants is not known here: check that their source covers {span}, "
        "and that it takes T in kelvin, not in thousands of kelvin."
    )
