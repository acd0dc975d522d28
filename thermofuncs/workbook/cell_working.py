"""The working behind one cell: every call of our functions in it, step by step, down to its value."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

from thermofuncs.errors import CellError, NoSuchCell
from thermofuncs.workbook.addresses import Area, Place, parse_reference
from thermofuncs.workbook.book import Book, Stored
from thermofuncs.workbook.evaluation import Answer, Explained, Functions
from thermofuncs.workbook.package import DEFAULT_LIMITS, Limits
from thermofuncs.workbook.prepared import Prepared, Site
from thermofuncs.workbook.recalculation import Recalculation, recalculate, same_bits


@dataclass(frozen=True, slots=True)
class CallWorking:
    """One call in the cell.

    Parameters
    ----------
    site : Site. The call as the formula has it.
    arguments : tuple. What its arguments came to; of an array call those of the cell asked for.
    explanation : Explained. The steps and cautions.
    same : bool. Whether its result is, to the last bit, what the recalculation got from this call.
    """

    site: Site
    arguments: tuple[object, ...]
    explanation: Explained
    same: bool


@dataclass(frozen=True, slots=True)
class CellWorking:
    """The working behind a cell.

    Parameters
    ----------
    place : Place. The cell.
    formula : str. Its formula, with the equals sign, as the file has it.
    value : float, str, bool, CellError or None. What it comes to.
    stored : the same. What the file has stored.
    calls : tuple of CallWorking.
    last_step_is_value : bool or None. Whether the only call's result is the cell's value, to the last bit;
        None where the formula does more than one call.
    """

    place: Place
    formula: str
    value: Stored
    stored: Stored
    calls: tuple[CallWorking, ...]
    last_step_is_value: bool | None

    @property
    def stored_is_value(self) -> bool:
        """Whether the file has the value stored, to the last bit."""
        return same_bits(self.stored, self.value)


def working(
    path: Path,
    cell: str,
    functions: Functions,
    limits: Limits = DEFAULT_LIMITS,
    progress: Callable[[str, int, int], None] | None = None,
) -> CellWorking:
    """The working behind one cell of a workbook.

    Parameters
    ----------
    path : Path. An .xlsx or .xlsm file, which is only read.
    cell : str. The sheet and the cell, such as ``'K of T'!B5``.
    functions : Functions. What answers and explains the calls.
    limits : Limits. How much is read before the file is refused.
    progress : callable or None. As ``recalculate`` takes it.

    Returns
    -------
    CellWorking

    Raises
    ------
    NoSuchCell. There is no such sheet or cell, it calls none of our functions, or it cannot be evaluated.
    WorkbookRefused. The file is of another kind, damaged, hostile or too large.
    """
    result = recalculate(path, functions, limits, progress)
    place = find_cell(result.book, cell)
    prepared = _formula_of(result, place)
    for kept in result.kept:
        if kept.place == prepared.place:
            raise NoSuchCell(cell=str(place), text=f"it keeps its stored value, because {kept.reason}")
    calls = tuple(
        _call_working(result, site, prepared.stored.area, place, functions)
        for site in prepared.sites
        if site.number in result.answers
    )
    value = result.values[place]
    whole = len(calls) == 1 and calls[0].site.fit is not None
    last = _same_value(calls[0].explanation.result, value) if whole else None
    return CellWorking(place, prepared.written, value, result.book.value(place), calls, last)


def find_cell(book: Book, text: str) -> Place:
    """The cell that a text such as ``Sheet1!B5`` names.

    Raises
    ------
    NoSuchCell. It names none.
    """
    reference = parse_reference(text.strip())
    sheets = ", ".join(book.sheets)
    if reference is None or reference.last is not None:
        raise NoSuchCell(cell=text, text=f"write the sheet and one cell, as in {next(iter(book.sheets))}!B5")
    if reference.sheet is None:
        raise NoSuchCell(cell=text, text=f"write the sheet too; the workbook has {sheets}")
    sheet = book.sheet_name(reference.sheet)
    if sheet is None:
        raise NoSuchCell(cell=text, text=f"the workbook has no such sheet; it has {sheets}")
    return Place(sheet, reference.first.row, reference.first.column)


def _formula_of(result: Recalculation, place: Place) -> Prepared:
    """The formula behind a cell: its own, or that of the array it belongs to."""
    for formula in result.formulas.values():
        area = formula.stored.area
        if area.sheet == place.sheet and area.covers(place.row, place.column):
            if not formula.ours:
                text = f"its formula {formula.written[:200]} calls no function of ours"
                raise NoSuchCell(cell=str(place), text=text + _ours_read_by(result, formula))
            return formula
    value = result.book.value(place)
    text = "it is blank" if value is None else f"it holds the constant {value!s:.200}, and no formula"
    raise NoSuchCell(cell=str(place), text=text)


def _ours_read_by(result: Recalculation, formula: Prepared) -> str:
    """The cells with calls of ours that a formula reads, for a sentence."""
    near = [
        str(place)
        for place, other in result.formulas.items()
        if other.ours and any(a.sheet == place.sheet and a.covers(place.row, place.column) for a in formula.areas)
    ]
    more = " and others" if len(near) > 5 else ""
    return f"; it reads {', '.join(near[:5])}{more}, which can be explained" if near else ""


def _call_working(
    result: Recalculation, site: Site, area: Area, place: Place, functions: Functions
) -> CallWorking:
    answer = result.answers[site.number]
    arguments, got = _of_one_cell(answer, area, place, functions, site.name)
    explanation = functions.explain(site.name, arguments)
    return CallWorking(site, arguments, explanation, _same_value(explanation.result, got))


def _of_one_cell(
    answer: Answer, area: Area, place: Place, functions: Functions, name: str
) -> tuple[tuple[object, ...], object]:
    """The arguments and the answer of an array call for the one cell that was asked about."""
    if not isinstance(answer.result, list):
        return answer.arguments, answer.result
    row, column = place.row - area.top, place.column - area.left
    rows, columns = len(answer.result), max(len(line) for line in answer.result)
    element = _picked(answer.result, row, column)
    picked = tuple(
        _picked(value, row, column) if _goes_along(value, rows, columns) else value
        for value in answer.arguments
    )
    single = tuple(
        functions.blank if value is None and given is not None else value
        for value, given in zip(picked, answer.arguments, strict=True)
    )
    if picked != answer.arguments and not isinstance(functions.evaluate(name, single), list):
        return single, element
    return answer.arguments, answer.result


def _goes_along(value: object, rows: int, columns: int) -> bool:
    """Whether an argument has one cell for each row or column of the answer."""
    if not isinstance(value, list) or not value:
        return False
    return len(value) in {1, rows} and len(value[0]) in {1, columns}


def _picked(value: object, row: int, column: int) -> object:
    if not isinstance(value, list):
        return value
    line = value[0 if len(value) == 1 else row] if len(value) == 1 or row < len(value) else []
    place = 0 if len(line) == 1 else column
    return line[place] if place < len(line) else CellError("#N/A")


def _same_value(first: object, second: object) -> bool:
    if isinstance(first, CellError) and isinstance(second, CellError):
        return first.value == second.value
    if isinstance(first, list) or isinstance(second, list):
        return first == second
    if isinstance(first, bool) or isinstance(second, bool):
        return first is second
    return first == second
