"""Addresses of cells and ranges."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from openpyxl.formula.translate import Translator  # reference implementation
from openpyxl.utils import get_column_letter

from thermofuncs.workbook.addresses import (
    LAST_COLUMN,
    LAST_ROW,
    Area,
    Place,
    column_letters,
    column_number,
    parse_area,
    parse_reference,
    quoted_sheet,
    split_sheet,
)

SHEET_NAMES = st.text(
    st.characters(exclude_characters="[]:*?/\\!", exclude_categories=("Cs", "Cc")), min_size=1, max_size=31
).filter(lambda name: not name.startswith("'") and not name.endswith("'"))


@given(st.integers(1, LAST_COLUMN))
def test_column_letters(number: int) -> None:
    """A column's letters are those of the reference implementation, and lead back to its number."""
    assert column_letters(number) == get_column_letter(number)
    assert column_number(column_letters(number)) == number


@given(SHEET_NAMES, st.integers(1, LAST_ROW), st.integers(1, LAST_COLUMN))
def test_place_round_trip(sheet: str, row: int, column: int) -> None:
    """A cell's address, whatever its sheet is called, reads back as the cell."""
    area = parse_area(str(Place(sheet, row, column)), "other")
    assert area == Area(sheet, row, column, row, column)


@given(SHEET_NAMES)
def test_sheet_quoting(name: str) -> None:
    """A quoted sheet name reads back as itself."""
    assert split_sheet(f"{quoted_sheet(name)}!A1") == (name, "A1")


@given(
    st.integers(50, 900), st.integers(30, 400), st.booleans(), st.booleans(),
    st.integers(-40, 40), st.integers(-20, 20),
)
def test_moved_reference(
    row: int, column: int, row_fixed: bool, column_fixed: bool, down: int, across: int
) -> None:
    """A reference in a copied formula is the one that the reference implementation gives."""
    text = f"{'$' * column_fixed}{column_letters(column)}{'$' * row_fixed}{row}"
    reference = parse_reference(text)
    assert reference is not None
    target = f"{column_letters(100 + across)}{100 + down}"
    expected = Translator(f"={text}", f"{column_letters(100)}100").translate_formula(target)
    assert f"={reference.moved(down, across)}" == expected


def test_moving_past_the_edge_comes_in_at_the_other() -> None:
    """A reference that is moved over the sheet's edge comes back in at the other one."""
    reference = parse_reference("A1")
    assert reference is not None
    assert str(reference.moved(-1, -1)) == "XFD1048576"


@pytest.mark.parametrize(
    ("text", "area"),
    [
        ("A1", (1, 1, 1, 1)),
        ("$B$3:A1", (1, 1, 3, 2)),
        ("C:A", (1, 1, LAST_ROW, 3)),
        ("$4:$3", (3, 1, 4, LAST_COLUMN)),
        ("S!A1:S!B2", (1, 1, 2, 2)),
        ("XFD1048576", (LAST_ROW, LAST_COLUMN, LAST_ROW, LAST_COLUMN)),
    ],
)
def test_areas(text: str, area: tuple[int, int, int, int]) -> None:
    """Cells, ranges, whole columns and whole rows are read with their corners in order."""
    assert parse_area(text, "S") == Area("S", *area)


@pytest.mark.parametrize("text", ["XFE1", "A1048577", "A0", "k_0", "Tab[x]", "LOG10x", "A1:B", ""])
def test_not_an_address(text: str) -> None:
    """What lies outside a sheet, or is a name, is no address."""
    assert parse_reference(text) is None
