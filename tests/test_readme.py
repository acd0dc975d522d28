"""README shows what its commands print."""

from __future__ import annotations

import doctest
import re
import shlex
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

PROJECT = Path(__file__).parent.parent
README = (PROJECT / "README.md").read_text(encoding="utf-8")


def blocks() -> list[list[tuple[str, str]]]:
    """Each block of commands, as pairs of the command and what README shows behind it."""
    found = []
    for block in re.findall(r"```text\n(.*?)```", README, re.DOTALL):
        parts = re.split(r"^\$ (.*)\n", block, flags=re.MULTILINE)[1:]
        found.append(list(zip(parts[::2], parts[1::2], strict=True)))
    return found


def printed(command: str, folder: Path) -> str:
    """What a command prints, on both streams, without spaces at the ends of lines."""
    words = shlex.split(command)
    assert words[0] == "thermofuncs"
    run = subprocess.run(
        [sys.executable, "-m", "thermofuncs.cli", *words[1:]], cwd=folder, text=True, stdout=subprocess.PIPE,
        stderr=subprocess.STDOUT, check=False,
    )
    return "".join(line.rstrip() + "\n" for line in run.stdout.splitlines())


@pytest.mark.parametrize(("command", "shown"), [pair for block in blocks() for pair in block])
def test_commands_print_what_readme_shows(tmp_path: Path, command: str, shown: str) -> None:
    """Every command in README prints what README shows."""
    shutil.copytree(
        PROJECT / "workbooks", tmp_path / "workbooks", ignore=shutil.ignore_patterns("*-recalculated*")
    )
    assert printed(command, tmp_path).strip("\n") == shown.strip("\n")


def test_the_python_example_answers_as_shown() -> None:
    """The example of a call from Python gives the value shown."""
    text = "".join(re.findall(r"```python\n(.*?)```", README, re.DOTALL))
    example = doctest.DocTestParser().get_doctest(text, {}, "README", "README.md", 0)
    assert doctest.DocTestRunner().run(example) == (0, 2)


def test_readme_has_two_set_up_commands_and_ci_runs_the_second() -> None:
    """Exactly two commands set up, and the continuous integration runs the test command word for word."""
    commands = re.findall(r"```sh\n(.*?)\n```", README, re.DOTALL)
    assert len(commands) == 2
    assert f"\n{commands[1]}\n" in (PROJECT / ".ci" / "run").read_text(encoding="utf-8")
