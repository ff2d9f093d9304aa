"""Lowest terms, and what was cancelled on the way there.

Integers and monomials common to all terms go first, at no cost. Whether there is a further common factor is asked
once for N and D as they stand, modulo a prime (:func:`symnet.exact.common.shared_degrees`): the answer no is a proof
and nearly always the end of it, since what the wiring cancels has gone before
(:mod:`symnet.exact.structure`). Otherwise the factors of N and D are compared two by two, and each common divisor is
taken out.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from operator import sub
from typing import TYPE_CHECKING

from symnet.exact.common import Evaluator, common_factor, irreducible_factors, shared_degrees
from symnet.exact.products import Product

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

    from symnet.exact.expansion import Expansion

__all__ = ["LowestTerms", "factors_with_s", "reduce"]


@dataclass(frozen=True, eq=False)
class LowestTerms:
    """Numerator and denominator without common factor, and the cancelled factors that hold s."""

    ring: PolyRing
    top: Product
    bottom: Product
    hidden: tuple[PolyElement, ...]

    @classmethod
    def zero(cls, ring: PolyRing) -> LowestTerms:
        """0/1."""
        none = (0,) * ring.ngens
        return cls(ring, Product(0, none, ()), Product(1, none, ()), ())

    @property
    def terms(self) -> tuple[int, int]:
        """An upper bound of the number of terms of each when they are multiplied out."""
        return self.top.terms, self.bottom.terms

    @cached_property
    def numerator(self) -> PolyElement:
        """The numerator as a ring element; LimitError when it is too long to be multiplied out."""
        return self.top.to_element(self.ring)

    @cached_property
    def denominator(self) -> PolyElement:
        """The denominator as a ring element; LimitError when it is too long to be multiplied out."""
        return self.bottom.to_element(self.ring)


def reduce(numerator: Product, denominator: Product, ring: PolyRing, at: Evaluator) -> LowestTerms:
    """N/D in lowest terms over the integers, the sign such that D's lowest coefficient begins with plus.

    ``at(point)`` gives N and D modulo 2^31 - 1 for a point whose coordinates (s first) are int64 arrays; it
    may be faster than evaluating the polynomials. Raises LimitError when a common factor exists and is too long to
    be found.
    """
    if not numerator.number:
        return LowestTerms.zero(ring)
    hidden = [ring.gens[0]] * min(numerator.exponents[0], denominator.exponents[0])
    number = Fraction(numerator.number, denominator.number)
    shared = tuple(map(min, numerator.exponents, denominator.exponents))
    tops, bottoms = list(numerator.factors), list(denominator.factors)
    if shared_degrees(numerator, denominator, at):
        for common in _taken_out(tops, bottoms):
            hidden.extend(factors_with_s(common, ring))
    top, bottom = (
        Product(
            scale, tuple(map(sub, side.exponents, shared)), tuple(part for part in parts if len(part) > 1)
        )
        for side, scale, parts in (
            (numerator, number.numerator, tops),
            (denominator, number.denominator, bottoms),
        )
    )
    return LowestTerms(ring, top, bottom, tuple(hidden))


def _taken_out(tops: list[Expansion], bottoms: list[Expansion]) -> list[Expansion]:
    """The common factors of two lists of factors, which are divided by them in place."""
    found = []
    for i, top in enumerate(tops):
        for j, bottom in enumerate(bottoms):
            common = common_factor(top, bottom)
            if common is not None:
                found.append(common.factor)
                top, tops[i], bottoms[j] = common.numerator, common.numerator, common.denominator
    return found


def factors_with_s(common: Expansion, ring: PolyRing) -> list[PolyElement]:
    """The irreducible factors that hold s, each beginning with plus; what is too long for that is not factored."""
    if not common.degrees()[0]:
        return []
    return [factor.to_element(ring) for factor in irreducible_factors(common) if factor.degrees()[0]]
