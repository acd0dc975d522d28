"""One scalar cell in the headless host against an empty registered function of the same evaluator.

Run: python tests/benchmarks/cells.py
Both evaluate the same number of cells with two arguments each, in their own evaluator, from a loaded workbook;
the empty function is registered with the evaluator and returns a constant.
"""

from __future__ import annotations

import tempfile
import time
from pathlib import Path
from statistics import median

import formualizer
import xlsxwriter
from timing import line

from thermofuncs import catalogue
from thermofuncs.cli import catalogue_functions
from thermofuncs.workbook.addresses import Place
from thermofuncs.workbook.book import read_book
from thermofuncs.workbook.evaluation import Evaluation
from thermofuncs.workbook.rewriting import Rewriter

CELLS, ROUNDS = 20_000, 9
REACTION = "CO(g) + 2 H2(g) = CH3OH(g)"


def workbook(path: Path) -> None:
    """A sheet with a temperature and a call in each row."""
    book = xlsxwriter.Workbook(str(path))
    sheet = book.add_worksheet()
    for row in range(CELLS):
        sheet.write_number(row, 0, 300.0 + 0.1 * row)
        sheet.write_formula(row, 1, f'=TF.LNK("{REACTION}",A{row + 1})')
    book.close()


def ours(path: Path) -> float:
    """Seconds that the headless host takes over the cells."""
    book, functions = read_book(path), catalogue_functions()
    rewriter = Rewriter(book, functions.names, functions.tables)
    formulas = {
        Place(sheet.name, row, column): rewriter.prepare(Place(sheet.name, row, column), stored)
        for sheet in book.sheets.values()
        for (row, column), stored in sheet.formulas.items()
    }
    evaluation = Evaluation(book, formulas, rewriter.sites, functions)
    started = time.perf_counter()
    evaluation.run()
    taken = time.perf_counter() - started
    assert len(evaluation.answers) == CELLS
    return taken


def registered(function: object) -> float:
    """Seconds that the evaluator takes over as many cells of a registered function."""
    book = formualizer.Workbook()
    book.add_sheet("Sheet")
    book.register_function("PLAIN", function, min_args=2)
    for row in range(1, CELLS + 1):
        book.set_value("Sheet", row, 1, 300.0 + 0.1 * row)
        book.set_formula("Sheet", row, 2, f'=PLAIN("{REACTION}",A{row})')
    started = time.perf_counter()
    book.evaluate_all()
    taken = time.perf_counter() - started
    assert isinstance(book.get_value("Sheet", CELLS, 2), float)
    return taken


def main() -> None:
    """Print the ratios."""
    times: dict[str, list[float]] = {"empty": [], "door": [], "host": []}
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "cells.xlsx"
        workbook(path)
        for _ in range(ROUNDS):
            times["empty"].append(registered(lambda _, __: 1.0))
            times["door"].append(registered(lambda *a: catalogue.evaluate("LNK", a)))
            times["host"].append(ours(path))
    found = {name: median(values) for name, values in times.items()}
    print(f"an empty registered function: {found['empty'] / CELLS * 1e6:.2f} microseconds for a cell")
    print(f"{'one scalar cell':<78}{'ratio':>9}   wanted")
    print(line("the catalogue's door, registered by itself", found["door"] / found["empty"], "at most 3"))
    print(line("the headless host, with its record of every call", found["host"] / found["empty"], "at most 3"))


if __name__ == "__main__":
    main()
