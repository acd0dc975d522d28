"""Worksheet functions that explain the others."""

from __future__ import annotations

import textwrap
from importlib.metadata import version

from thermofuncs.catalogue.declaration import Argument, Function
from thermofuncs.errors import CellError, NothingFound, OneCallOnly
from thermofuncs.substances.datasets import datasets
from thermofuncs.working import Record

GROUP = "Explanation"
LONGEST = 254  # a sentence in a cell stays under 255 characters
NAME = Argument("name", "the name of a worksheet function, such as LNK", "name")
ARGUMENTS = Argument("arguments", "the arguments of that call", "any", variadic=True)


def _refuse_own(name: str) -> None:
    """Refuse a call of this group within another: it has nothing behind it, and could nest without end."""
    if name.strip().upper().removeprefix("TF.").removeprefix("TF_") in {f.name for f in FUNCTIONS}:
        raise OneCallOnly(function=name, why="it explains other calls itself.")


def working(name: str, arguments: list[object], record: Record | None = None) -> list[list[object]]:
    """The steps behind a scalar call, as a table that ends in its value."""
    from thermofuncs.catalogue.evaluation import explain  # noqa: PLC0415  it walks the catalogue, this file too

    del record
    _refuse_own(name)
    explained = explain(name, arguments)
    if isinstance(explained.result, CellError):
        raise OneCallOnly(function=name, why=explained.result.sentence or str(explained.result))
    if not explained.steps:
        raise OneCallOnly(function=name, why="this call has no steps: give single values, not ranges")
    head: list[list[object]] = [["step", "quantity", "relation", "with numbers", "value", "unit", "source"]]
    return head + [
        [i, s.symbol, s.relation, s.substituted, s.value, s.unit, s.source]
        for i, s in enumerate(explained.steps, 1)
    ]


def cautions(name: str, arguments: list[object], record: Record | None = None) -> object:
    """Why a call fails, then its cautions: nothing is an empty text, one a text, several a column."""
    from thermofuncs.catalogue.evaluation import explain  # noqa: PLC0415  as above

    del record
    _refuse_own(name)
    explained = explain(name, arguments)
    sentences = list(explained.cautions)
    if isinstance(explained.result, CellError):
        sentences.insert(0, explained.result.sentence or f"An argument holds {explained.result}.")
    lines = [line for sentence in sentences for line in textwrap.wrap(sentence, LONGEST)]
    if len(lines) <= 1:
        return lines[0] if lines else ""
    return [[line] for line in lines]


def function_list(text: str | None, record: Record | None = None) -> list[list[object]]:
    """The functions, with their arguments and units."""
    from thermofuncs.catalogue.functions import FUNCTIONS as ALL  # noqa: PLC0415  as above

    del record
    words = (text or "").lower()
    chosen = [f for f in ALL.values() if words in f"{f.signature} {f.summary} {f.group}".lower()]
    if not chosen:
        raise NothingFound(text=text)
    head: list[list[object]] = [["function", "group", "what it gives", "unit"]]
    return head + [[f.signature, f.group, f.summary, f.result_unit] for f in chosen]


def stamp(record: Record | None = None) -> str:
    """Engine version, datasets with their hashes, edition of the constants."""
    del record
    sets = "; ".join(f"{d.id} {d.sha256[:12]}" for d in datasets())
    return f"thermofuncs {version('thermofuncs')}; {sets}; constants {constants_edition()}"


def constants_edition() -> str:
    """The edition of the constants."""
    from thermofuncs.units import constant  # noqa: PLC0415  only the stamp needs it

    return constant("R").edition


FUNCTIONS: tuple[Function, ...] = (
    Function(
        "WORKING", GROUP, "Table of the steps behind a scalar call of a function.", (NAME, ARGUMENTS), "table",
        ("LNK", "CO(g) + H2O(g) = CO2(g) + H2(g)", 900.0), working, result_shape="table",
    ),
    Function(
        "CAUTIONS", GROUP, "Why a call fails and the cautions that go with it; empty where there are none.",
        (NAME, ARGUMENTS), "text", ("LNK", "CO(g) + H2O(g) = CO2(g) + H2(g)", 25.0), cautions,
    ),
    Function(
        "FUNCTIONLIST", GROUP, "Table of the functions with their arguments and units.",
        (Argument("text", "a word to look for", "text", optional=True),), "table", ("entropy",),
        function_list, result_shape="table",
    ),
    Function(
        "STAMP", GROUP, "Engine version, datasets with their hashes, edition of the constants.", (), "text",
        (), stamp,
    ),
)
