"""Worksheet functions of fits, through the door that cells use."""

from __future__ import annotations

import math

import numpy as np
import pytest
import statsmodels.api as sm
from hypothesis import given, settings
from hypothesis import strategies as st

from thermofuncs.catalogue import BLANK, FUNCTIONS, Function, call, evaluate, explain
from thermofuncs.catalogue.fits import FUNCTIONS as FITS
from thermofuncs.errors import CellError
from thermofuncs.units import R

NAMES = ["FIT", "FITVALUE", "FITAT", "FITTEMP", "FITPOINTS", "FITROW"]
T = [[t] for t in (283.15, 288.15, 293.15, 298.15, 303.15, 308.15, 313.15, 318.15)]
K = [[k] for k in (0.552, 0.678, 0.835, 1.004, 1.221, 1.452, 1.731, 2.06)]
U = [[0.02 * k] for ((k,)) in K]
LAW = "van't Hoff"


def table(rows: list[list[object]]) -> dict[object, list[object]]:
    """The rows of a report by their item; cautions together."""
    found: dict[object, list[object]] = {}
    for row in rows[1:]:
        if row[0] == "caution":
            found.setdefault("caution", []).append(row[1])
        else:
            assert row[0] not in found
            found[row[0]] = row[1:]
    return found


def test_the_group_is_complete() -> None:
    """Every function of the group is declared once, in its order."""
    assert [function.name for function in FITS] == NAMES
    assert all(FUNCTIONS[function.name] is function for function in FITS)


@pytest.mark.parametrize("declared", FITS, ids=lambda declared: declared.name)
def test_the_example_gives_an_answer(declared: Function) -> None:
    """The example of each function gives a number or a table without an error, and has a working."""
    explained = explain(declared.name, declared.example)
    rows = explained.result if isinstance(explained.result, list) else [[explained.result]]
    assert not any(isinstance(cell, CellError) for row in rows for cell in row)
    assert explained.steps
    assert len({len(row) for row in rows}) == 1


QUANTITIES = {
    LAW: ("drH", "drS", "drG", "lnK", "lgK", "pK", "K"),
    "Clarke-Glew": ("drH", "drS", "drCp", "drG", "lnK"),
    "Arrhenius": ("Ea", "lnA", "A", "lnk", "k"),
    "Eyring": ("dactH", "dactS", "dactG", "lnk", "k"),
    "Clausius-Clapeyron": ("dvapH", "dvapS", "dvapG", "lnp", "p"),
    "Antoine": ("A", "B", "C", "dvapH", "lnp", "p"),
}
UNITS = {"Arrhenius": "1/s", "Eyring": "1/s", "Clausius-Clapeyron": "kPa", "Antoine": "kPa"}
VAPOUR = [[p] for p in (1.228, 1.706, 2.339, 3.170, 4.247, 5.629, 7.384, 9.595)]  # water, kPa, rounded


@pytest.mark.parametrize("law", QUANTITIES)
def test_a_value_is_the_one_of_the_table_and_its_working_ends_in_it(law: str) -> None:
    """Each quantity, its uncertainty and limits are those of the report, and the last step is that value."""
    y = VAPOUR if UNITS.get(law) == "kPa" else K
    report = table(call("FIT", law, T, y, UNITS.get(law)))
    for name in QUANTITIES[law]:
        for place, written in enumerate((name, f"u({name})", f"low({name})", f"high({name})")):
            explained = explain("FITVALUE", [law, written, T, y, UNITS.get(law)])
            assert explained.steps[-1].value == explained.result == evaluate(
                "FITVALUE", [law, written, T, y, UNITS.get(law)]
            )
            if name in report:
                assert explained.result == report[name][place]


def test_quantities_over_a_range() -> None:
    """A column of quantities gives a column of values."""
    values = call("FITVALUE", LAW, [["drH"], ["u(drH)"], ["n"]], T, K)
    assert [row[0] for row in values] == [call("FITVALUE", LAW, q, T, K) for q in ("drH", "u(drH)", "n")]


@pytest.mark.parametrize("law", ["van't Hoff", "van’t Hoff", "vant Hoff", "Van 't Hoff", "van ‘t hoff", "VAN'T HOFF"])
def test_the_spelling_of_the_law(law: str) -> None:
    """The law van't Hoff is understood with either apostrophe or none."""
    assert call("FITVALUE", law, "drH", T, K) == call("FITVALUE", LAW, "drH", T, K)


