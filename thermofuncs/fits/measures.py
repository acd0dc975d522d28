"""What a column of measured values holds: K, a logarithm of it, a rate constant or a pressure in a unit."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import lru_cache
from typing import Literal

from thermofuncs.errors import NotAboveZeroInRange, OutsideNumbers, RequiredHere, ThermofuncsError, UnknownColumn
from thermofuncs.fits.laws import Law
from thermofuncs.unit_spellings import read_unit
from thermofuncs.units import factor

LN10 = math.log(10.0)
SMALLEST_LN, LARGEST_LN = -708.39, 709.78  # of a normal double
Scale = Literal["value", "ln", "lg", "minus lg"]
# the scale's value times this is the natural logarithm
_TO_LN = {"ln": 1.0, "lg": LN10, "minus lg": -LN10}
_OF_K: dict[str, Scale] = {"K": "value", "lnK": "ln", "lgK": "lg", "pK": "minus lg"}

# the order of a rate constant by its dimension, and the unit that Eyring's equation is applied in
_EYRING_UNITS = {
    "rate constant of first order": "1/s",
    "rate constant of second order": "L/(mol s)",
    "rate constant of third order": "L2/(mol2 s)",
}
_RATES = (*_EYRING_UNITS, "rate of zeroth order")


@dataclass(frozen=True, slots=True, eq=False)
class Measure:
    """What a column holds; each reading of one text is one object.

    Parameters
    ----------
    label : str. As a header shows it, such as ``pK`` or ``p [mmHg]``.
    scale : value, ln, lg or minus lg.
    symbol : K, k or p.
    unit : str. Of the value inside the logarithm; ``1`` for K.
    standard : str. The unit that the fitted logarithm is taken in.
    ln_factor : float. ln of the factor from ``unit`` to ``standard``.
    """

    label: str
    scale: Scale
    symbol: str
    unit: str
    standard: str
    ln_factor: float

    @property
    def log_name(self) -> str:
        """The fitted logarithm, such as ``ln K`` or ``ln(p/bar)``."""
        return "ln K" if self.symbol == "K" else f"ln({self.symbol}/({self.standard}))"

    @property
    def is_plain(self) -> bool:
        """Whether the fitted logarithm is that of the column's number."""
        return self.scale == "value" and not self.ln_factor

    def to_ln(self, y: float) -> float:
        """The natural logarithm, in the standard unit, of a value of the column."""
        return (math.log(y) if self.scale == "value" else _TO_LN[self.scale] * y) + self.ln_factor

    def from_ln(self, ln_value: float) -> float:
        """The value of the column for a natural logarithm in the standard unit."""
        return self.inside(ln_value) if self.scale == "value" else (ln_value - self.ln_factor) / _TO_LN[self.scale]

    def inside(self, ln_value: float) -> float:
        """K, the rate constant or the pressure in the column's unit, for a natural logarithm in the standard unit."""
        inside = ln_value - self.ln_factor
        if not SMALLEST_LN < inside < LARGEST_LN:
            raise OutsideNumbers(
                what=f"{self.symbol} of the fit", detail=f", with a natural logarithm of {inside:.6g}",
                remedy="Take a temperature nearer to the points.",
            )  # fmt: skip
        return math.exp(inside)

    def checked_ln(self, y: float, place: int = 1) -> float:
        """The natural logarithm of an asked value, refused where there is none."""
        if not math.isfinite(y) or (self.scale == "value" and y <= 0.0):
            raise NotAboveZeroInRange(
                argument="y_value", given=f"{y:g}", place=place, what=self.symbol, why=", as its logarithm is taken"
            )
        return self.to_ln(y)

    def u_ln(self, y: float, u: float) -> float:
        """The standard uncertainty of the logarithm, for a value of the column and its uncertainty."""
        return u / y if self.scale == "value" else abs(_TO_LN[self.scale]) * u


@lru_cache(maxsize=256)
def read_measure(text: str | None, law: Law) -> Measure:
    """What a column holds.

    Parameters
    ----------
    text : str or None. ``K``, ``ln K``, ``lg K``, ``pK``, a unit of a rate constant or of pressure, or such
        a unit behind ``ln`` or ``lg``; None for K, where the law takes one.
    law : Law.

    Raises
    ------
    UnknownColumn, RequiredHere
        The text means nothing, or not what the law is about.
    """
    if text is None:
        if law.symbol != "K":
            what = "the unit of the rate constants" if law.symbol == "k" else "the unit of the pressures"
            meaning = f"{what}, such as {_such(law)}"
            raise RequiredHere(argument="y_is", needed_by=f"the law {law.name}", meaning=meaning)
        text = "K"
    words = " ".join(text.split())
    scale = _OF_K.get(words.replace(" ", ""))
    if scale is not None:
        if law.symbol != "K":
            raise _unknown(text, law, "an equilibrium constant")
        return Measure("K" if scale == "value" else words, scale, "K", "1", "1", 0.0)
    head, _, tail = words.partition(" ")
    unit, logarithm = (tail, head) if head in {"ln", "lg"} and tail else (words, "value")
    unit = unit.strip().removeprefix("(").removesuffix(")") if unit.startswith("(") else unit
    dimension, spelling = _dimension(unit, text, law)
    standard = _standard(dimension, spelling, law)
    if standard is None:
        raise _unknown(text, law, f"a unit of {dimension}")
    symbol = "k" if law.symbol == "k" else "p"
    label = f"{symbol} [{spelling}]" if logarithm == "value" else f"{logarithm}({symbol}/({spelling}))"
    ln_factor = math.log(factor(spelling, standard))
    return Measure(label, logarithm, symbol, spelling, standard, ln_factor)  # type: ignore[arg-type]  # ln, lg or value


def _dimension(unit: str, text: str, law: Law) -> tuple[str, str]:
    """The dimension and the house's spelling of a unit."""
    if unit in {"log K", "logK", "log"} or unit.startswith("log "):
        raise _unknown(text, law, "where log may be lg (decadic) or ln (natural)")
    try:
        read = read_unit(unit, "y_is")
    except ThermofuncsError as error:
        raise _unknown(text, law, f"which is not understood ({error.sentence.rstrip('.')})") from None
    return read.dimension, read.spelling


def _standard(dimension: str, spelling: str, law: Law) -> str | None:
    """The unit that the law's logarithm is taken in, or None where the dimension does not fit."""
    if law.symbol in {"K", "p"}:
        return "bar" if dimension == "pressure" else None
    if law.family == "Eyring":
        return _EYRING_UNITS.get(dimension)
    return spelling if dimension in _RATES else None


def _such(law: Law) -> str:
    return {"K": "K, ln K, lg K, pK, or bar", "k": "1/s or L/(mol s)", "p": "bar or mmHg"}[law.symbol]


def _unknown(text: str, law: Law, why: str) -> UnknownColumn:
    known = {
        "K": "K, ln K, lg K or pK; a pressure unit for a K that is one gas's pressure over 1 bar",
        "k": "the unit of the rate constants, such as 1/s or L/(mol s), alone or behind ln or lg",
        "p": "the unit of the pressures, such as bar or mmHg, alone or behind ln or lg",
    }[law.symbol]
    return UnknownColumn(given=text[:60], why=why, law=law.name, known=known)


