"""All benchmarks one after the other, as one Markdown page.

Run as ``python -m tests.speed [FILE.md [SCRIPT ...]]`` on a quiet machine: the page is printed as it grows and
written to the file. Without names every script of this folder runs, which takes about ten minutes, most of it the
other libraries'. Every table is of one run of its script, in which both sides of each ratio were measured.
"""

from __future__ import annotations

import ast
import os
import platform
import subprocess
import sys
from collections.abc import Iterator, Sequence
from datetime import UTC, datetime
from importlib.metadata import PackageNotFoundError, version
from pathlib import Path

HERE = Path(__file__).resolve().parent
LIBRARIES = ("sympy", "numpy", "python-flint")


def scripts() -> list[str]:
    """The names of all benchmarks."""
    return sorted(path.stem for path in HERE.glob("[!_]*.py"))


def circumstances() -> str:
    """When and where the figures were found."""
    found = [f"Python {platform.python_version()}"]
    for name in LIBRARIES:
        try:
            found.append(f"{name} {version(name)}")
        except PackageNotFoundError:
            found.append(f"without {name}")
    date = datetime.now(UTC).date().isoformat()
    return f"Measured {date} with {', '.join(found)}, on {os.cpu_count()} cores."


def page(names: Sequence[str], *arguments: str) -> Iterator[str]:
    """The page piece by piece; the arguments go to every script."""
    yield f"# How fast symnet is\n\n{circumstances()}\n"
    for name in names:
        head = ast.get_docstring(ast.parse((HERE / f"{name}.py").read_text(encoding="utf-8"))) or name
        title = head.splitlines()[0].rstrip(".")
        run = subprocess.run(
            [sys.executable, "-m", f"tests.speed.{name}", *arguments],
            cwd=HERE.parents[1],
            stdout=subprocess.PIPE,
            text=True,
            check=True,
        )
        yield f"\n## {title}\n\n`python -m tests.speed.{name}`\n\n{run.stdout}"


if __name__ == "__main__":
    file, *chosen = sys.argv[1:] or [""]
    if unknown := set(chosen) - set(scripts()):
        sys.exit(f"no benchmark called {', '.join(sorted(unknown))}; there are {', '.join(scripts())}")
    written = ""
    for piece in page(chosen or scripts()):
        print(piece, end="", flush=True)
        written += piece
        if file:
            Path(file).write_text(written, encoding="utf-8")
