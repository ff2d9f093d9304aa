"""Limits: what a side becomes as s, or a part, goes to zero or beyond all bounds.

With the solution put in, a value is a quotient of two polynomials; near an end it is the quotient of the terms with
the lowest (for zero) or the highest (for infinity) power of the name. The end is compared with that, exactly. An
end that holds the name itself, such as 1/(s^2*R1*R2*C1*C2), is an asymptote: the quotient of both goes to one.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from symnet.errors import Fault, NotationError, SingularError
from symnet.expressions import Number
from symnet.review.checked import rounding, value_of
from symnet.review.rounding import can_vanish
from symnet.review.verdicts import Judgement, Verdict
from symnet.review.working import Infinite, Limit, Line

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.algebra import Value
    from symnet.review.judge import Judge
    from symnet.review.scope import Scope

__all__ = ["Near", "judge_limit", "limit_name"]

_FREQUENCIES = {"w": "s", "omega": "s", "f": "s"}


def judge_limit(judge: Judge, line: Line, limit: Limit) -> Judgement:
    """The verdict on a limit."""
    scope = judge.scope
    name = limit_name(scope, limit.name)
    if name not in scope.solution.naming.names or (name != "s" and name in scope.definitions):
        known = ", ".join(scope.solution.naming.generators.names)
        raise NotationError(
            Fault(f"a limit is taken in s or in a part, not in {name}", f"such as {known}", line.span)
        )
    to_infinity = isinstance(limit.toward, Infinite)
    if not to_infinity and not (isinstance(limit.toward, Number) and not limit.toward.value):
        raise NotationError(Fault("a limit goes to 0 or to inf", f"write: as {limit.name} -> 0", line.span))
    near = Near(name, to_infinity)
    rest = near.rest(scope, limit, judge.text, rounds=False)
    if not rest and rest is not None:
        return Judgement(line, Verdict.IDENTITY)
    exact = rest
    if near.rest(scope, limit, judge.text, rounds=True) == {}:
        return Judgement(line, Verdict.IDENTITY, rounded=True)
    if judge.numeric is not None and name in judge.numeric.solution.naming.names:
        if near.rest(judge.numeric, limit, judge.text, rounds=False) == {}:
            return Judgement(line, Verdict.VALUES)
        if near.rest(judge.numeric, limit, judge.text, rounds=True) == {}:
            return Judgement(line, Verdict.VALUES, rounded=True)
    if exact is None:
        return Judgement(line, Verdict.FALSE, note=near.note(scope, limit))
    return judge.conditional(line, (exact,))


def limit_name(scope: Scope, name: str) -> str:
    """The name in which a limit is taken: w and f go where s goes."""
    return name if name in scope.network.symbols() else _FREQUENCIES.get(name, name)


class Near:
    """One end of one name."""

    def __init__(self, name: str, to_infinity: bool) -> None:
        self.name, self.to_infinity = name, to_infinity

    def leading(self, scope: Scope, value: Value) -> tuple[int, Polynomial, Polynomial]:
        """The power of the name near the end, and the coefficients above and below; (0, {}, 1) for zero."""
        top, bottom = scope.solution.substituted(value)
        if not top:
            return 0, {}, {0: 1}
        sides = []
        for side in (top, bottom):
            parts = scope.solution.algebra.split(side, (self.name,))
            power = max(parts)[0] if self.to_infinity else min(parts)[0]
            sides.append((power, parts[power,]))
        (above, a), (below, b) = sides
        return above - below, a, b

    def rest(self, scope: Scope, limit: Limit, text: str, *, rounds: bool) -> Polynomial | None:
        """What must be zero for the limit to be right; None where it is wrong whatever the parts are."""
        sides = [limit.value] if isinstance(limit.end, Infinite) else [limit.value, limit.end]
        values = rounding(scope, text, *sides) if rounds else [value_of(scope, side) for side in sides]
        if values is None:
            return None
        try:
            power, a, b = self.leading(scope, values[0])
        except ZeroDivisionError:
            raise SingularError(
                Fault("this divides by zero in this network", span=limit.value.span)
            ) from None
        grows = power if self.to_infinity else -power
        if isinstance(limit.end, Infinite):
            return {} if grows > 0 and a else None
        their_power, their_a, their_b = self.leading(scope, values[1])
        if not their_a:  # zero
            return {} if grows < 0 or not a else a if grows == 0 else None
        if not a or power != their_power:
            return None
        algebra = scope.solution.algebra
        rest = algebra.add(algebra.multiply(a, their_b), algebra.multiply(their_a, b), -1)
        if rounds:
            return {} if can_vanish(algebra, rest) else None
        return rest

    def note(self, scope: Scope, limit: Limit) -> str:
        """What it does instead, when the power of the name is another."""
        power, a, _ = self.leading(scope, value_of(scope, limit.value))
        grows = power if self.to_infinity else -power
        if not a or grows < 0:
            return "it goes to 0"
        return f"it grows as {self.name}^{power}" if grows else "it goes to a finite value"
