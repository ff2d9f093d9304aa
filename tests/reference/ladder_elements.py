"""The elements of an LC ladder from the poles of its H, by continued fractions in many digits.

Singly terminated (ideal voltage source, load 1 ohm): with D(s) = m(s) + n(s), even and odd part, the two-port seen
from the load has the admittance or impedance m/n or n/m, whichever grows with s; each division gives one element.
Doubly terminated: |rho(jw)|^2 = 1 - 4 Rs RL/(Rs + RL)^2 |H(jw)/H(0)|^2 gives rho = -F/D with the roots of F in the
left half plane, and Zin = Rs (D - F)/(D + F) is divided down in the same way, the first element a shunt C. Sources:
S. Darlington, "Synthesis of reactance 4-poles", Journal of Mathematics and Physics 18 (1939), 257-353 (from memory).
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import mpmath

__all__ = ["doubly_terminated", "singly_terminated"]

_DIGITS = 120


def _monic(roots: Sequence[Any]) -> list[Any]:
    """Coefficients in ascending powers of s, real parts only: the roots come in pairs."""
    total = [mpmath.mpc(1)]
    for root in roots:
        total = [
            (total[k - 1] if k else 0) - root * (total[k] if k < len(total) else 0)
            for k in range(len(total) + 1)
        ]
    return [c.real for c in total]


def _continued(higher: list[Any], lower: list[Any], count: int) -> list[Any]:
    """The quotients q of higher/lower = q1 s + 1/(q2 s + ...)."""
    found = []
    for _ in range(count):
        quotient = higher[-1] / lower[-1]
        found.append(quotient)
        rest = [a - quotient * b for a, b in zip(higher, [mpmath.mpf(0), *lower], strict=True)]
        higher, lower = lower, rest[:-2]
    return found


def _reflection_zeros(squares: Sequence[Any]) -> list[Any]:
    """The left one of +-sqrt(x) of each x = s^2; a double x < 0 is a pair on the jw axis."""
    on_axis = sorted(
        x.real for x in squares if abs(x.imag) < mpmath.mpf(10) ** (-_DIGITS // 4) * abs(x) and x.real < 0
    )
    off_axis = [
        x for x in squares if not (abs(x.imag) < mpmath.mpf(10) ** (-_DIGITS // 4) * abs(x) and x.real < 0)
    ]
    found = [-mpmath.sqrt(x) for x in off_axis]
    for x, y in zip(on_axis[::2], on_axis[1::2], strict=True):
        w = mpmath.sqrt(-(x + y) / 2)
        found += [mpmath.mpc(0, w), mpmath.mpc(0, -w)]
    return found


def singly_terminated(poles: Sequence[Any]) -> list[float]:
    """L1, C2, ... from the source on, for a load of 1 ohm and a first series L."""
    with mpmath.workdps(_DIGITS):
        d = _monic(poles)
        n = len(d) - 1
        d = [c / d[0] for c in d]
        higher = [c if (n - k) % 2 == 0 else mpmath.mpf(0) for k, c in enumerate(d)]
        lower = [c if (n - k) % 2 else mpmath.mpf(0) for k, c in enumerate(d)][:-1]
        return [float(q) for q in _continued(higher, lower, n)][::-1]


def doubly_terminated(
    poles: Sequence[Any], rs: float, rl: float, *, zeros_left: bool
) -> tuple[list[float], float]:
    """C1, L2, C3, ... from the source on, and the load that they end in; the source has rs ohm.

    ``zeros_left`` puts the zeros of rho into the left half plane, so that the elements fall from the source on.
    """
    with mpmath.workdps(_DIGITS):
        d = _monic(poles)
        n = len(d) - 1
        mirrored = [c * (-1) ** k for k, c in enumerate(d)]
        product = [
            mpmath.fsum(d[i] * mirrored[k - i] for i in range(max(0, k - n), min(k, n) + 1))
            for k in range(0, 2 * n + 1, 2)
        ]  # D(s) D(-s) in powers of s^2
        product[0] -= d[0] ** 2 * 4 * mpmath.mpf(rs) * rl / (mpmath.mpf(rs) + rl) ** 2
        zero = 0
        while abs(product[zero]) < mpmath.mpf(10) ** (-_DIGITS // 2):
            zero += 1
        squares = [mpmath.mpf(0)] * zero
        if n > zero:
            squares += mpmath.polyroots(product[zero:][::-1], maxsteps=2000, extraprec=600, error=False)
        zeros = _reflection_zeros(squares)
        f = _monic(zeros if zeros_left else [-x for x in zeros])
        above = [a + b for a, b in zip(d, f, strict=True)]
        below = [a - b for a, b in zip(d, f, strict=True)][:-1]
        found = _continued(above, below, n)
        values = [float(q / rs if k % 2 == 0 else q * rs) for k, q in enumerate(found)]
        load = mpmath.mpf(rs) * (d[0] - f[0]) / (d[0] + f[0])
        return values, float(load)
