"""Step responses against closed forms, published overshoots, scipy, and mpmath's inverse transform."""

from __future__ import annotations

import math
from fractions import Fraction
from random import Random
from typing import Any

import mpmath
import numpy as np
import pytest
from scipy import signal

import symnet as sn
from symnet.errors import LimitError, MissingValueError, UndefinedError
from symnet.exact.ratio import Ratio


def second_order(q: str) -> Ratio:
    return Ratio.of([1], [1, 1 / Fraction(q), 1])


# 100 exp(-pi/sqrt(4 Q^2 - 1)) per cent; common practice, no source
@pytest.mark.parametrize(("q", "percent"), [("0.70710678118654752", 4.32), ("1", 16.3)])
def test_overshoot_of_second_order(q: str, percent: float) -> None:
    found = sn.step(second_order(q))
    assert found.overshoot == pytest.approx(percent, abs=0.05)
    assert found.overshoot == pytest.approx(
        100 * math.exp(-math.pi / math.sqrt(4 * float(q) ** 2 - 1)), rel=1e-9
    )


# Horowitz and Hill, The Art of Electronics, time-domain comparison of filters; two decimals computed apart, from memory
OVERSHOOTS = [
    *(("butterworth", n, p) for n, p in ((2, 4.32), (3, 8.15), (5, 12.78), (6, 14.25), (8, 16.34))),
    *(("bessel", n, p) for n, p in ((2, 0.43), (3, 0.75), (4, 0.84), (5, 0.77), (6, 0.64))),
]


@pytest.mark.parametrize(("family", "order", "percent"), OVERSHOOTS)
def test_overshoot_of_families(family: str, order: int, percent: float) -> None:
    prototype = {"butterworth": sn.butterworth, "bessel": sn.bessel}[family](order)
    h = Ratio.of(
        [1], [Fraction(str(c)) / Fraction(str(prototype.denominator()[0])) for c in prototype.denominator()]
    )
    assert sn.step(h).overshoot == pytest.approx(percent, abs=0.006)


def test_a_shaper_buffered_and_not() -> None:
    """(t/tau) exp(-t/tau), peak 1/e at tau; unbuffered with equal parts 0.2749 at 0.861 tau. Computed apart."""
    buffered = sn.step(Ratio.of([0, 1], [1, 2, 1]))
    assert buffered.peak == pytest.approx((1.0, math.exp(-1)), rel=1e-12)
    unbuffered = sn.step(Ratio.of([0, 1], [1, 3, 1]))
    assert unbuffered.peak is not None
    t, y = unbuffered.peak
    assert t == pytest.approx(0.861, abs=5e-4)
    assert y == pytest.approx(0.2749, abs=5e-5)
    assert buffered.overshoot is None


def test_first_order_figures() -> None:
    found = sn.step(Ratio.of([1], [1, Fraction(1, 1000)]))
    assert found.rise() == pytest.approx(1e-3 * math.log(9), rel=1e-12)
    assert found.delay() == pytest.approx(1e-3 * math.log(2), rel=1e-12)
    assert found.settling(0.1) == pytest.approx(1e-3 * math.log(1000), rel=1e-12)
    assert (found.overshoot, found.undershoot) == (0.0, 0.0)
    assert found([-1.0, 0.0]).tolist() == [0.0, pytest.approx(0.0, abs=1e-15)]
    assert found.impulse([0.0])[0] == pytest.approx(1000, rel=1e-14)
    pulse = found.pulse([5e-4, 2e-3], 1e-3)
    assert pulse[0] == pytest.approx(1 - math.exp(-0.5), rel=1e-13)
    assert pulse[1] == pytest.approx(math.exp(-1) - math.exp(-2), rel=1e-13)


def test_a_zero_in_the_right_half_plane_starts_the_wrong_way() -> None:
    found = sn.step(Ratio.of([1, -1], [1, 2, 1]))
    assert found.undershoot is not None
    assert found.undershoot > 5
    assert found.initial == 0.0


