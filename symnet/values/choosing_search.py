"""The search for the best combination: all of them where there are few, branch and bound beyond.

N and D are linear in the value of every part that no tie squares. So each figure, a quotient of two coefficients, runs
in one direction as one value grows, and over a box of values (a range of each list) it takes its limits at corners:
2^k exact evaluations of H bound it without any slack. Boxes whose bound lies above the best that is known are
dropped, the others halved where they are widest, until single combinations remain; the bound of what is left when the
work allowed is used up is the proof that there is. A part that does enter squared has no such limits, and its list is
split first. What lets a bound cut early is a good start (:mod:`symnet.values.choosing_start`).

Everything is evaluated in batches of arrays, on the diagram of H (:mod:`symnet.exact.batches`). The seed is fixed, and
the work is counted in evaluations and not in seconds, so that the same question has the same answer.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from itertools import product
from math import prod
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.progress import Progress
from symnet.values.choosing_aim import Aim, Figures, Floats
from symnet.values.choosing_start import improved, snapped

__all__ = ["MOST_ENUMERATED", "Found", "Space", "search"]

Indices: TypeAlias = NDArray[np.int64]  # combinations x parts: places in the lists

#: Up to so many combinations every one of them is computed.
MOST_ENUMERATED: Final = 100_000
_CHUNK: Final = 32_768
_FIRST: Final = 2048  # of an enumeration: what is then known rules out most of the others
_BOXES: Final = 2048  # halved in one step
_SAME: Final = 1e-9  # relative: figures that agree so far are the same response
_MOST_EQUAL: Final = 4000


@dataclass(frozen=True, eq=False)
class Space:
    """What is searched: the list of each part, in rising order, and how figures follow from values.

    ``figures`` takes one array of values (SI) per part and gives the figures; ``linear`` says of each part whether
    corners bound the figures over its range.
    """

    lists: tuple[Floats, ...]
    figures: Callable[[Sequence[Floats]], Figures]
    linear: tuple[bool, ...]
    aim: Aim

    @property
    def combinations(self) -> int:
        """The number of combinations."""
        return prod(len(values) for values in self.lists)

    def at(self, places: Indices) -> Figures:
        """The figures of these combinations."""
        return self.figures([values[places[:, k]] for k, values in enumerate(self.lists)])


@dataclass(frozen=True, eq=False)
class Found:
    """The best combinations, best first, with their errors, and how much was looked at.

    ``least`` is a lower bound of the error of every combination that there is; ``complete`` says that none better
    exists, and that no better runner-up does.
    """

    places: Indices
    errors: Floats
    least: float
    evaluations: int
    how: str
    complete: bool


@dataclass(eq=False)
class _Pool:
    """The best combinations so far: of so many different errors, all that share them."""

    space: Space
    wanted: int
    evaluations: int = 0
    places: Indices = field(init=False)
    errors: Floats = field(init=False)

    def __post_init__(self) -> None:
        self.places = np.zeros((0, len(self.space.lists)), dtype=np.int64)
        self.errors = np.zeros(0)
        self.threshold = np.inf

    def take(self, places: Indices) -> None:
        """Look at these combinations; those that no bound rules out are computed."""
        if not len(places):
            return
        figures = self.space.at(places)
        self.evaluations += len(places)
        near = self.space.aim.screen(figures) <= self.threshold * (1 + _SAME)
        self.add(places[near], figures[:, near])

    def add(self, places: Indices, figures: Figures) -> None:
        """Combinations with their figures; the pool keeps the best."""
        if not len(places):
            return
        errors = np.nan_to_num(self.space.aim.error(figures), nan=np.inf, posinf=np.inf)
        kept = errors <= self.threshold * (1 + _SAME)
        places = np.concatenate([self.places, places[kept]])
        errors = np.concatenate([self.errors, errors[kept]])
        if len(errors) > 2 * _MOST_EQUAL:
            few = np.argpartition(errors, 2 * _MOST_EQUAL)[: 2 * _MOST_EQUAL]
            places, errors = places[few], errors[few]
        _, first = np.unique(places, axis=0, return_index=True)
        order = first[np.argsort(errors[first], kind="stable")]
        places, errors = places[order], errors[order]
        if len(errors):
            steps = np.concatenate([[True], errors[1:] > errors[:-1] * (1 + _SAME) + 1e-15])
            rank = np.cumsum(steps)
            inside = rank <= self.wanted
            if rank[-1] >= self.wanted:
                self.threshold = float(errors[inside][-1])
            inside[_MOST_EQUAL:] = False
            places, errors = places[inside], errors[inside]
        self.places, self.errors = places, errors


def search(space: Space, wanted: int, work: int) -> Found:
    """The combinations of the ``wanted`` smallest errors, with at most about ``work`` evaluations."""
    pool = _Pool(space, wanted)
    if space.combinations <= min(MOST_ENUMERATED, work):
        _enumerate(space, pool)
        least = float(pool.errors[0]) if len(pool.errors) else np.inf
        return Found(pool.places, pool.errors, least, pool.evaluations, "every combination", complete=True)
    _start(space, pool)
    least = _branch(space, pool, work)
    complete = least >= pool.threshold
    best = float(pool.errors[0]) if len(pool.errors) else np.inf
    return Found(pool.places, pool.errors, min(least, best), pool.evaluations, "branch and bound", complete)


def _enumerate(space: Space, pool: _Pool) -> None:
    shape = [len(values) for values in space.lists]
    total = space.combinations
    with Progress("choosing values", "combinations", total) as at:
        start, step = 0, _FIRST
        while start < total:
            flat = np.arange(start, min(start + step, total))
            pool.take(np.stack(np.unravel_index(flat, shape), axis=1).astype(np.int64))
            start, step = start + step, _CHUNK
            at(min(start, total))


# -- a good start ---------------------------------------------------------------------------------------------------


def _start(space: Space, pool: _Pool) -> None:
    """Fill the pool with what :mod:`symnet.values.choosing_start` finds."""

    def take(places: Indices) -> Floats:
        figures = space.at(places)
        pool.evaluations += len(places)
        near = space.aim.screen(figures)
        promising = near <= pool.threshold * (1 + _SAME)
        pool.add(places[promising], figures[:, promising])
        return near  # the objective but for a factor, and much cheaper where there are roots to find

    for batch in snapped(space):
        take(batch)
    improved(space, pool.places, take)


# -- branch and bound -----------------------------------------------------------------------------------------------


@dataclass(eq=False)
class _Boxes:
    """Boxes that vary in the same parts: first and last place of every part, both included, and their bounds."""

    low: Indices
    high: Indices
    least: Floats

    def split(self, count: int) -> tuple[_Boxes, _Boxes]:
        """The ``count`` boxes of the lowest bounds, and the others."""
        order = np.argsort(self.least, kind="stable")
        first, rest = order[:count], order[count:]
        return (
            _Boxes(self.low[first], self.high[first], self.least[first]),
            _Boxes(self.low[rest], self.high[rest], self.least[rest]),
        )

    def joined(self, other: _Boxes) -> _Boxes:
        return _Boxes(
            np.concatenate([self.low, other.low]),
            np.concatenate([self.high, other.high]),
            np.concatenate([self.least, other.least]),
        )


def _branch(space: Space, pool: _Pool, work: int) -> float:
    """Branch and bound; gives the least bound of the boxes left, or the threshold of the pool when none is."""
    low = np.zeros((1, len(space.lists)), dtype=np.int64)
    high = np.array([[len(values) - 1 for values in space.lists]], dtype=np.int64)
    waiting: dict[bytes, _Boxes] = {}
    _add(space, pool, waiting, low, high)
    with Progress("choosing values", "evaluations", work) as at:
        while waiting and pool.evaluations < work:
            at(pool.evaluations)
            mask = max(waiting, key=lambda key: len(waiting[key].least))
            now, rest = waiting.pop(mask).split(_BOXES)
            open_ = rest.least <= pool.threshold
            if open_.any():
                waiting[mask] = _Boxes(rest.low[open_], rest.high[open_], rest.least[open_])
            keep = now.least <= pool.threshold
            _add(space, pool, waiting, *_halved(space, now.low[keep], now.high[keep]))
    left = [float(boxes.least.min()) for boxes in waiting.values()]
    return min([*left, pool.threshold])


def _halved(space: Space, low: Indices, high: Indices) -> tuple[Indices, Indices]:
    """Each box in two halves, across the widest ratio of values; parts that no corner bounds go first."""
    if not len(low):
        return low, high
    width = np.stack(
        [np.log(values[high[:, k]] / values[low[:, k]]) for k, values in enumerate(space.lists)], axis=1
    )
    width[(high > low) & ~np.array(space.linear)] += 1000
    width[high == low] = -1
    part = np.argmax(width, axis=1)
    rows = np.arange(len(low))
    middle = (low[rows, part] + high[rows, part]) // 2
    first_high, second_low = high.copy(), low.copy()
    first_high[rows, part] = middle
    second_low[rows, part] = middle + 1
    return np.concatenate([low, second_low]), np.concatenate([first_high, high])


def _add(space: Space, pool: _Pool, waiting: dict[bytes, _Boxes], low: Indices, high: Indices) -> None:
    """Bound these boxes; single combinations go to the pool, boxes above its threshold nowhere."""
    if not len(low):
        return
    masks, which = np.unique(high > low, axis=0, return_inverse=True)
    which = which.reshape(-1)
    for k, mask in enumerate(masks):
        mine = which == k
        lows, highs = low[mine], high[mine]
        if not mask.any():
            pool.take(lows)
            continue
        if (mask & ~np.array(space.linear)).any():
            least = np.zeros(len(lows))
        else:
            least = _bounds(space, lows, highs, np.flatnonzero(mask))
            pool.evaluations += len(lows) << int(mask.sum())
        keep = least <= pool.threshold
        if keep.any():
            new = _Boxes(lows[keep], highs[keep], least[keep])
            key = mask.tobytes()
            waiting[key] = waiting[key].joined(new) if key in waiting else new


def _bounds(space: Space, low: Indices, high: Indices, varying: NDArray[np.intp]) -> Floats:
    """The least error over each box, from its corners."""
    corners = np.array(list(product((False, True), repeat=len(varying))))
    step = max(1, 65_536 // len(corners))
    found = []
    for start in range(0, len(low), step):
        below, above = low[start : start + step], high[start : start + step]
        places = np.repeat(below[None], len(corners), axis=0)
        places[:, :, varying] = np.where(corners[:, None, :], above[:, varying], below[:, varying])
        figures = space.at(places.reshape(-1, low.shape[1])).reshape(-1, len(corners), len(below))
        found.append(space.aim.least(figures.min(axis=1), figures.max(axis=1)))
    return np.concatenate(found)
