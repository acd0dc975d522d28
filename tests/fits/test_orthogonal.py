"""Errors in both variables against published numbers and a reference implementation."""

from __future__ import annotations

import csv
import math
import warnings
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray

from thermofuncs.fits import Settings, fit
from thermofuncs.fits.orthogonal import OrthogonalFit, orthogonal_regression
from thermofuncs.units import R

Array = NDArray[np.float64]
REFERENCE = Path(__file__).parent.parent / "reference"


def line(x: Array, y: Array, u_x: Array, u_y: Array) -> OrthogonalFit:
    """A straight line with errors in both."""
    return orthogonal_regression(
        lambda b, t: b[0] + b[1] * t,
        lambda _, t: np.column_stack([np.ones_like(t), t]),
        lambda b, t: np.full_like(t, b[1]),
        x, y, u_x, u_y, (5.0, -0.5),
    )  # fmt: skip


def pearson() -> tuple[Array, Array, Array, Array]:
    """The points with their standard uncertainties."""
    text = (REFERENCE / "pearson_york.csv").read_text(encoding="utf-8").splitlines()
    rows = list(csv.DictReader(row for row in text if not row.startswith("#")))
    x, y, a, b = (np.array([float(row[name]) for row in rows]) for name in ("x", "y", "weight_x", "weight_y"))
    return x, y, 1.0 / np.sqrt(a), 1.0 / np.sqrt(b)


def test_pearsons_points_with_yorks_weights() -> None:
    """The published line through Pearson's points is met in its eight digits."""
    found = line(*pearson())
    assert found.parameters.tolist() == pytest.approx([5.47991022, -0.48053341], abs=6e-9)
    assert found.squares == pytest.approx(11.8663532, abs=5e-7)


def test_agrees_with_scipys_orthogonal_regression() -> None:
    """Parameters and covariance agree with scipy's orthogonal distance regression to its tolerance."""
    with warnings.catch_warnings():
        warnings.simplefilter("ignore", DeprecationWarning)  # it leaves scipy with 1.19
        odr = pytest.importorskip("scipy.odr")
    random = np.random.default_rng(3)
    for _ in range(10):
        true = np.sort(random.uniform(0.0, 10.0, 12))
        u_x, u_y = random.uniform(0.05, 0.3, 12), random.uniform(0.05, 0.3, 12)
        x, y = true + u_x * random.standard_normal(12), 2.0 - 0.7 * true + u_y * random.standard_normal(12)
        found = line(x, y, u_x, u_y)
        problem = odr.ODR(
            odr.RealData(x, y, sx=u_x, sy=u_y), odr.Model(lambda b, t: b[0] + b[1] * t), beta0=[1.0, -1.0],
            sstol=1e-15, partol=1e-12, maxit=500,
        )  # fmt: skip
        problem.set_job(fit_type=0, deriv=0)
        reference = problem.run()
        assert found.parameters.tolist() == pytest.approx(reference.beta.tolist(), rel=1e-6)
        assert found.squares == pytest.approx(reference.sum_square, rel=1e-8)
        # that covariance is from finite differences, at its own curvature: a few per cent apart at these errors
        assert np.sqrt(np.diag(found.covariance)) == pytest.approx(np.sqrt(np.diag(reference.cov_beta)), rel=0.05)


TEMPERATURES = [283.0, 291.0, 300.0, 308.0, 317.0, 325.0, 334.0]


def series() -> tuple[list[float], list[float]]:
    """An invented series and its uncertainties."""
    bumps = [0.01, -0.02, 0.015, 0.0, -0.012, 0.02, -0.01]
    return [5.0 - 3000.0 / t + b for t, b in zip(TEMPERATURES, bumps, strict=True)], [0.02] * 7


def test_errors_in_temperature_widen_the_uncertainty() -> None:
    """Effective variance and orthogonal regression nearly agree, and both widen u(ΔrH°) over errors in K alone."""
    y, u = series()
    plain = fit("van't Hoff", TEMPERATURES, y, "ln K", u, Settings(known=True))
    effective = fit("van't Hoff", TEMPERATURES, y, "ln K", u, Settings(known=True, u_temperature=0.5))
    orthogonal = fit("van't Hoff", TEMPERATURES, y, "ln K", u, Settings(known=True, u_temperature=0.5, orthogonal=True))
    assert effective.u("drH") == pytest.approx(orthogonal.u("drH"), rel=1e-2)
    assert effective.value("drH") == pytest.approx(orthogonal.value("drH"), rel=1e-3)
    expected = math.sqrt(0.02**2 + (plain.value("drH") * 1000.0 / R / 308.0**2 * 0.5) ** 2) / 0.02
    widened = effective.u("drH")
    alone = plain.u("drH")
    assert widened is not None
    assert alone is not None
    assert widened / alone == pytest.approx(expected, rel=0.02)
    assert "effective variance" in effective.solution.estimator
    assert "orthogonal" in orthogonal.solution.estimator


def test_the_effective_variance_is_a_fixed_point() -> None:
    """The weights of the last fit are those that its own slope gives."""
    y, u = series()
    found = fit("Clarke-Glew", TEMPERATURES, y, "ln K", u, Settings(u_temperature=0.5))
    step = 1e-3
    for weight, t, s in zip(found.solution.weights or [], TEMPERATURES, u, strict=True):
        slope = (found.log_at(t + step)[0] - found.log_at(t - step)[0]) / (2.0 * step)
        assert 1.0 / weight == pytest.approx(s**2 + (0.5 * slope) ** 2, rel=1e-6)
