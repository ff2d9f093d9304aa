"""Prototypes against scipy.signal: poles, zeros and gain to 1e-9 up to order 12.

What scipy itself has is shown with 40 digits: its elliptic prototypes of order 12 with 20 dB are right to 1e-11, its
others to 1e-13 or better (:func:`test_what_scipy_has`), so that 1e-9 holds the two to each other and not to rounding.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

import numpy as np
import pytest
import scipy.signal

from symnet.shape.families.bessel import bessel
from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.chebyshev import chebyshev
from symnet.shape.families.elliptic import elliptic
from symnet.shape.families.inverse_chebyshev import inverse_chebyshev
from symnet.shape.families.prototype import Prototype

ORDERS = range(1, 13)
RIPPLES = (0.01, 0.5, 1.0, 3.0)
ATTENUATIONS = (20.0, 40.0, 80.0)
BESSEL_NORMS = {"delay": "unit_delay", "mag": "w3dB", "phase": "w0"}

Roots = tuple[Any, Any, float]


def distance(ours: Sequence[complex], theirs: Any) -> float:
    """The largest relative distance of a root of scipy from the nearest of ours; one to one."""
    wanted, found = np.atleast_1d(np.asarray(theirs, dtype=complex)), np.asarray(ours, dtype=complex)
    assert len(wanted) == len(found)
    if not len(wanted):
        return 0.0
    gaps = np.abs(wanted[:, None] - found[None, :]) / np.abs(wanted)[:, None]
    assert len(set(gaps.argmin(axis=1).tolist())) == len(wanted)
    return float(gaps.min(axis=1).max())


def same(made: Prototype, theirs: Roots) -> None:
    zeros, poles, gain = theirs
    zeros, poles = np.atleast_1d(zeros), np.atleast_1d(poles)
    assert distance(made.poles, poles) < 1e-9
    assert distance(made.zeros, zeros) < 1e-9
    dc = abs(gain * np.prod(-zeros) / np.prod(-poles))
    assert made.gain == pytest.approx(dc, rel=1e-9)
    assert abs(made(0.0)) == pytest.approx(dc, rel=1e-9)


@pytest.mark.parametrize("order", ORDERS)
def test_butterworth(order: int) -> None:
    same(butterworth(order), scipy.signal.buttap(order))


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize("norm", BESSEL_NORMS)
def test_bessel(order: int, norm: str) -> None:
    zeros, poles, _ = scipy.signal.besselap(order, norm)
    made = bessel(order).scaled(BESSEL_NORMS[norm], 1.0)
    assert distance(made.poles, poles) < 1e-9
    assert not len(zeros)


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize("ripple", RIPPLES)
def test_chebyshev(order: int, ripple: float) -> None:
    same(chebyshev(order, f"{ripple} dB"), scipy.signal.cheb1ap(order, ripple))


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize("attenuation", ATTENUATIONS)
def test_inverse_chebyshev(order: int, attenuation: float) -> None:
    same(inverse_chebyshev(order, f"{attenuation} dB"), scipy.signal.cheb2ap(order, attenuation))


@pytest.mark.parametrize("order", ORDERS)
@pytest.mark.parametrize("ripple", RIPPLES)
@pytest.mark.parametrize("attenuation", ATTENUATIONS)
def test_elliptic(order: int, ripple: float, attenuation: float) -> None:
    made = elliptic(order, f"{ripple} dB", f"{attenuation} dB")
    zeros, poles, gain = scipy.signal.ellipap(order, ripple, attenuation)
    same(made, (zeros, poles, gain))


@pytest.mark.parametrize("order", [1, 2, 3, 6])
@pytest.mark.parametrize(
    ("ours", "theirs"),
    [
        (lambda n: chebyshev(n, "0.5 dB"), lambda n, **how: scipy.signal.cheby1(n, 0.5, 1.0, **how)),
        (lambda n: inverse_chebyshev(n, "40 dB"), lambda n, **how: scipy.signal.cheby2(n, 40, 1.0, **how)),
        (lambda n: elliptic(n, "1 dB", "50 dB"), lambda n, **how: scipy.signal.ellip(n, 1, 50, 1.0, **how)),
    ],
    ids=["chebyshev", "inverse chebyshev", "elliptic"],
)
def test_high_pass(order: int, ours: Callable[[int], Prototype], theirs: Callable[..., Any]) -> None:
    z, p, k = theirs(order, btype="high", analog=True, output="zpk")
    made = ours(order).high_pass()
    assert distance(made.poles, p) < 1e-9
    assert len(made.zeros) == len(z)
    w = np.array([0.3, 0.9, 2.5])
    wanted = scipy.signal.freqs_zpk(z, p, k, w)[1]
    assert np.abs(np.asarray(made(1j * w))) == pytest.approx(np.abs(wanted), rel=1e-9)


@pytest.mark.parametrize(
    ("made", "theirs", "has"),
    [
        (butterworth(12), scipy.signal.buttap(12), 1e-15),
        (bessel(12), scipy.signal.besselap(12, "delay"), 1e-13),
        (chebyshev(12, "1 dB"), scipy.signal.cheb1ap(12, 1), 1e-14),
        (inverse_chebyshev(12, "40 dB"), scipy.signal.cheb2ap(12, 40), 1e-14),
        (elliptic(12, "1 dB", "80 dB"), scipy.signal.ellipap(12, 1, 80), 1e-14),
        (elliptic(12, "3 dB", "20 dB"), scipy.signal.ellipap(12, 3, 20), 1e-11),
    ],
    ids=str,
)
def test_what_scipy_has(made: Prototype, theirs: Roots, has: float) -> None:
    poles, zeros = made.precise(40)
    assert distance([complex(p) for p in poles], theirs[1]) < has
    assert distance([complex(z) for z in zeros], theirs[0]) < has
    assert distance(made.poles, [complex(p) for p in poles]) < 2e-15
    assert distance(made.zeros, [complex(z) for z in zeros]) < 2e-15
