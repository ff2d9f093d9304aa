"""Factors of a polynomial in s whose coefficients are polynomials in part names, over the rationals.

What a designer can read are factors of degree 1 and 2 in s. Before the general factorisation is tried, prime numbers
are put in for the names: a factor in symbols stays a factor in numbers, so a specimen without rational factors of
degree 1 or 2 proves that there are none in symbols (the converse is Hilbert's irreducibility theorem, and not used).
This test costs a millisecond; nearly every network ends there.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Any, Final

from symnet.exact.roots import roots
from symnet.shape.closed import Coefficient

__all__ = ["MOST_TERMS_FACTORED", "factors_in_s"]

#: Polynomials of more terms than this are not factored in symbols.
MOST_TERMS_FACTORED: Final = 120
_HIGHEST_DEGREE: Final = 12

Factor = tuple[tuple[Coefficient, ...], int]


def factors_in_s(coefficients: tuple[Coefficient, ...]) -> tuple[Factor, ...]:
    """The factors that hold s, as coefficients in ascending powers with their multiplicity, by rising degree.

    ``coefficients`` are ring elements free of s, the first and the last not zero. The product is the polynomial up to
    a factor free of s. Beyond 120 terms or degree 12 the polynomial is one factor.

    >>> from symnet.exact.polynomials import by_powers_of_s, make_ring
    >>> s, R1, C1, R2, C2 = make_ring(["R1", "C1", "R2", "C2"]).gens
    >>> factors_in_s(by_powers_of_s((1 + s*R1*C1) * (R2 + s*R2**2*C2)))
    (((1, R1*C1), 1), ((1, R2*C2), 1))
    """
    degree = len(coefficients) - 1
    if degree == 0:
        return ()
    terms = sum(map(len, coefficients))
    if (
        degree == 1
        or terms > MOST_TERMS_FACTORED
        or degree > _HIGHEST_DEGREE
        or not _may_factor(coefficients)
    ):
        return ((coefficients, 1),)
    from symnet.exact.polynomials import by_powers_of_s

    s = coefficients[0].ring.gens[0]
    whole = sum((c * s**k for k, c in enumerate(coefficients)), coefficients[0].ring.zero)
    found: list[Factor] = []
    for factor, multiplicity in whole.factor_list()[1]:
        parts = by_powers_of_s(factor)
        if len(parts) > 1:
            found.append((parts, int(multiplicity)))
    found.sort(key=lambda one: (len(one[0]), str(one[0])))
    return tuple(found)


def _may_factor(coefficients: tuple[Coefficient, ...]) -> bool:
    """False when numbers put in for the names prove that no factor of degree 1 or 2 splits off."""
    degree = len(coefficients) - 1
    for start in range(3):
        specimen = [_at_primes(c, start) for c in coefficients]
        if not specimen[0] or not specimen[-1]:
            continue  # the degree must stay
        found = roots(specimen)
        if degree == 2:
            proper = any(root.exact is not None for root in found)
        else:
            proper = any(root.closed is not None for root in found)
        if not proper:
            return False
    return True


def _at_primes(coefficient: Any, start: int) -> Fraction:
    primes = _primes(coefficient.ring.ngens + start)[start:]
    total = 0
    for monomial, c in coefficient.items():
        term = int(c)
        for prime, exponent in zip(primes, monomial, strict=True):
            term *= prime**exponent
        total += term
    return Fraction(total)


def _primes(count: int) -> list[int]:
    found: list[int] = []
    candidate = 2
    while len(found) < count:
        if all(candidate % prime for prime in found):
            found.append(candidate)
        candidate += 1
    return found
