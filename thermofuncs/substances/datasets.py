"""What is bundled: each table with its reference and the hash of its content."""

from __future__ import annotations

from dataclasses import dataclass

from thermofuncs.substances import aqueous, nasa_glenn, printed


@dataclass(frozen=True, slots=True)
class Dataset:
    """A bundled table: its id, title, reference line, content hash and number of records."""

    id: str
    title: str
    reference: str
    sha256: str
    rows: int


def datasets() -> list[Dataset]:
    """The bundled tables."""
    return [
        Dataset(
            printed.DATASET, printed.TITLE, printed.REFERENCE, nasa_glenn.sha256(), len(nasa_glenn.lines())
        ),
        Dataset(aqueous.DATASET, aqueous.TITLE, aqueous.REFERENCE, aqueous.sha256(), len(aqueous.ions())),
    ]
