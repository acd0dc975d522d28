"""Worksheet functions that fit measured data."""

from __future__ import annotations

import math
from collections.abc import Callable
from functools import lru_cache

from thermofuncs.catalogue import fit_tables
from thermofuncs.catalogue.declaration import Argument, Function
from thermofuncs.catalogue.reading import Options
from thermofuncs.errors import BadOptionValue, NoUncertainty, OptionsClash, ThermofuncsError
from thermofuncs.fits import (
    PLAIN,
    Fit,
    Settings,
    cautions,
    distance,
    fit,
    reaction_row,
    record_estimate,
    record_fit,
    statistic_of,
)
from thermofuncs.units import factor, kelvin, parse_quantity
from thermofuncs.working import Record

GROUP = "Fits of measured data"
LAW = Argument(
    "law", "van't Hoff, Clarke-Glew, Arrhenius, Eyring, Clausius-Clapeyron or Antoine", "text"
)
T = Argument("T", 'column of temperatures: numbers in kelvin or texts such as "25 degC"', "list", "K")
Y = Argument("y", "column of measured values, one for each temperature", "list")
Y_IS = Argument(
    "y_is", "what y holds: K, ln K, lg K, pK, or the unit of a rate constant or pressure; K where left out", "text",
    optional=True,
)  # fmt: skip
U = Argument("u", "column of standard uncertainties of y, in the unit of y", "list", optional=True)
WORDS = (
    "u_known", "u_as_weights", "robust", "orthogonal", "cp_slope", "degC", "degF", "level=", "t_ref=", "constant_in=",
    "u_T=", "apparent=",
)  # fmt: skip
OPTIONS = Argument("options", f"words and values: {', '.join(WORDS)}", "options", optional=True)
DATA_ARGUMENTS = (T, Y, Y_IS, U, OPTIONS)
EXAMPLE_T: list[list[object]] = [[283.15], [288.15], [293.15], [298.15], [303.15], [308.15], [313.15]]
EXAMPLE_K: list[list[object]] = [[0.552], [0.678], [0.835], [1.004], [1.221], [1.452], [1.731]]
VALUE_SCALES = {"K", "k", "p"}
LOG_SCALES = {"lnK", "lnk", "lnp"}
Column = list[object]


@lru_cache(maxsize=256)
def settings_of(options: Options) -> Settings:
    """The settings of a fit that a call's options ask for.

    Raises
    ------
    BadOptionValue, OptionsClash
        A value cannot be used, or two options exclude each other.
    """
    chosen = dict(options.others)
    if "u_known" in chosen and "u_as_weights" in chosen:
        raise OptionsClash(first="u_known", second="u_as_weights", why="they give different answers; choose one")
    return Settings(
        level=_level(chosen.get("level=", "0.95")),
        reference=_temperature(chosen["t_ref="], options.scale) if "t_ref=" in chosen else None,
        known="u_known" in chosen,
        constant_in_value=_constant_in_value(chosen.get("constant_in=", "lnK")),
        u_temperature=_u_temperature(chosen["u_T="], options.scale) if "u_T=" in chosen else 0.0,
        orthogonal="orthogonal" in chosen,
        robust="robust" in chosen,
        slope="cp_slope" in chosen,
        apparent=_apparent(chosen["apparent="]) if "apparent=" in chosen else "",
        scale=options.scale,
    )


def _bad(name: str, value: str, needed: str, example: str) -> BadOptionValue:
    return BadOptionValue(given=f"{name}={value}", needed=needed, example=f"{name}={example}")


def _number(name: str, value: str, needed: str, example: str) -> float:
    try:
        number = float(value)
    except ValueError:
        raise _bad(name, value, needed, example) from None
    if not math.isfinite(number):
        raise _bad(name, value, needed, example)
    return number


def _level(value: str) -> float:
    needed = "a level of confidence between 0 and 1"
    level = _number("level", value, needed, "0.95")
    if not 0.0 < level < 1.0:
        raise _bad("level", value, needed, "0.95")
    return level


