"""Bessel (Thomson): the flattest group delay at DC that a denominator of order n can give."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from functools import lru_cache
from math import factorial
from typing import Any, ClassVar, Final

import sympy
from sympy import Expr

from symnet.exact.roots import roots
from symnet.shape.families.family import Family, Points, Roots, checked_order, member, precise_roots
from symnet.shape.families.prototype import UNIT_DELAY, Prototype, Reference

__all__ = ["BESSEL", "bessel"]


def bessel(order: int) -> Prototype:
    """The Bessel (Thomson) low-pass of that order, group delay 1 s at DC.

    Definition: D(s) = sum over k of b_k s^k with b_k = (2n - k)! / (2^(n - k) k! (n - k)!), the reverse Bessel
    polynomial; H(s) = b_0/D(s) approaches exp(-s). The group delay is 1 - w^(2n)/(D(jw) D(-jw)), flat up to the
    power 2n - 1 of w. Tables normalise it to unit delay (here), to the -3 dB frequency, or to w0 ("phase
    normalised"): use :meth:`~symnet.shape.families.prototype.Prototype.scaled`.

    Source: W. E. Thomson, "Delay networks having maximally flat frequency characteristics", Proc. IEE 96 part III
    (1949), 487-490.

    Raises :class:`~symnet.errors.NotationError` for an order that is no whole number from 1 upwards and
    :class:`~symnet.errors.LimitError` for one beyond 60.

    >>> p = bessel(3)
    >>> p.exact
    (15, 15, 6, 1)
    >>> round(p.reference("w3dB").w, 4), round(p.decibels(1.0), 3)
    (1.7557, -0.903)
    >>> [round(c, 5) for c in p.scaled("w0", 1.0).denominator()]
    [1.0, 2.46621, 2.43288, 1.0]
    """
    return member(BESSEL, checked_order(order), ())


@lru_cache(maxsize=64)
def polynomial(order: int) -> tuple[int, ...]:
    """The coefficients b_0 ... b_n of the reverse Bessel polynomial, ascending, exact integers."""
    return tuple(
        factorial(2 * order - k) // (2 ** (order - k) * factorial(k) * factorial(order - k))
        for k in range(order + 1)
    )


@lru_cache(maxsize=64)
def _poles(order: int) -> tuple[complex, ...]:
    found = roots([Fraction(b) for b in polynomial(order)])
    return tuple(root.value for root in found)


class _Bessel(Family):
    name: ClassVar[str] = "Bessel"
    source: ClassVar[str] = "W. E. Thomson, Proc. IEE 96 part III (1949), 487-490"

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """The roots of the exact integer polynomial."""
        return _poles(order), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same roots."""
        return precise_roots(m, polynomial(order)), ()

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """The delay is 1 s by definition."""
        return (Reference.named(UNIT_DELAY, 1.0),)

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """D(s)."""
        terms = []
        for k, b in reversed(list(enumerate(polynomial(order)))):
            power = "" if k == 0 else "s" if k == 1 else f"s^{k}"
            terms.append(power if b == 1 and power else f"{b} {power}".rstrip())
        return "D(s) = " + " + ".join(terms)

    def exact(self, order: int, values: tuple[float, ...]) -> tuple[Expr, ...] | None:
        """The integers themselves."""
        return tuple(sympy.Integer(b) for b in polynomial(order))

    def conditions(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """With T = a_1/a_0, the delay at DC: a_k/a_0 = T^k b_k/b_0 for k = 2 ... n, cleared of denominators."""
        order = len(coefficients) - 1
        b = polynomial(order)
        a0, a1 = coefficients[0], coefficients[1]
        return tuple(b[0] * coefficients[k] * a0 ** (k - 1) - b[k] * a1**k for k in range(2, order + 1))


BESSEL: Final = _Bessel()
