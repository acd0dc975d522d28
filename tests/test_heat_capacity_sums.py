"""Heat capacities typed as sums of powers."""

from __future__ import annotations

import csv
import math
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad

from thermofuncs.errors import BlankInRange, DifferentLengths, OutsideNumbers, TextInRange
from thermofuncs.heat_capacity_sums import heat_capacity_integral, heat_capacity_sum
from thermofuncs.working import Record

REFERENCE = Path(__file__).parent / "reference" / "heat_capacity_integrals.csv"
LINES = [line for line in REFERENCE.read_text(encoding="utf-8").splitlines() if not line.startswith("#")]
ROWS = list(csv.DictReader(LINES))
SHOMATE = [0.0, 1.0, 2.0, 3.0, -2.0]


@pytest.mark.parametrize("row", ROWS, ids=lambda row: row["substance"])
def test_published_constants_give_the_published_table(row: dict[str, str]) -> None:
    """Shomate constants give heat capacity, enthalpy and entropy differences of the NIST-JANAF tables."""
    in_thousands = [float(text) for text in row["constants"].split()]
    constants = [c * 1000.0**-n for n, c in zip(SHOMATE, in_thousands, strict=True)]
    t1, t2 = float(row["t1"]), float(row["t2"])
    # the bounds are the distance of the published fits from the published tables
    assert heat_capacity_sum(SHOMATE, constants, t2) == pytest.approx(float(row["cp"]), abs=0.05)
    enthalpy = heat_capacity_integral(SHOMATE, constants, t1, t2) / 1000.0
    assert enthalpy == pytest.approx(float(row["dh"]), abs=0.03)
    entropy = heat_capacity_integral(SHOMATE, constants, t1, t2, over_t=True)
    assert entropy == pytest.approx(float(row["ds"]), abs=0.05)


POWERS = st.lists(
    st.tuples(st.sampled_from([-3.0, -2.0, -1.0, -0.5, 0.0, 0.5, 1.0, 2.0, 3.0]), st.floats(0.1, 10.0)),
    min_size=1, max_size=6,
)  # fmt: skip


@given(POWERS, st.floats(250, 1500), st.floats(250, 1500), st.booleans())
def test_integral_is_the_quadrature(powers: list[tuple[float, float]], t1: float, t2: float, over: bool) -> None:
    """The closed integral agrees with numerical quadrature of the sum, over T where asked."""
    exponents = [n for n, _ in powers]
    constants = [c * 500.0**-n for n, c in powers]

    def integrand(t: float) -> float:
        return heat_capacity_sum(exponents, constants, t) / (t if over else 1.0)

    expected = quad(integrand, t1, t2, epsabs=0, epsrel=1e-11)[0] if t1 != t2 else 0.0
    assert heat_capacity_integral(exponents, constants, t1, t2, over_t=over) == pytest.approx(expected, rel=1e-9)


@given(POWERS, st.floats(250, 1500), st.floats(250, 1500), st.floats(250, 1500))
def test_integrals_join(powers: list[tuple[float, float]], t1: float, t2: float, t3: float) -> None:
    """The integral over two joined spans is the sum of the two, and backwards it is the negative."""
    exponents, constants = [n for n, _ in powers], [c * 500.0**-n for n, c in powers]
    whole = heat_capacity_integral(exponents, constants, t1, t3)
    parts = [heat_capacity_integral(exponents, constants, a, b) for a, b in ((t1, t2), (t2, t3))]
    size = max(abs(part) for part in (*parts, 1.0))
    assert sum(parts) == pytest.approx(whole, abs=1e-12 * size)
    assert heat_capacity_integral(exponents, constants, t3, t1) == pytest.approx(-whole, rel=1e-12)


def test_exponent_near_the_logarithm_is_smooth() -> None:
    """An exponent within 1e-12 of the logarithmic case gives the logarithm."""
    exact = heat_capacity_integral([-1.0], [1.0], 300.0, 900.0)
    assert exact == pytest.approx(math.log(3.0), rel=1e-15)
    near = heat_capacity_integral([-1.0 + 1e-12], [1.0], 300.0, 900.0)
    assert near == pytest.approx(exact, rel=1e-11)


def test_ranges_that_do_not_fit_are_refused() -> None:
    """Ranges of different length, blanks and texts are refused with their place."""
    with pytest.raises(DifferentLengths) as caught:
        heat_capacity_sum([0, 1], [30.0], 300.0)
    assert caught.value.sentence == (
        "exponents has 2 cells and constants has 1: ranges of equal length are needed, one value for each."
    )
    with pytest.raises(BlankInRange, match="constants has a blank cell, number 2 in row order"):
        heat_capacity_integral([0, 1], [30.0, None], 300.0, 400.0)
    with pytest.raises(TextInRange, match="exponents has 'T' as cell number 1"):
        heat_capacity_sum(["T"], [30.0], 300.0)


def test_overflow_is_refused() -> None:
    """A sum or an integral beyond the double range is an error, never infinite."""
    with pytest.raises(OutsideNumbers) as caught:
        heat_capacity_sum([200], [1.0], 1000.0)
    assert caught.value.sentence == (
        "Σ c Tⁿ is outside the range of numbers. Check the units and the sizes of the arguments."
    )
    with pytest.raises(OutsideNumbers):
        heat_capacity_integral([200], [1.0], 300.0, 1000.0)
    with pytest.raises(OutsideNumbers):
        heat_capacity_integral([-400], [1.0], 1000.0, 0.001)
    # limits so far apart that their ratio is outside the range of numbers
    spread = heat_capacity_integral([-1], [1.0], 300.0, 5e-324)
    assert spread == pytest.approx(math.log(5e-324) - math.log(300.0), rel=1e-15)


def test_last_step_is_the_result_bit_for_bit() -> None:
    """The last recorded step is the result, and the caution names the span."""
    record = Record()
    assert heat_capacity_sum([0, 1], [30.0, 1e-3], 700.0, record) == record.steps[-1].value
    assert record.cautions[0].startswith("The range of the constants is not known here: check that their source")
    for over_t in (False, True):
        record = Record()
        value = heat_capacity_integral([0, 1], [30.0, 1e-3], 300.0, 700.0, over_t=over_t, record=record)
        assert value == record.steps[-1].value
        assert "covers 300 K and 700 K" in record.cautions[0]
