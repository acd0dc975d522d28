"""Reads a user's own data from a worksheet table with a header row.

Columns, in any order and any case; a unit may follow in square brackets:

- ``substance``: as equations write it, ``ZnO(s)``, or a name, then with ``formula`` and ``phase``
- ``dfH``, ``S``: at ``T_ref`` (298.15 K where left out), in the units of ``unit`` and ``unit S``
- ``form``: constant, powers, Shomate, NASA-7 or NASA-9, with its coefficients:
  ``Cp``; ``Cp T^n`` for each exponent n; ``A`` to ``G``; ``a1`` to ``a7``; ``a1`` to ``a7``, ``b1``, ``b2``
- ``p_ref``: standard pressure of a gas's entropy (1 bar where left out)
- ``T_low``, ``T_high``: the row's range; ``u(dfH)``, ``u(S)``: standard uncertainties; ``note``
- ``source``: required on every row

Several rows of one substance are its intervals, in order of temperature. In the second and later ones dfH and
S may be left out: they continue. A row may also be a whole reaction: ``reaction``, ``drH``, ``drS``, ``drCp``.
Coefficients of the NASA forms are those of Cp/R, with the gas constant of this package.
"""

from __future__ import annotations

import hashlib
from collections.abc import Sequence
from functools import lru_cache

from thermofuncs.errors import BadDataTable, CellError
from thermofuncs.substances.user_cells import HEADERS, Cells, Faults, Table, column_of
from thermofuncs.substances.user_data import UserData, UserReaction
from thermofuncs.substances.user_rows import substance_of
from thermofuncs.substances.records import Source, Substance

TYPED = tuple[tuple[str, object], ...]


def parse(rows: Sequence[Sequence[object]], argument: str = "data") -> UserData:
    """The substances and reactions of a worksheet table.

    Parameters
    ----------
    rows : list of rows, the first with the column names; blank cells are None or empty.
    argument : str. The name used in an error's sentence.

    Returns
    -------
    UserData

    Raises
    ------
    BadDataTable
        Cells cannot be used; the sentence names every one by row and column.

    Examples
    --------
    >>> table = [["substance", "dfH", "S", "Cp", "T_low", "T_high", "source"],
    ...          ["ZnO(s)", -350.46, 43.65, 40.25, 298.15, 1000.0, "own selection"]]
    >>> parse(table).substances[0].label
    'ZnO(s)'
    """
    typed = tuple(tuple((type(cell).__name__, _hashable(cell)) for cell in row) for row in rows)
    found = _parsed(typed)
    if isinstance(found, UserData):
        return found
    raise BadDataTable(argument=argument, faults=found)


def _hashable(cell: object) -> object:
    if isinstance(cell, float | int | str | bool | CellError) or cell is None:
        return cell
    return str(cell)


@lru_cache(maxsize=64)
def _parsed(typed: tuple[TYPED, ...]) -> UserData | str:
    """The data of a table, or what is wrong with it; kept, as many cells name the same table."""
    rows = [[cell for _, cell in row] for row in typed]
    faults = Faults()
    table = _headed(rows, faults)
    if table is None:
        return faults.sentence()
    groups: dict[str, list[Cells]] = {}
    reactions: list[UserReaction] = []
    for cells in table.rows():
        if cells.text("reaction"):
            reaction = _reaction(cells)
            if reaction is not None:
                reactions.append(reaction)
        elif cells.required_text("substance"):
            groups.setdefault(" ".join(cells.text("substance").split()), []).append(cells)
    substances: list[Substance] = []
    for name, members in groups.items():
        made = substance_of(name, members)
        if made is not None:
            substances.append(made)
    if faults:
        return faults.sentence()
    digest = hashlib.sha256(repr(typed).encode()).hexdigest()
    return UserData(tuple(substances), tuple(reactions), digest)


def _headed(rows: list[list[object]], faults: Faults) -> Table | None:
    """The table with its columns recognised."""
    if not rows:
        faults.add(1, "header", "the table is empty")
        return None
    columns: dict[str, tuple[int, str, str]] = {}
    for place, cell in enumerate(rows[0]):
        if cell is None or cell == "":
            continue
        found = column_of(str(cell))
        if found is None:
            faults.add(1, str(cell), f"is no column of a data table; the columns are {HEADERS}")
        elif found[0] in columns:
            faults.add(1, str(cell), "stands twice")
        else:
            columns[found[0]] = (place, found[1], str(cell))
    if "source" not in columns:
        faults.add(1, "header", "the column source is missing: every row says where it comes from")
    if "substance" not in columns and "reaction" not in columns:
        faults.add(1, "header", "a column substance or reaction is missing")
    if faults:
        return None
    return Table(rows, columns, faults)


def _reaction(cells: Cells) -> UserReaction | None:
    """The whole reaction of a row."""
    if cells.text("substance"):
        cells.fault("reaction", "the row also has a substance: one or the other")
    drh = cells.energy("drH", required=True)
    drs = cells.entropy("drS", required=True)
    drcp = cells.entropy("drCp")
    t_ref = cells.temperature("T_ref", default=298.15)
    limits = cells.limits()
    source = cells.source(cells.text("reaction"))
    if drh is None or drs is None or t_ref is None or limits is None or source is None:
        return None
    equation = cells.text("reaction")
    key = " ".join(equation.replace("<=>", "=").replace("->", "=").replace("→", "=").replace("⇌", "=").split())
    return UserReaction(
        equation, key, drh, drs, drcp, t_ref, *limits, Source(source.dataset, source.row, source.reference)
    )
