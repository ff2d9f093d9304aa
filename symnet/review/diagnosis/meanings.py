"""What a line gives a wrong value for, told from the drawing: a voltage, a current, a limit."""

from __future__ import annotations

from typing import TYPE_CHECKING

from symnet.circuit.series import is_hidden
from symnet.errors import SymnetError
from symnet.expressions import Expression, Name
from symnet.review.checked import value_of
from symnet.review.coefficients import Comparing
from symnet.review.diagnosis.explanation import Explanation, Slip
from symnet.review.diagnosis.pieces import current_through, shown, voltage_between
from symnet.review.limiting import Near, limit_name
from symnet.review.working import Equation, Infinite, Limit
from symnet.typeset.writing import to_text

if TYPE_CHECKING:
    from symnet.review.judge import Judge

__all__ = ["of_limit", "of_part"]


def of_part(judge: Judge, statement: Equation) -> Explanation | None:
    """v_R1 = ... and i_R1 = ...: what they are by the drawing."""
    first = statement.sides[0]
    network = judge.scope.network
    if not isinstance(first, Name) or first.name[:2] not in {"i_", "v_"}:
        return None
    part = next((p for p in network.parts if p.name == first.name[2:]), None)
    if part is None or len(part.nodes) != 2 or any(map(is_hidden, part.nodes)):
        return None
    start, end = part.nodes
    right: Expression | None = voltage_between(start, end)
    if first.name[0] == "i":
        right = current_through(network, part.name)
    if right is None:
        return None
    words = f"{part.name} goes from {start} to {end}: {first.name} is {shown(right)}"
    return Explanation(Slip.DIFFERENT, words, (), Equation((first, right)))


def of_limit(judge: Judge, limit: Limit) -> Explanation | None:
    """Where a side goes instead."""
    scope = judge.scope
    near = Near(limit_name(scope, limit.name), isinstance(limit.toward, Infinite))
    names = scope.solution.naming.generators.names
    try:
        exponent, above, below = near.leading(scope, value_of(scope, limit.value))
    except (SymnetError, ZeroDivisionError):
        return None
    used = {name for side in (above, below) for m in side for name in scope.solution.algebra.exponents(m)}
    if not above or not used <= set(names):
        return None
    unit = {abs(exponent) * scope.solution.algebra.unit(near.name): 1}
    sides = [above, below]
    sides[exponent < 0] = scope.solution.algebra.multiply(sides[exponent < 0], unit)
    tree = Comparing(scope, names).quotient(*sides)
    toward = "inf" if near.to_infinity else "0"
    verb = "goes as" if exponent else "goes to"
    return Explanation(
        Slip.DIFFERENT, f"as {limit.name} -> {toward}, {shown(limit.value)} {verb} {to_text(tree)}"
    )
