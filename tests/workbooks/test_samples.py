"""The sample workbooks: made anew they are the committed ones, and recalculated they give the expected cells.

Expected values are in the side files beside the samples, each with its source and its kind: published, derived
(worked out from published figures or from a relation), or pinned (guards against change, proves nothing).
"""

from __future__ import annotations

import json
import math
import re
import subprocess
import sys
import xml.etree.ElementTree as ET
import zipfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from xlsxwriter.utility import xl_cell_to_rowcol

from thermofuncs.cli import catalogue_functions
from thermofuncs.errors import CellError
from thermofuncs.workbook import Place, Recalculation, recalculate
from thermofuncs.workbook.addresses import parse_area, split_sheet
from thermofuncs.workbook.book import Stored, read_book

FOLDER = Path(__file__).parents[2] / "workbooks"
SAMPLES = ("lime-kiln", "sulfur-dioxide-converter")
# the mathematical functions of two machines may differ in the last bits
CLOSE = 1e-9
CHART = "{http://schemas.openxmlformats.org/drawingml/2006/chart}"


def sample(name: str) -> Path:
    """A committed sample."""
    return FOLDER / f"{name}.xlsx"


def side_file(name: str) -> list[dict[str, Any]]:
    """The expected cells of a sample."""
    side = json.loads((FOLDER / f"{name}.expected.json").read_text(encoding="utf-8"))
    assert side["workbook"] == f"{name}.xlsx"
    cells: list[dict[str, Any]] = side["cells"]
    return cells


def place(sheet: str, cell: str) -> Place:
    """A cell's place."""
    row, column = xl_cell_to_rowcol(cell)
    return Place(sheet, row + 1, column + 1)


def recalculated(path: Path) -> Recalculation:
    """A workbook recalculated by the catalogue's functions."""
    return recalculate(path, catalogue_functions())


def met(cell: dict[str, Any], value: Stored) -> bool:
    """Whether a result is what a line of a side file says."""
    expected = cell["expected"]
    if isinstance(value, CellError):
        return bool(value.value == expected)
    if isinstance(expected, str):
        return value == expected
    return isinstance(value, float) and bool(abs(value - expected) <= cell["tolerance"])


def missed(name: str, result: Recalculation) -> list[str]:
    """What a recalculation does not meet."""
    found = []
    for cell in side_file(name):
        value = result.values[place(cell["sheet"], cell["cell"])]
        if not met(cell, value):
            found.append(f"{cell['sheet']}!{cell['cell']}: {value} for {cell['expected']} ({cell['source']})")
    return found


def numbers_apart(part: str) -> tuple[list[str], list[float]]:
    """A part's text without the numbers of cells and charts, and those numbers."""
    without_stamp = re.sub(r"thermofuncs \d[^<]*", "", part)
    pieces = re.split(r"<((?:c:)?v)>([-+0-9.eE]+)</\1>", without_stamp)
    return [piece for index, piece in enumerate(pieces) if index % 3 != 2], [float(text) for text in pieces[2::3]]


@pytest.fixture(scope="module")
def made(tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, Path]:
    """Two folders in which the samples were made anew."""
    folders = tmp_path_factory.mktemp("first"), tmp_path_factory.mktemp("second")
    for folder in folders:
        subprocess.run([sys.executable, str(FOLDER / "make_samples.py"), str(folder)], check=True)
    return folders


@pytest.mark.parametrize("name", SAMPLES)
def test_making_is_reproducible(made: tuple[Path, Path], name: str) -> None:
    """Two runs of the script give the same bytes, of the workbook and of its side file."""
    for ending in (".xlsx", ".expected.json"):
        first, second = (folder / f"{name}{ending}" for folder in made)
        assert first.read_bytes() == second.read_bytes()


@pytest.mark.parametrize("name", SAMPLES)
def test_the_committed_sample_is_what_the_script_makes(made: tuple[Path, Path], name: str) -> None:
    """Every part of the committed workbook is the script's, its numbers within 1e-9; else run the script again."""
    old, new = zipfile.ZipFile(sample(name)), zipfile.ZipFile(made[0] / f"{name}.xlsx")
    assert old.namelist() == new.namelist()
    for part in old.namelist():
        old_text, old_numbers = numbers_apart(old.read(part).decode())
        new_text, new_numbers = numbers_apart(new.read(part).decode())
        assert old_text == new_text, part
        # differences of two cells that should be equal are rounding alone
        assert old_numbers == pytest.approx(new_numbers, rel=CLOSE, abs=1e-11), part


@pytest.mark.parametrize("name", SAMPLES)
def test_expected_cells(name: str) -> None:
    """Recalculated, each sample gives every expected cell within its tolerance."""
    assert missed(name, recalculated(sample(name))) == []