def test_weights_agree_with_the_reference_implementation() -> None:
    """A column of uncertainties of K gives weighted least squares of ln K with u/K."""
    u = [[0.01 * (1.0 + i)] for i in range(8)]
    k, t, spread = (np.array(column)[:, 0] for column in (K, T, u))
    reference = sm.WLS(np.log(k), sm.add_constant(1.0 / t), weights=(k / spread) ** 2).fit()
    assert call("FITVALUE", LAW, "drH", T, K, "K", u) == pytest.approx(-reference.params[1] * R / 1000.0, rel=1e-9)
    low, high = sorted(-reference.conf_int()[1] * R / 1000.0)
    assert call("FITVALUE", LAW, "low(drH)", T, K, "K", u) == pytest.approx(low, rel=1e-9)
    assert call("FITVALUE", LAW, "high(drH)", T, K, "K", u) == pytest.approx(high, rel=1e-9)


def test_statistics_by_name() -> None:
    """The statistics of the report are there for a single cell too."""
    report = table(call("FIT", LAW, T, K, "K", U))
    for name, item in (
        ("n", "points"), ("dof", "degrees of freedom"), ("T_ref", "reference temperature"), ("R2", "R²"),
        ("s", "residual standard deviation"), ("AICc", "AICc"), ("chi2", "chi-square"),
        ("p(chi2)", "chi-square: probability"), ("p(curvature)", "curvature: probability"),
        ("r(drH,drS)", "correlation of drH and drS"), ("p(runs)", "runs: probability"),
    ):  # fmt: skip
        assert call("FITVALUE", LAW, name, T, K, "K", U) == report[item][0], name


def test_options() -> None:
    """Each option is read, alone or with others, in any order."""
    def value(quantity: str, options: str, u: object = None) -> float:
        found = call("FITVALUE", LAW, quantity, T, K, "K", u, options)
        assert isinstance(found, float)
        return found

    half = [value("high(drH)", f"level={level}") - value("drH", "") for level in (0.9, 0.95, 0.99)]
    assert half[0] < half[1] < half[2]
    assert half[1] / value("u(drH)", "") == pytest.approx(2.4469, abs=5e-5)
    for text in ("t_ref=310", "t_ref=36.85degC", "t_ref=98.33degF"):
        assert value("T_ref", text) == pytest.approx(310.0, rel=1e-12)
    celsius = [[t - 273.15] for ((t,)) in T]
    assert call("FITVALUE", LAW, "T_ref", celsius, K, "K", None, "degC t_ref=36.85") == pytest.approx(310.0, rel=1e-12)
    assert value("u(drH)", "u_known", U) != value("u(drH)", "u_as_weights", U) == value("u(drH)", "", U)
    assert value("drH", "constant_in=K") == value("drH", "level=0.9 constant_in=K") != value("drH", "constant_in=lnK")
    assert value("drH", "constant_in=ln K") == value("drH", "constant_in=lnK t_ref=300") == value("drH", "")
    assert value("u(drH)", "u_T=0.2", U) == value("u(drH)", "u_T=0.2K", U) > value("u(drH)", "", U)
    assert value("drH", "robust") != value("drH", "")
    assert call("FITVALUE", "Clarke-Glew", "drCpSlope", T, K, "K", None, "cp_slope") != 0.0


