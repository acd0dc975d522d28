"""The one parser of chemical formulas and of species with their phase.

A formula is element symbols with counts (whole, decimal such as ``Fe0.947O``), groups in brackets, water of
crystallisation after ``·`` or ``*``, and a charge: ``Na+``, ``SO4^2-``, ``SO4(2-)``, ``SO4²⁻``. ``Fe3+`` has
two readings and is refused with both. A trailing bracket that is no group of atoms names the phase.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from types import MappingProxyType

from thermofuncs.errors import FormulaNotRead, FormulaTooLong, TwoReadings

LONGEST = 400
DEEPEST = 20
ELEMENTS = frozenset(
    "H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr Rb Sr Y"
    " Zr Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb Dy Ho Er Tm Yb Lu Hf Ta W Re"
    " Os Ir Pt Au Hg Tl Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm Md No Lr Rf Db Sg Bh Hs Mt Ds Rg"
    " Cn Nh Fl Mc Lv Ts Og D".split()
)
PHASES = frozenset({"g", "l", "s", "cr", "aq"})
PLAIN_SIGNS = str.maketrans(
    {
        **dict(zip("₀₁₂₃₄₅₆₇₈₉", "0123456789", strict=True)),
        "−": "-", "–": "-", "•": "·", "⋅": "·", "*": "·", "[": "(", "]": ")", "{": "(", "}": ")", "\u00a0": " ",
    }
)  # fmt: skip
SUPERSCRIPTS = dict(zip("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+-", strict=True))

_TOKEN = re.compile(r"([A-Z][a-z]?)|(\d+\.\d+|\.\d+|\d+)|(\()|(\))|(·)")
_TRAILING = re.compile(r"\(([^()]+)\)$")
_CHARGE_BRACKET = re.compile(r"\((\d*)([+-])\)$|\(([+-])(\d*)\)$")
_CHARGE_CARET = re.compile(r"\^(?:(\d*)([+-])|([+-])(\d+))$")
_CHARGE_PLAIN = re.compile(r"([+-]+)$")
_NAMED_FORM = re.compile(r"[IV]+'?(?:,[IV]+)?")


@dataclass(frozen=True, slots=True)
class Formula:
    """A formula read.

    Parameters
    ----------
    exact : mapping of element symbol to atoms, as fractions.
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
    TwoReadings: a digit before a sign may be a count or a charge; both proposals are given.
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
    def __init__(self, kind: type[FormulaNotRead | TwoReadings | FormulaTooLong], **data: str) -> None:
        super().__init__()
        self.failure: Failure = (kind, data)


@lru_cache(maxsize=8192)
def _parsed(text: str) -> Formula | Failure:
    try:
        return _species(text)
    except _Stop as stop:
        return stop.failure


def _species(text: str) -> Formula:
    if len(text) > LONGEST:
        raise _Stop(FormulaTooLong, given=text[:40], most=str(LONGEST))
    body = _caret_for_superscripts(text.strip()).translate(PLAIN_SIGNS)
    body, phase = _split_phase(body)
    body, charge = _split_charge(body.strip(), text)
    if body == "e":
        if charge != -1:
            raise _Stop(FormulaNotRead, given=text, why="an electron is written e-")
        return Formula(MappingProxyType({}), -1, phase, text)
    return Formula(MappingProxyType(_atoms(body, text)), charge, phase, text)


def _caret_for_superscripts(text: str) -> str:
    """Superscripts at the end of the formula become a charge with a caret."""
    plain: list[str] = []
    inside = False
    for sign in text:
        if sign in SUPERSCRIPTS:
            plain.append(SUPERSCRIPTS[sign] if inside else "^" + SUPERSCRIPTS[sign])
            inside = True
        else:
            plain.append(sign)
            inside = False
    return "".join(plain)


def _split_phase(body: str) -> tuple[str, str | None]:
    """A text without its last bracket where that names a phase or a form, and its name."""
    found = _TRAILING.search(body)
    if found is None or _CHARGE_BRACKET.search(body):
        return body, None
    tag = found[1].strip()
    rest = body[: found.start()]
    if not rest:
        return body, None
    if tag in PHASES or tag == "L":
        return rest, {"cr": "s", "L": "l"}.get(tag, tag)
    if _NAMED_FORM.fullmatch(tag) or not _is_group(tag):
        return rest, tag
    return body, None


def _is_group(tag: str) -> bool:
    """Whether the inside of a bracket is a group of atoms."""
    try:
        _atoms(tag, tag)
    except _Stop:
        return False
    return True


