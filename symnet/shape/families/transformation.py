"""Poles and zeros of a band-pass and a band-stop from those of a low-pass, to full precision for any bandwidth.

With the low-pass root r in rad/s, the centre c and b = r/2 times the bandwidth over the low-pass edge, the
band-pass roots solve s^2 - 2 b s + c^2 = 0, and the band-stop roots the same with 1/r for r. Written out,
s = b +- j c sqrt(1 - t^2) with t = b/c loses the real part of a narrow band to rounding, so the root is taken as
1 - u with u = t^2/(1 + sqrt(1 - t^2)), whose imaginary part is exact to the last places however small it is; for a
wide band, |t| > 1, the larger root is formed first and the smaller one is c^2 over it. Conjugate pairs stay exact
pairs, roots on the jw axis stay on it.

Source: A. I. Zverev, Handbook of Filter Synthesis, Wiley 1967, chapter 4 (from memory): the transformations
s -> (s^2 + c^2)/(B s) and s -> B s/(s^2 + c^2).
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Iterable, Sequence

__all__ = ["to_band_pass", "to_band_stop"]


def to_band_pass(roots: Sequence[complex], centre: float, ratio: float) -> tuple[complex, ...]:
    """The band-pass roots of these low-pass roots; ``ratio`` is the bandwidth over the low-pass edge it stands for.

    >>> to_band_pass([-1 + 0j], 1.0, 1.2)
    ((-0.6+0.8j), (-0.6-0.8j))
    """
    return _both(roots, ((r * (ratio / 2)) for r in roots), centre)


def to_band_stop(roots: Sequence[complex], centre: float, ratio: float) -> tuple[complex, ...]:
    """The band-stop roots of these low-pass roots; ``ratio`` is the bandwidth times the low-pass edge it stands for.

    >>> to_band_stop([-1 + 0j], 1.0, 1.2)
    ((-0.6+0.8j), (-0.6-0.8j))
    """
    return _both(roots, (ratio / 2 / r for r in roots), centre)


def _both(roots: Sequence[complex], halves: Iterable[complex], centre: float) -> tuple[complex, ...]:
    """Both solutions of s^2 - 2 b s + centre^2 = 0 for each b; lower roots as the conjugates of the upper ones."""
    found: list[complex] = []
    for root, b in zip(roots, halves, strict=True):
        if root.imag > 0:
            pair = _on_axis(b.imag, centre) if root.real == 0 else _solutions(b, centre)
            found += [*pair, *(s.conjugate() for s in pair)]
        elif root.imag == 0:
            found += _from_real(b.real, centre)
    return tuple(found)


def _solutions(b: complex, c: float) -> tuple[complex, complex]:
    t = b / c
    square = t * t
    if abs(t) <= 1:
        u = square / (1 + cmath.sqrt(1 - square))
        away = complex(c * u.imag, c * (1 - u.real))  # j c (1 - u)
        return b + away, b - away
    away = cmath.sqrt((b - c) * (b + c))
    larger = b + away if abs(b + away) >= abs(b - away) else b - away
    return larger, c * (c / larger)


def _from_real(b: float, c: float) -> tuple[complex, complex]:
    if abs(b) < c:
        upper = complex(b, math.sqrt((c - b) * (c + b)))
        return upper, upper.conjugate()
    larger = b + math.copysign(math.sqrt((abs(b) - c) * (abs(b) + c)), b)
    return complex(larger), complex(c * (c / larger))


def _on_axis(v: float, c: float) -> tuple[complex, complex]:
    """From b = j v: both on the axis, one above and one below."""
    away = math.hypot(v, c)
    larger = v + math.copysign(away, v)
    return complex(0.0, larger), complex(0.0, -c * (c / larger))