def _quantity_text(value: str) -> bool:
    try:
        float(value)
    except ValueError:
        return True
    return False


def _temperature(value: str, scale: str) -> float:
    if not value:
        raise _bad("t_ref", value, "a temperature", "298.15")
    return kelvin(value, "t_ref") if _quantity_text(value) else kelvin(float(value), "t_ref", scale)


def _u_temperature(value: str, scale: str) -> float:
    needed = "a standard uncertainty of T above 0, in kelvin or with its unit"
    if _quantity_text(value):
        try:
            number, unit = parse_quantity(value, "u_T")
            kelvins = number * factor(f"{unit} difference" if unit.startswith("deg") else unit, "K difference", "u_T")
        except ThermofuncsError as error:
            raise _bad("u_T", value, f"{needed} ({error.sentence.rstrip('.')})", "0.1") from None
    elif scale == "degF":
        raise _bad("u_T", value, f"{needed} where temperatures are in degF", f"{value}degF or u_T={value}K")
    else:
        kelvins = _number("u_T", value, needed, "0.1")
    if not 0.0 < kelvins < math.inf:
        raise _bad("u_T", value, needed, "0.1")
    return kelvins


def _constant_in_value(value: str) -> bool:
    joined = value.replace(" ", "")
    if joined in VALUE_SCALES | LOG_SCALES:
        return joined in VALUE_SCALES
    raise _bad("constant_in", value, "K or lnK", "K")


def _apparent(value: str) -> str:
    if not value:
        raise _bad("apparent", value, "the condition that the constants hold at", "pH 7.5")
    return value


def _fitted(
    law: str, t: Column, y: Column, y_is: str | None, u: Column | None, options: Options, record: Record | None
) -> Fit:
    """The fit of a call, with its steps and cautions recorded."""
    found = fit(law, t, y, y_is, u, settings_of(options) if options.others or options.scale != "K" else PLAIN)
    if record is not None:
        record_fit(found, record)
        for sentence in cautions(found):
            record.caution(sentence)
    return found


def fit_report(
    law: str, t: Column, y: Column, y_is: str | None, u: Column | None, options: Options, record: Record | None = None
) -> list[list[object]]:
    """The table of a fit."""
    found = _fitted(law, t, y, y_is, u, options, record)
    if record is not None:
        for name in fit_tables.parameters(found):
            record_estimate(found, found.estimate(name), record)
    return fit_tables.report(found)


def fit_value(
    law: str, quantity: str, t: Column, y: Column, y_is: str | None, u: Column | None, options: Options,
    record: Record | None = None,
) -> float:
    """One number of a fit."""
    found = _fitted(law, t, y, y_is, u, options, record)
    if quantity in found.quantities and record is None:
        return found.value(quantity)
    kind, _, inside = quantity.strip().removesuffix(")").partition("(")
    if inside and kind in {"u", "low", "high"}:
        return _uncertainty(found, kind, inside, record)
    statistic = statistic_of(found, quantity)
    if statistic is not None:
        if record is not None:
            record.step(statistic.name, statistic.what, found.solution.estimator, statistic.value, "1")
        return statistic.value
    estimate = found.estimate(found.name_of(quantity))
    if record is not None:
        record_estimate(found, estimate, record)
    return estimate.value


def _uncertainty(found: Fit, kind: str, quantity: str, record: Record | None) -> float:
    """The standard uncertainty of a quantity, or one of its limits."""
    name = found.name_of(quantity)
    if record is None and kind == "u" and (u := found.u(name)) is not None:
        return u
    estimate = found.estimate(name)
    value = {"u": estimate.u, "low": estimate.low, "high": estimate.high}[kind]
    if value is None:
        raise NoUncertainty(what=f"{kind}({quantity})", n=found.points.size, parameters=found.law.count)
    if record is not None:
        record_estimate(found, estimate, record, kind)
    return value


