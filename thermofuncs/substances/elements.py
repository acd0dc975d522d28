"""Atomic masses, and the reference phase of every element over the temperature.

Formation properties count from each element in its reference phase at the temperature: its solid, then its
liquid, then its gas from the temperature where that gas at 1 bar has the liquid's Gibbs energy. This is the
convention of the NIST-JANAF tables (Chase, NIST-JANAF Thermochemical Tables, 4th ed., 1998). The switch to
the gas is computed from the bundled data, so that the Gibbs energy is continuous; the table beside gives the
temperature that the tables of 1998 print for comparison.
"""

from __future__ import annotations

import csv
from collections.abc import Mapping
from dataclasses import replace
from functools import lru_cache
from pathlib import Path

from thermofuncs.errors import NoAtomicMass, NoReferenceElement
from thermofuncs.substances.forms import (
    REFERENCE_TEMPERATURE,
    Interval,
    anchored,
    constant,
    enthalpy,
    entropy,
)
from thermofuncs.substances.records import (
    ROOM_TOLERANCE,
    Segment,
    Source,
    Substance,
    SubstanceRow,
    Uncertainty,
)
from thermofuncs.units import R

HERE = Path(__file__).parent


def _rows(name: str) -> list[dict[str, str]]:
    lines = (HERE / name).read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


@lru_cache(maxsize=1)
def masses() -> dict[str, float]:
    """Atomic masses by symbol; ``e`` is the electron. [g/mol]"""
    return {row["symbol"]: float(row["mass_g_mol"]) for row in _rows("atomic_masses.csv")}


@lru_cache(maxsize=1)
def references() -> dict[str, dict[str, str]]:
    """The lines of the table of reference phases, by symbol."""
    return {row["symbol"]: row for row in _rows("reference_elements.csv")}


@lru_cache(maxsize=1)
def room_entropies() -> dict[str, float]:
    """S° at 298.15 K of elements of which the data has nothing but ions. [J/(mol K)]"""
    return {row["symbol"]: float(row["S298_J_mol_K"]) for row in _rows("element_entropies.csv")}


def atomic_mass(symbol: str, argument: str = "formula") -> float:
    """Atomic mass of an element. [g/mol]

    Parameters
    ----------
    symbol : str. Such as ``Fe``; ``D`` is deuterium.
    argument : str. The name used in an error's sentence.

    Raises
    ------
    NoAtomicMass
        The symbol is no element with an atomic mass.

    Examples
    --------
    >>> atomic_mass("Fe")  # g/mol
    55.845
    """
    try:
        return masses()[symbol]
    except KeyError:
        raise NoAtomicMass(argument=argument, given=symbol) from None


def molar_mass(composition: Mapping[str, float], charge: int = 0, argument: str = "formula") -> float:
    """Molar mass of a formula unit, electrons included. [g/mol]

    Parameters
    ----------
    composition : mapping of element symbol to atoms.
    charge : int. Charge number.
    argument : str. The name used in an error's sentence.
    """
    total = sum(atoms * atomic_mass(symbol, argument) for symbol, atoms in composition.items())
    return total - charge * masses()["e"]


def per_atom(row: SubstanceRow, symbol: str) -> SubstanceRow:
    """A row of an element, divided by the atoms in its formula unit."""
    n = row.composition[symbol]
    if n == 1:
        return row
    share = "½" if n == 2 else f"1/{n:g}"
    return replace(
        row,
        label=f"{share} {row.label}",
        composition={symbol: 1.0},
        molar_mass=row.molar_mass / n,
        intervals=tuple(
            Interval(i.t_low, i.t_high, tuple((k, c / n) for k, c in i.terms), i.b1 / n, i.b2 / n)
            for i in row.intervals
        ),
        formation_enthalpy=row.formation_enthalpy / n,
        u_formation_enthalpy=Uncertainty.unknown(),
        u_entropy=Uncertainty.unknown(),
    )


