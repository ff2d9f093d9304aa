"""Newton's step at a dyadic point, in as many bits as it takes, with a proven bound on how far a root can be.

p and p' are evaluated by Horner's scheme in fixed point. The point is divided by a power of two that brings it
into 1/2 <= |t| <= 1 and the coefficients take that power up, each cut to ``work`` bits below the largest. Every
cut costs less than one unit of the last place, and with |t| <= 1 no error grows on its way down: with n + 1
coefficients p is good to 2.5 (n + 1) units and p' to 2.5 (n + 1)^2. Twice as much is charged here. So the cost
follows the digits that are wanted and the condition of the root, not the length of the coefficients. In exact
integers, which grow by the length of the point with every coefficient, a step takes 7 to 12 times as long at
orders 100 and 200 (RC and LC ladders).

The proof: p'/p is the sum of the n terms 1/(z - root), one of which is at least as large as their mean, so a disc
around z of radius n*|p(z)/p'(z)| holds at least one root. The radius here is that, errors of p and p' included.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Final, TypeAlias

from symnet.exact.dense import Integers
from symnet.exact.doubles import scaled

__all__ = ["Newton", "Point", "Step", "shifted"]

#: (u + j*v) * 2^e
Step: TypeAlias = tuple[int, int, int]

_SLACK: Final = 1e-6  # added to a log2 of a radius, far above the rounding of the log itself
_MARGIN: Final = 40  # bits beyond those that are wanted of a quotient
_GRAIN: Final = 64  # working lengths are multiples of it, so that few rows of coefficients are made


@dataclass(slots=True)
class Point:
    """The dyadic point (x + j*y) / 2^shift, shift >= 0, and log2 of the radius of its disc once it is known."""

    x: int
    y: int
    shift: int
    log_radius: float = math.inf
    lost: int | None = None
    """The bits that an evaluation nearby has lost, by which the working length must exceed those wanted."""

    @property
    def log_size(self) -> float:
        """log2 of the distance from the origin."""
        return math.log2(self.x * self.x + self.y * self.y) / 2 - self.shift

    def as_complex(self, scale: int) -> complex:
        """The point times 2^-scale as a double."""
        return complex(scaled(self.x, -self.shift - scale), scaled(self.y, -self.shift - scale))

    def moved(self, bits: int, step: Step = (0, 0, 0)) -> Point:
        """The point minus the step, rounded to ``bits`` bits; of its disc nothing is known."""
        u, v, e = step
        size = max(abs(self.x), abs(self.y)).bit_length() - self.shift
        shift = max(0, bits - size)
        return Point(
            shifted(self.x, shift - self.shift) - shifted(u, shift + e),
            shifted(self.y, shift - self.shift) - shifted(v, shift + e),
            shift,
            lost=self.lost,
        )


def shifted(number: int, places: int) -> int:
    """The number times 2^places, rounded down."""
    return number << places if places >= 0 else number >> -places


class Newton:
    """Newton's steps for one polynomial of degree 1 or more.

    >>> point = Point(3, 0, 1)                       # 1.5, for the root of s^2 - 2
    >>> u, v, e = Newton((-2, 0, 1)).step(point, 80, 60)
    >>> round(u * 2.0**e, 12), round(2.0**point.log_radius, 4)     # 0.25/3, and twice that
    (0.083333333333, 0.1667)
    """

    def __init__(self, p: Integers) -> None:
        self._p = p
        self._degree = len(p) - 1
        self._lengths = [c.bit_length() for c in p]
        self._rows: dict[tuple[int, int], list[int]] = {}

    def step(self, point: Point, bits: int, enough: int) -> Step | None:
        """p/p' at the point, and the radius of its disc set; None where p' is too near 0 to be divided by.

        The error of the step is below the point's size times 2^-bits, or below the step times 2^-enough.
        """
        half = (point.x * point.x + point.y * point.y).bit_length() + 1 >> 1
        octave = half - point.shift  # |point| <= 2^octave
        error = 5 * len(self._p)  # of p, in units of the last place
        slope_error = error * len(self._p)
        work = _whole(bits + (2 * _GRAIN if point.lost is None else point.lost))
        while True:
            a, b, c, d = _horner(self._row(octave, work), point.x, point.y, half)
            value = _log2(max(abs(a), abs(b)) + error)
            slope = _log2(max(abs(c), abs(d)))
            if slope > math.log2(slope_error) + 2:
                # What the errors add to the step: as a share of the size of the point, and of the step.
                of_p, of_slope = math.log2(error) - slope, math.log2(slope_error) - slope
                absolute = max(of_p + math.log2(self._degree), value - slope + of_slope)
                relative = max(of_p + slope - value, of_slope)
                missing = min(absolute + bits, relative + enough) + 2
                if missing <= 0:
                    break
                work = _whole(work + missing)
            elif work > self._longest(octave, half):
                point.log_radius = math.inf
                return None
            else:
                work *= 2
        point.lost = work + math.ceil(of_p + math.log2(self._degree)) + 2
        least_slope = math.isqrt(c * c + d * d) - slope_error
        largest_value = math.isqrt(a * a + b * b) + 1 + error
        radius = math.log2(largest_value) - math.log2(least_slope) + math.log2(self._degree)
        point.log_radius = radius + octave + _SLACK
        u, v, e = _quotient((a, b), (c, d), bits + _MARGIN)
        return u, v, e + octave

    def _row(self, octave: int, work: int) -> list[int]:
        """Coefficients of p(2^octave * t) in descending powers, the largest of ``work`` bits."""
        row = self._rows.get((octave, work))
        if row is None:
            top = max(length + k * octave for k, length in enumerate(self._lengths) if length)
            row = [shifted(c, k * octave + work - top) for k, c in enumerate(self._p)]
            while row[-1] in {0, -1}:  # below the last place; what is cut off so is less than one unit still
                row.pop()
            row.reverse()
            self._rows[octave, work] = row
        return row

    def _longest(self, octave: int, half: int) -> int:
        """A working length at which p' is exact."""
        ends = [length + k * octave for k, length in enumerate(self._lengths) if length]
        return max(ends) - min(ends) + max(self._lengths) + len(self._p) * (half + 8)


