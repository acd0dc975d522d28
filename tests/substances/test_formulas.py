"""Chemical formulas and species; the composition of nested groups against chemicals, a reference implementation."""

from __future__ import annotations

import contextlib
from fractions import Fraction

import pytest
from chemicals.elements import nested_formula_parser
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.errors import FormulaNotRead, FormulaTooLong, ThermofuncsError, TwoReadings
from thermofuncs.substances.formulas import LONGEST, parse_formula, parse_species
from thermofuncs.substances.index import index
from thermofuncs.substances.printed import composition_key
from thermofuncs.substances.symbols import COMMON, ELEMENTS, recased

COUNTS = st.one_of(
    st.integers(1, 40).map(str),
    st.integers(1, 999).map(lambda n: f"0.{n:03d}"),
)
GROUPS = st.lists(st.tuples(st.sampled_from(sorted(ELEMENTS)), COUNTS), min_size=1, max_size=5)
LETTERS = "CHONaFesgl()[]{}·*.,+-^²⁻₂0123456789 ½e\u00a0ΔαIVX"
HARD_TEXTS = st.one_of(st.text(max_size=60), st.text(alphabet=LETTERS, max_size=60))

READ = [
    # text, atoms, charge, phase
    ("CO", {"C": 1, "O": 1}, 0, None),
    ("Co", {"Co": 1}, 0, None),
    ("H2O(l)", {"H": 2, "O": 1}, 0, "l"),
    ("H2O(L)", {"H": 2, "O": 1}, 0, "l"),
    ("H2O(cr)", {"H": 2, "O": 1}, 0, "s"),
    ("CO (g)", {"C": 1, "O": 1}, 0, "g"),
    ("Fe\u00a0(s)", {"Fe": 1}, 0, "s"),
    ("Fe(OH)3(s)", {"Fe": 1, "O": 3, "H": 3}, 0, "s"),
    ("Fe(CO)5(l)", {"Fe": 1, "C": 5, "O": 5}, 0, "l"),
    ("Ca(OH)2", {"Ca": 1, "O": 2, "H": 2}, 0, None),
    ("K(HF2)(a)", {"K": 1, "H": 1, "F": 2}, 0, "a"),
    ("NH4(l)", {"N": 1, "H": 4}, 0, "l"),
    ("(CH3COOH)2(g)", {"C": 4, "H": 8, "O": 4}, 0, "g"),
    ("K3[Fe(CN)6](s)", {"K": 3, "Fe": 1, "C": 6, "N": 6}, 0, "s"),
    ("{[(H)2]2}2", {"H": 8}, 0, None),
    ("Fe0.947O", {"Fe": Fraction(947, 1000), "O": 1}, 0, None),
    ("Fe.947O(cr)", {"Fe": Fraction(947, 1000), "O": 1}, 0, "s"),
    ("Fe2.5Ti0.5O4", {"Fe": Fraction(5, 2), "Ti": Fraction(1, 2), "O": 4}, 0, None),
    ("YBa2Cu3O6.5", {"Y": 1, "Ba": 2, "Cu": 3, "O": Fraction(13, 2)}, 0, None),
    ("CaSO4·2H2O(s)", {"Ca": 1, "S": 1, "O": 6, "H": 4}, 0, "s"),
    ("CaSO4*2H2O", {"Ca": 1, "S": 1, "O": 6, "H": 4}, 0, None),
    ("CaSO4 · 2 H2O", {"Ca": 1, "S": 1, "O": 6, "H": 4}, 0, None),
    ("CaSO4·½H2O", {"Ca": 1, "S": 1, "O": Fraction(9, 2), "H": 1}, 0, None),
    ("CaSO4·1/2H2O", {"Ca": 1, "S": 1, "O": Fraction(9, 2), "H": 1}, 0, None),
    ("(CaO)3·SiO2", {"Ca": 3, "O": 5, "Si": 1}, 0, None),
    ("H₂O", {"H": 2, "O": 1}, 0, None),
    ("D2O(l)", {"D": 2, "O": 1}, 0, "l"),
    ("Na+", {"Na": 1}, 1, None),
    ("Ca++", {"Ca": 1}, 2, None),
    ("Hg2++", {"Hg": 2}, 2, None),
    ("SO4^2-(aq)", {"S": 1, "O": 4}, -2, "aq"),
    ("SO4(2-)", {"S": 1, "O": 4}, -2, None),
    ("SO4(2-)(aq)", {"S": 1, "O": 4}, -2, "aq"),
    ("SO4²⁻", {"S": 1, "O": 4}, -2, None),
    ("SO₄²⁻(aq)", {"S": 1, "O": 4}, -2, "aq"),
    ("SO₄2-", {"S": 1, "O": 4}, -2, None),
    ("SO4^(2-)", {"S": 1, "O": 4}, -2, None),
    ("Fe^+3", {"Fe": 1}, 3, None),
    ("Fe(3+)", {"Fe": 1}, 3, None),
    ("Fe₃+", {"Fe": 3}, 1, None),
    ("Fe3^+", {"Fe": 3}, 1, None),
    ("[Fe(CN)6]^3-", {"Fe": 1, "C": 6, "N": 6}, -3, None),
    ("NO3-", {"N": 1, "O": 3}, -1, None),
    ("Al(OH)4-(aq)", {"Al": 1, "O": 4, "H": 4}, -1, "aq"),
    ("NH4+(aq)", {"N": 1, "H": 4}, 1, "aq"),
    ("C60-", {"C": 60}, -1, None),
    ("NO3−(aq)", {"N": 1, "O": 3}, -1, "aq"),
    ("SO4^2−", {"S": 1, "O": 4}, -2, None),
    ("\u200bH2\u2060O\ufeff", {"H": 2, "O": 1}, 0, None),
    ("HNO3", {"H": 1, "N": 1, "O": 3}, 0, None),
    ("(NH4)2SO4", {"N": 2, "H": 8, "S": 1, "O": 4}, 0, None),
    ("Fe(CN)6^4-(aq)", {"Fe": 1, "C": 6, "N": 6}, -4, "aq"),
    ("CuSO4•5H2O", {"Cu": 1, "S": 1, "O": 9, "H": 10}, 0, None),
    ("BaCO3(c)", {"Ba": 1, "C": 1, "O": 3}, 0, "c"),
    ("e-", {}, -1, None),
    ("e-(g)", {}, -1, "g"),
    ("e⁻", {}, -1, None),
    ("SiO2(quartz)", {"Si": 1, "O": 2}, 0, "quartz"),
    ("SiO2(a-qz)", {"Si": 1, "O": 2}, 0, "a-qz"),
    ("Fe(α)", {"Fe": 1}, 0, "α"),
    ("Fe(alpha)", {"Fe": 1}, 0, "alpha"),
    ("Fe(hcp)", {"Fe": 1}, 0, "hcp"),
    ("C(gr)", {"C": 1}, 0, "gr"),
    ("CaSO4(II)", {"Ca": 1, "S": 1, "O": 4}, 0, "II"),
    ("Cr2O3(I')", {"Cr": 2, "O": 3}, 0, "I'"),
    ("WO3(III,II)", {"W": 1, "O": 3}, 0, "III,II"),
]

