"""Polynomials in s and the part names: sympy ring elements, and the fast way to make large ones.

Everything exact that symnet shows is an element of one sympy ring over the integers, lexicographic, whose
first generator is ``s``. Expanding a diagram goes through packed monomials instead: all exponents of one
monomial in one integer, so that a product is one addition; the fields are wide enough for the highest degree
that the weights allow, so that no exponent can run into the next.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from math import gcd
from typing import TYPE_CHECKING, Any

from symnet.exact.trees import Diagram

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["by_powers_of_s", "content", "degrees", "divide_content", "expand", "make_ring", "modulo", "primitive"]


def make_ring(names: Iterable[str]) -> PolyRing:
    """The integer polynomial ring with s first, then these names, in lexicographic order."""
    from sympy import ZZ, Symbol
    from sympy.polys.orderings import lex
    from sympy.polys.rings import PolyRing

    return PolyRing([Symbol(name) for name in ("s", *names)], ZZ, lex)


def by_powers_of_s(polynomial: PolyElement) -> tuple[PolyElement, ...]:
    """The coefficients of s^0, s^1, ... as elements of the same ring; () for zero.

    >>> ring = make_ring(["R1", "C1"])
    >>> s, R1, C1 = ring.gens
    >>> by_powers_of_s(1 + 2*s*R1*C1)
    (1, 2*R1*C1)
    """
    if not polynomial:
        return ()
    ring = polynomial.ring
    degree = max(monomial[0] for monomial in polynomial)
    parts: list[dict[tuple[int, ...], Any]] = [{} for _ in range(degree + 1)]
    for monomial, coefficient in polynomial.items():
        parts[monomial[0]][(0, *monomial[1:])] = coefficient
    return tuple(ring.from_dict(part) for part in parts)


def content(polynomial: PolyElement) -> tuple[int, tuple[int, ...]]:
    """The greatest common integer and monomial of all terms: (integer, exponents). The zero polynomial has (0, 0...)."""
    if not polynomial:
        return 0, (0,) * polynomial.ring.ngens
    return gcd(*map(int, polynomial.values())), tuple(map(min, zip(*polynomial, strict=True)))


def degrees(polynomial: PolyElement) -> tuple[int, ...]:
    """The highest exponent of every generator; zeros for the zero polynomial."""
    return tuple(map(max, zip(*polynomial, strict=True))) if polynomial else (0,) * polynomial.ring.ngens


def divide_content(polynomial: PolyElement, number: int, exponents: tuple[int, ...]) -> PolyElement:
    """The polynomial divided by an integer and a monomial that divide every term."""
    if number == 1 and not any(exponents):
        return polynomial
    ring = polynomial.ring
    domain = ring.domain
    if not any(exponents):
        return ring.from_dict({m: domain(int(c) // number) for m, c in polynomial.items()})
    return ring.from_dict(
        {
            tuple(a - b for a, b in zip(m, exponents, strict=True)): domain(int(c) // number)
            for m, c in polynomial.items()
        }
    )


def primitive(polynomial: PolyElement) -> PolyElement:
    """The polynomial without its common integer and monomial factors."""
    return divide_content(polynomial, *content(polynomial)) if polynomial else polynomial


def modulo(polynomial: PolyElement, point: Sequence[int], prime: int) -> int:
    """The value at a point, modulo a prime."""
    total = 0
    for monomial, coefficient in polynomial.items():
        term = int(coefficient) % prime
        for base, exponent in zip(point, monomial, strict=True):
            if exponent:
                term = term * (base if exponent == 1 else pow(base, exponent, prime)) % prime
        total += term
    return total % prime


def expand(
    diagram: Diagram, ring: PolyRing, take: Sequence[PolyElement], leave: Sequence[PolyElement]
) -> PolyElement:
    """The determinant written out, in the ring of the weights."""
    if diagram.is_zero:
        return ring.zero
    widths = _field_widths(ring.ngens, take, leave)
    shifts = [sum(widths[:k]) for k in range(ring.ngens)]
    packed = [
        ([_packed(weight, shifts) for weight in weights])
        for weights in (take, leave)
    ]
    takes, leaves = packed
    terms: list[dict[int, int]] = [{}] * (len(diagram) + 1)
    users = [0] * (len(diagram) + 1)
    for child in (*diagram.leave, *diagram.take):
        if child >= 0:
            users[child] += 1
    terms[-1] = {0: 1}
    for k in range(len(diagram) - 1, -1, -1):
        i, to_leave, to_take = diagram.piece[k], diagram.leave[k], diagram.take[k]
        out: dict[int, int] = {}
        if to_leave >= 0:
            out = _times(terms[to_leave], leaves[i], 1, out)
        if to_take >= 0:
            out = _times(terms[to_take], takes[i], diagram.sign[k], out)
        terms[k] = out
        for child in (to_leave, to_take):
            if child >= 0:
                users[child] -= 1
                if not users[child]:
                    terms[child] = {}
    return _unpacked(terms[diagram.root], ring, widths, shifts, diagram.overall)


def _field_widths(count: int, take: Sequence[PolyElement], leave: Sequence[PolyElement]) -> list[int]:
    highest = [0] * count
    for pair in zip(take, leave, strict=True):
        degrees = [[m[k] for weight in pair for m in weight] for k in range(count)]
        highest = [h + max(d, default=0) for h, d in zip(highest, degrees, strict=True)]
    return [h.bit_length() for h in highest]


def _packed(weight: PolyElement, shifts: list[int]) -> list[tuple[int, int]]:
    return [
        (sum(e << shift for e, shift in zip(m, shifts, strict=True)), int(c)) for m, c in weight.items()
    ]


def _times(
    terms: dict[int, int], weight: list[tuple[int, int]], sign: int, out: dict[int, int]
) -> dict[int, int]:
    """``out + sign * weight * terms``; ``out`` is used up."""
    for monomial, coefficient in weight:
        factor = sign * coefficient
        if factor == 1:
            new = {m + monomial: c for m, c in terms.items()} if monomial else terms
        else:
            new = {m + monomial: c * factor for m, c in terms.items()}
        if not out:
            out = dict(new) if new is terms else new
        elif out.keys().isdisjoint(new):
            out.update(new)
        else:
            for m, c in new.items():
                total = out.get(m, 0) + c
                if total:
                    out[m] = total
                else:
                    del out[m]
    return out


def _unpacked(
    terms: dict[int, int], ring: PolyRing, widths: list[int], shifts: list[int], overall: int
) -> PolyElement:
    domain = ring.domain
    masks = [(1 << width) - 1 for width in widths]
    if sum(widths) < 63 and len(terms) > 64:
        import numpy as np

        keys = np.fromiter(terms.keys(), dtype=np.int64, count=len(terms))
        columns = [((keys >> shift) & mask).tolist() for shift, mask in zip(shifts, masks, strict=True)]
        monomials: Iterable[tuple[int, ...]] = zip(*columns, strict=True)
    else:
        fields = list(zip(shifts, masks, strict=True))
        monomials = (tuple((key >> shift) & mask for shift, mask in fields) for key in terms)
    pairs = zip(monomials, terms.values(), strict=True)
    return ring.from_dict({m: domain(c * overall) for m, c in pairs})
