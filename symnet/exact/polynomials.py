"""Polynomials in s and the part names: sparse terms while a network is read, ring elements when one looks at them.

A weight of a long network holds one or two of its hundreds of names. As an element of the whole ring each of its
monomials is a tuple with a place for every name, so that the weights alone would take time and room that grow with
the square of the length; as terms they hold what occurs. The ring (over the integers, lexicographic, s first) is
made when the first element of it is asked for.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Any, Final, TypeAlias

if TYPE_CHECKING:
    from sympy.polys.fields import FracField
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = [
    "ONE",
    "Generators",
    "Terms",
    "begins_negative",
    "by_powers_of_s",
    "highest_exponents",
    "make_ring",
    "modulo",
    "negated",
    "sparse_terms",
    "times_s",
]

#: Terms as (coefficient, ((generator, exponent), ...)): generators ascending, exponents that are not zero only.
Terms: TypeAlias = "tuple[tuple[int, tuple[tuple[int, int], ...]], ...]"

ONE: Final[Terms] = ((1, ()),)


@dataclass(frozen=True)
class Generators:
    """The names that the generators of a ring stand for, s first."""

    names: tuple[str, ...]

    def __len__(self) -> int:
        return len(self.names)

    @cached_property
    def ring(self) -> PolyRing:
        """The integer polynomial ring, lexicographic."""
        return make_ring(self.names[1:])

    @cached_property
    def field(self) -> FracField:
        """The fractions of its elements."""
        return self.ring.to_field()

    def element(self, terms: Terms) -> PolyElement:
        """Terms as an element of the ring.

        >>> Generators(("s", "R1", "C1")).element(((2, ((0, 1), (2, 1))), (1, ())))
        2*s*C1 + 1
        """
        found: dict[tuple[int, ...], Any] = {}
        for coefficient, powers in terms:
            monomial = [0] * len(self)
            for place, exponent in powers:
                monomial[place] = exponent
            found[tuple(monomial)] = self.ring.domain(coefficient)
        return self.ring.from_dict(found)


def times_s(terms: Terms) -> Terms:
    """The terms times s."""
    return tuple(
        (c, ((0, powers[0][1] + 1), *powers[1:]) if powers and not powers[0][0] else ((0, 1), *powers))
        for c, powers in terms
    )


def negated(terms: Terms) -> Terms:
    """The terms with the other sign."""
    return tuple((-c, powers) for c, powers in terms)


def make_ring(names: Iterable[str]) -> PolyRing:
    """The integer polynomial ring with s first, then these names, in lexicographic order."""
    from sympy import ZZ, Symbol
    from sympy.polys.orderings import lex
    from sympy.polys.rings import PolyRing

    return PolyRing([Symbol(name) for name in ("s", *names)], ZZ, lex)


def by_powers_of_s(polynomial: PolyElement) -> tuple[PolyElement, ...]:
    """The coefficients of s^0, s^1, ... as elements of the same ring; () for zero.

    >>> ring = make_ring(["R1", "C1"])
    >>> s, R1, C1 = ring.gens
    >>> by_powers_of_s(1 + 2*s*R1*C1)
    (1, 2*R1*C1)
    """
    if not polynomial:
        return ()
    ring = polynomial.ring
    degree = max(monomial[0] for monomial in polynomial)
    parts: list[dict[tuple[int, ...], Any]] = [{} for _ in range(degree + 1)]
    for monomial, coefficient in polynomial.items():
        parts[monomial[0]][(0, *monomial[1:])] = coefficient
    return tuple(ring.from_dict(part) for part in parts)


def begins_negative(polynomial: PolyElement) -> bool:
    """Whether the first term of the lowest power of s is negative."""
    lowest = min(monomial[0] for monomial in polynomial)
    first = max(monomial for monomial in polynomial if monomial[0] == lowest)
    return bool(polynomial[first] < 0)


def modulo(polynomial: PolyElement, point: Sequence[int], prime: int) -> int:
    """The value at a point, modulo a prime."""
    total = 0
    for monomial, coefficient in polynomial.items():
        term = int(coefficient) % prime
        for base, exponent in zip(point, monomial, strict=True):
            if exponent:
                term = term * (base if exponent == 1 else pow(base, exponent, prime)) % prime
        total += term
    return total % prime


def sparse_terms(polynomial: PolyElement) -> Terms:
    """The terms with only the generators that occur: in a long network a weight holds one or two of thousands."""
    return tuple((int(c), tuple(_powers(monomial))) for monomial, c in polynomial.items())


def _powers(monomial: tuple[int, ...]) -> list[tuple[int, int]]:
    rest, place, found = sum(monomial), -1, []
    while rest:
        try:
            place = monomial.index(1, place + 1)  # nearly every exponent is 1
        except ValueError:
            break
        found.append((place, 1))
        rest -= 1
    return found if not rest else [(k, e) for k, e in enumerate(monomial) if e]


def highest_exponents(count: int, take: Sequence[Terms], leave: Sequence[Terms]) -> list[int]:
    """A bound on the exponent of each generator in a product of one of take or leave for every piece."""
    highest = [0] * count
    for pair in zip(take, leave, strict=True):
        here: dict[int, int] = {}
        for terms in pair:
            for _, powers in terms:
                for k, exponent in powers:
                    here[k] = max(here.get(k, 0), exponent)
        for k, exponent in here.items():
            highest[k] += exponent
    return highest
