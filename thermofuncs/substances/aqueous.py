"""Ions in water at 298.15 K and their cautious use around it.

One rule for every ion: ΔfG° at 298.15 K is the anchor, ΔfH° with it fixes the entropy, Cp° is constant where
the source gives it and zero where not, from 273.15 to 373.15 K. H+(aq) has H° = S° = Cp° = 0, so the entropy
of an ion of charge z made of elements E is

    S° = (ΔfH° − ΔfG°)/T + Σ ν S°(E) − z ½ S°(H2)      T = 298.15 K

with the element entropies of the bundled data, which makes ΔfG° come out as printed (convention of Wagman
et al., J. Phys. Chem. Ref. Data 11 Suppl. 2, 1982).
"""

from __future__ import annotations

import csv
import hashlib
import math
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

from thermofuncs.substances import elements, printed
from thermofuncs.substances.forms import REFERENCE_TEMPERATURE, anchored, constant
from thermofuncs.substances.records import ROOM_TOLERANCE, Note, Source, SubstanceRow, Uncertainty
from thermofuncs.units import R

TABLE = Path(__file__).with_name("aqueous_ions.csv")
DATASET = "nbs-1982-ions"
TITLE = "Ions in water at 298.15 K"
REFERENCE = (
    "Wagman et al., The NBS tables of chemical thermodynamic properties, J. Phys. Chem. Ref. Data 11"
    " Suppl. 2, 1982; figures taken from the table of aqueous ions in the chemicals package"
)
T_LOW, T_HIGH = 273.15, 373.15
AGREEMENT = 1000.0  # J/mol between ΔfG° and ΔfH° − TΔfS°


@dataclass(frozen=True, slots=True)
class Ion:
    """One ion as printed.

    Parameters
    ----------
    printed : str. The source's formula, such as ``SO4-2``.
    label : str. As people write it, such as ``SO4^2-(aq)``.
    name : str. The source's name.
    composition : str. As ``O:4 S:1``.
    charge : int.
    enthalpy, gibbs_energy : float or None. ΔfH°, ΔfG° at 298.15 K. [J/mol]
    entropy, heat_capacity : float or None. S°, Cp° at 298.15 K. [J/(mol K)]
    """

    printed: str
    label: str
    name: str
    composition: str
    charge: int
    enthalpy: float | None
    gibbs_energy: float | None
    entropy: float | None
    heat_capacity: float | None


def _number(text: str) -> float | None:
    return float(text) if text else None


@lru_cache(maxsize=1)
def ions() -> tuple[Ion, ...]:
    """Every ion of the table."""
    lines = TABLE.read_text(encoding="utf-8").splitlines()
    rows = csv.DictReader(line for line in lines if not line.startswith("#"))
    return tuple(
        Ion(
            r["printed"], r["label"], r["name"], r["composition"], int(r["charge"]),
            _number(r["dfH298_J_mol"]), _number(r["dfG298_J_mol"]), _number(r["S298_J_mol_K"]),
            _number(r["Cp298_J_mol_K"]),
        )
        for r in rows
    )  # fmt: skip


@lru_cache(maxsize=1)
def sha256() -> str:
    """The content hash of the table file."""
    return hashlib.sha256(TABLE.read_bytes()).hexdigest()


def element_entropy(composition: dict[str, float], charge: int) -> float:
    """Σ ν S°(elements) − z ½ S°(H2) at 298.15 K. [J/(mol K)]"""
    parts = [n * elements.entropy_per_atom(symbol) for symbol, n in composition.items()]
    return math.fsum([*parts, -charge * elements.entropy_per_atom("H")])


@lru_cache(maxsize=512)
def row(number: int) -> SubstanceRow:
    """The row of an ion, by its place in the table from 0."""
    return of_ion(ions()[number])


def of_ion(ion: Ion) -> SubstanceRow:
    """The row that the rule of this module makes of a printed ion with a ΔfG°."""
    composition = dict(printed.parsed_composition(ion.composition))
    at, low, high = REFERENCE_TEMPERATURE, T_LOW, T_HIGH
    sum_of_elements = element_entropy(composition, ion.charge)
    if ion.gibbs_energy is None:
        message = f"{ion.label} has no ΔfG°"
        raise ValueError(message)
    gibbs_only = ion.enthalpy is None
    enthalpy = ion.gibbs_energy if ion.enthalpy is None else ion.enthalpy
    entropy = (enthalpy - ion.gibbs_energy) / at + sum_of_elements
    if ion.label == "H+(aq)":
        entropy = 0.0
    if gibbs_only:
        low, high = at - ROOM_TOLERANCE, at + ROOM_TOLERANCE
    cp = ion.heat_capacity or 0.0
    return SubstanceRow(
        name=ion.printed,
        label=ion.label,
        composition=composition,
        charge=ion.charge,
        phase="aq",
        molar_mass=elements.molar_mass(composition, ion.charge),
        intervals=(anchored(low, high, constant(cp / R), enthalpy / R, entropy / R),),
        formation_enthalpy=math.nan if gibbs_only else enthalpy,
        source=Source(DATASET, ion.printed, f"{REFERENCE}; {ion.name}"),
        u_formation_enthalpy=Uncertainty.exact() if ion.label == "H+(aq)" else Uncertainty.unknown(),
        u_entropy=Uncertainty.exact() if ion.label == "H+(aq)" else Uncertainty.unknown(),
        notes=notes(ion, entropy),
        gibbs_only=gibbs_only,
    )


def notes(ion: Ion, entropy: float) -> tuple[Note, ...]:
    """The cautions: away from 298.15 K, and where the source's own S° does not fit its ΔfG° and ΔfH°."""
    if ion.label == "H+(aq)":
        return ()
    at, sentence = REFERENCE_TEMPERATURE, away(ion)
    found = [Note(sentence, below=at - ROOM_TOLERANCE), Note(sentence, above=at + ROOM_TOLERANCE)]
    if ion.enthalpy is not None and ion.entropy is not None:
        difference = at * (entropy - ion.entropy)
        if abs(difference) > AGREEMENT:
            disagreement = (
                f"the source's ΔfG° differs from its ΔfH° − TΔfS° by {difference / 1000.0:.1f} kJ/mol;"
                " ΔfG° and ΔfH° are used."
            )
            found.append(Note(disagreement))
    return tuple(found)


def away(ion: Ion) -> str:
    """The caution away from 298.15 K."""
    if ion.heat_capacity is None:
        return "data at 298.15 K without a heat capacity, which is taken as zero: use with care elsewhere."
    return (
        f"data at 298.15 K with a constant Cp of {ion.heat_capacity:g} J/(mol K): use with care elsewhere."
    )
