"""Fits of laws: measured series, invariances, estimators, coverage of the limits."""

from __future__ import annotations

import csv
import math
from pathlib import Path

import numpy as np
import pytest
import statsmodels.api as sm
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import curve_fit

from thermofuncs.fits import Settings, curvature, fit, predict
from thermofuncs.fits.laws import LAWS, basis
from thermofuncs.fits.many import fit_many
from thermofuncs.units import R

REFERENCE = Path(__file__).parent.parent / "reference"
COLUMN = {"pK": "pK", "p_kPa": "kPa", "p_mmHg": "mmHg", "K_prime": "K"}
T = [283.15, 288.15, 293.15, 298.15, 303.15, 308.15, 313.15, 318.15]
K = [0.552, 0.678, 0.835, 1.004, 1.221, 1.452, 1.731, 2.06]
AT_298 = Settings(reference=298.15)


def rows(name: str) -> list[dict[str, str]]:
    """The rows of a reference file."""
    lines = (REFERENCE / name).read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


def measured(series: str, t_high: float = math.inf) -> tuple[list[float], list[float], str]:
    """Temperatures, values and what they are, of a series."""
    found = [r for r in rows("measured.csv") if r["series"].startswith(series) and float(r["T_K"]) <= t_high]
    return [float(r["T_K"]) for r in found], [float(r["value"]) for r in found], COLUMN[found[0]["quantity"]]


def half_digit(text: str) -> float:
    """Half a unit of the last printed digit."""
    digits, _, exponent = text.partition("e")
    decimals = len(digits.partition(".")[2])
    return float(0.5000001 * 10.0 ** (int(exponent or 0) - decimals))


@pytest.mark.parametrize("row", rows("measured_fits.csv"), ids=lambda row: f"{row['series']} {row['law']}")
def test_measured_series(row: dict[str, str]) -> None:
    """Each published series gives the tabulated values within half of the last digit."""
    t, y, y_is = measured(row["series"], float(row["t_high"] or math.inf))
    found = fit(row["law"], t, y, y_is, None, AT_298)
    for name in ("drH", "drCp"):
        for column, value in ((name, found.value), (f"u_{name}", found.u)):
            if row[column]:
                assert value(name) == pytest.approx(float(row[column]), abs=half_digit(row[column])), column
    if row["p_curvature"]:
        tested = curvature(found)
        assert tested is not None
        assert tested.probability == pytest.approx(float(row["p_curvature"]), abs=half_digit(row["p_curvature"]))


@pytest.mark.parametrize(
    ("series", "fires"),
    [
        ("68DYS/NOL_1358", False), ("85TEW/STE_1328", False), ("trimethylammonium", True), ("chloroacetic", True),
        ("mercury", True),
    ],
)  # fmt: skip
def test_the_curvature_test_on_measured_series(series: str, fires: bool) -> None:
    """The curvature test is silent on the two sugar series and fires on the other three."""
    t, y, y_is = measured(series)
    tested = curvature(fit("van't Hoff", t, y, y_is))
    assert tested is not None
    assert (tested.probability < 0.05) is fires


def test_calorimetric_enthalpies_lie_inside_the_limits() -> None:
    """Calorimetric enthalpies of the two sugar reactions lie inside the 95 % limits of the fits."""
    for series, low, high in (("68DYS", 11.63, 11.77), ("85TEW", 16.6, 17.6)):
        t, y, y_is = measured(series)
        found = fit("van't Hoff", t, y, y_is, None, AT_298).estimate("drH")
        assert found.low is not None
        assert found.high is not None
        assert found.low < low < high < found.high


def test_a_straight_line_is_wrong_for_the_ionisation_of_water() -> None:
    """For water's ionisation the straight line misses ΔrH° at 298.15 K by 4 kJ/mol."""
    t, y, y_is = measured("water pKw", 373.15)
    line, curved = (fit(law, t, y, y_is, None, AT_298).value("drH") for law in ("van't Hoff", "Clarke-Glew"))
    assert curved - line == pytest.approx(4.16, abs=0.05)


