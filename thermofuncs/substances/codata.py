"""Uncertainties from the CODATA key values, for the substances of the bundled data that agree with them."""

from __future__ import annotations

import csv
from functools import lru_cache
from pathlib import Path

from thermofuncs.substances.records import Uncertainty

TABLE = Path(__file__).with_name("codata_uncertainties.csv")


@lru_cache(maxsize=1)
def values() -> dict[str, dict[str, str]]:
    """The printed values and uncertainties of each substance, by its label."""
    lines = TABLE.read_text(encoding="utf-8").splitlines()
    rows = csv.DictReader(line for line in lines if not line.startswith("#"))
    return {row["substance"]: row for row in rows}


def uncertainties(label: str) -> tuple[Uncertainty, Uncertainty]:
    """Standard uncertainties of ΔfH° [J/mol] and S° [J/(mol K)] at 298.15 K of a substance.

    The ± terms of Cox, Wagman & Medvedev (1989) are taken as standard uncertainties; the table's header says
    why. Unknown where the table has none.

    Parameters
    ----------
    label : str. Label of the solid, liquid or gas, such as ``Al2O3(s)``.
    """
    row = values().get(label)
    if row is None:
        return Uncertainty.unknown(), Uncertainty.unknown()
    enthalpy, entropy = row["u_dfH_kJ_mol"], row["u_S_J_mol_K"]
    return (
        Uncertainty.given(float(enthalpy) * 1000.0) if enthalpy else Uncertainty.unknown(),
        Uncertainty.given(float(entropy)) if entropy else Uncertainty.unknown(),
    )
