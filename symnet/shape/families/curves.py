"""Magnitude and group delay of a low-pass straight from its poles and zeros.

Coefficients of high order lose digits that the poles still have, so every curve here is a sum over poles and
zeros and keeps full double precision at any order. Everything is relative to DC: the attenuation of a curve is
0 dB at w = 0, whatever the gain.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TypeAlias

import numpy as np
from numpy.typing import NDArray

__all__ = ["HALF_POWER_DB", "attenuation", "geometric_mean", "group_delay", "last_crossing"]

Floats: TypeAlias = NDArray[np.float64]

#: 10 log10(2): what "3 dB" stands for in every table of filters, 3.0103 dB.
HALF_POWER_DB = 10 * math.log10(2)

_DB_PER_NEPER_SQUARED = 10 / math.log(10)  # dB of a squared magnitude given by its natural logarithm


def geometric_mean(roots: Sequence[complex] | NDArray[np.complex128]) -> float:
    """The geometric mean of the magnitudes of the roots, in the unit of the roots."""
    return float(np.exp(np.mean(np.log(np.abs(np.asarray(roots, dtype=complex))))))


def attenuation(
    w: Floats,
    poles: Sequence[complex] | NDArray[np.complex128],
    zeros: Sequence[complex] | NDArray[np.complex128] = (),
) -> Floats:
    """The attenuation in dB relative to DC at the angular frequencies w (any shape); infinite at a zero.

    a(w) = 10 log10( prod |1 - jw/p|^2 / prod |1 - jw/z|^2 ), over the poles p and the zeros z.
    """
    total = _log_of_squares(w, poles)
    if len(zeros):
        total = total - _log_of_squares(w, zeros)
    return total * _DB_PER_NEPER_SQUARED


def _log_of_squares(w: Floats, roots: Sequence[complex] | NDArray[np.complex128]) -> Floats:
    r = np.asarray(roots, dtype=complex)
    squares = (r.real**2 + (np.asarray(w)[..., None] - r.imag) ** 2) / (r.real**2 + r.imag**2)
    with np.errstate(divide="ignore"):
        total: Floats = np.log(squares).sum(axis=-1)
    return total


def group_delay(w: Floats, poles: Sequence[complex], zeros: Sequence[complex] = ()) -> Floats:
    """The group delay in seconds at the angular frequencies w: -d(phase)/dw, each root s + jv giving s/(s^2 + (w - v)^2)."""
    total = -_delay(w, poles)
    off_axis = [z for z in zeros if z.real]  # a zero on the axis turns the phase by a jump only
    return total + _delay(w, off_axis) if off_axis else total


def _delay(w: Floats, roots: Sequence[complex]) -> Floats:
    r = np.asarray(roots, dtype=complex)
    total: Floats = (r.real / (r.real**2 + (np.asarray(w)[..., None] - r.imag) ** 2)).sum(axis=-1)
    return total


def last_crossing(
    poles: Sequence[complex] | NDArray[np.complex128],
    zeros: Sequence[complex] | NDArray[np.complex128] = (),
    level_db: float = HALF_POWER_DB,
) -> float | None:
    """The highest angular frequency at which the attenuation relative to DC is ``level_db``; None if there is none.

    The curve is bracketed on a grid that also holds the pole frequencies, where a narrow resonance sits, and the
    crossing is then closed in by Newton steps kept inside the bracket.
    """
    p = np.asarray(poles, dtype=complex)
    sizes = np.abs(p)
    grid = np.geomspace(sizes.min() * 1e-3, sizes.max() * 1e3, 300)
    grid = np.sort(np.concatenate([grid, sizes, np.abs(p.imag), np.abs(p.imag) + np.abs(p.real)]))
    below = np.flatnonzero(attenuation(grid, poles, zeros) < level_db)
    if len(below) == 0 or below[-1] + 1 == len(grid):
        return None
    low, high = float(grid[below[-1]]), float(grid[below[-1] + 1])
    w = math.sqrt(low * high) if low > 0 else high / 2
    for _ in range(80):
        excess = float(attenuation(np.asarray(w), poles, zeros)) - level_db
        low, high = (low, w) if excess > 0 else (w, high)
        slope = _slope(w, poles, zeros)
        step = excess / slope if slope else math.inf
        new = w - step
        if not low < new < high:
            new = (low + high) / 2
        if abs(new - w) <= 2e-16 * w:
            return new
        w = new
    return w


def _slope(
    w: float,
    poles: Sequence[complex] | NDArray[np.complex128],
    zeros: Sequence[complex] | NDArray[np.complex128],
) -> float:
    """The derivative of the attenuation in dB per rad/s."""

    def part(roots: Sequence[complex] | NDArray[np.complex128]) -> float:
        r = np.asarray(roots, dtype=complex)
        return float((2 * (w - r.imag) / (r.real**2 + (w - r.imag) ** 2)).sum())

    return _DB_PER_NEPER_SQUARED * (part(poles) - (part(zeros) if len(zeros) else 0.0))
