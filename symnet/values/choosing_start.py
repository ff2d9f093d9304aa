"""A good combination to begin with: the finest lists solved exactly and snapped, the coarser ones tried through.

The usual order by hand is capacitors first, resistors second. Here it is followed for all capacitors at once: for every
combination of the coarser lists (or a seeded sample of them) the values of the finest lists are solved as if they were
continuous, by damped Gauss-Newton steps in their logarithms, and each is then replaced by its neighbours in the list,
in every combination of neighbours. The best of what comes out is moved one or two parts at a time until that helps
no more. Nothing is proved by this; it makes the bounds of :mod:`symnet.values.choosing_search` cut early.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from itertools import combinations, product
from math import prod
from typing import TYPE_CHECKING, Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.values.choosing_aim import Floats

if TYPE_CHECKING:
    from symnet.values.choosing_search import Space

__all__ = ["improved", "snapped"]

Indices: TypeAlias = NDArray[np.int64]
Take: TypeAlias = Callable[[Indices], Floats]

_SEED: Final = 60063
_MOST_COARSE: Final = 4096
_STARTS: Final = 8192  # continuous solutions that are sought
_STEPS: Final = 20
_LONGEST: Final = 1.5  # of a step in the logarithm of a value
_MOST_SNAPPED: Final = 6  # parts whose two neighbours are tried in every combination
_IMPROVED: Final = 64
_ROUNDS: Final = 40


def snapped(space: Space) -> Iterator[Indices]:
    """Combinations near the continuous solutions, in batches."""
    random = np.random.default_rng(_SEED)
    steps = [np.log(each[-1] / each[0]) / max(1, len(each) - 1) or np.inf for each in space.lists]
    fine = [k for k, step in enumerate(steps) if step <= 1.5 * min(steps) and len(space.lists[k]) > 1]
    coarse = [k for k in range(len(steps)) if k not in fine]
    places = _coarse(space, coarse, random)
    copies = max(1, _STARTS // len(places))
    places = np.repeat(places, copies, axis=0)
    logs = [np.log(each) for each in space.lists]
    x = np.stack([random.uniform(logs[k][0], logs[k][-1], len(places)) for k in fine], axis=1)
    fixed = {k: space.lists[k][places[:, k]] for k in coarse}

    def figures(x: Floats) -> Floats:
        values = [np.empty(0)] * len(space.lists)
        for k, column in fixed.items():
            values[k] = column
        for i, k in enumerate(fine):
            values[k] = np.exp(x[:, i])
        return space.aim.residuals(space.figures(values))

    x = _solved(figures, x, np.array([[logs[k][0] for k in fine], [logs[k][-1] for k in fine]]))
    off = np.nan_to_num(np.max(np.abs(figures(x)), axis=0), nan=np.inf)
    near = np.argsort(off, kind="stable")[: max(2048, int((off < 0.1).sum()))]
    below = np.stack(
        [np.clip(np.searchsorted(logs[k], x[near, i]) - 1, 0, None) for i, k in enumerate(fine)], axis=1
    )
    nearest = np.stack(
        [np.abs(logs[k][None, :] - x[near, i][:, None]).argmin(axis=1) for i, k in enumerate(fine)], axis=1
    )
    both = min(len(fine), _MOST_SNAPPED)
    for corner in product((0, 1), repeat=both):
        batch = places[near].copy()
        for i, k in enumerate(fine):
            place = below[:, i] + corner[i] if i < both else nearest[:, i]
            batch[:, k] = np.clip(place, 0, len(space.lists[k]) - 1)
        yield batch


def _coarse(space: Space, coarse: Sequence[int], random: np.random.Generator) -> Indices:
    """Every combination of these lists, or a sample of them; zeros for the other parts."""
    sizes = [len(space.lists[k]) for k in coarse]
    total = prod(sizes)
    if total <= _MOST_COARSE:
        chosen = np.stack(np.unravel_index(np.arange(total), sizes), axis=1) if coarse else np.zeros((1, 0))
    else:
        chosen = random.integers(0, sizes, size=(_MOST_COARSE, len(coarse)))
    places = np.zeros((len(chosen), len(space.lists)), dtype=np.int64)
    places[:, list(coarse)] = chosen
    return places


def _solved(figures: Callable[[Floats], Floats], x: Floats, limits: Floats) -> Floats:
    """Gauss-Newton steps in the logarithms, kept within the lists; sets that do not converge stay where they are."""
    small = 1e-6
    size = x.shape[1]
    for _ in range(_STEPS):
        here = figures(x)
        columns = []
        for k in range(size):
            moved = x.copy()
            moved[:, k] += small
            columns.append((figures(moved) - here) / small)
        slope = np.nan_to_num(np.stack(columns, axis=2).transpose(1, 0, 2), posinf=0, neginf=0)
        wanted = np.nan_to_num(here, posinf=0, neginf=0).T
        square = np.einsum("srk,srl->skl", slope, slope)
        damping = 1e-9 + 1e-5 * np.einsum("skk->s", square)
        square += damping[:, None, None] * np.eye(size)
        step = np.linalg.solve(square, np.einsum("srk,sr->sk", slope, wanted)[:, :, None])[:, :, 0]
        x = np.clip(x - np.clip(step, -_LONGEST, _LONGEST), limits[0], limits[1])
        if np.max(np.abs(step)) < 1e-6:
            break
    return x


def improved(space: Space, places: Indices, take: Take) -> None:
    """Move these combinations, one or two parts at a time, until no move helps; ``take`` sees what is found."""
    sizes = np.array([len(values) for values in space.lists])
    moves = np.array(list(_moves(len(sizes))), dtype=np.int64)
    places = places[:_IMPROVED]
    current = np.full(len(places), np.inf)
    for _ in range(_ROUNDS):
        tried = np.clip(places[:, None, :] + moves, 0, sizes - 1)
        errors = take(tried.reshape(-1, len(sizes))).reshape(len(places), len(moves))
        pick = np.argmin(errors, axis=1)
        now = errors[np.arange(len(places)), pick]
        better = now < current * (1 - 1e-12)
        if not better.any():
            return
        places = np.where(better[:, None], tried[np.arange(len(places)), pick], places)
        current = np.where(better, now, current)
        places, first = np.unique(places, axis=0, return_index=True)
        current = current[first]


def _moves(parts: int) -> Iterator[tuple[int, ...]]:
    yield (0,) * parts
    for k in range(parts):
        for step in (-20, -6, -2, -1, 1, 2, 6, 20):
            yield tuple(step if i == k else 0 for i in range(parts))
    for i, k in combinations(range(parts), 2):
        for one, other in product((-3, -2, -1, 1, 2, 3), repeat=2):
            yield tuple(one if j == i else other if j == k else 0 for j in range(parts))
