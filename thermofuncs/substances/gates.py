"""What a table of NASA Glenn records must fulfil before it is used.

Each gate takes a record as printed and gives a sentence for each fault; no fault, no sentence. The importer
runs them before it writes the table, the tests run them on the table that is shipped.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from thermofuncs.substances.forms import REFERENCE_TEMPERATURE, Interval, enthalpy, entropy
from thermofuncs.substances.printed import PrintedRecord
from thermofuncs.units import R_FIT_NASA

# J/mol. The publisher's integration constants are printed to 10 digits, and nine tenths of the records agree
# to 0.001 J/mol.
ENTHALPY_TOLERANCE = 0.05
ENTHALPY_EXCEPTIONS: Mapping[str, str] = {
    "Hg(L)": "ΔfH° is zero by definition and the fit is off by 0.53 J/mol",
    "U3O8(II)": "the fit starts at 300 K",
    "FeOCL(cr)": "the fit starts at 300 K",
    "H2O(L)": "the fit of the liquid follows the steam tables to 0.09 J/mol",
}

# Units of G/(RT). The 99th percentile of the joints is 1e-5.
JOINT_TOLERANCE = 2e-4
JOINT_EXCEPTIONS: Mapping[str, float] = {
    "NaCN(III)": 0.031,
    "NaCN(II)": 0.018,
    "TiB2(cr)": 3.4e-4,
    "ALOCL": 3.1e-4,
}

# Relative. The publisher's atomic masses and the sum of the composition agree to the printed digits.
MASS_TOLERANCE = 2e-6
MASS_EXCEPTIONS: Mapping[str, str] = {
    "FeCL3": "the gas's mass is printed 0.0009 g/mol below that of its crystal",
    "Air": "the composition is rounded to five digits",
    "ADN": "the mass printed is not that of the composition",
    "HAN": "the mass printed is rounded",
    "LMP-103S": "the mass printed is rounded and of a mixture",
    "Biodiesel": "the mass printed is of a mixture",
    "n-Butanol": "the mass printed is rounded",
    "InertAir": "the inert elements have no mass of their own",
}


def gibbs_over_rt(interval: Interval, temperature: float) -> float:
    """G/(RT) of an interval at a temperature [K]."""
    return enthalpy(interval, temperature) - entropy(interval, temperature)


def ascending(record: PrintedRecord) -> Iterator[str]:
    """Each interval has its limits in order and starts where the one before it ends."""
    for interval in record.intervals:
        if not interval.t_low < interval.t_high:
            yield f"{record.place}: the interval {interval.t_low:g} to {interval.t_high:g} K is empty"
    for lower, upper in zip(record.intervals, record.intervals[1:], strict=False):
        if lower.t_high != upper.t_low:
            yield f"{record.place}: a gap from {lower.t_high:g} to {upper.t_low:g} K"


def enthalpy_at_298(record: PrintedRecord) -> Iterator[str]:
    """The enthalpy at 298.15 K is the formation enthalpy printed."""
    at = REFERENCE_TEMPERATURE
    for interval in record.intervals:
        if interval.t_low <= at <= interval.t_high:
            difference = enthalpy(interval, at) * R_FIT_NASA * at - record.formation_enthalpy
            limit = 1.0 if record.name in ENTHALPY_EXCEPTIONS else ENTHALPY_TOLERANCE
            if abs(difference) > limit:
                yield f"{record.place}: H(298.15 K) is {difference:.3g} J/mol off the formation enthalpy"
            return


def joints(record: PrintedRecord) -> Iterator[str]:
    """The Gibbs energy is the same on both sides of an interval's joint."""
    for lower, upper in zip(record.intervals, record.intervals[1:], strict=False):
        at = lower.t_high
        jump = gibbs_over_rt(upper, at) - gibbs_over_rt(lower, at)
        if abs(jump) > JOINT_EXCEPTIONS.get(record.name, JOINT_TOLERANCE):
            yield f"{record.place}: G/(RT) jumps by {jump:.3g} at {at:g} K"


def molar_mass(record: PrintedRecord, masses: Mapping[str, float]) -> Iterator[str]:
    """The molar mass is the sum over the composition, with the publisher's own atomic masses."""
    if record.name in MASS_EXCEPTIONS or any(symbol not in masses for symbol, _ in record.composition):
        return
    total = sum(masses[symbol] * atoms for symbol, atoms in record.composition)
    if record.charge:
        total -= record.charge * masses["e"]
    if abs(total - record.molar_mass) > MASS_TOLERANCE * record.molar_mass:
        yield f"{record.place}: the molar mass is {record.molar_mass} and the composition gives {total:.6f}"


def atomic_masses(records: list[PrintedRecord]) -> dict[str, float]:
    """The publisher's atomic masses, from the records of one element or of the electron."""
    masses: dict[str, float] = {}
    for record in records:
        if record.name == "e-":
            masses["e"] = record.molar_mass
        elif len(record.composition) == 1 and record.charge == 0:
            symbol, atoms = record.composition[0]
            masses.setdefault(symbol, record.molar_mass / atoms)
    return masses


def faults(records: list[PrintedRecord]) -> list[str]:
    """Every fault of every record."""
    masses = atomic_masses(records)
    found: list[str] = []
    keys: set[tuple[str, int, str]] = set()
    for record in records:
        key = (record.name, record.phase_index, record.phase)
        if key in keys:
            found.append(f"{record.place}: the name and phase index stand twice")
        keys.add(key)
        for gate in (ascending, enthalpy_at_298, joints):
            found.extend(gate(record))
        found.extend(molar_mass(record, masses))
    return found
