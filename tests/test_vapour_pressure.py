"""Vapour pressure from published constants."""

from __future__ import annotations

import csv
import math
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.errors import (
    BlankInRange,
    NotAboveZero,
    NoVapourPressure,
    OutsideConstantsRange,
    OutsideNumbers,
    UnknownVapourForm,
    WrongCount,
)
from thermofuncs.vapour_pressure import read_form, vapour_pressure, vapour_temperature
from thermofuncs.working import Record

REFERENCE = Path(__file__).parent / "reference" / "vapour_pressures.csv"
LINES = [line for line in REFERENCE.read_text(encoding="utf-8").splitlines() if not line.startswith("#")]
ROWS = list(csv.DictReader(LINES))
WATER = [8.07131, 1730.63, 233.426]  # lg, mmHg, degC; in wide use, from memory
PERRY_WATER = [73.649, -7258.2, -7.3037, 4.1653e-6, 2.0]


@pytest.mark.parametrize("row", ROWS, ids=lambda row: f"{row['substance']} {row['form']} {row['t_K']}")
def test_published_constants_give_published_pressures(row: dict[str, str]) -> None:
    """Published constants give the published pressure, and the temperature back, within the fit's quality."""
    constants = [float(text) for text in row["constants"].split()]
    temperature, pressure, relative = float(row["t_K"]), float(row["p_bar"]), float(row["relative"])
    found = vapour_pressure(row["form"], constants, temperature)
    assert found == pytest.approx(pressure, rel=relative)
    assert vapour_temperature(row["form"], constants, found) == pytest.approx(temperature, abs=1e-7)


def test_handbook_pressure_at_the_lowest_temperature() -> None:
    """The five constants of water give the 610.56 Pa that the handbook prints at 273.16 K."""
    # Perry's Chemical Engineers' Handbook, 8th ed., Table 2-8: 6.1056E+02 Pa (figure from memory)
    assert vapour_pressure("five-constant", PERRY_WATER, 273.16) == pytest.approx(610.56e-5, abs=0.005e-5)


@given(st.floats(274.0, 640.0))
def test_five_constants_there_and_back(temperature: float) -> None:
    """The temperature of the vapour pressure at a temperature is that temperature."""
    pressure = vapour_pressure("five-constant", PERRY_WATER, temperature)
    assert vapour_temperature("five-constant", PERRY_WATER, pressure) == pytest.approx(temperature, rel=1e-10)


FORMS = st.tuples(
    st.sampled_from(["lg", "ln"]),
    st.sampled_from(["mmHg", "torr", "bar", "atm", "Pa", "kPa", "psi"]),
    st.sampled_from(["K", "degC", "degF", "degR"]),
)


@given(FORMS, st.floats(280.0, 420.0))
def test_constants_in_any_units_give_one_pressure(form: tuple[str, str, str], temperature: float) -> None:
    """Constants rewritten for another logarithm, pressure unit and scale give the same pressure."""
    logarithm, pressure_unit, scale = form
    pascals = {
        "mmHg": 133.322387415,
        "torr": 101325 / 760,
        "bar": 1e5,
        "atm": 101325.0,
        "Pa": 1.0,
        "kPa": 1e3,
    }
    in_unit = {**pascals, "psi": 6894.757293168}[pressure_unit]
    degree = {"K": 1.0, "degC": 1.0, "degF": 1.8, "degR": 1.8}[scale]
    shift = {"K": 0.0, "degC": 273.15, "degF": 459.67, "degR": 0.0}[scale]
    factor = 1.0 if logarithm == "lg" else math.log(10.0)
    a = (WATER[0] + math.log10(133.322387415 / in_unit)) * factor
    b = WATER[1] * degree * factor
    c = (WATER[2] - 273.15) * degree + shift
    text = f"Antoine {logarithm} {pressure_unit} {scale}"
    expected = vapour_pressure("Antoine lg mmHg degC", WATER, temperature)
    assert vapour_pressure(text, [a, b, c], temperature) == pytest.approx(expected, rel=1e-10)
    assert vapour_temperature(text, [a, b, c], expected) == pytest.approx(temperature, rel=1e-10)


