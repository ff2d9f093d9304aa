"""Critically damped: all poles in one place, the fastest step without overshoot that equal stages give."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any, ClassVar, Final

import sympy
from sympy import Expr

from symnet.shape.families.family import Family, Points, Roots, checked_order, member
from symnet.shape.families.prototype import UNIT_DELAY, W0, W3DB, Prototype, Reference

__all__ = ["CRITICALLY_DAMPED", "critically_damped"]


def critically_damped(order: int) -> Prototype:
    """The low-pass of n coincident real poles, w0 = 1 rad/s.

    Definition: H(s) = 1/(1 + s)^n. Its -3.0103 dB frequency is sqrt(2^(1/n) - 1), its group delay at DC n seconds.
    Order 2 is the second order of Q = 1/2.

    Source: U. Tietze, Ch. Schenk, Halbleiter-Schaltungstechnik, Springer, chapter on active filters (from memory).

    Raises :class:`~symnet.errors.NotationError` for an order that is no whole number from 1 upwards and
    :class:`~symnet.errors.LimitError` for one beyond 60.

    >>> p = critically_damped(3)
    >>> p.exact
    (1, 3, 3, 1)
    >>> round(p.reference("w3dB").w, 4)
    0.5098
    """
    return member(CRITICALLY_DAMPED, checked_order(order), ())


class _CriticallyDamped(Family):
    name: ClassVar[str] = "critically damped"
    source: ClassVar[str] = "U. Tietze, Ch. Schenk, Halbleiter-Schaltungstechnik (from memory)"

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """All at -1."""
        return (-1 + 0j,) * order, ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same."""
        return [(-1, 0)] * order, []

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """All in closed form: (1 + w^2)^n = 2 at -3.0103 dB."""
        return (
            Reference.named(W0, 1.0),
            Reference.named(W3DB, math.sqrt(math.expm1(math.log(2) / order))),
            Reference.named(UNIT_DELAY, 1 / order),
        )

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """D(s)."""
        return f"D(s) = (1 + s)^{order}"

    def exact(self, order: int, values: tuple[float, ...]) -> tuple[Expr, ...]:
        """The binomial coefficients."""
        return tuple(sympy.Integer(math.comb(order, k)) for k in range(order + 1))

    def conditions(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """With t = a_1/(n a_0): a_k/a_0 = t^k n!/(k! (n - k)!) for k = 2 ... n, cleared of denominators."""
        n = len(coefficients) - 1
        a0, a1 = coefficients[0], coefficients[1]
        return tuple(
            n**k * coefficients[k] * a0 ** (k - 1) - math.comb(n, k) * a1**k for k in range(2, n + 1)
        )


CRITICALLY_DAMPED: Final = _CriticallyDamped()
