"""Coefficients from the conservation of atoms and charge, in exact rational arithmetic.

The coefficients of an equation span the null space of its matrix of atoms and charge (Smith & Missen,
Chemical Reaction Equilibrium Analysis, 1982, chapter 2; citation from memory).
"""

from __future__ import annotations

from fractions import Fraction
from math import gcd, lcm

from thermofuncs.errors import CannotBalance, SeveralReactions, WrongSide
from thermofuncs.reactions import ELECTRON, Equation, Term, differences, parse_equation
from thermofuncs.substances.formulas import Formula, parse_species

MOST_SPECIES = 60


def formulas_of(equation: Equation, argument: str = "equation") -> dict[str, Formula]:
    """The formula of each species; a bare electron has none."""
    terms = (*equation.reactants, *equation.products)
    return {t.species: parse_species(t.species, argument) for t in terms if t.species != ELECTRON}


def balanced(text: str) -> str:
    """The equation with its coefficients.

    Parameters
    ----------
    text : str. Equation text. Without any number the smallest whole coefficients are found; where a number
        or ``?`` stands, what is given stays and the rest is solved for (no number counts as unknown then,
        too).

    Returns
    -------
    str

    Raises
    ------
    CannotBalance: no coefficients conserve every element and the charge; the sentence names them.
    SeveralReactions: the coefficients are not unique.
    WrongSide: a species belongs on the other side.
    """
    equation = parse_equation(text, "equation")
    formulas = formulas_of(equation)
    terms = [(-1, t) for t in equation.reactants] + [(1, t) for t in equation.products]
    if len(terms) > MOST_SPECIES:
        raise CannotBalance(what=text[:80], why=f"it has more than {MOST_SPECIES} species")
    columns = [_column(sign, term, formulas) for sign, term in terms]
    elements = sorted({element for column in columns for element in column})
    _each_on_both_sides(equation, formulas, text)
    fixed = {i: t.coefficient for i, (_, t) in enumerate(terms) if t.coefficient is not None}
    free = [i for i in range(len(terms)) if i not in fixed]
    matrix = [[columns[i].get(e, Fraction(0)) for i in free] for e in elements]
    right = [-sum((columns[i].get(e, Fraction(0)) * x for i, x in fixed.items()), Fraction(0)) for e in elements]
    solution = _with_given(matrix, right, text) if fixed else _smallest(matrix, text)
    values = dict(zip(free, solution, strict=True)) | fixed
    wrong = [terms[i][1].species for i, x in values.items() if x is not None and x <= 0]
    if wrong:
        raise WrongSide(what=text[:80], species=", ".join(wrong))
    done = [Term(term.species, values[i]) for i, (_, term) in enumerate(terms)]
    n = len(equation.reactants)
    return str(Equation(tuple(done[:n]), tuple(done[n:])))


def _column(sign: int, term: Term, formulas: dict[str, Formula]) -> dict[str, Fraction]:
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


def _smallest(matrix: list[list[Fraction]], text: str) -> list[Fraction]:
    """The one direction of the null space, as smallest whole numbers, positive where it can be."""
    width = len(matrix[0])
    rows, pivots = _eliminated(matrix)
    loose = [c for c in range(width) if c not in pivots]
    if not loose:
        raise CannotBalance(what=text[:80], why="only zero coefficients conserve every element and the charge")
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


def _with_given(matrix: list[list[Fraction]], right: list[Fraction], text: str) -> list[Fraction]:
    width = len(matrix[0]) if matrix else 0
    rows, pivots = _eliminated([[*row, b] for row, b in zip(matrix, right, strict=True)])
    if width in pivots:
        raise CannotBalance(what=text[:80], why="the given coefficients leave no solution")
    if len(pivots) < width:
        raise SeveralReactions(what=text[:80], count=width - len(pivots) + 1)
    return [rows[i][width] for i in range(width)]


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
