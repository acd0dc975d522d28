"""What a text names, and what is said where it names nothing or too much."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.errors import (
    AmbiguousSubstance,
    InertCopy,
    OnlyAnEnthalpy,
    PhaseNotAvailable,
    ThermofuncsError,
    TwoReadings,
    UnknownSubstance,
)
from thermofuncs.substances import find_substance, search
from thermofuncs.substances.formulas import parse_species
from thermofuncs.substances.index import formula_key, index


@pytest.mark.parametrize(
    ("text", "label"),
    [
        ("H2O(l)", "H2O(l)"),
        ("H2O (g)", "H2O(g)"),
        ("Al2O3(s)", "Al2O3(s)"),
        ("Al2O3(cr)", "Al2O3(s)"),
        ("AL2O3(L)", "Al2O3(l)"),
        ("AL2O3(a)", "Al2O3(a)"),
        ("ALCL3(g)", "AlCl3(g)"),
        ("Fe(alpha)", "Fe(a)"),
        ("Fe(γ)", "Fe(c)"),
        ("SiO2(quartz)", "SiO2(quartz)"),
        ("SiO2(a-qz)", "SiO2(a-qz)"),
        ("S(rhombic)", "S(a)"),
        ("WO3(III,II)", "WO3(III,II)"),
        ("K(HF2)(a)", "K(HF2)(a)"),
        ("Fe0.947O(s)", "Fe0.947O(s)"),
        ("N2", "N2(g)"),
        ("FeS2", "FeS2(s)"),
        ("Air", "Air(g)"),
        ("C4H10,n-butane", "C4H10,n-butane(g)"),
        ("CH3CHO(g)", "CH3CHO,ethanal(g)"),
        ("HCN(g)", "HCN(g)"),
        ("SO4^2-(aq)", "SO4^2-(aq)"),
        ("SO4(2-)(aq)", "SO4^2-(aq)"),
        ("SO4²⁻(aq)", "SO4^2-(aq)"),
        ("NO3-(aq)", "NO3-(aq)"),
        ("e-(g)", "e-(g)"),
        ("water", "H2O(l)"),
        ("Water(g)", "H2O(g)"),
        ("methanol(g)", "CH3OH(g)"),
        ("iron(g)", "Fe(g)"),
        ("quicklime(s)", "CaO(s)"),
        ("austenite(s)", "Fe(c)"),
        ("TiN(s)", "TiN(s)"),
        ("tin(s)", "Sn(s)"),
        ("C6H6(l)", "C6H6(l)"),
    ],
)
def test_a_text_names_a_substance(text: str, label: str) -> None:
    """A label, publisher's name, everyday name, named form or formula with phase finds its substance."""
    assert find_substance(text).label == label


@pytest.mark.parametrize(
    ("text", "kind", "said"),
    [
        ("ZnO(s)", UnknownSubstance, "data table of your own supplies it"),
        ("zinc oxide", UnknownSubstance, "Near: "),
        ("h2o(l)", UnknownSubstance, "Near: H2O(l)"),
        ("", UnknownSubstance, "'' is not in the data"),
        ("H2O", AmbiguousSubstance, "can be H2O(g), H2O(l) or H2O(s)"),
        ("methanol", AmbiguousSubstance, "can be CH3OH(g) or CH3OH(l)"),
        ("C4H10(g)", AmbiguousSubstance, "C4H10,isobutane(g) or C4H10,n-butane(g)"),
        ("C2H4O(g)", AmbiguousSubstance, "C2H4O,ethylen-o(g) or CH3CHO,ethanal(g)"),
        ("CNH(g)", AmbiguousSubstance, "HCN(g) or HNC(g)"),
        ("OH-", AmbiguousSubstance, "OH-(aq) or OH-(g)"),
        ("TiN", AmbiguousSubstance, "TiN(l) or TiN(s)"),
        ("e-", AmbiguousSubstance, "e-(g)"),
        ("TiN(g)", PhaseNotAvailable, "which has TiN(l) and TiN(s)"),
        ("CO2(aq)", PhaseNotAvailable, "no neutral solute such as CO2, NH3 or a weak acid"),
        ("C(diamond)", PhaseNotAvailable, "which has C(g), C(gr) and C(s)"),
        ("CO(G)", PhaseNotAvailable, "which has CO(g)"),
        ("ice(l)", PhaseNotAvailable, "that name as H2O(s)"),
        ("NH3(l)", OnlyAnEnthalpy, "has only an enthalpy at one temperature"),
        ("CH4(L)", OnlyAnEnthalpy, "has only an enthalpy at one temperature"),
        ("n-Butanol", OnlyAnEnthalpy, "has only an enthalpy at one temperature"),
        ("WO4^2-(aq)", OnlyAnEnthalpy, "has only an enthalpy at one temperature"),
        ("InertCH4", InertCopy, "write CH4(g)"),
        ("Fe3+(aq)", TwoReadings, "write Fe^3+ or Fe3^+"),
        ("O2-(g)", TwoReadings, "two readings"),
    ],
)
def test_what_cannot_be_found_is_said(text: str, kind: type[ThermofuncsError], said: str) -> None:
    """A text that names nothing, or several, is #N/A with the candidates and the remedy; a doubtful one #VALUE!."""
    with pytest.raises(kind) as raised:
        find_substance(text, argument="substance")
    assert raised.value.sentence.startswith("substance")
    assert said in raised.value.sentence
    assert raised.value.worksheet_value == ("#VALUE!" if kind is TwoReadings else "#N/A")


