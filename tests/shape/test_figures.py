"""Half-power frequencies, peaks, bandwidth and delay, against closed formulas and 50-digit search."""

from __future__ import annotations

import math
from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.circuit.build import network
from symnet.errors import UndefinedError
from symnet.exact.derive import derive
from symnet.exact.ratio import Ratio
from symnet.quantities import OHM
from symnet.shape.figures import Crossing, bandwidth, delay_extremes, f3db, peak, turning_points

CUBIC = Ratio.of([1], [1, 2, 2, 1])


def low_pass(q: Fraction) -> Ratio:
    return Ratio.of([1], [1, 1 / q, 1])


@pytest.mark.parametrize(
    ("q", "w3"),
    # w3/w0 of a second-order low-pass (common practice, no source); 70711/100000 stands for 1/sqrt 2
    [("1/3", 0.3742), ("1/2", 0.6436), ("70711/100000", 1.0), ("1", 1.2720), ("2", 1.4845)],
)
def test_second_order_low_pass(q: str, w3: float) -> None:
    (crossing,) = f3db(low_pass(Fraction(q)))
    assert crossing.w.value == pytest.approx(w3, abs=5e-5)
    zeta = 1 / (2 * float(Fraction(q)))
    formula = math.sqrt(1 - 2 * zeta**2 + math.sqrt(4 * zeta**4 - 4 * zeta**2 + 2))
    assert crossing.w.value == pytest.approx(formula, rel=1e-14)
    assert crossing.direction == "falling"


def test_two_rc_sections() -> None:
    # 1 kohm, 100 nF: 0.3742/(2 pi RC) = 595.6 Hz, not 1024 Hz (recomputed)
    h = derive(network(
        "in -- R1 -- x -- R2 -- out; x -- C1 -- gnd; out -- C2 -- gnd; drive in; read out;"
        "R1, R2 = 1 kohm; C1, C2 = 100 nF"
    ))  # fmt: skip
    found = f3db(h)
    assert (found.reference, found.level.value, len(found)) == ("DC", 1.0, 1)
    assert found[0].f == pytest.approx(0.3742391543388521 / (2 * math.pi * 1e-4), rel=1e-14)


def test_bessel_3_with_unit_delay() -> None:
    # C. R. Bond, Bessel Filters, 2003: 1.75567236868121 for order 3
    (crossing,) = f3db(Ratio.of([15], [15, 15, 6, 1]))
    assert crossing.w.value == pytest.approx(1.75567236868121, abs=5e-15)


def test_butterworth_is_exact() -> None:
    (crossing,) = f3db(CUBIC)
    assert crossing.w.closed is not None
    assert crossing.w.closed.rational
    assert crossing.w.closed.num == 1
    assert crossing.f == 1 / (2 * math.pi)


def test_all_crossings_of_a_ripple() -> None:
    # |H|^2 = 1/(1 + 3 T_4(w)^2) with T_4 the Chebyshev polynomial: half of the peak 1 where T_4 = +-1/sqrt 3, half of
    # the DC value 1/4 where T_4 = sqrt(7/3)
    angles = [math.acos(sign / math.sqrt(3)) / 4 + k * math.pi / 2 for sign in (1, -1) for k in (-1, 0, 1)]
    inside = sorted({round(math.cos(angle), 12) for angle in angles if math.cos(angle) > 0})
    found = f3db(_ripple_4(), "peak")
    assert [c.w.value for c in found] == pytest.approx(inside, rel=1e-11)
    assert [c.direction for c in found] == ["rising", "falling", "rising", "falling"]
    outside = math.cosh(math.acosh(math.sqrt(7 / 3)) / 4)
    assert [c.w.value for c in f3db(_ripple_4())] == pytest.approx([outside], rel=1e-12)


