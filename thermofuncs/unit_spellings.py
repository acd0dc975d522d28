"""The closed list of units: names, the classes they belong to, the dimensions that they combine into.

A spelling is taken apart into names with powers ("J mol-1 K-1" and "J/(mol K)" both into J, mol⁻¹, K⁻¹)
and is a unit only where the classes of the names are a row of ``DIMENSIONS``. Behind a solidus all
factors stand in the denominator, as the trade writes "J/mol K"; the other reading is never in the list,
which a test walks. Everything else is refused with the near spellings.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import lru_cache

from thermofuncs.errors import GaugePressure, UnknownUnit

# class -> name -> (the registry's name, further names)
NAMES: dict[str, dict[str, tuple[str, tuple[str, ...]]]] = {
    "energy": {
        "J": ("joule", ("joule", "joules")),
        "mJ": ("millijoule", ()),
        "kJ": ("kilojoule", ("kilojoule", "kilojoules")),
        "MJ": ("megajoule", ()),
        "GJ": ("gigajoule", ()),
        "cal": ("thermochemical_calorie", ("calorie", "calories")),
        "kcal": ("kilothermochemical_calorie", ("kilocalorie", "kilocalories")),
        "BTU": ("international_british_thermal_unit", ("Btu", "btu")),
        "eV": ("electron_volt", ()),
        "meV": ("millielectron_volt", ()),
        "hartree": ("hartree", ("Hartree", "hartrees", "Eh")),
        "Wh": ("watt_hour", ()),
        "kWh": ("kilowatt_hour", ()),
    },
    "amount": {
        "mol": ("mole", ("mole", "moles", "gmol")),
        "umol": ("micromole", ()),
        "mmol": ("millimole", ()),
        "kmol": ("kilomole", ("kgmol",)),
        "lbmol": ("pound_mole", ("lbmole", "lbmoles")),
        "particle": ("particle", ("molecule", "atom")),
    },
    "temperature": {
        "K": ("kelvin", ("kelvin", "Kelvin", "degK")),
        "degC": ("delta_degree_Celsius", ("celsius", "Celsius")),
        "degF": ("delta_degree_Fahrenheit", ("fahrenheit", "Fahrenheit")),
        "degR": ("degree_Rankine", ("rankine", "Rankine")),
    },
    "temperature difference": {
        "K difference": ("kelvin", ()),
        "degC difference": ("delta_degree_Celsius", ()),
        "degF difference": ("delta_degree_Fahrenheit", ()),
        "degR difference": ("degree_Rankine", ()),
    },
    "pressure": {
        "Pa": ("pascal", ("pascal",)),
        "hPa": ("hectopascal", ()),
        "kPa": ("kilopascal", ()),
        "MPa": ("megapascal", ()),
        "bar": ("bar", ("bara",)),
        "mbar": ("millibar", ("mbara",)),
        "atm": ("standard_atmosphere", ()),
        "psi": ("pound_force_per_square_inch", ("psia",)),
        "torr": ("torr", ("Torr",)),
        "mmHg": ("millimeter_Hg", ()),
        "inHg": ("inch_Hg", ()),
    },
    "volume": {
        "L": ("liter", ("l", "liter", "litre", "liters", "litres")),
        "mL": ("milliliter", ("ml", "cc")),
    },
    "length": {
        "m": ("meter", ()),
        "dm": ("decimeter", ()),
        "cm": ("centimeter", ()),
        "mm": ("millimeter", ()),
        "ft": ("foot", ()),
    },
    "mass": {
        "g": ("gram", ("gram", "grams")),
        "mg": ("milligram", ()),
        "kg": ("kilogram", ()),
        "lb": ("pound", ("lbm", "lbs")),
    },
    "time": {
        "s": ("second", ("sec", "second", "seconds")),
        "ms": ("millisecond", ()),
        "min": ("minute", ("minute", "minutes")),
        "h": ("hour", ("hr", "hour", "hours")),
        "d": ("day", ("day", "days")),
    },
    "charge": {"C": ("coulomb", ("coulomb",))},
    "voltage": {"V": ("volt", ("volt", "volts")), "mV": ("millivolt", ())},
    "power": {"W": ("watt", ()), "kW": ("kilowatt", ()), "MW": ("megawatt", ())},
}

# dimension -> the combinations of classes that have it
DIMENSIONS: dict[str, tuple[dict[str, int], ...]] = {
    "molar energy": ({"energy": 1, "amount": -1},),
    "molar entropy": (
        {"energy": 1, "amount": -1, "temperature": -1},
        {"pressure": 1, "volume": 1, "amount": -1, "temperature": -1},
        {"pressure": 1, "length": 3, "amount": -1, "temperature": -1},
    ),
    "temperature": ({"temperature": 1},),
    "temperature difference": ({"temperature difference": 1},),
    "pressure": ({"pressure": 1},),
    "molality": ({"amount": 1, "mass": -1},),
    "concentration": ({"amount": 1, "volume": -1}, {"amount": 1, "length": -3}),
    "molar mass": ({"mass": 1, "amount": -1},),
    "molar volume": ({"volume": 1, "amount": -1}, {"length": 3, "amount": -1}),
    "molar charge": ({"charge": 1, "amount": -1},),
    "reciprocal amount": ({"amount": -1},),
    "energy": ({"energy": 1},),
    "entropy": ({"energy": 1, "temperature": -1},),
    "specific energy": ({"energy": 1, "mass": -1},),
    "specific entropy": ({"energy": 1, "mass": -1, "temperature": -1},),
    "action": ({"energy": 1, "time": 1},),
    "power": ({"power": 1}, {"energy": 1, "time": -1}),
    "voltage": ({"voltage": 1},),
    "charge": ({"charge": 1},),
    "amount": ({"amount": 1},),
    "mass": ({"mass": 1},),
    "density": ({"mass": 1, "volume": -1}, {"mass": 1, "length": -3}),
    "length": ({"length": 1},),
    "volume": ({"volume": 1}, {"length": 3}),
    "speed": ({"length": 1, "time": -1},),
    "time": ({"time": 1},),
    "reciprocal temperature": ({"temperature": -1},),
    "rate of zeroth order": (
        {"amount": 1, "volume": -1, "time": -1},
        {"amount": 1, "length": -3, "time": -1},
    ),
    "rate constant of first order": ({"time": -1},),
    "rate constant of second order": (
        {"volume": 1, "amount": -1, "time": -1},
        {"length": 3, "amount": -1, "time": -1},
    ),
    "rate constant of third order": (
        {"volume": 2, "amount": -2, "time": -1},
        {"length": 6, "amount": -2, "time": -1},
    ),
    "dimensionless": ({},),
}

# Names that are a combination by themselves.
_COMPOUND: dict[str, dict[str, int]] = {
    "M": {"mol": 1, "L": -1},
    "mM": {"mmol": 1, "L": -1},
    "uM": {"umol": 1, "L": -1},
}

_CLASS_OF = {name: group for group, names in NAMES.items() for name in names}
_CANONICAL = {
    spelling: name for names in NAMES.values() for name, (_, further) in names.items() for spelling in (name, *further)
}
_PATTERNS = {
    frozenset(pattern.items()): (dimension, tuple(pattern))
    for dimension, patterns in DIMENSIONS.items()
    for pattern in patterns
}

# What is written otherwise for the eye: read as the plain letters on the right.
_LETTERS = str.maketrans(
    {
        "\u00a0": " ", "\u202f": " ", "\u2009": " ", "−": "-", "‐": "-", "‑": "-",
        "·": "*", "⋅": "*", "•": "*", "×": "*", "µ": "u", "μ": "u", "℃": "°C", "℉": "°F", "\u212a": "K",
    }
)  # fmt: skip
_SUPERSCRIPTS = str.maketrans("⁻⁺⁰¹²³⁴⁵⁶⁷⁸⁹", "-+0123456789")
_RAISED = re.compile("[⁻⁺⁰¹²³⁴⁵⁶⁷⁸⁹]+")
_POWER = re.compile(r"(?:\*\*|\^)\(?(-?[0-9]+)\)?")
_DEGREE = re.compile(r"(?:°|\bdeg(?:rees?|\.)?) ?(Celsius|Fahrenheit|Rankine|[CFRK])\b", re.IGNORECASE)
_HYPHENATED = re.compile(r"\b(lb|g|kg)-(mol|mole)\b")
_GAUGE = re.compile(r"(?:\w*psi|\w*bar|\w*Pa|atm) ?(?:g|ga|\(g\)|\(ga\)|gauge|\(gauge\))|at[uü]")
_ABSOLUTE = re.compile(r"(\w*psi|\w*bar|\w*Pa|atm) ?(?:\(a\)|\(abs\)|abs|absolute)")
_DIFFERENCE = re.compile(r"(?:delta[ _])(deg[CFR]|K)|(deg[CFR]|K) (?:difference|diff)")
_FACTOR = re.compile(r"([A-Za-z]+)(?:\^?(-?[1-9]))?")
_SEPARATOR = re.compile(r" ?\* ?| |-(?=[A-Za-z])")

_BARE_SCALE = re.compile(r"(?<![A-Za-z])[CcFfRk](?![A-Za-z])")
_SCALES = {
    "C": "degrees Celsius write degC",
    "F": "degrees Fahrenheit write degF",
    "R": "degrees Rankine write degR",
    "K": "kelvin write K",
}


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit of the closed list.

    Parameters
    ----------
    spelling : str. Its canonical spelling, such as ``J/(mol K)``.
    dimension : str. A key of ``DIMENSIONS``.
    expression : str. The same unit in the registry's words.
    """

    spelling: str
    dimension: str
    expression: str


