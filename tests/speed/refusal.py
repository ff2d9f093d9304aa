"""How soon one is told that an H is too long: from a network in hand to the refusal, against `import sympy`.

Run as ``python -m tests.speed.refusal [rounds]``. Every round starts one fresh process for `import sympy` and
one for each network; the latter reads the network, loads what a derivation needs by deriving a small network
once, then takes the time from the network to the message that gives the number of terms. The limit is a tenth
of `import sympy`, by medians.
"""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path
from statistics import median

TOP = Path(__file__).resolve().parents[2]

IMPORT = """
import time
start = time.perf_counter()
import sympy
print(time.perf_counter() - start)
"""

REFUSAL = """
import time
import symnet as sn
from symnet.errors import LimitError
from tests.speed.engine import complete_graph, rc_ladder

sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")).denominator
net = sn.network({network})
start = time.perf_counter()
try:
    sn.derive(net).denominator
except LimitError as refused:
    print(time.perf_counter() - start, str(refused).split(" terms")[0].split()[-1])
"""

BASE = "import sympy"
LIMIT = 0.1
NETWORKS = {
    "RC ladder, 14 sections": "rc_ladder(14)",
    "RC ladder, 30 sections": "rc_ladder(30)",
    "RC ladder, 200 sections": "rc_ladder(200)",
    "complete graph, 9 nodes": "complete_graph(9)",
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
    run(IMPORT)  # fills the caches of byte code and of the disk
    for _ in range(rounds):
        times[BASE].append(float(run(IMPORT)[0]))
        for name, program in programs.items():
            seconds, said[name] = run(program)
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
