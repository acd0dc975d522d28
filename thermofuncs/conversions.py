"""Conversions: an equilibrium constant between bases, a value between units, a constant of nature.

With Δν = Σν of the gases, taken as ideal, and p° = 1 bar,

    Kp = K° (p°)^Δν,  Kc = K° [p°/(RT)]^Δν,  Kx = K° (p°/p)^Δν

(IUPAC Green Book, 3rd ed., 2007, section 2.11; the powers of p°, RT and p follow from p = x p_total = cRT).
"""

from __future__ import annotations

import math

from thermofuncs.errors import NotAboveZero, RequiredHere, UnknownBasis
from thermofuncs.relations import DEFINITIONS, finite, from_logarithm
from thermofuncs.units import Constant, R, constant, convert, dimension, factor
from thermofuncs.working import Record, shown

STANDARD_PRESSURE = 1.0e5  # Pa

# basis -> its unit pressure [Pa] or unit concentration [mol/m3]
_PRESSURE_BASES = {
    "standard": STANDARD_PRESSURE,
    "p in bar": 1.0e5,
    "p in atm": 101325.0,
    "p in Pa": 1.0,
    "p in kPa": 1.0e3,
}
_CONCENTRATION_BASES = {"concentration in mol/L": 1.0e3, "concentration in mol/m3": 1.0}
MOLE_FRACTION = "mole fraction at p"
BASES = (*_PRESSURE_BASES, *_CONCENTRATION_BASES, MOLE_FRACTION)


# What a conversion says about its units.
_SAID = {
    "cal": "cal is the thermochemical calorie, 4.184 J",
    "btu": "BTU is the international one, 1055.05585262 J",
    "mmhg": "mmHg is the conventional one, 133.322387415 Pa",
}


def _basis(text: str, argument: str) -> str:
    """The basis of the closed list that a text names."""
    folded = " ".join(text.split()).casefold()
    for known in BASES:
        if folded == known.casefold():
            return known
    raise UnknownBasis(argument=argument, given=text, known="; ".join(BASES))


def _unit_pressure(basis: str, temperature: float, pressure: float | None) -> tuple[float, str]:
    """The partial pressure [Pa] at which a gas counts as 1 on a basis, and how it is found."""
    if basis in _PRESSURE_BASES:
        return _PRESSURE_BASES[basis], f"1 on the basis {basis}"
    if basis in _CONCENTRATION_BASES:
        unit = _CONCENTRATION_BASES[basis]
        return unit * R * temperature, f"c RT = {unit:g} mol/m3 × {R:.15g} × {temperature:.12g}"
    if pressure is None:
        raise RequiredHere(argument="p", needed_by=f"the basis {MOLE_FRACTION}", meaning="the total pressure")
    return pressure * 1.0e5, f"p = {pressure:.12g} bar"


