"""Normal forms of drawn networks and of ratios, against figures worked by hand and against their defining equation."""

from __future__ import annotations

import math
from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.circuit.build import network
from symnet.errors import MissingValueError
from symnet.exact.derive import derive
from symnet.exact.ratio import Ratio
from symnet.quantities import HERTZ, NUMBER, OHM, SECOND
from symnet.shape.normal import CONVENTIONS, NormalForm, normalise
from symnet.typeset.writing import to_text
from tests.shape.symbols import transfer

TWO_RC = "in -- R1 -- x -- R2 -- out; x -- C1 -- gnd; out -- C2 -- gnd; drive in; read out;"
MFB = (
    "in -- R1 -- x; x -- R2 -- out; x -- C1 -- gnd; x -- R3 -- m; m -- C2 -- out;"
    "U1: opamp(plus=gnd, minus=m, out=out); drive in; read out;"
)


def of(text: str) -> NormalForm:
    return normalise(derive(network(text)))


def written(figure: Any) -> str:
    assert figure is not None
    assert figure.closed is not None
    return to_text(figure.closed.tree())


def test_two_equal_rc_sections_in_symbols() -> None:
    # D = 1 + 3sRC + (sRC)^2: w0 = 1/(RC), Q = 1/3 (common practice, no source)
    form = of(TWO_RC + "R2 = R1; C2 = C1")
    assert written(form.w0) == "1/(R1*C1)"
    assert written(form.tau) == "R1*C1"
    assert [written(c) for c in form.denominator] == ["1", "3", "1"]
    assert form.c == (1.0, 3.0, 1.0)  # no value is needed for these
    assert form.f0 is None
    assert form.band == "low-pass"
    assert form.gain is not None
    assert (form.gain.name, written(form.gain.figure)) == ("H(0)", "1")


def test_two_rc_sections_in_symbols() -> None:
    form = of(TWO_RC)
    assert written(form.w0) == "1/sqrt(R1*R2*C1*C2)"
    assert form.w0 is not None
    assert form.w0.value is None
    assert form.w0.dimension == HERTZ
    assert form.f0 is None
    middle = form.denominator[1].closed
    assert middle is not None
    values = {"R1": Fraction(1000), "R2": Fraction(2000), "C1": Fraction(1, 10**7), "C2": Fraction(1, 10**8)}
    # (R1C1 + R1C2 + R2C2)/sqrt(R1R2C1C2) = 130 us/sqrt(2e-9 s^2)
    assert middle.value(values) == pytest.approx(130e-6 / math.sqrt(2e-9), rel=1e-15)
    assert form.stability.verdict == "stable"


def test_numbers_beside_symbols() -> None:
    form = of(TWO_RC + "R1, R2 = 1 kohm; C1, C2 = 100 nF")
    assert form.f0 == pytest.approx(1591.5494309189535, rel=1e-15)
    assert form.c == (1.0, 3.0, 1.0)
    assert form.K == 1.0
    assert form.numbers is not None
    assert form.numbers.w0 is not None
    assert written(form.numbers.w0) == "10000"
    assert written(form.w0) == "1/sqrt(R1*R2*C1*C2)"


def test_parallel_rlc_band_pass() -> None:
    # R = 1 kohm, L = 10 mH, C = 100 nF: f0 = 5.033 kHz, Q = R sqrt(C/L) = 3.162 (common practice, no source)
    form = of("in -- R -- out -- L || C -- gnd; drive in; read out; R = 1 kohm; L = 10 mH; C = 100 nF")
    assert form.band == "band-pass"
    assert form.f0 == pytest.approx(5033, abs=0.5)
    assert 1 / form.c[1] == pytest.approx(math.sqrt(10), rel=1e-15)
    assert written(form.denominator[1]) == "sqrt(L/C)/R"
    assert form.gain is not None
    assert form.gain.name == "|H(j w0)|, signed"
    assert written(form.gain.figure) == "1"
    assert form.K == 1.0


def test_series_rlc_low_pass() -> None:
    # the same parts in series: Q = sqrt(L/C)/R = 0.3162 (common practice, no source)
    form = of("in -- R + L -- out -- C -- gnd; drive in; read out; R = 1 kohm; L = 10 mH; C = 100 nF")
    assert 1 / form.c[1] == pytest.approx(math.sqrt(0.1), rel=1e-15)


def test_inverting_low_pass_of_two_capacitors() -> None:
    # H(0) = -R2/R1, w0 = 1/sqrt(R2R3C1C2) (R. Mancini and B. Carter, Op Amps for Everyone, ch. 16)
    form = of(MFB)
    assert written(form.w0) == "1/sqrt(R2*R3*C1*C2)"
    assert form.gain is not None
    assert written(form.gain.figure) == "-R2/R1"
    assert form.gain.figure.dimension == NUMBER


