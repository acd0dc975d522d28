"""Worksheet functions of relations with typed constants, through the door that cells use."""

from __future__ import annotations

import csv
import math
from collections.abc import Callable
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from thermofuncs.catalogue import BLANK, FUNCTIONS, Function, call, evaluate, explain
from thermofuncs.catalogue.relations import FUNCTIONS as RELATIONS
from thermofuncs.errors import CellError, ThermofuncsError
from thermofuncs.units import R, convert

REFERENCE = Path(__file__).parent.parent / "reference"
NAMES = [
    "LNKFROMDRG", "DRGFROMLNK", "DRGHS", "LNKHS", "LNKAT", "KCONVERT", "RXNSUM", "RATECONST", "RATECONSTAT",
    "PVAP", "TVAP", "CPPOLY", "CPPOLYINT", "INUNIT", "CONSTANT",
]  # fmt: skip
ANTOINE = ("Antoine lg mmHg degC", [[8.07131, 1730.63, 233.426]])
MOLAR_ENERGIES = ["kJ/mol", "kcal/mol", "BTU/lbmol", "J/mol", "J mol-1", "eV/particle"]
MOLAR_ENTROPIES = ["J/(mol K)", "cal/(mol K)", "BTU/(lbmol degF)", "kJ/mol/K"]
PRESSURES = ["bar", "atm", "Pa", "psi", "kPa", "mmHg"]
SCALES = ["K", "degC", "degF", "degR"]

# function with one quantity left open, the unit that a bare number of it has, and further units
OPEN: dict[str, tuple[Callable[[object], object], float, str, list[str]]] = {
    "LNKFROMDRG drg": (lambda x: call("LNKFROMDRG", x, 700.0, 700.0), -12.3, "kJ/mol", MOLAR_ENERGIES),
    "LNKFROMDRG t": (lambda x: call("LNKFROMDRG", -12.3, x, 700.0), 700.0, "K", SCALES),
    "LNKFROMDRG t_of_drg": (lambda x: call("LNKFROMDRG", -12.3, 700.0, x), 700.0, "K", SCALES),
    "DRGFROMLNK t": (lambda x: call("DRGFROMLNK", 3.2, x), 640.0, "K", SCALES),
    "DRGHS drh": (lambda x: call("DRGHS", x, 160.0, 900.0), 178.0, "kJ/mol", MOLAR_ENERGIES),
    "DRGHS drs": (lambda x: call("DRGHS", 178.0, x, 900.0), 160.0, "J/(mol K)", MOLAR_ENTROPIES),
    "DRGHS t": (lambda x: call("DRGHS", 178.0, 160.0, x), 900.0, "K", SCALES),
    "DRGHS drcp": (lambda x: call("DRGHS", 178.0, 160.0, 900.0, x), -12.0, "J/(mol K)", MOLAR_ENTROPIES),
    "DRGHS t_ref": (lambda x: call("DRGHS", 178.0, 160.0, 900.0, -12.0, x), 300.0, "K", SCALES),
    "LNKHS drh": (lambda x: call("LNKHS", x, 160.0, 900.0), 178.0, "kJ/mol", MOLAR_ENERGIES),
    "LNKHS drs": (lambda x: call("LNKHS", 178.0, x, 900.0), 160.0, "J/(mol K)", MOLAR_ENTROPIES),
    "LNKHS t_ref": (lambda x: call("LNKHS", 178.0, 160.0, 900.0, -12.0, x), 300.0, "K", SCALES),
    "LNKAT t1": (lambda x: call("LNKAT", 11.5, x, 330.0, -41.0), 298.15, "K", SCALES),
    "LNKAT t2": (lambda x: call("LNKAT", 11.5, 298.15, x, -41.0), 330.0, "K", SCALES),
    "LNKAT drh": (lambda x: call("LNKAT", 11.5, 298.15, 330.0, x), -41.0, "kJ/mol", MOLAR_ENERGIES),
    "LNKAT drcp": (lambda x: call("LNKAT", 11.5, 298.15, 330.0, -41.0, x), 9.0, "J/(mol K)", MOLAR_ENTROPIES),
    "KCONVERT t": (
        lambda x: call("KCONVERT", 2.0, "standard", "concentration in mol/L", -1.0, x), 500.0, "K", SCALES,
    ),
    "KCONVERT p": (
        lambda x: call("KCONVERT", 2.0, "standard", "mole fraction at p", -1.0, 500.0, x), 30.0, "bar", PRESSURES,
    ),
    "RATECONST ea": (lambda x: call("RATECONST", 1e13, x, 500.0), 100.0, "kJ/mol", MOLAR_ENERGIES),
    "RATECONST t": (lambda x: call("RATECONST", 1e13, 100.0, x), 500.0, "K", SCALES),
    "RATECONSTAT ea": (lambda x: call("RATECONSTAT", 0.02, 300.0, 320.0, x), 55.0, "kJ/mol", MOLAR_ENERGIES),
    "RATECONSTAT t1": (lambda x: call("RATECONSTAT", 0.02, x, 320.0, 55.0), 300.0, "K", SCALES),
    "RATECONSTAT t2": (lambda x: call("RATECONSTAT", 0.02, 300.0, x, 55.0), 320.0, "K", SCALES),
    "PVAP t": (lambda x: call("PVAP", *ANTOINE, x), 350.0, "K", SCALES),
    "TVAP p": (lambda x: call("TVAP", *ANTOINE, x), 0.7, "bar", PRESSURES),
    "CPPOLY t": (lambda x: call("CPPOLY", [[0, 1]], [[30.0, 1e-3]], x), 600.0, "K", SCALES),
    "CPPOLYINT t1": (lambda x: call("CPPOLYINT", [[0, 1]], [[30.0, 1e-3]], x, 900.0), 600.0, "K", SCALES),
    "CPPOLYINT t2": (lambda x: call("CPPOLYINT", [[0, 1]], [[30.0, 1e-3]], 300.0, x), 600.0, "K", SCALES),
}  # fmt: skip

