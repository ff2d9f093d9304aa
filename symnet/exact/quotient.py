"""H as the quotient of two determinants: written out in lowest terms, modulo a prime, or for given values.

The two are what lies between the drive and the read; the blocks of the network that the wiring keeps aside
(:mod:`symnet.exact.structure`) are factors of both and are kept here for what they say: their modes are hidden, and
where values make one of them zero, the network has no single solution although this quotient has.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from typing import TYPE_CHECKING, Any

from symnet.errors import LimitError
from symnet.exact.determinant import MOST_TERMS, Determinant, numeric_pair, pair_modulo
from symnet.exact.hidden import Aside, HiddenMode, modes_aside, modes_cancelled
from symnet.exact.lowest import LowestTerms, reduce
from symnet.exact.modular import SMALL_PRIME
from symnet.exact.products import Product

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["Quotient"]


@dataclass(frozen=True, eq=False)
class Quotient:
    """``numerator/denominator`` before anything is cancelled by algebra.

    The denominator's pieces are the first of the numerator's, ``owners`` the parts and drives that own them; ``aside``
    are the blocks that wiring cancels.
    """

    numerator: Determinant
    denominator: Determinant
    owners: tuple[str, ...] = ()
    aside: tuple[Aside, ...] = ()

    @cached_property
    def lowest(self) -> LowestTerms:
        """Both in lowest terms, factor by factor; LimitError when a factor is too long to be written out."""
        n, d = self.numerator, self.denominator
        if n.form.is_zero:
            return LowestTerms.zero(d.generators.ring)
        bottom = Product.of_determinant(
            d
        )  # if anything is refused, then this, before a ring of all names is made
        found = reduce(
            Product.of_determinant(n),
            bottom,
            d.generators.ring,
            lambda point: self.modulo(point, SMALL_PRIME),
        )
        return replace(found, hidden=_without(found.hidden, d.generators.element(d.factor)))

    @cached_property
    def hidden(self) -> tuple[HiddenMode, ...]:
        """The modes of the network that this quotient does not show; none are told of where it is zero."""
        if not self.lowest.top.number:
            return ()
        modes = list(modes_cancelled(self.lowest.hidden, self.denominator, self.owners))
        for aside in self.aside:
            modes += modes_aside(aside)
        return tuple(modes)

    @property
    def terms(self) -> tuple[int, int]:
        """An upper bound of the number of terms of each, known without writing them out."""
        return self.numerator.terms, self.denominator.terms

    @property
    def is_built(self) -> bool:
        """Whether both have a diagram; otherwise they give numbers only."""
        return self.numerator.is_built and self.denominator.is_built

    @cached_property
    def is_factored(self) -> bool:
        """Whether both can be written in lowest terms, factor by factor, within the limits."""
        try:
            self.lowest  # noqa: B018 - a factor, or a common factor, may be too long
        except LimitError:
            return False
        return True

    @property
    def is_writable(self) -> bool:
        """Whether both can be written out in lowest terms, multiplied out, within the limits."""
        return self.is_factored and max(self.lowest.terms) <= MOST_TERMS

    def modulo(self, point: Sequence[Any], prime: int) -> tuple[Any, Any]:
        """Numerator and denominator at a point (s first, then the names in order), modulo a prime."""
        return pair_modulo(self.numerator, self.denominator, point, prime)

    def numbers(self, values: Sequence[Fraction]) -> tuple[list[int], list[int]]:
        """Integer coefficients, ascending in s, of both for these values of the names.

        The denominator's are zero where the network's determinant is, aside or not.
        """
        top, bottom = numeric_pair(self.numerator, self.denominator, values)
        if not all(any(aside.determinant.coefficients(values)) for aside in self.aside):
            return top, []
        return top, bottom


def _without(hidden: tuple[PolyElement, ...], factor: PolyElement) -> tuple[PolyElement, ...]:
    """The hidden modes without those that the read itself has brought in, as in ``read a/(s*L1)``."""
    kept = []
    for mode in hidden:
        quotient, rest = divmod(factor, mode)
        if rest or not factor:
            kept.append(mode)
        else:
            factor = quotient
    return tuple(kept)
