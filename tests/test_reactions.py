"""Equation texts, and the balance of what they say."""

from __future__ import annotations

import contextlib
from dataclasses import dataclass
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.errors import (
    CoefficientNotGiven,
    CoefficientNotRead,
    DecimalComma,
    EmptySide,
    EquationTooLong,
    FormulaNotRead,
    FormulaTooLong,
    NothingReacts,
    NotOneSeparator,
    ThermofuncsError,
    TwoReadings,
    Unbalanced,
)
from thermofuncs.reactions import LONGEST, Equation, check_balance, differences, parse_equation
from thermofuncs.substances.formulas import parse_species

# every species is written as an equation may hold it, and as it is read
SPECIES = [
    "CO(g)", "H2O(l)", "Fe(s)", "Na+(aq)", "Cl-(aq)", "SO4^2-(aq)", "Fe^3+", "SO4(2-)", "Ca++", "e-", "e-(g)", "Na+",
    "[Fe(CN)6]^3-", "SiO2(quartz)", "CaSO4·2H2O(s)", "Fe0.947O(s)", "carbon monoxide(g)", "iron(II) oxide(s)",
    "2-propanol(g)", "1,3-butadiene(g)", "SO₄²⁻(aq)", "NO3-", "K3[Fe(CN)6](s)", "(NH4)2SO4(s)",
]  # fmt: skip
COEFFICIENTS = st.one_of(
    st.integers(1, 999).map(Fraction),
    st.tuples(st.integers(1, 99), st.integers(2, 99)).map(lambda pair: Fraction(*pair)),
)
SIDES = st.lists(st.tuples(COEFFICIENTS, st.sampled_from(SPECIES)), min_size=1, max_size=6)
LETTERS = "CHONaFesglaq()[]·*.,+-=><→⇌^²⁻₂0123456789 ½?/e\u00a0"
HARD_TEXTS = st.one_of(st.text(max_size=60), st.text(alphabet=LETTERS, max_size=60))

