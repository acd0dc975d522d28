"""Cell addresses: letters and numbers to rows and columns, and back, with quoted sheet names."""

from __future__ import annotations

import re
from functools import lru_cache
from typing import NamedTuple

LAST_ROW = 1_048_576
LAST_COLUMN = 16_384

_CELL = re.compile(r"(\$?)([A-Za-z]{1,3})(\$?)([1-9][0-9]{0,6})")
_COLUMNS = re.compile(r"(\$?)([A-Za-z]{1,3}):(\$?)([A-Za-z]{1,3})")
_ROWS = re.compile(r"(\$?)([1-9][0-9]{0,6}):(\$?)([1-9][0-9]{0,6})")
_PREFIX = re.compile(r"(?:'((?:[^']|'')+)'|([^'!]+))!")
_PLAIN_SHEET = re.compile(r"[^\W\d][\w.]*")


class Place(NamedTuple):
    """One cell of a workbook; rows and columns count from 1."""

    sheet: str
    row: int
    column: int

    def __str__(self) -> str:
        """Show the address as a spreadsheet does, with the sheet's name quoted where it must be."""
        return f"{quoted_sheet(self.sheet)}!{column_letters(self.column)}{self.row}"


class Area(NamedTuple):
    """A rectangle of cells on one sheet, both corners included."""

    sheet: str
    top: int
    left: int
    bottom: int
    right: int

    @property
    def rows(self) -> int:
        """The number of rows."""
        return self.bottom - self.top + 1

    @property
    def columns(self) -> int:
        """The number of columns."""
        return self.right - self.left + 1

    @property
    def single(self) -> bool:
        """Whether it is one cell."""
        return self.top == self.bottom and self.left == self.right

    def covers(self, row: int, column: int) -> bool:
        """Whether a cell of the same sheet lies inside."""
        return self.top <= row <= self.bottom and self.left <= column <= self.right

    def absolute(self) -> str:
        """The area as a formula writes it, absolute and with its sheet."""
        first = f"${column_letters(self.left)}${self.top}"
        last = "" if self.single else f":${column_letters(self.right)}${self.bottom}"
        return f"{quoted_sheet(self.sheet)}!{first}{last}"

    def __str__(self) -> str:
        """Show the area without dollar signs."""
        return self.absolute().replace("$", "") if "$" not in self.sheet else self.absolute()


class Corner(NamedTuple):
    """One corner of a reference; 0 stands for a whole column's row or a whole row's column."""

    row: int
    column: int
    row_fixed: bool
    column_fixed: bool


class Reference(NamedTuple):
    """A reference as it stands in a formula: a sheet, or none, and one or two corners."""

    sheet: str | None
    first: Corner
    last: Corner | None

    def area(self, sheet: str) -> Area:
        """The cells meant, on ``sheet`` where the reference names none."""
        first, last = self.first, self.last or self.first
        rows = (1, LAST_ROW) if not first.row else sorted((first.row, last.row))
        columns = (1, LAST_COLUMN) if not first.column else sorted((first.column, last.column))
        return Area(self.sheet or sheet, rows[0], columns[0], rows[1], columns[1])

    @property
    def fixed(self) -> bool:
        """Whether nothing in it moves when the formula is copied."""
        corners = (self.first,) if self.last is None else (self.first, self.last)
        return all(
            (corner.row_fixed or not corner.row) and (corner.column_fixed or not corner.column)
            for corner in corners
        )

    def moved(self, rows: int, columns: int) -> Reference:
        """The reference in a copy of its formula so many rows and columns away."""
        last = None if self.last is None else _moved(self.last, rows, columns)
        return Reference(self.sheet, _moved(self.first, rows, columns), last)

    def __str__(self) -> str:
        """Show the reference as a formula writes it."""
        prefix = "" if self.sheet is None else f"{quoted_sheet(self.sheet)}!"
        body = _corner_text(self.first)
        return prefix + (body if self.last is None else f"{body}:{_corner_text(self.last)}")


def _moved(corner: Corner, rows: int, columns: int) -> Corner:
    row = corner.row if corner.row_fixed or not corner.row else (corner.row - 1 + rows) % LAST_ROW + 1
    column = corner.column
    if not corner.column_fixed and column:
        column = (column - 1 + columns) % LAST_COLUMN + 1
    return corner._replace(row=row, column=column)


def _corner_text(corner: Corner) -> str:
    column = ("$" * corner.column_fixed + column_letters(corner.column)) if corner.column else ""
    row = ("$" * corner.row_fixed + str(corner.row)) if corner.row else ""
    return column + row


@lru_cache(maxsize=20_000)
def column_letters(column: int) -> str:
    """The letters of a column number."""
    letters = ""
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(65 + rest) + letters
    return letters


@lru_cache(maxsize=20_000)
def column_number(letters: str) -> int:
    """The number of a column's letters."""
    number = 0
    for letter in letters.upper():
        number = number * 26 + ord(letter) - 64
    return number


def quoted_sheet(name: str) -> str:
    """A sheet's name as it stands before an exclamation mark."""
    if _PLAIN_SHEET.fullmatch(name) and not _CELL.fullmatch(name) and name.upper() not in {"R", "C", "RC"}:
        return name
    return "'" + name.replace("'", "''") + "'"


def split_sheet(text: str) -> tuple[str | None, str]:
    """A sheet's name, unquoted, and what follows its exclamation mark."""
    match = _PREFIX.match(text)
    if match is None:
        return None, text
    name = match[2] if match[1] is None else match[1].replace("''", "'")
    return name, text[match.end() :]


@lru_cache(maxsize=50_000)
def parse_reference(text: str) -> Reference | None:
    """Read a reference such as ``'My sheet'!$A$1:B2``, ``A:C`` or ``3:3``; None where it is none."""
    sheet, body = split_sheet(text)
    first_text, colon, last_text = body.partition(":")
    if not colon:
        corner = _cell(first_text)
        return None if corner is None else Reference(sheet, corner, None)
    repeated, last_body = split_sheet(last_text)
    if repeated is None or (sheet is not None and repeated.casefold() == sheet.casefold()):
        first, last = _cell(first_text), _cell(last_body)
        if first is not None and last is not None:
            return Reference(sheet, first, last)
    if match := _COLUMNS.fullmatch(body):
        left, right = column_number(match[2]), column_number(match[4])
        if max(left, right) <= LAST_COLUMN:
            return Reference(
                sheet, Corner(0, left, row_fixed=False, column_fixed=bool(match[1])),
                Corner(0, right, row_fixed=False, column_fixed=bool(match[3])),
            )
    if match := _ROWS.fullmatch(body):
        top, bottom = int(match[2]), int(match[4])
        if max(top, bottom) <= LAST_ROW:
            return Reference(
                sheet, Corner(top, 0, row_fixed=bool(match[1]), column_fixed=False),
                Corner(bottom, 0, row_fixed=bool(match[3]), column_fixed=False),
            )
    return None


def _cell(text: str) -> Corner | None:
    match = _CELL.fullmatch(text)
    if match is None:
        return None
    column, row = column_number(match[2]), int(match[4])
    if column > LAST_COLUMN or row > LAST_ROW:
        return None
    return Corner(row, column, row_fixed=bool(match[3]), column_fixed=bool(match[1]))


def parse_area(text: str, sheet: str) -> Area | None:
    """The cells of a reference text, on ``sheet`` where it names none."""
    reference = parse_reference(text)
    return None if reference is None else reference.area(sheet)
