"""The working behind one cell of a workbook."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from thermofuncs.errors import NoSuchCell
from thermofuncs.workbook import CellWorking, working

if TYPE_CHECKING:
    from pathlib import Path

    from tests.workbook.conftest import Maker


def of(maker: Maker, path: Path, cell: str) -> CellWorking:
    """The working of a cell with the stand-in functions."""
    return working(path, cell, maker.functions)


def test_single_call(maker: Maker) -> None:
    """A cell that is one call ends in its value, to the last bit, with the numbers that went in."""
    result = of(maker, maker.cells(A1="0.3", B1="=TF.HALF(A1*1)"), "s!$B$1")
    (call,) = result.calls
    assert call.site.texts == ("A1*1",)
    assert call.arguments == (0.3,)
    assert call.explanation.steps[-1].value == result.value == 0.15
    assert call.same
    assert result.last_step_is_value
    assert result.formula == "=TF.HALF(A1*1)"
    assert not result.stored_is_value


def test_several_calls(maker: Maker) -> None:
    """Each call of a formula is shown, in order, nested ones first to answer and inner ones shown too."""
    result = of(maker, maker.cells(A1="8", B1="=TF.HALF(TF.HALF(A1))+TF.HALF(2)"), "S!B1")
    assert [(call.site.texts, call.explanation.result) for call in result.calls] == [
        (("A1",), 4.0), (("TF.HALF(A1)",), 2.0), (("2",), 1.0),
    ]
    assert result.last_step_is_value is None
    assert result.value == 3.0


def test_cell_of_an_array(maker: Maker) -> None:
    """In an array formula the call is shown for the one cell that was asked for."""
    rows = (
        '<row r="1"><c r="A1"><v>4</v></c><c r="B1"><f t="array" ref="B1:B2">TF.HALF(A1:A2)</f><v>2</v></c></row>'
        '<row r="2"><c r="A2"><v>10</v></c><c r="B2"><v>5</v></c></row>'
    )
    result = of(maker, maker.package({"S": rows}), "S!B2")
    (call,) = result.calls
    assert call.arguments == (10.0,)
    assert call.explanation.result == result.value == 5.0
    assert result.last_step_is_value
    assert result.stored_is_value


@pytest.mark.parametrize(
    ("cell", "sentence"),
    [
        ("B1", "B1: write the sheet too; the workbook has S."),
        ("S!B1:B2", "S!B1:B2: write the sheet and one cell, as in S!B5."),
        ("nonsense", "nonsense: write the sheet and one cell, as in S!B5."),
        ("T!B1", "T!B1: the workbook has no such sheet; it has S."),
        ("S!A1", "S!A1: it holds the constant 8.0, and no formula."),
        ("S!Z9", "S!Z9: it is blank."),
        ("S!C1", "S!C1: its formula =SUM(B1) calls no function of ours; it reads S!B1, which can be explained."),
        ("S!D1", ("S!D1: it keeps its stored value, because it calls TF.NONE, which is no function of this "
         "version; near names: none.")),
    ],
)
def test_no_such_cell(maker: Maker, cell: str, sentence: str) -> None:
    """A cell without a call of ours is refused with what it is instead."""
    path = maker.cells(A1="8", B1="=TF.HALF(A1)", C1="=SUM(B1)", D1="=TF.NONE(A1)")
    with pytest.raises(NoSuchCell) as caught:
        of(maker, path, cell)
    assert caught.value.sentence == sentence