def plain(text: str) -> str:
    """A unit text with the eye's letters (superscripts, middle dots, degree signs) as plain ones."""
    text = " ".join(text.translate(_LETTERS).split())
    text = _RAISED.sub(lambda found: "^" + found.group().translate(_SUPERSCRIPTS), text)
    text = _POWER.sub(r"^\1", text)
    text = _DEGREE.sub(lambda found: "deg" + found.group(1)[0].upper(), text)
    return _HYPHENATED.sub(r"\1mol", text)


LONGEST = 120  # characters of a unit's spelling


@lru_cache(maxsize=1024)
def read_unit(text: str, argument: str = "unit") -> Unit:
    """The unit that a spelling means.

    Parameters
    ----------
    text : str. A spelling of the closed list, such as ``kJ/mol`` or ``J mol-1 K-1``.
    argument : str. The argument that an error names.

    Raises
    ------
    UnknownUnit
        The spelling is not in the list; the sentence has the near ones.
    GaugePressure
        The unit counts from the atmosphere.
    """
    if len(text) > LONGEST:
        near = f"A unit has at most {LONGEST} characters."
        raise UnknownUnit(argument=argument, given=text[:40] + "…", near=near)
    spelling = plain(text)
    if _GAUGE.fullmatch(spelling):
        raise GaugePressure(argument=argument, given=text)
    spelling = _ABSOLUTE.sub(r"\1", spelling)
    difference = _DIFFERENCE.fullmatch(spelling)
    if difference:
        powers: dict[str, int] | None = {f"{difference.group(1) or difference.group(2)} difference": 1}
    elif spelling == "1":
        powers = {}
    else:
        powers = _powers(spelling)
    unit = None if powers is None else _unit(powers)
    if unit is None:
        raise UnknownUnit(argument=argument, given=text, near=_near(spelling))
    return unit


