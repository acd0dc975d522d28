"""What a fit gives: each quantity as a sum of the fitted logarithm, enthalpy and heat capacity at a temperature."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from functools import lru_cache

from thermofuncs.errors import UnknownQuantity
from thermofuncs.fits.laws import Coefficients, Law, enthalpy, heat_capacity, log_value
from thermofuncs.fits.measures import LN10, Measure
from thermofuncs.units import R

Weights = tuple[float, float, float, float]
Valued = tuple[float, Coefficients]


@dataclass(frozen=True, slots=True)
class Quantity:
    """A quantity at the reference temperature T.

    Parameters
    ----------
    name : str. Such as ``drH``.
    symbol : str. As a person writes it, such as ``ΔrH°``.
    unit : str.
    relation : str. By the fitted logarithm L and its derivatives, in symbols.
    weights : callable of T [K]. What it has of L, of T² dL/dT [K], of d(T² dL/dT)/dT [1], of the slope of that [1/K].
    exponential : bool. The quantity is the exponential of that sum.
    plus : callable of T. A constant to be added to the sum.
    """

    name: str
    symbol: str
    unit: str
    relation: str
    weights: Callable[[float], Weights]
    exponential: bool = False
    plus: Callable[[float], float] | None = None


def _constant(weights: Weights) -> Callable[[float], Weights]:
    return lambda _: weights


_ENTHALPY = _constant((0.0, R / 1000.0, 0.0, 0.0))
_LOG = _constant((1.0, 0.0, 0.0, 0.0))


def _entropy(t: float) -> Weights:
    return (R, R / t, 0.0, 0.0)


def _gibbs(t: float) -> Weights:
    return (-R * t / 1000.0, 0.0, 0.0, 0.0)


def _triple(prefix: str, symbol: str, log: str, degree: str) -> list[Quantity]:
    """Enthalpy, entropy and Gibbs energy under a prefix."""
    return [
        Quantity(f"{prefix}H", f"{symbol}H{degree}", "kJ/mol", f"R T² d{log}/dT", _ENTHALPY),
        Quantity(f"{prefix}S", f"{symbol}S{degree}", "J/(mol K)", f"{symbol}H{degree}/T + R {log}", _entropy),
        Quantity(f"{prefix}G", f"{symbol}G{degree}", "kJ/mol", f"−R T {log}", _gibbs),
    ]


@lru_cache(maxsize=64)
def quantities(law: Law, measure: Measure) -> dict[str, Quantity]:
    """The quantities of a law, by name, in the order of a report; Antoine's constants stand apart."""
    log = measure.log_name
    found: list[Quantity] = []
    if law.family == "reaction":
        found += _triple("dr", "Δr", log, "°")
        if law.count > 2:
            cp = _constant((0.0, 0.0, R, 0.0))
            found.insert(2, Quantity("drCp", "ΔrCp°", "J/(mol K)", "dΔrH°/dT", cp))
        if law.count > 3:
            slope = _constant((0.0, 0.0, 0.0, R))
            found.insert(3, Quantity("drCpSlope", "dΔrCp°/dT", "J/(mol K2)", "d²ΔrH°/dT²", slope))
        found += [
            Quantity("lnK", "ln K", "1", "fitted", _LOG),
            Quantity("lgK", "lg K", "1", "ln K/ln 10", _constant((1.0 / LN10, 0.0, 0.0, 0.0))),
            Quantity("pK", "pK", "1", "−ln K/ln 10", _constant((-1.0 / LN10, 0.0, 0.0, 0.0))),
            Quantity("K", "K", "1", "exp(ln K)", _LOG, exponential=True),
        ]
    elif law.family == "Arrhenius":
        intercept: Callable[[float], Weights] = lambda t: (1.0, 1.0 / t, 0.0, 0.0)  # noqa: E731
        found += [
            Quantity("Ea", "Ea", "kJ/mol", f"R T² d{log}/dT", _ENTHALPY),
            Quantity("lnA", f"ln(A/({measure.standard}))", "1", f"{log} + Ea/(R T)", intercept),
            Quantity("A", "A", measure.standard, "exp(ln A)", intercept, exponential=True),
        ]
    elif law.family == "Eyring":
        found += _triple("dact", "Δ‡", "ln K‡", "°")
    elif law.name == "Antoine":
        found.append(Quantity("dvapH", "ΔvapH", "kJ/mol", f"R T² d{log}/dT", _ENTHALPY))
    else:
        found += _triple("dvap", "Δvap", log, "°")
    if law.symbol != "K":
        plus = law.offset if law.family == "Eyring" else None
        found += [
            Quantity(f"ln{law.symbol}", log, "1", "fitted", _LOG, plus=plus),
            Quantity(law.symbol, law.symbol, measure.standard, f"exp({log})", _LOG, exponential=True, plus=plus),
        ]
    return {q.name: q for q in found}


