"""The fit by response: scale and parameters of every family at once, until the pass bands lie over each other.

Least squares of the attenuation in dB over the pass band of H, of a band-pass and a band-stop with the centre and the
level besides; finite zeros enter with the logarithm of their frequency, in the same measure. All families go through
the same Gauss-Newton steps, as one batch of arrays, because a catalogue is gone through for every H. A step never
increases a sum, and a row whose step promises nothing more is left alone.
What takes the time are the poles of new members: a step that promises nothing is not tried, and the derivatives by a
single parameter are those along the last step, at the start along the table. (With two parameters that is Broyden's
rule; it was measured, and loses in more steps what it saves in members.)
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.shape.families.family import Family
from symnet.shape.members import Complexes, Floats, Members, curves, log_curves, shape_at, unit_band
from symnet.shape.thresholds import RESPONSE_DB
from symnet.shape.undoing import View, omega, w_of

__all__ = ["ByResponse", "level", "zeros_for_one"]

Bools: TypeAlias = NDArray[np.bool_]
Rows: TypeAlias = NDArray[np.int64]

_STEP: Final = 1e-6  # of a finite difference; coordinates run from 0 to 1
_MOST_STEPS: Final = 40
_WIDEST: Final = 2.0
_SHORTEST: Final = 1e-3  # of a Gauss-Newton step, before the point is taken as the minimum
#: A promise of less than this part of the sum is not worth a step. Where the residuals are so large in the mean that no
#: match can come of it, the distance of this member is as good a bound as that of one a per cent nearer, and the other
#: is enough; with two parameters the way may lie along a narrow valley, and nothing is given up.
_WORTH_A_STEP: Final = 1e-7
_FAR_DB: Final = 2 * RESPONSE_DB
_WORTH_FAR: Final = 1e-2
#: Of a residual: rounding; with two parameters, where members are made to ten digits, what those leave.
_ROUNDING_DB: Final = (1e-12, 1e-9)
_DB: Final = 10 / math.log(10)


def level(view: View, w: Floats) -> Floats:
    """The attenuation of H in dB at w (in units of w0), relative to its pass band: DC, or the centre of a band-pass."""
    flat = np.asarray(w).reshape(1, -1)
    total = log_curves(view.poles[None, :], flat) - log_curves(view.zeros[None, :], flat)
    if view.at_origin:
        total -= view.at_origin * np.log(flat**2)
    if view.band == "band-pass":
        one = np.ones((1, 1))
        total -= log_curves(view.poles[None, :], one) - log_curves(view.zeros[None, :], one)
    return np.asarray(total * _DB).reshape(np.shape(w))


def zeros_for_one(view: View) -> int:
    """How many zeros of H stand for one of the low-pass."""
    return len(view.low_zeros) // max(1, len(view.prototype_zeros))


@dataclass(slots=True)
class ByResponse:
    """F families being fitted to one view; x holds one row of coordinates each.

    The coordinates are K parameters (between 0 and 1; unused ones stay 0), the logarithm of the scale, and for a
    two-sided band the logarithm by which the centre moves and the level in dB. ``turns`` are the derivatives of poles
    and zeros by the parameters, ``edges`` the -3.0103 dB frequencies of the members at the start.
    """

    view: View
    families: tuple[Family, ...]
    own: tuple[int, ...]
    w: Floats
    wanted: Floats
    zeros_wanted: Floats
    x: Floats
    poles: Complexes
    zeros: Complexes
    turns: tuple[Complexes, Complexes]
    edges: Floats

    @classmethod
    def of(cls, view: View, table: Members) -> ByResponse:
        """At the row of the table whose pass band is nearest, for each family."""
        n, families = view.order, table.families
        w = w_of(view, unit_band(n) * view.edge)[0].T.reshape(-1)
        wanted = level(view, w)
        upper = np.sort(np.abs(view.low_zeros[view.low_zeros.imag > 0]))
        sides = wanted.reshape(-1, table.curves.shape[1])
        distance = np.abs(table.curves - sides[0]).max(axis=1)
        if len(sides) > 1:
            distance = np.maximum(distance, np.abs(table.curves - sides[1]).max(axis=1))
        if len(upper):
            distance = distance + 10 * _zero_distances(view, table, np.log(upper))
        best = np.asarray([first + int(distance[first:last].argmin()) for first, last in table.runs])
        k = table.places.shape[1]
        x = np.zeros((len(families), k + (3 if view.is_two_sided else 1)))
        x[:, :k] = table.places[best]
        x[:, k] = np.log(view.edge / table.edges[best])
        turns = (table.turns[0][best], table.turns[1][best])
        own = tuple(len(f.parameters(n)) for f in families)
        shapes = table.poles[best], table.zeros[best]
        return cls(view, families, own, w, wanted, np.log(upper), x, *shapes, turns, table.edges[best])

    def restarted(self, rows: Rows, places: Floats) -> ByResponse:
        """Some of the families at given parameters, where only scale, centre and level are left to be fitted."""
        x = self.x[rows].copy()
        x[:, : self.parameters] = places
        x[:, self.parameters] = 0.0  # poles are divided by w0; a steep edge would mislead
        again = ByResponse(
            self.view,
            tuple(self.families[row] for row in rows.tolist()),
            tuple(self.own[row] for row in rows.tolist()),
            self.w,
            self.wanted,
            self.zeros_wanted,
            x,
            self.poles[rows].copy(),
            self.zeros[rows].copy(),
            (self.turns[0][rows].copy(), self.turns[1][rows].copy()),
            self.edges[rows].copy(),
        )
        again._shapes(np.arange(len(rows)))
        return again

    @property
    def parameters(self) -> int:
        """K, the number of coordinates for parameters."""
        return int(self.x.shape[1]) - (3 if self.view.is_two_sided else 1)

    # -- residuals

    def _shapes(self, rows: Rows) -> None:
        """Poles and zeros at the coordinates of these rows."""
        for row in rows.tolist():
            if self.own[row]:
                place = self.x[row, : self.parameters]
                self.poles[row], self.zeros[row] = shape_at(self.families[row], self.view.order, place)

    def _turn(self, rows: Iterable[int], before: tuple[Floats, Complexes, Complexes]) -> None:
        """The derivatives of these rows: of one parameter those of the last step, of more by finite differences."""
        for row in rows:
            place = self.x[row, : self.parameters]
            if self.own[row] == 1:
                step = place[0] - before[0][row, 0]
                if abs(step) > _STEP:
                    for turns, here, there in zip(
                        self.turns, (self.poles, self.zeros), before[1:], strict=True
                    ):
                        turns[row, 0] = (here[row] - there[row]) / step
                continue
            for k in range(self.own[row]):
                step = -_STEP if place[k] > 0.5 else _STEP
                moved = place.copy()
                moved[k] += step
                shape = shape_at(self.families[row], self.view.order, moved)
                for turns, new, here in zip(self.turns, shape, (self.poles, self.zeros), strict=True):
                    turns[row, k] = (new - here[row]) / step

    def _low(self, x: Floats) -> tuple[Floats, Floats]:
        """The frequencies on the scale of the members, and d/d(centre) of the frequencies."""
        k = self.parameters
        scale = np.exp(x[:, k, None])
        if not self.view.is_two_sided:
            return self.w / scale, np.zeros(1)
        low, by_centre = omega(self.view, self.w, x[:, k + 1, None])
        return low / scale, by_centre / scale

    def _residual(self, x: Floats, p: Complexes, z: Complexes) -> Floats:
        low, _ = self._low(x)
        r = curves(p, z, low) - self.wanted
        if self.view.is_two_sided:
            r += x[:, -1, None]
        if len(self.zeros_wanted):
            upper = np.repeat(np.log(z.imag[:, z.shape[1] // 2 :]), zeros_for_one(self.view), axis=1)
            r = np.concatenate(
                [r, 2 * _DB * (upper + x[:, self.parameters, None] - self.zeros_wanted)], axis=1
            )
        return r

    def _jacobian(self, rows: Rows) -> Floats:
        k = self.parameters
        low, by_centre = self._low(self.x[rows])
        by_place = np.zeros((len(rows), k, low.shape[1]))
        roots = np.concatenate([self.poles[rows], self.zeros[rows]], axis=1)
        sign = np.concatenate([np.ones(self.poles.shape[1]), -np.ones(self.zeros.shape[1])])
        r = roots[:, :, None]
        away = low[:, None, :] - r.imag
        both = 2 * sign[:, None] / (away * away + r.real**2)
        away *= both
        slope = away.sum(axis=1)
        own = np.flatnonzero(np.asarray(self.own)[rows])
        if len(own):
            at = rows[own]
            t, r = np.concatenate([self.turns[0][at], self.turns[1][at]], axis=2), r[own]
            by_place[own] = t.real @ (r.real * both[own]) - t.imag @ away[own]
            r = r[:, None, :, 0]
            still = sign * (t.real * r.real + t.imag * r.imag) / (r.real**2 + r.imag**2)
            by_place[own] -= 2 * still.sum(axis=2)[:, :, None]
        j = np.zeros((len(rows), self.x.shape[1], low.shape[1] + len(self.zeros_wanted)))
        points = low.shape[1]
        j[:, :k, :points] = by_place * _DB
        j[:, k, :points] = -slope * low * _DB
        if self.view.is_two_sided:
            j[:, k + 1, :points] = slope * by_centre * _DB
            j[:, k + 2, :points] = 1
        if len(self.zeros_wanted):
            half = self.zeros.shape[1] // 2
            turned = self.turns[1][rows].imag[:, :, half:] / self.zeros[rows].imag[:, None, half:]
            j[:, :k, points:] = 2 * _DB * np.repeat(turned, zeros_for_one(self.view), axis=2)
            j[:, k, points:] = 2 * _DB
        return j

    # -- the descent

    def descend(self, *, fixed: bool = False) -> Floats:
        """Gauss-Newton; a step is shortened until the sum falls. Returns the uncertainty of every parameter coordinate.

        Parameters stay between 0 and 1 (where they are, if ``fixed``), scale and centre within a factor of e^2 of
        where they began: beyond that one response is flat over the pass band of the other, and nothing is compared
        any more.
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
        single = np.asarray(self.own) < 2
        least = r.shape[1] * np.where(single, *_ROUNDING_DB) ** 2
        far = r.shape[1] * _FAR_DB**2
        normal = np.zeros((len(r), self.x.shape[1], self.x.shape[1]))
        active = np.arange(len(r))
        before = self.x.copy(), self.poles.copy(), self.zeros.copy()
        for _ in range(_MOST_STEPS):
            self._turn(active.tolist(), before)
            j = self._jacobian(active)
            normal[active] = j @ j.transpose(0, 2, 1)
            downhill = -(j @ r[active][:, :, None])[:, :, 0]
            x = self.x[active]
            stuck = np.zeros(x.shape, dtype=bool)
            stuck[:, :k] = unused[active] | fixed
            stuck |= ((x <= low[active]) & (downhill < 0)) | ((x >= high[active]) & (downhill > 0))
            full = _solved(normal[active], downhill, stuck)
            promised = (downhill * full).sum(axis=1)
            hopeless = single[active] & (cost[active] > far)
            worth = np.where(hopeless, _WORTH_FAR, _WORTH_A_STEP) * cost[active]
            going = promised > worth
            active, full = active[going], full[going]
            if not len(active):
                break
            before, sums = (self.x.copy(), self.poles.copy(), self.zeros.copy()), cost[active]
            self._try(active, full, (low, high), r, cost)
            active = active[(cost[active] < sums) & (cost[active] > least[active])]
            if not len(active):
                break
        spread: Floats = np.zeros((len(cost), k))
        own = np.flatnonzero(self.own)
        if len(own):
            free = _without(normal[own, : k + 1, : k + 1], np.pad(unused[own], ((0, 0), (0, 1))))
            variances = np.abs(np.einsum("fxx->fx", np.linalg.pinv(free)))[:, :k]
            spread[own] = np.sqrt(cost[own, None] * variances)
        return spread

    def _try(
        self, active: Rows, full: Floats, bounds: tuple[Floats, Floats], r: Floats, cost: Floats
    ) -> None:
        """Take the step where it lowers the sum, shortened where it does not; in place."""
        left, at, length = active, np.arange(len(active)), 1.0
        kept = self.x[active], self.poles[active], self.zeros[active]
        while len(left) and length > _SHORTEST:
            self.x[left] = np.clip(kept[0][at] + length * full[at], bounds[0][left], bounds[1][left])
            self._shapes(left)
            new = self._residual(self.x[left], self.poles[left], self.zeros[left])
            sums = np.einsum("fr,fr->f", new, new)
            good = sums < cost[left]
            r[left[good]], cost[left[good]] = new[good], sums[good]
            left, at = left[~good], at[~good]
            length /= 4
        if len(left):
            self.x[left], self.poles[left], self.zeros[left] = (part[at] for part in kept)


def _zero_distances(view: View, table: Members, wanted: Floats) -> Floats:
    """The largest difference of the logarithms of the zeros, members and H laid over each other at the edge."""
    sizes = np.sort(np.log(np.abs(table.zeros[:, table.zeros.shape[1] // 2 :])), axis=1)
    sizes = np.repeat(sizes, zeros_for_one(view), axis=1)
    if sizes.shape[1] != len(wanted):
        return np.zeros(len(table.index))
    moved = sizes - np.log(table.edges / view.edge)[:, None] - wanted
    distance: Floats = np.abs(moved).max(axis=1)
    return distance


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
