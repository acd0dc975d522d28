"""Arguments that many functions share, so that each is worded once."""

from __future__ import annotations

from thermofuncs.catalogue.declaration import Argument

REACTION = Argument("reaction", "the reaction as equation text, balanced", "text")
SUBSTANCE = Argument("substance", "formula with its phase, or an everyday name", "text")
TEMPERATURE = Argument("T", 'temperature: a number in kelvin or a text such as "350 degC"', "temperature", "K")
UNIT = Argument("unit", "unit of the answer", "unit", optional=True)
DATA = Argument("data", "a worksheet table of your own data, which goes first", "data", optional=True)
OPTIONS = Argument("options", "words: extrapolate, atm, degC, degF", "options", optional=True)
OPTION_WORDS = ("extrapolate", "atm", "degC", "degF")
SHIFT = "CO(g) + H2O(g) = CO2(g) + H2(g)"
