"""Inverse Chebyshev (Chebyshev II): as flat as Butterworth at DC, and a stop band of equal ripples."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from typing import Any, ClassVar, Final

from symnet.shape.families.arithmetic import measured
from symnet.shape.families.chebyshev import ellipse, outermost, squared_epsilon
from symnet.shape.families.curves import HALF_POWER_DB
from symnet.shape.families.family import (
    Family,
    Parameter,
    Points,
    Roots,
    checked_order,
    member,
    with_conjugates,
)
from symnet.shape.families.prototype import STOP_EDGE, W3DB, Prototype, Reference

__all__ = ["INVERSE_CHEBYSHEV", "LARGEST_ATTENUATION_DB", "inverse_chebyshev"]

#: No stop band is asked to be deeper; beyond a thousand dB doubles would come to their end.
LARGEST_ATTENUATION_DB: Final = 600.0


def inverse_chebyshev(order: int, attenuation: str = "40 dB") -> Prototype:
    """The inverse Chebyshev low-pass of that order and stop-band attenuation, the edge of the stop band at w = 1 rad/s.

    Definition: |H(jw)|^2 = 1/(1 + E^2/T_n(1/w)^2) with the Chebyshev polynomial T_n and
    E^2 = 10^(attenuation/10 dB) - 1. From w = 1 on the attenuation never falls below the stated one, counted from
    DC, where |H| is largest and as flat as that of a Butterworth filter. The poles are the inverses of
    -sinh v sin t + j cosh v cos t, v = asinh(E)/n, t = (2k - 1) pi/(2n), k = 1 ... n; the zeros are
    +-j/cos t, one of an odd order lying at infinite frequency. The -3.0103 dB frequency is 1/cosh(acosh(E)/n).

    Source: L. Weinberg, Network Analysis and Synthesis, McGraw-Hill 1962, section 11.8 (from memory); the poles and
    zeros are those of the Chebyshev filter turned over, s -> 1/s, in |H|^2 -> 1 - |H|^2.

    Raises :class:`~symnet.errors.NotationError` for an attenuation that is not a number of dB above 3.0103 dB (at
    that one the edge of the stop band is the -3 dB frequency) and up to 600 dB, or for an order that is no whole
    number; :class:`~symnet.errors.LimitError` for an order beyond 60.

    >>> p = inverse_chebyshev(3, "20 dB")
    >>> [round(z.imag, 6) for z in p.zeros]
    [1.154701, -1.154701]
    >>> for r in p.references[1:3]:
    ...     print(f"{r.w:.4f} rad/s  {r.label}")
    0.6500 rad/s  -3.0103 dB relative to DC
    1.0000 rad/s  stop-band edge (-20 dB relative to the peak)
    >>> round(p.decibels(1.0), 6), round(p.decibels(2.0), 6)
    (-20.0, -20.0)
    """
    db = measured(
        attenuation,
        "dB",
        what="a stop-band attenuation",
        above=HALF_POWER_DB,
        up_to=LARGEST_ATTENUATION_DB,
    )
    return member(INVERSE_CHEBYSHEV, checked_order(order), (db,))


def _points(m: Any, order: int, attenuation: float) -> Points:
    turned = ellipse(m, order, m.asinh(m.sqrt(squared_epsilon(m, attenuation))) / order)
    poles = [(x / (x * x + y * y), y / (x * x + y * y)) for x, y in turned]
    angle = m.pi / (2 * order)
    zeros = [(0, 1 / m.sin((order - 2 * k - 1) * angle)) for k in range(order // 2)]
    return poles, with_conjugates(zeros)


class _InverseChebyshev(Family):
    name: ClassVar[str] = "inverse Chebyshev"
    source: ClassVar[str] = "L. Weinberg, Network Analysis and Synthesis, 1962, section 11.8 (from memory)"

    def parameters(self, order: int) -> tuple[Parameter, ...]:
        """The attenuation. The poles are Butterworth long before the upper bound; how far out the zeros are still tells."""
        return (Parameter("attenuation", "dB", 6.0, 300.0, logarithmic=True),)

    def finite_zeros(self, order: int) -> int:
        """All but the one of an odd order."""
        return order - order % 2

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """The inverses of points on an ellipse with foci at +-j; zeros on the jw axis from w = 1 upwards."""
        poles, zeros = _points(math, order, values[0])
        return tuple(complex(*p) for p in poles), tuple(complex(*z) for z in zeros)

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same points."""
        return _points(m, order, values[0])

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """The edge of the stop band, 1 by definition, and the -3 dB frequency in closed form."""
        e = math.sqrt(squared_epsilon(math, values[0]))
        return (
            Reference.named(STOP_EDGE, 1.0, f"-{values[0]:.5g} dB relative to the peak"),
            Reference.named(W3DB, 1 / outermost(e, order)),
        )

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """|H|^2."""
        return f"|H(jw)|^2 = 1/(1 + E^2/T_{order}(1/w)^2), E^2 = 10^({values[0]:.6g}/10) - 1"


INVERSE_CHEBYSHEV: Final = _InverseChebyshev()
