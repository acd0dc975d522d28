"""What the commands print."""

from __future__ import annotations

import sys
import threading
from collections.abc import Iterable, Sequence
from pathlib import Path
from types import TracebackType
from typing import Self

from rich.box import SIMPLE
from rich.console import Console
from rich.progress import BarColumn, MofNCompleteColumn, TextColumn
from rich.progress import Progress as Bar
from rich.table import Table
from rich.text import Text

from thermofuncs.catalogue.declaration import Function
from thermofuncs.errors import CellError
from thermofuncs.workbook import CellWorking, Recalculation
from thermofuncs.workbook.cell_working import CallWorking

SHOWN = 200  # lines of one list; the rest is counted
PATIENCE = 2.0  # [s] before progress is shown


def harmless(text: str) -> str:
    """Text without the control characters that a terminal would obey."""
    return "".join(c if c.isprintable() or c == "\n" else "\N{REPLACEMENT CHARACTER}" for c in text)


def shown_value(value: object) -> str:
    """A value of a cell in full precision; texts in quotes."""
    if value is None or isinstance(value, bool):
        return "(none)" if value is None else str(value).upper()
    if isinstance(value, float):
        return str(int(value)) if value.is_integer() and abs(value) < 1e15 else repr(value)
    if isinstance(value, str):
        return harmless(f'"{value}"' if len(value) <= 80 else f'"{value[:77]}..."')
    return _shown_range(value) if isinstance(value, list) else harmless(str(value))


def _shown_range(value: list[list[object]]) -> str:
    rows, columns = len(value), max((len(row) for row in value), default=0)
    if rows * columns > 6:
        return f"{rows} x {columns} cells"
    return "{" + "; ".join(", ".join(shown_value(item) for item in row) for row in value) + "}"



class Progress:
    """A bar on standard error, shown once the work has taken two seconds."""

    def __init__(self) -> None:
        columns = (TextColumn("{task.description}"), BarColumn(), MofNCompleteColumn())
        self._bar = Bar(*columns, console=Console(stderr=True), transient=True)
        self._task = self._bar.add_task("reading", total=None)
        self._timer = threading.Timer(PATIENCE, self._bar.start)
        self._timer.daemon = True

    def __enter__(self) -> Self:
        """Begin to wait."""
        self._timer.start()
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        """Take the bar away."""
        self._timer.cancel()
        self._timer.join()
        if self._bar.live.is_started:
            self._bar.stop()

    def __call__(self, what: str, done: int, total: int) -> None:
        """Say what is being done."""
        self._bar.update(self._task, description=what, completed=done, total=total or None)


def _console() -> Console:
    width = None if sys.stdout.isatty() else 160
    return Console(width=width, highlight=False, markup=False, emoji=False)


def _table(headers: Sequence[str], rows: Iterable[Sequence[str]], title: str = "") -> Table:
    table = Table(
        *headers, title=Text(title, style="bold") if title else None, box=SIMPLE, title_justify="left",
        header_style="bold",
    )
    for row in rows:
        table.add_row(*(Text(harmless(item), overflow="fold") for item in row))
    return table


def _print_table(console: Console, table: Table) -> None:
    """Print a table; into a file or a pipe without the spaces at the ends of its lines."""
    if console.is_terminal:
        console.print(table)
        return
    with console.capture() as captured:
        console.print(table)
    for line in captured.get().splitlines():
        console.print(line.rstrip(), soft_wrap=True)


def _listed(console: Console, title: str, headers: Sequence[str], rows: Sequence[Sequence[str]]) -> None:
    if not rows:
        return
    _print_table(console, _table(headers, rows[:SHOWN], title))
    if len(rows) > SHOWN:
        console.print(f"  and {len(rows) - SHOWN} more")


