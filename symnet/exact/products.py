"""A polynomial as a product of factors, each written out: what a determinant that falls apart is kept as.

The blocks of a determinant (:mod:`symnet.exact.structure`) multiply: a cascade of twelve buffered sections of five
terms each has 60 terms as a product and 244 million written out. Integers and monomials stand apart, so that the
factors of numerator and denominator can be compared one by one.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cached_property
from math import prod
from operator import add
from typing import TYPE_CHECKING

import numpy as np

from symnet.exact.determinant import MOST_TERMS, Determinant, too_long
from symnet.exact.expansion import Expansion, Fields, Primitive, merged

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["Product"]


@dataclass(frozen=True, eq=False)
class Product:
    """``number * monomial * factors``, the factors without integer or monomial factor, beginning with plus.

    ``exponents`` are those of the monomial, one for every generator; ``number`` is 0 for the zero polynomial.
    """

    number: int
    exponents: tuple[int, ...]
    factors: tuple[Expansion, ...]

    @classmethod
    def of(cls, count: int, written: Iterable[Expansion]) -> Product:
        """The product of these polynomials in ``count`` generators."""
        number, exponents, factors = 1, (0,) * count, []
        for expansion in written:
            found = Primitive.of(expansion)
            number *= found.number
            exponents = tuple(map(add, exponents, found.exponents))
            if len(found.part) > 1:
                factors.append(found.part)
        return cls(number, exponents, tuple(factors)) if number else cls(0, (0,) * count, ())

    @classmethod
    def of_determinant(cls, determinant: Determinant) -> Product:
        """A determinant, factor by factor; LimitError where one of them has too many terms."""
        return cls.of(len(determinant.generators), (part.written() for part in determinant.factors))

    def with_content(self, number: int, exponents: Sequence[int]) -> Product:
        """The same factors beside another integer and monomial."""
        return Product(number, tuple(exponents), self.factors)

    @property
    def terms(self) -> int:
        """An upper bound of the number of terms when it is multiplied out, exact where factors share no name."""
        return prod(map(len, self.factors)) if self.number else 0

    def degrees(self) -> tuple[int, ...]:
        """The highest exponent of every generator."""
        return tuple(map(sum, zip(self.exponents, *(part.degrees() for part in self.factors), strict=True)))

    def modulo(self, point: Sequence[int], prime: int) -> int:
        """The value at a point, modulo a prime below 2^31."""
        value = self.number % prime
        for base, exponent in zip(point, self.exponents, strict=True):
            if exponent:
                value = value * pow(base, exponent, prime) % prime
        for part in self.factors:
            value = value * part.modulo(point, prime) % prime
        return value

    @cached_property
    def written(self) -> Expansion:
        """Multiplied out; LimitError where that may have more than :data:`MOST_TERMS` terms."""
        if self.terms > MOST_TERMS:
            raise too_long("this product", self.terms, MOST_TERMS)
        if not self.factors:
            constant = Expansion(
                Fields.for_degrees(self.exponents),
                np.zeros((1, int(bool(self.number))), dtype=np.int64),
                np.ones(int(bool(self.number)), dtype=np.int8),
            )
            return constant.times(self.number, self.exponents) if self.number else constant
        first, *others = sorted(self.factors, key=len)
        for other in others:
            first = _multiplied(first, other)
        return first.times(self.number, self.exponents)

    def to_element(self, ring: PolyRing) -> PolyElement:
        """Multiplied out, as an element of the ring; LimitError as :attr:`written`."""
        return self.written.to_element(ring)


def _multiplied(a: Expansion, b: Expansion) -> Expansion:
    fields = Fields.for_degrees([x + y for x, y in zip(a.degrees(), b.degrees(), strict=True)])
    a, b = a.within(fields), b.within(fields)
    keys = (a.keys[:, :, None] + b.keys[:, None, :]).reshape(fields.words, -1)
    types = {a.coefficients.dtype, b.coefficients.dtype}
    exact = np.dtype(np.int64) if types == {np.dtype(np.int8)} else np.dtype(object)
    coefficients = np.multiply.outer(a.coefficients.astype(exact), b.coefficients.astype(exact)).ravel()
    keys, coefficients = merged(keys, coefficients)
    if types == {np.dtype(np.int8)} and int(np.abs(coefficients).max()) == 1:
        coefficients = coefficients.astype(np.int8)
    return Expansion(fields, keys, coefficients)
