"""Families whose normalised coefficients no formula gives: solved with the coefficients as symbols b1, b2, ...

The equations of Legendre-Papoulis and of Gauss hold |D(jw)|^2 and are exact, but of a high degree in the parts. Where
nothing can be solved in them, the same shape is asked for by its coefficients, D = 1 + b1 x + b2 x^2 + ... + x^n with
x = s/w0: a_k a_0^(k-1) b1^k = b_k a_1^k. These are as short as those of a Bessel filter; b_k are numbers known to any
digits, taken to forty here, which decides signs but never an equality: an answer that says more than "if" is not
taken from them.
"""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import replace
from fractions import Fraction
from functools import lru_cache
from typing import TYPE_CHECKING, Final

from symnet.exact.polynomials import make_ring
from symnet.shape.families.family import Family
from symnet.shape.given import Given
from symnet.shape.judging import judged
from symnet.shape.stated import Condition
from symnet.shape.worked import with_numbers

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["coefficients_of", "solved_by_coefficients"]

_HIGHEST_ORDER: Final = 5
_DIGITS: Final = 40


@lru_cache(maxsize=64)
def coefficients_of(family: Family, order: int) -> tuple[Fraction, ...]:
    """b_0 = 1, b_1, ... b_n = 1 of D in x = s/w0, to forty digits.

    >>> from symnet.shape.families.legendre import LEGENDRE
    >>> [round(float(b), 4) for b in coefficients_of(LEGENDRE, 3)]
    [1.0, 1.96, 1.5741, 1.0]
    """
    poles, _ = family.precise(order, (), _DIGITS)
    total = [poles[0] * 0 + 1]
    for pole in poles:
        shifted = [0, *total]
        total = [a - pole * b for a, b in zip(shifted, [*total, 0], strict=True)]
    w0 = total[0].real ** (1 / (total[0].real * 0 + order))  # in the arithmetic of the poles
    found = [c.real * w0**k / total[0].real for k, c in enumerate(total)]
    exact = [Fraction(str(c)) for c in found]
    return (Fraction(1), *exact[1:-1], Fraction(1))


def solved_by_coefficients(
    found: Condition, family: Family, low: Sequence[PolyElement], given: Given, wanted: Collection[int]
) -> Condition:
    """The condition solved with b1, b2, ... as symbols, where ``found`` has left equations and this leaves none."""
    order = len(low) - 1
    unsolved = any(sign == "=" for way in found.alternatives for _, sign, _ in way.relations)
    if found.status != "if" or not unsolved or order > _HIGHEST_ORDER:
        return found
    names = [str(x) for x in low[0].ring.symbols]
    symbols = [f"b{k}" for k in range(1, order)]
    if set(symbols) & set(names):
        return found
    wide = make_ring([*names[1:], *symbols])
    b = [wide.one, *wide.gens[len(names) :], wide.one]
    a = [c.set_ring(wide) for c in low]
    equations = [a[k] * a[0] ** (k - 1) * b[1] ** k - b[k] * a[1] ** k for k in range(2, order + 1)]
    values = dict(zip(symbols, coefficients_of(family, order)[1:-1], strict=True))
    numbers = dict(given.numbers) | {len(names) + k: values[name] for k, name in enumerate(symbols)}
    by_symbols = judged(
        found.name,
        equations,
        given=Given(numbers, given.units),
        wanted=wanted,
        formulas=found.formulas,
    )
    if by_symbols.status != "if" or any(
        sign == "=" for way in by_symbols.alternatives for _, sign, _ in way.relations
    ):
        return found
    known = {names[k]: x for k, x in given.numbers.items()} | values
    shown = tuple((name, float(x)) for name, x in values.items())
    return replace(with_numbers(by_symbols, known, given.units), symbols=shown)
