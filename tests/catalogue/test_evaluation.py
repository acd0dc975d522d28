"""The one door to the functions: shapes, blanks, errors, units, and what comes out."""

from __future__ import annotations

import math
from typing import Any

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import thermofuncs
from thermofuncs.catalogue import BLANK, FUNCTIONS, Function, call, evaluate, explain, find
from thermofuncs.errors import (
    BadArguments,
    CellError,
    MissingArgument,
    OutsideRange,
    ShapesDiffer,
    ThermofuncsError,
    UnknownFunction,
)

SHIFT = "CO(g) + H2O(g) = CO2(g) + H2(g)"
LIME = "CaCO3(s) = CaO(s) + CO2(g)"
MISSING_REFERENCE = CellError("#REF!")
DIVISION = CellError("#DIV/0!")
WITHOUT_STEPS = {"CAUTIONS", "STAMP"}  # scalar answers that explain others or the installation


def lnk(t: float) -> float:
    """Ln K of the shift reaction through a single cell."""
    value: float = evaluate("LNK", [SHIFT, t])
    return value


def every_cell(value: object) -> list[object]:
    """The cells of an answer."""
    if isinstance(value, list):
        return [cell for row in value for cell in row]
    return [value]


# --- every function --------------------------------------------------------------------------------


@pytest.mark.parametrize("function", FUNCTIONS.values(), ids=lambda f: f.name)
def test_the_example_gives_an_answer_of_its_shape(function: Function) -> None:
    """The declared example of every function gives an answer of the declared shape, in a cell and from Python."""
    value = evaluate(function.name, function.example)
    cells = every_cell(value)
    assert cells
    assert not any(isinstance(cell, CellError) for cell in cells)
    assert isinstance(value, list) == (function.result_shape == "table")
    assert call(function.name, *function.example) == value
    assert thermofuncs.call(function.name, *function.example) == value


@pytest.mark.parametrize("function", FUNCTIONS.values(), ids=lambda f: f.name)
def test_the_working_ends_in_the_value(function: Function) -> None:
    """The last step of an explained call is the value of the cell, bit for bit, with a unit on each step."""
    value = evaluate(function.name, function.example)
    explained = explain(function.name, function.example)
    assert explained.result == value
    if function.result_shape == "scalar" and function.name not in WITHOUT_STEPS:
        assert explained.steps
        last = explained.steps[-1].value
        assert type(last) is type(value)
        assert last == value
        assert all(step.unit and step.relation for step in explained.steps)


@pytest.mark.parametrize("function", FUNCTIONS.values(), ids=lambda f: f.name)
def test_an_argument_left_out_or_blank_is_named(function: Function) -> None:
    """A required argument left out is #VALUE!, a blank cell #N/A; the sentence names the argument and function."""
    for place, argument in enumerate(function.arguments):
        if argument.optional or argument.variadic:
            continue
        for gap, kind, said in ((None, "#VALUE!", "is missing"), (BLANK, "#N/A", "is a blank cell")):
            arguments = list(function.example)
            arguments[place] = gap
            error = evaluate(function.name, arguments)
            assert isinstance(error, CellError)
            assert error.value == kind
            assert error.sentence == f"{argument.name} {said}: TF.{function.name} needs {argument.meaning}."


@pytest.mark.parametrize("function", FUNCTIONS.values(), ids=lambda f: f.name)
def test_optional_arguments_may_be_left_out_or_blank(function: Function) -> None:
    """Optional arguments left out at the end, left out in the middle, or blank give one answer."""
    count = len(function.arguments)
    if any(a.variadic for a in function.arguments):
        return
    shortest = [*function.example][: max(function.required, 0)]
    padded = [*shortest, *[None] * (count - len(shortest))]
    blank = [*shortest, *[BLANK] * (count - len(shortest))]
    assert evaluate(function.name, padded) == evaluate(function.name, shortest)
    assert evaluate(function.name, blank) == evaluate(function.name, shortest)


