"""The scripts that measure still run. What they measure is for a quiet machine and is asserted nowhere here."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

from tests.speed.__main__ import page, scripts

SPEED = Path(__file__).resolve().parent / "speed"


@pytest.mark.parametrize("script", sorted(SPEED.glob("[!_]*.py")), ids=lambda path: path.stem)
def test_script_prints_its_table(script: Path) -> None:
    run = subprocess.run(
        [sys.executable, "-m", f"tests.speed.{script.stem}", "1"],
        cwd=SPEED.parents[1],
        capture_output=True,
        text=True,
        check=False,
    )
    assert run.returncode == 0, run.stderr
    header, rule, *rows = run.stdout.splitlines()
    assert header.startswith("| ")
    assert set(rule) <= set("|-: ")
    assert rows
    assert all(row.count("|") == header.count("|") for row in rows)


def test_one_command_makes_a_page_of_all() -> None:
    assert scripts() == [script.stem for script in sorted(SPEED.glob("[!_]*.py"))]
    head, table = page(["reads"], "1")
    assert head.startswith("# How fast symnet is\n\nMeasured 20")
    assert table.startswith("\n## What another read costs")
    assert "\n\n`python -m tests.speed.reads`\n\n| reads of" in table
