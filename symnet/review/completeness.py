"""Whether there are enough equations for what a working claims, and which node has none.

The unknowns of a hand derivation are the node voltages; currents follow from them by the laws of the parts, and so
does everything that op amps and other laws fix. What must be written down are current laws at nodes: those where
no drive, op amp or voltage law brings in a current of its own. The claim is the last line that gives one voltage or
current by another, the transfer function as a rule; the lines above it must lead there.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from symnet.review.rows import Row, Rows, Span
from symnet.review.working import Line

__all__ = ["Completeness", "completeness"]


@dataclass(frozen=True, slots=True)
class Completeness:
    """What the lines above the claim determine.

    ``claim`` is the line that is claimed, ``independent`` how many independent equations the lines
    above it give beside the laws of the parts, ``needed`` how many it takes for all nodes. ``without`` are the nodes
    whose current law is missing, ``open`` the nodes whose voltage the lines leave open. ``enough`` says whether the
    claim follows from them. Decided by rank at a random point modulo a prime.
    """

    claim: Line
    independent: int
    needed: int
    without: tuple[str, ...]
    open: tuple[str, ...]
    enough: bool

    def __str__(self) -> str:
        given = f"{self.independent} independent equation{'s' if self.independent != 1 else ''}"
        if self.enough:
            return f"enough for line {self.claim.label}: {given}"
        text = f"not enough for line {self.claim.label}: {given} of {self.needed}"
        if self.without:
            text += f"; no equation for node{'s' if len(self.without) > 1 else ''} {', '.join(self.without)}"
        if self.open:
            text += f"; left open: {', '.join(self.open)}"
        return text


def completeness(rows: Rows, said: Sequence[tuple[Line, Row]]) -> Completeness | None:
    """Whether the last line said follows from those above it; None where there are none above it."""
    if len(said) < 2:
        return None
    claim, target = said[-1]
    laws = Span(rows.laws)
    span = laws.copy()
    for _, row in said[:-1]:
        span.add(row)
    nodes = [
        (equation.name, row)
        for equation, row in zip(rows.equations, rows.network, strict=True)
        if equation.kind == "node" and not equation.free
    ]
    return Completeness(
        claim,
        len(span) - len(laws),
        len(nodes),
        tuple(name for name, row in nodes if row not in span),
        _open(rows, span),
        target in span,
    )


def _open(rows: Rows, span: Span) -> tuple[str, ...]:
    """The nodes whose voltage does not follow from the drives."""
    solution = rows.scope.solution
    known = span.copy()
    for drive in solution.network.drives:
        ends = [("v", node) for node in drive.nodes]
        known.add(tuple((u == ends[0]) - (u == ends[1]) for u in solution.unknowns))
    for place, (kind, _) in enumerate(solution.unknowns):
        if kind == "x":
            known.add(tuple(int(k == place) for k in range(len(solution.unknowns))))
    found = []
    for place, (kind, name) in enumerate(solution.unknowns):
        if kind == "v" and tuple(int(k == place) for k in range(len(solution.unknowns))) not in known:
            found.append(name)
    return tuple(found)