def _split_charge(body: str, text: str) -> tuple[str, int]:
    if (found := _CHARGE_BRACKET.search(body)) or (found := _CHARGE_CARET.search(body)):
        number, sign = (found[1], found[2]) if found[2] else (found[4], found[3])
    elif found := _CHARGE_PLAIN.search(body):
        signs = found[1]
        stem = body[: found.start()]
        if len(set(signs)) != 1:
            raise _Stop(FormulaNotRead, given=text, why="its charge has both signs")
        if len(signs) == 1 and re.search(r"\d$", stem):
            return _counted_or_charged(stem, signs, text)
        number, sign = str(len(signs)), signs[0]
    else:
        return body, 0
    if number == "0" or len(number) > 3:
        raise _Stop(FormulaNotRead, given=text, why=f"its charge number is {number}")
    return body[: found.start()], int(number or 1) * (1 if sign == "+" else -1)


def _counted_or_charged(stem: str, sign: str, text: str) -> tuple[str, int]:
    """``NO3-`` and ``NH4+`` have one usual reading; a single atom with a digit, as ``Fe3+``, has two."""
    lone = re.fullmatch(r"([A-Z][a-z]?)([1-9])", stem)
    if lone:
        element, digit = lone[1], lone[2]
        raise _Stop(
            TwoReadings, given=text, one=f"{element}^{digit}{sign}", other=f"{element}{digit}^{sign}"
        )
    return stem, 1 if sign == "+" else -1


def _atoms(body: str, text: str) -> dict[str, Fraction]:
    """Atoms of a formula without phase and charge."""
    if not body:
        raise _Stop(FormulaNotRead, given=text, why="there is no formula in it")
    total: dict[str, Fraction] = {}
    for part in body.split("·"):
        for element, n in _part(part.strip(), text).items():
            total[element] = total.get(element, Fraction(0)) + n
    return total


def _part(part: str, text: str) -> dict[str, Fraction]:
    """Atoms of a formula without water of crystallisation, with a factor before it."""
    factor = re.match(r"(\d+(?:\.\d+)?)(?=[A-Z(])", part)
    times = Fraction(factor[1]) if factor else Fraction(1)
    if factor:
        part = part[factor.end() :]
    stack: list[dict[str, Fraction]] = [{}]
    last: dict[str, Fraction] | None = None
    place = 0
    while place < len(part):
        token = _TOKEN.match(part, place)
        if token is None or len(stack) > DEEPEST:
            raise _Stop(FormulaNotRead, given=text, why=_remedy(part, place))
        symbol, number, opening, closing, _ = token.groups()
        if symbol:
            if symbol not in ELEMENTS:
                raise _Stop(FormulaNotRead, given=text, why=_remedy(part, place))
            _add(stack[-1], last)
            last = {symbol: Fraction(1)}
        elif number:
            if last is None:
                raise _Stop(FormulaNotRead, given=text, why=f"the number {number} follows no atom or group")
            n = Fraction(number)
            if n == 0 or n > 10**6:
                raise _Stop(FormulaNotRead, given=text, why=f"{number} atoms are no count")
            _add(stack[-1], {e: x * n for e, x in last.items()})
            last = None
        elif opening:
            _add(stack[-1], last)
            last = None
            stack.append({})
        elif closing:
            if len(stack) == 1:
                raise _Stop(FormulaNotRead, given=text, why="a bracket closes that was not opened")
            _add(stack[-1], last)
            last = stack.pop()
            if not last:
                raise _Stop(FormulaNotRead, given=text, why="a pair of brackets is empty")
        place = token.end()
    if len(stack) > 1:
        raise _Stop(FormulaNotRead, given=text, why="a bracket is not closed")
    _add(stack[0], last)
    if not stack[0]:
        raise _Stop(FormulaNotRead, given=text, why="there is no formula in it")
    return {element: n * times for element, n in stack[0].items()}


def _add(total: dict[str, Fraction], more: dict[str, Fraction] | None) -> None:
    for element, n in (more or {}).items():
        total[element] = total.get(element, Fraction(0)) + n


def _remedy(part: str, place: int) -> str:
    """What is wrong at a place, with the spelling that would be read."""
    rest = part[place:]
    said = f'"{rest[:20]}" does not begin with an element symbol'
    tried = re.sub(r"[A-Za-z]+", lambda m: _recased(m[0]), part)
    return f"{said}; did you mean {tried}?" if tried != part and re.search(r"[a-zA-Z]", part) else said


def _recased(letters: str) -> str:
    """Letters as element symbols, two-letter symbols before one-letter ones where both read."""
    if not letters:
        return ""
    for n in (2, 1):
        symbol = letters[:n].capitalize()
        if len(letters) >= n and symbol in ELEMENTS:
            rest = _recased(letters[n:])
            if rest or len(letters) == n:
                return symbol + rest
    return "" if len(letters) > 1 else letters
