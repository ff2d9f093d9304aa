"""How far a low-pass is from the members of a family: the scale and the parameters fitted, and three distances.

The fit is by response, not by poles: element values of four digits move the poles of a high order by tens of
per cent and its response by a thousandth of a dB (a ninth-order Bessel ladder does both). Frequency scale and
continuous parameters are fitted together by least squares of the attenuation in dB over the pass band, on
Gauss-Newton steps that never increase the sum; the start is the nearest of a table of members that covers the
whole range of the parameters, so that no local minimum far away can be taken. A fit by poles is there for the
opposite case, poles of high Q that are a little off. Then everything is said about the fitted member:

* response error: largest |difference of the attenuations relative to DC| over its pass band, in dB;
* delay error: largest relative difference of the group delays there, in per cent;
* pole error: largest |p/w0 - q/w0'| / |q/w0'| over the pairs of poles p and q, each set scaled by its own w0, in
  the pairing that makes the largest one smallest, in per cent (finite zeros likewise).

All three are the same for a high-pass and for the low-pass that s -> 1/s makes of it.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from itertools import product
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.shape.families.curves import attenuation, geometric_mean, group_delay, last_crossing
from symnet.shape.families.family import Family, build
from symnet.shape.families.prototype import W0, W3DB, Prototype

__all__ = ["Fit", "Target", "distance_of_roots", "fit", "fit_by_poles"]

Floats: TypeAlias = NDArray[np.float64]

_TABLE_POINTS: Final = (
    1,
    33,
    9,
)  # members along each parameter in the table of starts, for 0, 1, 2 parameters
_STEP: Final = 1e-6  # of a finite difference; coordinates run from 0 to 1, the scale is a logarithm
_MOST_STEPS: Final = 25
_ROUNDS: Final = 4  # of one coordinate after the other, where there are several
_GOLDEN: Final = (math.sqrt(5) - 1) / 2
_NARROWEST: Final = 1e-5
_WIDEST: Final = 2.0
_SHORTEST: Final = 1e-3  # of a Gauss-Newton step, before the point is taken as the minimum


@dataclass(frozen=True, slots=True)
class Target:
    """What is to be recognised, as a low-pass divided by its w0: poles, finite zeros, -3.0103 dB frequency."""

    poles: tuple[complex, ...]
    zeros: tuple[complex, ...]
    w3dB: float
    w0: float
    """The geometric mean of the pole magnitudes in rad/s, by which everything was divided."""

    @classmethod
    def of(cls, poles: Sequence[complex], zeros: Sequence[complex] = ()) -> Target | None:
        """The target with these roots in rad/s; None when |H| never comes down to half power for good."""
        w0 = geometric_mean(poles)
        p, z = tuple(r / w0 for r in poles), tuple(r / w0 for r in zeros)
        w3 = last_crossing(p, z)
        return None if w3 is None else cls(p, z, w3, w0)


@dataclass(frozen=True, slots=True)
class Fit:
    """The member of a family that comes nearest in response, in rad/s, and how near it comes.

    ``uncertainties`` belong to the settings of the prototype, one each: the change that doubles the sum of
    squares, scale and other parameters following. Inside it H cannot tell one value from another.
    """

    prototype: Prototype
    uncertainties: tuple[float, ...]
    response_error_db: float
    delay_error_percent: float
    pole_error_percent: float


def fit(family: Family, target: Target) -> Fit:
    """Fit scale and parameters of the family to the response of the target, and measure the distances."""
    order = len(target.poles)
    table = _table(family, order)
    wanted = attenuation(_pass_band(order) * target.w3dB, target.poles, target.zeros)
    start = int(np.abs(table.curves - wanted).max(axis=1).argmin())
    return _fitted(family, target, table.places[start], fixed=False)


def fit_by_poles(family: Family, target: Target) -> Fit:
    """Fit the parameters to the poles and zeros of the target, so that the pole error is smallest, then the scale.

    For a network whose high-Q poles are off by a per cent or two, which changes its response by some dB.
    """
    order = len(target.poles)
    parameters = family.parameters(order)

    def distance(place: Floats) -> float:
        values = tuple(p.at(float(t)) for p, t in zip(parameters, place, strict=True))
        return max(_pole_errors(*family.near(order, values), target))

    places = _table(family, order).places
    best = min(places, key=distance).copy()
    width = 1.0 / (_TABLE_POINTS[min(len(parameters), 2)] - 1)
    for _ in range(1 if len(parameters) == 1 else _ROUNDS):
        for k in range(len(parameters)):
            best[k] = _golden(distance, best, k, width)
    return _fitted(family, target, best, fixed=True)


def _golden(distance: Callable[[Floats], float], place: Floats, k: int, width: float) -> float:
    """The k-th coordinate of a minimum within a width of the place, the others kept (golden section)."""

    def at(t: float) -> float:
        moved = place.copy()
        moved[k] = t
        return distance(moved)

    low, high = max(0.0, float(place[k]) - width), min(1.0, float(place[k]) + width)
    a, b = high - _GOLDEN * (high - low), low + _GOLDEN * (high - low)
    at_a, at_b = at(a), at(b)
    while high - low > _NARROWEST:
        if at_a < at_b:
            high, b, at_b = b, a, at_a
            a = high - _GOLDEN * (high - low)
            at_a = at(a)
        else:
            low, a, at_a = a, b, at_b
            b = low + _GOLDEN * (high - low)
            at_b = at(b)
    return (low + high) / 2


def _fitted(family: Family, target: Target, place: Floats, *, fixed: bool) -> Fit:
    """The fit that starts from these coordinates, or that keeps them."""
    order = len(target.poles)
    parameters = family.parameters(order)
    unit = _pass_band(order)

    def values_at(x: Floats) -> tuple[float, ...]:
        return tuple(p.at(float(t)) for p, t in zip(parameters, x[:-1], strict=True))

    own = None if parameters else _curve(family, order, ())

    def residual(x: Floats) -> Floats:
        # The last coordinate is the logarithm of where the member's -3 dB frequency comes to lie.
        curve = _curve(family, order, values_at(x)) if own is None else own
        return curve - attenuation(unit * math.exp(x[-1]), target.poles, target.zeros)

    free = np.append(np.full(len(parameters), not fixed), True)
    x, spread = _least_squares(residual, np.append(place, math.log(target.w3dB)), free)
    values = values_at(x)
    made = build(family, order, values, exact=False)  # scaled in the next line, which drops the exact numbers
    made = made.scaled(W3DB, math.exp(x[-1]))
    uncertainties = tuple(
        abs(p.at(float(t) + _STEP) - p.at(float(t) - _STEP)) / (2 * _STEP) * float(dt)
        for p, t, dt in zip(parameters, x[:-1], spread[:-1], strict=True)
    )
    response, delay = _response_errors(made, target)
    poles = 100 * max(_pole_errors(made.poles, made.zeros, target))
    return Fit(made.scaled(W0, made.reference(W0).w * target.w0), uncertainties, response, delay, poles)


def _pass_band(order: int) -> Floats:
    """Points of a pass band of width 1, enough for every ripple of that order."""
    return np.linspace(0, 1, max(48, 8 * order) + 1)[1:]


def _curve(family: Family, order: int, values: tuple[float, ...]) -> Floats:
    """The attenuation of a member over its own pass band."""
    poles, zeros = family.near(order, values)
    known = [r.w for r in family.references(order, values) if r.name == W3DB]
    edge = known[0] if known else last_crossing(poles, zeros) or math.nan
    return attenuation(_pass_band(order) * edge, poles, zeros)


@dataclass(frozen=True, slots=True)
class _Table:
    places: Floats  # coordinates of the members, one row each
    curves: Floats  # their attenuations over their own pass bands, one row each


@lru_cache(maxsize=256)
def _table(family: Family, order: int) -> _Table:
    """Members all over the range of the parameters, so that the fit starts in the right valley."""
    parameters = family.parameters(order)
    ticks = np.linspace(0, 1, _TABLE_POINTS[min(len(parameters), 2)])
    places = list(product(ticks.tolist(), repeat=len(parameters)))
    curves = [
        _curve(family, order, tuple(p.at(t) for p, t in zip(parameters, place, strict=True)))
        for place in places
    ]
    return _Table(np.asarray(places, dtype=float).reshape(len(places), len(parameters)), np.asarray(curves))


def _least_squares(
    residual: Callable[[Floats], Floats], x: Floats, free: NDArray[np.bool_]
) -> tuple[Floats, Floats]:
    """Gauss-Newton in the free coordinates; a step is halved until the sum falls.

    All coordinates but the last stay between 0 and 1, and the last within a factor of e^2 of where it began: beyond
    that one response is flat over the pass band of the other, and nothing is compared any more.
    Returns the place of the minimum and, for each coordinate, the change that doubles the sum of squares.
    """
    low = np.append(np.zeros(len(x) - 1), x[-1] - _WIDEST)
    high = np.append(np.ones(len(x) - 1), x[-1] + _WIDEST)
    r = residual(x)
    cost = float(r @ r)
    jacobian = np.zeros((len(r), len(x)))
    for _ in range(_MOST_STEPS):
        for k in range(len(x)):
            step = -_STEP if k < len(x) - 1 and x[k] > 0.5 else _STEP
            moved = x.copy()
            moved[k] += step
            jacobian[:, k] = (residual(moved) - r) / step
        full = np.zeros(len(x))
        full[free] = np.linalg.lstsq(jacobian[:, free], -r, rcond=None)[0]
        length, lower = 1.0, None
        while lower is None and length > _SHORTEST:
            moved = np.clip(x + length * full, low, high)
            new = residual(moved)
            lower = new if float(new @ new) < cost else None
            length /= 2
        if lower is None:
            break
        x, r, cost, before = moved, lower, float(lower @ lower), cost
        if cost > before * (1 - 1e-6):
            break
    return x, np.sqrt(cost * np.abs(np.diag(np.linalg.pinv(jacobian.T @ jacobian))))


def _response_errors(made: Prototype, target: Target) -> tuple[float, float]:
    """Response error in dB and delay error in per cent."""
    w = np.linspace(0, made.reference(W3DB).w, max(96, 16 * made.order) + 1)
    difference = attenuation(w, made.poles, made.zeros) - attenuation(w, target.poles, target.zeros)
    delays = group_delay(w, target.poles, target.zeros) / group_delay(w, made.poles, made.zeros)
    return float(np.abs(difference).max()), 100 * float(np.abs(delays - 1).max())


def _pole_errors(poles: Sequence[complex], zeros: Sequence[complex], target: Target) -> tuple[float, float]:
    """Relative distances of the poles and of the finite zeros from those of the target, both divided by w0."""
    w0 = geometric_mean(poles)
    return (
        distance_of_roots(target.poles, [p / w0 for p in poles]),
        distance_of_roots(target.zeros, [z / w0 for z in zeros]),
    )


def distance_of_roots(roots: Sequence[complex], wanted: Sequence[complex]) -> float:
    """The largest relative distance |p - q|/|q| in the pairing of the roots p with the wanted q that makes it smallest.

    Where every wanted root has its nearest root for itself, that pairing is the best one; otherwise the smallest
    bound under which a complete pairing exists is found by bisection over the distances, with augmenting paths.
    """
    if not wanted:
        return 0.0
    p, q = np.asarray(roots, dtype=complex), np.asarray(wanted, dtype=complex)
    distances = np.abs(p[None, :] - q[:, None]) / np.abs(q)[:, None]
    nearest = distances.argmin(axis=1)
    if len(set(nearest.tolist())) == len(q):
        return float(distances.min(axis=1).max())
    levels = np.unique(distances)
    low, high = 0, len(levels) - 1
    while low < high:
        middle = (low + high) // 2
        if _can_pair(distances <= levels[middle]):
            high = middle
        else:
            low = middle + 1
    return float(levels[low])


def _can_pair(allowed: NDArray[np.bool_]) -> bool:
    partner: dict[int, int] = {}

    def place(row: int, seen: set[int]) -> bool:
        for column in np.flatnonzero(allowed[row]).tolist():
            if column not in seen:
                seen.add(column)
                if column not in partner or place(partner[column], seen):
                    partner[column] = row
                    return True
        return False

    return all(place(row, set()) for row in range(len(allowed)))
