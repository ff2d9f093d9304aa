"""Linkwitz-Riley: a Butterworth twice over, so that low-pass and high-pass of a crossover add up to an all-pass."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any, ClassVar, Final

import sympy
from sympy import Expr

from symnet.errors import Fault, NotationError
from symnet.shape.families.butterworth import BUTTERWORTH, squared_magnitude
from symnet.shape.families.family import Family, Points, Roots, checked_order, member
from symnet.shape.families.prototype import UNIT_DELAY, W0, W3DB, W6DB, Prototype, Reference

__all__ = ["LINKWITZ_RILEY", "linkwitz_riley"]


def linkwitz_riley(order: int) -> Prototype:
    """The Linkwitz-Riley low-pass of that even order, -6.0206 dB at w = 1 rad/s.

    Definition: D(s) = B(s)^2 with B the Butterworth polynomial of order n/2, hence |H(jw)| = 1/(1 + w^n). Low-pass
    and high-pass of one frequency, the high-pass with the sign (-1)^(n/2), add up to the all-pass B(-s)/B(s).
    The -3.0103 dB frequency is (sqrt 2 - 1)^(1/n), the group delay at DC 2/sin(pi/n). Order 2 is the second order
    of Q = 1/2.

    Source: S. H. Linkwitz, "Active crossover networks for noncoincident drivers", Journal of the Audio Engineering
    Society 24 (1976), 2-8 (from memory).

    Raises :class:`~symnet.errors.NotationError` for an order that is no even number from 2 upwards and
    :class:`~symnet.errors.LimitError` for one beyond 60.

    >>> p = linkwitz_riley(4)
    >>> p.exact
    (1, 2*sqrt(2), 4, 2*sqrt(2), 1)
    >>> round(p.decibels(1.0), 4), round(p.reference("w3dB").w, 4)
    (-6.0206, 0.8022)
    """
    if checked_order(order) % 2:
        raise NotationError(
            Fault(
                f"a Linkwitz-Riley filter has an even order, not {order}",
                hint="it is the square of a Butterworth filter of half the order",
            )
        )
    return member(LINKWITZ_RILEY, order, ())


class _LinkwitzRiley(Family):
    name: ClassVar[str] = "Linkwitz-Riley"
    source: ClassVar[str] = "S. H. Linkwitz, J. Audio Eng. Soc. 24 (1976), 2-8 (from memory)"

    def has_order(self, order: int) -> bool:
        """Even orders only."""
        return order % 2 == 0

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """The Butterworth poles of half the order, each twice."""
        poles, _ = BUTTERWORTH.roots(order // 2, ())
        return tuple(p for p in poles for _ in range(2)), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same poles."""
        poles, _ = BUTTERWORTH.points(m, order // 2, ())
        return [p for p in poles for _ in range(2)], []

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """All in closed form: 1 + w^n = sqrt 2 at -3.0103 dB and 2 at -6.0206 dB."""
        return (
            Reference.named(W0, 1.0),
            Reference.named(W3DB, (math.sqrt(2) - 1) ** (1 / order)),
            Reference.named(W6DB, 1.0),
            Reference.named(UNIT_DELAY, math.sin(math.pi / order) / 2),
        )

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """|H|."""
        return f"|H(jw)| = 1/(1 + w^{order})"

    def exact(self, order: int, values: tuple[float, ...]) -> tuple[Expr, ...] | None:
        """The square of the Butterworth polynomial."""
        half = BUTTERWORTH.exact(order // 2, ())
        if half is None:
            return None
        products: list[Expr] = [sympy.Integer(0)] * (order + 1)
        for i, a in enumerate(half):
            for k, b in enumerate(half):
                products[i + k] += sympy.expand(a * b)
        return tuple(products)

    def conditions(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """|D(jw)|^2 = d_0 (1 + (w/w0)^n)^2: nothing but the first, the middle and the last term, d_m^2 = 4 d_0 d_n."""
        d = squared_magnitude(coefficients)
        n = len(d) - 1
        others = tuple(d[k] for k in range(1, n) if k != n // 2)
        return (*others, d[n // 2] * d[n // 2] - 4 * d[0] * d[n])

    def positives(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """The middle term, so that (1 + x)^2 is told from (1 - x)^2."""
        return (squared_magnitude(coefficients)[(len(coefficients) - 1) // 2],)


LINKWITZ_RILEY: Final = _LinkwitzRiley()
