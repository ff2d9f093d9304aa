"""Magnitude, phase and delay over frequency, against plain complex arithmetic and known curves."""

from __future__ import annotations

import math
from fractions import Fraction

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.circuit.build import network
from symnet.errors import MissingValueError, UndefinedError
from symnet.exact.derive import derive
from symnet.exact.ratio import Ratio
from symnet.response.frequency import decibels, delay_over_square, group_delay, phase, squared_magnitude

CUBIC = Ratio.of([1], [1, 2, 2, 1])
BESSEL_3 = Ratio.of([15], [15, 15, 6, 1])


def test_normalised_cubic() -> None:
    # Butterworth 3 at w0 = 1: -45 degrees at (3 - sqrt 5)/2, -135 at 1, -225 at the reciprocal, -270 at infinity;
    # -3.0103 dB at 1 (common practice, no source)
    golden = (3 - math.sqrt(5)) / 2
    assert phase(CUBIC, [0.0, golden, 1.0, 1 / golden, 1e12]) == pytest.approx(
        [0, -45, -135, -225, -270], abs=1e-9
    )
    assert decibels(CUBIC, 1.0) == pytest.approx(-3.0103, abs=5e-5)
    assert squared_magnitude(CUBIC) == Ratio.of([1], [1, 0, 0, 1])


def test_delay_of_the_normalised_cubic() -> None:
    # 2/w0 at DC, 2.742862/w0 at 0.817331 w0 (common practice, no source)
    assert delay_over_square(CUBIC).at(Fraction(0)) == 2
    assert group_delay(CUBIC, 0.0) == 2.0
    assert group_delay(CUBIC, 0.817331) == pytest.approx(2.742862, abs=5e-7)


def test_delay_of_bessel_3() -> None:
    # unit delay: 1.0000, 0.9964, 0.8867 at w = 0, 1, 2 (common practice, no source)
    assert group_delay(BESSEL_3, [0.0, 1.0, 2.0]) == pytest.approx([1.0, 0.9964, 0.8867], abs=5e-5)
    assert delay_over_square(BESSEL_3).at(Fraction(0)) == 1


def test_two_rc_sections_at_1_khz() -> None:
    # 1 kohm, 100 nF twice: -72.20 degrees; the product of two single sections has -64.28 (recomputed)
    h = derive(network(
        "in -- R1 -- x -- R2 -- out; x -- C1 -- gnd; out -- C2 -- gnd; drive in; read out;"
        "R1, R2 = 1 kohm; C1, C2 = 100 nF"
    ))  # fmt: skip
    assert phase(h, 2000 * math.pi) == pytest.approx(-72.20, abs=5e-3)
    assert 10 ** (decibels(h, 2000 * math.pi) / 20) == pytest.approx(0.5051, abs=5e-5)


@pytest.mark.parametrize(
    ("num", "den", "w", "degrees"),
    [
        ([1], [0, 0, 0, 1], 5.0, -270.0),  # 1/s^3
        ([0, 0, 1], [1], 5.0, 180.0),  # s^2
        ([-3], [1], 5.0, -180.0),  # inverting
        ([0, -1], [1], 5.0, -90.0),  # inverting differentiator
        ([1], [1, 1], 1.0, -45.0),
        ([1, 1], [1], 1.0, 45.0),
        ([1, -1], [1, 1], 1.0, -90.0),  # all-pass: zero on the right
        ([1], [1, -1], 1.0, 45.0),  # pole on the right
        ([1, 0, 1], [1], 0.999, 0.0),  # zero pair on the axis
        ([1, 0, 1], [1], 1.0, 90.0),  # half of the jump
        ([1, 0, 1], [1], 1.001, 180.0),
        ([1], [1, 0, 1], 1.001, -180.0),  # pole pair on the axis
        ([1], [1, 0, 2, 0, 1], 1.001, -360.0),  # a double pair
        ([1], [1, 3, 3, 1], 1.0, -135.0),  # triple pole
    ],
)
def test_phase_convention(num: list[int], den: list[int], w: float, degrees: float) -> None:
    assert phase(Ratio.of(num, den), w) == pytest.approx(degrees, abs=1e-9)


