"""A polynomial written out: one packed monomial and one integer per term, in arrays.

All exponents of a monomial stand side by side in the bits of one or a few machine words, in fields wide enough
for the highest degree, so that multiplying by a monomial is one addition. Conversion to sympy ring elements, a
tuple per term, costs far more than the expansion and is made only when somebody looks at the polynomial.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from math import gcd
from typing import TYPE_CHECKING, Any, Final

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["Expansion", "Fields", "Primitive", "merged"]

_WORD: Final = 62  # bits used of each signed 64-bit word
_LOOKED_UP: Final = 12  # bits of a word whose factor is found in one table


@dataclass(frozen=True, slots=True)
class Fields:
    """Where the exponent of each generator stands: its word, its lowest bit, the mask of its width."""

    places: tuple[tuple[int, int, int], ...]
    words: int

    @classmethod
    def for_degrees(cls, highest: Sequence[int]) -> Fields:
        """Fields wide enough for these highest exponents."""
        places, word, shift = [], 0, 0
        for degree in highest:
            width = max(1, int(degree).bit_length())
            if shift + width > _WORD:
                word, shift = word + 1, 0
            places.append((word, shift, (1 << width) - 1))
            shift += width
        return cls(tuple(places), word + 1)

    def bits(self) -> list[int]:
        """The lowest bit of each field in a packed monomial."""
        return [word * _WORD + shift for word, shift, _ in self.places]

    def column(self, powers: Iterable[tuple[int, int]]) -> NDArray[np.int64]:
        """One monomial, from (generator, exponent), as a column of words."""
        words = np.zeros((self.words, 1), dtype=np.int64)
        for k, exponent in powers:
            word, shift, _ = self.places[k]
            words[word] += exponent << shift
        return words


@dataclass(frozen=True, eq=False)
class Expansion:
    """Terms of a polynomial: ``keys`` (words x terms, packed monomials, all different), ``coefficients`` (nonzero)."""

    fields: Fields
    keys: NDArray[np.int64]
    coefficients: NDArray[Any]

    def __len__(self) -> int:
        return int(self.keys.shape[1])

    def __iter__(self) -> Iterator[tuple[int, tuple[int, ...]]]:
        """The terms one by one, as (coefficient, exponents of the generators)."""
        columns = [self.exponents(k) for k in range(len(self.fields.places))]
        for term, coefficient in enumerate(self.coefficients):
            yield int(coefficient), tuple(int(column[term]) for column in columns)

    def exponents(self, generator: int) -> NDArray[np.int64]:
        """The exponent of one generator in every term."""
        word, shift, mask = self.fields.places[generator]
        exponents: NDArray[np.int64] = (self.keys[word] >> shift) & mask
        return exponents

    def content(self) -> tuple[int, tuple[int, ...]]:
        """The greatest common integer and monomial of all terms; (0, zeros) for the zero polynomial."""
        count = len(self.fields.places)
        if not len(self):
            return 0, (0,) * count
        only_signs = self.coefficients.dtype == np.int8
        number = 1 if only_signs else gcd(*map(int, np.unique(self.coefficients)))
        common = np.bitwise_and.reduce(self.keys, axis=1)
        return number, tuple(
            int(self.exponents(k).min()) if mask > 1 else int(common[word] >> shift) & 1
            for k, (word, shift, mask) in enumerate(self.fields.places)
        )

    def degrees(self) -> tuple[int, ...]:
        """The highest exponent of every generator."""
        count = len(self.fields.places)
        if not len(self):
            return (0,) * count
        united = np.bitwise_or.reduce(self.keys, axis=1)
        return tuple(
            int(self.exponents(k).max()) if mask > 1 else int(united[word] >> shift) & 1
            for k, (word, shift, mask) in enumerate(self.fields.places)
        )

    def within(self, fields: Fields) -> Expansion:
        """The same terms in other fields, which must be wide enough."""
        if fields == self.fields:
            return self
        keys = np.zeros((fields.words, len(self)), dtype=np.int64)
        for k, ((word, shift, _), degree) in enumerate(zip(fields.places, self.degrees(), strict=True)):
            if degree:
                keys[word] |= self.exponents(k) << shift
        return Expansion(fields, keys, self.coefficients)

    @classmethod
    def of_packed(cls, fields: Fields, terms: Mapping[int, int]) -> Expansion:
        """The polynomial with these coefficients of monomials as :meth:`packed` gives them."""
        mask = (1 << _WORD) - 1
        keys = [[(key >> (word * _WORD)) & mask for key in terms] for word in range(fields.words)]
        return cls(fields, np.array(keys, dtype=np.int64), np.array(list(terms.values()), dtype=object))

    def packed(self) -> list[int]:
        """The monomials, one integer each: the words side by side, the first one lowest."""
        rows: list[list[int]] = self.keys.tolist()
        keys, *others = rows
        for place, word in enumerate(others, 1):
            keys = [key | (part << (_WORD * place)) for key, part in zip(keys, word, strict=True)]
        return keys

    def begins_negative(self) -> bool:
        """Whether the lexicographically first term of the lowest power of the first generator is negative."""
        lowest, highest = self.coefficients.min(), self.coefficients.max()
        if lowest > 0 or highest < 0:  # as in every network of R, L and C
            return bool(highest < 0)
        chosen = np.arange(len(self))
        for k in range(len(self.fields.places)):
            exponents = self.exponents(k)[chosen]
            chosen = chosen[exponents == (exponents.min() if k == 0 else exponents.max())]
        return bool(self.coefficients[chosen[0]] < 0)

    def divided(self, number: int, exponents: Sequence[int]) -> Expansion:
        """The polynomial divided by an integer and a monomial that divide every term."""
        keys = self.keys - self.fields.column(enumerate(exponents)) if any(exponents) else self.keys
        if number == 1:
            coefficients = self.coefficients
        else:
            coefficients = -self.coefficients if number == -1 else self.coefficients // number
        return Expansion(self.fields, keys, coefficients)

    def times(self, number: int, exponents: Sequence[int]) -> Expansion:
        """The polynomial times an integer and a monomial, in fields that are wide enough for it."""
        if number == 1 and not any(exponents):
            return self
        highest = [d + e for d, e in zip(self.degrees(), exponents, strict=True)]
        fields = self.fields
        if all(degree <= mask for degree, (_, _, mask) in zip(highest, fields.places, strict=True)):
            keys = self.keys + fields.column(enumerate(exponents))
        else:
            fields = Fields.for_degrees(highest)
            keys = np.zeros((fields.words, len(self)), dtype=np.int64)
            for k, (word, shift, _) in enumerate(fields.places):
                keys[word] += (self.exponents(k) + exponents[k]) << shift
        if number == 1:
            return Expansion(fields, keys, self.coefficients)
        coefficients = self.coefficients if number == -1 else self.coefficients.astype(object)
        return Expansion(fields, keys, coefficients * number)

    def modulo(self, point: Sequence[int], prime: int) -> int:
        """The value at a point, modulo a prime below 2^31."""
        return int(self.terms_modulo(point, prime).sum()) % prime

    def terms_modulo(self, point: Sequence[int], prime: int) -> NDArray[np.int64]:
        """The value of every term at a point, modulo a prime below 2^31.

        Every bit of a packed monomial stands for one power of one generator, so that the product of those
        powers is looked up for twelve bits at a time.
        """
        values = (
            self.coefficients.astype(np.int64) if self.coefficients.dtype == np.int8 else self.coefficients
        )
        values = (values % prime).astype(np.int64)
        for word in range(self.fields.words):
            factors = [1] * _WORD
            for k, (at, shift, mask) in enumerate(self.fields.places):
                if at == word:
                    for bit in range(mask.bit_length()):
                        factors[shift + bit] = pow(point[k], 1 << bit, prime)
            for low in range(0, _WORD, _LOOKED_UP):
                chunk = factors[low : low + _LOOKED_UP]
                if any(factor != 1 for factor in chunk):
                    table = np.ones(1, dtype=np.int64)
                    for factor in chunk:
                        table = np.concatenate([table, table * factor % prime])
                    index = (self.keys[word] >> low) & (len(table) - 1)
                    values = values * table[index] % prime
        return values

    def to_element(self, ring: PolyRing) -> PolyElement:
        """The same polynomial as an element of the ring whose generators the fields stand for; made once."""
        element: PolyElement | None = self._elements.get(ring)
        if element is None:
            element = self._elements[ring] = self._to_element(ring)
        return element

    @cached_property
    def _elements(self) -> dict[PolyRing, PolyElement]:
        return {}

    def _to_element(self, ring: PolyRing) -> PolyElement:
        columns = [self.exponents(k).tolist() for k in range(len(self.fields.places))]
        domain = ring.domain
        coefficients = map(domain, map(int, self.coefficients.tolist()))
        return ring.from_dict(dict(zip(zip(*columns, strict=True), coefficients, strict=True)))


@dataclass(frozen=True, eq=False)
class Primitive:
    """A polynomial as ``number * monomial * part``, where the part has no such factor left.

    The sign of ``number`` is such that the lowest power of s in the part begins with plus.
    """

    number: int
    exponents: tuple[int, ...]
    part: Expansion
    degrees: tuple[int, ...]

    @classmethod
    def of(cls, expansion: Expansion) -> Primitive:
        """The common integer and monomial factors apart from the rest; number 0 for the zero polynomial."""
        number, exponents = expansion.content()
        if not number:
            return cls(0, exponents, expansion, exponents)
        if expansion.begins_negative():
            number = -number
        part = expansion.divided(number, exponents)
        return cls(number, exponents, part, part.degrees())


def merged(keys: NDArray[np.int64], coefficients: NDArray[Any]) -> tuple[NDArray[np.int64], NDArray[Any]]:
    """Equal monomials added up; what cancels is dropped."""
    order = np.argsort(keys[0], kind="stable") if len(keys) == 1 else np.lexsort(keys)
    keys, coefficients = keys[:, order], coefficients[order]
    fresh = np.ones(keys.shape[1], dtype=bool)
    fresh[1:] = (keys[:, 1:] != keys[:, :-1]).any(axis=0)
    if not fresh.all():
        starts = np.flatnonzero(fresh)
        keys, coefficients = keys[:, starts], np.add.reduceat(coefficients, starts)
    kept = coefficients != 0
    return (keys, coefficients) if kept.all() else (keys[:, kept], coefficients[kept])
