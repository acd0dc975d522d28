"""The one door to the functions: from the values of cells to the value of a cell, a range or an error."""

from __future__ import annotations

import difflib
import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, cast

from thermofuncs.catalogue import functions
from thermofuncs.catalogue.declaration import BLANK, BROADCAST, Argument, Function
from thermofuncs.catalogue.reading import (
    PLAIN,
    READERS,
    Options,
    PassedError,
    cells,
    in_stated_unit,
    missing,
    options_of,
)
from thermofuncs.errors import (
    BadArguments,
    CellError,
    NotANumber,
    ShapesDiffer,
    ThermofuncsError,
    TooManyArguments,
    UnknownFunction,
    WrongType,
)
from thermofuncs.units import convert, factor
from thermofuncs.working import Record, Step, shown

ANY_TEMPERATURE = 298.15  # stands for a range of temperatures while the other arguments are read
APART = ("unit", "input unit")  # kinds that are no argument of the computation
SINGLE = (float, str)  # what most cells hold, known at a glance not to be a range
EXPLAINED_CELLS = 2_000  # a range's cautions are gathered from at most so many of its cells


Ranges = dict[int, list[list[object]]]  # by place among the arguments


@dataclass(frozen=True, slots=True)
class Explanation:
    """A result with the steps and cautions behind it."""

    result: object
    steps: tuple[Step, ...]
    cautions: tuple[str, ...]


def find(name: str) -> Function:
    """The function of a name, in any spelling of its letters, with or without the prefix."""
    plain = name.strip().upper()
    for prefix in ("TF.", "TF_"):
        plain = plain.removeprefix(prefix)
    found = functions.FUNCTIONS.get(plain)
    if found is None:
        near = difflib.get_close_matches(plain, functions.FUNCTIONS, n=4, cutoff=0.4)
        raise UnknownFunction(name=f'"{name[:40]}"', near=", ".join(near) or "see TF.FUNCTIONLIST()")
    return found


def evaluate(name: str, arguments: Sequence[object]) -> Any:  # noqa: ANN401  a cell holds any value
    """The value that a cell shows: a failure is a CellError with its sentence, never an exception.

    Parameters
    ----------
    name : str. The function.
    arguments : sequence. Values of cells: numbers, texts, lists of rows; None where left out, BLANK for a
        blank single cell, CellError for an error value.
    """
    try:
        return run(functions.FUNCTIONS.get(name) or find(name), arguments, None)
    except PassedError as passed:
        return passed.error
    except ThermofuncsError as error:
        return error.as_cell()


def call(name: str, *arguments: object) -> Any:  # noqa: ANN401  as above
    """The value of a worksheet function, from Python.

    Parameters
    ----------
    name : str. The function, such as ``LNK``.
    arguments : numbers, texts, None where left out; ranges and tables as lists of rows or numpy arrays.

    Returns
    -------
    float, str, bool, or a list of rows; a numpy array where an array of temperatures came in and each
    had an answer. Cells of a range that have none are CellError with its sentence.

    Raises
    ------
    ThermofuncsError: with the sentence that a worksheet shows by TF.CAUTIONS.

    Examples
    --------
    >>> round(call("LGK", "CO(g) + H2O(g) = CO2(g) + H2(g)", 1000.0), 3)
    0.157
    """
    try:
        return run(find(name), [_from_python(a) for a in arguments], None)
    except PassedError as passed:
        raise BadArguments(text=f"An argument holds the error value {passed.error}.") from None


def explain(name: str, arguments: Sequence[object]) -> Explanation:
    """The result with its steps and cautions; a range's cautions are those of its cells together."""
    record = Record()
    try:
        function = find(name)
        if ranges := _ranges(function, arguments):
            return _explained_range(function, arguments, ranges)
        result = run(function, arguments, record)
    except PassedError as passed:
        result = passed.error
    except ThermofuncsError as error:
        result = error.as_cell()
    return Explanation(result, tuple(record.steps), tuple(record.cautions))


def _explained_range(function: Function, arguments: Sequence[object], ranges: Ranges) -> Explanation:
    result = evaluate(function.name, arguments)
    record = Record()
    if isinstance(result, list):
        height, width = _shape(function, ranges)
        for i in range(min(height * width, EXPLAINED_CELLS)):
            one = _arguments_of_cell(arguments, ranges, *divmod(i, width))
            inner = _explained_cell(function, one, ranges)
            if isinstance(inner.result, CellError) and inner.result.sentence:
                record.caution(inner.result.sentence)
            for sentence in inner.cautions:
                record.caution(sentence)
        if height * width > EXPLAINED_CELLS:
            record.caution(f"Only the first {EXPLAINED_CELLS} cells of the range were looked at.")
    return Explanation(result, (), tuple(record.cautions))


def _explained_cell(function: Function, one: Sequence[object], ranges: Ranges) -> Explanation:
    stopped = _stopped(function, one, ranges)
    return explain(function.name, one) if stopped is None else Explanation(stopped, (), ())


