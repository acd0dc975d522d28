"""The worksheet functions, each declared once."""

from thermofuncs.catalogue.declaration import BLANK, Argument, Function
from thermofuncs.catalogue.evaluation import Explanation, call, evaluate, explain, find
from thermofuncs.catalogue.functions import FUNCTIONS, GROUPS

__all__ = [
    "BLANK",
    "FUNCTIONS",
    "GROUPS",
    "Argument",
    "Explanation",
    "Function",
    "call",
    "evaluate",
    "explain",
    "find",
]
