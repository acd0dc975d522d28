"""Makes the substances of a user's table: forms of the heat capacity, anchors, intervals."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import cast

from thermofuncs.errors import ThermofuncsError
from thermofuncs.substances import elements, forms
from thermofuncs.substances.common_names import PHASES as WRITTEN_PHASES
from thermofuncs.substances.forms import REFERENCE_TEMPERATURE, Interval, anchored
from thermofuncs.substances.formulas import parse_species
from thermofuncs.substances.records import (
    Note,
    PhaseKind,
    Segment,
    Source,
    Substance,
    SubstanceRow,
    Uncertainty,
)
from thermofuncs.substances.user_cells import Cells
from thermofuncs.units import R

PHASES = {**WRITTEN_PHASES, "gas": "g", "liquid": "l", "solid": "s"}
LARGEST_EXPONENT = 12
FORMS = ("constant", "powers", "Shomate", "NASA-7", "NASA-9")
SHOMATE = ("A", "B", "C", "D", "E")
Terms = tuple[tuple[float, float], ...]


@dataclass(frozen=True, slots=True)
class Identity:
    """What a substance is: label, composition, charge, phase."""

    label: str
    composition: dict[str, float]
    charge: int
    phase: PhaseKind


def substance_of(name: str, members: list[Cells]) -> Substance | None:
    """The substance of the rows that share a name; None, and faults, where a cell cannot be used.

    Parameters
    ----------
    name : str. The text of the column ``substance``.
    members : list of Cells. Its rows.
    """
    first = members[0]
    identity = _identity(name, first)
    sources = [cells.source(name) for cells in members]
    limited = [(limits, cells) for cells in members if (limits := cells.limits()) is not None]
    if identity is None or len(limited) < len(members):
        return None
    intervals: list[Interval] = []
    for limits, cells in sorted(limited, key=lambda pair: pair[0]):
        if intervals and abs(intervals[-1].t_high - limits[0]) > 1e-6 * limits[0]:
            before = f"the interval before it ends at {intervals[-1].t_high:g} K"
            cells.fault("T_low", f"is {limits[0]:g} K, and {before}")
            return None
        interval = _interval(limits, cells, identity, intervals[-1] if intervals else None)
        if interval is None:
            return None
        intervals.append(interval)
    u_enthalpy, u_entropy = first.energy("u(dfH)"), first.entropy("u(S)")
    p_ref = first.pressure()
    if None in sources or p_ref is None:
        return None
    references = dict.fromkeys(source.reference for source in sources if source is not None)
    at = REFERENCE_TEMPERATURE
    near = next((i for i in intervals if at <= i.t_high), intervals[-1])
    row = SubstanceRow(
        name=name,
        label=identity.label,
        composition=identity.composition,
        charge=identity.charge,
        phase=identity.phase,
        molar_mass=elements.molar_mass(identity.composition, identity.charge),
        intervals=tuple(intervals),
        formation_enthalpy=forms.enthalpy(near, at) * R * at,
        source=Source("worksheet table", name, "; ".join(references)),
        u_formation_enthalpy=_uncertainty(first, "u(dfH)", u_enthalpy),
        u_entropy=_uncertainty(first, "u(S)", u_entropy),
        notes=tuple(Note(note) for note in dict.fromkeys(c.text("note") for c in members) if note),
        standard_pressure_bar=p_ref,
    )
    return Substance(identity.label, (Segment(row.t_low, row.t_high, row),))


def _uncertainty(cells: Cells, column: str, value: float | None) -> Uncertainty:
    """A blank uncertainty is unknown, never zero."""
    if value is None:
        return Uncertainty.unknown()
    if value < 0.0:
        cells.fault(column, "is below 0")
    return Uncertainty.given(value)


def _identity(name: str, cells: Cells) -> Identity | None:
    """Composition, charge and phase, from the name itself or from the columns formula and phase."""
    written = cells.text("formula") or name
    column = "formula" if cells.text("formula") else "substance"
    try:
        formula = parse_species(written)
        elements.molar_mass(formula.composition, formula.charge)
    except ThermofuncsError as error:
        more = "" if column == "formula" else "; a name needs its formula in the column formula"
        cells.fault(column, error.sentence.rstrip(".") + more)
        return None
    in_name = name[name.rfind("(") + 1 : -1] if name.endswith(")") else ""
    tag = cells.text("phase") or formula.phase or (in_name if in_name in PHASES else "")
    if not tag:
        cells.fault("phase", f"{name} needs a phase: g, l, s or aq")
        return None
    phase = PHASES.get(tag)
    if phase is None and cells.text("phase"):
        cells.fault("phase", f"is {tag!r}: g, l, s or aq is needed")
        return None
    label = name if column == "formula" or name.endswith(")") else f"{name}({phase})"
    if label.endswith(("(cr)", "(L)")):
        label = label[: label.rfind("(")] + f"({phase})"
    return Identity(label, formula.composition, formula.charge, cast("PhaseKind", phase or "s"))


def _form(cells: Cells) -> str | None:
    """The name of the row's form of the heat capacity."""
    written = cells.text("form")
    if not written:
        powers = any(c.startswith("T^") and cells.cell(c) is not None for c in cells.table.columns)
        return "powers" if powers else "constant"
    plain = written.casefold().replace("-", "").replace(" ", "")
    for form in FORMS:
        if plain == form.casefold().replace("-", ""):
            return form
    cells.fault("form", f"is {written!r}: {', '.join(FORMS)} are known")
    return None


