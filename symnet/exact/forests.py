"""A tree of pieces in a graph, and the long paths in it, named in few words.

A piece outside the tree closes a path in it, and in a long network every such path may be as long as the network:
N of a ladder has one tree only, all of its resistors in a row, and its capacitors close a million steps at 800
sections. So the tree is parted into chains, each vertex going on in the child that hangs up the most
(D. D. Sleator, R. E. Tarjan, A data structure for dynamic trees, J. Computer and System Sciences 26, 1983, 362-391):
a path is a piece of at most log2 n chains. Nearly always such a piece begins at the top of its chain or is
short; one node stands for everything from the top of a chain down to a place, and points to the node of the place above,
so that all these together cost two arcs a place. What is left is covered by two overlapping runs whose
lengths are powers of two.

Invariant: from a node that stands for a run exactly the pieces of the run are reached.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from typing import Final, TypeAlias

__all__ = ["Ends", "Forest", "Runs"]

#: Two ends of a piece in one of its graphs; None is gnd.
Ends: TypeAlias = "tuple[int | None, int | None]"

_SHORT: Final = 4  # a run of so many pieces is named piece by piece


class Forest:
    """The pieces of a tree in one graph, hung up at gnd (at any vertex, in a part that does not reach gnd).

    ``child[k]`` is the vertex that piece k hangs up, ``sign[k]`` the entry, +1 or -1, that the piece has there;
    ``piece[v]`` the piece that hangs up vertex v, -1 at a root; ``above[v]`` the vertex it hangs from.
    """

    def __init__(self, size: int, ends: Sequence[Ends], tree: Iterable[int]) -> None:
        self._ground = size
        self.child: dict[int, int] = {}
        self.sign: dict[int, int] = {}
        self.above = [size] * (size + 1)
        self.piece = [-1] * (size + 1)
        self._root = [-1] * (size + 1)
        self._hang(ends, tree)
        self._part()

    def _hang(self, ends: Sequence[Ends], tree: Iterable[int]) -> None:
        size, root_of = self._ground, self._root
        beside: list[list[tuple[int, int, int]]] = [[] for _ in range(size + 1)]
        for k in tree:
            plus, minus = (size if end is None else end for end in ends[k])
            beside[plus].append((k, minus, -1))
            beside[minus].append((k, plus, 1))
        self._order: list[int] = []  # parents before children
        for root in range(size, -1, -1):
            if root_of[root] >= 0:
                continue
            root_of[root] = root
            reached = [root]
            for at in reached:
                for k, other, sign in beside[at]:
                    if root_of[other] < 0:
                        root_of[other] = root
                        self.above[other], self.piece[other] = at, k
                        self.child[k], self.sign[k] = other, sign
                        reached.append(other)
            self._order += reached

    def _part(self) -> None:
        """Part the forest into chains, each numbered downwards without a gap; a root is above its chain."""
        count = len(self._order)
        self._rank = [0] * count  # that of a vertex further down is higher
        for rank, vertex in enumerate(self._order):
            self._rank[vertex] = rank
        hanging, heaviest = [1] * count, [-1] * count
        for vertex in reversed(self._order):
            if self.piece[vertex] >= 0:
                above = self.above[vertex]
                hanging[above] += hanging[vertex]
                if heaviest[above] < 0 or hanging[vertex] > hanging[heaviest[above]]:
                    heaviest[above] = vertex
        self._top, self._place = [-1] * count, [-1] * count
        self.run: list[int] = []  # the piece at every place
        self.first: list[int] = []  # the first place of the chain that every place belongs to
        for start in self._order:
            if self._top[start] >= 0:
                continue
            at = start
            if self.piece[at] < 0:
                self._top[at], self._place[at], at = at, len(self.run) - 1, heaviest[at]
            begin = len(self.run)
            while at >= 0:
                self._top[at], self._place[at] = start, len(self.run)
                self.run.append(self.piece[at])
                self.first.append(begin)
                at = heaviest[at]

    def joined(self, plus: int | None, minus: int | None) -> bool:
        """Whether the tree joins two vertices."""
        a, b = (self._ground if end is None else end for end in (plus, minus))
        return self._root[a] == self._root[b]

    def spans(self, plus: int | None, minus: int | None) -> Iterator[tuple[int, int]]:
        """The path between two vertices that the tree joins, as runs of places, each from one up to before another."""
        a, b = (self._ground if end is None else end for end in (plus, minus))
        top, place, rank = self._top, self._place, self._rank
        while top[a] != top[b]:
            if rank[top[a]] < rank[top[b]]:
                a, b = b, a
            yield self.first[place[a]], place[a] + 1
            a = self.above[top[a]]
        if place[a] != place[b]:
            low, high = sorted((place[a], place[b]))
            yield low + 1, high + 1

    def way(self, plus: int | None, minus: int | None) -> list[int]:
        """The pieces of the tree between two vertices; none where the tree does not join them."""
        if not self.joined(plus, minus):
            return []
        return [k for low, high in self.spans(plus, minus) for k in self.run[low:high]]


class Runs:
    """Nodes beyond the pieces, each of which stands for a run of places of a forest.

    ``arcs`` are those of the graph that is made, which grow with every node. Where ``inward``, they lead from the pieces of
    a run to the node that stands for it, otherwise from the node to the pieces.
    """

    def __init__(self, forest: Forest, arcs: list[list[int]], *, inward: bool) -> None:
        self._forest = forest
        self._arcs = arcs
        self._inward = inward
        self._from_top: dict[int, int] = {}
        self._doubled: dict[tuple[int, int], int] = {}

    def link(self, node: int, run: Iterable[int]) -> None:
        """Let a node see these, or be seen by them."""
        if self._inward:
            for other in run:
                self._arcs[other].append(node)
        else:
            self._arcs[node] += run

    def of(self, plus: int | None, minus: int | None) -> list[int]:
        """Pieces and nodes that together stand for the path between two vertices that the forest joins."""
        found: list[int] = []
        for low, high in self._forest.spans(plus, minus):
            if high - low <= _SHORT:
                found += self._forest.run[low:high]
            elif low == self._forest.first[low]:
                found.append(self._down_to(high - 1))
            else:
                power = (high - low).bit_length() - 1
                found += (self._power(low, power), self._power(high - (1 << power), power))
        return found

    def _node(self, run: Iterable[int]) -> int:
        self._arcs.append([])
        self.link(len(self._arcs) - 1, run)
        return len(self._arcs) - 1

    def _down_to(self, last: int) -> int:
        """The node of all places from the top of a chain to this one."""
        known, run, first = self._from_top, self._forest.run, self._forest.first[last]
        start = last
        while start >= first and start not in known:
            start -= 1
        for place in range(start + 1, last + 1):
            known[place] = self._node((run[place], known[place - 1]) if place > first else (run[place],))
        return known[last]

    def _power(self, low: int, power: int) -> int:
        """The node of 2^power places from this one on."""
        node = self._doubled.get((low, power))
        if node is None:
            half = 1 << power - 1
            if half < _SHORT:
                node = self._node(self._forest.run[low : low + 2 * half])
            else:
                node = self._node((self._power(low, power - 1), self._power(low + half, power - 1)))
            self._doubled[low, power] = node
        return node