def show_recalculation(result: Recalculation, target: Path) -> None:
    """Print what a recalculation did."""
    console = _console()
    console.print(
        f"{len(result.values)} cells recalculated with {result.calls} calls. "
        f"Changed: {len(result.changes)}. Errors: {len(result.errors)}. Stored value kept: {len(result.kept)}."
    )
    changes = [
        (
            str(change.place),
            shown_value(change.before),
            shown_value(change.after),
            "" if change.difference is None else f"{change.difference:+.6g}",
        )
        for change in result.changes
    ]
    _listed(console, "Changed", ("cell", "stored", "now", "difference"), changes)
    errors = [(str(error.place), error.value, error.sentence) for error in result.errors]
    _listed(console, "Errors", ("cell", "value", "why"), errors)
    kept = [(str(kept.place), kept.reason) for kept in result.kept]
    _listed(console, "Stored value kept", ("cell", "why"), kept)
    differing = [
        (str(change.place), shown_value(change.before), shown_value(change.after))
        for change in result.differing
    ]
    title = "Not ours, read by ours, stored value out of date and left"
    _listed(console, title, ("cell", "stored", "used"), differing)
    volatile = [(str(place),) for place in result.volatile]
    _listed(console, "Volatile: another value at each recalculation", ("cell",), volatile)
    for note in result.notes:
        console.print(f"Note: {harmless(note)}", soft_wrap=True)
    console.print(f"Wrote {harmless(str(target))}", soft_wrap=True)


def show_working(result: CellWorking) -> None:
    """Print the steps behind a cell."""
    console = _console()
    console.print(f"{harmless(str(result.place))}  {harmless(result.formula)}", soft_wrap=True)
    for number, call in enumerate(result.calls, 1):
        _show_call(console, number, call)
    same = {
        True: "The last step is the cell's value, to the last bit.",
        False: "The call's own result is NOT the cell's value.",
        None: "The formula computes the value from these calls.",
    }[result.last_step_is_value]
    value = f"Value of {harmless(str(result.place))}: {shown_value(result.value)}"
    console.print(f"{value}. {same}", soft_wrap=True)
    if result.stored_is_value:
        console.print("The file has this value stored, to the last bit.")
    else:
        console.print(
            f"The file has {shown_value(result.stored)} stored: recalculate it.", soft_wrap=True
        )


def _show_call(console: Console, number: int, call: CallWorking) -> None:
    texts = ", ".join(call.site.texts)
    console.print(f"\n{number}. TF.{call.site.name}({harmless(texts)})", soft_wrap=True)
    for text, value in zip(call.site.texts, call.arguments, strict=False):
        if value is not None:
            console.print(f"   {harmless(text)} is {shown_value(value)}", soft_wrap=True)
    steps = call.explanation.steps
    sources = [source for source in dict.fromkeys(step.source for step in steps) if source]
    marks = {source: f"[{n}]" for n, source in enumerate(sources, 1)}
    rows = [
        (step.symbol, step.relation, step.substituted, shown_value(step.value), step.unit, marks.get(step.source, ""))
        for step in steps
    ]
    if rows:
        headers = ("symbol", "relation", "with numbers", "value", "unit", "source")
        _print_table(console, _table(headers, rows))
    for source, mark in marks.items():
        console.print(f"   {mark} {harmless(source)}", soft_wrap=True)
    result = call.explanation.result
    sentence = f" {result.sentence}" if isinstance(result, CellError) else ""
    same = "" if call.same else " This is NOT what the recalculation got."
    console.print(f"   Result: {shown_value(result)}{harmless(sentence)}{same}", soft_wrap=True)
    for caution in call.explanation.cautions:
        console.print(f"   Caution: {harmless(caution)}", soft_wrap=True)


def show_value(value: object, unit: str) -> None:
    """Print a result: a single value with its unit, or a table."""
    console = _console()
    if not isinstance(value, list):
        text = harmless(value) if isinstance(value, str) else shown_value(value)
        console.print(text if unit in {"", "1", "text", "table"} else f"{text} {unit}", soft_wrap=True)
        return
    table = Table(box=SIMPLE, show_header=False)
    for row in value:
        items = [item if isinstance(item, str) else "" if item is None else shown_value(item) for item in row]
        table.add_row(*(Text(harmless(item), overflow="fold") for item in items))
    _print_table(console, table)


def show_functions(found: Sequence[Function]) -> None:
    """Print functions with what they give."""
    rows = [(function.signature, function.summary, function.result_unit) for function in found]
    _print_table(_console(), _table(("function", "gives", "unit"), rows))
