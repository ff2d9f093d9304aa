"""Polynomials on the jw axis: what of P(jw) is real, what is imaginary, and products of these, in x = w^2.

P(jw) = E(x) + j w O(x). The coefficients, ascending, are whatever the polynomial has: exact numbers or elements of a
ring of names; nothing here divides.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, TypeAlias

__all__ = ["Coefficients", "added", "halves", "product", "real_part", "squared", "trimmed", "turning"]

#: Ascending coefficients, numbers or ring elements.
Coefficients: TypeAlias = Sequence[Any]


def halves(coefficients: Coefficients) -> tuple[list[Any], list[Any]]:
    """E and O of P(jw) = E(x) + j w O(x).

    >>> halves([1, 2, 3, 4])
    ([1, -3], [2, -4])
    """
    even, odd = ([c if k % 2 == 0 else -c for k, c in enumerate(coefficients[start::2])] for start in (0, 1))
    return even, odd


def squared(coefficients: Coefficients) -> list[Any]:
    """|P(jw)|^2 = E^2 + x O^2.

    >>> squared([1, 2, 2, 1])                          # 1 + w^6: Butterworth
    [1, 0, 0, 1]
    """
    return real_part(coefficients, coefficients)


def real_part(p: Coefficients, q: Coefficients) -> list[Any]:
    """The real part of P(jw) times the conjugate of Q(jw): E_p E_q + x O_p O_q.

    >>> real_part([1, 1], [3])                         # (1 + jw)*3
    [3]
    """
    (even_p, odd_p), (even_q, odd_q) = halves(p), halves(q)
    return trimmed(added(product(even_p, even_q), [0, *product(odd_p, odd_q)]))


def turning(coefficients: Coefficients) -> tuple[list[Any], list[Any]]:
    """The derivative of the phase of P(jw) by w, as numerator and denominator in x."""
    even, odd = halves(coefficients)
    odd_slope, even_slope = ([k * c for k, c in enumerate(p)][1:] for p in (odd, even))
    twice = [0, *(2 * c for c in odd_slope)]
    first = product(even, added(odd, twice))
    second = [0, *(2 * c for c in product(odd, even_slope))]
    return added(first, second, -1), squared(coefficients)


def added(p: Coefficients, q: Coefficients, factor: int = 1) -> list[Any]:
    """P + factor*Q."""
    found = [*p, *([0] * (len(q) - len(p)))]
    for k, c in enumerate(q):
        found[k] = found[k] + factor * c
    return found


def product(p: Coefficients, q: Coefficients) -> list[Any]:
    """P*Q."""
    if not p or not q:
        return []
    found: list[Any] = [0] * (len(p) + len(q) - 1)
    for i, a in enumerate(p):
        if a:
            for k, b in enumerate(q):
                found[i + k] = found[i + k] + a * b
    return found


def trimmed(p: Coefficients) -> list[Any]:
    """P without zeros above its degree."""
    kept = list(p)
    while kept and not kept[-1]:
        kept.pop()
    return kept
