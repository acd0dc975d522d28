"""Balanced coefficients, and the table of what is missing."""

from __future__ import annotations

import re
from fractions import Fraction
from math import gcd
from pathlib import Path

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

import thermofuncs
from thermofuncs.balancing import MOST_SPECIES, balanced, imbalance
from thermofuncs.errors import (
    CannotBalance,
    CoefficientNotGiven,
    FormulaNotRead,
    SeveralReactions,
    ThermofuncsError,
    TwoReadings,
    WrongSide,
)
from thermofuncs.reactions import Term, parse_equation

REFERENCE = Path(__file__).parent / "reference" / "balanced_equations.csv"
CASES = [
    tuple(line.split(";"))
    for line in REFERENCE.read_text(encoding="utf-8").splitlines()
    if not line.startswith("#")
]
LETTERS = "CHONaFe()+-=^23 0?/.g"
HARD_TEXTS = st.one_of(st.text(max_size=60), st.text(alphabet=LETTERS, max_size=60))
SYMBOLS = st.sampled_from(["H", "C", "N", "O", "Na", "Cl", "Fe"])
ATOMS = st.dictionaries(SYMBOLS, st.integers(1, 6), min_size=1, max_size=4)


def counted(formula: str) -> dict[str, Fraction]:
    """Atoms and charge of a formula, by opening its brackets in the text: a count apart from the parser's."""
    formula = re.sub(r"\((?:g|l|s|aq)\)$", "", formula)
    if formula == "e-":
        return {"charge": Fraction(-1)}
    charge = re.search(r"\^?([0-9]*)([+-])$", formula) if "^" in formula else re.search(r"()([+-])$", formula)
    total: dict[str, Fraction] = {}
    if charge:
        total["charge"] = Fraction(int(charge[1] or 1) * (1 if charge[2] == "+" else -1))
        formula = formula[: charge.start()]
    for part in formula.split("·"):
        factor = re.match(r"[0-9.]+", part)
        times = Fraction(factor[0]) if factor else Fraction(1)
        plain = part[factor.end() :] if factor else part
        while group := re.search(r"[(\[]([^()\[\]]*)[)\]]([0-9]*)", plain):
            plain = plain[: group.start()] + group[1] * int(group[2] or 1) + plain[group.end() :]
        for symbol, number in re.findall(r"([A-Z][a-z]?)([0-9.]*)", plain):
            total[symbol] = total.get(symbol, Fraction(0)) + times * Fraction(number or 1)
    return total


def side_total(side: str) -> dict[str, Fraction]:
    """Atoms and charge of a side of an equation whose terms stand apart by `` + ``."""
    total: dict[str, Fraction] = {}
    for term in side.split(" + "):
        number, _, species = term.rpartition(" ")
        for element, n in counted(species).items():
            total[element] = total.get(element, Fraction(0)) + Fraction(number or 1) * n
    return {element: n for element, n in total.items() if n}


def numbers(equation: str) -> list[Fraction]:
    """The coefficients of an equation text."""
    return [Fraction(t.rpartition(" ")[0] or 1) for side in equation.split(" = ") for t in side.split(" + ")]


@pytest.mark.parametrize(("written", "expected"), CASES)
def test_published_kinds_of_equations(written: str, expected: str) -> None:
    """Equations of the usual kinds get the smallest whole coefficients that conserve atoms and charge."""
    assert balanced(written) == expected
    left, right = expected.split(" = ")
    assert side_total(left) == side_total(right)
    assert all(n.denominator == 1 and n > 0 for n in numbers(expected))
    assert gcd(*(int(n) for n in numbers(expected))) == 1


def test_there_are_enough_cases() -> None:
    """The list of equations holds at least 25, with coefficients up to hundreds and above."""
    assert len(CASES) >= 25
    assert max(max(numbers(expected)) for _, expected in CASES) > 300


