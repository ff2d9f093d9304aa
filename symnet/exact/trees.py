"""Determinants as decision diagrams: the common trees of two graphs, shared wherever they agree.

A network matrix is a sum of rank-one pieces ``x * u * v^T``: every part is one or a few of them, with u and v
holding at most two entries, +1 and -1. Its determinant is the signed sum, over all sets of pieces that form a
spanning tree in both the row graph (edges u) and the column graph (edges v), of the product of the x in the
set (Mayeda and Seshu, Generation of network functions, 1965; W.-K. Chen, Applied Graph Theory, 1976, ch. 4).

The sum is never written out. Pieces are taken in a fixed order; each is left out or taken. Taking one merges
row a into row b and column c into column d and lowers the dimension by one. What the past leaves behind is
only how the rows and columns that later pieces still touch are merged, so equal partitions are one state, and
the states form a diagram that is read bottom-up in any arithmetic (compare C.-J. R. Shi and X.-D. Tan, IEEE
Trans. CAD 19, 2000, for matrix entries; here the pieces are kept whole, so that nothing that cancels inside
an entry is ever generated).

Invariants:

* Rows are numbered by the level at which they leave; the representative of a class is its highest number, and
  gnd counts as the highest of all. So equal partitions have equal names, and a class whose representative
  leaves while it is alive can never be merged again: that path is worth nothing and is dropped.
* Signs: with rows a and b merged and the lower one, at position i among the rows alive, removed together with
  the column at position j, the cofactor carries (-1)^(i+j), and another -1 for each of u and v whose removed
  end had entry -1. Positions follow from the state, so the sign belongs to the edge and equal states are equal
  including their sign. Rows and columns are renumbered apart; the parity of that goes on the whole.
* Every piece has the value take/leave; leaving it out multiplies by ``leave``. A resistor is a conductance
  with take 1 and leave R, so the determinant comes out multiplied by all R and nothing is ever divided.
"""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Any, TypeAlias

from symnet.exact.ordering import frontier_order

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

__all__ = ["Diagram", "Level", "Piece", "build"]

State: TypeAlias = tuple[int, ...]
_Moves: TypeAlias = tuple[State | None, State | None, int]

_DEAD = -1


@dataclass(frozen=True, slots=True)
class Piece:
    """One rank-one piece: row ends (+, -) and column ends (+, -); None is gnd, where nothing is counted."""

    row_plus: int | None
    row_minus: int | None
    column_plus: int | None
    column_minus: int | None


@dataclass(frozen=True, slots=True, eq=False)
class Level:
    """The nodes that decide one piece: which of them leave and take, to which nodes of the next level."""

    piece: int
    size: int
    leave_from: NDArray[np.intp]
    leave_to: NDArray[np.intp]
    take_from: NDArray[np.intp]
    take_to: NDArray[np.intp]
    sign: NDArray[np.float64]