# a function's answer in its own unit, and the units that it can be asked in
ANSWERS: dict[str, tuple[tuple[object, ...], str, list[str]]] = {
    "DRGFROMLNK": ((3.2, 640.0), "kJ/mol", MOLAR_ENERGIES),
    "PVAP": ((*ANTOINE, 350.0), "bar", PRESSURES),
    "TVAP": ((*ANTOINE, 0.7), "K", SCALES),
}

WRONG = {
    "molar energy": "1 bar",
    "molar entropy": "1 kJ/mol",
    "temperature": "1 bar",
    "pressure": "300 K",
}


def test_the_group_is_complete() -> None:
    """Every function of the group is declared once, in its order."""
    assert [function.name for function in RELATIONS] == NAMES
    assert all(FUNCTIONS[function.name] is function for function in RELATIONS)


@pytest.mark.parametrize("declared", RELATIONS, ids=lambda declared: declared.name)
def test_the_example_gives_a_number_and_its_working_ends_in_it(declared: Function) -> None:
    """The example of each function gives a finite number, and the last step of its working is that number."""
    explained = explain(declared.name, declared.example)
    assert isinstance(explained.result, float)
    assert math.isfinite(explained.result)
    assert explained.steps[-1].value == explained.result == evaluate(declared.name, declared.example)


@pytest.mark.parametrize("case", OPEN)
def test_an_argument_is_right_in_every_unit(case: str) -> None:
    """A quantity text in any unit of an argument's dimension gives what the bare number gives."""
    function, value, unit, units = OPEN[case]
    expected = function(value)
    for other in units:
        text = f"{convert(value, unit, other)!r} {other}"
        assert function(text) == pytest.approx(expected, rel=1e-11), text


