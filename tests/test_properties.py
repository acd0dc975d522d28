"""What holds for every reaction, substance and temperature, whatever the numbers are."""

from __future__ import annotations

import math
from collections.abc import Iterable
from fractions import Fraction
from typing import Any

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from thermofuncs import call, compiled
from thermofuncs.combination import ATM_IN_BAR, Coefficients, Combination, Member
from thermofuncs.reactions import parse_equation
from thermofuncs.substances.elements import reference_element, references
from thermofuncs.units import R

LN10 = math.log(10.0)
EPS = 2.0**-52
# sums of up to eight substances, each polynomial with some ten roundings
SUM = 64 * EPS
UNITS_IN_THE_LAST_PLACE = 4  # the scalar path against the array path
REACTIONS = (
    "CO(g) + H2O(g) = CO2(g) + H2(g)",
    "CH4(g) + H2O(g) = CO(g) + 3 H2(g)",
    "CO(g) + 2 H2(g) = CH3OH(g)",
    "N2(g) + 3 H2(g) = 2 NH3(g)",
    "SO2(g) + 1/2 O2(g) = SO3(g)",
    "H2S(g) + 3/2 O2(g) = SO2(g) + H2O(g)",
    "2 NO(g) + O2(g) = 2 NO2(g)",
    "C(graphite) + CO2(g) = 2 CO(g)",
    "CaCO3(s) = CaO(s) + CO2(g)",
    "Fe2O3(s) + 3 CO(g) = 2 Fe(s) + 3 CO2(g)",
    "2 Al(s) + 3/2 O2(g) = Al2O3(s)",
    "SiO2(s) + 2 H2(g) = Si(s) + 2 H2O(g)",
)
SUBSTANCES = ("CO2(g)", "H2O(g)", "H2O(l)", "CH4(g)", "Fe(s)", "SiO2(s)", "CaO(s)", "S8(g)", "NaCl(s)", "Na+(aq)")
OF_REACTIONS = {"DRCP": "Cp", "DRS": "S", "DRH": "H", "DRG": "G", "LNK": "G", "LGK": "G"}
OF_SUBSTANCES = {"MOLCP": "Cp", "MOLS": "S", "MOLDH": "H"}
OF_FORMATION = {"DFH": "H", "DFG": "G", "LGKF": "G"}

reactions = st.sampled_from(REACTIONS)
fractions_of_range = st.floats(0.0, 1.0)


def table(reaction: str) -> Combination:
    """The compiled table of a reaction."""
    return compiled.reaction(reaction, None, False, False)


def within(combination: Combination, fraction: float) -> float:
    """The temperature at a fraction of the range. [K]"""
    t = combination.t_low + fraction * (combination.t_high - combination.t_low)
    return min(max(t, combination.t_low), combination.t_high)


def equation_of(numbers: Iterable[tuple[Fraction, str]]) -> str:
    """Equation text of stoichiometric numbers."""
    sides: tuple[list[str], list[str]] = ([], [])
    for n, species in numbers:
        sides[n > 0].append(f"{abs(n)} {species}")
    return " = ".join(" + ".join(side) for side in sides)


def terms_of(c: Coefficients, t: float) -> dict[str, float]:
    """The largest term of the sums Cp/R, H/(RT), S/R and G/(RT) at a temperature [K]."""
    powers = (t**-2, 1 / t, 1.0, t, t**2, t**3, t**4)
    log = math.log(t)
    cp = [abs(a * p) for a, p in zip(c.cp, powers, strict=True)]
    h = [abs(a * p) for a, p in zip(c.h, powers, strict=True)]
    s = [abs(a * p) for a, p in zip(c.s, powers, strict=True)]
    h[1] *= log
    s[2] *= log
    largest = {"Cp": max(cp), "H": max(*h, abs(c.b1 / t)), "S": max(*s, abs(c.b2))}
    return {**largest, "G": max(largest["H"], largest["S"])}