@pytest.mark.parametrize("function", FUNCTIONS.values(), ids=lambda f: f.name)
def test_an_error_value_goes_through_unchanged(function: Function) -> None:
    """An error value in any argument comes out as it came in, without a sentence of ours."""
    for place, argument in enumerate(function.arguments):
        if argument.variadic:
            continue
        arguments = [*function.example, *[None] * (len(function.arguments) - len(function.example))]
        arguments[place] = DIVISION
        assert evaluate(function.name, arguments) == DIVISION, argument.name
    inside = [[CellError("#NAME?"), 1.0], [DIVISION, 2.0]]
    for place, argument in enumerate(function.arguments):
        if argument.kind in ("list", "table", "data"):
            arguments = [*function.example, *[None] * (len(function.arguments) - len(function.example))]
            arguments[place] = inside
            assert evaluate(function.name, arguments) == CellError("#NAME?"), argument.name


@pytest.mark.parametrize("function", FUNCTIONS.values(), ids=lambda f: f.name)
def test_too_many_arguments_are_refused(function: Function) -> None:
    """More arguments than a function has are refused with its signature."""
    if function.arguments and function.arguments[-1].variadic:
        return
    error = evaluate(function.name, [*[None] * len(function.arguments), 1.0])
    assert isinstance(error, CellError)
    assert error.value == "#VALUE!"
    assert function.signature in error.sentence


@pytest.mark.parametrize(
    "function", [f for f in FUNCTIONS.values() if f.vector is not None], ids=lambda f: f.name
)
def test_a_range_of_temperatures_gives_its_shape(function: Function) -> None:
    """A column, a row and a block of temperatures come back in their shape, each cell as it would be alone."""
    what = function.example[0]
    for block in ([[400.0], [700.0], [1000.0]], [[400.0, 700.0, 1000.0]], [[400.0, 500.0], [900.0, 1000.0]]):
        found = evaluate(function.name, [what, block])
        assert [len(row) for row in found] == [len(row) for row in block]
        for row, temperatures in zip(found, block, strict=True):
            for value, t in zip(row, temperatures, strict=True):
                assert value == pytest.approx(evaluate(function.name, [what, t]), rel=1e-12)


# --- shapes ----------------------------------------------------------------------------------------


def test_a_column_against_a_row_gives_the_table_of_both() -> None:
    """Reactions down and temperatures across give the table of both, each cell as it would be alone."""
    found = evaluate("LNK", [[[SHIFT], [LIME]], [[500.0, 900.0, 1100.0]]])
    assert found == [[evaluate("LNK", [r, t]) for t in (500.0, 900.0, 1100.0)] for r in (SHIFT, LIME)]


def test_two_columns_go_row_by_row() -> None:
    """Two columns of one length are read side by side."""
    found = evaluate("LNK", [[[SHIFT], [LIME]], [[500.0], [900.0]]])
    assert found == [[evaluate("LNK", [SHIFT, 500.0])], [evaluate("LNK", [LIME, 900.0])]]


def test_a_range_of_one_cell_is_spread() -> None:
    """A range of one cell stays a range of one cell, and goes with any other shape."""
    assert evaluate("LNK", [SHIFT, [[900.0]]]) == [[lnk(900.0)]]
    assert evaluate("LNK", [[[SHIFT]], [[500.0], [900.0]]]) == [[lnk(500.0)], [lnk(900.0)]]


@pytest.mark.parametrize(
    ("arguments", "said"),
    [
        ([[[SHIFT], [LIME]], [[500.0], [600.0], [700.0]]], "reaction is 2 by 1, T is 3 by 1"),
        ([[[SHIFT, LIME]], [[500.0, 600.0, 700.0]]], "reaction is 1 by 2, T is 1 by 3"),
        ([SHIFT, [[500.0], [600.0, 700.0]]], "T is empty or ragged"),
        ([SHIFT, []], "T is empty or ragged"),
        ([SHIFT, [[]]], "T is empty or ragged"),
    ],
)
def test_ranges_that_do_not_fit_are_refused(arguments: list[object], said: str) -> None:
    """Ranges of different length, ragged and empty ones are refused with the shapes in the sentence."""
    error = evaluate("LNK", arguments)
    assert isinstance(error, CellError)
    assert error.value == "#VALUE!"
    assert said in error.sentence
    with pytest.raises(ShapesDiffer):
        call("LNK", *arguments)


def test_units_are_spread_too() -> None:
    """A row of units gives the answer in each."""
    found = evaluate("DRH", [SHIFT, 900.0, [["kJ/mol", "kcal/mol"]]])
    assert found[0][0] == evaluate("DRH", [SHIFT, 900.0])
    assert found[0][1] == pytest.approx(found[0][0] / 4.184, rel=1e-14)


