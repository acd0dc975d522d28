"""One evaluation of a workbook's formulas, with our functions answering where they are called."""

from __future__ import annotations

import io
import math
import time
import zipfile
from collections.abc import Callable, Collection, Mapping, Sequence
from dataclasses import dataclass
from typing import Any, Protocol
from xml.sax.saxutils import quoteattr

import formualizer

from thermofuncs.errors import CellError, DamagedWorkbook, WorkbookTooLarge
from thermofuncs.workbook import natives
from thermofuncs.workbook.addresses import Place, column_letters, parse_area
from thermofuncs.workbook.book import Book, Stored
from thermofuncs.workbook.markup import encoded
from thermofuncs.workbook.prepared import Prepared, Site
from thermofuncs.workbook.rewriting import FIT, MAP, SITE
from thermofuncs.working import Step

WORKSHEET_VALUES = {
    "Div": "#DIV/0!", "Num": "#NUM!", "Na": "#N/A", "Value": "#VALUE!", "Ref": "#REF!", "Name": "#NAME?",
    "Null": "#NULL!", "Spill": "#SPILL!", "Calc": "#CALC!",
}
_KINDS = {value: kind for kind, value in WORKSHEET_VALUES.items()}
# Errors of the evaluator itself, which no formula has asked for.
NOT_EVALUATED = {
    "Circ": "it is part of a circular reference",
    "NImpl": "the evaluator cannot work it out",
    "Error": "the evaluator cannot read it",
    "Cancelled": "the evaluation was stopped",
    "Spill": "its result has no room to spill into",
    "Calc": "it gives an empty array",
}
_NAMESPACE = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
_OFFICE = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
_PACKAGE = "http://schemas.openxmlformats.org/package/2006"
_TYPES = "application/vnd.openxmlformats-officedocument.spreadsheetml"
_HEAD = '<?xml version="1.0" encoding="UTF-8"?>'


class Explained(Protocol):
    """A result with the steps and cautions behind it."""

    @property
    def result(self) -> object:
        """The result."""

    @property
    def steps(self) -> Sequence[Step]:
        """The steps, in order; the last one's value is the result."""

    @property
    def cautions(self) -> Sequence[str]:
        """The cautions, in sentences."""


@dataclass(frozen=True, slots=True)
class Functions:
    """The worksheet functions that answer when a formula calls them.

    Parameters
    ----------
    names : collection of str. Their names, such as ``LNK``.
    tables : collection of str. Those that give a table.
    evaluate : callable. Takes a name and the arguments; gives a value and never raises.
    explain : callable. Takes the same; gives what has ``result``, ``steps`` and ``cautions``.
    blank : object. What stands for a blank single cell among the arguments.
    """

    names: Collection[str]
    tables: Collection[str]
    evaluate: Callable[[str, Sequence[object]], object]
    explain: Callable[[str, Sequence[object]], Explained]
    blank: object


@dataclass(frozen=True, slots=True)
class Answer:
    """What one call was asked and what it answered."""

    arguments: tuple[object, ...]
    result: object


class EvaluationStopped(Exception):
    """The evaluator gave up as a whole, for the reason in its message."""


