"""Atomic masses and reference phases."""

from __future__ import annotations

import csv
from itertools import pairwise
from pathlib import Path

import pytest

from thermofuncs.errors import NoAtomicMass, NoReferenceElement
from thermofuncs.substances import (
    atomic_mass,
    chains,
    elements,
    forms,
    gates,
    molar_mass,
    nasa_glenn,
    printed,
    reference_element,
)
from thermofuncs.substances.index import index

ABRIDGED = Path(__file__).parent.parent / "reference" / "atomic_weights_abridged.csv"

SYMBOLS = sorted(elements.references())

# K. The gases of these elements have other formation enthalpies in the publisher's set than in the tables of
# 1998 (boron 565 against 560 kJ/mol, for instance), so their liquids reach 1 bar elsewhere.
OTHER_GASES = {"B": 140.0, "Ba": 70.0, "Sr": 60.0, "Nb": 80.0, "Zr": 95.0, "Co": 16.0, "V": 16.0, "Mn": 10.0}


@pytest.mark.parametrize(
    ("symbol", "mass"), [("H", 1.008), ("C", 12.011), ("O", 15.999), ("Fe", 55.845), ("U", 238.02891)]
)
def test_atomic_masses(symbol: str, mass: float) -> None:
    """Atomic masses are the IUPAC conventional values."""
    assert atomic_mass(symbol) == mass


def test_the_masses_round_to_the_abridged_atomic_weights() -> None:
    """Every atomic mass rounds to IUPAC's abridged standard atomic weight of 2021."""
    lines = ABRIDGED.read_text(encoding="utf-8").splitlines()
    rows = list(csv.DictReader(line for line in lines if not line.startswith("#")))
    assert len(rows) == 79
    for row in rows:
        printed_digit = 10.0 ** -len(row["abridged"].partition(".")[2])
        assert abs(atomic_mass(row["symbol"]) - float(row["abridged"])) <= 0.5001 * printed_digit, row


def test_the_publishers_masses_agree_with_iupac() -> None:
    """The atomic masses behind the bundled records agree with IUPAC's within 0.02 %; zinc and others were revised."""
    records = [printed.record(fields) for fields in nasa_glenn.lines()]
    for symbol, mass in gates.atomic_masses(records).items():
        if symbol in elements.masses() and symbol not in ("e", "Rn"):
            assert elements.masses()[symbol] == pytest.approx(mass, rel=6e-4 if symbol in ("Ge", "Li") else 2.5e-4)


def test_molar_mass_counts_the_electrons() -> None:
    """An ion is lighter than its atom by the electrons that it lost."""
    assert molar_mass({"Na": 1.0}, 1) == pytest.approx(22.98976928 - 0.00054858, abs=1e-7)


def test_an_unknown_symbol_is_refused() -> None:
    """A symbol that is no element is refused by name."""
    with pytest.raises(NoAtomicMass) as raised:
        atomic_mass("Qq")
    assert raised.value.sentence == "formula has 'Qq', which is no element with an atomic mass in the data."


def test_an_element_without_data_is_refused() -> None:
    """An element without reference phase is #N/A."""
    with pytest.raises(NoReferenceElement) as raised:
        reference_element("Os")
    assert raised.value.sentence == "substance: the data has no reference phase of the element 'Os'."


def test_every_element_of_the_data_has_a_reference() -> None:
    """Every element of a usable record has a reference phase, or an entropy at 298.15 K."""
    symbols = {p.split(":")[0] for e in index().entries if not e.usable for p in e.key.partition("|")[0].split()}
    for symbol in symbols:
        assert reference_element(symbol).composition[symbol] >= 1.0


@pytest.mark.parametrize("symbol", SYMBOLS)
def test_the_formation_enthalpy_of_an_element_is_zero(symbol: str) -> None:
    """The enthalpy of an element in its reference phase at 298.15 K is zero within 0.6 J/mol."""
    segment = next(s for s in reference_element(symbol).segments if s.t_low <= 298.15 <= s.t_high)
    interval = next(i for i in segment.row.intervals if i.t_high >= 298.15)
    assert abs(forms.enthalpy(interval, 298.15) * 8.314 * 298.15) < 0.6


@pytest.mark.parametrize("symbol", SYMBOLS)
def test_the_gibbs_energy_of_the_reference_is_continuous(symbol: str) -> None:
    """The Gibbs energy of a reference element does not jump where its phase switches."""
    segments = reference_element(symbol).segments
    for lower, upper in pairwise(segments):
        at = lower.t_high
        assert lower.t_high == upper.t_low
        values = []
        for segment in (lower, upper):
            interval = next(i for i in segment.row.intervals if at <= i.t_high)
            values.append(gates.gibbs_over_rt(interval, at) / segment.row.composition.get(symbol, 1.0))
        assert values[0] == pytest.approx(values[1], abs=2e-4)


@pytest.mark.parametrize("symbol", SYMBOLS)
def test_the_switch_to_the_gas(symbol: str) -> None:
    """The printed switch is where liquid and gas are equal, near the temperature of the tables of 1998."""
    line = elements.references()[symbol]
    if not line["gas_from_K"]:
        return
    liquid, gas = (chains.chain(label) for label in line["phases"].split()[-2:])
    assert elements.gas_from(liquid, gas, symbol) == pytest.approx(float(line["gas_from_K"]), abs=1e-3)
    if line["janaf_gas_from_K"]:
        bound = OTHER_GASES.get(symbol, 7.0)
        assert float(line["gas_from_K"]) == pytest.approx(float(line["janaf_gas_from_K"]), abs=bound)


@pytest.mark.parametrize(
    ("symbol", "label"), [("S", "½ S2(g)"), ("P", "½ P2(g)"), ("Zn", "Zn(g)"), ("Br", "Br2(g)"), ("C", "C(gr)")]
)
def test_the_last_reference_phase(symbol: str, label: str) -> None:
    """Sulfur ends as S2, phosphorus as P2, a metal as its atoms, carbon as graphite."""
    assert reference_element(symbol).segments[-1].row.label == label


def test_the_electron_is_its_own_reference() -> None:
    """The reference of the electron is the electron gas."""
    assert reference_element("E").label == "E, reference phases"
    assert reference_element("E").segments[0].row.name == "e-"
