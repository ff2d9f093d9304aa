"""Dimensions as products of powers of volt, ampere and second, and how they are printed.

Every unit of a linear network is such a product: ohm = V/A, farad = A s/V, henry = V s/A. Three whole exponents
are enough, and equality is exact.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

__all__ = [
    "AMPERE",
    "FARAD",
    "HENRY",
    "HERTZ",
    "NUMBER",
    "OHM",
    "SECOND",
    "SIEMENS",
    "VOLT",
    "Dimension",
    "in_words",
]


@dataclass(frozen=True, slots=True)
class Dimension:
    """A product of powers: volt**v * ampere**a * second**t; printed in the trade's units.

    >>> print(OHM, HENRY, OHM * OHM, VOLT / SECOND, OHM * FARAD, NUMBER)
    ohm H ohm^2 V/s s 1
    """

    v: int = 0
    a: int = 0
    t: int = 0

    def __mul__(self, other: Dimension) -> Dimension:
        return Dimension(self.v + other.v, self.a + other.a, self.t + other.t)

    def __truediv__(self, other: Dimension) -> Dimension:
        return Dimension(self.v - other.v, self.a - other.a, self.t - other.t)

    def __pow__(self, exponent: int) -> Dimension:
        return Dimension(self.v * exponent, self.a * exponent, self.t * exponent)

    def __str__(self) -> str:
        for name, dimension in _NAMED:
            if self == dimension:
                return name
        shared = min(abs(self.v), abs(self.a)) if self.v * self.a < 0 else 0
        sign = 1 if self.v > 0 else -1
        powers = (
            ("ohm" if sign > 0 else "S", shared),
            ("V", self.v - sign * shared),
            ("A", self.a + sign * shared),
            ("s", self.t),
        )
        above = [_power(unit, power) for unit, power in powers if power > 0]
        below = [_power(unit, -power) for unit, power in powers if power < 0]
        return "/".join(["*".join(above) or "1", *below])


def _power(unit: str, power: int) -> str:
    return unit if power == 1 else f"{unit}^{power}"


NUMBER = Dimension()
VOLT = Dimension(v=1)
AMPERE = Dimension(a=1)
SECOND = Dimension(t=1)
HERTZ = Dimension(t=-1)
OHM = VOLT / AMPERE
SIEMENS = AMPERE / VOLT
FARAD = SECOND / OHM
HENRY = OHM * SECOND

_NAMED: Final = (
    ("1", NUMBER),
    ("ohm", OHM),
    ("F", FARAD),
    ("H", HENRY),
    ("S", SIEMENS),
    ("V", VOLT),
    ("A", AMPERE),
    ("s", SECOND),
    ("1/s", HERTZ),
)


def in_words(dimension: Dimension) -> str:
    """The dimension inside a sentence: ``a number`` or the unit."""
    return "a number" if dimension == NUMBER else str(dimension)
