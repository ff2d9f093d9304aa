"""A common factor of N and D that shares no name with what remains: found and divided out without a gcd.

Where every part has its own symbol, N and D hold each name to the first power at most, so a common factor g and
the cofactors n = N/g, d = D/g have no name in common. A name belongs to g exactly when H = N/D does not hang on
it, which is seen from two values modulo a prime. With the names of g known, g stands in D beside one monomial
of the other names, and each cofactor beside one monomial of g: slices of arrays, no arithmetic. Whether the
products are N and D is checked exactly, term by term, so the random points decide nothing but the time taken.
Only s may stand on both sides; a slice that holds several powers of it for one monomial is left to the gcd.

Such factors are the natural modes of a part of the network that the read cannot see. Measured: 372 100 terms in
half a second, where the heuristic gcd takes ten seconds for 9 000.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import gcd
from random import Random
from typing import TYPE_CHECKING, Any, Final

import numpy as np

from symnet.exact.expansion import Expansion, Fields, Primitive
from symnet.exact.modular import SMALL_PRIME

if TYPE_CHECKING:
    from numpy.typing import NDArray

__all__ = ["Apart", "take_apart"]

_S: Final = 0  # the generator s


@dataclass(frozen=True, eq=False)
class Apart:
    """``common * numerator`` and ``common * denominator`` are the polynomials that were given, exactly."""

    common: Expansion
    numerator: Expansion
    denominator: Expansion


def take_apart(
    numerator: Primitive, denominator: Primitive, at: Callable[[list[Any]], tuple[Any, Any]]
) -> Apart | None:
    """The factor of both parts whose names occur in no cofactor; None where there is none of that kind.

    ``at(point)`` gives N and D, contents included, modulo 2^31 - 1 at points that are int64 arrays.
    """
    names = _names_h_does_not_hang_on(numerator, denominator, at)
    if not names:
        return None
    common = _beside_one_monomial(denominator.part, names)
    if common is None:
        return None
    sides = [_cofactor(side.part, common, names) for side in (numerator, denominator)]
    n, d = sides
    return None if n is None or d is None else Apart(common, n, d)


def _names_h_does_not_hang_on(
    numerator: Primitive, denominator: Primitive, at: Callable[[list[Any]], tuple[Any, Any]]
) -> list[int]:
    once = [
        k for k, (a, b) in enumerate(zip(numerator.degrees, denominator.degrees, strict=True)) if a == b == 1
    ]
    once = [k for k in once if k != _S]
    if not once:
        return []
    random = Random(21)
    total = 2 * len(once)
    point = [np.full(total, random.randrange(1, SMALL_PRIME), dtype=np.int64) for _ in numerator.degrees]
    for place, k in enumerate(once):
        point[k][2 * place : 2 * place + 2] = 1, 2
    n, d = (np.broadcast_to(values, (total,)) for values in at(point))
    found = []
    for place, k in enumerate(once):
        # what the contents hold of this name is no part of the factor
        n1, d1 = int(n[2 * place]), int(d[2 * place])
        n2, d2 = int(n[2 * place + 1]), int(d[2 * place + 1])
        above, below = 2 ** numerator.exponents[k], 2 ** denominator.exponents[k]
        if (n1 * d2 * above - n2 * d1 * below) % SMALL_PRIME == 0:
            found.append(k)
    return found


def _mask(fields: Fields, generators: list[int]) -> NDArray[np.int64]:
    mask = np.zeros((fields.words, 1), dtype=np.int64)
    for k in generators:
        word, shift, bits = fields.places[k]
        mask[word, 0] |= bits << shift
    return mask


def _beside_one_monomial(polynomial: Expansion, names: list[int]) -> Expansion | None:
    """What stands beside the other names of the first term: the factor in these names, times a power of s."""
    here, s = _mask(polynomial.fields, names), _mask(polynomial.fields, [_S])
    elsewhere = polynomial.keys & ~(here | s)
    chosen = (elsewhere == elsewhere[:, :1]).all(axis=0)
    keys = polynomial.keys[:, chosen] & (here | s)
    if len(np.unique(keys & here, axis=1).T) < keys.shape[1]:
        return None
    coefficients = polynomial.coefficients[chosen]
    number = gcd(*map(int, coefficients))
    slice_ = Expansion(polynomial.fields, keys, coefficients)
    lowest = int(slice_.exponents(_S).min())
    return slice_.divided(number, [lowest] + [0] * (len(polynomial.fields.places) - 1))


def _cofactor(polynomial: Expansion, common: Expansion, names: list[int]) -> Expansion | None:
    """The polynomial divided by the factor in these names, or None where that does not go exactly."""
    factor = _in_fields(common, polynomial.fields)
    if factor is None:
        return None
    here = _mask(polynomial.fields, names)
    chosen = ((polynomial.keys & here) == (factor.keys[:, :1] & here)).all(axis=0)
    first, number = factor.keys[:, :1], int(factor.coefficients[0])
    slice_ = Expansion(polynomial.fields, polynomial.keys[:, chosen], polynomial.coefficients[chosen])
    if (
        not len(slice_)
        or int(slice_.exponents(_S).min()) < int(factor.exponents(_S)[0])
        or any(int(c) % number for c in np.unique(slice_.coefficients))
        or len(factor) * len(slice_) != len(polynomial)
    ):
        return None
    found = Expansion(polynomial.fields, slice_.keys - first, slice_.coefficients // number)
    return found if _is_product(polynomial, factor, found) else None


def _in_fields(expansion: Expansion, fields: Fields) -> Expansion | None:
    """The same terms in other fields; None where an exponent is too large for them."""
    keys = np.zeros((fields.words, len(expansion)), dtype=np.int64)
    for k, ((word, shift, mask), degree) in enumerate(zip(fields.places, expansion.degrees(), strict=True)):
        if degree > mask:
            return None
        if degree:
            keys[word] |= expansion.exponents(k) << shift
    return Expansion(fields, keys, expansion.coefficients)


def _is_product(polynomial: Expansion, a: Expansion, b: Expansion) -> bool:
    """Whether a*b is the polynomial, given that all products of their terms are different monomials."""
    if any(
        x + y > mask for x, y, (_, _, mask) in zip(a.degrees(), b.degrees(), a.fields.places, strict=True)
    ):
        return False
    keys = (a.keys[:, :, None] + b.keys[:, None, :]).reshape(len(a.keys), -1)
    coefficients = np.multiply.outer(a.coefficients.astype(object), b.coefficients.astype(object)).ravel()
    ours, theirs = np.lexsort(keys), np.lexsort(polynomial.keys)
    if not (keys[:, ours] == polynomial.keys[:, theirs]).all():
        return False
    return bool((coefficients[ours] == polynomial.coefficients[theirs].astype(object)).all())
