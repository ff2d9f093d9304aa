"""The catalogue as arrays: where the members of an order have their poles, and what they do in their pass band.

The matcher goes through every family for every H, so the members of all families of one order, spread over the
whole range of their parameters, are laid out once as one table. Poles and zeros are divided by the geometric mean of
the pole magnitudes and ordered by their imaginary part, which lines them up with those of an H that is a little off.
The curves are sums over roots, so they keep full double precision at any order.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from itertools import pairwise, product
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.shape.families import CATALOGUE
from symnet.shape.families.curves import HALF_POWER_DB
from symnet.shape.families.family import Family

__all__ = [
    "Members",
    "curves",
    "families_of",
    "half_power",
    "log_curves",
    "members",
    "shape_at",
    "unit_band",
]

Floats: TypeAlias = NDArray[np.float64]
Complexes: TypeAlias = NDArray[np.complex128]

#: Members along each parameter in the table of starts, for 0, 1 and 2 parameters.
_POINTS: Final = (1, 33, 17)
#: Of squared magnitudes given by their natural logarithm.
_DB: Final = 10 / np.log(10)


@dataclass(frozen=True, slots=True)
class Members:
    """Members of every family that has this order and this number of finite zeros; M members, one row each."""

    families: tuple[Family, ...]
    index: NDArray[np.int64]
    """(M,): which of the families each row belongs to."""
    places: Floats
    """(M, k): coordinates between 0 and 1 of the parameters, unused ones 0."""
    meshes: Floats
    """(M, k): by how much the coordinates of neighbours differ."""
    poles: Complexes
    """(M, n)"""
    zeros: Complexes
    """(M, z)"""
    edges: Floats
    """(M,): where each is 3.0103 dB down for the last time, to about six digits."""
    turns: tuple[Complexes, Complexes]
    """(M, k, n) and (M, k, z): the derivatives of both by the coordinates, as differences in the table give them."""
    runs: tuple[tuple[int, int], ...]
    """For each family its first row and the row after its last."""
    curves: Floats
    """(M, m): attenuation in dB over the own pass band, at :func:`unit_band` times the edge."""


def families_of(order: int, zeros: int) -> tuple[Family, ...]:
    """The families that have members of that order with that number of finite zeros."""
    return tuple(f for f in CATALOGUE if f.has_order(order) and f.finite_zeros(order) == zeros)


def unit_band(order: int) -> Floats:
    """Points of a pass band of width 1, enough for every ripple of that order."""
    return np.linspace(0, 1, max(48, 6 * order) + 1)[1:]


def shape_at(family: Family, order: int, place: Floats) -> tuple[Complexes, Complexes]:
    """Poles and zeros of the member at these coordinates, divided by the geometric mean of the pole magnitudes."""
    values = tuple(p.at(t) for p, t in zip(family.parameters(order), place.tolist(), strict=False))
    poles, zeros = family.near(order, values)
    mean = math.exp(sum(math.log(abs(p)) for p in poles) / order)
    return _lined_up(poles, mean), _lined_up(zeros, mean)


def _lined_up(roots: Sequence[complex], mean: float) -> Complexes:
    scaled: Complexes = np.asarray([r / mean for r in sorted(roots, key=_by_height)], dtype=np.complex128)
    return scaled


def _by_height(root: complex) -> tuple[float, float]:
    return root.imag, root.real


@lru_cache(maxsize=64)
def members(order: int, zeros: int) -> Members:
    """The table for that order and that number of finite zeros, remembered."""
    families = families_of(order, zeros)
    width = max((len(f.parameters(order)) for f in families), default=0)
    index, places, meshes, poles, finite = [], [], [], [], []
    for k, family in enumerate(families):
        own = len(family.parameters(order))
        ticks = np.linspace(0, 1, _POINTS[min(own, len(_POINTS) - 1)]).tolist()
        for place in product(ticks, repeat=own):
            padded = np.asarray((*place, *[0.0] * (width - own)))
            p, z = shape_at(family, order, padded)
            index.append(k)
            places.append(padded)
            meshes.append(1 / max(1, len(ticks) - 1))
            poles.append(p)
            finite.append(z)
    rows = len(index)
    p, z = (
        np.asarray(roots, dtype=complex).reshape(rows, size)
        for roots, size in ((poles, order), (finite, zeros))
    )
    edges = half_power(p, z)
    starts = np.searchsorted(index, np.arange(len(families) + 1)).tolist()
    runs = tuple(pairwise(starts))
    return Members(
        families,
        np.asarray(index, dtype=np.int64),
        np.asarray(places, dtype=float).reshape(rows, width),
        np.repeat(np.asarray(meshes, dtype=float).reshape(rows, 1), width, axis=1),
        p,
        z,
        edges,
        (_turns(p, families, order, runs, width), _turns(z, families, order, runs, width)),
        runs,
        curves(p, z, unit_band(order) * edges[:, None]),
    )


def curves(poles: Complexes, zeros: Complexes, w: Floats) -> Floats:
    """Attenuation in dB relative to DC, one row for each row of roots: (F, n), (F, z) and w as (F, m) give (F, m)."""
    total = log_curves(poles, w)
    if zeros.shape[-1]:
        total = total - log_curves(zeros, w)
    level: Floats = total * _DB
    return level


def log_curves(roots: Complexes, w: Floats) -> Floats:
    """The logarithm of prod |1 - jw/r|^2, one row for each row of roots; products of 24 factors at a time stay in range."""
    total: Floats = np.zeros(w.shape)
    for first in range(0, roots.shape[-1], 24):
        part = roots[..., first : first + 24, None]
        size = (part.real**2 + part.imag**2).prod(axis=-2)
        away = w[..., None, :] - part.imag
        away *= away
        away += part.real**2
        with np.errstate(divide="ignore"):
            total = total + np.log(np.multiply.reduce(away, axis=-2) / size)
    return total


def _turns(
    roots: Complexes, families: tuple[Family, ...], order: int, runs: tuple[tuple[int, int], ...], width: int
) -> Complexes:
    """The differences of neighbours in the table, by each coordinate."""
    turns = np.zeros((len(roots), width, roots.shape[1]), dtype=complex)
    for family, (first, last) in zip(families, runs, strict=True):
        own = len(family.parameters(order))
        points = _POINTS[min(own, len(_POINTS) - 1)]
        grid = roots[first:last].reshape((points,) * own + (roots.shape[1],))
        for k in range(own):
            turns[first:last, k] = np.gradient(grid, 1 / (points - 1), axis=k).reshape(last - first, -1)
    return turns


def half_power(poles: Complexes, zeros: Complexes) -> Floats:
    """The last crossing of half power of each row, to about six digits: from a grid, and Newton steps inside its mesh."""
    if not len(poles):
        return np.zeros(0)
    grid = np.geomspace(0.02, 20, 241)
    levels = curves(poles, zeros, np.broadcast_to(grid, (len(poles), len(grid))))
    last = len(grid) - 1 - np.argmax(levels[:, ::-1] < HALF_POWER_DB, axis=1)
    low, high = grid[last], grid[np.minimum(last + 1, len(grid) - 1)]
    row = np.arange(len(poles))
    before, after = levels[row, last], levels[row, np.minimum(last + 1, len(grid) - 1)]
    rise = np.where(after > before, after - before, 1.0)
    w: Floats = np.clip(low + (high - low) * (HALF_POWER_DB - before) / rise, low, high)
    for _ in range(2):
        excess = curves(poles, zeros, w[:, None])[:, 0] - HALF_POWER_DB
        slope = _DB * (_slopes(poles, w) - _slopes(zeros, w))
        w = np.clip(w - excess / slope, low, high)
    return w


def _slopes(roots: Complexes, w: Floats) -> Floats:
    """The derivative of the logarithm of prod |1 - jw/r|^2 by w."""
    away = w[:, None] - roots.imag
    slope: Floats = (2 * away / (away * away + roots.real**2)).sum(axis=1)
    return slope
