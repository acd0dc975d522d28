"""Coefficients from the conservation of atoms and charge, in exact rational arithmetic.

The coefficients of an equation span the null space of its matrix of atoms and charge (Smith & Missen,
Chemical Reaction Equilibrium Analysis, 1982, chapter 2; citation from memory).
"""

from __future__ import annotations

from fractions import Fraction
from math import gcd, lcm

from thermofuncs.errors import CannotBalance, SeveralReactions, WrongSide
from thermofuncs.reactions import ELECTRON, Equation, Term, differences, missing_text, parse_equation
from thermofuncs.substances.formulas import Formula, parse_species

MOST_SPECIES = 60
LARGEST = 10**15


def formulas_of(equation: Equation, argument: str = "equation") -> dict[str, Formula]:
    """The formula of each species; a bare electron has none."""
    terms = (*equation.reactants, *equation.products)
    return {t.species: parse_species(t.species, argument) for t in terms if t.species != ELECTRON}


def balanced(text: str) -> str:
    """The equation with its coefficients.

    Parameters
    ----------
    text : str. Equation text. Without any number or ``?`` the smallest whole coefficients are found. Numbers
        stay as given, and the others are solved for. Where ``?`` stands, those alone are solved for, and a
        coefficient that is not written is 1; where every one is ``?`` the smallest whole ones are found.

    Returns
    -------
    str

    Raises
    ------
    CannotBalance: no coefficients conserve every element and the charge; the sentence names what fails.
    SeveralReactions: the coefficients are not unique.
    WrongSide: a species belongs on the other side.

    Examples
    --------
    >>> balanced("Fe2O3(s) + CO(g) = Fe(s) + CO2(g)")
    'Fe2O3(s) + 3 CO(g) = 2 Fe(s) + 3 CO2(g)'
    """
    equation = parse_equation(text, "equation", unknowns=True)
    formulas = formulas_of(equation)
    terms = [(-1, t) for t in equation.reactants] + [(1, t) for t in equation.products]
    _each_once([t.species for _, t in terms], text)
    columns = [_column(sign, term, formulas) for sign, term in terms]
    fixed = _fixed([t for _, t in terms])
    if len(fixed) == len(terms):
        found = differences(equation, formulas)
        if found:
            raise CannotBalance(what=text[:80], why=f"all its coefficients are given and {missing_text(found)}")
        return str(equation)
    _each_on_both_sides(equation, formulas, text)
    solution = _with_given(columns, fixed, text) if fixed else _smallest(columns, text)
    idle = [terms[i][1].species for i, x in enumerate(solution) if not x]
    if idle:
        raise CannotBalance(what=text[:80], why=f"without part in it: {', '.join(idle)[:80]}; leave that out")
    wrong = [terms[i][1].species for i, x in enumerate(solution) if x < 0]
    if wrong:
        raise WrongSide(what=text[:80], species=", ".join(wrong)[:80])
    if any(max(x.numerator, x.denominator) >= LARGEST for x in solution):
        raise CannotBalance(what=text[:80], why="a coefficient would have more than 15 digits")
    done = [Term(term.species, x) for (_, term), x in zip(terms, solution, strict=True)]
    n = len(equation.reactants)
    return str(Equation(tuple(done[:n]), tuple(done[n:])))


def _fixed(terms: list[Term]) -> dict[int, Fraction]:
    """The given coefficients by place: the numbers, and 1 for what is not written where ``?`` stands."""
    asked = any(t.unknown for t in terms)
    given = {i: Fraction(1) if t.coefficient is None else t.coefficient for i, t in enumerate(terms) if not t.unknown}
    return given if asked else {i: x for i, x in given.items() if terms[i].coefficient is not None}


def _each_once(species: list[str], text: str) -> None:
    if len(species) > MOST_SPECIES:
        raise CannotBalance(what=text[:80], why=f"it has more than {MOST_SPECIES} species")
    twice = next((s for s in species if species.count(s) > 1), None)
    if twice is not None:
        raise CannotBalance(what=text[:80], why=f"{twice[:60]} stands in it twice: write it once")


Column = dict[str, Fraction]


def _column(sign: int, term: Term, formulas: dict[str, Formula]) -> Column:
    if term.species == ELECTRON:
        return {"charge": Fraction(-sign)}
    formula = formulas[term.species]
    column = {element: sign * n for element, n in formula.exact.items()}
    if formula.charge:
        column["charge"] = Fraction(sign * formula.charge)
    return column


def _each_on_both_sides(equation: Equation, formulas: dict[str, Formula], text: str) -> None:
    sides = [
        {e for t in side if t.species in formulas for e in formulas[t.species].exact}
        for side in (equation.reactants, equation.products)
    ]
    for element in sorted(sides[0] ^ sides[1]):
        where = "left" if element in sides[0] else "right"
        raise CannotBalance(what=text[:80], why=f"{element} stands on the {where} side only")