def fit_at(
    law: str, t_new: Column, t: Column, y: Column, y_is: str | None, u: Column | None, options: Options,
    record: Record | None = None,
) -> list[list[object]]:
    """Values at new temperatures, with limits."""
    found = _fitted(law, t, y, y_is, u, options, record)
    table, outside = fit_tables.predictions(found, t_new)
    if record is not None:
        for temperature in outside:
            record.caution(distance(found, temperature))
        if found.points.u_logs is not None and len(set(found.points.u_logs)) > 1:
            record.caution("Prediction limits are for a new point with the root mean square of the stated u.")
    return table


def fit_temperature(
    law: str, y_value: Column, t: Column, y: Column, y_is: str | None, u: Column | None, options: Options,
    record: Record | None = None,
) -> list[list[object]]:
    """The temperature for a value, with limits."""
    found = _fitted(law, t, y, y_is, u, options, record)
    table, answers = fit_tables.temperatures(found, y_value)
    if record is not None:
        for answer in answers:
            if answer.outside:
                record.caution(distance(found, answer.temperature))
            if answer.others:
                others = ", ".join(f"{x:.6g} K" for x in answer.others[:5])
                record.caution(f"The fit has this value at {others} too; the one nearest to the points is given.")
            if answer.u is not None and (answer.low is None or answer.high is None):
                record.caution("The points set no limit on one side: the confidence band does not cross the value.")
    return table


def fit_points(
    law: str, t: Column, y: Column, y_is: str | None, u: Column | None, options: Options, record: Record | None = None
) -> list[list[object]]:
    """Each point's residual, standardised residual, leverage and Cook's distance."""
    return fit_tables.points(_fitted(law, t, y, y_is, u, options, record))


def fit_row(
    reaction: str, law: str, t: Column, y: Column, y_is: str | None, u: Column | None, options: Options,
    record: Record | None = None,
) -> list[list[object]]:
    """A fit as a reaction row of a data table."""
    return fit_tables.finite(reaction_row(_fitted(law, t, y, y_is, u, options, record), reaction))


def _function(
    name: str, summary: str, unit: str, first: tuple[Argument, ...], example: tuple[object, ...],
    compute: Callable[..., object],
) -> Function:
    return Function(
        name, GROUP, summary, (*first, *DATA_ARGUMENTS), unit, (*example, EXAMPLE_T, EXAMPLE_K), compute,
        result_shape="table" if unit == "table" else "scalar", options=WORDS,
    )  # fmt: skip


FUNCTIONS: tuple[Function, ...] = (
    _function(
        "FIT", "Table of a fit: parameters with uncertainties and limits, statistics, tests, cautions.", "table",
        (LAW,), ("van't Hoff",), fit_report,
    ),
    _function(
        "FITVALUE", "One number of a fit: drH in kJ/mol, drS in J/(mol K), u(drH), lnK, Ea, R2, p(curvature), …",
        "unit of the quantity",
        (LAW, Argument("quantity", "such as drH, u(drH), low(drH), r(drH,drS), lnK, Ea, lnA, n, s, R2, AICc", "text")),
        ("van't Hoff", "drH"), fit_value,
    ),
    _function(
        "FITAT", "Table of fitted values at new temperatures, with confidence and prediction limits.", "table",
        (LAW, Argument("t_new", "the new temperatures, one or a range", "list", "K")),
        ("van't Hoff", [[310.0], [330.0]]), fit_at,
    ),
    _function(
        "FITTEMP", "Table of the temperature in K at which a fit has a value, with limits.", "table",
        (LAW, Argument("y_value", "the value, in the terms of y, one or a range", "list")), ("van't Hoff", [[1.0]]),
        fit_temperature,
    ),
    _function(
        "FITPOINTS", "Table of each point: residual, standardised residual, leverage, Cook's distance.", "table",
        (LAW,), ("van't Hoff",), fit_points,
    ),
    _function(
        "FITROW", "A fit as a reaction row for the data argument of reaction functions, with its range as source.",
        "table", (Argument("reaction", "the equation that K belongs to", "text"), LAW),
        ("N2O4(g) = 2 NO2(g)", "van't Hoff"), fit_row,
    ),
)