@pytest.mark.parametrize(
    ("written", "expected"),
    [
        ("2 H2 + O2 = H2O", "2 H2 + O2 = 2 H2O"),
        ("H2 + 1/2 O2 = H2O", "H2 + 1/2 O2 = H2O"),
        ("1 H2 + O2 = H2O", "H2 + 1/2 O2 = H2O"),
        ("? H2 + 0.5 O2 = ? H2O", "H2 + 1/2 O2 = H2O"),
        ("? H2 + ? O2 = ? H2O", "2 H2 + O2 = 2 H2O"),
        ("CH4 + ? O2 = 1 CO2 + ? H2O", "CH4 + 2 O2 = CO2 + 2 H2O"),
        ("4 NH3(g) + O2(g) = NO(g) + H2O(g)", "4 NH3(g) + 5 O2(g) = 4 NO(g) + 6 H2O(g)"),
        ("Fe2O3(s) + 3 C(s) = Fe(s) + 2 CO(g) + CO2(g)", "4/3 Fe2O3(s) + 3 C(s) = 8/3 Fe(s) + 2 CO(g) + CO2(g)"),
        ("2 H2 + 1 O2 = 2 H2O", "2 H2 + O2 = 2 H2O"),
        ("H2 + ? O2 = H2O", "H2 + 1/2 O2 = H2O"),
        ("? H2 + O2 = ? H2O", "2 H2 + O2 = 2 H2O"),
        ("C2H5OH + ? O2 = ? CO2 + ? H2O", "C2H5OH + 3 O2 = 2 CO2 + 3 H2O"),
        ("2 C + ? O2 = CO + CO2", "2 C + 3/2 O2 = CO + CO2"),
        ("Ag^2+ + ? e- = Ag", "Ag^2+ + 2 e- = Ag"),
        ("Na+ + Cl- = NaCl", "Na+ + Cl- = NaCl"),
    ],
)
def test_given_coefficients_stay(written: str, expected: str) -> None:
    """Numbers stay and the others are solved for; where ? stands those alone are, and what is not written is 1."""
    assert balanced(written) == expected


@pytest.mark.parametrize(
    ("written", "kind", "said"),
    [
        ("H2 = O2", CannotBalance, "H stands on the left side only."),
        ("CO + H2O = CO2 + H2 + N2", CannotBalance, "N stands on the right side only."),
        ("Na+ = Na", CannotBalance, "charge is not conserved by any coefficients that conserve Na."),
        ("NaCl + H2O = NaCl2 + H2O2", CannotBalance, "O is not conserved by any coefficients that conserve Na, Cl, H."),
        ("5 H2 + O2 = 3 H2O", CannotBalance, "H is not conserved by any coefficients beside those given."),
        ("? H2 + O2 = H2O", CannotBalance, "beside those given, where what is not written beside ? is 1."),
        ("H0.12345678901234 + He0.98765432109871 = H2He3", CannotBalance, "a coefficient would have more than 15"),
        ("2 H2 + 2 O2 = 2 H2O", CannotBalance, "all its coefficients are given and 2 O missing on the right."),
        ("H2 + H2 + O2 = H2O", CannotBalance, "H2 stands in it twice: write it once."),
        ("H2 + O2 + CO = H2O + CO", CannotBalance, "CO stands in it twice: write it once."),
        ("H2 + O2 = H2O + H^+ + e-", SeveralReactions, "holds 2 independent reactions"),
        ("Fe2O3 + C = Fe + CO + CO2", SeveralReactions, "holds 2 independent reactions, so its coefficients"),
        ("H2 + 3 C = CH4 + C2H6", SeveralReactions, "holds 2 independent reactions"),
        ("C + O2 + H2 + N2 = CO + CO2 + H2O + NH3 + NO", SeveralReactions, "holds 5 independent reactions"),
        ("C2H6 + CO = CO2 + H2O", WrongSide, "balances only with CO, CO2 on the other side or left out."),
        ("H2O + NaCl + Na+ = Na+ + Cl-", CannotBalance, "Na+ stands in it twice"),
        ("Cu + H2 + Cl2 = HCl + Cu2 + H2Cl2", SeveralReactions, "holds 3 independent reactions"),
        ("H2 + Cl2 + NaCl = HCl + Na^+ + Cl^- + H", SeveralReactions, "independent reactions"),
        ("H2 + O2 + NaCl = H2O + Na", CannotBalance, "Cl stands on the left side only."),
    ],
)
def test_what_cannot_be_balanced_says_why(written: str, kind: type[ThermofuncsError], said: str) -> None:
    """An equation without unique positive coefficients is refused with the element, species or count."""
    with pytest.raises(kind) as raised:
        balanced(written)
    assert said in raised.value.sentence
    assert raised.value.sentence.startswith(f'equation "{written}" ')
    assert raised.value.worksheet_value == "#NUM!"


def test_species_that_take_no_part_are_named() -> None:
    """Species whose coefficients can only be zero are named, and to be left out."""
    with pytest.raises(CannotBalance) as raised:
        balanced("H2 + O2 + NaCl = H2O + Na2Cl")
    assert "cannot be balanced: without part in it: NaCl, Na2Cl; leave that out." in raised.value.sentence