def _ripple_4() -> Ratio:
    """An H with |H|^2 = 1/(1 + 3 T_4(w)^2), its coefficients to 40 digits from its known poles."""
    import mpmath

    with mpmath.workdps(60):
        a = mpmath.asinh(1 / mpmath.sqrt(3)) / 4
        poles = [
            mpmath.mpc(-mpmath.sinh(a) * mpmath.sin(t), mpmath.cosh(a) * mpmath.cos(t))
            for t in (mpmath.pi * (2 * k + 1) / 8 for k in range(4))
        ]
        den = [mpmath.mpf(1)]
        for p in poles[:2]:
            quadratic = [abs(p) ** 2, -2 * p.real, mpmath.mpf(1)]
            longer = [mpmath.mpf(0)] * (len(den) + 2)
            for i, x in enumerate(den):
                for k, y in enumerate(quadratic):
                    longer[i + k] += x * y
            den = longer
        coefficients = [Fraction(mpmath.nstr(c, 45)) for c in den]
        gain = Fraction(mpmath.nstr(den[0] / 2, 45))
    return Ratio.of([gain], coefficients)


def test_band_pass_has_two_edges() -> None:
    # f0 = 5.033 kHz, Q = sqrt(10): width f0/Q (common practice, no source)
    h = derive(
        network("in -- R -- out -- L || C -- gnd; drive in; read out; R = 1 kohm; L = 10 mH; C = 100 nF")
    )
    found = f3db(h)
    assert (found.reference, [c.direction for c in found]) == ("peak", ["rising", "falling"])
    band = bandwidth(h)
    assert band.q == pytest.approx(math.sqrt(10), rel=1e-13)
    assert band.centre == pytest.approx(5032.92121, abs=5e-6)
    assert band.width == pytest.approx(1 / (2 * math.pi * 1000 * 100e-9), rel=1e-13)
    assert repr(peak(h)) == "<maximum 1 at 5032.92 Hz>"


def test_band_pass_by_loading() -> None:
    # R1 in-x, L x-gnd, R2 x-o, C o-gnd with 1 k, 0.1 H, 1 k, 100 nF: peak 0.500 at 1125 Hz (recomputed)
    h = derive(network(
        "in -- R1 -- x -- L -- gnd; x -- R2 -- o -- C -- gnd; drive in; read o;"
        "R1, R2 = 1 kohm; L = 0.1 H; C = 100 nF"
    ))  # fmt: skip
    top = peak(h)
    assert (round(top.value, 3), round(top.f)) == (0.5, 1125)


def test_high_pass_counts_from_infinity() -> None:
    found = f3db(Ratio.of([0, 1], [1, 1]))
    assert (found.reference, [c.direction for c in found]) == ("infinity", ["rising"])


def test_level_has_the_dimension_of_h() -> None:
    h = derive(network("x -- R || C -- gnd; drive current into x; read x; R = 600 ohm; C = 1 uF"))
    found = f3db(h)
    assert (found.level.value, found.level.dimension) == (600.0, OHM)


def test_nothing_3_db_down() -> None:
    found = f3db(Ratio.of([4, 5], [5, 5]))
    assert (len(found), repr(found)) == (0, "<-3.0103 dB relative to DC: none>")
    assert len(f3db(Ratio.of([1, -1], [1, 1]))) == 0
    assert len(f3db(Ratio.of([3], [1]))) == 0


def test_touching_is_no_crossing() -> None:
    # H = 1 + s/4 + s^2/2 - s^3/4: H(j) = (1 + j)/2, so |H|^2 = 1/2, and the slope of |H|^2 is 0 there
    found = f3db(Ratio.of([4, 1, 2, -1], [4]))
    assert [(c.w.value, c.direction) for c in found] == [(1.0, "touching")]


@pytest.mark.parametrize(
    ("num", "den", "reference", "said"),
    [
        ([0, 1], [1, 1], "DC", "is 0"),
        ([1], [0, 1], "DC", "infinite"),
        ([1], [1, 1], "infinity", "is 0"),
        ([1, 1], [1], "infinity", "infinite"),
        ([1], [1, 0, 1], "peak", "infinite"),
        ([], [1], "DC", "is 0"),
        ([1], [1, 1], "top", "no reference"),
    ],
)
def test_impossible_references(num: list[int], den: list[int], reference: Any, said: str) -> None:
    with pytest.raises(UndefinedError, match=said):
        f3db(Ratio.of(num, den), reference)


