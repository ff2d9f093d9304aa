r"""Numbers for display: a stated number of significant digits, prefixes that engineers use, the unit beside it.

Rounding is done on the exact value (a float is the fraction it stands for), half to even, so that what is shown
is the nearest decimal and 999.96 becomes 1 k and not 1000. Text stays typeable: ``u`` for micro and ``ohm``;
LaTeX and HTML have the proper signs. The text of exact values that is read back belongs to
:mod:`symnet.quantities`; what is written here is rounded.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from fractions import Fraction
from typing import Final, TypeAlias

from symnet.errors import Fault, UndefinedError
from symnet.quantities import PREFIXES
from symnet.typeset.names import escape_html, escape_latex

__all__ = ["DIGITS", "Real", "Written", "complex_quantity", "plain_number", "quantity"]

Real: TypeAlias = int | float | Fraction

#: Significant digits unless something else is asked for.
DIGITS: Final = 4

# Power of ten -> prefix; the typeable one comes first where there are several.
_PREFIXES: Final[dict[int, str]] = {exponent: prefix for prefix, exponent in reversed(PREFIXES.items())} | {
    0: ""
}
# Units that take a prefix, and the largest one that anybody writes with them.
_LARGEST_PREFIX: Final[dict[str, int]] = {
    "ohm": 12,
    "F": 0,
    "H": 3,
    "S": 3,
    "V": 6,
    "A": 6,
    "V/rtHz": 6,
    "A/rtHz": 6,
    "W": 9,
    "Hz": 12,
    "rad/s": 12,
    "s": 0,
}
# Numbers are written without a power of ten between these powers of ten.
_LOWEST_FIXED, _HIGHEST_FIXED = -4, 6


@dataclass(frozen=True, slots=True)
class Written:
    """A number as it is shown, in all three forms.

    ``latex`` is for mathematics (without dollar signs), ``html`` is escaped; ``str()`` gives the text.
    """

    text: str
    latex: str
    html: str

    def __str__(self) -> str:
        return self.text


#: A unit that ends in a power, such as s^3.
_POWER_IN_UNIT: Final = re.compile(r"\^-?\d+$")


def plain_number(value: Real, digits: int = DIGITS, *, pad: bool = False) -> Written:
    r"""A number without unit: digits, or digits and a power of ten when it is below 1e-4 or from 1e6 on.

    ``pad`` keeps zeros at the end, so that a column of numbers has equal digits. Infinity is written
    ``infinite``; raises :class:`~symnet.errors.UndefinedError` for a float that is no number.

    >>> [str(plain_number(x)) for x in (0.31622776, -0.0, 2.0, 1e-30, 123456.7, Fraction(1, 3))]
    ['0.3162', '0', '2', '1e-30', '123500', '0.3333']
    >>> print(plain_number(-1.5e-9).latex, plain_number(1.5, digits=3, pad=True))
    -1.5\times 10^{-9} 1.50
    """
    if (endless := _endless(value)) is not None:
        return endless
    sign, figures, exponent = _rounded(value, digits)
    if not pad:
        figures = figures.rstrip("0") or "0"
    if figures == "0" or _LOWEST_FIXED <= exponent < _HIGHEST_FIXED:
        return _signed(sign, _fixed(figures, exponent))
    mantissa = _fixed(figures, 0)
    return Written(
        f"{sign}{mantissa}e{exponent}",
        rf"{sign}{mantissa}\times 10^{{{exponent}}}",
        f"{_html_sign(sign)}{mantissa}×10<sup>{str(exponent).replace('-', '−')}</sup>",
    )


def quantity(value: Real, unit: str, digits: int = DIGITS, *, pad: bool = False) -> Written:
    r"""A number with its unit, with a prefix where the unit takes one (ohm, F, H, S, V, A, W, Hz, rad/s, s, V/rtHz).

    Other units (dB, deg, %, 1/s, V/V) are written beside the plain number. Raises
    :class:`~symnet.errors.UndefinedError` for a float that is no number.

    >>> [str(quantity(*x)) for x in ((14700, "ohm"), (22e-9, "F"), (5032.92, "Hz"), (31623, "rad/s"), (-3.0103, "dB"))]
    ['14.7 kohm', '22 nF', '5.033 kHz', '31.62 krad/s', '-3.01 dB']
    >>> shown = quantity(4.7e-6, "F")
    >>> print(shown.text, shown.html, shown.latex)
    4.7 uF 4.7 µF 4.7\,\mathrm{\mu F}
    """
    if (endless := _endless(value)) is not None:
        return endless
    sign, figures, exponent = _rounded(value, digits)
    step = 0 if figures.strip("0") == "" else 3 * (exponent // 3)
    if unit in _LARGEST_PREFIX and step in _PREFIXES:
        step = min(step, _LARGEST_PREFIX[unit])
        number = _fixed(figures if pad else figures.rstrip("0") or "0", exponent - step)
        if exponent - step < _HIGHEST_FIXED:
            return _beside(_signed(sign, number), _PREFIXES[step], unit)
    return _beside(plain_number(value, digits, pad=pad), "", unit)


def complex_quantity(value: complex, unit: str = "", digits: int = DIGITS, *, pair: bool = False) -> Written:
    r"""A complex number as real part and j times imaginary part, both with the same prefix.

    With ``pair`` it stands for itself and its conjugate, with one sign for both. A part that is zero is not
    written. Raises :class:`~symnet.errors.UndefinedError` for what is no number or infinite.

    >>> print(complex_quantity(-500 + 866.0254j, "rad/s", pair=True))
    -500 ± j866 rad/s
    >>> print(complex_quantity(1227.5 - 867.3j, "ohm"), "|", complex_quantity(2j), "|", complex_quantity(-3 + 0j))
    1.228 - j0.8673 kohm | j2 | -3
    >>> print(complex_quantity(-500 + 866.0254j, "rad/s", pair=True).latex)
    -500 \pm \mathrm{j}866\,\mathrm{rad/s}
    """
    if not (math.isfinite(value.real) and math.isfinite(value.imag)):
        raise UndefinedError(Fault("this complex number is not finite, so that there is nothing to write"))
    larger = max(abs(value.real), abs(value.imag))
    step = 0
    if larger and unit in _LARGEST_PREFIX:
        step = min(3 * (_rounded(larger, digits)[2] // 3), _LARGEST_PREFIX[unit])
        step = step if step in _PREFIXES else 0
    scale = Fraction(10) ** step
    imaginary = plain_number(abs(Fraction(value.imag)) / scale, digits)
    if value.imag == 0:
        return _beside(plain_number(Fraction(value.real) / scale, digits), _PREFIXES[step], unit)
    if value.real == 0:
        real = Written("", "", "")
        text, latex, html = (
            ("±", r"\pm ", "±") if pair else ("-", "-", "−") if value.imag < 0 else ("", "", "")
        )
    else:
        real = plain_number(Fraction(value.real) / scale, digits)
        text, latex, html = (
            (" ± ", r" \pm ", " ± ") if pair else (" - ", " - ", " − ") if value.imag < 0 else (" + ",) * 3
        )
    body = Written(
        f"{real.text}{text}j{imaginary.text}",
        rf"{real.latex}{latex}\mathrm{{j}}{imaginary.latex}",
        f"{real.html}{html}j{imaginary.html}",
    )
    return _beside(body, _PREFIXES[step], unit)


def _endless(value: Real) -> Written | None:
    """Infinity as a word; None for a finite number."""
    if isinstance(value, (int, Fraction)) or math.isfinite(value):
        return None
    if math.isnan(value):
        raise UndefinedError(Fault("this value is not a number, so that there is nothing to write"))
    return Written("infinite", r"\infty", "∞") if value > 0 else Written("-infinite", r"-\infty", "−∞")


def _rounded(value: Real, digits: int) -> tuple[str, str, int]:
    """Sign, ``digits`` figures and the power of ten of the first one; figures all zero for zero."""
    if digits < 1:
        raise UndefinedError(
            Fault(f"a number cannot be written with {digits} significant digits", "give 1 or more")
        )
    exact = Fraction(value)
    if not exact:
        return "", "0" * digits, 0
    size = abs(exact)
    # The logarithm may be off by one at a power of ten; the comparison is exact.
    exponent = math.floor(math.log10(size.numerator) - math.log10(size.denominator))
    while size >= Fraction(10) ** (exponent + 1):
        exponent += 1
    while size < Fraction(10) ** exponent:
        exponent -= 1
    figures = round(size * Fraction(10) ** (digits - 1 - exponent))
    if figures == 10**digits:
        figures, exponent = figures // 10, exponent + 1
    return "-" if exact < 0 else "", str(figures), exponent


def _fixed(figures: str, exponent: int) -> str:
    """Figures with the decimal point where it belongs; ``exponent`` is the power of ten of the first one."""
    if exponent < 0:
        return "0." + "0" * (-exponent - 1) + figures
    whole = figures[: exponent + 1].ljust(exponent + 1, "0")
    rest = figures[exponent + 1 :]
    return f"{whole}.{rest}" if rest else whole


def _signed(sign: str, number: str) -> Written:
    return Written(sign + number, sign + number, _html_sign(sign) + number)


def _html_sign(sign: str) -> str:
    return "−" if sign else ""


def _beside(number: Written, prefix: str, unit: str) -> Written:
    """The number, a space and the unit with its prefix."""
    if not unit:
        return number
    if unit == "deg":
        return Written(f"{number.text} deg", rf"{number.latex}^{{\circ}}", f"{number.html}°")
    # In a typeset unit, ohm, micro and the root have their signs.
    micro = prefix == "u"
    plain = _POWER_IN_UNIT.sub("", unit)
    power = unit[len(plain) + 1 :] if plain != unit else ""
    latex = (r"\mu " if micro else prefix) + escape_latex(plain).replace("ohm", r"\Omega ").replace(
        "rtHz", r"\sqrt{Hz}"
    ).strip()
    html = ("µ" if micro else prefix) + escape_html(plain).replace("ohm", "Ω").replace("rtHz", "√Hz")
    if power:
        latex, html = f"{latex}^{{{power}}}", f"{html}<sup>{power}</sup>"
    return Written(
        f"{number.text} {prefix}{unit}", rf"{number.latex}\,\mathrm{{{latex}}}", f"{number.html} {html}"
    )
