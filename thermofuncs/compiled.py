"""Compiled tables for what a cell names: a reaction, a formation, a substance; kept under a bound."""

from __future__ import annotations

import math
from collections.abc import Mapping
from fractions import Fraction
from functools import lru_cache

from thermofuncs.combination import ATM_IN_BAR, Combination, Member
from thermofuncs.errors import BareElectron, UserReactionBasis
from thermofuncs.reactions import ELECTRON, Equation, check_balance, parse_equation
from thermofuncs.substances.common_names import normal_text
from thermofuncs.substances.elements import reference_element
from thermofuncs.substances.forms import anchored, constant
from thermofuncs.substances.lookup import find_substance
from thermofuncs.substances.records import Note, Segment, Substance, SubstanceRow
from thermofuncs.substances.user_table import UserData, UserReaction
from thermofuncs.units import R

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
    if data is not None and (own := _own_row(equation, data)) is not None:
        return _from_row(text, equation, own, atm=atm, extrapolate=extrapolate)
    found = {species: _found(species, data) for _, species in equation.net()}
    check_balance(equation, found)
    members = [Member(float(n), found[species]) for n, species in equation.net()]
    return Combination(text, members, atm=atm, extrapolate=extrapolate)


def _found(species: str, data: UserData | None) -> Substance:
    """The substance of an equation; a bare electron has no data here."""
    if species == ELECTRON:
        raise BareElectron
    return find_substance(species, data)


def _own_row(equation: Equation, data: UserData) -> tuple[UserReaction, Fraction] | None:
    """The user's row of this reaction, and the factor that makes it this one; negative for its reverse."""
    wanted = {normal_text(species): n for n, species in equation.net()}
    for row in data.reactions:
        given = {normal_text(species): n for n, species in parse_equation(row.equation, "data").net()}
        if given.keys() != wanted.keys():
            continue
        factors = {wanted[species] / n for species, n in given.items()}
        if len(factors) == 1:
            return row, factors.pop()
    return None


def _from_row(
    text: str, equation: Equation, own: tuple[UserReaction, Fraction], *, atm: bool, extrapolate: bool
) -> Combination:
    """The table of a reaction that a row of the user's data gives as a whole, scaled to the equation."""
    row, scale = own
    gas_moles = equation.gas_moles()
    if atm and gas_moles is None:
        raise UserReactionBasis(what=text)
    shift = -float((gas_moles or 0) / scale) * math.log(ATM_IN_BAR) if atm else 0.0
    interval = anchored(
        row.t_low, row.t_high, constant((row.drcp or 0.0) / R), row.drh / R, row.drs / R + shift, row.t_ref
    )
    notes = () if row.drcp is not None else (
        Note(f"no ΔrCp° is given, so ΔrH° and ΔrS° are held at their values of {row.t_ref:g} K."),
    )
    whole = SubstanceRow(
        row.equation, row.equation, {}, 0, "s", 0.0, (interval,), row.drh, row.source, notes=notes
    )
    substance = Substance(row.equation, (Segment(row.t_low, row.t_high, whole),))
    return Combination(text, [Member(float(scale), substance)], extrapolate=extrapolate)


@lru_cache(maxsize=BOUND)
def electrode_reaction(text: str, data: UserData | None, atm: bool, extrapolate: bool) -> Combination:
    """The table of a reaction in which a bare electron stands for ½ H₂(g) − H⁺(aq). Parameters as above."""
    equation = parse_equation(text)
    electrons = sum(float(c) for c, species in equation.net() if species == ELECTRON)
    if not electrons:
        return reaction(text, data, atm, extrapolate)
    found = {species: find_substance(species, data) for _, species in equation.net() if species != ELECTRON}
    check_balance(equation, found)
    parts = [Member(float(n), found[species]) for n, species in equation.net() if species != ELECTRON]
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

