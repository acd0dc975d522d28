"""The rows of the NASA Glenn set against the publisher's figures, CODATA and a reference implementation.

Reference implementation: cantera (BSD), a test dependency alone.
"""

from __future__ import annotations

import csv
import math
from pathlib import Path

import cantera as ct
import numpy as np
import pytest

from thermofuncs.substances import find_substance, forms, nasa_glenn, printed
from thermofuncs.substances.forms import Interval
from thermofuncs.substances.records import Substance, SubstanceRow
from thermofuncs.units import R_FIT_NASA, R

REFERENCE = Path(__file__).parent.parent / "reference"
RECORDS = [printed.record(fields) for fields in nasa_glenn.lines()]
FITTED = [number for number, r in enumerate(RECORDS) if r.intervals]

# The enthalpies of two ions differ between the tables of 1982 and the key values of 1989.
CODATA_EXCEPTIONS = {"Ag+(aq)": 0.2, "Al^3+(aq)": 7.5}


def rows(name: str) -> list[dict[str, str]]:
    """The rows of a reference file, without its header of comments."""
    lines = (REFERENCE / name).read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


def at_298(substance: Substance) -> tuple[SubstanceRow, Interval]:
    """The row and interval at 298.15 K."""
    row = next(s.row for s in substance.segments if s.t_low <= 298.15 <= s.t_high)
    return row, next(i for i in row.intervals if i.t_high >= 298.15)


# silver chloride is not in the data
KEY_VALUES = [c for c in rows("codata_key_values.csv") if c["substance"] != "AgCl(s)"]


@pytest.mark.parametrize("case", KEY_VALUES, ids=lambda c: c["substance"])
def test_codata_key_values(case: dict[str, str]) -> None:
    """Formation enthalpies and entropies meet the CODATA key values within their uncertainty."""
    row, interval = at_298(find_substance(case["substance"]))
    if case["dfH"]:
        bound = max(float(case["u_dfH"] or 0.0), 0.05)
        bound = CODATA_EXCEPTIONS.get(case["substance"], bound)
        assert row.formation_enthalpy / 1000.0 == pytest.approx(float(case["dfH"]), abs=bound)
        assert forms.enthalpy(interval, 298.15) * R * 298.15 / 1000.0 == pytest.approx(
            float(case["dfH"]), abs=bound
        )
    if case["S"] and not case["substance"].endswith("(aq)"):
        assert forms.entropy(interval, 298.15) * R == pytest.approx(float(case["S"]), abs=float(case["u_S"]))


def test_joules_are_the_publishers() -> None:
    """Cp, H and S in joules are those of the printed coefficients with the gas constant of the fit."""
    for number in FITTED[:: len(FITTED) // 200]:
        row = nasa_glenn.row(number)
        for ours, theirs in zip(row.intervals, RECORDS[number].intervals, strict=True):
            t = math.sqrt(ours.t_low * ours.t_high)
            for property_of in (forms.heat_capacity, forms.enthalpy, forms.entropy):
                assert property_of(ours, t) * R == pytest.approx(
                    property_of(theirs, t) * R_FIT_NASA, rel=1e-12, abs=1e-9
                )


def test_every_record_agrees_with_the_reference_implementation() -> None:
    """Cp, H, S and G of every fitted record agree with an independent evaluation within 1e-9 of G/(RT)."""
    assert ct.gas_constant == pytest.approx(1000.0 * R, rel=1e-15)
    for number in FITTED:
        row = nasa_glenn.row(number)
        table = [float(len(row.intervals))]
        for i in row.intervals:
            a = dict(i.terms)
            table += [i.t_low, i.t_high, *(a.get(float(n), 0.0) for n in range(-2, 5)), i.b1, i.b2]
        theirs = ct.Nasa9PolyMultiTempRegion(row.t_low, row.t_high, 1e5, table)
        # off the joints, where the two take different sides
        for t in row.t_low + (row.t_high - row.t_low) * (np.arange(10) + 0.6173) / 10.0:
            ours = next(i for i in row.intervals if t <= i.t_high)
            h, s = forms.enthalpy(ours, float(t)), forms.entropy(ours, float(t))
            scale = max(1.0, abs(h), abs(s))
            assert theirs.cp(t) / ct.gas_constant == pytest.approx(
                forms.heat_capacity(ours, float(t)), rel=1e-9, abs=1e-9
            )
            assert abs(theirs.h(t) / (ct.gas_constant * t) - h) < 1e-9 * scale, row.label
            assert abs(theirs.s(t) / ct.gas_constant - s) < 1e-9 * scale, row.label


def test_the_source_says_what_was_mended() -> None:
    """The source of a mended record carries the publisher's comment, its line and the note."""
    source = str(find_substance("magnetite").segments[0].row.source)
    assert "Fe3O4(cr) phase 1, line 12330" in source
    assert "Westrum,1969" in source
    assert "mended with the lower limit 200 K of the 2004 edition" in source


def test_liquid_water_is_cautioned_above_its_boiling_point() -> None:
    """Liquid water carries a caution above its boiling point and none below."""
    row = find_substance("water").segments[0].row
    assert row.notes_at(370.0) == []
    assert row.notes_at(400.0) == [
        "above 373.19 K the liquid is stable only under pressure, by this data."
    ]


def test_white_phosphorus_is_cautioned() -> None:
    """Phosphorus says that it is the white form."""
    assert "white phosphorus" in find_substance("P(s)").segments[0].row.notes_at(298.15)[0]


def test_uncertainties_are_exact_given_or_unknown() -> None:
    """An element's enthalpy is exact, a key value's is given, and anything else is unknown, never zero."""
    assert find_substance("Fe(s)").segments[0].row.u_formation_enthalpy.kind == "exact"
    water = find_substance("H2O(l)").segments[0].row
    assert (water.u_formation_enthalpy.kind, water.u_formation_enthalpy.value) == ("given", 40.0)
    assert (water.u_entropy.kind, water.u_entropy.value) == ("given", 0.03)
    unknown = find_substance("CaCO3(s)").segments[0].row.u_formation_enthalpy
    assert unknown.kind == "unknown"
    assert math.isnan(unknown.value)
