"""Spreadsheet functions that the evaluator lacks, or that it does not carry over arrays."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import formualizer
import numpy as np

# One value in, one value out. The evaluator takes these for one value alone, so that EXP(A1:A9)
# inside SUMPRODUCT is an error and ISNUMBER(A1:A9) is the answer for A1: measured by a test.
ELEMENTWISE = frozenset(
    {
        "ABS", "ACOS", "ACOSH", "ASIN", "ASINH", "ATAN", "ATAN2", "ATANH", "CEILING", "COMBIN", "COS",
        "COSH", "DAY", "DEGREES", "ERF", "ERFC", "EVEN", "EXP", "FACT", "FIND", "FLOOR", "GAMMALN", "HOUR",
        "INT", "ISBLANK", "ISERR", "ISERROR", "ISEVEN", "ISLOGICAL", "ISNA", "ISNONTEXT", "ISNUMBER",
        "ISODD", "ISTEXT", "LEFT", "LEN", "LN", "LOG", "LOG10", "LOWER", "MID", "MINUTE", "MOD", "MONTH",
        "MROUND", "NOT", "ODD", "POWER", "QUOTIENT", "RADIANS", "RIGHT", "ROUND", "ROUNDDOWN", "ROUNDUP",
        "SEARCH", "SECOND", "SIGN", "SIN", "SINH", "SQRT", "SQRTPI", "SUBSTITUTE", "TAN", "TANH", "TEXT",
        "TRIM", "TRUNC", "UPPER", "VALUE", "YEAR",
    }
)
# These look at an error instead of handing it on.
_TAKES_ERRORS = frozenset(
    {"ISBLANK", "ISERR", "ISERROR", "ISLOGICAL", "ISNA", "ISNONTEXT", "ISNUMBER", "ISTEXT"}
)
# Their arguments are arrays without being entered as an array formula.
FORCES_ARRAYS = frozenset(
    {
        "CORREL", "COVAR", "COVARIANCE.P", "COVARIANCE.S", "FILTER", "FORECAST", "FORECAST.LINEAR",
        "FREQUENCY", "GROWTH", "INTERCEPT", "LAMBDA", "LET", "LINEST", "LOGEST", "LOOKUP", "MDETERM",
        "MINVERSE", "MMULT", "MODE", "PEARSON", "PROB", "RSQ", "SLOPE", "SORT", "SORTBY", "STEYX",
        "SUMPRODUCT", "SUMX2MY2", "SUMX2PY2", "SUMXMY2", "TREND", "UNIQUE", "XLOOKUP", "XMATCH",
    }
)
BRANCHES = frozenset({"IF", "IFERROR", "IFNA", "IFS", "CHOOSE", "SWITCH"})
GIVES_ARRAYS = frozenset(
    {
        "CHOOSECOLS", "CHOOSEROWS", "DROP", "FILTER", "FREQUENCY", "GROWTH", "HLOOKUP", "HSTACK", "INDEX",
        "INDIRECT", "LET", "LINEST", "LOGEST", "LOOKUP", "MATCH", "MINVERSE", "MMULT", "MUNIT", "OFFSET",
        "RANDARRAY", "SEQUENCE", "SORT", "SORTBY", "TAKE", "TOCOL", "TOROW", "TRANSPOSE", "TREND", "UNIQUE",
        "VLOOKUP", "VSTACK", "XLOOKUP", "XMATCH",
    }
)
VOLATILE = frozenset(
    {"NOW", "TODAY", "RAND", "RANDBETWEEN", "RANDARRAY", "OFFSET", "INDIRECT", "CELL", "INFO"}
)
# What these point to is known only when they are evaluated.
DYNAMIC = frozenset({"OFFSET", "INDIRECT"})

_ERROR_FORMULAS = {"Div": "=1/0", "Na": "=NA()", "Num": "=SQRT(-1)", "Value": '=1+"x"', "Ref": "=#REF!"}


def error(kind: str) -> dict[str, str]:
    """The evaluator's error object."""
    return {"type": "Error", "kind": kind}


def is_error(value: object) -> bool:
    """Whether a value is the evaluator's error object."""
    return isinstance(value, dict) and value.get("type") == "Error"


def rows_of(value: Any) -> list[list[Any]]:  # noqa: ANN401 - any worksheet value
    """A value as rows."""
    return value if isinstance(value, list) else [[value]]


