"""From exact numbers of any size to doubles: as one double, or as mantissa and binary exponent.

A product of forty farads is far below the smallest double; with its exponent beside it, it is an ordinary number.
"""

from __future__ import annotations

import math
from fractions import Fraction

__all__ = ["binary", "double", "scaled"]


def scaled(mantissa: int, exponent: int) -> float:
    """The double mantissa * 2^exponent, for integers of any length; 0 or inf outside the range of doubles.

    >>> scaled(3 << 5000, -5000)
    3.0
    """
    excess = mantissa.bit_length() - 64
    if excess > 0:
        mantissa >>= excess
        exponent += excess
    try:
        return math.ldexp(mantissa, exponent)
    except OverflowError:
        return math.copysign(math.inf, mantissa)


def binary(value: Fraction) -> tuple[float, int]:
    """A rational number as mantissa * 2^exponent, the mantissa of size 1/2 to 2; (0.0, 0) for zero.

    >>> binary(Fraction(3, 4)), binary(Fraction(1, 10**400))[1]
    ((1.5, -1), -1328)
    """
    if not value:
        return 0.0, 0
    exponent = value.numerator.bit_length() - value.denominator.bit_length()
    up = 64 - exponent
    top = value.numerator << up if up > 0 else value.numerator
    bottom = value.denominator << -up if up < 0 else value.denominator
    return scaled(top // bottom, -64), exponent


def double(value: Fraction) -> float:
    """The nearest double; 0 or inf outside the range of doubles.

    >>> double(Fraction(10) ** 400), double(Fraction(1, 3))
    (inf, 0.3333333333333333)
    """
    try:
        return float(value)
    except OverflowError:
        return math.inf if value > 0 else -math.inf
