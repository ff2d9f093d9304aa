"""Gaussian to 6 dB and to 12 dB: a bell curve down to that loss, and from there on as steeply as its ripple allows.

Published tables give the poles without saying how they were found. What reproduces every printed digit of those for
-3.0103 dB at 1 rad/s, orders 3 to 9, is this: the loss departs from that of a Gaussian by ripples of equal
height, 0.1 dB from crest to trough, that begin with a crest or trough at DC; after n - 1 of them (DC not counted) the
loss runs through the middle of the ripple for the last time at 20 log10 2 = 6.0206 dB or 20 log10 4 = 12.0412 dB, and
leaves the Gaussian.

With x = w^2 the equation is linear in |D(jw)|^2 = 1 + x q(x) once the places of the ripples are known, so they are
exchanged as in Remez' algorithm: put |D|^2 through the wanted values at n - 1 places and at the end, take the turning
points of what results as the new places. From the places of a cosine five rounds reach the last digit at any order.
q is kept in Chebyshev polynomials on the Gaussian part, where they stay of one size.
"""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from functools import lru_cache
from typing import ClassVar, Final

import numpy as np
from numpy.polynomial import chebyshev
from numpy.typing import NDArray

from symnet.errors import Fault, NotationError
from symnet.shape.families.curves import last_crossing
from symnet.shape.families.family import Family, Roots, checked_order, member
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
    square = _squared_magnitude(order, level)
    x = (_polished(chebyshev.chebroots(square).astype(complex), square) + 1) / 2
    upper = x[x.imag <= 0]  # of each pair one, and a real x < 0 of an odd order
    poles = [complex(-np.sqrt(-r)) for r in upper]
    every = [q for p in poles for q in ((p, p.conjugate()) if p.imag else (p,))]
    w3 = last_crossing(every) or math.nan
    return tuple(p / w3 for p in every)


def _squared_magnitude(order: int, level: float) -> NDArray[np.float64]:
    """|D|^2 over t = 2x - 1 in Chebyshev polynomials, where x = w^2 is 1 at the end of the Gaussian part."""
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
    return square


def _turning_points(square: NDArray[np.float64], slope: float) -> NDArray[np.float64]:
    """Where the loss 10 log10 |D|^2 has the slope of the Gaussian: x > 0, ascending."""
    rising = 2 * _DB_PER_NEPER * chebyshev.chebder(square)
    t = chebyshev.chebroots(chebyshev.chebsub(rising, slope * square))
    x = (t[np.abs(t.imag) < 1e-9].real + 1) / 2
    return np.sort(x[x > 1e-9])


def _polished(t: NDArray[np.complex128], square: NDArray[np.float64]) -> NDArray[np.complex128]:
    """The roots after two Newton steps; a real one stays real."""
    t = np.where(np.abs(t.imag) < 1e-9, t.real.astype(complex), t)
    derivative = chebyshev.chebder(square)
    for _ in range(2):
        t = t - chebyshev.chebval(t, square) / chebyshev.chebval(t, derivative)
    return t


GAUSSIAN_TO_6_DB: Final = _To6Db()
GAUSSIAN_TO_12_DB: Final = _To12Db()
