"""H as a product: equal sections, and a band-pass that is a high-pass times a low-pass.

Two equal Butterworth sections are 6.02 dB down where one of them is 3.01 dB down: the product of equal sections has a
name of its own, or none, but never that of its factor at twice the order. Wide band-passes are often built as a
high-pass and a low-pass that know nothing of each other; there is no single low-pass behind them, but two.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Final

__all__ = ["equal_sections", "halves"]

#: Poles of equal sections lie this near to their mean; parts of 1 % move them by about as much.
_NEAR: Final = 0.03


def equal_sections(poles: Sequence[complex]) -> tuple[int, tuple[complex, ...]] | None:
    """The largest m for which the poles are m times the same few, exactly or nearly, and those few; None if m is 1.

    >>> equal_sections([-1, -2, -1, -2])
    (2, ((-2+0j), (-1+0j)))
    """
    upper = sorted((complex(p) for p in poles if p.imag > 0), key=lambda p: (-p.real / abs(p), abs(p)))
    real = [complex(x) for x in sorted(p.real for p in poles if not p.imag)]
    for m in range(len(poles), 1, -1):
        if len(upper) % m or len(real) % m:
            continue
        groups = [run[k : k + m] for run in (real, upper) for k in range(0, len(run), m)]
        means = [sum(group) / m for group in groups]
        if all(
            abs(p - mean) <= _NEAR * abs(mean)
            for group, mean in zip(groups, means, strict=True)
            for p in group
        ):
            return m, tuple(x for mean in means for x in ((mean, mean.conjugate()) if mean.imag else (mean,)))
    return None


def halves(
    poles: Sequence[complex], zeros_at_origin: int
) -> tuple[tuple[complex, ...], tuple[complex, ...]] | None:
    """The poles of the high-pass (as many as there are zeros at s = 0) and those of the low-pass above it.

    None when the two sets are not apart, or when a pair would have to be torn.
    """
    ordered = sorted(poles, key=lambda p: (round(math.log(abs(p)), 9), abs(p.imag)))
    low, high = tuple(ordered[:zeros_at_origin]), tuple(ordered[zeros_at_origin:])
    torn = sum(p.imag for p in low)
    if not low or not high or abs(torn) > 1e-9 * max(map(abs, low)):
        return None
    return low, high
