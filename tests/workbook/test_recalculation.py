"""Recalculating: which cells, with which arguments, to which values."""

from __future__ import annotations

import math
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from thermofuncs.errors import CellError
from thermofuncs.workbook import Place, Recalculation

if TYPE_CHECKING:
    from tests.workbook.conftest import Maker


def value(result: Recalculation, address: str) -> object:
    """The result of a cell of the sheet S, errors as their text."""
    found = result.values[Place("S", int(address[1:]), ord(address[0]) - 64)]
    return found.value if isinstance(found, CellError) else found


def kept(result: Recalculation) -> dict[str, str]:
    """Why each cell kept its stored value."""
    return {str(item.place): item.reason for item in result.kept}


@pytest.mark.parametrize(
    ("formula", "kinds"),
    [
        ("=TF.KINDS(,1)", "omitted float"),
        ("=TF.KINDS(0,)", "float omitted"),
        ("=TF.KINDS( , )", "omitted omitted"),
        ("=TF.KINDS()", ""),
        ("=TF.KINDS(B1,C9,C1)", "float blank str"),
        ("=TF.KINDS(C9:C9,IF(TRUE,C9))", "blank blank"),
        ("=TF.KINDS(B1:B3,B1:C2)", "3x1 2x2"),
        ("=TF.KINDS(1/0,NA())", "#DIV/0! #N/A"),
        ("=TF.KINDS(TRUE,B1>1)", "bool bool"),
        ("=TF.KINDS({1,2;3,4},B1:B3*2)", "2x2 3x1"),
        ("=TF.KINDS(LN(B1:B3),1/B1:B3)", "3x1 3x1"),
        ('=TF.KINDS("",C9&"")', "str str"),
        ("=TF.KINDS(B:B)", "3x1"),
        ("=TF.KINDS(#REF!)", "#REF!"),
    ],
)
def test_arguments(maker: Maker, formula: str, kinds: str) -> None:
    """An argument left out, a zero, a blank cell, a range and an error each arrive as what they are."""
    path = maker.cells(A1=formula, B1="1.5", B2="2.5", B3="4", C1="text")
    assert value(maker.recalculate(path), "A1") == kinds


@pytest.mark.parametrize(
    "spelled", ["TF.HALF", "tf_half", "_xldudf_TF_HALF", "[1]!TF_HALF", "'C:\\a b\\tf.xlam'!TF_HALF"]
)
def test_spellings(maker: Maker, spelled: str) -> None:
    """A call answers under every host's spelling."""
    assert value(maker.recalculate(maker.cells(A1=f"={spelled}(B1)+1", B1="3")), "A1") == 2.5


def test_only_ours_and_what_depends_on_them(maker: Maker) -> None:
    """Our cells and their dependents are recalculated, through names, ranges and sheets; others are not."""
    rows = (
        '<row r="1"><c r="A1"><v>8</v></c><c r="B1"><f>A1*2</f><v>16</v></c>'
        '<c r="C1"><f>TF.HALF(B1)</f><v>0</v></c><c r="D1"><f>SUM(B1:C1)</f><v>0</v></c>'
        '<c r="E1"><f>half_of_b+0</f><v>0</v></c><c r="F1"><f>A1+1</f><v>9</v></c></row>'
    )
    other = '<row r="1"><c r="A1"><f>S!D1*1</f><v>0</v></c><c r="B1"><f>S!A1</f><v>8</v></c></row>'
    names = '<definedNames><definedName name="half_of_b">TF.HALF(S!$B$1)</definedName></definedNames>'
    result = maker.recalculate(maker.package({"S": rows, "Other one": other}, workbook=names))
    assert {str(place): found for place, found in result.values.items()} == {
        "S!C1": 8.0, "S!D1": 24.0, "S!E1": 8.0, "'Other one'!A1": 24.0,
    }
    assert result.differing == []


