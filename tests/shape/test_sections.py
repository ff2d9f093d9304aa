"""Sections, their closed forms, and the standard forms built on them."""

from __future__ import annotations

import math
from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.circuit.build import network
from symnet.errors import UndefinedError, UnknownNameError
from symnet.exact.derive import derive
from symnet.exact.polynomials import by_powers_of_s, make_ring
from symnet.exact.ratio import Ratio
from symnet.exact.surds import Surd
from symnet.quantities import HERTZ, SECOND
from symnet.shape.factors import factors_in_s
from symnet.shape.forms import form
from symnet.shape.sections import Section, Sections, combined, sections
from symnet.typeset.writing import to_text
from tests.shape.symbols import transfer

TWO_RC = "in -- R1 -- x -- R2 -- out; x -- C1 -- gnd; out -- C2 -- gnd; drive in; read out;"


def of(text: str) -> Sections:
    return sections(derive(network(text)))


def written(figure: Any) -> str:
    assert figure is not None
    assert figure.closed is not None
    return to_text(figure.closed.tree())


def number(figure: Any) -> float:
    assert figure is not None
    assert figure.value is not None
    return float(figure.value)


def test_butterworth_3() -> None:
    # 1 + 2s + 2s^2 + s^3 = (s + 1)(s^2 + s + 1), Q = 1, poles -1 and -1/2 +- j sqrt(3)/2 (common practice, no source)
    real, pair = sections(Ratio.of([1], [1, 2, 2, 1])).poles
    assert (real.kind, real.side, number(real.tau)) == ("first order", "left", 1.0)
    assert (pair.kind, number(pair.w0), number(pair.q), number(pair.zeta)) == ("pair", 1.0, 1.0, 0.5)
    assert pair.f0 == 1 / (2 * math.pi)
    assert pair.roots[0].closed == Surd(Fraction(-1, 2), Fraction(-3, 4), 1)
    assert [written(c) for c in pair.coefficients] == ["1", "1", "1"]


def test_butterworth_4() -> None:
    # Q = 0.5412 and 1.3066 (common practice, no source); 1 + s^8 = product over all poles
    found = [s for s in sections(Ratio.of([1], [1, *[0] * 7, 1])).poles if s.side == "left"]
    assert [round(number(s.q), 4) for s in found] == [0.5412, 1.3066]
    assert all(number(s.w0) == pytest.approx(1, abs=1e-15) for s in found)


def test_wien_arm_has_real_poles_and_q_of_one_third() -> None:
    # R = 1 kohm, C = 100 nF: poles -0.3820/RC and -2.6180/RC, Q = 1/3, zeta = 1.5 (common practice, no source)
    found = of(
        "in -- R1 + C1 -- out -- R2 || C2 -- gnd; drive in; read out; R1, R2 = 1 kohm; C1, C2 = 100 nF"
    )
    numbers = found.numbers
    assert numbers is not None
    assert [s.kind for s in numbers.poles] == ["first order", "first order"]
    golden = (3 - math.sqrt(5)) / 2
    assert [number(s.w0) for s in numbers.poles] == pytest.approx([golden * 1e4, 1e4 / golden], rel=1e-15)
    assert numbers.poles[0].roots[0].closed == Surd(Fraction(-15000), Fraction(125_000_000), 1)
    assert numbers.whole is not None
    assert (written(numbers.whole.q), written(numbers.whole.zeta)) == ("1/3", "3/2")
    assert number(found.whole.q if found.whole else None) == 1 / 3
    assert (found.power, [s.kind for s in numbers.zeros]) == (1, ["origin"])


def test_series_and_parallel_rlc() -> None:
    # 1 kohm, 10 mH, 100 nF: f0 = 5.033 kHz, Q = 0.3162 in series, 3.162 in parallel (common practice, no source)
    values = "R = 1 kohm; L = 10 mH; C = 100 nF"
    series = of(f"in -- R + L -- out -- C -- gnd; drive in; read out; {values}").whole
    parallel = of(f"in -- R -- out -- L || C -- gnd; drive in; read out; {values}").whole
    assert series is not None
    assert parallel is not None
    assert (written(series.q), written(parallel.q)) == ("sqrt(L/C)/R", "R*sqrt(C/L)")
    assert (round(number(series.q), 4), round(number(parallel.q), 3)) == (0.3162, 3.162)
    assert round(series.f0 or 0) == round(parallel.f0 or 0) == 5033


def test_two_rc_sections_apart() -> None:
    # R1 = 1 k, C1 = 100 n, R2 = 100 k, C2 = 1 n: poles 1440 and 1759 Hz, not 1592 Hz twice (recomputed)
    numbers = of(TWO_RC + "R1 = 1 kohm; C1 = 100 nF; R2 = 100 kohm; C2 = 1 nF").numbers
    assert numbers is not None
    assert [round(s.f0 or 0) for s in numbers.poles] == [1440, 1759]
    # R2 = 100 R1, both 10 nF: 990.0 and 101 010 rad/s (recomputed)
    numbers = of(TWO_RC + "R1 = 1 kohm; R2 = 100 kohm; C1, C2 = 10 nF").numbers
    assert numbers is not None
    assert [round(number(s.w0), 1) for s in numbers.poles] == [990.0, 101010.0]


