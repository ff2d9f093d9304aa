"""Exact derivation against the best that general-purpose libraries offer, on the same work in one process.

Run as ``python tests/speed/engine.py [rounds]``; python-flint is used where it is installed. Every figure is a
ratio: the processor time of the other way divided by symnet's, fastest of the rounds, interleaved (each way
works on one core, so that other work on the machine takes no share).

The work: the denominator of H of a network whose parts all have different symbols, written out term by term.
symnet starts from the network and ends with the expanded determinant in arrays, one packed monomial and one
coefficient a term, as python-flint packs them too; the others start from a nodal matrix that is set up already, in
conductances (which spares them every division), and end with the expanded determinant. That the terms can be read
one by one is shown beside it: the last column has the time to read all of symnet's as (coefficient, exponents). Minors are taken along the matrix with memory, so that no minor is computed twice.
"""

from __future__ import annotations

import sys
import time
from collections.abc import Callable
from functools import cache
from typing import Any

import sympy as sp
from sympy.polys.rings import ring as sympy_ring

import symnet as sn
from symnet.exact.determinant import Determinant
from symnet.exact.expansion import Expansion
from symnet.exact.pieces import Pieces
from symnet.exact.structure import structure_of

try:
    import flint
except ImportError:
    flint = None


def rc_ladder(sections: int) -> str:
    """RC sections in cascade, driven by a voltage source, read at the end."""
    lines = [f"n{k} -- R{k + 1} -- n{k + 1} -- C{k + 1} -- gnd" for k in range(sections)]
    return "\n".join([*lines, "drive n0", f"read n{sections}"])


def bridged_t(sections: int) -> str:
    """Bridged-T sections in cascade with a load: two resistors, a bridging and a shunt capacitor each."""
    lines = []
    for k in range(sections):
        a, m, b = f"n{k}", f"m{k}", f"n{k + 1}"
        lines += [f"{a} -- R{2 * k + 1} -- {m} -- R{2 * k + 2} -- {b}", f"{a} -- C{2 * k + 1} -- {b}"]
        lines.append(f"{m} -- C{2 * k + 2} -- gnd")
    return "\n".join([*lines, f"n{sections} -- RL -- gnd", "drive n0", f"read n{sections}"])


def complete_graph(nodes: int) -> str:
    """Resistors between every two of these nodes, the ideal source across one of them."""
    names = ["gnd", *(f"n{k}" for k in range(1, nodes))]
    lines = [
        f"{names[a]} -- R{a}_{b} -- {names[b]}"
        for a in range(nodes)
        for b in range(a + 1, nodes)
        if (a, b) != (0, 1)
    ]
    return "\n".join([*lines, "drive n1", f"read n{nodes - 1}"])


def grid(rows: int, columns: int) -> str:
    """Resistors along all lines of a grid of nodes, one corner driven, the one beside it at gnd, the far one read."""
    lines = [
        f"a{i}_{j} -- R{i}_{j}_{x}{y} -- a{i + x}_{j + y}"
        for i in range(rows)
        for j in range(columns)
        for x, y in ((0, 1), (1, 0))
        if i + x < rows and j + y < columns
    ]
    text = "\n".join([*lines, "drive a0_0", f"read a{rows - 1}_{columns - 1}"])
    return text.replace(f"a{rows - 1}_0 ", "gnd ").replace(f"a{rows - 1}_0\n", "gnd\n")


def nodal_matrix(net: sn.Network, one: Callable[[str], Any], zero: Any, s: Any) -> list[list[Any]]:
    """The nodal matrix without the driven node, resistors as conductances G."""
    driven = net.drives[0].nodes[0]
    nodes = [node for node in net.nodes if node != driven]
    place = {node: k for k, node in enumerate(nodes)}
    matrix = [[zero] * len(nodes) for _ in nodes]
    for part in net.branches():
        value = s * one(part.name) if part.kind == "C" else one(part.name)
        a, b = place.get(part.start), place.get(part.end)
        for x in (a, b):
            if x is not None:
                matrix[x][x] += value
        if a is not None and b is not None:
            matrix[a][b] -= value
            matrix[b][a] -= value
    return matrix


