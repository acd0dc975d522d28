"""The importer mends what it says, and writes nothing that fails a gate."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

from thermofuncs.substances import importer, printed

SUBSTANCES = (
    "id,name,section,phase_index,state,formula,molar_mass_g_mol,Hf298_J_mol,H298_H0_J_mol,Tmin_2021_K,"
    "Tmin_2004_K,Tmax_K,n_intervals,ref_code,comment,source_line,defect\n"
    '0,Ar,products,0,g,Ar:1,39.948,0.0,6197.428,300.0,200.0,6000.0,1,g 3/98,"Ref-Elm. Moore,1971.",1,\n'
    "1,XAL,products,0,g,Ar:1,39.948,0.0,6197.428,300.0,200.0,298.15,2,x,Made up.,2,inverted\n"
)
NUMBERS = "0.0,0.0,2.5,0.0,0.0,0.0,0.0,-745.375,4.37967491"
INTERVALS = (
    "substance_id,interval,T_low_K,T_high_K,a1,a2,a3,a4,a5,a6,a7,b1,b2\n"
    f"0,0,300.0,6000.0,{NUMBERS}\n1,0,300.0,298.15,{NUMBERS}\n1,1,298.15,6000.0,{NUMBERS}\n"
)


@pytest.fixture
def files(tmp_path: Path) -> tuple[Path, Path, Path]:
    """The two input files and the place of the table."""
    substances, intervals = tmp_path / "s.csv", tmp_path / "i.csv"
    substances.write_text(SUBSTANCES, encoding="utf-8")
    intervals.write_text(INTERVALS, encoding="utf-8")
    return substances, intervals, tmp_path / "table.csv"


def test_a_table_is_made_and_read_back(files: tuple[Path, Path, Path]) -> None:
    """What the importer writes reads back with the printed coefficients and the mended limits."""
    substances, intervals, table = files
    assert importer.main([str(p) for p in (substances, intervals, table)]) == 0
    text = table.read_text(encoding="utf-8")
    argon, made_up = (printed.record(fields) for fields in printed.lines(text))
    assert (argon.intervals[0].t_low, argon.intervals[0].t_high) == (200.0, 6000.0)
    assert argon.intervals[0].terms[2] == (0.0, 2.5)
    assert "2004 edition" in argon.note
    assert made_up.label == "XAl(g)"
    assert "empty interval 300 to 298.15 K" in made_up.note
    assert text.count("sha256") == 3


def test_a_faulty_table_is_not_written(
    files: tuple[Path, Path, Path], capsys: pytest.CaptureFixture[str]
) -> None:
    """A table that fails a gate leaves no file behind, and each fault is told."""
    substances, intervals, table = files
    substances.write_text(SUBSTANCES.replace(",0.0,6197.428", ",1000.0,6197.428", 1), encoding="utf-8")
    assert importer.main([str(p) for p in (substances, intervals, table)]) == 1
    assert not table.exists()
    assert list(table.parent.glob("*.unfinished")) == []
    assert "Ar phase 0, line 1: H(298.15 K) is -1e+03 J/mol off" in capsys.readouterr().err


@pytest.mark.parametrize(
    ("name", "phase", "label", "chain"),
    [
        ("AL2O3(a)", "s", "Al2O3(a)", "Al2O3(s)"),
        ("CaO(cr)", "s", "CaO(s)", "CaO(s)"),
        ("Fe(L)", "l", "Fe(l)", "Fe(l)"),
        ("Fe.947O(cr)", "s", "Fe0.947O(s)", "Fe0.947O(s)"),
        ("C8H18(L),n-octa", "l", "C8H18,n-octa(l)", "C8H18,n-octa(l)"),
        ("C2H2,acetylene", "g", "C2H2,acetylene(g)", "C2H2,acetylene(g)"),
        ("K(HF2)(a)", "s", "K(HF2)(a)", "K(HF2)(s)"),
        ("ALCL+", "g", "AlCl+(g)", "AlCl+(g)"),
        ("O2-", "g", "O2^-(g)", "O2^-(g)"),
        ("Be++", "g", "Be^2+(g)", "Be^2+(g)"),
        ("JP-10(g)", "g", "JP-10(g)", "JP-10(g)"),
    ],
)
def test_labels(name: str, phase: str, label: str, chain: str) -> None:
    """A label shows element symbols as people write them, with the phase of the house."""
    assert importer.labels(name, phase) == (label, chain)


def test_a_table_with_other_columns_is_refused() -> None:
    """A table whose header is not the one of this edition is not read."""
    with pytest.raises(ValueError) as refused:
        printed.lines("# a comment\nname,other\nx,y\n")
    assert "the table has the columns" in str(refused.value)


def test_fields_survive_quoting() -> None:
    """A field with commas and quotes reads back as it was written."""
    fields = ["x"] * len(printed.COLUMNS)
    fields[11] = 'a "quoted", text'
    lines = [",".join(printed.COLUMNS)]
    line = ",".join('"' + f.replace('"', '""') + '"' for f in fields)
    assert printed.lines("\n".join([*lines, line])) == [fields]
    assert next(csv.reader([line])) == fields