def size(combination: Combination, t: float) -> float:
    """The sum over the members of their largest terms in G/(RT): what rounding errors are measured by."""
    total = 0.0
    for m in combination.members:
        single = Combination(m.substance.label, [Member(1.0, m.substance)])
        total += abs(m.coefficient) * terms_of(single.at(t), t)["G"]
    return total


@given(reactions, fractions_of_range)
def test_the_reverse_reaction_has_the_reciprocal_constant(reaction: str, fraction: float) -> None:
    """ΔH°, ΔS°, ΔG°, ΔCp° and ln K of the reverse reaction are those of the reaction with the other sign."""
    t = within(table(reaction), fraction)
    reverse = str(parse_equation(reaction).reversed())
    bound = SUM * size(table(reaction), t)
    for name in OF_REACTIONS:
        unit = call(name, reaction, t) + call(name, reverse, t)
        scale = {"DRH": R * t / 1000, "DRG": R * t / 1000, "DRS": R, "DRCP": R}.get(name, 1.0)
        assert abs(unit) <= bound * scale, name


@given(reactions, fractions_of_range, st.fractions(Fraction(1, 12), 12, max_denominator=12))
def test_a_scaled_reaction_has_the_power_of_the_constant(
    reaction: str, fraction: float, times: Fraction
) -> None:
    """Ln K and ΔH° of a reaction with all coefficients multiplied are multiplied by the same factor."""
    t = within(table(reaction), fraction)
    scaled = str(parse_equation(reaction).scaled(times))
    bound = SUM * float(times) * size(table(reaction), t)
    assert abs(call("LNK", scaled, t) - float(times) * call("LNK", reaction, t)) <= bound
    assert abs(call("DRH", scaled, t) - float(times) * call("DRH", reaction, t)) <= bound * R * t / 1000


@given(
    st.lists(st.tuples(reactions, st.fractions(-3, 3, max_denominator=3)), min_size=2, max_size=4),
    fractions_of_range,
)
def test_properties_of_a_sum_of_reactions_add_up(
    weighted: list[tuple[str, Fraction]], fraction: float
) -> None:
    """ΔH°, ΔS°, ΔG° and ln K of a sum of reactions are the sums of theirs (Hess)."""
    total: dict[str, Fraction] = {}
    for reaction, weight in weighted:
        for n, species in parse_equation(reaction).net():
            total[species] = total.get(species, Fraction(0)) + weight * n
    numbers = [(n, species) for species, n in total.items() if n]
    assume(numbers)
    together = equation_of(numbers)
    tables = [table(reaction) for reaction, _ in weighted]
    low, high = max(c.t_low for c in tables), min(c.t_high for c in tables)
    t = low + fraction * (high - low)
    # on a joint, a sum that begins there has only the interval above it
    assume(not any(t in (c.t_low, *c.uppers) for c in tables))
    bound = SUM * math.fsum(
        abs(float(w)) * size(c, t) for (_, w), c in zip(weighted, tables, strict=True)
    )
    for name in OF_REACTIONS:
        parts = math.fsum(float(w) * call(name, reaction, t) for reaction, w in weighted)
        scale = {"DRH": R * t / 1000, "DRG": R * t / 1000, "DRS": R, "DRCP": R}.get(name, 1.0)
        assert abs(call(name, together, t) - parts) <= bound * scale, name


@given(reactions, fractions_of_range)
def test_the_forms_of_the_equilibrium_constant_are_one(reaction: str, fraction: float) -> None:
    """K = exp(ln K), lg K = ln K/ln 10, ΔG° = −RT ln K and ΔG° = ΔH° − TΔS°."""
    combination = table(reaction)
    t = within(combination, fraction)
    ln_k = call("LNK", reaction, t)
    assert call("LGK", reaction, t) == ln_k / LN10
    if abs(ln_k) < 700:
        assert call("KEQ", reaction, t) == math.exp(ln_k)
    gibbs_energy = call("DRG", reaction, t)
    bound = SUM * size(combination, t) * R * t / 1000
    assert gibbs_energy == pytest.approx(-R * t * ln_k / 1000, rel=4 * EPS, abs=0.0)
    h, s = call("DRH", reaction, t), call("DRS", reaction, t)
    assert abs(gibbs_energy - (h - t * s / 1000)) <= bound


