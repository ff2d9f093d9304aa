"""The poles whose phase swings about a straight line by equal amounts: Newton steps on the heights of the swings.

With |phase| = sum over the poles of atan((w - v)/a) for a pole -a + jv, the error |phase| - w of n poles can have n
extremes of one height with alternating signs, the last one positive; they are where the group delay is 1. That is
n equations for the n numbers a and v. The slope of an extreme's height in a or v is the slope of the phase at a
fixed frequency, since the error is stationary in w, so Newton steps converge quadratically although the extremes
move along.

No closed form is known. What makes it work at every order and error: order n starts from order n - 2, whose poles
keep their places seen from the edge while the spacing in the middle tends to pi (a uniform row of poles has a
phase of uniform ripple); errors are reached from 0.5 degree in steps of 2^(1/4), and between those steps by
interpolation in the logarithm of the error. The equations are as well conditioned as the error is large: about
1e-16/error (in rad) is lost in doubles, so the last digits come from residuals in more digits (:func:`polished`),
with the slopes still in doubles: each round adds ten digits or more.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import lru_cache
from typing import Any, Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.errors import UndefinedError

__all__ = ["Swings", "interpolated", "polished", "swings"]

Floats: TypeAlias = NDArray[np.float64]

_FIRST_DEGREES: Final = 0.5
_FIRST: Final = {2: ([1.245, 1.012], [0.7, 1.7]), 3: ([1.608, 1.3576, 2.2047], [0.51, 1.5, 2.29])}
_PER_OCTAVE: Final = 4  # steps from one error to its double
_NODES: Final = 10  # of an interpolation between the steps: 1e-11 of the poles
_BARYCENTRIC: Final = np.array([(-1.0) ** i * math.comb(_NODES - 1, i) for i in range(_NODES)])
_MOST_STEPS: Final = 40
_NOISE: Final = 1e-13
_CLOSE: Final = 3e-6  # a relative step after which the next one, about its square, is not needed
_STILL: Final = 1e-7  # rad/s; an extreme that is so far off has the right height to 1e-14


@dataclass(frozen=True, slots=True)
class Swings:
    """Poles and the frequencies of the extremes, the straight line having the slope 1 s.

    ``x`` holds the real pole's a if the order is odd, then the a of the pairs -a +- jv, then their v.
    """

    order: int
    x: Floats
    at: Floats

    @property
    def real(self) -> float | None:
        """The a of the real pole of an odd order."""
        return float(self.x[0]) if self.order % 2 else None

    @property
    def pairs(self) -> tuple[Floats, Floats]:
        """The a and the v of the pairs."""
        k, h = self.order % 2, (self.order + 1) // 2
        return self.x[k:h], self.x[h:]

    def moved(self, step: Floats) -> Swings:
        """With other poles; no a is more than halved by a step."""
        h = (self.order + 1) // 2
        x = self.x + step
        x[:h] = np.maximum(x[:h], self.x[:h] / 2)
        return Swings(self.order, x, self.at)

    def error(self, w: Floats) -> Floats:
        """|phase| - w in rad."""
        a, v = self.pairs
        total: Floats = (np.arctan((w[:, None] - v) / a) + np.arctan((w[:, None] + v) / a)).sum(axis=1) - w
        return total if self.real is None else total + np.arctan(w / self.real)

    def delay_error(self, w: Floats) -> tuple[Floats, Floats]:
        """Group delay - 1 in s, and its slope in w."""
        a, v = self.pairs
        value, slope = np.full(len(w), -1.0), np.zeros(len(w))
        for away in (w[:, None] - v, w[:, None] + v):
            square = a * a + away * away
            value += (a / square).sum(axis=1)
            slope -= (2 * a * away / square**2).sum(axis=1)
        if self.real is not None:
            square = self.real**2 + w * w
            value += self.real / square
            slope -= 2 * self.real * w / square**2
        return value, slope

    def slopes(self) -> Floats:
        """The derivative of each extreme's error in each number of ``x``."""
        a, v = self.pairs
        k, h = self.order % 2, (self.order + 1) // 2
        below, above = self.at[:, None] - v, self.at[:, None] + v
        square_below, square_above = a * a + below**2, a * a + above**2
        found = np.empty((len(self.at), self.order))
        if self.real is not None:
            found[:, 0] = -self.at / (self.real**2 + self.at**2)
        found[:, k:h] = -below / square_below - above / square_above
        found[:, h:] = -a / square_below + a / square_above
        return found

    def at_extremes(self) -> Swings | None:
        """The same poles with all n extremes; None when there are not so many."""
        v = self.pairs[1]
        grid = np.linspace(
            0, float(v.max() + 3 * self.x[: (self.order + 1) // 2].max()), 40 * self.order + 40
        )[1:]
        value = self.delay_error(grid)[0]
        before = np.flatnonzero(value[1:] * value[:-1] < 0)
        if len(before) != self.order:
            return None
        low, high = grid[before], grid[before + 1]
        at = low - value[before] * (high - low) / (value[before + 1] - value[before])
        for _ in range(4):
            wrong, slope = self.delay_error(at)
            at = np.clip(at - wrong / slope, low, high)
        return Swings(self.order, self.x, at)

    def tracked(self) -> Swings | None:
        """The same poles with the extremes that are near; None where they are not found one by one.

        There are never more than n, since the delay is 1 where a polynomial of degree n in w^2 vanishes.
        """
        at = self.at
        for _ in range(3):
            wrong, slope = self.delay_error(at)
            if not np.all(slope * _signs(self.order) < 0):
                return None
            move = wrong / slope
            at = at - move
            if at[0] <= 0 or not np.all(at[1:] > at[:-1]):
                return None
            if np.abs(move).max() < _STILL:
                break
        return Swings(self.order, self.x, at)

    def residual(self, height: float) -> Floats:
        """The errors at the extremes minus what they should be."""
        return self.error(self.at) - height * _signs(self.order)


@lru_cache(maxsize=64)
def _signs(order: int) -> Floats:
    return np.array([(-1.0) ** (order - 1 - i) for i in range(order)])


def _newton(start: Swings | None, degrees: float) -> Swings:
    """The member with that error, from one near to it with its extremes."""
    height = math.radians(degrees)
    now = start
    for _ in range(_MOST_STEPS):
        if now is None:
            break
        residual = now.residual(height)
        size = float(np.abs(residual).max())
        step = np.asarray(np.linalg.solve(now.slopes(), -residual), dtype=np.float64)
        length, found = 1.0, None
        while found is None and length > 1e-4:
            found = now.moved(length * step).tracked()
            if found is not None and np.abs(found.residual(height)).max() > 2 * max(size, _NOISE):
                found = None
            length /= 2
        now = found
        if now is not None and np.abs(step / now.x).max() < _CLOSE:
            return now
    raise UndefinedError(f"a phase error of {degrees:g} deg was not reached")


def _at_fixed_frequencies(start: Swings, height: float) -> Swings:
    """Poles whose error has the right heights at given frequencies, roughly: a start that has all extremes."""
    now = start
    for _ in range(_MOST_STEPS):
        residual = now.residual(height)
        size = np.abs(residual).max()
        if size < 1e-3 * height:
            break
        step = np.asarray(np.linalg.lstsq(now.slopes(), -residual, rcond=1e-9)[0], dtype=np.float64)
        length = 1.0
        while np.abs(now.moved(length * step).residual(height)).max() >= size and length > 1e-3:
            length /= 2
        now = now.moved(length * step)
    return now


@lru_cache(maxsize=64)
def _first(order: int) -> Swings:
    """The member with an error of 0.5 degree."""
    if order in _FIRST:
        return _newton(Swings(order, *map(np.array, _FIRST[order])).at_extremes(), _FIRST_DEGREES)
    smaller = _first(order - 2)
    (a, v), w = smaller.pairs, smaller.at
    spacing = 2.5 if order == 4 else 3.05 - 1.1 / order
    inner = a[0] if smaller.real is not None else 1.02 * a[0]
    outer = 1.02 * a if smaller.real is not None else a
    x = [
        *([] if smaller.real is None else [smaller.real]),
        inner,
        *outer,
        1.05 * v[0],
        *(v + spacing),
    ]
    at = np.array([1.04 * w[0], 3.1 * w[0], *(w + spacing)])
    rough = _at_fixed_frequencies(Swings(order, np.array(x), at), math.radians(_FIRST_DEGREES))
    return _newton(rough.at_extremes(), _FIRST_DEGREES)


@lru_cache(maxsize=1024)
def _step(order: int, i: int) -> Swings:
    """The member whose error is 0.5 degree times 2^(i/4), from those before it by extrapolation."""
    if i == 0:
        return _first(order)
    ahead = 1 if i > 0 else -1
    before = [_step(order, i - ahead * k) for k in range(1, min(abs(i), 4) + 1)]
    weights = [(-1) ** k * math.comb(len(before), k + 1) for k in range(len(before))]
    x, at = (sum(c * part for c, part in zip(weights, parts, strict=True)) for parts in _parts(before))
    start = Swings(order, np.asarray(x), np.asarray(at)).tracked()
    return _newton(start or before[0], _degrees(i))


def _parts(steps: list[Swings]) -> tuple[list[Floats], list[Floats]]:
    return [step.x for step in steps], [step.at for step in steps]


def _degrees(i: float) -> float:
    return float(_FIRST_DEGREES * 2.0 ** (i / _PER_OCTAVE))


@lru_cache(maxsize=1024)
def _nodes(order: int, low: int) -> Floats:
    """Poles and extremes of neighbouring steps, one row each."""
    steps = (_step(order, i) for i in range(low, low + _NODES))
    return np.array([np.concatenate([step.x, step.at]) for step in steps])


def interpolated(order: int, degrees: float) -> Swings:
    """The member of that order (2 or more) and error, to ten digits; errors from 0.001 to 5 degrees."""
    place = _PER_OCTAVE * math.log2(degrees / _FIRST_DEGREES)
    low = math.floor(place) - _NODES // 2 + 1
    away = place - low - np.arange(_NODES)
    if not away.all():
        weights = (away == 0).astype(float)
    else:  # barycentric form of the polynomial through the nodes
        weights = _BARYCENTRIC / away
        weights /= weights.sum()
    found = weights @ _nodes(order, low)
    return Swings(order, found[:order], found[order:])


@lru_cache(maxsize=256)
def swings(order: int, degrees: float) -> Swings:
    """The same to the last digits that doubles give it."""
    return _newton(interpolated(order, degrees).tracked(), degrees)


def polished(m: Any, order: int, degrees: Any, near: Swings) -> list[Any]:
    """``x`` to the full precision of ``m``, an mpmath context; the error in degrees as a number of ``m``."""
    height = degrees * m.pi / 180
    signs = _signs(order)
    slopes, curvature = near.slopes(), near.delay_error(near.at)[1]
    x, at = [m.mpf(float(c)) for c in near.x], [m.mpf(float(w)) for w in near.at]
    k, h = order % 2, (order + 1) // 2
    for _ in range(m.dps):
        residual, wrong = [], []
        for w, sign in zip(at, signs, strict=True):
            away = [(w, x[0])] if k else []
            away += [(w + s * v, a) for a, v in zip(x[k:h], x[h:], strict=True) for s in (1, -1)]
            residual.append(m.fsum(m.atan2(y, a) for y, a in away) - w - int(sign) * height)
            wrong.append(m.fsum(a / (a * a + y * y) for y, a in away) - 1)
        size = max(abs(r) for r in residual)
        if size <= 16 * order * m.eps:
            return x
        step = np.linalg.solve(slopes, [-float(r / size) for r in residual])
        x = [c + size * m.mpf(float(d)) for c, d in zip(x, step, strict=True)]
        at = [w - d / m.mpf(float(c)) for w, d, c in zip(at, wrong, curvature, strict=True)]
    raise UndefinedError(f"order {order}: the last digits of the poles were not reached")
