"""Files that mean harm, or are broken: a clear refusal or a right answer, in bounded time."""

from __future__ import annotations

import io
import struct
import time
import zipfile
import zlib
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from thermofuncs.errors import (
    DamagedWorkbook,
    HostileArchive,
    NotAWorkbook,
    WorkbookRefused,
    WorkbookTooLarge,
)
from thermofuncs.workbook import Limits, recalculate
from thermofuncs.workbook.book import read_book

if TYPE_CHECKING:
    from tests.workbook.conftest import Maker

CALL = '<row r="1"><c r="A1"><f>TF.HALF(4)</f><v>0</v></c></row>'


def parts_of(path: Path) -> dict[str, bytes]:
    """The parts of an archive."""
    with zipfile.ZipFile(path) as archive:
        return {name: archive.read(name) for name in archive.namelist()}


def refused(maker: Maker, path: Path, kind: type[WorkbookRefused], sentence: str, limits: Limits | None = None) -> None:
    """The file is refused within seconds with the sentence, and is unchanged."""
    before = path.read_bytes()
    begun = time.monotonic()
    with pytest.raises(kind, match=sentence):
        maker.recalculate(path, limits)
    assert time.monotonic() - begun < 20
    assert path.read_bytes() == before


def test_ratio(maker: Maker) -> None:
    """A part that unpacks to absurdly more than it is packed to is refused before it is unpacked."""
    path = maker.package({"S": CALL}, extra={"xl/bomb.xml": " " * (60 * 2**20)})
    refused(maker, path, WorkbookTooLarge, "'xl/bomb.xml' that unpacks to .* times its size")


def test_sizes_and_counts(maker: Maker) -> None:
    """A file, a part, a sum of parts, a number of parts or of cells past its limit is refused."""
    path = maker.package({"S": CALL}, extra={f"xl/x{n}.xml": "x" * 1000 for n in range(20)})
    limits = Limits()
    refused(maker, path, WorkbookTooLarge, "bytes, and the limit is 100 bytes", replace(limits, file_bytes=100))
    refused(maker, path, WorkbookTooLarge, "25 parts, and the limit is 24 parts", replace(limits, entries=24))
    refused(maker, path, WorkbookTooLarge, "limit is 900 bytes a part", replace(limits, part_bytes=900))
    refused(maker, path, WorkbookTooLarge, "and 9000 in all", replace(limits, total_bytes=9000))
    many = maker.cells(A1="=TF.HALF(4)", A2="1", A3="2")
    refused(maker, many, WorkbookTooLarge, "the limit is 2 cells", replace(limits, cells=2))


def test_size_that_lies(maker: Maker) -> None:
    """A part that claims to be smaller than it is does not unpack beyond its claim."""
    path = maker.package({"S": CALL}, extra={"xl/lie.xml": "y" * 5_000_000})
    data = bytearray(path.read_bytes())
    honest, lie = struct.pack("<L", 5_000_000), struct.pack("<L", 10)
    path.write_bytes(bytes(data).replace(honest, lie))
    result = maker.recalculate(path)
    with pytest.raises(WorkbookRefused, match="its archive cannot be read"):
        result.save(maker.folder / "out.xlsx")
    assert not (maker.folder / "out.xlsx").exists()


@pytest.mark.parametrize("part", ["xl/worksheets/sheet1.xml", "xl/workbook.xml", "_rels/.rels"])
@pytest.mark.parametrize(
    "declaration",
    [
        '<!DOCTYPE x [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;&a;&a;&a;&a;">]>',
        '<!DOCTYPE x [<!ENTITY a SYSTEM "file:///etc/passwd">]>',
        '<!DOCTYPE x SYSTEM "http://127.0.0.1:9/x.dtd">',
    ],
)
def test_entities(maker: Maker, part: str, declaration: str) -> None:
    """A part that declares a document type is refused, whether its entities would grow or fetch."""
    parts = {name: data.decode() for name, data in parts_of(maker.package({"S": CALL})).items()}
    parts[part] = declaration + parts[part]
    refused(maker, maker.archive(parts), HostileArchive, "declares a document type")


