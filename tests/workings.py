"""Workings judged a second way: each line at random fractions, under the solution of the oracle's tableau.

A line is taken from the text in the notation of hand derivations by its letters alone and read by the oracle's own
arithmetic; nothing of the checker, the elimination or the determinants is used.
"""

from __future__ import annotations

import re
from fractions import Fraction
from random import Random
from typing import Any

from symnet.circuit.network import Network
from symnet.circuit.parts import Branch, CurrentDrive, CurrentLaw, OpAmp, VoltageDrive, VoltageLaw
from symnet.circuit.spelling import write_expression
from symnet.expressions import names_in
from tests import oracle


def drawing_of(network: Network) -> oracle.Drawing:
    """The network as the oracle's plain tuples."""
    parts: list[oracle.Part] = []
    for part in network.parts:
        match part:
            case Branch():
                parts.append((part.kind, part.name, part.start, part.end, part.name))
            case VoltageLaw():
                parts.append(("hold", part.name, part.plus, part.minus, write_expression(part.value)))
            case CurrentLaw():
                parts.append(("push", part.name, part.start, part.end, write_expression(part.value)))
            case OpAmp():
                parts.append(("opamp", part.name, part.plus, part.minus, part.out))
    match network.drives[0]:
        case VoltageDrive(plus, minus):
            drive = ("voltage", plus, minus)
        case CurrentDrive(start, end):
            drive = ("current", start, end)
    return oracle.Drawing(tuple(parts), drive, write_expression(network.reads[0]))


def values_of(network: Network, random: Random) -> dict[str, Fraction]:
    """A random fraction for every symbol that is not tied, then the tied ones."""
    ties = {name: v.expression for name, v in network.values if any(True for _ in names_in(v.expression))}
    names = [name for name in network.symbols() if name not in ties]
    values = {name: Fraction(random.randint(1, 99), random.randint(1, 99)) for name in ("s", *names)}
    waiting = dict(ties)
    while waiting:
        for name, expression in list(waiting.items()):
            if all(inner.name in values for inner in names_in(expression)):
                values[name] = oracle.arithmetic(write_expression(expression), values)
                del waiting[name]
    return values


def solved(drawing: oracle.Drawing, values: dict[str, Fraction]) -> dict[str, Fraction]:
    """Every voltage and every current of a branch or source, at these values, for a drive of 1."""
    matrix, rhs, _ = oracle.tableau(drawing, values, Fraction)
    solution = oracle.eliminate(matrix, rhs)
    nodes = oracle.nodes_of(drawing)
    found = dict(zip(nodes, solution, strict=False))
    found |= {f"v_{node}": found[node] for node in nodes} | {"gnd": Fraction(0)}
    currents = [f"i_{part[1]}" for part in drawing.parts]
    found |= dict(zip(currents, solution[len(nodes) :], strict=False))
    found["i_drive" if drawing.drive[0] == "current" else "v_drive"] = Fraction(1)
    return found


def lines_of(working: str) -> list[tuple[str, str, str]]:
    """(name of a definition or "", left, right) of every line, by the letters alone."""
    found = []
    for line in working.splitlines():
        text = line.partition("#")[0].strip()
        label = re.match(r"(node [\w.]+:|so |hence |let )?\s*", text)
        assert label
        left, right = text[label.end() :].split(" = ")
        found.append((left if text.startswith("let ") else "", left.strip(), right.strip()))
    return found


def untrue(network: Network, working: str, drawing: oracle.Drawing | None = None) -> list[int]:
    """The lines, from 0, that are not true at three random points."""
    drawing = drawing or drawing_of(network)
    wrong: set[int] = set()
    random = Random(working)
    for _ in range(3):
        values = values_of(network, random)
        names: dict[str, Any] = {**values, **solved(drawing, values)}
        for k, (defined, left, right) in enumerate(lines_of(working)):
            value = oracle.arithmetic(right, names)
            if defined:
                names[defined] = value
            elif oracle.arithmetic(left, names) != value:
                wrong.add(k)
    return sorted(wrong)
