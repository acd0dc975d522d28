"""The reaction quotient, the affinity and the cell voltage.

Standard potentials: Bard, Parsons & Jordan (eds.), Standard Potentials in Aqueous Solution, IUPAC/Dekker 1985,
as printed in the CRC Handbook's table of electrochemical series; values and citation from memory.
"""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

import thermofuncs
from thermofuncs.errors import (
    ActivityMissing,
    ActivityNotPositive,
    ActivityRow,
    BadActivityTable,
    BareElectron,
    DecimalComma,
    ElectronCount,
    GaugePressure,
    NotAQuantity,
    QuantityOfAnotherPhase,
    StrangeActivity,
    ThermofuncsError,
    TwoReadings,
    Unbalanced,
    WrongType,
)
from thermofuncs.quotient import activity, affinity, cell_voltage, electrons_in, ln_quotient
from thermofuncs.units import F, R
from thermofuncs.working import Record

CALCINATION = "CaCO3(s) = CaO(s) + CO2(g)"
SHIFT = "CO(g) + H2O(g) = CO2(g) + H2(g)"
COPPER = "Cu^2+(aq) + 2 e- = Cu(s)"
T = 298.15

# The aqueous ions' ΔfG° (NBS tables, Wagman et al. 1982) and the potentials come from two evaluations. The
# largest distance is that of copper, 2.5 mV, which is 0.48 kJ/mol in ΔfG° of the ion.
BETWEEN_EVALUATIONS = 0.003
POTENTIALS = [
    (COPPER, 2, 0.3419),
    ("Zn^2+(aq) + 2 e- = Zn(s)", 2, -0.7618),
    ("Ag+(aq) + e- = Ag(s)", 1, 0.7996),
    ("Fe^3+(aq) + e- = Fe^2+(aq)", 1, 0.771),
    ("Cl2(g) + 2 e- = 2 Cl-(aq)", 2, 1.35827),
    ("Zn(s) + Cu^2+(aq) = Zn^2+(aq) + Cu(s)", 2, 0.3419 + 0.7618),
]
SPELLINGS = [
    COPPER, "Cu^2+(aq)+2e-=Cu(s)", "Cu²⁺(aq) + 2 e⁻ = Cu(s)", "Cu(2+)(aq) + 2 e(-) = Cu(cr)", "Cu++(aq) + 2e- → Cu(s)",
    "Cu²⁺ (aq) + 2 e− ⇌ Cu (s)", "2 e^- + Cu^2+\u00a0(aq) -> Cu(s)",
]  # fmt: skip
REFUSED_TABLES = [
    (CALCINATION, [], ActivityMissing, "activities has no value for CO2(g): a gas or solute needs one", "#N/A"),
    (CALCINATION, [["CO2(g)", None]], ActivityMissing, "only a pure phase may be left out.", "#N/A"),
    ("HNO3 = H+ + NO3-", [["H+", 1.0], ["NO3-", 1.0]], ActivityMissing, "HNO3", "#N/A"),
    (CALCINATION, [["CO2(g)", 0.0]], ActivityNotPositive, "CO2(g) is 0: it must be positive", "#NUM!"),
    (CALCINATION, [["CO2(g)", -1.0]], ActivityNotPositive, "CO2(g) is -1: it must be positive", "#NUM!"),
    (CALCINATION, [["CO2(g)", 10**400]], ActivityNotPositive, "CO2(g) is inf", "#NUM!"),
    (CALCINATION, [["CO2(g)", "0 bar"]], ActivityNotPositive, "CO2(g) is 0: it must be positive", "#NUM!"),
    (CALCINATION, [["CO2(g)", True]], BadActivityTable, "True is neither a number nor a quantity", "#VALUE!"),
    (CALCINATION, [["CO2(g)", "0.3 K"]], BadActivityTable, '"0.3 K" is neither a number nor', "#VALUE!"),
    (CALCINATION, [["CO2(g)", "0.3"]], NotAQuantity, "which has no unit", "#VALUE!"),
    (CALCINATION, [["CO2(g)", "0,3 atm"]], DecimalComma, "with a comma in the number: write 0.3 atm", "#VALUE!"),
    (CALCINATION, [["CO2(g)", "1 barg"]], GaugePressure, "add the local atmospheric pressure", "#VALUE!"),
    (CALCINATION, [["CO2(g)", "2 mmol/L"]], QuantityOfAnotherPhase, '"2 mmol/L" is a concentration.', "#VALUE!"),
    (CALCINATION, [["CaO(s)", "1 bar"]], QuantityOfAnotherPhase, 'of CaO(s): "1 bar" is a pressure.', "#VALUE!"),
    (COPPER, [["Cu^2+(aq)", "1 bar"]], QuantityOfAnotherPhase, "a solute (aq) a molality", "#VALUE!"),
    (CALCINATION, [["CO2(g)"]], ActivityRow, "activities has a single column: two columns are needed", "#VALUE!"),
    (CALCINATION, [["CO2(g)", 1.0, 2.0]], ActivityRow, "activities has 3 columns", "#VALUE!"),
    (CALCINATION, [[None, 0.5]], ActivityRow, "the value 0.5 beside a blank cell", "#VALUE!"),
    (CALCINATION, [["N2(g)", 1.0]], StrangeActivity, "has N2(g), which is not one of the reaction's", "#VALUE!"),
    (CALCINATION, [["CO2(aq)", 1.0]], StrangeActivity, "has CO2(aq), which is not one of", "#VALUE!"),
    (CALCINATION, [["CO2(g)", 1.0], ["CO2", 1.0]], StrangeActivity, "or stands twice: CaCO3(s)", "#VALUE!"),
    (CALCINATION, [[5.0, 1.0]], StrangeActivity, "activities has 5.0", "#VALUE!"),
    (COPPER, [["Cu2+", 1.0]], TwoReadings, 'activities has "Cu2+", which has two readings', "#VALUE!"),
    ("H2O(l) = H2O(g)", [["H2O", 0.03]], StrangeActivity, "activities has H2O, which", "#VALUE!"),
    ("CaCO3(s) = CaO(s) + 2 CO2(g)", [["CO2(g)", 1.0]], Unbalanced, "1 C missing on the left", "#VALUE!"),
]  # fmt: skip
activities = st.floats(1e-12, 1e6)


