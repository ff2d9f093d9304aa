"""A determinant that is never expanded: 200 RC sections, 400 different parts, |H| and every sensitivity.

Run as ``python -m tests.speed.scale [rounds]``; with one round 100 frequencies are taken instead of 1000, and
the first column of the table says so. Each round goes from the network to |H| at all frequencies and its
relative derivative by all 400 parts; beside it numpy solves the nodal equations of the same frequencies in one
batch, for |H| only. Figures are the fastest of the rounds, in one process.

What is compared before anything is printed: H to 1e-9 relative where |H| > 1e-250, the logarithm of |H| below
that with 60 digits of mpmath at some frequencies, and the derivatives with Tellegen's theorem for the same
nodal equations at one frequency: dlnH/dlnY = Y v_adjoint v / H. Growth is fitted over 50 to 800 sections, in
processor time, of which other work on the machine takes no share.
"""

from __future__ import annotations

import sys
import time
from collections.abc import Callable
from fractions import Fraction
from functools import partial
from typing import Any

import mpmath
import numpy as np
from numpy.typing import NDArray

import symnet as sn
from symnet.exact import confirm
from symnet.exact import derive as engine
from symnet.exact.floating import weights_at
from symnet.exact.sweeps import Scaled, shares
from symnet.exact.transfer import Transfer

SECTIONS = 200
GROWTH = (50, 100, 200, 400, 800)

Points = NDArray[Any]


def parts(sections: int) -> tuple[list[int], list[int]]:
    """Resistors in ohm and capacitors in pF, all different: 100 ohm to about 10 kohm, 100 pF to about 10 nF."""
    resistors = [100 + 49 * (37 * k % sections) + k for k in range(sections)]
    capacitors = [100 + 47 * (61 * k % sections) + k for k in range(sections)]
    return resistors, capacitors


def ladder(sections: int) -> sn.Network:
    """The RC ladder with these values, driven by a voltage source, read at the end."""
    resistors, capacitors = parts(sections)
    lines = [f"n{k} -- R{k + 1} -- n{k + 1} -- C{k + 1} -- gnd" for k in range(sections)]
    lines += [
        f"R{k + 1} = {r} ohm; C{k + 1} = {c} pF"
        for k, (r, c) in enumerate(zip(resistors, capacitors, strict=True))
    ]
    return sn.network("\n".join([*lines, "drive n0", f"read n{sections}"]))


def frequencies(count: int) -> Points:
    """jw from 1 Hz to 1 GHz, evenly on a logarithmic axis."""
    return 2j * np.pi * np.logspace(0, 9, count)


def by_diagram(net: sn.Network, s: Points) -> tuple[Transfer, Scaled, dict[str, Points]]:
    """H from the determinants, and d ln H / d ln x for every part x."""
    H = sn.derive(net)
    quotient = H.quotient
    take, leave = weights_at(quotient.numerator, H.values, s)
    own = len(quotient.denominator.take)  # the denominator's pieces are the first of the numerator's
    n, n_taken = shares(quotient.numerator.diagram, take, leave)
    d, d_taken = shares(quotient.denominator.diagram, take[:own], leave[:own])
    names = H.naming.generators.names
    sensitivities = {name: np.zeros(len(s), dtype=np.complex128) for name in names[1:]}
    for i, sides in enumerate(zip(quotient.denominator.take, quotient.denominator.leave, strict=True)):
        # in T/(T + L) the shares of leaving are one minus those of taking: the difference only turns its sign
        difference = n_taken[i] - d_taken[i]
        for terms, share in zip(sides, (difference, -difference), strict=True):
            ((_, powers),) = terms  # every weight of a ladder is one part, perhaps times s
            for place, _ in powers:
                if place:
                    sensitivities[names[place]] += share
    return H, n.over(d), sensitivities


def nodal(sections: int, s: Points) -> tuple[NDArray[np.complex128], NDArray[np.complex128]]:
    """Nodal matrices (frequencies x nodes x nodes) and right-hand side, the driven node eliminated."""
    resistors, capacitors = parts(sections)
    g = 1 / np.array(resistors, dtype=float)
    c = 1e-12 * np.array(capacitors, dtype=float)
    matrix = np.zeros((len(s), sections, sections), dtype=np.complex128)
    place = np.arange(sections)
    matrix[:, place, place] = g + np.append(g[1:], 0.0) + s[:, None] * c
    matrix[:, place[:-1], place[1:]] = matrix[:, place[1:], place[:-1]] = -g[1:]
    right = np.zeros(sections, dtype=np.complex128)
    right[0] = g[0]
    return matrix, right


def by_numpy(sections: int, s: Points) -> Points:
    """H by numpy's batched solve of the nodal equations."""
    matrix, right = nodal(sections, s)
    solution: Points = np.linalg.solve(matrix, np.broadcast_to(right[:, None], (*matrix.shape[:2], 1)))
    return solution[:, -1, 0]


def log2_by_mpmath(sections: int, s: complex) -> float:
    """log2 |H| by the chain of the ladder from its end, in 60 digits, part by part."""
    with mpmath.workdps(60):
        voltage, current = mpmath.mpc(1), mpmath.mpc(0)
        for r, c in reversed(list(zip(*parts(sections), strict=True))):
            current += mpmath.mpc(s) * c / mpmath.mpf(10) ** 12 * voltage
            voltage += r * current
        return float(-mpmath.log(abs(voltage), 2))


