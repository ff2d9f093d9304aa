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
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise
from typing import TYPE_CHECKING, Any, Final, NamedTuple, TypeAlias

from symnet.errors import Fault, LimitError
from symnet.exact.ordering import order_and_cost
from symnet.progress import Progress

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

__all__ = ["MOST_NODES", "ONE", "ZERO", "Diagram", "Level", "Piece", "build", "permutation_sign", "too_wide"]

#: Nodes beyond which no diagram is built on: at about 200 bytes for each while it is built, 40 MB.
MOST_NODES: Final = 200_000
#: Nodes that are expected, by a rough rule, beyond which none is begun.
_MOST_EXPECTED: Final = 10 * MOST_NODES

State: TypeAlias = str

_DEAD = -1


class Piece(NamedTuple):
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
        for start, end in pairwise([*starts, len(self.piece)]):
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
        counts = self._row(1, 0)
        for k, _, leave, take, _ in self._upwards():
            counts[k] = counts[leave] + counts[take]
        return int(counts[self.root])

    def evaluate(self, take: Sequence[Any], leave: Sequence[Any], one: Any = 1) -> Any:
        """The determinant with these weights, in any arithmetic that knows ``+``, unary ``-`` and ``*``.

        ``take[i]`` and ``leave[i]`` are the weights of piece i: ints, floats, complex arrays, polynomials.
        Returns ``one * 0`` when the diagram is zero.
        """
        if self.root < 0:
            return one * 0
        values = self._row(one, None)
        for k, i, to_leave, to_take, sign in self._upwards():
            total = leave[i] * values[to_leave] if to_leave >= 0 else None
            if to_take >= 0:
                product = take[i] * values[to_take]
                if sign < 0:
                    product = -product
                total = product if total is None else total + product
            values[k] = total
        return values[self.root] if self.overall > 0 else -values[self.root]

    def bound(self, take: Sequence[int], leave: Sequence[int]) -> int:
        """The determinant with every sign plus: for magnitudes of weights, a bound on its magnitude."""
        values = self._row(1, 0)
        for k, i, to_leave, to_take, _ in self._upwards():
            values[k] = leave[i] * values[to_leave] + take[i] * values[to_take]
        return int(values[self.root])

    def evaluate_modulo(self, take: Sequence[Any], leave: Sequence[Any], prime: int) -> Any:
        """The determinant modulo a prime; weights are ints, or int64 arrays if the prime is below 2^31."""
        signed = {1: take, -1: [prime - weight for weight in take]}
        # of every R, L and C one of the two weights is 1
        free_to_leave, free_to_take = ([_is_one(weight) for weight in side] for side in (leave, take))
        values = self._row(1, 0)
        for k, i, to_leave, to_take, sign in self._upwards():
            left = values[to_leave] if free_to_leave[i] else leave[i] * values[to_leave]
            if sign > 0 and free_to_take[i]:
                values[k] = (left + values[to_take]) % prime
            else:
                values[k] = (left + signed[sign][i] * values[to_take]) % prime
        return values[self.root] * self.overall % prime

    def _row(self, one: Any, nothing: Any) -> list[Any]:
        """A value for every node, for the end, and last, where -1 points to, for what is not there."""
        return [nothing] * len(self.piece) + [one, nothing]

    def _upwards(self) -> Iterator[tuple[int, int, int, int, int]]:
        """Number, piece, leave, take and sign of every node, children first."""
        return zip(
            range(len(self.piece) - 1, -1, -1),
            reversed(self.piece),
            reversed(self.leave),
            reversed(self.take),
            reversed(self.sign),
            strict=True,
        )


def _is_one(weight: object) -> bool:
    return isinstance(weight, int) and weight == 1


#: The determinant of no rows, and the one that has no tree.
ONE: Final = Diagram((), (), (), (), 0)
ZERO: Final = Diagram((), (), (), (), _DEAD)


