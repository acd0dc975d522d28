"""The XML of a workbook's parts, read without entities, with the byte position of every cell."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass, field
from typing import TYPE_CHECKING
from xml.parsers import expat

import defusedxml.ElementTree as SafeTree
from defusedxml import DefusedXmlException

from thermofuncs.errors import DamagedWorkbook, HostileArchive, WorkbookTooLarge
from thermofuncs.workbook.addresses import LAST_COLUMN, LAST_ROW, Area, parse_reference
from thermofuncs.workbook.package import Package

if TYPE_CHECKING:
    from xml.etree.ElementTree import Element

MAIN = frozenset(
    {
        "http://schemas.openxmlformats.org/spreadsheetml/2006/main",
        "http://purl.oclc.org/ooxml/spreadsheetml/main",
    }
)
_DECLARED_ENCODING = re.compile(rb"""<\?xml[^>]*?\bencoding\s*=\s*["']([A-Za-z0-9_.-]+)["']""")
_ESCAPED = re.compile(r"_x([0-9A-Fa-f]{4})_")
_TAG = re.compile(rb"""<[^"'>]*(?:"[^"]*"[^"'>]*|'[^']*'[^"'>]*)*>""")
_FORBIDDEN = re.compile("[\x00-\x08\x0b\x0c\x0d\x0e-\x1f\ufffe\uffff]|_(?=x[0-9A-Fa-f]{4}_)")


def local_name(tag: str) -> str:
    """An element's name without its namespace."""
    return tag.rpartition("}")[2]


def tree(package: Package, part: str) -> Element:
    """The element tree of a small part.

    Raises
    ------
    HostileArchive. It declares a document type or entities.
    DamagedWorkbook. It is no well-formed XML.
    """
    try:
        root: Element = SafeTree.fromstring(package.read(part), forbid_dtd=True)
    except DefusedXmlException as error:
        raise _document_type(package, part) from error
    except (SafeTree.ParseError, ValueError, LookupError) as error:
        raise _not_well_formed(package, part, str(error)) from error
    return root


def _document_type(package: Package, part: str) -> HostileArchive:
    return HostileArchive(path=package.path.name, text=f"the part {part!r} declares a document type")


def _not_well_formed(package: Package, part: str, reason: str) -> DamagedWorkbook:
    text = f"the part {part!r} is not well-formed XML ({reason})"
    return DamagedWorkbook(path=package.path.name, text=text)


def decoded(text: str) -> str:
    """Text in which ``_x000D_`` and the like are the characters they stand for."""
    return _ESCAPED.sub(lambda match: chr(int(match[1], 16)), text) if "_x" in text else text


def encoded(text: str) -> str:
    """Text for an element, with what XML cannot hold written as ``_x000D_`` and the like."""
    text = _FORBIDDEN.sub(lambda match: f"_x{ord(match[0]):04X}_", text)
    return text.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;")


@dataclass(slots=True)
class RawFormula:
    """The formula element of a cell.

    Parameters
    ----------
    text : str. Its text, empty in the later cells of a shared formula.
    kind : str. ``normal``, ``shared``, ``array`` or ``dataTable``.
    ref : str. The range of an array or of a shared formula.
    group : str. The number of the shared formula.
    """

    text: str = ""
    kind: str = "normal"
    ref: str = ""
    group: str = ""


@dataclass(slots=True)
class RawCell:
    """A cell as it stands in its part.

    Parameters
    ----------
    row, column : int.
    kind : str. The type attribute; ``n`` where there is none.
    text : str or None. The stored value's text; None where there is none.
    formula : RawFormula or None.
    dynamic : bool. Whether the formula spills by itself.
    start : int. Position of its first byte.
    stop : int. Position after its last byte.
    pieces : list. Name, start and stop of each element inside, in bytes.
    """

    row: int
    column: int
    kind: str = "n"
    text: str | None = None
    formula: RawFormula | None = None
    dynamic: bool = False
    start: int = 0
    stop: int = 0
    pieces: list[tuple[str, int, int]] = field(default_factory=list)


@dataclass(slots=True)
class RawRow:
    """A row's element: its number and the bytes it takes."""

    number: int
    start: int
    stop: int


class SheetReader:
    """Walks over the cells of one sheet part.

    Parameters
    ----------
    package : Package. The workbook file.
    part : str. The sheet's part.
    on_cell : callable. Called with each finished RawCell.
    on_row : callable or None. Called with each finished RawRow.
    positions : bool. Whether the cells' byte positions are wanted; without them it reads faster.
    """

    def __init__(
        self,
        package: Package,
        part: str,
        on_cell: Callable[[RawCell], None],
        on_row: Callable[[RawRow], None] | None = None,
        *,
        positions: bool = False,
    ) -> None:
        self.package, self.part = package, part
        self.on_cell, self.on_row = on_cell, on_row
        self.positions = positions
        self.data = package.read(part)
        self.rows_end = -1
        self.count = 0
        self._path: list[str] = []
        self._starts: list[int] = []
        self._row, self._column = 0, 0
        self._cell: RawCell | None = None
        self._text: list[str] | None = None

    def read(self) -> None:
        """Read the part to its end.

        Raises
        ------
        HostileArchive. The part declares a document type.
        DamagedWorkbook. It is not well-formed, or not in UTF-8.
        WorkbookTooLarge. It has too many cells.
        """
        match = _DECLARED_ENCODING.match(self.data.removeprefix(b"\xef\xbb\xbf")[:200])
        if self.data.startswith((b"\xff\xfe", b"\xfe\xff")) or (
            match is not None and match[1].lower() not in {b"utf-8", b"us-ascii"}
        ):
            text = f"the part {self.part!r} is not in UTF-8"
            raise DamagedWorkbook(path=self.package.path.name, text=text)
        self.parser = expat.ParserCreate(namespace_separator="}")
        self.parser.buffer_text = True
        self.parser.StartElementHandler = self._start
        self.parser.EndElementHandler = self._end
        self.parser.CharacterDataHandler = self._characters
        self.parser.StartDoctypeDeclHandler = self._doctype
        try:
            self.parser.Parse(self.data, True)
        except expat.ExpatError as error:
            raise _not_well_formed(self.package, self.part, str(error)) from error

    def _doctype(self, *_: object) -> None:
        raise _document_type(self.package, self.part)

    def _start(self, tag: str, attributes: dict[str, str]) -> None:
        namespace, _, name = tag.rpartition("}")
        depth = len(self._path)
        self._path.append(name if namespace in MAIN else "")
        self._starts.append(self.parser.CurrentByteIndex)
        if depth == 2 and name == "row" and self._path[1] == "sheetData":
            self._row = self._number(attributes.get("r"), self._row + 1)
            self._column = 0
        elif depth == 3 and name == "c" and self._path[1:3] == ["sheetData", "row"]:
            self._cell = self._new_cell(attributes)
        elif self._cell is not None:
            if depth == 4 and name == "f":
                self._cell.formula = RawFormula(
                    "", attributes.get("t", "normal"), attributes.get("ref", ""), attributes.get("si", "")
                )
                self._text = []
            elif (depth == 4 and name == "v") or (name == "t" and self._in_inline_text()):
                self._text = []

    def _in_inline_text(self) -> bool:
        return "is" in self._path and "rPh" not in self._path

    def _number(self, text: str | None, implied: int) -> int:
        if text is None:
            return implied
        if not text.isdecimal() or not 1 <= int(text) <= LAST_ROW:
            problem = f"{self.part!r} has a row numbered {text[:20]!r}"
            raise DamagedWorkbook(path=self.package.path.name, text=problem)
        return int(text)

    def _new_cell(self, attributes: dict[str, str]) -> RawCell:
        self.count += 1
        if self.count > self.package.limits.cells:
            raise WorkbookTooLarge(
                path=self.package.path.name, text=f"more cells in {self.part!r}",
                limit=f"{self.package.limits.cells} cells",
            )
        row, column = self._row, self._column + 1
        if (address := attributes.get("r")) is not None:
            reference = parse_reference(address)
            if reference is None or reference.last is not None or reference.sheet is not None:
                text = f"{self.part!r} has a cell addressed {address!r}"
                raise DamagedWorkbook(path=self.package.path.name, text=text)
            row, column = reference.first.row, reference.first.column
        if column > LAST_COLUMN:
            text = f"{self.part!r} has a row with more than {LAST_COLUMN} cells"
            raise DamagedWorkbook(path=self.package.path.name, text=text)
        self._column = column
        start = self.parser.CurrentByteIndex
        return RawCell(row, column, attributes.get("t", "n"), dynamic="cm" in attributes, start=start)

    def _characters(self, text: str) -> None:
        if self._text is not None:
            self._text.append(text)

    def _end(self, _: str) -> None:
        position = self.parser.CurrentByteIndex
        name, start = self._path.pop(), self._starts.pop()
        depth = len(self._path)
        cell = self._cell
        if cell is not None and depth >= 4:
            if self._text is not None and name in {"f", "v", "t"}:
                text, self._text = "".join(self._text), None
                if name == "f" and cell.formula is not None:
                    cell.formula.text = text
                else:
                    cell.text = (cell.text or "") + text
            if depth == 4 and self.positions:
                cell.pieces.append((name, start, self._stop(start, position)))
        elif depth == 3 and cell is not None:
            if self.positions:
                cell.stop = self._stop(start, position)
            self._cell = None
            self.on_cell(cell)
        elif depth == 2 and name == "row" and self.on_row is not None:
            self.on_row(RawRow(self._row, start, self._stop(start, position)))
        elif depth == 1 and name == "sheetData":
            self.rows_end = position

    def _stop(self, start: int, position: int) -> int:
        """Where an element ends: the parser stands behind an empty tag, but before a closing one."""
        opened = tag_end(self.data, start)
        if self.data[opened - 2 : opened] == b"/>":
            return opened
        return self.data.index(b">", position) + 1


def tag_end(data: bytes, start: int) -> int:
    """Position after the opening tag that begins at ``start``."""
    match = _TAG.match(data, start)
    return len(data) if match is None else match.end()


def array_area(cell: RawCell, sheet: str) -> Area | None:
    """The range over which a cell's array formula is entered."""
    if cell.formula is None or cell.formula.kind != "array":
        return None
    reference = parse_reference(cell.formula.ref)
    if reference is None:
        return Area(sheet, cell.row, cell.column, cell.row, cell.column)
    return reference._replace(sheet=None).area(sheet)
