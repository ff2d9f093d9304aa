"""Transitional Butterworth-Thomson: the ends, and the way between them."""

from __future__ import annotations

import cmath
import math

import pytest
import scipy.signal

from symnet.errors import NotationError
from symnet.shape.families.bessel import bessel
from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.butterworth_thomson import butterworth_thomson


@pytest.mark.parametrize("order", [1, 2, 3, 4, 7, 12, 40])
def test_ends_are_butterworth_and_bessel(order: int) -> None:
    assert butterworth_thomson(order, 0).poles == pytest.approx(butterworth(order).poles, rel=1e-14)
    assert butterworth_thomson(order, "1").poles == pytest.approx(
        bessel(order).scaled("w0", 1.0).poles, rel=1e-13
    )


@pytest.mark.parametrize("order", [2, 3, 5, 8, 12])
@pytest.mark.parametrize("m", [0.1, 0.5, 0.8])
def test_poles_go_along_the_published_way(order: int, m: float) -> None:
    """Angle linear in m, magnitude geometric (Peless and Murakami 1957, from memory); ends from scipy.signal."""

    def upper(poles: object) -> list[complex]:
        return sorted((complex(p) for p in poles if p.imag > -1e-9), key=lambda p: p.imag)  # type: ignore[attr-defined]

    start = upper(scipy.signal.buttap(order)[1])
    end = upper(scipy.signal.besselap(order, "phase")[1])
    found = upper(butterworth_thomson(order, m).poles)
    for b, t, p in zip(start, end, found, strict=True):
        assert abs(p) == pytest.approx(abs(t) ** m, rel=1e-12)
        angles = [abs(cmath.phase(x)) for x in (b, t, p)]  # a real pole may have -0 as its imaginary part
        assert angles[2] == pytest.approx(angles[0] + m * (angles[1] - angles[0]), rel=1e-12)


@pytest.mark.parametrize("m", ["0", "0.3", "1"])
def test_w0_stays(m: str) -> None:
    made = butterworth_thomson(6, m)
    assert math.prod(map(abs, made.poles)) == pytest.approx(1, rel=1e-14)
    assert made.reference("w0").w == 1.0


def test_more_digits_are_the_same_poles() -> None:
    made = butterworth_thomson(5, "0.3")
    assert [complex(p) for p in made.precise(30)[0]] == pytest.approx(made.poles, rel=1e-15)


@pytest.mark.parametrize("m", ["-0.1", 1.01, "half", float("nan")])
def test_m_lies_between_0_and_1(m: str | float) -> None:
    with pytest.raises(NotationError):
        butterworth_thomson(3, m)