READ = [
    ("CO(g) + 2 H2(g) = CH3OH(g)", "CO(g) + 2 H2(g) = CH3OH(g)"),
    ("2H2(g)+O2(g)->2H2O(g)", "2 H2(g) + O2(g) = 2 H2O(g)"),
    ("2H2 + O2 → 2H2O", "2 H2 + O2 = 2 H2O"),
    ("N2 + 3 H2 ⇌ 2 NH3", "N2 + 3 H2 = 2 NH3"),
    ("N2 + 3 H2 <=> 2 NH3", "N2 + 3 H2 = 2 NH3"),
    ("N2 + 3 H2 --> 2 NH3", "N2 + 3 H2 = 2 NH3"),
    ("Ag+ + Cl-->AgCl", "Ag+ + Cl- = AgCl"),
    ("Na+ + Cl- = NaCl(s)", "Na+ + Cl- = NaCl(s)"),
    ("Na+(aq)+Cl-(aq)=NaCl(s)", "Na+(aq) + Cl-(aq) = NaCl(s)"),
    ("Na++Cl-=NaCl", "Na+ + Cl- = NaCl"),
    ("Na+ (aq) + Cl− (aq) = NaCl (s)", "Na+(aq) + Cl-(aq) = NaCl(s)"),
    ("Na+\u00a0(aq)+Cl-\u00a0(aq)=NaCl\u00a0(s)", "Na+(aq) + Cl-(aq) = NaCl(s)"),
    ("Na+ (aq)=Na+ (g)", "Na+(aq) = Na+(g)"),
    ("H2+O2=H2O", "H2 + O2 = H2O"),
    ("2NO2=N2O4", "2 NO2 = N2O4"),
    ("H++OH-->H2O", "H+ + OH- = H2O"),
    ("C2H2,acetylene(g)+H2(g)=C2H4(g)", "C2H2,acetylene(g) + H2(g) = C2H4(g)"),
    ("H2 + C4H8,1-butene(g) = C4H10,n-butane(g)", "H2 + C4H8,1-butene(g) = C4H10,n-butane(g)"),
    ("0.5 1,3-butadiene = X", "1/2 1,3-butadiene = X"),
    ("1½O2+¾ H2=X", "3/2 O2 + 3/4 H2 = X"),
    ("Ca+++2Cl-=CaCl2", "Ca++ + 2 Cl- = CaCl2"),
    ("Cu^2++2e-=Cu", "Cu^2+ + 2 e- = Cu"),
    ("2H++2 e- = H2", "2 H+ + 2 e- = H2"),
    ("Na+ + Cl– –> 1‑butene", "Na+ + Cl- = 1-butene"),
    ("2 H+ +2 e− = H2(g)", "2 H+ + 2 e- = H2(g)"),
    ("Fe(3+)+e-=Fe(2+)", "Fe(3+) + e- = Fe(2+)"),
    ("Fe³⁺+e⁻=Fe²⁺", "Fe³⁺ + e- = Fe²⁺"),
    ("Fe³⁺+ e⁻ = Fe²⁺", "Fe³⁺ + e- = Fe²⁺"),
    ("Cl-+ Na+ = NaCl", "Cl- + Na+ = NaCl"),
    ("CO(g)+ H2O(g)=CO2(g)+ H2(g)", "CO(g) + H2O(g) = CO2(g) + H2(g)"),
    ("K++[Fe(CN)6]^4-=X", "K+ + [Fe(CN)6]^4- = X"),
    ("Na+(aq)+(NH4)2SO4=X", "Na+(aq) + (NH4)2SO4 = X"),
    ("H2+½O2=H2O", "H2 + 1/2 O2 = H2O"),
    ("H2 + 1½ O2 = H2O4", "H2 + 3/2 O2 = H2O4"),
    ("H2 + 0.5 O2 = H2O", "H2 + 1/2 O2 = H2O"),
    ("H2 + .5 O2 = H2O", "H2 + 1/2 O2 = H2O"),
    ("H2 + 1/2O2 = H2O", "H2 + 1/2 O2 = H2O"),
    ("H2 + 1 / 2 O2 = H2O", "H2 + 1/2 O2 = H2O"),
    ("2.0 H2 + O2 = 2.0 H2O", "2 H2 + O2 = 2 H2O"),
    ("carbon monoxide (g) + water(g) = CO2 (g)+H2(g)", "carbon monoxide(g) + water(g) = CO2(g) + H2(g)"),
    ("2-propanol(g) = acetone(g) + H2(g)", "2-propanol(g) = acetone(g) + H2(g)"),
    ("2 2-propanol(g) = 2 acetone(g) + 2 H2(g)", "2 2-propanol(g) = 2 acetone(g) + 2 H2(g)"),
    ("1,3-butadiene(g) + H2(g) = 1-butene(g)", "1,3-butadiene(g) + H2(g) = 1-butene(g)"),
    ("2 CaSO4·2H2O(s) = X", "2 CaSO4·2H2O(s) = X"),
    ("H2\u00a0=\u20092\u200b\tH\n", "H2 = 2 H"),
]

