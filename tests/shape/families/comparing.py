"""What the tests of the families share: the nearest root, and extremes of a curve."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

__all__ = ["decimals_agree", "extremes", "nearest"]


def nearest(wanted: complex, roots: Iterable[complex]) -> complex:
    return min(roots, key=lambda root: abs(root - wanted))


def decimals_agree(
    printed: tuple[float, float], roots: Iterable[complex], decimals: int, units: float = 0.6
) -> bool:
    """Whether a printed (sigma, omega) is the nearest root rounded, a last digit rounded wrongly allowed for."""
    wanted = complex(-printed[0], printed[1])
    found = nearest(wanted, roots)
    within = units * 10.0**-decimals
    return abs((found - wanted).real) <= within and abs((found - wanted).imag) <= within


def extremes(curve: NDArray[np.float64]) -> NDArray[np.float64]:
    """The heights of the inner local extremes of a sampled curve."""
    slope = np.diff(curve)
    return curve[1:-1][slope[1:] * slope[:-1] < 0]
