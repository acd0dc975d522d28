"""The straight line in closed form, in plain floats: a single cell does not pay for arrays.

With 1/T centred at its weighted mean the two columns are orthogonal, so this is the QR solution of two
columns written out. Sums are exactly rounded (math.fsum), hence the same in any order.
"""

from __future__ import annotations

from math import fsum
from operator import mul
from typing import NamedTuple


class Line(NamedTuple):
    """A line y = height + slope (centre − x).

    Parameters
    ----------
    centre : float. Weighted mean of x. [unit of x]
    height : float. y there. [unit of y]
    slope : float. Against ``centre − x``. [unit of y/unit of x]
    sum_of_weights, spread : float. Σw, and Σw(x − centre)²; the inverses are the variances of height and
        slope for a unit weight of variance 1.
    squares : float. Weighted sum of squared residuals.
    residuals : list of float. [unit of y]
    """

    centre: float
    height: float
    slope: float
    sum_of_weights: float
    spread: float
    squares: float
    residuals: list[float]


def straight_line(x: list[float], y: list[float], weights: list[float] | None = None) -> Line:
    """The least-squares line of points, whose x are not all equal.

    Parameters
    ----------
    x, y : list of float.
    weights : list of float or None. 1/u², or None for equal ones.
    """
    if weights is None:
        total = float(len(x))
        centre, height = fsum(x) / total, fsum(y) / total
    else:
        total = fsum(weights)
        centre, height = fsum(map(mul, weights, x)) / total, fsum(map(mul, weights, y)) / total
    d = [centre - a for a in x]
    e = [b - height for b in y]
    weighted = d if weights is None else list(map(mul, weights, d))
    spread = fsum(map(mul, weighted, d))
    slope = fsum(map(mul, weighted, e)) / spread if spread else 0.0
    residuals = [b - slope * a for a, b in zip(d, e)]  # noqa: B905  of one length, and the check costs a tenth
    if weights is None:
        squares = fsum(map(mul, residuals, residuals))
    else:
        squares = fsum([w * r * r for w, r in zip(weights, residuals, strict=True)])
    return Line(centre, height, slope, total, spread, squares, residuals)
