"""Polynomials that give up: arithmetic that stops before a product becomes too long to be of any use.

A family's conditions are powers of coefficients, and how long they become is not known before they are multiplied out.
With these in place of ring elements the family computes as ever, and stops at the first product beyond the limit.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, Final

from symnet.errors import LimitError

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["Bounded"]

#: Pairs of terms in one product. Equations that are solved have some sixty terms at most.
_MOST_PAIRS: Final = 3000


class Bounded:
    """A ring element with + - * and whole powers; LimitError where a product would take too many pairs of terms.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, R, C = make_ring(["R", "C"]).gens
    >>> (Bounded(R + C) ** 2 - 4 * Bounded(R) * C).element
    R**2 - 2*R*C + C**2
    """

    __slots__ = ("element",)

    def __init__(self, element: PolyElement) -> None:
        self.element = element

    def __add__(self, other: Any) -> Bounded:
        return Bounded(self.element + _plain(other))

    __radd__ = __add__

    def __sub__(self, other: Any) -> Bounded:
        return Bounded(self.element - _plain(other))

    def __rsub__(self, other: Any) -> Bounded:
        return Bounded(_plain(other) - self.element)

    def __neg__(self) -> Bounded:
        return Bounded(-self.element)

    def __mul__(self, other: Any) -> Bounded:
        factor = _plain(other)
        if not isinstance(factor, int) and len(self.element) * len(factor) > _MOST_PAIRS:
            raise LimitError(f"a product of {len(self.element)} and {len(factor)} terms")
        return Bounded(self.element * factor)

    __rmul__ = __mul__

    def __pow__(self, exponent: int) -> Bounded:
        total = Bounded(self.element.ring.one)
        for _ in range(exponent):
            total = total * self
        return total


def _plain(x: Any) -> Any:
    return x.element if isinstance(x, Bounded) else x
