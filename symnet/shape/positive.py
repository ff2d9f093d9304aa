"""Signs that positive parts force on a polynomial: sums of positive terms, and squares that cover negative terms.

Whether a polynomial in several positive symbols keeps one sign is hard in general; what networks ask is nearly
always one of two easy cases. All terms have one sign; or each negative term is the cross term of two positive
ones, u + v - 2 sqrt(u v) >= 0. Both answers are proofs that can be shown. Where neither holds nothing is claimed.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from math import gcd, lcm
from typing import TYPE_CHECKING, Any, Final, TypeAlias

from symnet.exact.readable.forms import readable
from symnet.typeset.tree import Atom, Tree, number, plus, power, times

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["Squares", "as_squares", "content", "divide_content", "sign_of"]

_Exponents: TypeAlias = tuple[int, ...]

_MOST_TERMS: Final = 60  # pairs of positive terms are tried for each negative one


def content(polynomial: PolyElement) -> tuple[int, tuple[int, ...]]:
    """The greatest common number and monomial of the terms of a polynomial that is not 0.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, R1, R2 = make_ring(["R1", "R2"]).gens
    >>> content(6 * R1**2 - 4 * R1 * R2)
    (2, (0, 1, 0))
    """
    return gcd(*(int(c) for c in polynomial.values())), tuple(map(min, zip(*polynomial, strict=True)))


def divide_content(polynomial: PolyElement, common: int, exponents: tuple[int, ...]) -> PolyElement:
    """The polynomial divided by a number and a monomial that are in all its terms."""
    return polynomial.ring.from_dict(
        {tuple(a - b for a, b in zip(m, exponents, strict=True)): c // common for m, c in polynomial.items()}
    )


def sign_of(polynomial: PolyElement) -> int | None:
    """The sign of the polynomial for positive symbols, as far as the signs of its terms tell: 1, -1, 0 or None.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, R1, R2 = make_ring(["R1", "R2"]).gens
    >>> sign_of(R1 + R2), sign_of(-R1 * R2), sign_of(R1 - R2)
    (1, -1, None)
    """
    if not polynomial:
        return 0
    signs = {c > 0 for c in polynomial.values()}
    return None if len(signs) == 2 else 1 if signs.pop() else -1


@dataclass(frozen=True, slots=True)
class Squares:
    """scale * polynomial = weight * common * (p - ratio * q)^2 + ... + rest, all terms of the rest being positive.

    ``squares`` hold (weight, common, p, ratio, q), the monomials as exponents; ``scale`` is a positive integer,
    nearly always 1, that makes all coefficients of the rest whole.
    """

    scale: int
    squares: tuple[tuple[Fraction, _Exponents, _Exponents, Fraction, _Exponents], ...]
    rest: PolyElement

    @property
    def is_positive(self) -> bool:
        """Whether it is greater than 0 for all positive symbols; otherwise it can be 0 but not less."""
        return bool(self.rest)

    def tree(self) -> Tree:
        """The sum as a formula."""
        ring = self.rest.ring
        parts = [
            times(
                number(weight),
                _monomial(ring, common),
                power(plus(_monomial(ring, p), times(number(-ratio), _monomial(ring, q))), 2),
            )
            for weight, common, p, ratio, q in self.squares
        ]
        return plus(*parts, *([readable(self.rest)] if self.rest else []))


def _monomial(ring: PolyRing, exponents: _Exponents) -> Tree:
    return times(*(power(Atom(str(name)), e) for name, e in zip(ring.symbols, exponents, strict=True) if e))


def as_squares(polynomial: PolyElement) -> Squares | None:
    """The polynomial as squares and a rest of positive terms; None when this simple search finds no such form.

    For each negative term -c m the search takes two positive terms a u and b v with u v = m^2 and uses as much of
    them as (p - r q)^2 needs, in equal shares where both have enough.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.writing import to_text
    >>> s, R1, R2 = make_ring(["R1", "R2"]).gens
    >>> to_text(as_squares((R1 + R2)**2 - 4*R1*R2 + R1).tree())
    '(R1 - R2)^2 + R1'
    >>> as_squares(R1 - R2) is None
    True
    """
    if len(polynomial) > _MOST_TERMS:
        return None
    left = {m: Fraction(int(c)) for m, c in polynomial.items() if c > 0}
    found = []
    for m, c in sorted(((m, -Fraction(int(c))) for m, c in polynomial.items() if c < 0), reverse=True):
        square = _covering(m, c, left)
        if square is None:
            return None
        found.append(square)
    scale = lcm(*(c.denominator for c in left.values()))
    squares = tuple((weight * scale, common, p, ratio, q) for weight, common, p, ratio, q in found)
    ring: Any = polynomial.ring
    return Squares(scale, squares, ring.from_dict({m: int(c * scale) for m, c in left.items()}))


def _covering(
    m: _Exponents, c: Fraction, left: dict[_Exponents, Fraction]
) -> tuple[Fraction, _Exponents, _Exponents, Fraction, _Exponents] | None:
    """Take from the positive terms what covers -c m, or take nothing and return None."""
    choices = []
    for u, a in left.items():
        v = tuple(2 * e - f for e, f in zip(m, u, strict=True))
        if u > v and v in left:
            enough = min(a, left[v]) >= c / 2
            choices.append((not enough, u, v))
    for unequal, u, v in sorted(choices):
        weight = c / 2 if not unequal else left[u] if left[u] < c / 2 else c * c / (4 * left[v])
        other = c * c / (4 * weight)
        if weight > left[u] or other > left[v]:
            continue
        left[u] -= weight
        left[v] -= other
        for k in (u, v):
            if not left[k]:
                del left[k]
        common = tuple(map(min, u, v))
        p, q = (tuple((a - b) // 2 for a, b in zip(k, common, strict=True)) for k in (u, v))
        return weight, common, p, c / (2 * weight), q
    return None
