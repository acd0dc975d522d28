"""Units, quantity texts and constants."""

from __future__ import annotations

import csv
import subprocess
import sys
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs import units
from thermofuncs.errors import (
    BelowAbsoluteZero,
    DecimalComma,
    NoSuchConstant,
    NotAQuantity,
    NotUnderstood,
    QuantityOutsideNumbers,
    ShiftedScale,
    ThermofuncsError,
    WrongDimension,
)
from thermofuncs.unit_spellings import canonical, every_combination, read_unit
from thermofuncs.units import constant, convert, dimension, factor, kelvin, parse_quantity, quantity

REFERENCE = Path(__file__).parent / "reference"
SPELLINGS = [canonical(powers) for powers in every_combination()]
BY_DIMENSION: dict[str, list[str]] = {}
for _spelling in SPELLINGS:
    BY_DIMENSION.setdefault(read_unit(_spelling).dimension, []).append(_spelling)


def rows(name: str) -> list[dict[str, str]]:
    """The rows of a reference file, without its header of comments."""
    lines = (REFERENCE / name).read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


def half_last_digit(printed: str) -> float:
    """Half a unit in the last printed digit."""
    mantissa, _, exponent = printed.lower().partition("e")
    decimals = len(mantissa.partition(".")[2])
    return 0.5000001 * 10.0 ** (int(exponent or 0) - decimals)


@pytest.mark.parametrize("row", rows("unit_factors.csv"), ids=lambda row: f"{row['from_unit']} {row['into_unit']}")
def test_factor_meets_the_published_one(row: dict[str, str]) -> None:
    """Each conversion factor agrees with NIST SP 811 within half of its last printed digit."""
    assert factor(row["from_unit"], row["into_unit"]) == pytest.approx(
        float(row["factor"]), abs=half_last_digit(row["factor"]), rel=0
    )


def test_exact_definitions() -> None:
    """The calorie, the BTU and the pound mole are the defined ones."""
    assert factor("kcal/mol", "kJ/mol") == 4.184
    assert factor("BTU", "J") == 1055.05585262
    assert factor("lbmol", "mol") == 453.59237
    assert factor("BTU/lbmol", "J/mol") == 2.326
    assert factor("BTU/(lbmol degF)", "cal/(mol K)") == pytest.approx(4.1868 / 4.184, rel=1e-15)


def test_molar_energies_of_single_particles() -> None:
    """An electronvolt and a hartree for each particle are 96.485 kJ/mol and 627.509 kcal/mol."""
    assert factor("eV/particle", "kJ/mol") == pytest.approx(96.48533212, abs=1e-8)
    assert factor("hartree/particle", "kcal/mol") == pytest.approx(627.509474, abs=1e-6)


@pytest.mark.parametrize("row", rows("codata_constants.csv"), ids=lambda row: f"{row['symbol']} {row['edition']}")
def test_constant_meets_the_codata_edition(row: dict[str, str]) -> None:
    """Each constant has the value and the uncertainty that its CODATA edition prints."""
    found = constant(row["symbol"])
    if row["edition"] not in {"both", found.edition}:
        assert float(row["value"]) != found.value
        return
    assert found.value == pytest.approx(float(row["value"]), rel=1e-9 if row["edition"] == "both" else 1e-15)
    assert found.standard_uncertainty == pytest.approx(float(row["standard_uncertainty"]), rel=1e-9)
    assert found.unit == row["unit"]


def test_constant_is_found_by_symbol_and_by_name() -> None:
    """The gas constant is one constant, whether called R or by its name, and an unknown name is refused."""
    assert constant("Molar gas constant").value == constant("R").value == units.R
    assert constant("F").value == units.F
    with pytest.raises(NoSuchConstant) as caught:
        constant("G")
    assert caught.value.sentence == (
        "name is 'G', which is not in the list of constants: R, F, NA, kB, h, e, c, u, me, mp, Eh, a0, Vm, atm."
    )


@given(st.sampled_from(sorted(BY_DIMENSION)), st.data())
def test_there_and_back_is_the_identity(measured: str, data: st.DataObject) -> None:
    """A value converted into another unit and back is the value."""
    first, second = (data.draw(st.sampled_from(BY_DIMENSION[measured])) for _ in range(2))
    value = data.draw(st.floats(1e-3, 1e6))
    back = convert(convert(value, first, second), second, first)
    assert back == pytest.approx(value, rel=4e-15, abs=1e-12 * 460 if measured == "temperature" else 0)


@given(st.sampled_from(SPELLINGS))
def test_a_unit_into_itself_has_a_factor_of_one(spelling: str) -> None:
    """The factor from a unit into itself is exactly one."""
    assert factor(spelling, spelling) == 1.0


