"""How long one waits: `import symnet` and the brief of the shipped network, against `import sympy, numpy`.

Run as ``python -m tests.speed.startup [rounds]``. Every round starts each command once in a fresh process, one
after the other, so that all see the same machine; the table shows the fastest and the median round.
"""

from __future__ import annotations

import os
import subprocess
import sys
import time
from pathlib import Path
from statistics import median

TOP = Path(__file__).resolve().parents[2]
PROBE = TOP / "symnet" / "examples" / "probe.symnet"

BASE = "import sympy, numpy"
#: What is timed, as the reader of the table knows it, and the ratio to the first row that is still fine.
COMMANDS: dict[str, tuple[list[str], float | None]] = {
    BASE: (["-c", BASE], None),
    "import symnet": (["-c", "import symnet"], 1.3),
    "symnet probe.symnet": (["-m", "symnet", str(PROBE)], 2.0),
}


def seconds(command: list[str]) -> float:
    """The wall time of one fresh process, byte code of every library and of symnet cached as after an installation."""
    environment = {name: value for name, value in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}
    start = time.perf_counter()
    subprocess.run(
        [sys.executable, *command], cwd=TOP, env=environment, check=True, stdout=subprocess.DEVNULL
    )
    return time.perf_counter() - start


def table(rounds: int) -> str:
    """All commands, interleaved, as a Markdown table."""
    for command, _ in COMMANDS.values():
        seconds(command)  # fills the caches of byte code and of the disk
    times: dict[str, list[float]] = {name: [] for name in COMMANDS}
    for _ in range(rounds):
        for name, (command, _) in COMMANDS.items():
            times[name].append(seconds(command))
    rows = [
        "| fresh process | fastest / s | median / s | ratio of medians | limit |",
        "|---|---|---|---|---|",
    ]
    base = median(times[BASE])
    for name, (_, limit) in COMMANDS.items():
        typical = median(times[name])
        bound = "" if limit is None else f"{limit:g}"
        rows.append(f"| `{name}` | {min(times[name]):.3f} | {typical:.3f} | {typical / base:.2f} | {bound} |")
    return "\n".join(rows)


if __name__ == "__main__":
    print(table(int(sys.argv[1]) if len(sys.argv) > 1 else 9))
