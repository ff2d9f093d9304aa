"""The value of an expression in a network, once it is sure that it does not divide by zero there."""

from __future__ import annotations

from typing import TYPE_CHECKING

from symnet.errors import Fault, LimitError, SingularError, SymnetError
from symnet.expressions import Expression, Product, children
from symnet.review.scope import Rounded, Scope
from symnet.review.solution import ROUNDED

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.algebra import Value

__all__ = ["is_zero", "rounding", "value_of"]


def is_zero(scope: Scope, polynomial: Polynomial) -> bool:
    """Whether a polynomial in the unknowns is zero in the network: first by a random point, then exactly.

    Raises LimitError where the exact solution is too long to be put in.
    """
    if scope.solution.is_nonzero(polynomial):
        return False
    return scope.knows(polynomial) or not scope.solution.remainders(polynomial)


def value_of(
    scope: Scope, expression: Expression, of: Expression | None = None, rounded: Rounded | None = None
) -> Value:
    """The value of an expression in the unknowns.

    Raises SingularError at the smallest piece that divides by zero, 0/0 included, and LimitError for an expression
    that is too long when it is multiplied out.
    """
    try:
        value = scope.value(expression, of, rounded)
    except ZeroDivisionError:
        raise _divides(scope, expression, of) from None
    except SymnetError as error:
        raise type(error)([fault.at(expression.span) for fault in error.faults]) from None
    if _divides_by_zero(scope, value):
        raise _divides(scope, expression, of)
    return value


def rounding(scope: Scope, text: str, *sides: Expression, of: Expression | None = None) -> list[Value] | None:
    """The sides with a generator for every rounded number in them; None when no number was rounded."""
    rounded = Rounded(scope, text)
    values = [value_of(scope, side, of, rounded) for side in sides]
    if not rounded.generators:
        return None
    if len(rounded.generators) > ROUNDED:
        raise LimitError(Fault(f"more than {ROUNDED} rounded numbers in one line", "split it", sides[0].span))
    return values


def _divides_by_zero(scope: Scope, value: Value) -> bool:
    """Whether the denominator is zero in the network, as that of out/m is where m is at virtual ground."""
    return any(
        is_zero(scope, factor) for factor in ({value.monomial: 1}, *(factor for factor, _ in value.factors))
    )


def _divides(scope: Scope, expression: Expression, of: Expression | None) -> SingularError:
    inner = expression
    while True:
        smaller = next((child for child in children(inner) if _fails(scope, child, of)), None)
        if smaller is None:
            break
        inner = smaller
    below = children(inner)
    if isinstance(inner, Product):
        below = tuple(factor for power, factor in inner.factors if power < 0)
    zero = next((child for child in below if _vanishes(scope, child, of)), inner)
    hint = "a difference that is zero here, such as that of an op amp's inputs, cannot be divided by"
    return SingularError(Fault("this divides by zero in this network", hint, zero.span or expression.span))


def _fails(scope: Scope, expression: Expression, of: Expression | None) -> bool:
    try:
        value = scope.value(expression, of)
    except ZeroDivisionError:
        return True
    return _divides_by_zero(scope, value)


def _vanishes(scope: Scope, expression: Expression, of: Expression | None) -> bool:
    try:
        return is_zero(scope, scope.value(expression, of).numerator)
    except ZeroDivisionError:
        return False
