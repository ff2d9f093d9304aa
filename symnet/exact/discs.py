"""Discs that are proven to hold one root each, of a polynomial with integer coefficients and simple roots.

The disc around each point, by :mod:`symnet.exact.newton`, holds at least one root. So n such discs that do not
overlap hold exactly one root each. Only points whose discs still overlap are moved, by Aberth's iteration with as
many bits as p needs there, so that a cluster costs sweeps, never correctness, and what stands alone costs nothing
more. The set of discs is made symmetric about the real axis (and, for a polynomial in s^2, about the imaginary
axis): a disc centred on an axis then holds a root that lies on that axis exactly, and conjugates are exactly
conjugate.

Everything before the proof (starts, iteration, which point belongs on an axis) may be wrong without harm: the
proof then fails and the iteration goes on with twice the bits.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.errors import Fault, LimitError
from symnet.exact.aberth import Approximations, approximate
from symnet.exact.dense import Integers
from symnet.exact.doubles import scaled
from symnet.exact.newton import Newton, Point, Step, shifted
from symnet.progress import Progress

Complexes: TypeAlias = NDArray[np.complex128]

__all__ = ["gap", "images", "isolate", "power_of_two", "refine"]

_FIRST_BITS: Final = 80  # of a coordinate: a double and a margin
_ENOUGH: Final = 30  # bits of a step of the iteration, which takes its other part from doubles
_CLOSE: Final = 2.0**-24  # of their size: points closer than that are subtracted exactly
_MOST_BITS: Final = 1 << 14
_MOST_SWEEPS: Final = 200
_MOST_STEPS: Final = 40
_BITS_PER_DIGIT: Final = math.log2(10)
_DOUBLE: Final = 2.0**-53


def isolate(p: Integers, in_square: bool, digits: int) -> list[Point]:
    """Proven points for all roots of p, one of each set of mirror images, with x >= 0 and y >= 0 where mirrored.

    ``in_square`` says that p is a polynomial in s^2. p must be square-free with p(0) != 0. Each coordinate that is
    not exactly zero has a relative error below 10^-digits.
    """
    newton = Newton(p)
    quick = approximate(p, quick=True)
    points = [_point(z, quick.scale, _FIRST_BITS) for z in quick.points]
    _steps(newton, points, _FIRST_BITS)  # puts a disc about each
    if points and not _crowded(points, quick.scale):  # else their symmetry could hold the iteration fast
        found = _proven(p, newton, points, quick.scale, in_square=in_square, digits=digits)
        if found is not None:
            return found
    near = approximate(p)
    points = [_point(z, near.scale, _FIRST_BITS) for z in near.points]
    bits = _FIRST_BITS
    while bits <= _MOST_BITS:
        with Progress("finding roots", "roots apart", len(points)) as at:
            points = _separate(newton, points, near, bits, at)
        found = _proven(p, newton, points, near.scale, in_square=in_square, digits=digits)
        if found is not None:
            return found
        bits *= 2
    raise LimitError(
        Fault(
            f"The roots of a polynomial of degree {len(p) - 1} lie too close together to be told apart.",
            "Check the values of the parts: some of them are nearly, but not quite, such that poles coincide.",
        )
    )


def _proven(
    p: Integers, newton: Newton, points: list[Point], scale: int, *, in_square: bool, digits: int
) -> list[Point] | None:
    """One point of each set of mirror images, refined; None unless all roots are there, each in a disc of its own."""
    chosen = _symmetric(points, in_square)
    proven = [good for point in chosen if (good := refine(newton, point, digits)) is not None]
    everyone = [image for point in proven for image in images(point, in_square)]
    return proven if len(everyone) == len(p) - 1 and not _crowded(everyone, scale) else None


def _point(z: complex, scale: int, bits: int) -> Point:
    """The point 2^scale * z with ``bits`` bits."""
    shift = bits - math.frexp(max(abs(z.real), abs(z.imag)))[1]
    x, y = int(math.ldexp(z.real, shift)), int(math.ldexp(z.imag, shift))
    places = min(0, shift - scale)
    return Point(shifted(x, -places), shifted(y, -places), shift - scale - places)


def _separate(
    newton: Newton, points: list[Point], near: Approximations, bits: int, at: Progress
) -> list[Point]:
    """The points moved by Aberth's iteration until their discs do not overlap; those that stand alone stay."""
    points = list(points)
    steps = _steps(newton, points, bits)
    z = np.array([point.as_complex(near.scale) for point in points])
    for _ in range(_MOST_SWEEPS):
        moved = False
        crowded = _crowded(points, near.scale)
        for i in crowded:
            at(len(points) - len(crowded))
            here = complex(z[i])
            step = near.tamed(here, _repelled(points, z, i, steps[i], near.scale))
            if step == 0:
                continue
            size = math.frexp(abs(step))[1]
            moved |= size + near.scale - points[i].log_size >= 8 - bits
            u, v = (int(math.ldexp(part, 60 - size)) for part in (step.real, step.imag))
            points[i] = points[i].moved(bits, (u, v, size - 60 + near.scale))
            steps[i] = newton.step(points[i], bits, _ENOUGH)
            z[i] = points[i].as_complex(near.scale)
        if not moved:  # either all discs are apart, or nothing moves at this precision
            break
    return points


