"""Worksheet functions for reaction thermochemistry: one validated engine, a trace behind every number."""

from __future__ import annotations

from typing import Any

__all__ = ["call"]


def call(name: str, *arguments: object) -> Any:  # noqa: ANN401  a cell holds any value
    """The value of a worksheet function, from Python: the same door as a cell.

    Parameters
    ----------
    name : str. The function, such as ``LNK``.
    arguments : numbers, texts, None where left out; ranges and tables as lists of rows or numpy arrays.

    Returns
    -------
    float, str, bool, list of rows, or a numpy array where one of temperatures came in.

    Raises
    ------
    thermofuncs.errors.ThermofuncsError: with the sentence that says why and what would do.

    Examples
    --------
    >>> round(call("DRH", "CO(g) + H2O(g) = CO2(g) + H2(g)", 298.15, "kJ/mol"), 2)
    -41.15
    """
    from thermofuncs.catalogue.evaluation import call as evaluated  # noqa: PLC0415  a bare import stays light

    return evaluated(name, *arguments)
