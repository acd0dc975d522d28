"""Substances: heat-capacity forms, the bundled data, look-up, reference elements, a user's own table."""

from thermofuncs.substances.datasets import Dataset, datasets
from thermofuncs.substances.elements import atomic_mass, molar_mass, reference_element
from thermofuncs.substances.lookup import find_substance, search
from thermofuncs.substances.user_table import UserData, UserReaction, parse

__all__ = [
    "Dataset",
    "UserData",
    "UserReaction",
    "atomic_mass",
    "datasets",
    "find_substance",
    "molar_mass",
    "parse",
    "reference_element",
    "search",
]