@dataclass(frozen=True)
class Diagram:
    """A determinant as a diagram of takes and leaves, parents before children.

    Node k leaves or takes piece ``piece[k]``; ``leave[k]`` and ``take[k]`` are the nodes that follow (-1 where
    nothing follows), ``sign[k]`` is the sign of the take. Node ``root``, times the sign ``overall``, is the
    determinant; beyond the last node stands the value 1. ``root`` is -1 when the determinant is zero whatever
    the values.
    """

    piece: tuple[int, ...]
    leave: tuple[int, ...]
    take: tuple[int, ...]
    sign: tuple[int, ...]
    root: int
    overall: int = 1

    @property
    def is_zero(self) -> bool:
        """True when no tree is common to both graphs: the determinant is zero for every value."""
        return self.root == _DEAD

    def __len__(self) -> int:
        return len(self.piece)

    @cached_property
    def levels(self) -> tuple[Level, ...]:
        """The nodes piece by piece, first decision first, with arrays of positions for whole-level arithmetic."""
        import numpy as np

        starts = [k for k in range(len(self.piece)) if k == 0 or self.piece[k] != self.piece[k - 1]]
        out = []
        for start, end in zip(starts, [*starts[1:], len(self.piece)], strict=True):
            leaving = [k for k in range(start, end) if self.leave[k] >= 0]
            taking = [k for k in range(start, end) if self.take[k] >= 0]
            out.append(
                Level(
                    self.piece[start],
                    end - start,
                    np.array([k - start for k in leaving], dtype=np.intp),
                    np.array([self.leave[k] - end for k in leaving], dtype=np.intp),
                    np.array([k - start for k in taking], dtype=np.intp),
                    np.array([self.take[k] - end for k in taking], dtype=np.intp),
                    np.array([self.sign[k] for k in taking], dtype=np.float64),
                )
            )
        return tuple(out)

    def count(self) -> int:
        """The number of paths, without expanding: the number of terms when every piece has its own symbol."""
        counts = [0] * (len(self.piece) + 1)
        counts[-1] = 1
        for k in range(len(self.piece) - 1, -1, -1):
            leave, take = self.leave[k], self.take[k]
            counts[k] = (counts[leave] if leave >= 0 else 0) + (counts[take] if take >= 0 else 0)
        return counts[self.root] if self.root >= 0 else 0

    def evaluate(self, take: Sequence[Any], leave: Sequence[Any], one: Any = 1) -> Any:
        """The determinant with these weights, in any arithmetic that knows ``+``, unary ``-`` and ``*``.

        ``take[i]`` and ``leave[i]`` are the weights of piece i: ints, floats, complex arrays, polynomials.
        Returns ``one * 0`` when the diagram is zero.
        """
        if self.root < 0:
            return one * 0
        values: list[Any] = [None] * (len(self.piece) + 1)
        values[-1] = one
        for k in range(len(self.piece) - 1, -1, -1):
            i, to_leave, to_take = self.piece[k], self.leave[k], self.take[k]
            total = None
            if to_leave >= 0:
                total = leave[i] * values[to_leave]
            if to_take >= 0:
                product = take[i] * values[to_take]
                if self.sign[k] < 0:
                    product = -product
                total = product if total is None else total + product
            values[k] = total
        return values[self.root] if self.overall > 0 else -values[self.root]

    def bound(self, take: Sequence[int], leave: Sequence[int]) -> int:
        """The determinant with every sign plus: for magnitudes of weights, a bound on its magnitude."""
        if self.root < 0:
            return 0
        values = [0] * (len(self.piece) + 1)
        values[-1] = 1
        for k in range(len(self.piece) - 1, -1, -1):
            i, to_leave, to_take = self.piece[k], self.leave[k], self.take[k]
            total = leave[i] * values[to_leave] if to_leave >= 0 else 0
            values[k] = total + take[i] * values[to_take] if to_take >= 0 else total
        return values[self.root]

    def evaluate_modulo(self, take: Sequence[Any], leave: Sequence[Any], prime: int) -> Any:
        """The determinant modulo a prime; weights are ints, or int64 arrays if the prime is below 2^31."""
        if self.root < 0:
            return (take[0] if take else 0) * 0
        values: list[Any] = [None] * (len(self.piece) + 1)
        values[-1] = 1
        for k in range(len(self.piece) - 1, -1, -1):
            i, to_leave, to_take = self.piece[k], self.leave[k], self.take[k]
            total = leave[i] * values[to_leave] % prime if to_leave >= 0 else 0
            if to_take >= 0:
                total = (total + self.sign[k] * (take[i] * values[to_take] % prime)) % prime
            values[k] = total
        return values[self.root] * self.overall % prime