SENTENCES: dict[str, tuple[tuple[object, ...], str, str]] = {
    "law": (("Gibbs", "drH", T, K), "#VALUE!", "law is 'Gibbs': the laws are van 't Hoff, Clarke-Glew, Arrhenius"),
    "quantity": (
        (LAW, "Ea", T, K), "#VALUE!",
        "quantity is 'Ea', which a fit of van 't Hoff does not give: the quantities are drH",
    ),
    "y_is": (
        (LAW, "drH", T, K, "log K"), "#VALUE!",
        "y_is is 'log K', where log may be lg (decadic) or ln (natural): for van",
    ),
    "y_is of another law": (
        ("Arrhenius", "Ea", T, K, "K"), "#VALUE!",
        "y_is is 'K', an equilibrium constant: for Arrhenius it is the unit of",
    ),
    "y_is dimension": (
        ("Clausius-Clapeyron", "dvapH", T, K, "1/s"), "#VALUE!",
        "y_is is '1/s', a unit of rate constant of first order: ",
    ),
    "y_is left out": (
        ("Arrhenius", "Ea", T, K), "#VALUE!", "y_is is missing: the law Arrhenius needs the unit of the rate constants",
    ),
    "one point": (
        (LAW, "drH", [[300.0]], [[1.0]]), "#NUM!",
        "A fit of van 't Hoff has 2 parameters and needs points at 2 different temperatures; given: 1 point at 1",
    ),
    "equal temperatures": (
        (LAW, "drH", [[300.0]] * 3, [[1.0], [1.1], [1.2]]), "#NUM!",
        "A fit of van 't Hoff has 2 parameters and needs points at 2 different temperatures; given: 3 points at 1",
    ),
    "no row without a blank": (
        (LAW, "drH", [[300.0], [None]], [[None], [1.0]]), "#NUM!",
        "A fit of van 't Hoff has 2 parameters and needs points at 2 different temperatures; given: 0 points at 0",
    ),
    "too few for Clarke-Glew": (
        ("Clarke-Glew", "drH", T[:2], K[:2]), "#NUM!", "A fit of Clarke-Glew has 3 parameters and needs points at 3",
    ),
    "K of zero": (
        (LAW, "drH", T, [*K[:3], [0.0], *K[4:]]), "#NUM!",
        "y has 0 as cell number 4 in row order: K above 0 is needed, as its logarithm is taken.",
    ),
    "K below zero": (
        (LAW, "drH", T, [[-1.5], *K[1:]]), "#NUM!",
        "y has -1.5 as cell number 1 in row order: K above 0 is needed, as its logarithm is taken.",
    ),
    "u of zero": (
        (LAW, "drH", T, K, "K", [[0.0], *U[1:]]), "#NUM!",
        "u has 0 as cell number 1 in row order: a standard uncertainty above 0 is needed.",
    ),
    "text in y": (
        (LAW, "drH", T, [["1,5"], *K[1:]]), "#VALUE!", "y has '1,5' as cell number 1 in row order: a number is needed.",
    ),
    "truth value in y": (
        (LAW, "drH", T, [[True], *K[1:]]), "#VALUE!", "y has True as cell number 1 in row order: a number is needed.",
    ),
    "text in T": (
        (LAW, "drH", [["warm"], *T[1:]], K), "#VALUE!",
        "T, cell number 1, is the text 'warm', which does not start with a number",
    ),
    "decimal comma in T": (
        (LAW, "drH", [["25,5 degC"], *T[1:]], K), "#VALUE!",
        "T, cell number 1, is '25,5 degC', with a comma in the number: write 25.5 degC.",
    ),
    "below zero": (
        (LAW, "drH", [[-5.0], *T[1:]], K), "#NUM!",
        "T, cell number 1, is -5 K: a temperature above absolute zero (0 K) is needed.",
    ),
    "lengths": (
        (LAW, "drH", T, K[1:]), "#VALUE!",
        "T has 8 cells and y has 7: ranges of equal length are needed, one value for each.",
    ),
    "length of u": (
        (LAW, "drH", T, K, "K", U[1:]), "#VALUE!",
        "T has 8 cells and u has 7: ranges of equal length are needed, one value for each.",
    ),
    "u_known without u": (
        (LAW, "drH", T, K, "K", None, "u_known"), "#VALUE!",
        "u is missing: the option u_known needs the standard uncertainties of y.",
    ),
    "u_T without u": (
        (LAW, "drH", T, K, "K", None, "u_T=0.1"), "#VALUE!",
        "u is missing: the option u_T needs the standard uncertainties of y.",
    ),
    "orthogonal without u_T": (
        (LAW, "drH", T, K, "K", U, "orthogonal"), "#VALUE!",
        "u_T is missing: the option orthogonal needs the uncertainty of T, such as u_T=0.1.",
    ),
    "both": (
        (LAW, "drH", T, K, "K", U, "u_known u_as_weights"), "#VALUE!",
        "options has u_known and u_as_weights: they give different answers; choose one.",
    ),
    "estimators": (
        (LAW, "drH", T, K, "K", None, "robust constant_in=K"), "#VALUE!",
        "options has robust and constant_in=K: each is an estimator; choose one of them.",
    ),
    "level": (
        (LAW, "drH", T, K, "K", None, "level=95"), "#VALUE!",
        "options has 'level=95': a level of confidence between 0 and 1 is needed, such as level=0.95.",
    ),
    "two readings": (
        (LAW, "drH", T, K, "K", None, "t_ref=25 degC"), "#VALUE!",
        "options has 't_ref=25 degC': the unit without a space, or degC in front for all temperatures, is needed, such",
    ),
    "unknown word": (
        (LAW, "drH", T, K, "K", None, "extrapolate"), "#VALUE!",
        "options has 'extrapolate', which TF.FITVALUE does not know: the words are u_known, u_as_weights, robust,",
    ),
    "unknown pair": (
        (LAW, "drH", T, K, "K", None, "alpha=0.05"), "#VALUE!",
        "options has 'alpha=0.05', which TF.FITVALUE does not know",
    ),
    "slope": (
        (LAW, "drH", T, K, "K", None, "cp_slope"), "#VALUE!",
        "options has cp_slope and the law van 't Hoff: it is a term of Clarke-Glew.",
    ),
    "no chi-square": (
        (LAW, "chi2", T, K), "#N/A", "chi2 is not available: no uncertainties are stated, or no points are left over.",
    ),
    "uncertainty of two points": (
        (LAW, "u(drH)", T[:2], K[:2]), "#N/A",
        "u(drH) needs more points than parameters, or known uncertainties: 2 points determine 2 parameters exactly.",
    ),
    "error value": ((LAW, "drH", T, [[CellError("#DIV/0!")], *K[1:]]), "#DIV/0!", ""),
}  # fmt: skip


