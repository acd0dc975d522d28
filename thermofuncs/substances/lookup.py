"""Finds the substance that a text of an equation names.

The order is: the user's own table, the publisher's name, the label that is shown, the everyday name, the
formula with its phase. ``(s)`` and ``(cr)`` are the solid through its transitions, ``(l)`` and ``(g)`` the
liquid and the gas, ``(aq)`` the solute; any other bracket names one form of the solid, such as ``Fe(a)`` or
``SiO2(quartz)``. A phase may be left out where there is one candidate.
"""

from __future__ import annotations

import difflib
import re
from collections.abc import Iterable
from functools import lru_cache
from typing import NoReturn

from thermofuncs.errors import (
    AmbiguousSubstance,
    InertCopy,
    NotUnderstood,
    OnlyAnEnthalpy,
    PhaseNotAvailable,
    ThermofuncsError,
    UnknownSubstance,
)
from thermofuncs.substances import chains
from thermofuncs.substances.common_names import PHASES, TAGGED, common_names, normal_text, normalised, tied_to
from thermofuncs.substances.elements import reference_element
from thermofuncs.substances.formulas import Formula, parse_species
from thermofuncs.substances.index import Entry, formula_key, index, row
from thermofuncs.substances.records import Substance, SubstanceRow
from thermofuncs.substances.user_table import UserData

__all__ = ["find_substance", "nearest", "reference_element", "search", "split_phase"]

GREEK = {
    "alpha": "a", "α": "a", "beta": "b", "β": "b", "gamma": "c", "γ": "c", "delta": "d", "δ": "d",
}  # fmt: skip

_SYMBOL = re.compile(r"[A-Z][a-z]?")


def find_substance(text: str, data: UserData | None = None, argument: str = "reaction") -> Substance:
    """The substance that a text names.

    Parameters
    ----------
    text : str. As in an equation: ``H2O(l)``, ``water``, ``Fe(s)``, ``SiO2(quartz)``, ``SO4^2-(aq)``.
    data : UserData or None. The user's own table, which goes first.
    argument : str. The name used in an error's sentence.

    Returns
    -------
    Substance

    Raises
    ------
    UnknownSubstance
        Nothing of that name; the nearest ones are in the sentence.
    AmbiguousSubstance
        Several candidates; all are in the sentence.
    PhaseNotAvailable
        The formula is in the data, in other phases.
    OnlyAnEnthalpy
        The publisher gives an enthalpy at one temperature alone.
    InertCopy
        The name of a copy that is kept from reacting.

    Examples
    --------
    >>> find_substance("Fe(s)").stops
    'melts at 1809 K'
    """
    found = _found(normal_text(text), data)
    if isinstance(found, Substance):
        return found
    kind, values = found
    raise kind(argument=argument, **values)


Failure = tuple[type[ThermofuncsError], dict[str, str]]


LONGEST_GIVEN = 400  # characters of a value in a sentence


class _Stop(Exception):
    def __init__(self, kind: type[ThermofuncsError], **values: str) -> None:
        super().__init__()
        self.failure: Failure = (kind, {name: value[:LONGEST_GIVEN] for name, value in values.items()})


@lru_cache(maxsize=8192)
def _found(text: str, data: UserData | None) -> Substance | Failure:
    """The substance, or the failure: both are kept, as a sheet asks for the same text many times."""
    try:
        return _search(text, data)
    except _Stop as stop:
        return stop.failure


def split_phase(text: str) -> tuple[str, str]:
    """A text without its last bracket, and what stood in it; empty where it is part of the formula."""
    tagged = TAGGED.fullmatch(text)
    if tagged is None:
        return text, ""
    stem, tag = tagged[1], tagged[2]
    formula = _read(text)
    if formula is not None and formula.phase is None:
        return text, ""
    return stem, tag


def _read(text: str) -> Formula | None:
    """A text as a formula; None where it is none."""
    try:
        return parse_species(text)
    except NotUnderstood:
        return None


def _search(text: str, data: UserData | None) -> Substance:
    """The substance, in the order of the module's first lines."""
    if text == "e-":
        raise _Stop(AmbiguousSubstance, given=text, candidates="e-(g), the gas of electrons in the data")
    stem, tag = split_phase(text)
    if not tag and _has_own(text, data):
        return _by_formula(text, stem, tag, data)
    known = _own(text, stem, tag, data) or _by_label(text) or _by_publishers_name(text, stem, tag)
    if known is not None:
        return known
    names = common_names()
    # TiN is titanium nitride, tin is a metal: what reads as a formula is one
    if (tag or _read(text) is None) and (targets := names.get(normalised(text))):
        return _by_common_name(text, "", targets, data)
    if tag and _read(stem) is None and (targets := names.get(normalised(stem))):
        return _by_common_name(text, tag, targets, data)
    return _by_formula(text, stem, tag, data)