def fitted(value: Any, rows: int, columns: int) -> Any:  # noqa: ANN401 - any worksheet value
    """A result spread over the cells of an array formula, as spreadsheets do.

    One value, one row or one column fills the range; cells outside a larger result are #N/A; what does
    not fit is left out. Where the range is one cell its value comes back bare.
    """
    table = rows_of(value)
    height, width = len(table), max((len(row) for row in table), default=0)
    missing = error("Na")

    def at(row: int, column: int) -> Any:  # noqa: ANN401
        line = table[0 if height == 1 else row] if height == 1 or row < height else ()
        place = 0 if width == 1 else column
        found = line[place] if place < len(line) else missing
        return 0.0 if found is None else found

    if (rows, columns) == (1, 1):
        return at(0, 0)
    return [[at(row, column) for column in range(columns)] for row in range(rows)]


def _matrix(value: Any) -> np.ndarray[Any, np.dtype[np.float64]] | dict[str, str]:  # noqa: ANN401
    rows = rows_of(value)
    for row in rows:
        for item in row:
            if is_error(item):
                return dict(item)
            if isinstance(item, bool) or not isinstance(item, int | float):
                return error("Value")
    return np.array(rows, dtype=float)


def _finite(array: np.ndarray[Any, np.dtype[np.float64]]) -> Any:  # noqa: ANN401
    return array.tolist() if np.isfinite(array).all() else error("Num")


def matrix_product(first: object, second: object) -> object:
    """The product of two matrices."""
    left, right = _matrix(first), _matrix(second)
    if isinstance(left, dict):
        return left
    if isinstance(right, dict):
        return right
    return _finite(left @ right) if left.shape[1] == right.shape[0] else error("Value")


def matrix_inverse(value: object) -> object:
    """The inverse of a square matrix; of a singular one the error #NUM!."""
    matrix = _matrix(value)
    if isinstance(matrix, dict):
        return matrix
    if matrix.shape[0] != matrix.shape[1]:
        return error("Value")
    try:
        return _finite(np.linalg.inv(matrix))
    except np.linalg.LinAlgError:
        return error("Num")


def matrix_determinant(value: object) -> object:
    """The determinant of a square matrix."""
    matrix = _matrix(value)
    if isinstance(matrix, dict):
        return matrix
    if matrix.shape[0] != matrix.shape[1]:
        return error("Value")
    determinant = float(np.linalg.det(matrix))
    return determinant if np.isfinite(determinant) else error("Num")


def unit_matrix(size: object) -> object:
    """The unit matrix of a size."""
    if is_error(size):
        return size
    if not isinstance(size, int | float) or not 1 <= size <= 1000:
        return error("Value")
    return np.eye(int(size)).tolist()


REGISTERED: dict[str, Callable[..., object]] = {
    "MMULT": matrix_product,
    "MINVERSE": matrix_inverse,
    "MDETERM": matrix_determinant,
    "MUNIT": unit_matrix,
}


class ArrayMap:
    """Carries one-value functions over arrays, with the evaluator's own function for each value."""

    def __init__(self) -> None:
        self._scratch = formualizer.Workbook()
        self._scratch.add_sheet("S")
        self._scratch.set_temporal_egress("serial")
        self._known: dict[tuple[object, ...], object] = {}

    def __call__(self, name: str, *arguments: object) -> object:
        """The function of that name over its arguments, broadcast against each other."""
        tables = [rows_of(argument) for argument in arguments]
        height = max(len(table) for table in tables)
        width = max(len(row) for table in tables for row in table)
        result = [
            [self._one(name, [_broadcast(table, row, column) for table in tables]) for column in range(width)]
            for row in range(height)
        ]
        return result if any(isinstance(argument, list) for argument in arguments) else result[0][0]

    def _one(self, name: str, values: list[object]) -> object:
        if name not in _TAKES_ERRORS:
            for value in values:
                if is_error(value):
                    return value
        key = (name, *((type(v), str(v) if isinstance(v, dict) else v) for v in values))
        if key not in self._known:
            if len(self._known) > 100_000:
                self._known.clear()
            self._known[key] = self._computed(name, values)
        return self._known[key]

    def _computed(self, name: str, values: list[object]) -> object:
        cells = []
        for number, value in enumerate(values):
            column = chr(65 + number)
            cells.append(f"{column}1")
            if isinstance(value, dict):
                formula = _ERROR_FORMULAS.get(str(value.get("kind")), "=1/0")
                self._scratch.set_formula("S", 1, number + 1, formula)
            else:
                self._scratch.set_value("S", 1, number + 1, value)
        self._scratch.set_formula("S", 2, 1, f"={name}({','.join(cells)})")
        return self._scratch.evaluate_cell("S", 2, 1)


def _broadcast(table: list[list[object]], row: int, column: int) -> object:
    if len(table) > 1 and row >= len(table):
        return error("Na")
    line = table[0 if len(table) == 1 else row]
    if len(line) > 1 and column >= len(line):
        return error("Na")
    return line[0 if len(line) == 1 else column]
