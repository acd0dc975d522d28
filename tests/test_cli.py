"""The command line, with the real catalogue, in processes of its own."""

from __future__ import annotations

import re
import subprocess
import sys
from html.parser import HTMLParser
from pathlib import Path

import pytest
import xlsxwriter

from thermofuncs import call
from thermofuncs.workbook import Place
from thermofuncs.workbook.book import read_book

SHIFT = "CO(g) + H2O(g) = CO2(g) + H2(g)"


def run(*words: str) -> subprocess.CompletedProcess[str]:
    """The command in a process of its own."""
    command = [sys.executable, "-m", "thermofuncs.cli", *words]
    return subprocess.run(command, capture_output=True, text=True, encoding="utf-8", timeout=120, check=False)


@pytest.fixture
def book(tmp_path: Path) -> Path:
    """A workbook of an invented plant: K of a reaction over a column of temperatures."""
    path = tmp_path / "shift.xlsx"
    with xlsxwriter.Workbook(path) as workbook:
        sheet = workbook.add_worksheet("K of T")
        sheet.write("A1", SHIFT)
        for row, temperature in enumerate([600.0, 700.0, "800 K"], 3):
            sheet.write(row - 1, 0, temperature)
            sheet.write_formula(row - 1, 1, f"=TF.LNK($A$1,A{row})")
            sheet.write_formula(row - 1, 2, f"=EXP(B{row})")
        sheet.write_array_formula("D3:D5", "{=TF.LNK($A$1,A3:A5)}")
        sheet.write_array_formula("F1:H20", "{=TF.IMBALANCE(A1)}")
        sheet.write_formula("E3", "=TF.DRH(A1,A3,,,)")
    return path


@pytest.fixture
def clean(tmp_path: Path) -> Path:
    """A workbook in which nothing is an error."""
    path = tmp_path / "clean.xlsx"
    with xlsxwriter.Workbook(path) as workbook:
        sheet = workbook.add_worksheet("S")
        sheet.write_formula("A1", f'=TF.LNK("{SHIFT}",900)')
        sheet.write_formula("A2", "=A1+1")
    return path


def test_recalc_writes_a_copy(clean: Path) -> None:
    """Recalc ends with 0, names the new file beside the input, and its values are the engine's bits."""
    before = clean.read_bytes()
    done = run("recalc", str(clean))
    assert (done.returncode, done.stderr) == (0, "")
    copy = clean.with_name("clean-recalculated.xlsx")
    assert done.stdout.splitlines()[-1] == f"Wrote {copy}"
    assert "2 cells recalculated with 1 calls. Changed: 2. Errors: 0. Stored value kept: 0." in done.stdout
    assert clean.read_bytes() == before
    assert read_book(copy).value(Place("S", 1, 1)) == call("LNK", SHIFT, 900.0)
    assert run("recalc", str(clean)).stdout.splitlines()[-1].endswith("clean-recalculated-2.xlsx")


def test_recalc_with_errors(book: Path, tmp_path: Path) -> None:
    """Recalc ends with 1 where cells are errors, prints their sentences, and still writes the copy."""
    out = tmp_path / "out.xlsx"
    done = run("recalc", str(book), "-o", str(out))
    assert done.returncode == 1
    assert "#N/A" in done.stdout
    stored = read_book(out)
    for row, temperature in ((3, 600.0), (4, 700.0), (5, "800 K")):
        scalar = stored.value(Place("K of T", row, 2))
        assert scalar == call("LNK", SHIFT, temperature)
        assert stored.value(Place("K of T", row, 4)) == pytest.approx(scalar, rel=1e-14)
    assert stored.value(Place("K of T", 3, 5)) == call("DRH", SHIFT, 600.0)


def test_recalc_refuses(tmp_path: Path, clean: Path) -> None:
    """A refused file ends with 3, an output that cannot be written with 4, and nothing is written."""
    bad = tmp_path / "bad.xlsx"
    bad.write_bytes(clean.read_bytes()[:500])
    files = sorted(tmp_path.iterdir())
    done = run("recalc", str(bad))
    assert done.returncode == 3
    assert "bad.xlsx is damaged: its archive cannot be read" in done.stderr
    assert run("recalc", str(tmp_path / "none.xlsx")).returncode == 3
    for target in (clean, tmp_path / "no" / "x.xlsx", tmp_path, bad):
        done = run("recalc", str(clean), "-o", str(target))
        assert done.returncode == 4, done.stdout
        assert "is not written: " in done.stderr
    assert sorted(tmp_path.iterdir()) == files
    assert run("recalc", str(clean), "-o", str(bad), "--overwrite").returncode == 0


