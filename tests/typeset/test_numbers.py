"""Numbers for display, verbatim; rounding against the decimal module."""

from __future__ import annotations

import decimal
import math
from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.errors import UndefinedError
from symnet.typeset.numbers import Real, complex_quantity, plain_number, quantity


@pytest.mark.parametrize(
    ("value", "unit", "text", "shown", "latex"),
    [
        (14700, "ohm", "14.7 kohm", "14.7 kΩ", r"14.7\,\mathrm{k\Omega}"),
        (22e-9, "F", "22 nF", "22 nF", r"22\,\mathrm{nF}"),
        (Fraction(47, 10**10), "F", "4.7 nF", "4.7 nF", r"4.7\,\mathrm{nF}"),
        (4.7e-6, "F", "4.7 uF", "4.7 µF", r"4.7\,\mathrm{\mu F}"),
        (5032.921, "Hz", "5.033 kHz", "5.033 kHz", r"5.033\,\mathrm{kHz}"),
        (31622.8, "rad/s", "31.62 krad/s", "31.62 krad/s", r"31.62\,\mathrm{krad/s}"),
        (0, "ohm", "0 ohm", "0 Ω", r"0\,\mathrm{\Omega}"),
        (-0.0, "V", "0 V", "0 V", r"0\,\mathrm{V}"),
        (-3.0103, "dB", "-3.01 dB", "−3.01 dB", r"-3.01\,\mathrm{dB}"),
        (-72.2, "deg", "-72.2 deg", "−72.2°", r"-72.2^{\circ}"),
        (0.5, "%", "0.5 %", "0.5 %", r"0.5\,\mathrm{\%}"),
        (999.96, "Hz", "1 kHz", "1 kHz", r"1\,\mathrm{kHz}"),
        (0.99999, "ohm", "1 ohm", "1 Ω", r"1\,\mathrm{\Omega}"),
        (1e-30, "F", "1e-30 F", "1×10<sup>−30</sup> F", r"1\times 10^{-30}\,\mathrm{F}"),
        (2.5e18, "ohm", "2.5e18 ohm", "2.5×10<sup>18</sup> Ω", r"2.5\times 10^{18}\,\mathrm{\Omega}"),
        (3600, "s", "3600 s", "3600 s", r"3600\,\mathrm{s}"),
        (3e-4, "s", "300 us", "300 µs", r"300\,\mathrm{\mu s}"),
        (1e7, "s", "1e7 s", "1×10<sup>7</sup> s", r"1\times 10^{7}\,\mathrm{s}"),
        (1e7, "1/s", "1e7 1/s", "1×10<sup>7</sup> 1/s", r"1\times 10^{7}\,\mathrm{1/s}"),
        (0.707, "", "0.707", "0.707", "0.707"),
        (math.inf, "Hz", "infinite", "∞", r"\infty"),
        (-math.inf, "Hz", "-infinite", "−∞", r"-\infty"),
    ],
)
def test_quantities_verbatim(value: Real, unit: str, text: str, shown: str, latex: str) -> None:
    written = quantity(value, unit)
    assert written.text == str(written) == text
    assert written.html == shown
    assert written.latex == latex


def test_digits_and_padding() -> None:
    assert quantity(14647, "ohm", 3).text == "14.6 kohm"
    assert quantity(14650, "ohm", 3).text == "14.6 kohm"  # half to even
    assert quantity(866.0254, "Hz", 2).text == "870 Hz"
    assert quantity(22e-9, "F", pad=True).text == "22.00 nF"
    assert plain_number(0, pad=True).text == "0.000"
    assert plain_number(Fraction(2, 3), 6).text == "0.666667"


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (0.0001, "0.0001"),
        (0.00009999, "9.999e-5"),
        (999949.0, "999900"),
        (999950.0, "1e6"),
        (5e-324, "4.941e-324"),
        (1.7976931348623157e308, "1.798e308"),
        (Fraction(10**400), "1e400"),
        (Fraction(-1, 10**5000), "-1e-5000"),
    ],
)
def test_sizes(value: Real, text: str) -> None:
    assert plain_number(value).text == text


