"""Gaussian to 6 dB and to 12 dB: a bell curve down to that loss, and from there on as steeply as its ripple allows.

Published tables give the poles without saying how they were found. What reproduces every printed digit of those for
-3.0103 dB at 1 rad/s, orders 3 to 9, is this: the loss departs from that of a Gaussian by ripples of equal
height, 0.1 dB from crest to trough, that begin with a crest or trough at DC; after n - 1 of them (DC not counted) the
loss runs through the middle of the ripple for the last time at 20 log10 2 = 6.0206 dB or 20 log10 4 = 12.0412 dB, and
leaves the Gaussian.

With x = w^2 the equation is linear in |D(jw)|^2 = 1 + x q(x) once the places of the ripples are known, so they are
exchanged as in Remez' algorithm: put |D|^2 through the wanted values at n - 1 places and at the end, take the turning
points of what results as the new places. From the places of a cosine five rounds reach the last digit at any order.
q is kept in Chebyshev polynomials on the Gaussian part, where they stay of one size; against thirty digits the poles
were measured to be right to 2e-15 up to order 20 and to 1.4e-14 at order 60.
"""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from collections.abc import Callable
from functools import lru_cache
from typing import Any, ClassVar, Final

import numpy as np
from numpy.polynomial import chebyshev
from numpy.typing import NDArray

from symnet.errors import Fault, NotationError
from symnet.shape.families.arithmetic import context
from symnet.shape.families.curves import last_crossing
from symnet.shape.families.family import Family, Points, Roots, checked_order, member
from symnet.shape.families.prototype import W3DB, Prototype, Reference

__all__ = ["GAUSSIAN_TO_6_DB", "GAUSSIAN_TO_12_DB", "gaussian_to_6db", "gaussian_to_12db"]

_RIPPLE_DB: Final = 0.1  # from crest to trough
_DB_PER_NEPER: Final = 10 / math.log(10)  # of a squared magnitude
_MOST_ROUNDS: Final = 40
_SMALLEST_ORDER: Final = 2  # order 1 has no ripple to set


def gaussian_to_6db(order: int) -> Prototype:
    """The low-pass that is Gaussian within +-0.05 dB down to 6.0206 dB, -3.0103 dB at w = 1 rad/s.

    Definition: 20 log10 |H(0)/H(jw)| = c w^2 + e(w), where e turns n - 1 times for 0 < w < w_L, alternately to +-0.1
    dB and to 0 (+ for an odd order), and is +-0.05 dB at w_L, where the loss is 20 log10 2 dB. Order 2 is too low to
    stay within the ripple up to there: the loss is above it once more, by 0.06 dB.

    Source: the tables that go by this name (A. I. Zverev, Handbook of Filter Synthesis, Wiley 1967, and reprints);
    the definition is what their digits obey.

    Raises :class:`~symnet.errors.NotationError` for an order that is no whole number from 2 upwards and
    :class:`~symnet.errors.LimitError` for one beyond 60.

    >>> for p in gaussian_to_6db(4).poles[::2]:
    ...     print(f"{p:.4f}")
    -0.7940+0.5029j
    -0.6304+1.5407j
    """
    return member(GAUSSIAN_TO_6_DB, _checked(order), ())


def gaussian_to_12db(order: int) -> Prototype:
    """The low-pass that is Gaussian within +-0.05 dB down to 12.0412 dB, -3.0103 dB at w = 1 rad/s.

    As :func:`gaussian_to_6db`, with the loss 20 log10 4 dB at w_L. Orders 2 and 3 are too low to stay within the
    ripple up to there: the loss is above it once more, by 1.12 and 0.12 dB.

    >>> for p in gaussian_to_12db(5).poles[::2]:
    ...     print(f"{p:.4f}")
    -0.8131+0.0000j
    -0.8075-0.9973j
    -0.7153-2.0532j
    """
    return member(GAUSSIAN_TO_12_DB, _checked(order), ())


def _checked(order: int) -> int:
    if checked_order(order) < _SMALLEST_ORDER:
        raise NotationError(
            Fault("a transitional Gaussian filter begins with order 2", hint="order 1 has one shape only")
        )
    return order


