"""What a person should know before using a fit, in plain sentences."""

from __future__ import annotations

from thermofuncs.fits.diagnostics import diagnose
from thermofuncs.fits.fitting import Fit
from thermofuncs.fits.statistics import Tested, chi_square, curvature, lack_of_fit, runs

SIGNIFICANT = 0.05
FEW = 3  # degrees of freedom below which an uncertainty is itself very uncertain
NARROW = 0.05  # of 1/T, from the lowest to the highest temperature
CARRIES = 0.9  # leverage of a point that carries the fit
FAR = 1.0  # Cook's distance of a point that moves it
DOWN = 0.5  # factor below which a point counts as set aside by the robust estimator


def cautions(fit: Fit) -> list[str]:
    """The cautions that go with a fit, in the order of their weight."""
    points, law = fit.points, fit.law
    found = []
    if fit.settings.apparent:
        found.append(
            f"These are apparent constants at {fit.settings.apparent}: every quantity holds at that condition alone "
            "and is no standard one."
        )
    if fit.solution.variance is None:
        found.append(
            f"{points.size} points determine {law.count} parameters exactly: there is nothing to estimate an "
            "uncertainty from."
        )
    elif fit.degrees < FEW:
        found.append(
            f"Too few points: {points.size} for {law.count} parameters leave {max(fit.degrees, 0)} "
            f"degree{'s' if fit.degrees != 1 else ''} of freedom, so the uncertainties are themselves very uncertain."
        )
    if 1.0 - points.low / points.high < NARROW:
        found.append(
            f"Narrow range: 1/T spans {100.0 * (1.0 - points.low / points.high):.2g} % from {points.low:.6g} to "
            f"{points.high:.6g} K, so the slope rests on small differences."
        )
    found += _of_tests(fit)
    found += _of_points(fit)
    outside = fit.outside(fit.reference)
    if outside:
        found.append("The reference temperature: " + distance(fit, fit.reference))
    if points.left_out:
        rows = "row was" if points.left_out == 1 else "rows were"
        found.append(f"{points.left_out} {rows} left out for a blank cell.")
    return found


def _of_tests(fit: Fit) -> list[str]:
    found = []
    bent = curvature(fit)
    if bent is not None:
        significant = bent.probability < SIGNIFICANT
        p = f"p = {bent.probability:.2g}"
        if fit.law.count == 2 and significant:
            remedy = {
                "reaction": "the law Clarke-Glew fits it", "vapour": "the law Antoine or Clarke-Glew fits it",
            }.get(fit.law.family, "look for a change of mechanism")  # fmt: skip
            found.append(f"A straight line was asked for, but the points are curved (ΔCp significant, {p}): {remedy}.")
        elif fit.law.count > 2 and not significant:
            found.append(f"{bent.what} is not distinguishable from zero ({p}): fewer parameters would do.")
    if _fires(test := lack_of_fit(fit)) and test is not None:
        found.append(
            f"Lack of fit: the law misses the means of the replicates by more than they scatter (p = "
            f"{test.probability:.2g})."
        )
    if _fires(test := runs(fit)) and test is not None:
        found.append(
            f"The residuals change sign only {test.statistic - 1:.0f} times along T (p = {test.probability:.2g}): "
            "the law may be the wrong one."
        )
    if _fires(test := chi_square(fit)) and test is not None:
        effect = " The limits do not cover that." if fit.settings.known else ""
        found.append(
            f"The stated uncertainties are smaller than the scatter (chi-square {test.statistic:.4g} for {fit.degrees} "
            f"degrees of freedom, p = {test.probability:.2g}).{effect}"
        )
    return found


def _fires(test: Tested | None) -> bool:
    return test is not None and test.probability < SIGNIFICANT


def _of_points(fit: Fit) -> list[str]:
    if fit.points.size <= fit.law.count:
        return []
    found = []
    all_points = diagnose(fit)
    first = max(all_points, key=lambda d: d.leverage)
    if first.leverage > CARRIES:
        found.append(
            f"One point carries the fit: row {first.row + 1} at {first.temperature:.6g} K has leverage "
            f"{first.leverage:.3g}."
        )
    moved = max(all_points, key=lambda d: d.cook or 0.0)
    if (moved.cook or 0.0) > FAR:
        found.append(
            f"One point moves the fit: row {moved.row + 1} at {moved.temperature:.6g} K has Cook's distance "
            f"{moved.cook:.3g}."
        )
    factors = fit.solution.factors
    if factors is not None:
        down = sorted(fit.points.rows[i] + 1 for i, f in enumerate(factors) if f < DOWN)
        if down:
            rows = ", ".join(map(str, down[:8])) + (", …" if len(down) > 8 else "")
            found.append(f"The robust estimator gave less than half of its weight to row {rows}.")
    return found


def distance(fit: Fit, temperature: float) -> str:
    """How far a temperature [K] is from the points, as a sentence; empty inside them."""
    outside = fit.outside(temperature)
    if not outside:
        return ""
    low, high = fit.points.low, fit.points.high
    edge = low if outside < 0.0 else high
    spans = abs(1.0 / temperature - 1.0 / edge) / (1.0 / low - 1.0 / high)
    where = "below" if outside < 0.0 else "above"
    return (
        f"{temperature:.6g} K is {abs(outside):.4g} K {where} the points ({low:.6g} to {high:.6g} K): extrapolated by "
        f"{spans:.2g} times their span in 1/T, with the law taken to hold there."
    )
