"""The one door to the functions: from the values of cells to the value of a cell, a range or an error."""

from __future__ import annotations

import difflib
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, cast

from thermofuncs.catalogue import functions
from thermofuncs.catalogue.declaration import BROADCAST, Function
from thermofuncs.catalogue.ranges import (
    Ranges,
    arguments_of_cell,
    is_range,
    over_range,
    ranges_of,
    shape_of,
    stopped_by,
)
from thermofuncs.catalogue.reading import PLAIN, PassedError, options_of
from thermofuncs.catalogue.single import computed, read_arguments
from thermofuncs.errors import BadArguments, CellError, ThermofuncsError, TooManyArguments, UnknownFunction
from thermofuncs.working import Record, Step

SINGLE = (float, str)  # what most cells hold, known at a glance not to be a range
EXPLAINED_CELLS = 2_000  # a range's cautions are gathered from at most so many of its cells


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
        if ranges := ranges_of(function, arguments):
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
        height, width = shape_of(function, ranges)
        for i in range(min(height * width, EXPLAINED_CELLS)):
            one = arguments_of_cell(arguments, ranges, *divmod(i, width))
            inner = _explained_cell(function, one, ranges)
            if isinstance(inner.result, CellError) and inner.result.sentence:
                record.caution(inner.result.sentence)
            for sentence in inner.cautions:
                record.caution(sentence)
        if height * width > EXPLAINED_CELLS:
            record.caution(f"Only the first {EXPLAINED_CELLS} cells of the range were looked at.")
    return Explanation(result, (), tuple(record.cautions))


def _explained_cell(function: Function, one: Sequence[object], ranges: Ranges) -> Explanation:
    stopped = stopped_by(function, one, ranges)
    return explain(function.name, one) if stopped is None else Explanation(stopped, (), ())


def run(function: Function, arguments: Sequence[object], record: Record | None) -> object:
    """Evaluate a function; raises ThermofuncsError or PassedError."""
    declared = function.arguments
    if len(arguments) > len(declared) and not (declared and declared[-1].variadic):
        raise TooManyArguments(function=function.signature, given=len(arguments), most=len(declared))
    options = options_of(function, arguments) if function.options else PLAIN
    table = function.result_shape == "table"  # it is of one thing, and reads no range as many
    for argument, value in zip(declared, arguments, strict=False):
        if type(value) not in SINGLE and argument.kind in BROADCAST and is_range(value) and not table:
            return over_range(function, arguments, options)
    values, unit = read_arguments(function, arguments, options)
    return computed(function, values, unit, record)


def _from_python(value: object) -> object:
    """A value from Python as one of a cell: tuples as lists, other sequences' rows as lists."""
    if isinstance(value, tuple):
        value = list(value)
    if isinstance(value, list):
        return [list(row) if isinstance(row, list | tuple) else [row] for row in value]
    if hasattr(value, "ndim") and cast("Any", value).ndim == 0:
        return cast("Any", value).item()
    return value
