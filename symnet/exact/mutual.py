"""The mutual inductance of two coils, M = k sqrt(L1 L2), where k and the coils have numbers.

M is irrational more often than not, and exactness must not end there: with k = 1 the highest coefficient of D,
L1 L2 - M^2, is zero and must be found to be zero. So H keeps M as a symbol, and its numbers are sums of rationals
times square roots of integers, no two of which are commensurable. Such a sum is zero only if every one of its rationals is
(Besicovitch, On the linear independence of fractional powers of integers, J. London Math. Soc. 15, 1940), which
decides what vanishes; only then are the roots that are left taken to 60 digits.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from fractions import Fraction
from math import isqrt
from typing import TYPE_CHECKING, Final, TypeAlias

from symnet.expressions import Expression, Name, Number, Power, Product, evaluate

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.circuit.network import Network
    from symnet.circuit.parts import Coupling

__all__ = ["coefficients", "rational_mutuals", "root", "squared_mutuals"]

DIGITS: Final = 60

#: A sum of rationals times square roots: radicand -> factor.
_Surds: TypeAlias = dict[int, Fraction]


def squared_mutuals(network: Network) -> Iterator[tuple[Coupling, Fraction]]:
    """Each coupling given by a k that has a number, between coils that have one, with M^2 in H^2 and the sign of k."""
    for coupling in network.couplings:
        if coupling.is_coefficient:
            worth = [_worth(network, name) for name in (coupling.name, coupling.first, coupling.second)]
            if None not in worth:
                k, one, two = (Fraction(value or 0) for value in worth)
                yield coupling, abs(k) * k * one * two


def rational_mutuals(network: Network) -> Iterator[tuple[Coupling, Expression]]:
    """Each coupling given by a k between coils whose product is a square for all values, with its M.

    Coils that are one inductance (``L2 = L1``) or a square apart (``L2 = n^2*L1``), as windings are.
    """
    for coupling in network.couplings:
        if coupling.is_coefficient:
            ends = [_followed(network, coil) for coil in (coupling.first, coupling.second)]
            for one, other in (ends, ends[::-1]):
                turns = _square_root_of_ratio(network, one, other)
                if turns is not None:
                    yield coupling, Product(((1, Name(coupling.name)), *turns, (1, Name(one))))
                    break


def _followed(network: Network, name: str) -> str:
    """The name that a name is tied to, if it is tied to nothing but a name."""
    seen = {name}
    while (value := network.value(name)) is not None and isinstance(value.expression, Name):
        name = value.expression.name
        if name in seen:  # ties in a circle are told elsewhere
            break
        seen.add(name)
    return name


def _square_root_of_ratio(
    network: Network, one: str, other: str
) -> tuple[tuple[int, Expression], ...] | None:
    """The root of other/one as factors, where ``other`` is the same name or a square times it."""
    if one == other:
        return ()
    value = network.value(other)
    if value is None or not isinstance(value.expression, Product):
        return None
    found: list[tuple[int, Expression]] = []
    bare = 0
    for power, factor in value.expression.factors:
        match factor:
            case Name(name=name) if power > 0 and _followed(network, name) == one:
                bare += 1
            case Power(base=base, exponent=exponent) if exponent % 2 == 0:
                found.append((power, Power(base, exponent // 2)))
            case Number(value=number) if number > 0 and root(number) ** 2 == number:
                found.append((power, Number(root(number))))
            case _:
                return None
    return tuple(found) if bare == 1 else None


def _worth(network: Network, name: str) -> Fraction | None:
    """The number of a name, through its ties; None when there is none."""
    value = network.value(name)
    if value is None:
        return None
    try:
        found = evaluate(
            value.expression,
            lambda inner: _Open.of(_worth(network, inner.name)),
            lambda number: number.value,
        )
    except (_Open, ZeroDivisionError):
        return None
    return Fraction(found)


class _Open(Exception):  # noqa: N818 - never leaves this module
    """A name without a number."""

    @classmethod
    def of(cls, value: Fraction | None) -> Fraction:
        if value is None:
            raise cls
        return value


def root(square: Fraction) -> Fraction:
    """The square root with the sign of ``square``: exact where it is rational, to 60 digits otherwise.

    >>> root(Fraction(-4, 9)), float(root(Fraction(2)))
    (Fraction(-2, 3), 1.4142135623730951)
    """
    size = abs(square)
    top, bottom = isqrt(size.numerator), isqrt(size.denominator)
    if top * top == size.numerator and bottom * bottom == size.denominator:
        found = Fraction(top, bottom)
    else:
        scale = 10**DIGITS << max(0, size.denominator.bit_length() - size.numerator.bit_length())
        found = Fraction(isqrt(size.numerator * size.denominator * scale**2), size.denominator * scale)
    return found if square >= 0 else -found


def coefficients(
    polynomials: Sequence[PolyElement], numbers: Mapping[str, Fraction], squares: Mapping[str, Fraction]
) -> list[list[Fraction]]:
    """The coefficients, ascending in s, of polynomials for these numbers of the names.

    ``squares`` gives M^2, with the sign of M, where M is irrational. What is zero is exactly zero; a common root
    of one polynomial is taken out before it is rounded, so that its coefficients keep their exact ratios.
    """
    surds = {name: _surd(square) for name, square in squares.items()}
    return [_rounded(_coefficients(polynomial, numbers, surds)) for polynomial in polynomials]


def _surd(square: Fraction) -> tuple[int, Fraction]:
    """The root as ``(radicand, factor)``, the radicand a whole number."""
    size = abs(square)
    radicand = size.numerator * size.denominator
    factor = Fraction(1, size.denominator)
    return radicand, factor if square >= 0 else -factor


def _coefficients(
    polynomial: PolyElement, numbers: Mapping[str, Fraction], surds: Mapping[str, tuple[int, Fraction]]
) -> list[_Surds]:
    names = [str(symbol) for symbol in polynomial.ring.symbols]
    found: list[_Surds] = []
    for monomial, integer in polynomial.terms():
        number, radicand = Fraction(int(integer)), 1
        for name, exponent in zip(names[1:], monomial[1:], strict=True):
            if not exponent:
                continue
            if name in surds:
                under, factor = surds[name]
                number *= factor**exponent * under ** (exponent // 2)
                if exponent % 2:
                    radicand *= under
            else:
                number *= numbers[name] ** exponent
        degree = monomial[0]
        found += [{} for _ in range(degree + 1 - len(found))]
        _add(found[degree], radicand, number)
    return found


def _add(sum_: _Surds, radicand: int, number: Fraction) -> None:
    """Add ``number * sqrt(radicand)``, onto a commensurable root that is there already."""
    for known in sum_:
        product = known * radicand
        common = isqrt(product)
        if common * common == product:  # sqrt(radicand) = common/known * sqrt(known)
            sum_[known] += number * Fraction(common, known)
            return
    sum_[radicand] = number


def _rounded(found: list[_Surds]) -> list[Fraction]:
    there = [{radicand: x for radicand, x in each.items() if x} for each in found]
    radicands = {radicand for each in there for radicand in each}
    first = next(iter(radicands), 1)
    if all(isqrt(first * other) ** 2 == first * other for other in radicands):
        scale = root(Fraction(first))  # one root for all: the ratios stay exact
        return [
            scale * sum((x * Fraction(isqrt(first * r), first) for r, x in each.items()), Fraction(0))
            for each in there
        ]
    return [sum((x * root(Fraction(r)) for r, x in each.items()), Fraction(0)) for each in there]
