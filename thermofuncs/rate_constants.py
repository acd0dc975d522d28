"""The rate constant from the Arrhenius equation, and carried between temperatures.

    k = A (T/K)ⁿ exp(−Ea/(RT))

(IUPAC Green Book, 3rd ed., 2007, section 2.12, for n = 0; with Tⁿ the modified Arrhenius equation,
Laidler, J. Chem. Educ. 61 (1984) 494, citation from memory.)
"""

from __future__ import annotations

import math

from thermofuncs.errors import NotAboveZero
from thermofuncs.relations import SILENT_DISTANCE, from_logarithm, looks_like_joules
from thermofuncs.units import R
from thermofuncs.working import Record, shown

ARRHENIUS = "Arrhenius equation, IUPAC Green Book, 3rd ed., 2007, section 2.12"
LARGE_ACTIVATION_ENERGY = 1000.0  # kJ/mol, above which a number looks like joules
REMEDY = "Check that ea is in kJ/mol and T in kelvin."


def rate_constant(
    a: float,
    activation_energy: float,
    temperature: float,
    exponent: float = 0.0,
    *,
    record: Record | None = None,
) -> float:
    """The rate constant at a temperature.

    Parameters
    ----------
    a : float. Pre-exponential factor, above 0. [unit of the rate constant]
    activation_energy : float. Ea. [kJ/mol]
    temperature : float. Above 0. [K]
    exponent : float. n of Tⁿ with T in kelvin. [1]
    record : Record, filled where given.

    Returns
    -------
    float. [unit of ``a``]

    Raises
    ------
    NotAboveZero
        ``a`` is not positive.
    OutsideNumbers
        The rate constant is outside the double range; the sentence has its logarithm.

    Examples
    --------
    >>> round(rate_constant(1.0e13, 100.0, 500.0), 1)  # 1/s, where a is in 1/s
    357.5
    """
    if a <= 0.0:
        raise NotAboveZero(argument="a", given=f"{a:.6g}", what="a pre-exponential factor")
    ln_value = math.log(a) + exponent * math.log(temperature) - activation_energy * 1000.0 / (R * temperature)
    value = from_logarithm(ln_value, "The rate constant", REMEDY)
    if record is not None:
        looks_like_joules(record, "ea", activation_energy, LARGE_ACTIVATION_ENERGY)
        record.step(
            "ln k",
            "ln A + n ln T − Ea/(RT)",
            f"ln {shown(a, 12)} + {shown(exponent, 12)} × ln {temperature:.12g}"
            f" − {shown(activation_energy, 12)} × 1000 / ({R:.15g} × {temperature:.12g})",
            ln_value,
            "1",
            ARRHENIUS,
        )
        record.step("k", "exp(ln k)", f"exp({shown(ln_value)})", value, "unit of a", ARRHENIUS)
    return value


def rate_constant_carried(
    k_one: float, t1: float, t2: float, activation_energy: float, record: Record | None = None
) -> float:
    """A rate constant carried from one temperature to another.

    Parameters
    ----------
    k_one : float. The rate constant at ``t1``, above 0. [its own unit]
    t1, t2 : float. Above 0. [K]
    activation_energy : float. Ea, taken as constant. [kJ/mol]
    record : Record, filled where given.

    Returns
    -------
    float. [unit of ``k_one``]

    Raises
    ------
    NotAboveZero
        ``k_one`` is not positive.
    OutsideNumbers
        The rate constant is outside the double range; the sentence has its logarithm.

    Notes
    -----
    k₂ = k₁ exp[Ea/R (1/T₁ − 1/T₂)], the Arrhenius equation at two temperatures.
    """
    if k_one <= 0.0:
        raise NotAboveZero(argument="k_one", given=f"{k_one:.6g}", what="a rate constant")
    exponent = activation_energy * 1000.0 / R * (1.0 / t1 - 1.0 / t2)
    # the product underflows or overflows only where the result does
    ln_value = math.log(k_one) + exponent
    from_logarithm(ln_value, "The rate constant", REMEDY)
    half = math.exp(exponent / 2.0)
    value = k_one * half * half
    if record is not None:
        looks_like_joules(record, "ea", activation_energy, LARGE_ACTIVATION_ENERGY)
        record.step(
            "ln(k₂/k₁)",
            "Ea/R (1/T₁ − 1/T₂)",
            f"{shown(activation_energy, 12)} × 1000 / {R:.15g} × (1/{t1:.12g} − 1/{t2:.12g})",
            exponent,
            "1",
            ARRHENIUS,
        )
        numbers = f"{shown(k_one, 12)} × exp({shown(exponent)})"
        record.step("k₂", "k₁ exp[ln(k₂/k₁)]", numbers, value, "unit of k_one", ARRHENIUS)
        if abs(t2 - t1) > SILENT_DISTANCE:
            record.caution(
                f"Ea is held constant over {abs(t2 - t1):.6g} K; it holds where the mechanism is the same "
                "and was measured over that range."
            )
    return value
