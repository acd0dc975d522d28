"""Compiled tables for what a cell names: a reaction, a formation, a substance; kept under a bound."""

from __future__ import annotations

import math
from collections.abc import Mapping
from fractions import Fraction
from functools import lru_cache

from thermofuncs.combination import ATM_IN_BAR, Combination, Member
from thermofuncs.errors import BareElectron, UserReactionBasis
from thermofuncs.reactions import ELECTRON, Equation, check_balance, parse_equation
from thermofuncs.substances.lookup import find_substance, reference_element
from thermofuncs.substances.records import Substance
from thermofuncs.substances.user_table import UserData, UserReaction, reaction_row

BOUND = 4096


@lru_cache(maxsize=BOUND)
def reaction(text: str, data: UserData | None, atm: bool, extrapolate: bool) -> Combination:
    """The table of a reaction.

    Parameters
    ----------
    text : str. Equation text.
    data : UserData or None. Goes before the bundled data.
    atm : bool. Gases at a standard pressure of 1 atm.
    extrapolate : bool.

    Raises
    ------
    ThermofuncsError: the text cannot be read, does not balance, or names what the data lacks.
    """
    equation = parse_equation(text)
    if data is not None and (row := data.reaction(equation)) is not None:
        return _from_row(text, equation, row, atm=atm, extrapolate=extrapolate)
    members = [(c, found(species, data)) for species, c in equation.net()]
    check_balance(equation, {species: s for (species, _), (_, s) in zip(equation.net(), members, strict=True)})
    return Combination(
        text, [Member(float(c), s) for c, s in members], atm=atm, extrapolate=extrapolate
    )


def found(species: str, data: UserData | None) -> Substance:
    """The substance of an equation; a bare electron has no data here."""
    if species == ELECTRON:
        raise BareElectron()
    return find_substance(species, data)


def _from_row(
    text: str, equation: Equation, row: tuple[UserReaction, Fraction], *, atm: bool, extrapolate: bool
) -> Combination:
    """The table of a reaction that a row of the user's data gives as a whole, scaled to the equation."""
    given, scale = row
    if atm and equation.gas_moles() is None:
        raise UserReactionBasis(what=text)
    shift = -float(equation.gas_moles() or 0) * _LN_ATM if atm else 0.0
    substance = reaction_row(given, entropy_shift=shift / float(scale))
    return Combination(text, [Member(float(scale), substance)], extrapolate=extrapolate)


@lru_cache(maxsize=BOUND)
def electrode_reaction(text: str, data: UserData | None, atm: bool, extrapolate: bool) -> Combination:
    """The table of a reaction in which a bare electron stands for ½ H₂(g) − H⁺(aq). Parameters as above."""
    equation = parse_equation(text)
    electrons = sum(float(c) for c, species in equation.net() if species == ELECTRON)
    if not electrons:
        return reaction(text, data, atm, extrapolate)
    members = [(c, find_substance(s, data)) for c, s in equation.net() if s != ELECTRON]
    check_balance(equation, {s: x for (_, s), (_, x) in zip(
        [(c, s) for c, s in equation.net() if s != ELECTRON], members, strict=True)})
    parts = [Member(float(c), s) for c, s in members]
    parts += [Member(0.5 * electrons, find_substance("H2(g)")), Member(-electrons, find_substance("H+(aq)"))]
    return Combination(text, parts, atm=atm, extrapolate=extrapolate)


@lru_cache(maxsize=BOUND)
def substance(text: str, data: UserData | None, atm: bool, extrapolate: bool) -> Combination:
    """The table of one substance. Parameters as in reaction."""
    one = find_substance(text, data, "substance")
    return Combination(one.label, [Member(1.0, one)], atm=atm, extrapolate=extrapolate)


@lru_cache(maxsize=BOUND)
def formation(text: str, data: UserData | None, atm: bool, extrapolate: bool) -> Combination:
    """The table of the formation of a substance from the elements in their reference phases.

    An aqueous ion is formed with hydrogen ions and hydrogen gas in place of electrons, H⁺(aq) being zero
    (the convention of the NBS tables, Wagman et al. 1982); a gaseous one with the electron gas.
    Parameters as in reaction.
    """
    one = find_substance(text, data, "substance")
    members = [Member(1.0, one)]
    members += [Member(-n, s) for n, s in _elements(one)]
    return Combination(f"formation of {one.label}", members, atm=atm, extrapolate=extrapolate)


def _elements(one: Substance) -> list[tuple[float, Substance]]:
    needed: dict[str, float] = dict(one.composition)
    if one.charge and one.phase != "aq":
        needed["E"] = -float(one.charge)
    if one.charge and one.phase == "aq":
        needed["H"] = needed.get("H", 0.0) - float(one.charge)
    parts = []
    for element, atoms in needed.items():
        if atoms:
            reference = reference_element(element)
            parts.append((atoms / _atoms(reference.composition, element), reference))
    return parts


def _atoms(composition: Mapping[str, float], element: str) -> float:
    return composition.get(element, 1.0)


_LN_ATM = math.log(ATM_IN_BAR)
