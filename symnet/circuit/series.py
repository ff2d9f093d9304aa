"""Series and parallel groups between two nodes, and the nameless nodes inside them.

The pencil that passes ``R2 + (L2 || C2)`` meets a node to which the drawing gives no name. It is called after
the part before it and the part behind it, ``R2+L2``; a parallel group lends the name of its first part. No two
places of a network have the same pair, since the part behind a joint is the leftmost of what follows it, and
nobody can type such a name, since names have no +.

Going back, :func:`groups` reads the branches in their order like a shift-reduce parser: a branch is put on a
stack, and the two on top become one as soon as they are parallel or meet at a nameless node where nothing else
ends. One pass, and the order of the parts is kept.
"""

from __future__ import annotations

import itertools
from collections import Counter
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import TypeAlias

from symnet.circuit.parts import Branch, CurrentLaw, OpAmp, Part, VoltageLaw
from symnet.errors import Span

__all__ = [
    "Beside",
    "Group",
    "Leaf",
    "Series",
    "ends_at",
    "first_of",
    "groups",
    "is_hidden",
    "leaves",
    "runs",
    "settled",
    "spoken",
    "wire",
]


@dataclass(frozen=True, slots=True)
class Leaf:
    """One part, with its place in the text."""

    name: str
    span: Span | None = None


@dataclass(frozen=True, slots=True)
class Series:
    """Groups one after the other."""

    items: tuple[Group, ...]


@dataclass(frozen=True, slots=True)
class Beside:
    """Groups between the same two nodes."""

    items: tuple[Group, ...]


Group: TypeAlias = Leaf | Series | Beside


def is_hidden(node: str) -> bool:
    """Whether a node lies inside a series and has no name of its own."""
    return "+" in node


def spoken(node: str) -> str:
    """The node as it is called in a sentence.

    >>> spoken("out"), spoken("R2+L2")
    ('node out', 'the node between R2 and L2')
    """
    before, plus, after = node.partition("+")
    return f"the node between {before} and {after}" if plus else f"node {node}"


def first_of(group: Group) -> str:
    """The first part of a group in the order of writing."""
    while not isinstance(group, Leaf):
        group = group.items[0]
    return group.name


def _last_of(group: Group) -> str:
    """The last part of a series; the first of a parallel group."""
    while isinstance(group, Series):
        group = group.items[-1]
    return first_of(group)


def leaves(group: Group) -> Iterator[Leaf]:
    """The parts of a group in the order of writing."""
    stack = [group]
    while stack:
        top = stack.pop()
        if isinstance(top, Leaf):
            yield top
        else:
            stack.extend(reversed(top.items))


def wire(group: Group, start: str, end: str) -> list[Branch]:
    """The branches of a group between two nodes, in the order of writing.

    >>> [b.nodes for b in wire(Series((Leaf("R2"), Beside((Leaf("L2"), Leaf("C2"))))), "a", "out")]
    [('a', 'R2+L2'), ('R2+L2', 'out'), ('R2+L2', 'out')]
    """
    made: list[Branch] = []
    stack = [(group, start, end)]
    while stack:
        top, a, b = stack.pop()
        match top:
            case Leaf(name, span):
                made.append(Branch(name, a, b, span=span))
            case Beside(items):
                stack.extend((item, a, b) for item in reversed(items))
            case Series(items):
                joints = [f"{_last_of(x)}+{first_of(y)}" for x, y in itertools.pairwise(items)]
                ends = [a, *joints, b]
                stack.extend((item, ends[k], ends[k + 1]) for k, item in reversed(list(enumerate(items))))
    return made


@dataclass(frozen=True, slots=True)
class _Edge:
    group: Group
    start: str
    end: str


def ends_at(parts: Iterable[Part]) -> Counter[str]:
    """How many terminals end at each node."""
    count: Counter[str] = Counter()
    for part in parts:
        count.update(part.nodes)
    return count


def groups(branches: Iterable[Branch], count: Counter[str]) -> list[tuple[str, Group, str]]:
    """The branches, in their order, as groups between nodes; as few nameless nodes as can be are left.

    ``count`` says how many terminals of the whole network end at each node (:func:`ends_at`); it is used up.
    """
    stack: list[_Edge] = []
    for branch in branches:
        stack.append(_Edge(Leaf(branch.name), branch.start, branch.end))
        while len(stack) > 1 and (joined := _join(stack[-2], stack[-1], count)):
            stack[-2:] = [joined]
    return [(edge.start, edge.group, edge.end) for edge in stack]


