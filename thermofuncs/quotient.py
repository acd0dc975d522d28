"""The reaction quotient, the affinity and the cell voltage.

    ln Q = Σ ν ln a,  A = RT ln(K/Q),  E = (RT/nF) ln(K/Q)

(IUPAC Green Book, 3rd ed., 2007, sections 2.11 and 2.13).
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from thermofuncs.errors import (
    ActivityMissing,
    ActivityNotPositive,
    ActivityRow,
    BadActivityTable,
    ElectronCount,
    FormulaNotRead,
    FormulaTooLong,
    QuantityOfAnotherPhase,
    StrangeActivity,
    ThermofuncsError,
)
from thermofuncs.reactions import ELECTRON, Composed, Equation, check_balance, parse_equation
from thermofuncs.substances.common_names import normal_text, normalised
from thermofuncs.substances.formulas import parse_species
from thermofuncs.substances.lookup import find_substance, split_phase
from thermofuncs.substances.records import Substance
from thermofuncs.units import F, R, dimension, factor, parse_quantity
from thermofuncs.working import Record, shown

STANDARDS = {
    "pressure": ("bar", "p° = 1 bar"), "molality": ("mol/kg", "b° = 1 mol/kg"),
    "concentration": ("mol/L", "c° = 1 mol/L"),
}  # fmt: skip
ATMOSPHERE = ("atm", "p° = 1 atm")
MEASURED_BY = {
    "g": ("pressure",), "aq": ("molality", "concentration"), None: ("pressure", "molality", "concentration"),
}  # fmt: skip
LARGEST = 1.7976931348623157e308
DEFINITION = "IUPAC Green Book, 3rd ed., 2007, section 2.11"


def activity(
    value: object, species: str, phase: str | None, record: Record | None = None, *, atm: bool = False
) -> float:
    """The activity that a cell states: a number as it is, a quantity divided by its standard.

    Parameters
    ----------
    value : float or str.
    species : str. For the sentence.
    phase : str or None. A gas may have a pressure, a solute a molality or concentration, a pure phase neither;
        None where no phase is known.
    record : Record, filled where given.
    atm : bool. Gases at a standard pressure of 1 atm, else of 1 bar.
    """
    if isinstance(value, bool) or not isinstance(value, int | float | str):
        raise BadActivityTable(species=species, given=repr(value)[:60])
    if isinstance(value, str):
        number, unit = parse_quantity(value, f"the activity of {species}")
        kind = dimension(unit)
        if kind not in STANDARDS:
            raise BadActivityTable(species=species, given=f'"{value}"')
        if kind not in MEASURED_BY.get(phase, ()):
            raise QuantityOfAnotherPhase(species=species, given=value, kind=kind)
        standard, name = ATMOSPHERE if atm and kind == "pressure" else STANDARDS[kind]
        result = number * factor(unit, standard)
        if record is not None:
            record.step(f"a({species})", f"quantity / {name}", value, result, "1", DEFINITION)
            if kind == "concentration":
                record.caution(
                    f"{species} is given as a concentration: its activity is taken as c/(1 mol/L), which is"
                    " the molality only for dilute solutions in water."
                )
    else:
        result = float(value) if abs(value) < LARGEST else math.inf
        if record is not None:
            record.step(f"a({species})", "activity as given", f"{result:.12g}", result, "1")
    if not 0.0 < result < math.inf:
        raise ActivityNotPositive(species=species, given=f"{result:g}")
    return result


def ln_quotient(
    reaction: str, activities: Sequence[Sequence[object]], record: Record | None = None, *, atm: bool = False
) -> float:
    """Natural logarithm of the reaction quotient.

    Parameters
    ----------
    reaction : str. Equation text; a bare e- has the activity 1.
    activities : rows of (species, activity). A number is an activity; a text such as ``0.3 atm`` or
        ``2 mmol/L`` is divided by its standard. A pure phase that is left out has the activity 1.
    record : Record, filled where given.
    atm : bool. Gases at a standard pressure of 1 atm, as in a ln K with that standard; else of 1 bar.

    Raises
    ------
    ThermofuncsError: the equation does not balance, a gas or solute is missing, a species does not occur, an
        activity is not positive, a quantity does not go with the phase.
    """
    equation = parse_equation(reaction)
    species = {
        t.species: _written(t.species) for t in (*equation.reactants, *equation.products) if t.species != ELECTRON
    }
    _check_balance(equation, species, record)
    given = _table(activities, species)
    parts = []
    for coefficient, name in equation.net():
        if name == ELECTRON:
            continue
        phase = species[name].phase
        if name in given:
            a = activity(given[name], name, phase, record, atm=atm)
        elif phase in ("g", "aq", None):
            raise ActivityMissing(species=name, remark="" if phase else ", where its phase is written behind it")
        else:
            a = 1.0
            if record is not None:
                record.caution(f"{name} is not in the table: as a pure phase it is taken with activity 1.")
        parts.append(float(coefficient) * math.log(a))
    value = math.fsum(parts)
    if record is not None:
        terms = " + ".join(shown(p) for p in parts) or "0"
        record.step("ln Q", "Σ ν ln a", terms, value, "1", DEFINITION)
    return value


@dataclass(frozen=True, slots=True)
class _Written:
    """What the text of a species says: what it is, its phase, and what it is made of where that is known."""

    identity: object
    phase: str | None
    composed: Composed | None


def _written(text: str, argument: str = "reaction") -> _Written:
    try:
        formula = parse_species(text, argument)
    except (FormulaNotRead, FormulaTooLong):
        known = _known(text)
        stem, tag = split_phase(normal_text(text))
        return _Written(normalised(stem), tag or (known.phase if known else None), known)
    phase = formula.phase
    if phase is None and (known := _known(text)):
        phase = known.phase
    return _Written((frozenset(formula.exact.items()), formula.charge), phase, formula)


def _known(text: str) -> Substance | None:
    """The substance of the bundled data, for the phase of a text without one and the atoms of a name."""
    try:
        return find_substance(text)
    except ThermofuncsError:
        return None


def _check_balance(equation: Equation, species: Mapping[str, _Written], record: Record | None) -> None:
    composed = {name: written.composed for name, written in species.items() if written.composed is not None}
    unknown = [name for name in species if name not in composed]
    if not unknown:
        check_balance(equation, composed)
    elif record is not None:
        record.caution(f"Whether the reaction balances is not checked: {', '.join(unknown)[:120]} is no formula.")


def _table(activities: Sequence[Sequence[object]], species: Mapping[str, _Written]) -> dict[str, object]:
    """The activities by the equation's own species; the phase may be left out where one matches."""
    found: dict[str, object] = {}
    for row in activities:
        if len(row) != 2:
            raise ActivityRow(given="a single column" if len(row) == 1 else f"{len(row)} columns")
        name, value = row
        if name in (None, ""):
            if value in (None, ""):
                continue
            raise ActivityRow(given=f"the value {str(value)[:60]} beside a blank cell")
        if not isinstance(name, str):
            raise StrangeActivity(species=str(name)[:60], known=", ".join(species)[:120])
        matches = _matching(name, species)
        if len(matches) != 1 or matches[0] in found:
            raise StrangeActivity(species=name[:60], known=", ".join(species)[:120])
        found[matches[0]] = value
    return {name: value for name, value in found.items() if value not in (None, "")}


