"""What is neither a low-pass nor made of one: shelves and peaks by their levels and corners, second-order sections by Q.

No family stands behind these; the engineer knows them by the level at either end and by the corner frequencies of
poles and zeros, in the order in which a straight-line drawing of |H| meets them.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction

from symnet.exact.ratio import Ratio
from symnet.shape.candidate import hertz
from symnet.shape.verdict import Recognition

__all__ = ["decibels", "shelf"]


def shelf(h: Ratio, poles: Sequence[complex], zeros: Sequence[complex]) -> Recognition:
    """An H that is neither 0 nor infinite at either end, and whose zeros are not on the jw axis."""
    low, high = decibels(h.num[0] / h.den[0]), decibels(h.num[-1] / h.den[-1])
    corners = sorted([*_corners(poles, "pole"), *_corners(zeros, "zero")])
    order = len(poles)
    if abs(low - high) < 1e-9:
        f0 = math.exp(math.fsum(math.log(abs(p)) for p in poles) / order)
        at = decibels(abs(h(1j * f0)))
        what = "peaking" if at > low else "dipping"
        verdict = f"{what}, order {order}: {low:.4g} dB at both ends, {at:.4g} dB at f0 = {hertz(f0)}"
        return Recognition(
            verdict, order, "peaking", notes=tuple(row for _, row in corners), poles=tuple(poles)
        )
    falls = "low shelf raised" if low > high else "high shelf raised"
    verdict = f"shelving, order {order}: {low:.4g} dB at DC, {high:.4g} dB at infinite frequency ({falls} by {abs(low - high):.4g} dB)"
    return Recognition(verdict, order, "shelving", notes=tuple(row for _, row in corners), poles=tuple(poles))


def decibels(level: float | Fraction) -> float:
    """20 log10 of a magnitude that may be an exact fraction of any size."""
    if isinstance(level, Fraction):
        return 20 * (math.log10(abs(level.numerator)) - math.log10(level.denominator))
    return 20 * math.log10(abs(level))


def _corners(roots: Sequence[complex], what: str) -> list[tuple[float, tuple[str, str]]]:
    found = []
    for r in roots:
        half = " in the right half plane" if r.real > 0 else ""
        if r.imag == 0:
            found.append((abs(r.real), (f"{what}{half}", f"f = {hertz(abs(r.real))}")))
        elif r.imag > 0:
            q = f"Q = {abs(r) / abs(2 * r.real):.4g}" if r.real else "on the jw axis"
            found.append((abs(r), (f"pair of {what}s{half}", f"f0 = {hertz(abs(r))}, {q}")))
    return found