class Evaluation:
    """Evaluates formulas; everything else in the workbook has its stored value.

    Parameters
    ----------
    book : Book. The workbook.
    formulas : mapping. The formulas to evaluate.
    sites : sequence of Site. All calls, by number.
    functions : Functions. What answers them.
    progress : callable or None. Called with the number of calls answered so far.
    """

    def __init__(
        self,
        book: Book,
        formulas: Mapping[Place, Prepared],
        sites: Sequence[Site],
        functions: Functions,
        progress: Callable[[int], None] | None = None,
    ) -> None:
        self.book, self.formulas, self.sites, self.functions = book, formulas, sites, functions
        self.progress = progress
        self.answers: dict[int, Answer] = {}
        self._answered = 0
        self._deadline = math.inf
        config = formualizer.EvaluationConfig()
        config.enable_parallel = False
        config.max_eval_time_ms = book.package.limits.seconds * 1000
        if book.date_1904:
            config.date_system = "1904"
        self._set_iteration(config)
        try:
            self._workbook = formualizer.Workbook.from_bytes(
                self._package(), config=formualizer.WorkbookConfig(eval_config=config)
            )
        except OSError as error:
            text = f"the evaluator cannot load it ({error})"
            raise DamagedWorkbook(path=book.package.path.name, text=text) from error
        self._workbook.set_temporal_egress("serial")
        self._workbook.register_function(SITE, self._answer, min_args=1)
        self._workbook.register_function(FIT, _fit, min_args=3, max_args=3)
        self._workbook.register_function(MAP, natives.ArrayMap(), min_args=2)
        for name, function in natives.REGISTERED.items():
            self._workbook.register_function(name, function)

    def _set_iteration(self, config: Any) -> None:  # noqa: ANN401 - the evaluator's own type
        settings = self.book.iteration
        if settings.get("iterate", "0") in {"1", "true"}:
            config.cycle_policy = "iterate"
            try:
                count = int(settings.get("iterateCount", "100"))
                delta = float(settings.get("iterateDelta", "0.001"))
            except ValueError as error:
                text = "its settings for iterative calculation are no numbers"
                raise DamagedWorkbook(path=self.book.package.path.name, text=text) from error
            config.iterate_max_iterations = min(max(count, 1), 10_000)
            config.iterate_max_change = delta if 0 <= delta < math.inf else 0.001

    def run(self) -> None:
        """Evaluate.

        Raises
        ------
        WorkbookTooLarge. The evaluation takes longer than the limit.
        EvaluationStopped. The evaluator gives up on all of these formulas because of some of them.
        """
        name, limits = self.book.package.path.name, self.book.package.limits
        self._deadline = time.monotonic() + limits.seconds
        try:
            self._workbook.evaluate_all()
        except formualizer.ExcelEvaluationError as error:
            if time.monotonic() > self._deadline:
                text = "formulas that take longer to evaluate"
                raise WorkbookTooLarge(path=name, text=text, limit=f"{limits.seconds} s") from error
            raise EvaluationStopped(str(error)) from error

    def raw(self, place: Place) -> Any:  # noqa: ANN401 - any worksheet value
        """The evaluator's own value of a cell."""
        return self._workbook.get_value(place.sheet, place.row, place.column)

    def failure(self, place: Place) -> str | None:
        """Why the evaluator has no value for a cell; None where it has one."""
        value = self.raw(place)
        return NOT_EVALUATED.get(value["kind"]) if natives.is_error(value) else None

    def value(self, place: Place) -> Stored:
        """A cell's value as a worksheet has it."""
        return worksheet_value(self.raw(place))

    def spilled(self, place: Place) -> tuple[int, int]:
        """Rows and columns over which a cell's result spills."""
        spill = self._workbook.inspect_cell(f"{place}").cell.spill
        if spill is None or not spill.extent:
            return 1, 1
        area = parse_area(spill.extent, place.sheet)
        return (1, 1) if area is None else (area.rows, area.columns)

    # --- our functions -----------------------------------------------------------------------------

    def _answer(self, number: float, *values: object) -> object:
        if time.monotonic() > self._deadline:
            self._workbook.cancel()  # the evaluator looks at its own clock between calls alone
            return natives.error("Num")
        site = self.sites[int(number)]
        arguments: list[object] = []
        for position, value in enumerate(values):
            if position in site.omitted:
                arguments.append(None)
            elif value is None:  # in a circle, a formula cell that has no value yet counts as zero
                arguments.append(0.0 if position in site.computed else self.functions.blank)
            else:
                arguments.append(_argument(value))
        result = self.functions.evaluate(site.name, arguments)
        self.answers[site.number] = Answer(tuple(arguments), result)
        self._answered += 1
        if self.progress is not None:
            self.progress(self._answered)
        given = _given(result)
        return given if site.fit is None else natives.fitted(given, *site.fit)

    # --- what the evaluator loads ------------------------------------------------------------------

    def _package(self) -> bytes:
        """A bare workbook with the formulas to evaluate and every other cell as a constant."""
        sheets = list(self.book.sheets.values())
        numbers = range(1, len(sheets) + 1)
        parts = {
            "[Content_Types].xml": f'{_HEAD}<Types xmlns="{_PACKAGE}/content-types">'
            '<Default Extension="rels" '
            'ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
            '<Default Extension="xml" ContentType="application/xml"/>'
            f'<Override PartName="/xl/workbook.xml" ContentType="{_TYPES}.sheet.main+xml"/>'
            + "".join(
                f'<Override PartName="/xl/worksheets/sheet{n}.xml" ContentType="{_TYPES}.worksheet+xml"/>'
                for n in numbers
            )
            + "</Types>",
            "_rels/.rels": f'{_HEAD}<Relationships xmlns="{_PACKAGE}/relationships"><Relationship Id="rId1" '
            f'Type="{_OFFICE}/officeDocument" Target="xl/workbook.xml"/></Relationships>',
            "xl/workbook.xml": f'{_HEAD}<workbook xmlns="{_NAMESPACE}" xmlns:r="{_OFFICE}"><sheets>'
            + "".join(
                f'<sheet name={quoteattr(sheet.name)} sheetId="{n}" r:id="rId{n}"/>'
                for n, sheet in zip(numbers, sheets, strict=True)
            )
            + "</sheets></workbook>",
            "xl/_rels/workbook.xml.rels": f'{_HEAD}<Relationships xmlns="{_PACKAGE}/relationships">'
            + "".join(
                f'<Relationship Id="rId{n}" Type="{_OFFICE}/worksheet" Target="worksheets/sheet{n}.xml"/>'
                for n in numbers
            )
            + "</Relationships>",
        }
        stream = io.BytesIO()
        with zipfile.ZipFile(stream, "w", zipfile.ZIP_STORED) as archive:
            for part, text in parts.items():
                archive.writestr(part, text)
            for n, sheet in zip(numbers, sheets, strict=True):
                archive.writestr(f"xl/worksheets/sheet{n}.xml", self._sheet_part(sheet.name))
        return stream.getvalue()

    def _sheet_part(self, name: str) -> str:
        sheet = self.book.sheets[name]
        rows: dict[int, dict[int, str]] = {}

        def put(row: int, column: int, content: str) -> None:
            rows.setdefault(row, {})[column] = content

        for (row, column), value in sheet.values.items():
            put(row, column, _constant(value))
        evaluated = []
        for (row, column), stored in sheet.formulas.items():
            formula = self.formulas.get(Place(name, row, column))
            if formula is None:
                if stored.value is not None:
                    put(row, column, _constant(stored.value))
            else:
                put(row, column, f"><f>{encoded(formula.text[1:])}</f></c>")
                if not stored.area.single:
                    evaluated.append(stored.area)
        for (row, column), value in sheet.members.items():
            if value is not None and not any(area.covers(row, column) for area in evaluated):
                put(row, column, _constant(value))
        lines = [f'{_HEAD}<worksheet xmlns="{_NAMESPACE}"><sheetData>']
        for row in sorted(rows):
            cells = rows[row]
            lines.append(f'<row r="{row}">')
            lines.extend(f'<c r="{column_letters(column)}{row}"{cells[column]}' for column in sorted(cells))
            lines.append("</row>")
        lines.append("</sheetData></worksheet>")
        return "".join(lines)


