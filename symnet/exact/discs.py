"""Discs that are proven to hold one root each, of a polynomial with integer coefficients and simple roots.

p and p' are computed exactly at dyadic points, so that clusters cost sweeps, never correctness. The proof: a disc
around z of radius n*|p(z)/p'(z)| holds at least one root, since p'/p is the sum of the n terms 1/(z - root), one
of which is at least as large as their mean. So n such discs that do not overlap hold exactly one root each. The
set of discs is made symmetric about the real axis (and, for a polynomial in s^2, about the imaginary axis): a
disc centred on an axis then holds a root that lies on that axis exactly, and conjugates are exactly conjugate.

Everything before the proof (starts, iteration, which point belongs on an axis) may be wrong without harm: the
proof then fails and the iteration goes on with twice the bits.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from symnet.errors import Fault, LimitError
from symnet.exact.aberth import Approximations, approximate, repulsion
from symnet.exact.dense import Integers
from symnet.exact.doubles import scaled

__all__ = ["Point", "gap", "images", "isolate", "power_of_two", "refine"]

_FIRST_BITS: Final = 80  # of a coordinate: a double and a margin
_MOST_BITS: Final = 1 << 14
_MOST_SWEEPS: Final = 200
_MOST_STEPS: Final = 40
_BITS_PER_DIGIT: Final = math.log2(10)
_DOUBLE: Final = 2.0**-53
_SLACK: Final = 1e-6  # added to a log2 of a radius, far above the rounding of the log itself


@dataclass(slots=True)
class Point:
    """The dyadic point (x + j*y) / 2^shift, shift >= 0, and log2 of n*|p/p'| there once it is known."""

    x: int
    y: int
    shift: int
    log_radius: float = math.inf

    @property
    def log_size(self) -> float:
        """log2 of the distance from the origin."""
        return math.log2(self.x * self.x + self.y * self.y) / 2 - self.shift

    def as_complex(self, scale: int) -> complex:
        """The point times 2^-scale as a double."""
        return complex(scaled(self.x, -self.shift - scale), scaled(self.y, -self.shift - scale))


def isolate(p: Integers, in_square: bool, digits: int) -> list[Point]:
    """Proven points for all roots of p, one of each set of mirror images, with x >= 0 and y >= 0 where mirrored.

    ``in_square`` says that p is a polynomial in s^2. p must be square-free with p(0) != 0. Each coordinate that is
    not exactly zero has a relative error below 10^-digits.
    """
    near = approximate(p)
    points = [_point(z, near.scale, _FIRST_BITS) for z in near.points]
    bits = _FIRST_BITS
    while bits <= _MOST_BITS:
        points = _separate(p, points, near, bits)
        chosen = _symmetric(points, in_square)
        proven = [good for point in chosen if (good := refine(p, point, digits)) is not None]
        everyone = [image for point in proven for image in images(point, in_square)]
        if len(everyone) == len(p) - 1 and _disjoint(everyone, near.scale):
            return proven
        bits *= 2
    raise LimitError(
        Fault(
            f"The roots of a polynomial of degree {len(p) - 1} lie too close together to be told apart.",
            "Check the values of the parts: some of them are nearly, but not quite, such that poles coincide.",
        )
    )


def _point(z: complex, scale: int, bits: int) -> Point:
    """The point 2^scale * z with ``bits`` bits."""
    shift = bits - math.frexp(max(abs(z.real), abs(z.imag)))[1]
    x, y = int(math.ldexp(z.real, shift)), int(math.ldexp(z.imag, shift))
    places = min(0, shift - scale)
    return Point(_shifted(x, -places), _shifted(y, -places), shift - scale - places)


