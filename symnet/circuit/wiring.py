"""Faults of the wiring, found on the graph before any algebra and named by nodes and parts.

Checked: nothing at gnd; an island; a loop of ideal voltage sources; a cutset of ideal current sources; an op
amp whose output cannot reach its inputs, or whose inputs are one node; a source across one node; reads and laws
that name what is not there. What depends on values (a gain of exactly one, a negative resistor) is not a
matter of wiring and is said by the equations.
"""

from __future__ import annotations

from collections import deque
from collections.abc import Iterable, Iterator

from symnet.circuit.network import Network
from symnet.circuit.parts import (
    GROUND,
    Branch,
    CurrentDrive,
    CurrentLaw,
    OpAmp,
    VoltageDrive,
    VoltageLaw,
)
from symnet.circuit.series import spoken
from symnet.errors import Fault, Span, WiringError, nearest
from symnet.expressions import Expression, names_in

__all__ = ["check_drives", "check_wiring", "wiring_faults"]


def check_wiring(network: Network) -> None:
    """Raise WiringError with every fault of the wiring, unless there is none."""
    faults = wiring_faults(network)
    if faults:
        raise WiringError(faults, text=network.text)


def check_drives(network: Network) -> None:
    """Raise WiringError when a drive is at a node that no part touches: a slip of the name would give H = 0."""
    faults = tuple(_unconnected_drives(network))
    if faults:
        raise WiringError(faults, text=network.text)


def wiring_faults(network: Network) -> tuple[Fault, ...]:
    """Every fault of the wiring, with the place in the text where a part is at fault."""
    faults: list[Fault] = []
    if not network.parts and not network.drives:
        return (Fault("the network is empty", "write a chain such as: in -- R1 -- out -- C1 -- gnd"),)
    faults.extend(_shorted_sources(network))
    if all(GROUND not in piece.nodes for piece in (*network.parts, *network.drives)) and not any(
        isinstance(part, OpAmp) for part in network.parts
    ):
        faults.append(
            Fault(
                "nothing is connected to gnd, the reference of all voltages",
                "write gnd for the reference line of the drawing, as in: out -- C1 -- gnd",
            )
        )
        return tuple(faults)
    faults.extend(_islands(network))
    faults.extend(_source_loops(network))
    faults.extend(_open_op_amps(network))
    return tuple(faults)


def _places(nodes: Iterable[str]) -> str:
    nodes = list(nodes)
    named = [node for node in nodes if "+" not in node]
    inner = [spoken(node) for node in nodes if "+" in node]
    if not named:
        return ", ".join(inner)
    word = "node" if len(named) == 1 else "nodes"
    return ", ".join([f"{word} {', '.join(named)}", *inner])


def _voltage_pairs(network: Network) -> Iterator[tuple[str, str, str, object]]:
    """What fixes the voltage between two nodes: (how it is said, node, node, piece)."""
    for drive in network.drives:
        if isinstance(drive, VoltageDrive):
            yield f"drive {drive.name or drive.plus}", drive.plus, drive.minus, drive
    for part in network.parts:
        if isinstance(part, VoltageLaw):
            yield part.name, part.plus, part.minus, part
        elif isinstance(part, OpAmp):
            yield f"the output of {part.name}", part.out, GROUND, part


def _current_pairs(network: Network) -> Iterator[tuple[str, str, str, object]]:
    for drive in network.drives:
        if isinstance(drive, CurrentDrive):
            yield f"drive current {drive.name or f'into {drive.end}'}", drive.start, drive.end, drive
    for part in network.parts:
        if isinstance(part, CurrentLaw):
            yield part.name, part.start, part.end, part


def _shorted_sources(network: Network) -> Iterator[Fault]:
    for said, a, b, piece in _voltage_pairs(network):
        if a == b:
            yield Fault(
                f"{said} has both ends at {spoken(a)}: an ideal voltage source is shorted",
                "give it two different nodes",
                span=_span(piece),
                nodes=(a,),
            )


def _unconnected_drives(network: Network) -> Iterator[Fault]:
    touched = {node for part in network.parts for node in part.nodes}
    for part in network.parts:
        if isinstance(part, VoltageLaw | CurrentLaw):
            touched.update(_sensed(network, part.value))
    for drive in network.drives:
        for node in drive.nodes:
            if node != GROUND and node not in touched and network.parts:
                close = nearest(node, touched - {GROUND})
                yield Fault(
                    f"the drive is at node {node}, but no part is connected there",
                    f"did you mean {close[0]}?"
                    if close
                    else f"nodes with parts: {', '.join(sorted(touched))}",
                    span=drive.span,
                    nodes=(node,),
                )


def _span(piece: object) -> Span | None:
    span: Span | None = getattr(piece, "span", None)
    return span