@pytest.mark.parametrize(
    "name", ["../../evil.xml", "/etc/evil", "C:/evil", "xl\\..\\evil", "xl/../../evil", "..\\evil"]
)
def test_names_that_lead_out(maker: Maker, name: str) -> None:
    """A part name that leads out of the archive is refused."""
    path = maker.package({"S": CALL}, extra={name: "x"})
    refused(maker, path, HostileArchive, "leads out of the archive")


def test_duplicate_names(maker: Maker) -> None:
    """A part that is there twice, in whatever case, is refused."""
    path = maker.package({"S": CALL}, extra={"XL/Workbook.xml": "x"})
    refused(maker, path, HostileArchive, "is there twice")


def test_encrypted_entry(maker: Maker) -> None:
    """An encrypted part is refused."""
    path = maker.package({"S": CALL})
    data = bytearray(path.read_bytes())
    data[data.index(b"PK\x01\x02") + 8] |= 1
    path.write_bytes(data)
    refused(maker, path, HostileArchive, "is encrypted")


@pytest.mark.parametrize(
    ("content", "sentence"),
    [
        (b"", "it is not an archive"),
        (b"PK", "its archive cannot be read"),
        (b"a,b\n1,2\n", "it is not an archive"),
        (bytes.fromhex("D0CF11E0A1B11AE1") + b"x" * 600, "protected with a password, or in the old binary"),
    ],
)
def test_other_files(maker: Maker, content: bytes, sentence: str) -> None:
    """A file of another kind is refused with what it seems to be."""
    path = maker.folder / "other.xlsx"
    path.write_bytes(content)
    refused(maker, path, WorkbookRefused, sentence)


def test_missing_file_and_folder(maker: Maker) -> None:
    """A file that is not there, and a folder, are refused."""
    with pytest.raises(NotAWorkbook, match="No such file or directory"):
        maker.recalculate(maker.folder / "none.xlsx")
    with pytest.raises(NotAWorkbook, match="it is not a file"):
        maker.recalculate(maker.folder)


def test_archive_without_a_workbook(maker: Maker) -> None:
    """An archive of something else is refused."""
    refused(maker, maker.archive({"hello.txt": "x"}), NotAWorkbook, "the archive holds no workbook")


@pytest.mark.parametrize(
    ("rows", "sentence"),
    [
        ('<row r="0"/>', "has a row numbered '0'"),
        ('<row r="1048577"/>', "has a row numbered '1048577'"),
        ('<row r="1"><c r="XFE1"/></row>', "has a cell addressed 'XFE1'"),
        ('<row r="1"><c r="A1" t="s"><v>9</v></c></row>', "S!A1 has the stored value '9'"),
        ('<row r="1"><c r="A1" t="s"><v>-1</v></c></row>', "S!A1 has the stored value '-1'"),
        ('<row r="1"><c r="A1"><v>abc</v></c></row>', "S!A1 has the stored value 'abc'"),
        ('<row r="1"><c r="A1"><v>1</c></row>', "is not well-formed XML"),
    ],
)
def test_damaged_sheets(maker: Maker, rows: str, sentence: str) -> None:
    """A cell or row that cannot be is named."""
    refused(maker, maker.package({"S": rows}), DamagedWorkbook, sentence)


def test_wrong_encoding(maker: Maker) -> None:
    """A sheet part in another encoding than UTF-8 is refused rather than patched at wrong places."""
    sheet = '<?xml version="1.0" encoding="ISO-8859-1"?><worksheet><sheetData/></worksheet>'
    refused(maker, maker.package({"S": sheet}), DamagedWorkbook, "is not in UTF-8")


@settings(suppress_health_check=[HealthCheck.function_scoped_fixture], max_examples=60, deadline=None)
@given(st.data())
def test_truncated_and_random_bytes(maker: Maker, data: st.DataObject) -> None:
    """A file that is cut off or has wrong bytes is refused or read; nothing else ever comes out."""
    whole = maker.cells(A1="=TF.HALF(B1)", B1="4", C1="text", D1="=SUM(A1:B1)").read_bytes()
    cut = data.draw(st.integers(0, len(whole)))
    content = bytearray(whole[:cut] if data.draw(st.booleans()) else whole)
    for _ in range(data.draw(st.integers(0, 8))):
        if content:
            content[data.draw(st.integers(0, len(content) - 1))] = data.draw(st.integers(0, 255))
    path = maker.folder / "broken.xlsx"
    path.write_bytes(content)
    try:
        maker.recalculate(path)
    except WorkbookRefused as error:
        assert "broken.xlsx" in error.sentence


