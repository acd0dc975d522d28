"""The bundled tables and what they cost."""

from __future__ import annotations

import hashlib
import re
from pathlib import Path

import thermofuncs.substances
from thermofuncs.substances import datasets

FOLDER = Path(thermofuncs.substances.__file__).parent


def test_each_dataset_has_the_hash_of_its_file() -> None:
    """The hash of each dataset is that of the file that is shipped."""
    files = {d.id: name for d, name in zip(datasets(), ("nasa_glenn.csv", "aqueous_ions.csv"), strict=True)}
    for dataset in datasets():
        assert dataset.sha256 == hashlib.sha256((FOLDER / files[dataset.id]).read_bytes()).hexdigest()
    assert [d.rows for d in datasets()] == [2111, 173]


def test_each_table_says_its_source() -> None:
    """The first lines of every bundled table say where its figures come from."""
    for path in FOLDER.glob("*.csv"):
        head = "\n".join(path.read_text(encoding="utf-8").splitlines()[:8])
        assert re.search(r"reference|source", head), path.name


def test_the_notice_names_each_licence() -> None:
    """The notice carries the attribution of the space agency and the licence of the ions' carrier."""
    notice = (FOLDER / "NOTICE.txt").read_text(encoding="utf-8")
    flat = " ".join(notice.split())
    assert "Administrator of the National Aeronautics and Space Administration" in flat
    assert "Apache License, Version 2.0" in flat
    assert "Caleb Bell" in flat
    for path in FOLDER.glob("*.csv"):
        assert path.name in notice