def _moved(point: Point, bits: int, step: tuple[int, int, int] = (0, 0, 0)) -> Point:
    """The point minus the step (u + j*v)*2^e, rounded to ``bits`` bits."""
    u, v, e = step
    size = max(abs(point.x), abs(point.y)).bit_length() - point.shift
    shift = max(0, bits - size)
    return Point(
        _shifted(point.x, shift - point.shift) - _shifted(u, shift + e),
        _shifted(point.y, shift - point.shift) - _shifted(v, shift + e),
        shift,
    )


def _shifted(number: int, places: int) -> int:
    return number << places if places >= 0 else number >> -places


def _evaluate(p: Integers, point: Point) -> tuple[int, int, int, int]:
    """P and p' at a point, exactly: real and imaginary parts, p times 2^(n*shift), p' times 2^((n-1)*shift)."""
    x, y, shift = point.x, point.y, point.shift
    up = 0
    if y == 0:
        value = slope = 0
        for c in reversed(p):
            slope = slope * x + value
            value = value * x + (c << up)
            up += shift
        return value, 0, slope, 0
    a = b = da = db = 0
    for c in reversed(p):
        da, db = da * x - db * y + a, da * y + db * x + b
        a, b = a * x - b * y + (c << up), a * y + b * x
        up += shift
    return a, b, da, db


def _newton(p: Integers, point: Point, bits: int) -> tuple[int, int, int] | None:
    """p/p' at the point as (u + j*v)*2^e to more than ``bits`` bits; None if p' = 0. Sets the point's radius."""
    a, b, c, d = _evaluate(p, point)
    if not (c or d):
        point.log_radius = math.inf
        return None
    if not (a or b):
        point.log_radius = -math.inf
        return 0, 0, 0
    # Leading digits carry the quotient: cutting both to bits + 40 bits costs less than 2^-38 of it.
    cut_value = max(0, max(a.bit_length(), b.bit_length()) - bits - 40)
    cut_slope = max(0, max(c.bit_length(), d.bit_length()) - bits - 40)
    a, b, c, d = a >> cut_value, b >> cut_value, c >> cut_slope, d >> cut_slope
    real, imag, norm = a * c + b * d, b * c - a * d, c * c + d * d
    up = max(0, norm.bit_length() - max(real.bit_length(), imag.bit_length()) + bits + 40)
    u, v = (real << up) // norm, (imag << up) // norm
    e = cut_value - cut_slope - up - point.shift
    point.log_radius = math.log2(u * u + v * v) / 2 + e + math.log2(len(p) - 1) + _SLACK
    return u, v, e


def _separate(p: Integers, points: list[Point], near: Approximations, bits: int) -> list[Point]:
    """The points moved by Aberth's iteration, p and p' exact, until their discs do not overlap."""
    points = list(points)
    steps = [_newton(p, point, bits) for point in points]
    move = bits > _FIRST_BITS  # coming back with more bits means that what there was did not do
    for _ in range(_MOST_SWEEPS):
        if not move and _disjoint(points, near.scale):
            break
        move = False
        largest = -math.inf
        for i, point in enumerate(points):
            here = point.as_complex(near.scale)
            step = near.tamed(here, _repelled(points, i, steps[i], near.scale))
            if point.log_radius == -math.inf or step == 0:
                continue
            size = math.frexp(abs(step))[1]
            largest = max(largest, size + near.scale - point.log_size)
            u, v = (int(math.ldexp(part, 60 - size)) for part in (step.real, step.imag))
            points[i] = _moved(point, bits, (u, v, size - 60 + near.scale))
            steps[i] = _newton(p, points[i], bits)
        if largest < 8 - bits:  # nothing moves at this precision
            break
    return points


def _repelled(points: list[Point], i: int, step: tuple[int, int, int] | None, scale: int) -> complex:
    """Aberth's step at point i, in units of 2^scale: Newton's, with the other points pushing it away."""
    if step is None:
        return points[i].as_complex(scale) * complex(1e-3, 1e-3)
    u, v, e = step
    newton = complex(scaled(u, e - scale), scaled(v, e - scale))
    nearly = 1 - newton * repulsion(
        [gap(points[i], other, scale) for other in points if other is not points[i]]
    )
    return newton / nearly if nearly else newton


