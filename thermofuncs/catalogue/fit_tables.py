"""The tables of fits: report, predictions, temperatures, points."""

from __future__ import annotations

import math
from collections.abc import Callable

from thermofuncs.errors import CellError, NoUncertainty, TextInRange, ThermofuncsError
from thermofuncs.fits import (
    Estimate,
    Fit,
    FittedTemperature,
    Tested,
    aicc,
    cautions,
    chi_square,
    curvature,
    diagnose,
    lack_of_fit,
    predict,
    r_squared,
    runs,
    temperature_of,
)
from thermofuncs.units import kelvin

Table = list[list[object]]
HEAD: list[object] = ["item", "value", "standard uncertainty", "lower limit", "upper limit", "unit"]
BLANK_ROW = CellError("#N/A", "The row has a blank cell, so it is no point of the fit.")
CORRELATED = {
    "reaction": ("drH", "drS", "drCp"), "Arrhenius": ("Ea", "lnA"), "Eyring": ("dactH", "dactS"),
    "vapour": ("dvapH", "dvapS"),
}  # fmt: skip


def missing(fit: Fit, what: str) -> CellError:
    """The cell of an uncertainty that no points are left over for."""
    return NoUncertainty(what=what, n=fit.points.size, parameters=fit.law.count).as_cell()


def parameters(fit: Fit) -> list[str]:
    """The quantities of a report: of pK and lg K only what the column holds."""
    kept = {"minus lg": "pK", "lg": "lgK"}.get(fit.measure.scale)
    return [name for name in fit.names if name not in {"pK", "lgK"} or name == kept]


def _row(item: str, value: object, unit: str = "") -> list[object]:
    return [item, value, "", "", "", unit]


def _estimate_row(fit: Fit, estimate: Estimate) -> list[object]:
    prime = "′" if fit.settings.apparent else ""
    limits: list[object] = [
        missing(fit, f"{what} of {estimate.name}") if x is None else x
        for what, x in (("uncertainty", estimate.u), ("limit", estimate.low), ("limit", estimate.high))
    ]
    return [estimate.name + prime, estimate.value, *limits, estimate.unit]


def _tests(fit: Fit) -> Table:
    rows: Table = []
    tests = (("chi-square", chi_square), ("curvature", curvature), ("lack of fit", lack_of_fit), ("runs", runs))
    for item, run in tests:
        tested: Tested | None = run(fit)
        if tested is not None:
            rows += [
                _row(f"{item}: {tested.what}" if tested.what != item else item, tested.statistic),
                _row(f"{item}: probability", tested.probability),
            ]
    return rows


def report(fit: Fit) -> Table:
    """The table of a fit."""
    s, points, settings = fit.solution, fit.points, fit.settings
    rows: Table = [HEAD, _row("law", fit.law.name)]
    if settings.apparent:
        rows.append(_row("apparent constants at", settings.apparent))
    rows += [_estimate_row(fit, fit.estimate(name)) for name in parameters(fit)]
    rows.append(_row("reference temperature", fit.reference, "K"))
    names = [n for n in (("A", "B", "C") if fit.law.nonlinear else CORRELATED[fit.law.family]) if n in fit.names]
    for i, one in enumerate(names):
        for other in names[i + 1 :]:
            correlation = fit.correlation(one, other)
            cell = missing(fit, "a correlation") if correlation is None else correlation
            rows.append(_row(f"correlation of {one} and {other}", cell))
    deviation: object = missing(fit, "the residual deviation") if s.deviation is None else s.deviation
    rows += [
        _row("points", points.size), _row("rows left out for a blank", points.left_out),
        _row("degrees of freedom", fit.degrees), _row("lowest temperature", points.low, "K"),
        _row("highest temperature", points.high, "K"),
        _row("residual standard deviation", deviation, _deviation_unit(fit)),
    ]  # fmt: skip
    for item, value in (("R²", r_squared(fit)), ("AICc", aicc(fit))):
        cell = CellError("#N/A", f"{item} is not available for these points.") if value is None else value
        rows.append(_row(item, cell))
    rows += _tests(fit)
    if points.size > fit.law.count:
        all_points = diagnose(fit)
        rows.append(_row("largest leverage", max(d.leverage for d in all_points)))
        rows.append(_row("largest Cook's distance", max(d.cook or 0.0 for d in all_points)))
    student = "normal" if fit.student is None else f"Student's t with {fit.student} degrees of freedom"
    rows += [_row("level of the limits", settings.level), _row("limits by", student), _row("estimator", s.estimator)]
    if fit.law.nonlinear:
        logarithm = "ln" if fit.measure.scale == "ln" else "lg"
        rows.append(_row("form of A, B, C", f"Antoine {logarithm} {fit.measure.unit} {settings.scale}"))
    rows.append(_row("source of the law", fit.law.source))
    return finite(rows + [_row("caution", sentence) for sentence in cautions(fit)])


