"""Quantities: units, codes of IEC 60062, engineering notation, and the way back."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from symnet.errors import DimensionError, LimitError, NotationError
from symnet.quantities import (
    AMPERE,
    FARAD,
    HENRY,
    HERTZ,
    NUMBER,
    OHM,
    SECOND,
    SIEMENS,
    VOLT,
    WRITTEN_UNITS,
    Dimension,
    Quantity,
    engineering,
    in_words,
    read_code,
    read_number,
    read_quantity,
    read_unit,
    spread_code,
    unit_hint,
)
from tests.circuit.strategies import patient

powers = st.integers(-4, 4)
dimensions = st.builds(Dimension, powers, powers, powers)
values = st.one_of(
    st.builds(Fraction, st.integers(-(10**9), 10**9), st.integers(1, 10**6)),
    st.builds(lambda m, e: m * Fraction(10) ** e, st.integers(-99_999, 99_999), st.integers(-30, 30)),
)


class TestDimension:
    @pytest.mark.parametrize(
        ("dimension", "text"),
        [
            (NUMBER, "1"),
            (OHM, "ohm"),
            (FARAD, "F"),
            (HENRY, "H"),
            (SIEMENS, "S"),
            (VOLT, "V"),
            (AMPERE, "A"),
            (SECOND, "s"),
            (HERTZ, "1/s"),
            (OHM * SECOND, "H"),
            (OHM * FARAD, "s"),
            (OHM**2, "ohm^2"),
            (OHM * SECOND**2, "ohm*s^2"),
            (SECOND**2, "s^2"),
            (SECOND**-2, "1/s^2"),
            (VOLT / SECOND, "V/s"),
            (VOLT**2 / AMPERE, "ohm*V"),
            (AMPERE**2 / VOLT, "S*A"),
            (VOLT * AMPERE, "V*A"),
            (SIEMENS / VOLT, "S/V"),
            (NUMBER / (VOLT * SECOND), "1/V/s"),
        ],
    )
    def test_text(self, dimension: Dimension, text: str) -> None:
        assert str(dimension) == text

    @patient
    @given(dimensions)
    def test_text_says_the_dimension(self, dimension: Dimension) -> None:
        # Law: multiplying out the units of the text gives the dimension again.
        total = NUMBER
        for place, group in enumerate(str(dimension).split("/")):
            for factor in group.split("*"):
                unit, _, power = factor.partition("^")
                known = NUMBER if unit == "1" else read_unit(unit)[1] if read_unit(unit) else None  # type: ignore[index]
                assert known is not None
                total = total * known ** (int(power or 1) * (-1 if place else 1))
        assert total == dimension

    @patient
    @given(dimensions, dimensions, powers)
    def test_group_laws(self, one: Dimension, two: Dimension, power: int) -> None:
        assert one * two / two == one
        assert (one * two) ** power == one**power * two**power

    def test_in_words(self) -> None:
        assert in_words(NUMBER) == "a number"
        assert in_words(OHM) == "ohm"


class TestReading:
    @pytest.mark.parametrize(
        ("text", "value"),
        [("4.7e-9", "47e-10"), ("-3", "-3"), ("+.5", "0.5"), ("5.", "5"), ("1E3", "1000"), ("0", "0")],
    )
    def test_number(self, text: str, value: str) -> None:
        assert read_number(text) == Fraction(value)

    @pytest.mark.parametrize("text", ["", "a", "1e", "--1", "1 2", "0x10", "inf", "nan", "1_0", "\u0661"])
    def test_no_number(self, text: str) -> None:
        with pytest.raises(NotationError, match="is not a number"):
            read_number(text)

    def test_limits(self) -> None:
        assert read_number("9" * 1000) == Fraction(10**1000 - 1)
        with pytest.raises(LimitError, match="at most 1000 digits"):
            read_number("9" * 1001)
        assert read_number("1e99") == Fraction(10**99)
        with pytest.raises(LimitError, match="between -99 and 99"):
            read_number("1e-100")
        with pytest.raises(LimitError, match="between -99 and 99"):
            read_number("1e" + "9" * 10_000)

    @pytest.mark.parametrize(
        ("unit", "factor", "dimension"),
        [
            ("ohm", "1", OHM),
            ("kohm", "1e3", OHM),
            ("Kohm", "1e3", OHM),
            ("MOhm", "1e6", OHM),
            ("k\u03a9", "1e3", OHM),
            ("k\u2126", "1e3", OHM),
            ("mohm", "1e-3", OHM),
            ("Gohm", "1e9", OHM),
            ("Tohm", "1e12", OHM),
            ("pF", "1e-12", FARAD),
            ("fF", "1e-15", FARAD),
            ("uF", "1e-6", FARAD),
            ("\u00b5F", "1e-6", FARAD),
            ("\u03bcH", "1e-6", HENRY),
            ("nH", "1e-9", HENRY),
            ("mS", "1e-3", SIEMENS),
            ("mA/V", "1e-3", SIEMENS),
            ("kV/A", "1e3", OHM),
            ("V/V", "1", NUMBER),
            ("MHz", "1e6", HERTZ),
            ("krad/s", "1e3", HERTZ),
            ("rad/s", "1", HERTZ),
            ("us", "1e-6", SECOND),
            ("s", "1", SECOND),
            ("mV", "1e-3", VOLT),
            ("A", "1", AMPERE),
            ("k", "1e3", NUMBER),
            ("K", "1e3", NUMBER),
            ("m", "1e-3", NUMBER),
            ("M", "1e6", NUMBER),
        ],
    )
    def test_unit(self, unit: str, factor: str, dimension: Dimension) -> None:
        assert read_unit(unit) == (Fraction(factor), dimension)

    @pytest.mark.parametrize("unit", ["KF", "KHz", "nf", "hz", "R", "kk", "ppF", "", "e", "dB", "R1", "MEG"])
    def test_no_unit(self, unit: str) -> None:
        assert read_unit(unit) is None

    @pytest.mark.parametrize(
        ("word", "meant"),
        [
            ("nf", "nF"),
            ("KHZ", "kHz"),
            ("khz", "kHz"),
            ("KF", "kF"),
            ("OHM", "ohm"),
            ("kOHM", "kohm"),
            ("Meg", "M"),
            ("megohm", "Mohm"),
            ("Megohms", "Mohm"),
            ("farad", "F"),
            ("ufarad", "uF"),
            ("sec", "s"),
            ("msec", "ms"),
            ("mv", "mV"),
            ("R1", ""),
            ("zz", ""),
        ],
    )
    def test_unit_hint(self, word: str, meant: str) -> None:
        assert unit_hint(word) == meant

    @pytest.mark.parametrize(
        ("text", "dimension", "shown"),
        [
            # IEC 60062: the letter stands for the decimal point and the multiplier.
            ("4K7", OHM, "4.7 kohm"),
            ("4k7", OHM, "4.7 kohm"),
            ("2R2", OHM, "2.2 ohm"),
            ("47R", OHM, "47 ohm"),
            ("1M", OHM, "1 Mohm"),
            ("3G3", OHM, "3.3 Gohm"),
            ("100n", FARAD, "100 nF"),
            ("4u7", FARAD, "4.7 uF"),
            ("4\u00b57", FARAD, "4.7 uF"),
            ("3p3", FARAD, "3.3 pF"),
            ("2m2", FARAD, "2.2 mF"),
            ("4F7", FARAD, "4.7 F"),
            ("4R7", FARAD, "4.7 ohm"),
            ("4k7", None, "4700"),
            ("4K7", None, "4700"),
        ],
    )
    def test_code(self, text: str, dimension: Dimension | None, shown: str) -> None:
        assert str(read_code(text, dimension)) == shown

    def test_codes_that_begin_with_the_letter(self) -> None:
        assert read_code("R47", OHM) is None
        assert read_code("R47", OHM, leading=True) == Quantity(Fraction(47, 100), OHM)
        assert read_code("M47", OHM, leading=True) == Quantity(Fraction(470_000), OHM)
        assert spread_code("M47") == "0.47 M"

    @pytest.mark.parametrize(
        "text", ["k", "4.7k2", "4kk7", "4E7", "4f7", "", "47", "4k7 ", "4L7", "\u0664k7"]
    )
    def test_no_code(self, text: str) -> None:
        assert read_code(text, OHM) is None

    @pytest.mark.parametrize(
        ("text", "dimension", "value"),
        [
            ("20 kHz", HERTZ, "20000"),
            ("20kHz", None, "20000"),
            (" 600 ohm ", OHM, "600"),
            ("600", OHM, "600"),
            ("4k7", OHM, "4700"),
            ("100n", FARAD, "1e-7"),
            ("\u22125 V", VOLT, "-5"),
            ("4.7\u00a0k\u03a9", OHM, "4700"),
            ("3", None, "3"),
        ],
    )
    def test_quantity(self, text: str, dimension: Dimension | None, value: str) -> None:
        found = read_quantity(text, dimension)
        assert found.value == Fraction(value)
        assert dimension is None or found.dimension == dimension

    @pytest.mark.parametrize(
        ("text", "message"),
        [
            ("", "'' is not a quantity"),
            ("ohm", "'ohm' is not a quantity"),
            ("5 nf", "'nf' is not a unit\n    did you mean nF?"),
            ("5 parsec", "'parsec' is not a unit\n    units: ohm, F, H, S, Hz, s, V, A, rad/s"),
            ("__import__('os')", "is not a quantity"),
            ("5" + "x" * 99, r"'x{37}\.\.\.' is not a unit"),
            ("5 \x07", r"'\?' is not a unit"),
        ],
    )
    def test_no_quantity(self, text: str, message: str) -> None:
        with pytest.raises(NotationError, match=message.replace("?", r"\?").replace(r"\\?", r"\?")):
            read_quantity(text)

    def test_another_dimension(self) -> None:
        with pytest.raises(DimensionError, match="20 kHz is in 1/s; s is needed here"):
            read_quantity("20 kHz", SECOND)
        with pytest.raises(DimensionError, match="5 V is in V; a number is needed here"):
            read_quantity("5 V", NUMBER)


class TestEngineering:
    @pytest.mark.parametrize(
        ("value", "dimension", "text"),
        [
            ("4700", OHM, "4.7 kohm"),
            ("22e-9", FARAD, "22 nF"),
            ("0.01", HENRY, "10 mH"),
            ("33657", OHM, "33.66 kohm"),
            ("-33657", OHM, "-33.66 kohm"),
            ("999.96", OHM, "1 kohm"),
            ("999.94", OHM, "999.9 ohm"),
            ("999960", OHM, "1 Mohm"),
            ("0", OHM, "0 ohm"),
            ("1e-18", FARAD, "0.001 fF"),
            ("1e-25", FARAD, "1e-10 fF"),
            ("5e17", OHM, "500000 Tohm"),
            ("5e22", OHM, "5e10 Tohm"),
            ("1000", HERTZ, "1 kHz"),
            ("3", NUMBER, "3"),
            ("12345678", NUMBER, "1.235e7"),
            ("0.00001234", NUMBER, "0.00001234"),
            ("0.000001234", NUMBER, "1.234e-6"),
            ("4700", OHM * OHM, "4700 ohm^2"),
            ("2/3", NUMBER, "0.6667"),
        ],
    )
    def test_text(self, value: str, dimension: Dimension, text: str) -> None:
        assert engineering(Fraction(value), dimension) == text
        assert str(Quantity(Fraction(value), dimension)) == text

    def test_digits_and_units(self) -> None:
        assert engineering(Fraction("123456"), OHM, digits=2) == "120 kohm"
        assert engineering(Fraction("6283.185"), HERTZ, digits=7, unit="rad/s") == "6.283185 krad/s"

    def test_ties_go_to_the_even_digit(self) -> None:
        assert engineering(Fraction("1.0005"), OHM) == "1 ohm"
        assert engineering(Fraction("1.0015"), OHM) == "1.002 ohm"
        assert engineering(Fraction("1.0005") + Fraction(1, 10**40), OHM) == "1.001 ohm"

    @pytest.mark.parametrize(
        ("value", "dimension", "text"),
        [
            ("4700", OHM, "4.7 kohm"),
            ("1/3", OHM, "1 ohm/3"),
            ("22/7", NUMBER, "22/7"),
            ("1/3", SECOND, "1000 ms/3"),
            ("123456789/1000", OHM, "123.456789 kohm"),
            ("1e20", NUMBER, "1e20"),
            ("1e-20", NUMBER, "1e-20"),
            ("1.5e-20", NUMBER, "15e-21"),
            ("0.00123", NUMBER, "0.00123"),
            ("-1e30", OHM, "-1e18 Tohm"),
        ],
    )
    def test_exact(self, value: str, dimension: Dimension, text: str) -> None:
        assert engineering(Fraction(value), dimension, exact=True) == text

    @patient
    @given(values, st.sampled_from([*WRITTEN_UNITS, NUMBER]))
    def test_exact_text_reads_back(self, value: Fraction, dimension: Dimension) -> None:
        # Law: what is written exactly is read as the same fraction; a quotient is divided by hand.
        text, _, below = engineering(value, dimension, exact=True).partition("/")
        found = read_quantity(text)
        assert (found.value / int(below or 1), found.dimension) == (value, dimension)

    @patient
    @given(values, st.integers(1, 12))
    def test_rounding_is_right(self, value: Fraction, digits: int) -> None:
        # Law: the text is within half a unit of its last significant digit.
        found = read_quantity(engineering(value, OHM, digits=digits)).value
        assert abs(found - value) * 2 * 10 ** (digits - 1) <= abs(value) * Fraction(1000, 999)

    def test_too_long_to_write(self) -> None:
        with pytest.raises(LimitError, match="at most 1000 digits"):
            engineering(Fraction(3**3000, 7**3000), OHM, exact=True)
