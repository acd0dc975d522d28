"""Worksheet tables and the structured references that point into them."""

from __future__ import annotations

import re
from dataclasses import dataclass

from thermofuncs.workbook.addresses import Area

_PARTS = re.compile(
    r"\[((?:'.|[^\[\]'])*)\]|([:,])|(@)|(\s+)|((?:'.|[^\[\]',:@\s])(?:'.|[^\[\]',:])*)", re.DOTALL
)
_STRUCTURED = re.compile(r"([^\[\]!]*)\[(.*)\]", re.DOTALL)
_SPECIAL = frozenset({"#all", "#data", "#headers", "#totals", "#this row"})


@dataclass(frozen=True, slots=True)
class Table:
    """A worksheet table.

    Parameters
    ----------
    name : str. As formulas write it.
    area : Area. All its cells.
    columns : tuple of str. The headers.
    header_rows, totals_rows : int. How many rows of it are headers and totals.
    """

    name: str
    area: Area
    columns: tuple[str, ...]
    header_rows: int = 1
    totals_rows: int = 0

    def rows(self, special: str, row: int) -> tuple[int, int] | None:
        """First and last row of one of the table's parts; None where it has none there."""
        first, last = self.area.top + self.header_rows, self.area.bottom - self.totals_rows
        spans = {
            "#all": (self.area.top, self.area.bottom),
            "#data": (first, last),
            "#headers": (self.area.top, first - 1),
            "#totals": (last + 1, self.area.bottom),
            "#this row": (row, row) if first <= row <= last else (1, 0),
        }
        span = spans[special]
        return span if span[0] <= span[1] else None

    def column(self, header: str) -> int | None:
        """The worksheet column under a header."""
        wanted = _plain(header)
        for number, name in enumerate(self.columns):
            if _plain(name) == wanted:
                return self.area.left + number
        return None


def _plain(header: str) -> str:
    return header.replace("\r\n", "\n").casefold()


def _unquoted(text: str) -> str:
    return re.sub(r"'(.)", r"\1", text, flags=re.DOTALL)


def structured_area(text: str, tables: dict[str, Table], sheet: str, row: int, column: int) -> Area | None:
    """The cells that a structured reference means.

    Parameters
    ----------
    text : str. Such as ``Feed[[#This Row],[flow]]`` or ``[@flow]``.
    tables : dict. The tables by their name in lower case.
    sheet, row, column : str, int. The cell in which it stands.

    Returns
    -------
    Area or None, where no table, header or part fits.
    """
    match = _STRUCTURED.fullmatch(text)
    if match is None:
        return None
    if match[1]:
        table = tables.get(match[1].casefold())
    else:
        here = (t for t in tables.values() if t.area.sheet == sheet and t.area.covers(row, column))
        table = next(here, None)
    if table is None:
        return None
    return _inside(table, match[2], row)


def _inside(table: Table, text: str, row: int) -> Area | None:
    """The part of ``table`` that the text between the outer brackets means."""
    specials, headers = _items(text, table)
    if specials is None or len(headers) > 2:
        return None
    spans = [table.rows(special, row) for special in specials or ["#data"]]
    if None in spans:
        return None
    rows = [line for span in spans if span is not None for line in span]
    columns = [table.column(header) for header in headers] or [table.area.left, table.area.right]
    known = [number for number in columns if number is not None]
    if len(known) != len(columns):
        return None
    return Area(table.area.sheet, min(rows), min(known), max(rows), max(known))


def _items(text: str, table: Table) -> tuple[list[str] | None, list[str]]:
    """The special items and the headers named, None for the first where the text cannot be read."""
    if not text.strip():
        return [], []
    if "[" not in text.replace("'[", "") and not text.startswith("@"):
        plain = text.strip()
        if plain.casefold() in _SPECIAL:
            return [plain.casefold()], []
        header = _unquoted(text)
        return [], [header if table.column(header) is not None else header.strip()]
    specials: list[str] = []
    headers: list[str] = []
    position = 0
    while position < len(text):
        match = _PARTS.match(text, position)
        if match is None:
            return None, []
        position = match.end()
        if match[3]:
            specials.append("#this row")
        elif match[1] is not None or match[5]:
            item = match[1] if match[1] is not None else match[5]
            if item.strip().casefold() in _SPECIAL:
                specials.append(item.strip().casefold())
            else:
                headers.append(_unquoted(item))
    return specials, headers