@given(reactions, fractions_of_range)
def test_slopes_over_temperature(reaction: str, fraction: float) -> None:
    """dΔH°/dT is ΔCp° and d ln K/dT is ΔH°/(RT²), by central differences within one interval."""
    combination = table(reaction)
    t = within(combination, fraction)
    step = 1e-4 * t
    low, high = combination.interval(t)
    assume(low < t - step and t + step < high)
    above, below = t + step, t - step
    heat_capacity = (call("DRH", reaction, above) - call("DRH", reaction, below)) * 1000 / (above - below)
    # rounding of ΔH° over the step, and the curvature of ΔH°(T), a relative 1e-8 of its terms
    noise = size(combination, t) * R * (1e-8 + 4 * SUM * t / step)
    assert abs(heat_capacity - call("DRCP", reaction, t)) <= noise
    slope = (call("LNK", reaction, above) - call("LNK", reaction, below)) / (above - below)
    wanted = call("DRH", reaction, t) * 1000 / (R * t**2)
    assert abs(slope - wanted) <= size(combination, t) / t * (1e-7 + 4 * SUM * t / step)


def scales(t: float) -> dict[str, float]:
    """What a term of the dimensionless sums is in the unit of each function's answer, at a temperature [K]."""
    return {
        "DRCP": R, "DRS": R, "DRH": R * t / 1000, "DRG": R * t / 1000, "LNK": 1.0, "LGK": 1 / LN10,
        "MOLCP": R, "MOLS": R, "MOLDH": R * t / 1000, "DFH": R * t / 1000, "DFG": R * t / 1000, "LGKF": 1 / LN10,
    }


def meets_the_loop(name: str, kind: str, text: str, combination: Combination, fractions: list[float]) -> None:
    """Compare a range, a numpy array and a loop of single calls."""
    temperatures = [within(combination, f) for f in fractions]
    column = call(name, text, [[t] for t in temperatures])
    array = call(name, text, np.array(temperatures))
    assert [row[0] for row in column] == array.tolist()
    for t, found in zip(temperatures, array.tolist(), strict=True):
        largest = terms_of(combination.at(t), t)[kind]
        if name == "MOLDH":
            largest = max(largest, terms_of(combination.at(298.15), 298.15)["H"] * 298.15 / t)
        bound = UNITS_IN_THE_LAST_PLACE * math.ulp(largest) * scales(t)[name]
        # and the roundings of the unit, of the answer itself
        assert abs(found - call(name, text, t)) <= bound + 2 * math.ulp(found), (name, t)


@given(st.sampled_from(sorted(OF_REACTIONS)), reactions, st.lists(fractions_of_range, min_size=1, max_size=40))
def test_ranges_meet_loops_for_reactions(name: str, reaction: str, fractions: list[float]) -> None:
    """A range gives what single calls give, within 4 units in the last place of the largest term."""
    meets_the_loop(name, OF_REACTIONS[name], reaction, table(reaction), fractions)


@given(st.sampled_from(sorted(OF_SUBSTANCES)), st.sampled_from(SUBSTANCES), st.lists(fractions_of_range, min_size=1))
def test_ranges_meet_loops_for_substances(name: str, substance: str, fractions: list[float]) -> None:
    """A range gives what single calls give for one substance, within the same bound."""
    combination = compiled.substance(substance, None, False, False)
    meets_the_loop(name, OF_SUBSTANCES[name], substance, combination, fractions)


