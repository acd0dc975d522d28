"""New stored results, every other byte left alone."""

from __future__ import annotations

import math
import os
import zipfile
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
import xlsxwriter
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from thermofuncs.errors import CellError, OutputRefused
from thermofuncs.workbook import output_path
from thermofuncs.workbook.book import Stored, read_book
from thermofuncs.workbook.package import open_package
from thermofuncs.workbook.patching import patched_sheet

if TYPE_CHECKING:
    from tests.workbook.conftest import Maker

HEAD = '<?xml version="1.0" encoding="UTF-8"?>\n'
NS = 'xmlns{p}="http://schemas.openxmlformats.org/spreadsheetml/2006/main"'
PART = "xl/worksheets/sheet1.xml"


def patched(maker: Maker, sheet: str, values: dict[tuple[int, int], Stored]) -> str:
    """A sheet part with new results."""
    return patched_sheet(open_package(maker.package({"S": sheet})), PART, values).decode()


def sheet(rows: str, prefix: str = "") -> str:
    """A whole sheet part."""
    p = f"{prefix}:" if prefix else ""
    ns = NS.format(p=f":{prefix}" if prefix else "")
    return f"{HEAD}<{p}worksheet {ns}><{p}sheetData>{rows}</{p}sheetData></{p}worksheet>"


@pytest.mark.parametrize(
    ("before", "new", "after"),
    [
        ('<c r="A1"><f>X()</f><v>1</v></c>', 0.1, '<c r="A1"><f>X()</f><v>0.1</v></c>'),
        ('<c r="A1" s="3" t="str"><f>X()</f><v>a</v></c>', 2.0, '<c r="A1" s="3"><f>X()</f><v>2</v></c>'),
        ('<c r="A1"><f>X()</f></c>', "=1", '<c r="A1" t="str"><f>X()</f><v>=1</v></c>'),
        ("<c r='A1' t='e'  s='1'><f>X()</f><v>#N/A</v></c>", True,
         "<c r='A1'  s='1' t=\"b\"><f>X()</f><v>1</v></c>"),
        ('<c r="A1"><f>X("&lt;v>")</f><v>1</v></c>', CellError("#NUM!"),
         '<c r="A1" t="e"><f>X("&lt;v>")</f><v>#NUM!</v></c>'),
        ('<c r="A1" cm="1" vm="7"><f>X()</f><v>1</v></c>', 5.0, '<c r="A1" cm="1"><f>X()</f><v>5</v></c>'),
        ('<c r="A1" t="inlineStr"><f>X()</f><is><t>a</t></is></c>', 5.0, '<c r="A1"><f>X()</f><v>5</v></c>'),
        ('<c r="A1"><f><![CDATA[X("<v>9</v>")]]></f><!-- <v>3</v> --><v>1</v></c>', 5.0,
         '<c r="A1"><f><![CDATA[X("<v>9</v>")]]></f><!-- <v>3</v> --><v>5</v></c>'),
        ('<c r="A1"><f>X()</f><v/></c>', 5.0, '<c r="A1"><f>X()</f><v>5</v></c>'),
        ('<c r="A1"/>', 5.0, '<c r="A1"><v>5</v></c>'),
        ('<c r="A1"></c>', "a ", '<c r="A1" t="str"><v xml:space="preserve">a </v></c>'),
        ('<c r="A1"><f>X()</f><v>1</v><extLst><ext uri="u"/></extLst></c>', 5.0,
         '<c r="A1"><f>X()</f><v>5</v><extLst><ext uri="u"/></extLst></c>'),
        ("<c><f>X()</f><v>1</v></c>", 5.0, "<c><f>X()</f><v>5</v></c>"),
        ('<c r="A1"><f>X()</f><v>1</v></c>', None, '<c r="A1"><f>X()</f></c>'),
        ('<c r="A1" t="n"><f>X()</f><v>1</v></c>', 1e300, '<c r="A1" t="n"><f>X()</f><v>1e+300</v></c>'),
    ],
)
def test_cell(maker: Maker, before: str, new: Stored, after: str) -> None:
    """Only a cell's type and value change, however the cell is written."""
    rest = '<c r="B1"><v>7</v></c><!-- end --></row><row r="2" spans="1:1"/>'
    row = f'<row r="1">{before}{rest}'
    assert patched(maker, sheet(row), {(1, 1): new}) == sheet(f'<row r="1">{after}{rest}')


def test_prefixed_elements(maker: Maker) -> None:
    """A part whose elements carry a namespace prefix keeps it, in new elements too."""
    before = "<x:row><x:c/><x:c><x:f>X()</x:f></x:c></x:row>"
    after = '<x:row><x:c/><x:c><x:f>X()</x:f><x:v>5</x:v></x:c><x:c r="C1"><x:v>6</x:v></x:c></x:row>'
    assert patched(maker, sheet(before, "x"), {(1, 2): 5.0, (1, 3): 6.0}) == sheet(after, "x")


