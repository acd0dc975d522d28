"""Rows that follow each other through transitions, as one substance.

A solid is the list of its records in order of temperature, as the table prints it in its column ``chain``:
iron is alpha, gamma and delta iron, and ends where it melts. At the joint of two records the lower one ends
at its own upper limit, where the two have the same Gibbs energy.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import lru_cache

from thermofuncs.substances.index import Entry, index, row
from thermofuncs.substances.records import Segment, Substance, SubstanceRow

# K. A liquid's record may start a few kelvin beside the end of its solid's.
MELTING_TOLERANCE = 5.0

REMARKS: Mapping[str, str] = {
    "C(s)": "graphite",
    "P(s)": "white phosphorus",
    "P(l)": "melt of white phosphorus",
    "SiO2(s)": "quartz to 1200 K, then cristobalite; tridymite is not in the data",
    "Al2SiO5(s)": "andalusite",
    "Al2O3(s)": "corundum",
    "TiO2(s)": "rutile",
    "CaCO3(s)": "calcite",
    "FeS2(s)": "pyrite",
    "SiC(s)": "cubic, beta",
    "Sn(s)": "white tin",
    "NaCN(s)": "the data's heat capacity jumps by 0.1 kJ/mol in the Gibbs energy around 290 K",
}


def joined(label: str, rows: Sequence[SubstanceRow], stops: str, remark: str = "") -> Substance:
    """A substance of rows in order of temperature.

    Parameters
    ----------
    label : str.
    rows : sequence of SubstanceRow, ascending, each starting where the one before ends, or below.
    stops, remark : str. As in Substance.
    """
    segments: list[Segment] = []
    for data in rows:
        low = segments[-1].t_high if segments else data.t_low
        if data.t_low > low:
            message = f"{label}: nothing between {low:g} and {data.t_low:g} K"
            raise ValueError(message)
        segments.append(Segment(low, data.t_high, data))
    return Substance(label, tuple(segments), stops, remark)


@lru_cache(maxsize=4096)
def chain(label: str) -> Substance:
    """The solid, liquid, gas or solute of the bundled data with this label."""
    entries = index().chains[label]
    return joined(label, [row(e) for e in entries], _end(entries), REMARKS.get(label, ""))


@lru_cache(maxsize=1024)
def part(label: str, entries: tuple[Entry, ...]) -> Substance:
    """Some records of one solid, such as alpha iron, as a substance of their own."""
    return joined(label, [row(e) for e in entries], _end(entries), REMARKS.get(entries[0].chain, ""))


def _end(entries: tuple[Entry, ...]) -> str:
    """What happens at the end of the last of some records of one solid."""
    last = entries[-1]
    if last.phase != "s":
        return ""
    top = row(last).t_high
    siblings = index().chains[last.chain]
    following = siblings[siblings.index(last) + 1 :]
    if following:
        return f"turns into {following[0].label} at {top:g} K"
    liquids = index().chains.get(last.chain.removesuffix("(s)") + "(l)", ())
    if liquids and abs(row(liquids[0]).t_low - top) <= MELTING_TOLERANCE:
        return f"melts at {top:g} K"
    return ""
