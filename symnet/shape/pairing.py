"""Two sets of roots compared: the pairing that makes the largest relative distance smallest.

That is a bottleneck assignment. Where every wanted root has its nearest root for itself that pairing is the best one;
where the two sets, both ordered by imaginary part, reach the lower bound that no pairing can beat, theirs is. Only
the rest is searched: the smallest bound under which a complete pairing exists, by bisection over the distances, with
augmenting paths.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

__all__ = ["distance_of_roots", "distances_of_roots", "paired"]


def distance_of_roots(roots: Sequence[complex], wanted: Sequence[complex]) -> float:
    """The largest relative distance |p - q|/|q| in the pairing of the roots p with the wanted q that makes it smallest.

    >>> round(distance_of_roots([1.1, 2.0], [2.0, 1.0]), 12)
    0.1
    """
    if not len(wanted):
        return 0.0
    return float(distances_of_roots(np.asarray(roots), np.asarray([wanted]))[0])


def distances_of_roots(roots: NDArray[np.complex128], wanted: NDArray[np.complex128]) -> NDArray[np.float64]:
    """The same for every row of ``wanted``: (n,) and (F, n) give (F,)."""
    distances = np.abs(roots[None, None, :] - wanted[:, :, None]) / np.abs(wanted)[:, :, None]
    nearest = distances.argmin(axis=2)
    single = (np.sort(nearest, axis=1) == np.arange(wanted.shape[1])).all(axis=1)
    bound = np.maximum(distances.min(axis=2).max(axis=1), distances.min(axis=1).max(axis=1))
    lined_up = np.einsum("fii->fi", distances).max(axis=1)
    for row in np.flatnonzero(~single & (lined_up > bound)).tolist():
        bound[row] = _smallest_bound(distances[row], bound[row], lined_up[row])
    worst: NDArray[np.float64] = bound
    return worst


def paired(roots: Sequence[complex], wanted: Sequence[complex]) -> list[int]:
    """For each wanted root the place of its partner in the best pairing."""
    p, q = np.asarray(roots), np.asarray(wanted)
    allowed = np.abs(p[None, :] - q[:, None]) / np.abs(q)[:, None]
    partners = _partners(allowed <= distance_of_roots(roots, wanted) * (1 + 1e-12))
    assert partners is not None  # noqa: S101 - the bound is one under which a pairing exists
    return partners


def _smallest_bound(distances: NDArray[np.float64], low: float, high: float) -> float:
    levels: list[float] = sorted(set(distances[(distances >= low) & (distances <= high)].tolist()))
    first, last = 0, len(levels) - 1
    while first < last:
        middle = (first + last) // 2
        if _partners(distances <= levels[middle]) is not None:
            last = middle
        else:
            first = middle + 1
    return levels[first]


def _partners(allowed: NDArray[np.bool_]) -> list[int] | None:
    """A complete pairing of rows with columns, if there is one: the column of each row."""
    choices = [np.flatnonzero(row).tolist() for row in allowed]
    partner: dict[int, int] = {}

    def place(row: int, seen: set[int]) -> bool:
        for column in choices[row]:
            if column not in seen:
                seen.add(column)
                if column not in partner or place(partner[column], seen):
                    partner[column] = row
                    return True
        return False

    if not all(place(row, set()) for row in range(len(allowed))):
        return None
    return [column for _, column in sorted((row, column) for column, row in partner.items())]
