"""Conversions of K between bases, of values between units, and constants."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.conversions import BASES, constant_in, in_unit, k_on_basis
from thermofuncs.errors import (
    BelowAbsoluteZero,
    GaugePressure,
    NoSuchConstant,
    NotAboveZero,
    OutsideNumbers,
    RequiredHere,
    UnknownBasis,
    UnknownUnit,
    WrongDimension,
)
from thermofuncs.working import Record

HALVES = st.integers(-6, 6).map(lambda n: n / 2)


def test_molar_volume_of_the_ideal_gas() -> None:
    """With one mole of gas formed, K in mol/L is K in bar or atm over the molar volume of CODATA."""
    # CODATA 2018 and 2022: 22.710 954 64... L/mol at 100 kPa and 22.413 969 54... at 101.325 kPa, 273.15 K,
    # printed without rounding, so the last digit is met to one unit
    for basis, volume in (("p in bar", 22.71095464), ("p in atm", 22.41396954)):
        converted = k_on_basis(1.0, basis, "concentration in mol/L", 1.0, 273.15)
        assert 1 / converted == pytest.approx(volume, abs=1e-8)


def test_ammonia_synthesis_by_hand() -> None:
    """K of N2 + 3 H2 = 2 NH3 goes from bar to the other bases as by hand."""
    # by hand, Δν = −2: (1.01325)² per atm², (0.08314462618 L bar/(mol K) × 700 K)², p² at 200 bar,
    # 1e-10 in Pa
    k = 8.7e-5
    assert k_on_basis(k, "standard", "p in bar", -2, 700.0) == k
    assert k_on_basis(k, "standard", "p in atm", -2, 700.0) == pytest.approx(k * 1.01325**2, rel=1e-14)
    in_liters = k_on_basis(k, "p in bar", "concentration in mol/L", -2, 700.0)
    assert in_liters == pytest.approx(k * (0.08314462618 * 700.0) ** 2, rel=1e-9)
    fraction = k_on_basis(k, "standard", "mole fraction at p", -2, 700.0, pressure=200.0)
    assert fraction == pytest.approx(k * 200.0**2, rel=1e-14)
    assert k_on_basis(k, "standard", "p in Pa", -2, 700.0) == pytest.approx(k * 1e-10, rel=1e-14)
    assert k_on_basis(k, "p in kPa", "p in Pa", -2, 700.0) == pytest.approx(k * 1e-6, rel=1e-14)
    in_cubic_meters = k_on_basis(k, "standard", "concentration in mol/m3", -2, 700.0)
    assert in_cubic_meters == pytest.approx(in_liters * 1e-6, rel=1e-14)


def test_one_atmosphere_shifts_lg_k_by_the_published_amount() -> None:
    """A standard pressure of 1 atm shifts log10 K by 0.00572 for each mole of gas."""
    assert math.log10(k_on_basis(1.0, "p in atm", "standard", 1.0, 500.0)) == pytest.approx(0.00572, abs=5e-6)


@given(st.floats(1e-30, 1e30), st.sampled_from(BASES), st.sampled_from(BASES), HALVES, st.floats(200, 3000))
def test_there_and_back_is_the_identity(k: float, first: str, second: str, dn: float, t: float) -> None:
    """K on another basis and back is K, and the reverse reaction has the reciprocal on every basis."""
    there = k_on_basis(k, first, second, dn, t, pressure=17.0)
    assert k_on_basis(there, second, first, dn, t, pressure=17.0) == pytest.approx(k, rel=1e-12)
    assert k_on_basis(1 / k, first, second, -dn, t, pressure=17.0) == pytest.approx(1 / there, rel=1e-12)


@given(st.floats(1e-30, 1e30), st.sampled_from(BASES), st.sampled_from(BASES), st.floats(200, 3000))
def test_without_a_change_in_gas_k_has_no_basis(k: float, first: str, second: str, t: float) -> None:
    """With Δν = 0 every basis has the same K, exactly."""
    assert k_on_basis(k, first, second, 0.0, t, pressure=3.0) == k


def test_bases_are_a_closed_list() -> None:
    """A basis outside the list is refused with the list, and case and spaces do not matter."""
    with pytest.raises(UnknownBasis) as caught:
        k_on_basis(1.0, "standard", "p in psi", 1.0, 300.0)
    assert caught.value.sentence == (
        "into_basis is 'p in psi': the bases are standard; p in bar; p in atm; p in Pa; p in kPa; "
        "concentration in mol/L; concentration in mol/m3; mole fraction at p."
    )
    assert k_on_basis(2.0, " Standard", "P in  bar", 1.0, 300.0) == 2.0


def test_mole_fraction_needs_the_pressure_and_the_others_do_not() -> None:
    """The pressure is required for the mole fraction, and a caution says where it has no effect."""
    with pytest.raises(RequiredHere) as caught:
        k_on_basis(1.0, "standard", "mole fraction at p", 1.0, 300.0)
    assert caught.value.sentence == "p is missing: the basis mole fraction at p needs the total pressure."
    record = Record()
    k_on_basis(1.0, "standard", "p in atm", 1.0, 300.0, pressure=5.0, record=record)
    assert record.cautions == ["p has no effect: neither basis is the mole fraction."]
    record = Record()
    k_on_basis(1.0, "standard", "concentration in mol/L", 1.0, 300.0, record=record)
    assert record.cautions == ["The gases are taken as ideal in the conversion of K."]


def test_what_k_cannot_be_is_refused() -> None:
    """K and the pressure are positive, and a K beyond the double range is refused with its logarithm."""
    with pytest.raises(NotAboveZero) as caught:
        k_on_basis(0.0, "standard", "p in atm", 1.0, 300.0)
    assert caught.value.sentence == "k_value is 0: an equilibrium constant above 0 is needed."
    with pytest.raises(NotAboveZero) as caught:
        k_on_basis(1.0, "standard", "mole fraction at p", 1.0, 300.0, pressure=-1.0)
    assert caught.value.sentence == "p is -1 bar: a pressure above 0 is needed."
    with pytest.raises(OutsideNumbers) as outside:
        k_on_basis(1e300, "standard", "p in Pa", 3.0, 300.0)
    assert outside.value.sentence == (
        "K on the basis p in Pa is outside the range of numbers, with a natural logarithm of 725.314. "
        "Keep the logarithm of K instead."
    )


def test_temperatures_beyond_reason_are_refused() -> None:
    """A temperature at which a concentration has no number is an error with its sentence."""
    for temperature in (1e308, 1e-320):
        with pytest.raises(OutsideNumbers, match="K on the basis concentration in mol/L is outside the range"):
            k_on_basis(1.0, "standard", "concentration in mol/L", 1.0, temperature)


def test_last_step_is_the_result_bit_for_bit() -> None:
    """The last recorded step of every conversion is its result."""
    record = Record()
    assert k_on_basis(3.1, "standard", "p in atm", 1.5, 300.0, record=record) == record.steps[-1].value
    for value, first, second in ((12.3, "kcal/mol", "kJ/mol"), (77.0, "degF", "degC"), (5.0, "bar", "bar")):
        record = Record()
        assert in_unit(value, first, second, record) == record.steps[-1].value
    for name, unit in (("R", None), ("R", "cal/(mol K)"), ("Eh", "eV")):
        record = Record()
        assert constant_in(name, unit, record) == record.steps[-1].value


def test_in_unit_says_which_calorie_and_which_btu() -> None:
    """A conversion with calories or BTU says which ones they are, and one without says nothing."""
    record = Record()
    assert in_unit(1.0, "kcal/mol", "BTU/lbmol", record) == pytest.approx(4184 / 2.326, rel=1e-15)
    assert record.steps[-1].source == (
        "cal is the thermochemical calorie, 4.184 J; BTU is the international one, 1055.05585262 J"
    )
    record = Record()
    in_unit(1.0, "kJ/mol", "J/mol", record)
    assert record.steps[-1].source == ""


def test_in_unit_refuses_what_does_not_fit() -> None:
    """Units that do not fit, gauge pressures and unknown units are refused with the argument's name."""
    with pytest.raises(WrongDimension) as caught:
        in_unit(1.0, "kJ/mol", "bar")
    assert caught.value.sentence == (
        "value is in kJ/mol, a unit of molar energy: a unit of pressure is needed, such as bar, atm, Pa or psi."
    )
    with pytest.raises(GaugePressure, match="from_unit has 'psig', a gauge pressure"):
        in_unit(1.0, "psig", "bar")
    with pytest.raises(UnknownUnit, match="into_unit has the unit 'bars', which is not known"):
        in_unit(1.0, "psi", "bars")
    with pytest.raises(BelowAbsoluteZero, match="value is -280 degC"):
        in_unit(-280.0, "degC", "K")


def test_constants_in_other_units() -> None:
    """The gas constant in calories, liter atmospheres, liter bars and BTU is the known one."""
    # common practice: figures that follow from R and the definitions of the units
    assert constant_in("R", "cal/(mol K)") == pytest.approx(1.987204, abs=5e-7)
    assert constant_in("R", "L atm/(mol K)") == pytest.approx(0.08205737, abs=5e-9)
    assert constant_in("R", "L bar/(mol K)") == pytest.approx(0.08314463, abs=5e-9)
    assert constant_in("R", "BTU/(lbmol degR)") == pytest.approx(1.985875, abs=5e-7)
    assert constant_in("F") == pytest.approx(96485.33212, abs=5e-6)
    with pytest.raises(NoSuchConstant):
        constant_in("gamma")
    with pytest.raises(WrongDimension, match="a unit of molar entropy"):
        constant_in("R", "kJ/mol")
