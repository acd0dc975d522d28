"""Everyday names of substances: water, quicklime, pyrite, methanol.

The table beside gives for each name the labels that it can stand for. A name that implies its phase, such as
ice, is tied to its first label; any other name needs a phase where it has several labels.
"""

from __future__ import annotations

import csv
import re
from functools import lru_cache
from pathlib import Path

TABLE = Path(__file__).with_name("common_names.csv")
PHASES = {"s": "s", "cr": "s", "l": "l", "L": "l", "g": "g", "aq": "aq"}
PLAIN_SIGNS = str.maketrans({**dict.fromkeys("−–‑", "-"), **dict.fromkeys("\u200b\u200c\u200d\u2060\ufeff")})
TAGGED = re.compile(r"(.+?) ?\(([^()]+)\)")


def normal_text(text: str) -> str:
    """A text of a substance with single spaces, plain minus signs and the house's phase signs."""
    text = " ".join(text.translate(PLAIN_SIGNS).split())
    tagged = TAGGED.fullmatch(text)
    if tagged and (tag := tagged[2].strip()) in PHASES:
        return f"{tagged[1]}({PHASES[tag]})"
    return text


def normalised(name: str) -> str:
    """A name without case, with single spaces, hyphens read as spaces."""
    return " ".join(name.casefold().replace("-", " ").split())


@lru_cache(maxsize=1)
def _table() -> dict[str, tuple[tuple[str, ...], bool]]:
    lines = TABLE.read_text(encoding="utf-8").splitlines()
    rows = csv.DictReader(line for line in lines if not line.startswith("#"))
    return {normalised(r["name"]): (tuple(r["labels"].split()), r["tied"] == "yes") for r in rows}


@lru_cache(maxsize=1)
def common_names() -> dict[str, tuple[str, ...]]:
    """The labels of each everyday name, by its normalised form."""
    return {name: labels for name, (labels, _) in _table().items()}


def tied_to(name: str) -> bool:
    """Whether a name implies the phase of its first label."""
    return _table()[normalised(name)][1]
