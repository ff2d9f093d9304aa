"""The roots of a polynomial with rational coefficients, each inside a proven disc.

Floating-point root finders lose half the digits of a double root and two thirds of those of a triple one, and
turn four equal RC poles into complex pairs. Here the polynomial stays exact. Roots at the origin, repeated factors
(Yun) and factors in s^2 (the common factors of the even and the odd part, where every pair on the jw axis is) are
split off first. What is left has simple roots: doubles find where they are (:mod:`symnet.exact.aberth`), integer
arithmetic proves it (:mod:`symnet.exact.discs`), and those with a short closed form are recognised
(:mod:`symnet.exact.surds`).

Invariants: a root that is real, or purely imaginary, is so exactly; conjugates are exactly conjugate; a repeated
root appears once.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from typing import Final

from symnet.errors import Fault, LimitError, UndefinedError
from symnet.exact import dense
from symnet.exact.dense import Integers
from symnet.exact.discs import images, isolate, power_of_two
from symnet.exact.doubles import double
from symnet.exact.newton import Point
from symnet.exact.surds import Surd, closed_forms

__all__ = ["Root", "Surd", "roots"]

_MOST_DIGITS: Final = 1000
_MOST_DEGREE: Final = 600
_DOUBLE: Final = 2.0**-53


@dataclass(frozen=True, slots=True)
class Root:
    """One root of a polynomial with rational coefficients, with proof of how exact it is.

    ``value`` is the root as a complex double and ``radius`` a proven bound on its absolute error, the rounding
    to double included. The point ``real + j*imag`` is what was computed, with ``bound`` as the proven bound on
    its error: ``roots(c, digits=50)`` gives fifty digits there. A root that is real (purely imaginary) has
    ``imag`` (``real``) zero, and that is a statement about the root, not about rounding. ``closed`` is the
    closed form where the root is rational or belongs to a quadratic factor with rational coefficients.
    """

    value: complex
    multiplicity: int
    radius: float
    real: Fraction
    imag: Fraction
    bound: float
    closed: Surd | None = None

    @property
    def exact(self) -> Fraction | None:
        """The root itself where it is rational, else None."""
        return self.closed.rational if self.closed is not None and self.closed.sign == 0 else None

    @property
    def is_real(self) -> bool:
        """True when the root is proven to be real."""
        return self.imag == 0

    @property
    def is_imaginary(self) -> bool:
        """True when the root is proven to lie on the jw axis, the origin included."""
        return self.real == 0

    def conjugate(self) -> Root:
        """The conjugate root."""
        closed = self.closed
        if closed is not None and closed.radicand < 0:
            closed = Surd(closed.rational, closed.radicand, -closed.sign)
        return Root(
            self.value.conjugate(), self.multiplicity, self.radius, self.real, -self.imag, self.bound, closed
        )

    def __repr__(self) -> str:
        times = f", multiplicity {self.multiplicity}" if self.multiplicity > 1 else ""
        return (
            f"Root({self.value:.12g}{times})" if not self.is_real else f"Root({self.value.real:.12g}{times})"
        )


def roots(
    coefficients: Sequence[Fraction | int], digits: int = 17, *, closed: bool = True
) -> tuple[Root, ...]:
    """Every root of a0 + a1*s + ... + an*s^n, repeated roots once with their multiplicity.

    Real and imaginary part of each root, where they are not exactly zero, carry a proven relative error below
    10^-digits in :attr:`Root.real` and :attr:`Root.imag`; :attr:`Root.value` is that rounded to doubles.

    Parameters
    ----------
    coefficients
        Exact coefficients in ascending powers; zeros above the degree are allowed.
    digits
        Decimal digits proven, 17 is full double precision; at most 1000.
    closed
        Whether closed forms are looked for, which takes more digits of every root than doubles need.

    Returns
    -------
    tuple of Root
        Ordered by distance from the origin; at equal distance from the left half plane to the right (rising Q),
        conjugates together with the positive imaginary part first. A constant has no roots.

    Raises
    ------
    UndefinedError
        All coefficients are zero.
    LimitError
        Degree above 600, more than 1000 digits, or roots more than 270 decades apart.

    Examples
    --------
    >>> from fractions import Fraction
    >>> roots([1, 3, 3, 1])
    (Root(-1, multiplicity 3),)
    >>> roots([1, 2, 2, 1])
    (Root(-1), Root(-0.5+0.866025403784j), Root(-0.5-0.866025403784j))
    >>> roots([1, 2, 2, 1])[1].closed
    Surd(rational=Fraction(-1, 2), radicand=Fraction(-3, 4), sign=1)
    >>> roots([0, 4, 0, 1])
    (Root(0), Root(0+2j), Root(0-2j))
    """
    if not 1 <= digits <= _MOST_DIGITS:
        raise LimitError(Fault(f"{digits} digits of a root; between 1 and {_MOST_DIGITS} can be asked for."))
    return _roots(dense.primitive([Fraction(c) for c in coefficients])[1], digits, closed)


@lru_cache(maxsize=512)
def _roots(polynomial: Integers, digits: int, closed: bool) -> tuple[Root, ...]:
    if not polynomial:
        raise UndefinedError(Fault("Every number is a root of the polynomial 0.", "Is H = 0?"))
    if len(polynomial) - 1 > _MOST_DEGREE:
        raise LimitError(Fault(f"A polynomial of degree {len(polynomial) - 1}; the bound is {_MOST_DEGREE}."))
    at_origin = next(k for k, c in enumerate(polynomial) if c)
    found: list[Root] = []
    for part, multiplicity in dense.square_free(polynomial[at_origin:]):
        for piece, in_square in _split_even(part):
            if len(piece) == 2:
                found.append(_rational_root(Fraction(-piece[0], piece[1]), multiplicity))
            else:
                points = isolate(piece, in_square, digits)
                everyone = [image for point in points for image in images(point, in_square)]
                forms = closed_forms(piece, points, in_square) if closed else [None] * len(everyone)
                found.extend(_as_root(*pair, multiplicity) for pair in zip(everyone, forms, strict=True))
    found.sort(key=_order)
    if at_origin:
        zero = Fraction(0)
        found.insert(0, Root(0j, at_origin, 0.0, zero, zero, 0.0, Surd(zero)))
    return tuple(found)


def _order(root: Root) -> tuple[float, float, float]:
    size = min(max(abs(root.value), 5e-324), 1e308)
    return (round(math.log(size), 9), round(root.value.real / size, 12), -root.value.imag)


def _split_even(p: Integers) -> tuple[tuple[Integers, bool], ...]:
    """P as g(s^2)*rest, with g the common factor of its even and its odd part; pieces of degree 0 left out."""
    even, odd = dense.trim(p[0::2]), dense.trim(p[1::2])
    if len(p) <= 2:
        return ((p, False),)
    if not odd:
        return ((p, True),)
    even, odd = (dense.primitive([Fraction(c) for c in q])[1] for q in (even, odd))
    if dense.coprime(even, odd):
        return ((p, False),)
    common = dense.gcd(even, odd)[0]
    if len(common) == 1:
        return ((p, False),)
    in_square = tuple(c for pair in zip(common, [0] * len(common), strict=True) for c in pair)[:-1]
    rest = dense.divide_exactly(p, in_square)
    assert rest is not None  # noqa: S101 - g divides both halves of p
    return ((in_square, True),) if len(rest) == 1 else ((in_square, True), (rest, False))


def _rational_root(value: Fraction, multiplicity: int) -> Root:
    z = complex(double(value))
    if not math.isfinite(z.real):
        radius = math.inf
    else:
        radius = max(abs(z.real) * _DOUBLE, 5e-324) if Fraction(z.real) != value else 0.0
    return Root(z, multiplicity, radius, value, Fraction(0), 0.0, Surd(value))


def _as_root(point: Point, surd: Surd | None, multiplicity: int) -> Root:
    if surd is not None and not surd.sign:
        return _rational_root(surd.rational, multiplicity)
    unit = 1 << point.shift
    real, imag = Fraction(point.x, unit), Fraction(point.y, unit)
    if surd is not None and imag:
        real = surd.rational
    value = complex(double(real), double(imag))
    bound = power_of_two(point.log_radius)
    radius = (bound + abs(value) * _DOUBLE) * (1 + 8 * _DOUBLE)
    return Root(value, multiplicity, radius, real, imag, bound, surd)