def _join(one: _Edge, two: _Edge, count: Counter[str]) -> _Edge | None:
    if one.start == two.start and one.end == two.end and _belong_together(one, two):
        count.subtract((one.start, one.end))
        # A group in parentheses keeps them: (R1 || C1) || C2 and R1 || C1 || C2 are the same network.
        return _Edge(Beside((*_items(one.group, Beside), *_items(two.group, Beside))), one.start, one.end)
    if one.end == two.start and is_hidden(one.end) and count[one.end] == 2:
        return _Edge(Series((*_items(one.group, Series), *_items(two.group, Series))), one.start, two.end)
    return None


def _belong_together(one: _Edge, two: _Edge) -> bool:
    """Whether parallel groups are one link: they must be at a nameless node, and read well if both are simple."""
    return is_hidden(one.start) or is_hidden(one.end) or (_is_simple(one.group) and _is_simple(two.group))


def _is_simple(group: Group) -> bool:
    return isinstance(group, Leaf) or (
        isinstance(group, Beside) and all(isinstance(x, Leaf) for x in group.items)
    )


def _items(group: Group, kind: type[Series | Beside]) -> tuple[Group, ...]:
    return group.items if isinstance(group, kind) else (group,)


def settled(parts: Iterable[Part]) -> tuple[Part, ...]:
    """The parts with their nameless nodes named as they would be in the text of this network.

    After a part was taken away or replaced, a node ``R2+L2`` may no longer stand between R2 and L2. Inside a
    series it gets the name that its neighbours give it; where no series is left it gets a plain one.

    >>> kept = [b for b in wire(Series((Leaf("R2"), Leaf("L2"), Leaf("C2"))), "a", "gnd") if b.name != "L2"]
    >>> [b.nodes for b in settled(kept)]
    [('a', 'n1'), ('n2', 'gnd')]
    """
    parts = tuple(parts)
    count = ends_at(parts)
    if not any(is_hidden(node) for node in count):
        return parts
    plain = _plain_names(parts, count)
    renamed: list[Part] = []
    moved = [_moved(part, plain) for part in parts]
    spans = {part.name: part.span for part in parts}
    for piece in runs(moved):
        if isinstance(piece, Branch | VoltageLaw | CurrentLaw | OpAmp):
            renamed.append(piece)
        else:
            for start, group, end in piece:
                renamed += [replace(branch, span=spans[branch.name]) for branch in wire(group, start, end)]
    return tuple(renamed)


def _plain_names(parts: Sequence[Part], count: Counter[str]) -> dict[str, str]:
    """A plain name for each nameless node that is not inside a series."""
    left: dict[str, None] = {}
    for piece in runs(parts):
        if isinstance(piece, list):
            left.update(
                dict.fromkeys(node for start, _, end in piece for node in (start, end) if is_hidden(node))
            )
        else:
            left.update(dict.fromkeys(node for node in piece.nodes if is_hidden(node)))
    used = {*count, *(part.name for part in parts)}
    fresh = (name for name in (f"n{k}" for k in itertools.count(1)) if name not in used)
    return {node: next(fresh) for node in left}


def _moved(part: Part, names: Mapping[str, str]) -> Part:
    """The part with other names for its nodes."""
    if isinstance(part, OpAmp):
        plus, minus, out = (names.get(node, node) for node in part.nodes)
        return replace(part, plus=plus, minus=minus, out=out)
    first, second = (names.get(node, node) for node in part.nodes)
    if isinstance(part, VoltageLaw):
        return replace(part, plus=first, minus=second)
    return replace(part, start=first, end=second)


def runs(
    parts: Sequence[Part], count: Counter[str] | None = None
) -> Iterator[Part | list[tuple[str, Group, str]]]:
    """Parts in their order: laws and devices as they are, unbroken runs of branches as groups.

    ``count`` is that of the whole network (:func:`ends_at`) when these are only some of its parts; it is used up.
    """
    count = ends_at(parts) if count is None else count
    for is_branch, run in itertools.groupby(parts, key=lambda part: isinstance(part, Branch)):
        if is_branch:
            yield groups((part for part in run if isinstance(part, Branch)), count)
        else:
            yield from run
