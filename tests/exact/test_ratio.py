"""Exact ratios: lowest terms, and evaluation against fractions and 60-digit arithmetic."""

from __future__ import annotations

import cmath
import math
from fractions import Fraction
from typing import Any

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.errors import UndefinedError
from symnet.exact import dense
from symnet.exact.ratio import Ratio

KILO_NANO = Fraction(1000) * Fraction("100e-9")


def oracle(h: Ratio, s: complex) -> Any:
    """H at the exact point that the double s is, in 60 digits."""
    with mpmath.workdps(60 + 4 * h.order):
        z = mpmath.mpc(s)
        top, bottom = (
            mpmath.polyval(
                [mpmath.mpf(c.numerator) / c.denominator for c in reversed(p or (Fraction(0),))], z
            )
            for p in (h.num, h.den)
        )
        return +(top / bottom)


def test_exact_common_factor_cancels() -> None:
    # github.com/sympy/sympy, numbers of pull 25982: floats leave (s*3.63e-6 + 1) uncancelled
    a, b = Fraction("3.63e-6"), Fraction("1.034e-5")
    h, common = Ratio.reduced([1, a], [1, a + b, a * b])
    assert h == Ratio((Fraction(1),), (Fraction(1), b))
    assert list(common) == [10**8, 363]


def test_equal_functions_are_equal_values() -> None:
    assert Ratio.of([0, 6], [2, 4]) == Ratio.of([0, 3, 3], [1, 3, 2])
    assert hash(Ratio.of([0, 6], [2, 4])) == hash(Ratio.of([0, 3, 3], [1, 3, 2]))
    assert Ratio.of([1], [1, 1]) != Ratio.of([-1], [1, 1])


def test_lowest_coefficient_of_the_denominator_is_one() -> None:
    assert list(Ratio.of([5], [0, 0, -10, 4]).den) == [0, 0, 1, Fraction(-2, 5)]


def test_zero_and_undefined() -> None:
    assert Ratio.of([0, 0], [3, 4]) == Ratio((), (Fraction(1),))
    assert Ratio.of([], [3]).is_zero
    with pytest.raises(UndefinedError, match="denominator 0"):
        Ratio.of([1], [0])


def test_two_section_rc_at_1_khz() -> None:
    # 1 kohm, 100 nF twice: 0.5051 at -72.20 degrees (recomputed; common practice, no source)
    h = Ratio.of([1], [1, 3 * KILO_NANO, KILO_NANO**2])
    value = h(2j * math.pi * 1000)
    assert abs(value) == pytest.approx(0.5051, abs=5e-5)
    assert math.degrees(cmath.phase(value)) == pytest.approx(-72.20, abs=5e-3)


def test_shapes() -> None:
    h = Ratio.of([1], [1, 1])
    assert isinstance(h(1j), complex)
    grid = np.array([[0j, 1j], [2j, 3j]])
    assert h(grid).shape == (2, 2)
    assert np.allclose(h(grid), 1 / (1 + grid), rtol=1e-15)
    assert h(np.array([], dtype=complex)).shape == (0,)
    assert isinstance(h.decibels(1j), float)


def test_forty_sections_in_si_values_neither_overflow_nor_underflow() -> None:
    tau = Fraction(22, 10**9)  # product of 40: 1e-306
    den = [math.comb(40, k) * tau**k for k in range(41)]
    h = Ratio.of([1], den)
    for w in (1.0, 1e6, 4.5e7, 1e12):
        expected = -400 * math.log10(1 + (w * 22e-9) ** 2)
        assert h.decibels(1j * w) == pytest.approx(expected, rel=1e-12, abs=1e-12)
    assert h(1e20j) == 0
    assert h.decibels(1e20j) == pytest.approx(-800 * math.log10(2.2e12), rel=1e-12)