def test_a_table_is_of_one_thing() -> None:
    """A function that gives a table reads no range as many things."""
    error = evaluate("SUBSTANCE", [[["Fe(s)"], ["H2O(l)"]]])
    assert isinstance(error, CellError)
    assert error.sentence.startswith("substance is a range of cells: a text")


# --- blanks and errors within ranges ---------------------------------------------------------------


def test_blanks_and_errors_in_a_range_stay_in_their_cells() -> None:
    """In a range a blank is #N/A, an error value stays, a bad cell has its own error, the rest have answers."""
    column = [[900.0], [None], [""], [MISSING_REFERENCE], ["700 degC"], [25.0], ["warm"], [True], [950]]
    found = [row[0] for row in evaluate("LNK", [SHIFT, column])]
    assert found[0] == lnk(900.0)
    assert [cell.value for cell in found[1:3]] == ["#N/A", "#N/A"]
    assert found[1].sentence.startswith("T is a blank cell: TF.LNK needs temperature")
    assert found[3] == MISSING_REFERENCE
    assert found[4] == lnk(973.15)
    assert found[5].value == "#NUM!"
    assert found[5].sentence.endswith('25 looks like degrees Celsius: write "25 degC".')
    assert found[6].value == found[7].value == "#VALUE!"
    assert found[8] == lnk(950.0)
    assert call("LNK", SHIFT, column) == evaluate("LNK", [SHIFT, column])


def test_a_blank_in_a_range_is_never_an_argument_left_out() -> None:
    """A blank in a range of an optional argument is #N/A, though that argument may be left out."""
    found = evaluate("LNKHS", [-41.0, -42.0, 500.0, [[10.0], [None]]])
    assert found[0] == [evaluate("LNKHS", [-41.0, -42.0, 500.0, 10.0])]
    assert found[1][0].value == "#N/A"
    assert found[1][0].sentence.startswith("drcp is a blank cell")
    error = [[CellError("#NUM!")]]
    assert evaluate("LNKHS", [[[None]], -42.0, 500.0, error])[0][0] == CellError("#NUM!")
    assert explain("LNKHS", [-41.0, -42.0, 500.0, [[10.0], [None]]]).cautions[-1].startswith("drcp is a blank cell")


def test_what_no_cell_of_a_range_can_answer_is_the_error_of_each() -> None:
    """A reaction that cannot be read gives its error in every cell of the range, from Python too."""
    alone = evaluate("LNK", ["CO(g) + H2O(g)", 500.0])
    assert isinstance(alone, CellError)
    both: list[Any] = [[[500.0], [600.0]], np.array([500.0, 600.0])]
    for temperatures in both:
        assert call("LNK", "CO(g) + H2O(g)", temperatures) == [[alone], [alone]]


# --- sentences -------------------------------------------------------------------------------------


def test_all_bad_arguments_are_named_at_once() -> None:
    """Several bad arguments give one sentence each, in order, and the value of the first."""
    error = evaluate("DRH", [True, "25,5 degC", "kJ/mol K mol"])
    assert isinstance(error, CellError)
    assert error.value == "#VALUE!"
    places = [error.sentence.index(word) for word in ("reaction is the truth value TRUE", "T is", "unit has")]
    assert places == sorted(places)
    with pytest.raises(BadArguments) as caught:
        call("DRH", True, "25,5 degC", "kJ/mol K mol")
    assert caught.value.sentence == error.sentence


def test_calls_from_python_raise_the_sentence() -> None:
    """From Python a failure raises the error whose sentence the cell has."""
    with pytest.raises(MissingArgument, match=r"^T is missing: TF\.LNK needs temperature"):
        call("LNK", SHIFT)
    with pytest.raises(OutsideRange) as caught:
        call("LNK", SHIFT, 25.0)
    assert caught.value.as_cell() == evaluate("LNK", [SHIFT, 25.0])
    with pytest.raises(BadArguments, match=r"^An argument holds the error value #REF!\.$"):
        call("LNK", SHIFT, MISSING_REFERENCE)


def test_an_unknown_function_gives_near_names() -> None:
    """A name that no function has is refused with the near ones; any spelling of a name is found."""
    error = evaluate("LNQK", [SHIFT, 900.0])
    assert error.value == "#VALUE!"
    assert error.sentence.startswith('There is no function "LNQK". Near names: ')
    assert {"LNK", "LNQ"} <= set(error.sentence.rstrip(".").split("Near names: ")[1].split(", "))
    assert "see TF.FUNCTIONLIST()" in evaluate("zzzzzzz", []).sentence
    for spelling in ("lnk", "TF.LNK", "tf.lnk", "TF_LNK", " LnK "):
        assert find(spelling).name == "LNK"
    with pytest.raises(UnknownFunction):
        call("", SHIFT)