def test_missing_cells_are_put_in(maker: Maker) -> None:
    """Cells and rows that an array fills and that are not there go in at their place."""
    before = '<row r="1"><c r="A1"><f>X()</f></c><c r="D1"/></row><row r="2"/><row r="4"></row>'
    values: dict[tuple[int, int], Stored] = {
        (1, 2): 2.0, (1, 3): "c", (2, 1): 3.0, (3, 1): 4.0, (4, 1): 5.0, (5, 1): 6.0,
    }
    after = (
        '<row r="1"><c r="A1"><f>X()</f></c><c r="B1"><v>2</v></c><c r="C1" t="str"><v>c</v></c><c r="D1"/></row>'
        '<row r="2"><c r="A2"><v>3</v></c></row><row r="3"><c r="A3"><v>4</v></c></row>'
        '<row r="4"><c r="A4"><v>5</v></c></row><row r="5"><c r="A5"><v>6</v></c></row>'
    )
    assert patched(maker, sheet(before), values) == sheet(after)


VALUES = st.one_of(
    st.floats(allow_nan=False, allow_infinity=False),
    st.booleans(),
    st.text(st.characters(codec="utf-8"), max_size=40),
    st.sampled_from(["#NUM!", "#N/A", "#VALUE!"]).map(CellError),
)


@settings(suppress_health_check=[HealthCheck.function_scoped_fixture], max_examples=60)
@given(st.dictionaries(st.tuples(st.integers(1, 4), st.integers(1, 4)), VALUES, min_size=1))
def test_round_trip(maker: Maker, values: dict[tuple[int, int], Stored]) -> None:
    """Any value that is patched in is read back the same, to the last bit, and patching again changes nothing."""
    rows = '<row r="1"><c r="A1"><v>1</v></c></row><row r="3"><c r="B3" t="str"><v>x</v></c></row>'
    once = patched(maker, sheet(rows), values)
    path = maker.package({"S": once})
    book = read_book(path)
    for (row, column), value in values.items():
        found = book.sheets["S"].values.get((row, column))
        if isinstance(value, CellError):
            assert isinstance(found, CellError)
            assert found.value == value.value
        elif isinstance(value, float) and not isinstance(value, bool):
            assert isinstance(found, float)
            assert found.hex() == value.hex() or (found == 0.0 == value)
        else:
            assert found == value
    assert patched(maker, once, values) == once


def rich_workbook(path: Path, image: Path) -> None:
    """A workbook with everything that a careless writer loses."""
    with xlsxwriter.Workbook(path) as workbook:
        sheet = workbook.add_worksheet("Data & more")
        bold = workbook.add_format({"bold": True, "num_format": "0.000"})
        sheet.write_column("A1", [300, 400, 500])
        for row in range(1, 4):
            sheet.write_formula(f"B{row}", f"=TF.HALF(A{row})", bold)
        sheet.write_array_formula("C1:C3", "{=TF.HALF(A1:A3)}")
        sheet.write_dynamic_array_formula("D1:D3", "=TF.HALF(A1:A3)")
        sheet.write_formula("E1", "=SUM(B1:B3)")
        sheet.write_formula("F1", "=A1+1", None, 301)
        chart = workbook.add_chart({"type": "scatter"})
        chart.add_series({"categories": "='Data & more'!$A$1:$A$3", "values": "='Data & more'!$B$1:$B$3"})
        sheet.insert_chart("H2", chart)
        sheet.insert_image("H20", image)
        sheet.add_sparkline("G1", {"range": "'Data & more'!A1:C1"})
        sheet.conditional_format("B1:B3", {"type": "data_bar", "data_bar_2010": True})
        sheet.conditional_format("C1:C3", {"type": "formula", "criteria": "=C1>TF.HALF($A$1)"})
        sheet.data_validation("A1:A3", {"validate": "decimal", "criteria": ">", "value": 0})
        sheet.write_comment("A1", "check <this> & that")
        sheet.write_url("A8", "https://example.org/")
        sheet.write_rich_string("A9", "a ", bold, "bold", " end")
        sheet.merge_range("A10:C10", "merged")
        sheet.protect("secret")
        workbook.define_name("temperature", "='Data & more'!$A$1")
        other = workbook.add_worksheet("Table")
        other.add_table("A1:B3", {"name": "Feed", "data": [[1, 2], [3, 4]]})
        other.write_formula("D1", "=TF.HALF(temperature)*2")
        workbook.add_worksheet("Untouched").write_formula("A1", "=1+1", None, 2)


PIXEL = bytes.fromhex(
    "89504e470d0a1a0a0000000d4948445200000001000000010806000000"
    "1f15c4890000000d49444154789c63606060f80f0001040100a1c2ae3e0000000049454e44ae426082"
)