@pytest.mark.parametrize(("reaction", "electrons", "published"), POTENTIALS)
def test_standard_potentials_meet_the_published_series(reaction: str, electrons: int, published: float) -> None:
    """Standard potentials from the data agree with the published series within 3 mV."""
    voltage = thermofuncs.call("EMF", reaction, T, electrons)
    assert voltage == pytest.approx(published, abs=BETWEEN_EVALUATIONS)


def test_a_hydrogen_cell_gives_its_textbook_voltage() -> None:
    """A hydrogen-oxygen cell with liquid water gives 1.229 V at 298.15 K, as does its oxygen electrode."""
    for reaction, electrons in (
        ("H2(g) + 1/2 O2(g) = H2O(l)", 2), ("2 H2(g) + O2(g) = 2 H2O(l)", 4),
        ("O2(g) + 4 H+(aq) + 4 e- = 2 H2O(l)", 4),
    ):  # fmt: skip
        assert thermofuncs.call("EMF", reaction, T, electrons) == pytest.approx(1.229, abs=5e-4)


def test_the_hydrogen_electrode_is_zero() -> None:
    """The standard hydrogen electrode has no voltage against itself."""
    assert thermofuncs.call("EMF", "2 H+(aq) + 2 e- = H2(g)", T, 2) == 0.0


@pytest.mark.parametrize("reaction", SPELLINGS)
def test_every_spelling_of_a_half_reaction_is_one(reaction: str) -> None:
    """The voltage of a half reaction does not depend on how its charges, electrons and phases are spelt."""
    assert thermofuncs.call("EMF", reaction, T, 2) == thermofuncs.call("EMF", COPPER, T, 2)