def finite(table: Table) -> Table:
    """A table with an error in place of what a cell cannot hold."""
    gone = CellError("#NUM!", "The value is outside the range of numbers: a logarithm of it, such as lnK, is not.")
    return [[gone if isinstance(x, float) and not math.isfinite(x) else x for x in row] for row in table]


def _deviation_unit(fit: Fit) -> str:
    if fit.points.u_logs is not None:
        return "in units of u"
    return f"of {fit.law.symbol}" if fit.settings.constant_in_value else f"of {fit.measure.log_name}"


def _half_widths(
    value: float, widths: list[float | None], into: Callable[[float], float], gone: CellError
) -> list[object]:
    """A value with the limits of its half widths, each transformed; rising or falling, the lower one first."""
    cells: list[object] = [into(value)]
    for width in widths:
        cells += [gone, gone] if width is None else sorted((into(value - width), into(value + width)))
    return cells


def predictions(fit: Fit, t_new: list[object]) -> tuple[Table, list[float]]:
    """Fitted values at new temperatures, and the temperatures [K] outside the points."""
    log, measure = fit.measure.log_name, fit.measure
    limits = ["confidence low", "confidence high", "prediction low", "prediction high"]
    inside = "K" if measure.symbol == "K" else f"{measure.symbol} [{measure.unit}]"
    names = [log, inside] + ([measure.label] if measure.scale in {"lg", "minus lg"} and measure.symbol == "K" else [])
    head: list[object] = ["T [K]", f"u({log})", "outside the points [K]"]
    for name in names:
        head += [name, *(f"{name} {limit}" for limit in limits)]
    table: Table = [head]
    outside = []
    for place, cell in enumerate(t_new, 1):
        if cell is None or cell == "":
            table.append([CellError("#N/A", "t_new is blank here.")] * len(head))
            continue
        if isinstance(cell, bool) or not isinstance(cell, int | float | str):
            raise TextInRange(argument="t_new", place=place, given=repr(cell))
        t = kelvin(cell if isinstance(cell, str) else float(cell), "t_new", fit.settings.scale)
        found = predict(fit, t)
        gone = missing(fit, "a limit")
        widths = [found.confidence, found.prediction]
        row: list[object] = [t, gone if found.u is None else found.u, found.outside]
        row += _half_widths(found.log, widths, float, gone)
        row += _half_widths(found.log, widths, fit.measure.inside, gone)
        if len(names) > 2:
            row += _half_widths(found.log, widths, fit.measure.from_ln, gone)
        table.append(row)
        if found.outside:
            outside.append(t)
    return finite(table), outside


def temperatures(fit: Fit, y_value: list[object]) -> tuple[Table, list[FittedTemperature]]:
    """The temperatures of values, with limits; a value alone that has none is its error, in a range its row's."""
    head: list[object] = ["T [K]", "u(T) [K]", "lower limit [K]", "upper limit [K]", "outside the points [K]"]
    table: Table = [[fit.measure.label, *head]]
    answers = []
    for place, cell in enumerate(y_value, 1):
        if cell is None or cell == "":
            table.append([CellError("#N/A", "y_value is blank here.")] * 6)
            continue
        if isinstance(cell, bool) or not isinstance(cell, int | float):
            raise TextInRange(argument="y_value", place=place, given=repr(cell))
        try:
            found = temperature_of(fit, fit.measure.checked_ln(float(cell), place), f"{cell:g}")
        except ThermofuncsError as error:
            if len(y_value) == 1:
                raise
            table.append([float(cell), *[error.as_cell()] * 5])
            continue
        open_side = CellError("#N/A", "The points set no limit on this side.")
        gone = missing(fit, "a limit") if found.u is None else open_side
        limits = [gone if x is None else x for x in (found.u, found.low, found.high)]
        table.append([float(cell), found.temperature, *limits, found.outside])
        answers.append(found)
    return finite(table), answers


def points(fit: Fit) -> Table:
    """Each row as given: its point's residual, standardised residual, leverage and Cook's distance."""
    log = fit.measure.log_name
    relative = f" of {fit.law.symbol} over the fitted one" if fit.settings.constant_in_value else ""
    head: list[object] = [
        "row", "T [K]", log, f"fitted {log}", f"residual{relative}", "standardised residual", "leverage",
        "Cook's distance",
    ]  # fmt: skip
    table: Table = [[i + 1, *[BLANK_ROW] * 7] for i in range(fit.points.given)]
    for d in diagnose(fit):
        why = CellError("#N/A", "The fit passes through this point, whose residual then says nothing.")
        table[d.row] = [
            d.row + 1, d.temperature, d.observed, d.fitted, d.residual,
            why if d.standardised is None else d.standardised, d.leverage, why if d.cook is None else d.cook,
        ]  # fmt: skip
    return finite([head, *table])
