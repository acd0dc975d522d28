"""The one parser of chemical formulas and of species with their phase.

A formula is element symbols with counts (whole, decimal such as ``Fe0.947O``), groups in brackets, water of
crystallisation after ``·`` or ``*``, and a charge: ``Na+``, ``SO4^2-``, ``SO4(2-)``, ``SO4²⁻``. A trailing
bracket that is no group of atoms names the phase. What has two readings is refused with both: ``Fe3+``,
``SO42-``, ``CuSO4.5H2O``, ``Fe(S)``. One digit before a single sign is a count where no ion in use is written
otherwise: in anions of several elements (``NO3-``) and in cations without a metal (``NH4+``).
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from types import MappingProxyType

from thermofuncs.errors import FormulaNotRead, FormulaTooLong, TwoReadings
from thermofuncs.substances.symbols import COMMON, ELEMENTS, NONMETALS, recased

LONGEST = 400
DEEPEST = 20
MOST_ATOMS = 10**6
PHASES = frozenset({"g", "l", "s", "cr", "aq"})
SHORT_FORMS = frozenset({"gr", "am", "an", "gl", "hcp", "fcc", "bcc"})
MOST_DIGITS = 15
PHASE_WORDS = {
    "gas": "g", "vapour": "g", "vapor": "g", "liq": "l", "liquid": "l", "sol": "s", "solid": "s",
    "cryst": "s", "crystal": "s", "crystalline": "s", "aqueous": "aq", "1": "l",
}  # fmt: skip
PLAIN_SIGNS = str.maketrans({
    **dict.fromkeys("−–‑", "-"), **dict.fromkeys("•⋅∙*", "·"), "’": "'", "′": "'",
    **dict.fromkeys("\u200b\u200c\u200d\u2060\ufeff"),
})  # fmt: skip
SUBSCRIPTS = str.maketrans("₀₁₂₃₄₅₆₇₈₉", "0123456789")
SUPERSCRIPTS = dict(zip("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+-", strict=True))
PAIRS = {")": "(", "]": "[", "}": "{"}

_TOKEN = re.compile(r"([A-Z][a-z]?)|([0-9]+\.[0-9]+|\.[0-9]+|[0-9]+)|([(\[{])|([)\]}])")
_TRAILING = re.compile(r"\(([^()\[\]{}]+)\)$")
_CHARGE_TAG = re.compile(r"([0-9]*)([+-]+)|([+-])([0-9]+)")
_CHARGE_CARET = re.compile(r"\^(\()?(?:([0-9]*)([+-]+)|([+-])([0-9]+))(?(1)\))$")
_CHARGE_SIGNS = re.compile(r"[+-]+$")
_ROMAN = re.compile(r"[IV]+")
_NAMED_FORM = re.compile(r"(?:cr)?[IV]+(?:'|-[a-z])?(?:,[IV]+)?")
_WORD = re.compile(r"[a-zα-ω][\w' ,-]*|[A-Z][a-z'-]{3,}")
_FIRST_WORD = re.compile(r"[ ,;]+")
_FACTOR = re.compile(r"([0-9]+/[0-9]+|[0-9]*\.[0-9]+|[0-9]+|½) ?(?=[A-Z(\[{])")
_MOLECULE = re.compile(r"[0-9]{1,2}(?=[A-Z(\[{])")
_SYMBOL = re.compile(r"[A-Z][a-z]?")


@dataclass(frozen=True, slots=True)
class Formula:
    """A formula read.

    Parameters
    ----------
    exact : mapping of element symbol to atoms, as fractions; empty for the electron.
    charge : int. Charge number.
    phase : str or None. g, l, s, aq, or the name of a form of the solid; None where none is written.
    text : str. As written.
    """

    exact: Mapping[str, Fraction]
    charge: int
    phase: str | None
    text: str

    @property
    def composition(self) -> dict[str, float]:
        """Atoms by element symbol."""
        return {element: float(n) for element, n in self.exact.items()}


def parse_formula(text: str, argument: str = "formula") -> Formula:
    """Read a formula, with or without a phase behind it. Parameters and errors as in parse_species."""
    return parse_species(text, argument)


def parse_species(text: str, argument: str = "reaction") -> Formula:
    """Read a species: a formula with its phase, such as ``SO4^2-(aq)`` or ``CaSO4·2H2O(s)``.

    Parameters
    ----------
    text : str.
    argument : str. The name used in an error's sentence.

    Returns
    -------
    Formula

    Raises
    ------
    FormulaNotRead: something is no formula; the sentence shows the place and, where there is one, a remedy.
    TwoReadings: the text has two readings; both proposals are given.
    FormulaTooLong: more than 400 characters.

    Examples
    --------
    >>> parse_species("SO4^2-(aq)").charge
    -2
    """
    found = _parsed(text)
    if isinstance(found, Formula):
        return found
    kind, data = found
    raise kind(argument=argument, **data)


Failure = tuple[type[FormulaNotRead | TwoReadings | FormulaTooLong], dict[str, str]]


class _Stop(Exception):
    """Carries a failure to the cache."""

    def __init__(self, kind: type[FormulaNotRead | TwoReadings | FormulaTooLong], **data: str) -> None:
        super().__init__()
        self.failure: Failure = (kind, data)


@lru_cache(maxsize=8192)
def _parsed(text: str) -> Formula | Failure:
    try:
        return _species(text)
    except _Stop as stop:
        return stop.failure


def _unread(text: str, why: str) -> _Stop:
    return _Stop(FormulaNotRead, given=text[:60], why=why)


def _either(text: str, one: str, other: str) -> _Stop:
    return _Stop(TwoReadings, given=text[:60], one=one[:60], other=other[:60])


def _species(text: str) -> Formula:
    if len(text) > LONGEST:
        raise _Stop(FormulaTooLong, given=text[:40], most=str(LONGEST))
    body = _caret_for_superscripts(" ".join(text.split())).translate(PLAIN_SIGNS)
    body, phase = _split_phase(body, text)
    body, charge = _split_charge(body, text)
    body = body.translate(SUBSCRIPTS)
    if body == "e":
        if charge != -1:
            raise _unread(text, "an electron is written e-")
        return Formula(MappingProxyType({}), -1, phase, text)
    return Formula(MappingProxyType(_atoms(body, text)), charge, phase, text)


def _caret_for_superscripts(text: str) -> str:
    """Superscripts become a charge with a caret."""
    plain: list[str] = []
    inside = False
    for sign in text:
        if sign in SUPERSCRIPTS:
            plain.append(SUPERSCRIPTS[sign] if inside else "^" + SUPERSCRIPTS[sign])
        else:
            plain.append(sign)
        inside = sign in SUPERSCRIPTS
    return "".join(plain)


def _split_phase(body: str, text: str) -> tuple[str, str | None]:
    """A text without its last bracket where that names a phase or a form, and its name."""
    found = _TRAILING.search(body)
    if found is None or not found.start():
        return body, None
    tag = found[1].strip()
    rest = body[: found.start()].rstrip()
    if not tag:
        raise _unread(text, "a pair of brackets is empty")
    if _CHARGE_TAG.fullmatch(tag):
        return body, None
    if tag in PHASES or tag == "L":
        return rest, {"cr": "s", "L": "l"}.get(tag, tag)
    if tag in {"S", "Cr"}:
        raise _either(text, f"{rest}({tag.lower()})", rest + tag)
    if _NAMED_FORM.fullmatch(tag):
        return rest, tag
    if not tag or (tag[0].isupper() and _is_group(tag)):
        return body, None
    word = _FIRST_WORD.split(tag.casefold(), maxsplit=1)[0]
    near = PHASE_WORDS.get(word, word if word in PHASES else "")
    if not near and _is_form(tag):
        return rest, tag
    near = near or recased(tag.translate(SUBSCRIPTS))
    proposal = f"; did you mean {rest[-40:]}({near})" if near in PHASES or (near and _is_group(near)) else ""
    raise _unread(text, f"({tag[:20]}) is no group of atoms and no phase such as (g), (s), (alpha){proposal}")


def _is_group(tag: str) -> bool:
    """Whether the inside of a bracket is a group of atoms."""
    try:
        _atoms(tag.translate(SUBSCRIPTS), tag)
    except _Stop:
        return False
    return True


def _is_form(tag: str) -> bool:
    """Whether a tag can name a form of a solid: a letter, a short name, or a word that is no formula."""
    if not _WORD.fullmatch(tag):
        return False
    letters = tag.rstrip("'")
    if len(letters) == 1 or tag in SHORT_FORMS:
        return True
    group = recased(tag, NONMETALS)
    return len(letters) > 2 and not (group and _is_group(group))


def _split_charge(body: str, text: str) -> tuple[str, int]:
    number: str | None
    if found := _CHARGE_CARET.search(body):
        stem = body[: found.start()]
        number, signs = (found[2], found[3]) if found[3] else (found[5], found[4])
    elif (tag := _TRAILING.search(body)) and (found := _CHARGE_TAG.fullmatch(tag[1].strip())):
        stem = body[: tag.start()]
        number, signs = (found[1], found[2]) if found[2] else (found[4], found[3])
    elif found := _CHARGE_SIGNS.search(body):
        stem, number, signs = body[: found.start()], "", found[0]
        if len(signs) == 1 and (counted := re.search(r"(?<![0-9.])[0-9]+$", stem)):
            stem, number = _count_or_charge(stem[: counted.start()], counted[0], signs, text)
    elif found := re.search(r"([+-])([0-9]+)$", body):
        stem = body[: found.start()]
        remedy = f"{stem[:40]}^{found[2][:9]}{found[1]}"
        raise _unread(text, f"a charge is written behind a caret, the number first: {remedy}")
    else:
        return body, 0
    if len(set(signs)) != 1 or (number and len(signs) > 1):
        raise _unread(text, f'"{number}{signs[:10]}" is no charge')
    size = int(number) if number else len(signs)
    if not 0 < size < 100:
        raise _unread(text, f"{size} is no charge number")
    return stem.rstrip(), size if signs[0] == "+" else -size


def _count_or_charge(before: str, digits: str, sign: str, text: str) -> tuple[str, str]:
    """The formula and its charge number; digits before a sign are a count, a charge, or doubtful."""
    if before[-1:] and before[-1] in "₀₁₂₃₄₅₆₇₈₉":
        return before, digits
    if digits[-1] == "0":
        return before + digits, ""
    counted = f"{before}{digits}^{sign}"
    if len(digits) > 1:
        raise _either(text, f"{before}{digits[:-1]}^{digits[-1]}{sign}", counted)
    elements = set(_SYMBOL.findall(before))
    metal = bool(elements - NONMETALS)
    if len(elements) == 1 or before.endswith("]") or (sign == "+" and metal):
        raise _either(text, f"{before}^{digits}{sign}", counted)
    return before + digits, ""


def _atoms(body: str, text: str) -> dict[str, Fraction]:
    """Atoms of a formula without phase and charge."""
    if not body:
        raise _unread(text, "there is no formula in it")
    total: dict[str, Fraction] = {}
    for place, part in enumerate(body.split("·")):
        plain = part.strip()
        times = Fraction(1)
        if factor := _FACTOR.match(plain):
            if not place:
                number = factor[1][:20]
                raise _unread(text, f"the number {number} before it is a coefficient, no part of a formula")
            times = _factor(factor[1], text)
            plain = plain[factor.end() :]
        for element, n in _part(plain, text).items():
            total[element] = total.get(element, Fraction(0)) + n * times
    return total


def _factor(number: str, text: str) -> Fraction:
    """The number before water of crystallisation."""
    if number == "½":
        return Fraction(1, 2)
    over, _, under = number.partition("/")
    if not under:
        return _count(number, text)
    return _count(over, text) / _count(under, text)


def _count(number: str, text: str) -> Fraction:
    if len(number.replace(".", "")) > MOST_DIGITS:
        raise _unread(text, f"{number[:20]} has more than {MOST_DIGITS} digits")
    n = Fraction(number)
    if number[0] == "0" and number[1:2] != ".":
        raise _unread(text, f"the count {number[:20]} begins with a zero: is the letter O meant?")
    if not 0 < n <= MOST_ATOMS:
        raise _unread(text, f"{number[:20]} is no count of atoms")
    return n


def _part(part: str, text: str) -> dict[str, Fraction]:
    """Atoms of a formula without water of crystallisation."""
    groups = _Groups(part, text)
    place = 0
    while place < len(part):
        token = _TOKEN.match(part, place)
        if token is None or (token[1] and token[1] not in ELEMENTS):
            raise _unread(text, _remedy(part, place))
        symbol, number, opening, closing = token.groups()
        if symbol:
            groups.atom(symbol)
        elif number:
            groups.count(place, number)
        elif opening:
            groups.open(place)
        elif closing:
            groups.close(place, closing)
        place = token.end()
    return groups.total()


class _Groups:
    """The atoms read so far, group in group; the last atom or group waits for its count."""

    def __init__(self, part: str, text: str) -> None:
        self.part, self.text = part, text
        self.sums: list[dict[str, Fraction]] = [{}]
        self.opened: list[int] = []
        self.last: dict[str, Fraction] = {}

    def atom(self, symbol: str) -> None:
        """Add an atom."""
        self._settle({symbol: Fraction(1)})

    def count(self, place: int, number: str) -> None:
        """Multiply the last atom or group."""
        after = place + len(number)
        if not self.last:
            raise _unread(self.text, f"the number {number[:20]} follows no atom or group")
        if self.part[after : after + 1] == ",":
            snippet = self.part[place:][:20]
            if self.part[after + 1 : after + 2].isdigit():
                raise _unread(self.text, f'"{snippet}" has a comma: decimals are written with a point')
            raise _unread(self.text, f'"{snippet}" has a comma and a name behind the formula')
        _refuse_dot_for_water(self.part, place, number, self.text)
        n = _count(number, self.text)
        self.last = {element: x * n for element, x in self.last.items()}
        self._settle({})

    def open(self, place: int) -> None:
        """Begin a group."""
        self._settle({})
        self.sums.append({})
        self.opened.append(place)
        if len(self.opened) > DEEPEST:
            raise _unread(self.text, f"its brackets stand in each other more than {DEEPEST} times")

    def close(self, place: int, bracket: str) -> None:
        """End a group."""
        self._settle({})
        if not self.opened or self.part[self.opened[-1]] != PAIRS[bracket]:
            raise _unread(self.text, f'the bracket at "{self.part[place:][:20]}" closes none of its kind')
        inside = self.part[self.opened.pop() + 1 : place]
        if _ROMAN.fullmatch(inside):
            raise _unread(self.text, f"({inside}) is an oxidation number, which a formula does not have")
        self.last = self.sums.pop()
        if not self.last:
            raise _unread(self.text, "a pair of brackets is empty")

    def total(self) -> dict[str, Fraction]:
        """The atoms, where every group has ended."""
        self._settle({})
        if self.opened:
            raise _unread(self.text, f'the bracket at "{self.part[self.opened[-1] :][:20]}" is not closed')
        if not self.sums[0]:
            raise _unread(self.text, "there is no formula in it")
        return self.sums[0]

    def _settle(self, waiting: dict[str, Fraction]) -> None:
        total = self.sums[-1]
        for element, n in self.last.items():
            total[element] = total.get(element, Fraction(0)) + n
        self.last = waiting


def _refuse_dot_for_water(part: str, place: int, number: str, text: str) -> None:
    """Refuse a point that may stand for the dot before water, as in ``CuSO4.5H2O``."""
    whole, dot, digits = number.partition(".")
    rest = part[place + len(number) :]
    if not dot or whole in ("0", "1") or digits[0] == "0" or not _MOLECULE.match(digits + rest):
        return
    if len(set(_SYMBOL.findall(rest))) < 2 or "." in rest:
        return
    before = part[:place]
    atom = re.search(r"[A-Z][a-z]?$", before)
    start = atom.start() if atom else 0
    decimal = f"{before[:start]}({before[start:]}{number}){rest}"
    raise _either(text, f"{before}{whole}·{digits}{rest}", decimal)


def _remedy(part: str, place: int) -> str:
    """What is wrong at a place, with the spelling that would be read."""
    rest = part[place:]
    said = f'"{rest[:20]}" does not begin with an element symbol'
    if rest[0] == "." and place:
        return f"{said}; water of crystallisation is written {part[:place][-20:]}·{rest[1:][:20]}"
    if rest[0] == "^":
        return f"{said}; a charge is a number and a sign behind the caret, such as ^2-"
    if rest[0] in "+-":
        return f"{said}; a charge stands before the phase, and a plus between species in spaces"
    tag = re.match(r"([a-z]+)\)", rest)
    if tag and tag[1] in PHASES and part[place - 1 : place] == "(":
        return f"{said}; a phase stands once, at the end and behind the charge"
    near = recased(part)
    if not near or near == part:
        return said
    element = part.capitalize()
    other = f" or {element}" if element in COMMON and element != near else ""
    return f"{said}; did you mean {near}{other}"
