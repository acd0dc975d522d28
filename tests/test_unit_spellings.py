"""The closed list of unit spellings."""

from __future__ import annotations

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.errors import GaugePressure, UnknownUnit
from thermofuncs.unit_spellings import DIMENSIONS, NAMES, _unit, canonical, every_combination, read_unit
from thermofuncs.units import _registry, factor

# dimension -> the registry's words for it
DIMENSIONALITY = {
    "molar energy": "joule / mole",
    "molar entropy": "joule / mole / kelvin",
    "temperature": "kelvin",
    "temperature difference": "kelvin",
    "pressure": "pascal",
    "molality": "mole / kilogram",
    "concentration": "mole / meter ** 3",
    "molar mass": "kilogram / mole",
    "molar volume": "meter ** 3 / mole",
    "molar charge": "coulomb / mole",
    "reciprocal amount": "1 / mole",
    "energy": "joule",
    "entropy": "joule / kelvin",
    "specific energy": "joule / kilogram",
    "specific entropy": "joule / kilogram / kelvin",
    "action": "joule * second",
    "power": "watt",
    "voltage": "volt",
    "charge": "coulomb",
    "amount": "mole",
    "mass": "kilogram",
    "density": "kilogram / meter ** 3",
    "length": "meter",
    "volume": "meter ** 3",
    "speed": "meter / second",
    "time": "second",
    "reciprocal temperature": "1 / kelvin",
    "rate of zeroth order": "mole / meter ** 3 / second",
    "rate constant of first order": "1 / second",
    "rate constant of second order": "meter ** 3 / mole / second",
    "rate constant of third order": "meter ** 6 / mole ** 2 / second",
    "dimensionless": "dimensionless",
}

JOULES_PER_MOLE_AND_KELVIN = [
    "J/(mol K)", "J/mol/K", "J mol-1 K-1", "J·mol⁻¹·K⁻¹", "J/(mol*K)", "J/mol K", "J/mol·K", "J/mol-K",
    "J/mol*K", "J mol^-1 K^-1", "J mol**-1 K**-1", "J mol^(-1) K^(-1)", "J/(mol\u00a0K)", "K-1 J mol-1",
    "J/(K mol)", " J / ( mol K ) ", "joule/(mole kelvin)", "J mol−1 K−1", "J⋅mol⁻¹⋅K⁻¹", "J/(mol °C)",
]  # fmt: skip

SYNONYMS = {
    "J/(mol K)": JOULES_PER_MOLE_AND_KELVIN,
    "kJ/mol": ["kJ mol-1", "kJ·mol⁻¹", "kJ mol^-1", "J/mmol", "MJ/kmol", "kilojoules/mole"],
    "BTU/lbmol": ["Btu/lbmol", "btu/lb-mol", "BTU lbmol-1", "BTU/lbmole"],
    "cal/(mol K)": ["cal/mol/K", "cal mol-1 K-1", "cal/mol-K", "kcal/(kmol K)"],
    "degC": ["°C", "℃", "deg C", "degrees C", "Celsius", "degree Celsius", "degc", "° C"],
    "degF": ["°F", "℉", "deg F", "Fahrenheit"],
    "K": ["kelvin", "Kelvin", "°K", "\u212a"],
    "degR": ["°R", "Rankine"],
    "degC difference": ["°C difference", "delta degC", "delta_degC", "degC diff"],
    "bar": ["bara", "bar(a)", "bar abs"],
    "psi": ["psia", "psi(a)"],
    "torr": ["Torr"],
    "mol/L": ["M", "mol/l", "mol L-1", "mol/dm3", "kmol/m³"],
    "mmol/L": ["mM", "mol/m3", "mol m-3"],
    "umol/L": ["µM", "μmol/L", "uM"],
    "1/s": ["s-1", "s^-1", "s⁻¹", "1/sec"],
    "L/(mol s)": ["1/(M s)", "M-1 s-1", "L mol-1 s-1", "dm3/(mol s)"],
    "L2/(mol2 s)": ["M-2 s-1", "L2 mol-2 s-1"],
    "eV/particle": ["eV/molecule", "eV/atom"],
    "g/mol": ["g mol-1", "kg/kmol", "lb/lbmol"],
    "m3": ["m^3", "m³", "m**3"],
    "1": ["1"],
}


def every_name_in_every_place() -> list[dict[str, int]]:
    """Combinations in which each name stands once or more in each place where its class may stand."""
    found: list[dict[str, int]] = []
    for patterns in DIMENSIONS.values():
        for pattern in patterns:
            names = [list(NAMES[group]) for group in pattern]
            for turn in range(max(map(len, names), default=1)):
                picked = [group[turn % len(group)] for group in names]
                found.append(dict(zip(picked, pattern.values(), strict=True)))
    return found


