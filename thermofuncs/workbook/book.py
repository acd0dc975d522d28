"""A workbook as it is stored: sheets, cells, formulas, names and tables, and nothing evaluated."""

from __future__ import annotations

import math
import posixpath
from collections.abc import Callable
from dataclasses import dataclass, field
from datetime import UTC, datetime
from pathlib import Path
from typing import TYPE_CHECKING

from thermofuncs.errors import CellError, DamagedWorkbook, NotAWorkbook
from thermofuncs.workbook.addresses import Area, Place, parse_area
from thermofuncs.workbook.markup import RawCell, SheetReader, array_area, decoded, local_name, tree
from thermofuncs.workbook.package import DEFAULT_LIMITS, Limits, Package, open_package
from thermofuncs.workbook.tables import Table

if TYPE_CHECKING:
    from xml.etree.ElementTree import Element

Stored = float | str | bool | CellError | None

_TEXTS = frozenset({"str", "inlineStr"})


@dataclass(frozen=True, slots=True)
class StoredFormula:
    """A formula cell as it is stored.

    Parameters
    ----------
    text : str. Without the equals sign; in a later cell of a shared formula that of the first one.
    origin : Place. The cell in which the text stands as written.
    kind : str. ``normal``, ``array`` or ``dataTable``.
    area : Area. The cells it fills: itself, or the range of its array.
    dynamic : bool. Whether the array spills by itself.
    value : float, str, bool, CellError or None. The stored result; None where there is none.
    """

    text: str
    origin: Place
    kind: str
    area: Area
    dynamic: bool
    value: Stored


@dataclass(slots=True)
class Sheet:
    """One worksheet by row and column: its values, its formulas, and the stored results of arrays.

    Parameters
    ----------
    name, part : str. Its name and its part in the file.
    values : dict. Constants.
    formulas : dict. Formula cells.
    members : dict. Stored results in the cells of an array other than its first.
    """

    name: str
    part: str
    values: dict[tuple[int, int], Stored] = field(default_factory=dict)
    formulas: dict[tuple[int, int], StoredFormula] = field(default_factory=dict)
    members: dict[tuple[int, int], Stored] = field(default_factory=dict)


@dataclass(slots=True)
class Book:
    """A workbook read from its file.

    Parameters
    ----------
    package : Package. The file.
    sheets : dict. Worksheets by name, in the workbook's order.
    names : dict. Definitions by (sheet or empty text, name in lower case).
    tables : dict. Tables by name in lower case.
    iteration : dict. The attributes of the calculation settings.
    date_1904 : bool. Whether day 0 is in 1904.
    notes : list of str. What the reader of a report should know about the file.
    """

    package: Package
    sheets: dict[str, Sheet] = field(default_factory=dict)
    names: dict[tuple[str, str], str] = field(default_factory=dict)
    tables: dict[str, Table] = field(default_factory=dict)
    iteration: dict[str, str] = field(default_factory=dict)
    date_1904: bool = False
    notes: list[str] = field(default_factory=list)
    _canonical: dict[str, str] = field(default_factory=dict)

    def sheet_name(self, text: str) -> str | None:
        """A sheet's own spelling of its name, whatever the case in ``text``."""
        if not self._canonical:
            self._canonical = {name.casefold(): name for name in self.sheets}
        return self._canonical.get(text.casefold())

    def definition(self, name: str, sheet: str) -> str | None:
        """What a defined name stands for on a sheet: the sheet's own name first, then the workbook's."""
        folded = name.casefold()
        return self.names.get((sheet, folded), self.names.get(("", folded)))

    def formula(self, place: Place) -> StoredFormula | None:
        """The formula stored in a cell."""
        sheet = self.sheets.get(place.sheet)
        return None if sheet is None else sheet.formulas.get((place.row, place.column))

    def value(self, place: Place) -> Stored:
        """The value stored in a cell."""
        sheet = self.sheets.get(place.sheet)
        if sheet is None:
            return None
        key = (place.row, place.column)
        if (formula := sheet.formulas.get(key)) is not None:
            return formula.value
        return sheet.values.get(key, sheet.members.get(key))