@lru_cache(maxsize=256)
def reference_element(symbol: str, argument: str = "substance") -> Substance:
    """The reference phases of an element, as segments that follow each other.

    Parameters
    ----------
    symbol : str. Element symbol; ``E`` is the electron gas.
    argument : str. The name used in an error's sentence.

    Raises
    ------
    NoReferenceElement
        The data has no reference phase of the element.

    Examples
    --------
    >>> [(s.row.label, s.t_high) for s in reference_element("S").segments][-1]  # K
    ('½ S2(g)', 6000.0)
    """
    from thermofuncs.substances.chains import chain  # noqa: PLC0415  chains need the ions, which need this

    line = references().get(symbol)
    if line is None:
        return _at_room_temperature(symbol, argument)
    phases = [chain(label) for label in line["phases"].split()]
    atoms = {p.composition.get(symbol, 1.0) for p in phases}
    limits = [p.t_high for p in phases]
    if line["gas_from_K"]:
        limits[-2] = float(line["gas_from_K"])
    segments: list[Segment] = []
    for phase, limit in zip(phases, limits, strict=True):
        for part in phase.segments:
            low = segments[-1].t_high if segments else part.t_low
            high = min(part.t_high, limit)
            if low < high:
                row = part.row if len(atoms) == 1 else per_atom(part.row, symbol)
                segments.append(Segment(low, high, row))
    return Substance(f"{symbol}, reference phases", tuple(segments), "", line["note"])


def _at_room_temperature(symbol: str, argument: str) -> Substance:
    """An element of which only S° at 298.15 K is known, within 0.5 K of there."""
    s = room_entropies().get(symbol)
    if s is None:
        raise NoReferenceElement(argument=argument, given=symbol)
    at = REFERENCE_TEMPERATURE
    low, high = at - ROOM_TOLERANCE, at + ROOM_TOLERANCE
    row = SubstanceRow(
        name=symbol,
        label=f"{symbol}(s)",
        composition={symbol: 1.0},
        charge=0,
        phase="s",
        molar_mass=atomic_mass(symbol),
        intervals=(anchored(low, high, constant(0.0), 0.0, s / R),),
        formation_enthalpy=0.0,
        source=Source("nbs-1982-ions", f"element {symbol}", "S° at 298.15 K of the element, see the table"),
        u_formation_enthalpy=Uncertainty.exact(),
    )
    return Substance(f"{symbol}, reference phases", (Segment(low, high, row),), "", "at 298.15 K alone")


@lru_cache(maxsize=256)
def entropy_per_atom(symbol: str) -> float:
    """S° at 298.15 K of an element in its reference phase, for one mole of atoms. [J/(mol K)]"""
    at = REFERENCE_TEMPERATURE
    segment = next(s for s in reference_element(symbol).segments if s.t_low <= at <= s.t_high)
    interval = next(i for i in segment.row.intervals if at <= i.t_high)
    return R * entropy(interval, at) / segment.row.composition[symbol]


def gas_from(liquid: Substance, gas: Substance, symbol: str) -> float | None:
    """Where an element's gas at 1 bar has the Gibbs energy of its liquid, for equal atoms. [K]

    Parameters
    ----------
    liquid, gas : Substance. Phases of the element.
    symbol : str. The element.
    """
    low, high = max(liquid.t_low, gas.t_low), min(liquid.t_high, gas.t_high)

    def difference(temperature: float) -> float:
        values = []
        for phase in (gas, liquid):
            row = next(s.row for s in phase.segments if temperature <= s.t_high)
            interval = next(i for i in row.intervals if temperature <= i.t_high)
            g = enthalpy(interval, temperature) - entropy(interval, temperature)
            values.append(g / row.composition[symbol])
        return values[0] - values[1]

    if low >= high or difference(low) <= 0.0 or difference(high) >= 0.0:
        return None
    while high - low > 1e-7:
        middle = 0.5 * (low + high)
        low, high = (middle, high) if difference(middle) > 0.0 else (low, middle)
    return 0.5 * (low + high)