@pytest.mark.parametrize("name", SAMPLES)
def test_expectations_come_from_outside(name: str) -> None:
    """Each side file holds at least five numbers that the engine did not compute, and every line has its source."""
    cells = side_file(name)
    assert all(cell["source"] and cell["kind"] in {"published", "derived", "pinned"} for cell in cells)
    outside = [c for c in cells if c["kind"] != "pinned" and isinstance(c["expected"], float)]
    assert len(outside) >= 5


@pytest.mark.parametrize("name", SAMPLES)
def test_stored_results_are_right(name: str) -> None:
    """A committed sample holds what a recalculation gives, whole, with no error but those it expects."""
    result = recalculated(sample(name))
    assert result.kept == []
    assert result.differing == []
    assert result.volatile == []
    expected = {place(c["sheet"], c["cell"]) for c in side_file(name) if str(c["expected"]).startswith("#")}
    assert {error.place for error in result.errors} == expected
    for change in result.changes:
        stamp = str(change.before).startswith("thermofuncs ")
        assert stamp or isinstance(change.before, float), change
        assert stamp or math.isclose(change.before, change.after, rel_tol=CLOSE, abs_tol=1e-11), change  # type: ignore[arg-type]


@pytest.mark.parametrize("name", SAMPLES)
def test_tables_are_whole(name: str) -> None:
    """Each array formula covers its table exactly, so that no row of it is lost and none is #N/A."""
    result = recalculated(sample(name))
    arrays = [formula for formula in result.formulas.values() if formula.stored.kind == "array"]
    assert len(arrays) >= 2
    for formula in arrays:
        table = result.answers[formula.sites[0].number].result
        assert isinstance(table, list)
        area = formula.stored.area
        assert (len(table), len(table[0])) == (area.rows, area.columns), formula.stored.text


@pytest.mark.parametrize("name", SAMPLES)
def test_the_working_ends_in_the_result(name: str) -> None:
    """The last step of the table of working is the result's own value, bit for bit."""
    values = recalculated(sample(name)).values
    last, cell = {"lime-kiln": ("F17", "C32"), "sulfur-dioxide-converter": ("F16", "C36")}[name]
    assert values[place("Working", last)] == values[place("Calculation", cell)]


@pytest.mark.parametrize("name", SAMPLES)
def test_charts_show_the_stored_results(name: str) -> None:
    """The points that each chart keeps are the numbers of the cells that it names."""
    book = read_book(sample(name))
    archive = zipfile.ZipFile(sample(name))
    charts = [part for part in archive.namelist() if part.startswith("xl/charts/chart")]
    assert len(charts) == 3
    for part in charts:
        references = ET.fromstring(archive.read(part)).iter(f"{CHART}numRef")  # noqa: S314 - our own file
        for reference in references:
            sheet, cells = split_sheet(reference.findtext(f"{CHART}f", ""))
            area = parse_area(cells, sheet or "")
            assert area is not None
            kept = [float(value.text or "nan") for value in reference.iter(f"{CHART}v")]
            stored = [
                book.value(Place(area.sheet, row, column))
                for row in range(area.top, area.bottom + 1)
                for column in range(area.left, area.right + 1)
            ]
            assert kept == pytest.approx(stored, rel=1e-13), (part, cells)


@pytest.mark.parametrize("name", SAMPLES)
def test_what_a_checker_must_see(name: str) -> None:
    """The first sheet says that the plant is invented, and to have the figures checked by a qualified person."""
    book = read_book(sample(name))
    texts = " ".join(value for value in book.sheets["Calculation"].values.values() if isinstance(value, str))
    assert "The plant is invented and so are its readings." in texts
    assert "qualified person" in texts
    assert "local codes" in texts
    assert "licensed practice come first" in texts


@pytest.mark.parametrize("name", SAMPLES)
def test_expected_cells_of_a_file_that_the_spreadsheet_saved(
    office: Callable[[Path, str], Path], name: str, tmp_path: Path
) -> None:
    """Saved by LibreOffice and recalculated, each sample gives every expected cell, and only its sheets change."""
    saved = office(sample(name), "xlsx:Calc MS Excel 2007 XML")
    result = recalculated(saved)
    assert result.kept == []
    assert missed(name, result) == []
    copy = tmp_path / "copy.xlsx"
    result.save(copy)
    old, new = zipfile.ZipFile(saved), zipfile.ZipFile(copy)
    assert old.namelist() == new.namelist()
    changed = [part for part in old.namelist() if old.read(part) != new.read(part)]
    assert all(part.startswith("xl/worksheets/sheet") for part in changed)
    assert [part for part in old.namelist() if part.startswith("xl/charts/chart")]
