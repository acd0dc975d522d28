"""Units of the functions that read substance data: every argument and answer in every unit of its dimension.

The relations with typed constants have the same checks beside their own tests.
"""

from __future__ import annotations

import math
from typing import Any

import pytest

from thermofuncs.catalogue import FUNCTIONS, Function, call, evaluate
from thermofuncs.errors import CellError

# NIST Special Publication 811, 2008, appendix B: cal (thermochemical) 4.184 J; BTU (international) per pound
# 2326 J/kg, and per pound and degree Fahrenheit 4186.8 J/(kg K), both exact; atm 101325 Pa; psi 6894.757 Pa
IN_HOUSE_UNIT = {
    "kJ/mol": {
        "kJ/mol": 1.0, "J/mol": 1e-3, "kcal/mol": 4.184, "cal/mol": 4.184e-3, "BTU/lbmol": 2.326e-3,
        "kJ/kmol": 1e-3, "MJ/kmol": 1.0,
    },
    "J/(mol K)": {
        "J/(mol K)": 1.0, "J/mol/K": 1.0, "J mol-1 K-1": 1.0, "cal/(mol K)": 4.184, "kJ/(mol K)": 1e3,
        "BTU/(lbmol degF)": 4.1868, "BTU/(lbmol degR)": 4.1868, "kcal/(mol K)": 4184.0,
    },
    "g/mol": {"g/mol": 1.0, "kg/mol": 1e3, "kg/kmol": 1.0, "lb/lbmol": 1.0},
}  # fmt: skip
PRESSURES = {"bar": 1.0, "atm": 1.01325, "Pa": 1e-5, "kPa": 1e-2, "psi": 0.06894757, "mmHg": 1.333224e-3}
WRONG = {"kJ/mol": "J/(mol K)", "J/(mol K)": "kJ/mol", "g/mol": "bar"}
OURS = [f for f in FUNCTIONS.values() if f.group != "Relations with typed constants"]
WITH_UNIT = [f for f in OURS if any(a.kind == "unit" for a in f.arguments)]
TEMPERATURES = [
    (f, place) for f in OURS for place, a in enumerate(f.arguments) if a.kind == "temperature"
]
SHIFT = "CO(g) + H2O(g) = CO2(g) + H2(g)"


def at(function: Function, place: int, value: object) -> list[Any]:
    """The arguments of the function's example, up to a place, with another value there."""
    arguments = [*function.example, *[None] * (len(function.arguments) - len(function.example))]
    arguments[place] = value
    return arguments


def in_scales(t: float) -> dict[str, str]:
    """A temperature in kelvin as quantity texts of every scale."""
    return {
        "K": f"{t!r} K",
        "degC": f"{t - 273.15!r} degC",
        "°C": f"{t - 273.15!r} °C",
        "degF": f"{(t - 273.15) * 1.8 + 32!r} degF",
        "degR": f"{t * 1.8!r} degR",
    }


def test_every_unit_and_temperature_of_these_groups_is_walked() -> None:
    """The functions with a unit or a temperature are those that the catalogue has, none left out."""
    assert {f.name for f in WITH_UNIT} == {
        "MOLCP", "MOLS", "MOLDH", "DFH", "DFG", "MOLM", "DRCP", "DRS", "DRH", "DRG", "AFFINITY",
    }  # fmt: skip
    assert {f"{f.name} {f.arguments[place].name}" for f, place in TEMPERATURES} == {
        *(
            f"{name} T" for name in (
                "MOLCP", "MOLS", "MOLDH", "DFH", "DFG", "LGKF", "DRCP", "DRS", "DRH", "DRG", "KEQ", "LNK", "LGK",
                "LNKU", "AFFINITY", "EMF",
            )
        ),
        "TEQ t_low", "TEQ t_high",
    }  # fmt: skip
    assert all(f.result_unit in IN_HOUSE_UNIT for f in WITH_UNIT)


@pytest.mark.parametrize("function", WITH_UNIT, ids=lambda f: f.name)
def test_an_answer_is_right_in_every_unit(function: Function) -> None:
    """The answer in a unit, times the unit's published size, is the answer in the unit of the house."""
    place = next(i for i, a in enumerate(function.arguments) if a.kind == "unit")
    wanted = call(function.name, *function.example)
    for unit, size in IN_HOUSE_UNIT[function.result_unit].items():
        assert call(function.name, *at(function, place, unit)) * size == pytest.approx(wanted, rel=1e-13), unit


@pytest.mark.parametrize("function", WITH_UNIT, ids=lambda f: f.name)
def test_a_unit_of_another_dimension_is_refused(function: Function) -> None:
    """A unit of another dimension is #VALUE!, and the sentence names both dimensions and units that would do."""
    place = next(i for i, a in enumerate(function.arguments) if a.kind == "unit")
    for unit in (WRONG[function.result_unit], "degC", "bar", "K"):
        error = evaluate(function.name, at(function, place, unit))
        assert isinstance(error, CellError)
        assert error.value == "#VALUE!"
        assert error.sentence.startswith(f"unit is in {unit}, a unit of ")
        assert f"such as {function.result_unit}" in error.sentence
    error = evaluate(function.name, at(function, place, "kJoule"))
    assert isinstance(error, CellError)
    assert error.value == "#VALUE!"
    assert error.sentence.startswith("unit has the unit 'kJoule', which is not known.")


