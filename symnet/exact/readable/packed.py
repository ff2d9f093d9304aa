"""Polynomials with packed monomials, and their factors: the arithmetic of the search for readable forms.

All exponents of a monomial stand in one integer, one field per name with a guard bit on top, so that "divides",
"times", "divided by" and "common part" are a few operations on integers. The first name has the highest field:
comparing integers compares monomials lexicographically, in the order of the ring.

Factors: if every name occurs to the first power at most (each part of a network enters once), x and y stand in
different factors exactly when p11*p00 = p10*p01, where p = x*y*p11 + x*p10 + y*p01 + p00 (Shpilka and Volkovich,
"On the relation between polynomial identity testing and finding variable disjoint factors", 2010; from memory).
That costs a few small products and no general factorisation. Tied names bring powers; then sympy factors, below
``_LARGEST_FACTORED``, which keeps it to some milliseconds.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from functools import reduce
from math import gcd
from operator import or_
from typing import Final, TypeAlias

__all__ = ["LONGEST_GROUPED", "Factors", "Polynomial", "Space"]

#: Sums of more terms than this are neither factored nor grouped.
LONGEST_GROUPED: Final = 60
# General factorisation only below these bounds: terms, names, degree in one name.
_LARGEST_FACTORED: Final = (24, 4, 8)

#: monomial (packed) -> coefficient; never zero
Polynomial: TypeAlias = dict[int, int]
#: irreducible polynomials with their exponents
Factors: TypeAlias = list[tuple[Polynomial, int]]


@dataclass
class Space:
    """Names, the packing of their monomials, and the factors found so far (one space per formula).

    ``names`` in the order of the ring; ``inverse`` are names that also occur under the fraction bar: each gets a
    second field for 1/name, and the two are not related by the search. ``largest`` is the highest exponent.
    """

    names: Sequence[str]
    largest: int = 1
    inverse: Sequence[str] = ()
    _factored: dict[frozenset[tuple[int, int]], tuple[int, int, Factors]] = field(
        default_factory=dict, repr=False
    )

    def __post_init__(self) -> None:
        count = len(self.names) + len(self.inverse)
        # Products of two monomials are formed, so that exponents double at most; one more bit is the guard.
        self._bits = (2 * max(1, self.largest)).bit_length() + 1
        self._shift = [self._bits * (count - 1 - k) for k in range(count)]
        self._guard = sum(1 << (shift + self._bits - 1) for shift in self._shift)
        self._mask = (1 << (self._bits - 1)) - 1
        self._ones = sum(1 << shift for shift in self._shift)

    def pack(self, exponents: Iterable[int]) -> int:
        """A monomial from its exponents: those of the names, then those of the inverse names."""
        return sum(e << shift for e, shift in zip(exponents, self._shift, strict=False) if e)

    def unpack(self, monomial: int) -> tuple[int, ...]:
        """The exponents of a monomial."""
        return tuple((monomial >> shift) & self._mask for shift in self._shift)

    def unit(self, k: int) -> int:
        """The monomial of the k-th name alone."""
        return 1 << self._shift[k]

    def divides(self, a: int, b: int) -> bool:
        """Whether monomial a divides monomial b."""
        guard = self._guard
        return ((b | guard) - a) & guard == guard

    def common(self, monomials: Iterable[int]) -> int:
        """The greatest common monomial."""
        return reduce(self.lower, monomials)

    def lower(self, a: int, b: int) -> int:
        """The common monomial of two."""
        if not (a | b) & ~self._ones:
            return a & b
        # Where the guard bit survives the subtraction, a has at least the exponent of b.
        at_least = ((a | self._guard) - b) & self._guard
        where = at_least - (at_least >> (self._bits - 1))
        return (b & where) | (a & ~where & ~self._guard)

    def _union(self, p: Polynomial) -> int:
        return reduce(or_, p, 0)

    def is_multilinear(self, p: Polynomial) -> bool:
        """Whether every name occurs to the first power at most."""
        return not self._union(p) & ~self._ones

    def used(self, p: Polynomial) -> list[int]:
        """The numbers of the names that occur."""
        union = self._union(p)
        return [k for k, shift in enumerate(self._shift) if (union >> shift) & self._mask]

    def exponents(self, monomial: int) -> dict[str, int]:
        """The exponent of each name, inverse names counted below zero."""
        found = {name: e for name, e in zip(self.names, self.unpack(monomial), strict=False) if e}
        for name, e in zip(self.inverse, self.unpack(monomial)[len(self.names) :], strict=True):
            if e:
                found[name] = found.get(name, 0) - e
        return found

    def content(self, p: Polynomial) -> tuple[int, int, Polynomial]:
        """Coefficient, monomial and rest, whose product is p; the coefficient is negative only if all of p's are."""
        number_ = gcd(*p.values())
        if all(c < 0 for c in p.values()):
            number_ = -number_
        monomial = self.common(p)
        if number_ == 1 and not monomial:
            return 1, 0, p
        return number_, monomial, {m - monomial: c // number_ for m, c in p.items()}

    def multiply(self, p: Polynomial, q: Polynomial) -> Polynomial:
        """The product."""
        out: Polynomial = {}
        for m, c in p.items():
            for k, d in q.items():
                out[m + k] = out.get(m + k, 0) + c * d
        return {m: c for m, c in out.items() if c}

    def divide(self, p: Polynomial, d: Polynomial) -> tuple[Polynomial, Polynomial]:
        """The q and r with p = d*q + r, where d*q makes each of its terms once and r has only terms of p."""
        first = max(d)
        c0 = d[first]
        others = [(m, c) for m, c in d.items() if m != first]
        q: Polynomial = {}
        taken: set[int] = set()
        guard = self._guard
        for m, c in p.items():
            if ((m | guard) - first) & guard != guard or c % c0:
                continue
            k, f = m - first, c // c0
            made = [m, *(k + mo for mo, _ in others)]
            if all(p.get(k + mo) == f * co for mo, co in others) and taken.isdisjoint(made):
                q[k] = f
                taken.update(made)
        return q, {m: c for m, c in p.items() if m not in taken}

    def factors(self, p: Polynomial) -> tuple[int, int, Factors]:
        """Coefficient, monomial and irreducible sums with positive leading terms, whose product is p.

        Sums of more than LONGEST_GROUPED terms are kept whole, and so are those too large for the general
        factorisation (tied names).
        """
        key = frozenset(p.items())
        known = self._factored.get(key)
        if known is None:
            known = self._factored[key] = self._factors(p)
        return known

    def _factors(self, p: Polynomial) -> tuple[int, int, Factors]:
        coefficient, monomial, rest = self.content(p)
        found: Factors = []
        if len(rest) > LONGEST_GROUPED:
            found.append((rest, 1))
        elif len(rest) > 1:
            for block, exponent in self._split(rest):
                if block[max(block)] < 0:
                    block = {m: -c for m, c in block.items()}
                    coefficient = -coefficient if exponent % 2 else coefficient
                # the sign may have stood with one of several equal factors: count them together
                same = next((k for k, (other, _) in enumerate(found) if other == block), None)
                if same is None:
                    found.append((block, exponent))
                else:
                    found[same] = block, found[same][1] + exponent
        return coefficient, monomial, found

    def _split(self, p: Polynomial) -> Factors:
        total = len(p)
        used = self.used(p)
        if not self.is_multilinear(p):
            return self._split_in_general(p, used)
        if _is_prime(total):
            # f*g without a name in common has as many terms as f times as many as g.
            return [(p, 1)]
        x = self.unit(used[0])
        block = [used[0]]
        rest: list[int] = []
        for k in used[1:]:
            (rest if self._apart(p, x, self.unit(k)) else block).append(k)
        if not rest:
            return [(p, 1)]
        here = sum(self._mask << self._shift[k] for k in block)
        # p = f*g with no name in common: f is read off beside one monomial of g, and g beside one of f.
        m0 = max(p)
        _, _, f = self.content({m & here: c for m, c in p.items() if m & ~here == m0 & ~here})
        c0 = f[m0 & here]
        g = {m & ~here: c // c0 for m, c in p.items() if m & here == m0 & here}
        return [(f, 1), *self._split(g)] if len(g) > 1 else [(p, 1)]

    def _apart(self, p: Polynomial, x: int, y: int) -> bool:
        parts: dict[tuple[bool, bool], Polynomial] = {
            (i, j): {} for i in (False, True) for j in (False, True)
        }
        for m, c in p.items():
            has_x, has_y = bool(m & x), bool(m & y)
            parts[has_x, has_y][m - (x if has_x else 0) - (y if has_y else 0)] = c
        p11, p00, p10, p01 = parts[True, True], parts[False, False], parts[True, False], parts[False, True]
        return self.multiply(p11, p00) == self.multiply(p10, p01)

    def _split_in_general(self, p: Polynomial, used: list[int]) -> Factors:
        terms, names, degree = _LARGEST_FACTORED
        exponents = {m: self.unpack(m) for m in p}
        if len(p) > terms or len(used) > names or max(map(max, exponents.values())) > degree:
            return [(p, 1)]
        from sympy import ZZ, symbols
        from sympy.polys.rings import PolyRing

        ring = PolyRing(symbols(f"x:{len(used)}"), ZZ)
        element = ring.from_dict({tuple(e[k] for k in used): ZZ(p[m]) for m, e in exponents.items()})
        shifts = [self._shift[k] for k in used]
        _, found = element.factor_list()
        blocks = [
            (
                {sum(e << t for e, t in zip(m, shifts, strict=True)): int(c) for m, c in block.items()},
                int(exponent),
            )
            for block, exponent in found
        ]
        # The sign of the whole stays with the first factor.
        whole = reduce(self.multiply, (block for block, exponent in blocks for _ in range(exponent)))
        if whole != p:
            block, exponent = blocks[0]
            negative = {m: -c for m, c in block.items()}
            blocks[:1] = [(negative, 1)] + ([(block, exponent - 1)] if exponent > 1 else [])
        return blocks


def _is_prime(n: int) -> bool:
    return n > 1 and all(n % k for k in range(2, int(n**0.5) + 1))