@given(st.sampled_from(SPELLINGS), st.sampled_from(SPELLINGS))
def test_a_wrong_dimension_lists_needed_and_given(given_unit: str, needed_unit: str) -> None:
    """Units of different dimension are refused with both dimensions in the sentence."""
    if dimension(given_unit) == dimension(needed_unit):
        return
    if {dimension(given_unit), dimension(needed_unit)} == {"temperature", "temperature difference"}:
        return
    with pytest.raises(WrongDimension) as caught:
        convert(1.0, given_unit, needed_unit, "drh")
    assert caught.value.sentence.startswith(
        f"drh is in {read_unit(given_unit).spelling}, a unit of {dimension(given_unit)}: "
        f"a unit of {dimension(needed_unit)} is needed, such as "
    )


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("298.15 K", 298.15),
        ("25 degC", 298.15),
        ("25 °C", 298.15),
        ("25°C", 298.15),
        ("25\u00a0°C", 298.15),
        ("25\u202f℃", 298.15),
        ("77 degF", 298.15),
        ("536.67 degR", 298.15),
        ("−40 °F", 233.15),
        ("-40 °C", 233.15),
        ("1e3 K", 1000.0),
        ("1.5E+02 K", 150.0),
        (".5 K", 0.5),
        ("+20. degC", 293.15),
        ("  20   degC ", 293.15),
    ],
)
def test_temperature_text(text: str, expected: float) -> None:
    """A temperature text in any of the four scales gives kelvin."""
    assert kelvin(text) == pytest.approx(expected, rel=3e-16)


def test_fixed_points_of_the_scales() -> None:
    """Water freezes at 32 degF and 491.67 degR and boils at 212 degF and 671.67 degR."""
    assert convert(32.0, "degF", "degC") == 0.0
    assert convert(212.0, "degF", "degC") == 100.0
    assert convert(100.0, "degC", "degF") == 212.0
    assert convert(491.67, "degR", "K") == pytest.approx(273.15, rel=1e-15)
    assert convert(671.67, "degR", "degF") == pytest.approx(212.0, rel=1e-14)
    assert kelvin(25.0, scale="degC") == 298.15


@pytest.mark.parametrize("scale", ["degC", "degF", "degR"])
@given(kelvins=st.floats(1.0, 5000.0))
def test_scales_are_the_registry_s(scale: str, kelvins: float) -> None:
    """The four temperature scales agree with the registry's own conversion."""
    words = {"degC": "degree_Celsius", "degF": "degree_Fahrenheit", "degR": "degree_Rankine"}[scale]
    registry = units._registry()
    from fractions import Fraction

    ours = convert(kelvins, "K", scale)
    theirs = float(registry.Quantity(Fraction(kelvins), "kelvin").to(words).magnitude)
    assert ours == pytest.approx(theirs, rel=4e-15, abs=4e-12)


@pytest.mark.parametrize(
    ("text", "proposal"),
    [
        ("25,5 degC", "25.5 degC"),
        ("25,5°C", "25.5 degC"),
        ("0,125 K", "0.125 K"),
        ("1,5e3 K", "1.5e3 K"),
        ("-3,25 degF", "-3.25 degF"),
        ("1.234,5 K", "1234.5 K"),
        ("1,234.5 K", "1234.5 K"),
        ("1 234,5 K", "1234.5 K"),
        ("1,234,567 K", "1234567 K"),
        ("1,000 K", "1.000 K or 1000 K, whichever is meant"),
        ("25,5", "25.5 and a unit"),
    ],
)
def test_decimal_comma_is_refused(text: str, proposal: str) -> None:
    """A comma in a number is refused with the text that would do."""
    with pytest.raises(DecimalComma) as caught:
        kelvin(text, "T")
    assert caught.value.sentence == f"T is {text!r}, with a comma in the number: write {proposal}."


@pytest.mark.parametrize(
    ("text", "kind", "sentence"),
    [
        (
            "298.15",
            NotAQuantity,
            ("T is the text '298.15', which has no unit: a text is a number and a unit, such as 25 degC or 1.5 bar."),
        ),
        (
            "",
            NotAQuantity,
            (
                "T is the text '', which does not start with a number: write a number, a space and a "
                "unit, such as 25 degC or 1.5 bar."
            ),
        ),
        (
            "1 000 K",
            NotAQuantity,
            (
                "T is the text '1 000 K', which has more than one number: write digits without "
                "spaces between them, then a unit, such as 25 degC or 1.5 bar."
            ),
        ),
        ("5 1", NotAQuantity, "T is the text '5 1', which has more than one number"),
        ("warm", NotAQuantity, "T is the text 'warm', which does not start with a number"),
        ("nan K", NotAQuantity, "T is the text 'nan K', which does not start with a number"),
        ("1e999 K", QuantityOutsideNumbers, "T is 1e999 K, which is outside the range of numbers."),
        ("1e-999 K", QuantityOutsideNumbers, "T is 1e-999 K, which is outside the range of numbers."),
        (
            "25 C",
            WrongDimension,
            (
                "T is in C, a unit of charge: a unit of temperature is needed, such as K, degC, "
                "degF or degR. For degrees Celsius write degC."
            ),
        ),
        (
            "10 degC difference",
            WrongDimension,
            (
                "T is in degC difference, a unit of temperature difference: a unit "
                "of temperature is needed, such as K, degC, degF or degR. A difference of temperatures is "
                "written as "
                "degC difference."
            ),
        ),
        (
            "-300 degC",
            BelowAbsoluteZero,
            ("T is -300 degC: a temperature above absolute zero (-273.15 degC) is needed."),
        ),
        (
            "-500 degF",
            BelowAbsoluteZero,
            ("T is -500 degF: a temperature above absolute zero (-459.67 degF) is needed."),
        ),
        ("0 K", BelowAbsoluteZero, "T is 0 K: a temperature above absolute zero (0 K) is needed."),
        ("1 psig", NotUnderstood, "T has 'psig', a gauge pressure"),
    ],
)
def test_what_is_no_temperature_is_refused(text: str, kind: type[ThermofuncsError], sentence: str) -> None:
    """A text that is no temperature is refused with its sentence."""
    with pytest.raises(kind) as caught:
        kelvin(text)
    assert caught.value.sentence.startswith(sentence)


