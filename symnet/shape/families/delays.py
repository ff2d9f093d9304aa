"""All-pass sections and delays: what changes the phase of a signal and leaves its magnitude alone, or nearly so.

These are no shapes to recognise a low-pass by, so they are no families of the catalogue: an all-pass is known by
its denominator, D(-s)/D(s), and D is what recognition looks at.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from fractions import Fraction
from functools import partial
from math import comb, factorial
from typing import Any

import sympy

from symnet.errors import Fault, NotationError
from symnet.shape.families.arithmetic import as_typed, context
from symnet.shape.families.family import Points, checked_order, precise_roots
from symnet.shape.families.prototype import (
    ALL_PASS,
    LOW_PASS,
    Prototype,
    Setting,
    in_order,
    with_common_references,
)
from symnet.shape.families.second_order import poles_of_quality, quality_of

__all__ = ["bessel_all_pass", "first_order_all_pass", "pade_delay", "second_order_all_pass"]


def first_order_all_pass() -> Prototype:
    """The all-pass H(s) = (1 - s)/(1 + s): phase -90 degrees at w0 = 1 rad/s, group delay 2 s at DC.

    >>> H = first_order_all_pass()
    >>> H(1j)
    -1j
    """
    return _delay("first-order all-pass", _of_order_1, "H(s) = (1 - s)/(1 + s)")


def second_order_all_pass(Q: str | float | Fraction) -> Prototype:
    """The all-pass H(s) = (1 - s/Q + s^2)/(1 + s/Q + s^2): phase -180 degrees at w0 = 1 rad/s, delay 2/Q s at DC.

    The delay is flattest at DC with Q = 1/sqrt 3 (Bessel).

    Raises :class:`~symnet.errors.NotationError` for a Q that is no positive number.

    >>> second_order_all_pass("0.8").delay(0.0)
    2.5
    """
    q = quality_of(Q)
    equation = f"H(s) = (1 - s/Q + s^2)/(1 + s/Q + s^2), Q = {q:.6g}"
    return _delay("second-order all-pass", partial(_of_quality, q), equation, (Setting("Q", q, ""),))


def bessel_all_pass(order: int) -> Prototype:
    """The all-pass of that order with the flattest delay at DC, which is 1 s.

    Definition: H(s) = B(-s/2)/B(s/2) with the reverse Bessel polynomial B of order n. It is the Pade approximant of
    exp(-s) with both degrees n; its delay is flat up to the power 2n - 1 of w.

    Source: W. E. Thomson, Proc. IEE 96 part III (1949), 487-490, for B; the delay of an all-pass is twice that of its
    denominator.

    Raises :class:`~symnet.errors.NotationError` for an order that is no whole number from 1 upwards and
    :class:`~symnet.errors.LimitError` for one beyond 60.

    >>> H = bessel_all_pass(3).at(delay="1 ms")
    >>> round(H.delay(0.0) * 1e3, 12), round(abs(H(2000j)), 12)
    (1.0, 1.0)
    """
    d = _approximant(checked_order(order), order)
    top = tuple(c * (-1) ** k for k, c in enumerate(d))
    return _delay(
        "Bessel all-pass", partial(_of_fractions, top, d), f"H(s) = D(-s)/D(s), D = {_text(d)}", exact=d
    )


def pade_delay(numerator: int, denominator: int) -> Prototype:
    """The Pade approximant of exp(-s) with a numerator and a denominator of these degrees m and n: a delay of 1 s.

    Definition: N(s) = sum over k of (m + n - k)! m!/((m + n)! k! (m - k)!) (-s)^k and
    D(s) = sum over k of (m + n - k)! n!/((m + n)! k! (n - k)!) s^k; N/D agrees with exp(-s) up to s^(m + n). With
    m = n it is an all-pass; with m = n - 1 or n - 2 it falls at high frequencies and starts more smoothly. Lower m are
    refused, since |H| then exceeds 1, and from some order on D has roots in the right half plane.

    Source: H. Pade, "Sur la representation approchee d'une fonction par des fractions rationnelles", Annales
    scientifiques de l'E.N.S. 9 (1892), supplement, 3-93; which degrees keep |H| <= 1: G. Wanner, E. Hairer, S. P.
    Norsett, "Order stars and stability theorems", BIT 18 (1978), 475-489 (both from memory).

    Raises :class:`~symnet.errors.NotationError` for degrees that are no whole numbers with n - 2 <= m <= n and
    :class:`~symnet.errors.LimitError` for one beyond 60.

    >>> H = pade_delay(1, 2)
    >>> print(H, H.zeros, H.equation, sep="; ")
    Pade 1/2 delay, order 2, low-pass; ((3+0j),); H(s) = (1 - 1/3 s)/(1 + 2/3 s + 1/6 s^2), approaching exp(-s)
    """
    n = checked_order(denominator)
    if not repr(numerator).isdecimal() or not n - 2 <= numerator <= n:
        raise NotationError(
            Fault(
                f"a Pade delay with a denominator of degree {n} has a numerator of degree {max(n - 2, 0)} to {n}, "
                f"not {numerator!r}",
                hint="a higher one grows without bound, with a lower one |H| exceeds 1 somewhere or it is unstable",
            )
        )
    d = _approximant(n, numerator)
    top = tuple(c * (-1) ** k for k, c in enumerate(_approximant(numerator, n)))
    return _delay(
        f"Pade {numerator}/{n} delay",
        partial(_of_fractions, top, d),
        f"H(s) = ({_text(top)})/({_text(d)}), approaching exp(-s)",
        exact=d,
    )


def _approximant(n: int, m: int) -> tuple[Fraction, ...]:
    """The coefficients of degree n beside a polynomial of degree m on the other side, ascending, for a positive s."""
    return tuple(Fraction(comb(n, k) * factorial(m + n - k), factorial(m + n)) for k in range(n + 1))


def _text(coefficients: tuple[Fraction, ...]) -> str:
    """1 + 2/3 s + 1/6 s^2."""
    text = "1"
    for k, c in enumerate(coefficients[1:], start=1):
        size = "" if abs(c) == 1 else f"{abs(c)} "
        text += f" {'-' if c < 0 else '+'} {size}s" + (f"^{k}" if k > 1 else "")
    return text


def _of_fractions(top: tuple[Fraction, ...], d: tuple[Fraction, ...], m: Any) -> Points:
    """Poles and zeros of N/D; those of an all-pass are mirror images of each other."""
    poles = precise_roots(m, d)
    if len(top) == len(d):
        return poles, _mirrored(poles)
    return poles, precise_roots(m, top) if len(top) > 1 else []


def _of_quality(q: float, m: Any) -> Points:
    poles = poles_of_quality(m, as_typed(m, q))
    return poles, _mirrored(poles)


def _of_order_1(m: Any) -> Points:
    return [(m.mpf(-1), m.mpf(0))], [(m.mpf(1), m.mpf(0))]


def _mirrored(roots: Sequence[tuple[Any, Any]]) -> list[tuple[Any, Any]]:
    return [(-x, y) for x, y in roots]


def _refined(points: Callable[[Any], Points], digits: int) -> tuple[tuple[Any, ...], tuple[Any, ...]]:
    shown = context(digits)
    poles, zeros = points(context(digits + 15))
    return tuple(+shown.mpc(*p) for p in poles), tuple(+shown.mpc(*z) for z in zeros)


def _delay(
    name: str,
    points: Callable[[Any], Points],
    equation: str,
    settings: tuple[Setting, ...] = (),
    exact: tuple[Fraction, ...] = (),
) -> Prototype:
    """The prototype with these roots; with as many zeros as poles it is an all-pass."""
    poles, zeros = (in_order(map(complex, roots)) for roots in _refined(points, 30))
    return Prototype(
        family=name,
        order=len(poles),
        poles=poles,
        zeros=zeros,
        references=with_common_references(poles, zeros, ()),
        settings=settings,
        equation=equation,
        band=ALL_PASS if len(zeros) == len(poles) else LOW_PASS,
        exact=tuple(sympy.Rational(c.numerator, c.denominator) for c in exact) or None,
        refined=partial(_refined, points),
    )