def read_book(path: Path, limits: Limits = DEFAULT_LIMITS) -> Book:
    """Read a workbook file.

    Parameters
    ----------
    path : Path. An .xlsx or .xlsm file; it is only read, no macro runs and no link is followed.
    limits : Limits. What is allowed.

    Returns
    -------
    Book

    Raises
    ------
    WorkbookRefused. One of its kinds: another kind of file, damaged, hostile or too large.
    """
    package = open_package(path, limits)
    part = _workbook_part(package)
    root = tree(package, part)
    book = Book(package)
    for element in root.iter():
        name = local_name(element.tag)
        if name == "calcPr":
            book.iteration = dict(element.attrib)
        elif name == "workbookPr":
            book.date_1904 = element.get("date1904", "0") in {"1", "true"}
    _read_sheets(book, root, part)
    if any(name.startswith("_xmlsignatures/") for name in package.entries):
        book.notes.append("The file has a digital signature, which does not fit its recalculated copy.")
    return book


def _relations(package: Package, part: str) -> dict[str, tuple[str, str, bool]]:
    """Type, target part and outside or not, by id, of the relations of a part (or of the package)."""
    folder, file = posixpath.split(part)
    name = posixpath.join(folder, "_rels", f"{file}.rels")
    if name not in package:
        return {}
    found = {}
    for element in tree(package, name):
        target = element.get("Target", "")
        path = target[1:] if target.startswith("/") else posixpath.normpath(posixpath.join(folder, target))
        outside = element.get("TargetMode", "") == "External"
        found[element.get("Id", "")] = (element.get("Type", "").rpartition("/")[2], path, outside)
    return found


def _workbook_part(package: Package) -> str:
    for kind, part, outside in _relations(package, "").values():
        if kind == "officeDocument" and not outside and part in package:
            if part.endswith(".bin"):
                text = "it is a binary workbook"
                raise NotAWorkbook(path=package.path.name, text=text)
            return part
    raise NotAWorkbook(path=package.path.name, text="the archive holds no workbook")


def _read_sheets(book: Book, root: Element, part: str) -> None:
    """The worksheets with their cells, and the names, each in its sheet or in the whole workbook."""
    relations = _relations(book.package, part)
    strings = _shared_strings(book.package, relations)
    order: list[str] = []
    for element in root.iter():
        if local_name(element.tag) == "sheet":
            _read_sheet(book, element, relations, order)
    for element in root.iter():
        if local_name(element.tag) == "definedName" and element.text:
            index = element.get("localSheetId", "")
            local = index.isdecimal() and int(index) < len(order)
            scope = order[int(index)] if local else ""
            book.names[scope, element.get("name", "").casefold()] = element.text
    for sheet in book.sheets.values():
        _SheetLoader(book, sheet, strings).load()
        for kind, target, outside in _relations(book.package, sheet.part).values():
            if kind == "table" and not outside and target in book.package:
                _read_table(book, sheet, target)


def _read_sheet(
    book: Book, element: Element, relations: dict[str, tuple[str, str, bool]], order: list[str]
) -> None:
    name = element.get("name", "")
    if not name or name.casefold() in {known.casefold() for known in order}:
        text = f"a sheet is named {name!r}, which is no name or there twice"
        raise DamagedWorkbook(path=book.package.path.name, text=text)
    order.append(name)
    identity = next((value for key, value in element.attrib.items() if key.endswith("}id")), "")
    kind, target, outside = relations.get(identity, ("", "", False))
    if outside or (kind == "worksheet" and target not in book.package):
        text = f"the sheet {name!r} has no part in the file"
        raise DamagedWorkbook(path=book.package.path.name, text=text)
    if kind == "worksheet":
        book.sheets[name] = Sheet(name, target)


def _shared_strings(package: Package, relations: dict[str, tuple[str, str, bool]]) -> list[str]:
    inside = {kind: part for kind, part, outside in relations.values() if not outside}
    part = inside.get("sharedStrings", "")
    if part not in package:
        return []
    strings = []
    for item in tree(package, part):
        pieces = []
        for child in item:
            if local_name(child.tag) == "t":
                pieces.append(child.text or "")
            elif local_name(child.tag) == "r":
                pieces.extend(run.text or "" for run in child if local_name(run.tag) == "t")
        strings.append(decoded("".join(pieces)))
    return strings