def build(size: int, pieces: Sequence[Piece], order: Sequence[int] | None = None) -> Diagram:
    """The diagram of det(sum of pieces) for a matrix of ``size`` rows and columns.

    ``order`` is the order in which the pieces are decided; by default :func:`frontier_order` chooses it.
    """
    if order is None:
        order = frontier_order(size, pieces)
    rows = _Side(size, [(pieces[i].row_plus, pieces[i].row_minus) for i in order])
    columns = _Side(size, [(pieces[i].column_plus, pieces[i].column_minus) for i in order])
    if rows.untouched or columns.untouched:
        return Diagram((), (), (), (), 0 if size == 0 else _DEAD)

    grown = _Growing()
    states: list[tuple[State, State]] = [((), ())]
    twins = _first_twin_level(rows, columns)
    for level, index in enumerate(order):
        rows.enter(level)
        columns.enter(level)
        if level >= twins and rows.open == columns.open and all(row == column for row, column in states):
            parity = rows.parity * columns.parity
            return _pruned(_grow_twins(grown, rows, [row for row, _ in states], order, level), parity)
        row_moves: dict[State, _Moves] = {}
        column_moves: dict[State, _Moves] = {}
        following: dict[tuple[State, State], int] = {}
        for row_state, column_state in states:
            row = row_moves.get(row_state)
            if row is None:
                row = row_moves[row_state] = rows.moves(row_state)
            column = column_moves.get(column_state)
            if column is None:
                column = column_moves[column_state] = columns.moves(column_state)
            left = None if row[0] is None or column[0] is None else (row[0], column[0])
            taken = None if row[1] is None or column[1] is None else (row[1], column[1])
            grown.add(index, left, taken, row[2] * column[2], following)
        states = list(following)
        if not states:
            return Diagram((), (), (), (), _DEAD)
    return _pruned(grown, rows.parity * columns.parity)


def _grow_twins(
    grown: _Growing, side: _Side, states: list[State], order: Sequence[int], level: int
) -> _Growing:
    """The rest of a diagram whose two graphs are the same from here on, as in a network of R, L, C past its sources.

    Rows and columns then merge alike, one partition is the whole state, and every sign is plus, being a square.
    """
    for here in range(level, len(order)):
        if here > level:
            side.enter(here)
        following: dict[State, int] = {}
        grown.piece += [order[here]] * len(states)
        grown.sign += [1] * len(states)
        moves, leave, take, number = side.moves, grown.leave.append, grown.take.append, grown.next
        for state in states:
            left, taken, _ = moves(state, signed=False)
            for target, reached in ((leave, left), (take, taken)):
                if reached is None:
                    target(_DEAD)
                elif reached in following:
                    target(following[reached])
                else:
                    following[reached] = number
                    target(number)
                    number += 1
        grown.next = number
        states = list(following)
    return grown


def _first_twin_level(rows: _Side, columns: _Side) -> int:
    """The first level from which on both graphs have the same pieces, numbered alike."""
    level = len(rows.ends)
    while level and rows.ends[level - 1] == columns.ends[level - 1]:
        level -= 1
    return level


class _Growing:
    """The nodes made so far, in the order of their levels."""

    def __init__(self) -> None:
        self.piece: list[int] = []
        self.leave: list[int] = []
        self.take: list[int] = []
        self.sign: list[int] = []
        self.next = 1

    def add(self, piece: int, left: Any, taken: Any, sign: int, following: dict[Any, int]) -> None:
        """One node: the states after leaving and taking the piece, None where there is none."""
        self.piece.append(piece)
        self.sign.append(sign)
        for state, target in ((left, self.leave), (taken, self.take)):
            if state is None:
                target.append(_DEAD)
                continue
            number = following.get(state)
            if number is None:
                number = following[state] = self.next
                self.next += 1
            target.append(number)


def _pruned(grown: _Growing, overall: int) -> Diagram:
    """The diagram without the nodes from which the end cannot be reached."""
    piece, leave, take, sign = grown.piece, grown.leave, grown.take, grown.sign
    count = len(piece)
    alive = [False] * count
    alive.append(True)  # the end
    for k in range(count - 1, -1, -1):
        alive[k] = (leave[k] >= 0 and alive[leave[k]]) or (take[k] >= 0 and alive[take[k]])
    if not alive[0]:
        return Diagram((), (), (), (), _DEAD)
    forced = 0  # what must be taken anyway, the sources above all, lays its sign on the whole
    while forced < count and (leave[forced] < 0 or not alive[leave[forced]]):
        overall *= sign[forced]
        sign[forced] = 1
        forced = take[forced]
    if all(alive) and _DEAD not in leave and _DEAD not in take:
        return Diagram(tuple(piece), tuple(leave), tuple(take), tuple(sign), 0, overall)
    number = [_DEAD] * (count + 2)  # the last entry answers for _DEAD itself
    kept = [k for k in range(count) if alive[k]]
    for place, k in enumerate(kept):
        number[k] = place
    number[count] = len(kept)
    return Diagram(
        tuple([piece[k] for k in kept]),
        tuple([number[leave[k]] for k in kept]),
        tuple([number[take[k]] for k in kept]),
        tuple([sign[k] for k in kept]),
        0,
        overall,
    )