@pytest.mark.parametrize("case", SENTENCES)
def test_bad_input_is_an_error_with_its_sentence(case: str) -> None:
    """Bad input gives the error value of its kind, and the sentence names the argument and the remedy."""
    arguments, value, sentence = SENTENCES[case]
    found = evaluate("FITVALUE", list(arguments))
    assert isinstance(found, CellError)
    assert found.value == value
    assert found.sentence.startswith(sentence)
    assert len(found.sentence) < 500


def test_two_points_give_estimates_without_uncertainties() -> None:
    """Two points give the line through them, #N/A for every uncertainty, and a caution."""
    report = table(call("FIT", LAW, T[:2], K[:2]))
    slope = math.log(K[1][0] / K[0][0]) / (1.0 / T[0][0] - 1.0 / T[1][0])
    assert report["drH"][0] == pytest.approx(slope * R / 1000.0, rel=1e-12)
    assert [cell.value for cell in report["drH"][1:4] if isinstance(cell, CellError)] == ["#N/A"] * 3
    said = "2 points determine 2 parameters exactly: there is nothing to estimate an uncertainty from."
    assert said in report["caution"]
    known = table(call("FIT", LAW, T[:2], K[:2], "K", U[:2], "u_known"))
    by_hand = math.hypot(0.02, 0.02) / (1.0 / T[0][0] - 1.0 / T[1][0]) * R / 1000.0
    assert known["drH"][1] == pytest.approx(by_hand, rel=1e-10)


def test_rows_with_a_blank_are_left_out_and_counted() -> None:
    """A blank in any column leaves its row out, in the report, the cautions and the rows of the points."""
    t, k = [*T, [None], [300.0], [""]], [*K, [1.1], [None], [1.0]]
    report = table(call("FIT", LAW, t, k))
    assert report["points"][0] == 8
    assert report["rows left out for a blank"][0] == 3
    assert "3 rows were left out for a blank cell." in report["caution"]
    assert report["drH"] == table(call("FIT", LAW, T, K))["drH"]
    points = call("FITPOINTS", LAW, t, k)
    assert len(points) == 12
    assert [isinstance(row[1], CellError) for row in points[1:]] == [False] * 8 + [True] * 3


def test_points_come_in_the_order_of_the_rows() -> None:
    """Each row of FITPOINTS belongs to the row of the data, whatever their order."""
    ordered, reverse = call("FITPOINTS", LAW, T, K), call("FITPOINTS", LAW, T[::-1], K[::-1])
    assert [row[1:] for row in ordered[1:]] == [row[1:] for row in reverse[:0:-1]]
    assert math.fsum(row[4] for row in ordered[1:]) == pytest.approx(0.0, abs=1e-12)


