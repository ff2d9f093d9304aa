"""Legendre-Papoulis (optimum L): the steepest edge that a magnitude without any ripple can have."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import cmath
import math
from collections.abc import Sequence
from fractions import Fraction
from functools import lru_cache
from typing import Any, ClassVar, Final

from sympy import Expr

from symnet.exact.roots import roots as exact_roots
from symnet.shape.families.butterworth import BUTTERWORTH, squared_magnitude
from symnet.shape.families.family import Family, Points, Roots, checked_order, member, precise_roots
from symnet.shape.families.prototype import W3DB, Prototype, Reference

__all__ = ["LEGENDRE", "legendre", "optimum_polynomial"]

_MOST_WRITTEN: Final = 10  # orders whose L_n is written out in the definition


def legendre(order: int) -> Prototype:
    """The Legendre-Papoulis ("optimum L") low-pass of that order, -3.0103 dB at w = 1 rad/s.

    Definition: |H(jw)|^2 = 1/(1 + L_n(w^2)), where among all polynomials L_n(x) of degree n that vanish at 0, are 1
    at x = 1 and never fall from there to here, this one is steepest at x = 1: |H| falls monotonically and has the
    steepest slope at its -3 dB frequency. With the Legendre polynomials P_i

        n = 2k + 1:  L_n(w^2) = 1/(2 (k+1)^2) * integral from -1 to 2 w^2 - 1 of (sum over i = 0 ... k of (2i+1) P_i(x))^2 dx
        n = 2k + 2:  L_n(w^2) = 1/((k+1)(k+2)) * integral of (x + 1) (the same sum, over i = k, k-2, ... only)^2 dx

    and the slope dL_n/dx at x = 1 is (k+1)^2 for odd and (k+1)(k+2) for even order, n^2/4 and more, against n for
    Butterworth. All coefficients of L_n are whole numbers. Orders 1 and 2 are Butterworth.

    Sources: A. Papoulis, "Optimum filters with monotonic response", Proc. IRE 46 (1958), 606-609 (odd orders), and
    "On monotonic response filters", Proc. IRE 47 (1959), 332-333; M. Fukada, "Optimum filters of even orders with
    monotonic response", IRE Trans. Circuit Theory 6 (1959), 277-281 (even orders; from memory).

    Raises :class:`~symnet.errors.NotationError` for an order that is no whole number from 1 upwards and
    :class:`~symnet.errors.LimitError` for one beyond 60.

    >>> legendre(3).equation
    '|H(jw)|^2 = 1/(1 + w^2 - 3 w^4 + 3 w^6)'
    >>> [round(c, 3) for c in legendre(3).denominator()]
    [0.577, 1.359, 1.311, 1.0]
    >>> round(legendre(3).decibels(1.0), 4)
    -3.0103
    """
    return member(LEGENDRE, checked_order(order), ())


@lru_cache(maxsize=64)
def optimum_polynomial(order: int) -> tuple[int, ...]:
    """The coefficients of L_n(x), x = w^2, in ascending powers of x: exact whole numbers.

    >>> optimum_polynomial(4), optimum_polynomial(5)
    ((0, 0, 3, -8, 6), (0, 1, -8, 28, -40, 20))
    """
    k = (order - 1) // 2
    odd = order % 2 == 1
    total = [0] * (k + 1)
    for i in range(k, -1, -1 if odd else -2):
        for j, c in enumerate(_shifted_legendre(i)):
            total[j] += (2 * i + 1) * c
    square = _product(total, total)
    # x runs from 0 to 1 where the variable of P_i runs from -1 to 1: dx doubles, and (x + 1) becomes 2 w^2
    integrand = square if odd else [0, *square]
    scale = Fraction(1, (k + 1) ** 2) if odd else Fraction(4, (k + 1) * (k + 2))
    found = [Fraction(0)] + [scale * c / (j + 1) for j, c in enumerate(integrand)]
    return tuple(c.numerator for c in found)  # every denominator is 1, as the tests show for every order


def _shifted_legendre(i: int) -> list[int]:
    """P_i(2x - 1) = sum over j of (-1)^(i+j) binomial(i, j) binomial(i + j, j) x^j, ascending."""
    return [(-1) ** (i + j) * math.comb(i, j) * math.comb(i + j, j) for j in range(i + 1)]


def _product(a: Sequence[int], b: Sequence[int]) -> list[int]:
    product = [0] * (len(a) + len(b) - 1)
    for i, x in enumerate(a):
        for j, y in enumerate(b):
            product[i + j] += x * y
    return product


def _in_square(order: int) -> list[int]:
    """1 + L_n(-u), u = s^2, ascending in u: D(s) D(-s)."""
    return [(1 if k == 0 else 0) + (-1) ** k * c for k, c in enumerate(optimum_polynomial(order))]


@lru_cache(maxsize=64)
def _poles(order: int) -> tuple[complex, ...]:
    squares = exact_roots(_in_square(order))
    return tuple(-cmath.sqrt(root.value) for root in squares for _ in range(root.multiplicity))


class _Legendre(Family):
    name: ClassVar[str] = "Legendre-Papoulis"
    source: ClassVar[str] = "A. Papoulis, Proc. IRE 46 (1958), 606-609, and 47 (1959), 332-333"

    def has_order(self, order: int) -> bool:
        """Orders 1 and 2 are Butterworth, and are called so."""
        return order >= 3

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """The square roots, in the left half plane, of the roots of an exact polynomial in s^2."""
        return _poles(order), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same roots."""
        poles = (-m.sqrt(m.mpc(*u)) for u in precise_roots(m, _in_square(order)))
        return [(p.real, p.imag) for p in poles], ()

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """L_n(1) = 1 by definition."""
        return (Reference.named(W3DB, 1.0),)

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """|H|^2, with L_n written out where that is readable."""
        if order > _MOST_WRITTEN:
            return f"|H(jw)|^2 = 1/(1 + L_{order}(w^2))"
        text = "1"
        for k, c in enumerate(optimum_polynomial(order)):
            if c:
                text += f" {'-' if c < 0 else '+'} {'' if abs(c) == 1 else f'{abs(c)} '}w^{2 * k}"
        return f"|H(jw)|^2 = 1/({text})"

    def exact(self, order: int, values: tuple[float, ...]) -> tuple[Expr, ...] | None:
        """Orders 1 and 2 only, which are Butterworth; beyond them D has roots of cubics and worse."""
        return BUTTERWORTH.exact(order, ()) if order <= 2 else None

    def conditions(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """|D(jw)|^2 = c (1 + L_n(w^2/w1^2)) for some c and w1, term by term, cleared of denominators.

        With d_k and l_k the coefficients of w^(2k) in |D(jw)|^2 and in L_n: an odd order has c = d_0 and
        1/w1^2 = d_1/(l_1 d_0), so that d_k l_1^k d_0^(k-1) = l_k d_1^k for k = 2 ... n. An even order has l_1 = 0 and
        1/w1^2 = d_3 l_2/(d_2 l_3), so that d_1 = 0, d_2^3 l_3^2 = d_0 d_3^2 l_2^3, and
        d_k l_2 d_2^(k-3) l_3^(k-2) = l_k d_3^(k-2) l_2^(k-2) for k = 4 ... n.
        """
        n = len(coefficients) - 1
        d, L = squared_magnitude(coefficients), optimum_polynomial(n)
        if n % 2:
            return tuple(d[k] * d[0] ** (k - 1) * L[1] ** k - d[1] ** k * L[k] for k in range(2, n + 1))
        if n == 2:
            return (d[1],)
        return (
            d[1],
            d[2] ** 3 * L[3] ** 2 - d[0] * d[3] ** 2 * L[2] ** 3,
            *(
                d[k] * d[2] ** (k - 3) * (L[2] * L[3] ** (k - 2)) - d[3] ** (k - 2) * (L[k] * L[2] ** (k - 2))
                for k in range(4, n + 1)
            ),
        )

    def positives(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """1/w1^2 > 0: see :meth:`conditions`; l_3 < 0 < l_2 for an even order."""
        n = len(coefficients) - 1
        d = squared_magnitude(coefficients)
        if n == 2:
            return ()
        return (d[1],) if n % 2 else (-d[3], d[2])


LEGENDRE: Final = _Legendre()
