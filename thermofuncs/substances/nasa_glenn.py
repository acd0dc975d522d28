"""The NASA Glenn records as rows of the house: scaled to its gas constant, with notes and uncertainties.

The publisher fitted with R = 8.31451 J/(mol K). The coefficients of Cp/R and the two integration constants
are multiplied by 8.31451/R when a row is made, so that heat capacities, entropies and enthalpies in joules
are exactly the publisher's.
"""

from __future__ import annotations

import hashlib
from functools import lru_cache
from pathlib import Path

from thermofuncs.substances import codata, printed
from thermofuncs.substances.forms import REFERENCE_TEMPERATURE, Interval
from thermofuncs.substances.printed import PrintedRecord
from thermofuncs.substances.records import Note, Source, SubstanceRow, Uncertainty
from thermofuncs.units import R_FIT_NASA, R

TABLE = Path(__file__).with_name("nasa_glenn.csv")
SCALE = R_FIT_NASA / R

WHITE_PHOSPHORUS = "phosphorus is white phosphorus; red phosphorus is more stable and is not in the data."


@lru_cache(maxsize=1)
def lines() -> list[list[str]]:
    """The fields of every record, as characters."""
    return printed.lines(TABLE.read_text(encoding="utf-8"))


@lru_cache(maxsize=1)
def sha256() -> str:
    """The content hash of the table file."""
    return hashlib.sha256(TABLE.read_bytes()).hexdigest()


@lru_cache(maxsize=4096)
def row(number: int) -> SubstanceRow:
    """The row of a record, by its place in the table from 0."""
    return scaled(printed.record(lines()[number]))


def scaled(record: PrintedRecord) -> SubstanceRow:
    """The row of a printed record, with its coefficients scaled to the house's gas constant."""
    reference = f"{printed.TITLE}, {record.reference}" + (f" ({record.note})" if record.note else "")
    u_enthalpy, u_entropy = uncertainties(record)
    return SubstanceRow(
        name=record.name,
        label=record.label,
        composition=dict(record.composition),
        charge=record.charge,
        phase=record.phase,
        molar_mass=record.molar_mass,
        intervals=tuple(scaled_interval(interval) for interval in record.intervals),
        formation_enthalpy=record.formation_enthalpy,
        source=Source(printed.DATASET, record.place, reference),
        u_formation_enthalpy=u_enthalpy,
        u_entropy=u_entropy,
        notes=notes(record),
    )


def notes(record: PrintedRecord) -> tuple[Note, ...]:
    """The cautions of a record."""
    found = [Note(WHITE_PHOSPHORUS)] if record.name in ("P(cr)", "P(L)") else []
    if record.boils is not None:
        sentence = f"above {record.boils:.5g} K the liquid is stable only under pressure, by this data."
        found.append(Note(sentence, above=record.boils))
    return tuple(found)


def scaled_interval(interval: Interval) -> Interval:
    """An interval with Cp/R, H/R and S/R multiplied by R_fit/R; terms that are zero are dropped."""
    terms = tuple((n, c * SCALE) for n, c in interval.terms if c != 0.0)
    return Interval(interval.t_low, interval.t_high, terms, interval.b1 * SCALE, interval.b2 * SCALE)


def is_reference_element(record: PrintedRecord) -> bool:
    """Whether the formation enthalpy is zero by definition: an element as it is at 298.15 K."""
    limits = [i for i in record.intervals if i.t_low <= REFERENCE_TEMPERATURE <= i.t_high]
    return (
        bool(limits)
        and record.charge == 0
        and len(record.composition) == 1
        and record.formation_enthalpy == 0.0
    )


def uncertainties(record: PrintedRecord) -> tuple[Uncertainty, Uncertainty]:
    """Standard uncertainties of ΔfH° [J/mol] and S° [J/(mol K)] of a record."""
    u_enthalpy, u_entropy = codata.uncertainties(record.chain)
    if is_reference_element(record):
        u_enthalpy = Uncertainty.exact()
    return u_enthalpy, u_entropy
