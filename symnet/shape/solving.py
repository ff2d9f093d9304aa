"""Polynomial equations in positive parts, solved for a part where that can be read: exact, bounded, in branches.

Conditions on parts are products of small factors, most of which cannot vanish for positive parts. So each
equation is factored, factors of one sign are dropped, and what is left is solved for a part that it contains to
the first power, the one with the shortest solution first; the solution is put into the other equations, and so
on. A product of several factors that can vanish gives branches. A solution that is negative for all positive
parts closes its branch. Groebner bases would do the same eliminations blind to signs, and mostly unreadably.
"""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import dataclass
from functools import lru_cache
from itertools import combinations
from math import inf
from typing import TYPE_CHECKING, Any, Final

from symnet.shape.given import NOTHING, Given
from symnet.shape.positive import as_squares, content, divide_content, sign_of

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["Branch", "Solved", "kernel", "put_in", "solve", "vanishing"]

_MOST_FACTORED: Final = 40  # terms of a polynomial that is factored; larger ones are kept whole
_MOST_TERMS: Final = 120  # terms of an equation after a solution has been put in; larger ones are left open
_MOST_BRANCHES: Final = 6
_MOST_ELIMINATED: Final = 20  # terms, and below the degree, of two polynomials whose resultant is computed
_HIGHEST_ELIMINATED: Final = 4
_MOST_WORK: Final = 1000  # terms that the resultant can have


@dataclass(frozen=True, slots=True)
class Solved:
    """``ring.gens[index] = numerator/denominator``, in lowest terms, in the other symbols.

    ``positive`` says whether that is positive whatever the (positive) symbols are.
    """

    index: int
    numerator: PolyElement
    denominator: PolyElement

    @property
    def positive(self) -> bool:
        """Whether the value is positive for all positive symbols."""
        return sign_of(self.numerator) == sign_of(self.denominator) and sign_of(self.numerator) is not None


@dataclass(frozen=True, slots=True)
class Branch:
    """Parts solved for, and equations (each polynomial is 0) that are left as they are."""

    solved: tuple[Solved, ...]
    left: tuple[PolyElement, ...]


def vanishing(polynomial: PolyElement, given: Given = NOTHING) -> tuple[PolyElement, ...]:
    """The factors of a polynomial, not 0, that can be 0 for positive symbols; none if it has none.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, R1, R2 = make_ring(["R1", "R2"]).gens
    >>> vanishing(3 * R1 * (R1 + R2) * (R1 - 2*R2))
    (R1 - 2*R2,)
    """
    rest = divide_content(polynomial, *content(polynomial))
    if sign_of(rest) is not None:
        return ()
    found = []
    for factor, _ in _factors(rest):
        there = given.at(factor)
        if not there:
            found.append(factor)
            continue
        pieces = ((factor, 1),) if there is factor else _factors(divide_content(there, *content(there)))
        possible = [piece for piece, _ in pieces if _can_vanish(piece)]
        if sum(times for _, times in pieces) == 1 and possible:
            possible = [factor]  # in names, as long as the numbers do not make it fall apart
        found += [p if _leads_positive(p) else -p for p in possible]
    return tuple(found)


def _can_vanish(factor: PolyElement) -> bool:
    """Whether nothing proves that the factor keeps one sign for positive symbols."""
    if sign_of(factor) is not None:
        return False
    squares = [as_squares(f) for f in (factor, -factor)]
    return not any(s is not None and s.is_positive for s in squares)


@lru_cache(maxsize=512)
def _factors(polynomial: PolyElement) -> tuple[tuple[PolyElement, int], ...]:
    """The irreducible factors with their multiplicities, but for the sign; a large polynomial is kept whole."""
    if len(polynomial) > _MOST_FACTORED:
        return ((polynomial, 1),)
    return tuple(polynomial.factor_list()[1])


def kernel(polynomial: PolyElement) -> PolyElement:
    """A polynomial with the same sign for positive symbols, factors of one sign and squares left out; a constant if
    that is all.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, R1, R2 = make_ring(["R1", "R2"]).gens
    >>> kernel(-3 * R1 * (R1 + R2) * (R1 - 2*R2)**3)
    -R1 + 2*R2
    """
    number, exponents = content(polynomial)
    rest = divide_content(polynomial, number, exponents)
    factors = _factors(rest)
    whole: Any = rest.ring.one
    for factor, times in factors:
        whole = whole * factor**times
    total: Any = rest.ring.one if whole == rest else -rest.ring.one
    for factor, times in factors:
        sign = sign_of(factor)
        if sign is None and times % 2:
            total = total * factor
        elif sign == -1 and times % 2:
            total = -total
    return total


def _leads_positive(polynomial: PolyElement) -> bool:
    return bool(polynomial[max(polynomial)] > 0)


def solve(
    equations: Sequence[PolyElement], given: Given = NOTHING, wanted: Collection[int] = ()
) -> tuple[Branch, ...]:
    """The ways in which all polynomials can be 0 for positive symbols; none if there is no way.

    ``given`` are symbols that have a number; ``wanted`` those to solve for, by their index, where others are not.
    """
    branches = _Solver(given, frozenset(wanted)).branches([e for e in equations if given.at(e)], ())
    return tuple(_back_substituted(branch) for branch in branches[:_MOST_BRANCHES])


