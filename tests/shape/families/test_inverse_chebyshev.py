"""Inverse Chebyshev against printed tables and its definition."""

from __future__ import annotations

import math

import numpy as np
import pytest

from symnet.errors import LimitError, NotationError
from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.inverse_chebyshev import inverse_chebyshev
from tests.reference import families_with_zeros as published
from tests.shape.families.comparing import extremes, nearest


@pytest.mark.parametrize("row", published.INVERSE_POLES, ids=lambda row: row.id)
def test_printed_poles(row: published.InversePoles) -> None:
    made = inverse_chebyshev(row.order, row.attenuation)
    for sigma, omega in row.sigma_omega:
        p = complex(-sigma, omega)
        assert abs(nearest(p, made.poles) - p) <= row.within * abs(p)


@pytest.mark.parametrize("row", published.INVERSE_ZEROS, ids=lambda row: row.id)
def test_printed_zeros(row: published.InverseZeros) -> None:
    made = inverse_chebyshev(row.order, row.attenuation)
    assert made.reference("w3dB").w == pytest.approx(row.w3dB_over_edge, abs=6e-6)
    upper = sorted(z.imag for z in made.scaled("w3dB", 1.0).zeros if z.imag > 0)
    assert upper == pytest.approx(row.zeros, rel=row.within)


@pytest.mark.parametrize("order", [*range(1, 13), 20, 30, 60])
@pytest.mark.parametrize("attenuation", ["4 dB", "20 dB", "60 dB", "150 dB"])
def test_definition(order: int, attenuation: str) -> None:
    """|H(jw)|^-2 = 1 + E^2/T_n(1/w)^2, E^2 = 10^(attenuation/10) - 1 (Weinberg 1962)."""
    made = inverse_chebyshev(order, attenuation)
    e2 = 10 ** (float(attenuation.split(maxsplit=1)[0]) / 10) - 1
    for w in (0.2, 0.77, 1.0, 1.003, 1.3, 5.0):
        t = math.cosh(order * math.acosh(1 / w)) if w <= 1 else math.cos(order * math.acos(1 / w))
        assert abs(made(1j * w)) ** 2 == pytest.approx(1 / (1 + e2 / t**2), rel=1e-9)


@pytest.mark.parametrize("order", [5, 8, 20, 30])
def test_stop_band_has_equal_lobes(order: int) -> None:
    """The lobes between the zeros, n/2 zeros above w = 1, come up to the attenuation, all of them, and no higher."""
    made = inverse_chebyshev(order, "50 dB")
    angle = np.linspace(0, math.pi / 2, 400 * order + 1)[1:-1]
    level = 20 * np.log10(np.abs(made(1j / np.cos(angle))) + 1e-300)  # 0 at a zero
    tops = extremes(level)
    tops = tops[tops > -60]
    assert len(tops) == (order - 1) // 2
    assert tops == pytest.approx(-50, abs=1e-3)
    assert level.max() <= -50 + 1e-9


@pytest.mark.parametrize("order", [3, 8, 30])
def test_falls_monotonically_to_the_stop_band(order: int) -> None:
    made = inverse_chebyshev(order, "40 dB")
    assert max(np.diff([made.decibels(w) for w in np.linspace(0, 1, 2000)])) <= 1e-13


def test_references() -> None:
    made = inverse_chebyshev(6, "40 dB")
    assert made.decibels(made.reference("w3dB").w) == pytest.approx(-10 * math.log10(2), abs=1e-12)
    assert made.decibels(made.reference("stop_edge").w) == pytest.approx(-40, abs=1e-11)
    assert made.reference("unit_delay").w == pytest.approx(1 / made.delay(0))
    assert made.gain == 1.0
    assert "relative to the peak" in made.reference("stop_edge").label


def test_a_very_deep_stop_band_leaves_butterworth() -> None:
    """Order 3, 300 dB: the zeros are far away, and the poles on a circle to 1e-4."""
    made = inverse_chebyshev(3, "300 dB").scaled("w0", 1.0)
    for p in butterworth(3).poles:
        assert abs(nearest(p, made.poles) - p) < 1e-4


def test_more_digits() -> None:
    made = inverse_chebyshev(7, "40 dB")
    poles, zeros = made.precise(40)
    assert [complex(p) for p in poles] == pytest.approx(made.poles, rel=1e-15, abs=0)
    assert [complex(z) for z in zeros] == pytest.approx(made.zeros, rel=1e-15, abs=0)


@pytest.mark.parametrize("attenuation", ["3 dB", "0 dB", "601 dB", "40", "-40 dB"])
def test_refusals(attenuation: str) -> None:
    with pytest.raises(NotationError, match="stop-band attenuation"):
        inverse_chebyshev(3, attenuation)
    with pytest.raises(LimitError):
        inverse_chebyshev(61, "40 dB")
