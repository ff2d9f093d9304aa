"""The order in which the pieces of a determinant are decided: the narrower the frontier, the smaller the diagram."""

from __future__ import annotations

from collections.abc import Sequence
from heapq import heapify, heappop, heappush
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from symnet.exact.trees import Piece

__all__ = ["frontier_order"]


def frontier_order(size: int, pieces: Sequence[Piece]) -> list[int]:
    """An order of the pieces that keeps few rows and columns open at a time.

    Greedy: again and again, close the row or column whose remaining pieces open the fewest new ones (ties: the
    one with fewest remaining pieces, then one that is open already, then the lowest number). The currents of
    ideal sources, which one piece alone touches, are so decided first, and cost nothing. A row and a column that
    the same pieces touch, as at every node of R, L and C, are one site that counts twice.
    """
    sites, counts = _sites(size, pieces)
    touched: list[list[int]] = [[] for _ in pieces]
    for site, touching in enumerate(sites):
        for index in touching:
            touched[index].append(site)
    is_open = [False] * len(sites)
    order = [index for index, touching in enumerate(touched) if not touching]

    def price(site: int) -> tuple[int, int, bool, int]:
        rest = sites[site]
        opened = {site}
        for index in rest:
            opened.update(touched[index])
        balance = 0
        for other in opened:
            if not is_open[other]:
                balance += counts[other] - (other == site)
            left = sites[other]
            if len(left) <= len(rest) and left <= rest:
                balance -= counts[other]
        return balance, len(rest), not is_open[site], site

    todo = {site for site, touching in enumerate(sites) if touching}
    prices = {site: price(site) for site in todo}
    waiting = list(prices.values())
    heapify(waiting)
    while todo:
        cost = heappop(waiting)
        site = cost[-1]
        if site not in todo or prices[site] != cost:
            continue  # a price that has changed since
        affected: set[int] = set()
        for index in sorted(sites[site]):
            order.append(index)
            for other in touched[index]:
                is_open[other] = True
                affected.add(other)
                if other != site:
                    sites[other].discard(index)
        sites[site].clear()
        todo.difference_update([other for other in affected if not sites[other]])
        neighbours = {other for near in affected for index in sites[near] for other in touched[index]}
        for other in (affected | neighbours) & todo:
            cost = price(other)
            if cost != prices[other]:
                prices[other] = cost
                heappush(waiting, cost)
    return order


def _sites(size: int, pieces: Sequence[Piece]) -> tuple[list[set[int]], list[int]]:
    """The pieces that touch each row and then each column, and how many of these a site stands for.

    A column that the same pieces touch as the row of its number is left to that row.
    """
    rows: list[set[int]] = [set() for _ in range(size)]
    columns: list[set[int]] = [set() for _ in range(size)]
    for index, piece in enumerate(pieces):
        for sites, ends in (
            (rows, (piece.row_plus, piece.row_minus)),
            (columns, (piece.column_plus, piece.column_minus)),
        ):
            for end in ends:
                if end is not None:
                    sites[end].add(index)
    counts = [1] * (2 * size)
    for k in range(size):
        if rows[k] == columns[k]:
            columns[k], counts[k] = set(), 2
    return rows + columns, counts
