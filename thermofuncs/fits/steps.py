"""The steps of a fit for its working: linear form, design, solution, propagation."""

from __future__ import annotations

from thermofuncs.fits.fitting import Estimate, Fit
from thermofuncs.working import Record, shown


def _coefficient_names(fit: Fit) -> tuple[tuple[str, str], ...]:
    """Symbols and units of the inner coefficients."""
    log = fit.measure.log_name
    if fit.law.nonlinear:
        return ((f"α = {log} at θ", "1"), ("β", "K"), ("γ", "K"))
    if fit.law.family == "Eyring":
        log = "ln K‡"
    energy = {"reaction": "ΔrH°", "Arrhenius": "Ea", "Eyring": "Δ‡H°", "vapour": "ΔvapH"}[fit.law.family]
    names = ((f"{log} at θ", "1"), (f"{energy}(θ)/R", "K"), ("ΔrCp°(θ)/R", "1"), ("dΔrCp°/dT/R", "1/K"))
    return names[: fit.law.count]


def record_fit(fit: Fit, record: Record) -> None:
    """Record how the points became a solution."""
    s, points, law = fit.solution, fit.points, fit.law
    record.step(
        "n", "points by temperature, then value; rows with a blank left out",
        f"{points.given} rows, {points.left_out} left out, {points.low:.6g} to {points.high:.6g} K",
        float(points.size), "1",
    )  # fmt: skip
    form = law.equation if not law.nonlinear else f"{law.equation}, fitted as α + β x/(1 + γ x), x = 1/θ − 1/T"
    scale = fit.measure.scale
    taken = "ln of the column" if scale == "value" else f"from the column of {fit.measure.label}"
    if points.u_logs is not None:
        taken += "; u(ln y) = u/y" if scale == "value" else "; u by the same factor"
    record.step("form", form, taken, fit.measure.log_name, "text", law.source)
    weighted = "Σw/Σ(w/T)" if s.weights is not None else "n/Σ(1/T)"
    record.step("θ", f"{weighted}, where height and slope decorrelate", f"{points.size} points", s.theta, "K")
    spread = sum(
        (w * (1.0 / t - 1.0 / s.theta) ** 2)
        for w, t in zip(s.weights or [1.0] * points.size, points.temperatures, strict=True)
    )
    condition = f"; condition of the scaled design {s.condition:.3g}" if s.condition is not None else ""
    design = f"{points.size} by {law.count}, columns centred and scaled{condition}"
    record.step("design", "Σw(1/T − 1/θ)²", design, spread, "1/K2")
    for (symbol, unit), value in zip(_coefficient_names(fit), s.coefficients, strict=True):
        record.step(symbol, "least squares", s.estimator, value, unit, law.source)
    if s.deviation is not None:
        robust = fit.settings.robust
        relation = "median |r|√w/0.6745" if robust else "√(Σwr²/(n − p))"
        numbers = "residuals of the robust fit" if robust else f"√({shown(s.squares)}/{fit.degrees})"
        record.step("s", relation, numbers, s.deviation, "1")
    record.step("T", "reference temperature", _why(fit), fit.reference, "K")


def _why(fit: Fit) -> str:
    if fit.settings.reference is not None:
        return "as asked for by t_ref"
    return "298.15 K, inside the points" if fit.reference == 298.15 else "the mean of 1/T, as 298.15 K is outside"


def record_estimate(fit: Fit, estimate: Estimate, record: Record, last: str = "value") -> None:
    """Record a quantity and its propagated uncertainty.

    Parameters
    ----------
    fit : Fit.
    estimate : Estimate.
    record : Record.
    last : value, u, low or high. What the steps end in.
    """
    s = fit.solution
    prime = "′" if fit.settings.apparent else ""
    symbol = estimate.symbol + prime
    pairs = zip(estimate.gradient, s.coefficients, strict=True)
    numbers = " + ".join(f"{shown(g)} × {shown(c)}" for g, c in pairs if g)
    if fit.law.nonlinear:
        numbers = f"derivatives by α, β, γ: {', '.join(f'{g:.6g}' for g in estimate.gradient)}"
    quantity = fit.quantities.get(estimate.name)
    if quantity is not None and quantity.exponential:
        numbers = f"exp({numbers})"
    value = (symbol, estimate.relation, numbers, estimate.value, estimate.unit, fit.law.source)
    if last != "u" and estimate.u is not None:
        _record_u(fit, estimate, symbol, record)
    record.step(*value)
    if last == "u":
        _record_u(fit, estimate, symbol, record)
    elif last in {"low", "high"} and estimate.low is not None and estimate.high is not None:
        of_t = "normal distribution" if fit.student is None else f"Student's t, {fit.student} degrees of freedom"
        limit, sign = (estimate.low, "−") if last == "low" else (estimate.high, "+")
        text = f"{shown(estimate.value)} {sign} {fit.factor:.6g} × {shown(estimate.u or 0.0)}"
        if quantity is not None and quantity.exponential:
            text = f"the exponential of the logarithm's limit, factor {fit.factor:.6g}"
        record.step(
            f"{'lower' if last == 'low' else 'upper'} limit of {symbol}", f"value {sign} factor × u", text, limit,
            estimate.unit, f"{of_t}, level {fit.settings.level:g}",
        )  # fmt: skip


def _record_u(fit: Fit, estimate: Estimate, symbol: str, record: Record) -> None:
    variance = fit.solution.variance
    if estimate.u is None or variance is None:
        return
    scaled = "covariance of stated uncertainties" if fit.settings.known else f"covariance scaled by {variance:.6g}"
    record.step(
        f"u({symbol})", "√(g C gᵀ), g the derivatives by the coefficients",
        f"g = ({', '.join(f'{g:.6g}' for g in estimate.gradient)}), {scaled}", estimate.u, estimate.unit,
        "law of propagation of uncertainty, JCGM 100:2008, equation 13",
    )  # fmt: skip
