"""Units, quantity texts and the constants: the one door to the unit registry.

A worksheet argument is a number, in the unit that its description says, or a text with a number and a
unit. Spellings come from the closed list of ``unit_spellings``; the factors come from the registry, held
in exact fractions, which is loaded by the first conversion that needs it. cal is the thermochemical
calorie (4.184 J), BTU the international one (1055.05585262 J), lbmol 453.59237 mol, mmHg and inHg the
conventional ones (13595.1 kg/m3 under 9.80665 m/s2), torr atm/760.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from typing import TYPE_CHECKING

from scipy import constants as codata

from thermofuncs.errors import (
    BelowAbsoluteZero,
    DecimalComma,
    NoSuchConstant,
    NotAQuantity,
    QuantityOutsideNumbers,
    ShiftedScale,
    WrongDimension,
)
from thermofuncs.unit_spellings import Unit, plain, read_unit

if TYPE_CHECKING:
    import pint

R: float = codata.R  # [J/(mol K)]
F: float = codata.physical_constants["Faraday constant"][0]  # [C/mol]
R_FIT_NASA = 8.31451  # the gas constant of the NASA fits, J/(mol K)

# scale -> (m, n, z, T0): T/K = (value − z) m/n + T0
_SCALES = {
    "K": (1.0, 1.0, 0.0, 0.0),
    "degC": (1.0, 1.0, 0.0, 273.15),
    "degF": (5.0, 9.0, 32.0, 273.15),
    "degR": (5.0, 9.0, 0.0, 0.0),
}
_RATIO_SCALES = ("K", "degR")

_NUMBER = re.compile(r"([+-]?(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+-]?[0-9]+)?) ?(.*)")
_COMMA = re.compile(r"([+-]?)([0-9][0-9.,' ]*,[0-9][0-9.,']*)((?:[eE][+-]?[0-9]+)?) ?(.*)")

# What an error proposes for a dimension.
_EXAMPLES = {
    "molar energy": "kJ/mol, kcal/mol or BTU/lbmol",
    "molar entropy": "J/(mol K), cal/(mol K) or BTU/(lbmol degF)",
    "temperature": "K, degC, degF or degR",
    "temperature difference": "K difference or degC difference",
    "pressure": "bar, atm, Pa or psi",
    "molality": "mol/kg or mmol/kg",
    "concentration": "mol/L, mmol/L or mol/m3",
    "molar mass": "g/mol, kg/mol or lb/lbmol",
    "voltage": "V or mV",
    "energy": "J, kJ, kcal or BTU",
    "amount": "mol, kmol or lbmol",
    "mass": "g, kg or lb",
    "volume": "L, m3 or ft3",
    "time": "s, min or h",
    "dimensionless": "1",
}

# symbol -> (the name in the CODATA table, the unit in the house's spelling)
_CONSTANTS = {
    "R": ("molar gas constant", "J/(mol K)"),
    "F": ("Faraday constant", "C/mol"),
    "NA": ("Avogadro constant", "1/mol"),
    "kB": ("Boltzmann constant", "J/K"),
    "h": ("Planck constant", "J s"),
    "e": ("elementary charge", "C"),
    "c": ("speed of light in vacuum", "m/s"),
    "u": ("atomic mass constant", "kg"),
    "me": ("electron mass", "kg"),
    "mp": ("proton mass", "kg"),
    "Eh": ("Hartree energy", "J"),
    "a0": ("Bohr radius", "m"),
    "Vm": ("molar volume of ideal gas (273.15 K, 100 kPa)", "m3/mol"),
    "atm": ("standard atmosphere", "Pa"),
}
# atomic mass constant as printed in an edition, kg
_EDITIONS = {1.66053906892e-27: "CODATA 2022", 1.66053906660e-27: "CODATA 2018"}


@dataclass(frozen=True, slots=True)
class Constant:
    """A constant of nature.

    Parameters
    ----------
    symbol : str. As ``constant`` takes it.
    name : str. Its name in the CODATA table.
    value : float. In ``unit``.
    unit : str. A spelling of the closed list.
    standard_uncertainty : float. In ``unit``; 0 where the value is exact by definition.
    edition : str. The CODATA adjustment that it comes from.
    """

    symbol: str
    name: str
    value: float
    unit: str
    standard_uncertainty: float
    edition: str


@lru_cache(maxsize=1)
def _registry() -> pint.UnitRegistry[Fraction]:
    """The registry, in exact fractions, with the pound mole."""
    # loaded by the first conversion: a cell that converts nothing does not pay for it
    import pint  # noqa: PLC0415

    registry: pint.UnitRegistry[Fraction] = pint.UnitRegistry(non_int_type=Fraction)
    registry.define("pound_mole = 453.59237 * mole")
    return registry


def dimension(unit: str, argument: str = "unit") -> str:
    """The dimension of a unit, such as ``molar energy``.

    Raises
    ------
    UnknownUnit, GaugePressure
        The spelling is not in the closed list, or counts from the atmosphere.
    """
    return read_unit(unit, argument).dimension


@lru_cache(maxsize=1024)
def factor(from_unit: str, into_unit: str, argument: str = "unit") -> float:
    """What a value in one unit is multiplied by to stand in the other.

    Parameters
    ----------
    from_unit, into_unit : str. Spellings of the closed list.
    argument : str. The argument that an error names.

    Returns
    -------
    float. Exactly 1 where the two are one unit.

    Raises
    ------
    WrongDimension
        The units measure different things.
    ShiftedScale
        One of them is degC or degF, which no factor converts.
    """
    if from_unit == into_unit:
        return 1.0
    given, needed = read_unit(from_unit, argument), read_unit(into_unit, argument)
    if given == needed:
        return 1.0
    _same_dimension(given, needed, argument)
    for unit in (given, needed):
        if unit.dimension == "temperature" and unit.spelling not in _RATIO_SCALES:
            raise ShiftedScale(argument=argument, given=given.spelling, needed=needed.spelling)
    ratio = _registry().Quantity(Fraction(1), given.expression).to(needed.expression).magnitude
    return float(ratio)


def _same_dimension(given: Unit, needed: Unit, argument: str) -> None:
    """Refuse two units that measure different things."""
    if given.dimension == needed.dimension:
        return
    pair = {given.dimension, needed.dimension}
    if pair == {"temperature", "temperature difference"}:
        # a difference of 10 K and 10 K from zero are the same number; degC and degF are not
        absolute = given if given.dimension == "temperature" else needed
        if absolute.spelling in _RATIO_SCALES:
            return
    raise _wrong_dimension(given, needed, argument)


def _wrong_dimension(given: Unit, needed: Unit, argument: str) -> WrongDimension:
    """The error that a unit measures something else than is needed, with the remedy where one is known."""
    pair = {given.dimension, needed.dimension}
    remedy = ""
    if given.spelling == "C" and needed.dimension == "temperature":
        remedy = " For degrees Celsius write degC."
    elif given.spelling in {"eV", "hartree"} and needed.dimension == "molar energy":
        remedy = f" For each particle write {given.spelling}/particle."
    elif pair == {"temperature", "temperature difference"}:
        remedy = " A difference of temperatures is written as degC difference."
    return WrongDimension(
        argument=argument,
        given=given.spelling,
        given_dimension=given.dimension,
        needed_dimension=needed.dimension,
        examples=_EXAMPLES.get(needed.dimension, needed.spelling),
        remedy=remedy,
    )


def convert(value: float, from_unit: str, into_unit: str, argument: str = "unit") -> float:
    """A value in another unit, with the zeros of degC and degF moved.

    Parameters
    ----------
    value : float. [from_unit]
    from_unit, into_unit : str. Spellings of the closed list.
    argument : str. The argument that an error names.

    Returns
    -------
    float. [into_unit]

    Raises
    ------
    WrongDimension
        The units measure different things.
    BelowAbsoluteZero
        A temperature is not above absolute zero.

    Examples
    --------
    >>> convert(25.0, "degC", "K")  # K
    298.15
    """
    if from_unit == into_unit:
        return value
    given, needed = read_unit(from_unit, argument), read_unit(into_unit, argument)
    if given.dimension == needed.dimension == "temperature":
        above_zero = kelvin(value, argument, given.spelling)
        if given == needed:
            return value
        up, down, zero, offset = _SCALES[needed.spelling]
        return (above_zero - offset) * down / up + zero
    converted = value * factor(from_unit, into_unit, argument)
    if not math.isfinite(converted) or (converted == 0.0) != (value == 0.0):
        raise QuantityOutsideNumbers(argument=argument, given=f"{value:.6g} {from_unit} in {into_unit}")
    return converted


def kelvin(value: float | str, argument: str = "T", scale: str = "K") -> float:
    """A temperature in kelvin.

    Parameters
    ----------
    value : float or str. A number in ``scale``, or a quantity text such as ``25 degC``.
    argument : str. The argument that an error names.
    scale : str. The scale of bare numbers: K, degC, degF or degR.

    Returns
    -------
    float. [K]

    Raises
    ------
    BelowAbsoluteZero
        The temperature is not above absolute zero.
    DecimalComma, NotAQuantity, WrongDimension, UnknownUnit
        The text is no temperature.

    Examples
    --------
    >>> kelvin("77 degF")  # K
    298.15
    """
    if isinstance(value, str):
        value, unit = parse_quantity(value, argument)
        given = read_unit(unit, argument)
        if given.dimension != "temperature":
            raise _wrong_dimension(given, read_unit("K"), argument)
        scale = given.spelling
    up, down, zero, offset = _SCALES[scale]
    result = (value - zero) * up / down + offset
    if 0.0 < result < math.inf:
        return result
    if math.isfinite(result):
        lowest = f"{zero - offset * down / up:g} {scale}"
        raise BelowAbsoluteZero(argument=argument, given=f"{value:.10g} {scale}", zero=lowest)
    raise QuantityOutsideNumbers(argument=argument, given=f"{value:g} {scale}")


def quantity(value: float | str, unit: str, argument: str) -> float:
    """A worksheet argument as a number in a unit.

    Parameters
    ----------
    value : float or str. A number in ``unit``, or a quantity text such as ``3 atm``.
    unit : str. The unit of the result.
    argument : str. The argument that an error names.

    Returns
    -------
    float. [unit]

    Raises
    ------
    DecimalComma, NotAQuantity, WrongDimension, UnknownUnit, GaugePressure
        The text is no such quantity.
    """
    if not isinstance(value, str):
        return value
    number, given = parse_quantity(value, argument)
    return convert(number, given, unit, argument)


@lru_cache(maxsize=1024)
def parse_quantity(text: str, argument: str) -> tuple[float, str]:
    """The number and the unit of a quantity text.

    Parameters
    ----------
    text : str. Such as ``25 degC``, ``1.5E+02 kJ/mol``, ``−3 °F``.
    argument : str. The argument that an error names.

    Returns
    -------
    tuple of float and str. The number, and the unit in the house's spelling.

    Raises
    ------
    DecimalComma
        The number has a comma; the sentence has the text that would do.
    NotAQuantity
        The text is not a number with a unit behind it.
    UnknownUnit, GaugePressure
        The unit is not in the closed list, or counts from the atmosphere.
    """
    spelling = plain(text)
    comma = _COMMA.fullmatch(spelling)
    if comma:
        raise DecimalComma(argument=argument, given=text, proposal=_without_comma(*comma.groups()))
    found = _NUMBER.fullmatch(spelling)
    if not found:
        why = "does not start with a number: write a number, a space and a unit"
        raise NotAQuantity(argument=argument, given=text, why=why)
    digits, unit = found.groups()
    if unit[:1] in tuple("0123456789.,'") and not unit.startswith("1/"):
        why = "has more than one number: write digits without spaces between them, then a unit"
        raise NotAQuantity(argument=argument, given=text, why=why)
    if not unit:
        raise NotAQuantity(argument=argument, given=text, why="has no unit: a text is a number and a unit")
    number = float(digits)
    mantissa = re.split("[eE]", digits)[0]
    if math.isinf(number) or (number == 0.0 and mantissa.strip("+-0.")):
        raise QuantityOutsideNumbers(argument=argument, given=text)
    return number, read_unit(unit, argument).spelling


def _without_comma(sign: str, digits: str, exponent: str, unit: str) -> str:
    """The texts that a number with commas may have meant, with a point."""
    digits = digits.replace(" ", "").replace("'", "")
    head, _, tail = digits.rpartition(",")
    behind = f"{exponent} {unit or 'and a unit'}"
    decimal = f"{sign}{head.replace('.', '')}.{tail}{behind}"
    thousands = f"{sign}{digits.replace(',', '')}{behind}"
    if "." in tail or "," in head:
        return thousands
    if len(tail) == 3 and "." not in head and head != "0":
        return f"{decimal} or {thousands}, whichever is meant"
    return decimal


@lru_cache(maxsize=64)
def constant(name: str) -> Constant:
    """A constant by its symbol or by its name in the CODATA table.

    Parameters
    ----------
    name : str. ``R``, ``F``, ``NA``, ``kB``, ``h``, ``e``, ``c``, ``u``, ``me``, ``mp``, ``Eh``, ``a0``,
        ``Vm`` (ideal gas, 273.15 K, 100 kPa), ``atm``, or such as ``molar gas constant``.

    Returns
    -------
    Constant. Value, unit, standard uncertainty and edition.

    Raises
    ------
    NoSuchConstant
        The name is not in the list.

    Notes
    -----
    Source: the CODATA adjustment of the fundamental physical constants that scipy carries.
    """
    known = plain(name)
    for symbol, (title, unit) in _CONSTANTS.items():
        if known in {symbol, title} or known.lower() == title.lower():
            value, _, uncertainty = codata.physical_constants[title]
            mass = codata.physical_constants["atomic mass constant"][0]
            edition = _EDITIONS.get(mass, "CODATA, edition of the installed scipy")
            return Constant(symbol, title, float(value), unit, float(uncertainty), edition)
    raise NoSuchConstant(argument="name", given=name, known=", ".join(_CONSTANTS))
