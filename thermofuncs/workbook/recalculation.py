"""Recalculating a workbook: our cells and what depends on them, and a record of everything done."""

from __future__ import annotations

import math
from collections.abc import Callable, Collection, Mapping
from dataclasses import dataclass, field
from pathlib import Path

from thermofuncs.errors import CellError, DamagedWorkbook, OutputRefused
from thermofuncs.workbook.addresses import Place
from thermofuncs.workbook.book import Book, Stored, read_book
from thermofuncs.workbook.dependents import Dependencies
from thermofuncs.workbook.evaluation import (
    Answer,
    Evaluation,
    EvaluationStopped,
    Functions,
    missing_functions,
)
from thermofuncs.workbook.package import DEFAULT_LIMITS, Limits, check_target, free_name
from thermofuncs.workbook.patching import patched_sheet
from thermofuncs.workbook.prepared import Prepared, Site
from thermofuncs.workbook.rewriting import Rewriter

_ROUNDS = 6
_SAME = 1e-9


@dataclass(frozen=True, slots=True)
class Change:
    """A cell whose stored result is another one now."""

    place: Place
    before: Stored
    after: Stored

    @property
    def difference(self) -> float | None:
        """By how much a number changed; None where one of the two is no number."""
        before, after = self.before, self.after
        if isinstance(before, bool) or isinstance(after, bool):
            return None
        return after - before if isinstance(before, float) and isinstance(after, float) else None


@dataclass(frozen=True, slots=True)
class ErrorCell:
    """A recalculated cell that is an error, and why."""

    place: Place
    value: str
    sentence: str


@dataclass(frozen=True, slots=True)
class Kept:
    """A cell that keeps its stored result, and why."""

    place: Place
    reason: str


@dataclass(slots=True)
class Recalculation:
    """What a recalculation found.

    Parameters
    ----------
    book : Book. The workbook as it was.
    values : dict. The result of every recalculated cell.
    calls : int. How many calls of our functions were answered.
    changes : list of Change. Cells whose result differs from the stored one.
    errors : list of ErrorCell. Recalculated cells that are errors.
    kept : list of Kept. Cells that could not be evaluated, and those that depend on them.
    volatile : list of Place. Cells that a spreadsheet computes anew each time.
    differing : list of Change. Cells not ours that ours depend on, where the evaluator's value, which
        was used, is not the stored one, which was left.
    notes : list of str. What else a reader should know.
    answers : dict. What each call was asked and answered, by the call's number.
    formulas : dict. The formulas by cell.
    """

    book: Book
    values: dict[Place, Stored] = field(default_factory=dict)
    calls: int = 0
    changes: list[Change] = field(default_factory=list)
    errors: list[ErrorCell] = field(default_factory=list)
    kept: list[Kept] = field(default_factory=list)
    volatile: list[Place] = field(default_factory=list)
    differing: list[Change] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)
    answers: dict[int, Answer] = field(default_factory=dict)
    formulas: dict[Place, Prepared] = field(default_factory=dict)

    def save(self, target: Path) -> None:
        """Write a copy of the workbook with the new results.

        Raises
        ------
        OutputRefused. The target is the input, or cannot be written.
        """
        self.book.package.copy_to(target, self._changed_parts())

    def _changed_parts(self) -> dict[str, bytes]:
        by_sheet: dict[str, dict[tuple[int, int], Stored]] = {}
        for change in self.changes:
            place = change.place
            by_sheet.setdefault(place.sheet, {})[place.row, place.column] = change.after
        package = self.book.package
        parts = {name: self.book.sheets[name].part for name in by_sheet}
        return {parts[name]: patched_sheet(package, parts[name], values) for name, values in by_sheet.items()}