def test_high_pass_gain_is_at_infinity() -> None:
    form = of("in -- C -- out -- R1 || L -- gnd; drive in; read out")
    assert form.band == "high-pass"
    assert form.gain is not None
    assert form.gain.name == "H(infinity)"
    assert form.zeros_at_origin == 2


def test_integrator_and_differentiator_have_coefficients_with_units() -> None:
    integrator = of("in -- R -- m -- C -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out")
    assert integrator.band == "integrator"
    assert integrator.gain is not None
    assert (integrator.gain.name, written(integrator.gain.figure)) == ("coefficient of s^-1", "-1/(R*C)")
    assert integrator.gain.figure.dimension == HERTZ
    assert (integrator.w0, integrator.f0, integrator.numerator) == (None, None, ())
    differentiator = of("in -- C -- m -- R -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out")
    assert differentiator.band == "differentiator"
    assert differentiator.gain is not None
    assert (differentiator.gain.name, written(differentiator.gain.figure)) == ("coefficient of s", "-R*C")
    assert differentiator.gain.figure.dimension == SECOND


def test_integrator_with_a_further_pole_is_split() -> None:
    form = normalise(Ratio.of([6], [0, 3, 12]))  # 2/(s(1 + 4s))
    assert (form.order, form.scale_order, form.poles_at_origin) == (2, 1, 1)
    assert form.K == 2.0
    assert form.tau is not None
    assert form.tau.value == 4.0
    assert form.stability.verdict == "marginal"


def test_transimpedance_has_ohms() -> None:
    form = of("x -- R -- out -- C -- gnd; x -- C2 -- gnd; out -- R2 -- gnd; drive current into x; read out")
    assert form.gain is not None
    assert form.gain.figure.dimension == OHM
    assert written(form.gain.figure) == "R2"


def test_shelving_gives_both_gains() -> None:
    # R1 in-out, R2 + C to gnd: (1 + sR2C)/(1 + s(R1+R2)C) (common practice, no source)
    form = of("in -- R1 -- out -- R2 + C -- gnd; drive in; read out")
    assert form.band == "shelving"
    assert form.gain_at_infinity is not None
    assert written(form.gain_at_infinity.figure) == "R2/(R1 + R2)"
    assert written(form.numerator[1]) == "R2/(R1 + R2)"
    assert written(form.tau) == "(R1 + R2)*C"


@pytest.mark.parametrize(
    ("num", "den", "band"),
    [
        ([], [1, 1], "zero"),
        ([7], [2], "constant"),
        ([1, 1], [1], "improper"),
        ([0, 0, 5], [1], "differentiator"),
        ([1], [0, 1, 1], "integrator"),
        ([1], [1, 1], "low-pass"),
        ([1, 1], [1, 1, 1], "low-pass"),
        ([0, 0, 1], [1, 1, 1], "high-pass"),
        ([0, 1, 1], [1, 1, 5], "high-pass"),
        ([0, 1], [1, 1, 1], "band-pass"),
        ([1, 0, 1], [1, 1, 1], "band-stop"),
        ([2, 0, 1], [1, 1, 1], "low-pass"),
        ([1, 0, 2], [1, 1, 1], "high-pass"),
        ([1, -1, 1], [1, 1, 1], "all-pass"),
        ([-1, 2, -3], [1, 2, 3], "all-pass"),
        ([1, 1], [1, 2], "shelving"),
        ([1, 4, 1], [1, 1, 1], "peaking"),
        ([-1, 0, 1], [1, 1, 1], "peaking"),
    ],
)
def test_bands(num: list[int], den: list[int], band: str) -> None:
    assert normalise(Ratio.of(num, den)).band == band


def test_notch_and_all_pass_in_symbols() -> None:
    assert normalise(transfer("1+s^2*L*C", "1+s*R*C+s^2*L*C", "R L C")).band == "band-stop"
    assert normalise(transfer("1-s*R*C", "1+s*R*C", "R C")).band == "all-pass"
    form = normalise(transfer("1-s*R*C", "1+s*R*C", "R C"))
    assert [written(n) for n in form.numerator] == ["1", "-1"]


def test_zero_has_neither_gain_nor_numerator() -> None:
    form = normalise(Ratio.of([], [1]))
    assert (form.gain, form.leading, form.numerator, form.K) == (None, None, (), None)