def by_minors(matrix: list[list[Any]], one: Any) -> Any:
    """The determinant by expansion along rows, every minor remembered by its columns."""
    size = len(matrix)

    @cache
    def minor(row: int, columns: tuple[int, ...]) -> Any:
        if row == size:
            return one
        total = None
        for position, column in enumerate(columns):
            entry = matrix[row][column]
            if entry:
                term = entry * minor(row + 1, columns[:position] + columns[position + 1 :])
                term = -term if position % 2 else term
                total = term if total is None else total + term
        return 0 * one if total is None else total

    return minor(0, tuple(range(size)))


def with_symnet(net: sn.Network) -> int:
    """From the network to its determinant, written out; the number of terms."""
    return len(written_out(net))


def written_out(net: sn.Network) -> Expansion:
    """The determinant of a network, term by term."""
    pieces = Pieces.of(net)
    structure = structure_of(pieces.size, pieces.pieces)
    assert structure is not None
    return Determinant(pieces.naming.generators, structure.whole, pieces.take, pieces.leave).written()


def with_sympy_ring(net: sn.Network) -> int:
    """Memoised minors on sympy ring elements."""
    over, *gens = sympy_ring(["s", *net.part_names], sp.ZZ)
    names = dict(zip(net.part_names, gens[1:], strict=True))
    return len(by_minors(nodal_matrix(net, names.__getitem__, over.zero, gens[0]), over.one))


def with_flint(net: sn.Network) -> int:
    """Memoised minors on python-flint's sparse polynomials."""
    over = flint.fmpz_mpoly_ctx.get(("s", *net.part_names), flint.Ordering.lex)
    gens = over.gens()
    names = dict(zip(net.part_names, gens[1:], strict=True))
    zero, one = over.constant(0), over.constant(1)
    return len(by_minors(nodal_matrix(net, names.__getitem__, zero, gens[0]), one))


CASES = {
    "RC ladder, 9 sections": rc_ladder(9),
    "RC ladder, 13 sections": rc_ladder(13),
    "6 bridged-T sections": bridged_t(6),
    "complete graph, 8 nodes": complete_graph(8),
}


def table(rounds: int) -> str:
    """All cases and ways, interleaved, as a Markdown table."""
    ways: dict[str, Callable[[sn.Network], int]] = {"symnet": with_symnet}
    if flint is not None:
        ways["python-flint minors"] = with_flint
    ways["sympy ring minors"] = with_sympy_ring
    rows = [
        "| network, all symbols | terms | symnet / ms | "
        + " | ".join(list(ways)[1:])
        + " | read one by one / ms |",
        "|---" * (4 + len(ways) - 1) + "|",
    ]
    for case, text in CASES.items():
        net = sn.network(text)
        best = dict.fromkeys(ways, float("inf"))
        terms: dict[str, int] = {}
        for turn in range(rounds):
            for name, way in ways.items():
                if name == "sympy ring minors" and turn:
                    continue  # seconds, not milliseconds: once is enough
                start = time.process_time()
                terms[name] = way(net)
                best[name] = min(best[name], time.process_time() - start)
        assert len(set(terms.values())) == 1, f"{case}: the ways differ: {terms}"
        ratios = [f"{best[name] / best['symnet']:.1f} times" for name in list(ways)[1:]]
        expansion = written_out(net)
        start = time.process_time()
        read = sum(1 for coefficient, exponents in expansion if coefficient and min(exponents) >= 0)
        reading = time.process_time() - start
        assert read == terms["symnet"]
        cells = [case, str(read), f"{1000 * best['symnet']:.1f}", *ratios, f"{1000 * reading:.0f}"]
        rows.append("| " + " | ".join(cells) + " |")
    return "\n".join(rows)


if __name__ == "__main__":
    print(table(int(sys.argv[1]) if len(sys.argv) > 1 else 5))
