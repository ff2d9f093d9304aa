"""Poles and zeros of the families by their textbook closed forms, apart from the package and from scipy.

All for the low-pass with w = 1 rad/s at the edge that the function names; K = 10^(dB/10) - 1 is eps^2. Sources:
Butterworth, Chebyshev: Matthaei/Young/Jones sec. 4.05; inverse Chebyshev: the Chebyshev poles and zeros turned
over, s -> 1/s; Bessel: reverse Bessel polynomials theta_n(s) = sum (2n-k)! s^k/((n-k)! k! 2^(n-k)); Papoulis:
|H|^2 = 1/(1 + L_n(w^2)), L_4(x) = 6x^4 - 8x^3 + 3x^2 (Papoulis 1958). From memory, all of them textbook standard.
"""

from __future__ import annotations

from collections.abc import Sequence
from math import factorial
from typing import Any

import mpmath
import numpy as np

__all__ = [
    "bessel_mag",
    "butterworth",
    "chebyshev",
    "chebyshev_3db",
    "chebyshev_g",
    "inverse_chebyshev",
    "inverse_chebyshev_zeros",
    "papoulis_4",
    "pole_distance",
    "poles_of",
    "singly_terminated_butterworth",
]

Poles = tuple[complex, ...]


def butterworth(n: int) -> Poles:
    """-3 dB at w = 1."""
    return tuple(complex(mpmath.expjpi((2 * k + n - 1) / (2 * n))) for k in range(1, n + 1))


def _eps(db: float) -> Any:
    return mpmath.sqrt(mpmath.power(10, mpmath.mpf(db) / 10) - 1)


def chebyshev(n: int, ripple_db: float) -> Poles:
    """Ripple edge at w = 1."""
    a = mpmath.asinh(1 / _eps(ripple_db)) / n
    angles = [(2 * k - 1) * mpmath.pi / (2 * n) for k in range(1, n + 1)]
    return tuple(complex(-mpmath.sinh(a) * mpmath.sin(t), mpmath.cosh(a) * mpmath.cos(t)) for t in angles)


def chebyshev_3db(n: int, ripple_db: float, *, from_dc: bool) -> Poles:
    """Half power at w = 1, counted from the ripple peak or from the DC gain (a minimum when n is even)."""
    eps = _eps(ripple_db)
    reference = 1 + eps**2 if from_dc and n % 2 == 0 else mpmath.mpf(1)
    level = mpmath.sqrt(2 * reference - 1) / eps
    edge = mpmath.cosh(mpmath.acosh(level) / n)
    return tuple(complex(p / edge) for p in chebyshev(n, ripple_db))


def chebyshev_g(n: int, ripple_db: float) -> tuple[float, ...]:
    """g_1 .. g_n and g_(n+1), the load, of the doubly terminated ladder (Matthaei/Young/Jones sec. 4.05)."""
    beta = mpmath.log(mpmath.coth(mpmath.mpf(ripple_db) * mpmath.log(10) / 40))
    gamma = mpmath.sinh(beta / (2 * n))
    a = [mpmath.sin((2 * k - 1) * mpmath.pi / (2 * n)) for k in range(1, n + 1)]
    b = [gamma**2 + mpmath.sin(k * mpmath.pi / n) ** 2 for k in range(1, n + 1)]
    g = [2 * a[0] / gamma]
    for k in range(1, n):
        g.append(4 * a[k - 1] * a[k] / (b[k - 1] * g[k - 1]))
    return (*map(float, g), 1.0 if n % 2 else float(mpmath.tanh(beta / 4) ** 2))


def inverse_chebyshev(n: int, stop_db: float, *, at_3db: bool) -> Poles:
    """Stop-band edge at w = 1, or half power at w = 1."""
    edge = _inverse_3db(n, stop_db) if at_3db else mpmath.mpf(1)
    return tuple(complex(1 / (edge * p)) for p in _inverse_prototype(n, stop_db))


def inverse_chebyshev_zeros(n: int, stop_db: float, *, at_3db: bool) -> tuple[float, ...]:
    """The frequencies of the zeros on the imaginary axis, ascending."""
    edge = _inverse_3db(n, stop_db) if at_3db else mpmath.mpf(1)
    cosines = [mpmath.cos((2 * k - 1) * mpmath.pi / (2 * n)) for k in range(1, n // 2 + 1)]
    return tuple(sorted(float(1 / (edge * c)) for c in cosines))


def _inverse_prototype(n: int, stop_db: float) -> list[Any]:
    a = mpmath.asinh(_eps(stop_db)) / n
    angles = [(2 * k - 1) * mpmath.pi / (2 * n) for k in range(1, n + 1)]
    return [mpmath.mpc(-mpmath.sinh(a) * mpmath.sin(t), mpmath.cosh(a) * mpmath.cos(t)) for t in angles]


def _inverse_3db(n: int, stop_db: float) -> Any:
    return 1 / mpmath.cosh(mpmath.acosh(_eps(stop_db)) / n)


def bessel_mag(n: int) -> Poles:
    """-3 dB at w = 1."""
    theta = [
        mpmath.mpf(factorial(2 * n - k)) / (factorial(n - k) * factorial(k) * 2 ** (n - k))
        for k in range(n + 1)
    ]

    def loss(w: Any) -> Any:
        return abs(mpmath.polyval(theta[::-1], 1j * w) / theta[0]) ** 2 - 2

    with mpmath.workdps(30):
        w3 = mpmath.findroot(loss, mpmath.sqrt((2 * n - 1) * mpmath.log(2)))
        roots = mpmath.polyroots(theta[::-1], maxsteps=200, extraprec=200)
        return tuple(complex(p / w3) for p in roots)


def papoulis_4() -> Poles:
    """Half power at w = 1: the roots of 1 + L_4(-s^2) in the left half plane."""
    return tuple(p for p in poles_of([1, 0, 0, 0, 3, 0, 8, 0, 6]) if p.real < 0)


def poles_of(ascending: Sequence[float]) -> Poles:
    """The roots of a polynomial, computed to 30 digits."""
    with mpmath.workdps(30):
        return tuple(map(complex, mpmath.polyroots(list(ascending)[::-1], maxsteps=500, extraprec=300)))


def singly_terminated_butterworth(n: int) -> tuple[float, ...]:
    """The elements from the source end, series L first, for a stiff source and a load of 1 ohm.

    From the load end: g1=a1, g_m=a_m a_(m-1)/(c_(m-1) g_(m-1)), a_m=sin((2m-1)pi/2n), c_m=cos^2(m pi/2n).
    """
    a = [mpmath.sin((2 * m - 1) * mpmath.pi / (2 * n)) for m in range(1, n + 1)]
    c = [mpmath.cos(m * mpmath.pi / (2 * n)) ** 2 for m in range(1, n + 1)]
    g = [a[0]]
    for m in range(1, n):
        g.append(a[m] * a[m - 1] / (c[m - 1] * g[m - 1]))
    return tuple(float(x) for x in reversed(g))


def pole_distance(found: Sequence[complex], wanted: Sequence[complex]) -> float:
    """The largest distance from a wanted pole to the nearest one found, relative to the wanted pole."""
    assert len(found) == len(wanted)
    gaps = np.abs(np.subtract.outer(np.array(wanted), np.array(found)))
    return float(np.max(gaps.min(axis=1) / np.abs(np.array(wanted))))