def random_ratio(random: Random, decades: int) -> Ratio:
    """A stable H of order 1 to 7, real and complex poles, spread over so many decades; fewer zeros than poles."""
    den: list[Fraction] = [Fraction(1)]
    for _ in range(random.randint(1, 4)):
        w = Fraction(round(10 ** random.uniform(0, decades) * 1000), 1000)
        if random.random() < 0.5:
            factor = [Fraction(1), 1 / w]
        else:
            q = Fraction(random.randint(30, 400), 100)
            factor = [Fraction(1), 1 / (q * w), 1 / w**2]
        for _ in range(2 if random.random() < 0.2 else 1):
            den = [
                sum(
                    (den[i] * factor[k - i] for i in range(len(den)) if 0 <= k - i < len(factor)), Fraction(0)
                )
                for k in range(len(den) + len(factor) - 1)
            ]
    num = [Fraction(random.randint(-9, 9), 10) * c for c in den[: random.randint(1, len(den))]]
    return Ratio.of(num if any(num) else [Fraction(1)], den)


@pytest.mark.parametrize("seed", range(100))
def test_random_responses_are_those_of_mpmath(seed: int) -> None:
    """The inverse Laplace transform by Talbot's contour, in 40 digits; every second one is spread over ten decades."""
    random = Random(seed)
    h = random_ratio(random, 10 if seed % 2 else 2)
    y = sn.step(h)
    times = [10 ** random.uniform(-9, 1) for _ in range(3)] if seed % 2 else [0.01, 0.3, 2.0]

    def transform(s: Any) -> Any:
        top, bottom = (
            sum((mpmath.mpf(c.numerator) / c.denominator * s**k for k, c in enumerate(side)), mpmath.mpf(0))
            for side in (h.num, h.den)
        )
        return top / bottom / s

    size = max(1e-30, float(np.abs(y(np.geomspace(1e-10, 1e2, 200))).max()))
    turning = max(abs(root.value.imag) for root in h.poles())
    with mpmath.workdps(120):
        for t in times:
            degree = 60 + int(2 * turning * t)  # the contour must pass outside of every pole
            if (
                degree > 400
            ):  # more than sixty turns: beyond what the contour can do, and past what is left of them
                continue
            wanted = float(mpmath.invertlaplace(transform, t, method="talbot", degree=degree))
            assert float(y([t])[0]) == pytest.approx(wanted, abs=1e-9 * size), (seed, t)


@pytest.mark.parametrize("seed", range(0, 100, 10))
def test_mild_responses_are_those_of_scipy(seed: int) -> None:
    h = random_ratio(Random(seed), 2)
    system = signal.TransferFunction([float(c) for c in h.num[::-1]], [float(c) for c in h.den[::-1]])
    t = np.linspace(0, 5, 200)
    _, wanted = signal.step(system, T=t)
    size = float(np.abs(wanted).max())
    assert sn.step(h)(t) == pytest.approx(wanted, abs=1e-7 * size)


def test_nearly_equal_poles_lose_nothing() -> None:
    """exp(-t) - exp(-(1 + e) t) over e tends to t exp(-t): poles 1e-12 apart."""
    e = Fraction(1, 10**12)
    found = sn.step(Ratio.of([0, 1], [1 + e, 2 + e, 1]))
    t = np.array([0.5, 1.0, 3.0])
    assert found(t) == pytest.approx(t * np.exp(-t), rel=1e-11)


def test_what_has_no_step_response() -> None:
    with pytest.raises(UndefinedError, match="grows with s"):
        sn.step(Ratio.of([0, 0, 1], [1, 1]))
    with pytest.raises(LimitError, match="order 101"):
        sn.step(Ratio.of([1], [1] + [0] * 100 + [1]))
    with pytest.raises(MissingValueError):
        sn.step(sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")))


def test_what_does_not_settle_has_no_figures() -> None:
    integrator = sn.step(Ratio.of([1], [0, 1]))
    assert integrator([2.0])[0] == pytest.approx(2.0, rel=1e-14)
    assert (integrator.final, integrator.overshoot, integrator.rise(), integrator.settling()) == (None,) * 4
    tank = sn.step(Ratio.of([1], [1, 0, 1]))
    assert not tank.settles
    assert tank([math.pi])[0] == pytest.approx(2.0, rel=1e-14)
    assert "does not settle" in repr(tank)