def _read_table(book: Book, sheet: Sheet, part: str) -> None:
    root = tree(book.package, part)
    area = parse_area(root.get("ref", ""), sheet.name)
    name = root.get("displayName") or root.get("name") or ""
    if area is None or not name:
        return
    headers = tuple(
        decoded(element.get("name", ""))
        for element in root.iter()
        if local_name(element.tag) == "tableColumn"
    )
    header_rows, totals_rows = root.get("headerRowCount", "1"), root.get("totalsRowCount", "0")
    book.tables[name.casefold()] = Table(
        name, area, headers, int(header_rows != "0"), int(totals_rows not in {"0", ""})
    )


class _SheetLoader:
    """Takes the cells of one sheet part into a Sheet."""

    def __init__(self, book: Book, sheet: Sheet, strings: list[str]) -> None:
        self.book, self.sheet, self.strings = book, sheet, strings
        self.shared: dict[str, tuple[str, Place]] = {}
        self.arrays: list[Area] = []

    def load(self) -> None:
        SheetReader(self.book.package, self.sheet.part, self._take).read()
        for area in self.arrays:  # the other cells of an array look like constants
            self._drop_members(area)

    def _drop_members(self, area: Area) -> None:
        values = self.sheet.values
        if area.rows * area.columns > len(values):
            inside = [place for place in values if area.covers(*place)]
        else:
            rows, columns = range(area.top, area.bottom + 1), range(area.left, area.right + 1)
            inside = [(row, column) for row in rows for column in columns if (row, column) in values]
        for place in inside:
            self.sheet.members[place] = values.pop(place)

    def _take(self, cell: RawCell) -> None:
        value = self._value(cell)
        formula = cell.formula
        key = (cell.row, cell.column)
        if formula is None or (formula.kind == "dataTable" and not formula.ref):
            if value is not None:
                self.sheet.values[key] = value
            return
        place = Place(self.sheet.name, *key)
        text, origin = decoded(formula.text), place
        if formula.kind == "shared":
            if text:
                self.shared[formula.group] = (text, place)
            elif formula.group in self.shared:
                text, origin = self.shared[formula.group]
        area = array_area(cell, self.sheet.name)
        kind = formula.kind if formula.kind in {"array", "dataTable"} else "normal"
        if area is not None and not area.single:
            self.arrays.append(area)
        whole = area or Area(self.sheet.name, *key, *key)
        self.sheet.formulas[key] = StoredFormula(text, origin, kind, whole, cell.dynamic, value)

    def _value(self, cell: RawCell) -> Stored:
        text = cell.text
        if text is None or (cell.kind == "n" and not text.strip()):
            return None
        readers: dict[str, Callable[[str], Stored]] = {
            "s": self._shared_string, "b": _truth, "e": CellError, "str": decoded, "inlineStr": decoded,
            "d": self._serial,
        }
        try:
            return readers.get(cell.kind, _number)(text if cell.kind in _TEXTS else text.strip())
        except (ValueError, IndexError) as error:
            place = Place(self.sheet.name, cell.row, cell.column)
            raise DamagedWorkbook(
                path=self.book.package.path.name, text=f"{place} has the stored value {text[:40]!r}"
            ) from error

    def _shared_string(self, text: str) -> str:
        if not text.isdecimal():
            raise ValueError
        return self.strings[int(text)]

    def _serial(self, text: str) -> float:
        moment = datetime.fromisoformat(text)
        moment = moment.replace(tzinfo=moment.tzinfo or UTC)
        year, month, day = (1904, 1, 1) if self.book.date_1904 else (1899, 12, 30)
        return (moment - datetime(year, month, day, tzinfo=UTC)).total_seconds() / 86400


def _truth(text: str) -> bool:
    return text in {"1", "true"}


def _number(text: str) -> Stored:
    number = float(text)
    return number if math.isfinite(number) else CellError("#NUM!")
