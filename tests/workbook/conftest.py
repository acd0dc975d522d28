"""Workbooks made on the spot, and three small functions that answer in place of the catalogue."""

from __future__ import annotations

import zipfile
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from types import SimpleNamespace

import pytest

from thermofuncs.errors import CellError
from thermofuncs.workbook import Functions, Limits, Recalculation, recalculate
from thermofuncs.working import Step

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
OFFICE = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
PACKAGE = "http://schemas.openxmlformats.org/package/2006"
TYPES = "application/vnd.openxmlformats-officedocument.spreadsheetml"


class _Blank:
    """A blank single cell."""


BLANK = _Blank()


def _half(value: object) -> object:
    """Half a number; what is no number gives an error with a sentence."""
    if isinstance(value, CellError):
        return value
    if value is None or value is BLANK:
        return CellError("#N/A", "x is a blank cell")
    if isinstance(value, bool | str):
        return CellError("#VALUE!", f"x is {value!r}: a number is needed")
    number = float(value)  # type: ignore[arg-type]
    return CellError("#NUM!", f"x is {number:g}: it must be above zero") if number <= 0 else number / 2


def evaluate(name: str, arguments: Sequence[object]) -> object:
    """HALF(x), KINDS(...) which says what each argument is, and PAIRS() which is a table."""
    if name == "HALF":
        value = arguments[0] if arguments else None
        if value is None:
            return CellError("#VALUE!", "x is missing")
        return [[_half(item) for item in row] for row in value] if isinstance(value, list) else _half(value)
    if name == "KINDS":
        return " ".join(_kind(value) for value in arguments)
    return [["a", 1.0], ["=b", CellError("#NUM!", "no second value")]]


def _kind(value: object) -> str:
    if value is BLANK:
        return "blank"
    if value is None:
        return "omitted"
    if isinstance(value, CellError):
        return value.value
    return f"{len(value)}x{len(value[0])}" if isinstance(value, list) else type(value).__name__


def _number(result: object) -> float | str:
    return result if isinstance(result, float) else str(result)


def explain(name: str, arguments: Sequence[object]) -> SimpleNamespace:
    """The one step of HALF."""
    result = evaluate(name, arguments)
    steps = [Step("h", "h = x / 2", f"h = {arguments[0]} / 2", _number(result), "1")] if name == "HALF" else []
    return SimpleNamespace(result=result, steps=steps, cautions=["h is only half"])


@pytest.fixture
def functions() -> Functions:
    """The stand-in functions."""
    return Functions({"HALF", "KINDS", "PAIRS"}, {"PAIRS"}, evaluate, explain, BLANK)


@dataclass
class Maker:
    """Makes workbook files in a folder and recalculates them."""

    folder: Path
    functions: Functions

    def package(self, sheets: dict[str, str], *, workbook: str = "", extra: dict[str, str] | None = None) -> Path:
        """A workbook from the inside of each sheet's sheetData, and what follows its sheets element."""
        numbered = list(enumerate(sheets.items(), 1))
        parts = {
            "[Content_Types].xml": f'<Types xmlns="{PACKAGE}/content-types">'
            '<Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
            f'<Override PartName="/xl/workbook.xml" ContentType="{TYPES}.sheet.main+xml"/>'
            + "".join(
                f'<Override PartName="/xl/worksheets/sheet{n}.xml" ContentType="{TYPES}.worksheet+xml"/>'
                for n, _ in numbered
            )
            + "</Types>",
            "_rels/.rels": f'<Relationships xmlns="{PACKAGE}/relationships"><Relationship Id="rId1" '
            f'Type="{OFFICE}/officeDocument" Target="xl/workbook.xml"/></Relationships>',
            "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{OFFICE}"><sheets>'
            + "".join(f'<sheet name="{name}" sheetId="{n}" r:id="rId{n}"/>' for n, (name, _) in numbered)
            + f"</sheets>{workbook}</workbook>",
            "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{PACKAGE}/relationships">'
            + "".join(
                f'<Relationship Id="rId{n}" Type="{OFFICE}/worksheet" Target="worksheets/sheet{n}.xml"/>'
                for n, _ in numbered
            )
            + "</Relationships>",
        }
        for n, (_, rows) in numbered:
            text = rows if rows.startswith("<") and "sheetData" in rows else f"<sheetData>{rows}</sheetData>"
            whole = text if text.startswith("<?xml") else f'<worksheet xmlns="{MAIN}">{text}</worksheet>'
            parts[f"xl/worksheets/sheet{n}.xml"] = whole
        return self.archive(parts | (extra or {}))

    def archive(self, parts: dict[str, str]) -> Path:
        """An archive of parts."""
        path = self.folder / f"book{len(list(self.folder.iterdir()))}.xlsx"
        with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as archive:
            for name, text in parts.items():
                archive.writestr(name, text)
        return path

    def cells(self, **formulas: str) -> Path:
        """A workbook whose one sheet S has these cells; what begins with = is a formula."""
        rows: dict[int, list[str]] = {}
        for address, text in formulas.items():
            row = int("".join(c for c in address if c.isdigit()))
            rows.setdefault(row, []).append(cell(address, text))
        return self.package(
            {"S": "".join(f'<row r="{n}">{"".join(sorted(cells))}</row>' for n, cells in sorted(rows.items()))}
        )

    def recalculate(self, path: Path, limits: Limits | None = None) -> Recalculation:
        """Recalculate with the stand-in functions."""
        return recalculate(path, self.functions, limits or Limits())


def cell(address: str, text: str, stored: str = "") -> str:
    """A cell element: a number, a text, or a formula without a stored value."""
    text = text.replace("&", "&amp;").replace("<", "&lt;")
    if text.startswith("="):
        return f'<c r="{address}"><f>{text[1:]}</f>{stored}</c>'
    try:
        float(text)
    except ValueError:
        return f'<c r="{address}" t="inlineStr"><is><t>{text}</t></is></c>'
    return f'<c r="{address}"><v>{text}</v></c>'


@pytest.fixture
def maker(tmp_path: Path, functions: Functions) -> Maker:
    """A maker of workbook files."""
    folder = tmp_path / "books"
    folder.mkdir()
    return Maker(folder, functions)
