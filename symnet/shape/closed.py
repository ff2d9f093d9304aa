"""Exact figures: a quotient of polynomials in part names times a root of another one, such as 1/sqrt(R1*R2*C1*C2).

w0, Q and the normalised coefficients of an H in symbols all have this form. Perfect powers are taken out of the
root, so that equal parts give 1/(R*C) and not a root of a square; a factor leaves the root only where it is positive
for positive parts, so that no sign can be lost.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Any, Final, TypeAlias

from symnet.errors import Fault, UndefinedError
from symnet.exact.doubles import double
from symnet.quantities import NUMBER, Dimension

if TYPE_CHECKING:
    from symnet.typeset.tree import Tree

__all__ = [
    "Closed",
    "Coefficient",
    "Figure",
    "figure",
    "lowest",
    "nth_root",
    "one",
    "power_product",
    "quotient",
    "value_of",
]

#: A number (of a ratio with numbers in it) or an element of the ring of a transfer function in symbols.
Coefficient: TypeAlias = Any

_LARGEST_GCD: Final = (
    400  # terms of the larger polynomial; beyond that only integers and monomials are cancelled
)
_LARGEST_FACTORED: Final = 40  # terms of a polynomial whose repeated factors are looked for
_LARGEST_INTEGER: Final = 10**12  # factored into primes to take squares out of a root
_ROOT_BITS: Final = 160
_SMALL_PRIMES: Final = tuple(p for p in range(2, 100) if all(p % q for q in range(2, p)))
_LONGEST_SHOWN: Final = 60  # characters of a closed form in a repr that has a number to show instead


@dataclass(frozen=True, slots=True)
class Closed:
    """``num/den * (under_num/under_den)^(1/degree)``, exact; with degree 1 there is no root and the radicand is 1.

    All four are ring elements, or all four are fractions (then the denominators are 1). Roots are the positive roots
    of positive quantities: parts are positive.
    """

    num: Coefficient
    den: Coefficient
    under_num: Coefficient
    under_den: Coefficient
    degree: int = 1

    @property
    def rational(self) -> bool:
        """True when there is no root in it."""
        return self.degree == 1

    def value(self, values: Mapping[str, Fraction]) -> float:
        """The number for these part values (SI units), correctly rounded but for the last bit.

        KeyError for a name without value, ZeroDivisionError where the denominator vanishes.
        """
        num, den, under_num, under_den = (
            value_of(c, values) for c in (self.num, self.den, self.under_num, self.under_den)
        )
        root = Fraction(1) if self.rational else nth_root(under_num / under_den, self.degree)
        return double(num / den * root)

    def tree(self) -> Tree:
        """The figure as a formula, in the part names, written as short as it goes."""
        from symnet.typeset.tree import Root, over, times

        outside = _tree(self.num, self.den)
        if self.rational:
            return outside
        if self.under_num != 1 or isinstance(self.num, Fraction):
            root = Root(_tree(self.under_num, self.under_den), self.degree)
            if isinstance(self.num, Fraction) or len(self.num) > 1:
                return times(outside, root)
            unit = one(self.num)
            return over(times(_tree(self.num, unit), root), _tree(self.den, unit))
        unit = one(self.num)
        below = Root(_tree(self.under_den, unit), self.degree)
        return over(_tree(self.num, unit), below if self.den == unit else times(_tree(self.den, unit), below))

    def __repr__(self) -> str:
        from symnet.typeset.writing import to_text

        return f"<{to_text(self.tree())}>"


@dataclass(frozen=True, slots=True)
class Figure:
    """One figure of a result: exact where it has a closed form, a double where every value is known; SI units."""

    closed: Closed | None
    value: float | None
    dimension: Dimension | None = NUMBER

    def __repr__(self) -> str:
        shown = [] if self.closed is None else [repr(self.closed)[1:-1]]
        if self.value is not None:
            number = f"{self.value:.6g}"
            if shown and len(shown[0]) > _LONGEST_SHOWN:
                shown = []
            if number not in shown:
                shown.append(number)
        unit = "" if self.dimension in {None, NUMBER} else f" {self.dimension}"
        return f"{' = '.join(shown) or 'no value'}{unit}"


def figure(closed: Closed, values: Mapping[str, Fraction], dimension: Dimension | None = NUMBER) -> Figure:
    """The closed form with its number, where the values allow one (no real root of a negative number)."""
    try:
        return Figure(closed, closed.value(values), dimension)
    except (KeyError, ZeroDivisionError, UndefinedError):
        return Figure(closed, None, dimension)


def one(like: Coefficient) -> Coefficient:
    """The 1 that goes with a fraction or a ring element."""
    return Fraction(1) if isinstance(like, Fraction) else like.ring.one


def _tree(num: Coefficient, den: Coefficient) -> Tree:
    from symnet.exact.readable.forms import readable_ratio
    from symnet.typeset.tree import number

    return number(num / den) if isinstance(num, Fraction) else readable_ratio(num, den)


def value_of(coefficient: Coefficient, values: Mapping[str, Fraction]) -> Fraction:
    """The exact value of a fraction or ring element (free of s); KeyError for a name without value."""
    if isinstance(coefficient, Fraction):
        return coefficient
    names = [str(symbol) for symbol in coefficient.ring.symbols]
    total = Fraction(0)
    for monomial, c in coefficient.items():
        term = Fraction(int(c))
        for name, exponent in zip(names, monomial, strict=True):
            if exponent:
                term *= values[name] ** exponent
        total += term
    return total


def nth_root(value: Fraction, degree: int) -> Fraction:
    """The positive root of a non-negative rational: exact where it is rational, else good to 2^-160 of itself.

    Raises UndefinedError for a negative number.

    >>> nth_root(Fraction(8, 27), 3), float(nth_root(Fraction(2), 2))
    (Fraction(2, 3), 1.4142135623730951)
    """
    if value < 0:
        raise UndefinedError(Fault(f"the root of degree {degree} of a negative number is not real"))
    exact = _exact_root(value, degree)
    if exact is not None:
        return exact
    up = degree * max(
        0, _ROOT_BITS - (value.numerator.bit_length() - value.denominator.bit_length()) // degree
    )
    return Fraction(_integer_root((value.numerator << up) // value.denominator, degree), 1 << (up // degree))


def _exact_root(value: Fraction, degree: int) -> Fraction | None:
    top, bottom = (_integer_root(i, degree) for i in (value.numerator, value.denominator))
    same = top**degree == value.numerator and bottom**degree == value.denominator
    return Fraction(top, bottom) if same else None


def _integer_root(number: int, degree: int) -> int:
    """The floor of the root of a non-negative integer, by Newton's iteration from above."""
    if degree == 2:
        return math.isqrt(number)
    if number < 2 or degree == 1:
        return number
    guess = 1 << -(-number.bit_length() // degree)
    while True:
        better = ((degree - 1) * guess + number // guess ** (degree - 1)) // degree
        if better >= guess:
            return guess
        guess = better


def lowest(num: Coefficient, den: Coefficient) -> tuple[Coefficient, Coefficient]:
    """The pair without common factor; very large polynomials lose common integers and monomials only."""
    if isinstance(num, Fraction):
        return num / den, Fraction(1)
    if not num:
        return num, num.ring.one
    (a, m), (b, k) = content(num), content(den)
    common = math.gcd(a, b)
    if next(iter(den.values())) < 0 and all(c < 0 for c in den.values()):
        common = -common
    shared = tuple(map(min, m, k))
    num, den = divide_content(num, common, shared), divide_content(den, common, shared)
    if min(len(num), len(den)) > 1 and max(len(num), len(den)) <= _LARGEST_GCD:
        num, den = num.cancel(den)
    return num, den


def quotient(num: Coefficient, den: Coefficient) -> Closed:
    """``num/den`` in lowest terms.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, R1, R2, C = make_ring(["R1", "R2", "C"]).gens
    >>> quotient(2*R1*R2*C, 4*R1*C + 4*R2*C)
    <(R1||R2)/2>
    """
    num, den = lowest(num, den)
    return Closed(num, den, one(num), one(num))


def power_product(num: Coefficient, den: Coefficient, powers: Mapping[Coefficient, Fraction]) -> Closed:
    """``num/den`` times a product of powers with rational exponents, perfect powers taken out of the root.

    Every base must be positive, at least by assumption. Names that stand both outside and under the root are joined.

    >>> from symnet.exact.polynomials import make_ring
    >>> ring = make_ring(["R1", "R2", "C"])
    >>> s, R1, R2, C = ring.gens
    >>> half = Fraction(1, 2)
    >>> power_product(ring.one, ring.one, {R1*R2*C**2: -half})
    <1/(C*sqrt(R1*R2))>
    >>> power_product(R1, ring.one, {R1*R2: -half})
    <sqrt(R1/R2)>
    """
    if isinstance(num, Fraction):
        return _power_product_of_numbers(num / den, powers)
    ring = num.ring
    outside = {1: num, -1: den}
    under: dict[Coefficient, Fraction] = {}
    for base, exponent in powers.items():
        for factor, times in _factors(base).items():
            under[factor] = under.get(factor, Fraction(0)) + exponent * times
    for k, name in enumerate(ring.gens):
        if name in under:
            for which, p in tuple(outside.items()):
                times = content(p)[1][k]
                if times:
                    outside[which] = divide_content(p, 1, tuple(times * (i == k) for i in range(ring.ngens)))
                    under[name] += which * times
    for factor, exponent in under.items():
        whole = math.trunc(exponent) if _is_positive(factor) or exponent.denominator == 1 else 0
        if whole:
            sign = 1 if whole > 0 else -1
            outside[sign] = outside[sign] * factor ** abs(whole)
            under[factor] = exponent - whole
    degree = math.lcm(*(exponent.denominator for exponent in under.values()))
    radicand = {1: ring.one, -1: ring.one}
    for factor, exponent in under.items():
        power = int(exponent * degree)
        if power:
            sign = 1 if power > 0 else -1
            radicand[sign] = radicand[sign] * factor ** abs(power)
    return Closed(*lowest(outside[1], outside[-1]), radicand[1], radicand[-1], degree)


def _power_product_of_numbers(outside: Fraction, powers: Mapping[Coefficient, Fraction]) -> Closed:
    """All under one root first, then out again what has a rational root; large prime factors are not looked for."""
    if not outside:
        return Closed(outside, Fraction(1), Fraction(1), Fraction(1))
    degree = math.lcm(*(exponent.denominator for exponent in powers.values()))
    radicand = abs(outside) ** degree
    for base, exponent in powers.items():
        radicand *= base ** int(exponent * degree)
    for divisor in sorted((d for d in range(2, degree + 1) if degree % d == 0), reverse=True):
        root = _exact_root(radicand, divisor)
        if root is not None:
            radicand, degree = root, degree // divisor
            break
    sign = 1 if outside > 0 else -1
    if degree == 1:
        return Closed(sign * radicand, Fraction(1), Fraction(1), Fraction(1))
    above, under_above = _powers_out(radicand.numerator, degree)
    below, under_below = _powers_out(radicand.denominator, degree)
    return Closed(
        Fraction(sign * above, below), Fraction(1), Fraction(under_above, under_below), Fraction(1), degree
    )


def _powers_out(number: int, degree: int) -> tuple[int, int]:
    """The number as out^degree * rest, small primes tried only."""
    out, rest = 1, 1
    for prime in _SMALL_PRIMES:
        times = 0
        while number % prime == 0:
            number //= prime
            times += 1
        out *= prime ** (times // degree)
        rest *= prime ** (times % degree)
    root = _integer_root(number, degree)
    return (out * root, rest) if root**degree == number else (out, rest * number)


def content(polynomial: Coefficient) -> tuple[int, tuple[int, ...]]:
    """The largest integer and the largest monomial (as exponents) that divide every term of a non-zero polynomial."""
    exponents = tuple(map(min, *polynomial)) if len(polynomial) > 1 else next(iter(polynomial))
    return math.gcd(*map(int, polynomial.values())), exponents


def divide_content(polynomial: Coefficient, number: int, exponents: tuple[int, ...]) -> Coefficient:
    """The polynomial divided by an integer and a monomial that divide every term."""
    ring = polynomial.ring
    return ring.from_dict(
        {
            tuple(a - b for a, b in zip(m, exponents, strict=True)): ring.domain(int(c) // number)
            for m, c in polynomial.items()
        }
    )


def _is_positive(polynomial: Coefficient) -> bool:
    return all(c > 0 for c in polynomial.values())


def _factors(base: Coefficient) -> dict[Coefficient, int]:
    """The base as a product of primes, names and polynomials without repeated factors, as far as bounds allow."""
    ring = base.ring
    number, exponents = content(base)
    found: dict[Coefficient, int] = {
        gen: exponent for gen, exponent in zip(ring.gens, exponents, strict=True) if exponent
    }
    if 1 < number <= _LARGEST_INTEGER:
        from sympy import factorint

        found.update({ring(int(prime)): int(times) for prime, times in factorint(number).items()})
    elif number > 1:
        found[ring(number)] = 1
    rest = divide_content(base, number, exponents)
    if rest != 1:
        sign, pieces = rest.sqf_list() if 1 < len(rest) <= _LARGEST_FACTORED else (1, [(rest, 1)])
        if sign == 1 and all(_is_positive(piece) for piece, _ in pieces):
            found.update({piece: int(times) for piece, times in pieces})
        else:
            found[rest] = 1
    return found
