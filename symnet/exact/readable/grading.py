"""Setting s to 1 without losing it: every term of N or D has the same dimension, so that names tell the power of s.

In a network of parts each C and each L comes with one s. More generally there are weights w of the names such that
(exponent of s) = sum of w * (exponents) + constant, for every term. A polynomial with such weights factors as it
does with s = 1, since the factors of a homogeneous polynomial are homogeneous; the powers of s are then put back.
Without s most networks have each name to the first power only, which is where factoring is cheap.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from typing import TypeAlias

from symnet.exact.readable.grouping import kind_of_name
from symnet.exact.readable.packed import Factors, Polynomial, Space

__all__ = ["factors_in_s"]

Weight: TypeAlias = int | Fraction


def factors_in_s(space: Space, p: Polynomial) -> tuple[int, int, Factors]:
    """Coefficient, monomial and irreducible sums of a polynomial whose first name is s.

    Where no weights are found (expressions in which s stands without a part) it is factored as it is.
    """
    exponents = [space.unpack(m) for m in p]
    weights = _grading(exponents, space.names) if any(e[0] for e in exponents) else None
    if weights is None:
        return space.factors(p)
    unit = space.unit(0)
    coefficient, monomial, found = space.factors({m - space.unpack(m)[0] * unit: c for m, c in p.items()})
    restored: Factors = []
    for block, exponent in found:
        degrees = {m: _weighed(space.unpack(m), weights) for m in block}
        least = min(degrees.values())
        if any((degree - least) % 1 for degree in degrees.values()):
            return space.factors(p)  # the factors would need roots of s, as in s*R^2 - 1
        restored.append(({m + int(degrees[m] - least) * unit: c for m, c in block.items()}, exponent))
    return coefficient, monomial + min(e[0] for e in exponents) * unit, restored


def _weighed(exponents: Sequence[int], weights: Sequence[Weight]) -> Weight:
    return sum(w * e for w, e in zip(weights, exponents, strict=True) if w and e)


def _grading(monomials: list[tuple[int, ...]], names: Sequence[str]) -> Sequence[Weight] | None:
    """Weights w with (exponent of s) = sum of w * exponents + constant for every monomial; None if there are none.

    One s for each C and L is tried first. Otherwise the weights are solved for: each difference of two monomials
    is one linear equation. Names that no equation fixes get 0.
    """
    usual = [0] + [int(kind_of_name(name) in (3, 4)) for name in names[1:]]
    if len({m[0] - _weighed(m, usual) for m in monomials}) == 1:
        return usual
    first = (*monomials[0][1:], monomials[0][0])
    solved: dict[int, list[Fraction]] = {}
    for m in monomials[1:]:
        row = [Fraction(a - b) for a, b in zip((*m[1:], m[0]), first, strict=True)]
        for column, known in solved.items():
            row = _reduced(row, known, column)
        pivot = next((k for k, a in enumerate(row) if a), None)
        if pivot is None:
            continue
        if pivot == len(row) - 1:
            return None
        row = [a / row[pivot] for a in row]
        solved = {column: _reduced(known, row, pivot) for column, known in solved.items()} | {pivot: row}
    return [Fraction(0)] + [solved[k][-1] if k in solved else Fraction(0) for k in range(len(names) - 1)]


def _reduced(row: list[Fraction], by: list[Fraction], column: int) -> list[Fraction]:
    f = row[column]
    return [a - f * b for a, b in zip(row, by, strict=True)] if f else row