DOUBTFUL = [
    # text, both proposals
    ("Fe3+", "Fe^3+", "Fe3^+"),
    ("Fe2+(aq)", "Fe^2+", "Fe2^+"),
    ("O2-", "O^2-", "O2^-"),
    ("SO42-", "SO4^2-", "SO42^-"),
    ("Cr2O72-", "Cr2O7^2-", "Cr2O72^-"),
    ("Hg22+", "Hg2^2+", "Hg22^+"),
    ("VO2+", "VO^2+", "VO2^+"),
    ("FeSCN2+", "FeSCN^2+", "FeSCN2^+"),
    ("Fe(OH)2+", "Fe(OH)^2+", "Fe(OH)2^+"),
    ("[Fe(CN)6]3-", "[Fe(CN)6]^3-", "[Fe(CN)6]3^-"),
    ("CuSO4.5H2O", "CuSO4·5H2O", "CuS(O4.5)H2O"),
    ("CaO.2SiO2", "CaO·2SiO2", "Ca(O.2)SiO2"),
    ("Fe(S)", "Fe(s)", "FeS"),
    ("C(Cr)", "C(cr)", "CCr"),
]

REFUSED = [
    # text, why
    ("NACL", "did you mean NaCl"),
    ("nacl", "did you mean NaCl"),
    ("Nacl", "did you mean NaCl"),
    ("caco3", "did you mean CaCO3"),
    ("co", "did you mean CO or Co"),
    ("ALCL3", "did you mean AlCl3"),
    ("Ca(Oh)2", "did you mean Ca(OH)2"),
    ("Ca(oh)", "did you mean Ca(OH)"),
    ("Ca(no3)", "(no3) is no group of atoms and no phase"),
    ("K(scn)", "did you mean K(SCN)"),
    ("H2O(1)", "did you mean H2O(l)"),
    ("H2O( )", "a pair of brackets is empty"),
    ("CO2(gas)", "did you mean CO2(g)"),
    ("CO2(G)", "did you mean CO2(g)"),
    ("CO2(g, 298 K)", "did you mean CO2(g)"),
    ("H2O(liquid)", "did you mean H2O(l)"),
    ("Fe(Solid)", "did you mean Fe(s)"),
    ("NaCl(aq,1m)", "did you mean NaCl(aq)"),
    ("NaCl(aqueous)", "did you mean NaCl(aq)"),
    ("C2H2,acetylene", "has a comma and a name behind the formula"),
    ("H0.123456789012345", "has more than 15 digits"),
    ("H02", "the count 02 begins with a zero: is the letter O meant?"),
    ("H0", "the count 0 begins with a zero"),
    ("Fe0,947O", "decimals are written with a point"),
    ("CaO.SiO2", "water of crystallisation is written CaO·SiO2"),
    ("Fe+3", "a charge is written behind a caret, the number first: Fe^3+"),
    ("SO4-2", "a charge is written behind a caret, the number first: SO4^2-"),
    ("Fe(II)Cl2", "(II) is an oxidation number"),
    ("Cu(I)Cl", "(I) is an oxidation number"),
    ("FeCl2(aq)(s)", "a phase stands once, at the end and behind the charge"),
    ("Na(aq)+", "a phase stands once, at the end and behind the charge"),
    ("Fe[OH)3", 'the bracket at ")3" closes none of its kind'),
    ("Fe(OH", 'the bracket at "(OH" is not closed'),
    ("Fe()", "a pair of brackets is empty"),
    ("H2O( )", "a pair of brackets is empty"),
    ("2H2O", "the number 2 before it is a coefficient"),
    ("3CaO·SiO2", "the number 3 before it is a coefficient"),
    ("e+", "an electron is written e-"),
    ("Na+-", '"+-" is no charge'),
    ("Na^0+", "0 is no charge number"),
    ("Na^00+", "0 is no charge number"),
    ("Na^2++", '"2++" is no charge'),
    ("SO4^", "a charge is a number and a sign behind the caret"),
    ("Na+Cl", "a plus between species in spaces"),
    ("Na Cl", '" Cl" does not begin with an element symbol'),
    ("water", '"water" does not begin with an element symbol.'),
    ("Xy2O", '"Xy2O" does not begin with an element symbol.'),
    ("H\u0662O", "does not begin with an element symbol"),
    ("(" * 30 + "H" + ")" * 30, "more than 20 times"),
    ("CaSO4·", "there is no formula in it"),
    ("", "there is no formula in it"),
    (" ", "there is no formula in it"),
    ("(s)", "a phase stands once"),
    ("H9999999", "is no count of atoms"),
]


