"""New stored results in a sheet part, every other byte left as it was."""

from __future__ import annotations

import re
from bisect import bisect_right
from collections.abc import Mapping

from thermofuncs.errors import CellError
from thermofuncs.workbook.addresses import column_letters
from thermofuncs.workbook.book import Stored
from thermofuncs.workbook.markup import RawCell, RawRow, SheetReader, encoded, tag_end
from thermofuncs.workbook.package import Package

_TYPE = re.compile(rb"""\st\s*=\s*(?:"[^"]*"|'[^']*')""")
_VALUE_METADATA = re.compile(rb"""\svm\s*=\s*(?:"[^"]*"|'[^']*')""")
_TAG_NAME = re.compile(rb"<((?:[^\s:/>]+:)?)[^\s:/>]+")
Edit = tuple[int, int, bytes]


def patched_sheet(package: Package, part: str, values: Mapping[tuple[int, int], Stored]) -> bytes:
    """A sheet part in which the given cells have other stored results.

    Parameters
    ----------
    package : Package. The workbook file.
    part : str. The sheet's part.
    values : mapping. New results by row and column; None stands for no result.

    Returns
    -------
    bytes. Inside each cell only its type and its value differ; a cell or row that an array formula fills
    and that is not there yet is put in.
    """
    patch = _Patch(values)
    reader = SheetReader(package, part, patch.cell, patch.row, positions=True)
    reader.read()
    data = reader.data
    return _applied(data, patch.edits(data, reader.rows_end))


class _Patch:
    """Collects the cells to change, and where missing ones go."""

    def __init__(self, values: Mapping[tuple[int, int], Stored]) -> None:
        self.values = values
        self.wanted: dict[int, list[int]] = {}
        for row, column in sorted(values):
            self.wanted.setdefault(row, []).append(column)
        self.cells: dict[int, list[RawCell]] = {}
        self.rows: list[RawRow] = []
        self.numbers: list[int] = []
        self.starts: list[int] = []

    def cell(self, cell: RawCell) -> None:
        if cell.row in self.wanted:
            self.cells.setdefault(cell.row, []).append(cell)

    def row(self, row: RawRow) -> None:
        self.rows.append(row)

    def edits(self, data: bytes, rows_end: int) -> list[Edit]:
        found: list[Edit] = []
        by_number = {row.number: row for row in self.rows}
        self.numbers = sorted(by_number)
        self.starts = [by_number[number].start for number in self.numbers]
        for number, wanted in self.wanted.items():
            present = {cell.column: cell for cell in self.cells.get(number, [])}
            found.extend(
                (present[c].start, present[c].stop, _changed(data, present[c], self.values[number, c]))
                for c in wanted if c in present
            )
            missing = [c for c in wanted if c not in present and self.values[number, c] is not None]
            if missing:
                found.extend(self._added(data, number, missing, by_number.get(number), rows_end))
        return found

    def _added(
        self, data: bytes, number: int, columns: list[int], row: RawRow | None, rows_end: int
    ) -> list[Edit]:
        sample = next(iter(self.rows))
        prefix = _prefix(data, sample.start)
        new = {c: _new_cell(prefix, number, c, self.values[number, c]) for c in columns}
        if row is None:
            later_row = bisect_right(self.numbers, number)
            at = self.starts[later_row] if later_row < len(self.starts) else rows_end
            body = b"".join(new.values())
            return [(at, at, b'<%srow r="%d">%s</%srow>' % (prefix, number, body, prefix))]
        opened = tag_end(data, row.start)
        if opened == row.stop:  # an empty row in one tag
            closing = b">" + b"".join(new.values()) + b"</%srow>" % prefix
            return [(data.rindex(b"/", row.start, row.stop), row.stop, closing)]
        edits = []
        for column, content in new.items():
            later = [cell.start for cell in self.cells.get(number, []) if cell.column > column]
            at = min(later) if later else data.rindex(b"<", row.start, row.stop)
            edits.append((at, at, content))
        return edits


def _applied(data: bytes, edits: list[Edit]) -> bytes:
    pieces = []
    position = 0
    for start, stop, content in sorted(edits, key=lambda edit: edit[:2]):
        pieces += [data[position:start], content]
        position = stop
    pieces.append(data[position:])
    return b"".join(pieces)


def _prefix(data: bytes, start: int) -> bytes:
    match = _TAG_NAME.match(data, start)
    return b"" if match is None else match[1]


def stored_form(value: Stored) -> tuple[bytes, str | None]:
    """The type attribute's value, empty for a number, and the text of the value element."""
    if value is None:
        return b"", None
    if isinstance(value, bool):
        return b"b", str(int(value))
    if isinstance(value, CellError):
        return b"e", value.value
    if isinstance(value, str):
        return b"str", value
    return b"", str(int(value)) if value.is_integer() and abs(value) < 1e15 else repr(value)


def _value_element(prefix: bytes, value: Stored) -> bytes:
    _, text = stored_form(value)
    if text is None:
        return b""
    space = b' xml:space="preserve"' if text != text.strip() else b""
    return b"<%sv%s>%s</%sv>" % (prefix, space, encoded(text).encode(), prefix)


def _new_cell(prefix: bytes, row: int, column: int, value: Stored) -> bytes:
    kind, _ = stored_form(value)
    address = f"{column_letters(column)}{row}".encode()
    attribute = b' t="%s"' % kind if kind else b""
    return b'<%sc r="%s"%s>%s</%sc>' % (prefix, address, attribute, _value_element(prefix, value), prefix)


def _changed(data: bytes, cell: RawCell, value: Stored) -> bytes:
    opened = tag_end(data, cell.start)
    tag = data[cell.start : opened]
    prefix = _prefix(data, cell.start)
    kind, _ = stored_form(value)
    empty = tag.endswith(b"/>")
    tag = tag[:-2] if empty else tag[:-1]
    if (kind.decode() or "n") != cell.kind:
        tag = _TYPE.sub(b"", tag).rstrip()
        tag += b' t="%s"' % kind if kind else b""
    tag = _VALUE_METADATA.sub(b"", tag)  # it describes the value that goes
    element = _value_element(prefix, value)
    if empty:
        return tag + (b">%s</%sc>" % (element, prefix) if element else b"/>")
    body: list[bytes] = []
    position = opened
    put = False
    for name, start, stop in cell.pieces:
        if name in {"v", "is"}:
            body.append(data[position:start])
            if not put:
                body.append(element)
            put = True
            position = stop
        elif name == "f" and not any(other in {"v", "is"} for other, _, _ in cell.pieces):
            body += [data[position:stop], element]
            position = stop
            put = True
    rest = data[position : cell.stop]
    return tag + b">" + b"".join(body) + (b"" if put else element) + rest
