"""Whether an equation is true of a network: decided by an exact test for zero, whatever the equation says.

Left minus right is a fraction of polynomials in the names and the unknowns. A random point modulo a prime, with the
unknowns solved for there, shows most false lines false, and that is a proof; for the others the exact solution is
put in (:mod:`symnet.review.solution`), and the line is an identity when nothing is left. What is left otherwise
are polynomials in the parts that would all have to be zero, coefficient by coefficient in s: the condition under
which the line is true, solved for parts where it can be (:mod:`symnet.review.ways`).
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from itertools import pairwise
from typing import TYPE_CHECKING, Final

from symnet.errors import LimitError
from symnet.expressions import Expression, Name, names_in
from symnet.review.checked import is_zero, rounding, value_of
from symnet.review.rounding import can_vanish
from symnet.review.scope import Scope
from symnet.review.verdicts import Judgement, Verdict, worst
from symnet.review.ways import has_values, ways
from symnet.review.working import Equation, Line

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.algebra import Value

__all__ = ["Judge", "Said"]

#: Terms of the determinant of a network up to which a condition is looked for; it would be as long as that.
_MOST_TERMS_SOLVED: Final = 5000


@dataclass(frozen=True, slots=True)
class Said:
    """What a line says, before the solution is put in: left minus right for each equals sign."""

    line: Line
    differences: tuple[Value, ...]


@dataclass(eq=False)
class Judge:
    """Judges the lines of one working that share a network; ``numeric`` has the given values in place of names."""

    scope: Scope
    text: str
    numeric: Scope | None = None
    said: list[Said] = field(default_factory=list)

    def equation(self, line: Line, statement: Equation) -> Judgement:
        """The verdict on an equation or a chain of them, as it stands among the lines before it."""
        differences = self.differences(statement)
        judgement = self.alone(line, statement, differences)
        said = Said(line, differences)
        if judgement.holds:
            judgement = self._repeated(said, judgement)
        self.said.append(said)
        return judgement

    def differences(self, statement: Equation) -> tuple[Value, ...]:
        """Left minus right in the unknowns for each equals sign; SingularError where a side divides by zero."""
        values = [value_of(self.scope, side, statement.of) for side in statement.sides]
        return tuple(left - right for left, right in pairwise(values))

    def alone(
        self, line: Line, statement: Equation, differences: tuple[Value, ...] | None = None
    ) -> Judgement:
        """The verdict on an equation whatever was said before."""
        if differences is None:
            differences = self.differences(statement)
        links = list(pairwise(statement.sides))
        found = []
        for place, (link, difference) in enumerate(zip(links, differences, strict=True)):
            verdict = self._link(line, link, statement.of, difference)
            if verdict.verdict is Verdict.NOTHING and place:
                verdict = Judgement(line, Verdict.IDENTITY)  # a step of algebra
            found.append(replace(verdict, link=place))
        return worst(found)

    def _link(
        self, line: Line, sides: tuple[Expression, Expression], of: Expression | None, difference: Value
    ) -> Judgement:
        if not difference.numerator:
            if any(_is_spoken(name, self.scope) for side in sides for name in names_in(side)):
                return Judgement(line, Verdict.IDENTITY)
            return Judgement(line, Verdict.NOTHING, note="it is true of any network")
        try:
            if is_zero(self.scope, difference.numerator):
                return Judgement(line, Verdict.IDENTITY)
            if self._rounds(self.scope, sides, of):
                return Judgement(line, Verdict.IDENTITY, rounded=True)
        except LimitError:
            if self.numeric is None:
                raise
        if self.numeric is not None:
            left, right = (value_of(self.numeric, side, of) for side in sides)
            top = (left - right).numerator
            if not top or is_zero(self.numeric, top):
                return Judgement(line, Verdict.VALUES)
            if self._rounds(self.numeric, sides, of):
                return Judgement(line, Verdict.VALUES, rounded=True)
        try:
            if self.scope.solution.terms <= _MOST_TERMS_SOLVED:
                rest = tuple(self.scope.solution.remainders(difference.numerator).values())
                return self.conditional(line, rest)
        except LimitError:
            pass
        return Judgement(line, Verdict.FALSE)  # that is sure, only a condition is out of reach

    def conditional(self, line: Line, rest: tuple[Polynomial, ...]) -> Judgement:
        """The verdict on a line that is true only where these polynomials are zero, and false where they cannot be."""
        found = ways(self.scope.solution, rest)
        numbers = self.scope.solution.naming.numbers
        open_ones = tuple(way for way in found if not has_values(way, numbers))
        if open_ones:
            return Judgement(line, Verdict.CONDITION, open_ones)
        return Judgement(line, Verdict.FALSE, found)

    def _rounds(self, scope: Scope, sides: tuple[Expression, Expression], of: Expression | None) -> bool:
        """Whether a line with rounded numbers is true to its digits."""
        values = rounding(scope, self.text, *sides, of=of)
        if values is None:
            return False
        parts = scope.solution.remainders((values[0] - values[1]).numerator).values()
        return all(can_vanish(scope.solution.algebra, part) for part in parts)

    def _repeated(self, said: Said, judgement: Judgement) -> Judgement:
        """The judgement with the earlier line that says the same, if there is one."""
        if len(said.differences) != 1 or judgement.verdict is Verdict.NOTHING:
            return judgement
        (new,) = said.differences
        for old in self.said:
            if (
                len(old.differences) == 1
                and old.differences[0].numerator
                and _proportional(old.differences[0], new)
            ):
                return replace(judgement, verdict=Verdict.NOTHING, same_as=old.line)
        return judgement


def _is_spoken(name: Name, scope: Scope) -> bool:
    """Whether a name stands for something that is computed from the network, so that an identity says something."""
    word = name.name
    if word in scope.definitions or word[:2] in {"i_", "v_"}:
        return True
    return scope.is_figure(word) or (word in {"H", "D"} and word not in scope.network.symbols())


def _proportional(one: Value, two: Value) -> bool:
    """Whether two values differ by a constant factor only."""
    algebra = one.algebra
    p, q = one.numerator, two.numerator
    if one.monomial != two.monomial or one.factors != two.factors:
        if algebra.has_roots(p) or algebra.has_roots(q):
            return False
        p, q = algebra.multiply(p, two.denominator), algebra.multiply(q, one.denominator)
    if p.keys() != q.keys():
        return False
    first = next(iter(p))
    return all(c * q[first] == q[m] * p[first] for m, c in p.items())