def _elements(columns: list[Column]) -> list[str]:
    """The elements in the order they are met, the charge last."""
    names = dict.fromkeys(element for column in columns for element in column if element != "charge")
    return [*names, *(["charge"] if any("charge" in column for column in columns) else [])]


def _rows(columns: list[Column], elements: list[str]) -> list[list[Fraction]]:
    return [[column.get(element, Fraction(0)) for column in columns] for element in elements]


def _eliminated(matrix: list[list[Fraction]]) -> tuple[list[list[Fraction]], list[int]]:
    """The reduced row echelon form, and its pivot columns."""
    rows = [list(row) for row in matrix]
    pivots: list[int] = []
    for column in range(len(rows[0]) if rows else 0):
        lead = len(pivots)
        row = next((i for i in range(lead, len(rows)) if rows[i][column]), None)
        if row is None:
            continue
        rows[lead], rows[row] = rows[row], rows[lead]
        scale = rows[lead][column]
        rows[lead] = [x / scale for x in rows[lead]]
        for i, other in enumerate(rows):
            if i != lead and other[column]:
                times = other[column]
                rows[i] = [x - times * y for x, y in zip(other, rows[lead], strict=True)]
        pivots.append(column)
    return rows, pivots


def _independent(columns: list[Column]) -> int:
    """How many independent reactions the species allow."""
    return len(columns) - len(_eliminated(_rows(columns, _elements(columns)))[1])


def _smallest(columns: list[Column], text: str) -> list[Fraction]:
    """The one direction of the null space, as smallest whole numbers, positive where it can be."""
    width = len(columns)
    rows, pivots = _eliminated(_rows(columns, _elements(columns)))
    loose = [c for c in range(width) if c not in pivots]
    if not loose:
        raise CannotBalance(what=text[:80], why=_first_failing(columns, Column()))
    if len(loose) > 1:
        raise SeveralReactions(what=text[:80], count=len(loose))
    values = [Fraction(0)] * width
    values[loose[0]] = Fraction(1)
    for row, pivot in zip(rows, pivots, strict=False):
        values[pivot] = -row[loose[0]]
    times = lcm(*(x.denominator for x in values))
    whole = [int(x * times) for x in values]
    common = gcd(*whole)
    sign = -1 if sum(x < 0 for x in whole) > sum(x > 0 for x in whole) else 1
    return [Fraction(sign * x, common) for x in whole]


def _with_given(columns: list[Column], fixed: dict[int, Fraction], text: str) -> list[Fraction]:
    """The coefficients with the given ones among them."""
    elements = _elements(columns)
    free = [i for i in range(len(columns)) if i not in fixed]
    given = {e: -sum((columns[i].get(e, Fraction(0)) * x for i, x in fixed.items()), Fraction(0)) for e in elements}
    unknown = [columns[i] for i in free]
    matrix = [[*row, given[e]] for e, row in zip(elements, _rows(unknown, elements), strict=True)]
    rows, pivots = _eliminated(matrix)
    if len(free) in pivots:
        remark = ", where what is not written beside ? is 1" if "?" in text else ""
        raise CannotBalance(what=text[:80], why=_first_failing(unknown, given) + remark)
    if len(pivots) < len(free):
        raise SeveralReactions(what=text[:80], count=_independent(columns))
    solved = {i: rows[place][-1] for place, i in enumerate(free)}
    return [(fixed | solved)[i] for i in range(len(columns))]


def _first_failing(columns: list[Column], given: Column) -> str:
    """The first element, in the order written, that cannot be conserved together with those before it."""
    elements = list(given) or _elements(columns)
    for n in range(1, len(elements) + 1):
        rows = _rows(columns, elements[:n])
        if given:
            rows = [[*row, given[e]] for e, row in zip(elements, rows, strict=False)]
        pivots = _eliminated(rows)[1]
        if len(columns) in pivots or (not given and len(pivots) == len(columns)):
            break
    before = ", ".join(elements[: n - 1])
    also = f" that conserve {before[:60]}" if before else ""
    return f"{elements[n - 1]} is not conserved by any coefficients{also}" + (" beside those given" if given else "")


def imbalance(text: str) -> list[list[object]]:
    """What is missing on which side, as a table with a header row.

    Parameters
    ----------
    text : str. Equation text; a coefficient not written is 1.

    Returns
    -------
    list of rows: what, on the left, on the right, missing. One row says ``balanced`` where nothing is.
    """
    equation = parse_equation(text, "equation")
    head: list[list[object]] = [["what", "left", "right", "missing"]]
    found = differences(equation, formulas_of(equation))
    if not found:
        return [*head, ["balanced", "", "", ""]]
    return head + [
        [what, left, right, _missing(what, left, right)] for what, (left, right) in sorted(found.items())
    ]


def _missing(what: str, left: float, right: float) -> str:
    if what == "charge":
        return f"{right - left:+g} on the left"
    return f"{abs(left - right):g} on the {'left' if left < right else 'right'}"