REFUSED = [
    ("A", NotOneSeparator, '"A" has 0 signs between its sides: one of =, ->, →, ⇌, <=> is needed.'),
    ("A = B = C", NotOneSeparator, "has 2 signs between its sides"),
    ("CH2=CH2 + H2 = C2H6", NotOneSeparator, "has 2 signs between its sides"),
    ("", NotOneSeparator, "has 0 signs"),
    ("= B", EmptySide, "a species is needed on each side and around each +."),
    ("A + = B", EmptySide, "has an empty place"),
    ("A + + B = C", EmptySide, "has an empty place"),
    ("0,5 O2 + H2 = H2O", DecimalComma, "with a comma in the number: write 0.5."),
    ("1,5 e- + H+ = H", DecimalComma, "write 1.5."),
    ("0 H2 = H", CoefficientNotRead, 'has "0 H2": a coefficient is a positive number'),
    ("1/0 H2 = H", CoefficientNotRead, 'has "1/0 H2"'),
    ("-2 H2 = H", CoefficientNotRead, 'has "-2 H2"'),
    ("2 2 H2 = H", CoefficientNotRead, 'has "2 2 H2"'),
    ("1 1/2 O2 = O3", CoefficientNotRead, 'has "1 1/2 O2"'),
    ("(1/2)O2 = O", CoefficientNotRead, 'has "(1/2)O2"'),
    ("2*H2O = X", CoefficientNotRead, 'has "2*H2O"'),
    ("2.0.5 H2 = H", CoefficientNotRead, 'has "2.0.5 H2"'),
    ("1/2/3 H2 = H", CoefficientNotRead, 'has "1/2/3 H2"'),
    ("9" * 5000 + " H2 = H", CoefficientNotRead, "a coefficient is a positive number"),
    ("? CO + O2 = CO2", CoefficientNotGiven, 'has "? CO": ? is for BALANCED only'),
    ("CO = CO", NothingReacts, "has the same on both sides: nothing reacts."),
    ("2 CO = CO + CO", NothingReacts, "nothing reacts"),
    ("H2+ O2 = H2O", TwoReadings, "write H2 + O2 or H2+ + O2."),
    ("2CaSO4·2H2O = X", TwoReadings, "write 2 CaSO4·2H2O or (CaSO4)2·2H2O."),
    ("3CaO*SiO2 = X", TwoReadings, "write 3 CaO*SiO2 or (CaO)3*SiO2."),
    ("Fe(OH + B = C", FormulaNotRead, "its brackets do not close each other."),
    ("H2 = " + "a" * 401, FormulaTooLong, "has a formula of more than 400 characters, beginning"),
    ("A" * (LONGEST + 1), EquationTooLong, "has more than 8192 characters"),
]


@pytest.mark.parametrize(("text", "read"), READ)
def test_what_an_equation_says(text: str, read: str) -> None:
    """Separators, coefficients, charges and spaces of an equation are told apart."""
    assert str(parse_equation(text)) == read


@pytest.mark.parametrize(("text", "kind", "said"), REFUSED)
def test_what_is_no_equation_is_refused_with_the_remedy(
    text: str, kind: type[ThermofuncsError], said: str
) -> None:
    """What cannot be read as one equation is refused with what stands where and what would do."""
    with pytest.raises(kind) as raised:
        parse_equation(text, "reaction")
    assert said in raised.value.sentence
    assert raised.value.sentence.startswith("reaction ")
    assert raised.value.worksheet_value == "#VALUE!"


def test_a_charge_written_after_its_sign_is_left_to_the_formula() -> None:
    """The 3 of Fe+3 is no term of the equation, so that the formula's error can name the remedy."""
    species = [term.species for term in parse_equation("Fe+3(aq) + e- = Fe+2(aq)").reactants]
    assert species == ["Fe+3(aq)", "e-"]
    with pytest.raises(FormulaNotRead) as raised:
        parse_species(species[0])
    assert "the number first: Fe^3+" in raised.value.sentence


def test_an_equation_of_300_characters_and_more_is_read() -> None:
    """An equation of a thousand characters is read with all its terms."""
    text = " + ".join(["C2H5OH(g)"] * 90) + " = X(g)"
    assert len(text) > 1000
    assert len(parse_equation(text).reactants) == 90


def test_a_species_that_stands_several_times_counts_by_its_sum() -> None:
    """What stands twice on a side adds up, and what stands on both sides counts by the difference."""
    net = parse_equation("CO(g) + N2(g) + CO(g) + 3 H2O(g) = H2O(g) + 2 CO2(g) + N2(g) + 2 H2(g)").net()
    assert {species: n for n, species in net} == {"CO(g)": -2, "H2O(g)": -2, "CO2(g)": 2, "H2(g)": 2}


def test_gas_moles_count_written_gases_alone() -> None:
    """The sum of the gases' numbers is theirs where every phase is written, else unknown."""
    assert parse_equation("CaCO3(s) = CaO(s) + CO2(g)").gas_moles() == 1
    assert parse_equation("limestone(s) = quicklime(s) + CO2(g)").gas_moles() == 1
    assert parse_equation("CaCO3 = CaO(s) + CO2(g)").gas_moles() is None


@dataclass(frozen=True)
class Made:
    """A composition and a charge."""

    composition: dict[str, float]
    charge: int