def test_antoine_meets_the_saturation_pressure_of_water() -> None:
    """Antoine's equation fitted to 273 to 373 K gives water's saturation pressure within 0.2 %, its own misfit."""
    t, y, y_is = measured("water psat", 373.15)
    found = fit("Antoine", t, y, y_is)
    c = {name: found.value(name) for name in "ABC"}
    for temperature, pressure in zip(t, y, strict=True):
        fitted = 10.0 ** (c["A"] - c["B"] / (c["C"] + temperature))
        assert fitted == pytest.approx(pressure, rel=2e-3)
        assert predict(found, temperature).log == pytest.approx(math.log(fitted / 100.0), abs=1e-11)
    reference = curve_fit(lambda x, a, b, c: a - b / (c + x), t, np.log10(y), p0=[7.0, 1700.0, -40.0])
    assert [c["A"], c["B"], c["C"]] == pytest.approx(reference[0].tolist(), rel=1e-5)
    assert [found.u(n) for n in "ABC"] == pytest.approx(np.sqrt(np.diag(reference[1])).tolist(), rel=1e-4)


# --- invariances -------------------------------------------------------------------------------------


def test_scaling_every_constant_shifts_only_the_entropy() -> None:
    """K times 1000 shifts ΔrS° by R ln 1000 and leaves ΔrH° and every uncertainty."""
    one, other = fit("van't Hoff", T, K), fit("van't Hoff", T, [1000.0 * k for k in K])
    assert other.value("drH") == pytest.approx(one.value("drH"), rel=1e-11)
    assert other.value("drS") - one.value("drS") == pytest.approx(R * math.log(1000.0), rel=1e-11)
    assert other.u("drH") == pytest.approx(one.u("drH"), rel=1e-10)
    assert other.u("drS") == pytest.approx(one.u("drS"), rel=1e-10)


@pytest.mark.parametrize("law", ["van't Hoff", "Clarke-Glew"])
def test_the_unit_of_temperature_changes_nothing(law: str) -> None:
    """Temperatures in degrees Celsius or Fahrenheit, bare or as texts, give the fit in kelvin."""
    celsius = [t - 273.15 for t in T]
    expected = fit(law, T, K)
    for temperatures, scale in (
        ([f"{t:.10g} degC" for t in celsius], "K"),
        (celsius, "degC"),
        ([t * 1.8 + 32.0 for t in celsius], "degF"),
    ):
        found = fit(law, temperatures, K, settings=Settings(scale=scale))
        for name in ("drH", "drS"):
            assert found.value(name) == pytest.approx(expected.value(name), rel=1e-9)
            assert found.u(name) == pytest.approx(expected.u(name), rel=1e-7)


@pytest.mark.parametrize(
    ("law", "options"),
    [
        ("van't Hoff", Settings()), ("Clarke-Glew", Settings()), ("Clarke-Glew", Settings(slope=True)),
        ("van't Hoff", Settings(robust=True)), ("van't Hoff", Settings(constant_in_value=True)),
        ("Clarke-Glew", Settings(u_temperature=0.1)), ("van't Hoff", Settings(u_temperature=0.1, orthogonal=True)),
    ],
)  # fmt: skip
def test_points_in_another_order_give_the_same_bits(law: str, options: Settings) -> None:
    """Every value and uncertainty is the same, bit for bit, in any order of the points."""
    shuffled = np.random.default_rng(5)
    u = [0.01 * k for k in K] if options.u_temperature else None
    bits = set()
    for _ in range(6):
        order = shuffled.permutation(len(T)).tolist()
        pick = [None if column is None else [column[i] for i in order] for column in (T, K, u)]
        found = fit(law, pick[0] or [], pick[1] or [], None, pick[2], options)
        bits.add(tuple((found.value(n), found.u(n)) for n in found.names))
    assert len(bits) == 1


@pytest.mark.parametrize("law", ["van't Hoff", "Clarke-Glew"])
def test_the_reference_temperature_does_not_change_predictions(law: str) -> None:
    """Predictions with their limits do not depend on the reference temperature, and follow from its parameters."""
    found = [fit(law, T, K, settings=Settings(reference=t)) for t in (250.0, 298.15, 400.0)]
    first = predict(found[0], 350.0)
    for other in found[1:]:
        second = predict(other, 350.0)
        for name in ("log", "u", "confidence", "prediction"):
            assert getattr(second, name) == pytest.approx(getattr(first, name), rel=1e-12)
    for one in found:
        t0 = one.reference
        h, s = one.value("drH") * 1000.0, one.value("drS")
        cp = one.value("drCp") if law == "Clarke-Glew" else 0.0
        g = h + cp * (350.0 - t0) - 350.0 * (s + cp * math.log(350.0 / t0))
        assert -g / (R * 350.0) == pytest.approx(first.log, rel=1e-11)


