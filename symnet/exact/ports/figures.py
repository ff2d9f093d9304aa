"""One entry of a matrix of parameters: an exact quotient of polynomials with its dimension and the values at hand."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.errors import Fault, MissingValueError, SingularError
from symnet.exact.mutual import coefficients
from symnet.exact.ports.common import lowest
from symnet.exact.ratio import Ratio
from symnet.exact.readable.forms import readable_transfer
from symnet.quantities import Dimension
from symnet.typeset.tree import Tree
from symnet.typeset.writing import to_text

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["Parameter", "Worth"]


@dataclass(frozen=True, slots=True)
class Worth:
    """The numbers (SI) of names, and the signed squares of those that are roots."""

    numbers: Mapping[str, Fraction]
    squares: Mapping[str, Fraction]


@dataclass(frozen=True, eq=False)
class Parameter:
    """``numerator/denominator``, in lowest terms, in s and the names of the parts; ``dimension`` is None if unknown."""

    label: str
    numerator: PolyElement
    denominator: PolyElement
    dimension: Dimension | None
    worth: Worth

    @classmethod
    def of(
        cls, label: str, top: PolyElement, bottom: PolyElement, dimension: Dimension | None, worth: Worth
    ) -> Parameter:
        """The quotient of two polynomials, brought to lowest terms."""
        return cls(label, *lowest(top, bottom), dimension, worth)

    @property
    def ring(self) -> PolyRing:
        """The ring of s and the names of the parts."""
        return self.numerator.ring

    @property
    def tree(self) -> Tree:
        """The value as it is typeset."""
        return readable_transfer(self.numerator, self.denominator)

    def numeric(self) -> Ratio:
        """The exact rational function of s; MissingValueError when a name has no number.

        SingularError when the denominator is zero for these values.
        """
        names = [str(symbol) for symbol in self.numerator.ring.symbols[1:]]
        used = [
            name
            for k, name in enumerate(names, 1)
            if any(m[k] for part in (self.numerator, self.denominator) for m in part.itermonoms())
        ]
        missing = [name for name in used if name not in self.worth.numbers]
        if missing:
            raise MissingValueError(
                Fault(
                    f"no value for {', '.join(missing)}", "give it one in the network", parts=tuple(missing)
                )
            )
        top, bottom = coefficients((self.numerator, self.denominator), self.worth.numbers, self.worth.squares)
        if not any(bottom):
            raise SingularError(Fault(f"for these values {self.label} is infinite", "change one of them"))
        return Ratio.of(top, bottom)

    def __eq__(self, other: object) -> bool:
        if not isinstance(other, Parameter) or self.numerator.ring != other.numerator.ring:
            return NotImplemented
        return bool(self.numerator * other.denominator == other.numerator * self.denominator)

    def __hash__(self) -> int:
        return hash((self.label, self.denominator))

    def __str__(self) -> str:
        return f"{self.label} = {to_text(self.tree)}"

    def __repr__(self) -> str:
        return f"<{self}>"
