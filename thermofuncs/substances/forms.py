"""Heat capacity as a sum of powers of the temperature, with its integrals.

Every published form that the engine reads is one of these: a constant, a polynomial, a sum of c·Tⁿ,
the Shomate equation, the NASA forms with 7 and 9 coefficients. An interval holds

    Cp/R   = Σ cₙ Tⁿ
    H/(RT) = Σ cₙ Tⁿ/(n+1)  + c₋₁ ln(T)/T + b1/T      (n ≠ −1)
    S/R    = Σ cₙ Tⁿ/n      + c₀ ln T     + b2        (n ≠ 0)

with R the one gas constant of the house (McBride, Zehe & Gordon, NASA/TP-2002-211556, 2002, eqs 1 to 3,
widened to any exponent). H includes the formation enthalpy at 298.15 K.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

REFERENCE_TEMPERATURE = 298.15


@dataclass(frozen=True, slots=True)
class Interval:
    """One temperature interval of a substance.

    Parameters
    ----------
    t_low, t_high : float. Its limits. [K]
    terms : tuple of (exponent n, coefficient cₙ). Cp/R = Σ cₙ Tⁿ, T in K.
    b1 : float. Integration constant of H/R. [K]
    b2 : float. Integration constant of S/R. [1]
    """

    t_low: float
    t_high: float
    terms: tuple[tuple[float, float], ...]
    b1: float
    b2: float


def heat_capacity(interval: Interval, temperature: float) -> float:
    """Cp/R at a temperature [K]."""
    return math.fsum(c * temperature**n for n, c in interval.terms)


def enthalpy(interval: Interval, temperature: float) -> float:
    """H/(RT) at a temperature [K]."""
    parts = [interval.b1 / temperature]
    for n, c in interval.terms:
        parts.append(c * math.log(temperature) / temperature if n == -1 else c * temperature**n / (n + 1))
    return math.fsum(parts)


def entropy(interval: Interval, temperature: float) -> float:
    """S/R at a temperature [K]."""
    parts = [interval.b2]
    for n, c in interval.terms:
        parts.append(c * math.log(temperature) if n == 0 else c * temperature**n / n)
    return math.fsum(parts)


def anchored(
    t_low: float,
    t_high: float,
    terms: tuple[tuple[float, float], ...],
    h_over_r: float,
    s_over_r: float,
    at: float = REFERENCE_TEMPERATURE,
) -> Interval:
    """An interval whose constants make H/R [K] and S/R take given values at a temperature [K].

    Parameters
    ----------
    t_low, t_high : float. Limits. [K]
    terms : tuple of (exponent, coefficient). Cp/R.
    h_over_r : float. H/R wanted at ``at``. [K]
    s_over_r : float. S/R wanted at ``at``.
    at : float. The temperature of the anchor. [K]
    """
    bare = Interval(t_low, t_high, terms, 0.0, 0.0)
    return Interval(
        t_low, t_high, terms, h_over_r - enthalpy(bare, at) * at, s_over_r - entropy(bare, at)
    )


def constant(value: float) -> tuple[tuple[float, float], ...]:
    """Terms of a constant Cp/R."""
    return ((0.0, value),)


def nasa7(a: tuple[float, ...]) -> tuple[tuple[float, float], ...]:
    """Terms of the NASA form with 7 coefficients: Cp/R = a1 + a2 T + a3 T² + a4 T³ + a5 T⁴.

    Source: Gordon & McBride, NASA SP-273, 1971, eq. 90 (equation number from memory).
    """
    return tuple((float(n), c) for n, c in enumerate(a[:5]))


def nasa9(a: tuple[float, ...]) -> tuple[tuple[float, float], ...]:
    """Terms of the NASA form with 9 coefficients: Cp/R = a1 T⁻² + a2 T⁻¹ + a3 + … + a7 T⁴.

    Source: McBride, Zehe & Gordon, NASA/TP-2002-211556, 2002, eq. 1.
    """
    return tuple((float(n - 2), c) for n, c in enumerate(a[:7]))


def shomate(a: tuple[float, ...], gas_constant: float) -> tuple[tuple[float, float], ...]:
    """Terms of the Shomate equation: Cp = A + B t + C t² + D t³ + E/t², t = T/(1000 K), Cp in J/(mol K).

    Source: Shomate, J. Phys. Chem. 58 (1954) 368, in the form that the NIST Chemistry WebBook prints.
    """
    exponents = (0.0, 1.0, 2.0, 3.0, -2.0)
    return tuple((n, c * 1000.0**-n / gas_constant) for n, c in zip(exponents, a[:5], strict=True))