class _Side:
    """One of the two graphs while the diagram is built: which numbers are in the frontier, and how they merge."""

    def __init__(self, size: int, ends: list[tuple[int | None, int | None]]) -> None:
        last = [_DEAD] * size
        first = [_DEAD] * size
        for level, pair in enumerate(ends):
            for end in pair:
                if end is not None:
                    last[end] = level
                    if first[end] < 0:
                        first[end] = level
        self.untouched = any(level < 0 for level in last)
        by_leaving = sorted(range(size), key=lambda end: (last[end], end))
        number = {end: n for n, end in enumerate(by_leaving)}
        self.parity = _parity(by_leaving)
        self.ground = size
        self.ends = [tuple(size if end is None else number[end] for end in pair) for pair in ends]
        self._first = [first[end] for end in by_leaving]
        self._last = [last[end] for end in by_leaving]
        self._waiting = list(range(size))  # numbers that no piece has touched yet, ascending
        self._frontier: list[int] = []
        self.new: tuple[int, ...] = ()

    def enter(self, level: int) -> None:
        """Prepare for the piece of this level: who comes in, who leaves, which ends it has."""
        plus, minus = self.ends[level]
        fresh = sorted({end for end in (plus, minus) if end != self.ground and self._first[end] == level})
        for end in fresh:
            del self._waiting[bisect_left(self._waiting, end)]
        self.new = tuple(fresh)
        work = self._frontier + fresh
        self._work = work
        where = {end: place for place, end in enumerate(work)}
        self._plus = where.get(plus, -1)
        self._minus = where.get(minus, -1)
        self._staying = [place for place, end in enumerate(work) if self._last[end] > level]
        self._leaving = [place for place, end in enumerate(work) if self._last[end] <= level]
        self._frontier = [work[place] for place in self._staying]

    @property
    def open(self) -> tuple[list[int], list[int]]:
        """The numbers in the state, and those that no piece has touched yet."""
        return self._work, self._waiting

    def moves(self, state: State, *, signed: bool = True) -> _Moves:
        """The state after leaving the piece out, the state after taking it, and the sign of taking it.

        None where a class that is alive would leave, or where the ends of the piece are one class already.
        """
        work = state + self.new
        names = self._work
        left: State | None = tuple([work[place] for place in self._staying])
        for place in self._leaving:
            if work[place] == names[place]:
                left = None
                break
        plus = self.ground if self._plus < 0 else work[self._plus]
        minus = self.ground if self._minus < 0 else work[self._minus]
        if plus == minus:
            return left, None, 1
        low, high = (plus, minus) if plus < minus else (minus, plus)
        merged = [high if end == low else end for end in work]
        for place in self._leaving:
            if merged[place] == names[place]:
                return left, None, 1
        staying = tuple([merged[place] for place in self._staying])
        if not signed:
            return left, staying, 1
        position = bisect_left(self._waiting, low)
        for end, name in zip(work, names, strict=True):
            if end == name and end < low:
                position += 1
        sign = 1 if (low == plus) == (position & 1 == 0) else -1
        return left, staying, sign


def _parity(permutation: list[int]) -> int:
    """+1 for an even permutation of 0..n-1, -1 for an odd one."""
    seen = [False] * len(permutation)
    parity = 1
    for start in range(len(permutation)):
        length, at = 0, start
        while not seen[at]:
            seen[at] = True
            at = permutation[at]
            length += 1
        if length and length % 2 == 0:
            parity = -parity
    return parity
