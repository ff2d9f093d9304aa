"""A side of a line with the solution put in, as a quotient of two polynomials, while it is short.

What is said from it are remarks beside a verdict that stands; so it is left alone where it would take long.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final, TypeAlias

from symnet.errors import SymnetError
from symnet.review.figures import lowest

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.algebra import Value
    from symnet.review.scope import Scope

__all__ = ["Quotient", "quotient_of", "reduced"]

Quotient: TypeAlias = "tuple[Polynomial, Polynomial]"

_MOST_TERMS: Final = 400
_MOST_TERMS_REDUCED: Final = 150
_MOST_DEGREE: Final = 2  # of voltages and currents in a side


def quotient_of(scope: Scope, value: Value) -> Quotient | None:
    """Numerator and denominator in the names; None where they would be long, and where it divides by zero."""
    solution = scope.solution
    try:
        sides = value.numerator, value.denominator
        if any(len(side) > _MOST_TERMS for side in sides) or solution.terms > _MOST_TERMS:
            return None
        if any(sum(e) > _MOST_DEGREE for side in sides for e in solution.by_unknowns(side)):
            return None
        found = solution.substituted(value)
    except (SymnetError, ZeroDivisionError):
        return None
    return None if max(map(len, found)) > _MOST_TERMS else found


def reduced(scope: Scope, value: Value) -> Quotient | None:
    """The same in lowest terms."""
    found = quotient_of(scope, value)
    if found is None or max(map(len, found)) > _MOST_TERMS_REDUCED or not found[0]:
        return None
    return lowest(scope.solution, *found)
