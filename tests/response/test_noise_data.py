"""What is typed about noise, and every way to get it wrong."""

from __future__ import annotations

from fractions import Fraction

import pytest

from symnet.errors import DimensionError, NotationError
from symnet.quantities import VOLT
from symnet.response.noise_data import (
    Amplifier,
    Band,
    Signal,
    read_amplifier,
    read_band,
    read_signal,
    read_temperature,
)


def test_an_amplifier_in_the_words_of_its_data_sheet() -> None:
    found = read_amplifier("en = 5 nV/rtHz, in = 1 pA/rtHz, corner = 100 Hz")
    n, p = Fraction("5e-9"), Fraction("1e-12")
    assert found == Amplifier(n, p, p, Fraction(100), Fraction(100))
    assert read_amplifier("en=5nV/sqrt(Hz); in_plus=1pA/\u221aHz; en_corner=100") == Amplifier(
        n, p, Fraction(0), Fraction(100)
    )


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("en = 5 nV", "is no noise density"),
        ("en 5 nV/rtHz", "name, = and value are needed"),
        ("e_n = 5 nV/rtHz", "did you mean en"),
        ("en = 5 nA/rtHz", "is in A"),
        ("en = -5 nV/rtHz", "is negative"),
        ("en = 5 nV/rtHz, en = 4 nV/rtHz", "given twice"),
        ("in = 1 pA/rtHz, in_plus = 2 pA/rtHz", "given twice"),
        ("corner = 100 Hz", "no noise is given"),
        ("", "no noise is given"),
        ("en = many nV/rtHz", "is not a quantity"),
        ("en = 5 nV/rtHz, corner = 3 s", "is in s"),
    ],
)
def test_faults_of_an_amplifier(text: str, message: str) -> None:
    with pytest.raises(NotationError, match=message):
        read_amplifier(text)


def test_the_place_of_a_fault_is_shown() -> None:
    with pytest.raises(NotationError) as caught:
        read_amplifier("en = 5 nV/rtHz, inn = 1 pA/rtHz")
    assert "line 1, column 17" in str(caught.value)
    assert "did you mean in" in str(caught.value)


def test_temperatures() -> None:
    assert read_temperature("300 K") == read_temperature(300) == read_temperature("300") == 300
    assert read_temperature("-40 degC") == Fraction("233.15")
    assert read_temperature("25\u00b0C") == Fraction("298.15")
    for wrong in ("-1 K", "-274 degC", "warm", "300 F"):
        with pytest.raises(NotationError):
            read_temperature(wrong)


def test_bands() -> None:
    assert read_band("20 Hz to 20 kHz") == Band(Fraction(20), Fraction(20000))
    assert read_band("from 20 Hz to 20 kHz") == Band(Fraction(20), Fraction(20000))
    assert read_band("up to 1 MHz") == Band(Fraction(0), Fraction(1000000))
    assert read_band("from 0.1 Hz") == Band(Fraction(1, 10), None)
    in_radians = read_band("up to 1 rad/s").high
    assert in_radians is not None
    assert float(in_radians) == pytest.approx(0.15915494309189535, rel=1e-15)
    for wrong in ("", "20 kHz to 20 Hz", "20 Hz to", "20 Hz", "20 V to 30 V", "from", "up to"):
        with pytest.raises((NotationError, DimensionError)):
            read_band(wrong)


def test_signals() -> None:
    assert read_signal("1 V", VOLT) == Signal(Fraction(1))
    assert read_signal("1 V rms at 50 Hz", VOLT) == Signal(Fraction(1), Fraction(50))
    with pytest.raises(NotationError, match="rms value"):
        read_signal("0 V", VOLT)
    with pytest.raises(DimensionError):
        read_signal("1 A", VOLT)