def test_what_is_no_formula_is_refused_as_such() -> None:
    """BALANCED works from formulas: a name, or a charge with two readings, is refused with its own sentence."""
    with pytest.raises(FormulaNotRead) as raised:
        balanced("limestone(s) = CaO(s) + CO2(g)")
    assert raised.value.sentence.startswith('equation has "limestone(s)", which is no formula')
    with pytest.raises(TwoReadings) as doubtful:
        balanced("Fe3+ + e- = Fe2+")
    assert "write Fe^3+ or Fe3^+" in doubtful.value.sentence


def test_an_equation_of_too_many_species_is_refused() -> None:
    """More species than the bound are refused before the arithmetic."""
    left = " + ".join(f"C{n}H{n}" for n in range(1, MOST_SPECIES + 2))
    with pytest.raises(CannotBalance) as raised:
        balanced(f"{left} = C + H2")
    assert f"it has more than {MOST_SPECIES} species." in raised.value.sentence


def test_what_is_missing() -> None:
    """The table names each element that differs, the charge too, and the side that lacks it."""
    assert imbalance("H2 + O2 = H2O") == [["what", "left", "right", "missing"], ["O", 2.0, 1.0, "1 on the right"]]
    assert imbalance("MnO4^- + H+ + e- = Mn^2+ + H2O") == [
        ["what", "left", "right", "missing"],
        ["H", 1.0, 2.0, "1 on the left"],
        ["O", 4.0, 1.0, "3 on the right"],
        ["charge", -1.0, 2.0, "+3 on the left"],
    ]


def test_nothing_missing() -> None:
    """The table of a balanced equation says so in one row."""
    head = ["what", "left", "right", "missing"]
    assert imbalance("2 Fe0.947O + 0.1 O2 = 1.894 Fe + 1.1 O2") == [head, ["balanced", "", "", ""]]
    assert imbalance("Cu^2+ + 2 e- = Cu") == [head, ["balanced", "", "", ""]]


def test_a_question_mark_has_no_imbalance() -> None:
    """IMBALANCE counts what is written, so a coefficient that is unknown is refused."""
    with pytest.raises(CoefficientNotGiven) as raised:
        imbalance("? H2 + O2 = H2O")
    assert raised.value.sentence == 'equation has "? H2": ? is for BALANCED only, a coefficient is needed here.'


def spelled(atoms: dict[str, int]) -> str:
    """A formula of atoms, in the order of their symbols."""
    return "".join(f"{symbol}{n}" for symbol, n in sorted(atoms.items()))


@given(st.lists(ATOMS, min_size=2, max_size=4), st.lists(st.integers(1, 12), min_size=4, max_size=4))
def test_a_compound_from_random_parts_balances(parts: list[dict[str, int]], times: list[int]) -> None:
    """One molecule put together from random ones in random numbers balances with these numbers."""
    names = {spelled(part) for part in parts}
    assume(len(names) == len(parts))
    whole: dict[str, int] = {}
    for part, n in zip(parts, times, strict=False):
        for symbol, atoms in part.items():
            whole[symbol] = whole.get(symbol, 0) + n * atoms
    assume(spelled(whole) not in names)
    try:
        done = balanced(" + ".join(map(spelled, parts)) + " = " + spelled(whole))
    except SeveralReactions as several:
        assert " independent reactions" in several.sentence
        return
    left, right = done.split(" = ")
    assert side_total(left) == side_total(right)
    assert numbers(done) == [*times[: len(parts)], 1]


@given(st.sampled_from(CASES), st.integers(2, 50))
def test_one_given_coefficient_scales_the_others(case: tuple[str, str], times: int) -> None:
    """A coefficient given as a multiple of the smallest one multiplies all."""
    expected = case[1]
    terms = expected.split(" = ")[0].split(" + ")
    number, _, species = terms[0].rpartition(" ")
    written = case[0].replace(species, f"{int(number or 1) * times} {species}", 1)
    assert numbers(balanced(written)) == [n * times for n in numbers(expected)]


@given(st.sampled_from(CASES))
def test_a_balanced_equation_stays(case: tuple[str, str]) -> None:
    """A balanced equation is its own balance, has no imbalance, and its reverse is balanced too."""
    expected = case[1]
    assert numbers(balanced(expected)) == numbers(expected)
    assert imbalance(expected)[1][0] == "balanced"
    reverse = str(parse_equation(case[0]).reversed())
    assert sorted(numbers(balanced(reverse))) == sorted(numbers(expected))


