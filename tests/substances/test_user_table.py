"""A user's own table of substances and reactions."""

from __future__ import annotations

import csv
import math
from pathlib import Path

import cantera as ct
import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.errors import BadDataTable, CellError
from thermofuncs.substances import find_substance, forms, nasa_glenn, parse, printed, search
from thermofuncs.substances.records import Substance
from thermofuncs.substances.user_table import UserData
from thermofuncs.units import R

REFERENCE = Path(__file__).parent.parent / "reference"
ZINC_OXIDE: list[list[object]] = [
    ["substance", "dfH [kJ/mol]", "S", "Cp", "T_low", "T_high", "source"],
    ["ZnO(s)", -350.46, 43.65, 40.25, 298.15, 1000.0, "own selection"],
]


def values(substance: Substance, t: float) -> tuple[float, float, float]:
    """Cp° and S° [J/(mol K)] and H° [J/mol] at a temperature [K]."""
    interval = next(i for i in substance.segments[0].row.intervals if t <= i.t_high)
    return (
        forms.heat_capacity(interval, t) * R,
        forms.entropy(interval, t) * R,
        forms.enthalpy(interval, t) * R * t,
    )


def faults(rows: list[list[object]]) -> str:
    """What is said about a table."""
    with pytest.raises(BadDataTable) as raised:
        parse(rows)
    return raised.value.sentence


def test_a_constant_heat_capacity() -> None:
    """A row with ΔfH°, S° and Cp gives them back at 298.15 K and integrates Cp from there."""
    own = parse(ZINC_OXIDE).substances[0]
    cp, s, h = values(own, 500.0)
    assert cp == pytest.approx(40.25)
    assert s == pytest.approx(43.65 + 40.25 * math.log(500.0 / 298.15))
    assert h == pytest.approx(-350460.0 + 40.25 * (500.0 - 298.15))
    assert str(own.segments[0].row.source) == "worksheet table, ZnO(s): own selection"


def test_units_from_header_row_and_cell_agree() -> None:
    """The same figures in calories give the same substance."""
    in_calories: list[list[object]] = [
        ["substance", "dfH", "S [cal/(mol K)]", "Cp", "T_low", "T_high [degC]", "source", "unit", "unit S"],
        ["ZnO(s)", -350.46 / 4.184, 43.65 / 4.184, 40.25 / 4.184, "298.15 K", 726.85, "x", "kcal/mol",
         "cal/(mol K)"],
    ]  # fmt: skip
    for ours, theirs in zip(
        values(parse(in_calories).substances[0], 700.0),
        values(parse(ZINC_OXIDE).substances[0], 700.0),
        strict=True,
    ):
        assert ours == pytest.approx(theirs, rel=1e-12)


def test_powers_of_the_temperature() -> None:
    """Coefficients under headers with exponents are a sum of powers, halves and negatives included."""
    table: list[list[object]] = [
        ["substance", "dfH", "S", "Cp T^0", "Cp T^1", "Cp T^-2", "Cp*T^-1/2", "T_low", "T_high", "source"],
        ["Al2O3(s)", -1675.7, 50.92, 117.49, 0.01038, -3.711e6, 12.0, 298.15, 2000.0, "x"],
    ]
    t = 900.0
    cp = 117.49 + 0.01038 * t - 3.711e6 / t**2 + 12.0 / math.sqrt(t)
    assert values(parse(table).substances[0], t)[0] == pytest.approx(cp, rel=1e-12)


@pytest.mark.parametrize("own_anchor", [False, True])
@pytest.mark.parametrize("name", ["N2(g)", "O2(g)", "H2O(g)", "CO2(g)"])
def test_shomate(name: str, own_anchor: bool) -> None:
    """Shomate's equation meets the tabulated heat capacity, enthalpy and entropy, from F and G or from ΔfH° and S°."""
    lines = (REFERENCE / "shomate.csv").read_text(encoding="utf-8").splitlines()
    case = next(r for r in csv.DictReader(x for x in lines if not x.startswith("#")) if r["substance"] == name)
    header = ["substance", "form", "T_low", "T_high", "source", *"ABCDE"]
    row: list[object] = [name, "Shomate", float(case["T_low"]), float(case["T_high"]), "WebBook"]
    row += [float(case[c]) for c in "ABCDE"]
    t = float(case["T"])
    bundled = values(find_substance(name), t)
    if own_anchor:
        _, s, h = bundled
        extra: list[object] = [h / 1000.0 + _elements(name, t), s, t]
        header, row = [*header, "dfH", "S", "T_ref"], [*row, *extra]
    else:
        header, row = [*header, "F", "G"], [*row, float(case["F"]), float(case["G"])]
    cp, s, h = values(parse([header, row]).substances[0], t)
    assert cp == pytest.approx(float(case["cp"]), abs=0.06)
    assert s == pytest.approx(float(case["s"]), abs=0.06)
    start = find_substance(name).segments[0].row.formation_enthalpy
    assert (h - start) / 1000.0 == pytest.approx(float(case["h_minus_h298"]), abs=0.06)


