"""One call: its arguments read, the function computed, the answer in its unit."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import cast

from thermofuncs.catalogue.declaration import BLANK, Argument, Function
from thermofuncs.catalogue.reading import READERS, Options, PassedError, in_stated_unit, missing
from thermofuncs.errors import BadArguments, CellError, NotANumber, ThermofuncsError
from thermofuncs.units import convert, factor
from thermofuncs.working import Record, shown

APART = ("unit", "input unit")  # kinds that are no argument of the computation


def computed(
    function: Function, values: Sequence[object], unit: str | None, record: Record | None
) -> object:
    """The answer to arguments that were read, in its unit."""
    result = function.compute(*values, record=record)
    if unit is not None and unit != function.result_unit:
        result = _in_unit(cast("float", result), function.result_unit, unit, record)
    if type(result) is float and not math.isfinite(result):
        raise NotANumber(function=f"TF.{function.name}")
    return result


def read_arguments(
    function: Function, arguments: Sequence[object], options: Options
) -> tuple[list[object], str | None]:
    """The arguments read, in order without the unit of the answer, which stands apart."""
    values: list[object] = []
    unit: str | None = None
    wrong: list[ThermofuncsError] = []
    given = len(arguments)
    for i, argument in enumerate(function.arguments):
        if argument.variadic:
            values.append(list(arguments[i:]))
            break
        value = arguments[i] if i < given else None
        kind = argument.kind
        if type(value) is CellError:
            raise PassedError(value)
        if kind == "options" or (value is None and argument.optional):
            values += [] if kind in APART else [options if kind == "options" else None]
            continue
        try:
            read = _read_one(function, arguments, argument, value, options)
        except ThermofuncsError as error:
            wrong.append(error)
            continue
        if kind == "unit":
            unit = cast("str | None", read)
        elif kind != "input unit":
            values.append(read)
    if wrong:
        raise _together(wrong)
    return values, unit


def _read_one(
    function: Function, arguments: Sequence[object], argument: Argument, value: object, options: Options
) -> object:
    """One argument read; None where an optional one is left out or blank."""
    if value is None or value is BLANK:
        if argument.optional:
            return None
        raise missing(function, argument, blank=value is BLANK)
    if argument.kind == "any":
        return value
    if argument.unit_from:
        value = in_stated_unit(function, arguments, argument, value)
    read = READERS[argument.kind](value, argument, options)
    return _checked_unit(function, cast("str", read), argument) if argument.kind == "unit" else read


def _together(wrong: list[ThermofuncsError]) -> ThermofuncsError:
    """One error for all arguments that are wrong, of the kind of the first."""
    if len(wrong) == 1:
        return wrong[0]
    together = BadArguments(text=" ".join(error.sentence for error in wrong))
    together.worksheet_value = wrong[0].worksheet_value  # type: ignore[misc]  # of this one instance
    return together


def _checked_unit(function: Function, unit: str, argument: Argument) -> str:
    """The unit of the answer, refused where it does not fit the function."""
    if function.result_unit == "K":
        convert(300.0, unit, "K", argument.name)
    else:
        factor(unit, function.result_unit, argument.name)
    return unit


def _in_unit(value: float, from_unit: str, into_unit: str, record: Record | None) -> float:
    result = convert(value, from_unit, into_unit)
    if record is not None:
        record.step(
            f"in {into_unit}", f"{from_unit} into {into_unit}", shown(value), result, into_unit
        )
    return result