def test_a_tenfold_dilution_costs_one_nernst_slope() -> None:
    """A tenfold dilution of the ion lowers the voltage by RT ln 10/(nF), 59.16 mV/n at 298.15 K."""
    at_one = thermofuncs.call("EMF", COPPER, T, 2)
    diluted = thermofuncs.call("EMF", COPPER, T, 2, [["Cu^2+(aq)", 0.1]])
    assert (at_one - diluted) * 2 == pytest.approx(0.05916, abs=5e-6)
    assert thermofuncs.call("EMF", COPPER, T, 2, [["Cu²⁺ (aq)", "100 mmol/kg"]]) == pytest.approx(diluted, abs=1e-15)


def test_voltage_and_affinity_are_one_energy() -> None:
    """The affinity is nF times the voltage (Green Book, sections 2.11 and 2.13)."""
    table = [["Cu^2+(aq)", 0.02], ["Zn^2+(aq)", 1.5]]
    cell = "Zn(s) + Cu^2+(aq) = Zn^2+(aq) + Cu(s)"
    voltage = thermofuncs.call("EMF", cell, T, 2, table)
    energy = thermofuncs.call("AFFINITY", cell, T, table)
    assert isinstance(voltage, float)
    assert energy == pytest.approx(2 * F * voltage / 1000, rel=1e-13)


def test_electrons_are_counted_from_the_half_reaction() -> None:
    """A half reaction has as many electrons as stand in it, on the left, whatever their spelling."""
    assert electrons_in(COPPER) == -2
    assert electrons_in("Ag(s) = Ag+(aq) + e⁻") == 1
    assert electrons_in("1/2 Cl2(g) + ½e- = 1/2 Cl2-") == Fraction(-1, 2)
    assert electrons_in("e-(g) + H+(g) = H(g)") == 0


@pytest.mark.parametrize(
    ("reaction", "electrons", "said"),
    [
        (COPPER, 1, "electrons = 1 does not fit"),
        (COPPER, 0, "electrons = 0 does not fit"),
        ("Cu(s) = Cu^2+(aq) + 2 e-", 2, "the half reaction as a reduction, e- on the left"),
        ("H2(g) + 1/2 O2(g) = H2O(l)", -2, "a positive number"),
        ("H2(g) + 1/2 O2(g) = H2O(l)", 0, "a positive number"),
    ],
)
def test_electrons_that_do_not_fit_are_refused(reaction: str, electrons: int, said: str) -> None:
    """The number of electrons must be positive and that of the half reaction."""
    with pytest.raises(ElectronCount) as raised:
        thermofuncs.call("EMF", reaction, T, electrons)
    assert said in raised.value.sentence
    assert raised.value.worksheet_value == "#NUM!"


@pytest.mark.parametrize("electron", ["e-", "e⁻", "e−", "e(-)", "e^-"])
def test_a_bare_electron_has_no_data(electron: str) -> None:
    """A bare electron, however spelt, is refused where only data counts, with the gas as the remedy."""
    with pytest.raises(BareElectron) as raised:
        thermofuncs.call("LNK", f"Cu^2+(aq) + 2 {electron} = Cu(s)", T)
    assert "write e-(g) for the gas of the data" in raised.value.sentence


def test_the_quotient_is_the_product_of_powers_of_activities() -> None:
    """The logarithm of Q is the sum of the stoichiometric numbers times the logarithms of the activities."""
    table: list[list[object]] = [["CO(g)", 0.1], ["H2O(g)", "0.3 bar"], ["CO2(g)", "20 kPa"], ["H2(g)", 0.4]]
    assert ln_quotient(SHIFT, table) == pytest.approx(math.log(0.2 * 0.4 / (0.1 * 0.3)), rel=1e-14)
    assert thermofuncs.call("LNQ", SHIFT, table) == ln_quotient(SHIFT, table)


@pytest.mark.parametrize(
    ("value", "phase", "expected"),
    [
        (0.25, "g", 0.25), (2, "s", 2.0), ("1 atm", "g", 1.01325), ("50 kPa", "g", 0.5), ("750.062 torr", "g", 1.0),
        ("2 mmol/L", "aq", 0.002), ("5 mol/m3", "aq", 0.005), ("3 mmol/kg", "aq", 0.003), ("1 bar", None, 1.0),
    ],
)  # fmt: skip
def test_quantities_are_divided_by_their_standard(value: object, phase: str | None, expected: float) -> None:
    """A pressure is divided by 1 bar, a molality by 1 mol/kg, a concentration by 1 mol/L."""
    assert activity(value, "X", phase) == pytest.approx(expected, rel=1e-6)