def _terms(form: str, cells: Cells) -> Terms | None:  # noqa: PLR0911  one return for each form and its faults
    """Cp/R as powers of T."""
    if form == "constant":
        cp = cells.entropy("Cp", required=True)
        return None if cp is None else forms.constant(cp / R)
    if form == "powers":
        terms = []
        for column in cells.table.columns:
            value = cells.number_of(column) if column.startswith("T^") else None
            scale = cells.heat_capacity_factor(column) if value is not None else None
            if value is not None and abs(float(column[2:])) > LARGEST_EXPONENT:
                cells.fault(f"Cp {column}", f"the exponents of T go from -{LARGEST_EXPONENT} to {LARGEST_EXPONENT}")
            elif value is not None and scale is not None:
                terms.append((float(column[2:]), value * scale / R))
        if not terms:
            cells.fault("Cp T^n", "no coefficient is given")
            return None
        return tuple(terms)
    if form == "Shomate":
        values = [cells.number_of(c, required=True) for c in SHOMATE]
        scale = cells.heat_capacity_factor("A")
        if None in values or scale is None:
            return None
        return forms.shomate(tuple(v * scale for v in values if v is not None), R)
    count = 5 if form == "NASA-7" else 7
    values = [cells.number_of(f"a{i}", required=True) for i in range(1, count + 1)]
    if None in values:
        return None
    a = tuple(v for v in values if v is not None)
    return forms.nasa7(a) if form == "NASA-7" else forms.nasa9(a)


def _interval(  # noqa: PLR0911  one return for each way to fix H and S, and for the faults
    limits: tuple[float, float], cells: Cells, identity: Identity, before: Interval | None
) -> Interval | None:
    """The interval of a row, with H and S from its constants, its dfH and S, or the interval before it."""
    form = _form(cells)
    terms = _terms(form, cells) if form else None
    if form is None or terms is None:
        return None
    low, high = limits
    if form.startswith("NASA"):
        return _nasa(form, limits, terms, cells, identity)
    enthalpy, entropy = cells.energy("dfH"), cells.entropy("S")
    t_ref = cells.temperature("T_ref", default=REFERENCE_TEMPERATURE)
    if t_ref is None:
        return None
    if enthalpy is None and entropy is None and before is not None:
        h, s = forms.enthalpy(before, low) * low, forms.entropy(before, low)
        return anchored(low, high, terms, h, s, low)
    if form == "Shomate" and enthalpy is None and entropy is None:
        return _shomate(limits, terms, cells, identity)
    if enthalpy is None or entropy is None:
        for column, value in (("dfH", enthalpy), ("S", entropy)):
            if value is None:
                cells.fault(column, "is blank")
        return None
    try:
        h = enthalpy / R + _elements_enthalpy(identity, t_ref)
    except ThermofuncsError as error:
        cells.fault("T_ref", error.sentence.rstrip("."))
        return None
    return anchored(low, high, terms, h, entropy / R + _to_one_bar(cells, identity), t_ref)


def _to_one_bar(cells: Cells, identity: Identity) -> float:
    """What the entropy of a gas gains from its source's standard pressure to 1 bar, over R."""
    pressure = cells.pressure()
    return math.log(pressure) if identity.phase == "g" and pressure is not None else 0.0


def _elements_enthalpy(identity: Identity, t_ref: float) -> float:
    """Σ ν H°/R of the elements at a temperature, counted from 298.15 K. [K]

    A formation enthalpy at another temperature than 298.15 K counts from the elements there.
    """
    if t_ref == REFERENCE_TEMPERATURE:
        return 0.0
    total = []
    for symbol, atoms in identity.composition.items():
        element = elements.reference_element(symbol, "data")
        segment = next((s for s in element.segments if s.t_low <= t_ref <= s.t_high), element.segments[-1])
        interval = next((i for i in segment.row.intervals if t_ref <= i.t_high), segment.row.intervals[-1])
        per_atom = forms.enthalpy(interval, t_ref) * t_ref / segment.row.composition[symbol]
        total.append(atoms * per_atom)
    return math.fsum(total)


def _nasa(
    form: str, limits: tuple[float, float], terms: Terms, cells: Cells, identity: Identity
) -> Interval | None:
    """An interval of a NASA form, whose constants carry the enthalpy and the entropy."""
    names = ("a6", "a7") if form == "NASA-7" else ("b1", "b2")
    b1, b2 = (cells.number_of(c, required=True) for c in names)
    for column in ("dfH", "S"):
        if cells.cell(column) is not None:
            cells.fault(column, f"is given beside {names[0]} and {names[1]}, which carry it: leave it blank")
    if b1 is None or b2 is None:
        return None
    return Interval(*limits, terms, b1, b2 + _to_one_bar(cells, identity))


def _shomate(limits: tuple[float, float], terms: Terms, cells: Cells, identity: Identity) -> Interval | None:
    """An interval of the Shomate equation with its constants F and G.

    H° = A t + B t²/2 + C t³/3 + D t⁴/4 − E/t + F in kJ/mol and S° = A ln t + B t + … + G in J/(mol K),
    t = T/1000, as the NIST Chemistry WebBook prints them.
    """
    f, g = cells.number_of("F", required=True), cells.number_of("G", required=True)
    scale = cells.heat_capacity_factor("A")
    a = cells.number_of("A")
    if f is None or g is None or scale is None or a is None:
        return None
    # ln t = ln T − ln 1000, so G loses A ln 1000 when the sum is written in T
    b2 = (g - a * math.log(1000.0)) * scale / R + _to_one_bar(cells, identity)
    return Interval(*limits, terms, f * scale * 1000.0 / R, b2)