def test_usage(clean: Path) -> None:
    """A command that is not understood, or names what is not there, ends with 2."""
    for words in (["recalc"], ["nonsense"], ["recalc", str(clean), "--bad"], ["call", "NOPE", "1"]):
        assert run(*words).returncode == 2, words
    done = run("working", str(clean), "S!B9")
    assert (done.returncode, done.stderr) == (2, "S!B9: it is blank.\n")


@pytest.mark.parametrize("words", [["--help"], ["recalc", "--help"], ["working", "--help"]])
def test_help_has_the_exit_codes(words: list[str]) -> None:
    """Each command's help lists what each exit code means."""
    done = run(*words)
    assert done.returncode == 0
    for code in "01234":
        assert re.search(rf"^ *{code}  \w", done.stdout, re.MULTILINE), done.stdout


def test_working(book: Path) -> None:
    """The working of a cell ends in its value, to the last bit."""
    done = run("working", str(book), "'K of T'!B3")
    assert done.returncode == 0
    value = call("LNK", SHIFT, 600.0)
    assert f"Value of 'K of T'!B3: {value!r}. The last step is the cell's value, to the last bit." in done.stdout
    assert f'$A$1 is "{SHIFT}"' in done.stdout
    assert "NOT" not in done.stdout


def test_working_of_an_array_cell(book: Path) -> None:
    """The working of an array formula's cell is that of its own temperature."""
    done = run("working", str(book), "K of T!D4")
    assert done.returncode == 0
    assert "A3:A5 is 700" in done.stdout
    assert "ΔrH°" in done.stdout


def test_call() -> None:
    """Call prints the value as the engine gives it, an error's sentence goes to standard error."""
    done = run("call", "LNK", SHIFT, "900.0")
    assert (done.returncode, done.stdout) == (0, f"{call('LNK', SHIFT, 900.0)!r}\n")
    assert run("call", "tf.drh", SHIFT, "900", "kcal/mol").returncode == 0
    done = run("call", "LNK", SHIFT, "25")
    assert done.returncode == 1
    assert done.stdout == ""
    assert done.stderr.startswith("#NUM! ")
    assert run("call", "RXNSUM", "[[1], [-1]]", "[[5], [2]]").stdout.split()[0] == "3"


def test_functions() -> None:
    """Functions lists what has the text; nothing found ends with 1."""
    done = run("functions", "equilibrium constant")
    assert done.returncode == 0
    assert "TF.LNK(reaction, T" in done.stdout
    assert run("functions", "no such text").returncode == 1


class _Page(HTMLParser):
    """Collects the headings and checks that elements close."""

    def __init__(self) -> None:
        super().__init__()
        self.open: list[str] = []
        self.headings: list[str] = []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        if tag != "meta":
            self.open.append(tag)
        if tag == "h3":
            self.headings.append(dict(attrs)["id"] or "")

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag


def test_reference_page(tmp_path: Path) -> None:
    """The reference page has every function once, well-formed, with an example that gives no error."""
    from thermofuncs.catalogue import FUNCTIONS

    path = tmp_path / "page.html"
    assert run("functions", "--html", str(path)).returncode == 0
    text = path.read_text(encoding="utf-8")
    page = _Page()
    page.feed(text)
    assert page.open == []
    assert page.headings == list(FUNCTIONS)
    for code in ("#VALUE!", "#NUM!", "#N/A"):
        assert f"<code>{code}</code>" not in text
    assert run("functions", "--html", str(tmp_path / "no" / "x.html")).returncode == 4


def test_substances() -> None:
    """Substances lists what matches; nothing found ends with 1."""
    done = run("substances", "water")
    assert done.returncode == 0
    assert "H2O" in done.stdout
    done = run("substances", "xyzzy")
    assert done.returncode == 1
    assert done.stderr


def test_terminal_codes_are_defused(tmp_path: Path) -> None:
    """Control characters from a workbook do not reach the terminal."""
    path = tmp_path / "escape.xlsx"
    with xlsxwriter.Workbook(path) as workbook:
        sheet = workbook.add_worksheet("S")
        sheet.write_string("A1", "\x1b[31mred\x07")
        sheet.write_formula("B1", '=A1&TF.MOLM("H2O")')
    done = run("recalc", str(path))
    assert done.returncode == 0
    assert "\x1b" not in done.stdout
    assert "\x07" not in done.stdout
    assert "[31mred" in done.stdout
