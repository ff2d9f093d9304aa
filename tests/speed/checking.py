"""What checking a hand derivation costs: ten lines on a network of six nodes, against reading and deriving it.

Run as ``python -m tests.speed.checking [rounds]``. Every round reads the network from text and derives H, written
out in lowest terms, and then checks the ten lines, each from empty caches, in one process; the table shows the
fastest round in processor time. The limit is 5.
"""

from __future__ import annotations

import sys
import time

import symnet as sn
from symnet.exact import confirm
from symnet.exact import derive as engine

NETWORK = """
    in -- R1 -- x -- R2 -- p -- C2 -- gnd
    x -- C1 -- out
    out -- R4 -- m -- R3 -- gnd
    U1: opamp(plus=p, minus=m, out=out)
    out -- R5 -- y -- C3 -- gnd
    drive in;  read y
"""

WORKING = """
    1. node x: (x - in)/R1 + (x - p)/R2 + s*C1*(x - out) = 0
    2. node p: (p - x)/R2 + s*C2*p = 0
    3. node m: (m - out)/R4 + m/R3 = 0
    4. node y: (y - out)/R5 + s*C3*y = 0
    5. p = m
    6. from 3 and 5: p = out*R3/(R3 + R4)
    7. from 2: x = p*(1 + s*R2*C2)
    8. y = out/(1 + s*R5*C3)
    9. out/in = (1 + R4/R3)/(1 + s*(C2*(R1 + R2) - R4/R3*R1*C1) + s^2*R1*R2*C1*C2)
    10. y/in = (1 + R4/R3)/((1 + s*(C2*(R1 + R2) - R4/R3*R1*C1) + s^2*R1*R2*C1*C2)*(1 + s*R5*C3))
"""


def forget() -> None:
    """Empty the caches of the engine."""
    engine._prepared.cache_clear()
    confirm.solve_at.cache_clear()


def deriving() -> float:
    """The seconds from the text to H in lowest terms."""
    forget()
    start = time.process_time()
    H = sn.derive(sn.network(NETWORK))
    _ = H.numerator, H.denominator
    return time.process_time() - start


def checking() -> float:
    """The seconds for the ten lines, from their text to the verdicts."""
    net = sn.network(NETWORK)
    forget()
    start = time.process_time()
    review = sn.verify(net, WORKING)
    spent = time.process_time() - start
    assert review, str(review)
    return spent


def table(rounds: int) -> str:
    """Both, interleaved, as a Markdown table."""
    cases = {"read and derive": deriving, "check ten lines": checking}
    for case in cases.values():
        case()
    best = dict.fromkeys(cases, float("inf"))
    for _ in range(rounds):
        for name, case in cases.items():
            best[name] = min(best[name], case())
    rows = ["| six nodes, one op amp | fastest / ms | ratio |", "|---|---|---|"]
    for name, spent in best.items():
        rows.append(f"| {name} | {1e3 * spent:.1f} | {spent / best['read and derive']:.2f} |")
    return "\n".join(rows)


if __name__ == "__main__":
    print(table(int(sys.argv[1]) if len(sys.argv) > 1 else 15))
