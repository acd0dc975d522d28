"""The nonlinear core against certified datasets."""

from __future__ import annotations

import math
import re
from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray

from thermofuncs.fits.nonlinear import nonlinear_least_squares

Array = NDArray[np.float64]
Pair = tuple[Callable[[Array, Array], Array], Callable[[Array, Array], list[Array]]]
STRD = Path(__file__).parent.parent / "reference" / "strd"


def _growth(b: Array, x: Array) -> Array:
    return np.asarray(np.exp(b[1] - b[2] * x))


def _above(b: Array, x: Array) -> Array:
    return np.asarray(b[0] + b[1] * x + b[2] * x**2 + b[3] * x**3)


def _below(b: Array, x: Array) -> Array:
    return np.asarray(1.0 + b[4] * x + b[5] * x**2 + b[6] * x**3)


MODELS: dict[str, Pair] = {
    "Misra1a": (
        lambda b, x: b[0] * (1.0 - np.exp(-b[1] * x)),
        lambda b, x: [1.0 - np.exp(-b[1] * x), b[0] * x * np.exp(-b[1] * x)],
    ),
    "DanWood": (lambda b, x: b[0] * x ** b[1], lambda b, x: [x ** b[1], b[0] * x ** b[1] * np.log(x)]),
    "Chwirut2": (
        lambda b, x: np.exp(-b[0] * x) / (b[1] + b[2] * x),
        lambda b, x: [
            -x * np.exp(-b[0] * x) / (b[1] + b[2] * x),
            -np.exp(-b[0] * x) / (b[1] + b[2] * x) ** 2,
            -x * np.exp(-b[0] * x) / (b[1] + b[2] * x) ** 2,
        ],
    ),
    "Rat42": (
        lambda b, x: b[0] / (1.0 + _growth(b, x)),
        lambda b, x: [
            1.0 / (1.0 + _growth(b, x)),
            -b[0] * _growth(b, x) / (1.0 + _growth(b, x)) ** 2,
            b[0] * x * _growth(b, x) / (1.0 + _growth(b, x)) ** 2,
        ],
    ),
    "Thurber": (
        lambda b, x: _above(b, x) / _below(b, x),
        lambda b, x: [
            *(x**k / _below(b, x) for k in range(4)),
            *(-(x**k) * _above(b, x) / _below(b, x) ** 2 for k in (1, 2, 3)),
        ],
    ),
}


def dataset(name: str) -> tuple[Array, Array, Array, float]:
    """x, y, the rows of both starts, certified estimates and deviations, and the certified sum of squares."""
    text = (STRD / f"{name}.dat").read_text(encoding="latin-1")
    found = re.search(r"Data\s+\(lines\s+(\d+)\s+to\s+(\d+)\)", text)
    squares = re.search(r"Residual Sum of Squares:\s+(\S+)", text)
    assert found is not None
    assert squares is not None
    data = np.array([[float(a) for a in line.split()] for line in text.splitlines()[int(found[1]) - 1 : int(found[2])]])
    rows = [line.split("=")[1].split() for line in text.splitlines() if re.match(r"\s*b\d+ =", line)]
    return data[:, 1], data[:, 0], np.array([[float(a) for a in row] for row in rows]), float(squares[1])


def digits(found: Array, certified: Array) -> float:
    """The correct digits of the worst."""
    return -math.log10(max(float(np.max(np.abs(found - certified) / np.abs(certified))), 1e-15))


@pytest.mark.parametrize("name", MODELS)
def test_the_certified_residual(name: str) -> None:
    """The certified estimates leave the certified sum of squares, printed to eleven digits."""
    x, y, rows, squares = dataset(name)
    assert float(np.sum((y - MODELS[name][0](rows[:, 2], x)) ** 2)) == pytest.approx(squares, rel=1e-9)


@pytest.mark.parametrize("name", MODELS)
@pytest.mark.parametrize("start", [0, 1])
def test_certified_nonlinear_sets(name: str, start: int) -> None:
    """Each nonlinear set is met to nine digits in estimates and deviations, from both published starts."""
    x, y, rows, squares = dataset(name)
    model, derivatives = MODELS[name]
    found = nonlinear_least_squares(
        lambda b: model(b, x), lambda b: np.column_stack(derivatives(b, x)), y, rows[:, start].tolist()
    )
    assert digits(found.parameters, rows[:, 2]) >= 9
    assert digits(found.standard_deviations, rows[:, 3]) >= 9
    assert found.squares == pytest.approx(squares, rel=1e-9)