@settings(suppress_health_check=[HealthCheck.function_scoped_fixture], max_examples=60, deadline=None)
@given(st.binary(max_size=200), st.sampled_from(["xl/worksheets/sheet1.xml", "xl/workbook.xml", "_rels/.rels"]))
def test_random_parts(maker: Maker, content: bytes, part: str) -> None:
    """Any bytes in the place of a part are refused or read."""
    parts = parts_of(maker.package({"S": CALL})) | {part: content}
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w") as archive:
        for name, body in parts.items():
            archive.writestr(name, body)
    path = maker.folder / "random.xlsx"
    path.write_bytes(stream.getvalue())
    with pytest.raises(WorkbookRefused, match=r"random\.xlsx"):
        maker.recalculate(path)


def test_macros_and_links_stay_unread(maker: Maker, tmp_path: Path) -> None:
    """A macro project and an outside link are carried over as they are and neither run nor followed."""
    extra = {
        "xl/vbaProject.bin": "not a project at all",
        "xl/externalLinks/externalLink1.xml": "<not well formed",
        "xl/externalLinks/_rels/externalLink1.xml.rels": "<neither",
    }
    path = maker.package({"S": CALL}, extra=extra)
    copy = tmp_path / "copy.xlsx"
    result = maker.recalculate(path)
    result.save(copy)
    assert [str(change.place) for change in result.changes] == ["S!A1"]
    after = parts_of(copy)
    assert {name: after[name].decode() for name in extra} == extra


def test_sheet_part_outside(maker: Maker) -> None:
    """A sheet whose part lies outside the file is refused, not fetched."""
    parts = {name: data.decode() for name, data in parts_of(maker.package({"S": CALL})).items()}
    name = "xl/_rels/workbook.xml.rels"
    parts[name] = parts[name].replace("Target=", 'TargetMode="External" Target=')
    refused(maker, maker.archive(parts), DamagedWorkbook, "the sheet 'S' has no part in the file")


def test_ten_thousand_broken_formulas(maker: Maker) -> None:
    """Ten thousand formulas that cannot be read are kept, and the good ones answer."""
    rows = "".join(
        f'<row r="{n}"><c r="A{n}"><f>TF.HALF((</f><v>7</v></c><c r="B{n}"><f>SUM({n}+</f><v>7</v></c></row>'
        for n in range(1, 10_001)
    )
    good = '<row r="10001"><c r="A10001"><f>TF.HALF(B10001)</f></c><c r="B10001"><v>4</v></c></row>'
    begun = time.monotonic()
    result = maker.recalculate(maker.package({"S": rows + good}))
    assert time.monotonic() - begun < 30
    assert list(result.values.values()) == [2.0]
    assert len(result.kept) == 10_000
    assert all("its formula cannot be read" in item.reason for item in result.kept)


def test_a_long_chain_and_a_large_circle(maker: Maker) -> None:
    """A chain of thousands of cells answers; a circle of thousands is kept; both within seconds."""
    chain = "".join(f'<c r="A{n}"><f>A{n - 1}+1</f></c>'.join((f'<row r="{n}">', "</row>")) for n in range(2, 3001))
    first = '<row r="1"><c r="A1"><f>TF.HALF(2)</f></c></row>'
    begun = time.monotonic()
    result = maker.recalculate(maker.package({"S": first + chain}))
    assert max(v for v in result.values.values() if isinstance(v, float)) == 3000.0
    circle = maker.recalculate(maker.package({"S": first.replace("TF.HALF(2)", "TF.HALF(A3000)") + chain}))
    assert time.monotonic() - begun < 60
    assert circle.values == {}
    assert len(circle.kept) == 3000


@pytest.mark.parametrize(
    "formula", ["(" * 4000 + "1" + ")" * 4000, "-" * 4000 + "1", "1" + "+1" * 20000, "{" * 500, "IF(" * 300]
)
def test_deep_and_long_formulas(maker: Maker, formula: str) -> None:
    """A formula nested or long beyond what spreadsheets allow does no harm."""
    path = maker.package(
        {"S": f'<row r="1"><c r="A1"><f>TF.HALF(4)+{formula}</f><v>7</v></c>'
              '<c r="B1"><f>TF.HALF(4)</f></c></row>'}
    )
    result = maker.recalculate(path)
    assert 2.0 in result.values.values()