def _has_own(text: str, data: UserData | None) -> bool:
    """Whether the user's own table has a formula, in any phase."""
    formula = _read(text) if data is not None else None
    if data is None or formula is None or data.substance(text) is not None:
        return False
    return bool(data.by_formula(formula_key(tuple(formula.composition.items()), formula.charge)))


def _own(text: str, stem: str, tag: str, data: UserData | None) -> Substance | None:
    """The substance of the user's own table, by name, or by formula and phase where no isomer is meant."""
    if data is None:
        return None
    by_name = data.substance(text)
    formula = _read(stem)
    if by_name is not None or formula is None or tag not in PHASES:
        return by_name
    key = formula_key(tuple(formula.composition.items()), formula.charge)
    own = [s for s in data.by_formula(key).values() if s.phase == PHASES[tag]]
    isomers = [label for label in index().formulas.get(key, ()) if chains.chain(label).phase == PHASES[tag]]
    return own[0] if len(own) == 1 and len(isomers) < 2 else None


def _by_label(text: str) -> Substance | None:
    """The solid, liquid, gas or solute with this label, or the records of a named form."""
    if text in index().chains:
        return chains.chain(text)
    entries = tuple(e for e in index().labels.get(text, ()) if not e.usable)
    return chains.part(text, entries) if entries else None


def _by_publishers_name(text: str, stem: str, tag: str) -> Substance | None:
    """The records of this publisher's name; a plain formula is left to the search by formula."""
    # a charged gas goes by its formula, where O2- has two readings
    gas = "" if stem.endswith(("+", "-")) else stem
    name = {"l": f"{stem}(L)", "s": f"{stem}(cr)", "g": gas}.get(tag, text)
    entries = tuple(e for e in index().names.get(name, ()) if tag not in PHASES or e.phase == tag)
    usable = tuple(e for e in entries if not e.usable)
    if not usable:
        return _refuse(text, entries) if entries else None
    first = usable[0]
    if first.phase == "s":
        return chains.part(first.label, usable)
    if tag or "," in text or len(index().formulas[first.key]) == 1:
        return chains.chain(first.chain)
    return None


def _refuse(text: str, entries: tuple[Entry, ...]) -> NoReturn:
    """Say why a record of the data cannot be used."""
    if entries[0].usable == "inert":
        raise _Stop(InertCopy, given=text, original=entries[0].label.removeprefix("Inert"))
    raise _Stop(OnlyAnEnthalpy, given=text)


def _by_common_name(text: str, tag: str, targets: tuple[str, ...], data: UserData | None) -> Substance:
    """The target of an everyday name, in the phase that was asked for."""
    if not tag:
        if len(targets) > 1 and not tied_to(text):
            raise _Stop(AmbiguousSubstance, given=text, candidates=_either(targets))
        return _target(text, targets[0], data)
    phase = PHASES.get(tag, tag)
    for target in targets:
        if target.endswith(f"({phase})"):
            return _search(target, data)
    if tied_to(split_phase(text)[0]) and not (phase == "s" and split_phase(targets[0])[1] not in PHASES):
        raise _Stop(PhaseNotAvailable, given=text, candidates=f"that name as {_either(targets)}", remark="")
    stem, own_tag = split_phase(targets[0])
    if own_tag not in PHASES and phase == "s":
        return _search(targets[0], data)
    return _search(f"{stem}({phase})", data)


def _target(text: str, target: str, data: UserData | None) -> Substance:
    """A label of the list of everyday names, or labels of one solid joined by ``>``."""
    if ">" not in target:
        return _search(target, data)
    entries = tuple(e for label in target.split(">") for e in index().labels[label])
    return chains.part(text, entries)


def _by_formula(text: str, stem: str, tag: str, data: UserData | None) -> Substance:
    """The substance of a formula, in its phase or in the one phase there is."""
    try:
        formula = parse_species(stem)
    except NotUnderstood as error:
        if stem[:1].isupper() and any(c.isdigit() or c in "+-^" for c in stem):
            values = {k: str(v) for k, v in error.data.items() if k != "argument"}
            raise _Stop(type(error), **values) from None
        return _unknown(text, data)
    key = formula_key(tuple(formula.composition.items()), formula.charge)
    own = data.by_formula(key) if data is not None else {}
    bundled = {label: chains.chain(label) for label in index().formulas.get(key, ())}
    replaced = {s.phase for s in own.values()}
    there = {label: s for label, s in bundled.items() if s.phase not in replaced} | own
    phase = PHASES.get(tag, "s" if tag else "")
    if tag and tag not in PHASES:
        return _form(text, tag, [label for label in bundled if bundled[label].phase == "s"], there)
    fitting = {label: s for label, s in there.items() if not phase or s.phase == phase}
    if len(fitting) == 1:
        return next(iter(fitting.values()))
    if fitting:
        return fitting[_isomer(text, stem, list(fitting))]
    refused = [e for e in index().unusable.get(key, ()) if e.usable != "inert" and phase in ("", e.phase)]
    if refused:
        _refuse(text, tuple(refused))
    remark = _solute_remark(phase, formula.charge)
    if there:
        raise _Stop(PhaseNotAvailable, given=text, candidates=_either(there, "and"), remark=remark)
    return _unknown(text, data, remark)