@given(st.sampled_from(sorted(OF_FORMATION)), st.sampled_from(SUBSTANCES), st.lists(fractions_of_range, min_size=1))
def test_ranges_meet_loops_for_formation(name: str, substance: str, fractions: list[float]) -> None:
    """A range gives what single calls give for a formation from the elements, within the same bound."""
    combination = compiled.formation(substance, None, False, False)
    meets_the_loop(name, OF_FORMATION[name], substance, combination, fractions)


@given(reactions, st.lists(fractions_of_range, min_size=1, max_size=40))
def test_a_range_of_constants_meets_the_loop(reaction: str, fractions: list[float]) -> None:
    """K over a range is exp of ln K over it: its relative bound is that of ln K."""
    combination = table(reaction)
    temperatures = [t for t in (within(combination, f) for f in fractions) if abs(call("LNK", reaction, t)) < 700]
    for t, row in zip(temperatures, call("KEQ", reaction, [[t] for t in temperatures] or [[None]]), strict=False):
        bound = UNITS_IN_THE_LAST_PLACE * math.ulp(terms_of(combination.at(t), t)["G"]) + 4 * EPS
        assert row[0] == pytest.approx(call("KEQ", reaction, t), rel=bound)


@pytest.mark.parametrize("symbol", sorted(references().keys() - {"E"}))
def test_formation_of_a_reference_element_is_zero(symbol: str) -> None:
    """The formation enthalpy, entropy and Gibbs energy of an element in its reference phase are zero at every T."""
    for segment in reference_element(symbol).segments:
        label = segment.row.label.removeprefix("½ ").removeprefix("1/4 ").removeprefix("1/8 ")
        for i in range(1, 8):
            t = segment.t_low + (segment.t_high - segment.t_low) * i / 8
            table_of_it = compiled.formation(label, None, False, False)
            noise = SUM * size(table_of_it, t)
            assert abs(call("DFH", label, t)) <= noise * R * t / 1000, (label, t)
            assert abs(call("DFG", label, t)) <= noise * R * t / 1000, (label, t)
            assert abs(call("LGKF", label, t)) <= noise, (label, t)


@given(reactions, fractions_of_range)
def test_the_temperature_of_a_constant_has_that_constant(reaction: str, fraction: float) -> None:
    """TEQ of K(T) is the lowest temperature that has this K: ln K is met there, and it is not above T."""
    combination = table(reaction)
    t = within(combination, fraction)
    ln_k = call("LNK", reaction, t)
    assume(abs(ln_k) < 700)
    found = call("TEQ", reaction, math.exp(ln_k))
    slope = max(abs(call("DRH", reaction, x)) * 1000 / (R * x**2) for x in (t, found))
    # exp and log each lose half a unit; a degree of freedom of 1e-12 K is the search's own
    bound = SUM * size(combination, found) + slope * 1e-9 * found + 8 * EPS * max(1.0, abs(ln_k))
    assert abs(call("LNK", reaction, found) - ln_k) <= bound
    assert found <= t * (1 + 1e-6) or abs(call("DRH", reaction, t)) < 1.0


@given(reactions, fractions_of_range)
def test_one_atmosphere_moves_gases_alone(reaction: str, fraction: float) -> None:
    """At a standard pressure of 1 atm ln K moves by −Σν(gas) ln 1.01325, and ΔH° and ΔCp° do not move."""
    combination = table(reaction)
    t = within(combination, fraction)
    moved = call("LNK", reaction, t, None, "atm") - call("LNK", reaction, t)
    bound = SUM * size(combination, t)
    assert abs(moved + combination.gas_moles * math.log(ATM_IN_BAR)) <= bound
    assert call("DRH", reaction, t, None, None, "atm") == call("DRH", reaction, t)
    assert call("DRCP", reaction, t, None, None, "atm") == call("DRCP", reaction, t)


