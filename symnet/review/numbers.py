"""A transfer with all its numbers: the ratio of two polynomials in s that the lower rooms take.

pi and roots of numbers are put in to 60 digits; they occur where a line says w = 2*pi*f or w0 = 1/sqrt(...), and what
is asked of the ratio (a frequency to the digits given, a deviation in percent) does not hang on the last of them.
"""

from __future__ import annotations

from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.errors import Fault, MissingValueError
from symnet.exact.ratio import Ratio
from symnet.review.rounding import approximations

if TYPE_CHECKING:
    from collections.abc import Mapping

    from symnet.exact.readable.packed import Polynomial
    from symnet.expressions import Expression
    from symnet.review.algebra import Algebra, Value
    from symnet.review.scope import Scope

__all__ = ["coefficients", "coefficients_at", "ratio_of"]


def ratio_of(scope: Scope, value: Value, where: Expression) -> Ratio:
    """A value in which the drives cancel, as a ratio of polynomials in s.

    Raises MissingValueError, at the place of the expression, while a name in it has no value.
    """
    top, bottom = (coefficients(scope, side, where) for side in scope.solution.substituted(value))
    return Ratio.of(top, bottom)


def coefficients(scope: Scope, polynomial: Polynomial, where: Expression) -> list[Fraction]:
    """The coefficients of s^0, s^1, ... of a polynomial whose names all have numbers."""
    algebra = scope.solution.algebra
    try:
        return coefficients_at(algebra, polynomial, approximations(algebra))
    except KeyError as missing:
        name = str(missing.args[0])
    if name.startswith("root"):
        raise MissingValueError(
            Fault("this is not a real number", "w and f stand for s/j: write s", where.span)
        )
    what = name.partition(":")[2] or name
    raise MissingValueError(Fault(f"no value for {what}", f"give one: {what} = ...", where.span))


def coefficients_at(
    algebra: Algebra, polynomial: Polynomial, known: Mapping[str, Fraction]
) -> list[Fraction]:
    """The coefficients of s^0, s^1, ... at these values of the names; KeyError with the first name that has none."""
    out: list[Fraction] = [Fraction(0)]
    for monomial, coefficient in polynomial.items():
        term, degree = Fraction(coefficient), 0
        for name, exponent in algebra.exponents(monomial).items():
            if name == "s":
                degree = exponent
            else:
                term *= known[name] ** exponent
        out += [Fraction(0)] * (degree + 1 - len(out))
        out[degree] += term
    return out
