"""Reading the values of cells into what the engine takes."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from itertools import chain

from thermofuncs.catalogue.declaration import BLANK, Argument, Function
from thermofuncs.errors import (
    BadOptionValue,
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
DEGREES = ("t_ref=", "u_T=")  # options whose number may have a unit behind it


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
    others : tuple of pairs. Further words with an empty text, and names of ``name=value`` with their value.
    """

    extrapolate: bool = False
    atm: bool = False
    scale: str = "K"
    others: tuple[tuple[str, str], ...] = ()


PLAIN = Options()


@lru_cache(maxsize=512)
def read_options(text: str, known: tuple[str, ...], function: str) -> Options:
    """The options of a text of words and ``name=value`` pairs separated by spaces.

    Parameters
    ----------
    text : str. A word that is no option goes on with the value before it: ``apparent=pH 7.5``.
    known : tuple of str. The function's words, and names of pairs with their sign: ``level=``.
    function : str.
    """
    chosen: dict[str, object] = {}
    others: dict[str, str] = {}
    for word, value in _pairs(text, known, function):
        if word in SCALES:
            if chosen.get("scale", word) != word:
                raise UnknownOption(word=text, function=f"TF.{function}", known="degC or degF, not both")
            chosen["scale"] = word
        elif word in {"extrapolate", "atm"}:
            chosen[word] = True
        elif others.setdefault(word, value) != value:
            raise BadOptionValue(given=f"{word}{value}", needed=f"one {word}", example=f"{word}{others[word]}")
    return Options(**chosen, others=tuple(sorted(others.items())))  # type: ignore[arg-type]  # the names of the fields


def _pairs(text: str, known: tuple[str, ...], function: str) -> list[tuple[str, str]]:
    """Words with an empty text, and names of pairs with their values."""
    found: list[tuple[str, str]] = []
    for word in text.split():
        name, sign, value = word.partition("=")
        if sign and name + sign in known:
            found.append((name + sign, value))
        elif word in known and not sign:
            if word in SCALES and found and found[-1][0] in DEGREES and not found[-1][1].isalpha():
                _refuse_two_readings(*found[-1], word)
            found.append((word, ""))
        elif not sign and found and found[-1][0].endswith("="):
            found[-1] = (found[-1][0], f"{found[-1][1]} {word}".strip())
        else:
            raise UnknownOption(word=word, function=f"TF.{function}", known=", ".join(known) or "none")
    return found


def _refuse_two_readings(name: str, value: str, scale: str) -> None:
    """Refuse a scale right behind a bare number: it may belong to the number, or to all temperatures."""
    try:
        float(value)
    except ValueError:
        return
    needed = f"the unit without a space, or {scale} in front for all temperatures,"
    raise BadOptionValue(given=f"{name}{value} {scale}", needed=needed, example=f"{name}{value}{scale}")


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
    if type(value) is not list:
        value = [value.ravel().tolist()] if hasattr(value, "ravel") else [[value]]
    if value and type(value[0]) is not list:
        value = cells(value)
    flat = list(chain.from_iterable(value))
    kinds = set(map(type, flat))
    if CellError in kinds:
        first_error([flat])
    return [as_cell(cell, argument) for cell in flat] if int in kinds else flat


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