def test_precedents_are_evaluated(maker: Maker) -> None:
    """A cell that ours read is evaluated, its stale stored value is named and left."""
    rows = '<row r="1"><c r="A1"><v>8</v></c><c r="B1"><f>A1*2</f><v>0</v></c>'
    rows += '<c r="C1"><f>TF.HALF(B1)</f><v>0</v></c></row>'
    result = maker.recalculate(maker.package({"S": rows}))
    assert value(result, "C1") == 8.0
    assert [(str(d.place), d.before, d.after) for d in result.differing] == [("S!B1", 0.0, 16.0)]
    assert [str(change.place) for change in result.changes] == ["S!C1"]


def test_array_over_a_range(maker: Maker) -> None:
    """A result fills the range of its array formula; a single one fills all of it, the rest is #N/A."""
    rows = (
        '<row r="1"><c r="A1"><f t="array" ref="A1:C3">TF.PAIRS()</f><v>9</v></c>'
        '<c r="B1"><v>9</v></c><c r="C1"><v>9</v></c><c r="E1"><v>4</v></c>'
        '<c r="F1"><f t="array" ref="F1:F2">TF.HALF(E1:E2)</f></c>'
        '<c r="G1"><f t="array" ref="G1:H2">TF.HALF(E1)</f></c><c r="I1"><f>SUM(G1:H2)</f></c></row>'
        '<row r="2"><c r="A2"><v>9</v></c><c r="B2"><v>9</v></c><c r="E2"><v>10</v></c></row>'
        '<row r="3"><c r="A3"><v>9</v></c></row>'
    )
    result = maker.recalculate(maker.package({"S": rows}))
    table = [[value(result, f"{c}{r}") for c in "ABC"] for r in (1, 2, 3)]
    assert table == [["a", 1.0, "#N/A"], ["=b", "#NUM!", "#N/A"], ["#N/A"] * 3]
    assert [value(result, f"F{r}") for r in (1, 2)] == [2.0, 5.0]
    assert [value(result, f"{c}{r}") for r in (1, 2) for c in "GH"] == [2.0] * 4
    assert value(result, "I1") == 8.0
    sentences = {str(e.place): e.sentence for e in result.errors}
    assert sentences["S!B2"] == "TF.PAIRS: no second value"
    assert sentences["S!C1"] == "The array formula covers more cells than the result has."


def test_table_in_a_plain_cell(maker: Maker) -> None:
    """In a plain cell a table shows its first value and its neighbours stay."""
    result = maker.recalculate(maker.cells(A1="=TF.PAIRS()", B1="5", A2="=SUM(B1)+TF.HALF(4)"))
    assert value(result, "A1") == "a"
    assert value(result, "A2") == 7.0


def test_shared_formula(maker: Maker) -> None:
    """The later cells of a shared formula are ours with their own references."""
    rows = "".join(
        f'<row r="{n}"><c r="A{n}"><v>{n}</v></c><c r="B{n}"><f t="shared" si="0"'
        + (' ref="B1:B3">TF.HALF(A1+$A$3)' if n == 1 else ">")
        + "</f></c></row>"
        for n in (1, 2, 3)
    )
    result = maker.recalculate(maker.package({"S": rows}))
    assert [value(result, f"B{n}") for n in (1, 2, 3)] == [2.0, 2.5, 3.0]
    assert result.formulas[Place("S", 3, 2)].written == "=TF.HALF(A3+$A$3)"


def test_structured_references(maker: Maker) -> None:
    """A call reads the cells of a table by their header, in its own row and over the column."""
    import xlsxwriter

    path = maker.folder / "table.xlsx"
    with xlsxwriter.Workbook(path) as workbook:
        sheet = workbook.add_worksheet("S")
        columns = [{"header": "T [K]"}, {"header": "half", "formula": "=TF.HALF(Feed[[#This Row],[T '[K']]])"}]
        sheet.add_table("A1:B3", {"name": "Feed", "columns": columns, "data": [[4], [6]]})
        sheet.write_formula("D1", "=SUM(TF.HALF(Feed[T '[K']]))")
    result = maker.recalculate(path)
    assert [value(result, "B2"), value(result, "B3"), value(result, "D1")] == [2.0, 3.0, 5.0]


