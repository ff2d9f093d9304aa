"""What stands behind a band-pass, a band-stop or an all-pass in symbols: the equations it has to satisfy.

A band-pass that was made from a low-pass holds s only in v = s + w0^2/s, so D/s^m is a polynomial in v, and the
coefficients of D mirror each other: a_(m-j) = a_(m+j) w0^(2j), with w0^2 = a_(m-1)/a_(m+1). Written in v by the
polynomials of Dickson,

    s^j + (w0^2/s)^j = sum over i of j/(j-i) binomial(j-i, i) (-w0^2)^i v^(j-2i),

it is the D of the low-pass, whose families are asked for the conditions they have anyway. A band-stop has the low-pass
in 1/v. An all-pass has N(s) = +-K D(-s). A null on the jw axis makes the last but one determinant of Hurwitz of N
vanish, which for degrees 2, 3 and 4 is a short polynomial.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import comb
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["all_pass_equations", "low_pass_behind", "notch_equations", "null_equation"]


def low_pass_behind(a: Sequence[PolyElement]) -> tuple[tuple[PolyElement, ...], tuple[PolyElement, ...]]:
    """The equations that D of even degree satisfies if it is a transformed low-pass, and that low-pass in v = s + w0^2/s.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, b = make_ring(["b"]).gens
    >>> one = s.ring.one
    >>> low_pass_behind((one, 3*b, 2 + b**2, 3*b, one))   # (v^2 + 3 b v + b^2), times the leading 3 b
    ((0,), (3*b**3, 9*b**2, 3*b))
    """
    m = len(a) // 2
    below, above = a[m - 1], a[m + 1]
    mirrored = tuple(a[m - j] * above**j - a[m + j] * below**j for j in range(2, m + 1))
    most = m // 2
    low = []
    for k in range(m + 1):
        total = a[m + k] * above**most
        for i in range(1, (m - k) // 2 + 1):
            weight = int(Fraction(k + 2 * i, k + i) * comb(k + i, i)) * (-1) ** i
            total = total + a[m + k + 2 * i] * weight * below**i * above ** (most - i)
        low.append(total)
    return mirrored, tuple(low)


def notch_equations(top: Sequence[PolyElement], a: Sequence[PolyElement]) -> tuple[PolyElement, ...]:
    """What makes N of degree 2m a multiple of (s^2 + w0^2)^m, with the w0 of the D beside it."""
    m = len(a) // 2
    below, above = a[m - 1], a[m + 1]
    odd = tuple(top[1::2])
    even = tuple(top[2 * (m - k)] * above**k - comb(m, k) * below**k * top[2 * m] for k in range(1, m + 1))
    return odd + even


def all_pass_equations(top: Sequence[PolyElement], a: Sequence[PolyElement]) -> tuple[PolyElement, ...]:
    """N(s) = K D(-s) for some K, term by term: n_k a_0 = (-1)^k a_k n_0."""
    return tuple(top[k] * a[0] - (-1) ** k * a[k] * top[0] for k in range(1, len(a)))


def null_equation(
    top: Sequence[PolyElement],
) -> tuple[PolyElement, tuple[PolyElement, PolyElement]] | None:
    """What must be 0 for N, all of whose coefficients are positive, to have a pair of zeros +-jw, and w^2 as a ratio.

    None for other degrees than 2, 3 and 4, and for an N without odd powers, which needs none.
    """
    match len(top) - 1:
        case 2 if top[1]:
            return top[1], (top[0], top[2])
        case 3 if top[1] and top[3]:
            return top[1] * top[2] - top[0] * top[3], (top[1], top[3])
        case 4 if top[1] and top[3]:
            return (
                top[1] * top[2] * top[3] - top[0] * top[3] ** 2 - top[4] * top[1] ** 2,
                (top[1], top[3]),
            )
    return None