def test_options_are_read_as_words() -> None:
    """Options in any order and with any spaces are one; a word outside the list is refused with the list."""
    wanted = evaluate("LNK", [SHIFT, 500.0, None, "atm degC"])
    assert evaluate("LNK", [SHIFT, 500.0, None, "  degC   atm "]) == wanted
    assert evaluate("LNK", [SHIFT, 900.0, None, ""]) == lnk(900.0)
    for text, said in (
        ("kelvin", "options has 'kelvin', which TF.LNK does not know: the words are extrapolate, atm, degC, degF."),
        ("degC degF", "options has 'degC degF', which TF.LNK does not know: the words are degC or degF, not both."),
        ("atm=1", "options has 'atm=1', which TF.LNK does not know: the words are extrapolate, atm, degC, degF."),
    ):
        assert evaluate("LNK", [SHIFT, 900.0, None, text]) == CellError("#VALUE!", said)


def test_an_answer_that_no_number_holds_is_an_error() -> None:
    """K beyond the double range is #NUM! and points to LNK, alone and in a range; its neighbours stay."""
    burning = "2 Al(s) + 3/2 O2(g) = Al2O3(s)"
    alone = evaluate("KEQ", [burning, 250.0])
    assert alone.value == "#NUM!"
    assert alone.sentence.endswith("use LNK.")
    found = evaluate("KEQ", [burning, [[250.0], [900.0]]])
    assert found[0] == [alone]
    assert found[1] == [evaluate("KEQ", [burning, 900.0])]


def test_cautions_of_a_range_are_those_of_its_cells() -> None:
    """CAUTIONS of a call over a range says once each what its cells would say."""
    found = evaluate("CAUTIONS", ["LNK", SHIFT, [[25.0], [900.0], [30.0]]])
    assert [row[0].split(" is outside")[0] for row in found] == ["T = 25 K", "T = 30 K"]
    assert evaluate("CAUTIONS", ["LNK", SHIFT, 900.0]) == ""
    assert evaluate("CAUTIONS", ["LNK", SHIFT, DIVISION]) == "An argument holds #DIV/0!."
    for name in ("CAUTIONS", "WORKING"):
        nested = evaluate(name, ["CAUTIONS"] * 254)
        assert nested.value == "#VALUE!"
        assert "it explains other calls itself" in nested.sentence


# --- arrays from Python ----------------------------------------------------------------------------


@pytest.mark.parametrize("dtype", [np.float64, np.float32, np.int64])
@pytest.mark.parametrize("shape", [(6,), (6, 1), (1, 6), (2, 3)])
def test_arrays_come_back_as_arrays_of_their_shape(dtype: type, shape: tuple[int, ...]) -> None:
    """A numpy array of temperatures gives an array of its shape, with the values of the list of rows."""
    temperatures: Any = np.arange(500, 500 + 100 * math.prod(shape), 100).astype(dtype).reshape(shape)
    found = call("LNK", SHIFT, temperatures)
    assert isinstance(found, np.ndarray)
    assert found.dtype == np.float64
    assert found.shape == shape
    assert found.ravel().tolist() == [
        row[0] for t in temperatures.ravel().tolist() for row in call("LNK", SHIFT, [[t]])
    ]


def test_an_array_is_not_changed() -> None:
    """The array that is handed in keeps its values, whatever the scale."""
    temperatures = np.array([500.0, 600.0])
    call("LNK", SHIFT, temperatures, None, "degC")
    assert temperatures.tolist() == [500.0, 600.0]


def test_an_array_with_a_cell_that_has_no_answer_is_a_list_of_rows() -> None:
    """Where a temperature of an array has no answer, its cell says why and the others are answered."""
    for bad in (25.0, -5.0, math.nan, math.inf):
        for temperatures in (np.array([bad, 900.0]), np.array([900.0, bad])):
            found = call("LNK", SHIFT, temperatures)
            values = {cell for row in found for cell in row if isinstance(cell, float)}
            errors = [cell for row in found for cell in row if isinstance(cell, CellError)]
            assert values == {lnk(900.0)}
            assert [error.value for error in errors] == ["#NUM!"]