def test_implicit_intersection(maker: Maker) -> None:
    """A column in a plain cell of the spreadsheet's own stands for its cell in the same row."""
    result = maker.recalculate(maker.cells(A1="10", A2="20", B2="=A1:A2+1", C2="=TF.HALF(B2)"))
    assert value(result, "C2") == 10.5


def test_functions_over_arrays(maker: Maker) -> None:
    """LN, EXP and ISNUMBER go over an array inside SUMPRODUCT, as in a spreadsheet."""
    result = maker.recalculate(
        maker.cells(
            A1="1", A2="2", A3="x", B1="=TF.HALF(SUMPRODUCT(EXP(A1:A2)))",
            B2="=TF.HALF(SUMPRODUCT(--ISNUMBER(A1:A3)))", B3="=TF.HALF(SUMPRODUCT(LN(A1:A2),A1:A2))",
        )
    )
    assert value(result, "B1") == pytest.approx((math.e + math.e**2) / 2, rel=1e-15)
    assert value(result, "B2") == 1.0
    assert value(result, "B3") == pytest.approx(math.log(2), rel=1e-15)


def test_matrix_functions(maker: Maker) -> None:
    """MMULT, MINVERSE and MDETERM answer; a singular matrix is #NUM!."""
    result = maker.recalculate(
        maker.cells(
            A1="2", B1="1", A2="1", B2="3", C1="=TF.HALF(MDETERM(A1:B2))",
            C2="=TF.HALF(SUM(MMULT(A1:B2,MINVERSE(A1:B2))))", D1="=TF.HALF(MDETERM(A1:A2))",
            D2="=TF.HALF(SUM(MINVERSE({1,2;2,4})))",
        )
    )
    assert value(result, "C1") == pytest.approx(2.5, rel=1e-14)
    assert value(result, "C2") == pytest.approx(1.0, rel=1e-14)
    assert value(result, "D1") == "#VALUE!"
    assert value(result, "D2") == "#NUM!"


def test_what_cannot_be_evaluated_keeps_its_value(maker: Maker) -> None:
    """A link, an unknown function and what depends on it keep their stored values, with the reason."""
    rows = (
        '<row r="1"><c r="A1"><f>[1]Sheet1!A1</f><v>6</v></c><c r="B1"><f>TF.HALF(A1)</f><v>0</v></c>'
        '<c r="C1"><f>NOSUCH(B1)</f><v>55</v></c><c r="D1"><f>C1+1</f><v>56</v></c>'
        '<c r="E1"><f>TF.HALF(D1)</f><v>28</v></c><c r="F1"><f>TF.HALFF(1)</f><v>7</v></c>'
        '<c r="G1"><f>SUM((B1</f><v>8</v></c><c r="H1"><f>TF.HALF(</f><v>9</v></c>'
        '<c r="I1"><f>TF.HALF(no_name)</f><v>9</v></c></row>'
    )
    result = maker.recalculate(maker.package({"S": rows}))
    assert result.values == {Place("S", 1, 2): 3.0}
    reasons = kept(result)
    assert reasons["S!A1"] == "it refers to another workbook ([1]Sheet1!A1)"
    assert reasons["S!C1"] == "the evaluator has no NOSUCH"
    assert reasons["S!D1"] == reasons["S!E1"] == "it depends on S!C1, which could not be evaluated"
    assert reasons["S!F1"] == (
        "it calls TF.HALFF, which is no function of this version; near names: TF.HALF"
    )
    assert reasons["S!I1"] == "no name no_name is defined in the workbook"


