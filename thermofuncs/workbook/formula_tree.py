"""A formula's text as a tree of calls, groups, operands and the text between them."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

import formualizer

LONGEST = 65_536
DEEPEST = 100

_TYPE, _SUB = formualizer.TokenType, formualizer.TokenSubType
_RANGE_OPERATORS = frozenset({":", ","})


class UnreadableFormula(ValueError):
    """The formula is not one that a spreadsheet would accept."""


@dataclass(frozen=True, slots=True)
class Text:
    """A piece that stays as it is: a constant, an operator, white space."""

    text: str
    blank: bool = False
    joins_ranges: bool = False


@dataclass(frozen=True, slots=True)
class Operand:
    """A reference, a name or a structured reference."""

    text: str


@dataclass(frozen=True, slots=True)
class Group:
    """What stands between two brackets."""

    items: tuple[Node, ...]


@dataclass(frozen=True, slots=True)
class ArrayConstant:
    """Constants between braces."""

    text: str


@dataclass(frozen=True, slots=True)
class Call:
    """A function call: the name as spelled, and the items of each argument."""

    spelled: str
    arguments: tuple[tuple[Node, ...], ...]


Node = Text | Operand | Group | ArrayConstant | Call


def significant(items: tuple[Node, ...]) -> list[Node]:
    """The items other than white space."""
    return [item for item in items if not (isinstance(item, Text) and item.blank)]


class _Open:
    """A bracket that has not been closed yet."""

    def __init__(self, kind: str, spelled: str) -> None:
        self.kind, self.spelled = kind, spelled
        self.arguments: list[tuple[Node, ...]] = []
        self.items: list[Node] = []

    def end_argument(self) -> None:
        self.arguments.append(tuple(self.items))
        self.items = []

    def closed(self) -> Node:
        if self.kind == "call":
            if self.arguments or significant(tuple(self.items)):
                self.end_argument()
            return Call(self.spelled, tuple(self.arguments))
        if self.kind == "array":
            inner = "".join(item.text for item in self.items if isinstance(item, Text | Operand))
            return ArrayConstant("{" + inner + "}")
        return Group(tuple(self.items))


@lru_cache(maxsize=4096)
def formula_tree(text: str) -> tuple[Node, ...]:
    """The items of a formula without its equals sign.

    Raises
    ------
    UnreadableFormula. It cannot be read, or is longer or deeper than spreadsheets allow.
    """
    if len(text) > LONGEST:
        message = f"it has {len(text)} characters"
        raise UnreadableFormula(message)
    try:
        tokens = formualizer.tokenize("=" + text).tokens()
    except formualizer.TokenizerError as error:
        message = f"it cannot be read ({error})"
        raise UnreadableFormula(message) from error
    stack = [_Open("top", "")]
    for token in tokens:
        kind, sub, value = token.token_type, token.subtype, token.value
        if sub == _SUB.Open:
            if len(stack) > DEEPEST:
                message = f"it is nested more than {DEEPEST} deep"
                raise UnreadableFormula(message)
            name = {_TYPE.Func: "call", _TYPE.Array: "array"}.get(kind, "group")
            stack.append(_Open(name, value[:-1] if name == "call" else ""))
        elif sub == _SUB.Close:
            if len(stack) == 1:
                message = "it has a bracket too many"
                raise UnreadableFormula(message)
            node = stack.pop().closed()
            stack[-1].items.append(node)
        elif kind == _TYPE.Sep and stack[-1].kind == "call" and sub == _SUB.Arg:
            stack[-1].end_argument()
        else:
            stack[-1].items.append(_leaf(kind, sub, value))
    if len(stack) > 1:
        message = "a bracket is not closed"
        raise UnreadableFormula(message)
    return tuple(stack[0].items)


def _leaf(kind: object, sub: object, value: str) -> Node:
    if kind == _TYPE.Operand and sub == _SUB.Range:
        return Operand(value)
    if kind == _TYPE.Whitespace:
        return Text(value, blank=True)
    joins = kind == _TYPE.OpInfix and (value in _RANGE_OPERATORS or not value.strip())
    return Text(value, joins_ranges=joins)
