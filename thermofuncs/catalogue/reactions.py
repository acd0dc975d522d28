"""Worksheet functions of reactions."""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import Any

from thermofuncs import balancing, compiled, quotient, standard
from thermofuncs.catalogue.common import (
    DATA,
    OPTION_WORDS,
    OPTIONS,
    REACTION,
    SHIFT,
    TEMPERATURE,
    UNIT,
)
from thermofuncs.catalogue.declaration import Argument, Function
from thermofuncs.catalogue.reading import PLAIN, Options
from thermofuncs.combination import Combination
from thermofuncs.errors import ElectronCount, NoRoot, NotPositive
from thermofuncs.substances.user_table import UserData
from thermofuncs.units import R
from thermofuncs.working import Record

GROUP = "Reactions"
LN10 = math.log(10.0)
ACTIVITIES = Argument(
    "activities", 'two columns: species, and activity or quantity such as "0.3 atm"', "table"
)

Scalar = Callable[[Combination, float, Record | None], float]


def table_of(reaction: str, data: UserData | None, options: Options) -> Combination:
    """The compiled table of a reaction under the options."""
    return compiled.reaction(reaction, data, options.atm, options.extrapolate)


def _scalar(property_of: Scalar) -> Callable[..., object]:
    def compute(
        reaction: str, temperature: float, data: UserData | None, options: Options,
        record: Record | None = None,
    ) -> float:
        table = compiled.reaction(reaction, data, options.atm, options.extrapolate)
        return property_of(table, temperature, record)

    return compute


def _vector(formula: Callable[[Combination, Any], Any]) -> Callable[..., object]:
    def compute(reaction: str, temperatures: Any, data: UserData | None, options: Options) -> Any:  # noqa: ANN401  numpy arrays
        return formula(table_of(reaction, data, options), temperatures)

    return compute


def _keq_array(table: Combination, t: Any) -> Any:  # noqa: ANN401  numpy arrays
    import numpy as np  # noqa: PLC0415  a single cell does not pay for the array path

    natural = table.minus_g_array(t)
    for value in (float(natural.min()), float(natural.max())):
        if not standard.SMALLEST_LN_K <= value <= standard.LARGEST_LN_K:
            raise standard.outside_double(value)
    return np.exp(natural)


def _over_temperature(
    name: str, summary: str, unit: str, scalar: Scalar, vector: Callable[[Combination, Any], Any], *,
    with_unit: bool,
) -> Function:
    arguments = (REACTION, TEMPERATURE, *((UNIT,) if with_unit else ()), DATA, OPTIONS)
    return Function(
        name, GROUP, summary, arguments, unit, (SHIFT, 900.0), _scalar(scalar), _vector(vector),
        options=OPTION_WORDS,
    )


def teq(
    reaction: str, k_value: float | None, t_low: float | None, t_high: float | None,
    data: UserData | None, options: Options, record: Record | None = None,
) -> float:
    """The lowest temperature at which K has a value. [K]

    Parameters
    ----------
    reaction : str.
    k_value : float or None. 1 where left out.
    t_low, t_high : float or None. Limits of the search; the data's own where left out. [K]
    data, options, record : as for the other functions.

    Raises
    ------
    NoRoot: K does not have the value between the limits; the sentence gives K at both.
    """
    k = 1.0 if k_value is None else k_value
    if not 0.0 < k < math.inf:
        raise NotPositive(argument="k_value", given=f"{k:g}")
    table = table_of(reaction, data, options)
    low = table.data_low if t_low is None else t_low
    high = table.data_high if t_high is None else t_high
    for limit in (low, high):
        table.at(limit)
    if low >= high:
        raise NoRoot(k=f"{k:g}", what=reaction, low=f"{low:g}", high=f"{high:g}", ends="t_low is not below t_high")
    roots = standard.equilibrium_temperatures(table, math.log(k), low, high)
    if not roots:
        ends = ", ".join(f"ln K({t:g} K) = {standard.ln_k(table, t):.5g}" for t in (low, high))
        raise NoRoot(k=f"{k:g}", what=reaction, low=f"{low:g}", high=f"{high:g}", ends=ends)
    if record is not None:
        at_root = standard.ln_k(table, roots[0], record)
        if len(roots) > 1:
            others = ", ".join(f"{t:.6g} K" for t in roots[1:])
            record.caution(f"K also has this value at {others}; the lowest temperature is given.")
        record.step(
            "T", "ln K(T) = ln k_value, solved between the limits",
            f"ln K = {at_root:.9g}, ln k_value = {math.log(k):.9g}", roots[0], "K",
            "Brent's method on the compiled table",
        )
    return roots[0]


def ln_q(reaction: str, activities: list[list[object]], record: Record | None = None) -> float:
    """Ln Q of a table of activities."""
    return quotient.ln_quotient(reaction, activities, record)


def affinity(
    reaction: str, temperature: float, activities: list[list[object]], data: UserData | None,
    options: Options, record: Record | None = None,
) -> float:
    """RT ln(K/Q). [kJ/mol]"""
    natural = standard.ln_k(table_of(reaction, data, options), temperature, record)
    q = quotient.ln_quotient(reaction, activities, record, atm=options.atm)
    return quotient.affinity(natural, q, temperature, record)


