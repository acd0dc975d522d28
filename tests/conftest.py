"""What holds for all tests, and the real spreadsheet program."""

from __future__ import annotations

import os
import shutil
import subprocess
from collections.abc import Callable
from pathlib import Path

import pytest
from hypothesis import settings

# no test asserts a time: a first call pays for imports and for the index of the data
settings.register_profile("untimed", deadline=None)
settings.load_profile("untimed")


@pytest.fixture
def office(tmp_path: Path) -> Callable[[Path, str], Path]:
    """Converts a file with the real spreadsheet program, into a folder of its own."""
    program = shutil.which("soffice")
    if program is None:
        if os.environ.get("THERMOFUNCS_REQUIRE_OFFICE") == "1":
            pytest.fail("soffice is not installed, and THERMOFUNCS_REQUIRE_OFFICE is 1")
        pytest.skip("soffice is not installed")

    def convert(path: Path, filter_name: str) -> Path:
        out = tmp_path / "converted"
        command = [
            program, f"-env:UserInstallation=file://{tmp_path}/profile", "--headless", "--convert-to",
            filter_name, "--outdir", str(out), str(path),
        ]
        subprocess.run(command, check=True, capture_output=True, timeout=180)
        return out / f"{path.stem}.{filter_name.partition(':')[0]}"

    return convert
