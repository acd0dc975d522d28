"""One call over ranges: shapes, blanks and errors cell by cell, and the array path over temperatures."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any, cast

from thermofuncs.catalogue.declaration import BLANK, BROADCAST, Argument, Function
from thermofuncs.catalogue.reading import PLAIN, READERS, Options, PassedError, cells, missing, options_of
from thermofuncs.catalogue.single import computed, read_arguments
from thermofuncs.errors import CellError, NotANumber, ShapesDiffer, ThermofuncsError
from thermofuncs.units import factor

ANY_TEMPERATURE = 298.15  # stands for a range of temperatures while the other arguments are read

Ranges = dict[int, list[list[object]]]  # by place among the arguments


def is_range(value: object) -> bool:
    """Whether a value is a range of cells, or an array from Python."""
    return isinstance(value, list) or (hasattr(value, "ndim") and hasattr(value, "astype"))


def _rows(value: object) -> list[list[object]]:
    if isinstance(value, list):
        return cells(value)
    array = cast("Any", value)
    return cast("list[list[object]]", (array.reshape(-1, 1) if array.ndim == 1 else array).tolist())


def _spread(function: Function, arguments: Sequence[object]) -> list[int]:
    """The places of the arguments that are spread over the answer; a table is of one thing."""
    if function.result_shape == "table":
        return []
    pairs = enumerate(zip(function.arguments, arguments, strict=False))
    return [i for i, (a, value) in pairs if a.kind in BROADCAST and is_range(value)]


def ranges_of(function: Function, arguments: Sequence[object]) -> Ranges:
    """The arguments that are spread over the answer, as rows, by their place."""
    return {place: _rows(arguments[place]) for place in _spread(function, arguments)}


def shape_of(function: Function, ranges: Ranges) -> tuple[int, int]:
    """The shape of the answer: rows against columns give the table of both."""
    shapes: dict[str, tuple[int, int]] = {}
    for place, rows in ranges.items():
        name = function.arguments[place].name
        width = max((len(row) for row in rows), default=0)
        if not rows or not width or any(len(row) != width for row in rows):
            raise ShapesDiffer(shapes=f"{name} is empty or ragged")
        shapes[name] = (len(rows), width)
    height = max(r for r, _ in shapes.values())
    width = max(c for _, c in shapes.values())
    if any(r not in (1, height) or c not in (1, width) for r, c in shapes.values()):
        text = ", ".join(f"{name} is {r} by {c}" for name, (r, c) in shapes.items())
        raise ShapesDiffer(shapes=text)
    return height, width


def arguments_of_cell(
    arguments: Sequence[object], ranges: Ranges, row: int, column: int
) -> list[object]:
    """The arguments of one cell of the answer."""
    one = list(arguments)
    for place, rows in ranges.items():
        line = rows[row if len(rows) > 1 else 0]
        cell = line[column if len(line) > 1 else 0]
        one[place] = BLANK if cell is None or cell == "" else cell
    return one


def stopped_by(function: Function, one: Sequence[object], ranges: Ranges) -> CellError | None:
    """The error of a cell for which a range holds an error value, or nothing, optional or not."""
    for place in ranges:
        if type(error := one[place]) is CellError:
            return error
    for place in ranges:
        if one[place] is BLANK:
            return missing(function, function.arguments[place], blank=True).as_cell()
    return None


def over_range(function: Function, arguments: Sequence[object], options: Options) -> object:
    """The answer of a call in which at least one argument is spread over a range."""
    spread = _spread(function, arguments)
    if function.vector is not None and len(spread) == 1 and function.arguments[spread[0]].kind == "temperature":
        return _over_temperatures(function, arguments, options, spread[0])
    ranges = ranges_of(function, arguments)
    height, width = shape_of(function, ranges)
    return [
        [
            _cell(function, arguments_of_cell(arguments, ranges, row, column), ranges)
            for column in range(width)
        ]
        for row in range(height)
    ]


def _cell(function: Function, one: Sequence[object], ranges: Ranges) -> object:
    if (stopped := stopped_by(function, one, ranges)) is not None:
        return stopped
    try:
        options = options_of(function, one) if function.options else PLAIN
        return computed(function, *read_arguments(function, one, options), None)
    except PassedError as passed:
        return passed.error
    except ThermofuncsError as error:
        return error.as_cell()


def _over_temperatures(
    function: Function, arguments: Sequence[object], options: Options, place: int
) -> object:
    """One call of the array path for all cells that are plain temperatures, the scalar path for the rest."""
    import numpy as np  # noqa: PLC0415  a single cell does not pay for the array path

    given = cast("Any", arguments[place])
    if not isinstance(given, list) and given.dtype.kind in "fiu" and given.size:
        flat = np.ascontiguousarray(given, dtype=np.float64).ravel()
        values, unit = _read_at(function, arguments, options, place)
        try:
            return _vector(function, values, unit, place, _in_kelvin(flat, options)).reshape(given.shape)
        except ThermofuncsError:
            pass  # at least one cell has no answer: each cell then says for itself
    ranges = ranges_of(function, arguments)
    shape_of(function, ranges)
    values, unit = _read_at(function, arguments, options, place)
    answer, kelvins, places = _sorted_out(function, place, ranges[place], options)
    if not kelvins:
        return answer
    try:
        results = _vector(function, values, unit, place, np.array(kelvins)).tolist()
    except ThermofuncsError:
        results = [_scalar(function, values, unit, place, t) for t in kelvins]
    for (i, j), value in zip(places, results, strict=True):
        answer[i][j] = value
    return answer


def _read_at(
    function: Function, arguments: Sequence[object], options: Options, place: int
) -> tuple[list[object], str | None]:
    """The other arguments read, with any temperature in the place of the range."""
    single = list(arguments)
    single[place] = ANY_TEMPERATURE
    return read_arguments(function, single, options)


def _sorted_out(
    function: Function, place: int, rows: list[list[object]], options: Options
) -> tuple[list[list[object]], list[float], list[tuple[int, int]]]:
    """The answer with its blanks and errors, and the temperatures [K] that are to be computed, with their places."""
    argument = function.arguments[place]
    blank = missing(function, argument, blank=True).as_cell()
    answer: list[list[object]] = [[blank] * len(row) for row in rows]
    kelvins: list[float] = []
    places: list[tuple[int, int]] = []
    for i, row in enumerate(rows):
        for j, cell in enumerate(row):
            if cell is None or cell == "":
                continue
            try:
                kelvins.append(_temperature(cell, argument, options))
                places.append((i, j))
            except PassedError as passed:
                answer[i][j] = passed.error
            except ThermofuncsError as error:
                answer[i][j] = error.as_cell()
    return answer, kelvins, places


def _temperature(cell: object, argument: Argument, options: Options) -> float:
    if type(cell) is CellError:
        raise PassedError(cell)
    return cast("float", READERS["temperature"](cell, argument, options))


def _in_kelvin(flat: Any, options: Options) -> Any:  # noqa: ANN401  numpy arrays, not loaded for a scalar
    return flat if options.scale == "K" else _converted(flat, options.scale)


def _converted(flat: Any, scale: str) -> Any:  # noqa: ANN401  as above
    """Temperatures of a scale in kelvin, over an array."""
    return flat + 273.15 if scale == "degC" else (flat - 32.0) * 5.0 / 9.0 + 273.15


def _vector(
    function: Function, values: list[object], unit: str | None, place: int, kelvins: Any  # noqa: ANN401
) -> Any:  # noqa: ANN401  as above
    import numpy as np  # noqa: PLC0415  a single cell does not pay for the array path

    single = list(values)
    single[place] = kelvins
    with np.errstate(over="ignore", invalid="ignore"):
        result = cast("Any", function.vector)(*single)
        if unit is not None and unit != function.result_unit:
            result = result * factor(function.result_unit, unit)
        if not math.isfinite(result.sum()):
            raise NotANumber(function=f"TF.{function.name}")
    return result


def _scalar(function: Function, values: list[object], unit: str | None, place: int, t: float) -> object:
    single = list(values)
    single[place] = t
    try:
        return computed(function, single, unit, None)
    except ThermofuncsError as error:
        return error.as_cell()
