"""The linear core against certified datasets and a reference implementation (statsmodels)."""

from __future__ import annotations

import math
import re
from pathlib import Path

import numpy as np
import pytest
import statsmodels.api as sm
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.typing import NDArray

from thermofuncs.fits.linear import linear_least_squares
from thermofuncs.fits.straight import straight_line

Array = NDArray[np.float64]
STRD = Path(__file__).parent.parent / "reference" / "strd"
# the correct digits that a column-scaled decomposition reaches in double precision
DIGITS = {
    "Norris": 12, "NoInt1": 12, "NoInt2": 12, "Wampler2": 12, "Pontius": 10, "Longley": 10, "Wampler1": 9,
    "Wampler3": 9, "Wampler4": 7, "Wampler5": 5,
}  # fmt: skip
ZERO = 1e-9  # bound where the certified value is 0


def section(text: str, name: str) -> list[str]:
    """The lines of a file that its head gives for a section."""
    found = re.search(rf"{name}\s+\(lines\s+(\d+)\s+to\s+(\d+)\)", text)
    assert found is not None
    return text.splitlines()[int(found[1]) - 1 : int(found[2])]


def dataset(name: str) -> tuple[Array, Array, list[float], list[float], float]:
    """Columns without the ones, y, certified estimates, their standard deviations, the residual one."""
    text = (STRD / f"{name}.dat").read_text(encoding="latin-1")
    data = np.array([[float(cell) for cell in line.split()] for line in section(text, "Data")])
    certified = section(text, "Certified Values")
    pairs = [line.split()[1:] for line in certified if re.match(r"\s*B\d", line)]
    residual = next(line.split()[-1] for line in certified if re.match(r"\s*Standard Deviation +\S", line))
    x = data[:, 1]
    columns = data[:, 1:]
    if name.startswith("Wampler"):
        columns = np.column_stack([x**k for k in range(1, 6)])
    if name == "Pontius":
        columns = np.column_stack([x, x**2])
    return columns, data[:, 0], [float(a) for a, _ in pairs], [float(b) for _, b in pairs], float(residual)


def correct_digits(value: float, certified: float) -> float:
    """How many digits agree; where 0 is certified, 15 within the bound and none outside."""
    if certified == 0.0:
        return 15.0 if abs(value) <= ZERO else 0.0
    return -math.log10(max(abs(value - certified) / abs(certified), 1e-15))


@pytest.mark.parametrize("name", DIGITS)
def test_the_certified_residual(name: str) -> None:
    """The certified estimates leave the certified residual standard deviation on the file's points."""
    columns, y, estimates, _, residual = dataset(name)
    design = columns if name.startswith("NoInt") else np.column_stack([np.ones(len(y)), columns])
    squares = math.fsum(((y - design @ np.array(estimates)) ** 2).tolist())
    # the largest term of a polynomial of 3e6 rounds at 1e-9, and the file prints 15 digits
    deviation = math.sqrt(squares / (len(y) - len(estimates)))
    assert deviation == pytest.approx(residual, rel=1e-9, abs=1e-8)


@pytest.mark.parametrize("name", DIGITS)
def test_certified_linear_sets(name: str) -> None:
    """Each linear set is met to its digits in the estimates, with two digits less in their deviations."""
    columns, y, estimates, deviations, residual = dataset(name)
    found = linear_least_squares(columns, y, intercept=not name.startswith("NoInt"))
    digits = [correct_digits(a, b) for a, b in zip(found.coefficients.tolist(), estimates, strict=True)]
    assert min(digits) >= DIGITS[name]
    pairs = zip(found.standard_deviations.tolist(), deviations, strict=True)
    assert min(correct_digits(a, b) for a, b in pairs) >= DIGITS[name] - 2
    assert correct_digits(found.residual_deviation, residual) >= DIGITS[name] - 2


def test_the_straight_line_meets_the_certified_one() -> None:
    """The closed form meets the set Norris to 12 digits in height, slope and their deviations."""
    columns, y, estimates, deviations, residual = dataset("Norris")
    line = straight_line(columns[:, 0].tolist(), y.tolist())
    s = math.sqrt(line.squares / (len(y) - 2))
    height = line.height + line.slope * line.centre
    assert correct_digits(height, estimates[0]) >= 12
    assert correct_digits(-line.slope, estimates[1]) >= 12
    assert correct_digits(s, residual) >= 12
    assert correct_digits(s / math.sqrt(line.spread), deviations[1]) >= 12
    at_zero = s * math.sqrt(1.0 / line.sum_of_weights + line.centre**2 / line.spread)
    assert correct_digits(at_zero, deviations[0]) >= 12


@st.composite
def problems(draw: st.DrawFn) -> tuple[Array, Array, Array | None]:
    """A well-posed problem: columns of different sizes, noise, and weights or none."""
    seed = draw(st.integers(0, 2**32 - 1))
    n, q = draw(st.integers(6, 40)), draw(st.integers(1, 4))
    weighted = draw(st.booleans())
    random = np.random.default_rng(seed)
    scale = 10.0 ** random.uniform(-3.0, 3.0, q)
    shift = random.uniform(-3.0, 3.0, q)
    columns = (random.standard_normal((n, q)) + shift) * scale
    y = columns @ (random.uniform(0.5, 2.0, q) / scale) + random.uniform(-5.0, 5.0) + 0.1 * random.standard_normal(n)
    return columns, y, random.uniform(0.05, 20.0, n) if weighted else None


@given(problems())
@settings(max_examples=1000, deadline=None)
def test_agrees_with_the_reference_implementation(problem: tuple[Array, Array, Array | None]) -> None:
    """Estimates, deviations, limits and covariances agree with the reference implementation to 1e-9."""
    columns, y, weights = problem
    if len(y) <= columns.shape[1] + 2:
        return
    found = linear_least_squares(columns, y, weights)
    design = sm.add_constant(columns, has_constant="add")
    reference = (sm.OLS(y, design) if weights is None else sm.WLS(y, design, weights=weights)).fit()
    # the unit is the uncertainty itself: an estimate near zero has no digits of its own
    unit = reference.bse + np.abs(reference.params)
    assert np.max(np.abs(found.coefficients - reference.params) / unit) < 1e-9
    assert found.standard_deviations == pytest.approx(reference.bse, rel=1e-9)
    covariance = found.residual_deviation**2 * found.covariance
    outer = np.sqrt(np.outer(np.diag(covariance), np.diag(covariance)))
    assert np.max(np.abs(covariance - reference.cov_params()) / outer) < 1e-9
    # limits, as the house forms them
    from thermofuncs.fits.distributions import limit_factor

    half = limit_factor(0.95, found.degrees) * found.standard_deviations
    limits = np.column_stack([found.coefficients - half, found.coefficients + half])
    assert np.max(np.abs(limits - reference.conf_int()) / unit[:, None]) < 1e-9


def test_columns_that_depend_on_each_other_are_seen() -> None:
    """A column that is a multiple of another leaves no solution, and says so."""
    x = np.arange(6.0)
    found = linear_least_squares(np.column_stack([x, 2.0 * x]), x)
    assert not found.full_rank
    assert np.isnan(found.coefficients).all()