@pytest.mark.parametrize(("text", "atoms", "charge", "phase"), READ)
def test_what_a_formula_says(text: str, atoms: dict[str, int | Fraction], charge: int, phase: str | None) -> None:
    """Atoms, charge and phase of a formula are those that the notation states."""
    formula = parse_species(text)
    assert (dict(formula.exact), formula.charge, formula.phase) == (atoms, charge, phase)


@pytest.mark.parametrize(("text", "one", "other"), DOUBTFUL)
def test_two_readings_are_refused_with_both(text: str, one: str, other: str) -> None:
    """A text with two readings is refused, and each proposal reads as itself and differs from the other."""
    with pytest.raises(TwoReadings) as raised:
        parse_species(text, "formula")
    assert raised.value.sentence == f'formula has "{text}", which has two readings: write {one} or {other}.'
    first, second = parse_species(one), parse_species(other)
    assert (first.exact, first.charge, first.phase) != (second.exact, second.charge, second.phase)


@pytest.mark.parametrize(("text", "why"), REFUSED)
def test_what_is_no_formula_is_refused_with_the_remedy(text: str, why: str) -> None:
    """What is no formula is refused with the place or the spelling that would do."""
    with pytest.raises(FormulaNotRead) as raised:
        parse_species(text, "formula")
    assert why in raised.value.sentence
    assert raised.value.sentence.startswith('formula has "')
    assert raised.value.worksheet_value == "#VALUE!"