def _matching(name: str, species: Mapping[str, _Written]) -> list[str]:
    """The equation's species that a cell names: by its text, else by formula or name and phase."""
    text = normal_text(name)
    same = [s for s in species if normal_text(s) == text]
    if same:
        return same
    wanted = _written(name, "activities")
    alike = [s for s, w in species.items() if w.identity == wanted.identity]
    return [s for s in alike if species[s].phase == wanted.phase] or ([] if _has_phase(name) else alike)


def _has_phase(name: str) -> bool:
    try:
        return parse_species(name).phase is not None
    except ThermofuncsError:
        return bool(split_phase(normal_text(name))[1])


def affinity(ln_k: float, ln_q: float, temperature: float, record: Record | None = None) -> float:
    """Affinity RT ln(K/Q): positive, the reaction runs forward. [kJ/mol]

    Parameters
    ----------
    ln_k, ln_q : float.
    temperature : float. [K]
    record : Record, filled where given.
    """
    value = R * temperature * (ln_k - ln_q) / 1000
    if record is not None:
        record.step(
            "A", "RT (ln K − ln Q)", f"{shown(R, 12)} × {temperature:.12g} × ({shown(ln_k)} − {shown(ln_q)}) / 1000",
            value, "kJ/mol", DEFINITION,
        )
    return value


def electrons_in(reaction: str) -> Fraction:
    """Net coefficient of the bare electron: positive on the right."""
    return sum((c for c, s in parse_equation(reaction).net() if s == ELECTRON), Fraction(0))


def cell_voltage(
    ln_k: float, ln_q: float, temperature: float, electrons: float, record: Record | None = None
) -> float:
    """Cell voltage (RT/nF)(ln K − ln Q). [V]

    Parameters
    ----------
    ln_k, ln_q : float.
    temperature : float. [K]
    electrons : float. Electrons that the reaction as written transfers, positive.
    record : Record, filled where given.
    """
    if not 0.0 < electrons < math.inf:
        raise ElectronCount(given=f"{electrons:g}", needed="a positive number")
    value = R * temperature * (ln_k - ln_q) / (electrons * F)
    if record is not None:
        record.step(
            "E", "RT (ln K − ln Q)/(nF)",
            f"{shown(R, 12)} × {temperature:.12g} × ({shown(ln_k)} − {shown(ln_q)})"
            f" / ({electrons:g} × {F:.10g})",
            value, "V", "IUPAC Green Book, 3rd ed., 2007, section 2.13",
        )
    return value
