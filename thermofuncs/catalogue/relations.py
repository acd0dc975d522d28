"""Worksheet functions of relations with typed constants."""

from __future__ import annotations

from thermofuncs import conversions, heat_capacity_sums, rate_constants, relations, vapour_pressure
from thermofuncs.catalogue.declaration import Argument, Function
from thermofuncs.substances.forms import REFERENCE_TEMPERATURE
from thermofuncs.working import Record

GROUP = "Relations with typed constants"


def number(name: str, meaning: str, unit: str, *, optional: bool = False, unit_from: str = "") -> Argument:
    """A number argument."""
    return Argument(name, meaning, "number", unit, optional=optional, unit_from=unit_from)


def temperature(name: str, meaning: str, *, optional: bool = False) -> Argument:
    """A temperature argument."""
    return Argument(name, meaning, "temperature", "K", optional=optional)


UNIT = Argument("unit", "unit of the answer", "unit", optional=True)
T = temperature("t", 'temperature: a number in kelvin or a text such as "350 degC"')
DRH = number("drh", "reaction enthalpy", "kJ/mol")
DRS = number("drs", "reaction entropy", "J/(mol K)")
DRCP = number("drcp", "reaction heat capacity, taken as constant", "J/(mol K)", optional=True)
EA = number("ea", "activation energy", "kJ/mol")
T_REF = temperature("t_ref", "temperature that drh and drs belong to, 298.15 K where left out", optional=True)
CONSTANTS = Argument(
    "constants", "the constants in the form's order; behind them, where known, lowest and highest T", "list"
)
FORM = Argument("form", 'the form, such as "Antoine lg mmHg degC" or "five-constant"', "text")
EXPONENTS = Argument("exponents", "range of the exponents n of Tⁿ", "list")
POWER_CONSTANTS = Argument("constants", "range of the constants, for T in kelvin", "list")


def drg_hs(
    drh: float, drs: float, t: float, drcp: float | None, t_ref: float | None, record: Record | None = None
) -> float:
    """ΔrG° from typed ΔrH° and ΔrS°. [kJ/mol]"""
    reference = REFERENCE_TEMPERATURE if t_ref is None else t_ref
    return relations.gibbs_energy_from_h_s(drh, drs, t, drcp, reference=reference, record=record)


def lnk_hs(
    drh: float, drs: float, t: float, drcp: float | None, t_ref: float | None, record: Record | None = None
) -> float:
    """Ln K from typed ΔrH° and ΔrS°."""
    reference = REFERENCE_TEMPERATURE if t_ref is None else t_ref
    return relations.ln_k_from_h_s(drh, drs, t, drcp, reference=reference, record=record)


def lnk_at(
    lnk1: float, t1: float, t2: float, drh: float, drcp: float | None, record: Record | None = None
) -> float:
    """Ln K carried between temperatures."""
    return relations.ln_k_carried(lnk1, t1, t2, drh, drcp, record=record)


def k_convert(
    k_value: float, from_basis: str, into_basis: str, dn: float, t: float, p: float | None,
    record: Record | None = None,
) -> float:
    """K on another basis."""
    return conversions.k_on_basis(k_value, from_basis, into_basis, dn, t, pressure=p, record=record)


def rate_const(a: float, ea: float, t: float, n: float | None, record: Record | None = None) -> float:
    """A·Tⁿ·exp(−Ea/RT)."""
    return rate_constants.rate_constant(a, ea, t, 0.0 if n is None else n, record=record)


def cp_integral(
    exponents: list[object], constants: list[object], t1: float, t2: float, over_t: bool | None,
    record: Record | None = None,
) -> float:
    """∫ Σ c·Tⁿ dT, or that of Cp/T."""
    return heat_capacity_sums.heat_capacity_integral(
        exponents, constants, t1, t2, over_t=bool(over_t), record=record
    )


