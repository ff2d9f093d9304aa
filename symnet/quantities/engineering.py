"""Engineering notation: a value as an engineer writes it, rounded for reading or exact for reading back.

What :func:`engineering` writes in its exact mode reads back to the same fraction. Rounding is one correctly
rounded division of exact integers, so that no digit shown is wrong.
"""

from __future__ import annotations

from dataclasses import dataclass
from decimal import ROUND_HALF_EVEN, Decimal, localcontext
from fractions import Fraction
from typing import Final

from symnet.errors import Fault, LimitError
from symnet.quantities.dimension import (
    AMPERE,
    FARAD,
    HENRY,
    HERTZ,
    NUMBER,
    OHM,
    SECOND,
    SIEMENS,
    VOLT,
    Dimension,
)

__all__ = ["MOST_DIGITS", "WRITTEN_UNITS", "Quantity", "engineering"]

MOST_DIGITS: Final = 1000  # digits of one number; keeps a hostile text from costing minutes


@dataclass(frozen=True, slots=True)
class Quantity:
    """An exact number with a dimension, in SI units without prefix."""

    value: Fraction
    dimension: Dimension = NUMBER

    def __str__(self) -> str:
        return engineering(self.value, self.dimension)


_WRITTEN_PREFIX: Final = {
    -15: "f",
    -12: "p",
    -9: "n",
    -6: "u",
    -3: "m",
    0: "",
    3: "k",
    6: "M",
    9: "G",
    12: "T",
}
#: The units that values are written in.
WRITTEN_UNITS: Final = {
    OHM: "ohm",
    FARAD: "F",
    HENRY: "H",
    SIEMENS: "S",
    VOLT: "V",
    AMPERE: "A",
    SECOND: "s",
    HERTZ: "Hz",
}


def engineering(
    value: Fraction,
    dimension: Dimension = NUMBER,
    *,
    digits: int = 4,
    exact: bool = False,
    unit: str | None = None,
) -> str:
    """The value as an engineer writes it: ``4.7 kohm``, ``22 nF``, ``-33.66 kohm``.

    ``digits`` significant digits are kept, trailing zeros are not shown. With ``exact`` all of them are
    written, a fraction that has no decimal form is written as a quotient (``22 ohm/7``), and the text reads
    back to the same fraction. ``unit`` names another unit of the same dimension, such as rad/s for Hz.

    >>> engineering(Fraction(4700), OHM), engineering(Fraction(2, 3), FARAD)
    ('4.7 kohm', '666.7 mF')
    >>> engineering(Fraction(22, 7), OHM, exact=True)
    '22 ohm/7'
    """
    name = unit if unit is not None else WRITTEN_UNITS.get(dimension)
    if exact:
        return _exact_text(value, name)
    if name is None:
        text = _rounded(value, digits)
        return text if dimension == NUMBER else f"{text} {dimension}"
    power = _power_of_thousand(value)
    text = _rounded(value / Fraction(10) ** power, digits)
    if text.lstrip("-") == "1000" and power + 3 in _WRITTEN_PREFIX:  # 999.96 was rounded up
        text, power = text.replace("1000", "1"), power + 3
    return f"{text} {_WRITTEN_PREFIX[power]}{name}"


def _power_of_thousand(value: Fraction) -> int:
    """The prefix, as a power of ten, that brings the value between 1 and 1000 as nearly as prefixes can."""
    power = -15
    while power < 12 and abs(value) >= Fraction(10) ** (power + 3):
        power += 3
    return 0 if value == 0 else power


def _rounded(value: Fraction, digits: int) -> str:
    with localcontext() as context:
        context.prec = max(digits, 1)
        context.rounding = ROUND_HALF_EVEN
        # One division of exact integers: rounded once, ties decided on the exact value.
        context.Emax, context.Emin = 999_999, -999_999
        number = Decimal(value.numerator) / Decimal(value.denominator)
    text = format(number, "f") if -5 <= number.adjusted() < max(digits, 7) else ""
    if not text:
        mantissa, _, exponent = f"{number:e}".partition("e")
        return _trimmed(mantissa) + "e" + exponent.removeprefix("+")
    return _trimmed(text)


def _trimmed(text: str) -> str:
    return text.rstrip("0").rstrip(".") if "." in text else text


def _exact_text(value: Fraction, name: str | None) -> str:
    numerator, below = value.numerator, value.denominator
    if _decimal_places(below) is None:
        above = (
            f"{_decimal(Fraction(numerator * 1000))} ms"
            if name == "s"
            else _exact_text(Fraction(numerator), name)
        )
        return f"{above}/{_whole(below)}"  # ms: a bare s beside a slash would look like the Laplace variable
    power = _power_of_thousand(value) if name else 0
    scaled = value / Fraction(10) ** power
    text = _decimal(scaled)
    return f"{text} {_WRITTEN_PREFIX[power]}{name}" if name else text


def _decimal_places(denominator: int) -> int | None:
    """The number of decimal places that 1/denominator needs, or None when no number of them is enough."""
    places = 0
    for prime in (2, 5):
        count = 0
        while denominator % prime == 0:
            denominator //= prime
            count += 1
        places = max(places, count)
    return places if denominator == 1 else None


def _decimal(value: Fraction) -> str:
    places = _decimal_places(value.denominator) or 0
    digits = _whole(abs(value.numerator) * (10**places // value.denominator)).rjust(places + 1, "0")
    zeros = len(digits) - len(digits.rstrip("0"))
    sign = "-" if value < 0 else ""
    if not places:
        # 1000000000000000 is hard to count: beyond a prefix's reach a power of ten is written.
        return (
            f"{sign}{digits}"
            if zeros < 6 or len(digits) > 90
            else f"{sign}{digits[: len(digits) - zeros]}e{zeros}"
        )
    whole, part = digits[: len(digits) - places], digits[len(digits) - places :].rstrip("0")
    leading = len(part) - len(part.lstrip("0"))
    if whole == "0" and leading >= 5 and len(part) <= 90:
        return f"{sign}{part.lstrip('0')}e-{len(part)}"
    return f"{sign}{whole}.{part}"


def _whole(number: int) -> str:
    if number.bit_length() > 3.3 * MOST_DIGITS:
        raise LimitError(
            Fault(f"a number has at most {MOST_DIGITS} digits", "round the value before writing it")
        )
    return str(number)