def _solute_remark(phase: str, charge: int) -> str:
    """That neutral solutes are missing as a class."""
    if phase == "aq" and charge == 0:
        return " The data has ions in water; no neutral solute such as CO2, NH3 or a weak acid is in it."
    return ""


def _form(text: str, tag: str, solids: list[str], there: Iterable[str]) -> Substance:
    """The form of a solid that a bracket names, such as alpha or II."""
    wanted = GREEK.get(tag.casefold(), tag)
    for solid in solids:
        entries = tuple(e for e in index().chains[solid] if split_phase(e.label)[1] in (wanted, tag))
        if entries:
            return chains.part(entries[0].label, entries)
    forms = [e.label for solid in solids for e in index().chains[solid]]
    names = list(dict.fromkeys([*there, *forms]))
    if names:
        raise _Stop(PhaseNotAvailable, given=text, candidates=_either(names, "and"), remark="")
    return _unknown(text, None)


def _isomer(text: str, stem: str, candidates: list[str]) -> str:
    """The one candidate whose structure is written as in the text.

    A formula that names an element twice, such as CH3CHO, is a structure; C2H4O is not, and never chooses.
    """
    symbols = _SYMBOL.findall(stem)
    if len(symbols) != len(set(symbols)):
        same = [c for c in candidates if split_phase(c)[0].split(",")[0] == stem]
        if len(same) == 1:
            return same[0]
    raise _Stop(AmbiguousSubstance, given=text, candidates=_either(candidates))


def _either(labels: Iterable[str], word: str = "or") -> str:
    """Labels as a list in a sentence."""
    names = sorted(dict.fromkeys(labels))
    return names[0] if len(names) == 1 else f"{', '.join(names[:-1])} {word} {names[-1]}"


def nearest(text: str, data: UserData | None = None, n: int = 4) -> list[str]:
    """Labels and everyday names that are spelt like a text, the nearest first."""
    own = list(data.labels()) if data is not None else []
    by_spelling = {name.casefold(): name for name in (*index().chains, *common_names(), *own)}
    close = difflib.get_close_matches(text.casefold(), list(by_spelling), n=n, cutoff=0.6)
    return [by_spelling[name] for name in close]


def _unknown(text: str, data: UserData | None, remark: str = "") -> NoReturn:
    """Say that nothing fits, with what is near."""
    near = nearest(text, data)
    said = f" Near: {', '.join(near)}." if near else ""
    raise _Stop(UnknownSubstance, given=text, near=remark + said)


def search(text: str, data: UserData | None = None) -> list[SubstanceRow]:
    """Every row that matches a name, a formula or a list of elements.

    Parameters
    ----------
    text : str. A name or a part of one, a formula, or elements with spaces or commas between (``Ca, O``):
        then the rows that consist of exactly these elements.
    data : UserData or None. The user's own table, whose rows come first.

    Returns
    -------
    list of SubstanceRow
    """
    words = [w for w in re.split(r"[ ,;]+", text.strip()) if w]
    usable = [e for e in index().entries if not e.usable]
    if len(words) > 1 and all(_SYMBOL.fullmatch(w) for w in words):
        wanted = set(words)
        own = [r for r in (data.rows() if data else ()) if set(r.composition) == wanted]
        return own + [row(e) for e in usable if _elements(e) == wanted]
    part = normalised(text)
    found: dict[Entry, None] = {}
    for label in _targets_of(part):
        found.update(dict.fromkeys(index().chains.get(label, ()) or index().labels.get(label, ())))
    formula = _read(split_phase(normal_text(text))[0])
    if formula is not None:
        key = formula_key(tuple(formula.composition.items()), formula.charge)
        found.update(dict.fromkeys(e for e in usable if e.key == key))
    if len(part) > 1:
        found.update(dict.fromkeys(e for e in usable if part in e.label.casefold() or part in _comment(e)))
    rows = data.rows() if data else []
    own = [r for r in rows if part in r.name.casefold() or part in r.label.casefold()]
    return own + [row(e) for e in found if not e.usable]


def _targets_of(part: str) -> list[str]:
    """Labels whose everyday name holds a text."""
    return [t for name, targets in common_names().items() if part and part in name for t in targets]


def _comment(entry: Entry) -> str:
    """The publisher's comment on an entry, which often names a mineral or a form."""
    return normalised(entry.reference.partition("; ")[2])


def _elements(entry: Entry) -> set[str]:
    """Element symbols of an entry."""
    return {part.split(":")[0] for part in entry.key.partition("|")[0].split()}
