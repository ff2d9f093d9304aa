"""What H does in time: step and impulse response, and the figures that are read off a step.

Everything is a sum of modes (:mod:`symnet.response.modes`), so every figure is a root of such a sum: the peak is
where the slope is zero, the rise time lies between two crossings, the settling time is the last crossing of a band.
Crossings are bracketed on the times that the modes themselves give, from far below the fastest to far beyond the
slowest and several in each turn of every oscillation, and closed in to the last digit; they are not read off a grid.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.errors import Fault, LimitError, NotationError, UndefinedError
from symnet.exact.ratio import Ratio
from symnet.response.frequency import in_numbers
from symnet.response.modes import Modes, decays
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer

__all__ = ["StepResponse", "step"]

Floats: TypeAlias = NDArray[np.float64]
Times: TypeAlias = "float | Sequence[float] | Floats"

_LARGEST_ORDER: Final = 100
_MOST_TURNS: Final = 2000
_DIES_OUT: Final = 40.0  # time constants until exp(-t/tau) is below the last digit of a double


@dataclass(frozen=True, eq=False)
class StepResponse(Displayed):
    """The response of H to an input that jumps from 0 to 1 at t = 0; a function of t in seconds.

    Its values are in the unit of H. ``impulse(t)`` is its slope for t > 0, the response to a pulse of area 1, in the
    unit of H per second; ``pulse(t, width)`` the response to an input of 1 that lasts ``width`` seconds.
    """

    ratio: Ratio
    modes: Modes

    def __call__(self, t: Times) -> Floats:
        """The response at the times t in seconds, any shape; zero before t = 0."""
        times = np.asarray(t, dtype=float)
        after = np.where(times < 0, 0.0, times)
        return np.where(times < 0, 0.0, self.modes(after))

    def impulse(self, t: Times) -> Floats:
        """The response to a pulse of area 1 at t = 0, for t > 0 and without the pulse that H(infinity) passes on."""
        times = np.asarray(t, dtype=float)
        return np.where(times < 0, 0.0, self._slope(np.where(times < 0, 0.0, times)))

    def pulse(self, t: Times, width: float) -> Floats:
        """The response to an input that is 1 from t = 0 to ``width`` in seconds, and 0 otherwise."""
        if not width > 0:
            raise NotationError(Fault(f"a pulse of {width} s", "its width is a time in seconds above 0"))
        times = np.asarray(t, dtype=float)
        return self(times) - self(times - width)

    @property
    def initial(self) -> float:
        """The value right after t = 0, H(infinity)."""
        h = self.ratio
        return float(h.num[-1] / h.den[-1]) if len(h.num) == len(h.den) else 0.0

    @property
    def settles(self) -> bool:
        """Whether the response tends to a value: every pole of H lies in the left half plane."""
        return all(root.real < 0 for root in self.ratio.poles())

    @property
    def final(self) -> float | None:
        """The value that it tends to, H(0); None where it does not settle."""
        return float(self.ratio.num[0] / self.ratio.den[0]) if self.settles and self.ratio.num else None

    @cached_property
    def extremes(self) -> tuple[tuple[float, float], ...]:
        """Every maximum and minimum after t = 0, as (t in seconds, value), in order of time."""
        found = _crossings(self._slope, self._grid)
        return tuple((t, float(self.modes([t])[0])) for t in found)

    @property
    def overshoot(self) -> float | None:
        """How far the response goes beyond its final value, in per cent of final - initial; 0 where it does not.

        None where it does not settle, or settles where it began.
        """
        final, initial = self.final, self.initial
        if final is None or final == initial:
            return None
        beyond = max(((y - final) / (final - initial) for _, y in self.extremes), default=0.0)
        return 100 * max(0.0, beyond)

    @property
    def undershoot(self) -> float | None:
        """How far it goes the wrong way, below its initial value, in per cent of final - initial."""
        final, initial = self.final, self.initial
        if final is None or final == initial:
            return None
        back = max(((initial - y) / (final - initial) for _, y in self.extremes), default=0.0)
        return 100 * max(0.0, back)

    @property
    def peak(self) -> tuple[float, float] | None:
        """Where the response is largest in magnitude, as (t in seconds, value); None where it grows without bound."""
        if not self.settles:
            return None
        ends = [(0.0, self.initial), *self.extremes]
        t, y = max(ends, key=lambda point: abs(point[1]))
        return (t, y) if abs(y) >= abs(self.final or 0.0) else None

    def crossings(self, level: float) -> tuple[float, ...]:
        """Every time, in seconds, at which the response passes a level given in the unit of H."""
        return tuple(_crossings(lambda t: self.modes(t) - level, self._grid))

    def rise(self, low: float = 10.0, high: float = 90.0) -> float | None:
        """The time in seconds from ``low`` to ``high`` per cent of the way, first crossing to first crossing.

        None where the response does not settle, or does not start below and pass both.
        """
        one, two = (self._first(share) for share in (low, high))
        return None if one is None or two is None or two < one else two - one

    def delay(self) -> float | None:
        """The time in seconds until half of the way is passed for the first time."""
        return self._first(50.0)

    def settling(self, within: float = 1.0) -> float | None:
        """The time in seconds from which on the response stays within so many per cent of final - initial.

        0 where it is within from the start; None where it does not settle or has no way to go.
        """
        final, initial = self.final, self.initial
        if final is None or final == initial:
            return None
        band = within / 100 * abs(final - initial)
        if not 0 < within < 100:
            raise NotationError(Fault(f"a band of {within} %", "it lies between 0 and 100 per cent"))
        last = [
            t
            for edge in (final - band, final + band)
            for t in _crossings(lambda t, edge=edge: self.modes(t) - edge, self._grid)  # type: ignore[misc]
        ]
        return max(last, default=0.0)

    def rows(self) -> tuple[tuple[str, str, float | None], ...]:
        """The figures as (what, unit, value); the unit "" is that of H."""
        return (
            ("initial value, H(infinity)", "", self.initial),
            ("final value, H(0)", "", self.final),
            ("overshoot, of final - initial", "%", self.overshoot),
            ("undershoot", "%", self.undershoot),
            ("time of the peak", "s", None if self.peak is None else self.peak[0]),
            ("delay to 50 %", "s", self.delay()),
            ("rise, 10 % to 90 %", "s", self.rise()),
            ("settling to 1 %", "s", self.settling(1)),
            ("settling to 0.1 %", "s", self.settling(0.1)),
        )

    def __repr__(self) -> str:
        final = self.final
        if final is None:
            return f"<StepResponse of order {self.ratio.order}: does not settle>"
        return f"<StepResponse of order {self.ratio.order}: {self.initial:.6g} to {final:.6g}>"

    def _first(self, share: float) -> float | None:
        final, initial = self.final, self.initial
        if final is None or final == initial:
            return None
        found = self.crossings(initial + share / 100 * (final - initial))
        return found[0] if found else None

    @cached_property
    def _slope(self) -> Modes:
        return self.modes.derivative()

    @cached_property
    def _grid(self) -> Floats:
        return _times(decays(self.ratio))


def step(H: Transfer | Ratio) -> StepResponse:
    """The response of H to a step of 1 at t = 0, with its figures.

    y(t) is the inverse transform of H(s)/s: a sum over the poles, exact but for the last digits of a double.

    Raises MissingValueError while a name of H has no number, UndefinedError where H grows with s (the step would give
    a pulse of infinite height), LimitError above order 100.

    >>> import symnet as sn
    >>> y = sn.step(sn.derive(sn.network("in -- R1 = 1k -- out -- C1 = 1 uF -- gnd; drive in; read out")))
    >>> y([0.0, 1e-3]).round(6).tolist()
    [0.0, 0.632121]
    >>> round(y.rise() / 1e-3, 4)             # ln 9
    2.1972
    """
    h = in_numbers(H)
    if len(h.num) > len(h.den):
        raise UndefinedError(
            Fault(
                "H grows with s: its step response holds a pulse of infinite height",
                "add the pole that limits it",
            )
        )
    if h.order > _LARGEST_ORDER:
        raise LimitError(
            Fault(
                f"order {h.order}: step responses are computed up to order {_LARGEST_ORDER}",
                "split the network",
            )
        )
    return StepResponse(h, Modes.of(h, 1))


def _times(found: Sequence[tuple[float, float]]) -> Floats:
    """Times in seconds among which no mode does anything unseen: a geometric run, and eight in each turn."""
    if not found:
        return np.array([1.0])
    sizes = [abs(complex(*each)) for each in found]
    slow = min(abs(decay) or size for (decay, _), size in zip(found, sizes, strict=True))
    end = _DIES_OUT / slow
    runs = [np.geomspace(1e-4 / max(sizes), end, 600)]
    for decay, w in found:
        if w:
            last = min(end, _DIES_OUT / decay if decay > 0 else end)
            count = min(_MOST_TURNS, int(8 * w * last / (2 * np.pi)) + 8)
            runs.append(np.linspace(0, last, count + 1)[1:])
    return np.unique(np.concatenate(runs))


def _crossings(value: Callable[[Floats], Floats], grid: Floats) -> list[float]:
    """Where a function changes sign between the times of a grid, closed in by bisection of all brackets at once."""
    values = value(grid)
    scale = float(np.abs(values).max(initial=0.0))
    signs = np.sign(np.where(np.abs(values) <= 1e-13 * scale, 0.0, values))
    known = np.flatnonzero(signs)
    change = np.flatnonzero(signs[known[1:]] != signs[known[:-1]])
    low, high = grid[known[change]], grid[known[change + 1]]
    rising = signs[known[change + 1]]
    for _ in range(60):
        if not len(low):
            break
        middle = (low + high) / 2
        above = np.sign(value(middle)) == rising
        low, high = np.where(above, low, middle), np.where(above, middle, high)
    return [float(t) for t in (low + high) / 2]
