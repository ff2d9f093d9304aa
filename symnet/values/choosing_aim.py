"""What a choice of values is to come near, and how far a candidate is from it: poles, f0 and Q, or dB in a band.

A candidate is described by figures that no common factor can change: with the powers of s at the origin split off, the
coefficients of D' and N' over their constant terms, c_k = a_k/a_0, and the gain K where it counts. Every objective is
the largest of several relative errors (or of dB errors), and has beside its value a lower bound over a box of figures,
c_k between two limits each. Both bounds follow from products of roots: if every pole is within e of its target, so is
every 1/p within e/(1 - e), hence

    |c_k - c_k*| <= E_k ((1 - e)^(-m_k) - 1),

with m_k = k and E_k the k-th elementary symmetric sum of 1/|p*| for poles; for f0 and Q, where 1/w0^2 and 1/(Q w0) of
a section have two such factors, m_k = min(2k, n) and E_k = c_k*. Read backwards this bounds e from below. For dB,
intervals of the c_k give intervals of |D(jw)|^2 at each frequency.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property
from itertools import permutations
from typing import Final, Literal, TypeAlias

import numpy as np
from numpy.typing import NDArray

__all__ = ["Aim", "Figures", "Objective", "figures_of"]

Floats: TypeAlias = NDArray[np.float64]
Complexes: TypeAlias = NDArray[np.complex128]
Objective: TypeAlias = Literal["poles", "f0/Q", "dB"]
Figures: TypeAlias = Floats  # rows: c_1 ... c_n, b_1 ... b_q, K; one column for each candidate

_POINTS: Final = 61  # frequencies of a band, both edges included
_EVERY: Final = 6  # of these frequencies is enough for a bound
_MOST_PAIRED: Final = 6  # degree up to which every pairing of the roots is tried
_BLOCK: Final = 4096
_DB: Final = 10 / math.log(10)


@dataclass(frozen=True)
class Aim:
    """Poles and finite zeros in rad/s (those at the origin left out), gain, objective, and band in Hz for dB.

    ``gain`` is K = b_0/a_0 or None where it does not count.
    """

    poles: tuple[complex, ...]
    zeros: tuple[complex, ...]
    gain: float | None
    objective: Objective
    band: tuple[float, float] | None = None

    @cached_property
    def unit(self) -> float:
        """The frequency in rad/s that figures are scaled by, so that they are near 1."""
        roots = self.poles or self.zeros
        return math.exp(sum(math.log(abs(r)) for r in roots) / len(roots)) if roots else 1.0

    @cached_property
    def _sides(self) -> tuple[_Side, ...]:
        offset, found = 0, []
        by_section = self.objective == "f0/Q" and all(p.real < 0 for p in self.poles)
        for roots, sections in ((self.poles, by_section), (self.zeros, False)):
            found.append(_Side(tuple(r / self.unit for r in roots), offset, sections))
            offset += len(roots)
        return tuple(found)

    @property
    def rows(self) -> int:
        """The number of figures."""
        return len(self.poles) + len(self.zeros) + (self.gain is not None)

    def error(self, figures: Figures) -> Floats:
        """The objective for every column: a fraction (0.01 is 1 %), in a band dB."""
        if self.objective == "dB":
            worst: Floats = np.max(np.abs(self.deviation(figures)), axis=0)
            return worst
        worst = self._gain_error(figures, figures)
        for side in self._sides:
            worst = np.maximum(worst, side.error(figures))
        return worst

    def least(self, low: Figures, high: Figures) -> Floats:
        """A lower bound of the objective over each box of figures; 0 where figures are not bounded."""
        with np.errstate(invalid="ignore", over="ignore"):
            if self.objective == "dB":
                below, above = self._deviation(low, high, slice(None, None, _EVERY))  # any of them bound it
                found = np.max(np.maximum(below, -above), axis=0)
            else:
                found = self._gain_error(low, high)
                for side in self._sides:
                    found = np.maximum(found, side.least(low, high))
        bound: Floats = np.nan_to_num(found, nan=0.0, posinf=np.inf)
        return np.maximum(0, bound * (1 - 1e-9) - 1e-12)  # what rounding of the figures may have added

    def screen(self, figures: Figures) -> Floats:
        """A lower bound of the objective for every column, much cheaper than the objective itself."""
        if self.objective != "dB":
            return self.least(figures, figures)
        off = np.max(np.abs(self.deviation(figures, slice(None, None, _EVERY))), axis=0)
        bound: Floats = np.nan_to_num(off * (1 - 1e-9) - 1e-12, nan=np.inf)
        return bound

    def residuals(self, figures: Figures) -> Figures:
        """How far each figure is from that of the target, by its logarithm where it has one: all zero at the target."""
        wanted = np.concatenate([side.coefficients for side in self._sides])
        sizes = np.concatenate([side.sizes for side in self._sides])
        if self.gain is not None:
            wanted, sizes = (np.append(each, self.gain) for each in (wanted, sizes))
        zero = wanted == 0
        with np.errstate(divide="ignore", invalid="ignore"):
            ratio = figures / np.where(zero, 1, wanted)[:, None]
            logs = np.log(np.abs(ratio)) * np.sign(ratio)
            plain = (figures - wanted[:, None]) / np.where(sizes == 0, 1, sizes)[:, None]
        found: Figures = np.where((ratio > 0) & ~zero[:, None], logs, plain)
        return found

    def _gain_error(self, low: Figures, high: Figures) -> Floats:
        if self.gain is None:
            return np.zeros(low.shape[1])
        ends = np.sort(np.stack([low[-1], high[-1]]) / self.gain, axis=0)
        off: Floats = np.maximum(0, np.maximum(ends[0] - 1, 1 - ends[1]))
        return off

    # -- in a band ----------------------------------------------------------------------------------------------

    @cached_property
    def frequencies(self) -> Floats:
        """The frequencies in Hz at which a band is looked at."""
        assert self.band is not None  # noqa: S101 - only asked for dB
        return np.geomspace(*self.band, _POINTS)

    @cached_property
    def _wanted(self) -> Floats:
        jw = 2j * math.pi * self.frequencies / self.unit
        square = np.zeros(len(jw))
        for side, sign in zip(self._sides, (-1, 1), strict=True):
            for root in side.roots:
                square += sign * _DB * np.log(np.abs(1 - jw / root) ** 2)
        return square

    def deviation(self, figures: Figures, which: slice = slice(None)) -> Floats:
        """By how many dB it is above what is wanted, at these frequencies of the band (frequencies x sets)."""
        w = 2 * math.pi * self.frequencies[which] / self.unit
        square = np.ones((len(w), figures.shape[1]))
        for side, over in zip(self._sides, (True, False), strict=True):
            own = side.square(w, figures)
            square = square / own if over else square * own
        if self.gain is not None:
            square = square * ((figures[-1] / self.gain) ** 2 + 1e-300)
        found: Floats = _DB * np.log(square) - self._wanted[which, None]
        return found

    def _deviation(self, low: Figures, high: Figures, which: slice = slice(None)) -> tuple[Floats, Floats]:
        """The least and the largest of dB - dB wanted at these frequencies (frequencies x boxes)."""
        w = 2 * math.pi * self.frequencies[which] / self.unit
        least = -np.repeat(self._wanted[which, None], low.shape[1], axis=1)
        largest = least.copy()
        for side, sign in zip(self._sides, (-1, 1), strict=True):
            limits = [_DB * np.log(square) for square in side.squares(w, low, high)]
            least += sign * limits[(1 - sign) // 2]
            largest += sign * limits[(1 + sign) // 2]
        if self.gain is not None:
            ends = np.stack([low[-1], high[-1]]) / self.gain
            crosses = np.sign(ends[0]) != np.sign(ends[1])
            sizes = np.sort(np.abs(ends), axis=0)
            least += 2 * _DB * np.log(np.where(crosses, 0, sizes[0]) + 1e-300)
            largest += 2 * _DB * np.log(sizes[1] + 1e-300)
        return least, largest


@dataclass(frozen=True)
class _Side:
    """The poles, or the zeros: roots in the unit of the aim, and the row at which their figures begin."""

    roots: tuple[complex, ...]
    offset: int
    by_section: bool

    @property
    def degree(self) -> int:
        return len(self.roots)

    @cached_property
    def coefficients(self) -> Floats:
        """c_1* ... c_n*."""
        return np.real(_expanded([-1 / r for r in self.roots]))[1:]

    @cached_property
    def sizes(self) -> Floats:
        """E_k."""
        if self.by_section:
            return np.abs(self.coefficients)
        return np.real(_expanded([abs(1 / r) for r in self.roots]))[1:]

    @cached_property
    def powers(self) -> Floats:
        """m_k."""
        k = np.arange(1, self.degree + 1)
        return (np.minimum(2 * k, self.degree) if self.by_section else k).astype(float)

    def part(self, figures: Figures) -> Figures:
        return figures[self.offset : self.offset + self.degree]

    def least(self, low: Figures, high: Figures) -> Floats:
        if not self.degree:
            return np.zeros(low.shape[1])
        target = self.coefficients[:, None]
        off = np.maximum(0, np.maximum(self.part(low) - target, target - self.part(high)))
        off /= np.maximum(self.sizes, 1e-300)[:, None]
        found: Floats = np.max(-np.expm1(-np.log1p(off) / self.powers[:, None]), axis=0)
        return found

    def square(self, w: Floats, figures: Figures) -> Floats:
        """|1 + c_1 jw + ... |^2 at each w (frequencies x sets)."""
        real, imaginary = np.ones((len(w), figures.shape[1])), np.full((len(w), figures.shape[1]), 1e-150)
        for k, row in enumerate(self.part(figures), 1):
            part = imaginary if k % 2 else real
            part += ((-1) ** (k // 2) * w**k)[:, None] * row
        size: Floats = real * real + imaginary * imaginary
        return size

    def squares(self, w: Floats, low: Figures, high: Figures) -> tuple[Floats, Floats]:
        """The limits of |1 + c_1 jw + ... |^2 at each w (frequencies x boxes)."""
        total = []
        for odd in (0, 1):
            ends = [np.full((len(w), low.shape[1]), 1.0 - odd) for _ in range(2)]
            for k in range(1, self.degree + 1):
                if k % 2 != odd:
                    continue
                weight = ((-1) ** (k // 2) * w**k)[:, None]
                both = weight * self.part(low)[k - 1], weight * self.part(high)[k - 1]
                ends[0] += np.minimum(*both)
                ends[1] += np.maximum(*both)
            squares = ends[0] ** 2, ends[1] ** 2
            inside = (ends[0] <= 0) & (ends[1] >= 0)
            total.append((np.where(inside, 0, np.minimum(*squares)), np.maximum(*squares)))
        return (total[0][0] + total[1][0] + 1e-300, total[0][1] + total[1][1] + 1e-300)

    def error(self, figures: Figures) -> Floats:
        """The largest relative error of the roots, or of f0 and Q of their sections."""
        own = self.part(figures)
        if not self.degree:
            return np.zeros(figures.shape[1])
        if self.degree == 2 and self.by_section:
            both: Floats = np.max(
                np.abs(_quadratic(own) / _quadratic(self.coefficients[:, None]) - 1), axis=0
            )
            return both
        blocks = [own[:, k : k + _BLOCK] for k in range(0, own.shape[1], _BLOCK)]
        return np.concatenate([self._root_error(block) for block in blocks]) if blocks else np.zeros(0)

    def _root_error(self, own: Figures) -> Floats:
        sets, n = own.shape[1], self.degree
        companion = np.zeros((sets, n, n))
        companion[:, 0, :] = -own.T
        companion[:, np.arange(1, n), np.arange(n - 1)] = 1
        inverse = np.linalg.eigvals(companion)  # 1/roots
        target = np.asarray(self.roots)
        with np.errstate(divide="ignore", invalid="ignore"):
            found: Complexes = (1 / inverse).astype(np.complex128)
        away = np.nan_to_num(np.abs(found[:, :, None] / target - 1), nan=np.inf, posinf=np.inf)
        order = np.zeros((sets, n), dtype=np.intp)  # which found root goes with which target
        best = np.full(sets, np.inf)
        for trial in _pairings(target, found):
            size = np.max(np.take_along_axis(away, trial[:, None, :], axis=1)[:, 0, :], axis=1)
            better = size < best
            best[better], order[better] = size[better], trial[better]
        if not self.by_section:
            return best
        paired = np.take_along_axis(found, order, axis=1)
        worst = np.zeros(sets)
        for k, root in enumerate(self.roots):
            if root.imag > 0:
                other = int(np.argmin(np.abs(target - root.conjugate())))
                product, total = (
                    (paired[:, k] * paired[:, other]).real,
                    (paired[:, k] + paired[:, other]).real,
                )
                wanted = np.array([abs(root), abs(root) / (-2 * root.real)])
                with np.errstate(divide="ignore", invalid="ignore"):
                    w0 = np.sqrt(np.maximum(product, 0))
                    got = np.stack([w0, w0 / -total])
                error = np.nan_to_num(np.max(np.abs(got / wanted[:, None] - 1), axis=0), nan=np.inf)
                worst = np.maximum(worst, error)
            elif root.imag == 0:
                worst = np.maximum(worst, np.abs(paired[:, k] / root - 1))
        return worst


def _pairings(target: Complexes, found: Complexes) -> list[NDArray[np.intp]]:
    """Index arrays (sets x targets): every permutation for a low degree, else by angle and by size."""
    sets, n = found.shape
    if n <= _MOST_PAIRED:
        return [np.tile(np.array(p, dtype=np.intp), (sets, 1)) for p in permutations(range(n))]
    trials = []
    for wanted, own in (
        (np.angle(target), np.angle(found)),
        (np.abs(target) + 1e-9 * np.angle(target), np.abs(found) + 1e-9 * np.angle(found)),
    ):
        place = np.empty((sets, n), dtype=np.intp)
        place[:, np.argsort(wanted, kind="stable")] = np.argsort(own, axis=1, kind="stable")
        trials.append(place)
    return trials


def _quadratic(c: Figures) -> Floats:
    """w0 and Q of 1 + c_1 s + c_2 s^2; Q is inf where there is no loss."""
    with np.errstate(divide="ignore", invalid="ignore"):
        found = np.stack([1 / np.sqrt(c[1]), np.sqrt(c[1]) / c[0]])
    finite: Floats = np.nan_to_num(found, nan=np.inf)
    return finite


def _expanded(factors: list[complex]) -> Complexes:
    """The coefficients of the product of 1 + f s, ascending."""
    total = np.ones(1, dtype=np.complex128)
    for factor in factors:
        total = np.convolve(total, np.array([1, factor]))
    return total


def figures_of(aim: Aim, numerator: Floats, denominator: Floats, origin: tuple[int, int]) -> Figures:
    """The figures of candidates from arrays of their coefficients (powers of s x sets).

    ``origin`` are the powers of s that N and D have as factors in these arrays.
    """
    z, m = origin
    scale = aim.unit
    with np.errstate(divide="ignore", invalid="ignore"):
        below, above = denominator[m], numerator[z]
        rows = [denominator[m + k] / below * scale**k for k in range(1, len(aim.poles) + 1)]
        rows += [numerator[z + k] / above * scale**k for k in range(1, len(aim.zeros) + 1)]
        if aim.gain is not None:
            rows.append(above / below)
    return np.array(rows).reshape(len(rows), denominator.shape[1])
