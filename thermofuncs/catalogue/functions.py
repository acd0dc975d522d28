"""All worksheet functions, gathered from their groups."""

from __future__ import annotations

from collections.abc import Mapping
from types import MappingProxyType

from thermofuncs.catalogue import explanation, fits, reactions, relations, substances
from thermofuncs.catalogue.declaration import Function

GROUPS: tuple[tuple[str, tuple[Function, ...]], ...] = (
    ("Substances", substances.FUNCTIONS),
    ("Reactions", reactions.FUNCTIONS),
    ("Relations with typed constants", relations.FUNCTIONS),
    ("Fits of measured data", fits.FUNCTIONS),
    ("Explanation", explanation.FUNCTIONS),
)

FUNCTIONS: Mapping[str, Function] = MappingProxyType(
    {function.name: function for _, group in GROUPS for function in group}
)