def test_every_label_finds_itself() -> None:
    """Each label of a usable record, and of its solid, liquid or gas, finds a substance of its composition."""
    for entry in index().entries:
        if not entry.usable:
            for text in (entry.label, entry.chain):
                found = find_substance(text)
                assert found.label == text
                assert found.charge == int(entry.key.partition("|")[2])


def test_every_label_that_reads_as_a_formula_has_its_composition() -> None:
    """A label without a comma reads as its composition and charge; fuels, air and names with bonds do not."""
    for entry in index().entries:
        named = entry.label.startswith(("Jet", "JP", "Air", "e-")) or "," in entry.label or "-COOH" in entry.label
        if not entry.usable and not named:
            formula = parse_species(entry.label)
            assert formula_key(tuple(formula.composition.items()), formula.charge) == entry.key, entry.label


def test_every_publishers_name_of_a_condensed_record_finds_it() -> None:
    """The publisher's name of each usable condensed record finds a substance that holds that record."""
    for entry in index().entries:
        if not entry.usable and entry.phase in ("s", "l"):
            assert entry.name in {s.row.name for s in find_substance(entry.name).segments}


@given(st.text(alphabet="ABCHOFeClNaS()0123456789^+-·, abglsqr", max_size=14))
def test_any_text_is_found_or_refused_with_a_sentence(text: str) -> None:
    """No text makes the look-up fail in another way than an error with a sentence."""
    try:
        found = find_substance(text)
    except ThermofuncsError as error:
        assert len(error.sentence) > 10
    else:
        assert found.segments


def test_a_failure_is_the_same_twice() -> None:
    """A kept failure names the argument of the call, not that of the first one."""
    for argument in ("reaction", "substance"):
        with pytest.raises(UnknownSubstance) as raised:
            find_substance("ZnO(s)", argument=argument)
        assert raised.value.sentence.startswith(f"{argument}: 'ZnO(s)'")


def test_search_by_elements_finds_exactly_these() -> None:
    """A list of elements finds the rows that consist of them and nothing else."""
    rows = search("Ca, O")
    assert {r.label for r in rows} == {"CaO(g)", "CaO+(g)", "CaO(s)", "CaO(l)"}
    assert all(set(r.composition) == {"C", "H", "O"} for r in search("C H O"))


@pytest.mark.parametrize(
    ("text", "label"),
    [("magnetite", "Fe3O4(s)"), ("corundum", "Al2O3(a)"), ("CO2", "CO2(g)"), ("butane", "C4H10,n-butane(g)"),
     ("gibbsite", "Al(OH)3(a)"), ("sulfate", "SO4^2-(aq)")],
)  # fmt: skip
def test_search_by_name(text: str, label: str) -> None:
    """An everyday name, a formula or a word of the publisher's comment finds the row."""
    assert label in {r.label for r in search(text)}


def test_search_finds_nothing_for_nonsense() -> None:
    """A text that is in no name and no comment finds no row."""
    assert search("qqqqq") == []