def check(
    net: sn.Network, s: Points, H: Scaled, sensitivities: dict[str, Points], solved: Points
) -> tuple[float, float, float]:
    """The largest errors: of H relative, of log2 |H| absolute where it is tiny, of the sensitivities absolute."""
    visible = np.abs(solved) > 1e-250
    found = H.plain()
    relative = float(np.max(np.abs(found[visible] - solved[visible]) / np.abs(solved[visible])))
    assert relative < 1e-9, f"H differs by {relative:g}"
    tiny = np.flatnonzero(H.log2() < -250 * np.log2(10))
    some = tiny[:: max(1, len(tiny) // 5)]
    logarithms = H.log2()
    error = max((abs(logarithms[k] - log2_by_mpmath(SECTIONS, complex(s[k]))) for k in some), default=0.0)
    assert len(some), "no frequency at which H is out of the range of floats"
    assert error < 1e-9, f"log2 |H| differs by {error:g}"
    k = int(np.flatnonzero(visible)[len(np.flatnonzero(visible)) // 2])
    adjoint = by_tellegen(SECTIONS, s[k : k + 1])
    difference = max(abs(sensitivities[name][k] - value) for name, value in adjoint.items())
    assert difference < 1e-8, f"the sensitivities differ by {difference:g}"
    assert set(adjoint) == set(net.part_names)
    return relative, error, float(difference)


def by_tellegen(sections: int, s: Points) -> dict[str, complex]:
    """d ln H / d ln x of every part from the adjoint nodal equations at one frequency."""
    (matrix,), right = nodal(sections, s)
    read = np.zeros(sections)
    read[-1] = 1
    v = np.concatenate([[1], np.linalg.solve(matrix, right)])
    a = np.concatenate([[0], np.linalg.solve(matrix.T, read)])
    out: dict[str, complex] = {}
    for k, (r, c) in enumerate(zip(*parts(sections), strict=True)):
        out[f"R{k + 1}"] = complex((v[k] - v[k + 1]) * (a[k] - a[k + 1]) / r / v[-1])
        out[f"C{k + 1}"] = complex(-s[0] * c * 1e-12 * v[k + 1] * a[k + 1] / v[-1])
    return out


def seconds(work: Callable[[], Any]) -> tuple[float, float, Any]:
    """How long it takes, by the clock and in processor time, and what it gives."""
    start, processor = time.perf_counter(), time.process_time()
    result = work()
    return time.perf_counter() - start, time.process_time() - processor, result


def afresh(net: sn.Network, s: Points) -> tuple[Transfer, Scaled, dict[str, Points]]:
    """The same from the network on, with nothing remembered, and the terms counted."""
    engine._prepared.cache_clear()
    confirm.solve_at.cache_clear()
    found = by_diagram(net, s)
    assert found[0].terms[0] == 1, "the numerator of a ladder is one term"
    return found


def table(rounds: int) -> str:
    """All figures as a Markdown table."""
    count = 1000 if rounds > 1 else 100
    s, net = frequencies(count), ladder(SECTIONS)
    ours, numpys = [], []
    for _ in range(rounds):
        clock, processor, (H, response, sensitivities) = seconds(lambda: afresh(net, s))
        ours.append((clock, processor))
        clock, processor, solved = seconds(lambda: by_numpy(SECTIONS, s))
        numpys.append((clock, processor))
    (clock, processor), (numpys_clock, numpys_processor) = (
        map(min, zip(*times, strict=True)) for times in (ours, numpys)
    )
    relative, logarithm, sensitivity = check(net, s, response, sensitivities, solved)
    growth = [
        min(seconds(partial(afresh, longer, s[:100]))[1] for _ in range(rounds))
        for longer in map(ladder, GROWTH)
    ]
    exponent = float(np.polyfit(np.log(GROWTH), np.log(growth), 1)[0])
    times = ", ".join(f"{1e3 * t:.0f}" for t in growth)
    sizes = ", ".join(map(str, GROWTH))
    n, d = H.terms
    assert Fraction(d) > 10**80
    rows = [
        f"| RC ladder, {SECTIONS} sections, {count} frequencies | figure |",
        "|---|---|",
        f"| terms if it were written out | {n} over {d:.1e} |",
        f"| derived, confirmed, counted, H and all {len(sensitivities)} sensitivities | {clock:.3f} s |",
        f"| numpy's batched solve, H only, on as many cores as there are | {numpys_clock:.3f} s |",
        f"| numpy's time by symnet's | {numpys_clock / clock:.2f} times |",
        f"| the same in processor time, numpy's cores added up | {numpys_processor / processor:.2f} times |",
        f"| H against numpy where it exceeds 1e-250, relative | {relative:.1e} |",
        f"| log2 of the magnitude below that, against 60 digits | {logarithm:.1e} |",
        f"| sensitivities against the adjoint equations | {sensitivity:.1e} |",
        f"| {sizes} sections, 100 frequencies, ms | {times} |",
        f"| fitted exponent of the growth | {exponent:.2f} |",
    ]
    return "\n".join(rows)


if __name__ == "__main__":
    print(table(int(sys.argv[1]) if len(sys.argv) > 1 else 3))
