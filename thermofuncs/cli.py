"""The command line. Everything heavy is loaded by the command that needs it."""

# ruff: noqa: PLC0415 - the help and each command load no more than they use

from __future__ import annotations

import math
import sys
from enum import IntEnum
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

if TYPE_CHECKING:
    from thermofuncs.errors import ThermofuncsError
    from thermofuncs.workbook import Functions


class Exit(IntEnum):
    """The exit codes, which stay as they are from version to version."""

    DONE = 0
    WITH_ERRORS = 1
    USAGE = 2
    REFUSED = 3
    NOT_WRITTEN = 4


EXIT_CODES = """\
Exit codes:

\b
0  done
1  done, and a result is an error, or cells could not be evaluated, or nothing was found
2  the command was not understood, or names a cell or a function that is not there
3  the workbook was refused: missing, of another kind, damaged, hostile or too large
4  the output could not be written; nothing was changed"""

app = typer.Typer(
    add_completion=False,
    no_args_is_help=True,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    help="Worksheet functions for reaction thermochemistry, without a spreadsheet.",
    epilog=EXIT_CODES,
)

Book = Annotated[Path, typer.Argument(metavar="BOOK", help="An .xlsx or .xlsm file; it is only read.")]


@app.command(epilog=EXIT_CODES)
def recalc(
    book: Book,
    output: Annotated[
        Path | None,
        typer.Option("-o", "--output", metavar="OUT", help="The copy. Default: a new file beside BOOK."),
    ] = None,
    *,
    overwrite: Annotated[bool, typer.Option("--overwrite", help="OUT may be there already.")] = False,
) -> None:
    """Recalculate the cells of BOOK that call our functions, and those that depend on them, in a copy.

    Every other cell and part of the file stays as it is, byte for byte. BOOK itself is never written to.
    Without -o the copy is named BOOK-recalculated, with a number where that name is taken.
    """
    from thermofuncs.cli_output import Progress, show_recalculation
    from thermofuncs.errors import ThermofuncsError
    from thermofuncs.workbook import output_path, recalculate

    try:
        target = output_path(book, output, overwrite=overwrite)
        with Progress() as progress:
            result = recalculate(book, catalogue_functions(), progress=progress)
            result.save(target)
    except ThermofuncsError as error:
        raise _refusal(error) from error
    show_recalculation(result, target)
    raise typer.Exit(Exit.WITH_ERRORS if result.errors or result.kept else Exit.DONE)


@app.command(epilog=EXIT_CODES)
def working(
    book: Book,
    cell: Annotated[str, typer.Argument(metavar="SHEET!CELL", help="Such as Converter!C12 or 'K of T'!B5.")],
) -> None:
    """Show each step behind one cell of BOOK, with its numbers, units, sources and cautions."""
    from thermofuncs.cli_output import Progress, show_working
    from thermofuncs.errors import CellError, ThermofuncsError
    from thermofuncs.workbook import working as cell_working

    try:
        with Progress() as progress:
            result = cell_working(book, cell, catalogue_functions(), progress=progress)
    except ThermofuncsError as error:
        raise _refusal(error) from error
    show_working(result)
    raise typer.Exit(Exit.WITH_ERRORS if isinstance(result.value, CellError) else Exit.DONE)


@app.command(epilog=EXIT_CODES, context_settings={"ignore_unknown_options": True})
def call(
    name: Annotated[str, typer.Argument(metavar="NAME", help="The function, such as LNK.")],
    arguments: Annotated[
        list[str] | None,
        typer.Argument(
            metavar="ARGUMENT...",
            help="Numbers and texts; '' leaves one out; a range or table is written [[1, 2], [3, 4]].",
        ),
    ] = None,
) -> None:
    """Evaluate one function, as a cell would.

    An argument that is a number stays one; write "=text" to pass a text that looks like a number.
    """
    from thermofuncs import catalogue
    from thermofuncs.cli_output import show_value
    from thermofuncs.errors import CellError, ThermofuncsError

    try:
        function = catalogue.find(name)
    except ThermofuncsError as error:
        _complain(error.sentence)
        raise typer.Exit(Exit.USAGE) from error
    explanation = catalogue.explain(function.name, [_value(text) for text in arguments or []])
    result = explanation.result
    if isinstance(result, CellError):
        _complain(f"{result.value} {result.sentence}")
    else:
        show_value(result, explanation.steps[-1].unit if explanation.steps else function.result_unit)
    for caution in explanation.cautions:
        _complain(f"Caution: {caution}")
    raise typer.Exit(Exit.WITH_ERRORS if _has_error(result) else Exit.DONE)