@pytest.mark.parametrize(
    "write", [plain_number, lambda x: quantity(x, "Hz"), lambda x: complex_quantity(complex(0, x))]
)
def test_what_is_no_number_is_refused(write: object) -> None:
    assert callable(write)
    with pytest.raises(UndefinedError, match=r"not a number|not finite"):
        write(math.nan)


def test_no_digits_is_refused() -> None:
    with pytest.raises(UndefinedError, match="0 significant digits"):
        plain_number(1.0, 0)


@pytest.mark.parametrize(
    ("value", "unit", "pair", "text"),
    [
        (-500 + 866.0254j, "rad/s", True, "-500 ± j866 rad/s"),
        (-500 - 866.0254j, "rad/s", True, "-500 ± j866 rad/s"),
        (-500 - 866.0254j, "rad/s", False, "-500 - j866 rad/s"),
        (-5000 + 8660.254j, "rad/s", True, "-5 ± j8.66 krad/s"),
        (866.0254j, "rad/s", True, "±j866 rad/s"),
        (-2j, "", False, "-j2"),
        (2j, "", False, "j2"),
        (complex(-3, 0), "rad/s", True, "-3 rad/s"),
        (complex(-3, -0.0), "", False, "-3"),
        (complex(-0.0, 1), "", False, "j1"),
        (0j, "ohm", False, "0 ohm"),
        (1227.5 - 867.3j, "ohm", False, "1.228 - j0.8673 kohm"),
        (-1e-9 + 1j, "", True, "-1e-9 ± j1"),
        (1e-30 + 1e-30j, "ohm", False, "1e-30 + j1e-30 ohm"),
    ],
)
def test_complex_verbatim(value: complex, unit: str, pair: bool, text: str) -> None:
    assert complex_quantity(value, unit, pair=pair).text == text


def test_complex_typeset() -> None:
    written = complex_quantity(-5000 + 8660.254j, "rad/s", pair=True)
    assert written.latex == r"-5 \pm \mathrm{j}8.66\,\mathrm{krad/s}"
    assert written.html == "−5 ± j8.66 krad/s"
    assert complex_quantity(-2j).latex == r"-\mathrm{j}2"
    assert complex_quantity(1 - 2j).html == "1 − j2"


@settings(deadline=None)
@given(st.floats(allow_nan=False, allow_infinity=False), st.integers(1, 12))
def test_rounding_is_that_of_exact_decimals(value: float, digits: int) -> None:
    """Law: the number shown is the exact value rounded half to even to so many significant digits."""
    context = decimal.Context(prec=digits, rounding=decimal.ROUND_HALF_EVEN, Emax=9999, Emin=-9999)
    expected = context.create_decimal(decimal.Decimal(value))
    text = plain_number(value, digits).text
    assert decimal.Decimal(text) == expected
    assert not text.startswith("-0 ")
    assert text != "-0"


PREFIX = {"f": -15, "p": -12, "n": -9, "u": -6, "m": -3, "": 0, "k": 3, "M": 6, "G": 9, "T": 12}


@settings(deadline=None)
@given(st.fractions(min_value=Fraction(1, 10**15), max_value=10**14).filter(bool))
def test_prefixes_leave_one_to_three_figures_before_the_point(value: Fraction) -> None:
    """Law: number times prefix is the rounded value, and the number lies from 1 up to 1000."""
    text = quantity(value, "ohm", 6).text
    shown, unit = text.split(" ")
    size = Fraction(shown)
    assert 1 <= size < 1000
    exact = size * Fraction(10) ** PREFIX[unit.removesuffix("ohm")]
    assert abs(exact - value) <= value / 2 / 10**5