def emf(
    reaction: str, temperature: float, electrons: float, activities: list[list[object]] | None,
    data: UserData | None, options: Options, record: Record | None = None,
) -> float:
    """Cell voltage; a half reaction with e- is against the standard hydrogen electrode. [V]"""
    written = quotient.electrons_in(reaction)
    if written and abs(float(written)) != electrons:
        raise ElectronCount(given=f"{electrons:g}", needed=f"the {abs(float(written)):g} of the half reaction")
    if written > 0:
        raise ElectronCount(given="e- on the right", needed="the half reaction as a reduction, e- on the left")
    table = compiled.electrode_reaction(reaction, data, options.atm, options.extrapolate)
    natural = standard.ln_k(table, temperature, record)
    q = 0.0 if activities is None else quotient.ln_quotient(reaction, activities, record, atm=options.atm)
    if record is not None and written:
        record.caution("The half reaction is against the standard hydrogen electrode at the same temperature.")
    return quotient.cell_voltage(natural, q, temperature, electrons, record)


def balanced(equation: str, record: Record | None = None) -> str:
    """The balanced equation."""
    text = balancing.balanced(equation)
    if record is not None:
        record.step("equation", "atoms and charge conserved", equation, text, "text", "exact rational arithmetic")
    return text


def imbalance(equation: str, record: Record | None = None) -> list[list[object]]:
    """What is missing on which side."""
    del record
    return balancing.imbalance(equation)


FUNCTIONS: tuple[Function, ...] = (
    _over_temperature(
        "DRCP", "Reaction heat capacity at T, in J/(mol K).", "J/(mol K)", standard.heat_capacity,
        lambda c, t: c.cp_array(t) * R, with_unit=True,
    ),
    _over_temperature(
        "DRS", "Standard reaction entropy at T, in J/(mol K).", "J/(mol K)", standard.entropy,
        lambda c, t: c.s_array(t) * R, with_unit=True,
    ),
    _over_temperature(
        "DRH", "Standard reaction enthalpy at T, in kJ/mol.", "kJ/mol", standard.enthalpy,
        lambda c, t: c.h_array(t) * R * t / 1000, with_unit=True,
    ),
    _over_temperature(
        "DRG", "Standard reaction Gibbs energy at T, in kJ/mol.", "kJ/mol", standard.gibbs_energy,
        lambda c, t: c.minus_g_array(t) * -R * t / 1000, with_unit=True,
    ),
    _over_temperature(
        "KEQ", "Standard equilibrium constant at T.", "1", standard.equilibrium_constant, _keq_array,
        with_unit=False,
    ),
    _over_temperature(
        "LNK", "Natural logarithm of the standard equilibrium constant at T.", "1", standard.ln_k,
        lambda c, t: c.minus_g_array(t), with_unit=False,
    ),
    _over_temperature(
        "LGK", "Decadic logarithm of the standard equilibrium constant at T.", "1", standard.lg_k,
        lambda c, t: c.minus_g_array(t) / LN10, with_unit=False,
    ),
    Function(
        "LNKU", GROUP, "Standard uncertainty of ln K at T from the uncertainties in the data.",
        (REACTION, TEMPERATURE, DATA, OPTIONS), "1", ("H2(g) + 1/2 O2(g) = H2O(g)", 1000.0),
        _scalar(standard.u_ln_k), options=OPTION_WORDS,
    ),
    Function(
        "TEQ", GROUP, "Temperature at which K has a value, in K; the lowest where there are several.",
        (
            REACTION,
            Argument("k_value", "the value of K, 1 where left out", "number", "1", optional=True),
            Argument("t_low", "lower limit of the search", "temperature", "K", optional=True),
            Argument("t_high", "upper limit of the search", "temperature", "K", optional=True),
            DATA, OPTIONS,
        ),
        "K", ("CaCO3(s) = CaO(s) + CO2(g)", 1.0), teq, options=OPTION_WORDS,
    ),
    Function(
        "BALANCED", GROUP,
        "The equation with its coefficients: the smallest whole ones, or those that given numbers and ? fix.",
        (Argument("equation", "equation text, with or without coefficients", "text"),), "text",
        ("C3H8 + O2 = CO2 + H2O",), balanced,
    ),
    Function(
        "IMBALANCE", GROUP, "Table of what is missing on which side of an equation.",
        (Argument("equation", "equation text", "text"),), "table", ("CO + 3 H2 = CH4",), imbalance,
        result_shape="table",
    ),
    Function(
        "LNQ", GROUP, "Natural logarithm of the reaction quotient from a table of activities.",
        (REACTION, ACTIVITIES), "1",
        (SHIFT, [["CO(g)", 0.1], ["H2O(g)", "0.3 atm"], ["CO2(g)", 0.2], ["H2(g)", 0.4]]), ln_q,
    ),
    Function(
        "AFFINITY", GROUP, "RT ln(K/Q) in kJ/mol: positive, the reaction runs forward.",
        (REACTION, TEMPERATURE, ACTIVITIES, UNIT, DATA, OPTIONS), "kJ/mol",
        (SHIFT, 900.0, [["CO(g)", 0.1], ["H2O(g)", 0.3], ["CO2(g)", 0.2], ["H2(g)", 0.4]]), affinity,
        options=OPTION_WORDS,
    ),
    Function(
        "EMF", GROUP, "Cell voltage in V from ΔrG° and, where given, the activities.",
        (
            REACTION, TEMPERATURE,
            Argument("electrons", "electrons transferred by the reaction as written", "number", "1"),
            Argument(ACTIVITIES.name, ACTIVITIES.meaning, "table", optional=True),
            DATA, OPTIONS,
        ),
        "V", ("H2(g) + 1/2 O2(g) = H2O(l)", 298.15, 2.0), emf, options=OPTION_WORDS,
    ),
)

__all__ = ["FUNCTIONS", "PLAIN"]
