"""Lowest terms, and what was cancelled on the way there.

Integers and monomials common to all terms go first, at no cost. A further common factor must hold some name
that both polynomials have; for each such name all others are given random values modulo a prime, and the gcd
of what remains is taken. If it is a power of the name for every name, there is no common factor: a true factor
would still divide after the values are put in. That certificate needs only a few evaluations of the diagrams.
When it fails, a factor that shares no name with the rest is cut out (:mod:`symnet.exact.apart`); the multivariate
gcd over the integers is left for what is not of that kind.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from operator import sub
from random import Random
from typing import TYPE_CHECKING, Any, Final

from symnet.errors import Fault, LimitError
from symnet.exact.apart import take_apart
from symnet.exact.expansion import Expansion, Primitive
from symnet.exact.modular import SMALL_PRIME, gcd_modulo, interpolate
from symnet.exact.polynomials import begins_negative

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["LowestTerms", "degrees_of", "reduce"]

#: Terms beyond which a multivariate gcd is not attempted.
MOST_TERMS_FOR_GCD: Final = 20_000

#: Terms of a cancelled factor beyond which it is kept as it is, not factored further.
_MOST_TERMS_FACTORED: Final = 200

Evaluator = Callable[[list[Any]], "tuple[Any, Any]"]


@dataclass(frozen=True, eq=False)
class LowestTerms:
    """Numerator and denominator without common factor, and the cancelled factors that hold s.

    ``top`` and ``bottom`` are expansions as long as nobody needed ring elements.
    """

    ring: PolyRing
    top: Expansion | PolyElement
    bottom: Expansion | PolyElement
    hidden: tuple[PolyElement, ...]

    @cached_property
    def numerator(self) -> PolyElement:
        """The numerator as a ring element."""
        return _element(self.top, self.ring)

    @cached_property
    def denominator(self) -> PolyElement:
        """The denominator as a ring element."""
        return _element(self.bottom, self.ring)


def _element(written: Expansion | PolyElement, ring: PolyRing) -> PolyElement:
    return written.to_element(ring) if isinstance(written, Expansion) else written


def degrees_of(written: Expansion | PolyElement) -> tuple[int, ...]:
    """The highest exponent of every generator."""
    if isinstance(written, Expansion):
        return written.degrees()
    return tuple(map(max, zip(*written, strict=True))) if written else (0,) * written.ring.ngens


def reduce(numerator: Primitive, denominator: Primitive, ring: PolyRing, at: Evaluator) -> LowestTerms:
    """N/D in lowest terms over the integers, the sign such that D's lowest coefficient begins with plus.

    ``at(point)`` gives N and D modulo 2^31 - 1 for a point whose coordinates (s first) are int64 arrays; it
    may be faster than evaluating the polynomials. Raises LimitError when a common factor exists and the
    polynomials are too large for its gcd.
    """
    if not numerator.number:
        return LowestTerms(ring, ring.zero, ring.one, ())
    hidden = [ring.gens[0]] * min(numerator.exponents[0], denominator.exponents[0])
    number = Fraction(numerator.number, denominator.number)
    shared = tuple(map(min, numerator.exponents, denominator.exponents))
    n_rest = tuple(map(sub, numerator.exponents, shared))
    d_rest = tuple(map(sub, denominator.exponents, shared))
    if _certainly_coprime(numerator, denominator, at):
        top = numerator.part.times(number.numerator, n_rest)
        bottom = denominator.part.times(number.denominator, d_rest)
        return LowestTerms(ring, top, bottom, tuple(hidden))
    apart = take_apart(numerator, denominator, at)
    if apart is not None:
        n_side, d_side = apart.numerator, apart.denominator
        rest = reduce(
            Primitive.of(n_side), Primitive.of(d_side), ring, lambda point: _both(n_side, d_side, point)
        )
        hidden.extend((*_factors_with_s(apart.common.to_element(ring)), *rest.hidden))
        top = _times(rest.top, number.numerator, n_rest)
        bottom = _times(rest.bottom, number.denominator, d_rest)
        return LowestTerms(ring, top, bottom, tuple(hidden))
    terms = max(len(numerator.part), len(denominator.part))
    if terms > MOST_TERMS_FOR_GCD:
        raise LimitError(
            Fault(
                f"numerator and denominator have a common factor and up to {terms} terms; "
                f"it is looked for up to {MOST_TERMS_FOR_GCD}",
                "give some parts numbers: derive(net, symbols=...) keeps only the names that you list",
            )
        )
    common, n, d = numerator.part.to_element(ring).cofactors(denominator.part.to_element(ring))
    hidden.extend(_factors_with_s(common))
    if begins_negative(d):
        n, d = -n, -d
    n = _times(n, number.numerator, n_rest)
    d = _times(d, number.denominator, d_rest)
    return LowestTerms(ring, n, d, tuple(hidden))


def _both(n: Expansion, d: Expansion, point: list[Any]) -> tuple[Any, Any]:
    """Two expansions at points that are int64 arrays, one point after the other."""
    import numpy as np

    single = [[int(x) for x in coordinates] for coordinates in zip(*point, strict=True)]
    n_values, d_values = (
        np.array([side.modulo(x, SMALL_PRIME) for x in single], dtype=np.int64) for side in (n, d)
    )
    return n_values, d_values


def _times(
    polynomial: Expansion | PolyElement, number: int, exponents: tuple[int, ...]
) -> Expansion | PolyElement:
    if isinstance(polynomial, Expansion):
        return polynomial.times(number, exponents)
    if number != 1:
        polynomial = polynomial.mul_ground(number)
    return polynomial.mul_monom(exponents) if any(exponents) else polynomial


def _factors_with_s(common: PolyElement) -> list[PolyElement]:
    if all(monomial[0] == 0 for monomial in common):
        return []
    if len(common) > _MOST_TERMS_FACTORED:
        return [common]
    _, factors = common.factor_list()
    return [
        -factor if begins_negative(factor) else factor
        for factor, times in factors
        for _ in range(times)
        if any(monomial[0] for monomial in factor)
    ]


def _certainly_coprime(numerator: Primitive, denominator: Primitive, at: Evaluator) -> bool:
    import numpy as np

    spans = {
        k: max(n_degree + numerator.exponents[k], d_degree + denominator.exponents[k]) + 1
        for k, (n_degree, d_degree) in enumerate(zip(numerator.degrees, denominator.degrees, strict=True))
        if n_degree and d_degree
    }
    if not spans:
        return True
    random = Random(20)
    total = sum(spans.values())
    point = [np.full(total, random.randrange(1, SMALL_PRIME), dtype=np.int64) for _ in numerator.exponents]
    parts, offset = {}, 0
    for k, span in spans.items():
        parts[k] = slice(offset, offset + span)
        point[k][parts[k]] = np.arange(span)
        offset += span
    n_values, d_values = (np.broadcast_to(values, (total,)) for values in at(point))
    for k, part in parts.items():
        first = interpolate([int(v) for v in n_values[part]], SMALL_PRIME)
        second = interpolate([int(v) for v in d_values[part]], SMALL_PRIME)
        # what the content has taken out already is no factor of what is left
        powers = min(numerator.exponents[k], denominator.exponents[k])
        if len(gcd_modulo(first, second, SMALL_PRIME)) != powers + 1:
            return False
    return True