def test_form_words_are_a_closed_list() -> None:
    """A form is read with the unit's synonyms, and what it does not understand is named."""
    assert read_form("antoine lg mmHg degC") == read_form("Antoine lg mmHg °C")
    assert read_form("Five-Constant").count == 5
    for text, why in (
        ("Antoine", "which is not a form"),
        ("DIPPR", "which is not a form"),
        ("Antoine log mmHg degC", "where log should be lg (decadic) or ln (natural)"),
        ("Antoine lg mmHg C", "where C is no unit of temperature"),
        ("Antoine lg barg degC", "where barg is no unit of pressure"),
        ("Antoine lg degC mmHg", "where degC is no unit of pressure"),
    ):
        with pytest.raises(UnknownVapourForm) as caught:
            read_form(text)
        assert caught.value.sentence == (
            f"form is {text!r}, {why}: write five-constant, or Antoine with lg or ln, a pressure unit and a "
            "temperature unit, such as Antoine lg mmHg degC."
        )


def test_constants_that_do_not_fit_are_refused() -> None:
    """The wrong number of constants, a blank, and a B of the other sign are refused."""
    with pytest.raises(WrongCount) as count:
        vapour_pressure("Antoine lg mmHg degC", WATER[:2], 300.0)
    assert count.value.sentence == (
        "constants has 2 numbers: 3, or 5 with the lowest and highest temperature in degC, are needed."
    )
    with pytest.raises(BlankInRange, match="constants has a blank cell, number 3"):
        vapour_pressure("Antoine lg mmHg degC", [*WATER[:2], None], 300.0)
    with pytest.raises(NoVapourPressure) as sign:
        vapour_pressure("Antoine lg mmHg degC", [8.07131, -1730.63, 233.426], 300.0)
    assert sign.value.sentence == (
        "constants: B is not positive, and this form is A − B/(C + t): give B with the other sign."
    )


def test_wrong_scale_is_seen_where_it_leaves_the_curve() -> None:
    """A temperature at or below −C, and a pressure at or above the limit of the constants, are refused."""
    with pytest.raises(NoVapourPressure) as pole:
        vapour_pressure("Antoine lg mmHg degC", [8.0, 1700.0, -40.0], 300.0)
    assert pole.value.sentence.startswith("t: C + t is -13.15 and must be positive")
    with pytest.raises(NoVapourPressure) as limit:
        vapour_temperature("Antoine lg mmHg degC", WATER, 1e6)
    assert limit.value.sentence == ("p: 7.50062e+08 mmHg is at or above the limit of the constants, where log p = A.")
    with pytest.raises(NoVapourPressure) as none:
        vapour_temperature("five-constant", [*PERRY_WATER, 273.16, 647.096], 1e-9)
    assert none.value.sentence == "p: no temperature from 273.16 to 647.096 K has this vapour pressure."
    with pytest.raises(NotAboveZero, match="p is 0 bar: a pressure above 0 is needed"):
        vapour_temperature("five-constant", PERRY_WATER, 0.0)
    with pytest.raises(OutsideNumbers, match="The vapour pressure is outside the range of numbers"):
        vapour_pressure("Antoine ln bar K", [10.0, 4000.0, -299.0], 300.0)


def test_range_behind_the_constants_is_kept() -> None:
    """Limits behind the constants are kept; without them a caution says that the range is not known."""
    ranged = [*WATER, 1.0, 100.0]
    record = Record()
    assert vapour_pressure("Antoine lg mmHg degC", ranged, 300.0, record) == vapour_pressure(
        "Antoine lg mmHg degC", WATER, 300.0
    )
    assert record.cautions == []
    with pytest.raises(OutsideConstantsRange) as caught:
        vapour_pressure("Antoine lg mmHg degC", ranged, 400.0)
    assert caught.value.sentence == (
        "t is 400 K, and the constants hold from 274.15 K to 373.15 K. "
        "Leave the two limits out of constants to extrapolate, with a caution."
    )
    with pytest.raises(OutsideConstantsRange):
        vapour_temperature("Antoine lg mmHg degC", ranged, 5.0)
    record = Record()
    vapour_pressure("Antoine lg mmHg degC", WATER, 300.0, record)
    assert record.cautions == [
        (
            "The range of the constants is not given, so an extrapolation cannot be seen: "
            "write its two limits behind the constants."
        )
    ]


def test_last_step_is_the_result_bit_for_bit() -> None:
    """The last recorded step is the result, of the pressure and of the temperature, in every form."""
    for form, constants in (("Antoine lg mmHg degC", WATER), ("five-constant", PERRY_WATER)):
        record = Record()
        pressure = vapour_pressure(form, constants, 345.6, record)
        assert record.steps[-1].value == pressure
        record = Record()
        assert vapour_temperature(form, constants, pressure, record) == record.steps[-1].value