class _ToLevel(Family):
    source: ClassVar[str] = (
        "A. I. Zverev, Handbook of Filter Synthesis, Wiley 1967; defined by the digits of the tables"
    )
    #: |H(0)/H(jw)| at the end of the Gaussian part.
    ratio: ClassVar[float]

    def has_order(self, order: int) -> bool:
        """From order 2 on."""
        return order >= _SMALLEST_ORDER

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """By exchange of the turning points; see the module."""
        return _poles(order, 20 * math.log10(self.ratio)), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same in more digits."""
        return _precise(m, order, self.ratio), []

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """-3.0103 dB at 1 rad/s, as the tables have it."""
        return (Reference.named(W3DB, 1.0),)

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """The loss in dB."""
        sign = "+" if order % 2 else "-"
        return (
            f"-20 log10 |H(jw)| = c w^2 {sign} 0.05 dB, within 0.05 dB in {order} equal ripples"
            f" down to {20 * math.log10(self.ratio):.4f} dB"
        )


class _To6Db(_ToLevel):
    name: ClassVar[str] = "Gaussian to 6 dB"
    ratio: ClassVar[float] = 2.0


class _To12Db(_ToLevel):
    name: ClassVar[str] = "Gaussian to 12 dB"
    ratio: ClassVar[float] = 4.0


@lru_cache(maxsize=128)
def _poles(order: int, level: float) -> tuple[complex, ...]:
    square, _ = _squared_magnitude(order, level)
    poles = [complex(-np.sqrt(-x)) for x in _roots(square)]
    every = [q for p in poles for q in ((p, p.conjugate()) if p.imag else (p,))]
    w3 = last_crossing(every) or math.nan
    return tuple(p / w3 for p in every)


def _roots(square: NDArray[np.float64]) -> NDArray[np.complex128]:
    """The roots x of |D|^2, of each pair the lower one, after two Newton steps; a real one stays real."""
    t = chebyshev.chebroots(square).astype(complex)
    t = np.where(np.abs(t.imag) < 1e-9, t.real.astype(complex), t)
    derivative = chebyshev.chebder(square)
    for _ in range(2):
        t = t - chebyshev.chebval(t, square) / chebyshev.chebval(t, derivative)
    return np.asarray((t[t.imag <= 0] + 1) / 2, dtype=np.complex128)


def _squared_magnitude(order: int, level: float) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """|D|^2 over t = 2x - 1 in Chebyshev polynomials, x = w^2 being 1 at the end of the Gaussian part; turning points x."""
    sign = 1 if order % 2 else -1
    slope = level - sign * _RIPPLE_DB / 2  # c of the definition
    offsets = np.where(np.arange(order - 1) % 2, 0.0, sign * _RIPPLE_DB)
    angles = np.arange(1, order) * math.pi / (2 * order)
    places = (np.sin(angles) / math.sin((2 * order - 1) * math.pi / (4 * order))) ** 2
    for _ in range(_MOST_ROUNDS):
        x = np.append(places, 1.0)
        loss = np.append(slope * places + offsets, level)
        q = np.linalg.solve(chebyshev.chebvander(2 * x - 1, order - 1), np.expm1(loss / _DB_PER_NEPER) / x)
        square = np.asarray(chebyshev.chebadd([1.0], chebyshev.chebmul([0.5, 0.5], q)), dtype=np.float64)
        new = _turning_points(square, slope)[: order - 1]
        moved = float(np.abs(new - places).max())
        places = new
        if moved < 1e-14:
            break
    return square, places


def _turning_points(square: NDArray[np.float64], slope: float) -> NDArray[np.float64]:
    """Where the loss 10 log10 |D|^2 has the slope of the Gaussian: x > 0, ascending."""
    rising = 2 * _DB_PER_NEPER * chebyshev.chebder(square)
    t = chebyshev.chebroots(chebyshev.chebsub(rising, slope * square))
    x = (t[np.abs(t.imag) < 1e-9].real + 1) / 2
    return np.sort(x[x > 1e-9])


def _precise(m: Any, order: int, ratio: float) -> list[tuple[Any, Any]]:
    """The same exchange in as many digits as ``m`` has, from the places that doubles found; powers of x will do here."""
    own = context(m.dps + 2 * order + 10)
    sign = 1 if order % 2 else -1
    ripple = own.mpf(sign) / 10
    per_neper = 10 / own.ln(10)
    level = 20 * own.log10(ratio)
    slope = level - ripple / 2
    square, turning = _squared_magnitude(order, float(level))
    places = [own.mpf(x) for x in turning]

    def newton(start: Any, f: Callable[[Any], tuple[Any, Any]]) -> Any:
        x = start
        for _ in range(own.prec):
            value, derivative = f(x)
            x, before = x - value / derivative, x
            if abs(x - before) < abs(x) * own.mpf(10) ** (-m.dps):
                break
        return x

    for _ in range(_MOST_ROUNDS):
        x = [*places, own.mpf(1)]
        loss = [slope * p + (0 if k % 2 else ripple) for k, p in enumerate(places)] + [level]
        rows = own.matrix([[u**k for k in range(order)] for u in x])
        q = own.lu_solve(
            rows, own.matrix([own.expm1(a / per_neper) / u for a, u in zip(loss, x, strict=True)])
        )
        p0 = [*list(q)[::-1], own.mpf(1)]  # highest power first
        p1 = [c * (order - k) for k, c in enumerate(p0[:-1])]
        p2 = [c * (order - 1 - k) for k, c in enumerate(p1[:-1])]

        def slopes(u: Any, p0: Any = p0, p1: Any = p1, p2: Any = p2) -> tuple[Any, Any]:
            rising = own.polyval(p1, u)
            return (
                per_neper * rising - slope * own.polyval(p0, u),
                per_neper * own.polyval(p2, u) - slope * rising,
            )

        new = [newton(u, slopes) for u in places]
        moved = max(abs(u - v) for u, v in zip(new, places, strict=True))
        places = new
        if moved < own.mpf(10) ** (-m.dps):
            break
    edge = newton(own.mpf(0.5), lambda u: (own.polyval(p0, u) - 2, own.polyval(p1, u)))
    found = []
    for start in _roots(square):
        root = newton(own.mpc(start), lambda u: (own.polyval(p0, u), own.polyval(p1, u)))
        s = -own.sqrt(-root / edge)
        found += [(s.real, s.imag), (s.real, -s.imag)] if start.imag else [(s.real, own.mpf(0))]
    return found


GAUSSIAN_TO_6_DB: Final = _To6Db()
GAUSSIAN_TO_12_DB: Final = _To12Db()