def test_parameters_stand_at_298_where_the_points_enclose_it() -> None:
    """The reference temperature is 298.15 K inside the points, the mean of 1/T otherwise, or as asked for."""
    assert fit("van't Hoff", T, K).reference == 298.15
    hot = [t + 100.0 for t in T]
    assert fit("van't Hoff", hot, K).reference == pytest.approx(len(T) / sum(1.0 / t for t in hot), rel=1e-14)
    assert fit("van't Hoff", hot, K, settings=AT_298).reference == 298.15


# --- uncertainties and estimators --------------------------------------------------------------------


def test_known_uncertainties_and_weights_are_two_answers() -> None:
    """Both give one estimate; known ones the covariance of u alone, weights the same scaled by the residuals."""
    u = [0.02 * k for k in K]
    known = fit("van't Hoff", T, K, None, u, Settings(known=True))
    weights = fit("van't Hoff", T, K, None, u)
    design = sm.add_constant(1.0 / np.array(T))
    reference = sm.WLS(np.log(K), design, weights=(np.array(K) / np.array(u)) ** 2).fit()
    assert known.value("drH") == weights.value("drH") == pytest.approx(-reference.params[1] * R / 1000.0, rel=1e-9)
    assert weights.u("drH") == pytest.approx(reference.bse[1] * R / 1000.0, rel=1e-9)
    unscaled = math.sqrt(reference.normalized_cov_params[1, 1])
    assert known.u("drH") == pytest.approx(unscaled * R / 1000.0, rel=1e-9)
    assert known.factor == pytest.approx(1.959963984540054, rel=1e-14)
    assert weights.factor == pytest.approx(2.4469, abs=5e-5)  # tables of t, 6 degrees of freedom


def test_error_constant_in_k_is_least_squares_of_k() -> None:
    """With the error constant in K the fit is the nonlinear least squares of K itself."""
    found = fit("van't Hoff", T, K, settings=Settings(constant_in_value=True))

    def model(t: np.ndarray, a: float, b: float) -> np.ndarray:
        return np.asarray(np.exp(a + b * (1.0 / 298.15 - 1.0 / t)))

    reference, covariance = curve_fit(model, np.array(T), np.array(K), p0=[0.0, 3000.0], xtol=1e-14, ftol=1e-14)
    assert found.value("lnK") == pytest.approx(reference[0], rel=1e-6)
    assert found.value("drH") == pytest.approx(reference[1] * R / 1000.0, rel=1e-7)
    assert found.u("drH") == pytest.approx(math.sqrt(covariance[1, 1]) * R / 1000.0, rel=1e-5)
    deviation = math.sqrt(float(np.sum((np.array(K) - model(np.array(T), *reference)) ** 2)) / 6.0)
    assert found.solution.deviation == pytest.approx(deviation, rel=1e-8)


def test_the_robust_estimator_is_hubers() -> None:
    """Estimates and standard errors agree with the reference implementation's Huber estimator."""
    spoiled = [*K[:5], K[5] * 1.3, *K[6:]]
    found = fit("van't Hoff", T, spoiled, settings=Settings(robust=True))
    design = sm.add_constant(1000.0 / np.array(T) - 3.3)
    reference = sm.RLM(np.log(spoiled), design, M=sm.robust.norms.HuberT(t=1.345)).fit(maxiter=500, tol=1e-13)
    assert found.value("drH") == pytest.approx(-reference.params[1] * R, rel=1e-8)
    assert found.u("drH") == pytest.approx(reference.bse[1] * R, rel=1e-7)
    assert found.solution.deviation == pytest.approx(reference.scale, rel=1e-8)
    clean = fit("van't Hoff", T, K)
    assert abs(found.value("drH") - clean.value("drH")) < 0.3 * abs(
        fit("van't Hoff", T, spoiled).value("drH") - clean.value("drH")
    )


def test_arrhenius_and_eyring_of_made_up_constants() -> None:
    """Exact constants of known Ea, A, Δ‡H°, Δ‡S° give these back, in any unit of the rate constant."""
    arrhenius = [2.5e13 * math.exp(-85000.0 / (R * t)) for t in T]
    found = fit("Arrhenius", T, arrhenius, "1/s")
    assert found.value("Ea") == pytest.approx(85.0, rel=1e-10)
    assert found.value("A") == pytest.approx(2.5e13, rel=1e-8)
    frequency = 1.380649e-23 / 6.62607015e-34
    eyring = [frequency * t * math.exp(-40.0 / R - 80000.0 / (R * t)) for t in T]
    for unit, scale in (("1/s", 1.0), ("1/min", 60.0), ("1/h", 3600.0)):
        found = fit("Eyring", T, [k * scale for k in eyring], unit)
        assert found.value("dactH") == pytest.approx(80.0, rel=1e-9)
        assert found.value("dactS") == pytest.approx(-40.0, rel=1e-8)
        assert predict(found, 298.15).log == pytest.approx(math.log(eyring[3]), abs=1e-11)


