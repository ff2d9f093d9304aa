"""Names that have a number: put into a polynomial where its sign is asked for, left as names where it is shown.

"Needs C1 = 2*C2; you have C1 = 10 nF and C2 = 10 nF" says more than "needs 10 nF = 20 nF". So equations are solved in
names throughout, for names that are free, and every question about a sign or a zero is put to the polynomial with
the numbers in it, in exact fractions.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from math import lcm
from typing import TYPE_CHECKING, Any, Final

from symnet.shape.positive import sign_of
from symnet.typeset.numbers import plain_number, quantity

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["NOTHING", "Given"]


@dataclass(frozen=True, slots=True)
class Given:
    """Positive numbers (SI) of some generators of a ring, by their index; ``units`` are those of any of them, by name.

    ``squares`` are numbers of squares: Q^2 = 1/2 has Q irrational, so Q^3 is taken as Q/2 and stays exact.

    >>> from symnet.exact.polynomials import make_ring
    >>> s, R, C1, C2 = make_ring(["R", "C1", "C2"]).gens
    >>> given = Given({2: Fraction(1, 5), 3: Fraction(1, 3)})
    >>> given.at(R*C1 - 2*R*C2), given.sign(R*C1 - 2*R*C2)
    (-7*R, -1)
    """

    numbers: Mapping[int, Fraction] = field(default_factory=dict)
    units: Mapping[str, str] = field(default_factory=dict)
    squares: Mapping[int, Fraction] = field(default_factory=dict)

    def __contains__(self, index: int) -> bool:
        return index in self.numbers or index in self.squares

    def at(self, polynomial: PolyElement) -> PolyElement:
        """The polynomial with the numbers put in, times a positive number that makes its coefficients whole."""
        if not (self.numbers or self.squares) or not polynomial:
            return polynomial
        total: dict[tuple[int, ...], Fraction] = {}
        for m, c in polynomial.items():
            value = Fraction(int(c))
            rest = list(m)
            for index, number in self.numbers.items():
                if m[index]:
                    value *= number ** m[index]
                    rest[index] = 0
            for index, square in self.squares.items():
                value *= square ** (m[index] // 2)
                rest[index] = m[index] % 2
            key = tuple(rest)
            total[key] = total.get(key, Fraction(0)) + value
        scale = lcm(*(c.denominator for c in total.values()))
        ring: Any = polynomial.ring
        return ring.from_dict({m: int(c * scale) for m, c in total.items() if c})

    def sign(self, polynomial: PolyElement) -> int | None:
        """The sign for positive symbols, as far as the signs of the terms tell: 1, -1, 0 or None."""
        return sign_of(self.at(polynomial))

    def value(self, polynomial: PolyElement) -> Fraction | None:
        """The exact value; None where a symbol without a number is in it."""
        total = Fraction(0)
        for m, c in polynomial.items():
            term = Fraction(int(c))
            for index, exponent in enumerate(m):
                if index in self.numbers:
                    term *= self.numbers[index] ** exponent
                elif index in self.squares and exponent % 2 == 0:
                    term *= self.squares[index] ** (exponent // 2)
                elif exponent:
                    return None
            total += term
        return total

    def told(self, polynomial: PolyElement) -> str:
        """The numbers of the names in it, such as "C1 = 10 nF, C2 = 22 nF"."""
        ring = polynomial.ring
        names = [
            (str(ring.symbols[k]), x)
            for k, x in sorted(self.numbers.items())
            if any(m[k] for m in polynomial)
        ]
        return ", ".join(f"{name} = {self.written(name, x)}" for name, x in names)

    def written(self, name: str, value: Fraction | float) -> str:
        """A value with the unit of the name."""
        unit = self.units.get(name, "")
        return str(quantity(value, unit) if unit else plain_number(value))


NOTHING: Final = Given()
