"""A row of thermochemical data, where it comes from, and the substance made of such rows."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from thermofuncs.substances.forms import Interval

PhaseKind = Literal["g", "l", "s", "aq"]

ROOM_TOLERANCE = 0.5  # [K] around 298.15 K, where 298.15 K data is used without a caution


@dataclass(frozen=True, slots=True)
class Uncertainty:
    """Standard uncertainty of a value: exact, given, or unknown. Unknown never becomes zero.

    Parameters
    ----------
    kind : exact, given or unknown.
    value : float. The standard uncertainty where given; 0 where exact; NaN where unknown.
    """

    kind: Literal["exact", "given", "unknown"]
    value: float

    @classmethod
    def unknown(cls) -> Uncertainty:
        """An uncertainty that the source does not give."""
        return cls("unknown", float("nan"))

    @classmethod
    def given(cls, value: float) -> Uncertainty:
        """A standard uncertainty that the source gives."""
        return cls("given", value)

    @classmethod
    def exact(cls) -> Uncertainty:
        """Exact by definition, such as the formation enthalpy of a reference element."""
        return cls("exact", 0.0)


@dataclass(frozen=True, slots=True)
class Source:
    """Where a row comes from.

    Parameters
    ----------
    dataset : str. The dataset's id, or ``worksheet table`` for a user's own.
    row : str. The row's name and place in the dataset.
    reference : str. The publisher's reference code and comment, or the user's source text.
    """

    dataset: str
    row: str
    reference: str

    def __post_init__(self) -> None:
        """Refuse a source that says nothing."""
        if not (self.dataset and self.row and self.reference):
            message = f"a data row needs a source: {self!r}"
            raise ValueError(message)

    def __str__(self) -> str:
        """Show it in one line."""
        return f"{self.dataset}, {self.row}: {self.reference}"


@dataclass(frozen=True, slots=True)
class Note:
    """A caution that goes with a row's answers while the temperature lies strictly between two limits.

    Parameters
    ----------
    sentence : str.
    above, below : float. The limits. [K]
    """

    sentence: str
    above: float = 0.0
    below: float = float("inf")


@dataclass(frozen=True, slots=True)
class SubstanceRow:
    """One record of a dataset: one phase over its temperature range.

    Parameters
    ----------
    name : str. The publisher's name, kept for provenance (``AL2O3(a)``).
    label : str. What people are shown (``Al2O3(a)``).
    composition : mapping of element symbol to atoms in one formula unit; fractional allowed.
    charge : int. Charge number of the formula unit.
    phase : g, l, s or aq.
    molar_mass : float. [g/mol]
    intervals : tuple of Interval, ascending, at least one; scaled to the house's R.
    formation_enthalpy : float. ΔfH° at 298.15 K. [J/mol]
    source : Source.
    u_formation_enthalpy, u_entropy : Uncertainty. [J/mol], [J/(mol K)]
    notes : tuple of Note. Cautions that go with the answers from this row.
    gibbs_only : the source gives ΔfG° at 298.15 K alone, so H, S and Cp of this row mean nothing.
    standard_pressure_bar : float. The gas's standard pressure in the source, before conversion. [bar]
    """

    name: str
    label: str
    composition: Mapping[str, float]
    charge: int
    phase: PhaseKind
    molar_mass: float
    intervals: tuple[Interval, ...]
    formation_enthalpy: float
    source: Source
    u_formation_enthalpy: Uncertainty = field(default_factory=Uncertainty.unknown)
    u_entropy: Uncertainty = field(default_factory=Uncertainty.unknown)
    notes: tuple[Note, ...] = ()
    standard_pressure_bar: float = 1.0
    gibbs_only: bool = False

    def notes_at(self, temperature: float) -> list[str]:
        """The sentences of the notes that hold at a temperature [K]."""
        return [note.sentence for note in self.notes if note.above < temperature < note.below]

    @property
    def t_low(self) -> float:
        """Lower limit of the row's range. [K]"""
        return self.intervals[0].t_low

    @property
    def t_high(self) -> float:
        """Upper limit of the row's range. [K]"""
        return self.intervals[-1].t_high


@dataclass(frozen=True, slots=True)
class Segment:
    """A stretch of temperature over which a substance is one row.

    Parameters
    ----------
    t_low, t_high : float. Limits within the row's range. [K]
    row : SubstanceRow.
    """

    t_low: float
    t_high: float
    row: SubstanceRow


@dataclass(frozen=True, slots=True)
class Substance:
    """What an equation names: one row, or rows that follow each other through transitions.

    Parameters
    ----------
    label : str. What people are shown, such as ``Fe(s)``.
    segments : tuple of Segment, ascending and without gaps.
    stops : str. What lies above the last segment, for the error's sentence ("melts at 1809 K"), or "".
    remark : str. Which form of the substance this is ("graphite"), where that could be mistaken, or "".
    """

    label: str
    segments: tuple[Segment, ...]
    stops: str = ""
    remark: str = ""

    @property
    def composition(self) -> Mapping[str, float]:
        """Atoms in one formula unit."""
        return self.segments[0].row.composition

    @property
    def charge(self) -> int:
        """Charge number."""
        return self.segments[0].row.charge

    @property
    def phase(self) -> PhaseKind:
        """The kind of phase: g, l, s or aq."""
        return self.segments[0].row.phase

    @property
    def t_low(self) -> float:
        """Lower limit of the substance's range. [K]"""
        return self.segments[0].t_low

    @property
    def t_high(self) -> float:
        """Upper limit of the substance's range. [K]"""
        return self.segments[-1].t_high