@pytest.mark.parametrize(("function", "place"), TEMPERATURES, ids=lambda x: getattr(x, "name", str(x)))
def test_a_temperature_is_right_in_every_scale(function: Function, place: int) -> None:
    """A temperature as a text in any scale is the number in kelvin, alone and in a range."""
    t = 1100.0 if function.name == "TEQ" else 298.15 if function.name in ("EMF", "LNKU") else 900.0
    if function.arguments[place].name == "t_high":
        t = 1300.0
    wanted = call(function.name, *at(function, place, t))
    texts = in_scales(t)
    for text in texts.values():
        assert call(function.name, *at(function, place, text)) == pytest.approx(wanted, rel=1e-12), text
    column = [[text] for text in texts.values()]
    for row in evaluate(function.name, at(function, place, column)):
        assert row[0] == pytest.approx(wanted, rel=1e-12)


@pytest.mark.parametrize(("function", "place"), TEMPERATURES, ids=lambda x: getattr(x, "name", str(x)))
def test_what_is_no_temperature_is_refused(function: Function, place: int) -> None:
    """A quantity that is no temperature, a decimal comma, coulomb for Celsius and a negative kelvin are refused."""
    name = function.arguments[place].name
    for text, kind, said in (
        ("900 bar", "#VALUE!", f"{name} is in bar, a unit of pressure: a unit of temperature is needed"),
        ("626,85 degC", "#VALUE!", f"{name} is '626,85 degC', with a comma in the number: write 626.85"),
        ("warm", "#VALUE!", f"{name} is the text 'warm'"),
        ("-300 degC", "#NUM!", f"{name} is -300 degC: a temperature above absolute zero"),
        ("626 C", "#VALUE!", "degC"),
        (-5.0, "#NUM!", f"{name} is -5 K: a temperature above absolute zero (0 K) is needed."),
    ):
        error = evaluate(function.name, at(function, place, text))
        assert isinstance(error, CellError), text
        assert error.value == kind, text
        assert said in error.sentence, error.sentence


@pytest.mark.parametrize("function", [f for f in OURS if "degF" in f.options], ids=lambda f: f.name)
def test_options_set_the_scale_of_bare_numbers(function: Function) -> None:
    """With degC or degF in the options a bare number is in that scale, for every function with options."""
    places = [i for i, a in enumerate(function.arguments) if a.kind == "temperature"]
    last = len(function.arguments) - 1
    t = 1100.0 if function.name == "TEQ" else 298.15 if function.name in ("EMF", "LNKU") else 900.0
    for place in places[:1]:
        wanted = call(function.name, *at(function, place, t))
        for scale, number in (("degC", t - 273.15), ("degF", (t - 273.15) * 1.8 + 32)):
            arguments = at(function, place, number)
            arguments[last] = scale
            assert call(function.name, *arguments) == pytest.approx(wanted, rel=1e-12)
            arguments[place] = f"{t!r} K"
            assert call(function.name, *arguments) == pytest.approx(wanted, rel=1e-12)


@pytest.mark.parametrize("unit", PRESSURES)
def test_activities_of_gases_are_read_in_every_pressure(unit: str) -> None:
    """A partial pressure in any unit is divided by 1 bar, in LNQ, AFFINITY and EMF alike."""
    # psi and mmHg as printed, to seven digits
    table = [["CO(g)", f"0.1 {unit}"], ["H2O(g)", 1.0], ["CO2(g)", f"0.4 {unit}"], ["H2(g)", f"2 {unit}"]]
    wanted = math.log(8.0 * PRESSURES[unit])
    assert call("LNQ", SHIFT, table) == pytest.approx(wanted, abs=3e-7)
    bare = [["CO(g)", 1.0], ["H2O(g)", 1.0], ["CO2(g)", 1.0], ["H2(g)", 8.0 * PRESSURES[unit]]]
    assert call("AFFINITY", SHIFT, 900.0, table) == pytest.approx(call("AFFINITY", SHIFT, 900.0, bare), abs=3e-6)
    assert call("EMF", SHIFT, 900.0, 2, table) == pytest.approx(call("EMF", SHIFT, 900.0, 2, bare), abs=3e-8)


@pytest.mark.parametrize(
    ("text", "wanted"), [("2 mmol/L", 2e-3), ("0.002 mol/L", 2e-3), ("2 mol/m3", 2e-3), ("0.5 mol/kg", 0.5)]
)
def test_activities_of_solutes_are_read_in_their_units(text: str, wanted: float) -> None:
    """A concentration is divided by 1 mol/L and a molality by 1 mol/kg."""
    table = [["H+(aq)", text], ["OH-(aq)", 1.0]]
    assert call("LNQ", "H2O(l) = H+(aq) + OH-(aq)", table) == pytest.approx(math.log(wanted), rel=1e-13)


def test_an_activity_of_another_dimension_is_refused() -> None:
    """An activity in kJ/mol or kelvin is #VALUE! and the sentence names the species."""
    for text in ("3 kJ/mol", "300 K", "1,5 bar"):
        error = evaluate("LNQ", [SHIFT, [["CO(g)", text], ["H2O(g)", 1], ["CO2(g)", 1], ["H2(g)", 1]]])
        assert isinstance(error, CellError)
        assert error.value == "#VALUE!"
        assert "CO(g)" in error.sentence