@pytest.mark.parametrize("substance", SUBSTANCES)
def test_one_atmosphere_moves_the_entropy_of_a_gas(substance: str) -> None:
    """S° of a gas falls by R ln 1.01325 at a standard pressure of 1 atm; that of other phases stays."""
    moved = call("MOLS", substance, 300.0, None, None, "atm") - call("MOLS", substance, 300.0)
    wanted = -R * math.log(1.01325) if substance.endswith("(g)") else 0.0
    assert moved == pytest.approx(wanted, abs=1e-12)


@pytest.mark.parametrize("reaction", REACTIONS)
def test_extrapolation_continues_the_data(reaction: str) -> None:
    """With extrapolate, ΔH° and ΔS° go on from the end of the data without a jump; inside nothing moves."""
    combination = table(reaction)
    end = combination.t_high

    def asked(name: str, t: float) -> float:
        value: float = call(name, reaction, t, None, None, "extrapolate")
        return value

    for t in (0.5 * (combination.t_low + end), end):
        assert asked("DRH", t) == call("DRH", reaction, t)
        assert asked("DRG", t) == call("DRG", reaction, t)
    low = combination.t_low  # a joint belongs to the interval below it, here the continuation
    noise = SUM * size(combination, low) * R * low / 1000
    assert abs(asked("DRH", low) - call("DRH", reaction, low)) <= noise
    # where one substance ends another may pass a joint, and published joints jump by up to some 1e-5 of RT
    assert abs(asked("DRH", end * (1 + 1e-12)) - asked("DRH", end)) <= 1e-5 * R * end / 1000
    assert abs(asked("DRS", end * (1 + 1e-12)) - asked("DRS", end)) <= 1e-5 * R


@given(st.sampled_from(SUBSTANCES), st.floats(1.0, 400.0))
def test_an_extrapolated_heat_capacity_is_that_of_the_end(substance: str, beyond: float) -> None:
    """Beyond the data a substance keeps the heat capacity of its end, and H° and S° are its integrals."""
    combination = compiled.substance(substance, None, False, False)
    for end, t in ((combination.t_high, combination.t_high + beyond), (combination.t_low, combination.t_low * 0.9)):
        assume(t < 19000)
        at_end = call("MOLCP", substance, end)

        def asked(name: str, at: float) -> float:
            value: float = call(name, substance, at, None, None, "extrapolate")
            return value

        lost = SUM * terms_of(combination.at(end), end)["Cp"] * R
        assert asked("MOLCP", t) == pytest.approx(at_end, rel=0, abs=lost)
        noise = 8 * SUM * size(combination, end) * R
        entropy = call("MOLS", substance, end) + at_end * math.log(t / end)
        assert asked("MOLS", t) == pytest.approx(entropy, rel=1e-11, abs=noise)
        enthalpy = call("MOLDH", substance, end) + at_end * (t - end) / 1000
        assert asked("MOLDH", t) == pytest.approx(enthalpy, rel=1e-11, abs=noise * end / 1000)


@given(reactions, fractions_of_range)
def test_scales_of_temperature_are_one_temperature(reaction: str, fraction: float) -> None:
    """A number with the option degC or degF, a text with its unit, and the kelvins give one answer."""
    combination = table(reaction)
    t = within(combination, 0.05 + 0.9 * fraction)
    celsius, fahrenheit = t - 273.15, (t - 273.15) * 9 / 5 + 32
    in_kelvin = call("LNK", reaction, t)
    noise = size(combination, t) * 32 * EPS
    cases: list[tuple[Any, ...]] = [
        (celsius, None, "degC"), (f"{celsius!r} degC",), (fahrenheit, None, "degF"), (f"{fahrenheit!r} degF",),
        (f"{t!r} K",), (f"{t * 1.8!r} degR",), ([[celsius]], None, "degC"), (np.array([fahrenheit]), None, "degF"),
    ]
    for arguments in cases:
        found = call("LNK", reaction, *arguments)
        while not isinstance(found, float):
            found = found[0]
        assert abs(found - in_kelvin) <= noise, arguments
    assert call("LNK", reaction, celsius, None, "degC") == call("LNK", reaction, f"{celsius!r} degC")
