"""Makes the table of NASA Glenn records from two comma-separated files of the publisher's figures.

    python -m thermofuncs.substances.importer substances.csv intervals.csv table.csv

The first file has a line for each record, the second a line for each temperature interval. What the
publisher's edition of 2021 gets wrong is mended here and said in the record's note:

- most gases start at 300 K there although their coefficients are those of 2004, whose limit is 200 K;
- eleven condensed records have an empty first interval;
- the composition columns round Fe0.947O to Fe0.95O.

A table that fails a gate is not written.
"""

from __future__ import annotations

import argparse
import csv
import hashlib
import io
import re
import sys
from pathlib import Path

from thermofuncs.substances import gates, printed
from thermofuncs.substances.forms import Interval

PUBLISHERS_FILE_SHA256 = "fa7746572952d74e249e818a82a35c113829742fb421a308e167185528884363"
KEEPS_2021_LIMIT = {("FeCL3", 0): "its enthalpy of 2004 had kilocalories in place of kilojoules"}
COMPOSITION_MENDED = {"Fe:0.95;O:1": ("Fe:0.947;O:1", "the composition columns round 0.947 to 0.95")}
MIXTURES = ("Jet-A(L)",)  # liquid and gas stand for different mixtures: no boiling point follows from them

Row = dict[str, str]


def read(path: Path) -> list[Row]:
    """The lines of a comma-separated file with a header."""
    with path.open(newline="", encoding="utf-8") as file:
        return list(csv.DictReader(file))


def interval_texts(rows: list[Row]) -> dict[str, list[list[str]]]:
    """The eleven numbers of each interval, as characters, for each record."""
    columns = ["T_low_K", "T_high_K", *(f"a{i}" for i in range(1, 8)), "b1", "b2"]
    found: dict[str, list[list[str]]] = {}
    for row in rows:
        found.setdefault(row["substance_id"], []).append([row[c] for c in columns])
    return found


def with_lower_limit(row: Row, intervals: list[list[str]]) -> str:
    """Set the lower limit of the first interval from the 2004 edition; give the note that says so."""
    if not intervals:
        return ""
    printed_low, printed_high = float(intervals[0][0]), float(intervals[0][1])
    low_2004 = row["Tmin_2004_K"]
    kept = KEEPS_2021_LIMIT.get((row["name"], int(row["phase_index"])))
    if kept:
        return f"lower limit {printed_low:g} K of the 2021 edition kept: {kept}"
    if not low_2004 or float(low_2004) >= printed_low:
        return ""
    intervals[0][0] = low_2004
    if printed_low >= printed_high:
        return (
            f"the 2021 edition prints the empty interval {printed_low:g} to {printed_high:g} K;"
            f" mended with the lower limit {float(low_2004):g} K of the 2004 edition"
        )
    return f"lower limit {float(low_2004):g} K of the 2004 edition, whose coefficients these are"


def labels(name: str, phase: str) -> tuple[str, str]:
    """The label of a record and of the solid, liquid or gas that it is a part of.

    ``AL2O3(a)`` gives ``Al2O3(a)`` and ``Al2O3(s)``; ``C2H2,acetylene`` gives itself with ``(g)``.
    """
    shown = re.sub(r"(?<=[A-Za-z])\.(?=\d)", "0.", name.replace("AL", "Al").replace("CL", "Cl"))
    charged = re.fullmatch(r"(.*[A-Za-z])(\d+)([+-])", shown)
    if charged:
        shown = f"{charged[1]}{charged[2]}^{charged[3]}"
    double = re.fullmatch(r"(.*?)(\+\+|--)", shown)
    if double:
        shown = f"{double[1]}^2{double[2][0]}"
    if phase == "g":
        label = shown if shown.endswith("(g)") else f"{shown}(g)"
        return label, label
    tagged = re.fullmatch(r"(.+)\(([^()]*)\)(,.*)?", shown)
    if not tagged:
        return shown, shown
    base, tag, suffix = tagged[1], tagged[2], tagged[3] or ""
    tag = {"L": "l", "cr": "s"}.get(tag, tag)
    return f"{base}{suffix}({tag})", f"{base}{suffix}({phase})"


def boiling_point(liquid: list[Interval], gas: list[Interval]) -> float | None:
    """Where liquid and gas at 1 bar have the same Gibbs energy, inside both ranges. [K]"""
    low = max(liquid[0].t_low, gas[0].t_low)
    high = min(liquid[-1].t_high, gas[-1].t_high)

    def difference(temperature: float) -> float:
        l_part = next(i for i in liquid if temperature <= i.t_high)
        g_part = next(i for i in gas if temperature <= i.t_high)
        return gates.gibbs_over_rt(g_part, temperature) - gates.gibbs_over_rt(l_part, temperature)

    if low >= high or difference(low) <= 0.0 or difference(high) >= 0.0:
        return None
    while high - low > 1e-6:
        middle = 0.5 * (low + high)
        low, high = (middle, high) if difference(middle) > 0.0 else (low, middle)
    return 0.5 * (low + high)