@pytest.mark.parametrize("case", OPEN)
def test_a_wrong_dimension_is_a_value_error_with_the_sentence(case: str) -> None:
    """A quantity of another dimension is #VALUE!, and the sentence names the argument and both dimensions."""
    function, _, unit, _ = OPEN[case]
    needed = {"kJ/mol": "molar energy", "J/(mol K)": "molar entropy", "K": "temperature", "bar": "pressure"}[unit]
    text = WRONG[needed]
    with pytest.raises(ThermofuncsError) as caught:
        function(text)
    assert caught.value.worksheet_value == "#VALUE!"
    argument = case.split()[1]
    assert caught.value.sentence.startswith(f"{argument} is in {text.split()[1]}, a unit of ")
    assert f": a unit of {needed} is needed, such as " in caught.value.sentence


@pytest.mark.parametrize("name", ANSWERS)
def test_an_answer_is_right_in_every_unit(name: str) -> None:
    """An answer asked in another unit is the converted answer, its working ends in it, a wrong unit is #VALUE!."""
    arguments, unit, units = ANSWERS[name]
    expected = call(name, *arguments)
    for other in units:
        explained = explain(name, [*arguments, other])
        assert explained.result == pytest.approx(convert(expected, unit, other), rel=1e-13)
        assert explained.steps[-1].value == explained.result
    wrong = evaluate(name, [*arguments, "m3"])
    assert isinstance(wrong, CellError)
    assert wrong.value == "#VALUE!"
    needed = {"kJ/mol": "molar energy", "bar": "pressure", "K": "temperature"}[unit]
    assert wrong.sentence.startswith(f"unit is in m3, a unit of volume: a unit of {needed} is needed, such as ")


@pytest.mark.parametrize("unit", MOLAR_ENERGIES)
def test_the_unit_argument_states_the_unit_of_a_bare_number(unit: str) -> None:
    """A bare drg or drh is in the unit that the unit argument states."""
    drg, drh = convert(-12.3, "kJ/mol", unit), convert(-41.0, "kJ/mol", unit)
    expected = call("LNKFROMDRG", -12.3, 700.0, 700.0)
    assert call("LNKFROMDRG", drg, 700.0, 700.0, unit) == pytest.approx(expected, rel=1e-12)
    expected = call("LNKAT", 11.5, 298.15, 330.0, -41.0)
    assert call("LNKAT", 11.5, 298.15, 330.0, drh, None, unit) == pytest.approx(expected, rel=1e-12)


def trap() -> list[dict[str, str]]:
    """The rows of the comparison of constant properties."""
    lines = (REFERENCE / "trap.csv").read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


def test_a_frozen_gibbs_energy_is_refused_over_a_column_of_temperatures() -> None:
    """The Gibbs energy at 298.15 K is #NUM! in each row of another temperature, and right in its own."""
    temperatures = [[298.15], *([float(row["T_K"])] for row in trap())]
    column = evaluate("LNKFROMDRG", [-28.62, temperatures, 298.15])
    assert column[0][0] == pytest.approx(28620 / (R * 298.15), rel=1e-14)
    for (cell,), (temperature,) in zip(column[1:], temperatures[1:], strict=True):
        assert cell == CellError(
            "#NUM!",
            f"drg belongs to 298.15 K and t is {temperature:.10g} K; ΔrG° changes with temperature, so the two "
            "may differ by 0.5 K at most. Take ln K at 298.15 K and carry it with LNKAT.",
        )


REACTIONS = {
    "water-gas shift": "CO(g) + H2O(g) = CO2(g) + H2(g)",
    "methanol synthesis": "CO(g) + 2 H2(g) = CH3OH(g)",
    "SO2 oxidation": "SO2(g) + 1/2 O2(g) = SO3(g)",
    "lime calcination": "CaCO3(s) = CaO(s) + CO2(g)",
    "Boudouard": "C(graphite) + CO2(g) = 2 CO(g)",
    "NO formation": "1/2 N2(g) + 1/2 O2(g) = NO(g)",
    "N2O4 dissociation": "N2O4(g) = 2 NO2(g)",
    "water formation": "H2(g) + 1/2 O2(g) = H2O(g)",
    "methane combustion": "CH4(g) + 2 O2(g) = CO2(g) + 2 H2O(g)",
    "ethane dehydrogenation": "C2H6(g) = C2H4(g) + H2(g)",
    "HCl formation": "1/2 H2(g) + 1/2 Cl2(g) = HCl(g)",
}