@given(st.integers(1, 40), st.integers(0, 60), st.integers(0, 12), st.integers(0, 6))
def test_combustion_follows_its_formula(c: int, h: int, o: int, n: int) -> None:
    """CcHhOoNn burns with c + h/4 - o/2 of oxygen to c carbon dioxide, h/2 water and n/2 nitrogen."""
    oxygen = Fraction(c) + Fraction(h, 4) - Fraction(o, 2)
    assume(oxygen > 0)
    fuel = f"C{c}" + "".join(f"{symbol}{k}" for symbol, k in (("H", h), ("O", o), ("N", n)) if k)
    made = {"CO2": Fraction(c), "H2O": Fraction(h, 2), "N2": Fraction(n, 2)}
    products = [species for species, k in made.items() if k]
    done = balanced(f"{fuel} + O2 = {' + '.join(products)}")
    fuel_number, *others = numbers(done)
    assert [x / fuel_number for x in others] == [oxygen, *(made[species] for species in products)]
    assert gcd(*(int(x) for x in numbers(done))) == 1


@given(st.integers(1, 4), st.integers(1, 4), st.integers(1, 4), st.integers(1, 4))
def test_salts_exchange_their_ions_by_charge(p: int, q: int, r: int, s: int) -> None:
    """Salts formed from ions of any charges exchange them in the numbers that neutrality demands."""

    def salt(metal: str, positive: int, anion: str, negative: int) -> str:
        return f"{metal}{negative // gcd(positive, negative)}({anion}){positive // gcd(positive, negative)}"

    left = f"{salt('Fe', p, 'SO4', r)} + {salt('Ca', q, 'NO3', s)}"
    right = f"{salt('Fe', p, 'NO3', s)} + {salt('Ca', q, 'SO4', r)}"
    first, second = balanced(f"{left} = {right}").split(" = ")
    assert side_total(first) == side_total(second)
    dissolved = balanced(f"{salt('Fe', p, 'SO4', r)} = Fe^{p}+ + SO4^{r}-")
    assert numbers(dissolved) == [1, r // gcd(p, r), p // gcd(p, r)]


@given(st.integers(1, 9), st.integers(1, 9), st.sampled_from(["e-", "e⁻", "e−", "e(-)", "e^-"]))
def test_a_half_reaction_takes_the_electrons_of_its_charges(high: int, low: int, electron: str) -> None:
    """A bare half reaction takes as many electrons as the charge falls by."""
    assume(high > low)
    done = balanced(f"Mn^{high}+ + {electron} = Mn^{low}+")
    assert numbers(done) == [1, high - low, 1]


SPELLINGS = [
    "MnO4- + Fe^2+ + H+ = Mn^2+ + Fe^3+ + H2O", "MnO4-+Fe^2++H+=Mn^2++Fe^3++H2O",
    "MnO₄⁻ + Fe²⁺ + H⁺ → Mn²⁺ + Fe³⁺ + H₂O", "MnO4(-) + Fe(2+) + H(+) ⇌ Mn(2+) + Fe(3+) + H2O",
    "MnO4−\u00a0+ Fe++ + H+ <=> Mn++ + Fe+++ + H2O", "MnO4-(aq)+Fe^2+(aq)+H+(aq)->Mn^2+(aq)+Fe^3+(aq)+H2O(l)",
    "MnO4^- (aq) + Fe^2+ (aq) + H+ (aq) -> Mn^2+ (aq) + Fe^3+ (aq) + H2O (l)",
]  # fmt: skip


@pytest.mark.parametrize("written", SPELLINGS)
def test_every_spelling_balances_through_the_worksheet_functions(written: str) -> None:
    """The worksheet functions give the same coefficients and differences however the equation is spelt."""
    done = thermofuncs.call("BALANCED", written)
    assert isinstance(done, str)
    coefficients = [n or 1 for _, n in ((t.species, t.coefficient) for t in terms_of(done))]
    assert coefficients == [1, 5, 8, 1, 5, 4]
    assert thermofuncs.call("IMBALANCE", done) == [["what", "left", "right", "missing"], ["balanced", "", "", ""]]
    assert thermofuncs.call("IMBALANCE", written) == imbalance(SPELLINGS[0])


def terms_of(equation: str) -> tuple[Term, ...]:
    """The terms of an equation text, left to right."""
    read = parse_equation(equation)
    return (*read.reactants, *read.products)


@given(HARD_TEXTS)
def test_no_text_makes_balancing_fail_otherwise(text: str) -> None:
    """Any text balances into an equation without imbalance, or is refused with a sentence."""
    try:
        done = balanced(text)
    except ThermofuncsError as error:
        assert error.sentence.startswith("equation ")
    else:
        assert imbalance(done)[1][0] == "balanced"