def _islands(network: Network) -> Iterator[Fault]:
    """Groups of nodes that no branch or voltage source ties to gnd."""
    nodes = (GROUND, *network.nodes)
    group = _Groups(nodes)
    for part in network.branches():
        group.join(part.start, part.end)
    for _, a, b, _ in _voltage_pairs(network):
        group.join(a, b)
    laws = (part.value for part in network.parts if isinstance(part, VoltageLaw | CurrentLaw))
    sensed = {node for value in laws for node in _sensed(network, value)}
    for members in group.all():
        if GROUND in members:
            continue
        inside = [part for part in network.branches() if part.start in members]
        sources = [
            (said, piece) for said, a, b, piece in _current_pairs(network) if (a in members) != (b in members)
        ]
        if sensed & set(members) and any(isinstance(piece, CurrentLaw) for _, piece in sources):
            continue  # laws may do together what a part does, as in a gyrator; the equations will tell
        touching = tuple(part.name for part in inside)
        at = _places(members)
        be, it = ("is", "it") if len(members) == 1 else ("are", "them")
        with_parts = f" (with {', '.join(touching)})" if touching else ""
        if sources:
            said = ", ".join(said for said, _ in sources)
            yield Fault(
                f"{at}{with_parts} {be} tied to the rest only by ideal current sources ({said}): "
                "the current has no way back",
                f"give {it} a path to gnd through a part, for example the source's own resistance",
                span=_span(sources[0][1]),
                nodes=tuple(members),
                parts=touching,
            )
        else:
            first = next(
                (p for p in (*network.parts, *network.drives) if any(n in members for n in p.nodes)), None
            )
            yield Fault(
                f"{at}{with_parts} {be} an island: no part ties {it} to gnd",
                f"connect {it}, or give {it} a path to gnd",
                span=_span(first),
                nodes=tuple(members),
                parts=touching,
            )


def _source_loops(network: Network) -> Iterator[Fault]:
    """Loops of ideal voltage sources: two that say what one voltage is."""
    edges: dict[str, list[tuple[str, str]]] = {}
    for said, a, b, piece in _voltage_pairs(network):
        if a == b:
            continue
        path = _path(edges, a, b)
        if path is not None:
            others = ", ".join(path)
            what = (
                "two op amp outputs are tied together"
                if (isinstance(piece, OpAmp) and len(path) == 1 and path[0].startswith("the output of "))
                else "a loop of ideal voltage sources"
            )
            between = spoken(a) if b == GROUND else f"nodes {a} and {b}"
            yield Fault(
                f"{what}: {said} and {others} both fix the voltage at {between}",
                "take one away, or put a part (the source's own resistance) in series with it",
                span=_span(piece),
                nodes=(a, b),
                parts=tuple(n for n in network.part_names if n in said or any(n in other for other in path)),
            )
        edges.setdefault(a, []).append((b, said))
        edges.setdefault(b, []).append((a, said))


def _path(edges: dict[str, list[tuple[str, str]]], start: str, end: str) -> list[str] | None:
    came: dict[str, tuple[str, str] | None] = {start: None}
    queue = deque([start])
    while queue:
        node = queue.popleft()
        if node == end:
            said = []
            step = came[node]
            while step is not None:
                said.append(step[1])
                step = came[step[0]]
            return said[::-1]
        for other, name in edges.get(node, ()):
            if other not in came:
                came[other] = (node, name)
                queue.append(other)
    return None


def _open_op_amps(network: Network) -> Iterator[Fault]:
    reach: dict[str, list[str]] = {}

    def leads(a: str, b: str) -> None:
        reach.setdefault(a, []).append(b)

    for part in network.parts:
        match part:
            case Branch():
                leads(part.start, part.end)
                leads(part.end, part.start)
            case OpAmp():
                leads(part.plus, part.out)
                leads(part.minus, part.out)
            case VoltageLaw() | CurrentLaw():
                for node in _sensed(network, part.value):
                    for output in part.nodes:
                        leads(node, output)
                if isinstance(part, VoltageLaw):
                    leads(part.plus, part.minus)
                    leads(part.minus, part.plus)
    fixed = {GROUND} | {
        node
        for drive in network.drives
        if isinstance(drive, VoltageDrive) and GROUND in drive.nodes
        for node in drive.nodes
    }
    for part in network.parts:
        if not isinstance(part, OpAmp):
            continue
        if part.plus == part.minus:
            yield Fault(
                f"{part.name} has plus and minus at the same {spoken(part.plus)}: its output is undefined",
                "the inputs of an op amp must be two different nodes",
                span=part.span,
                nodes=(part.plus,),
                parts=(part.name,),
            )
        elif part.out in fixed or not _reaches(reach, part.out, {part.plus, part.minus} - fixed, fixed):
            yield Fault(
                f"{part.name} has no feedback path: nothing leads from its output {part.out} back to its inputs "
                f"({part.plus}, {part.minus})",
                "an ideal op amp needs a path from out to minus (or plus) through parts",
                span=part.span,
                nodes=part.nodes,
                parts=(part.name,),
            )


def _sensed(network: Network, expression: Expression) -> Iterator[str]:
    """The nodes whose voltages, or whose parts' currents, an expression hangs on."""
    nodes = set(network.nodes)
    for name in names_in(expression):
        word = name.name
        if word in nodes:
            yield word
        elif word[:2] in ("v_", "i_"):
            rest = word[2:]
            if rest in nodes:
                yield rest
            elif rest in network:
                yield from network[rest].nodes


def _reaches(reach: dict[str, list[str]], start: str, goals: set[str], closed: set[str]) -> bool:
    seen, queue = {start}, deque([start])
    while queue:
        node = queue.popleft()
        if node in goals:
            return True
        for other in reach.get(node, ()):
            if other not in seen and other not in closed:
                seen.add(other)
                queue.append(other)
    return False


class _Groups:
    """Nodes in groups that grow together (union-find)."""

    def __init__(self, members: Iterable[str]) -> None:
        self._parent = {member: member for member in members}

    def _root(self, member: str) -> str:
        while self._parent[member] != member:
            self._parent[member] = self._parent[self._parent[member]]
            member = self._parent[member]
        return member

    def join(self, a: str, b: str) -> None:
        self._parent[self._root(a)] = self._root(b)

    def all(self) -> list[list[str]]:
        """The groups in order of their first member."""
        groups: dict[str, list[str]] = {}
        for member in self._parent:
            groups.setdefault(self._root(member), []).append(member)
        return list(groups.values())