@pytest.mark.parametrize("row", trap(), ids=lambda row: f"{row['reaction']} {row['T_K']}")
def test_tabulated_properties_carried_with_typed_ones_meet_the_table(row: dict[str, str]) -> None:
    """ΔrG° and ΔrH° of the data at 298.15 K, carried by LNKAT, meet the table of constant properties."""
    reaction, temperature = REACTIONS[row["reaction"]], float(row["T_K"])
    ln_k = call("LNKFROMDRG", call("DRG", reaction, 298.15), 298.15, 298.15)
    drh, drcp = call("DRH", reaction, 298.15), call("DRCP", reaction, 298.15)
    # the table was computed with the fit's gas constant: 7e-6 relative, and half of its last digit
    for column, cp in (("logK_const_dH", None), ("logK_const_dCp", drcp)):
        expected = float(row[column])
        carried = call("LNKAT", ln_k, 298.15, temperature, drh, cp) / math.log(10.0)
        scale = max(abs(expected), abs(ln_k / math.log(10.0)))
        assert carried == pytest.approx(expected, abs=7e-6 * scale + 5.1e-6)


def test_shapes_and_blanks() -> None:
    """A column against a row gives the table, a blank cell in a range #N/A, an error value itself."""
    table = evaluate("DRGFROMLNK", [[[1.0], [2.0]], [[300.0, None, CellError("#REF!")]]])
    assert [[cell if isinstance(cell, CellError) else round(cell, 3) for cell in row] for row in table] == [
        [-2.494, table[0][1], CellError("#REF!")],
        [-4.989, table[1][1], CellError("#REF!")],
    ]
    assert table[0][1].value == table[1][1].value == "#N/A"
    assert evaluate("LNKHS", [CellError("#DIV/0!"), 1.0, 300.0]) == CellError("#DIV/0!")
    blank = evaluate("LNKHS", [BLANK, 1.0, 300.0])
    assert (blank.value, blank.sentence) == (
        "#N/A", "drh is a blank cell: TF.LNKHS needs reaction enthalpy.",
    )  # fmt: skip


def test_reaction_sum_reads_rows_and_columns_and_refuses_blanks() -> None:
    """RXNSUM takes a column against a row cell by cell; a blank cell is #N/A, a text #VALUE!."""
    assert call("RXNSUM", [[-1], [-3], [2]], [[0.0, 0.0, -45.94]]) == pytest.approx(-91.88, rel=1e-15)
    assert evaluate("RXNSUM", [[[-1.0], [1.0]], [[1.0], [None]]]) == CellError(
        "#N/A", "values has a blank cell, number 2 in row order: fill it, or write 0 if 0 is meant."
    )
    assert evaluate("RXNSUM", [[[-1.0], [1.0]], [["1,5"], [2.0]]]) == CellError(
        "#VALUE!", "values has '1,5' as cell number 1 in row order: a number is needed."
    )
    assert evaluate("RXNSUM", [[[-1.0], [1.0]], [[1.0], [CellError("#REF!")]]]) == CellError("#REF!")


def test_temperatures_that_look_wrong_are_refused() -> None:
    """A decimal comma, the coulomb and a temperature below absolute zero are refused with the remedy."""
    for text, value, sentence in (
        ("25,5 degC", "#VALUE!", "t is '25,5 degC', with a comma in the number: write 25.5 degC."),
        ("25 C", "#VALUE!", ("t is in C, a unit of charge: a unit of temperature is needed, such as K, degC, degF "
         "or degR. For degrees Celsius write degC.")),
        ("-300 degC", "#NUM!", "t is -300 degC: a temperature above absolute zero (-273.15 degC) is needed."),
    ):  # fmt: skip
        assert evaluate("DRGFROMLNK", [1.0, text]) == CellError(value, sentence)
    assert evaluate("DRGFROMLNK", [1.0, 0.0]).value == "#NUM!"


