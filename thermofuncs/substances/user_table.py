"""Reads a user's own data from a worksheet table with a header row.

Columns, in any order and any case; a unit may follow in square brackets:

- ``substance``: as equations write it, ``ZnO(s)``, or a name, then with ``formula`` and ``phase``
- ``dfH``, ``S``: at ``T_ref`` (298.15 K where left out), in the units of ``unit`` and ``unit S``
- ``form``: constant, powers, Shomate, NASA-7 or NASA-9, with its coefficients:
  ``Cp``; ``Cp T^n`` for each exponent n; ``A`` to ``G``; ``a1`` to ``a7``; ``a1`` to ``a7``, ``b1``, ``b2``
- ``p_ref``: standard pressure of a gas's entropy (1 bar where left out)
- ``T_low``, ``T_high``: the row's range; ``u(dfH)``, ``u(S)``: standard uncertainties; ``note``
- ``source``: required on every row

Several rows of one substance are its intervals, in order of temperature. In the second and later ones dfH
and S may be left out: they continue. A row may also be a whole reaction: ``reaction``, ``drH``, ``drS``,
``drCp``.
Coefficients of the NASA forms are those of Cp/R, with the gas constant of this package.
"""

from __future__ import annotations

import hashlib
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import lru_cache

from thermofuncs.errors import BadDataTable, CellError
from thermofuncs.substances.printed import composition_key
from thermofuncs.substances.records import Source, Substance, SubstanceRow
from thermofuncs.substances.user_cells import HEADERS, Cells, Faults, Table, column_of
from thermofuncs.substances.user_rows import substance_of


@dataclass(frozen=True, slots=True)
class UserReaction:
    """A whole reaction of a user's table.

    Parameters
    ----------
    equation : str. As written.
    drh : float. ΔrH° at ``t_ref``. [J/mol]
    drs : float. ΔrS° at ``t_ref``. [J/(mol K)]
    drcp : float or None. ΔrCp°, constant; None where the table gives none. [J/(mol K)]
    t_ref : float. The temperature that the values belong to. [K]
    t_low, t_high : float. Range. [K]
    source : Source.
    """

    equation: str
    drh: float
    drs: float
    drcp: float | None
    t_ref: float
    t_low: float
    t_high: float
    source: Source


@dataclass(frozen=True, slots=True, eq=False)
class UserData:
    """The substances and reactions of one table; equal where the cells are equal.

    Parameters
    ----------
    substances : tuple of Substance.
    reactions : tuple of UserReaction.
    digest : str. Hash of the cells.
    """

    substances: tuple[Substance, ...]
    reactions: tuple[UserReaction, ...]
    digest: str

    def __eq__(self, other: object) -> bool:
        """Whether the cells are equal."""
        return isinstance(other, UserData) and other.digest == self.digest

    def __hash__(self) -> int:
        """Of the cells."""
        return hash(self.digest)

    def substance(self, text: str) -> Substance | None:
        """The substance with this label or name, if there is one."""
        for x in self.substances:
            if text in (x.label, x.segments[0].row.name):
                return x
        folded = [x for x in self.substances if x.segments[0].row.name.casefold() == text.casefold()]
        return folded[0] if len(folded) == 1 and not text[:1].isupper() else None

    def by_formula(self, key: str) -> dict[str, Substance]:
        """The substances of a composition and charge, by label."""
        found = {}
        for x in self.substances:
            if f"{composition_key(tuple(x.composition.items()))}|{x.charge}" == key:
                found[x.label] = x
        return found

    def labels(self) -> Iterable[str]:
        """Labels and names."""
        return {text for x in self.substances for text in (x.label, x.segments[0].row.name)}

    def rows(self) -> list[SubstanceRow]:
        """Every row."""
        return [segment.row for x in self.substances for segment in x.segments]


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
    return UserReaction(equation, drh, drs, drcp, t_ref, *limits, source)
