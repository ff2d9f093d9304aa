"""The fit by poles: the member whose poles and zeros, each set divided by its w0, lie nearest to those of H.

For networks whose poles are of high Q and a little off, where the response says little. What is to be small is the
pole error as it is reported, the largest relative distance of a pair; the sum of eighth powers of the distances comes
within a few per cent of that and has derivatives, so Gauss-Newton steps with weights do it, from the place that least
squares give. Only members that are near from the start are tried: roots are paired in the order of their imaginary
parts, which is right for near ones.
"""

from __future__ import annotations

from typing import Final

import numpy as np

from symnet.shape.families.family import Family
from symnet.shape.fitting import zeros_for_one
from symnet.shape.members import Complexes, Floats, Members, shape_at
from symnet.shape.undoing import View

__all__ = ["nearest_by_poles", "within_reach"]

#: A member is looked for where the nearest row of the table could come this near, a match by poles being within 5 %.
_REACH: Final = 0.08
_STEP: Final = 1e-6  # of a finite difference; coordinates run from 0 to 1
_MOST_STEPS: Final = 12
_SHORTEST: Final = 0.03
_WORTH_A_STEP: Final = 1e-3
_EXPONENTS: Final = (2, 8)


def within_reach(view: View, table: Members) -> dict[int, int]:
    """Of each family that has parameters and comes near: its place among the families, and its nearest row."""
    doubled = len(view.low_poles) // view.order
    distance = np.maximum(
        _lined_up_distance(np.repeat(table.poles, doubled, axis=1), view.low_poles),
        _lined_up_distance(np.repeat(table.zeros, zeros_for_one(view), axis=1), view.low_zeros),
    )
    found = {}
    for k, (first, last) in enumerate(table.runs):
        row = first + int(distance[first:last].argmin())
        if last - first > 1 and distance[row] - _half_a_mesh(table, row) <= _REACH:
            found[k] = row
    return found


def _half_a_mesh(table: Members, row: int) -> float:
    """How far the roots move on the way from a row of the table to the middle between it and its neighbours."""
    total = 0.0
    for turns, roots in zip(table.turns, (table.poles, table.zeros), strict=True):
        if roots.shape[1]:
            moved = (np.abs(turns[row]) * table.meshes[row, :, None]).sum(axis=0) / np.abs(roots[row])
            total = max(total, float(moved.max()) / 2)
    return total


def _lined_up_distance(wanted: Complexes, roots: Complexes) -> Floats:
    if wanted.shape[1] != len(roots) or not len(roots):
        return np.zeros(len(wanted))
    distance: Floats = (np.abs(wanted - roots) / np.abs(wanted)).max(axis=1)
    return distance


def nearest_by_poles(family: Family, view: View, place: Floats) -> Floats:
    """The coordinates at which the largest relative distance is smallest, from a start."""
    own = len(family.parameters(view.order))
    best, r = place, _apart(family, view, place)
    j = np.empty((own, len(r)), dtype=complex)
    for k in range(own):
        little = -_STEP if best[k] > 0.5 else _STEP
        moved = best.copy()
        moved[k] += little
        j[k] = (_apart(family, view, moved) - r) / little
    for exponent in _EXPONENTS:
        for _ in range(_MOST_STEPS):
            size = np.abs(r).max()
            if size < 1e-12:
                return best
            weight = (np.abs(r) / size) ** (exponent / 2 - 1)
            a = np.concatenate([(weight * j).real, (weight * j).imag], axis=1)
            b = np.concatenate([(weight * r).real, (weight * r).imag])
            normal = a @ a.T
            full = -np.linalg.solve(normal + 1e-14 * np.trace(normal) * np.eye(own), a @ b)
            full /= 1 if exponent == 2 else exponent - 1  # the second derivative is that much larger
            length, lower, before = 1.0, False, _sum(r, size, exponent)
            while not lower and length > _SHORTEST:
                moved = best.copy()
                moved[:own] = np.clip(best[:own] + length * full, 0, 1)
                step: Floats = moved[:own] - best[:own]
                if not step.any():
                    break
                new = _apart(family, view, moved)
                j += np.outer(step, new - r - step @ j) / (step @ step)  # Broyden's rule
                lower = _sum(new, size, exponent) < before * (1 - _WORTH_A_STEP)
                length /= 4
            if not lower:
                break
            best, r = moved, new
    return best


def _sum(r: Complexes, size: float, exponent: int) -> float:
    return float(((np.abs(r) / size) ** exponent).sum())


def _apart(family: Family, view: View, place: Floats) -> Complexes:
    """Relative distances of lined-up poles and zeros, all divided by w0."""
    p, z = shape_at(family, view.order, place)
    p, z = np.repeat(p, len(view.low_poles) // view.order), np.repeat(z, zeros_for_one(view))
    return np.concatenate([(view.low_poles - p) / np.abs(p), (view.low_zeros - z) / np.abs(z)])
