"""Whether an equation with rounded numbers in it is true to the digits given.

Each rounded number is c + h*e with an e between -1 and 1. With the solution put in, what should be zero is a
polynomial in the names, in which every coefficient is a polynomial in the e. The line is true to the digits given
when every coefficient can be zero: when its part without e is not larger than all the others together can be. pi
and roots of numbers are taken to 60 digits here, far beyond any rounding; a line without rounded numbers never
comes here.
"""

from __future__ import annotations

from fractions import Fraction
from functools import cache
from math import isqrt
from typing import TYPE_CHECKING, Final

from symnet.review.solution import ROUNDED

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.algebra import Algebra

__all__ = ["approximations", "can_vanish", "pi_to_60_digits"]

_DIGITS: Final = 60


@cache
def pi_to_60_digits() -> Fraction:
    """Pi, wrong by less than 1e-60."""
    from mpmath import mp

    with mp.workdps(_DIGITS + 10):
        return Fraction(int(mp.floor(mp.pi * mp.mpf(10) ** _DIGITS)), 10**_DIGITS)


def _root(number: int) -> Fraction:
    return Fraction(isqrt(number * 10 ** (2 * _DIGITS)), 10**_DIGITS)


def approximations(algebra: Algebra) -> dict[str, Fraction]:
    """The generators that are numbers, pi and roots of numbers, to 60 digits."""
    known = {"pi": pi_to_60_digits()}
    for k, radicand in enumerate(algebra.radicands):
        if set(radicand) == {0} and radicand[0] > 0:
            known[f"root {k}"] = _root(radicand[0])
    return known


def can_vanish(algebra: Algebra, polynomial: Polynomial) -> bool:
    """Whether every coefficient of a polynomial in the names can be zero within the rounding of the numbers."""
    known = approximations(algebra)
    rounded = {f"rounded:{k}" for k in range(ROUNDED)}
    middle: dict[tuple[tuple[str, int], ...], Fraction] = {}
    reach: dict[tuple[tuple[str, int], ...], Fraction] = {}
    for monomial, coefficient in polynomial.items():
        value, kept, uncertain = Fraction(coefficient), [], False
        for name, exponent in algebra.exponents(monomial).items():
            if name in known:
                value *= known[name] ** exponent
            elif name in rounded:
                uncertain = True
            else:
                kept.append((name, exponent))
        key = tuple(kept)
        if uncertain:
            reach[key] = reach.get(key, Fraction(0)) + abs(value)
        else:
            middle[key] = middle.get(key, Fraction(0)) + value
    return all(abs(value) <= reach.get(key, Fraction(0)) for key, value in middle.items())