def recalculate(
    path: Path,
    functions: Functions,
    limits: Limits = DEFAULT_LIMITS,
    progress: Callable[[str, int, int], None] | None = None,
) -> Recalculation:
    """Evaluate a workbook's calls of our functions and every cell that depends on them.

    Parameters
    ----------
    path : Path. An .xlsx or .xlsm file, which is only read.
    functions : Functions. What answers the calls.
    limits : Limits. How much is read before the file is refused.
    progress : callable or None. Called with what is being done, how much of it is done, and of how much.

    Returns
    -------
    Recalculation. Nothing is written until its ``save`` is called.

    Raises
    ------
    WorkbookRefused. The file is of another kind, damaged, hostile or too large.
    """
    report = progress or (lambda _what, _done, _all: None)
    report("reading", 0, 1)
    return _Work(read_book(path, limits), functions, report).done()


def output_path(source: Path, wanted: Path | None, *, overwrite: bool = False) -> Path:
    """Where the recalculated copy goes: beside the input under a free name, or where it was asked for.

    Raises
    ------
    OutputRefused. It is the input, or there already and not to be overwritten.
    """
    target = free_name(source) if wanted is None else wanted
    check_target(source, target)
    if target.exists() and not overwrite:
        text = "a file of that name is there already, and --overwrite is not given"
        raise OutputRefused(path=str(target), text=text)
    return target


