"""Whether an equation is true of a network: decided by an exact test for zero, whatever the equation says.

Left minus right is a fraction of polynomials in the names and the unknowns. A random point modulo a prime, with the
unknowns solved for there, shows most false lines false, and that is a proof; for the others the exact solution is
put in (:mod:`symnet.review.solution`), and the line is an identity when nothing is left. What is left otherwise
are polynomials in the parts that would all have to be zero, coefficient by coefficient in s: the condition under
which the line is true, solved for parts where it can be (:mod:`symnet.shape.solving`).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from itertools import pairwise
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, LimitError, SingularError, SymnetError
from symnet.exact.polynomials import make_ring
from symnet.expressions import Expression, Name, children, names_in
from symnet.review.rounding import can_vanish
from symnet.review.scope import Rounded, Scope
from symnet.review.solution import ROUNDED
from symnet.review.verdicts import Judgement, Verdict
from symnet.review.working import FIGURES, Equation, Line
from symnet.shape.conditions import alternative
from symnet.shape.solving import solve

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.algebra import Value
    from symnet.shape.stated import Alternative

__all__ = ["Judge", "Said"]

_MOST_SOLVED: Final = 60  # terms of a condition that is still solved
_MOST_COEFFICIENTS: Final = 12  # conditions that must hold together


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

    # -- equations -----------------------------------------------------------------------------------------------------

    def equation(self, line: Line, statement: Equation) -> Judgement:
        """The verdict on an equation or a chain of them."""
        found = [
            self._link(line, left, right, statement.of, k)
            for k, (left, right) in enumerate(pairwise(statement.sides))
        ]
        said = Said(
            line,
            tuple(self.difference(left, right, statement.of) for left, right in pairwise(statement.sides)),
        )
        worst = max(found, key=lambda judgement: _ORDER[judgement.verdict])
        if worst.holds:
            worst = self._repeated(said, worst)
        self.said.append(said)
        return worst

    def difference(self, left: Expression, right: Expression, of: Expression | None = None) -> Value:
        """Left minus right in the unknowns; SingularError at the place where it divides by zero."""
        return self.value(left, of) - self.value(right, of)

    def value(self, expression: Expression, of: Expression | None = None) -> Value:
        """The value of an expression, denominators checked in the network."""
        return self._checked(self.scope, expression, of)

    def _checked(
        self, scope: Scope, expression: Expression, of: Expression | None, rounded: Rounded | None = None
    ) -> Value:
        try:
            value = scope.value(expression, of, rounded)
        except ZeroDivisionError:
            raise self._divides(scope, expression, of) from None
        except SymnetError as error:
            raise type(error)([fault.at(expression.span) for fault in error.faults]) from None
        if any(self._is_zero(scope, factor) for factor, _ in value.factors):
            raise self._divides(scope, expression, of)
        return value

    def _is_zero(self, scope: Scope, polynomial: Polynomial) -> bool:
        return not scope.solution.is_nonzero(polynomial) and not scope.solution.remainders(polynomial)

    def _divides(self, scope: Scope, expression: Expression, of: Expression | None) -> SingularError:
        """The error at the smallest expression that divides by zero."""
        inner = expression
        while True:
            smaller = next((child for child in children(inner) if self._fails(scope, child, of)), None)
            if smaller is None:
                break
            inner = smaller
        message = "this divides by zero in this network"
        zero = next((child for child in children(inner) if self._vanishes(scope, child, of)), None)
        hint = "a difference that is zero here, such as that of an op amp's inputs, cannot be divided by"
        return SingularError(Fault(message, hint, (zero or inner).span or expression.span))

    def _fails(self, scope: Scope, expression: Expression, of: Expression | None) -> bool:
        try:
            value = scope.value(expression, of)
        except ZeroDivisionError:
            return True
        return any(self._is_zero(scope, factor) for factor, _ in value.factors)

    def _vanishes(self, scope: Scope, expression: Expression, of: Expression | None) -> bool:
        try:
            return self._is_zero(scope, scope.value(expression, of).numerator)
        except ZeroDivisionError:
            return False

    def _link(
        self, line: Line, left: Expression, right: Expression, of: Expression | None, place: int
    ) -> Judgement:
        difference = self.difference(left, right, of)
        solution = self.scope.solution
        if not difference.numerator:
            spoken = any(_is_spoken(name, self.scope) for side in (left, right) for name in names_in(side))
            verdict = Verdict.IDENTITY if spoken or place else Verdict.NOTHING
            note = "" if verdict is Verdict.IDENTITY else "it is true of any network"
            return Judgement(line, verdict, link=place, note=note)
        left_over: Sequence[Polynomial] | None = None
        if not solution.is_nonzero(difference.numerator):
            left_over = tuple(solution.remainders(difference.numerator).values())
            if not left_over:
                return Judgement(line, Verdict.IDENTITY, link=place)
        rounded = self._rounds(self.scope, left, right, of)
        if rounded:
            return Judgement(line, Verdict.IDENTITY, rounded=True, link=place)
        if self.numeric is not None:
            found = self._for_values(line, left, right, of, place)
            if found is not None:
                return found
        if left_over is None:
            left_over = tuple(solution.remainders(difference.numerator).values())
        ways = self._ways(left_over)
        met = [way for way in ways if not self._has_values(way)]
        if met:
            return Judgement(line, Verdict.CONDITION, tuple(met), link=place)
        return Judgement(line, Verdict.FALSE, tuple(ways), link=place)

    def _rounds(self, scope: Scope, left: Expression, right: Expression, of: Expression | None) -> bool:
        """Whether a line with rounded numbers is true to its digits."""
        rounded = Rounded(scope, self.text)
        difference = self._checked(scope, left, of, rounded) - self._checked(scope, right, of, rounded)
        if not rounded.generators:
            return False
        if len(rounded.generators) > ROUNDED:
            raise LimitError(Fault(f"more than {ROUNDED} rounded numbers in one line", "split it", left.span))
        parts = scope.solution.remainders(difference.numerator).values()
        return all(can_vanish(scope.solution.algebra, part) for part in parts)

    def _for_values(
        self, line: Line, left: Expression, right: Expression, of: Expression | None, place: int
    ) -> Judgement | None:
        numeric = self.numeric
        assert numeric is not None  # noqa: S101 - asked for by the caller
        difference = self._checked(numeric, left, of) - self._checked(numeric, right, of)
        if not difference.numerator or not numeric.solution.remainders(difference.numerator):
            return Judgement(line, Verdict.VALUES, link=place)
        if self._rounds(numeric, left, right, of):
            return Judgement(line, Verdict.VALUES, rounded=True, link=place)
        return None

    # -- what was said before ----------------------------------------------------------------------------------------------

    def _repeated(self, said: Said, judgement: Judgement) -> Judgement:
        """The judgement with the earlier line that says the same, if there is one."""
        if len(said.differences) != 1 or judgement.verdict is Verdict.NOTHING:
            return judgement
        (new,) = said.differences
        for old in self.said:
            if len(old.differences) == 1 and old.differences[0].algebra is new.algebra:
                (known,) = old.differences
                if known.numerator and _proportional(known, new):
                    return replace(judgement, verdict=Verdict.NOTHING, same_as=old.line.number)
        return judgement

    # -- conditions --------------------------------------------------------------------------------------------------------

    def _ways(self, parts: Sequence[Polynomial]) -> list[Alternative]:
        """The ways in which all of these can be zero for positive names; empty where there is none."""
        solution, algebra = self.scope.solution, self.scope.solution.algebra
        names = list(solution.naming.generators.names[1:])
        split = [name for name in algebra.names if name == "s" or name.startswith("drive:")]
        equations: list[Polynomial] = []
        for part in parts:
            for piece in algebra.split(part, split).values():
                pieces = list(algebra.split(piece, (), roots=True).values())
                if len(pieces) > 1 or any(len(p) > _MOST_SOLVED for p in pieces):
                    return []
                equations += pieces
        if len(equations) > _MOST_COEFFICIENTS:
            equations = sorted(equations, key=len)[:_MOST_COEFFICIENTS]
        ring = make_ring([*names, "pi"])
        places = {name: k for k, name in enumerate(("s", *names, "pi"))}
        elements = []
        for equation in equations:
            terms = {}
            for monomial, coefficient in equation.items():
                exponents = [0] * len(places)
                for name, exponent in algebra.exponents(monomial).items():
                    exponents[places[name]] = exponent
                terms[tuple(exponents)] = ring.domain(coefficient)
            elements.append(ring.from_dict(terms))
        ways = []
        for branch in solve(elements):
            if any(solved.index == places["pi"] for solved in branch.solved):
                continue
            way = alternative(branch, ())
            if way is not None:
                ways.append(way)
        return ways

    def _has_values(self, way: Alternative) -> bool:
        """Whether every name that a way to be true speaks of has a value, so that it cannot be chosen."""
        from symnet.typeset.tree import Atom

        numbers = self.scope.solution.naming.numbers
        names = {name for name, _ in way.values}
        trees = [tree for _, tree in way.values] + [side for a, _, b in way.relations for side in (a, b)]
        while trees:
            tree = trees.pop()
            if isinstance(tree, Atom):
                names.add(tree.name)
            for slot in getattr(tree, "__slots__", ()):
                inner = getattr(tree, slot)
                if isinstance(inner, tuple):
                    trees += [x[1] if isinstance(x, tuple) else x for x in inner if not isinstance(x, int)]
                elif not isinstance(inner, str | int):
                    trees.append(inner)
        return bool(names) and all(name in numbers for name in names if name != "pi")


_ORDER: Final = {
    Verdict.NOTHING: 0,
    Verdict.IDENTITY: 1,
    Verdict.VALUES: 2,
    Verdict.CONDITION: 3,
    Verdict.FALSE: 4,
}


def _is_spoken(name: Name, scope: Scope) -> bool:
    """Whether a name stands for something that is computed from the network, so that an identity says something."""
    word = name.name
    if word in scope.definitions:
        return True
    return (
        word[:2] in {"i_", "v_"}
        or (word in FIGURES and word not in scope.network.symbols())
        or word in {"H", "D"}
    )


def _proportional(one: Value, two: Value) -> bool:
    """Whether two values differ by a constant factor only."""
    algebra = one.algebra
    if len(one.numerator) != len(two.numerator) and one.factors == two.factors:
        return False
    p = algebra.multiply(one.numerator, two.denominator)
    q = algebra.multiply(two.numerator, one.denominator)
    if p.keys() != q.keys():
        return False
    first = next(iter(p))
    return all(c * q[first] == q[m] * p[first] for m, c in p.items())