@pytest.fixture
def rich(maker: Maker) -> Path:
    """The rich workbook."""
    image = maker.folder / "pixel.png"
    image.write_bytes(PIXEL)
    path = maker.folder / "rich.xlsx"
    rich_workbook(path, image)
    return path


def strip_values(data: bytes) -> bytes:
    """A sheet part without what recalculation may change: types and values of cells."""
    import re

    data = re.sub(rb"<v[^>]*>[^<]*</v>", b"", data)
    return re.sub(rb'(<c [^>]*?) t="[a-z]+"', rb"\1", data)


def test_every_other_byte(maker: Maker, rich: Path, tmp_path: Path) -> None:
    """Parts, their order and their content stay; in the patched sheets only types and values differ."""
    before = rich.read_bytes()
    result = maker.recalculate(rich)
    copy = tmp_path / "copy.xlsx"
    result.save(copy)
    assert rich.read_bytes() == before
    old, new = zipfile.ZipFile(rich), zipfile.ZipFile(copy)
    assert old.namelist() == new.namelist()
    changed = [name for name in old.namelist() if old.read(name) != new.read(name)]
    assert changed == ["xl/worksheets/sheet1.xml", "xl/worksheets/sheet2.xml"]
    for name in changed:
        assert strip_values(old.read(name)) == strip_values(new.read(name))
    for first, second in zip(old.infolist(), new.infolist(), strict=True):
        assert (first.date_time, first.compress_type, first.external_attr) == (
            second.date_time, second.compress_type, second.external_attr,
        )
    assert len(result.values) == 11
    book = maker.recalculate(copy).book
    stored = {key: f.value for key, f in book.sheets["Data & more"].formulas.items()}
    assert stored[1, 2] == 150.0
    assert stored[1, 5] == 600.0
    assert stored[1, 6] == 301.0
    assert book.sheets["Data & more"].members == {
        (2, 3): 200.0, (3, 3): 250.0, (2, 4): 200.0, (3, 4): 250.0,
    }


def test_input_is_never_the_output(maker: Maker, tmp_path: Path) -> None:
    """The input is refused as output, also through a symbolic or a hard link, and stays as it was."""
    path = maker.cells(A1="=TF.HALF(4)")
    before = path.read_bytes()
    symbolic, hard = tmp_path / "s.xlsx", tmp_path / "h.xlsx"
    symbolic.symlink_to(path)
    os.link(path, hard)
    result = maker.recalculate(path)
    for target in (path, symbolic, hard):
        with pytest.raises(OutputRefused, match="it is the input itself, which is never written to"):
            result.save(target)
    assert path.read_bytes() == before
    assert sorted(p.name for p in tmp_path.iterdir()) == ["books", "h.xlsx", "s.xlsx"]


def test_output_names(maker: Maker) -> None:
    """The default output is a name that is free; a file that is there is overwritten only if asked."""
    path = maker.cells(A1="=TF.HALF(4)")
    first = output_path(path, None)
    assert first.name == f"{path.stem}-recalculated.xlsx"
    first.write_bytes(b"mine")
    assert output_path(path, None).name == f"{path.stem}-recalculated-2.xlsx"
    with pytest.raises(OutputRefused, match="is there already, and --overwrite is not given"):
        output_path(path, first)
    assert output_path(path, first, overwrite=True) == first
    with pytest.raises(OutputRefused, match="its folder does not exist"):
        output_path(path, path.parent / "no" / "x.xlsx")


def test_failed_write_leaves_nothing(maker: Maker, monkeypatch: pytest.MonkeyPatch) -> None:
    """A write that fails half way leaves the old output and no temporary file."""
    path = maker.cells(A1="=TF.HALF(4)")
    target = maker.folder / "out.xlsx"
    target.write_bytes(b"old")
    result = maker.recalculate(path)
    before = sorted(maker.folder.iterdir())

    def full(*_: object) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(OutputRefused, match="it cannot be written \\(No space left on device\\)"):
        result.save(target)
    assert target.read_bytes() == b"old"
    assert sorted(maker.folder.iterdir()) == before


def test_numbers_keep_their_bits(maker: Maker, tmp_path: Path) -> None:
    """A number is written with as many digits as lead back to it."""
    result = maker.recalculate(maker.cells(A1="0.1", B1="=TF.HALF(A1)/3+1E-17"))
    copy = tmp_path / "copy.xlsx"
    result.save(copy)
    (change,) = result.changes
    assert isinstance(change.after, float)
    stored = read_book(copy).value(change.place)
    assert isinstance(stored, float)
    assert stored.hex() == change.after.hex()
    assert math.isclose(stored, 0.1 / 6, rel_tol=1e-15)