def _constant(value: Stored) -> str:
    """The rest of a constant's cell element, from behind its address."""
    if isinstance(value, bool):
        return f' t="b"><v>{int(value)}</v></c>'
    if isinstance(value, str):
        return f' t="inlineStr"><is><t xml:space="preserve">{encoded(value)}</t></is></c>'
    if isinstance(value, CellError):
        kind = value.value if value.value in _KINDS else "#VALUE!"
        return f' t="e"><v>{kind}</v></c>'
    return f"><v>{value!r}</v></c>"


def _fit(rows: float, columns: float, value: object) -> object:
    return natives.fitted(value, int(rows), int(columns))


def _argument(value: Any) -> object:  # noqa: ANN401 - any worksheet value
    """A value of the evaluator as our functions take it."""
    if isinstance(value, list):
        return [[None if item is None else _argument(item) for item in row] for row in value]
    if isinstance(value, dict):
        return CellError(WORKSHEET_VALUES.get(value["kind"], "#VALUE!"))
    return value


def _given(result: object) -> object:
    """A result of our functions as the evaluator takes it."""
    if isinstance(result, list):
        return [[_given(item) for item in row] for row in result]
    if isinstance(result, CellError):
        return natives.error(_KINDS.get(result.value, "Value"))
    if isinstance(result, float) and not math.isfinite(result):
        return natives.error("Num")
    return result


def worksheet_value(value: Any) -> Stored:  # noqa: ANN401 - any worksheet value
    """A value of the evaluator as a worksheet stores it."""
    if natives.is_error(value):
        return CellError(WORKSHEET_VALUES.get(value["kind"], "#VALUE!"))
    if isinstance(value, bool | str) or value is None:
        return value
    if isinstance(value, list):
        return worksheet_value(value[0][0]) if value and value[0] else None
    number = float(value)
    return number if math.isfinite(number) else CellError("#NUM!")


def missing_functions(names: Collection[str]) -> set[str]:
    """Those of the spreadsheet's functions that the evaluator does not have."""
    wanted = sorted(name for name in names if name not in natives.REGISTERED and name != ":")
    if not wanted:
        return set()
    scratch = formualizer.Workbook()
    scratch.add_sheet("S")
    missing = set()
    for row, name in enumerate(wanted, 1):
        try:
            scratch.set_formula("S", row, 1, f"={name}()")
            value = scratch.evaluate_cell("S", row, 1)
        except (formualizer.ExcelEvaluationError, formualizer.ParserError, ValueError, RuntimeError):
            missing.add(name)
            continue
        if natives.is_error(value) and value["kind"] == "Name":
            missing.add(name)
    return missing
