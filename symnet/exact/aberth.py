"""Approximate roots in doubles, of the right size even when they lie twenty decades apart.

Start values come from the Newton polygon, the upper hull of the points (k, log2|a_k|): each edge gives the size
of as many roots as it is long (D. A. Bini, Numerical computation of polynomial zeros by means of Aberth's method,
Numer. Algorithms 13, 1996). They are improved together by O. Aberth's iteration (Math. Comp. 27, 1973), Newton's
step with the other approximations pushing each one away. The polynomial is scaled anew for every octave of |z|,
so that no product of part values leaves the range of doubles.

Nothing here is proven: the result is where the exact arithmetic of :mod:`symnet.exact.discs` starts.
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import Final

import numpy as np

from symnet.errors import Fault, LimitError
from symnet.exact.doubles import scaled

__all__ = ["Approximations", "approximate", "repulsion"]

_WIDEST: Final = 900.0  # log2 of the ratio of sizes of roots that doubles can hold in one iteration
_DOUBLE: Final = 2.0**-53

# For a polynomial of moderate degree whose roots are of one size the eigenvalues of the companion matrix are had
# sooner, conjugates as exact pairs; beyond, they lose the small roots first.
_MOST_EIGENVALUES: Final = 30
_NARROW: Final = 20.0  # log2


@dataclass(frozen=True, slots=True)
class Approximations:
    """Points z, to be multiplied by 2^scale, and bounds low <= |z| <= high on the sizes of the roots."""

    points: tuple[complex, ...]
    scale: int
    low: float
    high: float

    def tamed(self, here: complex, step: complex) -> complex:
        """The step (to be subtracted), or a turn about the origin where it would leave the ring of the roots."""
        kept = self.low / 2 < abs(here - step) < 2 * self.high
        return step if kept else here * complex(0.4, -0.8)


def approximate(p: Sequence[int], *, quick: bool = False) -> Approximations:
    """All roots of p, whose first and last coefficient must not be zero, about as well as doubles can.

    ``quick`` takes eigenvalues, conjugates as exact pairs, and gives no points where they would not be near.
    Raises :class:`~symnet.errors.LimitError` for roots more than 270 decades apart.

    >>> a = approximate((10, -11, 1))
    >>> sorted(round(z.real * 2**a.scale, 6) for z in a.points)
    [1.0, 10.0]
    """
    degree = len(p) - 1
    scale = round((math.log2(abs(p[0])) - math.log2(abs(p[-1]))) / degree)
    hull: list[tuple[int, float]] = []
    for k, c in enumerate(p):
        if c:
            height = math.log2(abs(c)) + k * scale
            while len(hull) > 1 and _below(hull[-2], hull[-1], (k, height)):
                hull.pop()
            hull.append((k, height))
    edges = [(k, m, (low - high) / (m - k)) for (k, low), (m, high) in pairwise(hull)]
    if max(abs(size) for _, _, size in edges) > _WIDEST / 2:
        raise LimitError(
            Fault(
                "The roots of this polynomial lie more than 270 decades apart.",
                "Check the units of the values.",
            )
        )
    # |root| <= 2*max|a_(n-k)/a_n|^(1/k) (Fujiwara 1916), and likewise for 1/root.
    low, high = 2.0 ** edges[0][2] / 2, 2.0 ** edges[-1][2] * 2
    if quick:
        return Approximations(_by_eigenvalues(p, scale, edges), scale, low, high)
    # The odd turn keeps the starts off every axis of symmetry, where an iteration could be caught.
    starts = tuple(
        cmath.rect(2.0**size, 2 * math.pi * (i / (m - k) + k / degree) + 0.7)
        for k, m, size in edges
        for i in range(m - k)
    )
    ring = Approximations(starts, scale, low, high)
    return Approximations(tuple(_iterate(p, ring)), scale, low, high)


def _by_eigenvalues(
    p: Sequence[int], scale: int, edges: Sequence[tuple[int, int, float]]
) -> tuple[complex, ...]:
    """The eigenvalues of the companion matrix where degree and spread let them be near; else nothing."""
    degree = len(p) - 1
    if not 3 <= degree <= _MOST_EIGENVALUES or max(abs(size) for _, _, size in edges) > _NARROW:
        return ()
    top = max(c.bit_length() + k * scale for k, c in enumerate(p))
    row = [scaled(c, k * scale - top) for k, c in enumerate(p)]
    found = tuple(map(complex, np.roots(row[::-1])))
    good = len(found) == degree == len(set(found)) and all(found) and all(map(cmath.isfinite, found))
    return found if good else ()


def _below(a: tuple[int, float], b: tuple[int, float], c: tuple[int, float]) -> bool:
    """True when b lies on or below the line from a to c."""
    return (b[1] - a[1]) * (c[0] - a[0]) <= (c[1] - a[1]) * (b[0] - a[0])


def _iterate(p: Sequence[int], ring: Approximations) -> list[complex]:
    z = list(ring.points)
    parts = [(scaled(c, -c.bit_length()), c.bit_length() + k * ring.scale) for k, c in enumerate(p)]
    rows: dict[int, list[tuple[float, float]]] = {}
    moving = list(range(len(z)))
    for _ in range(30 + 2 * len(z)):
        still = []
        for i in moving:
            here = z[i]
            octave = math.frexp(abs(here))[1]
            row = rows.get(octave)
            if row is None:
                row = rows[octave] = _row(parts, octave)
            t = complex(math.ldexp(here.real, -octave), math.ldexp(here.imag, -octave))
            value, slope, size, at = 0j, 0j, 0.0, abs(t)
            for c, a in row:
                slope = slope * t + value
                value = value * t + c
                size = size * at + a
            if abs(value) <= 4 * _DOUBLE * size:  # nothing but rounding is left
                continue
            newton = value / slope if slope else complex(at, at)
            step = complex(math.ldexp(newton.real, octave), math.ldexp(newton.imag, octave))
            nearly = 1 - step * repulsion([here - other for k, other in enumerate(z) if k != i])
            if nearly:
                step /= nearly
            z[i] = here - ring.tamed(here, step)
            if abs(step) > 8 * _DOUBLE * abs(here):
                still.append(i)
        moving = still
        if not moving:
            break
    return z


def repulsion(gaps: Sequence[complex]) -> complex:
    """The sum of 1/gap, gaps of 0 left out."""
    total = 0j
    for gap in gaps:
        if gap:
            total += 1 / gap
    return total


def _row(parts: Sequence[tuple[float, int]], octave: int) -> list[tuple[float, float]]:
    """Coefficients of p(2^octave * t), largest near 1, in descending powers, and their sizes."""
    top = max(e + k * octave for k, (m, e) in enumerate(parts) if m)
    row = [math.ldexp(m, max(e + k * octave - top, -1074)) for k, (m, e) in enumerate(parts)]
    return [(c, abs(c)) for c in reversed(row)]