def build(size: int, pieces: Sequence[Piece], order: Sequence[int] | None = None) -> Diagram:
    """The diagram of det(sum of pieces) for a matrix of ``size`` rows and columns.

    ``order`` is the order in which the pieces are decided; by default :func:`~symnet.exact.ordering.frontier_order` chooses it. Raises
    LimitError when it gets more than :data:`MOST_NODES` nodes, before anything is built where that is plain.
    """
    if order is None:
        order, expected = order_and_cost(size, pieces)
        if expected > _MOST_EXPECTED:
            raise too_wide()
    rows = _Side(size, [(pieces[i].row_plus, pieces[i].row_minus) for i in order], 0)
    columns = _Side(size, [(pieces[i].column_plus, pieces[i].column_minus) for i in order], size + 1)
    if rows.untouched or columns.untouched:
        return Diagram((), (), (), (), 0 if size == 0 else _DEAD)
    with Progress("building the diagram", "parts decided", len(order)) as at:
        grown = _Growing(at)
        level, states = _grow_pairs(grown, rows, columns, order)
        if not states:
            return Diagram((), (), (), (), _DEAD)
        _grow_twins(grown, rows, states, order, level)
    return _pruned(grown, rows.parity * columns.parity)


def too_wide() -> LimitError:
    """The refusal to build a diagram on."""
    return LimitError(
        Fault(
            f"too much of the network is joined to each other: its diagram has more than {MOST_NODES} nodes, and "
            "neither polynomials nor sensitivities in symbols are to be had",
            "give the parts values and use H.numeric(), which needs no diagram; or leave out branches that "
            "matter little",
        )
    )


def _grow_pairs(
    grown: _Growing, rows: _Side, columns: _Side, order: Sequence[int]
) -> tuple[int, list[State]]:
    """The levels down to that from which on rows and columns are twins; gives it and the states of the rows there.

    A state is that of the rows with that of the columns behind it. With it goes the set of the rows and columns
    alive, as bits: a position is the number of bits below.
    """
    twins = _first_twin_level(rows, columns)
    first_column = 1 << columns.base
    states = [rows.start + columns.start]
    alive = [first_column * first_column - 1]
    leave, take, signs = grown.leave.append, grown.take.append, grown.sign.append
    for level, index in enumerate(order):
        if level >= twins and rows.frontier == columns.frontier and all(map(_is_twin(rows, columns), states)):
            return level, [state[: len(rows.frontier)] for state in states]
        grown.at(level)
        states = rows.admitted(level, states, 0)
        middle = len(rows.frontier)
        states = columns.admitted(level, states, middle)
        row_plus, row_minus, rows_leave = rows.decide(level, 0)
        column_plus, column_minus, columns_leave = columns.decide(level, middle)
        row, column = len(rows_leave), middle + len(columns_leave)
        all_stay = not (rows_leave or columns_leave)
        following: dict[State, int] = {}
        next_alive: list[int] = []
        number = grown.next
        for state, bits in zip(states, alive, strict=True):
            a, b, c, d = state[row_plus], state[row_minus], state[column_plus], state[column_minus]
            if a in rows_leave or b in rows_leave or c in columns_leave or d in columns_leave:
                leave(_DEAD)
            else:
                kept = state if all_stay else state[row:middle] + state[column:]
                reached = following.setdefault(kept, number)
                if reached == number:
                    number += 1
                    next_alive.append(bits)
                leave(reached)
            row_low, row_high = (a, b) if a < b else (b, a)
            column_low, column_high = (c, d) if c < d else (d, c)
            if (
                row_low == row_high
                or column_low == column_high
                or row_high in rows_leave
                or column_high in columns_leave
            ):
                take(_DEAD)
                signs(1)
                continue
            merged = state.replace(row_low, row_high).replace(column_low, column_high)
            kept = merged if all_stay else merged[row:middle] + merged[column:]
            row_bit, column_bit = 1 << ord(row_low), 1 << ord(column_low)
            reached = following.setdefault(kept, number)
            if reached == number:
                number += 1
                next_alive.append(bits ^ row_bit ^ column_bit)
            take(reached)
            below = bits & ((row_bit - 1) | (column_bit - first_column))
            odd = below.bit_count() + (row_low != a) + (column_low != c)
            signs(-1 if odd & 1 else 1)
        grown.piece += [index] * len(states)
        grown.next, states, alive = number, list(following), next_alive
        if number > MOST_NODES:
            raise too_wide()
        if not states:
            break
    return len(order), states


