"""Four distances between H and the members that were fitted to it, each with one definition for every band.

* response error: largest |difference of the attenuations| over the pass band of the member, in dB, both relative to
  the pass band;
* delay error: largest relative difference of the group delays there, per unit of the low-pass frequency, in per cent;
* pole error: largest |p - q|/|q| over the pairs of poles p and q, in the low-pass domain, each set scaled by its own
  w0, in the pairing that makes the largest one smallest, in per cent; zero error: the same of the finite zeros.

All four are the same for a high-pass and for the low-pass that s -> 1/s makes of it.
"""

from __future__ import annotations

import numpy as np

from symnet.shape.fitting import ByResponse, level, zeros_for_one
from symnet.shape.members import Complexes, Floats, curves, half_power
from symnet.shape.pairing import distances_of_roots
from symnet.shape.undoing import w_of

__all__ = ["distances"]


def distances(fit: ByResponse) -> tuple[Floats, Floats, Floats, Floats]:
    """Response error in dB, delay, pole and zero error in per cent, of each row."""
    view = fit.view
    edges, moved = fit.edges.copy(), np.flatnonzero(fit.own)
    edges[moved] = half_power(fit.poles[moved], fit.zeros[moved])
    response, delay = _errors(fit, edges)
    doubled = len(view.low_poles) // view.order
    poles = 100 * distances_of_roots(view.low_poles, np.repeat(fit.poles, doubled, axis=1))
    zeros = np.zeros(len(poles))
    if fit.zeros.shape[1]:
        zeros = 100 * distances_of_roots(view.low_zeros, np.repeat(fit.zeros, zeros_for_one(view), axis=1))
    return response, delay, poles, zeros


def _errors(fit: ByResponse, edges: Floats) -> tuple[Floats, Floats]:
    """Response error in dB and delay error in per cent of each row, up to its edge."""
    view, k = fit.view, fit.parameters
    scale = np.exp(fit.x[:, k])
    centre = fit.x[:, k + 1] if view.is_two_sided else np.zeros(len(edges))
    unit = np.linspace(0, 1, max(64, 12 * view.order) + 1)
    unit[0] = 1e-6  # DC itself is nowhere on the axis of a band-stop or a high-pass
    resonances = np.abs(view.low_poles.imag) / scale[:, None]  # narrow ones of H fall between the points
    low = np.concatenate(
        [unit * edges[:, None], np.clip(resonances, 1e-6 * edges[:, None], edges[:, None])], axis=1
    )
    w, rate = w_of(view, low * scale[:, None], centre[:, None])
    sides = w.shape[2] if w.ndim == 3 else 1
    w, rate = w.reshape(len(edges), -1), rate.reshape(len(edges), -1)
    difference = np.repeat(curves(fit.poles, fit.zeros, low), sides, axis=1) - level(view, w)
    if view.is_two_sided:
        difference += fit.x[:, -1, None]
    theirs = np.repeat(_delays(fit.poles, low), sides, axis=1)
    own = _delays(view.poles[None, :], w)
    moving = view.zeros[view.zeros.real != 0]
    if len(moving):
        own = own - _delays(moving[None, :], w)
    ratio = own * rate * scale[:, None] / theirs
    return np.abs(difference).max(axis=1), 100 * np.abs(ratio - 1).max(axis=1)


def _delays(roots: Complexes, w: Floats) -> Floats:
    """The group delay, one row for each row of roots."""
    r = roots[..., None]
    away = w[..., None, :] - r.imag
    delay: Floats = -(r.real / (away * away + r.real**2)).sum(axis=-2)
    return delay
