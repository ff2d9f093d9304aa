"""Exact and numeric work with values, against what general-purpose libraries offer, side by side in one process.

Run as ``python tests/speed/values.py [rounds]``. Each row is the same work done twice; the ratio is the processor time
of the other way divided by symnet's, fastest of the rounds (of that, other work on the machine takes no share). With one round the slow comparisons are made smaller,
and the row says so.
"""

from __future__ import annotations

import os
import subprocess
import sys
import time
from collections.abc import Callable
from typing import Any

import numpy as np
from sympy import QQ, ZZ, symbols
from sympy.polys.matrices import DomainMatrix
from sympy.polys.rings import ring as sympy_ring

import symnet as sn
from symnet.exact import confirm, derive
from symnet.exact.batches import coefficient_arrays
from symnet.exact.determinant import Determinant
from symnet.exact.pieces import Pieces
from symnet.exact.structure import structure_of


def ladder(sections: int, values: str = "") -> sn.Network:
    """RC sections in cascade, driven by a voltage source, read at the end."""
    lines = [f"n{k} -- R{k + 1} -- n{k + 1} -- C{k + 1} -- gnd" for k in range(sections)]
    return sn.network("\n".join([*lines, "drive n0", f"read n{sections}", values]))


def forget() -> None:
    """Nothing is answered from a cache."""
    derive._prepared.cache_clear()
    confirm.solve_at.cache_clear()


def seconds() -> float:
    """Processor time of this process and of those that it has started and waited for."""
    times = os.times()
    return time.process_time() + times.children_user + times.children_system


def fastest(work: Callable[[], Any], rounds: int) -> float:
    """The time of the fastest round."""
    best = float("inf")
    for _ in range(rounds):
        forget()
        start = seconds()
        work()
        best = min(best, seconds() - start)
    return best


def nodal(
    sections: int, conductance: list[Any], admittance: list[Any], zero: Any
) -> tuple[list[list[Any]], list[Any]]:
    """Matrix and right-hand side of an RC ladder driven at its input."""
    matrix = [[zero] * sections for _ in range(sections)]
    for k in range(sections):
        matrix[k][k] = conductance[k] + admittance[k]
        if k + 1 < sections:
            matrix[k][k] += conductance[k + 1]
            matrix[k][k + 1] = matrix[k + 1][k] = -conductance[k + 1]
    return matrix, [conductance[0], *[zero] * (sections - 1)]


def equal_sections(rounds: int) -> tuple[str, float, str, float]:
    """A ladder of equal sections: two symbols, its coefficients without expanding part by part."""
    sections = 30 if rounds > 1 else 12
    net = ladder(
        sections,
        ", ".join(f"R{k + 1}" for k in range(sections))
        + " = R\n"
        + ", ".join(f"C{k + 1}" for k in range(sections))
        + " = C",
    )

    def determinant() -> int:
        pieces = Pieces.of(net)
        structure = structure_of(pieces.size, pieces.pieces)
        assert structure is not None
        return len(
            Determinant(pieces.naming.generators, structure.whole, pieces.take, pieces.leave).written()
        )

    ours = fastest(determinant, max(5, rounds))

    def theirs() -> None:
        over, s, g, c = sympy_ring("s, G, C", ZZ)
        matrix, right = nodal(sections, [g] * sections, [s * c] * sections, over.zero)
        domain = over.to_domain()
        left = DomainMatrix(
            [[domain.convert(e) for e in row] for row in matrix], (sections, sections), domain
        )
        left.solve_den(DomainMatrix([[domain.convert(e)] for e in right], (sections, 1), domain))

    return f"{sections} equal RC sections, in R, C and s: D", ours, "sympy's ring solve", fastest(theirs, 1)


def rational_values(rounds: int) -> tuple[str, float, str, float]:
    """A 40-section ladder with exact rational values."""
    del rounds
    sections = 40
    values = "\n".join(f"R{k + 1} = {100 + 7 * k} ohm; C{k + 1} = {10 + k} nF" for k in range(sections))
    net = ladder(sections, values)
    ours = fastest(lambda: sn.derive(net).numeric(), 5)

    def theirs() -> None:
        (s,) = symbols("s,")
        domain = QQ[s]
        g = [domain.convert(QQ(1, 100 + 7 * k)) for k in range(sections)]
        c = [domain.convert(s * QQ(10 + k, 10**9)) for k in range(sections)]
        matrix, right = nodal(sections, g, c, domain.zero)
        DomainMatrix(matrix, (sections, sections), domain).solve_den(
            DomainMatrix([[e] for e in right], (sections, 1), domain)
        )

    return "40 RC sections, exact values", ours, "sympy's solve over QQ[s]", fastest(theirs, 1)


