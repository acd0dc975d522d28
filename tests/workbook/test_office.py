"""Files that a real spreadsheet saved, and our results seen by it."""

from __future__ import annotations

import zipfile
from pathlib import Path
from typing import TYPE_CHECKING

import xlsxwriter

from thermofuncs.workbook import Place
from thermofuncs.workbook.book import read_book

if TYPE_CHECKING:
    from collections.abc import Callable

    from tests.workbook.conftest import Maker


def made(path: Path) -> None:
    """A workbook for the spreadsheet to save in its own way."""
    with xlsxwriter.Workbook(path) as workbook:
        sheet = workbook.add_worksheet("K of T")
        sheet.write_column("A1", [300, 400, 500])
        for row in range(1, 4):
            sheet.write_formula(f"B{row}", f"=TF.HALF(A{row})")
        sheet.write_array_formula("C1:C3", "{=TF.HALF(A1:A3)}")
        sheet.write_formula("D1", "=SUM(B1:C3)")
        sheet.write_formula("E1", "=A1*2+temperature")
        sheet.write_formula("F1", '=TF.KINDS(A1,,A9,"x")')
        sheet.conditional_format("B1:B3", {"type": "3_color_scale"})
        sheet.data_validation("A1:A3", {"validate": "decimal", "criteria": ">", "value": 0})
        sheet.write_comment("A1", "checked")
        sheet.add_table("H1:I3", {"name": "Feed", "data": [[1, 2], [3, 4]]})
        chart = workbook.add_chart({"type": "scatter"})
        chart.add_series({"categories": "='K of T'!$A$1:$A$3", "values": "='K of T'!$B$1:$B$3"})
        sheet.insert_chart("H10", chart)
        workbook.define_name("temperature", "='K of T'!$A$2")


def test_file_saved_by_the_spreadsheet(
    maker: Maker, tmp_path: Path, office: Callable[[Path, str], Path]
) -> None:
    """A file that the spreadsheet saved is recalculated, and every part but the patched sheet stays."""
    source = maker.folder / "made.xlsx"
    made(source)
    saved = office(source, "xlsx:Calc MS Excel 2007 XML")
    result = maker.recalculate(saved)
    values = {str(place): value for place, value in result.values.items()}
    assert values["'K of T'!B3"] == values["'K of T'!C3"] == 250.0
    assert values["'K of T'!D1"] == 1200.0
    assert values["'K of T'!F1"] == "float omitted blank str"
    copy = tmp_path / "copy.xlsx"
    result.save(copy)
    old, new = zipfile.ZipFile(saved), zipfile.ZipFile(copy)
    assert old.namelist() == new.namelist()
    assert [name for name in old.namelist() if old.read(name) != new.read(name)] == [
        "xl/worksheets/sheet1.xml"
    ]
    assert maker.recalculate(copy).changes == []


def test_the_spreadsheet_reads_our_copy(
    maker: Maker, tmp_path: Path, office: Callable[[Path, str], Path]
) -> None:
    """The spreadsheet opens a recalculated copy and shows our values in plain cells.

    It computes array formulas anew at loading, so without its add-in those are left out here.
    """
    source = maker.folder / "made.xlsx"
    made(source)
    copy = tmp_path / "copy.xlsx"
    maker.recalculate(source).save(copy)
    back = read_book(office(copy, "xlsx:Calc MS Excel 2007 XML"))
    assert [back.value(Place("K of T", row, 2)) for row in (1, 2, 3)] == [150.0, 200.0, 250.0]
    assert back.value(Place("K of T", 1, 6)) == "float omitted blank str"


def test_native_functions_agree(maker: Maker, office: Callable[[Path, str], Path]) -> None:
    """What our cells read through the spreadsheet's own functions is what the spreadsheet computes."""
    formulas = [
        "SUMPRODUCT(EXP(A1:A4/100))", "SUMPRODUCT(LN(A1:A4),A1:A4)", "SUM(MMULT(MINVERSE(A1:B2),A1:B2))",
        "MDETERM(A1:B2)", "SLOPE(LN(B1:B4),A1:A4)", "INTERCEPT(B1:B4,A1:A4)", "RSQ(B1:B4,A1:A4)",
        "INDEX(LINEST(B1:B4,A1:A4),1,1)", "FORECAST(3,B1:B4,A1:A4)", "SUM(TREND(B1:B4,A1:A4))",
        "VLOOKUP(20,A1:B4,2,FALSE)", "INDEX(B1:B4,MATCH(25,A1:A4,1))", "ROUND(A1/3,4)", "LOG(A2)+LOG10(A2)",
        "SUMPRODUCT(--ISNUMBER(A1:A5))", "10^(2.5-3/(A1+1))", "STDEV(A1:A4)", "IFERROR(1/0,7)", "A1^2/-B1",
        'SUMIF(A1:A4,">15",B1:B4)', "AVERAGE(A1:B4)", "POWER(A1,0.5)", 'LEN(A1&"x")', "MOD(A4,7)",
        "SUMPRODUCT(A1:A4^2,1/B1:B4)", "LOGEST(B1:B4,A1:A4)", "CORREL(A1:A4,B1:B4)", "MEDIAN(A1:B4)",
    ]
    source = maker.folder / "natives.xlsx"
    with xlsxwriter.Workbook(source) as workbook:
        sheet = workbook.add_worksheet("S")
        for row, pair in enumerate([(10, 2.5), (20, 3.5), (30, 7.25), (40, 9)]):
            sheet.write_row(row, 0, pair)
        for row, formula in enumerate(formulas):
            sheet.write_formula(row, 3, f"={formula}", None, "")
            sheet.write_formula(row, 4, f"=TF.KINDS(D{row + 1})")
    theirs = read_book(office(source, "xlsx:Calc MS Excel 2007 XML"))
    ours = maker.recalculate(source)
    answers = {ours.formulas[place].sites[0].number: place for place in ours.formulas if place.column == 5}
    for number, place in answers.items():
        (given,) = ours.answers[number].arguments
        expected = theirs.value(Place("S", place.row, 4))
        assert isinstance(given, float), formulas[place.row - 1]
        assert isinstance(expected, float), formulas[place.row - 1]
        assert abs(given - expected) <= 1e-9 * max(1.0, abs(expected)), formulas[place.row - 1]
