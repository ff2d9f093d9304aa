"""H on the jw axis: magnitude, continuous phase and group delay, as exact functions of w^2 and at frequencies.

A polynomial on the axis is P(jw) = E(x) + j w O(x) with x = w^2 and exact E and O. So |H|^2 and the group delay are
exact rational functions of x, and every question about them (where is it 3 dB down, where is its peak) becomes one
about roots. At single frequencies phase and delay are sums over the certified poles and zeros, so that no angle is
ever wrapped and no difference of neighbouring phases is taken.

Phase convention. H = k s^(z-m) * product of (1 - s/zero) / product of (1 - s/pole): each factor starts at 0 and turns
continuously, s^(z-m) gives (z-m) times +90 degrees, a negative k gives -180 degrees. So 1/s^3 stands at -270 degrees
and an inverting amplifier at -180 degrees. On the jw axis the phase jumps by -180 degrees at a pole and by +180
degrees at a zero; exactly there the middle of the jump is given.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from typing import TYPE_CHECKING, Any, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.errors import Fault, UndefinedError
from symnet.exact.ratio import Ratio
from symnet.exact.roots import Root
from symnet.response.axis import added, product, squared, turning

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer

__all__ = [
    "decibels",
    "delay_over_square",
    "group_delay",
    "in_numbers",
    "phase",
    "squared_magnitude",
]

Floats: TypeAlias = NDArray[np.float64]
Frequencies: TypeAlias = "float | Sequence[float] | Floats"


def in_numbers(H: Transfer | Ratio) -> Ratio:
    """H as a ratio of numbers; MissingValueError while a name has no value."""
    return H if isinstance(H, Ratio) else H.numeric()


def squared_magnitude(H: Transfer | Ratio) -> Ratio:
    """|H(jw)|^2 as an exact rational function of x = w^2 (in the place of s).

    |P(jw)|^2 = E(x)^2 + x O(x)^2.

    >>> squared_magnitude(Ratio.of([1], [1, 2, 2, 1])).den         # 1 + w^6: Butterworth
    (Fraction(1, 1), Fraction(0, 1), Fraction(0, 1), Fraction(1, 1))
    """
    h = in_numbers(H)
    return Ratio.of(squared(h.num), squared(h.den))


def delay_over_square(H: Transfer | Ratio) -> Ratio:
    """The group delay -d(phase)/dw in seconds as an exact rational function of x = w^2 (in the place of s).

    For P(jw) = E + jwO the derivative of the phase is (E (O + 2x O') - 2x O E')/(E^2 + x O^2). Jumps at zeros and poles
    on the jw axis are left out. Raises UndefinedError for H = 0.

    >>> from fractions import Fraction
    >>> delay = delay_over_square(Ratio.of([1], [15, 15, 6, 1]))     # Bessel 3, unit delay
    >>> delay.at(Fraction(0)), round(float(delay.at(Fraction(4))), 4)
    (Fraction(1, 1), 0.8867)
    """
    h = in_numbers(H)
    if h.is_zero:
        raise UndefinedError(Fault("H = 0 has no phase and no delay.", "Is the read connected to the drive?"))
    top, bottom = turning(h.den)
    other_top, other_bottom = turning(h.num)
    return Ratio.of(
        added(product(top, other_bottom), product(other_top, bottom), -1), product(bottom, other_bottom)
    )


def decibels(H: Transfer | Ratio, w: Frequencies) -> Any:
    """20*log10|H(jw)| at angular frequencies w in rad/s; a float for a number, an array for an array.

    >>> round(decibels(Ratio.of([1], [1, 1]), 1.0), 4)
    -3.0103
    """
    return in_numbers(H).decibels(1j * np.asarray(w, dtype=np.float64))


def phase(H: Transfer | Ratio, w: Frequencies) -> Any:
    """The continuous phase of H(jw) in degrees at w >= 0 in rad/s, by the convention of this module.

    Raises :class:`~symnet.errors.UndefinedError` for H = 0 and for negative frequencies.

    >>> phase(Ratio.of([1], [0, 0, 0, 1]), 1.0), phase(Ratio.of([-10], [1]), 1.0)
    (-270.0, -180.0)
    >>> H = Ratio.of([1], [1, 2, 2, 1])                           # Butterworth 3
    >>> [round(float(p), 6) for p in phase(H, [0, 1, 1e9])]
    [0.0, -135.0, -270.0]
    """
    h, w_array = _prepared(H, w)
    m, z = (next(k for k, c in enumerate(p) if c) for p in (h.den, h.num))
    start = -math.pi if h.num[z] / h.den[m] < 0 else 0.0
    total = np.full(w_array.shape, start + (z - m) * math.pi / 2)
    for roots, direction in ((h.zeros(), 1), (h.poles(), -1)):
        total += direction * _sum_over(roots, w_array, _angle)
    return _shaped(np.degrees(total), w)


def group_delay(H: Transfer | Ratio, w: Frequencies) -> Any:
    """The group delay -d(phase)/dw of H(jw) in seconds at w >= 0 in rad/s.

    The sum over poles -a + jb of a/(a^2 + (w-b)^2), minus the same over the zeros. Jumps of the phase at zeros and
    poles on the jw axis are left out. Raises :class:`~symnet.errors.UndefinedError` for H = 0 and for negative w.

    >>> group_delay(Ratio.of([1], [1, 2, 2, 1]), 0)
    2.0
    """
    h, w_array = _prepared(H, w)
    total = _sum_over(h.poles(), w_array, _turn) - _sum_over(h.zeros(), w_array, _turn)
    return _shaped(total, w)


def _prepared(H: Transfer | Ratio, w: Frequencies) -> tuple[Ratio, Floats]:
    h = in_numbers(H)
    if h.is_zero:
        raise UndefinedError(Fault("H = 0 has no phase and no delay.", "Is the read connected to the drive?"))
    w_array = np.asarray(w, dtype=np.float64)
    if (w_array < 0).any():
        raise UndefinedError(
            Fault(
                "The phase is counted from DC upwards; a frequency below 0 was given.",
                "Give w >= 0 in rad/s.",
            )
        )
    return h, w_array


def _shaped(values: Floats, like: Frequencies) -> Any:
    return float(values) if np.ndim(like) == 0 else values


def _sum_over(roots: Sequence[Root], w: Floats, part: Callable[[float, float, Floats], Floats]) -> Floats:
    total = np.zeros(w.shape)
    for root in roots:
        if root.value:
            total = total + root.multiplicity * part(-root.value.real, root.value.imag, w)
    return total


def _angle(a: float, b: float, w: Floats) -> Floats:
    """The angle by which 1 - jw/root has turned from DC to w, for one root -a + jb of a conjugate pair or a real one.

    Both roots of a pair together start at 0; each alone starts at -+atan(b/a). On the axis (a = 0) each of the two
    takes half of the jump at w = |b|.
    """
    if a == 0:
        return np.heaviside(w - abs(b), 0.5) * (math.pi / 2)
    return np.arctan((w - b) / a)


def _turn(a: float, b: float, w: Floats) -> Floats:
    """How fast that angle turns."""
    if a == 0:
        return np.zeros(w.shape)
    return (1 / a) / (1 + ((w - b) / a) ** 2)
