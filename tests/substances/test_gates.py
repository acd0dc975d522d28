"""The shipped table passes every gate, and each gate catches what it is for."""

from __future__ import annotations

from dataclasses import replace

import pytest

from thermofuncs.substances import gates, nasa_glenn, printed
from thermofuncs.substances.forms import Interval
from thermofuncs.substances.printed import PrintedRecord

RECORDS = [printed.record(fields) for fields in nasa_glenn.lines()]


def named(name: str) -> PrintedRecord:
    """The first record of a name."""
    return next(r for r in RECORDS if r.name == name)


def test_the_shipped_table_passes_every_gate() -> None:
    """No record of the shipped table has a fault."""
    assert gates.faults(RECORDS) == []


def test_every_record_is_there() -> None:
    """The table has 2,111 records: 2,030 products and 81 that the publisher lists as reactants only."""
    assert len(RECORDS) == 2111
    from_line = {r.line for r in RECORDS if r.line < 15478}
    assert len(from_line) == 2030
    assert sum(len(r.intervals) for r in RECORDS) == 3820


def test_a_gate_tells_an_empty_interval() -> None:
    """An interval whose upper limit is below its lower one is a fault."""
    record = named("Fe3O4(cr)")
    first = record.intervals[0]
    broken = replace(record, intervals=(replace_limits(first, 300.0, 298.15), *record.intervals[1:]))
    assert "the interval 300 to 298.15 K is empty" in " ".join(gates.ascending(broken))


def replace_limits(interval: Interval, low: float, high: float) -> Interval:
    """An interval with other limits."""
    return Interval(low, high, interval.terms, interval.b1, interval.b2)


def test_a_gate_tells_a_gap() -> None:
    """Two intervals that do not meet are a fault."""
    record = named("CO2")
    first = record.intervals[0]
    broken = replace(record, intervals=(replace_limits(first, 200.0, 999.0), *record.intervals[1:]))
    assert "a gap from 999 to 1000 K" in " ".join(gates.ascending(broken))


@pytest.mark.parametrize("name", ["CO2", "H2O(L)", "NaCL(cr)"])
def test_a_gate_tells_a_wrong_enthalpy(name: str) -> None:
    """A formation enthalpy in the wrong unit is a fault."""
    record = named(name)
    broken = replace(record, formation_enthalpy=record.formation_enthalpy / 4.184)
    assert "off the formation enthalpy" in " ".join(gates.enthalpy_at_298(broken))


def test_a_gate_tells_a_jump() -> None:
    """A Gibbs energy that jumps at a joint is a fault."""
    record = named("CO2")
    second = record.intervals[1]
    shifted = Interval(second.t_low, second.t_high, second.terms, second.b1 + 10.0, second.b2)
    broken = replace(record, intervals=(record.intervals[0], shifted, record.intervals[2]))
    assert "jumps" in " ".join(gates.joints(broken))


def test_a_gate_tells_a_wrong_mass() -> None:
    """A molar mass that is not the sum over the composition is a fault."""
    broken = replace(named("CO2"), molar_mass=44.1)
    assert "the composition gives 44.0095" in " ".join(gates.molar_mass(broken, gates.atomic_masses(RECORDS)))


def test_the_exceptions_are_needed() -> None:
    """Every listed exception of the joints names a record that would fail without it."""
    for name, limit in gates.JOINT_EXCEPTIONS.items():
        worst = max(
            abs(gates.gibbs_over_rt(b, a.t_high) - gates.gibbs_over_rt(a, a.t_high))
            for r in RECORDS
            if r.name == name
            for a, b in zip(r.intervals, r.intervals[1:], strict=False)
        )
        assert gates.JOINT_TOLERANCE < worst <= limit


def test_the_mended_intervals_say_so() -> None:
    """The eleven records whose first interval is empty as published start at 200 K and say that it was mended."""
    mended = [r for r in RECORDS if "empty interval" in r.note]
    assert len(mended) == 11
    assert {r.intervals[0].t_low for r in mended} == {200.0}


def test_iron_trichloride_gas_keeps_its_limit() -> None:
    """The gas FeCl3 starts at 300 K, as its enthalpy of the older edition had a unit fault."""
    record = named("FeCL3")
    assert record.intervals[0].t_low == 300.0
    assert "kilocalories" in record.note


def test_298_15_k_lies_inside_the_gases() -> None:
    """298.15 K is inside every gas but FeCl3 and the feeds that the publisher starts at 300 K."""
    outside = {r.name for r in RECORDS if r.phase == "g" and r.intervals and r.intervals[0].t_low > 298.15}
    assert outside == {"FeCL3", "InertAir", "InertJP-10(g)"}
