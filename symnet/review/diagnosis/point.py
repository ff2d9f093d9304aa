"""Expressions at a random point modulo a prime: the cheap test that every hypothesis passes before the exact one.

Two points are used. At the *solution* every voltage is what the network makes it. At a point *under the laws* the
voltages are random but for what op amps and other voltage laws fix: there two equations agree only when they say the
same, so that the currents of two branches that are equal in the solution (parts in series) are told apart.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from functools import cached_property
from random import Random
from typing import TYPE_CHECKING, Final

from symnet.circuit.series import is_hidden
from symnet.exact.modular import PRIME
from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Root, Sum
from symnet.review.rows import Span
from symnet.review.solution import generator_of

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.algebra import Algebra, Value
    from symnet.review.rows import Rows
    from symnet.review.scope import Scope

__all__ = ["Point", "UnreadableError", "inverse"]

_MOST_TRIALS: Final = 24  # points at which the roots of a line are looked for


class UnreadableError(ArithmeticError):
    """A division by zero at this point, or a root that is none there: the cheap test cannot be made."""


@dataclass(eq=False)
class Point:
    """A value for every generator; ``of`` is the transfer that figures such as Q belong to."""

    scope: Scope
    values: Mapping[str, int]
    of: Expression | None = None
    _names: dict[str, int] = field(default_factory=dict, repr=False)

    @classmethod
    def solved(cls, scope: Scope, of: Expression | None = None) -> Point:
        """A point at which the network is solved, and every square root so far is one of a square.

        UnreadableError when none is found, as where the root of a negative number occurs.
        """
        roots = scope.solution.algebra.roots
        for trial in range(_MOST_TRIALS if roots else 1):
            point = cls(scope, scope.solution.point(trial), of)
            if all(point._has_root(radicand) for _, radicand in roots):
                return point
        raise UnreadableError

    @classmethod
    def under_laws(cls, rows: Rows) -> Point:
        """A point at which the laws of the parts hold, and the current laws inside a series; random otherwise."""
        unknowns = rows.scope.solution.unknowns
        random = Random("under the laws")
        free = [random.randrange(1, PRIME) for _ in unknowns]
        hidden = [
            row
            for equation, row in zip(rows.equations, rows.network, strict=True)
            if equation.kind == "node" and is_hidden(equation.name)
        ]
        found = Span([*rows.laws, *hidden]).completed(free)
        own = {generator_of(unknown): value for unknown, value in zip(unknowns, found, strict=True)}
        return cls(rows.scope, {**rows.point, **own})

    @cached_property
    def _roots(self) -> Mapping[str, int]:
        """A square root of every radicand, by the name of its generator."""
        found: dict[str, int] = {}
        for k, (_, radicand) in enumerate(self.scope.solution.algebra.roots):
            found[f"root {k}"] = _root(self.scope.solution.algebra.modulo(radicand, self.values, PRIME))
        return {**self.values, **found}

    def _has_root(self, radicand: Polynomial) -> bool:
        value = self.scope.solution.algebra.modulo(radicand, self.values, PRIME)
        return pow(_root(value), 2, PRIME) == value

    def value(self, value: Value) -> int:
        """A value at the point."""
        algebra = value.algebra
        below = value.number
        for side, exponent in (({value.monomial: 1}, 1), *value.factors):
            below = below * pow(self._at(algebra, side), exponent, PRIME) % PRIME
        if not below:
            raise UnreadableError
        return self._at(algebra, value.numerator) * pow(below, -1, PRIME) % PRIME

    def _at(self, algebra: Algebra, polynomial: Polynomial) -> int:
        try:
            return algebra.modulo(polynomial, self._roots if algebra.roots else self.values, PRIME)
        except KeyError:  # a root that came after this point was chosen
            raise UnreadableError from None

    def name(self, name: str) -> int:
        """What a name is worth."""
        known = self._names.get(name)
        if known is None:
            known = self._names[name] = self.value(self.scope.of_name(name, self.of))
        return known

    def __call__(self, expression: Expression) -> int:
        """An expression at the point; UnreadableError where it divides by zero, and for roots that are new."""
        match expression:
            case Name(name=name):
                return self.name(name)
            case Number(value=value):
                return value.numerator * pow(value.denominator, -1, PRIME) % PRIME
            case Sum(terms=terms):
                return sum(sign * self(term) for sign, term in terms) % PRIME
            case Product(factors=factors):
                total = 1
                for power, factor in factors:
                    total = total * (self(factor) if power > 0 else inverse(self(factor))) % PRIME
                return total
            case Power(base=base, exponent=exponent):
                inner = self(base)
                return pow(inner if exponent >= 0 else inverse(inner), abs(exponent), PRIME)
            case Parallel(branches=branches):
                return inverse(sum(inverse(self(branch)) for branch in branches) % PRIME)
            case Root():
                return self.value(self.scope.value(expression, self.of))


def inverse(value: int) -> int:
    """1 over a residue; UnreadableError for zero."""
    if not value:
        raise UnreadableError
    return pow(value, -1, PRIME)


def _root(value: int) -> int:
    """A square root, if there is one: the prime is 3 modulo 4."""
    return pow(value, (PRIME + 1) // 4, PRIME)
