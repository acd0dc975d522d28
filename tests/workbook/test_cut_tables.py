"""Array formulas that are smaller than the table they are given."""

from __future__ import annotations

from pathlib import Path

import pytest
import xlsxwriter

from thermofuncs.cli import catalogue_functions
from thermofuncs.workbook import recalculate


@pytest.mark.parametrize(("last", "noted"), [("B4", True), ("G40", False)])
def test_a_cut_table_is_said(tmp_path: Path, last: str, noted: bool) -> None:
    """An array formula over a range smaller than its table leaves a note with both sizes, a larger one none."""
    path = tmp_path / "book.xlsx"
    with xlsxwriter.Workbook(path) as workbook:
        workbook.add_worksheet("S").write_array_formula(f"A1:{last}", '=TF.SUBSTANCE("Fe(s)")')
    notes = recalculate(path, catalogue_functions()).notes
    assert [note.split(":")[0] for note in notes] == (
        ["S!A1 gives a table of 24 x 3 cells, and its array formula is 4 x 2"] if noted else []
    )
