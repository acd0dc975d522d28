"""Statistics, diagnostics and predictions against a reference implementation and by hand."""

from __future__ import annotations

import itertools
import math

import numpy as np
import pytest
import statsmodels.api as sm
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from thermofuncs.errors import NoFittedTemperature
from thermofuncs.fits import (
    Settings,
    aicc,
    cautions,
    chi_square,
    curvature,
    diagnose,
    fit,
    lack_of_fit,
    predict,
    r_squared,
    runs,
    temperature_of,
)
from thermofuncs.fits.distributions import as_few_runs, chi_square_above, f_above, limit_factor, two_sided
from thermofuncs.fits.laws import basis

T = [283.15, 288.15, 293.15, 298.15, 303.15, 308.15, 313.15, 318.15]
K = [0.552, 0.678, 0.835, 1.004, 1.221, 1.452, 1.731, 2.06]
U = [0.02, 0.01, 0.03, 0.02, 0.02, 0.04, 0.03, 0.05]


def test_distributions_against_the_statistics_package() -> None:
    """Quantiles and probabilities are those of the statistics package."""
    for degrees in (1, 2, 7, 40):
        assert limit_factor(0.95, degrees) == pytest.approx(stats.t.ppf(0.975, degrees), rel=1e-11)
        assert two_sided(-2.3, degrees) == pytest.approx(2.0 * stats.t.sf(2.3, degrees), rel=1e-11)
        assert chi_square_above(9.1, degrees) == pytest.approx(stats.chi2.sf(9.1, degrees), rel=1e-11)
        assert f_above(2.2, 3, degrees) == pytest.approx(stats.f.sf(2.2, 3, degrees), rel=1e-11)
    assert limit_factor(0.9, None) == pytest.approx(stats.norm.ppf(0.95), rel=1e-13)
    assert two_sided(1.7, None) == pytest.approx(2.0 * stats.norm.sf(1.7), rel=1e-13)


@given(st.integers(1, 5), st.integers(1, 5))
@settings(max_examples=25, deadline=None)
def test_runs_of_signs_by_counting(positive: int, negative: int) -> None:
    """The probability of few runs is the share of orders that have them, counted one by one."""
    n = positive + negative
    counts = []
    for chosen in itertools.combinations(range(n), positive):
        signs = [i in chosen for i in range(n)]
        counts.append(1 + sum(a != b for a, b in itertools.pairwise(signs)))
    for r in range(2, n + 1):
        expected = sum(count <= r for count in counts) / len(counts)
        assert as_few_runs(r, positive, negative) == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize("law", ["van't Hoff", "Clarke-Glew"])
@pytest.mark.parametrize("u", [None, U])
def test_diagnostics_agree_with_the_reference_implementation(law: str, u: list[float] | None) -> None:
    """R², leverage, standardised residuals, Cook's distances and prediction limits agree."""
    found = fit(law, T, K, "ln K" if u is None else None, u)
    y = np.array(K) if u is None else np.log(K)
    count = found.law.count
    design = np.array([basis(count, t, 300.0) for t in T])
    weights = np.ones(8) if u is None else (np.array(K) / np.array(u)) ** 2
    reference = sm.WLS(y, design, weights=weights).fit()
    assert r_squared(found) == pytest.approx(reference.rsquared, rel=1e-9)
    points = diagnose(found)
    # the reference's influence is of the whitened rows
    white = sm.OLS(y * np.sqrt(weights), design * np.sqrt(weights)[:, None]).fit().get_influence()
    assert [d.leverage for d in points] == pytest.approx(white.hat_matrix_diag.tolist(), rel=1e-8)
    assert [d.standardised for d in points] == pytest.approx(white.resid_studentized_internal.tolist(), rel=1e-7)
    assert [d.cook for d in points] == pytest.approx(white.cooks_distance[0].tolist(), rel=1e-6)
    assert math.fsum(d.leverage for d in points) == pytest.approx(count, rel=1e-10)
    if u is None:
        row = np.array([basis(count, 330.0, 300.0)])
        expected = reference.get_prediction(row)
        new = predict(found, 330.0)
        assert new.log == pytest.approx(float(expected.predicted_mean[0]), rel=1e-9)
        for half, limits in ((new.confidence, expected.conf_int()), (new.prediction, expected.conf_int(obs=True))):
            assert half == pytest.approx(float(limits[0, 1] - limits[0, 0]) / 2.0, rel=1e-8)


def test_curvature_is_the_t_test_of_the_added_column() -> None:
    """For a straight line the test is that of ΔCp added, for Clarke-Glew that of ΔCp itself: the same."""
    design = np.array([basis(3, t, 300.0) for t in T])
    reference = sm.OLS(np.log(K), design).fit()
    for law in ("van't Hoff", "Clarke-Glew"):
        tested = curvature(fit(law, T, K))
        assert tested is not None
        assert tested.statistic == pytest.approx(reference.tvalues[2], rel=1e-8)
        assert tested.probability == pytest.approx(reference.pvalues[2], rel=1e-8)