@dataclass(frozen=True, slots=True)
class _Solver:
    """The search, for one set of numbers and one choice of symbols; no choice means any symbol without a number."""

    given: Given
    wanted: frozenset[int]

    def branches(self, equations: list[PolyElement], solved: tuple[Solved, ...]) -> list[Branch]:
        factored = [vanishing(e, self.given) for e in equations]
        if not all(factored):
            return []
        if not factored:
            return [Branch(solved, ())]
        choices = []
        for place, factors in enumerate(factored):
            picks = [self.shortest(f) for f in factors]
            costs = [pick[0] for pick in picks if pick is not None]
            if len(costs) == len(factors):
                choices.append((len(factors), max(costs), place, picks))
        whole = [_product(factors) for factors in factored]
        if not choices:
            return [] if _exclude_each_other(whole, self.given) else [Branch(solved, tuple(whole))]
        _, _, place, picks = min(choices, key=lambda c: c[:3])
        found: list[Branch] = []
        for pick in picks:
            assert pick is not None  # noqa: S101 - chosen above among those that all have a solution
            solution = pick[1]
            if self.is_negative(solution):
                continue
            others = [put_in(e, solution) for k, e in enumerate(whole) if k != place]
            if any(len(e) > _MOST_TERMS for e in others):
                return [Branch(solved, tuple(whole))]
            found += self.branches([e for e in others if self.given.at(e)], (*solved, solution))
            if len(found) > _MOST_BRANCHES:
                break
        return found

    def shortest(self, factor: PolyElement) -> tuple[tuple[int, ...], Solved] | None:
        """The solution for the symbol that gives the shortest one, signs that are sure first; None if none is linear."""
        ring = factor.ring
        best: tuple[tuple[int, ...], Solved] | None = None
        for index in range(1, ring.ngens):
            if index in self.given or (self.wanted and index not in self.wanted):
                continue
            if max(m[index] for m in factor) != 1:
                continue
            above = ring.from_dict({m: -c for m, c in factor.items() if not m[index]})
            below = ring.from_dict(
                {(*m[:index], 0, *m[index + 1 :]): c for m, c in factor.items() if m[index]}
            )
            solution = _lowest(index, above, below)
            if not self.given.at(solution.denominator):
                continue
            sure = self.signs(solution) in {(1, 1), (-1, -1)} or self.is_negative(solution)
            below = solution.denominator
            size = max(abs(int(c)) for c in below.values())
            cost = (not sure, len(below), len(solution.numerator), size, index)
            if best is None or cost < best[0]:
                best = cost, solution
        return best

    def signs(self, solution: Solved) -> tuple[int | None, int | None]:
        return self.given.sign(solution.numerator), self.given.sign(solution.denominator)

    def is_negative(self, solution: Solved) -> bool:
        return self.signs(solution) in {(1, -1), (-1, 1), (0, 1), (0, -1)}


def _exclude_each_other(equations: Sequence[PolyElement], given: Given) -> bool:
    """Whether two of the equations are proven to have no common solution: a resultant of them that is never 0."""
    small = [e for e in equations if len(e) <= _MOST_ELIMINATED]
    for f, g in combinations(small, 2):
        for index in range(1, f.ring.ngens):
            if _elimination_work(f, g, index) <= _MOST_WORK:
                symbols = list(f.ring.symbols)
                ring = f.ring.clone(symbols=[symbols[index], *symbols[:index], *symbols[index + 1 :]])
                eliminated = f.set_ring(ring).resultant(g.set_ring(ring)).set_ring(f.ring)
                if given.at(eliminated) and not vanishing(eliminated, given):
                    return True
                break
    return False


def _elimination_work(f: PolyElement, g: PolyElement, index: int) -> float:
    """How many terms the resultant can have, which has the degree of one polynomial in the coefficients of the other."""
    degrees, longest = [], []
    for p in (f, g):
        counts: dict[int, int] = {}
        for m in p:
            counts[m[index]] = counts.get(m[index], 0) + 1
        degrees.append(max(counts))
        longest.append(max(counts.values()))
    if not all(0 < degree <= _HIGHEST_ELIMINATED for degree in degrees):
        return inf
    return float(longest[0] ** degrees[1] * longest[1] ** degrees[0])


def _product(factors: Sequence[PolyElement]) -> PolyElement:
    total: Any = factors[0]
    for factor in factors[1:]:
        total = total * factor
    return total


def _lowest(index: int, above: PolyElement, below: PolyElement) -> Solved:
    top, bottom = above.cancel(below)
    if not _leads_positive(bottom):
        top, bottom = -top, -bottom
    return Solved(index, top, bottom)


def put_in(polynomial: PolyElement, solution: Solved) -> PolyElement:
    """The polynomial with the solution in place of its symbol, cleared of the denominator."""
    ring, index = polynomial.ring, solution.index
    by_power: dict[int, dict[tuple[int, ...], Any]] = {}
    for m, c in polynomial.items():
        by_power.setdefault(m[index], {})[(*m[:index], 0, *m[index + 1 :])] = c
    degree = max(by_power, default=0)
    total: Any = ring.zero
    for k, part in by_power.items():
        total = total + ring.from_dict(part) * solution.numerator**k * solution.denominator ** (degree - k)
    return total


def _back_substituted(branch: Branch) -> Branch:
    """Earlier solutions in terms of the symbols that stay free at the end."""
    done: list[Solved] = []
    for solution in reversed(branch.solved):
        above, below = solution.numerator, solution.denominator
        for later in done:
            degrees = [max((m[later.index] for m in p), default=0) for p in (above, below)]
            above, below = put_in(above, later), put_in(below, later)
            # each was multiplied by denominator^degree
            shift = degrees[1] - degrees[0]
            above, below = (
                (above * later.denominator**shift, below)
                if shift > 0
                else (above, below * later.denominator**-shift)
            )
        done.append(_lowest(solution.index, above, below))
    return Branch(tuple(sorted(done, key=lambda s: s.index)), branch.left)