def test_shapes_follow_the_argument() -> None:
    assert isinstance(phase(CUBIC, 1.0), float)
    assert isinstance(group_delay(CUBIC, 1), float)
    assert isinstance(decibels(CUBIC, 1), float)
    grid = np.array([[1.0, 2.0], [3.0, 4.0]])
    assert phase(CUBIC, grid).shape == group_delay(CUBIC, grid).shape == decibels(CUBIC, grid).shape == (2, 2)


def test_refusals() -> None:
    with pytest.raises(UndefinedError, match="H = 0"):
        phase(Ratio.of([], [1]), 1.0)
    with pytest.raises(UndefinedError, match="H = 0"):
        delay_over_square(Ratio.of([], [1]))
    with pytest.raises(UndefinedError, match="below 0"):
        group_delay(CUBIC, [-1.0, 1.0])
    with pytest.raises(MissingValueError, match="R1"):
        phase(derive(network("in -- R1 -- out -- C1 -- gnd; drive in; read out; C1 = 1 nF")), 1.0)


def test_order_forty_is_continuous() -> None:
    """Forty equal poles turn by 40 * 90 degrees without a step of 360."""
    h = Ratio.of([1], [math.comb(40, k) for k in range(41)])
    angles = phase(h, np.logspace(-4, 4, 2000))
    assert np.all(np.diff(angles) < 0)
    assert angles[-1] == pytest.approx(-3600, abs=1)


polynomial = st.lists(st.integers(-20, 20), min_size=1, max_size=6).filter(any)


@given(polynomial, polynomial, st.floats(0.01, 100))
@settings(max_examples=80, deadline=None)
def test_law_phase_is_the_argument_of_h(num: list[int], den: list[int], w: float) -> None:
    """exp(j*phase) = H/|H|."""
    h = Ratio.of(num, den)
    value = h(1j * w)
    if not 1e-6 < abs(value) < 1e6:
        return
    turned = np.exp(1j * np.radians(phase(h, w)))
    assert abs(turned - value / abs(value)) < 1e-8


@given(polynomial, polynomial, st.integers(1, 40))
@settings(max_examples=60, deadline=None)
def test_law_delay_is_the_slope_of_the_phase(num: list[int], den: list[int], tenths: int) -> None:
    """The exact delay, the sum over poles and zeros, and the derivative of the phase in 50 digits agree."""
    h = Ratio.of(num, den)
    w = Fraction(tenths, 10)
    with mpmath.workdps(50):

        def value(x: mpmath.mpf) -> mpmath.mpc:
            top, bottom = (
                mpmath.polyval(
                    [mpmath.mpf(c.numerator) / c.denominator for c in reversed(p)], mpmath.mpc(0, x)
                )
                for p in (h.num, h.den)
            )
            return top / bottom if bottom else mpmath.mpc(0)

        at, step = mpmath.mpf(w.numerator) / w.denominator, mpmath.mpf(10) ** -20
        middle = value(at)
        if not 1e-6 < abs(middle) < 1e6:
            return
        slope = -mpmath.arg(value(at + step) / value(at - step)) / (2 * step)
    exact = float(delay_over_square(h).at(w * w))
    assert exact == pytest.approx(float(slope), rel=1e-9, abs=1e-12)
    assert group_delay(h, float(w)) == pytest.approx(exact, rel=1e-9, abs=1e-9)


@given(polynomial, polynomial, st.integers(1, 40))
@settings(max_examples=60, deadline=None)
def test_law_squared_magnitude(num: list[int], den: list[int], tenths: int) -> None:
    """|H(jw)|^2 is the exact function of w^2."""
    h = Ratio.of(num, den)
    w = tenths / 10
    value = abs(h(1j * w))
    if value < 1e6:
        assert squared_magnitude(h)(w * w).real == pytest.approx(value**2, rel=1e-9, abs=1e-18)