def run(function: Function, arguments: Sequence[object], record: Record | None) -> object:
    """Evaluate a function; raises ThermofuncsError or PassedError."""
    declared = function.arguments
    if len(arguments) > len(declared) and not (declared and declared[-1].variadic):
        raise TooManyArguments(function=function.signature, given=len(arguments), most=len(declared))
    options = options_of(function, arguments) if function.options else PLAIN
    for argument, value in zip(declared, arguments, strict=False):
        if type(value) not in SINGLE and argument.kind in BROADCAST and _is_range(value):
            if function.result_shape == "table":
                needed = f"one value ({argument.meaning})"
                raise WrongType(argument=argument.name, given="a range of cells", needed=needed)
            return _over_range(function, arguments, options)
    values, unit = _read(function, arguments, options)
    result = function.compute(*values, record=record)
    if unit is not None and unit != function.result_unit:
        result = _in_unit(cast("float", result), function.result_unit, unit, record)
    if type(result) is float and not math.isfinite(result):
        raise NotANumber(function=f"TF.{function.name}")
    return result


def _read(function: Function, arguments: Sequence[object], options: Options) -> tuple[list[object], str | None]:
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


def _is_range(value: object) -> bool:
    return isinstance(value, list) or (hasattr(value, "ndim") and hasattr(value, "astype"))


def _from_python(value: object) -> object:
    """A value from Python as one of a cell: tuples as lists, other sequences' rows as lists."""
    if isinstance(value, tuple):
        value = list(value)
    if isinstance(value, list):
        return [list(row) if isinstance(row, list | tuple) else [row] for row in value]
    if hasattr(value, "ndim") and cast("Any", value).ndim == 0:
        return cast("Any", value).item()
    return value


def _rows(value: object) -> list[list[object]]:
    if isinstance(value, list):
        return cells(value)
    array = cast("Any", value)
    return cast("list[list[object]]", (array.reshape(-1, 1) if array.ndim == 1 else array).tolist())


def _spread(function: Function, arguments: Sequence[object]) -> list[int]:
    """The places of the arguments that are spread over the answer."""
    pairs = enumerate(zip(function.arguments, arguments, strict=False))
    return [i for i, (a, value) in pairs if a.kind in BROADCAST and _is_range(value)]


def _ranges(function: Function, arguments: Sequence[object]) -> Ranges:
    """The arguments that are spread over the answer, as rows, by their place."""
    return {place: _rows(arguments[place]) for place in _spread(function, arguments)}


def _shape(function: Function, ranges: Ranges) -> tuple[int, int]:
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


def _arguments_of_cell(
    arguments: Sequence[object], ranges: Ranges, row: int, column: int
) -> list[object]:
    """The arguments of one cell of the answer."""
    one = list(arguments)
    for place, rows in ranges.items():
        line = rows[row if len(rows) > 1 else 0]
        cell = line[column if len(line) > 1 else 0]
        one[place] = BLANK if cell is None or cell == "" else cell
    return one


def _stopped(function: Function, one: Sequence[object], ranges: Ranges) -> CellError | None:
    """The error of a cell for which a range holds an error value, or nothing, optional or not."""
    for place in ranges:
        if type(error := one[place]) is CellError:
            return error
    for place in ranges:
        if one[place] is BLANK:
            return missing(function, function.arguments[place], blank=True).as_cell()
    return None


def _over_range(function: Function, arguments: Sequence[object], options: Options) -> object:
    spread = _spread(function, arguments)
    if function.vector is not None and len(spread) == 1 and function.arguments[spread[0]].kind == "temperature":
        return _over_temperatures(function, arguments, options, spread[0])
    ranges = _ranges(function, arguments)
    height, width = _shape(function, ranges)
    return [
        [
            _cell(function, _arguments_of_cell(arguments, ranges, row, column), ranges)
            for column in range(width)
        ]
        for row in range(height)
    ]


def _cell(function: Function, one: Sequence[object], ranges: Ranges) -> object:
    if (stopped := _stopped(function, one, ranges)) is not None:
        return stopped
    try:
        return run(function, one, None)
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
    ranges = _ranges(function, arguments)
    _shape(function, ranges)
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
    return _read(function, single, options)


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
    return flat if options.scale == "K" else convert_array(flat, options.scale)


def convert_array(flat: Any, scale: str) -> Any:  # noqa: ANN401  as above
    """Temperatures of a scale in kelvin, over an array."""
    return flat + 273.15 if scale == "degC" else (flat - 32.0) * 5.0 / 9.0 + 273.15


def _vector(
    function: Function, values: list[object], unit: str | None, place: int, kelvins: Any  # noqa: ANN401
) -> Any:  # noqa: ANN401  as above
    single = list(values)
    single[place] = kelvins
    result = cast("Any", function.vector)(*single)
    if unit is not None and unit != function.result_unit:
        result = result * factor(function.result_unit, unit)
    return result


def _scalar(function: Function, values: list[object], unit: str | None, place: int, t: float) -> object:
    single = list(values)
    single[place] = t
    try:
        result = function.compute(*single, record=None)
        if unit is not None and unit != function.result_unit:
            result = _in_unit(cast("float", result), function.result_unit, unit, None)
    except ThermofuncsError as error:
        return error.as_cell()
    return result
