"""What a combination of part values costs: the search for preferred values against a plain loop over responses.

Run as ``python -m tests.speed.choosing [rounds]``. Both look at the largest error of 20 log10 |H| at 61 frequencies for
a section of seven parts, Butterworth 3 at 1 kHz. The loop takes one combination after the other and evaluates the
formula of H, found by hand, on a numpy array of the frequencies: it has no equations to solve. The search evaluates
whole batches on the diagram of H and computes the response of those that no bound rules out. Branch and bound looks at
far more than it evaluates; its row counts the combinations that it has decided about. Fastest of the rounds, in
processor time.
"""

from __future__ import annotations

import sys
import time
from collections.abc import Callable
from typing import Any, Final
from unittest.mock import patch

import numpy as np

import symnet as sn
from symnet.values import choosing_search

NETWORK = sn.network("""
    in -- R1 -- a -- R2 -- b; a -- C1 -- gnd; b -- C2 -- gnd; b -- R3 -- m; b -- R4 -- out; m -- C3 -- out
    U1: opamp(plus=gnd, minus=m, out=out)
    drive in; read out
""")
TARGET = sn.butterworth(3).at(f3dB="1 kHz")
LOOPED = 3_000
LISTS: Final[dict[str, Any]] = {
    "R": "E6, 4.7 kohm .. 47 kohm",
    "C": "E3, 2.2 nF .. 47 nF",
}  # 7^4 * 5^3 = 300 125 combinations


def floats(series: str, low: str, high: str) -> list[float]:
    """The members of a series."""
    return [float(value) for value in sn.preferred(series, low, high).values]


def loop() -> int:
    """The plain loop over some combinations; how many they were."""
    random = np.random.default_rng(1)
    resistors = random.choice(floats("E6", "4.7 kohm", "47 kohm"), (LOOPED, 4))
    capacitors = random.choice(floats("E3", "2.2 nF", "47 nF"), (LOOPED, 3))
    f = np.geomspace(10, 2000, 61)
    s = 2j * np.pi * f
    wanted = -10 * np.log10(1 + (f / 1000) ** 6)
    best = np.inf
    for (r1, r2, r3, r4), (c1, c2, c3) in zip(resistors, capacitors, strict=True):
        b = -s * r3 * c3
        a = r2 * (b * (1 / r2 + s * c2 + 1 / r3 + 1 / r4) - 1 / r4)
        h = 1 / (r1 * (a * (1 / r1 + 1 / r2 + s * c1) - b / r2))
        best = min(best, np.max(np.abs(20 * np.log10(np.abs(h)) - wanted)))
    return LOOPED


def enumerated() -> int:
    """Every combination evaluated."""
    with patch.object(choosing_search, "MOST_ENUMERATED", 10**6):
        return sn.choose(NETWORK, TARGET, K=-1, band=("10 Hz", "2 kHz"), **LISTS).evaluations


def bounded() -> int:
    """Branch and bound to the proof; the combinations decided about."""
    choice = sn.choose(
        NETWORK, TARGET, K=-1, band=("10 Hz", "2 kHz"), R="E24, 4.7 kohm .. 47 kohm", C=LISTS["C"]
    )
    assert choice.complete
    return choice.combinations


def table(rounds: int) -> str:
    """All three, interleaved, as a Markdown table."""
    cases: dict[str, Callable[[], int]] = {
        "plain loop, 61 frequencies": loop,
        "every combination, on the diagram": enumerated,
        "branch and bound to the proof": bounded,
    }
    rates = dict.fromkeys(cases, 0.0)
    for _ in range(rounds):
        for name, case in cases.items():
            start = time.process_time()
            done = case()
            rates[name] = max(rates[name], done / (time.process_time() - start))
    first = next(iter(rates.values()))
    rows = ["| combinations of seven values | per second | ratio |", "|---|---|---|"]
    rows += [f"| {name} | {rate:.3g} | {rate / first:.1f} |" for name, rate in rates.items()]
    return "\n".join(rows)


if __name__ == "__main__":
    print(table(int(sys.argv[1]) if len(sys.argv) > 1 else 5))