class _Work:
    """The steps of one recalculation."""

    def __init__(self, book: Book, functions: Functions, report: Callable[[str, int, int], None]) -> None:
        self.book, self.functions, self.report = book, functions, report
        self.result = Recalculation(book, notes=list(book.notes))
        self.kept: dict[Place, str] = {}
        self.native_fallback: dict[Place, str] = {}

    def done(self) -> Recalculation:
        self._prepare()
        self._targets()
        self._evaluate()
        self._collect()
        return self.result

    def _prepare(self) -> None:
        rewriter = Rewriter(self.book, self.functions.names, self.functions.tables)
        total = sum(len(sheet.formulas) for sheet in self.book.sheets.values())
        formulas: dict[Place, Prepared] = {}
        for sheet in self.book.sheets.values():
            for (row, column), stored in sheet.formulas.items():
                place = Place(sheet.name, row, column)
                formulas[place] = rewriter.prepare(place, stored)
                if len(formulas) % 1000 == 0:
                    self.report("reading formulas", len(formulas), total)
        self.formulas, self.sites = formulas, rewriter.sites
        missing = missing_functions({name for formula in formulas.values() for name in formula.functions})
        for formula in formulas.values():
            unknown = sorted(formula.functions & missing)
            if unknown and not formula.reasons:
                formula.reasons.append(f"the evaluator has no {', '.join(unknown)}")
        self.result.formulas = formulas

    def _targets(self) -> None:
        """Find what is to be recalculated, and what of it cannot be."""
        self.dependencies = Dependencies(self.formulas)
        ours = [place for place, formula in self.formulas.items() if formula.ours]
        targets = set(ours) | set(self.dependencies.dependents(ours))
        if ours:
            dynamic = [place for place, formula in self.formulas.items() if formula.dynamic]
            targets |= set(dynamic) | set(self.dependencies.dependents(dynamic))
        self.targets = targets
        unreadable = {place: f.reasons[0] for place, f in self.formulas.items() if f.reasons}
        self.native_fallback = {place: why for place, why in unreadable.items() if place not in targets}
        self._keep({place: why for place, why in unreadable.items() if place in targets})
        lost = [place for place in self.native_fallback if self.formulas[place].stored.value is None]
        self._keep_dependents(lost)

    def _keep(self, reasons: Mapping[Place, str]) -> None:
        self.kept.update(reasons)
        self._keep_dependents(list(reasons))

    def _keep_dependents(self, seeds: list[Place]) -> None:
        for place, seed in self.dependencies.dependents(seeds).items():
            if place in self.targets:
                self.kept.setdefault(place, f"it depends on {seed}, which could not be evaluated")

    def _evaluate(self) -> None:
        """Evaluate until no cell that is not ours has to fall back to its stored result any more."""
        for _ in range(_ROUNDS):
            wanted = self.targets - set(self.kept)
            needed = wanted | self.dependencies.precedents(wanted)
            if any(self.formulas[place].dynamic for place in needed):
                needed = set(self.formulas)
            needed -= set(self.kept) | set(self.native_fallback)
            try:
                evaluation = self._run(needed)
            except EvaluationStopped as stop:
                self._set_aside(needed, str(stop))
                continue
            self.evaluation = evaluation
            self.evaluated = needed
            fallen = self._fallen(needed)
            self.native_fallback.update(fallen)
            self._keep_failed(wanted)
            if not fallen:
                return
        text = "what its cells come to does not settle"
        raise DamagedWorkbook(path=self.book.package.path.name, text=text)

    def _run(self, places: Collection[Place]) -> Evaluation:
        calls = sum(len(self.formulas[place].sites) for place in places)
        evaluation = Evaluation(
            self.book, {place: self.formulas[place] for place in places}, self.sites, self.functions,
            lambda done: self.report("evaluating", done, calls),
        )
        evaluation.run()
        return evaluation

    def _set_aside(self, needed: Collection[Place], reason: str) -> None:
        """Keep the formulas because of which the evaluator gives up on all of them."""
        culprits = self._culprits(sorted(needed))
        if not culprits:
            text = f"it cannot be evaluated ({reason})"
            raise DamagedWorkbook(path=self.book.package.path.name, text=text)
        why = f"the evaluator gives up on it ({reason})"
        self._keep({place: why for place in culprits if place in self.targets})
        self.native_fallback.update({place: why for place in culprits if place not in self.targets})
        self._keep_dependents([place for place in culprits if self.formulas[place].stored.value is None])

    def _culprits(self, places: list[Place]) -> list[Place]:
        """Those of some formulas that cannot be evaluated with stored values around them."""
        try:
            self._run(places)
        except EvaluationStopped:
            if len(places) == 1:
                return places
        else:
            return []
        half = len(places) // 2
        found = self._culprits(places[:half]) + self._culprits(places[half:])
        return found or [place for place in places if self.formulas[place].dynamic]

    def _fallen(self, needed: set[Place]) -> dict[Place, str]:
        fallen = {}
        for place in needed - self.targets:
            stored = self.formulas[place].stored.value
            if stored is None or isinstance(stored, CellError):
                continue
            value = self.evaluation.value(place)
            if isinstance(value, CellError):
                why = self.evaluation.failure(place) or f"it evaluates to {value}"
                fallen[place] = f"{why}; its stored value was used"
        return fallen

    def _keep_failed(self, wanted: set[Place]) -> None:
        failed = {}
        for place in wanted:
            why = self.evaluation.failure(place)
            if why is not None:
                failed[place] = why
        circles, led = self.dependencies.circles_and_led(failed)
        roots = {place: why for place, why in failed.items() if place in circles or place not in led}
        self._keep(roots)
        self._keep({place: why for place, why in failed.items() if place not in self.kept})

    # --- the record --------------------------------------------------------------------------------

    def _collect(self) -> None:
        result = self.result
        result.answers = self.evaluation.answers
        result.calls = len(result.answers)
        order = {name: number for number, name in enumerate(self.book.sheets)}

        def in_order(place: Place) -> tuple[int, int, int]:
            return order[place.sheet], place.row, place.column

        for place in sorted(self.targets - set(self.kept), key=in_order):
            self._collect_cell(place)
        used = self.native_fallback.keys() & (self.targets | self.dependencies.precedents(self.targets))
        reasons = self.kept | {place: self.native_fallback[place] for place in used}
        result.kept = [Kept(place, reasons[place]) for place in sorted(reasons, key=in_order)]
        volatile = {place for place in self.evaluated if self.formulas[place].volatile}
        volatile |= set(self.dependencies.dependents(volatile)) & self.evaluated & self.targets
        result.volatile = sorted(volatile, key=in_order)
        result.differing = self._differing(in_order)
        result.changes.sort(key=lambda change: in_order(change.place))
        result.errors.sort(key=lambda error: in_order(error.place))

    def _collect_cell(self, place: Place) -> None:
        formula = self.formulas[place]
        area = formula.stored.area
        if formula.stored.dynamic:
            self._note_spill(place)
        elif formula.stored.kind == "array":
            self._note_cut(place)
        for row in range(area.top, area.bottom + 1):
            for column in range(area.left, area.right + 1):
                cell = Place(place.sheet, row, column)
                value = self.evaluation.value(cell)
                if value is None and not (formula.stored.dynamic and cell != place):
                    value = 0.0
                before = self.book.value(cell)
                self.result.values[cell] = value
                if not same_bits(before, value):
                    self.result.changes.append(Change(cell, before, value))
                if isinstance(value, CellError):
                    sentence = self._sentence(place, value)
                    self.result.errors.append(ErrorCell(cell, value.value, sentence))

    def _note_spill(self, place: Place) -> None:
        area = self.formulas[place].stored.area
        rows, columns = self.evaluation.spilled(place)
        if (rows, columns) != (area.rows, area.columns):
            self.result.notes.append(
                f"{place} now fills {rows} x {columns} cells, and its stored range is "
                f"{area.rows} x {area.columns}: only the stored range was written. "
                "Open the copy in the spreadsheet to spill it anew."
            )

    def _note_cut(self, place: Place) -> None:
        """Say where an array formula's range is smaller than the table of its one call."""
        formula = self.formulas[place]
        answers = [self.evaluation.answers.get(site.number) for site in formula.sites]
        table = answers[0].result if len(answers) == 1 and answers[0] is not None else None
        if not isinstance(table, list):
            return
        area, rows, columns = formula.stored.area, len(table), max(len(row) for row in table)
        if rows > area.rows or columns > area.columns:
            self.result.notes.append(
                f"{place} gives a table of {rows} x {columns} cells, and its array formula is {area.rows} x "
                f"{area.columns}: the rest is not shown. Widen the range of the array formula."
            )

    def _sentence(self, place: Place, value: CellError) -> str:
        formula = self.formulas[place]
        for site in formula.sites:
            answer = self.evaluation.answers.get(site.number)
            found = None if answer is None else _first_sentence(answer.result, value.value)
            if found:
                return f"TF.{site.name}: {found}"
        for area in formula.areas:
            for row in range(area.top, min(area.bottom, area.top + 999) + 1):
                for column in range(area.left, min(area.right, area.left + 99) + 1):
                    cell = Place(area.sheet, row, column)
                    other = self.evaluation.value(cell)
                    if isinstance(other, CellError) and other.value == value.value:
                        return f"The error comes in from {cell}."
        if formula.sites and not formula.stored.area.single:
            return "The array formula covers more cells than the result has."
        return "The formula itself gives this error."

    def _differing(self, in_order: Callable[[Place], tuple[int, int, int]]) -> list[Change]:
        found = []
        for place in sorted(self.evaluated - self.targets, key=in_order):
            formula = self.formulas[place]
            before = formula.stored.value
            after = self.evaluation.value(place)
            if before is None or formula.volatile or _close(before, after):
                continue
            found.append(Change(place, before, after))
        return found


def call_sites(result: Recalculation, place: Place) -> list[Site]:
    """The calls of our functions in a cell, in the order of its formula."""
    formula = result.formulas.get(place)
    return [] if formula is None else formula.sites


def _first_sentence(result: object, value: str) -> str:
    if isinstance(result, CellError):
        return result.sentence if result.value == value else ""
    if isinstance(result, list):
        for item in result:
            if found := _first_sentence(item, value):
                return found
    return ""


def same_bits(first: Stored, second: Stored) -> bool:
    """Whether two stored results are the same, numbers to their last bit."""
    if isinstance(first, CellError) and isinstance(second, CellError):
        return first.value == second.value
    return type(first) is type(second) and first == second


def _close(before: Stored, after: Stored) -> bool:
    if isinstance(before, float) and isinstance(after, float):
        return math.isclose(before, after, rel_tol=_SAME, abs_tol=1e-300)
    return same_bits(before, after)
