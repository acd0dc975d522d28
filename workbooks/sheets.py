"""What the samples share: a sheet that knows its cells' values and expectations, its styles, and the making.

A sample is written twice. The first file has no results; the engine recalculates it as it would anybody's;
the second file holds those results, so that tables and charts are right before anything recalculates.
"""

from __future__ import annotations

import json
import tempfile
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from datetime import UTC, datetime
from pathlib import Path
from typing import Any

import xlsxwriter
from xlsxwriter.utility import xl_cell_to_rowcol, xl_range_abs, xl_rowcol_to_cell

from thermofuncs.cli import catalogue_functions
from thermofuncs.errors import CellError
from thermofuncs.workbook import recalculate

Value = float | str | bool
Values = Mapping[tuple[str, int, int], Value]

MADE = datetime(2025, 3, 3, tzinfo=UTC).replace(tzinfo=None)
# Excel computes a file anew that an older calculation engine saved, and without the functions at hand it
# would show #NAME?; with this number it shows the results that the file holds.
CALCULATION_ENGINE = 191029
INK, RULE = "#22384A", "#B8C4CC"
INPUT, OURS, MET, NOT_MET = "#FFF3C9", "#E4F0EC", "#D8EDD6", "#F5CBC7"
CAUTION, WRONG = "#FBE6D4", "#8C2F25"
FIRST_COLOUR, SECOND_COLOUR = "#1F6F78", "#B5482F"

_BASE: dict[str, Any] = {"font_name": "Arial", "font_size": 10, "valign": "vcenter", "font_color": "#1A1A1A"}
_CELL: dict[str, Any] = {"border": 1, "border_color": RULE}
_HEADER: dict[str, Any] = {"bold": True, "font_color": "#FFFFFF", "bg_color": INK, "text_wrap": True, "align": "center"}
_ENTRY: dict[str, Any] = {"bg_color": INPUT, "font_color": "#12439B", "locked": False}
_LEFT: dict[str, Any] = {"align": "left", "indent": 1, "text_wrap": True}
_RIGHT: dict[str, Any] = {"align": "right", "indent": 1}
STYLES: dict[str, dict[str, Any]] = {
    "plain": {},
    "title": {"bold": True, "font_size": 16, "font_color": INK},
    "subtitle": {"text_wrap": True, "font_size": 10, "italic": True, "font_color": "#4A5A66"},
    "section": {"bold": True, "font_size": 11, "font_color": INK, "bottom": 2, "bottom_color": INK},
    "header": _CELL | _HEADER,
    "header left": _CELL | _HEADER | {"align": "left", "indent": 1},
    "label": _CELL | _LEFT,
    "note": _CELL | _LEFT | {"font_size": 9, "font_color": "#46545E"},
    "unit": _CELL | {"align": "center", "text_wrap": True},
    "text": {"text_wrap": True, "valign": "top"},
    "line": {"text_wrap": True, "bottom": 1, "bottom_color": RULE},
    "caution": _LEFT | {"bg_color": CAUTION, "border": 1, "border_color": "#C9854C"},
    "input": _CELL | _ENTRY | _RIGHT,
    "input text": _CELL | _ENTRY | _LEFT,
    "ours": _CELL | _RIGHT | {"bg_color": OURS},
    "ours text": _CELL | _LEFT | {"bg_color": OURS},
    "native": _CELL | _RIGHT,
    "native text": _CELL | _LEFT,
    "wrong": _CELL | _RIGHT | {"italic": True, "font_color": WRONG},
    "wrong text": _CELL | _LEFT | {"italic": True, "font_color": WRONG},
    "verdict": _CELL | {"align": "center", "bold": True},
}


@dataclass(slots=True)
class Sample:
    """A workbook under construction.

    Parameters
    ----------
    book : xlsxwriter Workbook.
    values : mapping. Results by sheet, row and column from zero; empty in the first writing.
    expected : list of dict. What the side file says.
    """

    book: Any
    values: Values
    expected: list[dict[str, Any]] = field(default_factory=list)
    formats: dict[tuple[str, str], Any] = field(default_factory=dict)

    def style(self, name: str, number: str = "") -> Any:  # noqa: ANN401 - the library ships no types
        """A format by its name and number format."""
        key = name, number
        if key not in self.formats:
            properties = _BASE | STYLES[name] | ({"num_format": number} if number else {})
            self.formats[key] = self.book.add_format(properties)
        return self.formats[key]

    def sheet(self, name: str, widths: list[float], *, repeat: int | None = None) -> Sheet:
        """A new sheet, set up to print across one landscape page."""
        inner = self.book.add_worksheet(name)
        for column, width in enumerate(widths):
            inner.set_column(column, column, width, self.style("plain"))
        inner.hide_gridlines(2)
        inner.set_landscape()
        inner.set_paper(9)
        inner.set_margins(left=0.5, right=0.5, top=0.6, bottom=0.7)
        inner.fit_to_pages(1, 0)
        inner.set_footer("&L&8&F, sheet &A&R&8page &P of &N")
        if repeat is not None:
            inner.repeat_rows(repeat)
            inner.freeze_panes(repeat + 1, 0)
        return Sheet(self, inner, name)

    def name(self, name: str, sheet: str, cell: str) -> None:
        """Give a cell a name that formulas use."""
        row, column = xl_cell_to_rowcol(cell)
        self.book.define_name(name, f"='{sheet}'!{xl_range_abs(row, column, row, column)}")


