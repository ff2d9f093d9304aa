"""Gaussian: the magnitude of a bell curve, as far as a denominator of order n can follow it from DC."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import cmath
from collections.abc import Sequence
from fractions import Fraction
from functools import lru_cache
from math import factorial
from typing import Any, ClassVar, Final

from symnet.exact.roots import roots
from symnet.shape.families.butterworth import squared_magnitude
from symnet.shape.families.family import Family, Points, Roots, checked_order, member, precise_roots
from symnet.shape.families.prototype import Prototype

__all__ = ["GAUSSIAN", "gaussian"]


def gaussian(order: int) -> Prototype:
    """The Gaussian low-pass of that order, close to exp(-w^2/2) with w in rad/s.

    Definition: |H(jw)|^2 = 1/(1 + w^2 + w^4/2! + ... + w^(2n)/n!), the series of exp(w^2) up to its term n. Its step
    has next to no overshoot. With growing order the -3.0103 dB frequency goes to sqrt(ln 2).

    Source: A. I. Zverev, Handbook of Filter Synthesis, Wiley 1967, section 2.9 (from memory).

    Raises :class:`~symnet.errors.NotationError` for an order that is no whole number from 1 upwards and
    :class:`~symnet.errors.LimitError` for one beyond 60.

    >>> p = gaussian(4)
    >>> round(abs(p(1j)) ** -2, 9)  # 1 + 1 + 1/2 + 1/6 + 1/24
    2.708333333
    >>> round(p.reference("w3dB").w, 4)
    0.833
    """
    return member(GAUSSIAN, checked_order(order), ())


def _series(order: int) -> list[Fraction]:
    return [Fraction(1, factorial(k)) for k in range(order + 1)]


@lru_cache(maxsize=64)
def _poles(order: int) -> tuple[complex, ...]:
    """The left half of +-sqrt(-x) for the roots x = w^2 of the series, which are found from exact fractions."""
    found = roots(_series(order))
    return tuple(-cmath.sqrt(-root.value) for root in found)


class _Gaussian(Family):
    name: ClassVar[str] = "Gaussian"
    source: ClassVar[str] = (
        "A. I. Zverev, Handbook of Filter Synthesis, Wiley 1967, section 2.9 (from memory)"
    )

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """From the exact series."""
        return _poles(order), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """From the same series."""
        found = [m.sqrt(-m.mpc(*x)) for x in precise_roots(m, _series(order))]
        return [(-s.real, -s.imag) for s in found], []

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """|H|^2."""
        middle = " + ..." if order > 2 else ""
        last = {1: ""}.get(order, f" + w^{2 * order}/{order}!")
        return f"|H(jw)|^2 = 1/(1 + w^2{middle}{last})"

    def conditions(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """With d_k of |D(jw)|^2 and x = w^2 d_1/d_0: d_k/d_0 = (d_1/d_0)^k/k! for k = 2 ... n, cleared of denominators."""
        d = squared_magnitude(coefficients)
        return tuple(factorial(k) * d[k] * d[0] ** (k - 1) - d[1] ** k for k in range(2, len(d)))

    def positives(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """The term of w^2, so that |H| falls."""
        return (squared_magnitude(coefficients)[1],)


GAUSSIAN: Final = _Gaussian()
