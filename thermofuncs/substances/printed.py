"""The records of the NASA Glenn set as the publisher printed them, and the table file that holds them.

The table has one line for each record. Its last column holds the temperature intervals, each as the two
limits, the seven coefficients of Cp/R and the two integration constants, separated by spaces, intervals by
semicolons. The numbers are the publisher's characters; nothing is scaled here.
"""

from __future__ import annotations

import csv
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Literal, cast

from thermofuncs.substances.forms import Interval, nasa9
from thermofuncs.substances.records import PhaseKind

DATASET = "nasa-glenn-2021"
TITLE = "NASA Glenn thermodynamic coefficients"
REFERENCE = (
    "McBride, Zehe & Gordon, NASA Glenn Coefficients for Calculating Thermodynamic Properties of Individual"
    " Species, NASA/TP-2002-211556, 2002; data file edition 2021-09-08"
)
COLUMNS = (
    "name", "phase_index", "phase", "label", "chain", "composition", "charge", "molar_mass_g_mol",
    "dfH298_J_mol", "use", "boils_K", "reference", "note", "line", "intervals",
)  # fmt: skip

Use = Literal["product", "reactant", "inert"]


@dataclass(frozen=True, slots=True)
class PrintedRecord:
    """One record as printed.

    Parameters
    ----------
    name : str. The publisher's name.
    phase_index : int. The publisher's number of the phase; with the name it is the key.
    phase : g, l or s.
    label : str. The name with lower-case second letters and the phase, as people are shown it.
    chain : str. The label of the solid, liquid or gas that this record is a part of.
    composition : tuple of (element symbol, atoms).
    charge : int. Charge number.
    molar_mass : float. [g/mol]
    formation_enthalpy : float. ΔfH° at 298.15 K, or the enthalpy at the one temperature. [J/mol]
    use : product, reactant (a feed of a combustion calculation) or inert (a copy that does not react).
    boils : float or None. Where its gas at 1 bar has the same Gibbs energy, for a liquid. [K]
    reference : str. The publisher's reference code and comment.
    note : str. What was mended, or "".
    line : int. Line in the publisher's file.
    intervals : tuple of Interval, unscaled, fitted with R = 8.31451 J/(mol K); empty where the publisher
        gives an enthalpy at one temperature alone.
    """

    name: str
    phase_index: int
    phase: PhaseKind
    label: str
    chain: str
    composition: tuple[tuple[str, float], ...]
    charge: int
    molar_mass: float
    formation_enthalpy: float
    use: Use
    boils: float | None
    reference: str
    note: str
    line: int
    intervals: tuple[Interval, ...]

    @property
    def place(self) -> str:
        """Name, phase index and line: where the record stands in the publisher's file."""
        return f"{self.name} phase {self.phase_index}, line {self.line}"


def composition_key(composition: Iterator[tuple[str, float]] | tuple[tuple[str, float], ...]) -> str:
    """A composition as text in one order, such as ``H:2 O:1``."""
    return " ".join(f"{symbol}:{atoms:g}" for symbol, atoms in sorted(composition))


def parsed_composition(text: str) -> tuple[tuple[str, float], ...]:
    """The composition that a key says."""
    pairs = (part.split(":") for part in text.split())
    return tuple((symbol, float(atoms)) for symbol, atoms in pairs)


def parsed_intervals(text: str) -> tuple[Interval, ...]:
    """The intervals of the table's last column, unscaled."""
    intervals = []
    for part in filter(None, text.split(";")):
        low, high, *a, b1, b2 = map(float, part.split())
        intervals.append(Interval(low, high, nasa9(tuple(a)), b1, b2))
    return tuple(intervals)


def record(fields: list[str]) -> PrintedRecord:
    """The record on one line of the table."""
    (name, index, phase, label, chain, composition, charge, mass, enthalpy, use, boils, reference, note, line,
     intervals) = fields  # fmt: skip
    return PrintedRecord(
        name, int(index), cast("PhaseKind", phase), label, chain, parsed_composition(composition),
        int(charge), float(mass), float(enthalpy), cast("Use", use), float(boils) if boils else None,
        reference, note,
        int(line), parsed_intervals(intervals),
    )  # fmt: skip


def lines(text: str) -> list[list[str]]:
    """The fields of each line of a table text, without its header."""
    rows = csv.reader(line for line in text.splitlines() if not line.startswith("#"))
    header = next(rows)
    if tuple(header) != COLUMNS:
        message = f"the table has the columns {header}, not {list(COLUMNS)}"
        raise ValueError(message)
    return list(rows)