def k_on_basis(
    k_value: float,
    from_basis: str,
    into_basis: str,
    delta_nu: float,
    temperature: float,
    *,
    pressure: float | None = None,
    record: Record | None = None,
) -> float:
    """An equilibrium constant on another basis.

    Parameters
    ----------
    k_value : float. K on ``from_basis``, above 0. [powers of that basis]
    from_basis, into_basis : str. One of ``BASES``: standard, p in bar, p in atm, p in Pa, p in kPa,
        concentration in mol/L, concentration in mol/m3, mole fraction at p.
    delta_nu : float. Σν of the gases; may be fractional. [1]
    temperature : float. Above 0. [K]
    pressure : float, optional. Total pressure, needed where a basis is the mole fraction. [bar]
    record : Record, filled where given.

    Returns
    -------
    float. K on ``into_basis``.

    Raises
    ------
    UnknownBasis
        A basis is not in the list.
    RequiredHere
        The mole fraction needs the pressure.
    NotAboveZero
        K or the pressure is not positive.
    OutsideNumbers
        K on the new basis is outside the double range; the sentence has its logarithm.

    Notes
    -----
    A gas at the partial pressure that counts as 1 on the old basis counts as u_old/u_new on the new one,
    so K_new = K_old (u_old/u_new)^Δν. Source: see the module.

    Examples
    --------
    >>> round(k_on_basis(1.0, "standard", "p in atm", 1.0, 1158.0), 6)  # atm
    0.986923
    """
    source, target = _basis(from_basis, "from_basis"), _basis(into_basis, "into_basis")
    if k_value <= 0.0:
        raise NotAboveZero(argument="k_value", given=f"{k_value:.6g}", what="an equilibrium constant")
    if pressure is not None and pressure <= 0.0:
        raise NotAboveZero(argument="p", given=f"{pressure:.6g} bar", what="a pressure")
    old, how_old = _unit_pressure(source, temperature, pressure)
    new, how_new = _unit_pressure(target, temperature, pressure)
    value = k_value
    if old != new and delta_nu != 0.0:
        ratio = old / new
        if not 0.0 < ratio < math.inf:
            finite(math.inf, f"K on the basis {target}")
        ln_value = math.log(k_value) + delta_nu * math.log(ratio)
        from_logarithm(ln_value, f"K on the basis {target}", "Keep the logarithm of K instead.")
        half = ratio ** (delta_nu / 2.0)
        value = k_value * half * half
    if record is not None:
        record.step("u_old", f"unit pressure of the old basis: {source}", how_old, old, "Pa", DEFINITIONS)
        record.step("u_new", f"unit pressure of the new basis: {target}", how_new, new, "Pa", DEFINITIONS)
        record.step(
            f"K ({target})",
            "K_old (u_old/u_new)^Δν",
            f"{shown(k_value, 12)} × ({shown(old, 12)}/{shown(new, 12)})^{shown(delta_nu, 12)}",
            value,
            "1",
            DEFINITIONS,
        )
        if pressure is not None and MOLE_FRACTION not in {source, target}:
            record.caution("p has no effect: neither basis is the mole fraction.")
        if delta_nu and {source, target} & {*_CONCENTRATION_BASES, MOLE_FRACTION}:
            record.caution("The gases are taken as ideal in the conversion of K.")
    return value


def in_unit(value: float, from_unit: str, into_unit: str, record: Record | None = None) -> float:
    """A value in another unit.

    Parameters
    ----------
    value : float. [from_unit]
    from_unit, into_unit : str. Spellings of the closed list; cal is thermochemical, BTU international.
    record : Record, filled where given.

    Returns
    -------
    float. [into_unit]

    Raises
    ------
    WrongDimension, UnknownUnit, GaugePressure
        The units do not fit, or are not known.
    BelowAbsoluteZero
        A temperature is not above absolute zero.
    """
    measures = dimension(from_unit, "from_unit"), dimension(into_unit, "into_unit")
    converted = convert(value, from_unit, into_unit, "value")
    if record is not None:
        said = [text for word, text in _SAID.items() if word in (from_unit + into_unit).casefold()]
        if measures == ("temperature", "temperature"):
            relation, numbers = "through kelvin", f"{value:.12g} {from_unit}"
        else:
            ratio = factor(from_unit, into_unit)
            relation, numbers = "value × factor", f"{shown(value, 12)} × {ratio:.15g}"
        record.step("value", relation, numbers, converted, into_unit, "; ".join(said))
    return converted


def constant_in(name: str, unit: str | None = None, record: Record | None = None) -> float:
    """A CODATA constant.

    Parameters
    ----------
    name : str. Its symbol or its name, as ``thermofuncs.units.constant`` takes it.
    unit : str, optional. Of the result; the SI unit where left out.
    record : Record, filled where given.

    Returns
    -------
    float. [unit]

    Raises
    ------
    NoSuchConstant
        The name is not in the list.
    WrongDimension, UnknownUnit
        The unit does not fit, or is not known.
    """
    found: Constant = constant(name)
    value = found.value
    if record is not None:
        uncertainty = found.standard_uncertainty
        known = f"standard uncertainty {uncertainty:.3g} {found.unit}" if uncertainty else "exact"
        source = f"{found.edition}, {known}"
        record.step(found.symbol, found.name, found.symbol, value, found.unit, source)
    if unit is not None:
        ratio = factor(found.unit, unit)
        value = finite(found.value * ratio, found.name)
        if record is not None:
            numbers = f"{shown(found.value, 15)} × {ratio:.15g}"
            record.step(found.symbol, "value × factor", numbers, value, unit, found.edition)
    return value