def gap(a: Point, b: Point, scale: int) -> complex:
    """A - b, subtracted exactly and then rounded, in units of 2^scale."""
    shift = max(a.shift, b.shift)
    x = (a.x << (shift - a.shift)) - (b.x << (shift - b.shift))
    y = (a.y << (shift - a.shift)) - (b.y << (shift - b.shift))
    return complex(scaled(x, -shift - scale), scaled(y, -shift - scale))


def _disjoint(points: Sequence[Point], scale: int) -> bool:
    """True when it is certain that no two of the discs overlap, with some room between them."""
    if any(point.log_radius == math.inf for point in points):
        return False
    discs = [
        (z, 2 * power_of_two(point.log_radius - scale) + 4 * _DOUBLE * abs(z), point)
        for point in points
        for z in (point.as_complex(scale),)
    ]
    for i, (z, reach, point) in enumerate(discs):
        for other_z, other_reach, other in discs[:i]:
            if abs(z - other_z) <= reach + other_reach:  # doubles cannot tell: the exact distance can
                shift = max(point.shift, other.shift)
                x = (point.x << (shift - point.shift)) - (other.x << (shift - other.shift))
                y = (point.y << (shift - point.shift)) - (other.y << (shift - other.shift))
                square = x * x + y * y
                larger = max(point.log_radius, other.log_radius)
                if not square or math.log2(square) / 2 - shift <= larger + 1.5:
                    return False
    return True


def power_of_two(exponent: float) -> float:
    """2^exponent as a double, never rounded down to 0."""
    if exponent == -math.inf:
        return 0.0
    return max(2.0**exponent, 5e-324) if exponent < 1023 else math.inf


def _symmetric(points: list[Point], in_square: bool) -> list[Point]:
    """One point of each set of mirror images, put on the axis where its disc meets it."""
    chosen: list[Point] = []
    for point in points:
        x = 0 if in_square and _meets(point.x, point) else point.x
        y = 0 if _meets(point.y, point) else point.y
        if y >= 0 and (x >= 0 or not in_square) and (x or y):
            chosen.append(Point(x, y, point.shift))
    return chosen


def _meets(coordinate: int, point: Point) -> bool:
    return not coordinate or math.log2(abs(coordinate)) - point.shift <= point.log_radius


def images(point: Point, in_square: bool) -> list[Point]:
    """The point and its mirror images in the real axis and, for a polynomial in s^2, in the imaginary axis.

    Conjugates follow each other, the positive imaginary part first (points have y >= 0).
    """
    corners = [(point.x, point.y)]
    if point.y:
        corners.append((point.x, -point.y))
    if in_square and point.x:
        corners += [(-x, y) for x, y in corners]
    return [Point(x, y, point.shift, point.log_radius) for x, y in corners]


def refine(p: Integers, point: Point, digits: int, absolute: float = math.inf) -> Point | None:
    """The point after Newton steps until each of its coordinates is good to ``digits``; None if they stray.

    ``absolute`` is a log2 that the radius must fall below as well.
    """
    bits = _FIRST_BITS
    start = point.log_size
    for _ in range(_MOST_STEPS):
        step = _newton(p, point, bits)
        smallest = min(math.log2(abs(c)) for c in (point.x, point.y) if c) - point.shift
        wanted = min(smallest - digits * _BITS_PER_DIGIT, absolute)
        if point.log_radius <= wanted:
            return point
        if step is None or point.log_radius > point.log_size or abs(point.log_size - start) > 1:
            return None
        good = point.log_size - point.log_radius
        bits = max(_FIRST_BITS, math.ceil(min(2 * good, point.log_size - wanted)) + 24)
        point = _moved(point, bits, step)
        if not (point.x or point.y):
            return None
    return None