@dataclass(slots=True)
class Sheet:
    """One sheet of a sample."""

    sample: Sample
    inner: Any
    name: str

    def text(self, cell: str, text: str, style: str = "plain") -> None:
        """Write a text."""
        self.inner.write_string(cell, text, self.sample.style(style))

    def number(self, cell: str, number: float, style: str = "input", form: str = "General") -> None:
        """Write a number."""
        self.inner.write_number(cell, number, self.sample.style(style, form))

    def merged(self, cells: str, text: str, style: str, height: float | None = None) -> None:
        """Write a text across several cells."""
        self.inner.merge_range(cells, text, self.sample.style(style))
        if height is not None:
            self.inner.set_row(xl_cell_to_rowcol(cells.split(":", maxsplit=1)[0])[0], height)

    def headers(self, first: str, texts: list[str], height: float = 42) -> None:
        """Write a row of column headings."""
        row, column = xl_cell_to_rowcol(first)
        for offset, text in enumerate(texts):
            self.inner.write_string(row, column + offset, text, self.sample.style("header"))
        self.inner.set_row(row, height)

    def formula(
        self, cell: str, formula: str, style: str = "", form: str = "General", given: Value | None = None
    ) -> None:
        """Write a formula with its result: the recalculation's, or given where nothing of ours is near it."""
        row, column = xl_cell_to_rowcol(cell)
        style = style or ("ours" if "TF." in formula else "native")
        self.inner.write_formula(row, column, formula, self.sample.style(style, form), self._value(row, column, given))

    def array(
        self, cells: str, formula: str, styles: Mapping[int, tuple[str, str]] | None = None, *, headed: bool = True
    ) -> None:
        """Write an array formula over a sized range with all its results; styles and number formats by column."""
        first, last = cells.split(":")
        (top, left), (bottom, right) = xl_cell_to_rowcol(first), xl_cell_to_rowcol(last)
        self.inner.write_array_formula(
            top, left, bottom, right, "{" + formula + "}",
            self._array_look(0, 0, styles or {}, headed=headed), self._value(top, left, None),
        )  # fmt: skip
        for row in range(top, bottom + 1):
            for column in range(left, right + 1):
                if (row, column) == (top, left):
                    continue
                value = self._value(row, column, None)
                look = self._array_look(row - top, column - left, styles or {}, headed=headed)
                if isinstance(value, str):
                    self.inner.write_string(row, column, value, look)
                else:
                    self.inner.write_number(row, column, value, look)

    def _array_look(self, row: int, column: int, styles: Mapping[int, tuple[str, str]], *, headed: bool) -> object:
        if headed and row == 0:
            return self.sample.style("header left")
        return self.sample.style(*styles.get(column, ("ours text", "General")))

    def expect(
        self, cell: str, expected: Value, tolerance: float, kind: str, source: str, unit: str = "1"
    ) -> None:
        """Enter a cell into the side file, with a value that the engine did not compute."""
        self.sample.expected.append(
            {
                "sheet": self.name, "cell": cell, "expected": expected, "tolerance": tolerance, "unit": unit,
                "kind": kind, "source": source,
            }
        )  # fmt: skip

    def pin(self, cell: str, unit: str = "1") -> None:
        """Enter a cell into the side file with the value that the engine gives now: it guards against change."""
        row, column = xl_cell_to_rowcol(cell)
        value = self._value(row, column, None)
        digits = abs(value) * 1e-9 if isinstance(value, float) else 0.0
        self.expect(cell, value, digits, "pinned", "the engine itself: guards against change, proves nothing", unit)

    def _value(self, row: int, column: int, given: Value | None) -> Value:
        found = self.sample.values.get((self.name, row, column), given)
        if found is None:
            if self.sample.values:
                message = f"no result for {self.name}!{xl_rowcol_to_cell(row, column)}"
                raise ValueError(message)
            return 0.0
        return found


def make(path: Path, build: Callable[[Sample], None], title: str) -> None:
    """Make a sample and its side file.

    Raises
    ------
    ValueError. A cell could not be evaluated, or has no result.
    """
    with tempfile.TemporaryDirectory() as folder:
        draft = Path(folder) / path.name
        _write(draft, build, title, {})
        result = recalculate(draft, catalogue_functions())
        if result.kept:
            message = f"{path.name}: {result.kept}"
            raise ValueError(message)
        found = result.values | {change.place: change.after for change in result.differing}
        values: dict[tuple[str, int, int], Value] = {}
        for place, value in found.items():
            plain = value.value if isinstance(value, CellError) else value
            if plain is not None:
                values[place.sheet, place.row - 1, place.column - 1] = plain
        expected = _write(draft, build, title, values)
        # numbers of arrays come out of the library with 16 digits: the engine writes them with all bits
        recalculate(draft, catalogue_functions()).save(path)
    side = {"workbook": path.name, "cells": expected}
    path.with_suffix(".expected.json").write_text(
        json.dumps(side, ensure_ascii=False, indent=1) + "\n", encoding="utf-8", newline="\n"
    )


def _write(path: Path, build: Callable[[Sample], None], title: str, values: Values) -> list[dict[str, Any]]:
    with xlsxwriter.Workbook(path) as book:
        book.set_properties({"title": title, "subject": "A sample with invented plant figures", "created": MADE})
        book.set_calc_mode("auto", CALCULATION_ENGINE)
        book.calc_on_load = False
        sample = Sample(book, values)
        build(sample)
    return sample.expected
