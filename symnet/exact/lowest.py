"""Lowest terms, and what was cancelled on the way there.

Integers and monomials common to all terms go first, at no cost. A further common factor must hold some name
that both polynomials have; for each such name all others are given random values modulo a prime, and the gcd
of what remains is taken. If it is a power of the name for every name, there is no common factor: a true factor
would still divide after the values are put in. That certificate needs only a few evaluations of the diagrams;
the multivariate gcd over the integers is taken only when it fails.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import gcd
from random import Random
from typing import TYPE_CHECKING, Any, Final

from symnet.errors import Fault, LimitError
from symnet.exact.modular import SMALL_PRIME, gcd_modulo, interpolate
from symnet.exact.polynomials import content, degrees, divide_content, primitive

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["LowestTerms", "reduce"]

#: Terms beyond which a multivariate gcd is not attempted.
MOST_TERMS_FOR_GCD: Final = 20_000

#: Terms of a cancelled factor beyond which it is kept as it is, not factored further.
_MOST_TERMS_FACTORED: Final = 200

Evaluator = Callable[[list[Any]], "tuple[Any, Any]"]


@dataclass(frozen=True)
class LowestTerms:
    """Numerator and denominator without common factor, and the cancelled factors that hold s."""

    numerator: PolyElement
    denominator: PolyElement
    hidden: tuple[PolyElement, ...]


def reduce(numerator: PolyElement, denominator: PolyElement, at: Evaluator) -> LowestTerms:
    """N/D in lowest terms over the integers, the sign such that D's lowest coefficient begins with plus.

    ``at(point)`` gives N and D modulo 2^31 - 1, up to integer and monomial factors, for a point whose
    coordinates (s first) are int64 arrays; it may be faster than evaluating the expanded polynomials.
    Raises LimitError when a common factor exists and the polynomials are too large for its gcd.
    """
    ring = denominator.ring
    if not numerator:
        return LowestTerms(ring.zero, ring.one, ())
    n_number, n_exponents = content(numerator)
    d_number, d_exponents = content(denominator)
    n = divide_content(numerator, n_number, n_exponents)
    d = divide_content(denominator, d_number, d_exponents)
    hidden: list[PolyElement] = [ring.gens[0]] * min(n_exponents[0], d_exponents[0])
    if not _certainly_coprime(n, d, at, n_exponents, d_exponents):
        if max(len(n), len(d)) > MOST_TERMS_FOR_GCD:
            raise LimitError(
                Fault(
                    f"numerator and denominator have a common factor and {max(len(n), len(d))} terms; "
                    f"it is looked for up to {MOST_TERMS_FOR_GCD}",
                    "give some parts numbers: derive(net, symbols=...) keeps only the names that you list",
                )
            )
        common, n, d = n.cofactors(d)
        hidden.extend(_factors_with_s(common))
    number, rest = _quotient(n_number, d_number)
    common_exponents = tuple(map(min, n_exponents, d_exponents))
    n = _times(n, number, tuple(map(int.__sub__, n_exponents, common_exponents)))
    d = _times(d, rest, tuple(map(int.__sub__, d_exponents, common_exponents)))
    if _begins_negative(d):
        n, d = -n, -d
    return LowestTerms(n, d, tuple(hidden))


def _quotient(a: int, b: int) -> tuple[int, int]:
    common = gcd(a, b) or 1
    return a // common, b // common


def _times(polynomial: PolyElement, number: int, exponents: tuple[int, ...]) -> PolyElement:
    if number != 1:
        polynomial = polynomial.mul_ground(number)
    return polynomial.mul_monom(exponents) if any(exponents) else polynomial


def _begins_negative(polynomial: PolyElement) -> bool:
    """Whether the first term of the lowest power of s is negative."""
    lowest = min(monomial[0] for monomial in polynomial)
    first = max(monomial for monomial in polynomial if monomial[0] == lowest)
    return bool(polynomial[first] < 0)


def _factors_with_s(common: PolyElement) -> list[PolyElement]:
    if all(monomial[0] == 0 for monomial in common):
        return []
    if len(common) > _MOST_TERMS_FACTORED:
        return [primitive(common)]
    _, factors = common.factor_list()
    return [
        -factor if _begins_negative(factor) else factor
        for factor, times in factors
        for _ in range(times)
        if any(monomial[0] for monomial in factor)
    ]


def _certainly_coprime(
    n: PolyElement,
    d: PolyElement,
    at: Evaluator,
    n_exponents: tuple[int, ...],
    d_exponents: tuple[int, ...],
) -> bool:
    import numpy as np

    count = n.ring.ngens
    n_degrees, d_degrees = degrees(n), degrees(d)
    shared = [k for k in range(count) if n_degrees[k] and d_degrees[k]]
    if not shared:
        return True
    spans = {
        k: max(n_degrees[k] + n_exponents[k], d_degrees[k] + d_exponents[k]) + 1 for k in shared
    }
    random = Random(20)
    base = [random.randrange(1, SMALL_PRIME) for _ in range(count)]
    total = sum(spans.values())
    point = [np.full(total, value, dtype=np.int64) for value in base]
    offsets, offset = {}, 0
    for k in shared:
        point[k][offset : offset + spans[k]] = np.arange(spans[k])
        offsets[k] = offset
        offset += spans[k]
    n_values, d_values = (np.broadcast_to(v, (total,)) for v in at(point))
    for k in shared:
        part = slice(offsets[k], offsets[k] + spans[k])
        first = interpolate([int(v) for v in n_values[part]], SMALL_PRIME)
        second = interpolate([int(v) for v in d_values[part]], SMALL_PRIME)
        # the monomial factors that content() has found are not a common factor of n and d
        powers = min(n_exponents[k], d_exponents[k])
        if len(gcd_modulo(first, second, SMALL_PRIME)) != powers + 1:
            return False
    return True