def value_sets(rounds: int) -> tuple[str, float, str, float]:
    """Coefficients of N and D for many value sets, against batched solves at 40 frequencies each."""
    sets = 100_000
    solved = sets if rounds > 1 else 2_000
    sections = 6
    H = sn.derive(ladder(sections))
    random = np.random.default_rng(1)
    values = {name: random.uniform(0.9, 1.1, sets) * (1e3 if name[0] == "R" else 1e-8) for name in H.names}
    ours = fastest(lambda: coefficient_arrays(H, values), max(2, rounds))

    def theirs() -> None:
        for w in 2 * np.pi * np.logspace(2, 6, 40):
            g = [1 / values[f"R{k + 1}"][:solved] for k in range(sections)]
            c = [1j * w * values[f"C{k + 1}"][:solved] for k in range(sections)]
            matrix, right = nodal(sections, g, c, np.zeros(solved))
            rows = [np.stack([np.asarray(e, dtype=complex) for e in row], axis=-1) for row in matrix]
            np.linalg.solve(np.stack(rows, axis=-2), np.stack(right, axis=-1).astype(complex)[..., None])

    spent = fastest(theirs, 1) * sets / solved
    scaled = "" if solved == sets else f" (scaled up from {solved})"
    return (
        f"{sets} value sets of 12 parts: N and D",
        ours,
        f"numpy, batched solves at 40 frequencies{scaled}",
        spent,
    )


STATE_VARIABLE = """
    in -- R1 -- m1 -- R2 -- hp;  lp -- R3 -- m1;  q -- R4 -- m1;  U1: opamp(plus=gnd, minus=m1, out=hp)
    hp -- R5 -- m2 -- C1 -- bp;  U2: opamp(plus=gnd, minus=m2, out=bp)
    bp -- R6 -- m3 -- C2 -- lp;  U3: opamp(plus=gnd, minus=m3, out=lp)
    bp -- R7 -- m4 -- R8 -- q;   U4: opamp(plus=gnd, minus=m4, out=q)
    drive in; read lp
"""


def leapfrog(stages: int = 5) -> str:
    """Integrators in a chain, each fed back from the next, with an inverter each: two op amps a stage."""
    lines = ["in -- Rin -- m1"]
    for k in range(1, stages + 1):
        lines += [f"m{k} -- C{k} -- x{k}", f"U{k}: opamp(plus=gnd, minus=m{k}, out=x{k})"]
        lines += [f"x{k} -- Ra{k} -- p{k} -- Rb{k} -- y{k}", f"W{k}: opamp(plus=gnd, minus=p{k}, out=y{k})"]
        if k > 1:
            lines += [f"y{k - 1} -- Rf{k} -- m{k}", f"x{k} -- Rg{k} -- m{k - 1}"]
    return "\n".join(
        [*lines, "m1 -- Rt1 -- x1", f"m{stages} -- Rt2 -- x{stages}", "drive in", f"read x{stages}"]
    )


MESH = (
    "drive a; read f\n"
    + "\n".join(
        f"{pair[0]} -- R{k + 1} -- {pair[1]}"
        for k, pair in enumerate(["ab", "ac", "bc", "bd", "cd", "ce", "de", "df", "ef", "ad", "be", "cf"])
    )
    + "\nf -- RL -- gnd; e -- C1 -- gnd; d -- L1 -- gnd"
)


def active(rounds: int) -> tuple[str, float, str, float]:
    """Three networks of different symbols, exact and written out, against importing sympy in a fresh process."""
    nets = [sn.network(text) for text in (STATE_VARIABLE, leapfrog(), MESH)]
    ours = fastest(lambda: [len(sn.derive(net).denominator) for net in nets], max(3, rounds))
    command = [sys.executable, "-c", "import sympy"]
    spent = fastest(lambda: subprocess.run(command, check=True), max(2, rounds))
    return "state-variable, 10-op-amp leapfrog and mesh filter", ours, "import sympy", spent


def table(rounds: int) -> str:
    """All rows as a Markdown table."""
    rows = ["| work, processor time | symnet / ms | against | ratio |", "|---|---|---|---|"]
    for measure in (equal_sections, rational_values, value_sets, active):
        work, ours, other, theirs = measure(rounds)
        rows.append(f"| {work} | {1000 * ours:.1f} | {other} | {theirs / ours:.0f} times |")
    return "\n".join(rows)


if __name__ == "__main__":
    print(table(int(sys.argv[1]) if len(sys.argv) > 1 else 5))
