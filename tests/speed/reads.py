"""What another read costs: all ten last nodes of an RC ladder against one of them, each H written out.

Run as ``python tests/speed/reads.py [rounds]``. Every round derives the one read and then the ten, each from an
empty cache, in one process; the table shows the fastest round. The determinant of the network is found and
written out once for all reads; the limit is 2.
"""

from __future__ import annotations

import sys
import time

import symnet as sn
from symnet.exact import derive as engine

SECTIONS = 12


def ladder() -> sn.Network:
    """Twelve RC sections with different symbols, driven by a voltage source."""
    chain = [f"n{k} -- R{k + 1} -- n{k + 1} -- C{k + 1} -- gnd" for k in range(SECTIONS)]
    return sn.network("\n".join([*chain, "drive n0"]))


def seconds(net: sn.Network, reads: list[str]) -> tuple[float, int]:
    """The time for these reads from an empty cache, and the terms written out (each denominator once)."""
    engine._prepared.cache_clear()
    start = time.perf_counter()
    transfers = sn.derive_all(net, reads)
    terms = sum(len(H.numerator) for H in transfers) + len(transfers[0].denominator)
    return time.perf_counter() - start, terms


def table(rounds: int) -> str:
    """One read and ten, interleaved, as a Markdown table."""
    net = ladder()
    nodes = [f"n{k}" for k in range(SECTIONS - 9, SECTIONS + 1)]
    cases = {"one node": nodes[-1:], "ten nodes": nodes}
    seconds(net, nodes)
    best = dict.fromkeys(cases, float("inf"))
    written = dict.fromkeys(cases, 0)
    for _ in range(rounds):
        for name, reads in cases.items():
            spent, written[name] = seconds(net, reads)
            best[name] = min(best[name], spent)
    rows = ["| reads of a 12-section RC ladder | terms | fastest / s | ratio |", "|---|---|---|---|"]
    for name, spent in best.items():
        rows.append(f"| {name} | {written[name]} | {spent:.3f} | {spent / best['one node']:.2f} |")
    return "\n".join(rows)


if __name__ == "__main__":
    print(table(int(sys.argv[1]) if len(sys.argv) > 1 else 5))