def test_names_in_a_circle(maker: Maker) -> None:
    """Names that lead back to themselves are noticed, also where each doubles the other."""
    names = "".join(
        f'<definedName name="n{c}">n{d}_+n{d}_</definedName><definedName name="n{d}_">n{c}*TF.HALF(4)</definedName>'
        for c, d in (("a", "b"),)
    )
    names = f'<definedNames>{names}<definedName name="na_">nb_</definedName></definedNames>'
    path = maker.package({"S": '<row r="1"><c r="A1"><f>nb_</f><v>7</v></c></row>'}, workbook=names)
    begun = time.monotonic()
    result = maker.recalculate(path)
    assert time.monotonic() - begun < 10
    assert result.values == {}


def test_array_over_the_whole_sheet(maker: Maker) -> None:
    """An array formula over every cell of the sheet is kept."""
    row = '<row r="1"><c r="A1"><f t="array" ref="A1:XFD1048576">TF.PAIRS()</f><v>7</v></c></row>'
    result = maker.recalculate(maker.package({"S": row}))
    assert [item.reason for item in result.kept] == ["its array covers S!A1:XFD1048576"]


def test_formulas_that_stop_the_evaluator(maker: Maker) -> None:
    """A formula because of which the evaluator gives up on the whole book is found and kept alone."""
    cells = {f"A{n}": f"=TF.HALF({n})" for n in range(1, 60)}
    path = maker.cells(**cells, B1="=TF.HALF(1)<B2:C1#", B7="=OFFSET(B8,0,0)+B9", B8="=OFFSET(B7,0,0)", B9="=B1")
    result = maker.recalculate(path)
    assert len([value for value in result.values.values() if isinstance(value, float)]) >= 59
    assert "S!B1" in {str(item.place) for item in result.kept}


@pytest.mark.parametrize(
    ("settings", "sentence"),
    [('iterateCount="x"', "its settings for iterative calculation are no numbers"), ('iterateDelta="y"', "settings")],
)
def test_damaged_settings(maker: Maker, settings: str, sentence: str) -> None:
    """Settings that are no numbers are named."""
    path = maker.package({"S": CALL}, workbook=f'<calcPr iterate="1" {settings}/>')
    refused(maker, path, DamagedWorkbook, sentence)


@pytest.mark.parametrize("settings", ['iterateCount="-5"', 'iterateDelta="nan"', 'iterateCount="999999999"'])
def test_odd_settings(maker: Maker, settings: str) -> None:
    """Settings outside what makes sense are bounded."""
    path = maker.package({"S": CALL}, workbook=f'<calcPr iterate="1" {settings}/>')
    assert list(maker.recalculate(path).values.values()) == [2.0]


@pytest.mark.parametrize("names", [("S", "s"), ("",)])
def test_sheet_names(maker: Maker, names: tuple[str, ...]) -> None:
    """A sheet without a name, or two of one name, are refused."""
    path = maker.package(dict.fromkeys(names, CALL))
    refused(maker, path, DamagedWorkbook, "which is no name or there twice")


def test_endless_evaluation(maker: Maker) -> None:
    """An evaluation that takes longer than allowed is stopped and refused."""

    def slow(_: str, __: object) -> object:
        time.sleep(0.05)
        return 1.0

    path = maker.cells(**{f"A{n}": f"=TF.HALF({n})" for n in range(1, 400)})
    functions = replace(maker.functions, evaluate=slow)
    begun = time.monotonic()
    with pytest.raises(WorkbookTooLarge, match="take longer to evaluate, and the limit is 1 s"):
        recalculate(path, functions, Limits(seconds=1))
    assert time.monotonic() - begun < 10


def test_longest_cells(maker: Maker) -> None:
    """Cells of 32,767 characters are read and handed to a call."""
    text = "a" * 32_767
    path = maker.cells(A1="=TF.KINDS(B1)&LEN(B1)", B1=text)
    assert list(maker.recalculate(path).values.values()) == ["str32767"]
    assert zlib.crc32(str(read_book(path).sheets["S"].values[1, 2]).encode()) == zlib.crc32(text.encode())