def test_one_atmosphere_moves_both_sides_of_the_affinity() -> None:
    """The standard pressure of the activities is the one that is asked for."""
    assert ln_quotient(CALCINATION, [["CO2(g)", "1 atm"]], atm=True) == 0.0
    assert ln_quotient(CALCINATION, [["CO2(g)", "1 atm"]]) == pytest.approx(math.log(1.01325), rel=1e-14)
    assert ln_quotient(CALCINATION, [["CO2(g)", 0.5]], atm=True) == math.log(0.5)


@pytest.mark.parametrize(
    ("reaction", "table", "expected"),
    [
        (CALCINATION, [["CO2 (g)", 0.5], ["CaO", 1.0]], 0.5),
        (CALCINATION, [["CO2\u00a0(g)", 0.5], ["CaO(cr)", 1.0], [None, None], ["", ""]], 0.5),
        ("limestone(s) = quicklime(s) + CO2(g)", [["CO₂", 0.5], ["Limestone (s)", 1.0]], 0.5),
        ("limestone(s) = quicklime(s) + CO2(g)", [["CO₂", 0.5], ["limestone", 1.0]], 0.5),
        ("CH3OCH3(g) = C2H5OH(g)", [["CH3OCH3(g)", 0.4], ["C2H5OH(g)", 0.2]], 0.5),
        ("C2H2,acetylene(g) + H2(g) = C2H4(g)", [["C2H2,acetylene(g)", 1.0], ["H2", 0.2], ["C2H4", 0.1]], 0.5),
        ("1,3-butadiene(g) + H2(g) = 1-butene(g)", [["1,3-butadiene", 1.0], ["H2", 0.2], ["1-butene", 0.1]], 0.5),
        ("CaCO3(s) + H2O(l) = CaO(s) + CO2(g) + H2O(l)", [["CO2(g)", 0.5], ["H2O(l)", 0.9]], 0.5),
        ("H2O(l) = H2O(g)", [["H2O(g)", 0.5], ["H2O(l)", 1.0]], 0.5),
        ("Ag+(aq) + Cl-(aq) = AgCl(s)", [["Ag⁺(aq)", 1.0], ["Cl(-)(aq)", 2.0]], 0.5),
        ("2 Ag+(aq) + 2 e- = 2 Ag(s)", [["Ag+", 2.0]], 0.25),
        ("calcium stone(s) = quicklime(s) + CO2(g)", [["CO2(g)", 0.5]], 0.5),
    ],
)
def test_cells_name_the_species_as_the_equation_may(
    reaction: str, table: list[list[object]], expected: float
) -> None:
    """A cell may name a species by its text, by its formula in another spelling, or without its phase."""
    assert ln_quotient(reaction, table) == pytest.approx(math.log(expected), rel=1e-14)


@pytest.mark.parametrize(("reaction", "table", "kind", "said", "value"), REFUSED_TABLES)
def test_tables_that_do_not_fit_are_refused(
    reaction: str, table: list[list[object]], kind: type[ThermofuncsError], said: str, value: str
) -> None:
    """A table of activities that does not fit the reaction is refused with the cell and the remedy."""
    with pytest.raises(kind) as raised:
        ln_quotient(reaction, table)
    assert said in raised.value.sentence
    assert raised.value.worksheet_value == value


def test_activities_must_be_a_range() -> None:
    """A single cell is no table of activities."""
    with pytest.raises(WrongType, match="a range"):
        thermofuncs.call("LNQ", CALCINATION, 0.5)


