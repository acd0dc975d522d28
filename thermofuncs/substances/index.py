"""What the bundled data holds: one entry for each record, and the ways to find them.

The index is made at first use from the characters of the tables; a row is made when it is asked for.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import lru_cache
from typing import Literal, NamedTuple, cast

from thermofuncs.substances import aqueous, nasa_glenn, printed
from thermofuncs.substances.records import PhaseKind, SubstanceRow

Usable = Literal["", "inert", "one temperature"]


class Entry(NamedTuple):
    """One record of a bundled table.

    Parameters
    ----------
    dataset : str. Its id.
    number : int. The record's place in its table.
    name : str. The publisher's name.
    phase : g, l, s or aq.
    label : str. The record's label.
    chain : str. Label of the solid, liquid, gas or solute that it is a part of.
    key : str. Composition and charge, such as ``H:2 O:1|0``.
    reference : str. The publisher's reference code and comment.
    usable : empty, or why the record cannot be used.
    """

    dataset: str
    number: int
    name: str
    phase: PhaseKind
    label: str
    chain: str
    key: str
    reference: str
    usable: Usable


@dataclass(frozen=True, slots=True)
class Index:
    """The entries, and where each name, label, chain and formula stands among them."""

    entries: tuple[Entry, ...]
    names: Mapping[str, tuple[Entry, ...]]
    labels: Mapping[str, tuple[Entry, ...]]
    chains: Mapping[str, tuple[Entry, ...]]
    formulas: Mapping[str, tuple[str, ...]]
    unusable: Mapping[str, tuple[Entry, ...]]


def formula_key(composition: Iterable[tuple[str, float]], charge: int) -> str:
    """Composition and charge as one text, such as ``O:4 S:1|-2``."""
    return f"{printed.composition_key(tuple(composition))}|{charge}"


def _nasa_entries() -> Iterable[Entry]:
    for number, f in enumerate(nasa_glenn.lines()):
        usable: Usable = "inert" if f[9] == "inert" else "" if f[14] else "one temperature"
        phase, key = cast("PhaseKind", f[2]), f"{f[5]}|{f[6]}"
        yield Entry(printed.DATASET, number, f[0], phase, f[3], f[4], key, f[11], usable)


def _ion_entries() -> Iterable[Entry]:
    for number, ion in enumerate(aqueous.ions()):
        key = f"{ion.composition}|{ion.charge}"
        usable: Usable = "" if ion.gibbs_energy is not None else "one temperature"
        yield Entry(
            aqueous.DATASET, number, ion.printed, "aq", ion.label, ion.label, key, ion.name, usable
        )


def _grouped(pairs: Iterable[tuple[str, Entry]]) -> dict[str, tuple[Entry, ...]]:
    found: dict[str, list[Entry]] = {}
    for text, entry in pairs:
        found.setdefault(text, []).append(entry)
    return {text: tuple(entries) for text, entries in found.items()}


@lru_cache(maxsize=1)
def index() -> Index:
    """The index of the bundled data."""
    entries = (*_nasa_entries(), *_ion_entries())
    usable = [e for e in entries if not e.usable]
    formulas = {
        key: tuple(dict.fromkeys(e.chain for e in found))
        for key, found in _grouped((e.key, e) for e in usable).items()
    }
    return Index(
        entries,
        _grouped((e.name, e) for e in entries),
        _grouped((e.label, e) for e in entries),
        _grouped((e.chain, e) for e in usable),
        formulas,
        _grouped((e.key, e) for e in entries if e.usable),
    )


def row(entry: Entry) -> SubstanceRow:
    """The row of an entry that can be used."""
    return nasa_glenn.row(entry.number) if entry.dataset == printed.DATASET else aqueous.row(entry.number)
