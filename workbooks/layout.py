"""The parts of a calculation that every sample has: title block, inputs, results, checks, working, charts."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, NamedTuple

from workbooks.sheets import FIRST_COLOUR, INK, MET, NOT_MET, Sample, Sheet

OWN = "Relation between cells of this workbook: rounding alone may differ"
SPELLING = (
    "Formulas are spelled for LibreOffice Calc and for recalculation without a spreadsheet (TF.NAME). Tables of "
    "several cells are array formulas. Every other formula is the spreadsheet's own."
)


class Input(NamedTuple):
    """One input: a number or a text, the number's format, its unit, its name and where it comes from."""

    item: str
    value: float | str
    form: str
    unit: str
    name: str
    note: str


class Result(NamedTuple):
    """One result: a formula, its number format, its unit, its name if others use it, and a remark."""

    item: str
    formula: str
    form: str
    unit: str
    name: str = ""
    note: str = ""


class Check(NamedTuple):
    """One comparison: a formula, a number or formula to hold it against, how far apart they may be, and why."""

    what: str
    here: str
    reference: float | str
    limit: float
    unit: str
    form: str
    source: str = OWN


class Curve(NamedTuple):
    """One line of a chart: its name, its ranges, its colour, and whether it is broken."""

    name: str
    x: str
    y: str
    colour: str = FIRST_COLOUR
    broken: bool = False


def title_block(sheet: Sheet, title: str, plant: str, document: str, purpose: str) -> None:
    """Rows 2 to 9: what it is, who signs, what it is for, what the colours mean."""
    sheet.merged("B2:F2", title, "title", 26)
    sheet.merged("B3:F3", plant, "subtitle", 18)
    sheet.text("B4", document, "line")
    sheet.merged("C4:E4", "Prepared (name, date):", "line", 26)
    sheet.text("F4", "Checked (name, date):", "line")
    sheet.merged("B5:F5", "Status: for checking. Not to be used until both lines above are signed.", "subtitle", 18)
    section(sheet, 7, "Purpose, method and limits")
    sheet.merged("B8:F8", purpose, "text", 46)
    sheet.text("B9", "Input, may be changed", "input text")
    sheet.text("C9", "TF function", "ours text")
    sheet.merged("D9:E9", "Spreadsheet arithmetic", "native text", 18)
    sheet.text("F9", "The wrong way, shown for comparison alone", "wrong text")


def section(sheet: Sheet, row: int, title: str, columns: str = "B:F") -> None:
    """A heading across the sheet."""
    first, last = columns.split(":")
    sheet.merged(f"{first}{row}:{last}{row}", title, "section", 22)


def inputs(sheet: Sheet, row: int, entries: Sequence[Input]) -> None:
    """The table of inputs from a heading's row on; each input gets its name."""
    section(sheet, row, "Inputs")
    sheet.headers(f"B{row + 1}", ["Item", "Value", "Unit", "Name in formulas", "Source or note"], 20)
    for line, entry in enumerate(entries, row + 2):
        sheet.text(f"B{line}", entry.item, "label")
        if isinstance(entry.value, str):
            sheet.text(f"C{line}", entry.value, "input text")
            if len(entry.value) > 20:
                sheet.inner.set_row(line - 1, 28)
        else:
            sheet.number(f"C{line}", entry.value, "input", entry.form)
        sheet.text(f"D{line}", entry.unit, "unit")
        sheet.text(f"E{line}", entry.name, "unit")
        sheet.text(f"F{line}", entry.note, "note")
        sheet.sample.name(entry.name, sheet.name, f"C{line}")


def allow(sheet: Sheet, cells: str, low: float, high: float, what: str) -> None:
    """Refuse an input outside its range."""
    sheet.inner.data_validation(
        cells,
        {
            "validate": "decimal", "criteria": "between", "minimum": low, "maximum": high,
            "error_title": "Outside this sheet's range", "error_message": f"Enter {what}.",
        },
    )  # fmt: skip


def results(sheet: Sheet, row: int, title: str, entries: Sequence[Result]) -> None:
    """A table of results from a heading's row on; our own go into the side file."""
    section(sheet, row, title)
    sheet.headers(f"B{row + 1}", ["Item", "Value", "Unit", "Name in formulas", "Formula and note"], 20)
    for line, entry in enumerate(entries, row + 2):
        sheet.text(f"B{line}", entry.item, "label")
        sheet.formula(f"C{line}", entry.formula, "", entry.form)
        sheet.text(f"D{line}", entry.unit, "unit")
        sheet.text(f"E{line}", entry.name, "unit")
        sheet.text(f"F{line}", entry.formula[1:] + (f"   {entry.note}" if entry.note else ""), "note")
        if entry.name:
            sheet.sample.name(entry.name, sheet.name, f"C{line}")
        if "TF." in entry.formula:
            sheet.pin(f"C{line}", entry.unit)