@app.command(epilog=EXIT_CODES)
def functions(
    text: Annotated[str, typer.Argument(metavar="[TEXT]", help="Only those that have this text.")] = "",
    html: Annotated[
        Path | None, typer.Option("--html", metavar="FILE", help="Write the reference page of all functions.")
    ] = None,
) -> None:
    """List the worksheet functions, or write their reference page."""
    from thermofuncs.catalogue import FUNCTIONS
    from thermofuncs.cli_output import show_functions

    if html is not None:
        from thermofuncs.reference_page import reference_page

        _write(html, reference_page())
        typer.echo(f"Wrote {html}.")
        return
    wanted = text.casefold()
    found = [f for f in FUNCTIONS.values() if wanted in f"{f.signature} {f.summary} {f.group}".casefold()]
    if not found:
        _complain(f"No function has {text!r} in its name, group or summary.")
        raise typer.Exit(Exit.WITH_ERRORS)
    show_functions(found)


@app.command(epilog=EXIT_CODES)
def substances(
    text: Annotated[str, typer.Argument(metavar="TEXT", help="A name, a formula, or elements: 'Ca, O'.")],
) -> None:
    """List the substances in the bundled data that match TEXT."""
    from thermofuncs.catalogue import evaluate
    from thermofuncs.cli_output import show_value
    from thermofuncs.errors import CellError

    result = evaluate("FINDSUBSTANCE", [text])
    if isinstance(result, CellError):
        _complain(result.sentence)
        raise typer.Exit(Exit.WITH_ERRORS)
    show_value(result, "table")


def catalogue_functions() -> Functions:
    """The catalogue's functions, as the recalculation takes them."""
    from thermofuncs import catalogue
    from thermofuncs.workbook import Functions

    tables = {name for name, function in catalogue.FUNCTIONS.items() if function.result_shape == "table"}
    return Functions(
        frozenset(catalogue.FUNCTIONS), tables, catalogue.evaluate, catalogue.explain, catalogue.BLANK
    )


def _refusal(error: ThermofuncsError) -> typer.Exit:
    from thermofuncs.errors import NoSuchCell, OutputRefused

    _complain(error.sentence)
    if isinstance(error, OutputRefused):
        return typer.Exit(Exit.NOT_WRITTEN)
    return typer.Exit(Exit.USAGE if isinstance(error, NoSuchCell) else Exit.REFUSED)


def _complain(sentence: str) -> None:
    from thermofuncs.cli_output import harmless

    typer.echo(harmless(sentence), err=True)


def _value(text: str) -> object:
    """A word of the command line as the value of a cell."""
    if text.startswith("="):
        return text[1:]
    if text.startswith("["):
        return _table(text)
    if text.upper() in {"TRUE", "FALSE", ""}:
        return text.upper() == "TRUE" if text else None
    try:
        number = float(text)
    except ValueError:
        return text
    return number if math.isfinite(number) and "_" not in text else text


def _table(text: str) -> object:
    """Rows between brackets; a text that only begins with a bracket stays a text."""
    import json

    try:
        rows = json.loads(text)
    except ValueError:
        return text
    return [row if isinstance(row, list) else [row] for row in rows]


def _has_error(result: object) -> bool:
    from thermofuncs.errors import CellError

    if isinstance(result, list):
        return any(_has_error(item) for item in result)
    return isinstance(result, CellError)


def _write(path: Path, text: str) -> None:
    import os
    import tempfile

    temporary: Path | None = None
    try:
        handle, name = tempfile.mkstemp(prefix=".", suffix=".part", dir=path.parent)
        temporary = Path(name)
        with os.fdopen(handle, "w", encoding="utf-8") as stream:
            stream.write(text)
        temporary.chmod(0o644)
        temporary.replace(path)
    except OSError as error:
        _complain(f"{path} is not written: {error.strerror or error}.")
        raise typer.Exit(Exit.NOT_WRITTEN) from error
    finally:
        if temporary is not None:
            temporary.unlink(missing_ok=True)


def main() -> None:
    """Run the command line."""
    if hasattr(sys.stdout, "reconfigure"):
        sys.stdout.reconfigure(errors="replace")
    app()


if __name__ == "__main__":
    main()
