"""Makes the table of aqueous ions from the tab-separated table that the chemicals package carries.

    python -m thermofuncs.substances.ions_importer ions.tsv table.csv

The source writes a charge as ``SO4-2``; people write ``SO4^2-``. Figures are copied as characters.
"""

from __future__ import annotations

import argparse
import csv
import io
import re
import sys
from pathlib import Path

from thermofuncs.substances import printed
from thermofuncs.substances.formulas import parse_species

COLUMNS = (
    "printed", "label", "name", "composition", "charge",
    "dfH298_J_mol", "dfG298_J_mol", "S298_J_mol_K", "Cp298_J_mol_K",
)  # fmt: skip
HEADER = """\
# dataset: nbs-1982-ions
# title: Ions in water at 298.15 K, 1 mol/kg, H+(aq) = 0
# reference: Wagman et al., The NBS tables of chemical thermodynamic properties, J. Phys. Chem. Ref. Data 11 Suppl. 2, 1982
# obtained: from the table of aqueous ions of the chemicals package (MIT licence, see NOTICE.txt), 1.5.2
# unit: J/mol, J/(mol K)
"""  # noqa: E501  one comment line of the table
MENDED = {"Y(OH)+2": "YOH+2"}  # every other hydroxide ion of the source stands without the bracket

_CHARGED = re.compile(r"(.+?)([+-])(\d*)")


def label(formula: str) -> str:
    """The label of an ion of the source: ``SO4-2`` gives ``SO4^2-(aq)``, ``NO3-`` gives ``NO3-(aq)``.

    Parameters
    ----------
    formula : str. As the source prints it.
    """
    charged = _CHARGED.fullmatch(MENDED.get(formula, formula))
    if charged is None:
        message = f"{formula!r} has no charge at its end"
        raise ValueError(message)
    base, sign, number = charged.groups()
    counted = re.fullmatch(r"[A-Z][a-z]?\d+|.*\)\d+", base)
    caret = "^" if number or counted else ""
    return f"{base}{caret}{number}{sign}(aq)"


def make(rows: list[dict[str, str]]) -> str:
    """The table's text.

    Parameters
    ----------
    rows : list of dict. The lines of the source.
    """
    out = io.StringIO()
    out.write(HEADER)
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(COLUMNS)
    for row in rows:
        shown = label(row["Formula"])
        ion = parse_species(shown)
        writer.writerow(
            [row["Formula"], shown, row["Name"].strip(), printed.composition_key(tuple(ion.composition.items())),
             ion.charge, row["Hf(aq)"], row["Gf(aq)"], row["S(aq)"], row["Cp(aq)"]]
        )  # fmt: skip
    return out.getvalue()


def main(arguments: list[str] | None = None) -> int:
    """Read the source, make the table and write it."""
    parser = argparse.ArgumentParser(prog="python -m thermofuncs.substances.ions_importer", description=__doc__)
    parser.add_argument("ions", type=Path)
    parser.add_argument("table", type=Path)
    paths = parser.parse_args(arguments)
    with paths.ions.open(newline="", encoding="utf-8") as file:
        text = make(list(csv.DictReader(file, delimiter="\t")))
    unfinished = paths.table.with_name(paths.table.name + ".unfinished")
    unfinished.write_text(text, encoding="utf-8", newline="")
    unfinished.replace(paths.table)
    return 0


if __name__ == "__main__":
    sys.exit(main())
