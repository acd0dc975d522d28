"""Equation text to stoichiometry, and the balance of atoms and charge.

``CO(g) + 2 H2(g) = CH3OH(g)``: ``=``, ``->``, ``→``, ``⇌`` or ``<=>`` between the sides; coefficients ``2``,
``0.5``, ``1/2``, ``½`` or ``1½``; a plus sign directly behind a formula is its charge unless a species follows
without a space. A bare ``e-`` is an electron. A number before water of crystallisation,
without a space, as in ``2CaSO4·2H2O``, is refused with both readings.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from typing import Protocol

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
from thermofuncs.substances.common_names import PLAIN_SIGNS
from thermofuncs.substances.formulas import parse_species

ELECTRON = "e-"
LONGEST = 8192
LONGEST_TERM = 400
BALANCE_TOLERANCE = 1e-9

_SEPARATOR = re.compile(r"<=>|<->|(?<= )-->|->|=>|[=→⇌⇄⟶]")
_PLAIN = PLAIN_SIGNS | str.maketrans({"＋": "+", "＝": "="})
_VULGAR = {
    "½": "1/2", "⅓": "1/3", "⅔": "2/3", "¼": "1/4", "¾": "3/4", "⅕": "1/5", "⅖": "2/5", "⅗": "3/5", "⅘": "4/5",
    "⅙": "1/6", "⅚": "5/6", "⅛": "1/8", "⅜": "3/8", "⅝": "5/8", "⅞": "7/8",
}  # fmt: skip
_DIGITS = "[0-9]{1,15}"
_PARTS = "".join(_VULGAR)
_COEFFICIENT = re.compile(
    rf"(\?|{_DIGITS} ?/ ?{_DIGITS}|{_DIGITS}\.{_DIGITS}|\.{_DIGITS}|{_DIGITS}[{_PARTS}]|{_DIGITS}|[{_PARTS}])"
    r"(?![0-9.,/])( ?[·×] ?| ?)(?=\S)"
)
_COMMA = re.compile(r"[0-9]{1,15},[0-9]{1,15}(?=[\sA-Z(\[]|e-)")
_NUMBERED_NAME = re.compile(r"[0-9]+(?:,[0-9]+)*-[A-Za-z]")
_NUMBER = re.compile(r"\(?[0-9.+*·×/-]")
_ELECTRONS = frozenset({"e-", "e⁻", "e^-", "e(-)"})
_WATER = re.compile("[·*•⋅∙]")
_ENDED = re.compile(r"(?: |[⁺⁻-]|\((?:g|l|s|cr|aq)\))\Z")
# no sign, closing bracket, phase, or a charge number as in Fe+3
_SPECIES_AHEAD = re.compile(r"(?![0-9]+(?: ?\+| ?\Z|\((?:g|l|s|cr|aq)\)))[^\s+)\]}^(\[{]|[(\[{](?![IVL])[A-Z]")
_PLUS_AND_SPACE = re.compile(r"\+ (?!\((?:g|l|s|cr|aq)\)$)")
_SPACED_PHASE = re.compile(r" \((g|l|s|cr|aq)\)$")


class Composed(Protocol):
    """Whatever has a composition and a charge."""

    @property
    def composition(self) -> Mapping[str, float]:
        """Atoms by element symbol."""

    @property
    def charge(self) -> int:
        """Charge number."""


@dataclass(frozen=True, slots=True)
class Term:
    """A species with its coefficient as written: None where none is, ``unknown`` where ``?`` stands."""

    species: str
    coefficient: Fraction | None
    unknown: bool = False

    def __str__(self) -> str:
        if self.unknown:
            return f"? {self.species}"
        return self.species if self.coefficient in (None, 1) else f"{self.coefficient} {self.species}"


@dataclass(frozen=True, slots=True)
class Equation:
    """An equation read.

    Parameters
    ----------
    reactants, products : tuple of Term, in the order written.
    """

    reactants: tuple[Term, ...]
    products: tuple[Term, ...]

    def __str__(self) -> str:
        sides = (" + ".join(map(str, side)) for side in (self.reactants, self.products))
        return " = ".join(sides)

    def net(self) -> list[tuple[Fraction, str]]:
        """Stoichiometric numbers by species, negative for reactants; what cancels is left out."""
        total: dict[str, Fraction] = {}
        for sign, side in ((-1, self.reactants), (1, self.products)):
            for term in side:
                number = sign * (Fraction(1) if term.coefficient is None else term.coefficient)
                total[term.species] = total.get(term.species, Fraction(0)) + number
        return [(n, species) for species, n in total.items() if n]

    def gas_moles(self) -> Fraction | None:
        """Sum of the stoichiometric numbers of the gases; None where a phase is not written."""
        total = Fraction(0)
        for number, species in self.net():
            phase = _written_phase(species)
            if phase is None:
                return None
            total += number if phase == "g" else 0
        return total

    def reversed(self) -> Equation:
        """The reverse reaction."""
        return Equation(self.products, self.reactants)

    def scaled(self, times: Fraction) -> Equation:
        """The reaction with all coefficients multiplied by a positive number."""
        sides = (
            tuple(Term(t.species, (t.coefficient or Fraction(1)) * times) for t in side)
            for side in (self.reactants, self.products)
        )
        return Equation(*sides)


def _written_phase(species: str) -> str | None:
    try:
        return parse_species(species).phase
    except ThermofuncsError:
        found = re.search(r"\((g|l|s|cr|aq)\)$", species)
        return found[1] if found else None


def parse_equation(text: str, argument: str = "reaction", *, unknowns: bool = False) -> Equation:
    """Read an equation.

    Parameters
    ----------
    text : str.
    argument : str. The name used in an error's sentence.
    unknowns : bool. Whether ``?`` may stand for a coefficient.

    Returns
    -------
    Equation

    Raises
    ------
    NotOneSeparator, EmptySide, CoefficientNotRead, CoefficientNotGiven, DecimalComma, TwoReadings, NothingReacts,
    EquationTooLong, FormulaTooLong: the sentence says what stands where and what would do.

    Examples
    --------
    >>> str(parse_equation("2H2(g)+O2(g) -> 2 H2O(g)"))
    '2 H2(g) + O2(g) = 2 H2O(g)'
    """
    found = _parsed(text)
    if not isinstance(found, Equation):
        kind, data = found
        raise kind(argument=argument, **data)
    if not unknowns:
        for term in (*found.reactants, *found.products):
            if term.unknown:
                raise CoefficientNotGiven(argument=argument, given=str(term)[:60])
    return found


Failure = tuple[type[ThermofuncsError], dict[str, str]]


class _Stop(Exception):
    """Carries a failure to the cache."""

    def __init__(self, kind: type[ThermofuncsError], **data: str) -> None:
        super().__init__()
        self.failure: Failure = (kind, data)


@lru_cache(maxsize=4096)
def _parsed(text: str) -> Equation | Failure:
    try:
        return _equation(text)
    except _Stop as stop:
        return stop.failure


def _equation(text: str) -> Equation:
    if len(text) > LONGEST:
        raise _Stop(EquationTooLong, given=text[:40], most=str(LONGEST))
    line = " ".join(text.translate(_PLAIN).split())
    sides = _SEPARATOR.split(line)
    if len(sides) != 2:
        raise _Stop(NotOneSeparator, given=line[:80], count=str(len(sides) - 1))
    equation = Equation(*(tuple(_term(t) for t in _split_side(side.strip(), line)) for side in sides))
    if not equation.net() and not any(t.unknown for t in (*equation.reactants, *equation.products)):
        raise _Stop(NothingReacts, given=line[:80])
    return equation


def _split_side(side: str, line: str) -> list[str]:
    """The terms of a side: a plus is a separator behind a space, a phase or a sign, or before a species."""
    terms: list[str] = []
    start = depth = 0
    for i, sign in enumerate(side):
        depth += (sign in "([{") - (sign in ")]}")
        if sign != "+" or depth > 0:
            continue
        if _ENDED.search(side, max(0, i - 4), i) or (side[start:i].strip() and _SPECIES_AHEAD.match(side, i + 1)):
            terms.append(side[start:i].strip())
            start = i + 1
    terms.append(side[start:].strip())
    if not all(terms):
        raise _Stop(EmptySide, given=line[:80])
    if depth:
        raise _Stop(FormulaNotRead, given=side[:60], why="its brackets do not close each other")
    for term in terms:
        if _PLUS_AND_SPACE.search(term):
            one, other = term.replace("+ ", " + ", 1), term.replace("+ ", "+ + ", 1)
            raise _Stop(TwoReadings, given=term[:60], one=one[:60], other=other[:60])
    return terms


def _term(text: str) -> Term:
    if _NUMBERED_NAME.match(text):
        return Term(_spelled(text), None)
    if found := _COMMA.match(text):
        raise _Stop(DecimalComma, given=text[:60], proposal=found[0].replace(",", "."))
    found = _COEFFICIENT.match(text)
    if found is None:
        if _NUMBER.match(text) or text[0] == "?":
            raise _Stop(CoefficientNotRead, given=text[:60])
        return Term(_spelled(text), None)
    species = text[found.end() :].strip()
    if (_NUMBER.match(species) or species[0] == "?") and not _NUMBERED_NAME.match(species):
        raise _Stop(CoefficientNotRead, given=text[:60])
    if found[1] == "?":
        return Term(_spelled(species), None, unknown=True)
    if not found[2] and (dot := _WATER.search(species)):
        counted = f"({species[: dot.start()]}){found[1]}{species[dot.start() :]}"
        raise _Stop(TwoReadings, given=text[:60], one=f"{found[1]} {species}"[:60], other=counted[:60])
    number = _number(found[1])
    if number <= 0:
        raise _Stop(CoefficientNotRead, given=text[:60])
    return Term(_spelled(species), number)


def _spelled(species: str) -> str:
    """One spelling of the electron, and of a phase behind a space."""
    if len(species) > LONGEST_TERM:
        raise _Stop(FormulaTooLong, given=species[:40], most=str(LONGEST_TERM))
    return ELECTRON if species in _ELECTRONS else _SPACED_PHASE.sub(r"(\1)", species)


def _number(text: str) -> Fraction:
    last = text[-1]
    if last in _VULGAR:
        whole = Fraction(text[:-1]) if text[:-1] else Fraction(0)
        return whole + Fraction(_VULGAR[last])
    if "/" in text:
        over, under = (int(part) for part in text.split("/"))
        return Fraction(over, under) if under else Fraction(0)
    return Fraction(text)


def differences(
    equation: Equation, composed: Mapping[str, Composed]
) -> dict[str, tuple[float, float]]:
    """What the two sides hold of each element, and of charge, where they differ.

    Parameters
    ----------
    equation : Equation.
    composed : mapping of the equation's species to what has their composition and charge.
    """
    held: dict[str, list[float]] = {}
    for side, terms in enumerate((equation.reactants, equation.products)):
        for term in terms:
            if term.species != ELECTRON and term.species not in composed:
                continue  # it stands on both sides and cancels
            number = float(1 if term.coefficient is None else term.coefficient)
            atoms, charge = ({}, -1) if term.species == ELECTRON else (
                composed[term.species].composition, composed[term.species].charge
            )
            for element, n in (*atoms.items(), ("charge", charge)):
                if element != "E":
                    held.setdefault(element, [0.0, 0.0])[side] += number * n
    return {
        element: (left, right)
        for element, (left, right) in held.items()
        if abs(left - right) > BALANCE_TOLERANCE * max(1.0, abs(left), abs(right))
    }


def check_balance(
    equation: Equation, composed: Mapping[str, Composed], argument: str = "reaction"
) -> None:
    """Raise Unbalanced where atoms or charge differ, saying by how much. Parameters as in differences."""
    found = differences(equation, composed)
    if found:
        raise Unbalanced(argument=argument, what=str(equation)[:80], missing=missing_text(found)[:160])


def missing_text(found: Mapping[str, tuple[float, float]]) -> str:
    """Differences in words."""
    said = []
    for element, (left, right) in found.items():
        if element == "charge":
            said.append(f"charge {left:+g} on the left and {right:+g} on the right")
        else:
            side = "left" if left < right else "right"
            said.append(f"{abs(left - right):g} {element} missing on the {side}")
    return ", ".join(said)