def _whole(work: float) -> int:
    return _GRAIN * math.ceil(work / _GRAIN)


def _log2(number: int) -> float:
    return math.log2(number) if number else -math.inf


def _horner(row: list[int], x: int, y: int, half: int) -> tuple[int, int, int, int]:
    """P and p' at (x + j*y) / 2^half, real and imaginary parts, the coefficients in descending powers."""
    if y == 0:
        value = slope = 0
        for c in row:
            slope = (slope * x >> half) + value
            value = (value * x >> half) + c
        return value, 0, slope, 0
    a = b = da = db = 0
    for c in row:
        da, db = (da * x - db * y >> half) + a, (da * y + db * x >> half) + b
        a, b = (a * x - b * y >> half) + c, a * y + b * x >> half
    return a, b, da, db


def _quotient(value: tuple[int, int], slope: tuple[int, int], bits: int) -> Step:
    """value/slope, complex, to more than ``bits`` bits, from the leading digits of both."""
    a, b, cut_value = _leading(*value, bits)
    c, d, cut_slope = _leading(*slope, bits)
    real, imag, norm = a * c + b * d, b * c - a * d, c * c + d * d
    up = max(0, norm.bit_length() - max(abs(real), abs(imag)).bit_length() + bits)
    return (real << up) // norm, (imag << up) // norm, cut_value - cut_slope - up


def _leading(a: int, b: int, bits: int) -> tuple[int, int, int]:
    cut = max(0, max(abs(a), abs(b)).bit_length() - bits)
    return a >> cut, b >> cut, cut
