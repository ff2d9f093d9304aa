"""Exact arithmetic for the lines of a hand derivation: fractions of polynomials that need no gcd.

A line is tested for zero, and for that a fraction may keep factors in common; what costs time in a field of
rational functions is the gcd after every step. Numerators are polynomials with packed monomials
(:class:`~symnet.exact.readable.packed.Space`); denominators are kept as a number, a monomial and a list of factors, so that
terms over the same denominator are added without multiplying it in.

Square roots stand for generators of their own. The radicand is split into irreducible factors and primes, each of
which has one root r with r*r = factor; r^2 is replaced wherever it arises, and the products of different r are
linearly independent over the rational functions (the factors are independent modulo squares), so that a
polynomial is zero exactly when it is zero after the replacement. j is the root of -1. Roots are positive: sqrt(a*b)
is sqrt(a)*sqrt(b), as for positive a and b.

A value that would have more than :data:`MOST_TERMS` terms is refused with LimitError before it is multiplied out.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import reduce
from math import comb, gcd
from operator import or_
from typing import Final

from symnet.errors import Fault, LimitError
from symnet.exact.polynomials import Terms
from symnet.exact.readable.packed import Polynomial, Space

__all__ = ["MOST_TERMS", "Algebra", "Value"]

#: Terms that a numerator or a denominator may have when it is multiplied out.
MOST_TERMS: Final = 200_000
_MOST_DEGREE: Final = 2**13
_ROOTS: Final = 10  # different square roots in one working
_LARGEST_PRIME: Final = 100_000  # up to which whole numbers under a root are split
_ONE: Final[Polynomial] = {0: 1}


class Algebra:
    """The generators that values are made of, by name, and the square roots that have occurred so far."""

    def __init__(self, names: Iterable[str]) -> None:
        self.names = tuple(names)
        self._place = {name: k for k, name in enumerate(self.names)}
        self.space = Space((*self.names, *(f"root {k}" for k in range(_ROOTS))), _MOST_DEGREE)
        self._shift = [self.space.unit(k).bit_length() - 1 for k in range(len(self.space.names))]
        self._radicands: list[Polynomial] = []
        self._exponents: dict[int, Mapping[str, int]] = {}
        # Two exponents below the bound do not overflow their field when they are added; then this shows them.
        self._too_high = sum(self.space.unit(k) for k in range(len(self.names) + _ROOTS)) * _MOST_DEGREE

    # -- values ------------------------------------------------------------------------------------------------------

    def number(self, value: int | Fraction) -> Value:
        """A rational number."""
        value = Fraction(value)
        return Value(self, {0: value.numerator} if value else {}, value.denominator)

    def generator(self, name: str) -> Value:
        """One of the names."""
        return Value(self, {self.unit(name): 1})

    def unit(self, name: str) -> int:
        """The packed monomial of one of the names."""
        return self.space.unit(self._place[name])

    def polynomial(self, terms: Iterable[tuple[Sequence[int], int]]) -> Polynomial:
        """A polynomial from exponents, in the order of the first of the names, and coefficients."""
        pack = self.space.pack
        return {pack(exponents): int(coefficient) for exponents, coefficient in terms}

    def polynomial_of(self, terms: Terms) -> Polynomial:
        """A polynomial from terms in the first of the names, as :mod:`symnet.exact.polynomials` writes them."""
        unit = self.space.unit
        return {sum(e * unit(k) for k, e in powers): int(c) for c, powers in terms}

    # -- polynomials -------------------------------------------------------------------------------------------------

    def multiply(self, p: Polynomial, q: Polynomial) -> Polynomial:
        """The product, roots replaced; LimitError when it is too long."""
        if len(p) == 1 or len(q) == 1:
            if len(p) != 1:
                p, q = q, p
            ((m, c),) = p.items()
            if not m and c == 1:
                return q
            product = {m + k: c * d for k, d in q.items()} if c else {}
        else:
            if len(p) * len(q) > 4 * MOST_TERMS:
                refuse(len(p) * len(q))
            product = self.space.multiply(p, q)
            if len(product) > MOST_TERMS:
                refuse(len(product))
        if reduce(or_, product, 0) & self._too_high:
            raise LimitError(
                Fault(f"this line has a power of {_MOST_DEGREE} or more when it is multiplied out")
            )
        return self.reduced(product) if self._radicands else product

    def add(self, p: Polynomial, q: Polynomial, sign: int = 1) -> Polynomial:
        """The sum, or with sign -1 the difference."""
        out = dict(p)
        for m, c in q.items():
            total = out.get(m, 0) + sign * c
            if total:
                out[m] = total
            else:
                del out[m]
        return out

    def reduced(self, p: Polynomial) -> Polynomial:
        """The polynomial with every square of a root replaced by what it is the root of."""
        while True:
            squared = next((k for k in range(len(self._radicands)) if self._has_square(p, k)), None)
            if squared is None:
                return p
            shift = self.space.unit(len(self.names) + squared)
            kept: Polynomial = {}
            parts: dict[int, Polynomial] = {}
            for m, c in p.items():
                exponent = (m // shift) & (2 * _MOST_DEGREE - 1)
                if exponent < 2:
                    kept[m] = c
                else:
                    parts.setdefault(exponent // 2, {})[m - (exponent & ~1) * shift] = c
            for half, part in parts.items():
                factor = _ONE
                for _ in range(half):
                    factor = self.space.multiply(factor, self._radicands[squared])
                kept = self.add(kept, self.space.multiply(part, factor))
            p = kept

    def _has_square(self, p: Polynomial, k: int) -> bool:
        shift = self.space.unit(len(self.names) + k)
        return any((m // shift) & (2 * _MOST_DEGREE - 2) for m in p)

    def split(
        self, p: Polynomial, names: Iterable[str], *, roots: bool = False
    ) -> dict[tuple[int, ...], Polynomial]:
        """The coefficients of p as a polynomial in these names (and in the roots), by their exponents."""
        places = [self._place[name] for name in names]
        if roots:
            places += range(len(self.names), len(self.names) + len(self._radicands))
        shifts = [self._shift[place] for place in places]
        field = 2 * _MOST_DEGREE - 1
        wanted = sum(field << shift for shift in shifts)
        out: dict[tuple[int, ...], Polynomial] = {}
        known: dict[int, tuple[int, ...]] = {}
        for m, c in p.items():
            inside = m & wanted
            exponents = known.get(inside)
            if exponents is None:
                exponents = known[inside] = tuple((inside >> shift) & field for shift in shifts)
            out.setdefault(exponents, {})[m - inside] = c
        return out

    def modulo(self, p: Polynomial, point: Mapping[str, int], prime: int) -> int:
        """The value of a polynomial without roots where the names have these values, modulo a prime."""
        total = 0
        for m, c in p.items():
            term = c
            for name, exponent in self.exponents(m).items():
                term = term * pow(point[name], exponent, prime) % prime
            total += term
        return total % prime

    def exponents(self, monomial: int) -> Mapping[str, int]:
        """The names in a monomial with their exponents; roots are called ``root k``."""
        known = self._exponents.get(monomial)
        if known is None:
            known = self._exponents[monomial] = self.space.exponents(monomial)
        return known

    # -- roots -------------------------------------------------------------------------------------------------------

    def imaginary(self) -> Value:
        """j, the root of -1."""
        return Value(self, {self._root({0: -1}): 1})

    def root_of(self, p: Polynomial) -> tuple[Polynomial, Polynomial]:
        """Polynomials u and v with sqrt(p) = u*v, where v is a product of roots and u has none."""
        if self.has_roots(p):
            raise LimitError(
                Fault("a root of a root is not decided", "give the inner root a name, or square the line")
            )
        coefficient, monomial, factors = self._factors(p)
        outside: Polynomial = {0: 1}
        inside: Polynomial = {0: 1}
        if coefficient < 0:
            inside = self.multiply(inside, {self._root({0: -1}): 1})
        for base, exponent in _primes(abs(coefficient)):
            outside = {m: c * base ** (exponent // 2) for m, c in outside.items()}
            if exponent % 2:
                inside = self.multiply(inside, {self._root({0: base}): 1})
        units = [(self.space.unit(k), e) for k, e in enumerate(self.space.unpack(monomial)) if e]
        for block, exponent in [({unit: 1}, e) for unit, e in units] + factors:
            for _ in range(exponent // 2):
                outside = self.multiply(outside, block)
            if exponent % 2:
                inside = self.multiply(inside, {self._root(block): 1})
        return outside, inside

    def _factors(self, p: Polynomial) -> tuple[int, int, list[tuple[Polynomial, int]]]:
        """Number, monomial and irreducible factors; a general factorisation, since independence hangs on it."""
        number, monomial, rest = self.space.content(p)
        if len(rest) == 1:
            return number * rest[0], monomial, []
        from sympy import ZZ, symbols
        from sympy.polys.rings import PolyRing

        used = self.space.used(rest)
        if len(rest) > 200:
            raise LimitError(
                Fault(
                    f"a root of a sum of {len(rest)} terms is not decided",
                    "square the line, or give some parts values",
                )
            )
        ring = PolyRing(symbols(f"x:{len(used)}"), ZZ)
        unpacked = {m: self.space.unpack(m) for m in rest}
        element = ring.from_dict({tuple(e[k] for k in used): ZZ(rest[m]) for m, e in unpacked.items()})
        content, found = element.factor_list()
        units = [self.space.unit(k) for k in used]
        blocks = []
        for block, exponent in found:
            terms = {sum(e * u for e, u in zip(m, units, strict=True)): int(c) for m, c in block.items()}
            # Positive for positive names where that can be seen, so that its root is real.
            if sum(terms.values()) < 0 or (sum(terms.values()) == 0 and terms[max(terms)] < 0):
                terms = {m: -c for m, c in terms.items()}
                number = number * (-1) ** int(exponent)
            blocks.append((terms, int(exponent)))
        return number * int(content), monomial, blocks

    def has_roots(self, p: Polynomial) -> bool:
        """Whether a root occurs in it."""
        if not self._radicands:
            return False
        units = [self.space.unit(len(self.names) + k) for k in range(len(self._radicands))]
        return any(m // unit & 1 for m in p for unit in units)

    def _root(self, radicand: Polynomial) -> int:
        if radicand not in self._radicands:
            if len(self._radicands) == _ROOTS:
                raise LimitError(Fault(f"more than {_ROOTS} different roots in one working"))
            self._radicands.append(radicand)
        return self.space.unit(len(self.names) + self._radicands.index(radicand))

    @property
    def roots(self) -> tuple[tuple[int, Polynomial], ...]:
        """The monomial of each root so far, and what it is the root of."""
        return tuple((self.space.unit(len(self.names) + k), p) for k, p in enumerate(self._radicands))

    @property
    def radicands(self) -> tuple[Polynomial, ...]:
        """What the roots so far are roots of."""
        return tuple(self._radicands)


@dataclass(frozen=True, slots=True, eq=False)
class Value:
    """``numerator / (number * monomial * factors)``, with whatever they have in common left in."""

    algebra: Algebra
    numerator: Polynomial
    number: int = 1
    monomial: int = 0
    factors: tuple[tuple[Polynomial, int], ...] = ()

    @property
    def denominator(self) -> Polynomial:
        """The denominator multiplied out."""
        out: Polynomial = {self.monomial: self.number}
        for factor, exponent in self.factors:
            for _ in range(exponent):
                out = self.algebra.multiply(out, factor)
        return out

    def __add__(self, other: Value) -> Value:
        return self._plus(other, 1)

    def __sub__(self, other: Value) -> Value:
        return self._plus(other, -1)

    def _plus(self, other: Value, sign: int) -> Value:
        algebra = self.algebra
        if not other.numerator:
            return self
        if self.number == other.number and self.monomial == other.monomial and self.factors == other.factors:
            top = algebra.add(self.numerator, other.numerator, sign)
            return Value(algebra, top, self.number, self.monomial, self.factors)
        number = self.number * other.number // gcd(self.number, other.number)
        space = algebra.space
        monomial = self.monomial + other.monomial - space.lower(self.monomial, other.monomial)
        factors = list(self.factors)
        for factor, exponent in other.factors:
            place = next((k for k, (known, _) in enumerate(factors) if known == factor), None)
            if place is None:
                factors.append((factor, exponent))
            else:
                factors[place] = factor, max(exponent, factors[place][1])
        mine, theirs = (side.over(number, monomial, factors) for side in (self, other))
        return Value(algebra, algebra.add(mine, theirs, sign), number, monomial, tuple(factors))

    def over(self, number: int, monomial: int, factors: Sequence[tuple[Polynomial, int]]) -> Polynomial:
        """The numerator over a common denominator."""
        top = self.algebra.multiply(self.numerator, {monomial - self.monomial: number // self.number})
        for factor, exponent in factors:
            own = next((e for known, e in self.factors if known == factor), 0)
            for _ in range(exponent - own):
                top = self.algebra.multiply(top, factor)
        return top

    def __neg__(self) -> Value:
        top = {m: -c for m, c in self.numerator.items()}
        return Value(self.algebra, top, self.number, self.monomial, self.factors)

    def __mul__(self, other: Value) -> Value:
        algebra = self.algebra
        tops = [self.numerator, other.numerator]
        factors: list[tuple[Polynomial, int]] = []
        for above, below in ((0, other), (1, self)):  # a denominator that the other has as numerator cancels
            for factor, exponent in below.factors:
                if tops[above] == factor:
                    tops[above] = _ONE
                    exponent -= 1
                place = next((k for k, (known, _) in enumerate(factors) if known == factor), None)
                if place is not None:
                    factors[place] = factor, exponent + factors[place][1]
                elif exponent:
                    factors.append((factor, exponent))
        return Value(
            algebra,
            algebra.multiply(*tops),
            self.number * other.number,
            self.monomial + other.monomial,
            tuple(factors),
        ).lowered()

    def lowered(self) -> Value:
        """Numbers and names that stand in every term and below the fraction bar are cancelled."""
        if not self.numerator or (self.number == 1 and not self.monomial):
            return self
        common = self.monomial and self.algebra.space.lower(
            self.algebra.space.common(self.numerator), self.monomial
        )
        number = self.number if self.number == 1 else gcd(self.number, *self.numerator.values())
        if not common and number == 1:
            return self
        top = {m - common: c // number for m, c in self.numerator.items()}
        return Value(self.algebra, top, self.number // number, self.monomial - common, self.factors)

    def inverse(self) -> Value:
        """1 over the value; ZeroDivisionError for zero."""
        if not self.numerator:
            raise ZeroDivisionError
        algebra = self.algebra
        number, monomial, rest = algebra.space.content(self.numerator)
        roots = [unit for unit, _ in algebra.roots if monomial // unit & 1]
        if roots:  # 1/r is r/(r*r), so that no root stands below the fraction bar by itself
            rooted, product = self, algebra.number(1)
            for unit in roots:
                rooted = rooted * Value(algebra, {unit: 1})
                product = product * Value(algebra, {unit: 1})
            return rooted.inverse() * product
        top: Polynomial = {self.monomial: self.number if number > 0 else -self.number}
        for factor, exponent in self.factors:
            for _ in range(exponent):
                top = algebra.multiply(top, factor)
        factors = () if len(rest) == 1 else ((rest, 1),)
        below = abs(number) * (rest[0] if len(rest) == 1 else 1)
        return Value(algebra, top, below, monomial, factors).lowered()

    def __truediv__(self, other: Value) -> Value:
        return self * other.inverse()

    def __pow__(self, exponent: int) -> Value:
        if exponent < 0:
            return self.inverse() ** -exponent
        if len(self.numerator) > 1:
            terms = comb(len(self.numerator) + exponent - 1, exponent)
            if terms > 4 * MOST_TERMS:
                refuse(terms)
        out = self.algebra.number(1)
        for _ in range(exponent):
            out = out * self
        return out

    def root(self) -> Value:
        """The positive square root: sqrt(n/d) = sqrt(n*d)/d."""
        if not self.numerator:
            return self
        below = self.denominator
        outside, inside = self.algebra.root_of(self.algebra.multiply(self.numerator, below))
        return Value(self.algebra, self.algebra.multiply(outside, inside)) / Value(self.algebra, below)


def refuse(terms: int) -> None:
    """Say that a line is too long to be multiplied out."""
    raise LimitError(
        Fault(
            f"this line has up to {terms} terms when it is multiplied out; the limit is {MOST_TERMS}",
            "split it into smaller steps, or give some of the parts values",
        )
    )


def _primes(number: int) -> list[tuple[int, int]]:
    """Prime factors with exponents; LimitError where a square could hide in what trial division leaves."""
    found: list[tuple[int, int]] = []
    base = 2
    while base * base <= number and base <= _LARGEST_PRIME:
        exponent = 0
        while number % base == 0:
            number //= base
            exponent += 1
        if exponent:
            found.append((base, exponent))
        base += 1 if base == 2 else 2
    if number > 1:
        from sympy import factorint

        if number < _LARGEST_PRIME**2:
            found.append((number, 1))
        elif number.bit_length() > 200:
            raise LimitError(
                Fault("a root of a number of so many digits is not decided", "give it fewer digits")
            )
        else:
            found += [(int(p), int(e)) for p, e in factorint(number).items()]
    return found
