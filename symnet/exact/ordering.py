"""The order in which the pieces of a determinant are decided: the narrower the frontier, the smaller the diagram."""

from __future__ import annotations

from collections.abc import Sequence
from heapq import heappop, heappush
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from symnet.exact.trees import Piece

__all__ = ["frontier_order"]


def frontier_order(size: int, pieces: Sequence[Piece]) -> list[int]:
    """An order of the pieces that keeps few rows and columns open at a time.

    Greedy: again and again, close the row or column whose remaining pieces open the fewest new ones (ties: the
    one with fewest remaining pieces, then one that is open already, then the lowest number). The currents of
    ideal sources, which one piece alone touches, are so decided first, and cost nothing.
    """
    touched: list[tuple[int, ...]] = []
    for piece in pieces:
        sites = [end for end in (piece.row_plus, piece.row_minus) if end is not None]
        sites += [size + end for end in (piece.column_plus, piece.column_minus) if end is not None]
        touched.append(tuple(dict.fromkeys(sites)))
    remaining: list[set[int]] = [set() for _ in range(2 * size)]
    for index, touching in enumerate(touched):
        for site in touching:
            remaining[site].add(index)
    is_open = [False] * (2 * size)
    todo = {site for site in range(2 * size) if remaining[site]}
    order = [index for index, touching in enumerate(touched) if not touching]

    def price(site: int) -> tuple[int, int, bool, int]:
        opened = {other for index in remaining[site] for other in touched[index]}
        new = sum(1 for other in opened if not is_open[other] and other != site)
        closed = sum(1 for other in opened if remaining[other] <= remaining[site])
        return (new - closed, len(remaining[site]), not is_open[site], site)

    prices = {site: price(site) for site in sorted(todo)}
    waiting = sorted((cost, site) for site, cost in prices.items())
    while todo:
        cost, site = heappop(waiting)
        if site not in todo or prices[site] != cost:
            continue  # a price that has changed since
        affected: set[int] = set()
        for index in sorted(remaining[site]):
            order.append(index)
            for other in touched[index]:
                is_open[other] = True
                affected.add(other)
                if other != site:
                    remaining[other].discard(index)
        remaining[site].clear()
        todo -= {other for other in affected if not remaining[other]}
        neighbours = {o for other in affected for index in remaining[other] for o in touched[index]}
        for other in (affected | neighbours) & todo:
            cost = price(other)
            if cost != prices[other]:
                prices[other] = cost
                heappush(waiting, (cost, other))
    return order
