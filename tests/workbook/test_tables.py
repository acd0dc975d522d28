"""Structured references into worksheet tables."""

from __future__ import annotations

import pytest

from thermofuncs.workbook.addresses import Area
from thermofuncs.workbook.tables import Table, structured_area

HEADERS = ("x", "a b", "T [K]", "Имя\nдва", "it's", "#1", "@at", "p, bar")
TABLE = Table("Tab", Area("S", 2, 3, 6, 10), HEADERS, header_rows=1, totals_rows=1)
TABLES = {"tab": TABLE}


@pytest.mark.parametrize(
    ("text", "corners"),
    [
        ("Tab[x]", (3, 3, 5, 3)),
        ("TAB[X]", (3, 3, 5, 3)),
        ("Tab[a b]", (3, 4, 5, 4)),
        ("Tab[[a b]]", (3, 4, 5, 4)),
        ("Tab[T '[K']]", (3, 5, 5, 5)),
        ("Tab[Имя\nдва]", (3, 6, 5, 6)),
        ("Tab[it''s]", (3, 7, 5, 7)),
        ("Tab['#1]", (3, 8, 5, 8)),
        ("Tab['@at]", (3, 9, 5, 9)),
        ("Tab[[p, bar]]", (3, 10, 5, 10)),
        ("Tab[[#This Row],[a b]]", (4, 4, 4, 4)),
        ("Tab[@x]", (4, 3, 4, 3)),
        ("Tab[@[a b]]", (4, 4, 4, 4)),
        ("Tab[[x]:[T '[K']]]", (3, 3, 5, 5)),
        ("Tab[@[x]:[a b]]", (4, 3, 4, 4)),
        ("Tab[#All]", (2, 3, 6, 10)),
        ("Tab[#Headers]", (2, 3, 2, 10)),
        ("Tab[#Totals]", (6, 3, 6, 10)),
        ("Tab[[#Headers],[#Data],[x]]", (2, 3, 5, 3)),
        ("Tab[]", (3, 3, 5, 10)),
        ("[@x]", (4, 3, 4, 3)),
    ],
)
def test_structured_reference(text: str, corners: tuple[int, int, int, int]) -> None:
    """A structured reference means the cells of its column, rows or both, odd headers included."""
    assert structured_area(text, TABLES, "S", 4, 3) == Area("S", *corners)


@pytest.mark.parametrize("text", ["Tab[nope]", "Other[x]", "Tab[[#This Row],[x]]", "Tab[[x],[y],[z]]"])
def test_no_such_cells(text: str) -> None:
    """A reference to a header, table or row that is not there means no cells."""
    assert structured_area(text, TABLES, "S", 40, 3) is None
