"""The gates that are no tests of behaviour: lint rules and strict types, so that one command checks all."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

TOP = Path(__file__).resolve().parent.parent


@pytest.mark.parametrize(
    "gate",
    [
        pytest.param(["ruff", "check", "--no-cache"], id="ruff"),
        pytest.param(["mypy"], id="mypy strict"),
    ],
)
def test_gate(gate: list[str]) -> None:
    run = subprocess.run([sys.executable, "-m", *gate], cwd=TOP, capture_output=True, text=True, check=False)
    assert run.returncode == 0, run.stdout + run.stderr
