"""The compiled tables against a reference implementation, Cantera (a test dependency), record by record.

Each record is rebuilt there from the coefficients as the engine holds them, scaled to the CODATA gas constant,
which is also Cantera's. Where the coefficients come from is checked elsewhere; here two programs compute.
"""

from __future__ import annotations

import math
from functools import lru_cache

import cantera
import numpy as np
import pytest

import thermofuncs
from thermofuncs.combination import Combination, Member
from thermofuncs.substances import nasa_glenn
from thermofuncs.substances.records import Segment, Substance, SubstanceRow
from thermofuncs.units import R

PER_KILOMOLE = 1000.0
BOUND = 1e-9  # of g/(RT), and of one RT where g passes through zero
TEMPERATURES = 10
EXPONENTS = (-2.0, -1.0, 0.0, 1.0, 2.0, 3.0, 4.0)
RECORDS, INTERVALS = 2057, 3820  # 2,030 products, 7 of them inert copies, and 27 reactants


@lru_cache(maxsize=1)
def rows() -> tuple[SubstanceRow, ...]:
    """Every record of the bundled set that has temperature intervals."""
    return tuple(nasa_glenn.row(number) for number, fields in enumerate(nasa_glenn.lines()) if fields[-1])


def compiled(row: SubstanceRow) -> Combination:
    """The engine's table of one record."""
    substance = Substance(row.label, (Segment(row.t_low, row.t_high, row),))
    return Combination(row.label, [Member(1.0, substance)])


def rebuilt(row: SubstanceRow) -> cantera.SpeciesThermo:
    """The record in the reference implementation: H and S in J/kmol at 1 bar."""
    numbers: list[float] = [len(row.intervals)]
    for x in row.intervals:
        terms = dict(x.terms)
        numbers += [x.t_low, x.t_high, *(terms.get(n, 0.0) for n in EXPONENTS), x.b1, x.b2]
    return cantera.Nasa9PolyMultiTempRegion(row.t_low, row.t_high, 1e5, numbers)


def temperatures(row: SubstanceRow) -> list[float]:
    """Ten temperatures within each interval, and the two ends of the range. [K]

    A joint itself belongs to the lower interval here and to the upper one there, so it is left out.
    """
    inside = [
        x.t_low + (x.t_high - x.t_low) * (i + 0.5) / TEMPERATURES
        for x in row.intervals
        for i in range(TEMPERATURES)
    ]
    return [row.t_low, *inside, row.t_high]


def test_every_record_and_interval_is_there() -> None:
    """The set has 2,057 records with intervals, and 3,820 intervals of the seven exponents."""
    assert len(rows()) == RECORDS
    assert sum(len(row.intervals) for row in rows()) == INTERVALS
    assert {n for row in rows() for x in row.intervals for n, _ in x.terms} <= set(EXPONENTS)


def test_gas_constants_are_the_same() -> None:
    """Both use the CODATA gas constant, so that none of the agreement rests on a scale."""
    assert cantera.gas_constant / PER_KILOMOLE == R


def test_every_record_agrees_with_the_reference_implementation() -> None:
    """Cp, H, S and G of every record agree at ten temperatures in each interval within 1e-9 of g/(RT)."""
    worst: dict[str, tuple[float, str, float]] = {}
    count = 0
    for row in rows():
        ours, theirs = compiled(row), rebuilt(row)
        for t in temperatures(row):
            h, s = ours.h_and_s(t)
            scale = PER_KILOMOLE * R
            their_h, their_s = theirs.h(t) / (scale * t), theirs.s(t) / scale
            bound = max(abs(their_h - their_s), 1.0)
            distances = {
                "Cp": ours.cp(t) - theirs.cp(t) / scale,
                "H": h - their_h,
                "S": s - their_s,
                "G": (h - s) - (their_h - their_s),
            }
            for name, distance in distances.items():
                relative = abs(distance) / bound
                if relative > worst.get(name, (-1.0, "", 0.0))[0]:
                    worst[name] = (relative, row.label, t)
            count += 1
    assert count == INTERVALS * TEMPERATURES + 2 * RECORDS
    assert all(relative <= BOUND for relative, _, _ in worst.values()), worst


def test_array_path_agrees_with_the_reference_implementation() -> None:
    """Cp, H, S and −G over an array of temperatures agree with the same reference within 1e-9 of g/(RT)."""
    worst = (0.0, "")
    for row in rows():
        ours, theirs = compiled(row), rebuilt(row)
        t = np.array(temperatures(row))
        scale = PER_KILOMOLE * R
        h = np.array([theirs.h(x) for x in t]) / (scale * t)
        s = np.array([theirs.s(x) for x in t]) / scale
        cp = np.array([theirs.cp(x) for x in t]) / scale
        bound = np.maximum(abs(h - s), 1.0)
        for found, wanted in (
            (ours.cp_array(t), cp), (ours.h_array(t), h), (ours.s_array(t), s), (ours.minus_g_array(t), s - h),
        ):
            worst = max(worst, (float(np.max(abs(found - wanted) / bound)), row.label))
    assert worst[0] <= BOUND, worst


EQUILIBRIA: dict[str, dict[str, float]] = {
    "CO(g) + H2O(g) = CO2(g) + H2(g)": {"CO(g)": -1, "H2O(g)": -1, "CO2(g)": 1, "H2(g)": 1},
    "SO2(g) + 1/2 O2(g) = SO3(g)": {"SO2(g)": -1, "O2(g)": -0.5, "SO3(g)": 1},
    "N2(g) + 3 H2(g) = 2 NH3(g)": {"N2(g)": -1, "H2(g)": -3, "NH3(g)": 2},
    "CH4(g) + H2O(g) = CO(g) + 3 H2(g)": {"CH4(g)": -1, "H2O(g)": -1, "CO(g)": 1, "H2(g)": 3},
}


@pytest.mark.parametrize("equation", EQUILIBRIA)
def test_equilibrium_constants_agree_with_the_reference_implementation(equation: str) -> None:
    """Ln K of a reaction is the weighted sum that the reference implementation gives for its gases."""
    gases = {row.label: rebuilt(row) for row in rows() if row.label in EQUILIBRIA[equation]}
    for t in (298.15, 640.0, 999.0, 1500.0, 2900.0):
        parts = [
            n * (gases[gas].s(t) - gases[gas].h(t) / t) / (PER_KILOMOLE * R)
            for gas, n in EQUILIBRIA[equation].items()
        ]
        wanted = math.fsum(parts)
        bound = BOUND * max(map(abs, parts))
        assert thermofuncs.call("LNK", equation, t) == pytest.approx(wanted, rel=0, abs=bound)
