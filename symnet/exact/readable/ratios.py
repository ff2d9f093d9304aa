"""Ratios of polynomials in part names, in the form with the fewest symbols.

A ratio is factored and cancelled, and tried as it stands; with a product under the bar divided into the sum above
it (R2 + R3 + R2*R3/R1); with g*h/(u*g + v*h) written (g/v)||(h/u) for resistances and inductances; with n = q*f + r
written q + r/f (R3 + R1||R2). Each is an identity; the shortest is kept. Capacitances are never put in ``||``:
C1*C2/(C1 + C2) is two capacitors in series, and C1||C2 would be read as the opposite.

Work is bounded: at most ``_DEEPEST`` rewritings after each other, and none for more than ``_LARGEST_RATIO`` terms.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Final

from symnet.exact.readable.grading import factors_in_s
from symnet.exact.readable.grouping import Grouping, Place, kind_of
from symnet.exact.readable.packed import Factors, Polynomial
from symnet.typeset.length import length
from symnet.typeset.tree import ZERO, Parallel, Sum, Tree, minus, plus

__all__ = ["Factored", "Ratios", "cancelled"]

_LARGEST_FACTORED: Final = 120
_LARGEST_RATIO: Final = 40
_DEEPEST: Final = 3
# Kinds (see kind_of_name) for which || is written: impedances and resistances, inductances.
_PARALLEL_KINDS: Final = (2, 3)


@dataclass(frozen=True, slots=True)
class Factored:
    """coefficient * names to their powers * sums / sums; the sums are irreducible, none stands on both sides."""

    coefficient: Fraction
    exponents: Mapping[str, int]
    above: Factors
    below: Factors


@dataclass(frozen=True, slots=True)
class _Piece:
    """A factor above the bar: names and sums to the first power, and their product."""

    polynomial: Polynomial
    exponents: dict[str, int]
    sums: Factors = field(default_factory=list)


@dataclass
class Ratios:
    """Finds the forms of ratios of polynomials of one ring, packed in one space."""

    space: Grouping

    def factors(self, p: Polynomial) -> tuple[int, int, Factors]:
        """Coefficient, monomial and irreducible sums, whose product is p; long sums are kept whole."""
        if len(p) > _LARGEST_FACTORED:
            coefficient, monomial, rest = self.space.content(p)
            return coefficient, monomial, [(rest, 1)] if len(rest) > 1 else []
        return factors_in_s(self.space, p)

    def quotient(self, numerator: Polynomial, denominator: Polynomial) -> Factored:
        """The ratio with all factors found and the common ones cancelled."""
        if not numerator:
            return Factored(Fraction(0), {}, [], [])
        c1, m1, above = self.factors(numerator)
        c2, m2, below = self.factors(denominator)
        exponents = self.space.exponents(m1)
        for name, e in self.space.exponents(m2).items():
            exponents[name] = exponents.get(name, 0) - e
        above, below = cancelled(above, below), cancelled(below, above)
        return Factored(Fraction(c1, c2), {name: e for name, e in exponents.items() if e}, above, below)

    def ratio(self, r: Factored) -> Tree:
        """The shortest form of a ratio."""
        if not r.coefficient:
            return ZERO
        size = sum(len(p) * e for p, e in (*r.above, *r.below))
        depth = _DEEPEST if size <= _LARGEST_RATIO else 0
        return self._shortest(r, (), depth)

    def _shortest(self, r: Factored, extra: tuple[tuple[Tree, Place], ...], depth: int) -> Tree:
        best = self._straight(r, extra)
        cost = length(best)
        for tree in self._variants(r, extra, depth):
            if (found := length(tree)) < cost:
                best, cost = tree, found
        return best

    def _straight(self, r: Factored, extra: tuple[tuple[Tree, Place], ...]) -> Tree:
        space = self.space
        coefficient = r.coefficient
        sides: list[list[Polynomial]] = [
            [p for p, e in side for _ in range(e)] for side in (r.above, r.below)
        ]
        # Signs: brackets with more minus than plus are turned round, one with as many if a sign is left over.
        for enough in (2, 1):
            for side in sides:
                for k, p in enumerate(side):
                    negatives = 2 * sum(c < 0 for c in p.values())
                    if negatives > len(p) if enough == 2 else coefficient < 0 and negatives == len(p):
                        side[k] = {m: -c for m, c in p.items()}
                        coefficient = -coefficient
        above, below = ([(space.tree(p), space.place(max(p))) for p in side] for side in sides)
        body = space.product(abs(coefficient), r.exponents, (*above, *extra), below)
        return minus(body) if coefficient < 0 else body

    def _variants(self, r: Factored, extra: tuple[tuple[Tree, Place], ...], depth: int) -> Iterator[Tree]:
        if not depth:
            return
        for n, e in r.above:
            rest = _without(r.above, n)
            if (spread := self._spread(n, r.exponents)) is not None:
                tree, place, exponents = spread
                left = Factored(r.coefficient, exponents, rest, r.below)
                yield self._shortest(left, (*extra, (tree, place)), depth - 1)
            for f, _ in r.below:
                q, remainder = self.space.divide(n, f)
                if q and remainder and e == 1:
                    part = self._shortest(self.quotient(remainder, f), (), depth - 1)
                    tree = plus(self.space.tree(q), part)
                    left = Factored(r.coefficient, r.exponents, rest, _without(r.below, f))
                    yield self._shortest(left, (*extra, (tree, self.space.place(max(q)))), depth - 1)
        for f, _ in r.below:
            for tree, place, exponents, above in self._parallels(f, r, depth):
                left = Factored(r.coefficient, exponents, above, _without(r.below, f))
                yield self._shortest(left, (*extra, (tree, place)), depth - 1)

    def _spread(
        self, n: Polynomial, exponents: Mapping[str, int]
    ) -> tuple[Tree, Place, dict[str, int]] | None:
        """A sum divided term by term by the names under the bar that occur in it, and what is left outside."""
        space = self.space
        inside = {space.names[k] for k in space.used(n)}
        divisor = {name: -e for name, e in exponents.items() if e < 0 and name in inside}
        if not divisor:
            return None
        inverse = list(divisor)
        wider = Grouping(space.names, space.largest + max(divisor.values()), inverse)
        terms: Polynomial = {}
        for m, c in n.items():
            powers = dict(zip(space.names, space.unpack(m), strict=True))
            over_bar = {name: powers[name] - divisor[name] for name in inverse}
            powers |= {name: max(0, e) for name, e in over_bar.items()}
            terms[wider.pack((*powers.values(), *(max(0, -over_bar[name]) for name in inverse)))] = c
        tree = wider.tree(terms)
        if not isinstance(tree, Sum):
            return None
        return (
            tree,
            space.place(max(n), divisor),
            {name: e for name, e in exponents.items() if name not in divisor},
        )

    def _parallels(
        self, f: Polynomial, r: Factored, depth: int
    ) -> Iterator[tuple[Tree, Place, dict[str, int], Factors]]:
        """Ways to read something above the bar, over f, as elements in parallel.

        With f = u*g + w and w = v*h, g and h above the bar: g*h/f = (g/v)||(h/u). For h, each single name or sum is
        tried, and all of w that stands above the bar.
        """
        space = self.space
        pieces = [
            *(
                _Piece({space.unit(space.names.index(name)): 1}, {name: 1})
                for name, e in r.exponents.items()
                if e > 0
            ),
            *(_Piece(p, {}, [(p, 1)]) for p, _ in r.above),
        ]
        for g in pieces:
            u, w = space.divide(f, g.polynomial)
            if not u or not w:
                continue
            others = [piece for piece in pieces if piece is not g]
            for h in (*others, self._above_in(w, others)):
                v, left = space.divide(w, h.polynomial)
                if left or not v:
                    continue
                first, second = self.quotient(g.polynomial, v), self.quotient(h.polynomial, u)
                kind = self._kind(first)
                if kind is None or kind not in _PARALLEL_KINDS or kind != self._kind(second):
                    continue
                branches = [self._shortest(branch, (), depth - 1) for branch in (first, second)]
                exponents, above = dict(r.exponents), r.above
                for taken in (g, h):
                    for name, e in taken.exponents.items():
                        exponents[name] -= e
                    for p, _ in taken.sums:
                        above = _without(above, p)
                place = (kind, 1, -max(g.polynomial))
                yield _parallel(branches), place, {name: e for name, e in exponents.items() if e}, above

    def _above_in(self, w: Polynomial, pieces: Sequence[_Piece]) -> _Piece:
        """The product of those pieces that divide w."""
        _, monomial, sums = self.space.factors(w)
        inside = self.space.exponents(monomial)
        product: Polynomial = {0: 1}
        exponents: dict[str, int] = {}
        found: Factors = []
        for piece in pieces:
            if piece.exponents.keys() <= inside.keys() and all((p, 1) in sums for p, _ in piece.sums):
                product = self.space.multiply(product, piece.polynomial)
                exponents |= piece.exponents
                found += piece.sums
        return _Piece(product, exponents, found)

    def _kind(self, r: Factored) -> int | None:
        total = dict(r.exponents)
        for side, sign in ((r.above, 1), (r.below, -1)):
            for p, e in side:
                for name, k in self.space.exponents(max(p)).items():
                    total[name] = total.get(name, 0) + sign * e * k
        return kind_of(total)


def _parallel(branches: Sequence[Tree]) -> Parallel:
    joined: list[Tree] = []
    for branch in branches:
        joined.extend(branch.branches if isinstance(branch, Parallel) else (branch,))
    return Parallel(tuple(joined))


def cancelled(these: Factors, others: Factors) -> Factors:
    """These factors without what the others have too."""
    if not others:
        return these
    left: Factors = []
    for p, e in these:
        remaining = e - sum(other for q, other in others if q == p)
        if remaining > 0:
            left.append((p, remaining))
    return left


def _without(factors: Factors, p: Polynomial) -> Factors:
    """The factors with one p less."""
    return [(q, e - (q == p)) for q, e in factors if e > (q == p)]