def _elements(name: str, t: float) -> float:
    """Minus the enthalpy of the elements, so that an enthalpy becomes a formation enthalpy at t. [kJ/mol]"""
    parts = {"N2(g)": {"N2(g)": 1.0}, "O2(g)": {"O2(g)": 1.0}, "H2O(g)": {"H2(g)": 1.0, "O2(g)": 0.5},
             "CO2(g)": {"C(s)": 1.0, "O2(g)": 1.0}}[name]  # fmt: skip
    return -sum(n * values(find_substance(x), t)[2] for x, n in parts.items()) / 1000.0


def test_nasa9_is_the_bundled_form() -> None:
    """Scaled coefficients of a bundled record, given by the user, give the bundled substance."""
    bundled = find_substance("CO2(g)").segments[0].row
    table: list[list[object]] = [
        ["substance", "form", "T_low", "T_high", *(f"a{i}" for i in range(1, 8)), "b1", "b2", "source"]
    ]
    for i in bundled.intervals:
        a = dict(i.terms)
        table.append(
            ["CO2(g)", "NASA-9", i.t_low, i.t_high, *(a.get(float(n), 0.0) for n in range(-2, 5)), i.b1, i.b2, "x"]
        )
    own = parse(table).substances[0]
    assert own.segments[0].row.intervals == tuple(
        forms.Interval(i.t_low, i.t_high, own_i.terms, i.b1, i.b2)
        for i, own_i in zip(bundled.intervals, own.segments[0].row.intervals, strict=True)
    )
    for t in (300.0, 1500.0, 8000.0):
        assert values(own, t) == pytest.approx(values(find_substance("CO2(g)"), t), rel=1e-13)


def test_nasa7_meets_the_reference_implementation() -> None:
    """A NASA-7 row agrees with cantera, the reference implementation, in Cp, S and H."""
    a = [2.35677352, 8.98459677e-3, -7.12356269e-6, 2.45919022e-9, -1.43699548e-13, -48371.9697, 9.90105222]
    table: list[list[object]] = [
        ["substance", "form", "T_low", "T_high", *(f"a{i}" for i in range(1, 8)), "source"],
        ["CO2(g)", "NASA 7", 200.0, 1000.0, *a, "x"],
    ]
    theirs = ct.NasaPoly2(200.0, 1000.0, 1e5, [1000.0, *a, *a])
    cp, s, h = values(parse(table).substances[0], 700.0)
    assert cp == pytest.approx(theirs.cp(700.0) / 1000.0, rel=1e-12)
    assert s == pytest.approx(theirs.s(700.0) / 1000.0, rel=1e-12)
    assert h == pytest.approx(theirs.h(700.0) / 1000.0, rel=1e-12)


def test_intervals_continue() -> None:
    """A second row without ΔfH° and S° goes on from the first with equal H and S."""
    table: list[list[object]] = [*ZINC_OXIDE, ["ZnO(s)", None, None, 55.0, 1000.0, 1500.0, "another"]]
    own = parse(table).substances[0]
    below, above = own.segments[0].row.intervals
    assert forms.enthalpy(above, 1000.0) == pytest.approx(forms.enthalpy(below, 1000.0), rel=1e-14)
    assert forms.entropy(above, 1000.0) == pytest.approx(forms.entropy(below, 1000.0), rel=1e-14)
    assert own.segments[0].row.source.reference == "own selection; another"
    assert own.t_high == 1500.0


def test_a_standard_pressure_is_converted() -> None:
    """The entropy of a gas at 1 atm gains R ln(1.01325) at 1 bar; a solid's does not."""
    for name, gain in (("SeO2(g)", R * math.log(1.01325)), ("SeO2(s)", 0.0)):
        table: list[list[object]] = [
            ["substance", "dfH", "S", "Cp", "p_ref [atm]", "T_low", "T_high", "source"],
            [name, -100.0, 200.0, 40.0, 1.0, 298.15, 1000.0, "x"],
        ]
        assert values(parse(table).substances[0], 298.15)[1] == pytest.approx(200.0 + gain, rel=1e-12)


def test_uncertainties_in_the_unit_of_the_row() -> None:
    """u(dfH) is converted like dfH; where it is blank the uncertainty is unknown."""
    table: list[list[object]] = [
        ["substance", "dfH", "u(dfH)", "S", "u(S)", "Cp", "T_low", "T_high", "source", "unit"],
        ["ZnO(s)", -83.76, 0.1, 43.65, None, 40.25, 298.15, 1000.0, "x", "kcal/mol"],
    ]
    row = parse(table).substances[0].segments[0].row
    assert row.u_formation_enthalpy.value == pytest.approx(418.4)
    assert row.u_entropy.kind == "unknown"