ANTOINE_CONSTANTS = ("A", "B", "C")
_DEGREES = {"K": (1.0, 0.0), "degC": (1.0, 273.15), "degF": (1.8, 459.67)}  # degrees in a kelvin, 0 K below zero


def plain_name(text: str) -> str:
    """A quantity's name as typed, in plain letters: ``ΔrH°`` as ``drH``."""
    plain = text.replace("Δ‡", "dact").replace("Δ", "d").replace("°", "").replace("′", "").replace("'", "")
    return plain.replace(" ", "").replace("‡", "act")


def found_name(text: str, law: Law, known: dict[str, object] | dict[str, Quantity]) -> str:
    """The known name that a typed one means, in any case of its letters where that is unique."""
    plain = plain_name(text)
    if law.family == "vapour" and plain.casefold() in {"drh", "drs", "drg"}:
        plain = "dvap" + plain[2:]
    if plain in known:
        return plain
    folded = [name for name in known if name.casefold() == plain.casefold()]
    if len(folded) == 1:
        return folded[0]
    raise UnknownQuantity(given=text[:60], law=law.name, known=", ".join(known))


def valued(quantity: Quantity, law: Law, c: Coefficients, t: float, theta: float) -> Valued:
    """A quantity's sum at a temperature [K], before any exponential, and its derivatives by the coefficients."""
    of_log, of_enthalpy, of_cp, of_slope = quantity.weights(t)
    parts = []
    if of_log:
        parts.append((of_log, log_value(law, c, t, theta)))
    if of_enthalpy:
        parts.append((of_enthalpy, enthalpy(law, c, t, theta)))
    if of_cp:
        parts.append((of_cp, heat_capacity(law, c, t, theta)))
    if of_slope:
        parts.append((of_slope, (c[3], (0.0, 0.0, 0.0, 1.0))))
    factor, (part, row) = parts[0]
    value, gradient = factor * part, tuple([factor * b for b in row])
    for factor, (part, row) in parts[1:]:
        value += factor * part
        gradient = tuple([a + factor * b for a, b in zip(gradient, row, strict=True)])
    return (value if quantity.plus is None else value + quantity.plus(t)), gradient


def antoine_constants(c: Coefficients, theta: float, measure: Measure, scale: str) -> dict[str, Valued]:
    """A, B and C of Antoine's equation in the column's unit and the scale of T, with their derivatives.

    With x = 1/θ − 1/T and D = 1 + γ/θ the inner form α + β x/(1 + γ x) has 1 + γ x = (D T − γ)/T, hence
    C = −γ/D, B = β/D² and A = α + β/(D θ).
    """
    alpha, beta, gamma = c
    d = 1.0 + gamma / theta
    a = (alpha + beta / (d * theta), (1.0, 1.0 / (d * theta), -beta / (d * theta) ** 2))
    b = (beta / d**2, (0.0, 1.0 / d**2, -2.0 * beta / (d**3 * theta)))
    shift = (-gamma / d, (0.0, 0.0, -1.0 / d**2))
    per_log = 1.0 / LN10 if measure.scale in {"value", "lg"} else 1.0
    per_degree, below_zero = _DEGREES[scale]
    return {
        "A": ((a[0] - measure.ln_factor) * per_log, tuple(per_log * g for g in a[1])),
        "B": (b[0] * per_log * per_degree, tuple(per_log * per_degree * g for g in b[1])),
        "C": (shift[0] * per_degree + below_zero, tuple(per_degree * g for g in shift[1])),
    }


def exponential(value: float) -> float:
    """The exponential of a logarithm; infinite where a number cannot hold it, which the catalogue refuses."""
    try:
        return math.exp(value)
    except OverflowError:
        return math.inf
