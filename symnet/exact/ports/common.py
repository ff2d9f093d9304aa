"""The common factor of a few polynomials, looked for only where it can be.

Integers and monomials go first. A further common factor holds some name; with random values for all others, modulo
a prime, it leaves a common factor of the polynomials in that name alone. Where no name has one, there is none, and
no multivariate gcd is taken: that certificate costs one evaluation of the terms for each name.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import reduce
from math import gcd
from random import Random
from typing import TYPE_CHECKING

from symnet.exact.modular import PRIME, gcd_modulo

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["common_factor", "lowest"]


def common_factor(parts: Sequence[PolyElement]) -> PolyElement:
    """The greatest common divisor of polynomials of one ring, not all of them zero; its leading term is positive."""
    there = [part for part in parts if part]
    ring = there[0].ring
    number = reduce(gcd, (abs(int(c)) for part in there for c in part.itercoeffs()))
    powers = tuple(
        min(column) for column in zip(*(m for part in there for m in part.itermonoms()), strict=True)
    )
    simple = ring.from_dict({powers: ring.domain(number)})
    if number != 1 or any(powers):
        there = [part.exquo(simple) for part in there]
    if _have_nothing_in_common(there):
        return simple
    common = reduce(lambda one, two: one.gcd(two), sorted(there, key=len))
    return simple * (common if common.LC > 0 else -common)


def lowest(top: PolyElement, bottom: PolyElement) -> tuple[PolyElement, PolyElement]:
    """A quotient in lowest terms, the lowest power of s below beginning with plus."""
    if not top:
        return top, bottom.ring.one
    common = common_factor((top, bottom))
    n, d = top.exquo(common), bottom.exquo(common)
    least = min(m[0] for m in d.itermonoms())
    return (-n, -d) if next(c for m, c in d.terms() if m[0] == least) < 0 else (n, d)


def _have_nothing_in_common(parts: Sequence[PolyElement]) -> bool:
    random = Random(7)
    count = parts[0].ring.ngens
    point = [random.randrange(1, PRIME) for _ in range(count)]
    degrees = [[max(column) for column in zip(*part.itermonoms(), strict=True)] for part in parts]
    for k in range(count):
        if min(degree[k] for degree in degrees) == 0:
            continue
        images = (_image(part, k, point) for part in parts)
        if len(reduce(lambda one, two: gcd_modulo(one, two, PRIME), images)) > 1:
            return False
    return True


def _image(polynomial: PolyElement, k: int, point: Sequence[int]) -> list[int]:
    """The coefficients in generator k with the point put in for all others, modulo the prime."""
    found: list[int] = []
    for monomial, coefficient in polynomial.terms():
        value = int(coefficient)
        for j, exponent in enumerate(monomial):
            if exponent and j != k:
                value = value * pow(point[j], exponent, PRIME) % PRIME
        degree = monomial[k]
        found += [0] * (degree + 1 - len(found))
        found[degree] = (found[degree] + value) % PRIME
    return found
