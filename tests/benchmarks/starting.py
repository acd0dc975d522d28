"""The cost of starting: importing the package, and the help of the command line, against importing numpy.

Run: python tests/benchmarks/starting.py
Each is a fresh interpreter; what a bare interpreter costs is taken off all of them.
"""

from __future__ import annotations

import subprocess
import sys
from functools import partial

from timing import line, medians

COMMANDS = {
    "nothing": ["-c", "pass"],
    "numpy": ["-c", "import numpy"],
    "package": ["-c", "import thermofuncs"],
    "first value": ["-c", "import thermofuncs; thermofuncs.call('MOLS', 'CO2(g)', 900.0)"],
    "help": ["-m", "thermofuncs.cli", "--help"],
}


def run(arguments: list[str]) -> None:
    """Run a fresh interpreter."""
    subprocess.run([sys.executable, *arguments], check=True, stdout=subprocess.DEVNULL)


def main() -> None:
    """Print the ratios."""
    found = medians({name: partial(run, a) for name, a in COMMANDS.items()}, 15)
    whole = {name: time / found["numpy"] for name, time in found.items()}
    net = {
        name: (time - found["nothing"]) / (found["numpy"] - found["nothing"]) for name, time in found.items()
    }
    print(f"import numpy {found['numpy'] * 1000:.0f} ms, a bare interpreter {found['nothing'] * 1000:.0f} ms")
    print(f"{'a fresh interpreter, to one that imports numpy':<78}{'ratio':>9}   wanted")
    print(line("import thermofuncs", whole["package"], "at most 1.5"))
    print(line("thermofuncs --help", whole["help"], "at most 2.5"))
    print(line("import and one value", whole["first value"], ""))
    print(line("import thermofuncs, the bare interpreter taken off", net["package"], "at most 1.5"))
    print(line("thermofuncs --help, the bare interpreter taken off", net["help"], "at most 2.5"))
    print(line("import and one value, the bare interpreter taken off", net["first value"], ""))


if __name__ == "__main__":
    main()