def test_positive_feedback_section_in_symbols() -> None:
    # R. Mancini and B. Carter, Op Amps for Everyone, ch. 16, Fig. 16-15: w0 and Q of the section with gain K
    found = sections(transfer("K", "1+s*(C1*(R1+R2)+(1-K)*R1*C2)+s^2*R1*R2*C1*C2", "R1 R2 C1 C2 K"))
    (pair,) = found.poles
    assert written(pair.w0) == "1/sqrt(R1*R2*C1*C2)"
    assert pair.q is not None
    assert pair.q.closed is not None
    texts = {"R1": "4250", "R2": "12682", "C1": "4.7e-9", "C2": "100e-9", "K": "1"}
    exact = {name: Fraction(text) for name, text in texts.items()}
    q = math.sqrt(4250 * 12682 * 4.7e-9 * 1e-7) / (4.7e-9 * (4250 + 12682))
    assert pair.q.closed.value(exact) == pytest.approx(q, rel=1e-15)
    assert pair.side is None
    assert written(found.gain) == "K"


def test_buffered_sections_factor_in_symbols() -> None:
    found = of(
        "in -- R1 -- a -- C1 -- gnd; hold b = a; b -- R2 -- c -- L -- out -- C2 -- gnd; drive in; read out"
    )
    assert [s.kind for s in found.poles] == ["first order", "quadratic"]
    assert [written(c) for c in found.poles[0].coefficients] == ["1", "R1*C1"]
    assert written(found.poles[1].q) == "sqrt(L/C2)/R2"
    assert found.complete


def test_cubic_in_symbols_is_kept_whole() -> None:
    found = of("in -- Rs -- a -- L1 -- out; a -- C1 -- gnd; out -- C2 || RL -- gnd; drive in; read out")
    (whole,) = found.poles
    assert (whole.kind, whole.degree, found.complete) == ("polynomial", 3, False)
    assert repr(whole) == "<polynomial of degree 3>"


def test_right_half_plane_is_marked() -> None:
    one, other = sections(Ratio.of([1], [-6, -1, 1])).poles  # (s + 2)(s - 3)
    assert [(s.side, number(s.w0), number(s.tau)) for s in (one, other)] == [
        ("left", 2, 0.5),
        ("right", 3, 1 / 3),
    ]
    assert "right half plane" in repr(other)
    whole = sections(Ratio.of([1], [-6, -1, 1])).whole
    assert whole is not None
    assert (whole.w0, whole.q) == (None, None)
    (pair,) = sections(Ratio.of([1], [4, -1, 1])).poles
    assert (pair.side, number(pair.q)) == ("right", -2.0)


def test_zeros_are_treated_alike() -> None:
    found = sections(Ratio.of([0, 4, 0, 1], [1, 3, 3, 1]))
    assert [s.kind for s in found.zeros] == ["origin", "pair"]
    assert (found.zeros[1].side, number(found.zeros[1].q), number(found.zeros[1].zeta)) == (
        "axis",
        math.inf,
        0.0,
    )
    assert found.whole_zeros is not None
    assert number(found.whole_zeros.w0) == 2.0
    (triple,) = found.poles
    assert (triple.multiplicity, repr(triple)) == (3, "<first order x3: f0 = 0.1592 Hz>")


def test_high_q_keeps_all_its_digits() -> None:
    # s^2 + 1e-9 s + 1 beside a factor without closed form: Q = 1e9 to the last digit
    den = [Fraction(0)] * 6
    for i, a in enumerate([Fraction(1), Fraction(1, 10**9), Fraction(1)]):
        for k, b in enumerate([1, 1, 0, 1]):
            den[i + k] += a * b
    best = max(sections(Ratio.of([1], den)).poles, key=lambda s: 0 if s.q is None else number(s.q))
    assert number(best.q) == 1e9


def test_combined_refuses_what_is_no_quadratic() -> None:
    left, right = sections(Ratio.of([1], [-6, -1, 1])).poles
    with pytest.raises(UndefinedError, match="same side"):
        combined(left, right)


def test_zero_has_no_sections() -> None:
    with pytest.raises(UndefinedError, match="no sections"):
        sections(Ratio.of([], [1]))


quadratic = st.tuples(st.integers(1, 50), st.integers(-50, 50).filter(bool), st.integers(1, 50))


