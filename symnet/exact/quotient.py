"""H as the quotient of two determinants: written out in lowest terms, modulo a prime, or for given values."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from typing import TYPE_CHECKING, Any

from symnet.errors import LimitError
from symnet.exact.determinant import MOST_TERMS, Determinant, numeric_pair, pair_modulo
from symnet.exact.lowest import LowestTerms, reduce
from symnet.exact.modular import SMALL_PRIME

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["Quotient"]


@dataclass(frozen=True, eq=False)
class Quotient:
    """``numerator/denominator`` before anything is cancelled; the denominator's pieces are the first of the numerator's."""

    numerator: Determinant
    denominator: Determinant

    @cached_property
    def lowest(self) -> LowestTerms:
        """Both written out in lowest terms; LimitError when that would be too long."""
        n, d = self.numerator, self.denominator
        ring = d.generators.ring
        if n.diagram.is_zero:
            return LowestTerms(ring, ring.zero, ring.one, ())
        found = reduce(n.primitive, d.primitive, ring, lambda point: self.modulo(point, SMALL_PRIME))
        return replace(found, hidden=_without(found.hidden, d.generators.element(d.factor)))

    @property
    def terms(self) -> tuple[int, int]:
        """An upper bound of the number of terms of each, known without writing them out."""
        return self.numerator.terms, self.denominator.terms

    @cached_property
    def is_writable(self) -> bool:
        """Whether both can be written out in lowest terms within the limits."""
        if max(self.terms) > MOST_TERMS:
            return False
        try:
            self.lowest  # noqa: B018 - a common factor may be too long to be looked for
        except LimitError:
            return False
        return True

    def modulo(self, point: Sequence[Any], prime: int) -> tuple[Any, Any]:
        """Numerator and denominator at a point (s first, then the names in order), modulo a prime."""
        return pair_modulo(self.numerator, self.denominator, point, prime)

    def numbers(self, values: Sequence[Fraction]) -> tuple[list[int], list[int]]:
        """Integer coefficients, ascending in s, of both for these values of the names."""
        return numeric_pair(self.numerator, self.denominator, values)


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