def test_every_dimension_has_the_registry_s_dimensionality() -> None:
    """Each unit of the closed list has, in the registry, the dimensionality of the dimension it declares."""
    assert set(DIMENSIONALITY) == set(DIMENSIONS)
    registry = _registry()
    wanted = {name: registry.parse_units(words).dimensionality for name, words in DIMENSIONALITY.items()}
    for powers in every_name_in_every_place():
        unit = read_unit(canonical(powers))
        assert registry.parse_units(unit.expression).dimensionality == wanted[unit.dimension], unit


def test_every_name_is_known_to_the_registry() -> None:
    """Each name of the closed list is one that the registry defines."""
    registry = _registry()
    for names in NAMES.values():
        for words, _ in names.values():
            assert isinstance(registry.parse_units(words), pint.Unit)


def test_canonical_spelling_reads_as_itself() -> None:
    """The canonical spelling of each unit reads as a unit with that spelling."""
    for powers in every_combination():
        assert read_unit(canonical(powers)).spelling == canonical(powers)


@pytest.mark.parametrize(("unit", "synonyms"), SYNONYMS.items())
def test_synonyms_are_one_unit(unit: str, synonyms: list[str]) -> None:
    """All spellings of a unit convert into it with a factor of exactly one."""
    for synonym in synonyms:
        if unit in {"degC", "degF"}:
            assert read_unit(synonym) == read_unit(unit)
        else:
            assert factor(synonym, unit) == 1.0, synonym


def test_no_spelling_behind_a_solidus_has_a_second_reading() -> None:
    """Read from left to right, a unit with two factors behind its solidus is no unit of the list."""
    for powers in every_combination():
        below = [name for name, power in powers.items() if power < 0]
        for last in below[1:]:
            assert _unit({**powers, last: -powers[last]}) is None, powers


@pytest.mark.parametrize("text", ["psig", "barg", "bar(g)", "bar g", "bar gauge", "kPag", "kPa(g)", "psi(g)", "atm g"])
def test_gauge_pressure_is_refused(text: str) -> None:
    """A gauge pressure is refused with the remedy."""
    with pytest.raises(GaugePressure) as caught:
        read_unit(text, "p")
    assert caught.value.sentence == (
        f"p has {text!r}, a gauge pressure: add the local atmospheric pressure "
        "and write an absolute one, such as bar or psi."
    )


@pytest.mark.parametrize(
    ("text", "sentence"),
    [
        ("kj/mol", "unit has the unit 'kj/mol', which is not known. Near spellings: kJ/mol, "),
        ("KJ/MOL", "unit has the unit 'KJ/MOL', which is not known. Near spellings: kJ/mol, "),
        ("F", "unit has the unit 'F', which is not known. For degrees Fahrenheit write degF."),
        ("J/(mol C)", "unit has the unit 'J/(mol C)', which is not known. For degrees Celsius write degC."),
        ("", "unit has the unit '', which is not known. Units are written as kJ/mol, J/(mol K), bar, degC."),
    ],
)
def test_unknown_unit_names_the_near_ones(text: str, sentence: str) -> None:
    """An unknown spelling is refused with the near spellings or the remedy."""
    with pytest.raises(UnknownUnit) as caught:
        read_unit(text)
    assert caught.value.sentence.startswith(sentence)


@pytest.mark.parametrize(
    "text",
    ["J mol", "mol/kJ", "J/J", "kJ/mol-1", "J/mol K-1", "J/(mol/K)", "(J/mol)/K", "K K", "kJ kJ", "kg m2 s-2",
     "mol0", "lb mol", "J^0.5", "J mol -1", "1/1", "/s", "bar/", "m/s/s", "kcal/mol/hartree"],
)  # fmt: skip
def test_what_is_outside_the_list_is_refused(text: str) -> None:
    """A combination outside the closed list is refused even where a registry could parse it."""
    with pytest.raises(UnknownUnit):
        read_unit(text)


@given(st.text(max_size=12))
def test_random_text_is_a_unit_of_the_list_or_refused(text: str) -> None:
    """Any text is either refused or reads as a unit whose canonical spelling reads as the same unit."""
    try:
        unit = read_unit(text)
    except (UnknownUnit, GaugePressure):
        return
    assert read_unit(unit.spelling) == unit
    assert unit.dimension in DIMENSIONS