def test_an_unbalanced_equation_names_what_is_missing_and_where() -> None:
    """The error of an unbalanced equation counts the missing atoms and states both charges."""
    equation = parse_equation("Fe^3+ + H2 + O2 = Fe^2+ + H2O")
    composed = {species: parse_species(species) for _, species in equation.net()}
    with pytest.raises(Unbalanced) as raised:
        check_balance(equation, composed)
    assert raised.value.sentence == (
        'reaction "Fe^3+ + H2 + O2 = Fe^2+ + H2O" does not balance:'
        " charge +3 on the left and +2 on the right, 1 O missing on the right."
    )


def test_the_balance_allows_for_rounding_alone() -> None:
    """Compositions in floating point balance within their rounding, and not beyond it."""
    equation = parse_equation("3 A = B")
    assert not differences(equation, {"A": Made({"Fe": 0.1}, 0), "B": Made({"Fe": 0.3}, 0)})
    found = differences(equation, {"A": Made({"Fe": 0.1}, 0), "B": Made({"Fe": 0.3001}, 0)})
    assert found["Fe"] == pytest.approx((0.3, 0.3001))


@given(SIDES, SIDES)
def test_the_text_of_an_equation_reads_as_the_same_equation(
    left: list[tuple[Fraction, str]], right: list[tuple[Fraction, str]]
) -> None:
    """An equation written from its coefficients and species reads as these, and its text as itself."""
    text = " + ".join(f"{n} {s}" for n, s in left) + " = " + " + ".join(f"{n} {s}" for n, s in right)
    total: dict[str, Fraction] = {}
    for sign, side in ((-1, left), (1, right)):
        for n, species in side:
            total[species] = total.get(species, Fraction(0)) + sign * n
    expected = {species: n for species, n in total.items() if n}
    if not expected:
        return
    equation = parse_equation(text)
    assert {species: n for n, species in equation.net()} == expected
    again = parse_equation(str(equation))
    assert str(again) == str(equation)
    assert again.net() == equation.net()


@given(SIDES, SIDES, COEFFICIENTS)
def test_reversed_and_scaled(
    left: list[tuple[Fraction, str]], right: list[tuple[Fraction, str]], times: Fraction
) -> None:
    """The reverse reaction has the opposite numbers, and the scaled one the multiples."""
    text = " + ".join(f"{n} {s}" for n, s in left) + " = " + " + ".join(f"{n} {s}" for n, s in right) + " + Xe(g)"
    equation = parse_equation(text)
    numbers = {species: n for n, species in equation.net()}
    assert {species: n for n, species in equation.reversed().net()} == {s: -n for s, n in numbers.items()}
    assert {species: n for n, species in equation.scaled(times).net()} == {s: n * times for s, n in numbers.items()}
    assert equation.reversed().reversed() == equation


@given(HARD_TEXTS, st.booleans())
def test_no_text_makes_the_parser_fail_otherwise(text: str, unknowns: bool) -> None:
    """Any text is an equation whose own text reads as the same, or is refused with a sentence."""
    try:
        equation = parse_equation(text, unknowns=unknowns)
    except ThermofuncsError as error:
        assert error.sentence.startswith("reaction ")
        assert len(error.sentence) < 330
    else:
        assert isinstance(equation, Equation)
        assert parse_equation(str(equation), unknowns=unknowns).net() == equation.net()


@pytest.mark.parametrize(
    "text",
    ["+" * 8000 + "=", "+ " * 4000 + "=A", "A+" * 4000 + "A=B", "(" * 8000 + "=A", "1," * 4000 + "=A",
     "1" * 8000 + "=A", "1/" * 4000 + "=A", "=" * 8000, "->" * 4000, "A" * 8000 + "=B", " " * 8000 + "=",
     "½" * 8000 + "A=B", "?" * 8000, "-" * 8000 + ">", "A " * 4000 + "= B", "1-" * 4000 + "= B"],
)  # fmt: skip
def test_hostile_equations_are_answered(text: str) -> None:
    """A text that would take a backtracking parser for ever is read or refused (a hang is the failure)."""
    with contextlib.suppress(ThermofuncsError):
        parse_equation(text)
