"""How exactly a number was meant: half a unit of the last digit that was written.

``9.1 kohm`` lies between 9.05 and 9.15 kohm. A whole number without a unit is exact (2, 15), and a whole number with
one is good to its third digit at least: nobody who writes ``10 kohm`` means anything from 9.5 to 10.5.
"""

from __future__ import annotations

import re
from fractions import Fraction
from typing import Final

from symnet.quantities import read_unit

__all__ = ["half_unit"]

_WRITTEN: Final = re.compile(r"\s*[+-]?\s*(\d*)(?:(\.)(\d*))?(?:[eE]([+-]?\d+))?\s*(\S*)\s*")
_LEAST_DIGITS: Final = 3


def half_unit(text: str, value: Fraction) -> Fraction:
    """Half a unit of the last digit of a number as it was written, unit included; 0 for an exact one.

    >>> half_unit("9.1 kohm", Fraction(9100)), half_unit("2", Fraction(2)), half_unit("10 k", Fraction(10_000))
    (Fraction(50, 1), Fraction(0, 1), Fraction(50, 1))
    """
    found = _WRITTEN.fullmatch(text)
    if found is None:
        return Fraction(0)
    whole, point, decimals, exponent, unit = found.groups()
    if not point and not exponent and not unit:
        return Fraction(0)
    known = read_unit(unit) if unit else None
    scale = known[0] if known else Fraction(1)
    last = Fraction(10) ** (int(exponent or 0) - len(decimals or ""))
    if not point:
        digits = len(whole.lstrip("0"))
        last /= 10 ** max(0, _LEAST_DIGITS - digits)
    return last * scale / 2 if value else Fraction(0)
