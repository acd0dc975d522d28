"""Spreadsheet functions that the evaluator lacks or does not carry over arrays."""

from __future__ import annotations

import math

import formualizer
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.workbook import natives
from thermofuncs.workbook.evaluation import missing_functions


@pytest.mark.parametrize("name", sorted(natives.ELEMENTWISE))
def test_the_evaluator_has_the_function_for_one_value(name: str) -> None:
    """Each function that is carried over arrays is there for one value."""
    assert missing_functions({name}) == set()


@pytest.mark.parametrize("name", sorted(natives.REGISTERED))
def test_registered_functions_are_missing(name: str) -> None:
    """Each function that is registered is one that the evaluator lacks, so that none is replaced."""
    workbook = formualizer.Workbook()
    workbook.add_sheet("S")
    workbook.set_formula("S", 1, 1, f"={name}(1)")
    value = workbook.evaluate_cell("S", 1, 1)
    assert value == {"type": "Error", "kind": "Name"}


@pytest.mark.parametrize(
    ("name", "function", "values"),
    [
        ("EXP", math.exp, [0.0, 1.0, -2.5]),
        ("LN", math.log, [1.0, 2.5, 1e-300]),
        ("LOG10", math.log10, [1.0, 1000.0, 3.0]),
        ("SQRT", math.sqrt, [0.0, 2.0, 9.0]),
        ("ABS", abs, [-1.0, 0.0, 2.0]),
    ],
)
def test_carried_over_arrays(name: str, function: object, values: list[float]) -> None:
    """A function carried over a column gives for each cell what it gives for one value."""
    result = natives.ArrayMap()(name, [[value] for value in values])
    assert isinstance(result, list)
    assert [row[0] for row in result] == pytest.approx([function(v) for v in values], rel=1e-15)  # type: ignore[operator]


def test_errors_and_blanks_in_arrays() -> None:
    """An error goes through a function, and the functions that look at one see it."""
    carry = natives.ArrayMap()
    column = [[1.0], [natives.error("Na")], ["a"], [None]]
    assert carry("EXP", column[:2]) == [[math.e], [natives.error("Na")]]
    assert carry("ISNUMBER", column) == [[True], [False], [False], [False]]
    assert carry("ISNA", column) == [[False], [True], [False], [False]]
    assert carry("ISBLANK", column) == [[False], [False], [False], [True]]
    assert carry("EXP", [["a"]]) == [[natives.error("Value")]]
    assert carry("POWER", [[1.0], [2.0]], [[1.0, 2.0, 3.0]]) == [[1.0, 1.0, 1.0], [2.0, 4.0, 8.0]]


MATRIX = st.integers(1, 4).flatmap(
    lambda n: st.lists(
        st.lists(st.floats(-10, 10), min_size=n, max_size=n), min_size=n, max_size=n
    )
)


@given(MATRIX)
def test_inverse_times_matrix(rows: list[list[float]]) -> None:
    """A matrix times its inverse is the unit matrix, where the matrix is well conditioned."""
    if np.linalg.cond(np.array(rows)) > 1e6:
        return
    product = natives.matrix_product(rows, natives.matrix_inverse(rows))
    assert isinstance(product, list)
    assert np.allclose(np.array(product), np.eye(len(rows)), atol=1e-8)


@pytest.mark.parametrize(
    ("value", "kind"),
    [([[1.0, 2.0]], "Value"), ([["a"]], "Value"), ([[natives.error("Ref")]], "Ref"), ([[None]], "Value")],
)
def test_no_matrix(value: object, kind: str) -> None:
    """What is no square matrix of numbers gives the error that spreadsheets give."""
    assert natives.matrix_inverse(value) == natives.error(kind)
    assert natives.matrix_determinant(value) == natives.error(kind)


@pytest.mark.parametrize(
    ("value", "shape", "expected"),
    [
        (5.0, (2, 2), [[5.0, 5.0], [5.0, 5.0]]),
        ([[1.0, 2.0]], (2, 3), [[1.0, 2.0, natives.error("Na")]] * 2),
        ([[1.0], [2.0]], (3, 2), [[1.0, 1.0], [2.0, 2.0], [natives.error("Na")] * 2]),
        ([[1.0, 2.0], [3.0, None]], (2, 2), [[1.0, 2.0], [3.0, 0.0]]),
        ([[1.0, 2.0], [3.0, 4.0]], (1, 1), 1.0),
        ([], (1, 1), natives.error("Na")),
    ],
)
def test_fitted(value: object, shape: tuple[int, int], expected: object) -> None:
    """A result spread over an array formula's range fills it as spreadsheets do."""
    assert natives.fitted(value, *shape) == expected


def test_missing_functions() -> None:
    """A function that no spreadsheet has is missing; the registered ones are not."""
    assert missing_functions({"SUM", "MMULT", "NOSUCH", ":"}) == {"NOSUCH"}