def test_peak_of_a_resonant_low_pass() -> None:
    # Q/sqrt(1 - 1/(4Q^2)) at w0 sqrt(1 - 1/(2Q^2)) (common practice, no source)
    top = peak(low_pass(Fraction(3)))
    assert top.value == pytest.approx(3 / math.sqrt(1 - 1 / 36), rel=1e-15)
    assert top.w.value == pytest.approx(math.sqrt(1 - 1 / 18), rel=1e-15)
    assert top.decibels == pytest.approx(20 * math.log10(top.value))


def test_peak_at_the_ends() -> None:
    assert repr(peak(Ratio.of([-5], [1, 1]))) == "<maximum 5 at DC>"
    assert repr(peak(Ratio.of([0, 0, 7], [1, 2, 1]))) == "<maximum 7 at infinity>"
    assert repr(peak(Ratio.of([], [1]))) == "<maximum 0 at DC>"


@pytest.mark.parametrize(
    ("num", "den", "where"), [([1], [1, 0, 1], "0.159155 Hz"), ([1], [0, 1], "DC"), ([1, 1], [1], "infinity")]
)
def test_peak_without_bound(num: list[int], den: list[int], where: str) -> None:
    with pytest.raises(UndefinedError, match=f"at {where}"):
        peak(Ratio.of(num, den))


def test_stop_band_that_rises_again() -> None:
    # unity-gain section 2.26 k, 16.5 k, 100 nF, 22 nF with output resistance 100 ohm and gain-bandwidth 400 kHz:
    # deepest -53.5 dB near 15.7 kHz, back to -27.5 dB at high frequency (recomputed)
    h = derive(network(
        "in -- R1 -- x -- R2 -- p -- C2 -- gnd; x -- C1 -- out; o -- Ro -- out; hold o = wt/s*(p - out);"
        "drive in; read out; R1 = 2.26 kohm; R2 = 16.5 kohm; C1 = 100 nF; C2 = 22 nF; Ro = 100 ohm;"
        "wt = 2513274.12287 rad/s"
    ))  # fmt: skip
    deepest = [point for point in turning_points(h) if point.kind == "minimum"][-1]
    assert deepest.decibels == pytest.approx(-53.5, abs=0.05)
    assert deepest.f == pytest.approx(15.7e3, abs=100)
    assert h.numeric().decibels(1e12j) == pytest.approx(-27.5, abs=0.05)


def test_notch_is_a_minimum() -> None:
    points = turning_points(Ratio.of([1, 0, 1], [1, 4, 1]))
    assert [(p.kind, p.w.value, p.value) for p in points] == [("minimum", 1.0, 0.0)]
    assert points[0].decibels == -math.inf


def test_bandwidth_needs_a_peak_with_two_edges() -> None:
    with pytest.raises(UndefinedError, match="low-pass"):
        bandwidth(Ratio.of([1], [1, 1]))


def test_largest_delay_of_the_normalised_cubic() -> None:
    # 2.742862/w0 at 0.817331 w0 (common practice, no source)
    (largest,) = delay_extremes(CUBIC)
    assert (largest.kind, round(largest.value, 6)) == ("maximum", 2.742862)
    assert largest.w.value == pytest.approx(0.817331, abs=5e-7)


positive = st.integers(1, 30)


@given(st.lists(positive, min_size=2, max_size=6))
@settings(max_examples=60, deadline=None)
def test_law_every_crossing_is_half_power(den: list[int]) -> None:
    """|H| at each crossing is |H(0)|/sqrt 2, and below the first one it is higher."""
    h = Ratio.of([1], den)
    found = f3db(h)
    assert len(found) % 2 == 1  # from DC down to 0 at infinity: one more falling than rising
    for crossing in found:
        assert isinstance(crossing, Crossing)
        assert crossing.w.value is not None
        assert abs(h(1j * crossing.w.value)) == pytest.approx(1 / (den[0] * math.sqrt(2)), rel=1e-11)
    assert found[0].w.value is not None
    assert abs(h(0.999j * found[0].w.value)) > 1 / (den[0] * math.sqrt(2))


@given(st.lists(positive, min_size=2, max_size=6), st.floats(0.001, 1000))
@settings(max_examples=60, deadline=None)
def test_law_nothing_is_above_the_peak(den: list[int], w: float) -> None:
    h = Ratio.of([1, 2], den)
    try:
        top = peak(h)
    except UndefinedError:
        return
    assert abs(h(1j * w)) <= top.value * (1 + 1e-12)