@pytest.mark.parametrize("law", [law.name for law in LAWS if not law.nonlinear])
def test_logarithms_and_values_are_one_fit(law: str) -> None:
    """The column as a value, its natural or its decadic logarithm gives one fit."""
    unit = {"Arrhenius": "1/s", "Eyring": "1/s", "Clausius-Clapeyron": "bar"}.get(law, "K")
    logs = [math.log(k) for k in K]
    expected = fit(law, T, K, unit)
    for column, y_is in ((logs, f"ln {unit}"), ([x / math.log(10.0) for x in logs], f"lg {unit}")):
        found = fit(law, T, column, y_is)
        for name in expected.names:
            assert found.value(name) == pytest.approx(expected.value(name), rel=1e-8, abs=1e-10)


# --- simulations -------------------------------------------------------------------------------------


@pytest.mark.parametrize(("law", "cp"), [("van't Hoff", 0.0), ("Clarke-Glew", -150.0)])
def test_limits_cover_the_truth_at_their_level(law: str, cp: float) -> None:
    """Of 10,000 series with normal errors 95 % ± 1 % have the true ΔrH°, ΔrS° and ΔrCp° inside their limits."""
    rng = np.random.default_rng(11)
    count = 3 if cp else 2
    t = np.linspace(278.15, 333.15, 8)
    truth = np.array([2.0, 40000.0 / R, cp / R])[:count]
    clean = np.array([basis(count, float(x), 298.15) for x in t]) @ truth
    logs = clean[:, None] + 0.02 * rng.standard_normal((8, 10_000))
    fits = fit_many(law, t, logs, "ln K")
    true = {"drH": 40.0, "drS": 40000.0 / 298.15 + 2.0 * R, "lnK": 2.0, **({"drCp": cp} if cp else {})}
    for name, value in true.items():
        found = fits.estimates(name, 298.15)
        covered = float(np.mean((found.low <= value) & (value <= found.high)))
        assert covered == pytest.approx(0.95, abs=0.01), name


def test_prediction_limits_cover_new_points() -> None:
    """Of 2,000 series 95 % ± 1.5 % have a new point inside the prediction limits, outside the data too."""
    rng = np.random.default_rng(12)
    inside = 0
    for _ in range(2000):
        y = [3.0 - 2000.0 * (1.0 / t - 1.0 / 300.0) + 0.02 * float(rng.standard_normal()) for t in T]
        found = predict(fit("van't Hoff", T, y, "ln K"), 340.0)
        new = 3.0 - 2000.0 * (1.0 / 340.0 - 1.0 / 300.0) + 0.02 * float(rng.standard_normal())
        inside += abs(new - found.log) <= (found.prediction or 0.0)
    assert inside / 2000.0 == pytest.approx(0.95, abs=0.015)


@given(st.integers(0, 2**32 - 1), st.sampled_from(["van't Hoff", "Clarke-Glew", "Eyring", "Arrhenius"]))
@settings(max_examples=60, deadline=None)
def test_many_fits_are_the_single_ones(seed: int, law: str) -> None:
    """The array call gives what each series gives alone."""
    rng = np.random.default_rng(seed)
    t = np.sort(rng.uniform(280.0, 340.0, 9))
    y = np.exp(rng.uniform(-3.0, 3.0) - 3000.0 / t[:, None] + 10.0 + 0.05 * rng.standard_normal((9, 3)))
    unit = "1/s" if law in {"Eyring", "Arrhenius"} else "K"
    shapes = [t] if law == "Clarke-Glew" else [t, np.repeat(t[:, None], 3, axis=1)]
    for temperatures in shapes:
        many = fit_many(law, temperatures, y, unit)
        for j in range(3):
            one = fit(law, t.tolist(), y[:, j].tolist(), unit, None, AT_298)
            for name in [n for n in one.names if not one.quantities[n].exponential]:
                found = many.estimates(name, 298.15)
                estimate = one.estimate(name)
                assert estimate.u is not None
                assert abs(found.value[j] - estimate.value) < 1e-9 * (abs(estimate.value) + estimate.u)
                assert found.u[j] == pytest.approx(estimate.u, rel=1e-8)
                assert found.unit == estimate.unit
