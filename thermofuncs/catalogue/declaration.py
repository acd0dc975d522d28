"""What a worksheet function is: its name, arguments, units, example, and the engine function behind it."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final, Literal

Kind = Literal[
    "temperature",  # a number in kelvin (or the scale of the options), or a quantity text
    "number",  # a number in the argument's unit, or a quantity text of its dimension
    "text",
    "unit",  # the unit of the answer
    "input unit",  # the unit of another argument's bare number
    "flag",  # true or false
    "name",  # the name of a worksheet function
    "list",  # a range read as one list of cells
    "table",  # a range kept as rows
    "data",  # the user's table of data
    "options",
    "any",  # handed on as it came
]
BROADCAST: Final = ("temperature", "number", "text", "unit")


class Blank:
    """A single cell that is blank, which is neither zero nor an argument left out."""

    def __repr__(self) -> str:
        """Show what it is."""
        return "BLANK"


BLANK: Final = Blank()


@dataclass(frozen=True, slots=True)
class Argument:
    """One argument of a worksheet function.

    Parameters
    ----------
    name : str. Lower case with underscores; never a keyword of the hosts.
    meaning : str. What it is, in a few words.
    kind : Kind. How a cell's value is read.
    unit : str. The unit of a bare number, ``1`` where it has none.
    optional : bool. May be left out.
    variadic : bool. The last one: any number of further values.
    unit_from : str. The argument that may state another unit for a bare number of this one.
    """

    name: str
    meaning: str
    kind: Kind
    unit: str = ""
    optional: bool = False
    variadic: bool = False
    unit_from: str = ""


@dataclass(frozen=True, slots=True)
class Function:
    """A worksheet function.

    Parameters
    ----------
    name : str. Without the prefix, such as ``LNK``.
    group : str. The group it stands in.
    summary : str. One line: what it gives, with the unit.
    arguments : tuple of Argument.
    result_unit : str. Unit of the answer; ``1`` where it has none, ``text`` or ``table`` otherwise.
    result_shape : scalar, or table for one that gives rows whatever its arguments.
    example : tuple. Arguments that give an answer.
    compute : callable. Takes the arguments in order, read, and ``record``.
    vector : callable or None. The same over an array of temperatures, the others single.
    options : tuple of str. The option words that it knows.
    """

    name: str
    group: str
    summary: str
    arguments: tuple[Argument, ...]
    result_unit: str
    example: tuple[object, ...]
    compute: Callable[..., object]
    vector: Callable[..., object] | None = None
    result_shape: Literal["scalar", "table"] = "scalar"
    options: tuple[str, ...] = ()

    @property
    def required(self) -> int:
        """How many arguments must be given."""
        return sum(not a.optional and not a.variadic for a in self.arguments)

    @property
    def signature(self) -> str:
        """The call as it is written, optional arguments in brackets."""
        shown = [
            f"[{a.name}]" if a.optional else f"{a.name}, …" if a.variadic else a.name for a in self.arguments
        ]
        return f"TF.{self.name}({', '.join(shown)})"
