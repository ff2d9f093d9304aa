"""Polynomials in one variable with integer coefficients, as plain tuples in ascending powers.

Exact evaluation, roots and lowest terms of a numeric H all work on a primitive integer polynomial: no common
factor left in the coefficients, sign kept. Common factors are looked for modulo the prime 2^61 - 1 first. A gcd
of degree 0 modulo a prime that does not divide both leading coefficients proves that the integer polynomials
have no common factor (the degree of a gcd can only grow under reduction); this costs microseconds and settles
nearly every network. Only where it fails does sympy compute the gcd over the integers.

Invariant: a polynomial has no trailing zeros, the empty tuple is zero, the last entry is the leading coefficient.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from fractions import Fraction
from typing import Final, TypeAlias

__all__ = [
    "Integers",
    "add",
    "coprime",
    "derivative",
    "divide_exactly",
    "gcd",
    "multiply",
    "primitive",
    "square_free",
    "trim",
    "value_at",
]

Integers: TypeAlias = tuple[int, ...]

PRIME: Final = (1 << 61) - 1


def trim(coefficients: Iterable[int]) -> Integers:
    """The polynomial without the zeros above its degree."""
    kept = list(coefficients)
    while kept and kept[-1] == 0:
        kept.pop()
    return tuple(kept)


def primitive(coefficients: Iterable[Fraction]) -> tuple[Fraction, Integers]:
    """The positive content and the primitive integer polynomial: coefficients = content * polynomial.

    >>> primitive([Fraction(1, 2), Fraction(0), Fraction(-3, 4), Fraction(0)])
    (Fraction(1, 4), (2, 0, -3))
    >>> primitive([])
    (Fraction(0, 1), ())
    """
    fractions = [Fraction(c) for c in coefficients]
    while fractions and not fractions[-1]:
        fractions.pop()
    if not fractions:
        return Fraction(0), ()
    common = math.lcm(*(c.denominator for c in fractions))
    integers = [c.numerator * (common // c.denominator) for c in fractions]
    divisor = math.gcd(*integers)
    return Fraction(divisor, common), tuple(i // divisor for i in integers)


def add(p: Sequence[int], q: Sequence[int], factor: int = 1) -> Integers:
    """``p + factor*q``."""
    length = max(len(p), len(q))
    total = [*p, *([0] * (length - len(p)))]
    for k, c in enumerate(q):
        total[k] += factor * c
    return trim(total)


def multiply(p: Sequence[int], q: Sequence[int]) -> Integers:
    """The product.

    >>> multiply((1, 1), (1, -1))
    (1, 0, -1)
    """
    if not p or not q:
        return ()
    total = [0] * (len(p) + len(q) - 1)
    for i, a in enumerate(p):
        if a:
            for k, b in enumerate(q):
                total[i + k] += a * b
    return tuple(total)


def derivative(p: Sequence[int]) -> Integers:
    """The derivative."""
    return tuple(k * c for k, c in enumerate(p))[1:]


def value_at(p: Sequence[int], x: Fraction) -> Fraction:
    """The exact value at a rational point."""
    numerator, denominator = x.numerator, x.denominator
    total, power = 0, 1
    for c in reversed(p):
        total = total * numerator + c * power
        power *= denominator
    return Fraction(total, power // denominator) if p else Fraction(0)


def _modular_gcd_degree(p: Integers, q: Integers) -> int:
    """The degree of the gcd modulo the prime, or -1 when the prime divides a leading coefficient."""
    f = [c % PRIME for c in reversed(p)]
    g = [c % PRIME for c in reversed(q)]
    if not f[0] or not g[0]:
        return -1
    if len(f) < len(g):
        f, g = g, f
    while len(g) > 1:
        inverse = pow(g[0], -1, PRIME)
        g = [c * inverse % PRIME for c in g]
        tail = g[1:]
        while len(f) >= len(g):
            head = f[0]
            f = [(a - head * b) % PRIME for a, b in zip(f[1:], tail, strict=False)] + f[len(g) :]
        start = next((k for k, c in enumerate(f) if c), len(f))
        f, g = g, f[start:]
        if not g:
            return len(f) - 1
    return 0


def coprime(p: Integers, q: Integers) -> bool:
    """True when two non-zero primitive polynomials are certified to have no common factor.

    False means only that this certificate failed; :func:`gcd` then decides.
    """
    if len(p) <= 1 or len(q) <= 1:
        return True
    return _modular_gcd_degree(p, q) == 0


def gcd(p: Integers, q: Integers) -> tuple[Integers, Integers, Integers]:
    """The primitive gcd with positive leading coefficient, and the two cofactors, of non-zero polynomials.

    >>> gcd((2, 3, 1), (3, 4, 1))        # (s+1)(s+2) and (s+1)(s+3)
    ((1, 1), (2, 1), (3, 1))
    """
    if coprime(p, q):
        return (1,), p, q
    from sympy import ZZ
    from sympy.polys.euclidtools import dup_inner_gcd

    h, f, g = dup_inner_gcd([ZZ(c) for c in reversed(p)], [ZZ(c) for c in reversed(q)], ZZ)
    common, first, second = (tuple(int(c) for c in reversed(r)) for r in (h, f, g))
    content = math.gcd(*common)
    if common[-1] < 0:
        content = -content
    return (
        tuple(c // content for c in common),
        tuple(c * content for c in first),
        tuple(c * content for c in second),
    )


def divide_exactly(p: Integers, q: Integers) -> Integers | None:
    """``p/q`` when q, a primitive non-zero polynomial, divides p over the rationals, else None.

    >>> divide_exactly((-1, 0, 1), (1, 1))
    (-1, 1)
    >>> divide_exactly((1, 0, 1), (1, 1)) is None
    True
    """
    rest = list(p)
    quotient = [0] * max(0, len(p) - len(q) + 1)
    lead = q[-1]
    for k in range(len(quotient) - 1, -1, -1):
        factor, left = divmod(rest[k + len(q) - 1], lead)
        if left:
            return None
        quotient[k] = factor
        if factor:
            for i, c in enumerate(q):
                rest[k + i] -= factor * c
    return trim(quotient) if not any(rest) else None


def square_free(p: Integers) -> tuple[tuple[Integers, int], ...]:
    """The square-free parts of a primitive polynomial, each with its multiplicity; parts of degree 0 left out.

    The product of part**multiplicity is p up to sign. (D. Y. Y. Yun, On square-free decomposition algorithms,
    SYMSAC 1976.)

    >>> square_free((2, 7, 9, 5, 1))     # (s+1)^3 (s+2)
    (((2, 1), 1), ((1, 1), 3))
    """
    if len(p) <= 1:
        return ()
    slope = primitive([Fraction(c) for c in derivative(p)])[1]
    if coprime(p, slope):
        return ((p, 1),)
    # Yun's scheme needs p' itself, not its primitive part, since w and y must shrink together.
    common, w, _ = gcd(p, slope)
    y = divide_exactly(derivative(p), common)
    parts: list[tuple[Integers, int]] = []
    multiplicity = 1
    while len(w) > 1:
        assert y is not None  # noqa: S101 - the gcd divides both by construction
        z = add(y, derivative(w), -1)
        if not z:
            parts.append((w, multiplicity))
            break
        part, w_next, _ = gcd(w, primitive([Fraction(c) for c in z])[1])
        if len(part) > 1:
            parts.append((part, multiplicity))
        y = divide_exactly(z, part)
        w = w_next
        multiplicity += 1
    return tuple(parts)