def checks_met(sheet: Sheet, row: int, count: int) -> None:
    """The line that says how many checks are met, and the cautions of one result."""
    sheet.text(f"B{row}", "Checks met", "label")
    verdicts = f"Checks!H5:H{4 + count}"
    sheet.formula(f"C{row}", f'=COUNTIF({verdicts},"met")&" of "&COUNTA({verdicts})', "verdict")
    sheet.text(f"D{row}", "", "unit")
    sheet.text(f"E{row}", "", "unit")
    sheet.text(f"F{row}", "Each line, its reference and its limit: sheet Checks", "note")
    sheet.expect(f"C{row}", f"{count} of {count}", 0.0, "derived", "every line of the sheet Checks")


def closing(sheet: Sheet, row: int, caution: str) -> None:
    """The caution and the stamp at the foot of a calculation."""
    section(sheet, row, "Caution")
    sheet.merged(f"B{row + 1}:F{row + 1}", caution, "caution", 62)
    sheet.text(f"B{row + 2}", "Engine, data and constants", "label")
    sheet.inner.merge_range(f"C{row + 2}:F{row + 2}", "", sheet.sample.style("ours text"))
    sheet.formula(f"C{row + 2}", "=TF.STAMP()", "ours text")
    sheet.merged(f"B{row + 3}:F{row + 3}", SPELLING, "subtitle", 28)


def checks(sample: Sample, entries: Sequence[Check]) -> Sheet:
    """The sheet Checks: each result beside its reference, with a verdict that shows its colour."""
    sheet = sample.sheet("Checks", [2, 46, 16, 16, 13, 11, 10, 10, 62])
    sheet.merged("B2:I2", "Checks of this workbook", "title", 26)
    heads = ["What is compared", "Here", "Reference", "Difference", "Limit", "Unit", "Result", "Source"]
    sheet.headers("B4", heads, 22)
    for row, entry in enumerate(entries, 5):
        sheet.text(f"B{row}", entry.what, "label")
        sheet.formula(f"C{row}", entry.here, "", entry.form)
        if isinstance(entry.reference, str):
            sheet.formula(f"D{row}", entry.reference, "", entry.form)
        else:
            sheet.number(f"D{row}", entry.reference, "native", entry.form)
        sheet.formula(f"E{row}", f"=C{row}-D{row}", "native", "0.0E+00")
        sheet.number(f"F{row}", entry.limit, "native", "0.0E+00" if entry.limit < 0.001 else "General")
        sheet.text(f"G{row}", entry.unit, "unit")
        sheet.formula(f"H{row}", f'=IF(ABS(E{row})<=F{row},"met","look")', "verdict")
        sheet.text(f"I{row}", entry.source, "note")
        sheet.inner.set_row(row - 1, 20 if len(entry.source) < 70 else 42)
        sheet.expect(f"H{row}", "met", 0.0, "derived", entry.source)
    for criteria, colour in (("==", MET), ("!=", NOT_MET)):
        look = sample.book.add_format({"bg_color": colour})
        sheet.inner.conditional_format(
            f"H5:H{4 + len(entries)}", {"type": "cell", "criteria": criteria, "value": '"met"', "format": look}
        )
    return sheet


def working_table(sheet: Sheet, row: int, steps: int, title: str, formula: str) -> None:
    """A table of working in columns B to H under its heading."""
    section(sheet, row, title, "B:H")
    styles = {0: ("ours", "0"), 4: ("ours", "0.0000000000"), 5: ("unit", "General")}
    sheet.array(f"B{row + 1}:H{row + 1 + steps}", formula, styles)
    sheet.inner.set_row(row, 20)
    for line in range(row + 1, row + 1 + steps):
        sheet.inner.set_row(line, 42)


def curves(sample: Sample, title: str, lines: Sequence[Curve], *, marked: bool = True) -> Any:  # noqa: ANN401
    """A chart of lines over a measured axis; the library ships no types."""
    chart = sample.book.add_chart({"type": "scatter", "subtype": "straight_with_markers" if marked else "straight"})
    for line in lines:
        look: dict[str, Any] = {"color": line.colour, "width": 1.75, "dash_type": "dash" if line.broken else "solid"}
        entry: dict[str, Any] = {"name": line.name, "categories": line.x, "values": line.y, "line": look}
        if marked:
            entry["marker"] = {
                "type": "circle", "size": 5, "border": {"color": line.colour}, "fill": {"color": line.colour},
            }  # fmt: skip
        chart.add_series(entry)
    chart.set_title({"name": title, "name_font": {"name": "Arial", "size": 12, "color": INK}, "overlay": False})
    chart.set_legend({"position": "bottom", "font": {"name": "Arial", "size": 9}})
    return chart


def axis(title: str, low: float, high: float, step: float | None, form: str = "General") -> dict[str, Any]:
    """How an axis looks."""
    return {
        "name": title, "name_font": {"name": "Arial", "size": 10, "bold": False}, "min": low, "max": high,
        "major_unit": step, "num_font": {"name": "Arial", "size": 9}, "num_format": form, "label_position": "low",
        "major_gridlines": {"visible": True, "line": {"color": "#DDE3E7", "width": 0.75}},
        "line": {"color": "#7A8A96"},
    }  # fmt: skip