FUNCTIONS: tuple[Function, ...] = (
    Function(
        "LNKFROMDRG", GROUP, "ln K from a typed ΔrG° that belongs to the same temperature.",
        (
            number("drg", "reaction Gibbs energy", "kJ/mol", unit_from="unit"), T,
            temperature("t_of_drg", "the temperature that drg belongs to"),
            Argument("unit", "unit of a bare drg, kJ/mol where left out", "input unit", optional=True),
        ),
        "1", (-28.62, 298.15, 298.15), relations.ln_k_from_gibbs_energy,
    ),
    Function(
        "DRGFROMLNK", GROUP, "ΔrG° from ln K at the same temperature, in kJ/mol.",
        (number("lnk", "natural logarithm of K", "1"), T, UNIT), "kJ/mol", (11.5, 298.15),
        relations.gibbs_energy_from_ln_k,
    ),
    Function(
        "DRGHS", GROUP, "ΔrG° at t from typed ΔrH° and ΔrS°, and ΔrCp° where known, in kJ/mol.",
        (DRH, DRS, T, DRCP, T_REF), "kJ/mol", (-41.15, -42.02, 500.0), drg_hs,
    ),
    Function(
        "LNKHS", GROUP, "ln K at t from typed ΔrH° and ΔrS°, and ΔrCp° where known.",
        (DRH, DRS, T, DRCP, T_REF), "1", (-41.15, -42.02, 500.0), lnk_hs,
    ),
    Function(
        "LNKAT", GROUP, "ln K carried from t1 to t2 by ΔrH°, and ΔrCp° where known.",
        (
            number("lnk1", "natural logarithm of K at t1", "1"), temperature("t1", "where lnk1 holds"),
            temperature("t2", "where ln K is wanted"),
            number("drh", "reaction enthalpy at t1", "kJ/mol", unit_from="unit"), DRCP,
            Argument("unit", "unit of a bare drh, kJ/mol where left out", "input unit", optional=True),
        ),
        "1", (11.545, 298.15, 340.0, -41.15), lnk_at,
    ),
    Function(
        "KCONVERT", GROUP,
        "K on another basis: standard, p in bar, p in atm, p in Pa, p in kPa, concentration in mol/L,"
        " concentration in mol/m3, mole fraction at p.",
        (
            number("k_value", "K on from_basis", "1"), Argument("from_basis", "its basis", "text"),
            Argument("into_basis", "the basis wanted", "text"),
            number("dn", "sum of the gases' stoichiometric numbers", "1"), T,
            number("p", "total pressure, for mole fraction at p", "bar", optional=True),
        ),
        "1", (2.5, "standard", "concentration in mol/L", -1.0, 700.0), k_convert,
    ),
    Function(
        "RXNSUM", GROUP, "Σ ν·x over two ranges; blanks and texts are refused. In the unit of the values.",
        (
            Argument("coefficients", "range of stoichiometric numbers, negative for reactants", "list"),
            Argument("values", "range of values, as many", "list"),
        ),
        "unit of the values", ([[-1.0], [-1.0], [1.0], [1.0]], [[-110.53], [-241.83], [-393.51], [0.0]]),
        relations.reaction_sum,
    ),
    Function(
        "RATECONST", GROUP, "Rate constant A·Tⁿ·exp(−Ea/RT), in the unit of a.",
        (
            number("a", "pre-exponential factor", "1"), EA, T,
            number("n", "exponent of T, 0 where left out", "1", optional=True),
        ),
        "unit of a", (1.0e13, 100.0, 500.0), rate_const,
    ),
    Function(
        "RATECONSTAT", GROUP, "Rate constant carried from t1 to t2, in the unit of k_one.",
        (
            number("k_one", "rate constant at t1", "1"), temperature("t1", "where k_one holds"),
            temperature("t2", "where it is wanted"), EA,
        ),
        "unit of k_one", (0.02, 300.0, 320.0, 55.0), rate_constants.rate_constant_carried,
    ),
    Function(
        "PVAP", GROUP, "Vapour pressure from the constants of a form, in bar.", (FORM, CONSTANTS, T, UNIT), "bar",
        ("Antoine lg mmHg degC", [[8.07131, 1730.63, 233.426]], 350.0), vapour_pressure.vapour_pressure,
    ),
    Function(
        "TVAP", GROUP, "Temperature of a vapour pressure from the constants of a form, in K.",
        (FORM, CONSTANTS, number("p", "vapour pressure", "bar"), UNIT), "K",
        ("Antoine lg mmHg degC", [[8.07131, 1730.63, 233.426]], 1.01325), vapour_pressure.vapour_temperature,
    ),
    Function(
        "CPPOLY", GROUP, "Σ c·Tⁿ from ranges of exponents and constants, in the unit of the constants.",
        (EXPONENTS, POWER_CONSTANTS, T), "unit of the constants",
        ([[0.0, 1.0, -2.0]], [[44.22, 8.79e-3, -8.62e5]], 500.0), heat_capacity_sums.heat_capacity_sum,
    ),
    Function(
        "CPPOLYINT", GROUP, "Integral of Σ c·Tⁿ from t1 to t2, or of it over T.",
        (
            EXPONENTS, POWER_CONSTANTS, temperature("t1", "lower limit"), temperature("t2", "upper limit"),
            Argument("over_t", "TRUE for the integral of Cp/T", "flag", optional=True),
        ),
        "unit of the constants × K", ([[0.0, 1.0, -2.0]], [[44.22, 8.79e-3, -8.62e5]], 298.15, 500.0),
        cp_integral,
    ),
    Function(
        "INUNIT", GROUP, "A value in another unit; cal is thermochemical, BTU international.",
        (
            number("value", "the value", "1"), Argument("from_unit", "its unit", "text"),
            Argument("into_unit", "the unit wanted", "text"),
        ),
        "into_unit", (1.0, "kcal/mol", "BTU/lbmol"), conversions.in_unit,
    ),
    Function(
        "CONSTANT", GROUP, "A CODATA constant by its symbol or name, in SI units or another.",
        (
            Argument("name", "symbol or name, such as R or F", "text"),
            Argument("unit", "unit wanted", "text", optional=True),
        ),
        "SI", ("R",), conversions.constant_in,
    ),
)
