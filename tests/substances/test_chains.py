"""Solids through their transitions."""

from __future__ import annotations

from itertools import pairwise

import pytest

from thermofuncs.substances import chains, find_substance, gates
from thermofuncs.substances.index import index
from thermofuncs.units import R


def test_iron_goes_through_its_forms_and_melts() -> None:
    """Solid iron is alpha, gamma and delta iron in turn and ends at its melting point."""
    iron = find_substance("Fe(s)")
    assert [(s.row.name, s.t_high) for s in iron.segments] == [
        ("Fe(a)", 1042.0), ("Fe(a)", 1184.0), ("Fe(c)", 1665.0), ("Fe(d)", 1809.0),
    ]  # fmt: skip
    assert iron.stops == "melts at 1809 K"


@pytest.mark.parametrize(
    ("text", "stops"),
    [
        ("Fe(a)", "turns into Fe(c) at 1184 K"),
        ("SiO2(s)", "melts at 1996 K"),
        ("LiNO3(s)", "melts at 526 K"),
        ("Mg(OH)2(s)", ""),
        ("C(s)", ""),
        ("Fe(l)", ""),
        ("CO2(g)", ""),
    ],
)
def test_the_end_of_a_solid(text: str, stops: str) -> None:
    """The end of a solid is its melting or its next form; where the data has none, nothing is said."""
    assert find_substance(text).stops == stops


def test_every_chain_is_without_gaps_and_overlaps() -> None:
    """The segments of every substance ascend, meet, and lie within their rows."""
    for label in index().chains:
        segments = chains.chain(label).segments
        for segment in segments:
            assert segment.row.t_low <= segment.t_low < segment.t_high <= segment.row.t_high
        for lower, upper in pairwise(segments):
            assert lower.t_high == upper.t_low


def test_the_gibbs_energy_is_continuous_at_transitions() -> None:
    """Where one form turns into the next their Gibbs energies agree within 5 J/mol; NaCN, as published, within 33."""
    for label in index().chains:
        segments = chains.chain(label).segments
        for lower, upper in pairwise(segments):
            at = lower.t_high
            below = next(i for i in lower.row.intervals if at <= i.t_high)
            above = next(i for i in upper.row.intervals if at <= i.t_high)
            jump = (gates.gibbs_over_rt(above, at) - gates.gibbs_over_rt(below, at)) * R * at
            assert abs(jump) < (33.0 if label == "NaCN(s)" else 5.0), label


@pytest.mark.parametrize(
    ("text", "remark"),
    [("C(s)", "graphite"), ("P(s)", "white phosphorus"), ("SiO2(s)", "quartz to 1200 K, then cristobalite")],
)
def test_a_form_that_could_be_mistaken_is_said(text: str, remark: str) -> None:
    """A substance with several well-known forms says which one it is."""
    assert find_substance(text).remark.startswith(remark)


def test_remarks_belong_to_substances_of_the_data() -> None:
    """Every remark belongs to a label of the data."""
    assert set(chains.REMARKS) <= set(index().chains)


def test_a_gap_is_refused() -> None:
    """Rows that do not meet make no substance."""
    rows = [s.row for text in ("Fe(a)", "Fe(d)") for s in find_substance(text).segments]
    with pytest.raises(ValueError) as refused:
        chains.joined("Fe(x)", rows, "")
    assert str(refused.value) == "Fe(x): nothing between 1184 and 1665 K"
