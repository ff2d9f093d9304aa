"""Which terms of H can go: tried smallest weight first on a grid, and then proven.

Each term of N and D is a fraction of N(jw) or D(jw), and the largest value of that fraction over the band is, to first
order, the error of |H| that its loss makes. Terms are tried in the order of that weight, and one is dropped when the
error of all that is dropped so far, in dB and in degrees, keeps to the bounds on a dense grid. That order is by weight
in the band, not by share within the coefficient: s^5*L1*C1*... may be the whole of its coefficient and still nothing
below 1 kHz. On the grid a trial costs a few operations on arrays, so that two thousand terms take less than a second.

Invariants: the bounds hold in the end by proof and not by the grid (:mod:`symnet.shape.deviation`); where the proof
finds an error between the points of the grid, the last terms are put back until it holds. No pole crosses into the
right half plane: a shortened H that oscillates is of no use, however near it lies in the band.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from typing import TYPE_CHECKING, Any, Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.exact.doubles import binary, double
from symnet.exact.evaluation import evaluate
from symnet.exact.ratio import Ratio
from symnet.exact.roots import Root, roots
from symnet.shape.closed import value_of
from symnet.shape.deviation import Deviation, deviation, grid

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.exact.transfer import Transfer

__all__ = ["Numbers", "Search", "Term", "all_terms", "trimmed"]

Numbers: TypeAlias = tuple[Fraction, ...]

_KEPT_BACK: Final = 0.999  # of a bound that is used up on the grid; the rest lies between its points


@dataclass(frozen=True, slots=True)
class Term:
    """One term: ``side`` is 0 in N and 1 in D, ``value`` what it is worth without its power of s."""

    side: int
    monomial: tuple[int, ...]
    coefficient: Any
    value: Fraction

    @property
    def power(self) -> int:
        """The power of s."""
        return self.monomial[0]


def all_terms(sides: Sequence[PolyElement], H: Transfer) -> list[Term]:
    """Every term of N and D with its value; KeyError for a name without one."""
    found = []
    for side, polynomial in enumerate(sides):
        ring = polynomial.ring
        for monomial, coefficient in polynomial.terms():
            value = value_of(ring.from_dict({(0, *monomial[1:]): coefficient}), H.values)
            found.append(Term(side, monomial, coefficient, value))
    return found


@dataclass
class Search:
    """One search: greedy on a grid, then proven.

    ``exact`` are the numbers of N and D by powers of s and ``roots`` their roots; ``low`` and ``high`` are in rad/s.
    What :meth:`run` finds beside its answer: ``weights``, the largest share of |N(jw)| or |D(jw)| that each term has in
    the band, and ``held``, the number of terms that were kept only to keep the poles in the left half plane.
    """

    terms: list[Term]
    exact: tuple[Numbers, Numbers]
    roots: tuple[tuple[Root, ...], tuple[Root, ...]]
    low: Fraction
    high: Fraction
    within_db: float
    within_deg: float
    weights: list[float] = field(default_factory=list)
    held: int = 0

    def run(self) -> tuple[list[int], Deviation]:
        """The terms to drop and the error that it makes."""
        shares = _shares(
            self.terms,
            self.exact,
            grid(double(self.low), double(self.high), (*self.roots[0], *self.roots[1])),
        )
        self.weights = [float(np.max(np.abs(share))) for share in shares]
        chosen = self._greedy(shares, watch=False)
        if _to_the_right(self.shortened(chosen)[1]) > _to_the_right(self.exact[1]):
            chosen = self._greedy(shares, watch=True)
        return self._proven(chosen)

    def shortened(self, chosen: Sequence[int]) -> tuple[Numbers, Numbers]:
        """The coefficients of N and D without these terms."""
        rest = [list(side) for side in self.exact]
        for i in chosen:
            rest[self.terms[i].side] = _less(rest[self.terms[i].side], self.terms[i])
        return trimmed(rest[0]), trimmed(rest[1])

    def _greedy(self, shares: Sequence[NDArray[np.complex128]], *, watch: bool) -> list[int]:
        """The terms that can go, smallest weight first, by the grid; ``watch`` also the half plane of the poles."""
        most_db, most_deg = self.within_db * _KEPT_BACK, self.within_deg * _KEPT_BACK
        gone = [np.zeros_like(shares[0]), np.zeros_like(shares[0])]
        rest = [list(side) for side in self.exact]
        right = _to_the_right(self.exact[1])
        chosen: list[int] = []
        waiting = sorted(range(len(self.terms)), key=self.weights.__getitem__)
        while True:
            held = []
            for i in waiting:
                side = self.terms[i].side
                trial = [*gone]
                trial[side] = gone[side] + shares[i]
                with np.errstate(all="ignore"):
                    ratio = (1 - trial[0]) / (1 - trial[1])
                    decibels, degrees = 20 * np.log10(np.abs(ratio)), np.degrees(np.angle(ratio))
                if not ((np.abs(decibels) <= most_db) & (np.abs(degrees) <= most_deg)).all():
                    continue
                fewer = _less(rest[side], self.terms[i])
                if not any(fewer):
                    continue
                if watch and side and _to_the_right(fewer) > right:
                    held.append(i)
                    continue
                rest[side], gone = fewer, trial
                chosen.append(i)
            if not held or held == waiting:  # a term that was held may go once others have gone
                self.held = len(held)
                return chosen
            waiting = held

    def _proven(self, chosen: list[int]) -> tuple[list[int], Deviation]:
        """As many of the chosen terms, in their order, as the bounds really allow."""
        error = self._error(chosen)
        if self._holds(chosen, error):
            return chosen, error
        fits, fails, step = 0, len(chosen), 1
        while fails - fits > 1:
            # it is nearly always one of the last: back by 1, 2, 4 ... until it holds, then halfway
            middle = fails - step if not fits and fails > step else (fits + fails) // 2
            if self._holds(chosen[:middle], self._error(chosen[:middle])):
                fits = middle
            else:
                fails, step = middle, 2 * step
        return chosen[:fits], self._error(chosen[:fits])

    def _holds(self, chosen: list[int], error: Deviation) -> bool:
        if not error.stays_within(self.within_db, self.within_deg):
            return False
        return _to_the_right(self.shortened(chosen)[1]) <= _to_the_right(self.exact[1])

    def _error(self, chosen: list[int]) -> Deviation:
        """The error of the shortened H: H'/H, with N or D left out where it has not changed."""
        (n, d), (exact_n, exact_d) = self.shortened(chosen), self.exact
        above, below = (n, exact_n) if n != exact_n else ((Fraction(1),), (Fraction(1),))
        if d != exact_d:
            above, below = _product(above, exact_d), _product(below, d)
        return deviation(Ratio.of(above, below), self.low, self.high, (*self.roots[0], *self.roots[1]))