@pytest.mark.parametrize("value", [0.0, -1.0, float("nan"), float("inf"), -float("inf")])
def test_bare_numbers_that_are_no_temperature_are_refused(value: float) -> None:
    """Zero, negative and non-finite kelvin are refused."""
    with pytest.raises(ThermofuncsError, match="T is "):
        kelvin(value)


def test_quantity_takes_numbers_in_its_unit_and_texts_in_any() -> None:
    """A number is taken in the unit asked for, a text is converted into it."""
    assert quantity(-40.0, "kJ/mol", "drh") == -40.0
    assert quantity("-10 kcal/mol", "kJ/mol", "drh") == -41.84
    assert quantity("1 atm", "bar", "p") == 1.01325
    assert quantity("1.5E+02 kJ/mol", "J/mol", "drh") == 150000.0
    assert parse_quantity("2 mmol/L", "a") == (2.0, "mmol/L")
    with pytest.raises(WrongDimension) as caught:
        quantity("5 J/(mol K)", "kJ/mol", "drh")
    assert caught.value.sentence == (
        "drh is in J/(mol K), a unit of molar entropy: a unit of molar energy is needed, "
        "such as kJ/mol, kcal/mol or BTU/lbmol."
    )
    with pytest.raises(WrongDimension) as caught:
        quantity("5 eV", "kJ/mol", "ea")
    assert caught.value.sentence.endswith(" For each particle write eV/particle.")


def test_temperature_differences() -> None:
    """A difference of 10 degC is 18 degF, and kelvin stands for a difference as for a temperature."""
    assert convert(10.0, "degC difference", "degF difference") == pytest.approx(18.0, rel=1e-15)
    assert convert(18.0, "degF difference", "K") == pytest.approx(10.0, rel=1e-15)
    with pytest.raises(WrongDimension, match="A difference of temperatures is written as degC difference"):
        convert(10.0, "degC", "K difference")
    with pytest.raises(ShiftedScale) as caught:
        factor("degC", "K", "unit")
    assert caught.value.sentence == (
        "unit: from degC to K the zero moves and no factor converts. "
        "A difference of temperatures is written as degC difference."
    )


def test_conversion_never_leaves_the_numbers() -> None:
    """A conversion that would overflow or vanish is refused."""
    for value, first, second in ((1e308, "kJ", "eV"), (1e-308, "eV", "GJ")):
        with pytest.raises(QuantityOutsideNumbers, match="outside the range of numbers"):
            convert(value, first, second)


@given(st.floats(allow_nan=False, allow_infinity=False), st.sampled_from(SPELLINGS))
def test_a_printed_number_reads_as_itself(number: float, spelling: str) -> None:
    """The shortest text of a number with a unit behind it reads as that number and that unit."""
    if spelling != "1":
        assert parse_quantity(f"{number!r} {spelling}", "x") == (number, spelling)


@given(st.text(max_size=16))
def test_random_text_is_a_quantity_or_refused(text: str) -> None:
    """Any text is refused, or reads as a number and a unit that read the same again."""
    try:
        number, unit = parse_quantity(text, "x")
    except ThermofuncsError:
        return
    assert parse_quantity(f"{number!r} {unit}", "x") == (number, unit)


def test_the_registry_is_loaded_by_the_first_conversion_alone() -> None:
    """Temperatures in any scale, and units that need no conversion, do not load the unit registry."""
    script = (
        "import sys; from thermofuncs.units import kelvin, factor, quantity, dimension;"
        "kelvin(298.15); kelvin('25 degC'); kelvin('77 degF'); factor('kJ/mol', 'kJ mol-1');"
        "quantity('3 kJ/mol', 'kJ/mol', 'x'); dimension('BTU/lbmol'); assert 'pint' not in sys.modules;"
        "factor('kcal/mol', 'kJ/mol'); assert 'pint' in sys.modules"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