def _powers(spelling: str) -> dict[str, int] | None:
    """The names of a spelling with their powers, or None where it cannot be taken apart."""
    powers: dict[str, int] = {}
    for place, group in enumerate(spelling.split("/")):
        inside = group.strip()
        if inside.startswith("(") and inside.endswith(")"):
            inside = inside[1:-1].strip()
        if place == 0 and inside == "1" and "/" in spelling:
            continue
        for part in _SEPARATOR.split(inside):
            found = _FACTOR.fullmatch(part)
            if not found:
                return None
            name, digits = found.groups()
            power = int(digits or 1)
            if place:
                # a negative power behind a solidus has two readings
                if power < 0:
                    return None
                power = -power
            inner = _COMPOUND.get(name) or {_CANONICAL.get(name, ""): 1}
            for atom, count in inner.items():
                if atom not in _CLASS_OF:
                    return None
                powers[atom] = powers.get(atom, 0) + power * count
    return powers


def _unit(powers: dict[str, int]) -> Unit | None:
    """The unit of the list that has these names and powers, or None."""
    classes = {_CLASS_OF[name]: name for name in powers}
    found = _PATTERNS.get(frozenset((group, powers[name]) for group, name in classes.items()))
    if found is None or len(classes) != len(powers):
        return None
    dimension, order = found
    powers = {classes[group]: powers[classes[group]] for group in order}
    expression = " * ".join(f"{NAMES[_CLASS_OF[name]][name][0]} ** {power}" for name, power in powers.items())
    return Unit(canonical(powers), dimension, expression or "dimensionless")


def canonical(powers: dict[str, int]) -> str:
    """The spelling of the house for names with powers: J/(mol K), 1/s, mol/m3."""
    above = [name + (str(power) if power > 1 else "") for name, power in powers.items() if power > 0]
    below = [name + (str(-power) if power < -1 else "") for name, power in powers.items() if power < 0]
    if not below:
        return " ".join(above) or "1"
    return " ".join(above or ["1"]) + "/" + (below[0] if len(below) == 1 else f"({' '.join(below)})")


def every_combination() -> list[dict[str, int]]:
    """Names with powers of every unit of the list."""
    found: list[dict[str, int]] = []
    for patterns in DIMENSIONS.values():
        for pattern in patterns:
            made: list[dict[str, int]] = [{}]
            for group, power in pattern.items():
                made = [{**powers, name: power} for powers in made for name in NAMES[group]]
            found += made
    return found


@lru_cache(maxsize=256)
def _near(spelling: str) -> str:
    """The near spellings of the list, as the end of a sentence."""
    # difflib is needed for an error alone
    import difflib  # noqa: PLC0415

    scale = _BARE_SCALE.search(spelling)
    if scale:
        return f"For {_SCALES[scale.group().upper()]}."
    known = [canonical(powers) for powers in every_combination()]
    lower: dict[str, str] = {}
    for name in known:
        lower.setdefault(name.lower(), name)
    near = [lower[word] for word in difflib.get_close_matches(spelling.lower(), list(lower), n=4, cutoff=0.5)]
    if near:
        return f"Near spellings: {', '.join(near)}."
    return "Units are written as kJ/mol, J/(mol K), bar, degC."
