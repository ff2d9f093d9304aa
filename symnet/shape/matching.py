"""How far H is from the members of every family: scale and parameters fitted, and four distances.

The fit is by response, not by poles: element values of four digits move the poles of a high order by tens of
per cent and its response by a thousandth of a dB (a ninth-order Bessel ladder does both). Frequency scale and
continuous parameters are fitted together by least squares of the attenuation in dB over the pass band of H, of a
band-pass and a band-stop also the centre and the level; finite zeros enter with the logarithm of their frequency, in
the same measure. All families go through the same Gauss-Newton steps at once, as one batch of arrays, because a
catalogue is gone through for every H; a step never increases a sum. The start is the nearest of a table of members
that covers the whole range of the parameters (:mod:`symnet.shape.members`), so that no local minimum far away can be
taken. A fit by poles is there for the opposite case, poles of high Q that are a little off. Then everything is said
about the fitted member:

* response error: largest |difference of the attenuations| over its pass band, in dB, both relative to the pass band;
* delay error: largest relative difference of the group delays there, per unit of the low-pass frequency, in per cent;
* pole error: largest |p - q|/|q| over the pairs of poles p and q, in the low-pass domain, each set scaled by its own
  w0, in the pairing that makes the largest one smallest, in per cent; zero error: the same of the finite zeros.

All four are the same for a high-pass and for the low-pass that s -> 1/s makes of it.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import lru_cache
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.shape.families.family import Family, build
from symnet.shape.families.prototype import BAND_PASS, HIGH_PASS, LOW_PASS, W0, W3DB, Prototype
from symnet.shape.members import (
    Complexes,
    Floats,
    Members,
    curves,
    log_curves,
    members,
    shape_at,
    unit_band,
)
from symnet.shape.pairing import distances_of_roots
from symnet.shape.undoing import View, omega, w_of

__all__ = ["Fit", "fits"]

Bools: TypeAlias = NDArray[np.bool_]

_STEP: Final = 1e-6  # of a finite difference; coordinates run from 0 to 1
_MOST_STEPS: Final = 25
_WIDEST: Final = 2.0
_SHORTEST: Final = 1e-3  # of a Gauss-Newton step, before the point is taken as the minimum
_DB: Final = 10 / math.log(10)


@dataclass(frozen=True, slots=True)
class Fit:
    """The member of a family that comes nearest, in rad/s and in the band of H, and how near it comes.

    ``uncertainties`` belong to the settings of the prototype, one each: the change that doubles the sum of
    squares, scale and other parameters following. Inside it H cannot tell one value from another.
    """

    family: Family
    prototype: Prototype
    uncertainties: tuple[float, ...]
    response_error_db: float
    delay_error_percent: float
    pole_error_percent: float
    zero_error_percent: float


def fits(view: View, *, by_poles: bool = False) -> tuple[Fit, ...]:
    """The nearest member of every family that has this order and this number of finite zeros.

    ``by_poles`` takes the parameters from the poles and zeros, so that the pole error is small, and fits the scale
    only; families without parameters are then left out, since nothing changes for them.
    """
    table = members(view.order, len(view.prototype_zeros))
    if not table.families:
        return ()
    kept = tuple(
        k for k, family in enumerate(table.families) if not by_poles or family.parameters(view.order)
    )
    if not kept:
        return ()
    batch = _Batch.of(view, table, kept)
    batch.start(by_poles=by_poles)
    spread = batch.descend(fixed=by_poles)
    return batch.measured(spread)


@lru_cache(maxsize=512)
def _fixed_shape(family: Family, order: int) -> Prototype:
    return build(family, order, (), exact=False)


@dataclass(slots=True)
class _Batch:
    """F families being fitted to one view; x holds one row of coordinates each.

    The coordinates are K parameters (between 0 and 1; unused ones stay 0), the logarithm of the scale, and for a
    two-sided band the logarithm by which the centre moves and the level in dB.
    """

    view: View
    table: Members
    families: tuple[Family, ...]
    own: tuple[int, ...]
    w: Floats
    wanted: Floats
    zeros_wanted: Floats
    x: Floats
    poles: Complexes
    zeros: Complexes
    turns: tuple[Complexes, Complexes]

    @classmethod
    def of(cls, view: View, table: Members, kept: tuple[int, ...]) -> _Batch:
        families = tuple(table.families[k] for k in kept)
        own = tuple(len(f.parameters(view.order)) for f in families)
        w = w_of(view, unit_band(view.order) * view.edge)[0].T.reshape(-1)
        rows = len(families)
        width = table.places.shape[1] if len(table.places) else 0
        upper = np.sort(np.abs(view.low_zeros[view.low_zeros.imag > 0]))
        n, z = view.order, len(view.prototype_zeros)
        return cls(
            view,
            table,
            families,
            own,
            w,
            level(view, w),
            np.log(upper),
            np.zeros((rows, width + (3 if view.is_two_sided else 1))),
            np.zeros((rows, n), dtype=complex),
            np.zeros((rows, z), dtype=complex),
            (np.zeros((rows, width, n), dtype=complex), np.zeros((rows, width, z), dtype=complex)),
        )

    @property
    def parameters(self) -> int:
        """K, the number of coordinates for parameters."""
        return int(self.x.shape[1]) - (3 if self.view.is_two_sided else 1)

    # -- where it begins

    def start(self, *, by_poles: bool) -> None:
        """The nearest row of the table for each family, by response or by poles."""
        view, table = self.view, self.table
        if by_poles:
            doubled = len(view.low_poles) // view.order
            distance = _lined_up_distance(np.repeat(table.poles, doubled, axis=1), view.low_poles)
            distance = np.maximum(
                distance,
                _lined_up_distance(np.repeat(table.zeros, _times(view), axis=1), view.low_zeros),
            )
        else:
            sides = self.wanted.reshape(-1, table.curves.shape[1])
            distance = np.abs(table.curves[:, None, :] - sides).max(axis=(1, 2))
            distance = distance + 10 * self._zero_distances()
        for row, family in enumerate(self.families):
            mine = np.flatnonzero(table.index == table.families.index(family))
            best = mine[distance[mine].argmin()]
            place = table.places[best].copy()
            if by_poles:
                place = _nearest_by_poles(family, view, place)
            self.x[row, : self.parameters] = place
            # poles are divided by w0, so that those which agree have the scale 1; a steep edge would mislead
            self.x[row, self.parameters] = 0.0 if by_poles else math.log(view.edge / table.edges[best])
        self._shapes(np.arange(len(self.families)), everything=True)

    def _zero_distances(self) -> Floats:
        """The largest difference of the logarithms of the zeros, members and H laid over each other at the edge."""
        table, view = self.table, self.view
        if not len(self.zeros_wanted):
            return np.zeros(len(table.index))
        sizes = np.sort(np.log(np.abs(table.zeros[:, table.zeros.shape[1] // 2 :])), axis=1)
        sizes = np.repeat(sizes, _times(view), axis=1)
        if sizes.shape[1] != len(self.zeros_wanted):
            return np.zeros(len(table.index))
        moved = sizes - np.log(table.edges / view.edge)[:, None] - self.zeros_wanted
        distance: Floats = np.abs(moved).max(axis=1)
        return distance

    # -- residuals

    def _shapes(self, rows: NDArray[np.int64], *, everything: bool = False) -> None:
        """Poles, zeros and their derivatives by the parameters, at the coordinates of these rows."""
        for row in rows.tolist():
            own = self.own[row]
            if not own and not everything:
                continue
            family, place = self.families[row], self.x[row, : self.parameters]
            p, z = shape_at(family, self.view.order, place)
            self.poles[row], self.zeros[row] = p, z
            for k in range(own):
                step = -_STEP if place[k] > 0.5 else _STEP
                moved = place.copy()
                moved[k] += step
                p1, z1 = shape_at(family, self.view.order, moved)
                self.turns[0][row, k], self.turns[1][row, k] = (p1 - p) / step, (z1 - z) / step

    def _low(self, x: Floats) -> tuple[Floats, Floats, Floats]:
        """The frequencies on the scale of the members, the scale itself and d/d(centre) of the frequencies."""
        k = self.parameters
        scale = np.exp(x[:, k, None])
        if not self.view.is_two_sided:
            return self.w / scale, scale, np.zeros(1)
        low, by_centre = omega(self.view, self.w, x[:, k + 1, None])
        return low / scale, scale, by_centre / scale

    def _residual(self, x: Floats, p: Complexes, z: Complexes) -> Floats:
        low, _, _ = self._low(x)
        r = curves(p, z, low) - self.wanted
        if self.view.is_two_sided:
            r += x[:, -1, None]
        if len(self.zeros_wanted):
            r = np.concatenate([r, self._zero_residual(x, z)], axis=1)
        return r

    def _zero_residual(self, x: Floats, z: Complexes) -> Floats:
        upper = np.repeat(np.sort(np.log(z.imag[:, z.shape[1] // 2 :]), axis=1), _times(self.view), axis=1)
        return 2 * _DB * (upper + x[:, self.parameters, None] - self.zeros_wanted)

    def _jacobian(self, rows: NDArray[np.int64]) -> Floats:
        k = self.parameters
        x = self.x[rows]
        low, _, by_centre = self._low(x)
        slope = np.zeros_like(low)
        by_place = np.zeros((len(rows), k, low.shape[1]))
        own = np.flatnonzero(np.asarray(self.own)[rows])
        for sign, every, turns in ((1, self.poles, self.turns[0]), (-1, self.zeros, self.turns[1])):
            if not every.shape[1]:
                continue
            r = every[rows][:, :, None]
            away = low[:, None, :] - r.imag
            both = 2 * sign / (away * away + r.real**2)
            away *= both
            slope += away.sum(axis=1)
            if len(own):
                t, r, both, away = turns[rows][own], r[own], both[own], away[own]
                by_place[own] += np.einsum("fkn,fnm->fkm", t.real, r.real * both) - np.einsum(
                    "fkn,fnm->fkm", t.imag, away
                )
                still = (t.real * r[:, None, :, 0].real + t.imag * r[:, None, :, 0].imag) / np.abs(
                    r[:, None, :, 0]
                ) ** 2
                by_place[own] -= 2 * sign * still.sum(axis=2)[:, :, None]
        j = np.zeros((len(rows), x.shape[1], low.shape[1] + len(self.zeros_wanted)))
        points = low.shape[1]
        j[:, :k, :points] = by_place * _DB
        j[:, k, :points] = -slope * low * _DB
        if self.view.is_two_sided:
            j[:, k + 1, :points] = slope * by_centre * _DB
            j[:, k + 2, :points] = 1
        if len(self.zeros_wanted):
            half = self.zeros.shape[1] // 2
            turned = self.turns[1][rows].imag[:, :, half:] / self.zeros[rows].imag[:, None, half:]
            order = np.argsort(self.zeros[rows].imag[:, half:], axis=1)
            turned = np.take_along_axis(turned, order[:, None, :], axis=2)
            j[:, :k, points:] = 2 * _DB * np.repeat(turned, _times(self.view), axis=2)
            j[:, k, points:] = 2 * _DB
        return j

    # -- the descent

    def descend(self, *, fixed: bool) -> Floats:
        """Gauss-Newton; a step is halved until the sum falls. Returns the uncertainty of every parameter coordinate.

        Parameters stay between 0 and 1, scale and centre within a factor of e^2 of where they began: beyond that one
        response is flat over the pass band of the other, and nothing is compared any more.
        """
        k = self.parameters
        unused = np.arange(k)[None, :] >= np.asarray(self.own)[:, None]
        low = np.full(self.x.shape, -np.inf)
        high = np.full(self.x.shape, np.inf)
        low[:, :k], high[:, :k] = 0.0, 1.0
        low[:, k], high[:, k] = self.x[:, k] - _WIDEST, self.x[:, k] + _WIDEST
        if self.view.is_two_sided:
            low[:, k + 1], high[:, k + 1] = -_WIDEST, _WIDEST
        r = self._residual(self.x, self.poles, self.zeros)
        cost = np.einsum("fr,fr->f", r, r)
        normal = np.zeros((len(r), self.x.shape[1], self.x.shape[1]))
        active = np.arange(len(r))
        for _ in range(_MOST_STEPS):
            j = self._jacobian(active)
            normal[active] = j @ j.transpose(0, 2, 1)
            downhill = -np.einsum("fxr,fr->fx", j, r[active])
            x = self.x[active]
            stuck = np.zeros(x.shape, dtype=bool)
            stuck[:, :k] = unused[active] | fixed
            stuck |= ((x <= low[active]) & (downhill < 0)) | ((x >= high[active]) & (downhill > 0))
            full = _solved(normal[active], downhill, stuck)
            before = cost[active].copy()
            self._try(active, full, (low, high), r, cost)
            better = cost[active] < before * (1 - 1e-6)
            active = active[better]
            if not len(active):
                break
        inverse = np.linalg.pinv(_without(normal[:, : k + 1, : k + 1], np.pad(unused, ((0, 0), (0, 1)))))
        spread: Floats = np.sqrt(cost[:, None] * np.abs(np.einsum("fxx->fx", inverse)))[:, :k]
        return spread

    def _try(
        self, active: NDArray[np.int64], full: Floats, bounds: tuple[Floats, Floats], r: Floats, cost: Floats
    ) -> None:
        """Take the step where it lowers the sum, shortened where it does not; in place."""
        left, length = active, 1.0
        kept = self.x[active].copy(), self.poles[active].copy(), self.zeros[active].copy()
        where = {row: k for k, row in enumerate(active.tolist())}
        while len(left) and length > _SHORTEST:
            at = np.asarray([where[row] for row in left.tolist()])
            self.x[left] = np.clip(kept[0][at] + length * full[at], bounds[0][left], bounds[1][left])
            self._shapes(left)
            new = self._residual(self.x[left], self.poles[left], self.zeros[left])
            sums = np.einsum("fr,fr->f", new, new)
            good = sums < cost[left]
            r[left[good]], cost[left[good]] = new[good], sums[good]
            left = left[~good]
            length /= 4
        if len(left):
            at = np.asarray([where[row] for row in left.tolist()])
            self.x[left], self.poles[left], self.zeros[left] = (part[at] for part in kept)

    # -- what is said

    def measured(self, spread: Floats) -> tuple[Fit, ...]:
        """Build the members in the band of H and measure all distances from H."""
        view, k = self.view, self.parameters
        lows = [self._member(row) for row in range(len(self.families))]
        edges = np.asarray([p.reference(W3DB).w / p.reference(W0).w for p in lows])
        scale = np.exp(self.x[:, k])
        centre = self.x[:, k + 1] if view.is_two_sided else np.zeros(len(lows))
        response, delay = self._errors(edges, scale, centre)
        doubled = len(view.low_poles) // view.order
        poles = 100 * distances_of_roots(view.low_poles, np.repeat(self.poles, doubled, axis=1))
        zeros = np.zeros(len(lows))
        if self.zeros.shape[1]:
            zeros = 100 * distances_of_roots(view.low_zeros, np.repeat(self.zeros, _times(view), axis=1))
        return tuple(
            Fit(
                family,
                _in_band(view, low, float(scale[row]), float(centre[row])),
                tuple(
                    abs(p.at(t + _STEP) - p.at(t - _STEP)) / (2 * _STEP) * dt
                    for p, t, dt in zip(
                        family.parameters(view.order),
                        self.x[row].tolist(),
                        spread[row].tolist(),
                        strict=False,
                    )
                ),
                float(response[row]),
                float(delay[row]),
                float(poles[row]),
                float(zeros[row]),
            )
            for row, (family, low) in enumerate(zip(self.families, lows, strict=True))
        )

    def _member(self, row: int) -> Prototype:
        family, order = self.families[row], self.view.order
        parameters = family.parameters(order)
        if not parameters:
            return _fixed_shape(family, order)
        values = tuple(p.at(t) for p, t in zip(parameters, self.x[row].tolist(), strict=False))
        return build(family, order, values, exact=False)

    def _errors(self, edges: Floats, scale: Floats, centre: Floats) -> tuple[Floats, Floats]:
        """Response error in dB and delay error in per cent of each row."""
        view = self.view
        unit = np.linspace(0, 1, max(64, 12 * view.order) + 1)
        unit[0] = 1e-6  # DC itself is nowhere on the axis of a band-stop or a high-pass
        resonances = np.abs(view.low_poles.imag) / scale[:, None]  # narrow ones of H fall between the points
        low = np.concatenate(
            [unit * edges[:, None], np.clip(resonances, 1e-6 * edges[:, None], edges[:, None])], axis=1
        )
        w, rate = w_of(view, low * scale[:, None], centre[:, None])
        sides = w.shape[2] if w.ndim == 3 else 1
        w, rate = w.reshape(len(edges), -1), rate.reshape(len(edges), -1)
        difference = np.repeat(curves(self.poles, self.zeros, low), sides, axis=1) - level(view, w)
        if view.is_two_sided:
            difference += self.x[:, -1, None]
        theirs = np.repeat(_delays(self.poles, low), sides, axis=1)
        own = _delays(view.poles[None, :], w) - _delays(view.zeros[view.zeros.real != 0][None, :], w)
        ratio = own * rate * scale[:, None] / theirs
        return np.abs(difference).max(axis=1), 100 * np.abs(ratio - 1).max(axis=1)


def level(view: View, w: Floats) -> Floats:
    """The attenuation of H in dB at w (in units of w0), relative to its pass band: DC, or the centre of a band-pass."""
    flat = np.asarray(w).reshape(1, -1)
    total = log_curves(view.poles[None, :], flat) - log_curves(view.zeros[None, :], flat)
    if view.at_origin:
        total -= view.at_origin * np.log(flat**2)
    if view.band == BAND_PASS:
        one = np.ones((1, 1))
        total -= log_curves(view.poles[None, :], one) - log_curves(view.zeros[None, :], one)
    return np.asarray(total * _DB).reshape(np.shape(w))


def _delays(roots: Complexes, w: Floats) -> Floats:
    r = roots[..., None]
    away = w[..., None, :] - r.imag
    delay: Floats = -(r.real / (away * away + r.real**2)).sum(axis=-2)
    return delay


def _times(view: View) -> int:
    """How many zeros of H stand for one of the low-pass."""
    return len(view.low_zeros) // max(1, len(view.prototype_zeros))


def _in_band(view: View, low: Prototype, scale: float, centre: float) -> Prototype:
    if view.band == LOW_PASS:
        return low.scaled(W0, scale * view.w0)
    if view.band == HIGH_PASS:
        return low.scaled(W0, view.w0 / scale).high_pass()
    c = view.w0 * math.exp(centre)
    low = low.scaled(W0, scale)
    return low.moved(view.band, c, view.width * c)


def _without(normal: Floats, stuck: Bools) -> Floats:
    """The matrices with rows and columns of stuck coordinates made those of the unit matrix."""
    free = ~stuck
    out: Floats = normal * (free[:, :, None] & free[:, None, :])
    size = np.einsum("fxx->fx", out)
    size[...] = size * (1 + 1e-14) + stuck + 1e-300
    return out


def _solved(normal: Floats, downhill: Floats, stuck: Bools) -> Floats:
    right = np.where(stuck, 0.0, downhill)[:, :, None]
    return np.asarray(np.linalg.solve(_without(normal, stuck), right)[:, :, 0], dtype=float)


def _lined_up_distance(wanted: Complexes, roots: Complexes) -> Floats:
    if wanted.shape[1] != len(roots) or not len(roots):
        return np.zeros(len(wanted))
    distance: Floats = (np.abs(wanted - roots) / np.abs(wanted)).max(axis=1)
    return distance


def _nearest_by_poles(family: Family, view: View, place: Floats) -> Floats:
    """The coordinates at which poles and zeros come nearest in the mean square, from a start (Gauss-Newton)."""
    own = len(family.parameters(view.order))
    best, r = place, _apart(family, view, place)
    for _ in range(_MOST_STEPS):
        j = np.empty((len(r), own))
        for k in range(own):
            step = -_STEP if best[k] > 0.5 else _STEP
            moved = best.copy()
            moved[k] += step
            j[:, k] = (_apart(family, view, moved) - r) / step
        full = np.linalg.lstsq(j, -r, rcond=None)[0]
        length, lower = 1.0, False
        while not lower and length > _SHORTEST:
            moved = best.copy()
            moved[:own] = np.clip(best[:own] + length * full, 0, 1)
            new = _apart(family, view, moved)
            lower = float(new @ new) < float(r @ r) * (1 - 1e-6)
            length /= 4
        if not lower:
            break
        best, r = moved, np.asarray(new, dtype=float)
    return best


def _apart(family: Family, view: View, place: Floats) -> Floats:
    """Relative distances of lined-up poles and zeros as real numbers, all divided by w0."""
    p, z = shape_at(family, view.order, place)
    p, z = np.repeat(p, len(view.low_poles) // view.order), np.repeat(z, _times(view))
    apart = np.concatenate([(view.low_poles - p) / np.abs(p), (view.low_zeros - z) / np.abs(z)])
    return np.concatenate([apart.real, apart.imag])