def test_conversions_of_units_and_constants() -> None:
    """INUNIT converts molar and thermal units and temperatures, and CONSTANT answers in the unit asked for."""
    assert call("INUNIT", 1.0, "kcal/mol", "kJ/mol") == 4.184
    assert call("INUNIT", 1000.0, "BTU/lbmol", "kJ/mol") == 2.326
    assert call("INUNIT", 350.0, "degC", "K") == 623.15
    assert call("INUNIT", 9.0, "degF difference", "degC difference") == pytest.approx(5.0, rel=1e-15)
    assert call("INUNIT", [[1.0], [2.0]], "atm", "bar") == [[1.01325], [2.0265]]
    assert call("CONSTANT", "R") == R
    assert call("CONSTANT", "R", "cal/(mol K)") == pytest.approx(R / 4.184, rel=1e-15)
    gauge = evaluate("INUNIT", [1.0, "bar(g)", "bar"])
    assert gauge == CellError(
        "#VALUE!",
        "from_unit has 'bar(g)', a gauge pressure: add the local atmospheric pressure "
        "and write an absolute one, such as bar or psi.",
    )


def test_cautions_are_short_sentences() -> None:
    """Each caution of the group's examples, and of a long carry, has fewer than 255 characters."""
    calls = [(function.name, list(function.example)) for function in RELATIONS]
    calls.append(("LNKAT", [11.5, 298.15, 1000.0, -41.0]))
    calls.append(("LNKAT", [11.5, 298.15, 1000.0, -41.0, 3.2]))
    for name, arguments in calls:
        for caution in explain(name, arguments).cautions:
            assert 0 < len(caution) < 255
            assert caution.endswith((".", "?"))
    assert explain("LNKAT", calls[-2][1]).cautions[0].startswith("ΔrH° is held constant over 701.85 K")


ODD_VALUES: list[object] = [
    0.0, -1.0, 1e308, -1e308, 1e-308, 5e-324, 300.0, 1e-5, 1e5, 1, True, None, BLANK, "", "x", "25 degC", "1,5 K",
    "1e300 K", "1e-300 degR", "Antoine lg bar K", "Antoine ln Pa degF", "five-constant", "standard", "p in Pa",
    "mole fraction at p", "concentration in mol/m3", "kJ/mol", "degC", "K difference", "R", CellError("#REF!"),
    [[1.0, 2.0, 3.0]], [[1.0], [2.0]], [[1e308, 1e308]], [[None]], [["a"]], [[]], [[1.0, 1e308, -300.0]],
    [[73.649, -7258.2, -7.3037, 4.1653e-6, 2.0]], [[73.649, -7258.2, -7.3037, 4.1653e-6, 2.0, 0.0, 1e308]],
]  # fmt: skip


def is_a_cell(value: object) -> bool:
    """Whether a value is one that a worksheet can hold."""
    if isinstance(value, list):
        return all(is_a_cell(cell) for row in value for cell in row)
    return isinstance(value, str | bool | CellError) or (isinstance(value, int | float) and math.isfinite(value))


@given(st.sampled_from(RELATIONS), st.data())
@settings(max_examples=1000, deadline=None)
def test_odd_arguments_give_a_value_or_an_error_value(function: Function, data: st.DataObject) -> None:
    """Whatever stands in the cells, the answer is a finite value or an error value, and the working ends in it."""
    arguments = [*function.example, *[None] * (len(function.arguments) - len(function.example))]
    for _ in range(data.draw(st.integers(1, 4))):
        place = data.draw(st.integers(0, len(arguments) - 1))
        arguments[place] = data.draw(st.sampled_from(ODD_VALUES))
    value = evaluate(function.name, arguments)
    assert is_a_cell(value)
    if isinstance(value, float):
        assert explain(function.name, arguments).steps[-1].value == value
