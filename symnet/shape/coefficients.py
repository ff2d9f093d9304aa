"""Two H side by side: every coefficient of both in one normalisation, and the exact difference of each.

To set two H beside each other both are divided so that the same coefficient is 1 in both: the constant term of D, or
of N, or the highest coefficient of one of them, whichever leaves the most coefficients unchanged (the first of these
if several do). So a load on a filter without gain shows in D alone, where its terms stand, and not in every
coefficient at once. The difference of two coefficients is exact: a quotient in the ring of the names of both.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Any, Final, Literal, TypeAlias

from symnet.errors import Fault, LimitError
from symnet.exact.doubles import double
from symnet.exact.polynomials import make_ring
from symnet.quantities import SECOND, Dimension
from symnet.shape.closed import Closed, Coefficient, Figure, quotient
from symnet.shape.plain import Pair, Plain, plain

if TYPE_CHECKING:
    from sympy.polys.rings import PolyRing

    from symnet.exact.transfer import Transfer

__all__ = ["CoefficientChange", "GainChange", "SideBySide"]

Side: TypeAlias = Literal["N", "D"]

#: H with more terms than this, N and D together, is compared in numbers only.
_MOST_TERMS: Final = 1_000


@dataclass(frozen=True, slots=True)
class CoefficientChange:
    """The coefficient of s^power in N or D, before and after, both in the common normalisation.

    ``before`` and ``after`` are exact in symbols and doubles where values allow; ``change`` is after - before in
    symbols, None where there are none. ``numbers`` are the exact numbers, or None. Without a term it is zero.
    """

    side: Side
    power: int
    before: Figure
    after: Figure
    change: Closed | None
    numbers: tuple[Fraction, Fraction] | None

    @property
    def unchanged(self) -> bool:
        """Whether it is the same in symbols and, where there are numbers, in numbers."""
        same_symbols = self.change is None or not self.change.num
        return same_symbols and (self.numbers is None or self.numbers[0] == self.numbers[1])

    @property
    def relative(self) -> float | None:
        """after/before - 1 in numbers; None without numbers or where it was zero."""
        if self.numbers is None or not self.numbers[0]:
            return None
        return double(self.numbers[1] / self.numbers[0] - 1)


@dataclass(frozen=True, slots=True)
class GainChange:
    """H at DC or at infinity, before and after, in the unit of H; None where it is infinite."""

    where: Literal["H(0)", "H(infinity)"]
    before: Figure | None
    after: Figure | None


@dataclass(frozen=True, slots=True)
class SideBySide:
    """Both H as coefficients, those in symbols in one ring, ready to be divided by one coefficient each."""

    first: Plain
    second: Plain
    symbols: tuple[Pair, Pair] | None
    numbers: tuple[Pair, Pair] | None
    notes: tuple[str, ...]

    @classmethod
    def of(cls, before: Transfer, after: Transfer) -> SideBySide:
        """Both H, in symbols as far as they are short enough; LimitError when one is long and has no numbers."""
        first, second = plain(before), plain(after)
        numbers: tuple[Pair, Pair] | None = None
        if first.numbers is not None and second.numbers is not None:
            numbers = first.numeric_pair, second.numeric_pair
        symbols: tuple[Pair, Pair] | None = None
        notes: list[str] = []
        pairs = [_as_elements(side, H) for side, H in ((first, before), (second, after))]
        if pairs[0] is not None and pairs[1] is not None:
            ring = make_ring(dict.fromkeys(str(x) for H in (before, after) for x in H.ring.symbols[1:]))
            symbols = _moved(pairs[0], ring), _moved(pairs[1], ring)
        if numbers is None and symbols is None:
            raise LimitError(
                Fault(
                    f"H has more than {_MOST_TERMS} terms, and no numbers",
                    "give values, or keep fewer names as symbols",
                )
            )
        if symbols is None:
            notes.append("H is long: its coefficients are compared in numbers only")
        elif numbers is not None and any(s.layout != n.layout for s, n in zip(symbols, numbers, strict=True)):
            numbers = None  # a factor cancels for these values: numbers and symbols do not stand side by side
            notes.append("for these values factors of H cancel: its coefficients are compared in symbols")
        return cls(first, second, symbols, numbers, tuple(notes))

    @property
    def pairs(self) -> tuple[Pair, Pair]:
        """The coefficients before and after: in symbols where there are some, else the numbers."""
        if self.symbols is not None:
            return self.symbols
        assert self.numbers is not None  # noqa: S101 - of() has seen to it
        return self.numbers

    def best(self) -> tuple[str, tuple[CoefficientChange, ...]]:
        """The normalisation that leaves the most coefficients unchanged, and the coefficients in it."""
        found = [(said, self._in(side, power)) for said, side, power in self._candidates()]
        if not found:
            return "", ()
        return min(found, key=lambda each: _changed(each[1]))

    def _candidates(self) -> Iterator[tuple[str, Side, int]]:
        """What may be made 1 in both: coefficients that neither lacks."""
        first, second = self.pairs
        ends: list[tuple[Side, list[int]]] = []
        for side in ("D", "N"):
            a, b = (_side(pair, side) for pair in (first, second))
            common = [k for k in range(min(len(a), len(b))) if a[k] and b[k]]
            if common:
                ends.append((side, common))
        for which in (0, -1):
            for side, common in ends:
                power = common[which]
                name = "constant term" if power == 0 else "coefficient of s" + f"^{power}" * (power > 1)
                yield f"the {name} of {side} is 1", side, power

    def _in(self, side: Side, power: int) -> tuple[CoefficientChange, ...]:
        of_h = self.first.dimension
        sides: tuple[Side, Side] = ("N", "D")
        rows = [
            self._row(each, k, side, power, SECOND ** (k - power) * of_h ** ((each == "N") - (side == "N")))
            for each in sides
            for k in range(max(len(_side(pair, each)) for pair in self.pairs))
        ]
        return tuple(row for row in rows if row is not None)

    def _row(self, side: Side, k: int, by: Side, power: int, unit: Dimension) -> CoefficientChange | None:
        closed: list[Closed | None] = [None, None]
        change: Closed | None = None
        exact: tuple[Fraction, Fraction] | None = None
        if self.symbols is not None:
            (a, p), (b, q) = (
                (_at(_side(pair, side), k, pair.den[-1]), _side(pair, by)[power]) for pair in self.symbols
            )
            if not a and not b:
                return None
            closed = [quotient(a, p), quotient(b, q)]
            u, v = closed
            assert u is not None  # noqa: S101 - just made
            assert v is not None  # noqa: S101
            change = quotient(v.num * u.den - u.num * v.den, u.den * v.den)
        if self.numbers is not None:
            one, two = (
                _at(_side(pair, side), k, pair.den[-1]) / _side(pair, by)[power] for pair in self.numbers
            )
            exact = one, two
            if self.symbols is None and not one and not two:
                return None
        figures = [
            Figure(c, None if exact is None else double(exact[which]), unit) for which, c in enumerate(closed)
        ]
        return CoefficientChange(side, k, figures[0], figures[1], change, exact)

    def gains(self) -> Iterator[GainChange]:
        """H(0) and H(infinity)."""
        wheres: tuple[Literal["H(0)", "H(infinity)"], ...] = ("H(0)", "H(infinity)")
        for where in wheres:
            before, after = (self._gain(which, where == "H(0)") for which in (0, 1))
            yield GainChange(where, before, after)

    def _gain(self, which: int, at_dc: bool) -> Figure | None:
        closed: Closed | None = None
        value: float | None = None
        for pairs in (self.symbols, self.numbers):
            if pairs is None:
                continue
            pair = pairs[which]
            k = 0 if at_dc else max(len(pair.num), len(pair.den)) - 1
            top, bottom = (_at(side, k, pair.den[-1]) for side in (pair.num, pair.den))
            if not bottom:
                return None
            if pairs is self.symbols:
                closed = quotient(top, bottom)
            else:
                value = double(top / bottom)
        return Figure(closed, value, self.first.dimension)


def _changed(rows: Sequence[CoefficientChange]) -> tuple[int, int]:
    """How many coefficients have changed; and in how many the numbers have."""
    in_numbers = sum(c.numbers is not None and c.numbers[0] != c.numbers[1] for c in rows)
    return sum(not c.unchanged for c in rows), in_numbers


def _side(pair: Pair, side: str) -> tuple[Coefficient, ...]:
    return pair.num if side == "N" else pair.den


def _at(coefficients: Sequence[Coefficient], k: int, like: Coefficient) -> Coefficient:
    return coefficients[k] if k < len(coefficients) else like - like


def _as_elements(h: Plain, transfer: Transfer) -> Pair | None:
    """The coefficients as ring elements; those of an H without names are numbers, made whole by one factor."""
    if h.symbols is not None:
        size = sum(len(c) for side in (h.symbols.num, h.symbols.den) for c in side)
        return h.symbols if size <= _MOST_TERMS else None
    if transfer.names:
        return None
    ring, pair = transfer.ring, h.numeric_pair
    whole = math.lcm(*(c.denominator for c in (*pair.num, *pair.den)))
    num, den = (tuple(ring(int(c * whole)) for c in side) for side in (pair.num, pair.den))
    return Pair(num, den)


def _moved(pair: Pair, ring: PolyRing) -> Pair:
    def into(side: tuple[Any, ...]) -> tuple[Any, ...]:
        return tuple(c.set_ring(ring) for c in side)

    return Pair(into(pair.num), into(pair.den))
