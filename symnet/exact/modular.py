"""Arithmetic modulo a prime: where a cheap random point proves, or all but proves, an exact statement."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Final

from symnet.exact.polynomials import Terms, sparse_terms

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["PRIME", "SMALL_PRIME", "Residue", "gcd_modulo", "interpolate", "terms_at", "weight_at"]

#: A Mersenne prime: a random point modulo it misses a wrong polynomial of degree d with probability d / 2^127. One
#: point is so worth two modulo a prime of one machine word, at half the work: what costs time is not the digits.
PRIME: Final = 2**127 - 1
#: The largest prime whose products fit into 64-bit signed integers, so that numpy carries whole vectors.
SMALL_PRIME: Final = 2**31 - 1


@dataclass(frozen=True, slots=True)
class Residue:
    """An integer modulo :data:`PRIME`, with the arithmetic that expressions need."""

    value: int

    @classmethod
    def of(cls, numerator: int, denominator: int = 1) -> Residue:
        """The residue of a rational number."""
        return cls(numerator % PRIME) / cls(denominator % PRIME)

    def __add__(self, other: Residue) -> Residue:
        return Residue((self.value + other.value) % PRIME)

    def __sub__(self, other: Residue) -> Residue:
        return Residue((self.value - other.value) % PRIME)

    def __neg__(self) -> Residue:
        return Residue(-self.value % PRIME)

    def __mul__(self, other: Residue) -> Residue:
        return Residue(self.value * other.value % PRIME)

    def __truediv__(self, other: Residue) -> Residue:
        if not other.value:
            raise ZeroDivisionError
        if other.value == 1:  # most denominators are, and an inverse costs more than all else here
            return self
        return Residue(self.value * pow(other.value, -1, PRIME) % PRIME)

    def __pow__(self, exponent: int) -> Residue:
        if exponent < 0 and not self.value:
            raise ZeroDivisionError
        return Residue(pow(self.value, exponent, PRIME))

    def __bool__(self) -> bool:
        return bool(self.value)


def weight_at(weight: PolyElement, point: Sequence[Any], prime: int) -> Any:
    """A ring element at a point whose coordinates are ints, or int64 arrays if the prime is below 2^31."""
    return terms_at(sparse_terms(weight), point, prime)


def terms_at(terms: Terms, point: Sequence[Any], prime: int) -> Any:
    """The same for terms as :func:`~symnet.exact.polynomials.sparse_terms` gives them."""
    total: Any = 0
    for coefficient, powers in terms:
        term: Any = coefficient % prime
        for k, exponent in powers:
            for _ in range(exponent):
                term = term * point[k] % prime
        total = total + term if len(terms) > 1 else term
    return total % prime


def interpolate(values: Sequence[int], prime: int) -> list[int]:
    """The coefficients, ascending, of the polynomial with these values at 0, 1, 2, ..., modulo a prime."""
    count = len(values)
    divided = [value % prime for value in values]
    for step in range(1, count):
        inverse = pow(step, -1, prime)
        for k in range(count - 1, step - 1, -1):
            divided[k] = (divided[k] - divided[k - 1]) * inverse % prime
    result = [0] * count
    for k in range(count - 1, -1, -1):
        for j in range(count - 1, 0, -1):
            result[j] = (result[j - 1] - k * result[j]) % prime
        result[0] = (divided[k] - k * result[0]) % prime
    return _trimmed(result)


def gcd_modulo(first: Sequence[int], second: Sequence[int], prime: int) -> list[int]:
    """A greatest common divisor, ascending and monic, of two polynomials modulo a prime."""
    a, b = _trimmed(first), _trimmed(second)
    while b:
        inverse = pow(b[-1], -1, prime)
        a = a.copy()
        while len(a) >= len(b):
            factor = a[-1] * inverse % prime
            offset = len(a) - len(b)
            for k, c in enumerate(b):
                a[offset + k] = (a[offset + k] - factor * c) % prime
            a = _trimmed(a)
            if not a:
                break
        a, b = b, a
    if not a:
        return []
    inverse = pow(a[-1], -1, prime)
    return [c * inverse % prime for c in a]


def _trimmed(coefficients: Sequence[int]) -> list[int]:
    out = list(coefficients)
    while out and not out[-1]:
        out.pop()
    return out