def _steps(newton: Newton, points: list[Point], bits: int) -> list[Step | None]:
    """Newton's step at every point; of two that are each other's conjugate only one is asked."""
    steps: list[Step | None] = []
    known: dict[tuple[int, int, int], int] = {}
    for k, point in enumerate(points):
        twin = known.get((point.x, -point.y, point.shift)) if point.y else None
        if twin is None:
            known[point.x, point.y, point.shift] = k
            steps.append(newton.step(point, bits, _ENOUGH))
            continue
        point.log_radius, point.lost = points[twin].log_radius, points[twin].lost
        step = steps[twin]
        steps.append(None if step is None else (step[0], -step[1], step[2]))
    return steps


def _repelled(points: list[Point], z: Complexes, i: int, step: Step | None, scale: int) -> complex:
    """Aberth's step at point i, in units of 2^scale: Newton's, with the other points pushing it away."""
    if step is None:
        return complex(z[i]) * complex(1e-3, 1e-3)
    u, v, e = step
    newton = complex(scaled(u, e - scale), scaled(v, e - scale))
    gaps = z[i] - z
    for k in np.flatnonzero(abs(gaps) <= _CLOSE * abs(z[i])):
        gaps[k] = gap(points[i], points[k], scale)
    with np.errstate(over="ignore", invalid="ignore"):
        nearly = 1 - newton * complex((1 / gaps[gaps != 0]).sum())
    return newton / nearly if nearly else newton


def gap(a: Point, b: Point, scale: int) -> complex:
    """A - b, subtracted exactly and then rounded, in units of 2^scale."""
    shift = max(a.shift, b.shift)
    x = (a.x << (shift - a.shift)) - (b.x << (shift - b.shift))
    y = (a.y << (shift - a.shift)) - (b.y << (shift - b.shift))
    return complex(scaled(x, -shift - scale), scaled(y, -shift - scale))


def _crowded(points: Sequence[Point], scale: int) -> list[int]:
    """The points whose discs may overlap another disc, or come near it."""
    z = np.array([point.as_complex(scale) for point in points])
    size = abs(z)
    reach = np.array([2 * power_of_two(point.log_radius - scale) for point in points]) + 4 * _DOUBLE * size
    distance = abs(z[:, None] - z)
    near = distance <= reach[:, None] + reach
    np.fill_diagonal(near, val=False)
    # Where doubles cannot tell, the exact distance can.
    for i, k in np.argwhere(near & (distance <= _CLOSE * size)).tolist():
        near[i, k] = not _apart(points[i], points[k])
    crowded: list[int] = np.flatnonzero(near.any(axis=1)).tolist()
    return crowded


def _apart(a: Point, b: Point) -> bool:
    shift = max(a.shift, b.shift)
    x = (a.x << (shift - a.shift)) - (b.x << (shift - b.shift))
    y = (a.y << (shift - a.shift)) - (b.y << (shift - b.shift))
    square = x * x + y * y
    return square > 0 and math.log2(square) / 2 - shift > max(a.log_radius, b.log_radius) + 1.5


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


def refine(newton: Newton, point: Point, digits: int, absolute: float = math.inf) -> Point | None:
    """The point after Newton steps until each of its coordinates is good to ``digits``; None if they stray.

    ``absolute`` is a log2 that the radius must fall below as well.
    """
    bits = _FIRST_BITS
    start = point.log_size
    for _ in range(_MOST_STEPS):
        step = newton.step(point, bits, bits)
        smallest = min(math.log2(abs(c)) for c in (point.x, point.y) if c) - point.shift
        wanted = min(smallest - digits * _BITS_PER_DIGIT, absolute)
        if point.log_radius <= wanted:
            return point
        if step is None or point.log_radius > point.log_size or abs(point.log_size - start) > 1:
            return None
        good = point.log_size - point.log_radius
        bits = max(_FIRST_BITS, math.ceil(min(2 * good, point.log_size - wanted)) + 24)
        point = point.moved(bits, step)
        if not (point.x or point.y):
            return None
    return None