@pytest.mark.parametrize("order", [7, 20, 40])
def test_full_precision_where_the_terms_cancel(order: int) -> None:
    """T_n at the pass-band edge: terms up to 2.4^n cancel to 1, far beyond what doubles can carry."""
    low: dense.Integers = (1,)
    high: dense.Integers = (0, 1)
    for _ in range(order - 1):
        low, high = high, dense.add(dense.multiply((0, 2), high), low, -1)
    h = Ratio.of(high, [1])
    for s in (0.999, 1.0, 0.3 + 0.4j, 1.5, 0.05j):
        expected = oracle(h, s)
        assert abs(mpmath.mpc(h(s)) - expected) <= 1e-12 * abs(expected)


def test_flank_of_a_notch() -> None:
    # 1 + s^2/w^2 with w = 2 pi 50: a microhertz beside the zero
    w = Fraction("314.15926535897932")
    h = Ratio.of([1, 0, 1 / w**2], [1, 4 / w, 1 / w**2])
    s = 1j * (float(w) + 6e-6)
    assert abs(mpmath.mpc(h(s)) - oracle(h, s)) <= 1e-12 * abs(oracle(h, s))


def test_at_a_pole_and_at_infinity() -> None:
    assert Ratio.of([1], [0, 1])(0) == complex(math.inf, 0)
    assert Ratio.of([1, 1], [1, 2])(math.inf) == 0.5
    assert Ratio.of([1], [1, 2])(math.inf) == 0
    assert Ratio.of([0, 1], [1])(complex(0, math.inf)) == complex(math.inf, 0)
    assert cmath.isnan(Ratio.of([1], [1, 2])(math.nan))
    assert Ratio.of([], [1])(3j) == 0
    assert Ratio.of([], [1]).decibels(3j) == -math.inf
    assert Ratio.of([1], [1, 0, 1]).decibels(1j) == math.inf


def test_exact_value() -> None:
    h = Ratio.of([1, 2], [0, 3])
    assert h.at(Fraction(1, 7)) == 3
    with pytest.raises(UndefinedError, match="pole"):
        h.at(Fraction(0))


def test_poles_and_zeros() -> None:
    h = Ratio.of([0, 1], [1, 3, 1])
    assert [root.exact for root in h.zeros()] == [0]
    assert [root.value.real for root in h.poles()] == pytest.approx([-0.381966011250105, -2.618033988749895])
    with pytest.raises(UndefinedError):
        Ratio.of([], [1]).zeros()


small = st.lists(st.fractions(-9, 9, max_denominator=9), min_size=1, max_size=6)


@given(small, small, small)
@settings(max_examples=80, deadline=None)
def test_law_lowest_terms_do_not_change_the_function(
    num: list[Fraction], den: list[Fraction], common: list[Fraction]
) -> None:
    """N/D = (N*C)/(D*C) for C != 0, and the canonical pair is the same."""
    if not any(den) or not any(common):
        return

    def times(p: list[Fraction], q: list[Fraction]) -> list[Fraction]:
        total = [Fraction(0)] * (len(p) + len(q) - 1)
        for i, a in enumerate(p):
            for k, b in enumerate(q):
                total[i + k] += a * b
        return total

    assert Ratio.of(num, den) == Ratio.of(times(num, common), times(den, common))


@given(small, small, st.complex_numbers(min_magnitude=1e-6, max_magnitude=1e6))
@settings(max_examples=80, deadline=None)
def test_law_evaluation_agrees_with_sixty_digits(
    num: list[Fraction], den: list[Fraction], s: complex
) -> None:
    if not any(den):
        return
    h = Ratio.of(num, den)
    with mpmath.workdps(60):
        if (
            abs(
                mpmath.polyval(
                    [mpmath.mpf(c.numerator) / c.denominator for c in reversed(h.den)], mpmath.mpc(s)
                )
            )
            == 0
        ):
            assert h(s) == complex(math.inf, 0)
            return
        expected = oracle(h, s)
    assert abs(mpmath.mpc(h(s)) - expected) <= 1e-12 * abs(expected)