def table_fields(row: Row, intervals: list[list[str]]) -> list[str]:
    """The fields of a record's line, without the boiling point."""
    notes = [with_lower_limit(row, intervals)]
    formula = row["formula"]
    if formula in COMPOSITION_MENDED:
        formula, note = COMPOSITION_MENDED[formula]
        notes.append(note)
    atoms = [(symbol, float(n)) for symbol, n in (part.split(":") for part in formula.split(";"))]
    charge = -round(sum(n for symbol, n in atoms if symbol == "E"))
    composition = [(symbol, n) for symbol, n in atoms if symbol != "E"]
    phase = {"g": "g", "l": "l", "cr": "s"}[row["state"]]
    label, chain = labels(row["name"], phase)
    inert = any(symbol in ("Ic", "Ih", "Io") for symbol, _ in composition)
    use = "inert" if inert else {"products": "product", "reactants": "reactant"}[row["section"]]
    mass = row["molar_mass_g_mol"]
    if row["formula"] in COMPOSITION_MENDED:
        mass = f"{0.947 * 55.845 + 15.9994:.6g}"
        notes.append("molar mass of that composition")
    reference = " ".join(f"{row['ref_code']}; {row['comment']}".split())
    return [
        row["name"], row["phase_index"], phase, label, chain, printed.composition_key(tuple(composition)),
        str(charge), mass, row["Hf298_J_mol"], use, "", reference,
        "; ".join(filter(None, notes)), row["source_line"], "; ".join(" ".join(i) for i in intervals),
    ]  # fmt: skip


def with_boiling_points(table: list[list[str]]) -> None:
    """Fill in where each liquid whose gas is in the set reaches 1 bar."""
    gases: dict[tuple[str, str], list[tuple[str, tuple[Interval, ...]]]] = {}
    for fields in table:
        r = printed.record(fields)
        if r.phase == "g" and r.intervals and r.use != "inert":
            gases.setdefault((fields[5], fields[6]), []).append((r.label.removesuffix("(g)"), r.intervals))
    for fields in table:
        r = printed.record(fields)
        if r.phase != "l" or not r.intervals or r.use == "inert" or r.name in MIXTURES:
            continue
        candidates = gases.get((fields[5], fields[6]), [])
        if len(candidates) > 1:
            stem = r.label.removesuffix("(l)")
            candidates = [c for c in candidates if c[0].startswith(stem)]
        if len(candidates) == 1:
            boils = boiling_point(list(r.intervals), list(candidates[0][1]))
            fields[10] = "" if boils is None else f"{boils:.2f}"


def make(substances: list[Row], intervals: list[Row], sources: str) -> tuple[str, list[str]]:
    """The table's text, and the faults that forbid its use.

    Parameters
    ----------
    substances, intervals : list of dict. The lines of the two files.
    sources : str. The hashes of the two files, for the header.
    """
    texts = interval_texts(intervals)
    table = [table_fields(row, texts.get(row["id"], [])) for row in substances]
    with_boiling_points(table)
    out = io.StringIO()
    out.write(f"# dataset: {printed.DATASET}\n# title: {printed.TITLE}\n# reference: {printed.REFERENCE}\n")
    out.write(f"# publisher's file sha256: {PUBLISHERS_FILE_SHA256}\n# made from: {sources}\n")
    out.write("# unit: K, J/mol, g/mol; coefficients of Cp/R as printed, fitted with R = 8.31451 J/(mol K)\n")
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(printed.COLUMNS)
    writer.writerows(table)
    return out.getvalue(), gates.faults([printed.record(fields) for fields in table])


def main(arguments: list[str] | None = None) -> int:
    """Read two files, make the table, and write it if it passes every gate."""
    parser = argparse.ArgumentParser(prog="python -m thermofuncs.substances.importer", description=__doc__)
    for name in ("substances", "intervals", "table"):
        parser.add_argument(name, type=Path)
    paths = parser.parse_args(arguments)
    hashes = [hashlib.sha256(p.read_bytes()).hexdigest() for p in (paths.substances, paths.intervals)]
    sources = " ".join(f"sha256 {h}" for h in hashes)
    text, faults = make(read(paths.substances), read(paths.intervals), sources)
    for fault in faults:
        sys.stderr.write(fault + "\n")
    if faults:
        sys.stderr.write(f"{len(faults)} faults: {paths.table} was not written\n")
        return 1
    unfinished = paths.table.with_name(paths.table.name + ".unfinished")
    unfinished.write_text(text, encoding="utf-8", newline="")
    unfinished.replace(paths.table)
    sys.stdout.write(f"{text.count(chr(10)) - 7} records written to {paths.table}\n")
    return 0


if __name__ == "__main__":
    sys.exit(main())