def test_lists_tuples_and_scalars_of_numpy_are_read() -> None:
    """A flat list is a column, tuples are lists, and scalars of numpy are numbers."""
    wanted = [[lnk(500.0)], [lnk(600.0)]]
    assert call("LNK", SHIFT, [500.0, 600.0]) == wanted
    assert call("LNK", SHIFT, (500.0, 600.0)) == wanted
    assert call("LNK", SHIFT, ((500.0,), (600.0,))) == wanted
    assert call("LNK", SHIFT, np.float64(500.0)) == lnk(500.0)
    assert call("LNK", SHIFT, np.array(500.0)) == lnk(500.0)
    assert call("LNK", SHIFT, 500) == lnk(500.0)


def test_an_empty_array_is_refused_as_an_empty_range_is() -> None:
    """An array without elements is refused like a range without cells."""
    with pytest.raises(ShapesDiffer, match="T is empty or ragged"):
        call("LNK", SHIFT, np.array([]))


def test_units_apply_to_arrays() -> None:
    """The unit of the answer applies to an array as to a single cell."""
    found = call("DRH", SHIFT, np.array([500.0, 900.0]), "kcal/mol")
    assert found == pytest.approx([call("DRH", SHIFT, t, "kcal/mol") for t in (500.0, 900.0)], rel=1e-14)


# --- a user's data that overflows ------------------------------------------------------------------


def test_a_table_whose_powers_overflow_is_an_error_in_each_cell() -> None:
    """Powers of T beyond the range of numbers are refused with the table's cell, never infinity or an exception."""
    head: list[object] = ["substance", "dfH", "S", "form", "Cp T^0", "Cp T^300", "T_low", "T_high", "source"]
    data: list[Any] = [head, ["MgO(s)", -600.0, 27.0, "powers", 40.0, 1.0, 200.0, 3000.0, "invented"]]
    error = evaluate("MOLCP", ["MgO(s)", 2500.0, None, data])
    assert error.value == "#VALUE!"
    assert "Cp T^300: the exponents of T go from -12 to 12" in error.sentence
    head[5] = "Cp T^1/0"
    assert "Cp T^1/0: is no column of a data table" in evaluate("MOLCP", ["MgO(s)", 2500.0, None, data]).sentence
    head[5], data[1][5] = "Cp T^10", 1e300
    assert "is beyond 1e+60" in evaluate("MOLCP", ["MgO(s)", 2500.0, None, data]).sentence


# --- anything at all -------------------------------------------------------------------------------

SINGLE = st.one_of(
    st.none(), st.just(BLANK), st.just(DIVISION), st.booleans(), st.floats(), st.integers(-(10**9), 10**9),
    st.sampled_from(
        [
            "", " ", "900", "25 degC", "25,5 degC", SHIFT, LIME, "CO2(g)", "water", "kJ/mol", "J/(mol K)", "bar",
            "extrapolate", "LNK", "R", "Antoine lg mmHg degC", "standard", "=1+1", "x" * 32767, "9" * 400, "\x00",
        ]
    ),
    st.text(max_size=20),
)
RANGES = st.lists(st.lists(SINGLE, max_size=3), max_size=3)


def holds(value: object) -> bool:
    """Whether a value can stand in a cell."""
    if isinstance(value, float):
        return math.isfinite(value)
    return isinstance(value, str | bool | int | CellError)


@settings(max_examples=400)
@given(st.sampled_from(sorted(FUNCTIONS)), st.data())
def test_whatever_comes_in_a_cell_comes_out(name: str, data: st.DataObject) -> None:
    """Any arguments give a value or an error value, never an exception, not a number or infinity."""
    function = FUNCTIONS[name]
    arguments: list[object] = [*function.example, *[None] * (len(function.arguments) - len(function.example))]
    for place in data.draw(st.sets(st.integers(0, max(0, len(arguments) - 1)), max_size=3)):
        if arguments:
            arguments[place] = data.draw(st.one_of(SINGLE, RANGES))
    value = evaluate(name, arguments)
    assert all(holds(cell) for cell in every_cell(value)), value
    assert explain(name, arguments).result == value
    try:
        assert call(name, *arguments) == value
    except ThermofuncsError as error:
        assert isinstance(value, CellError)
        assert value.sentence in ("", error.sentence)
