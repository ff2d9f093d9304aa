"""Roots of ratios of polynomials as formulas, with whatever is a perfect power taken out of the root."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from symnet.exact.readable.forms import readable, readable_ratio
from symnet.shape.positive import content, divide_content, sign_of
from symnet.typeset.tree import ONE, Atom, Root, Tree, number, over, power, times

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["centre_frequency", "outside", "radical", "root"]

_MOST_FACTORED: Final = 40  # terms of a polynomial that is factored to find perfect powers


def root(top: PolyElement, bottom: PolyElement, degree: int) -> Tree:
    """(top/bottom)^(1/degree), perfect powers of names and numbers taken out."""
    above, below = outside(top, degree), outside(bottom, degree)
    return over(times(above[0], radical(above[1], below[1], degree)), below[0])


def radical(top: PolyElement, bottom: PolyElement, degree: int) -> Tree:
    """The root itself, of a ratio from which everything has been taken out."""
    if top == bottom:
        return ONE
    tree = readable_ratio(top, bottom)
    return Root(tree, degree) if degree > 1 else tree


def outside(p: PolyElement, degree: int) -> tuple[Tree, PolyElement]:
    """p^(1/degree) as a factor outside and what is left under the root.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.writing import to_text
    >>> s, R, C1, C2 = make_ring(["R", "C1", "C2"]).gens
    >>> tree, left = outside(4 * R**2 * C1 * (C1 + C2) ** 3, 2)
    >>> to_text(tree), left
    ('2*R*(C1 + C2)', C1**2 + C1*C2)
    """
    number_, exponents = content(p)
    whole = round(number_ ** (1 / degree)) if number_ < 2**52 else 1
    whole = whole if whole**degree == number_ else 1
    taken = tuple(e // degree for e in exponents)
    names = [power(Atom(str(x)), e) for x, e in zip(p.ring.symbols, taken, strict=True) if e]
    rest = divide_content(p, whole**degree, tuple(e * degree for e in taken))
    if 1 < len(rest) <= _MOST_FACTORED:
        for factor, multiplicity in rest.factor_list()[1]:
            if multiplicity >= degree and sign_of(factor) == 1:
                names.append(power(readable(factor), multiplicity // degree))
                rest = rest.exquo(factor ** (multiplicity - multiplicity % degree))
    return times(number(whole), *names), rest


def centre_frequency(below: PolyElement, above: PolyElement, degree: int) -> Tree:
    """(below/above)^(1/degree)/(2 pi): the f0 of a polynomial that begins with ``below`` and ends with ``above``.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.writing import to_text
    >>> s, R, C = make_ring(["R", "C"]).gens
    >>> to_text(centre_frequency(s.ring.one, R**2 * C**2, 2))
    '1/(2*pi*R*C)'
    """
    top, bottom = above.cancel(below)
    inner, outer = outside(top, degree), outside(bottom, degree)
    return over(outer[0], times(number(2), Atom("pi"), inner[0], radical(inner[1], outer[1], degree)))
