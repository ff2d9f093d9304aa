"""Ready-made sympy against symnet, at the largest network that sympy finishes in a minute.

Run as ``python -m tests.speed.ready_made [seconds]``; sympy gets 60 seconds for a network unless told otherwise,
and the whole takes two to three minutes. Networks grow by a section as long as the growth so far promises that the
next one has a chance; the last one in time is the one that is compared, in the same process.

sympy starts from a nodal matrix that is set up already, with 1/R for a resistor, and ends with H as one fraction in
lowest terms. Of what it offers for that, ``solve_linear_system`` and ``linsolve`` are the fastest; both run, the faster one counts; ``solve``, ``Matrix.LUsolve`` or quotients of ``Matrix.det`` followed by ``cancel``, and
``DomainMatrix.lu_solve`` over the field of fractions were slower at every size from 3 sections on. symnet starts from
the text and ends with H in lowest terms, confirmed and written out. Before anything is printed the two H are found
equal.
"""

from __future__ import annotations

import sys
import time
from collections.abc import Callable, Iterator
from functools import partial
from typing import Any

import sympy as sp

import symnet as sn
from tests.speed.engine import bridged_t, nodal_matrix, rc_ladder

SECONDS = 60.0
ROUNDS = 5

CASES: dict[str, Callable[[int], str]] = {"RC ladder": rc_ladder, "bridged-T sections": bridged_t}


def solve_linear_system(matrix: Any, right: Any, unknowns: list[Any]) -> dict[Any, Any]:
    """All unknowns, by elimination row by row."""
    return dict(sp.solve_linear_system(matrix.row_join(right), *unknowns))


def linsolve(matrix: Any, right: Any, unknowns: list[Any]) -> dict[Any, Any]:
    """All unknowns, by sparse elimination over the field of fractions."""
    return dict(zip(unknowns, next(iter(sp.linsolve((matrix, right), *unknowns))), strict=True))


def system(net: sn.Network) -> tuple[Any, Any, list[Any]]:
    """Nodal matrix, right-hand side for a drive of 1 V, and the unknown voltages, named as the nodes."""
    s, driven = sp.Symbol("s"), net.drives[0].nodes[0]
    nodes = [node for node in net.nodes if node != driven]

    def value(name: str) -> Any:
        return sp.Symbol(name) if name.startswith("C") else 1 / sp.Symbol(name)

    right = sp.zeros(len(nodes), 1)
    for part in net.branches():
        for here, there in (part.nodes, part.nodes[::-1]):
            if here == driven and there in nodes:
                right[nodes.index(there)] += value(part.name) * (s if part.kind == "C" else 1)
    return sp.Matrix(nodal_matrix(net, value, sp.Integer(0), s)), right, [sp.Symbol(node) for node in nodes]


def seconds_of(work: Callable[[], Any]) -> tuple[float, Any]:
    """How long it takes, and what it gives."""
    start = time.perf_counter()
    result = work()
    return time.perf_counter() - start, result


def largest(network: Callable[[int], str], limit: float) -> tuple[int, str, float, Any]:
    """Sections, way, seconds and H of the largest network that ready-made sympy finishes within the limit."""
    best, before, promised, sections = (0, "", 0.0, None), 0.0, 0.0, 2
    while promised < limit:
        needed = system(sn.network(network(sections)))
        runs = {way.__name__: seconds_of(partial(way, *needed)) for way in (solve_linear_system, linsolve)}
        name, (took, found) = min(runs.items(), key=lambda run: run[1][0])
        if took > limit:
            break
        best = (sections, name, took, found[sp.Symbol(f"n{sections}")])
        promised = took * (took / before if before else 1.0)
        before, sections = took, sections + 1
    return best


def derived(text: str) -> tuple[Any, Any]:
    """N and D of the network, from its text, written out."""
    H = sn.derive(sn.network(text))
    return H.numerator, H.denominator


def rows(limit: float) -> Iterator[str]:
    """The table in Markdown."""
    yield "| network, all symbols | terms of D | ready-made sympy / s | by | symnet / ms | sympy takes |"
    yield "|---|---|---|---|---|---|"
    for name, network in CASES.items():
        sections, way, took, found = largest(network, limit)
        runs = [seconds_of(partial(derived, network(sections))) for _ in range(ROUNDS)]
        fastest, (top, bottom) = min(runs, key=lambda run: run[0])
        n, d = (sp.expand(side) for side in sp.fraction(found))
        sign = 1 if d == bottom.as_expr() else -1
        assert (n, d) == (sign * top.as_expr(), (sign * bottom).as_expr()), f"{name}: the two H differ"
        yield (
            f"| {name}, {sections} sections | {len(bottom)} | {took:.2f} | {way} | {1000 * fastest:.1f} "
            f"| {took / fastest:.0f} times |"
        )


if __name__ == "__main__":
    for row in rows(float(sys.argv[1]) if len(sys.argv) > 1 else SECONDS):
        print(row, flush=True)
