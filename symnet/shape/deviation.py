"""How far one H stands from another over a band: the largest difference in dB and in degrees, proven.

A grid reads a curve between its points by faith; a narrow resonance may stand there. G = H'/H is a rational function
with exact coefficients, so on the jw axis |G|^2 and the slope of its phase are exact rational functions of x = w^2
(:mod:`symnet.response.frequency`). Both turn at real roots of exact polynomials, which are isolated one and all: the
largest difference lies at one of them or at an end of the band. While the real part of G has no root in the band and
is positive, the phase stays within 90 degrees, so that its arctangent is the phase itself, not one of its turns.

That is done up to degree 60 of those polynomials, half a second each then; what is beyond is read on a grid that is
dense around every pole and zero, and :attr:`Deviation.proven` is False.
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.errors import UndefinedError
from symnet.exact import dense
from symnet.exact.doubles import double
from symnet.exact.ratio import Ratio
from symnet.exact.roots import Root, roots
from symnet.response.frequency import delay_over_square, squared_magnitude
from symnet.shape.closed import nth_root

__all__ = ["Deviation", "Worst", "deviation", "grid"]

Floats: TypeAlias = NDArray[np.float64]

_MOST_PROVEN: Final = 60  # degree of a polynomial in w^2 whose roots are isolated (timing: half a second)
_DIGITS: Final = (
    20  # of a frequency at which a difference turns; the difference there is good to twice as many
)
_POINTS_PER_DECADE: Final = 60
_POINTS_AROUND: Final = 41  # a pole or zero, over three times its width to either side
_READ: Final = 1e-11  # dB or degrees: how well a difference is known at a point of the grid


@dataclass(frozen=True, slots=True)
class Worst:
    """A difference and the frequency at which it is largest: ``value`` in dB or degrees, signed; ``f`` in Hz."""

    value: float
    f: float


@dataclass(frozen=True, slots=True)
class Deviation:
    """The largest difference between H' and H over a band, counted as H' minus H.

    ``decibels`` is 20 log10 |H'/H|, infinite where one of them has a pole or zero in the band that the other has
    not; ``degrees`` is the phase of H'/H, of size 90 or more where it gets that far. ``points`` is the number of
    points of the grid it was read on, 0 when it is proven.
    """

    decibels: Worst
    degrees: Worst
    points: int = 0

    @property
    def proven(self) -> bool:
        """True when every turning point of both differences was isolated exactly."""
        return not self.points

    def stays_within(self, decibels: float, degrees: float) -> bool:
        """Whether both differences keep to these bounds; what was read on a grid, with its rounding added."""
        slack = 0.0 if self.proven else _READ
        return abs(self.decibels.value) + slack <= decibels and abs(self.degrees.value) + slack <= degrees


def deviation(G: Ratio, low: Fraction, high: Fraction, around: Iterable[Root] = ()) -> Deviation:
    """The largest |dB| and |phase| of G = H'/H for low <= w <= high in rad/s; ``around`` are poles and zeros.

    >>> one, tau = Fraction(1), Fraction(1, 100)
    >>> found = deviation(Ratio.of([1], [1, tau]), one, 10 * one)            # |G| falls, so the end is the worst
    >>> round(found.decibels.value, 5), round(found.degrees.value, 4), found.proven
    (-0.04321, -5.7106, True)
    >>> round(found.decibels.f * 2 * math.pi, 9)
    10.0
    """
    if G.is_zero:
        nothing = Worst(-math.inf, double(low) / (2 * math.pi))
        return Deviation(nothing, Worst(180.0, nothing.f))
    square = squared_magnitude(G)
    turning = _slope(square)
    delay = dense.primitive(delay_over_square(G).num)[1]
    if max(len(turning), len(delay)) - 1 > _MOST_PROVEN:
        return _read(G, grid(double(low), double(high), around))
    ends = low * low, high * high
    worst = max(
        (_at(_decibels(square, x), x) for x in (*ends, *_inside(turning, *ends))),
        key=lambda at: abs(at.value),
    )
    return Deviation(worst, _phase(G, delay, *ends))


def _slope(square: Ratio) -> dense.Integers:
    """The numerator of the derivative of a rational function."""
    num, den = (dense.primitive(p)[1] for p in (square.num, square.den))
    slope = dense.add(
        dense.multiply(dense.derivative(num), den), dense.multiply(num, dense.derivative(den)), -1
    )
    return dense.primitive([Fraction(c) for c in slope])[1]


def _inside(polynomial: dense.Integers, low: Fraction, high: Fraction) -> list[Fraction]:
    """The real roots between two bounds, in rising order."""
    if len(polynomial) <= 1:
        return []
    return sorted(r.real for r in roots(polynomial, _DIGITS) if r.is_real and low < r.real < high)


def _at(value: float, x: Fraction) -> Worst:
    return Worst(value, double(nth_root(x, 2)) / (2 * math.pi))


def _decibels(square: Ratio, x: Fraction) -> float:
    """10 log10 of the square; by its distance from 1, so that a small difference keeps its digits."""
    try:
        value = square.at(x)
    except UndefinedError:
        return math.inf
    if not value:
        return -math.inf
    if Fraction(1, 2) < value < 2:
        return 10 * math.log1p(double(value - 1)) / math.log(10)
    return 10 * (math.log10(value.numerator) - math.log10(value.denominator))


def _phase(G: Ratio, delay: dense.Integers, low: Fraction, high: Fraction) -> Worst:
    """The largest phase of P/Q, from the tangent of P times conjugate Q = A(x) + j w B(x)."""
    (even, odd), (other_even, other_odd) = (_halves(dense.primitive(p)[1]) for p in (G.num, G.den))
    real = dense.add(dense.multiply(even, other_even), (0, *dense.multiply(odd, other_odd)))
    imaginary = dense.add(dense.multiply(odd, other_even), dense.multiply(even, other_odd), -1)
    turned = _inside(real, low, high)
    if turned:
        return _at(90.0, turned[0])
    found = []
    for x in (low, high, *_inside(delay, low, high)):
        a, b = dense.value_at(real, x), dense.value_at(imaginary, x)
        if a <= 0:
            return _at(180.0 if a or not b else 90.0, x)
        found.append(_at(math.degrees(math.atan(double(nth_root(x, 2)) * double(b / a))), x))
    return max(found, key=lambda at: abs(at.value))


def _halves(p: dense.Integers) -> tuple[dense.Integers, dense.Integers]:
    """E and O of P(jw) = E(x) + j w O(x)."""
    even, odd = ([c * (-1) ** k for k, c in enumerate(half)] for half in (p[0::2], p[1::2]))
    return dense.trim(even), dense.trim(odd)


# -- on a grid --------------------------------------------------------------------------------------------------


def grid(low: float, high: float, around: Iterable[Root] = ()) -> Floats:
    """Angular frequencies from low to high, evenly spaced on a logarithmic axis, denser around poles and zeros.

    >>> w = grid(1.0, 100.0)
    >>> len(w), float(w[0]), float(w[-1])
    (201, 1.0, 100.0)
    """
    count = max(200, math.ceil(_POINTS_PER_DECADE * math.log10(high / low))) + 1
    pieces = [np.geomspace(low, high, count)]
    for root in around:
        size, width = abs(root.value), abs(root.value.real)
        if size and root.value.imag >= 0:
            centre = abs(root.value.imag) or size
            pieces.append(centre + max(width, 1e-6 * size) * np.linspace(-3, 3, _POINTS_AROUND))
            pieces.append(np.array([size]))
    w: Floats = np.unique(np.concatenate(pieces))
    inside: Floats = w[(w >= low) & (w <= high)]
    return inside


def _read(G: Ratio, w: Floats) -> Deviation:
    decibels = G.decibels(1j * w)
    values = G(1j * w)
    degrees = np.array([math.degrees(cmath.phase(value)) for value in values])
    k, i = int(np.argmax(np.abs(decibels))), int(np.argmax(np.abs(degrees)))
    f = w / (2 * math.pi)
    return Deviation(
        Worst(float(decibels[k]), float(f[k])), Worst(float(degrees[i]), float(f[i])), points=len(w)
    )