def test_circular_references(maker: Maker) -> None:
    """Cells in a circle and those behind it keep their values; the rest is computed."""
    result = maker.recalculate(
        maker.cells(A1="=TF.HALF(B1)", B1="=A1+1", C1="=IFERROR(B1,5)", D1="=TF.HALF(4)", E1="=E1+D1")
    )
    assert result.values == {Place("S", 1, 4): 2.0}
    reasons = kept(result)
    assert reasons["S!A1"] == reasons["S!B1"] == reasons["S!E1"] == "it is part of a circular reference"
    assert reasons["S!C1"].startswith("it depends on S!")


def test_iterative_calculation(maker: Maker) -> None:
    """Where the workbook asks for iteration a circle settles."""
    rows = '<row r="1"><c r="A1"><f>TF.HALF(B1)</f></c><c r="B1"><f>IFERROR(A1,0)+1</f></c></row>'
    settings = '<calcPr iterate="1" iterateCount="200" iterateDelta="1E-9"/>'
    result = maker.recalculate(maker.package({"S": rows}, workbook=settings))
    assert value(result, "A1") == pytest.approx(1.0, abs=1e-6)


def test_volatile_cells_are_listed(maker: Maker) -> None:
    """A volatile cell that ours read, and ours with it, are listed."""
    result = maker.recalculate(maker.cells(A1="=NOW()", B1="=TF.HALF(A1)", C1="=TODAY()", D1="=TF.HALF(2)"))
    assert [str(place) for place in result.volatile] == ["S!A1", "S!B1"]


def test_errors_name_their_origin(maker: Maker) -> None:
    """An error of ours has its sentence; one that is passed on names the cell it comes from."""
    result = maker.recalculate(maker.cells(A1="-2", B1="=TF.HALF(A1)", C1="=B1*2", D1="=TF.HALF(C1)"))
    assert {str(e.place): (e.value, e.sentence) for e in result.errors} == {
        "S!B1": ("#NUM!", "TF.HALF: x is -2: it must be above zero"),
        "S!C1": ("#NUM!", "The error comes in from S!B1."),
        "S!D1": ("#NUM!", "The error comes in from S!C1."),
    }


@pytest.mark.parametrize(
    "text", ["=1+1", " padded ", "line\nbreak", "a_x0041_b", "\x0bbell", "<&>\"'", "é😀", "x" * 32767]
)
def test_texts_arrive_and_leave_unchanged(maker: Maker, tmp_path: Path, text: str) -> None:
    """A text of any characters goes through a cell, a formula and the written file unchanged."""
    import xlsxwriter

    path = maker.folder / "texts.xlsx"
    with xlsxwriter.Workbook(path, {"strings_to_formulas": False}) as workbook:
        sheet = workbook.add_worksheet("S")
        sheet.write_string("A1", text)
        sheet.write_formula("B1", '=IF(TF.HALF(4)=2,A1,"")')
    result = maker.recalculate(path)
    assert value(result, "B1") == text
    copy = tmp_path / "copy.xlsx"
    result.save(copy)
    again = maker.recalculate(copy)
    assert again.changes == []
    assert again.book.value(Place("S", 1, 2)) == text


def test_recalculating_twice_changes_nothing(maker: Maker, tmp_path: Path) -> None:
    """A recalculated copy is its own recalculation, to the last byte of every part."""
    first = tmp_path / "first.xlsx"
    second = tmp_path / "second.xlsx"
    maker.recalculate(maker.cells(A1="0.1", B1="=TF.HALF(A1)/3", C1="=B1>1", D1="=TF.HALF(-1)")).save(first)
    result = maker.recalculate(first)
    assert result.changes == []
    result.save(second)
    assert first.read_bytes() == second.read_bytes()


def test_dates_are_serial_numbers(maker: Maker) -> None:
    """A date reaches a call as its serial number, whatever its format."""
    result = maker.recalculate(maker.cells(A1="=DATE(2024,1,2)", B1="=TF.HALF(A1)", C1="=TF.HALF(A1)+A1*0"))
    assert value(result, "B1") == 45293 / 2
