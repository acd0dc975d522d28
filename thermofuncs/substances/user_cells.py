"""The cells of a user's data table: columns by name, values in the units of the house, every fault kept."""

from __future__ import annotations

import math
import re
from collections.abc import Iterator
from dataclasses import dataclass

from thermofuncs.errors import CellError, ThermofuncsError
from thermofuncs.substances.records import Source
from thermofuncs.units import factor, kelvin

TEXTS = ("substance", "formula", "phase", "form", "unit", "unit S", "source", "note", "reaction")
NUMBERS = (
    "dfH", "S", "Cp", "T_ref", "p_ref", "T_low", "T_high", "u(dfH)", "u(S)", "drH", "drS", "drCp",
    "A", "B", "C", "D", "E", "F", "G", "a1", "a2", "a3", "a4", "a5", "a6", "a7", "b1", "b2",
)  # fmt: skip
HEADERS = ", ".join([*TEXTS, *NUMBERS, "Cp T^n"])
ENERGIES = frozenset({"dfH", "u(dfH)", "drH"})
ENTROPIES = frozenset({"S", "Cp", "u(S)", "drS", "drCp"})
# a has the case of the NASA forms, A that of Shomate's equation: these two families keep their case
CASED = frozenset(n for n in NUMBERS if len(n) <= 2 and n != "S")

LARGEST = 1e60  # a number of the table; its products with powers of T stay in the range of numbers

_HEADER = re.compile(r"(.*?)\s*(?:\[([^\[\]]*)\])?")
_POWER = re.compile(r"(?:c ?\* ?|Cp ?\*? ?)T ?\^ ?([+-]?\d+(?:\.\d+)?(?:/\d+)?)", re.IGNORECASE)
_NAMES = {name.casefold(): name for name in (*TEXTS, *NUMBERS) if name not in CASED}


def column_of(header: str) -> tuple[str, str] | None:
    """The column that a header cell names, and its unit; a power of T is ``T^n``.

    Parameters
    ----------
    header : str. Such as ``dfH [kcal/mol]`` or ``Cp T^-2``.
    """
    match = _HEADER.fullmatch(" ".join(header.replace("−", "-").split()))
    if match is None:
        return None
    name, unit = match[1], match[2] or ""
    power = _POWER.fullmatch(name)
    if power:
        top, _, bottom = power[1].partition("/")
        below = float(bottom or 1)
        return (f"T^{float(top) / below:.12g}", unit) if below else None
    if name in CASED:
        return name, unit
    known = _NAMES.get(name.casefold())
    return (known, unit) if known else None


class Faults:
    """What is wrong with a table, cell by cell."""

    def __init__(self) -> None:
        self._found: list[str] = []

    def __bool__(self) -> bool:
        """Whether anything is wrong."""
        return bool(self._found)

    def add(self, row: int, column: str, what: str) -> None:
        """Add the fault of a cell."""
        said = f"row {row}, {column}: {what}"
        if said not in self._found:
            self._found.append(said)

    def sentence(self) -> str:
        """All of them."""
        return "; ".join(self._found) + "."


@dataclass(frozen=True, slots=True)
class Table:
    """A table whose columns are known.

    Parameters
    ----------
    cells : list of rows, the header first.
    columns : mapping of a column's name to its place, its unit or "", and its header as written.
    faults : Faults.
    """

    cells: list[list[object]]
    columns: dict[str, tuple[int, str, str]]
    faults: Faults

    def rows(self) -> Iterator[Cells]:
        """Every row that is not blank."""
        for number, row in enumerate(self.cells[1:], start=2):
            if any(cell is not None and cell != "" for cell in row):
                yield Cells(self, number, row)