def _less(coefficients: list[Fraction], term: Term) -> list[Fraction]:
    """The coefficients without a term."""
    rest = [*coefficients, *([Fraction(0)] * (term.power + 1 - len(coefficients)))]
    rest[term.power] -= term.value
    return rest


def _shares(
    terms: Sequence[Term], exact: tuple[Numbers, Numbers], w: NDArray[np.float64]
) -> list[NDArray[np.complex128]]:
    """Each term at s = jw as a fraction of N(jw) or D(jw); by logarithms, so that nothing overflows."""
    s = np.asarray(1j * w, dtype=np.complex128)
    inverse = []
    for side in exact:
        mantissas, exponents = evaluate(side, s)
        with np.errstate(divide="ignore"):
            inverse.append((-np.log2(np.abs(mantissas)) - exponents, -np.angle(mantissas)))
    found = []
    for term in terms:
        mantissa, exponent = binary(term.value)
        size, angle = inverse[term.side]
        log2 = math.log2(abs(mantissa)) + exponent if mantissa else -math.inf
        turned = angle + (term.power % 4) * (math.pi / 2) + (math.pi if mantissa < 0 else 0.0)
        magnitude = np.exp2(np.minimum(log2 + term.power * np.log2(w) + size, 400.0)) if mantissa else 0 * w
        found.append(magnitude * np.exp(1j * turned))
    return found


def _product(p: Numbers, q: Numbers) -> Numbers:
    total = [Fraction(0)] * (len(p) + len(q) - 1)
    for i, a in enumerate(p):
        for k, b in enumerate(q):
            total[i + k] += a * b
    return tuple(total)


def _to_the_right(coefficients: Sequence[Fraction]) -> int:
    """The number of roots on the jw axis and to the right of it, the origin left out."""
    return sum(root.multiplicity for root in roots(coefficients) if root.real >= 0 and root.value)


def trimmed(coefficients: Sequence[Fraction]) -> Numbers:
    """The coefficients up to the highest that is not zero.

    >>> trimmed([Fraction(1), Fraction(0)])
    (Fraction(1, 1),)
    """
    kept = list(coefficients)
    while kept and not kept[-1]:
        kept.pop()
    return tuple(kept)
