"""A quantity text put together in a cell, where the spreadsheet writes a decimal comma."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest
import xlsxwriter

import thermofuncs
from thermofuncs.cli import catalogue_functions
from thermofuncs.workbook import Place, recalculate
from thermofuncs.workbook.book import read_book

SHIFT = "CO(g) + H2O(g) = CO2(g) + H2(g)"
GERMAN = """<?xml version="1.0" encoding="UTF-8"?>
<oor:items xmlns:oor="http://openoffice.org/2001/registry">
<item oor:path="/org.openoffice.Setup/L10N"><prop oor:name="ooSetupSystemLocale" oor:op="fuse">
<value>de-DE</value></prop></item></oor:items>"""


def made(path: Path, temperature_text: str | None) -> None:
    """A workbook with a temperature in degC, its text with the unit, and our function of that text."""
    with xlsxwriter.Workbook(path) as workbook:
        sheet = workbook.add_worksheet("S")
        sheet.write("A1", 626.85)
        if temperature_text is None:
            sheet.write_formula("B1", '=A1&" degC"', value="")
        else:
            sheet.write("B1", temperature_text)
        sheet.write_formula("C1", f'=TF.LGK("{SHIFT}",B1)')


def test_a_spreadsheet_in_a_comma_locale(tmp_path: Path, office: Callable[[Path, str], Path]) -> None:
    """CELL & " degC" becomes text with a comma there, and the recalculation reads the cell's number all the same."""
    (tmp_path / "profile" / "user").mkdir(parents=True)
    (tmp_path / "profile" / "user" / "registrymodifications.xcu").write_text(GERMAN, encoding="utf-8")
    made(tmp_path / "book.xlsx", None)
    saved = office(tmp_path / "book.xlsx", "xlsx:Calc MS Excel 2007 XML")
    assert read_book(saved).value(Place("S", 1, 2)) == "626,85 degC"
    result = recalculate(saved, catalogue_functions())
    assert result.values[Place("S", 1, 3)] == pytest.approx(thermofuncs.call("LGK", SHIFT, 900.0), rel=1e-12)
    assert [str(change.place) for change in result.differing] == ["S!B1"]


def test_a_decimal_comma_in_a_cell(tmp_path: Path) -> None:
    """A text with a decimal comma is refused with the sentence that shows how to write it."""
    made(tmp_path / "book.xlsx", "626,85 degC")
    result = recalculate(tmp_path / "book.xlsx", catalogue_functions())
    assert [(error.value, error.sentence) for error in result.errors] == [
        ("#VALUE!", "TF.LGK: T is '626,85 degC', with a comma in the number: write 626.85 degC.")
    ]


def test_a_long_equation_in_a_cell(tmp_path: Path) -> None:
    """An equation text of 300 characters works from a cell."""
    text = SHIFT.replace(" = ", " " * (300 - len(SHIFT)) + " = ")
    assert len(text) == 300
    long = " + ".join(["1/16 CO(g)"] * 16) + " + H2O(g) = " + " + ".join(["1/10 CO2(g)"] * 10) + " + H2(g)"
    assert len(long) > 255
    with xlsxwriter.Workbook(tmp_path / "book.xlsx") as workbook:
        sheet = workbook.add_worksheet("S")
        sheet.write_column("A1", [text, long])
        sheet.write_formula("B1", "=TF.LNK(A1,900)")
        sheet.write_formula("B2", "=TF.LNK(A2,900)")
    result = recalculate(tmp_path / "book.xlsx", catalogue_functions())
    expected = thermofuncs.call("LNK", SHIFT, 900.0)
    assert [result.values[Place("S", row, 2)] for row in (1, 2)] == pytest.approx([expected] * 2, rel=1e-12)