def test_a_formula_may_have_400_characters_and_no_more() -> None:
    """A formula of 400 characters is read and one of 401 is refused with its beginning."""
    assert parse_formula("H" * LONGEST).exact == {"H": LONGEST}
    with pytest.raises(FormulaTooLong) as raised:
        parse_formula("H" * (LONGEST + 1))
    assert "formula has a formula of more than 400 characters, beginning" in raised.value.sentence


def test_every_element_is_known() -> None:
    """The 118 elements and deuterium are read, and no other symbol is."""
    assert len(ELEMENTS) == 119
    letters = "abcdefghijklmnopqrstuvwxyz"
    pairs = [a.upper() + b for a in letters for b in ["", *letters]]
    for symbol in pairs:
        if symbol in ELEMENTS:
            assert parse_formula(symbol).exact == {symbol: 1}
        else:
            with pytest.raises(FormulaNotRead):
                parse_formula(symbol)


def test_a_formulas_composition_is_its_exact_count_as_numbers() -> None:
    """The composition in floating point is the exact one, rounded once."""
    assert parse_formula("Fe0.947O").composition == {"Fe": 0.947, "O": 1.0}


# structures with a bond, and mixtures
NAMES_OF_THE_PUBLISHER = {"CH2Br-COOH(g)", "CH2Cl-COOH(g)", "Air(g)", "JP-10(g)", "Jet-A(g)", "Jet-A(l)"}


def test_every_label_of_the_bundled_data_reads_as_its_own_composition() -> None:
    """A label that is shown for a bundled record reads as that record's composition, charge and kind of phase."""
    read = 0
    for label, entries in index().labels.items():
        entry = entries[0]
        if entry.usable or "," in label.partition("(")[0] or label in NAMES_OF_THE_PUBLISHER:
            continue
        formula = parse_species(label)
        assert f"{composition_key(tuple(formula.composition.items()))}|{formula.charge}" == entry.key, label
        assert entry.phase == (formula.phase if formula.phase in ("g", "l", "aq") else "s"), label
        read += 1
    assert read > 2000


@given(GROUPS, st.integers(-9, 9), st.sampled_from(["", "(g)", "(l)", "(s)", "(aq)", "(II)", "(quartz)"]))
def test_a_written_formula_reads_back(atoms: list[tuple[str, str]], charge: int, phase: str) -> None:
    """A formula written from symbols, counts, charge and phase reads back as these."""
    body = "".join(f"{symbol}{n}" for symbol, n in atoms)
    sign = f"^{abs(charge)}{'+' if charge > 0 else '-'}" if charge else ""
    formula = parse_species(body + sign + phase)
    expected: dict[str, Fraction] = {}
    for symbol, n in atoms:
        expected[symbol] = expected.get(symbol, Fraction(0)) + Fraction(n)
    assert dict(formula.exact) == expected
    assert formula.charge == charge
    assert formula.phase == (phase.strip("()") or None)


