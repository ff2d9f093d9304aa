"""The largest difference of two responses over a band: against formulas, against samples, and with resonances in it."""

from __future__ import annotations

import math
from fractions import Fraction

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.exact.ratio import Ratio
from symnet.shape.deviation import deviation, grid


@given(
    st.lists(st.integers(1, 50), min_size=2, max_size=5), st.lists(st.integers(-2, 2), min_size=5, max_size=5)
)
@settings(max_examples=40, deadline=None)
def test_law_deviation_is_the_largest_of_all(num: list[int], off: list[int]) -> None:
    """No sample of 20 log10 |G| or of its phase exceeds the reported one, which one of them comes near."""
    den = [n + Fraction(d, 10) for n, d in zip(num, off, strict=False)]
    G = Ratio.of(num, den)
    found = deviation(G, Fraction(1, 100), Fraction(100))
    w = np.geomspace(0.01, 100, 4000)
    values = G(1j * w)
    decibels, degrees = 20 * np.log10(np.abs(values)), np.degrees(np.angle(values))
    assert np.abs(decibels).max() <= abs(found.decibels.value) + 1e-9
    if np.abs(degrees).max() < 89:
        assert np.abs(degrees).max() <= abs(found.degrees.value) + 1e-9
        assert abs(found.degrees.value) <= np.abs(degrees).max() * 1.05 + 1e-6
    else:
        assert abs(found.degrees.value) >= 89
    if abs(found.decibels.value) < 6:
        assert abs(found.decibels.value) <= np.abs(decibels).max() * 1.05 + 1e-6


def test_deviation_sees_a_resonance_of_any_width() -> None:
    """G = notch of relative width 1e-9 at 1 rad/s: depth by the formula |jd/(jd + j d0)| = 1/2 at its centre."""
    tiny = Fraction(1, 10**9)
    found = deviation(Ratio.of([1, tiny, 1], [1, 2 * tiny, 1]), Fraction(1, 10), Fraction(10))
    assert found.decibels.value == pytest.approx(20 * math.log10(0.5), rel=1e-12)
    assert found.decibels.f == pytest.approx(1 / (2 * math.pi), rel=1e-12)


def test_deviation_without_bound_and_reversed() -> None:
    one, ten = Fraction(1), Fraction(10)
    assert deviation(Ratio.of([4, 0, 1], [1]), one, ten).decibels.value == -math.inf
    assert deviation(Ratio.of([1], [4, 0, 1]), one, ten).decibels.value == math.inf
    assert deviation(Ratio.of([-1], [1]), one, ten).degrees.value == 180
    assert deviation(Ratio.of([], [1]), one, ten).decibels.value == -math.inf
    assert deviation(Ratio.of([1, -1], [1, 1]), one / 10, ten).degrees.value >= 90


def test_grid_is_dense_around_a_resonance() -> None:
    poles = Ratio.of([1], [1, Fraction(1, 1000), 1]).poles()
    w = grid(0.01, 100.0, poles)
    assert np.count_nonzero(np.abs(w - 1) < 2e-3) > 40
    assert (np.diff(w) > 0).all()
    assert (w[0], w[-1]) == (0.01, 100.0)
