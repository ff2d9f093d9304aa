"""Every number is scaled by its unit, exactly, and what has none stays as it was typed."""

from __future__ import annotations

from decimal import Decimal
from fractions import Fraction

import pytest

import symnet as sn
from symnet.circuit.scaling import TWO_PI, Factors, frequency_factor, impedance_factor, scaled
from symnet.errors import DimensionError, NotationError
from symnet.quantities import AMPERE, FARAD, HENRY, HERTZ, NUMBER, OHM, SECOND, SIEMENS, VOLT, Dimension

TEN_AND_FIFTY = Factors(frequency=Fraction(10), impedance=Fraction(50))


def test_two_pi_is_right_to_its_last_digit() -> None:
    """Machin: pi/4 = 4 arctan(1/5) - arctan(1/239), summed in whole numbers with ten digits to spare."""

    def arctan_of_one_over(n: int, one: int) -> int:
        total, power, k = 0, one // n, 0
        while power:
            total += (-1) ** k * (power // (2 * k + 1))
            power //= n * n
            k += 1
        return total

    one = 10**40
    two_pi = 8 * (4 * arctan_of_one_over(5, one) - arctan_of_one_over(239, one))
    assert abs(TWO_PI - Fraction(two_pi, one)) <= Fraction(1, 2 * 10**29)


@pytest.mark.parametrize(
    ("dimension", "factor"),
    [
        (OHM, Fraction(50)),
        (HENRY, Fraction(5)),
        (FARAD, Fraction(1, 500)),
        (SIEMENS, Fraction(1, 50)),
        (SECOND, Fraction(1, 10)),
        (HERTZ, Fraction(10)),
        (NUMBER, Fraction(1)),
        (VOLT, Fraction(1)),
        (AMPERE, Fraction(1, 50)),
        (OHM * OHM * SECOND, Fraction(250)),
    ],
    ids=str,
)
def test_a_quantity_scales_as_its_unit(dimension: Dimension, factor: Fraction) -> None:
    """ohm^a * s^b scales by k_z^a * k_f^-b (textbook rule; voltages are kept)."""
    assert TEN_AND_FIFTY.of(dimension) == factor


def test_all_kinds_of_values() -> None:
    drawing = """
        in -- R1 -- b -- R2 -- gnd
        b -- C1 -- c -- C2 -- gnd
        c -- L1 -- d -- Z1 -- gnd
        push into b = gm*(in - c)/(1 + s*tau)
        hold e = A*w1/(w1 + s)*b + r*i_R1
        e -- R3 -- gnd
        drive in
        read c
        C1 = 2*C2
        L1 = R1^2*C2
        gm = IC/VT
        VT = 25 mV
        A = 100
    """
    before = "R1 = 1 kohm ±1%; R2 = R1 + 100 ohm; Z1 = 1/(1/R1 + s*3 nF); IC = 1 mA; tau = 1 us; w1 = 2 krad/s; r = 3 ohm"
    after = "R1 = 50 kohm ±1%; R2 = R1 + 5 kohm; Z1 = 1/(1/R1 + s*6 pF); IC = 20 uA; tau = 100 ns; w1 = 20 krad/s; r = 150 ohm"
    assert scaled(sn.network(drawing + before), TEN_AND_FIFTY) == sn.network(drawing + after)


def test_numbers_with_a_unit_in_laws_and_reads() -> None:
    net = sn.network(
        "in -- R1 -- a -- R2 -- gnd; push into a = 3 mS*in/(1 + s*2 us); drive in; read i_R1*10 ohm"
    )
    assert scaled(net, TEN_AND_FIFTY).to_text().splitlines() == [
        "in -- R1 -- a -- R2 -- gnd",
        "push into a = 60 uS*in/(1 + s*200 ns)",
        "drive in",
        "read i_R1*500 ohm",
    ]


def test_the_text_of_a_scaled_network_reads_back() -> None:
    """Also with the thirty digits of 2 pi in every value."""
    net = sn.network("in -- R1 -- a -- L1 -- out -- C1 -- gnd; R1, L1 = 1; C1 = 2 ±5%; drive in; read out")
    found = scaled(net, Factors(frequency_factor("10 MHz"), impedance_factor(50)))
    assert sn.network(found.to_text()) == found


@pytest.mark.parametrize(
    ("given", "factor"),
    [
        (None, Fraction(1)),
        (10, Fraction(10)),
        (0.1, Fraction(1, 10)),
        (Decimal("2.5"), Fraction(5, 2)),
        (Fraction(1, 3), Fraction(1, 3)),
        ("10", Fraction(10)),
        ("2 krad/s", Fraction(2000)),
        ("1 Hz", TWO_PI),
        ("10 MHz", TWO_PI * 10**7),
        (("1 kHz", "10 kHz"), Fraction(10)),
        (("1 krad/s", "1 kHz"), TWO_PI),
        ((3, 4), Fraction(4, 3)),
    ],
    ids=repr,
)
def test_frequency_factor(given: object, factor: Fraction) -> None:
    assert frequency_factor(given) == factor  # type: ignore[arg-type] # every kind that is allowed


def test_impedance_factor() -> None:
    assert (
        impedance_factor("50 ohm") == impedance_factor(50) == impedance_factor(("600 ohm", "30 kohm")) == 50
    )


@pytest.mark.parametrize(
    ("given", "said"),
    [
        (0, "has to be positive"),
        ("-1 kHz", "has to be positive"),
        (float("inf"), "not a finite number"),
        (Decimal("NaN"), "not a finite number"),
        (True, "cannot be read from bool"),
        (1j, "cannot be read from complex"),
        ((1, 2, 3), "3 values"),
        ("fast", "not a quantity"),
    ],
    ids=repr,
)
def test_what_is_no_factor(given: object, said: str) -> None:
    with pytest.raises(NotationError, match=said):
        frequency_factor(given)  # type: ignore[arg-type] # what a user may try


@pytest.mark.parametrize("given", ["3 ohm", ("1 kHz", 10)], ids=repr)
def test_another_unit_is_no_frequency(given: str) -> None:
    with pytest.raises(DimensionError):
        frequency_factor(given)


def test_another_unit_is_no_impedance() -> None:
    with pytest.raises(DimensionError, match="10 MHz is in"):
        impedance_factor("10 MHz")