def test_what_was_assumed_is_said() -> None:
    """Pure phases left out, concentrations and an unchecked balance each leave a caution."""
    record = Record()
    ln_quotient("calcium stone(s) = CaO(s) + CO2(g)", [["CO2(g)", 0.5]], record)
    ln_quotient("Ag+(aq) + Cl-(aq) = AgCl(s)", [["Ag+", "1 mmol/L"], ["Cl-", 1.0]], record)
    said = " ".join(record.cautions)
    assert "CaO(s) is not in the table: as a pure phase it is taken with activity 1." in said
    assert "Ag+(aq) is given as a concentration" in said
    assert "Whether the reaction balances is not checked: calcium stone(s) is no formula." in said


@given(activities, activities, activities, activities)
def test_working_ends_in_the_value_and_the_reverse_is_the_opposite(a: float, b: float, c: float, d: float) -> None:
    """The last step of the working is the value, and the reverse reaction has the opposite ln Q."""
    record = Record()
    table = [["CO(g)", a], ["H2O(g)", b], ["CO2(g)", c], ["H2(g)", d]]
    value = ln_quotient(SHIFT, table, record)
    assert record.steps[-1].value == value
    assert value == pytest.approx(math.log(c) + math.log(d) - math.log(a) - math.log(b), abs=1e-12)
    assert ln_quotient("CO2(g) + H2(g) = CO(g) + H2O(g)", table) == -value
    doubled = ln_quotient("2 CO(g) + 2 H2O(g) = 2 CO2(g) + 2 H2(g)", table)
    assert doubled == pytest.approx(2 * value, abs=1e-12)


@given(st.floats(-800.0, 800.0), st.floats(-800.0, 800.0), st.floats(200.0, 6000.0), st.integers(1, 8))
def test_affinity_and_voltage_follow_their_definitions(ln_k: float, ln_q: float, t: float, n: int) -> None:
    """A = RT ln(K/Q) and E = A/(nF); both are zero at equilibrium and positive below it."""
    record = Record()
    energy = affinity(ln_k, ln_q, t, record)
    assert record.steps[-1].value == energy
    assert energy == pytest.approx(R * t * (ln_k - ln_q) / 1000, rel=1e-14, abs=1e-14)
    voltage = cell_voltage(ln_k, ln_q, t, n, record)
    assert record.steps[-1].value == voltage
    assert voltage == pytest.approx(1000 * energy / (n * F), rel=1e-13, abs=1e-14)
    assert math.copysign(1.0, energy) == math.copysign(1.0, ln_k - ln_q)
    assert affinity(ln_k, ln_k, t) == cell_voltage(ln_k, ln_k, t, n) == 0.0


cells = st.one_of(
    st.none(), st.text(max_size=12), st.floats(allow_nan=False), st.booleans(), st.integers(),
    st.sampled_from(["CO(g)", "CO", "CO2(g)", "0.3 atm", "H2", "Co(g)", "1 mol/L", "e-", "²⁻", "1e999 bar"]),
)  # fmt: skip


@given(st.lists(st.lists(cells, min_size=1, max_size=3), max_size=5))
def test_any_table_gives_a_number_or_a_sentence(table: list[list[object]]) -> None:
    """Whatever stands in the cells, ln Q is a finite number or the error has a sentence."""
    try:
        assert math.isfinite(ln_quotient(SHIFT, table))
    except ThermofuncsError as error:
        assert error.sentence


AMMONIA = ("N2(g) + 3 H2(g) = 2 NH3(g)", 700.0, [["N2(g)", "20 bar"], ["H2(g)", "60 bar"], ["NH3(g)", "5 bar"]])
STEAM = ("H2(g) + 1/2 O2(g) = H2O(g)", 700.0, 2.0, [["H2(g)", "2 bar"], ["O2(g)", "0.2 bar"], ["H2O(g)", "0.5 bar"]])


@pytest.mark.parametrize(("name", "arguments"), [("AFFINITY", (*AMMONIA, None)), ("EMF", STEAM)])
def test_the_standard_pressure_cancels(name: str, arguments: tuple[object, ...]) -> None:
    """An affinity and a cell voltage do not depend on which standard pressure K and Q share."""
    bar = thermofuncs.call(name, *arguments)
    assert thermofuncs.call(name, *arguments, None, "atm") == pytest.approx(bar, rel=1e-12)
