"""Element symbols, and the symbols that letters of the wrong case may have meant."""

from __future__ import annotations

import re
from collections.abc import Set as AbstractSet

_ALL = """
H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr Rb Sr Y Zr
Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb Dy Ho Er Tm Yb Lu Hf Ta W Re Os Ir
Pt Au Hg Tl Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm Md No Lr Rf Db Sg Bh Hs Mt Ds Rg Cn Nh Fl
Mc Lv Ts Og D
"""
_NONMETALS = "H D He B C N O F Ne Si P S Cl Ar As Se Br Kr Te I Xe"
_EVERYDAY = "H C N O F Na Mg Al Si P S Cl K Ca Fe Cu Zn"
_COMMON = "Li Be B Ti V Cr Mn Co Ni Br Sr Zr Mo Ag Cd Sn I Ba W Pt Au Hg Pb"

ELEMENTS = frozenset(_ALL.split())
NONMETALS = frozenset(_NONMETALS.split())
EVERYDAY = frozenset(_EVERYDAY.split())
COMMON = EVERYDAY | frozenset(_COMMON.split())
MOST_LETTERS = 24


def recased(text: str, known: AbstractSet[str] = COMMON) -> str:
    """A text with its letters as element symbols, everyday and few ones first; empty where that cannot be.

    Parameters
    ----------
    text : str. Such as ``NACL``.
    known : set of element symbols that are tried.

    Examples
    --------
    >>> recased("caco3")
    'CaCO3'
    """
    parts = []
    for run in re.split(r"([A-Za-z]+)", text):
        if not run.isalpha() or not run.isascii():
            parts.append(run)
        elif symbols := _symbols(run, known):
            parts.append(symbols)
        else:
            return ""
    return "".join(parts)


def _symbols(letters: str, known: AbstractSet[str]) -> str:
    """The cheapest division of letters into symbols: an everyday one costs 2, another 5."""
    if len(letters) > MOST_LETTERS:
        return ""
    best: list[tuple[int, str] | None] = [(0, "")]
    for end in range(1, len(letters) + 1):
        choices = []
        for size in (1, 2):
            before = best[end - size] if size <= end else None
            symbol = letters[end - size : end].capitalize()
            if before is not None and symbol in known:
                choices.append((before[0] + (2 if symbol in EVERYDAY else 5), before[1] + symbol))
        best.append(min(choices, default=None))
    found = best[-1]
    return found[1] if found else ""