def test_predictions_table() -> None:
    """FITAT gives ln K, K and, for a column of pK, pK with limits; outside the data is a caution."""
    rows = call("FITAT", LAW, [[300.0], [None], ["77 degC"]], T, K)
    head = rows[0]
    assert head[:3] == ["T [K]", "u(ln K)", "outside the points [K]"]
    one = dict(zip(head, rows[1], strict=True))
    assert math.log(one["K"]) == pytest.approx(one["ln K"], rel=1e-12)
    assert one["ln K prediction low"] < one["ln K confidence low"] < one["ln K"] < one["ln K confidence high"]
    assert math.log(one["K confidence high"]) == pytest.approx(one["ln K confidence high"], rel=1e-11)
    assert all(isinstance(cell, CellError) and cell.value == "#N/A" for cell in rows[2])
    assert rows[3][0] == pytest.approx(350.15)
    assert rows[3][2] == pytest.approx(32.0)
    explained = explain("FITAT", [LAW, [[350.15]], T, K])
    assert [caution.partition(",")[0] for caution in explained.cautions] == [
        "350.15 K is 32 K above the points (283.15 to 318.15 K): extrapolated by 0.74 times their span in 1/T",
    ]
    pk = [[-math.log10(k)] for ((k,)) in K]
    by_pk = call("FITAT", LAW, 300.0, T, pk, "pK")
    found = dict(zip(by_pk[0], by_pk[1], strict=True))
    assert found["pK"] == pytest.approx(-math.log10(found["K"]), rel=1e-11)
    assert found["pK confidence low"] == pytest.approx(-math.log10(found["K confidence high"]), rel=1e-9)


def test_temperature_table() -> None:
    """FITTEMP is the inverse of FITAT, row by row, and a value that has no temperature is its row's error."""
    k = call("FITAT", LAW, 305.0, T, K)[1][8]
    rows = call("FITTEMP", LAW, [[k], [-1.0], [None]], T, K)
    assert rows[1][1] == pytest.approx(305.0, rel=1e-11)
    assert rows[1][3] < 305.0 < rows[1][4]
    assert rows[2][1].sentence.startswith("y_value has -1 as cell number 2 in row order: K above 0 is needed")
    assert rows[3][0].value == "#N/A"
    alone = evaluate("FITTEMP", [LAW, [[0.0]], T, K])
    assert alone.value == "#NUM!"
    boiling = call("FITTEMP", "Antoine", 101.325, T, VAPOUR, "kPa")
    assert boiling[1][1] == pytest.approx(373.124, abs=3.0)  # from 283 to 318 K of rounded pressures


def test_antoine_constants_go_into_the_vapour_pressure_function() -> None:
    """A, B, C of the report, in the form that it names, give back the fitted pressures by PVAP."""
    for options, y, y_is in (("", VAPOUR, "kPa"), ("degC", VAPOUR, "kPa"), ("", VAPOUR, "ln kPa")):
        column = [[math.log(p)] for ((p,)) in y] if y_is.startswith("ln") else y
        t = [[x - 273.15] for ((x,)) in T] if options else T
        report = table(call("FIT", "Antoine", t, column, y_is, None, options))
        form = report["form of A, B, C"][0]
        constants = [[report[name][0] for name in "ABC"]]
        assert form == f"Antoine {'ln' if 'ln' in y_is else 'lg'} kPa {'degC' if options else 'K'}"
        fitted = call("FITAT", "Antoine", 300.0, T, VAPOUR, "kPa")[1][3]
        assert math.log(call("PVAP", form, constants, 300.0)) == pytest.approx(fitted, abs=2e-9)


REACTION = "N2O4(g) = 2 NO2(g)"


def test_a_fit_goes_into_the_reaction_functions() -> None:
    """A fit as the data of LNK gives its own predictions inside its range, and is refused outside."""
    for law in (LAW, "Clarke-Glew"):
        row = call("FITROW", REACTION, law, T, K)
        assert row[1][-1] == "fit of 283.15 to 318.15 K, 8 points"
        for t in (285.0, 300.0, 315.0):
            expected = call("FITAT", law, t, T, K)[1][3]
            assert call("LNK", REACTION, t, row) == pytest.approx(expected, abs=1e-11)
        assert call("DRH", REACTION, 298.15, None, row) == pytest.approx(call("FITVALUE", law, "drH", T, K), rel=1e-11)
        outside = evaluate("LNK", [REACTION, 350.0, row])
        assert outside.value == "#NUM!"
        assert "283.15 to 318.15 K" in outside.sentence
        extrapolated = explain("LNK", [REACTION, 350.0, row, "extrapolate"])
        assert extrapolated.result == pytest.approx(call("FITAT", law, 350.0, T, K)[1][3], abs=1e-9)
        sources = " ".join(step.source for step in explain("LNK", [REACTION, 300.0, row]).steps)
        assert "fit of 283.15 to 318.15 K, 8 points" in sources
    refused = evaluate("FITROW", [REACTION, "Arrhenius", T, K, "1/s"])
    assert refused.sentence.startswith("law is Arrhenius, whose fit gives no ΔrH° and ΔrS° of a reaction: fit K with")