def test_the_table_goes_before_the_bundled_data() -> None:
    """A substance of the table is found first, by its text, its name, its formula and phase; others stay."""
    table: list[list[object]] = [
        ["substance", "formula", "phase", "dfH", "S", "Cp", "T_low", "T_high", "source"],
        ["my lime", "CaO", "s", -635.0, 38.0, 42.0, 298.15, 1000.0, "x"],
        ["CO2(g)", None, None, -394.0, 214.0, 37.0, 298.15, 1000.0, "x"],
        ["ZnO(cr)", None, None, -350.0, 44.0, 40.0, 298.15, 1000.0, "x"],
    ]
    data = parse(table)
    for text in ("my lime", "CaO(s)", "CaO(cr)", "CO2(g)", "CO2", "ZnO(s)", "ZnO"):
        assert find_substance(text, data).segments[0].row.source.dataset == "worksheet table", text
    assert find_substance("CaO(g)", data).segments[0].row.source.dataset == printed.DATASET
    assert search("lime", data)[0].name == "my lime"


def test_a_row_never_stands_for_an_isomer() -> None:
    """A user's row of one isomer is not found under another's formula."""
    table: list[list[object]] = [
        ["substance", "dfH", "S", "Cp", "T_low", "T_high", "source"],
        ["HNC(g)", 190.0, 205.0, 40.0, 298.15, 1000.0, "x"],
    ]
    assert find_substance("HCN(g)", parse(table)).segments[0].row.source.dataset == printed.DATASET


def test_a_whole_reaction() -> None:
    """A reaction row carries its values in the units of the house, and no heat capacity where none is given."""
    table: list[list[object]] = [
        ["reaction", "drH [kcal/mol]", "drS", "drCp", "T_ref", "T_low", "T_high", "source"],
        ["A(aq) = B(aq)", 2.8, -3.0, 44.0, "25 degC", 280.0, 330.0, "calorimeter"],
        ["B(aq) = C(aq)", 1.0, 2.0, None, None, 280.0, 330.0, "calorimeter"],
    ]
    first, second = parse(table).reactions
    assert (first.equation, first.drh, first.drs, first.drcp) == ("A(aq) = B(aq)", 2.8 * 4184.0, -3.0, 44.0)
    assert (first.t_ref, first.t_low, first.t_high) == (298.15, 280.0, 330.0)
    assert second.drcp is None
    assert str(second.source) == "worksheet table, B(aq) = C(aq): calorimeter"


def test_a_row_is_a_substance_or_a_reaction() -> None:
    """A row with both is refused."""
    table: list[list[object]] = [
        ["reaction", "substance", "drH", "drS", "T_low", "T_high", "source"],
        ["A = B", "ZnO(s)", 1.0, 2.0, 280.0, 330.0, "x"],
    ]
    assert "row 2, reaction: the row also has a substance: one or the other" in faults(table)


@pytest.mark.parametrize(
    ("column", "value", "said"),
    [
        (1, "abc", "row 2, dfH [kJ/mol]: is 'abc', which is no number"),
        (1, None, "row 2, dfH [kJ/mol]: is blank"),
        (1, True, "row 2, dfH [kJ/mol]: is True, which is no number"),
        (1, math.inf, "row 2, dfH [kJ/mol]: is not finite"),
        (2, CellError("#N/A"), "row 2, S: is the error value #N/A"),
        (3, None, "row 2, Cp: is blank"),
        (4, "25 C", "write degC"),
        (4, "25,5 degC", "row 2, T_low: "),
        (5, 200.0, "row 2, T_high: is 200 K, which is not above T_low = 298.15 K"),
        (6, None, "row 2, source: is blank"),
        (0, "zinc white", "a name needs its formula in the column formula"),
        (0, "ZnO", "row 2, phase: ZnO needs a phase: g, l, s or aq"),
    ],
)
def test_a_bad_cell_is_named(column: int, value: object, said: str) -> None:
    """A cell that cannot be used is named by row and column with what would do."""
    table: list[list[object]] = [list(row) for row in ZINC_OXIDE]
    table[1][column] = value
    assert said in faults(table)


def test_all_bad_cells_are_named_at_once() -> None:
    """Every bad cell of a table is in one sentence."""
    table: list[list[object]] = [list(ZINC_OXIDE[0]), ["ZnO(s)", "a", 1.0, "b", 300.0, 400.0, None]]
    said = faults(table)
    assert said.startswith("data: row 2, ")
    assert "row 2, source: is blank" in said
    assert "row 2, Cp: is 'b', which is no number" in said