def _is_twin(rows: _Side, columns: _Side) -> Callable[[State], bool]:
    """Whether in a state the columns are merged as the rows are."""
    middle, shift = len(rows.frontier), columns.base - rows.base

    def is_twin(state: State) -> bool:
        return all(
            ord(column) - ord(row) == shift
            for row, column in zip(state[:middle], state[middle:], strict=True)
        )

    return is_twin


def _grow_twins(grown: _Growing, side: _Side, states: list[State], order: Sequence[int], level: int) -> None:
    """The rest of a diagram whose two graphs are the same from here on, as in a network of R, L, C past its sources.

    Rows and columns then merge alike, one partition is the whole state, and every sign is plus, being a square.
    """
    leave, take, number = grown.leave.append, grown.take.append, grown.next
    for here in range(level, len(order)):
        grown.at(here)
        states = side.admitted(here, states, 0)
        plus, minus, leaving = side.decide(here, 0)
        gone = len(leaving)
        following: dict[State, int] = {}
        for state in states:
            a, b = state[plus], state[minus]
            if a in leaving or b in leaving:
                leave(_DEAD)
            else:
                reached = following.setdefault(state[gone:], number)
                number += reached == number
                leave(reached)
            low, high = (a, b) if a < b else (b, a)
            if low == high or high in leaving:
                take(_DEAD)
            else:
                reached = following.setdefault(state.replace(low, high)[gone:], number)
                number += reached == number
                take(reached)
        grown.piece += [order[here]] * len(states)
        grown.sign += [1] * len(states)
        states = list(following)
        if number > MOST_NODES:
            raise too_wide()
    grown.next = number


def _first_twin_level(rows: _Side, columns: _Side) -> int:
    """The first level from which on both graphs have the same pieces, numbered alike."""
    level = len(rows.ends)
    while level and rows.ends[level - 1] == columns.ends[level - 1]:
        level -= 1
    return level


class _Growing:
    """The nodes made so far, in the order of their levels; ``next`` is the number of the next new state."""

    def __init__(self, at: Progress) -> None:
        self.at = at
        self.piece: list[int] = []
        self.leave: list[int] = []
        self.take: list[int] = []
        self.sign: list[int] = []
        self.next = 1


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
    """One of the two graphs while the diagram is built: which numbers are in the frontier, and how they merge.

    A state is a string: for every number in the frontier, in ascending order with gnd at the end, the
    representative of its class, each number being one character (from ``base`` on). So merging two classes is one
    ``str.replace``, those that leave stand in front, and equal states are found by hashing.
    """

    def __init__(self, size: int, ends: list[tuple[int | None, int | None]], base: int) -> None:
        last = [_DEAD] * size
        first = [_DEAD] * size
        for level, pair in enumerate(ends):
            for end in pair:
                if end is not None:
                    last[end] = level
                    if first[end] < 0:
                        first[end] = level
        self.untouched = _DEAD in last
        by_leaving = sorted(range(size), key=last.__getitem__)
        number = [0] * size
        for n, end in enumerate(by_leaving):
            number[end] = n
        self.parity = permutation_sign(by_leaving)
        self.base = base
        self.start = chr(base + size)
        self.ends = [
            (size if plus is None else number[plus], size if minus is None else number[minus])
            for plus, minus in ends
        ]
        self.frontier = [size]
        self._first = [*(first[end] for end in by_leaving), _DEAD]
        self._last = [*(last[end] for end in by_leaving), len(ends)]

    def admitted(self, level: int, states: list[State], start: int) -> list[State]:
        """The states, where this side begins at ``start``, with what the piece of this level brings in."""
        for end in set(self.ends[level]):
            if self._first[end] == level:
                place = bisect_left(self.frontier, end)
                self.frontier.insert(place, end)
                place, name = place + start, chr(self.base + end)
                states = [state[:place] + name + state[place:] for state in states]
        return states

    def decide(self, level: int, start: int) -> tuple[int, int, str]:
        """The places of the ends of the piece, and those of them that leave: in front of the states.

        One of these at an end is the representative of its class, which then has nowhere to go.
        """
        plus, minus = self.ends[level]
        places = start + bisect_left(self.frontier, plus), start + bisect_left(self.frontier, minus)
        leaving = [end for end in {plus, minus} if self._last[end] == level]
        del self.frontier[: len(leaving)]
        return *places, "".join([chr(self.base + end) for end in leaving])


def permutation_sign(permutation: Sequence[int]) -> int:
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
