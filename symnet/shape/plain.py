"""What the questions about the shape of H need of it: coefficients in powers of s, exact, in symbols and in numbers.

A transfer function in symbols has ring elements as coefficients, a ratio has fractions; both are treated by the
same formulas. Where every name has a value both are there, and they may differ in order: a factor can cancel for
these values that does not cancel in symbols.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import TYPE_CHECKING, Final, TypeAlias

from symnet.errors import LimitError
from symnet.exact.polynomials import by_powers_of_s
from symnet.exact.ratio import Ratio
from symnet.quantities import NUMBER, SECOND, Dimension
from symnet.shape.closed import Coefficient

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer

__all__ = ["Pair", "Plain", "plain", "sign"]

#: Where every name has a value, H in symbols is written out only up to this many terms; its numbers say the rest.
MOST_TERMS_BESIDE_NUMBERS: Final = 5_000

Response: TypeAlias = "Transfer | Ratio"


@dataclass(frozen=True, slots=True)
class Pair:
    """H = N/D by coefficients in ascending powers of s; ``num`` is empty for H = 0, last entries are not zero."""

    num: tuple[Coefficient, ...]
    den: tuple[Coefficient, ...]

    @property
    def order(self) -> int:
        """The degree of D."""
        return len(self.den) - 1

    @property
    def num_degree(self) -> int:
        """The degree of N; 0 for H = 0."""
        return max(len(self.num) - 1, 0)

    @property
    def poles_at_origin(self) -> int:
        """The m of D = s^m D'."""
        return next(k for k, c in enumerate(self.den) if c)

    @property
    def zeros_at_origin(self) -> int:
        """The z of N = s^z N'; 0 for H = 0."""
        return next((k for k, c in enumerate(self.num) if c), 0)

    @property
    def layout(self) -> tuple[int, int, int, int]:
        """Degrees and powers at the origin, which must agree before numbers are set beside symbols."""
        return self.num_degree, self.order, self.zeros_at_origin, self.poles_at_origin


@dataclass(frozen=True, slots=True)
class Plain:
    """H as plain data. At least one of ``symbols`` and ``numbers`` is there."""

    label: str
    dimension: Dimension
    symbols: Pair | None
    numbers: Ratio | None
    dimensions: Mapping[str, Dimension | None] = field(default_factory=dict)
    values: Mapping[str, Fraction] = field(default_factory=dict)

    @property
    def pair(self) -> Pair:
        """The coefficients in symbols where there are some, else the numbers."""
        return self.symbols if self.symbols is not None else self.numeric_pair

    @property
    def numeric_pair(self) -> Pair:
        """The coefficients of the numbers."""
        assert self.numbers is not None  # noqa: S101 - one of the two is there
        return Pair(self.numbers.num, self.numbers.den)

    @property
    def decisive(self) -> Pair:
        """The coefficients that decide what H is: the numbers where there are numbers."""
        return self.numeric_pair if self.numbers is not None else self.pair


def plain(H: Response) -> Plain:
    """The plain data of a transfer function or of a ratio (a ratio counts as V/V, s in rad/s).

    >>> plain(Ratio.of([1], [1, 2])).pair
    Pair(num=(Fraction(1, 1),), den=(Fraction(1, 1), Fraction(2, 1)))
    """
    if isinstance(H, Ratio):
        return Plain("H", NUMBER, None, H, {"s": NUMBER / SECOND})
    numbers = H.numeric() if H.is_numeric else None
    symbols: Pair | None = None
    if H.names and (numbers is None or sum(H.terms) <= MOST_TERMS_BESIDE_NUMBERS):
        try:
            symbols = Pair(by_powers_of_s(H.numerator), by_powers_of_s(H.denominator))
        except LimitError:
            if numbers is None:
                raise
    return Plain(H.label, H.dimension, symbols, numbers, H.dimensions, H.values)


def sign(coefficient: Coefficient) -> int | None:
    """The sign for positive part values: 1, -1, 0, or None where the signs of the terms do not tell."""
    if isinstance(coefficient, Fraction):
        return (coefficient > 0) - (coefficient < 0)
    from symnet.shape.positive import sign_of

    return sign_of(coefficient)