@given(GROUPS, st.integers(2, 9))
def test_a_group_counts_as_often_as_it_says(atoms: list[tuple[str, str]], times: int) -> None:
    """A group in brackets with a count has that many times the atoms of the group."""
    body = "".join(f"{symbol}{n}" for symbol, n in atoms)
    once, often = parse_formula(body).exact, parse_formula(f"[{body}]{times}").exact
    assert often == {symbol: n * times for symbol, n in once.items()}


ATOMS = st.tuples(st.sampled_from(sorted(COMMON - {"I", "V"})), st.integers(1, 30)).map(
    lambda atom: f"{atom[0]}{atom[1] if atom[1] > 1 else ''}"
)
NESTED = st.recursive(
    st.lists(ATOMS, min_size=1, max_size=4).map("".join),
    lambda inner: st.tuples(inner, inner, st.integers(2, 12)).map(lambda x: f"{x[0]}({x[1]}){x[2]}"),
    max_leaves=6,
)


@given(NESTED)
def test_nested_groups_count_as_a_reference_implementation_counts_them(text: str) -> None:
    """The atoms of groups within groups are those that a reference implementation counts."""
    assert dict(parse_formula(text).exact) == nested_formula_parser(text)


@given(st.lists(NESTED, min_size=2, max_size=4), st.integers(2, 12), st.sampled_from("·*•"))
def test_parts_behind_a_dot_add_up(parts: list[str], times: int, dot: str) -> None:
    """What stands behind a dot is added, multiplied by the number before it."""
    total: dict[str, int] = {}
    for place, part in enumerate(parts):
        for symbol, n in nested_formula_parser(part).items():
            total[symbol] = total.get(symbol, 0) + n * (times if place else 1)
    assert dict(parse_formula(f"{dot}{times}".join(parts)).exact) == total


@given(st.lists(st.sampled_from(sorted(COMMON)), min_size=1, max_size=6))
def test_letters_of_the_wrong_case_are_never_read_as_an_element_by_luck(symbols: list[str]) -> None:
    """A formula in small letters is refused, and the proposal spells the same letters."""
    text = "".join(symbols).lower()
    if text == "e":
        return
    with pytest.raises(FormulaNotRead):
        parse_formula(text)
    assert recased(text).lower() == text


@given(HARD_TEXTS)
def test_no_text_makes_the_parser_fail_otherwise(text: str) -> None:
    """Any text is a formula with positive counts, or is refused with a sentence that a cell can hold."""
    try:
        formula = parse_species(text)
    except ThermofuncsError as error:
        assert error.sentence.startswith("reaction has ")
        assert len(error.sentence) < 330
    else:
        assert all(n > 0 for n in formula.exact.values())
        assert set(formula.exact) <= ELEMENTS
        assert formula.exact or formula.charge == -1


@pytest.mark.parametrize(
    "text",
    ["co" * 200, "CO" * 200, "Co(" * 133, "(" * 400, "[(" * 200, "1" * 400, "H" + "0" * 399, "C+" * 200, "^" * 400,
     "C.2" * 130, "·" * 400, "(g)" * 133, "Fe" + "3" * 300 + "+", "a" * 400, "H" + "+" * 399, "²" * 400,
     "x(" + "oh" * 190 + ")", "H(" + "I" * 390 + ")"],
)  # fmt: skip
def test_hostile_formulas_are_answered(text: str) -> None:
    """A text that would take a backtracking parser for ever is read or refused (a hang is the failure)."""
    with contextlib.suppress(ThermofuncsError):
        parse_species(text)