def test_chi_square_with_its_probability() -> None:
    """Chi-square is Σ(r/u)², stated uncertainties too small are a caution."""
    found = fit("van't Hoff", T, K, None, [0.001 * k for k in K], Settings(known=True))
    tested = chi_square(found)
    assert tested is not None
    by_hand = sum((r / 0.001) ** 2 for r in found.solution.residuals)
    assert tested.statistic == pytest.approx(by_hand, rel=1e-9)
    assert tested.probability == pytest.approx(stats.chi2.sf(by_hand, 6), rel=1e-9)
    assert any(c.startswith("The stated uncertainties are smaller than the scatter") for c in cautions(found))
    assert chi_square(fit("van't Hoff", T, K)) is None


def test_lack_of_fit_by_hand() -> None:
    """Lack of fit is the F test of the means of replicates around the line against their scatter."""
    t = [280.0, 280.0, 300.0, 300.0, 320.0, 320.0, 340.0, 340.0]
    y = [0.0, 0.02, 1.0, 1.03, 1.7, 1.72, 2.0, 2.05]
    found = fit("van't Hoff", t, y, "ln K")
    tested = lack_of_fit(found)
    assert tested is not None
    pure = sum((a - b) ** 2 / 2.0 for a, b in zip(y[::2], y[1::2], strict=True))
    expected = (found.solution.squares - pure) / 2.0 / (pure / 4.0)
    assert tested.statistic == pytest.approx(expected, rel=1e-9)
    assert tested.probability == pytest.approx(stats.f.sf(expected, 2, 4), rel=1e-9)
    assert any(c.startswith("Lack of fit: ") for c in cautions(found))
    assert lack_of_fit(fit("van't Hoff", T, K)) is None


def test_aicc_by_hand() -> None:
    """AICc counts the variance as a parameter, and chi-square takes its place where u is known."""
    found = fit("van't Hoff", T, K)
    squares = found.solution.squares
    assert aicc(found) == pytest.approx(8.0 * math.log(squares / 8.0) + 6.0 + 2.0 * 3.0 * 4.0 / 4.0, rel=1e-12)
    known = fit("van't Hoff", T, K, None, U, Settings(known=True))
    assert aicc(known) == pytest.approx(known.solution.squares + 4.0 + 2.0 * 2.0 * 3.0 / 5.0, rel=1e-12)


def test_runs_of_a_curved_series() -> None:
    """A curved series fitted by a line has three runs, and the caution says so."""
    y = [0.001 * (t - 310.0) ** 2 for t in range(280, 341, 4)]
    found = fit("van't Hoff", [float(t) for t in range(280, 341, 4)], y, "ln K")
    tested = runs(found)
    assert tested is not None
    assert tested.statistic == 3.0
    assert any("change sign only 2 times" in c for c in cautions(found))
    assert any(c.startswith("A straight line was asked for, but the points are curved") for c in cautions(found))


def test_cautions_of_points() -> None:
    """Too few, too narrow, and one that carries the fit, each is a sentence."""
    assert cautions(fit("van't Hoff", T, K)) == []
    few = cautions(fit("van't Hoff", [300.0, 302.0, 304.0], [1.0, 1.1, 1.19]))
    assert few[0].startswith("Too few points: 3 for 2 parameters leave 1 degree of freedom")
    assert few[1].startswith("Narrow range: 1/T spans 1.3 % from 300 to 304 K")
    lever = cautions(fit("van't Hoff", [300.0, 301.0, 302.0, 303.0, 400.0], [1.0, 1.1, 1.05, 1.2, 9.0]))
    assert any(c.startswith("One point carries the fit: row 5 at 400 K has leverage 0.99") for c in lever)
    down = cautions(fit("van't Hoff", T, [*K[:5], 3.0, *K[6:]], settings=Settings(robust=True)))
    assert any(c == "The robust estimator gave less than half of its weight to row 6." for c in down)
    blank = cautions(fit("van't Hoff", [*T, 320.0], [*K, None]))
    assert "1 row was left out for a blank cell." in blank
    far = cautions(fit("van't Hoff", T, K, settings=Settings(reference=400.0)))
    assert any(c.startswith("The reference temperature: 400 K is 81.85 K above the points") for c in far)


def test_the_temperature_of_a_value_is_the_inverse_of_a_prediction() -> None:
    """The temperature of a predicted value is that of the prediction; its limits stand on the confidence band."""
    found = fit("van't Hoff", T, K)
    for t in (250.0, 300.0, 360.0):
        back = temperature_of(found, predict(found, t).log, "x")
        assert back.temperature == pytest.approx(t, rel=1e-11)
        assert back.low is not None
        assert back.high is not None
        assert back.low < t < back.high
        for limit in (back.low, back.high):
            at = predict(found, limit)
            assert abs(at.log - predict(found, t).log) == pytest.approx(at.confidence, rel=1e-7)


def test_a_value_that_the_fit_does_not_have_is_refused() -> None:
    """A value beyond the search is refused with the range; two roots give the nearer and name the other."""
    found = fit("van't Hoff", T, K)
    with pytest.raises(NoFittedTemperature) as caught:
        temperature_of(found, 1e3, "1e3")
    assert caught.value.sentence.startswith("y_value = 1e3 is not reached by the fit anywhere from 56.63 to 1590.75 K")
    t = [float(x) for x in range(280, 341, 6)]
    y = [0.001 * (x - 300.0) ** 2 for x in t]
    bent = temperature_of(fit("Clarke-Glew", t, y, "ln K"), 0.1, "0.1")
    assert len(bent.others) == 1
    assert abs(1.0 / bent.temperature - 1.0 / 308.0) < abs(1.0 / bent.others[0] - 1.0 / 308.0)