@given(st.lists(quadratic, min_size=1, max_size=4), st.lists(st.integers(1, 40), max_size=3))
@settings(max_examples=50, deadline=None)
def test_law_the_product_of_the_sections_is_the_denominator(
    quadratics: list[tuple[int, int, int]], reals: list[int]
) -> None:
    """gain s^power N'/D' is H, every section with constant term 1."""
    den = [Fraction(1)]
    for factor in [*quadratics, *((r, 1) for r in reals)]:
        longer = [Fraction(0)] * (len(den) + len(factor) - 1)
        for i, a in enumerate(den):
            for k, b in enumerate(factor):
                longer[i + k] += a * b
        den = longer
    h = Ratio.of([1], den)
    found = sections(h)
    s = 0.31 + 0.77j
    product = 1 + 0j
    for section in found.poles:
        product *= sum(number(c) * s**k for k, c in enumerate(section.coefficients)) ** section.multiplicity
    assert abs(number(found.gain) / product - h(s)) <= 1e-12 * abs(h(s))
    assert sum(section.degree * section.multiplicity for section in found.poles) == h.order


def test_factors_in_symbols_multiply_back() -> None:
    ring = make_ring(["R1", "R2", "C1", "C2", "L"])
    s, R1, R2, C1, C2, L = ring.gens
    p = (R1 + R2 + s * R1 * R2 * C1) ** 2 * (1 + s * R1 * C2 + s**2 * L * C2)
    product = ring.one
    for parts, multiplicity in factors_in_s(by_powers_of_s(p)):
        product *= sum((c * s**k for k, c in enumerate(parts)), ring.zero) ** multiplicity
    assert product in {p, -p}


def test_large_polynomials_are_not_factored() -> None:
    ring = make_ring([f"R{k}" for k in range(130)])
    s, *r = ring.gens
    whole = (1 + s) * (1 + s * sum(r, ring.zero))
    assert len(factors_in_s(by_powers_of_s(whole))) == 1


# -- forms -----------------------------------------------------------------------------------------------------


GBW = ("R2*Kt", "R1*Kt+s*(R1+R2)", "R1 R2 Kt")  # inverting stage, gain-bandwidth Kt in rad/s; sign left out


def test_constant_term_1() -> None:
    f = form(transfer(*GBW), "constant term 1")
    assert written(f.gain) == "R2/R1"
    assert [written(c) for c in f.denominator] == ["1", "(1 + R2/R1)/Kt"]
    assert (f.power, [c.dimension for c in f.denominator][1]) == (0, SECOND)


def test_monic() -> None:
    f = form(transfer(*GBW), "monic")
    assert [written(c) for c in f.denominator] == ["Kt*R1/(R1 + R2)", "1"]
    assert f.denominator[0].dimension == HERTZ


def test_coefficients_as_they_are() -> None:
    f = form(transfer(*GBW), "coefficients")
    assert [written(c) for c in f.denominator] == ["Kt*R1", "R1 + R2"]
    assert written(f.gain) == "1"


def test_powers_at_the_origin_stand_apart() -> None:
    f = form(Ratio.of([0, 0, 3], [2, 4]), "constant term 1")
    assert (f.power, number(f.gain), len(f.numerator)) == (2, 1.5, 1)
    assert form(Ratio.of([3], [0, 2, 4]), "time constants").power == -1


@pytest.mark.parametrize("style", ["poles and zeros", "w0/Q", "time constants"])
def test_factored_forms_hold_sections(style: Any) -> None:
    f = form(Ratio.of([1], [1, 2, 2, 1]), style)
    assert f.sections is not None
    assert [s.kind for s in f.sections.poles] == ["first order", "pair"]
    assert repr(f) == f"<H in the form {style!r}, gain {f.gain!r}, s^0, degrees 0/3>"
    assert number(f.gain) == 1.0


def test_unknown_form_names_the_nearest() -> None:
    wrong: Any = "monik"
    with pytest.raises(UnknownNameError, match="Did you mean 'monic'"):
        form(Ratio.of([1], [1, 1]), wrong)


def test_zero_has_one_form_only() -> None:
    assert form(Ratio.of([], [1]), "coefficients").numerator == ()
    with pytest.raises(UndefinedError, match="H = 0"):
        form(Ratio.of([], [1]), "monic")


@given(
    st.lists(st.integers(-9, 9), min_size=1, max_size=5).filter(any),
    st.lists(st.integers(-9, 9), min_size=1, max_size=5).filter(any),
    st.sampled_from(["coefficients", "constant term 1", "monic"]),
)
@settings(max_examples=60, deadline=None)
def test_law_every_form_is_h(num: list[int], den: list[int], style: Any) -> None:
    h = Ratio.of(num, den)
    f = form(h, style)
    s = Fraction(7, 11)

    def value(figures: Any) -> Fraction:
        return sum((c.closed.num / c.closed.den * s**k for k, c in enumerate(figures)), Fraction(0))

    if value(f.denominator):
        assert f.gain.closed is not None
        gain = f.gain.closed.num / f.gain.closed.den
        assert gain * s**f.power * value(f.numerator) / value(f.denominator) == h.at(s)


def test_section_without_number_shows_w0() -> None:
    (section,) = sections(transfer("1", "1+s*R*C", "R C")).poles
    assert isinstance(section, Section)
    assert repr(section) == "<first order: w0 = 1/(R*C) 1/s>"
