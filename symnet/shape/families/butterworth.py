"""Butterworth: the flattest magnitude at DC that a denominator of order n can give."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any, ClassVar, Final

import sympy
from sympy import Expr

from symnet.shape.families.family import Family, Points, Roots, checked_order, member, with_conjugates
from symnet.shape.families.prototype import UNIT_DELAY, W0, W3DB, Prototype, Reference

__all__ = ["BUTTERWORTH", "butterworth"]

_READABLE_ORDER: Final = 6  # beyond it the exact coefficients are nested roots that nobody reads


def butterworth(order: int) -> Prototype:
    """The Butterworth low-pass of that order, -3.0103 dB at w = 1 rad/s.

    Definition: |H(jw)|^2 = 1/(1 + w^(2n)). All its derivatives up to order 2n - 1 vanish at DC; the poles stand on
    the unit circle at s = -sin t + j cos t with t = (2k - 1) pi/(2n), k = 1 ... n, so that w0 and the -3 dB
    frequency are the same. The group delay at DC is 1/sin(pi/(2n)).

    Source: S. Butterworth, "On the theory of filter amplifiers", Experimental Wireless & the Wireless Engineer 7
    (1930), 536-541.

    Raises :class:`~symnet.errors.NotationError` for an order that is no whole number from 1 upwards and
    :class:`~symnet.errors.LimitError` for one beyond 60.

    >>> p = butterworth(3)
    >>> [round(c, 9) for c in p.denominator()]
    [1.0, 2.0, 2.0, 1.0]
    >>> p.exact
    (1, 2, 2, 1)
    >>> round(p.decibels(1.0), 4)
    -3.0103
    """
    return member(BUTTERWORTH, checked_order(order), ())


def _poles(m: Any, order: int) -> list[tuple[Any, Any]]:
    """Each cosine as the sine of a small angle, exact to the last place."""
    angle = m.pi / (2 * order)
    upper = [(-m.sin((2 * k + 1) * angle), m.sin((order - 2 * k - 1) * angle)) for k in range(order // 2)]
    return with_conjugates(upper, (-1.0,) if order % 2 else ())


class _Butterworth(Family):
    name: ClassVar[str] = "Butterworth"
    source: ClassVar[str] = "S. Butterworth, Experimental Wireless & the Wireless Engineer 7 (1930), 536-541"

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """The n points of the left half of the unit circle."""
        return tuple(complex(*p) for p in _poles(math, order)), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same points."""
        return _poles(m, order), ()

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """w0 and the -3 dB frequency are 1 by definition."""
        return (
            Reference.named(W0, 1.0),
            Reference.named(W3DB, 1.0),
            Reference.named(UNIT_DELAY, math.sin(math.pi / (2 * order))),
        )

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """|H|^2."""
        return f"|H(jw)|^2 = 1/(1 + w^{2 * order})"

    def exact(self, order: int, values: tuple[float, ...]) -> tuple[Expr, ...] | None:
        """a_k = prod over j = 1 ... k of cos((j - 1) g)/sin(j g) with g = pi/(2n) (Weinberg 1962, section 11.2; from memory)."""
        if order > _READABLE_ORDER:
            return None
        angle = sympy.pi / (2 * order)
        total: Expr = sympy.Integer(1)
        coefficients = [total]
        for j in range(1, order + 1):
            total = sympy.radsimp(total * sympy.cos((j - 1) * angle) / sympy.sin(j * angle))
            # the root of the square: sqrt(10 - 2 sqrt 5) (5 + 3 sqrt 5)/... becomes 3 + sqrt 5
            coefficients.append(sympy.sqrtdenest(sympy.sqrt(sympy.expand(total**2))))
        return tuple(coefficients)

    def conditions(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """|D(jw)|^2 has no term between the first and the last: the definition itself, term by term."""
        return squared_magnitude(coefficients)[1:-1]


def squared_magnitude(coefficients: Sequence[Any]) -> tuple[Any, ...]:
    """|D(jw)|^2 = D(jw) D(-jw) in ascending powers of w^2, from the coefficients of D in ascending powers of s."""
    n = len(coefficients) - 1
    found = []
    for k in range(n + 1):
        total = coefficients[k] * coefficients[k]
        for j in range(1, min(k, n - k) + 1):
            total = total + (-1) ** j * 2 * coefficients[k - j] * coefficients[k + j]
        found.append(total)
    return tuple(found)


BUTTERWORTH: Final = _Butterworth()
