"""Step responses from poles and zeros against closed forms and against another implementation."""

from __future__ import annotations

import math

import numpy as np
import pytest
import scipy.signal

from symnet.shape.families import Prototype
from symnet.shape.families.bessel import bessel
from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.chebyshev import chebyshev
from symnet.shape.families.critically_damped import critically_damped
from symnet.shape.families.delays import bessel_all_pass, first_order_all_pass, pade_delay
from symnet.shape.families.elliptic import elliptic
from symnet.shape.families.linkwitz_riley import linkwitz_riley
from symnet.shape.families.second_order import second_order

T = np.linspace(0, 12, 241)


@pytest.mark.parametrize("order", [1, 2, 5, 12, 30])
def test_coincident_poles(order: int) -> None:
    """1/(1 + s)^n: y(t) = 1 - exp(-t) (1 + t + ... + t^(n-1)/(n-1)!), never above 1 and never falling."""
    y = critically_damped(order).step(12.0, 241)
    rest = sum(T**k / math.factorial(k) for k in range(order))
    assert y == pytest.approx(1 - np.exp(-T) * rest, abs=1e-12)
    assert np.diff(y).min() > -1e-13


@pytest.mark.parametrize("q", [0.1, 0.5, 0.7, 3.0])
def test_second_order(q: float) -> None:
    """y/H(0) = 1 - exp(-t/2Q) (cos bt + sin bt/(2Qb)), b^2 = 1 - 1/(4Q^2); the limit at Q = 1/2 is 1 - (1 + t) exp(-t)."""
    made = second_order(q)
    b = np.sqrt(complex(1 - 1 / (4 * q * q)))
    ripple = np.cos(b * T) + (np.sin(b * T) / b if b else T) / (2 * q)
    assert made.step(12.0, 241) / made.gain == pytest.approx(
        (1 - np.exp(-T / (2 * q)) * ripple).real, abs=1e-12
    )


@pytest.mark.parametrize(
    "made",
    [
        butterworth(3),
        bessel(8),
        chebyshev(5, "1 dB"),
        chebyshev(4, "1 dB").high_pass(),
        elliptic(5, "0.5 dB", "50 dB"),
        elliptic(4, "0.5 dB", "50 dB"),
        butterworth(2).band_pass(w0="1 rad/s", bandwidth="50 %"),
        butterworth(3).band_stop(w0="1 rad/s", bandwidth="50 %"),
        bessel_all_pass(3),
        pade_delay(2, 3),
    ],
    ids=str,
)
def test_against_another_implementation(made: Prototype) -> None:
    s = 0.3 + 0.8j
    k = (made(s) * np.prod([s - p for p in made.poles]) / np.prod([s - z for z in made.zeros])).real
    system = scipy.signal.ZerosPolesGain(list(made.zeros), list(made.poles), k)
    _, wanted = scipy.signal.step(system, T=T)
    assert made.step(12.0, 241) == pytest.approx(wanted, abs=2e-8)


def test_time_and_frequency_scale_together() -> None:
    made = linkwitz_riley(8)
    fast = made.at(f6dB="30 kHz")
    assert fast.step(12.0 / (2 * math.pi * 30e3), 241) == pytest.approx(made.step(12.0, 241), abs=1e-10)


def test_ends() -> None:
    """The final value is H(0), the first one H(infinity): -1 for a first-order all-pass."""
    y = first_order_all_pass().step(40.0, 11)
    assert (y[0], y[-1]) == (pytest.approx(-1), pytest.approx(1))
    assert chebyshev(4, "1 dB").step(200.0, 11)[-1] == pytest.approx(10 ** (-1 / 20), abs=1e-8)
    assert butterworth(2).band_pass(w0="1 rad/s", bandwidth="1 rad/s").step(200.0, 11)[-1] == pytest.approx(
        0, abs=1e-12
    )
