"""Linear phase with equiripple error against printed tables and against its definition."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from numpy.typing import NDArray

from symnet.errors import LimitError, NotationError
from symnet.shape.families.bessel import bessel
from symnet.shape.families.linear_phase import LINEAR_PHASE, linear_phase
from symnet.shape.families.prototype import Prototype
from tests.reference import families_legendre_linear_phase as published
from tests.shape.families.comparing import decimals_agree, extremes, nearest


def phase_error(made: Prototype, w: NDArray[np.float64]) -> NDArray[np.float64]:
    """-phase - w in degrees, the phase put together from the argument of each factor 1 - jw/p."""
    factors = np.angle(1j * w[:, None] - np.array(made.poles)) - np.angle(-np.array(made.poles))
    found: NDArray[np.float64] = np.degrees(factors.sum(axis=1) - w)
    return found


@pytest.mark.parametrize("row", published.LINEAR_PHASE, ids=lambda row: row.id)
def test_printed_poles(row: published.LinearPhase) -> None:
    """Every printed decimal, but for two misprints."""
    made = linear_phase(row.order, row.error).scaled("w3dB", 1.0)
    for place, printed in enumerate(row.sigma_omega):
        assert decimals_agree(printed, made.poles, row.decimals, units=0.55) == (place != row.misprint)
    if row.misprint is not None:
        assert decimals_agree(row.right, made.poles, row.decimals)


@pytest.mark.parametrize("order", [2, 3, 8, 13, 20, 30])
@pytest.mark.parametrize("error", ["0.001 deg", "0.05 deg", "0.5 deg", "5 deg"])
def test_definition(order: int, error: str) -> None:
    """n extremes of the error, all of one height, alternating, the last one with the phase ahead of the line."""
    made = linear_phase(order, error)
    degrees = float(error.split(maxsplit=1)[0])
    edge = made.reference("phase_edge").w
    found = extremes(phase_error(made, np.linspace(0, edge, 4000 * order)))
    assert len(found) == order
    assert np.abs(found) == pytest.approx(degrees, rel=1e-5, abs=1e-9)
    assert all(np.sign(found) == [(-1) ** (order - 1 - i) for i in range(order)])
    assert made.reference("phase_line").w == 1.0
    assert phase_error(made, np.array([edge]))[0] == pytest.approx(-degrees, abs=1e-9)


@pytest.mark.parametrize("order", [2, 5, 12, 30])
@pytest.mark.parametrize("error", ["0.001 deg", "0.5 deg"])
def test_more_digits(order: int, error: str) -> None:
    """With 40 digits the heights agree to 35; the doubles are those digits rounded."""
    made = linear_phase(order, error)
    poles, _ = made.precise(40)
    assert [complex(p) for p in poles] == pytest.approx(made.poles, rel=1e-15, abs=0)
    with mpmath.workdps(45):
        degrees = mpmath.mpf(error.split(maxsplit=1)[0])
        for w in rough_extremes(made):

            def delay(v: mpmath.mpf) -> mpmath.mpf:
                return mpmath.fsum(-p.real / (p.real**2 + (v - p.imag) ** 2) for p in poles) - 1

            at = mpmath.findroot(delay, w)
            phase = mpmath.fsum(mpmath.atan2(at - p.imag, -p.real) for p in poles) - at
            assert abs(abs(phase) * 180 / mpmath.pi / degrees - 1) < 1e-30


def rough_extremes(made: Prototype) -> NDArray[np.float64]:
    w = np.linspace(0, made.reference("phase_edge").w, 2000 * made.order)
    curve = phase_error(made, w)
    slope = np.diff(curve)
    found: NDArray[np.float64] = w[1:-1][slope[1:] * slope[:-1] < 0]
    return found[:: max(1, len(found) // 4)]


def test_every_order_and_error_is_reached() -> None:
    for order in (*range(2, 13), 31, 60):
        for degrees in (0.001, 5.0):
            poles, zeros = LINEAR_PHASE.near(order, (degrees,))
            assert len(poles) == order
            assert not zeros
            assert all(p.real < 0 for p in poles)


def test_errors_between_the_steps_are_continuous() -> None:
    """Near a step of the continuation, 0.25 degree, nothing jumps."""
    below, above = linear_phase(7, "0.2499999 deg"), linear_phase(7, "0.2500001 deg")
    assert below.poles == pytest.approx(above.poles, rel=1e-6)


def test_a_small_error_is_near_bessel() -> None:
    """Order 3: the distance falls as the error does."""
    wanted = bessel(3).scaled("w0", 1.0)
    distances = []
    for error in ("0.5 deg", "0.05 deg", "0.005 deg"):
        made = linear_phase(3, error).scaled("w0", 1.0)
        distances.append(max(abs(nearest(p, made.poles) - p) for p in wanted.poles))
    assert distances[0] > 1.5 * distances[1] > 1.5 * 1.5 * distances[2]
    assert distances[2] < 0.1


def test_linear_further_out_than_bessel() -> None:
    """At one -3 dB frequency, order 5: the band within 0.5 degree of a straight line is wider than that of Bessel."""
    made = linear_phase(5, "0.5 deg").scaled("w3dB", 1.0)
    other = bessel(5).scaled("w3dB", 1.0)
    w = np.linspace(0, 3, 30001)
    phase = np.degrees(sum(np.angle(1j * w - p) - np.angle(-p) for p in other.poles))
    slope = phase[10] / w[10]
    left = w[np.flatnonzero(np.abs(phase - slope * w) > 0.5)[0]]
    assert made.reference("phase_edge").w > 1.1 * left


@pytest.mark.parametrize("error", ["0.5", "0 deg", "6 deg", "0.0001 deg", "-1 deg", "0.5 dB"])
def test_refusals(error: str) -> None:
    with pytest.raises(NotationError, match="phase error"):
        linear_phase(3, error)


def test_orders() -> None:
    with pytest.raises(NotationError, match="order 2"):
        linear_phase(1)
    with pytest.raises(LimitError):
        linear_phase(61)
    assert linear_phase(4, "0.5°") == linear_phase(4, "0.5 deg")
