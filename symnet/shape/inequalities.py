"""A polynomial in positive parts that must be positive, written as an inequality that can be read.

What must be positive is nearly always a sum from which one product is taken away, or a gain that stands there once to
the first power. So factors of one sign are dropped first. Then, if a name occurs in the first power only and what
multiplies it has one sign, the inequality is solved for it, for a pure number such as a gain before any part:
K < 1 + (1 + R2/R1)*C1/C2. Otherwise the positive terms stand against the negative ones. Nothing is ever multiplied
by what may be negative.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING, Any

from symnet.exact.readable.forms import readable, readable_ratio
from symnet.quantities import NUMBER, Dimension
from symnet.shape.positive import as_squares, sign_of
from symnet.shape.solving import kernel
from symnet.shape.stated import Relation
from symnet.typeset.length import length
from symnet.typeset.tree import Atom, number, plus

if TYPE_CHECKING:
    from fractions import Fraction

    from sympy.polys.rings import PolyElement

    from symnet.typeset.tree import Tree

__all__ = ["inequality", "put_numbers_in", "sure_sign"]


def sure_sign(polynomial: PolyElement) -> int | None:
    """The sign for all positive symbols where it can be proven: 1, -1, 0, or None.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, R1, R2 = make_ring(["R1", "R2"]).gens
    >>> sure_sign(R1**2 - R1*R2 + R2**2), sure_sign((R1 - R2) * (R1 + R2)), sure_sign(R1**2 - R2**2 - R1*R2 - 3*R1**2)
    (1, None, -1)
    """
    known = sign_of(polynomial)
    if known is not None:
        return known
    core = kernel(polynomial)
    known = sign_of(core)
    if known is not None:
        return known
    for sign in (1, -1):
        squares = as_squares(sign * core)
        if squares is not None and squares.is_positive:
            return sign
    return None


def inequality(polynomial: PolyElement, dimensions: Mapping[str, Dimension | None]) -> Relation:
    """Polynomial > 0 as left, sign and right.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.writing import to_text
    >>> s, R1, R2, C1, C2, K = make_ring(["R1", "R2", "C1", "C2", "K"]).gens
    >>> left, sign, right = inequality(R2 * (C1 * (R1 + R2) + (1 - K) * R1 * C2), {"K": NUMBER})
    >>> to_text(left), sign, to_text(right)
    ('K', '<', '1 + (1 + R2/R1)*C1/C2')
    """
    core = kernel(polynomial)
    best: tuple[tuple[bool, bool, int], Relation] | None = None
    for index, symbol in enumerate(core.ring.symbols):
        if not index or core.degree(index) != 1:
            continue
        with_name, without = _split(core, index)
        sign = sign_of(with_name)
        if sign is None or not without:
            continue
        top, bottom = without if sign < 0 else -without, with_name if sign > 0 else -with_name
        tree = _ratio(*top.cancel(bottom))
        rank = (
            sign_of(without) != -sign,  # a bound that is positive is a bound
            dimensions.get(str(symbol), NUMBER) != NUMBER,
            length(tree),
        )
        if best is None or rank < best[0]:
            best = (rank, (Atom(str(symbol)), "<" if sign < 0 else ">", tree))
    if best is not None and not best[0][0]:
        return best[1]
    ring: Any = core.ring
    above, below = (
        ring.from_dict({m: sign * c for m, c in core.items() if sign * c > 0}) for sign in (1, -1)
    )
    return (readable(above), ">", readable(below) if below else number(0))


def _split(polynomial: PolyElement, index: int) -> tuple[PolyElement, PolyElement]:
    """The factor of generator ``index`` and the rest."""
    ring: Any = polynomial.ring
    sides: tuple[dict[Any, Any], dict[Any, Any]] = ({}, {})
    for m, c in polynomial.items():
        sides[0 if m[index] else 1][(*m[:index], 0, *m[index + 1 :])] = c
    return ring.from_dict(sides[0]), ring.from_dict(sides[1])


def _ratio(top: PolyElement, bottom: PolyElement) -> Tree:
    """The quotient, the number that can be taken out of it in front."""
    if len(bottom) == 1 and len(top) > 1:
        ((monomial, coefficient),) = bottom.items()
        there = top.get(monomial, 0)
        if there and there % coefficient == 0:
            ring: Any = top.ring
            rest = ring.from_dict({m: c for m, c in top.items() if m != monomial})
            return plus(number(int(there // coefficient)), readable_ratio(rest, bottom))
    return readable_ratio(top, bottom)


def put_numbers_in(
    coefficients: tuple[PolyElement, ...], values: Mapping[str, Fraction]
) -> tuple[PolyElement, ...]:
    """The polynomials with the numbers of some of their names, all multiplied by one positive whole number."""
    from math import lcm

    if not values or not coefficients:
        return coefficients
    ring: Any = coefficients[0].ring
    places = [(k, values[str(name)]) for k, name in enumerate(ring.symbols) if str(name) in values]
    found: list[dict[tuple[int, ...], Fraction]] = []
    for polynomial in coefficients:
        total: dict[tuple[int, ...], Fraction] = {}
        for m, c in polynomial.items():
            worth: Any = int(c)
            left = list(m)
            for k, value in places:
                worth *= value ** left[k]
                left[k] = 0
            key = tuple(left)
            total[key] = total.get(key, 0) + worth
        found.append(total)
    common = lcm(*(getattr(c, "denominator", 1) for total in found for c in total.values()))
    return tuple(ring.from_dict({m: int(c * common) for m, c in total.items() if c}) for total in found)
