"""The greatest common divisor of two polynomials in many names, found in the few names that it can hold.

* For every name that both polynomials hold, all others are given random values modulo a prime; the degree of the
  gcd of the images bounds that of the true one. A true factor divides the images too, and keeps its degree where
  one of the polynomials keeps its own, which is asked for. All bounds zero: there is no common factor, and that
  is a proof, after a few evaluations.
* Otherwise g holds only the names whose bound is not zero. Collected by the other names, both polynomials have
  coefficients in these few; g is the gcd of all the coefficients, and that of the shortest two is nearly always it.
  Where g has names in common with everything, the same is done for a cofactor: what n/g can hold are the names in
  which n has a higher degree than g.
* Division decides: a candidate that divides both and reaches the bounds is the gcd. So neither the prime nor the
  points decide about the result, only about the time.

Multivariate gcds of long polynomials are never taken: the heuristic one needs ten seconds for 9 000 terms in 24
names with a common factor of two. A factor whose shortest coefficients exceed :data:`MOST_TERMS_FOR_GCD` terms is
refused in words. Compare R. Zippel, EUROSAM 1979, 216-226 (images modulo a prime); P. Wang, ACM TOMS 6, 1980.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from heapq import heapify, heappop, heappush
from random import Random
from typing import TYPE_CHECKING, Any, Final, TypeAlias

import numpy as np

from symnet.errors import Fault, LimitError
from symnet.exact.expansion import Expansion, Fields, Primitive
from symnet.exact.modular import SMALL_PRIME, gcd_modulo, interpolate
from symnet.exact.products import Product
from symnet.progress import Progress

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = [
    "MOST_TERMS_FOR_GCD",
    "Common",
    "common_factor",
    "divided",
    "irreducible_factors",
    "shared_degrees",
]

#: Terms of a coefficient beyond which no gcd is taken.
MOST_TERMS_FOR_GCD: Final = 200

#: Terms beyond which a polynomial in which no name stands to the first power is not factored.
MOST_TERMS_FACTORED: Final = 60

_MOST_TRIES: Final = 5

Evaluator: TypeAlias = Callable[[list[Any]], "tuple[Any, Any]"]
#: A generator and the two polynomials in it, ascending, all others at one point.
_Images: TypeAlias = "Iterator[tuple[int, list[int], list[int]]]"


@dataclass(frozen=True, eq=False)
class Common:
    """A common factor and the two cofactors: ``factor * numerator`` and ``factor * denominator`` are what was given."""

    factor: Expansion
    numerator: Expansion
    denominator: Expansion


def shared_degrees(numerator: Product, denominator: Product, at: Evaluator) -> dict[int, int]:
    """For every generator that a common factor can hold, its highest degree there; {} proves that there is none.

    The integer and monomial factors that stand apart are not counted. ``at(point)`` gives both polynomials modulo
    2^31 - 1 for a point whose coordinates (s first) are int64 arrays.
    """
    count = len(numerator.exponents)

    def images(asked: Iterable[int], random: Random) -> _Images:
        spans = {k: max(numerator.degrees()[k], denominator.degrees()[k]) + 1 for k in asked}
        total = sum(spans.values())
        point = [np.full(total, random.randrange(1, SMALL_PRIME), dtype=np.int64) for _ in range(count)]
        parts, offset = {}, 0
        for k, span in spans.items():
            parts[k] = slice(offset, offset + span)
            point[k][parts[k]] = np.arange(span)
            offset += span
        above, below = (np.broadcast_to(side, (total,)) for side in at(point))
        for k, part in parts.items():
            first, second = (
                interpolate([int(v) for v in side[part]], SMALL_PRIME) for side in (above, below)
            )
            yield k, first[numerator.exponents[k] :], second[denominator.exponents[k] :]

    sides = [
        tuple(d - e for d, e in zip(side.degrees(), side.exponents, strict=True))
        for side in (numerator, denominator)
    ]
    return _bounds(sides[0], sides[1], images)


def _shared_by(numerator: Expansion, denominator: Expansion) -> dict[int, int]:
    """The same for two polynomials written out, from the values of their terms at one point."""
    count = len(numerator.fields.places)

    def images(asked: Iterable[int], random: Random) -> _Images:
        point = [random.randrange(1, SMALL_PRIME) for _ in range(count)]
        values = [side.terms_modulo(point, SMALL_PRIME) for side in (numerator, denominator)]
        for k in asked:
            inverse = pow(point[k], -1, SMALL_PRIME)
            first, second = (
                [
                    int(total) % SMALL_PRIME * pow(inverse, power, SMALL_PRIME) % SMALL_PRIME
                    for power, total in enumerate(np.bincount(side.exponents(k), weights=terms))
                ]  # sums of 2^20 residues are whole numbers in doubles
                for side, terms in zip((numerator, denominator), values, strict=True)
            )
            yield k, first, second

    return _bounds(numerator.degrees(), denominator.degrees(), images)


def _bounds(
    above: Sequence[int], below: Sequence[int], images: Callable[[Iterable[int], Random], _Images]
) -> dict[int, int]:
    """The degrees of the gcd of images, where one of the two has kept its degree; {} when all are zero."""
    random = Random(20)
    asked = {k for k, (n, d) in enumerate(zip(above, below, strict=True)) if n and d}
    bounds = {k: min(above[k], below[k]) for k in asked}
    for _ in range(_MOST_TRIES):
        if not asked:
            break
        for k, first, second in images(sorted(asked), random):
            if (len(first) > above[k] and first[-1]) or (len(second) > below[k] and second[-1]):
                bounds[k] = len(gcd_modulo(first, second, SMALL_PRIME)) - 1
                asked.discard(k)
    return {k: bound for k, bound in sorted(bounds.items()) if bound}


def common_factor(numerator: Expansion, denominator: Expansion) -> Common | None:
    """The greatest common divisor of two polynomials without integer or monomial factor; None where it is 1.

    Raises LimitError where there is one, and its coefficients are too long for it to be found.
    """
    bounds = _shared_by(numerator, denominator)
    if not bounds:
        return None
    for factor in _candidates(numerator, denominator, bounds):
        if len(factor) == 1:
            return None  # an unlucky point
        n = divided(numerator, factor)
        d = None if n is None else divided(denominator, factor)
        if n is not None and d is not None:
            return Common(factor, n, d)
    raise LimitError(
        Fault(
            f"numerator and denominator, of {len(numerator)} and {len(denominator)} terms, have a common factor "
            f"that is too long to be found: the lowest terms of H are not established",
            "give some parts numbers: derive(net, symbols=...) keeps only the names that you list; "
            "H.numeric() needs no lowest terms in symbols",
        )
    )


def _candidates(n: Expansion, d: Expansion, bounds: Mapping[int, int]) -> Iterator[Expansion]:
    """Polynomials of which one is the common factor, likely ones first."""
    yield from _contents((n, d), tuple(bounds), bounds)
    for side in sorted((n, d), key=len):
        left = {k: e - bounds.get(k, 0) for k, e in enumerate(side.degrees()) if e > bounds.get(k, 0)}
        for cofactor in _contents((side,), tuple(left), left):
            factor = divided(side, cofactor)
            if factor is not None and len(factor) > 1:
                yield factor


def _contents(
    polynomials: Sequence[Expansion], names: tuple[int, ...], bounds: Mapping[int, int]
) -> Iterator[Expansion]:
    """The gcd of ever more coefficients, shortest first, that stand beside the generators that are not ``names``."""
    ring = _small_ring(len(names))
    common: PolyElement | None = None
    with Progress("looking for a common factor", "coefficients compared") as at:
        for number, terms in enumerate(_alternating([_coefficients(p, names) for p in polynomials])):
            if len(terms) > MOST_TERMS_FOR_GCD:
                return
            at(number)
            element = ring.from_dict(terms)
            common = element if common is None else common.gcd(element)
            degrees = tuple(map(max, zip(*common, strict=True))) if names else ()
            if len(common) == 1 or all(degree <= bounds[k] for k, degree in zip(names, degrees, strict=True)):
                yield _expansion(common, names, len(polynomials[0].fields.places))


def _small_ring(count: int) -> PolyRing:
    from sympy import ZZ, Symbol
    from sympy.polys.orderings import lex
    from sympy.polys.rings import PolyRing

    return PolyRing([Symbol(f"x{k}") for k in range(count)], ZZ, lex)


def _alternating(sides: Sequence[Iterator[Any]]) -> Iterator[Any]:
    """One of each in turn, as long as there are any."""
    waiting = list(sides)
    while waiting:
        for side in tuple(waiting):
            try:
                yield next(side)
            except StopIteration:
                waiting.remove(side)


def _coefficients(polynomial: Expansion, names: Sequence[int]) -> Iterator[dict[tuple[int, ...], int]]:
    """The coefficients, polynomials in ``names``, beside each monomial of the other generators, shortest first."""
    mask = np.zeros((polynomial.fields.words, 1), dtype=np.int64)
    for k in names:
        word, shift, bits = polynomial.fields.places[k]
        mask[word, 0] |= bits << shift
    elsewhere = polynomial.keys & ~mask
    order = np.lexsort(elsewhere)
    beside = elsewhere[:, order]
    fresh = np.flatnonzero(np.concatenate([[True], (beside[:, 1:] != beside[:, :-1]).any(axis=0)]))
    ends = np.append(fresh[1:], len(order))
    columns = [polynomial.exponents(k) for k in names]
    for group in np.argsort(ends - fresh, kind="stable"):
        chosen = order[fresh[group] : ends[group]]
        yield {
            tuple(int(column[term]) for column in columns): int(polynomial.coefficients[term])
            for term in chosen
        }


def _expansion(element: PolyElement, names: Sequence[int], count: int) -> Expansion:
    """A polynomial in ``names``, without integer or monomial factor, among all generators."""
    highest = [0] * count
    for k, degree in zip(names, element.degrees(), strict=True):
        highest[k] = degree
    fields = Fields.for_degrees(highest)
    bits = [fields.bits()[k] for k in names]
    terms = {
        sum(exponent << bit for exponent, bit in zip(monomial, bits, strict=True)): int(coefficient)
        for monomial, coefficient in element.items()
    }
    return Primitive.of(Expansion.of_packed(fields, terms)).part


def divided(polynomial: Expansion, factor: Expansion) -> Expansion | None:
    """The exact quotient, or None where there is none: long division, the highest monomials first, from a heap.

    (S. Johnson, SIGSAM Bulletin 8, 1974, 63-71.)
    """
    with Progress("dividing by a common factor", "terms of the quotient found") as at:
        return _divided(polynomial, factor, at)


def _divided(polynomial: Expansion, factor: Expansion, at: Progress) -> Expansion | None:
    fields, degrees = polynomial.fields, factor.degrees()
    if any(degree > mask for degree, (_, _, mask) in zip(degrees, fields.places, strict=True)):
        return None
    steps = sorted(
        zip(factor.within(fields).packed(), map(int, factor.coefficients), strict=True), reverse=True
    )
    (first, leading), *others = steps
    bits = fields.bits()
    held = [
        (bits[k], mask, (first >> bits[k]) & mask, degrees[k])
        for k, (_, _, mask) in enumerate(fields.places)
        if degrees[k]
    ]
    rest = dict(zip(polynomial.packed(), map(int, polynomial.coefficients), strict=True))
    waiting = [-key for key in rest]
    heapify(waiting)
    quotient: dict[int, int] = {}
    while waiting:
        key = -heappop(waiting)
        coefficient = rest.pop(key)
        if not coefficient:
            continue
        for bit, mask, lowest, degree in held:
            exponent = (key >> bit) & mask
            if exponent < lowest or exponent - lowest + degree > mask:
                return None
        number, left = divmod(coefficient, leading)
        if left:
            return None
        monomial = key - first
        quotient[monomial] = number
        at(len(quotient))
        for step, weight in others:
            product = monomial + step
            if product in rest:
                rest[product] -= number * weight
            else:
                rest[product] = -number * weight
                heappush(waiting, -product)
    return Expansion.of_packed(fields, quotient)


def irreducible_factors(polynomial: Expansion) -> list[Expansion]:
    """The factors over the integers of a polynomial without integer or monomial factor, each beginning with plus.

    Where a name occurs to the first power only, p = a x + b: then gcd(a, b) is all that p holds beside one
    irreducible factor, and every part with a symbol of its own is such a name. Otherwise a short polynomial is
    factored in general, and a long one is left as it is.
    """
    if len(polynomial) == 1:
        return []
    degrees = polynomial.degrees()
    linear = [k for k, degree in enumerate(degrees) if degree == 1]
    if not linear:
        return _factored(polynomial)
    held = polynomial.exponents(linear[-1]) == 1
    exponents = [int(k == linear[-1]) for k in range(len(degrees))]
    sides = [
        Expansion(polynomial.fields, polynomial.keys[:, chosen], polynomial.coefficients[chosen])
        for chosen in (held, ~held)
    ]
    try:
        common = common_factor(Primitive.of(sides[0].divided(1, exponents)).part, Primitive.of(sides[1]).part)
    except LimitError:
        return [polynomial]
    if common is None:
        return [polynomial]
    rest = divided(polynomial, common.factor)
    assert rest is not None  # noqa: S101 - it divides both halves
    return [*irreducible_factors(common.factor), rest]


def _factored(polynomial: Expansion) -> list[Expansion]:
    count = len(polynomial.fields.places)
    names = tuple(k for k, degree in enumerate(polynomial.degrees()) if degree)
    if len(polynomial) > MOST_TERMS_FACTORED:
        return [polynomial]
    columns = [polynomial.exponents(k).tolist() for k in names]
    element = _small_ring(len(names)).from_dict(
        dict(zip(zip(*columns, strict=True), map(int, polynomial.coefficients), strict=True))
    )
    _, factors = element.factor_list()
    return [_expansion(factor, names, count) for factor, times in factors for _ in range(times)]