@dataclass(frozen=True, slots=True)
class Cells:
    """One row of a table."""

    table: Table
    number: int
    row: list[object]

    def fault(self, column: str, what: str) -> None:
        """Say what is wrong with a cell of this row."""
        self.table.faults.add(self.number, self.table.columns.get(column, (0, "", column))[2], what)

    def cell(self, column: str) -> object:
        """A cell; None where it is blank or there is no such column."""
        if column not in self.table.columns:
            return None
        place = self.table.columns[column][0]
        value = self.row[place] if place < len(self.row) else None
        if isinstance(value, CellError):
            self.fault(column, f"is the error value {value.value}")
            return None
        return None if value == "" else value

    def text(self, column: str) -> str:
        """A text; empty where blank."""
        value = self.cell(column)
        return "" if value is None else str(value).strip()

    def required_text(self, column: str) -> str:
        """A text that must be there."""
        value = self.text(column)
        if not value:
            self.fault(column, "is blank")
        return value

    def number_of(self, column: str, *, required: bool = False) -> float | None:
        """A number; None where blank, and a fault where it must be there."""
        value = self.cell(column)
        if value is None:
            if required:
                self.fault(column, "is blank" if column in self.table.columns else "the column is missing")
            return None
        if isinstance(value, bool) or not isinstance(value, int | float):
            self.fault(column, f"is {value!r}, which is no number")
            return None
        if isinstance(value, float) and not math.isfinite(value):
            self.fault(column, "is not finite")
            return None
        if abs(value) > LARGEST:
            self.fault(column, f"is beyond {LARGEST:g}")
            return None
        return float(value)

    def unit(self, column: str, per_row: str, default: str) -> str:
        """The unit of a column: from its header, else from the row's unit column, else the default."""
        written = self.table.columns[column][1] if column in self.table.columns else ""
        return written or self.text(per_row) or default

    def _converted(
        self, column: str, per_row: str, default: str, house: str, *, required: bool
    ) -> float | None:
        value = self.number_of(column, required=required)
        if value is None:
            return None
        unit = self.unit(column, per_row, default)
        try:
            return value * factor(unit, house, column)
        except ThermofuncsError as error:
            self.fault(column, error.sentence.rstrip("."))
            return None

    def energy(self, column: str, *, required: bool = False) -> float | None:
        """A molar energy. [J/mol]"""
        return self._converted(column, "unit", "kJ/mol", "J/mol", required=required)

    def entropy(self, column: str, *, required: bool = False) -> float | None:
        """A molar entropy or heat capacity. [J/(mol K)]"""
        return self._converted(column, "unit S", "J/(mol K)", "J/(mol K)", required=required)

    def heat_capacity_factor(self, column: str) -> float | None:
        """What a coefficient of the heat capacity is multiplied with to be in J/(mol K)."""
        try:
            return factor(self.unit(column, "unit S", "J/(mol K)"), "J/(mol K)", column)
        except ThermofuncsError as error:
            self.fault(column, error.sentence.rstrip("."))
            return None

    def temperature(self, column: str, default: float | None = None) -> float | None:
        """A temperature: a number in kelvin or in the header's scale, or a quantity text. [K]"""
        value = self.cell(column)
        if value is None:
            if default is None:
                self.fault(column, "is blank" if column in self.table.columns else "the column is missing")
            return default
        scale = self.table.columns[column][1] or "K"
        if isinstance(value, bool) or not isinstance(value, int | float | str):
            self.fault(column, f"is {value!r}, which is no temperature")
            return None
        try:
            return kelvin(value, column, scale)
        except ThermofuncsError as error:
            self.fault(column, error.sentence.rstrip("."))
            return None

    def limits(self) -> tuple[float, float] | None:
        """The range of the row. [K]"""
        low, high = self.temperature("T_low"), self.temperature("T_high")
        if low is None or high is None:
            return None
        if not low < high:
            self.fault("T_high", f"is {high:g} K, which is not above T_low = {low:g} K")
            return None
        return low, high

    def pressure(self) -> float | None:
        """The standard pressure. [bar]"""
        value = self.number_of("p_ref")
        if value is None:
            return 1.0
        try:
            p = value * factor(self.table.columns["p_ref"][1] or "bar", "bar", "p_ref")
        except ThermofuncsError as error:
            self.fault("p_ref", error.sentence.rstrip("."))
            return None
        if p <= 0.0:
            self.fault("p_ref", f"is {value:g}: a pressure above 0 is needed")
            return None
        return p

    def source(self, row: str) -> Source | None:
        """Where the row comes from."""
        said = self.required_text("source")
        return Source("worksheet table", row, said) if said else None
