"""A diagram written out: every path a term, made level by level in whole arrays.

All paths that reach a level are one array of packed monomials, beside the array of the nodes they have reached;
leaving and taking the next piece moves all of them at once. The diagram is cut at the level where the paths from
the root to it and those from it to the end are fewest together (for a 13-section RC ladder of 196 418 terms these
are 610 and 377); every path above a node goes on with every path below it, which is one outer sum for each node of
the cut, at the speed of memory.

Terms can fall together only where paths part at a piece that has no name of its own by which its take and its
leave differ, or where a weight has several terms. Only then are they sorted, and equal monomials added up; in a
network whose parts are all different nothing is ever compared.

Measured (tests/speed/engine.py): the complete graph on 8 nodes, 65 536 terms, in about 2 ms, of
which the paths take a fifth; with a Python list for every node of the diagram they took six times as long.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING, Any, TypeAlias

import numpy as np

from symnet.exact.expansion import Expansion, Fields, merged
from symnet.exact.polynomials import Terms, highest_exponents
from symnet.exact.trees import Diagram
from symnet.progress import Progress

if TYPE_CHECKING:
    from numpy.typing import NDArray

__all__ = ["unfold"]

#: A weight as terms: the packed monomial as a column of words, None for 1; and the coefficient.
_Weight: TypeAlias = "list[tuple[NDArray[np.int64] | None, int]]"


def unfold(
    diagram: Diagram, count: int, factor: Terms, take: Sequence[Terms], leave: Sequence[Terms]
) -> Expansion:
    """``factor`` times the determinant with these weights, in ``count`` generators, term by term."""
    fields = Fields.for_degrees(highest_exponents(count, [*take, factor], [*leave, factor]))
    walk = _Walk.of(diagram, fields, factor, take, leave)
    if diagram.is_zero:
        return Expansion(fields, *walk.nothing())
    levels, cut = _cut(diagram)
    above = walk.along(levels[:cut], np.zeros(1, dtype=np.intp))
    nodes = np.unique(above.at)
    below = walk.along(levels[cut:], nodes)
    upper = above.by(np.searchsorted(nodes, above.at), len(nodes))
    lower = below.by(below.origin, len(nodes))
    last = walk.packed(factor)
    total = len(last) * sum(first.size * second.size for first, second in zip(upper, lower, strict=True))
    keys = np.empty((fields.words, total), dtype=np.int64)
    numbers = np.full(total, diagram.overall, dtype=walk.dtype)
    end = 0
    with Progress("writing out", "terms", total) as written:
        for first, second in zip(upper, lower, strict=True):
            for monomial, coefficient in last:
                begin, end = end, end + first.size * second.size
                whole = keys[:, begin:end].reshape(fields.words, first.size, second.size)
                left = above.keys[:, first] if monomial is None else above.keys[:, first] + monomial
                np.add(left[:, :, None], below.keys[:, None, second], out=whole)
                here = numbers[begin:end].reshape(first.size, second.size)
                if above.numbers is not None:
                    here *= above.numbers[first, None]
                if below.numbers is not None:
                    here *= below.numbers[second]
                if coefficient != 1:
                    here *= coefficient
            written(end)
    if len(last) > 1 or walk.mixing:
        keys, numbers = merged(keys, numbers)
    return Expansion(fields, keys, numbers)


@dataclass(frozen=True, slots=True, eq=False)
class _Paths:
    """Paths along some levels: which start each has, the node it reached, its monomial and coefficient (None: all 1)."""

    origin: NDArray[np.intp]
    at: NDArray[np.intp]
    keys: NDArray[np.int64]
    numbers: NDArray[Any] | None

    def by(self, group: NDArray[np.intp], count: int) -> list[NDArray[np.intp]]:
        """The places of the paths of each of ``count`` groups."""
        order = np.argsort(group, kind="stable")
        return np.split(order, np.cumsum(np.bincount(group, minlength=count))[:-1])


@dataclass(frozen=True, slots=True, eq=False)
class _Walk:
    """The diagram in arrays, with packed weights; ``mixing`` are the pieces after which terms may fall together."""

    diagram: Diagram
    fields: Fields
    take: Sequence[_Weight]
    leave: Sequence[_Weight]
    mixing: frozenset[int]
    dtype: np.dtype[Any]
    to_leave: NDArray[np.intp]
    to_take: NDArray[np.intp]
    sign: NDArray[np.int8] | None

    @classmethod
    def of(
        cls, diagram: Diagram, fields: Fields, factor: Terms, take: Sequence[Terms], leave: Sequence[Terms]
    ) -> _Walk:
        to_leave, to_take = (np.array(side, dtype=np.intp) for side in (diagram.leave, diagram.take))
        own = _own_names(take, leave)
        pieces = np.array(diagram.piece, dtype=np.intp)
        parting = {int(i) for i in np.unique(pieces[(to_leave >= 0) & (to_take >= 0)])}
        several = {i for i, pair in enumerate(zip(take, leave, strict=True)) if max(map(len, pair)) > 1}
        mixing = frozenset(i for i in parting | several if not own[i])
        return cls(
            diagram,
            fields,
            [_packed(terms, fields) for terms in take],
            [_packed(terms, fields) for terms in leave],
            mixing,
            _coefficient_type(diagram, factor, take, leave, mixing),
            to_leave,
            to_take,
            np.array(diagram.sign, dtype=np.int8) if -1 in diagram.sign else None,
        )

    def packed(self, terms: Terms) -> _Weight:
        """Terms as the walk adds them."""
        return _packed(terms, self.fields)

    def nothing(self) -> tuple[NDArray[np.int64], NDArray[Any]]:
        """No terms."""
        return np.zeros((self.fields.words, 0), dtype=np.int64), np.zeros(0, dtype=self.dtype)

    def along(self, levels: Sequence[int], nodes: NDArray[np.intp]) -> _Paths:
        """All paths from these nodes, all of the first level, to below the last; ``levels`` are their first nodes."""
        paths = _Paths(
            np.arange(len(nodes)), nodes, np.zeros((self.fields.words, len(nodes)), dtype=np.int64), None
        )
        for level in levels:
            paths = self._next(paths, self.diagram.piece[level])
        return paths

    def _next(self, paths: _Paths, piece: int) -> _Paths:
        moved = [
            *self._moved(paths, self.to_leave, self.leave[piece], signed=False),
            *self._moved(paths, self.to_take, self.take[piece], signed=True),
        ]
        if len(moved) == 1:
            return moved[0]
        nothing, no_terms = np.zeros(0, dtype=np.intp), self.nothing()[0]
        origin, at, keys = (
            np.concatenate([empty, *(getattr(each, name) for each in moved)], axis=-1)
            for name, empty in (("origin", nothing), ("at", nothing), ("keys", no_terms))
        )
        numbers = None
        if any(each.numbers is not None for each in moved):
            numbers = np.concatenate(
                [
                    np.ones(each.at.size, self.dtype) if each.numbers is None else each.numbers
                    for each in moved
                ]
            )
        if piece in self.mixing:
            rows = np.concatenate([keys, [at], [origin]])
            rows, numbers = merged(rows, np.ones(at.size, self.dtype) if numbers is None else numbers)
            keys, at, origin = rows[:-2], rows[-2], rows[-1]
        return _Paths(origin, at, keys, numbers)

    def _moved(
        self, paths: _Paths, to: NDArray[np.intp], weight: _Weight, *, signed: bool
    ) -> Sequence[_Paths]:
        """The paths that leave the piece, or take it, one array for each term of the weight."""
        at = to[paths.at]
        origin, keys, numbers = paths.origin, paths.keys, paths.numbers
        signs = self.sign[paths.at] if signed and self.sign is not None else None
        alive = at >= 0
        if not alive.all():
            if not alive.any():
                return ()
            origin, at, keys = origin[alive], at[alive], keys[:, alive]
            numbers = None if numbers is None else numbers[alive]
            signs = None if signs is None else signs[alive]
        if signs is not None and (signs < 0).any():
            numbers = signs.astype(self.dtype) if numbers is None else numbers * signs
        out = []
        for monomial, coefficient in weight:
            here = numbers
            if coefficient != 1:
                ones = np.ones(at.size, self.dtype) if numbers is None else numbers
                here = ones * self.dtype.type(coefficient) if self.dtype != object else ones * coefficient
            out.append(_Paths(origin, at, keys if monomial is None else keys + monomial, here))
        return out


def _cut(diagram: Diagram) -> tuple[list[int], int]:
    """The first node of every level, and the level at which both halves together have the fewest terms."""
    size, piece, leave, take = len(diagram), diagram.piece, diagram.leave, diagram.take
    up, down = [0] * size + [1, 0], [1] + [0] * (size + 1)  # the last entry stands for "nothing follows"
    for k in range(size - 1, -1, -1):
        up[k] = up[leave[k]] + up[take[k]]
    for here, to_leave, to_take in zip(down, leave, take, strict=False):  # down is read as it grows
        down[to_leave] += here
        down[to_take] += here
    levels = [k for k in range(size) if k == 0 or piece[k] != piece[k - 1]]
    rising, falling = sum(up), 0
    best, chosen = rising, 0
    for level, (start, end) in enumerate(pairwise([*levels, size])):
        rising -= sum(up[start:end])
        falling += sum(down[start:end])
        if rising + falling < best:
            best, chosen = rising + falling, level + 1
    return levels, chosen


def _packed(terms: Terms, fields: Fields) -> _Weight:
    return [(fields.column(powers) if powers else None, coefficient) for coefficient, powers in terms]


def _own_names(take: Sequence[Terms], leave: Sequence[Terms]) -> list[bool]:
    """Whether each piece has a name of its own by which its take and its leave differ."""
    owners: Counter[int] = Counter()
    for pair in zip(take, leave, strict=True):
        owners.update({k for terms in pair for _, powers in terms for k, _ in powers})
    own = []
    for t, m in zip(take, leave, strict=True):
        if len(t) == len(m) == 1:
            differing = {k for k, _ in set(t[0][1]) ^ set(m[0][1])}
            own.append(any(owners[k] == 1 for k in differing))
        else:
            own.append(False)
    return own


def _coefficient_type(
    diagram: Diagram,
    factor: Terms,
    take: Sequence[Terms],
    leave: Sequence[Terms],
    mixing: frozenset[int],
) -> np.dtype[Any]:
    """int8 where every coefficient is +1 or -1, int64 where it surely fits, Python integers otherwise."""
    sizes = [[_size(terms) for terms in weights] for weights in (take, leave)]
    if not mixing and _size(factor) == 1 and all(size == 1 for side in sizes for size in side):
        return np.dtype(np.int8)
    if diagram.bound(*sizes) * _size(factor) < 2**62:
        return np.dtype(np.int64)
    return np.dtype(object)


def _size(terms: Terms) -> int:
    return sum(abs(coefficient) for coefficient, _ in terms)