def test_unstable_has_last_coefficient_minus_one() -> None:
    form = normalise(Ratio.of([1], [-8, 0, 0, 1]))  # (s - 2)(s^2 + 2s + 4)
    assert form.w0 is not None
    assert form.w0.value == 2.0
    assert form.c == (1.0, 0.0, 0.0, -1.0)
    assert form.stability.verdict == "unstable"


def test_w0_in_symbols_says_what_it_assumes() -> None:
    form = normalise(transfer("1", "R1-R2+s*R1*R2*C1", "R1 R2 C1"))
    assert [str(p) for p in form.assumed] == ["R1 - R2"]
    assert normalise(transfer("1", "0-R1-s*R1*R2*C1", "R1 R2 C1")).assumed == ()


def test_cancelling_values_are_said() -> None:
    # compensated divider R1C1 = R2C2
    form = of("in -- R1 || C1 -- out -- R2 || C2 -- gnd; drive in; read out;"
              "R1 = 9 Mohm; R2 = 1 Mohm; C1 = 10 pF; C2 = 90 pF")  # fmt: skip
    assert form.order == 1
    assert form.f0 is None
    assert form.numbers is not None
    assert (form.numbers.order, form.numbers.band, form.numbers.K) == (0, "constant", 0.1)
    assert "order 1 in symbols, 0 with the values" in form.notes[0]


def test_lossless_band_pass_has_no_finite_gain() -> None:
    form = normalise(Ratio.of([0, 1], [1, 0, 1]))
    assert math.inf == form.K


def test_higher_band_pass_gain_at_w0() -> None:
    # two equal resonators in a row, each H(jw0) = -1/2: together 1/4
    h = Ratio.of([0, 0, 1], [1, 4, 6, 4, 1])
    form = normalise(h)
    assert pytest.approx(abs(h(1j)), rel=1e-15) == form.K
    assert form.K == 0.25


def test_si_values_of_order_forty() -> None:
    tau = Fraction(47, 10**11)
    form = normalise(Ratio.of([1], [math.comb(40, k) * tau**k for k in range(41)]))
    assert form.c == tuple(float(math.comb(40, k)) for k in range(41))
    assert form.tau is not None
    assert form.tau.value == 470e-12


def test_figure_shows_itself_shortly() -> None:
    form = of(TWO_RC + "R1, R2 = 1 kohm; C1, C2 = 100 nF")
    assert repr(form) == "<low-pass, order 2, H(0) = 1, f0 = 1592 Hz>"
    assert repr(form.w0) == "1/sqrt(R1*R2*C1*C2) = 10000 1/s"


def test_conventions_name_every_word() -> None:
    assert [word for word, _ in CONVENTIONS][:3] == ["order n", "split", "w0, f0, tau"]


def test_part_without_value_is_named() -> None:
    with pytest.raises(MissingValueError, match="C1"):
        derive(network("in -- R1 -- out -- C1 -- gnd; drive in; read out; R1 = 1 kohm")).numeric()


positive = st.fractions(Fraction(1, 1000), 1000, max_denominator=1000).filter(lambda x: x > 0)
den = st.lists(positive, min_size=2, max_size=7)


@given(den, positive)
@settings(max_examples=60, deadline=None)
def test_law_normalised_coefficients_do_not_change_with_frequency_scale(
    p: list[Fraction], factor: Fraction
) -> None:
    """H(s) and H(s/k) have the same c_k, and w0 is k times as high."""
    h = Ratio.of([1], p)
    one, other = normalise(h), normalise(h.stretched(factor))
    assert one.c == pytest.approx(other.c, rel=1e-14)
    assert one.w0 is not None
    assert other.w0 is not None
    assert one.w0.value is not None
    assert other.w0.value == pytest.approx(one.w0.value * float(factor), rel=1e-14)


@given(den, st.floats(0.01, 100))
@settings(max_examples=60, deadline=None)
def test_law_the_form_is_h(p: list[Fraction], x: float) -> None:
    """K0 sum n_k x^k / sum c_k x^k with x = s/w0 is H(s)."""
    h = Ratio.of([3, 2], p)
    form = normalise(h)
    if form.scale_order == 0 or form.w0 is None or form.leading is None:
        return
    assert form.w0.value is not None
    assert form.leading.value is not None
    s = 1j * x * form.w0.value
    top = sum(n * (1j * x) ** k for k, n in enumerate(form.n))
    bottom = sum(c * (1j * x) ** k for k, c in enumerate(form.c))
    if not bottom:  # a pole on the jw axis, met exactly
        return
    power = form.zeros_at_origin - form.poles_at_origin
    size = sum(abs(c) * x**k for k, c in enumerate(form.c)) / abs(bottom)
    assert abs(form.leading.value * s**power * top / bottom - h(s)) <= 1e-13 * size * abs(h(s))
