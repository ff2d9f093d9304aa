"""The frequencies of H itself: w0 and its -3.0103 dB frequencies, measured on H and not on what it resembles."""

from __future__ import annotations

import numpy as np

from symnet.shape.families.curves import HALF_POWER_DB
from symnet.shape.families.prototype import CENTRE, LOW_PASS, W0, W3DB, Reference
from symnet.shape.fitting import level
from symnet.shape.undoing import View, w_of

__all__ = ["level_at_1", "own_references"]


def own_references(view: View) -> tuple[Reference, ...]:
    """w0 and the -3.0103 dB frequency; of a band-pass or band-stop the centre, and both edges with their difference."""
    if not view.is_two_sided:
        up = view.band == LOW_PASS
        edges = ((W0, view.w0), (W3DB, view.w0 * view.edge if up else view.w0 / view.edge))
        return tuple(Reference.named(name, w, band=view.band) for name, w in edges)
    lower, upper = (view.w0 * w for w in _edges(view))
    where = "relative to the centre" if view.band == "band-pass" else "relative to DC"
    label = f"-3.0103 dB {where}"
    return (
        Reference(CENTRE, view.w0, "centre, geometric mean of the pole magnitudes"),
        Reference(f"{W3DB}_bandwidth", upper - lower, f"bandwidth, {label}"),
        Reference(f"{W3DB}_lower", lower, f"lower edge, {label}"),
        Reference(f"{W3DB}_upper", upper, f"upper edge, {label}"),
    )


def _edges(view: View) -> tuple[float, float]:
    """The last half-power frequency on either side, going from the pass band into the stop band, in units of w0."""
    grid = view.edge * np.concatenate([[1e-6], np.geomspace(0.05, 20, 481)])
    below = level(view, w_of(view, grid)[0]) < HALF_POWER_DB
    found = []
    for side in (0, 1):
        last = np.flatnonzero(below[:, side])
        k = min(int(last[-1]) if len(last) else 0, len(grid) - 2)
        low, high = grid[k], grid[k + 1]
        for _ in range(60):
            middle = (low * high) ** 0.5
            inside = level(view, w_of(view, np.asarray([middle]))[0])[0, side] < HALF_POWER_DB
            low, high = (middle, high) if inside else (low, middle)
        found.append(float(w_of(view, np.asarray([low]))[0][0, side]))
    return min(found), max(found)


def level_at_1(view: View) -> float | None:
    """|H| in dB at 1 rad/s relative to the pass-band gain, of a low-pass or high-pass."""
    if view.is_two_sided:
        return None
    w = 1 / view.w0 if view.band == LOW_PASS else view.w0  # s -> 1/s leaves 1 rad/s where it is
    return -float(level(view, np.asarray(w)))
