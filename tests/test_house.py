"""The rules of the house: floors, who imports what, public names, what a bare import loads."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import pytest

import thermofuncs
from thermofuncs import catalogue

PROJECT = Path(__file__).parent.parent
SOURCE = PROJECT / "thermofuncs"

# Lower floors never import higher ones. A folder stands for all of its files.
FLOORS = {
    "errors": 0, "working": 0, "units": 0, "unit_spellings": 0,
    "substances": 1,
    "reactions": 2, "balancing": 2,
    "combination": 3, "compiled": 3, "standard": 3, "quotient": 3,
    "relations": 3, "conversions": 3, "rate_constants": 3, "vapour_pressure": 3, "heat_capacity_sums": 3,
    "fits": 3,
    "catalogue": 5,
    "workbook": 6,
    "reference_page": 8, "cli": 8, "cli_output": 8,
}  # fmt: skip
# A library that only one place may import, by that place.
ONLY_IN = {
    "pint": "units", "formualizer": "workbook", "openpyxl": "workbook", "lxml": "workbook",
    "defusedxml": "workbook", "typer": "cli", "rich": "cli_output",
}  # fmt: skip
SPREADSHEET_SIDE = ("thermofuncs_addin", "addin", "xlwings")


def modules() -> list[tuple[str, str, ast.Module]]:
    """Each source file's room, its path within the package, and its tree."""
    found = []
    for path in sorted(SOURCE.rglob("*.py")):
        relative = path.relative_to(SOURCE)
        room = relative.parts[0].removesuffix(".py")
        if room != "__init__":
            found.append((room, str(relative), ast.parse(path.read_text(encoding="utf-8"))))
    return found


def imported(tree: ast.Module) -> set[str]:
    """Every module that a file names in an import, wherever it stands."""
    names: set[str] = set()
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            names |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom) and node.module:
            names.add(node.module)
            names |= {f"{node.module}.{alias.name}" for alias in node.names}
    return names


def test_every_room_has_a_floor() -> None:
    """Every module of the package stands in the table of floors."""
    assert {room for room, _, _ in modules()} == set(FLOORS)


def test_lower_floors_do_not_import_higher_ones() -> None:
    """No module imports one of a higher floor."""
    wrong = []
    for room, path, tree in modules():
        for name in imported(tree):
            parts = name.split(".")
            if parts[0] == "thermofuncs" and len(parts) > 1 and FLOORS.get(parts[1], -1) > FLOORS[room]:
                wrong.append(f"{path} imports {name}")
    assert wrong == []


def test_each_library_has_its_place() -> None:
    """A library with one door is imported behind that door alone, and the engine knows no spreadsheet side."""
    wrong = []
    for room, path, tree in modules():
        for name in imported(tree):
            library = name.split(".")[0]
            if ONLY_IN.get(library, room) != room or library in SPREADSHEET_SIDE:
                wrong.append(f"{path} imports {name}")
    assert wrong == []


def test_files_are_rooms_not_halls() -> None:
    """No source file is over 450 lines but the tree of errors, which is one class after another."""
    long = [
        path.name
        for path in SOURCE.rglob("*.py")
        if path.name != "errors.py" and len(path.read_text(encoding="utf-8").splitlines()) > 450
    ]
    assert long == []


def test_public_names() -> None:
    """The package hands on one name, and the catalogue the ten that hosts need."""
    assert thermofuncs.__all__ == ["call"]
    assert set(catalogue.__all__) == {
        "BLANK", "FUNCTIONS", "GROUPS", "Argument", "Explanation", "Function", "call", "evaluate", "explain",
        "find",
    }  # fmt: skip


@pytest.mark.parametrize(
    ("code", "forbidden"),
    [
        ("import thermofuncs", ["numpy", "scipy", "pint", "pandas", "typer", "rich", "formualizer"]),
        ("import thermofuncs.cli", ["numpy", "scipy", "pint", "pandas", "rich", "formualizer", "openpyxl"]),
        (
            "import thermofuncs.catalogue",
            ["pint", "pandas", "typer", "rich", "formualizer", "openpyxl", "scipy.optimize", "scipy.stats"],
        ),
        (
            "import thermofuncs; thermofuncs.call('LNK', 'N2(g) + 3 H2(g) = 2 NH3(g)', 700.0)",
            ["pint", "pandas", "typer", "rich", "formualizer", "scipy.optimize", "scipy.stats"],
        ),
        (
            "import thermofuncs as a; a.call('FITVALUE', 'Clarke-Glew', 'u(drH)', [280, 290, 300, 310], [1, 2, 3, 5])",
            ["pint", "pandas", "typer", "rich", "formualizer", "scipy.optimize", "scipy.stats"],
        ),
    ],
)
def test_import_budget(code: str, forbidden: list[str]) -> None:
    """A bare import, the command line and one cell load nothing heavy that they do not use."""
    script = f"{code}\nimport sys\nprint([m for m in {forbidden!r} if m in sys.modules])"
    run = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True)
    assert run.stdout.strip() == "[]"


def test_top_level() -> None:
    """The top level of the project holds what the design draws and nothing else."""
    if not (PROJECT / ".git").exists():
        pytest.skip("not a checkout: the built package is under test beside a copy of the tests")
    listed = subprocess.run(
        ["git", "ls-files"], cwd=PROJECT, capture_output=True, text=True, check=True
    ).stdout.splitlines()
    top = {line.split("/")[0] for line in listed}
    allowed = {
        "pyproject.toml", "README.md", "DEVELOPERS.md", "LICENSE", "requirements.lock",
        "addin", "thermofuncs", "tests", "workbooks",
    }  # fmt: skip
    assert {name for name in top if not name.startswith(".")} <= allowed