@pytest.mark.parametrize(
    ("header", "said"),
    [
        (["substance", "dHf", "source"], "row 1, dHf: is no column of a data table; the columns are substance"),
        (["substance", "S"], "row 1, header: the column source is missing"),
        (["S", "source"], "row 1, header: a column substance or reaction is missing"),
        (["substance", "source", "Source"], "row 1, Source: stands twice"),
    ],
)
def test_a_bad_header_is_named(header: list[str], said: str) -> None:
    """A header that is not understood says what the columns are."""
    assert said in faults([list(header), ["ZnO(s)", 1.0, "x"]])


def test_an_empty_table() -> None:
    """A table without rows is refused."""
    assert faults([]) == "data: row 1, header: the table is empty."


def test_a_unit_of_the_wrong_dimension_is_named() -> None:
    """A heat capacity in a molar energy's unit is refused in the words of the units."""
    table: list[list[object]] = [list(row) for row in ZINC_OXIDE]
    table[0][3] = "Cp [kJ/mol]"
    assert "Cp is in kJ/mol, a unit of molar energy" in faults(table)


def test_intervals_that_do_not_meet_are_named() -> None:
    """A gap between two rows of one substance is a fault of the later one."""
    table: list[list[object]] = [*ZINC_OXIDE, ["ZnO(s)", None, None, 55.0, 1100.0, 1500.0, "x"]]
    assert "row 3, T_low: is 1100 K, and the interval before it ends at 1000 K" in faults(table)


def test_a_nasa_row_with_an_enthalpy_is_refused() -> None:
    """ΔfH° beside the constants that carry it is refused, as one of the two would be dropped."""
    table: list[list[object]] = [
        ["substance", "form", "T_low", "T_high", *(f"a{i}" for i in range(1, 8)), "dfH", "source"],
        ["CO2(g)", "NASA-7", 200.0, 1000.0, 2.4, 0.0, 0.0, 0.0, 0.0, -48000.0, 9.9, -393.5, "x"],
    ]
    assert "is given beside a6 and a7, which carry it" in faults(table)


def test_equal_cells_give_equal_data() -> None:
    """Two tables with the same cells are equal and hash alike; another cell makes another table."""
    other: list[list[object]] = [list(row) for row in ZINC_OXIDE]
    other[1][1] = -350.47
    assert parse(ZINC_OXIDE) == parse([list(row) for row in ZINC_OXIDE])
    assert hash(parse(ZINC_OXIDE)) == hash(parse([list(row) for row in ZINC_OXIDE]))
    assert parse(ZINC_OXIDE) != parse(other)


CELLS = st.one_of(
    st.none(), st.floats(), st.integers(-5, 5), st.booleans(), st.text(max_size=6), st.just(CellError("#REF!")),
    st.sampled_from(["ZnO(s)", "CO2(g)", "298.15 K", "25 degC", "NASA-9", "powers", "kcal/mol"]),
)  # fmt: skip
COLUMNS = st.lists(
    st.sampled_from(
        ["substance", "dfH", "S", "Cp", "T_low", "T_high", "source", "form", "unit", "phase", "formula", "p_ref",
         "Cp T^1", "reaction", "drH", "drS", "a1", "A", "T_ref"]
    ),
    unique=True, max_size=12,
)  # fmt: skip


@given(st.data())
def test_any_table_is_read_or_refused_with_a_sentence(drawn: st.DataObject) -> None:
    """No table fails in another way than one sentence that names its cells."""
    header = drawn.draw(COLUMNS)
    rows = [drawn.draw(st.lists(CELLS, min_size=len(header), max_size=len(header))) for _ in range(2)]
    try:
        data = parse([list(header), *rows])
    except BadDataTable as error:
        assert error.sentence.startswith("data: row ")
    else:
        assert isinstance(data, UserData)


@given(
    st.floats(-5e6, 5e6), st.floats(1.0, 500.0), st.floats(1.0, 300.0), st.floats(250.0, 400.0)
)
def test_values_round_trip(dfh: float, s: float, cp: float, t_low: float) -> None:
    """What a row states at 298.15 K comes back from it, whatever its range."""
    table: list[list[object]] = [ZINC_OXIDE[0], ["ZnO(s)", dfh / 1000.0, s, cp, t_low, t_low + 500.0, "x"]]
    back = values(parse(table).substances[0], 298.15)
    assert back == pytest.approx((cp, s, dfh), rel=1e-9, abs=1e-6)


def test_the_scale_of_the_fit_is_not_applied() -> None:
    """Bundled coefficients are scaled once, a user's never."""
    assert pytest.approx(8.31451 / R) == nasa_glenn.SCALE
