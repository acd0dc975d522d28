"""The importer of the aqueous ions; chemicals (MIT), which carries the source table, is a test dependency."""

from __future__ import annotations

from pathlib import Path

import chemicals
import pytest

from thermofuncs.substances import aqueous, ions_importer

SOURCE = Path(chemicals.__file__).parent / "Electrolytes" / "CRC Thermodynamic Properties of Aqueous Ions.tsv"


def test_the_shipped_table_is_made_from_its_source(tmp_path: Path) -> None:
    """The shipped table is, byte for byte, what the importer makes of the source."""
    table = tmp_path / "ions.csv"
    assert ions_importer.main([str(SOURCE), str(table)]) == 0
    assert table.read_bytes() == aqueous.TABLE.read_bytes()
    assert list(tmp_path.iterdir()) == [table]


@pytest.mark.parametrize(
    ("formula", "label"),
    [("SO4-2", "SO4^2-(aq)"), ("NO3-", "NO3-(aq)"), ("Na+", "Na+(aq)"), ("N3-", "N3^-(aq)"),
     ("Hg2+2", "Hg2^2+(aq)"), ("Y(OH)+2", "YOH^2+(aq)"), ("Th(OH)2+2", "Th(OH)2^2+(aq)"),
     ("Fe(OH)2+", "Fe(OH)2^+(aq)")],
)  # fmt: skip
def test_labels(formula: str, label: str) -> None:
    """A charge stands behind a caret where it has a number or could be read as one."""
    assert ions_importer.label(formula) == label


def test_a_formula_without_charge_is_refused() -> None:
    """A neutral solute is no ion."""
    with pytest.raises(ValueError) as refused:
        ions_importer.label("CO2")
    assert str(refused.value) == "'CO2' has no charge at its end"