def test_apparent_constants_are_labelled() -> None:
    """Apparent constants carry their condition in the report, the cautions, the working and the data row."""
    options = "level=0.9 apparent=pH 7.5"
    report = table(call("FIT", LAW, T, K, "K", None, options))
    assert report["apparent constants at"][0] == "pH 7.5"
    assert "drH′" in report
    assert report["caution"][0] == (
        "These are apparent constants at pH 7.5: every quantity holds at that condition alone and is no standard one."
    )
    explained = explain("FITVALUE", [LAW, "drH", T, K, "K", None, options])
    assert explained.steps[-1].symbol == "ΔrH°′"
    assert explained.cautions[0].startswith("These are apparent constants at pH 7.5")
    row = call("FITROW", REACTION, LAW, T, K, "K", None, options)
    assert row[1][-1] == "apparent at pH 7.5, fit of 283.15 to 318.15 K, 8 points"


def test_the_working_shows_form_design_solution_and_propagation() -> None:
    """WORKING has the linear form, the design's summary, the solution, s, and the propagated uncertainty."""
    rows = call("WORKING", "FITVALUE", LAW, "drS", T, K)
    quantities = [row[1] for row in rows[1:]]
    assert quantities == ["n", "form", "θ", "design", "ln K at θ", "ΔrH°(θ)/R", "s", "T", "u(ΔrS°)", "ΔrS°"]
    assert rows[-1][4] == call("FITVALUE", LAW, "drS", T, K)
    whole = [row[1] for row in call("WORKING", "FIT", "Clarke-Glew", T, K)[1:]]
    assert {"ΔrCp°(θ)/R", "u(ΔrCp°)", "ΔrG°", "u(ΔrG°)"} <= set(whole)


def test_arrays_and_rows_are_columns_too() -> None:
    """Arrays of numpy, rows and columns give one answer."""
    expected = call("FITVALUE", LAW, "drH", T, K)
    t, k = np.array(T), np.array(K)
    for one, other in ((t, k), (t[:, 0], k[:, 0]), (t.T.tolist(), K), (t.T, k.T)):
        assert call("FITVALUE", LAW, "drH", one, other) == expected
    whole = call("FITVALUE", LAW, "n", [[283, 300], [310, 320]], [[1, 2], [3, 4]])
    assert whole == 4.0


def test_a_law_over_a_range_is_refused_where_the_answer_is_a_table() -> None:
    """A range where one value is needed is #VALUE! in a function that gives a table."""
    found = evaluate("FIT", [[[LAW], ["Clarke-Glew"]], T, K])
    assert found.value == "#VALUE!"
    assert found.sentence.startswith("law is a range of cells: a text: van't Hoff, ")


ODD: list[object] = [
    0.0, -1.0, 1e308, 1e-308, 300.0, 1, True, None, BLANK, "", "x", "K", "pK", "1/s", "bar", "ln bar", "drH", "u(drH)",
    "low(K)", "r(drH,drS)", "p(runs)", "van't Hoff", "Clarke-Glew", "Antoine", "Eyring", "robust", "constant_in=K",
    "level=0.5 u_known", "u_T=0.1 orthogonal", "t_ref=1e5", "cp_slope", "apparent=pH 7", CellError("#REF!"), T, K, U,
    VAPOUR, [[300.0], [300.0]], [[None], [""]], [["a"]], [[]], [[1e308], [1e-308]], T[:3], K[:3],
    [[1e-300, 1e300, 5.0]],
]  # fmt: skip


def is_a_cell(value: object) -> bool:
    """Whether a value is one that a worksheet can hold."""
    if isinstance(value, list):
        return all(is_a_cell(cell) for row in value for cell in row)
    return isinstance(value, str | bool | CellError) or (isinstance(value, int | float) and math.isfinite(value))


@given(st.sampled_from(FITS), st.data())
@settings(max_examples=1000, deadline=None)
def test_odd_arguments_give_a_value_or_an_error_value(function: Function, data: st.DataObject) -> None:
    """Whatever stands in the cells, the answer is a finite value, a table of such, or an error value."""
    arguments = [*function.example, *[None] * (len(function.arguments) - len(function.example))]
    for _ in range(data.draw(st.integers(1, 4))):
        place = data.draw(st.integers(0, len(arguments) - 1))
        arguments[place] = data.draw(st.sampled_from(ODD))
    value = evaluate(function.name, arguments)
    assert is_a_cell(value)
    if isinstance(value, float):
        explained = explain(function.name, arguments)
        assert explained.steps[-1].value == value
        assert all(0 < len(caution) < 255 for caution in explained.cautions)
