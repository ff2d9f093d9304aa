"""The order in which the pieces of a determinant are decided: the narrower the frontier, the smaller the diagram.

A diagram has a level for each piece, and a level has a node for each way in which the rows and columns that are open
there, touched already and not for the last time, can be merged: up to the Bell number of how many they are.

What must be taken is taken first: a piece that alone touches a row or a column, as those of ideal sources and op
amps do. It merges its rows and columns for good, which may force others; what is left is a smaller matrix. So
nothing is open meanwhile, and no order of the rest has to carry the current of a source from its first node to its
last: that alone halves the diagram of a complete graph.

For the rest a few orders are made that each cost next to nothing, and the one with the smallest sum of Bell numbers is
used: breadth first from one end of the network to the other (E. Cuthill, J. McKee, Reducing the bandwidth of sparse
symmetric matrices, ACM National Conference 1969) and the same backwards, which suit what is long; and greedily closing
the row or column that opens the fewest others, which suits what is wide. None of them is best everywhere. Orders of
least degree or least fill were tried and lose by factors on every mesh, since they work at many places at a time.

Nodes of the diagram in the order of the text, and in the one chosen (``python -m tests.speed.ordering``):

==============================================  =======  ======
RC ladder, 100 sections                             401     401
RC ladder, 12 sections, lines in random order      2361      59
10 bridged-T sections                               187     157
6 bridged-T sections, lines in random order       12531      93
mesh of 5 by 5 nodes                               3696    1755
mesh of 4 by 4 nodes, lines in random order       36172     464
ladder simulated by 9 op amps                       113      70
the same, lines in random order                     339      71
complete graph, 8 nodes                            1696     920
complete graph, 9 nodes                            6059    3180
==============================================  =======  ======

The sum is near the number of nodes that there will be: 0.8 to 3.3 times that number for complete graphs of 8 to 13 nodes
and for meshes of 5 by 5 to 8 by 8. So what is much too large is refused before it is begun.

Choosing takes about as long as building the diagram of a ladder, and less than building any other.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import cache
from heapq import heapify, heappop, heappush
from itertools import accumulate
from typing import TYPE_CHECKING, Final, TypeAlias

if TYPE_CHECKING:
    from symnet.exact.trees import Piece

__all__ = ["frontier_order", "order_and_cost"]

#: For each piece that is not forced the rows and columns it touches, numbered together; by piece.
_Touched: TypeAlias = dict[int, tuple[int, ...]]

#: Nodes for each level: at so few nothing is gained by another order; above so many a longer search is repaid.
_NARROW: Final = 4
_WIDE: Final = 1000
_STARTS: Final = 8  # places from which the greedy order is then tried


def frontier_order(size: int, pieces: Sequence[Piece]) -> list[int]:
    """An order of the pieces that keeps few rows and columns open at a time; ``size`` is that of the matrix."""
    return order_and_cost(size, pieces)[0]


def order_and_cost(size: int, pieces: Sequence[Piece]) -> tuple[list[int], int]:
    """That order, and about how many nodes the diagram will have: up to three times as many as it then has."""
    forced, touched, grounded = _forced(size, pieces)
    if not touched:
        return forced, len(forced)

    def cheapest(*orders: list[int]) -> tuple[int, list[int]]:
        """Of equal ones that which comes to gnd last: until then nothing is merged with it (balanced ladders)."""
        priced = (
            (
                _cost(size, touched, order),
                -next((level for level, index in enumerate(order) if index in grounded), len(order)),
                order,
            )
            for order in orders
        )
        cost, _, order = min(priced)
        return cost, order

    sites = _breadth_first(touched)
    cost, best = cheapest(_by_sites(touched, sites), _by_sites(touched, sites[::-1]))
    if cost > _NARROW * len(touched):
        cost, best = cheapest(best, _greedy(touched))
    if cost > _WIDE * len(touched):
        starts = sites[:: -(-len(sites) // _STARTS)]
        cost, best = cheapest(best, *(_greedy(touched, start) for start in starts))
    return forced + best, cost


def _forced(size: int, pieces: Sequence[Piece]) -> tuple[list[int], _Touched, set[int]]:
    """The pieces that every tree takes or none can, what the others touch when those are taken, and which touch gnd.

    Rows have their own numbers and gnd among the rows is 2*size; columns follow at ``size``, their gnd at 2*size + 1.
    """
    grounds = (2 * size, 2 * size + 1)
    ends = [
        (
            grounds[0] if piece.row_plus is None else piece.row_plus,
            grounds[0] if piece.row_minus is None else piece.row_minus,
            grounds[1] if piece.column_plus is None else size + piece.column_plus,
            grounds[1] if piece.column_minus is None else size + piece.column_minus,
        )
        for piece in pieces
    ]
    merged = list(range(2 * size + 2))

    def of(site: int) -> int:
        while merged[site] != site:
            site = merged[site]
        return site

    touching: list[set[int]] = [set() for _ in merged]
    order: list[int] = []
    for index, (a, b, c, d) in enumerate(ends):
        if a == b or c == d:
            order.append(index)  # touches nothing, or can be in no tree
        else:
            for site in (a, b, c, d):
                touching[site].add(index)

    waiting = [site for site in range(2 * size) if len(touching[site]) == 1]

    def drop(index: int) -> None:
        order.append(index)
        for site in {of(end) for end in ends[index]}:
            touching[site].discard(index)
            waiting.append(site)

    while waiting:
        site = waiting.pop()
        if site in grounds or len(touching[site]) != 1:
            continue
        (index,) = touching[site]
        drop(index)
        a, b, c, d = (of(end) for end in ends[index])
        for kept, gone in ((max(a, b), min(a, b)), (max(c, d), min(c, d))):
            for loop in sorted(touching[gone] & touching[kept]):
                drop(loop)  # its two ends become one
            merged[gone] = kept
            touching[kept] |= touching[gone]
            touching[gone] = set()
            waiting.append(kept)
    done = set(order)
    reached = {index: {of(end) for end in ends[index]} for index in range(len(pieces)) if index not in done}
    touched = {index: tuple(sorted(sites.difference(grounds))) for index, sites in reached.items()}
    return order, touched, {index for index, sites in reached.items() if not sites.isdisjoint(grounds)}


def _by_sites(touched: _Touched, sites: Sequence[int]) -> list[int]:
    """The pieces in the order in which the first of their rows and columns stands in this list."""
    place = {site: k for k, site in enumerate(sites)}
    return sorted(touched, key=lambda index: (min((place[s] for s in touched[index]), default=-1), index))


def _breadth_first(touched: _Touched) -> list[int]:
    """Rows and columns from an end of the network outward, each group of neighbours by rising degree."""
    beside: dict[int, set[int]] = {}
    for touching in touched.values():
        for site in touching:
            beside.setdefault(site, set()).update(touching)

    def by_degree(site: int) -> tuple[int, int]:
        return len(beside[site]), site

    def outward(start: int) -> list[int]:
        seen, reached = {start}, [start]
        for site in reached:
            new = sorted(beside[site] - seen, key=by_degree)
            seen.update(new)
            reached += new
        return reached

    order: list[int] = []
    left = set(beside)
    while left:
        start = min(left, key=by_degree)
        for _ in range(3):  # the last one reached is an end of the network, or soon is
            start = outward(start)[-1]
        order += outward(start)
        left.difference_update(order)
    return order


def _greedy(touched: _Touched, start: int | None = None) -> list[int]:
    """Again and again, close the row or column whose remaining pieces open the fewest new ones.

    Ties: the one with fewest remaining pieces, then one that is open already, then the lowest number.
    """
    remaining: dict[int, set[int]] = {}
    for index, touching in touched.items():
        for site in touching:
            remaining.setdefault(site, set()).add(index)
    is_open: set[int] = set()
    order = [index for index, touching in touched.items() if not touching]

    def price(site: int) -> tuple[int, int, bool, int]:
        opened = {other for index in remaining[site] for other in touched[index]}
        new = sum(1 for other in opened if other not in is_open and other != site)
        closed = sum(1 for other in opened if remaining[other] <= remaining[site])
        return (new - closed, len(remaining[site]), site not in is_open, site)

    prices = {site: price(site) for site in remaining}
    if start is not None:
        prices[start] = (-len(touched), 0, True, start)
    waiting = [(cost, site) for site, cost in prices.items()]
    heapify(waiting)
    while waiting:
        cost, site = heappop(waiting)
        if not remaining[site] or prices[site] != cost:
            continue  # closed, or a price that has changed since
        affected: set[int] = set()
        for index in sorted(remaining[site]):
            order.append(index)
            affected.update(touched[index])
        for other in affected - {site}:
            remaining[other] -= remaining[site]
        remaining[site] = set()
        is_open |= affected
        neighbours = {o for other in affected for index in remaining[other] for o in touched[index]}
        for other in affected | neighbours:
            if remaining[other]:
                cost = price(other)
                if cost != prices[other]:
                    prices[other] = cost
                    heappush(waiting, (cost, other))
    return order


def _cost(size: int, touched: _Touched, order: Sequence[int]) -> int:
    """About how many nodes the diagram will have: the sum over its levels of the ways to merge what is open.

    Rows and columns are counted apart and the greater number holds: in a network of R, L, C they merge alike.
    """
    first: dict[int, int] = {}
    last: dict[int, int] = {}
    for level, index in enumerate(order):
        for site in touched[index]:
            first.setdefault(site, level)
            last[site] = level
    opening = ([0] * (len(order) + 1), [0] * (len(order) + 1))
    for site, level in first.items():
        side = opening[0] if site < size else opening[1]
        side[level] += 1
        side[last[site] + 1] -= 1
    return sum(_ways(max(rows, columns)) for rows, columns in zip(*map(accumulate, opening), strict=True))


@cache
def _ways(count: int) -> int:
    """The number of partitions of so many things: the Bell numbers 1, 1, 2, 5, 15, 52 ..."""
    row = [1]
    for _ in range(count):
        row = list(accumulate([row[-1], *row]))
    return row[0]
