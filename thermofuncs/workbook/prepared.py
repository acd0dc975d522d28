"""A formula made ready for the evaluator, and the calls of our functions in it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from thermofuncs.workbook import natives
from thermofuncs.workbook.addresses import Area, Place, parse_reference
from thermofuncs.workbook.book import StoredFormula
from thermofuncs.workbook.formula_tree import Call, Group, Node, Operand, formula_tree
from thermofuncs.workbook.spelling import seems_ours


@dataclass(frozen=True, slots=True)
class Site:
    """One call of one of our functions in one cell.

    Parameters
    ----------
    number : int. Its number, under which the evaluator calls back.
    place : Place. The cell.
    name : str. The function, such as ``LNK``.
    spelled : str. As the formula spells it.
    omitted : frozenset of int. Which arguments are left out, from 0.
    texts : tuple of str. The arguments as the formula writes them.
    fit : tuple or None. Rows and columns that the result is spread over, where it is the whole formula.
    computed : frozenset of int. Which arguments are a single formula cell, which is never blank.
    """

    number: int
    place: Place
    name: str
    spelled: str
    omitted: frozenset[int]
    texts: tuple[str, ...]
    fit: tuple[int, int] | None = None
    computed: frozenset[int] = frozenset()


@dataclass(slots=True)
class Prepared:
    """A formula ready for the evaluator.

    Parameters
    ----------
    place : Place. The cell.
    stored : StoredFormula. As it stands in the file.
    text : str. For the evaluator, with the equals sign.
    sites : list of Site. Our calls, also those behind a defined name.
    areas : list of Area. What it refers to.
    functions : set of str. The spreadsheet's own functions in it.
    reasons : list of str. Why it cannot be evaluated; empty where it can.
    """

    place: Place
    stored: StoredFormula
    text: str = ""
    sites: list[Site] = field(default_factory=list)
    areas: list[Area] = field(default_factory=list)
    functions: set[str] = field(default_factory=set)
    reasons: list[str] = field(default_factory=list)

    @property
    def ours(self) -> bool:
        """Whether it calls one of our functions; of an unreadable formula, whether it seems to."""
        return bool(self.sites) or (bool(self.reasons) and seems_ours(self.stored.text))

    @property
    def written(self) -> str:
        """The formula as this cell shows it, a shared one moved to its place."""
        rows = self.place.row - self.stored.origin.row
        columns = self.place.column - self.stored.origin.column
        if not (rows or columns) or self.reasons:
            return "=" + self.stored.text
        return "=" + as_written(formula_tree(self.stored.text), rows, columns)

    @property
    def volatile(self) -> bool:
        """Whether a spreadsheet computes it anew each time."""
        return bool(self.functions & natives.VOLATILE)

    @property
    def dynamic(self) -> bool:
        """Whether it refers to cells that are known only when it is evaluated."""
        return bool(self.functions & natives.DYNAMIC) or ":" in self.functions


def as_written(items: Sequence[Node], rows: int = 0, columns: int = 0) -> str:
    """The text of items as the formula has it, in a copy so many rows and columns away."""
    pieces = []
    for item in items:
        if isinstance(item, Group):
            pieces.append(f"({as_written(item.items, rows, columns)})")
        elif isinstance(item, Call):
            arguments = ",".join(as_written(argument, rows, columns) for argument in item.arguments)
            pieces.append(f"{item.spelled}({arguments})")
        elif isinstance(item, Operand) and (reference := parse_reference(item.text)) is not None:
            pieces.append(str(reference.moved(rows, columns)) if rows or columns else item.text)
        else:
            pieces.append(item.text)
    return "".join(pieces)
