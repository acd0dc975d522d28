"""Reading the values of cells into what the engine takes."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import lru_cache

from thermofuncs.catalogue.declaration import BLANK, Argument, Function
from thermofuncs.errors import (
    BlankArgument,
    CellError,
    MissingArgument,
    QuantityOutsideNumbers,
    ThermofuncsError,
    UnknownOption,
    WrongType,
)
from thermofuncs.substances.user_table import UserData, parse
from thermofuncs.units import dimension, kelvin, quantity

SCALES = ("degC", "degF")


class PassedError(Exception):
    """An error value that came in with an argument and goes out unchanged."""

    def __init__(self, error: CellError) -> None:
        super().__init__()
        self.error = error


@dataclass(frozen=True, slots=True)
class Options:
    """The options of a call, read.

    Parameters
    ----------
    extrapolate : bool. Continue the data with a constant Cp.
    atm : bool. Gases at a standard pressure of 1 atm.
    scale : str. Scale of bare temperatures.
    """

    extrapolate: bool = False
    atm: bool = False
    scale: str = "K"


PLAIN = Options()


@lru_cache(maxsize=512)
def read_options(text: str, known: tuple[str, ...], function: str) -> Options:
    """The options of a text of words separated by spaces."""
    chosen: dict[str, object] = {}
    for word in text.split():
        if word not in known:
            raise UnknownOption(word=word, function=f"TF.{function}", known=", ".join(known) or "none")
        if word in SCALES:
            if chosen.get("scale", word) != word:
                raise UnknownOption(word=text, function=f"TF.{function}", known="degC or degF, not both")
            chosen["scale"] = word
        else:
            chosen[word] = True
    return Options(**chosen)  # type: ignore[arg-type]  # the words are the names of the fields


def described(value: object) -> str:
    """What a value is, for a sentence."""
    if isinstance(value, bool):
        return f"the truth value {str(value).upper()}"
    if isinstance(value, int | float):
        return f"the number {value:g}"
    if isinstance(value, str):
        return f'the text "{value[:60]}"'
    return "a range of cells" if isinstance(value, list) else f"a {type(value).__name__}"


def cells(value: object) -> list[list[object]]:
    """A value as rows: a range as it is, a single value as one cell."""
    if isinstance(value, list):
        return [list(row) if isinstance(row, list | tuple) else [row] for row in value]
    return [[value]]


def first_error(rows: Sequence[Sequence[object]]) -> None:
    """Raise PassedError for the first error value in row order."""
    for row in rows:
        for cell in row:
            if type(cell) is CellError:
                raise PassedError(cell)


def as_float(value: float, argument: Argument) -> float:
    """A number as the number of a cell; an integer from Python may be too large for one."""
    try:
        return float(value)
    except OverflowError:
        raise QuantityOutsideNumbers(argument=argument.name, given="an integer beyond 1e308") from None


def read_temperature(value: object, argument: Argument, options: Options) -> float:
    """A temperature in kelvin."""
    if type(value) is float and options is PLAIN and 0.0 < value < float("inf"):
        return value
    if isinstance(value, bool) or not isinstance(value, int | float | str):
        raise WrongType(
            argument=argument.name, given=described(value), needed="a temperature: a number or a text with unit"
        )
    return kelvin(value if isinstance(value, str) else as_float(value, argument), argument.name, options.scale)


def read_number(value: object, argument: Argument, _: Options) -> float:
    """A number in the unit of the argument."""
    if type(value) is float:
        return quantity(value, argument.unit, argument.name)
    if isinstance(value, bool) or not isinstance(value, int | float | str):
        raise WrongType(
            argument=argument.name, given=described(value), needed=f"a number in {argument.unit}"
        )
    if isinstance(value, str) and argument.unit == "1":
        raise WrongType(argument=argument.name, given=described(value), needed="a number")
    return quantity(value if isinstance(value, str) else as_float(value, argument), argument.unit, argument.name)


def read_text(value: object, argument: Argument, _: Options) -> str:
    """A text."""
    if not isinstance(value, str):
        raise WrongType(argument=argument.name, given=described(value), needed=f"a text: {argument.meaning}")
    if not value.strip():
        raise WrongType(
            argument=argument.name, given="an empty text", needed=f"a text: {argument.meaning}"
        )
    return value


def read_flag(value: object, argument: Argument, _: Options) -> bool:
    """True or false; 1 or 0 mean the same."""
    if isinstance(value, bool) or (isinstance(value, int | float) and value in (0, 1)):
        return bool(value)
    raise WrongType(argument=argument.name, given=described(value), needed="TRUE or FALSE")


def read_unit(value: object, argument: Argument, options: Options) -> str:
    """The text of a unit, which must be one of the known spellings."""
    text = read_text(value, argument, options)
    dimension(text, argument.name)
    return text


def as_cell(value: object, argument: Argument) -> object:
    """A cell of a list or a table: a whole number as the float that a cell would hold."""
    return as_float(value, argument) if type(value) is int else value


def read_list(value: object, argument: Argument, _: Options) -> list[object]:
    """A range as one list, row by row."""
    rows = cells(value)
    first_error(rows)
    return [as_cell(cell, argument) for row in rows for cell in row]


def read_table(value: object, argument: Argument, _: Options) -> list[list[object]]:
    """A range as rows."""
    if not isinstance(value, list):
        raise WrongType(argument=argument.name, given=described(value), needed=f"a range: {argument.meaning}")
    rows = cells(value)
    first_error(rows)
    return [[as_cell(cell, argument) for cell in row] for row in rows]


def read_data(value: object, argument: Argument, options: Options) -> UserData:
    """The user's table of data."""
    return parse(read_table(value, argument, options), argument.name)


READERS: dict[str, Callable[[object, Argument, Options], object]] = {
    "temperature": read_temperature,
    "number": read_number,
    "text": read_text,
    "unit": read_unit,
    "input unit": read_unit,
    "flag": read_flag,
    "name": read_text,
    "list": read_list,
    "table": read_table,
    "data": read_data,
}


def in_stated_unit(function: Function, arguments: Sequence[object], argument: Argument, value: object) -> object:
    """A bare number as a quantity text in the unit that another argument states for it."""
    if isinstance(value, bool) or not isinstance(value, int | float):
        return value
    for other, unit in zip(function.arguments, arguments, strict=False):
        if other.name == argument.unit_from and isinstance(unit, str) and unit:
            return f"{value!r} {unit}"
    return value


def options_of(function: Function, arguments: Sequence[object]) -> Options:
    """The options of a call, or the plain ones."""
    for argument, value in zip(function.arguments, arguments, strict=False):
        if argument.kind == "options" and value is not None and value is not BLANK and value != "":
            if type(value) is CellError:
                raise PassedError(value)
            text = read_text(value, argument, PLAIN)
            options = read_options(" ".join(text.split()), function.options, function.name)
            return PLAIN if options == PLAIN else options
    return PLAIN


def missing(function: Function, argument: Argument, *, blank: bool) -> ThermofuncsError:
    """The error for a required argument that is not there."""
    kind = BlankArgument if blank else MissingArgument
    return kind(argument=argument.name, function=f"TF.{function.name}", meaning=argument.meaning)
