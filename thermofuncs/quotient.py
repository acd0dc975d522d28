"""The reaction quotient, the affinity and the cell voltage.

    ln Q = Σ ν ln a,  A = RT ln(K/Q),  E = (RT/nF) ln(K/Q)

(IUPAC Green Book, 3rd ed., 2007, sections 2.11 and 2.13).
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction

from thermofuncs.errors import (
    ActivityMissing,
    ActivityNotPositive,
    BadActivityTable,
    ElectronCount,
    StrangeActivity,
)
from thermofuncs.reactions import ELECTRON, Equation, parse_equation
from thermofuncs.substances.formulas import Formula, parse_species
from thermofuncs.units import F, R, dimension, factor, parse_quantity
from thermofuncs.working import Record, shown

STANDARDS = {"pressure": ("bar", "p° = 1 bar"), "molality": ("mol/kg", "b° = 1 mol/kg"),
             "concentration": ("mol/L", "c° = 1 mol/L")}
DEFINITION = "IUPAC Green Book, 3rd ed., 2007, section 2.11"


def activity(value: object, species: str, record: Record | None) -> float:
    """The activity that a cell states: a number as it is, a quantity divided by its standard.

    Parameters
    ----------
    value : float or str.
    species : str. For the sentence.
    record : Record, filled where given.
    """
    if isinstance(value, bool) or not isinstance(value, int | float | str):
        raise BadActivityTable(species=species, given=repr(value))
    if isinstance(value, str):
        number, unit = parse_quantity(value, f"the activity of {species}")
        kind = dimension(unit)
        if kind not in STANDARDS:
            raise BadActivityTable(species=species, given=f'"{value}"')
        standard, name = STANDARDS[kind]
        result = number * factor(unit, standard)
        if record is not None:
            record.step(f"a({species})", f"quantity / {name}", value, result, "1", DEFINITION)
            if kind == "concentration":
                record.caution(
                    f"{species} is given as a concentration: its activity is taken as c/(1 mol/L), which is"
                    " the molality only for dilute solutions in water."
                )
    else:
        result = float(value)
        if record is not None:
            record.step(f"a({species})", "activity as given", f"{result:.12g}", result, "1")
    if not 0.0 < result < math.inf:
        raise ActivityNotPositive(species=species, given=f"{result:g}")
    return result


def ln_quotient(reaction: str, activities: Sequence[Sequence[object]], record: Record | None = None) -> float:
    """Natural logarithm of the reaction quotient.

    Parameters
    ----------
    reaction : str. Equation text; a bare e- has the activity 1.
    activities : rows of (species, activity). A number is an activity; a text such as ``0.3 atm`` or
        ``2 mmol/L`` is divided by its standard.
    record : Record, filled where given.

    Raises
    ------
    ThermofuncsError: a gas or solute is missing, a species does not occur, an activity is not positive.
    """
    equation = parse_equation(reaction)
    given = _table(activities, equation)
    parts = []
    for coefficient, species in equation.net():
        if species == ELECTRON:
            continue
        if species in given:
            a = activity(given[species], species, record)
        else:
            phase = parse_species(species).phase
            if phase in ("g", "aq", None):
                raise ActivityMissing(species=species)
            a = 1.0
            if record is not None:
                record.caution(f"{species} is not in the table: as a pure phase it is taken with activity 1.")
        parts.append(float(coefficient) * math.log(a))
    value = math.fsum(parts)
    if record is not None:
        terms = " + ".join(shown(p) for p in parts) or "0"
        record.step("ln Q", "Σ ν ln a", terms, value, "1", DEFINITION)
    return value


def _key(formula: Formula) -> tuple[object, ...]:
    return (tuple(sorted(formula.composition.items())), formula.charge, formula.phase)


def _table(activities: Sequence[Sequence[object]], equation: Equation) -> dict[str, object]:
    """The activities by the equation's own species; the phase may be left out where one matches."""
    wanted = {s: parse_species(s) for _, s in equation.net() if s != ELECTRON}
    found: dict[str, object] = {}
    for row in activities:
        if len(row) < 2:
            raise BadActivityTable(species="the table", given="one column")
        name, value = row[0], row[1]
        if name in (None, ""):
            continue
        formula = parse_species(str(name))
        matches = [
            s for s, f in wanted.items()
            if _key(f) == _key(formula)
            or (formula.phase is None and _key(f)[:2] == _key(formula)[:2])
        ]
        if len(matches) != 1 or matches[0] in found:
            raise StrangeActivity(species=str(name), known=", ".join(wanted))
        if value not in (None, ""):
            found[matches[0]] = value
    return found


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
