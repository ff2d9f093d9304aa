"""A claimed H coefficient by coefficient: which agree, which do not, and what is missing, by name.

A wrong H is mostly right: the DC gain, the highest power, all terms but one. So claim and truth are brought to the
same scale and compared power by power of s. The claim stands as it was written; the exact quotient may be scaled at
will, and is scaled so that the fewest terms differ (by the lowest or the highest coefficient of the denominator, by
that of the numerator, or not at all): so symnet's H can be read beside the user's, term by term.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

from symnet.exact.polynomials import make_ring
from symnet.exact.readable.forms import readable_ratio
from symnet.expressions import Expression, Product, Sum
from symnet.review.algebra import Value
from symnet.review.figures import lowest
from symnet.typeset.tree import ONE, Atom, Tree, number, over, plus, power, times
from symnet.typeset.writing import to_text

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

    from symnet.exact.readable.packed import Polynomial
    from symnet.review.scope import Scope

__all__ = ["Coefficient", "Comparing", "Comparison", "compare_coefficients"]

_MOST_TERMS: Final = 200
_TURNED: Final = 100  # no scale that turns the sign of a denominator is taken for one that does not


@dataclass(frozen=True, slots=True)
class Coefficient:
    """The coefficient of s^power above or below the fraction bar, as claimed and as it is.

    ``missing`` are the terms that the claim lacks, ``extra`` those that it has too many, signs included.
    """

    side: str  # "numerator" or "denominator"
    power: int
    claimed: Tree
    exact: Tree
    missing: tuple[Tree, ...] = ()
    extra: tuple[Tree, ...] = ()

    @property
    def agrees(self) -> bool:
        """Whether claim and truth are the same."""
        return not self.missing and not self.extra

    def __str__(self) -> str:
        where = f"{self.side}, s^{self.power}"
        if self.agrees:
            return f"{where}: {to_text(self.exact)} agrees"
        text = f"{where}: {to_text(self.claimed)} is claimed, {to_text(self.exact)} is right"
        if self.missing:
            text += f"; missing: {', '.join(map(to_text, self.missing))}"
        if self.extra:
            text += f"; too many: {', '.join(map(to_text, self.extra))}"
        return text


@dataclass(frozen=True, slots=True)
class Comparison:
    """Every coefficient of a claimed quotient beside the exact one, and the exact one in the form of the claim."""

    coefficients: tuple[Coefficient, ...]
    exact: Tree

    @property
    def wrong(self) -> tuple[Coefficient, ...]:
        """The coefficients that do not agree."""
        return tuple(c for c in self.coefficients if not c.agrees)

    def __str__(self) -> str:
        return "\n".join(map(str, (*self.coefficients, f"right: {to_text(self.exact)}")))


def compare_coefficients(scope: Scope, exact: Expression, claim: Expression) -> Comparison | None:
    """A claim, an expression in names only, against what ``exact`` is in the network.

    None where there is nothing to compare by powers of s: roots, rounded numbers with pi, voltages in the claim, or
    more than some hundred terms.
    """
    solution, algebra = scope.solution, scope.solution.algebra
    value = scope.value(claim)
    if set(solution.remainders(value.numerator)) - {0}:
        return None
    try:
        truth = lowest(solution, *solution.substituted(scope.value(exact)))
    except ZeroDivisionError:
        return None
    written = _sides(scope, claim)
    reduced = lowest(solution, value.numerator, value.denominator)
    names = solution.naming.generators.names
    sides = (*truth, *reduced, written[0].numerator, written[1].numerator)
    if any(algebra.has_roots(side) or len(side) > _MOST_TERMS for side in sides):
        return None
    used = {name for side in sides for monomial in side for name in algebra.exponents(monomial)}
    if not used <= set(names):
        return None
    comparing = Comparing(scope, names)
    claims = [comparing.as_written(*written), comparing.scaled_like(reduced, written[1])]
    return min((comparing.compare(truth, mine) for mine in claims if mine), key=lambda pair: pair[0])[1]


def _sides(scope: Scope, claim: Expression) -> tuple[Value, Value]:
    """What stands over and under the fraction bar of a claim, as it was written."""
    if isinstance(claim, Sum) and len(claim.terms) == 1:  # a minus before the whole
        sign, inner = claim.terms[0]
        above, below = _sides(scope, inner)
        return (above if sign > 0 else -above), below
    if not isinstance(claim, Product):
        return scope.value(claim), scope.number(1)
    sides = [scope.number(1), scope.number(1)]
    for sign, factor in claim.factors:
        sides[sign < 0] = sides[sign < 0] * scope.value(factor)
    return sides[0], sides[1]


class Comparing:
    """Claim and truth in one ring."""

    def __init__(self, scope: Scope, names: tuple[str, ...]) -> None:
        self.algebra = scope.solution.algebra
        self.names = names
        self.ring: PolyRing = make_ring(names[1:])

    def element(self, polynomial: Polynomial) -> PolyElement:
        """A polynomial as a ring element, for the readable form."""
        terms = {}
        for monomial, coefficient in polynomial.items():
            exponents = self.algebra.exponents(monomial)
            terms[tuple(exponents.get(name, 0) for name in self.names)] = self.ring.domain(coefficient)
        return self.ring.from_dict(terms)

    def tree(self, value: Value) -> Tree:
        """A value without s as it is read."""
        if not value.numerator:
            return number(0)
        top, bottom = (self.element(side) for side in (value.numerator, value.denominator))
        return readable_ratio(*top.cancel(bottom))

    def quotient(self, above: Polynomial, below: Polynomial) -> Tree:
        """A quotient of polynomials as it is read."""
        return readable_ratio(*self.element(above).cancel(self.element(below)))

    def parts(self, side: Polynomial, factor: Value) -> dict[int, Value]:
        """The coefficients of one side by their power of s, each times a factor."""
        split = self.algebra.split(side, ("s",))
        return {k: Value(self.algebra, p) * factor for (k,), p in split.items()}

    def as_written(self, above: Value, below: Value) -> list[dict[int, Value]]:
        """The coefficients of a claim as they were written; none where s stands under an inner fraction bar."""
        if any(
            name == "s"
            for side in (above, below)
            for m in side.denominator
            for name in self.algebra.exponents(m)
        ):
            return []
        factors = [Value(self.algebra, side.denominator).inverse() for side in (above, below)]
        return [self.parts(side.numerator, f) for side, f in zip((above, below), factors, strict=True)]

    def scaled_like(self, sides: tuple[Polynomial, Polynomial], below: Value) -> list[dict[int, Value]]:
        """The coefficients of a claim in lowest terms, the lowest of the denominator as it was written."""
        one = self.algebra.number(1)
        found = [self.parts(side, one) for side in sides]
        split = self.algebra.split(below.numerator, ("s",))
        first = Value(self.algebra, split[min(split)]) / Value(self.algebra, below.denominator)
        factor = first / found[1][min(found[1])]
        return [{k: value * factor for k, value in side.items()} for side in found]

    def scales(self, exact: list[dict[int, Value]], claimed: list[dict[int, Value]]) -> list[Value]:
        """What the exact quotient may be multiplied by to look like the claim."""
        found = []
        for side, extreme in ((1, min), (0, min), (1, max), (0, max)):
            ours, theirs = exact[side], claimed[side]
            if ours and theirs and extreme(ours) == extreme(theirs):
                found.append(theirs[extreme(theirs)] / ours[extreme(ours)])
        return [*found, self.algebra.number(1)]

    def compare(
        self, truth: tuple[Polynomial, Polynomial], claimed: list[dict[int, Value]]
    ) -> tuple[int, Comparison]:
        """Claim and truth coefficient by coefficient, and how much they differ."""
        one = self.algebra.number(1)
        unscaled = [self.parts(side, one) for side in truth]
        tried = []
        for scaling in self.scales(unscaled, claimed):
            exact = [{k: self._simple(value * scaling) for k, value in side.items()} for side in unscaled]
            differing = sum(
                len(terms)
                for ours, theirs in zip(exact, claimed, strict=True)
                for k in {*ours, *theirs}
                for terms in self._differing(ours.get(k), theirs.get(k))
            )
            divided = sum(
                2 * bool(value.factors) + (value.monomial != 0 and not (k in theirs and theirs[k].monomial))
                for ours, theirs in zip(exact, claimed, strict=True)
                for k, value in ours.items()
            )
            turned = _TURNED * (self._sign(exact[1]) != self._sign(claimed[1]))
            tried.append((differing + divided + turned, exact))
        score, exact = min(tried, key=lambda pair: pair[0])
        found = []
        for side, ours, theirs in zip(("numerator", "denominator"), exact, claimed, strict=True):
            for k in sorted({*ours, *theirs}):
                missing, extra = (
                    tuple(map(self.tree, part)) for part in self._differing(ours.get(k), theirs.get(k))
                )
                wrong, right = (self.tree(part[k]) if k in part else number(0) for part in (theirs, ours))
                found.append(Coefficient(side, k, wrong, right, missing, extra))
        above, below = (
            plus(*(times(power(Atom("s"), k), self.tree(side[k])) for k in sorted(side))) for side in exact
        )
        return score, Comparison(tuple(found), over(above, below) if below != ONE else above)

    def _sign(self, side: dict[int, Value]) -> bool:
        """Whether every term of the lowest coefficient has a minus."""
        return all(c < 0 for c in side[min(side)].numerator.values())

    def _simple(self, value: Value) -> Value:
        """The value in lowest terms, so that a denominator that stays is one."""
        top, bottom = self.element(value.numerator).cancel(self.element(value.denominator))
        pack = self.algebra.polynomial
        return Value(self.algebra, pack(top.items())) / Value(self.algebra, pack(bottom.items()))

    def _differing(self, right: Value | None, wrong: Value | None) -> tuple[list[Value], list[Value]]:
        """The terms of right that wrong lacks, and the other way round, over their common denominator."""
        zero = self.algebra.number(0)
        right, wrong = right or zero, wrong or zero
        common = right - wrong
        if not common.numerator:
            return [], []
        ours, theirs = (side.over(common.number, common.monomial, common.factors) for side in (right, wrong))
        missing: list[Value] = []
        extra: list[Value] = []
        for monomial in sorted({*ours, *theirs}, reverse=True):
            own, claimed = ours.get(monomial, 0), theirs.get(monomial, 0)
            if own * claimed < 0:  # a wrong sign: missing with the right one, too many with the wrong one
                pair = own, claimed
            elif abs(own) > abs(claimed):
                pair = own - claimed, 0
            else:
                pair = 0, claimed - own
            for terms, coefficient in zip((missing, extra), pair, strict=True):
                if coefficient:
                    term = {monomial: coefficient}
                    terms.append(Value(self.algebra, term, common.number, common.monomial, common.factors))
        return missing, extra
