"""How many roots of a polynomial lie to the left, on and to the right of the jw axis, exactly; Hurwitz' determinants.

In numbers: on s = jw a polynomial of degree n is j^n (F0 - j F1) with real F0 and F1 in w, and the Cauchy index of
F1/F0 is the number of roots to the left less that to the right. Sturm's chain of F0 and F1 gives the index by signs
alone, in integers. This is Routh's scheme with its divisions left out: a zero in its first column is a step of the
chain that lowers the degree by more than one, and a row of zeros is a common factor of F0 and F1, whose roots lie in
mirror images about the origin; those of them on the jw axis are the real roots of that factor, counted by Sturm's
theorem with their multiplicity. So neither case is special. (E. J. Routh 1877; F. R. Gantmacher, The Theory of
Matrices, vol. 2, ch. XV; from memory.)

In symbols: Routh's rows are kept free of fractions. With R_k = D_(k-1) r_k, r_k being Routh's row and D_k Hurwitz'
determinant of order k, each new row is R_(k+1,j) = (R_k,0 R_(k-1,j+1) - R_(k-1),0 R_k,j+1)/D_(k-2), a division that
leaves no rest, and its first entry is D_(k+1).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise
from math import gcd
from typing import Final

from symnet.errors import Fault, LimitError, UndefinedError
from symnet.exact import dense
from symnet.exact.dense import Integers
from symnet.shape.closed import Coefficient

__all__ = ["HalfPlanes", "half_planes", "hurwitz"]

_MOST_TERMS: Final = 40_000  # products of terms that are worked out for one entry of a row


@dataclass(frozen=True, slots=True)
class HalfPlanes:
    """Numbers of roots, repeated ones as often as they occur; ``repeated`` is the highest multiplicity on the axis."""

    left: int
    axis: int
    right: int
    repeated: int


def half_planes(coefficients: Sequence[Fraction | int]) -> HalfPlanes:
    """Where the roots of a0 + a1 s + ... + an s^n lie, exactly; coefficients ascending.

    Raises UndefinedError when all are zero.

    >>> half_planes([1, 2, 2, 1])
    HalfPlanes(left=3, axis=0, right=0, repeated=0)
    >>> half_planes([1, 0, 2, 0, 1])                                   # (s^2 + 1)^2
    HalfPlanes(left=0, axis=4, right=0, repeated=2)
    >>> half_planes([-4, 0, -3, 0, 1])                                 # (s^2 - 4)(s^2 + 1): a row of zeros
    HalfPlanes(left=1, axis=2, right=1, repeated=1)
    """
    p = dense.primitive([Fraction(c) for c in coefficients])[1]
    if not p:
        raise UndefinedError(Fault("Every number is a root of the polynomial 0.", "Is H = 0?"))
    n = len(p) - 1
    first, second = (_on_axis(p, n - k) for k in (0, 1))
    chain = _chain(first, second)
    difference = _variations(chain, -1) - _variations(chain, 1)
    common = dense.primitive([Fraction(c) for c in chain[-1]])[1]
    axis = repeated = 0
    for part, multiplicity in dense.square_free(common):
        slopes = _chain(part, dense.derivative(part))
        count = _variations(slopes, -1) - _variations(slopes, 1)
        axis += multiplicity * count
        repeated = max(repeated, multiplicity if count else 0)
    right = (n - axis - difference) // 2
    return HalfPlanes(n - axis - right, axis, right, repeated)


def _on_axis(p: Integers, degree: int) -> Integers:
    """The terms s^degree, s^(degree - 2) ... of p at s = jw, divided by j^degree."""
    total = [0] * (degree + 1)
    for k in range(degree, -1, -2):
        total[k] = -p[k] if (degree - k) % 4 else p[k]
    return dense.trim(total)


def _chain(f: Integers, g: Integers) -> list[Integers]:
    """Sturm's chain: each member is minus the rest of the two before it, but for a positive factor."""
    found = [f]
    while g:
        found.append(g)
        f, g = g, _negative_rest(f, g)
    return found


def _negative_rest(f: Integers, g: Integers) -> Integers:
    rest, lead = list(f), g[-1]
    while len(rest) >= len(g):
        head = rest[-1]
        if head:
            common = gcd(head, lead)
            scale, factor = abs(lead) // common, head // common * (1 if lead > 0 else -1)
            rest = [scale * c for c in rest]
            start = len(rest) - len(g)
            for k, c in enumerate(g):
                rest[start + k] -= factor * c
        rest.pop()
    left = dense.trim(rest)
    divisor = gcd(*left) if left else 1
    return tuple(-c // divisor for c in left)


def _variations(chain: Sequence[Integers], end: int) -> int:
    """Changes of sign along the chain at plus (``end`` = 1) or minus infinity."""
    signs = [(p[-1] > 0) == (end > 0 or len(p) % 2 == 1) for p in chain]
    return sum(a != b for a, b in pairwise(signs))


def hurwitz(coefficients: Sequence[Coefficient]) -> tuple[tuple[Coefficient, ...], bool]:
    """Hurwitz' determinants of order 1 to n - 1 of a0 + a1 s + ... + an s^n, in symbols; coefficients ascending.

    All of them, with a0 and an, are positive if and only if every root lies in the left half plane. The list ends
    with the first determinant that is zero for all values; then the second result says whether all of its row is,
    so that roots lie in mirror images about the origin; otherwise one lies in the right half plane. Raises LimitError
    where they grow too long.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, a, b, c, d = make_ring("abcd").gens
    >>> hurwitz([a, b, c, d])
    ((c, -a*d + b*c), False)
    """
    n = len(coefficients) - 1
    above, row = ([coefficients[k] for k in range(n - first, -1, -2)] for first in (0, 1))
    determinants: list[Coefficient] = []
    while len(determinants) < n - 1:
        determinants.append(row[0])
        if not row[0]:
            return tuple(determinants), not any(row)
        divisor = determinants[-3] if len(determinants) > 2 else None
        if len(determinants) == n - 1:
            break
        above, row = row, _next(above, row, divisor)
    return tuple(determinants), False


def _next(above: list[Coefficient], row: list[Coefficient], divisor: Coefficient | None) -> list[Coefficient]:
    found = []
    for j in range(1, len(above)):
        beside = row[j] if j < len(row) else row[0] * 0
        if len(row[0]) * len(above[j]) + len(above[0]) * len(beside) > _MOST_TERMS:
            raise LimitError(
                Fault("Hurwitz' conditions are too long in symbols", "give values and the poles decide")
            )
        entry = row[0] * above[j] - above[0] * beside
        found.append(entry if divisor is None else entry.exquo(divisor))
    return found
