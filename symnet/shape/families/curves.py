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
    squares = np.asarray(w)[..., None] - r.imag
    squares *= squares
    squares += r.real**2
    squares /= r.real**2 + r.imag**2
    with np.errstate(divide="ignore"):
        total: Floats = np.zeros(squares.shape[:-1])
        for first in range(0, len(r), 8):  # a product of so many stays in the range of doubles
            total += np.log(squares[..., first : first + 8].prod(axis=-1))
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
    plus, minus = _squared(p), _squared(zeros)
    for _ in range(80):
        up, rise = _at(w, plus)
        down, fall = _at(w, minus)
        excess = _DB_PER_NEPER_SQUARED * (up - down) - level_db
        low, high = (low, w) if excess > 0 else (w, high)
        slope = _DB_PER_NEPER_SQUARED * (rise - fall)
        new = w - excess / slope if slope else -math.inf
        if not low < new < high:
            new = (low + high) / 2
        if abs(new - w) <= 2e-16 * w:
            return new
        w = new
    return w


def _squared(roots: Sequence[complex] | NDArray[np.complex128]) -> list[tuple[float, float, float]]:
    """Of each root the square of its real part, its imaginary part and its squared magnitude."""
    return [(r.real * r.real, r.imag, r.real * r.real + r.imag * r.imag) for r in map(complex, roots)]


def _at(w: float, roots: list[tuple[float, float, float]]) -> tuple[float, float]:
    """The sum of ln |1 - jw/r|^2 and its derivative by w; in plain numbers, where arrays would take longer."""
    total = slope = 0.0
    for real_squared, imag, size in roots:
        away = w - imag
        square = real_squared + away * away or 5e-324  # on a zero of the jw axis
        total += math.log(square / size)
        slope += 2 * away / square
    return total, slope
