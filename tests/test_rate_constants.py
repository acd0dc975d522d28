"""Rate constants from the Arrhenius equation."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.errors import NotAboveZero, OutsideNumbers
from thermofuncs.rate_constants import rate_constant, rate_constant_carried
from thermofuncs.units import R
from thermofuncs.working import Record


def test_dinitrogen_pentoxide() -> None:
    """Arrhenius parameters of the decay of N2O5 give its rate constants over a factor of 6000."""
    # Daniels & Johnston, J. Am. Chem. Soc. 43 (1921) 53, as textbooks print it (figures from memory):
    # k/1e-5 s-1 = 0.0787 at 273 K, 3.46 at 298 K, 13.5 at 308 K, 49.8 at 318 K, 150 at 328 K, 487 at 338 K;
    # Ea = 103.2 kJ/mol and A = 4.3e13 1/s, a line through them, describe them within their scatter, 15 %
    measured = {
        273.0: 0.0787e-5,
        298.0: 3.46e-5,
        308.0: 13.5e-5,
        318.0: 49.8e-5,
        328.0: 150e-5,
        338.0: 487e-5,
    }
    for temperature, k in measured.items():
        assert rate_constant(4.3e13, 103.2, temperature) == pytest.approx(k, rel=0.15)
    for temperature, k in measured.items():
        assert rate_constant_carried(3.46e-5, 298.0, temperature, 103.2) == pytest.approx(k, rel=0.15)


@given(st.floats(1e-5, 1e15), st.floats(-50, 300), st.floats(250, 2000), st.floats(250, 2000))
def test_carrying_is_the_arrhenius_equation_twice(a: float, ea: float, t1: float, t2: float) -> None:
    """The rate constant at t1 carried to t2 is the rate constant at t2, and back it is itself."""
    first, second = rate_constant(a, ea, t1), rate_constant(a, ea, t2)
    carried = rate_constant_carried(first, t1, t2, ea)
    assert carried == pytest.approx(second, rel=1e-12)
    assert rate_constant_carried(carried, t2, t1, ea) == pytest.approx(first, rel=1e-12)


@given(st.floats(-3, 3), st.floats(250, 2000))
def test_exponent_multiplies_by_a_power_of_the_temperature(n: float, temperature: float) -> None:
    """A temperature exponent n multiplies the rate constant by Tⁿ with T in kelvin."""
    plain = rate_constant(1e10, 80.0, temperature)
    assert rate_constant(1e10, 80.0, temperature, n) == pytest.approx(plain * temperature**n, rel=1e-12)


def test_last_step_is_the_result_bit_for_bit() -> None:
    """The value of the last step is the result, and recording does not change it."""
    record = Record()
    assert rate_constant(2e12, 75.0, 600.0, 0.5, record=record) == record.steps[-1].value
    assert record.steps[-1].value == rate_constant(2e12, 75.0, 600.0, 0.5)
    record = Record()
    assert rate_constant_carried(0.3, 300.0, 420.0, 75.0, record) == record.steps[-1].value
    assert record.cautions == [
        ("Ea is held constant over 120 K; it holds where the mechanism is the same and was measured over that range.")
    ]


def test_activation_energy_in_joules_is_seen() -> None:
    """An activation energy typed in joules vanishes, and the sentence has the logarithm and the remedy."""
    with pytest.raises(OutsideNumbers) as caught:
        rate_constant(1e13, 75000.0, 300.0)
    logarithm = math.log(1e13) - 75e6 / (R * 300.0)
    assert caught.value.sentence == (
        f"The rate constant is outside the range of numbers, with a natural logarithm of {logarithm:.6g}. "
        "Check that ea is in kJ/mol and T in kelvin."
    )
    record = Record()
    rate_constant(1e13, 1500.0, 3000.0, record=record)
    assert record.cautions == ["ea is 1500 kJ/mol, which is unusually large: is the number in J/mol?"]


def test_overflow_is_refused_and_a_large_step_within_the_numbers_is_not() -> None:
    """A result beyond the double range is refused; a factor beyond it with a result inside is computed."""
    with pytest.raises(OutsideNumbers, match="outside the range of numbers"):
        rate_constant_carried(1.0, 10.0, 1000.0, 100.0)
    ratio = 100e3 / R * (1 / 10.0 - 1 / 1000.0)
    assert ratio > 709.8
    assert rate_constant_carried(1e-300, 10.0, 1000.0, 100.0) == pytest.approx(
        math.exp(ratio + math.log(1e-300)), rel=1e-12
    )


def test_only_positive_rate_constants() -> None:
    """A pre-exponential factor or a rate constant that is not positive is refused."""
    with pytest.raises(NotAboveZero) as caught:
        rate_constant(0.0, 50.0, 300.0)
    assert caught.value.sentence == "a is 0: a pre-exponential factor above 0 is needed."
    with pytest.raises(NotAboveZero) as caught:
        rate_constant_carried(-1.0, 300.0, 310.0, 50.0)
    assert caught.value.sentence == "k_one is -1: a rate constant above 0 is needed."
