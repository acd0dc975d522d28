"""Make the sample workbooks and their side files of expected cells.

Run ``python workbooks/make_samples.py [FOLDER]``; without a folder the committed samples are made anew. The
same engine, data and library versions make the same bytes.
"""

from __future__ import annotations

import sys
from pathlib import Path

HERE = Path(__file__).resolve().parent
sys.path.append(str(HERE.parent))  # at the end: an installed engine goes before the one beside this folder

from workbooks import lime_kiln, sulfur_dioxide_converter  # noqa: E402 - found through the line above
from workbooks.sheets import make  # noqa: E402 - as above

SAMPLES = {
    "lime-kiln.xlsx": lime_kiln,
    "sulfur-dioxide-converter.xlsx": sulfur_dioxide_converter,
}


def main(folder: Path) -> None:
    """Make all samples in a folder."""
    for name, sample in SAMPLES.items():
        make(folder / name, sample.build, sample.TITLE)
        print(f"Made {folder / name}")


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else HERE)
