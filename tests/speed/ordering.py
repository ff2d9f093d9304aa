"""The order in which pieces are decided: what it does to the size of the diagram and to the time to build it.

Run as ``python -m tests.speed.ordering [rounds]``. Each network is built in the order in which its parts stand in
the text, and in the order that :mod:`symnet.exact.ordering` chooses, the choice included in its time; fastest of the
rounds, interleaved. Lines in a random order stand for a drawing that was traced as it came.
"""

from __future__ import annotations

import sys
import time
from collections.abc import Callable, Iterator
from functools import partial
from random import Random

import symnet as sn
from symnet.exact.pieces import Pieces
from symnet.exact.trees import Diagram, build
from tests.speed.engine import bridged_t, complete_graph, rc_ladder


def mesh(rows: int, columns: int) -> str:
    """A grid of resistors, driven at one corner and read at the opposite one."""
    lines = []
    for r in range(rows):
        for c in range(columns):
            here = f"n{r}_{c}"
            if c + 1 < columns:
                lines.append(f"{here} -- RH{r}_{c} -- n{r}_{c + 1}")
            if r + 1 < rows:
                lines.append(f"{here} -- RV{r}_{c} -- n{r + 1}_{c}")
    lines.append(f"n{rows - 1}_{columns - 1} -- RL -- gnd")
    return "\n".join([*lines, "drive n0_0", f"read n{rows - 1}_{columns - 1}"])


def ladder_of_integrators(order: int) -> str:
    """Active simulation of an LC ladder: each integrator is fed by both neighbours, inverters between them."""
    lines = ["a0 -- RD0 -- p0; p0 -- C0 -- a0; U0: opamp(plus=gnd, minus=p0, out=a0); in -- RI -- p0"]
    for k in range(1, order):
        lines += [
            f"a{k - 1} -- RF{k} -- p{k}; p{k} -- C{k} -- a{k}; U{k}: opamp(plus=gnd, minus=p{k}, out=a{k})",
            f"a{k} -- RX{k} -- q{k} -- RY{k} -- b{k}; V{k}: opamp(plus=gnd, minus=q{k}, out=b{k})",
            f"b{k} -- RB{k} -- p{k - 1}",
        ]
    lines.append(f"a{order - 1} -- RE -- p{order - 1}")
    return "\n".join([*lines, "drive in", f"read a{order - 1}"])


def shuffled(text: str) -> str:
    """The same network with its lines in a random order."""
    lines = text.splitlines()
    Random(1).shuffle(lines)
    return "\n".join(lines)


CASES = {
    "RC ladder, 100 sections": rc_ladder(100),
    "RC ladder, 12 sections, lines in a random order": shuffled(rc_ladder(12)),
    "10 bridged-T sections": bridged_t(10),
    "6 bridged-T sections, lines in a random order": shuffled(bridged_t(6)),
    "mesh of 5 by 5 nodes": mesh(5, 5),
    "mesh of 4 by 4 nodes, lines in a random order": shuffled(mesh(4, 4)),
    "ladder simulated by 9 op amps": ladder_of_integrators(5),
    "the same, lines in a random order": shuffled(ladder_of_integrators(5)),
    "complete graph, 8 nodes": complete_graph(8),
    "complete graph, 9 nodes": complete_graph(9),
}


def rows(rounds: int) -> Iterator[str]:
    """The table in Markdown."""
    yield "| network | pieces | as in the text: nodes | ms | as chosen: nodes | ms | nodes saved |"
    yield "|---|---|---|---|---|---|---|"
    for name, text in CASES.items():
        pieces = Pieces.of(sn.network(text))
        ways: dict[str, Callable[[], Diagram]] = {
            "text": partial(build, pieces.size, pieces.pieces, range(len(pieces.pieces))),
            "chosen": partial(build, pieces.size, pieces.pieces),
        }
        best = dict.fromkeys(ways, float("inf"))
        nodes = dict.fromkeys(ways, 0)
        for _ in range(rounds):
            for way, work in ways.items():
                start = time.perf_counter()
                nodes[way] = len(work())
                best[way] = min(best[way], time.perf_counter() - start)
        yield (
            f"| {name} | {len(pieces.pieces)} | {nodes['text']} | {1000 * best['text']:.1f} "
            f"| {nodes['chosen']} | {1000 * best['chosen']:.1f} | {nodes['text'] / nodes['chosen']:.1f} times |"
        )


if __name__ == "__main__":
    for row in rows(int(sys.argv[1]) if len(sys.argv) > 1 else 5):
        print(row, flush=True)
