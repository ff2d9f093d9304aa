"""How soon one is told that an H is too long: from a network in hand to the refusal, against `import sympy`.

Run as ``python -m tests.speed.refusal [rounds]``. Every round starts a fresh process for each network, which takes
the time of `import sympy`, loads what a derivation needs by deriving a small network once, and then takes the time
from the network to the message that gives the number of terms: wiring checked, both determinants built, H confirmed
and its terms counted. All in processor time, of which other work on the machine takes no share. The limit is a tenth of `import sympy`, by medians. The complete graph, the densest network
there is, has fewer than 10^12 terms on 9 nodes, and on 14, where it has more, no diagram is begun.
"""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path
from statistics import median

TOP = Path(__file__).resolve().parents[2]

REFUSAL = """
import time
start = time.process_time()
import sympy
sympy_imported = time.process_time() - start
import symnet as sn
from symnet.errors import LimitError
from tests.speed.engine import complete_graph, grid, rc_ladder

sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")).denominator
net = sn.network({network})
start = time.process_time()
try:
    sn.derive(net).denominator
except LimitError as refused:
    print(sympy_imported, time.process_time() - start, str(refused).split(" terms")[0].split()[-1])
"""

BASE = "import sympy"
LIMIT = 0.1
NETWORKS = {
    "RC ladder, 30 sections": "rc_ladder(30)",
    "RC ladder, 200 sections": "rc_ladder(200)",
    "grid of 4 by 9 nodes": "grid(4, 9)",
    "complete graph, 9 nodes": "complete_graph(9)",
    "complete graph, 14 nodes": "complete_graph(14)",
}


def run(program: str) -> list[str]:
    """What a fresh process prints, byte code cached as after an installation."""
    environment = {name: value for name, value in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}
    done = subprocess.run(
        [sys.executable, "-c", program], cwd=TOP, env=environment, check=True, capture_output=True, text=True
    )
    return done.stdout.split()


def table(rounds: int) -> str:
    """All networks, interleaved with the import, as a Markdown table."""
    programs = {name: REFUSAL.format(network=network) for name, network in NETWORKS.items()}
    times: dict[str, list[float]] = {name: [] for name in (BASE, *programs)}
    said: dict[str, str] = {}
    run(next(iter(programs.values())))  # fills the caches of byte code and of the disk
    for _ in range(rounds):
        for name, program in programs.items():
            imported, seconds, said[name] = run(program)
            times[BASE].append(float(imported))
            times[name].append(float(seconds))
    base = median(times[BASE])
    rows = [
        "| from the network to the refusal | terms said | fastest / ms | median / ms | ratio of medians | limit |",
        "|---|---|---|---|---|---|",
        f"| `{BASE}`, for comparison | | {1e3 * min(times[BASE]):.1f} | {1e3 * base:.1f} | 1 | |",
    ]
    for name in programs:
        typical = median(times[name])
        cells = (name, said[name], f"{1e3 * min(times[name]):.1f}", f"{1e3 * typical:.1f}")
        rows.append("| " + " | ".join(cells) + f" | {typical / base:.3f} | {LIMIT:g} |")
    return "\n".join(rows)


if __name__ == "__main__":
    print(table(int(sys.argv[1]) if len(sys.argv) > 1 else 9))
