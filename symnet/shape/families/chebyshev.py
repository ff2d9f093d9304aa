"""Chebyshev: a pass band of equal ripples, and for it the steepest way down that poles alone can give."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any, ClassVar, Final

from symnet.shape.families.arithmetic import as_typed, measured
from symnet.shape.families.butterworth import squared_magnitude
from symnet.shape.families.family import (
    Family,
    Parameter,
    Points,
    Roots,
    checked_order,
    member,
    with_conjugates,
)
from symnet.shape.families.prototype import (
    RIPPLE_EDGE,
    W3DB,
    W3DB_PEAK,
    Prototype,
    Reference,
)

__all__ = [
    "CHEBYSHEV",
    "LARGEST_RIPPLE_DB",
    "chebyshev",
    "ellipse",
    "outermost",
    "ripple_of",
    "squared_epsilon",
]

LARGEST_RIPPLE_DB: Final = 12.0  # tables end at 3 dB; beyond this nobody speaks of a pass band any more


def chebyshev(order: int, ripple: str = "0.5 dB") -> Prototype:
    """The Chebyshev low-pass of that order and ripple, the edge of the ripple at w = 1 rad/s.

    Definition: |H(jw)|^2 = 1/(1 + e^2 T_n(w)^2) with the Chebyshev polynomial T_n and e^2 = 10^(ripple/10 dB) - 1.
    With v = asinh(1/e)/n the poles are s = -sinh v sin t + j cosh v cos t, t = (2k - 1) pi/(2n), k = 1 ... n. The
    largest |H| is 1. An even order has its ripple minimum at DC, so that |H(0)| = 10^(-ripple/20 dB); "-3 dB" can
    then be counted from DC or from the ripple peak, and both are given: singly terminated tables count from DC, doubly
    terminated ones from the peak. The last frequency 3.0103 dB below the peak is cosh(acosh(1/e)/n). A ripple of
    "3 dB" is 3.000 dB, e = 0.99763; "3.0103 dB" makes e = 1, and the edge of the ripple the half-power frequency.

    Source: G. L. Matthaei, L. Young and E. M. T. Jones, Microwave Filters, Impedance-Matching Networks, and
    Coupling Structures, McGraw-Hill 1964, section 4.05 (from memory); the closed form of the poles is there too.

    Raises :class:`~symnet.errors.NotationError` for a ripple that is not a positive number of dB or an order that
    is no whole number, and :class:`~symnet.errors.LimitError` for an order beyond 60.

    >>> p = chebyshev(3, "0.5 dB")
    >>> [round(c, 5) for c in p.denominator()]
    [0.71569, 1.5349, 1.25291, 1.0]
    >>> round(p.reference("w3dB").w, 4)
    1.1675
    >>> for r in chebyshev(2, "1 dB").references[1:4]:
    ...     print(f"{r.w:.4f} rad/s  {r.label}")
    1.3079 rad/s  -3.0103 dB relative to DC (a ripple minimum, 1 dB below the peak)
    1.2176 rad/s  -3.0103 dB relative to the ripple peak
    1.0000 rad/s  ripple edge (-1 dB relative to the peak)
    """
    return member(CHEBYSHEV, checked_order(order), (ripple_of(ripple),))


def ripple_of(text: str) -> float:
    """The dB in a text such as "0.5 dB". Raises :class:`~symnet.errors.NotationError` for anything else.

    >>> ripple_of("0.5 dB")
    0.5
    """
    return measured(
        text,
        "dB",
        what="a ripple",
        above=0,
        up_to=LARGEST_RIPPLE_DB,
        at_zero="the shape without any ripple is Butterworth",
    )


def squared_epsilon(m: Any, level_db: float) -> Any:
    """e^2 = 10^(level/10 dB) - 1."""
    return m.expm1(as_typed(m, level_db) * m.log(10) / 10)


def ellipse(m: Any, order: int, v: Any) -> list[tuple[Any, Any]]:
    """-sinh v sin t + j cosh v cos t at t = (2k - 1) pi/(2n), k = 1 ... n: where 1 + T_n(-js)^2/sinh(nv)^2 vanishes."""
    across, along = m.sinh(v), m.cosh(v)
    angle = m.pi / (2 * order)
    upper = [
        (-across * m.sin((2 * k + 1) * angle), along * m.sin((order - 2 * k - 1) * angle))
        for k in range(order // 2)
    ]
    return with_conjugates(upper, (-across,) if order % 2 else ())


def _poles(m: Any, order: int, ripple: float) -> list[tuple[Any, Any]]:
    return ellipse(m, order, m.asinh(1 / m.sqrt(squared_epsilon(m, ripple))) / order)


def outermost(x: float, order: int) -> float:
    """The largest w with |T_n(w)| = x."""
    return math.cosh(math.acosh(x) / order) if x >= 1 else math.cos(math.acos(x) / order)


class _Chebyshev(Family):
    name: ClassVar[str] = "Chebyshev"
    source: ClassVar[str] = (
        "Matthaei, Young and Jones, Microwave Filters ..., 1964, section 4.05 (from memory)"
    )

    def parameters(self, order: int) -> tuple[Parameter, ...]:
        """The ripple. Its lower bound is where the shape is Butterworth to about 1 %: the ellipse of the poles has
        semi-axes in the ratio (1 - x)/(1 + x) with x = (e/2)^(2/n), and the bound is x = 0.005.
        """
        smallest = 10 / math.log(10) * (2 * 0.005 ** (order / 2)) ** 2
        return (Parameter("ripple", "dB", smallest, LARGEST_RIPPLE_DB, logarithmic=True),)

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """Poles on an ellipse with foci at +-j."""
        return tuple(complex(*p) for p in _poles(math, order, values[0])), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same poles."""
        return _poles(m, order, values[0]), ()

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """The edge of the ripple, 1 by definition, and the -3 dB points in closed form."""
        ripple = values[0]
        e2 = squared_epsilon(math, ripple)
        edge = Reference.named(RIPPLE_EDGE, 1.0, f"-{ripple:.4g} dB relative to the peak")
        if order % 2:
            note = "a ripple peak" if ripple <= 3.0102 else "a ripple peak; the last of several"
            return (edge, Reference.named(W3DB, outermost(1 / math.sqrt(e2), order), note))
        from_dc = outermost(math.sqrt((1 + 2 * e2) / e2), order)
        note = f"a ripple minimum, {ripple:.4g} dB below the peak"
        from_peak = Reference.named(W3DB_PEAK, outermost(1 / math.sqrt(e2), order))
        return (edge, Reference.named(W3DB, from_dc, note), from_peak)

    def gain(self, order: int, values: tuple[float, ...]) -> float:
        """1 for an odd order; an even one has a ripple minimum at DC."""
        return 1.0 if order % 2 else float(10 ** (-values[0] / 20))

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """|H|^2."""
        return f"|H(jw)|^2 = 1/(1 + e^2 T_{order}(w)^2), e^2 = 10^({values[0]:.6g}/10) - 1"

    def conditions(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """|D(jw)|^2 = c (1 + e^2 T_n(w/w1)^2) for some c, e and w1: ratios of neighbouring terms, cleared of denominators.

        With d_k and t_k the coefficients of w^(2k) in |D(jw)|^2 and in T_n^2, the products d_(k-1) d_(k+1) t_k^2 and
        d_k^2 t_(k-1) t_(k+1) agree for k = 2 ... n - 1. Order 2 has no condition: every Q above 1/sqrt 2 is the
        Chebyshev of some ripple.
        """
        order = len(coefficients) - 1
        d, t = squared_magnitude(coefficients), _squared_polynomial(order)
        return tuple(
            d[k - 1] * d[k + 1] * t[k] ** 2 - d[k] * d[k] * (t[k - 1] * t[k + 1]) for k in range(2, order)
        )

    def positives(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """w1^2 > 0 and c > 0, the rest following from the conditions: see there for d, t, c, e and w1.

        w1^2 = d_(n-1) t_n/(d_n t_(n-1)), where t_(n-1) < 0 < t_n and d_n > 0; for an even order c = d_0 - c e^2 with
        c e^2 = d_n w1^(2n)/t_n. For order 2 the second says 4 a_0 a_2 > a_1^2, which the first implies.
        """
        order = len(coefficients) - 1
        d, t = squared_magnitude(coefficients), _squared_polynomial(order)
        if order % 2 or order == 2:
            return (-d[order - 1],)
        n = order
        return (
            -d[n - 1],
            d[0] * (d[n] * t[n - 1]) ** n * t[n] - d[n] * (d[n - 1] * t[n]) ** n,
        )


def _squared_polynomial(order: int) -> tuple[int, ...]:
    """T_n(w)^2 = (1 + T_2n(w))/2 in ascending powers of w^2, exact integers."""
    previous, current = [1], [0, 1]
    for _ in range(2 * order - 1):
        following = [0, *(2 * c for c in current)]
        for k, c in enumerate(previous):
            following[k] -= c
        previous, current = current, following
    doubled = [c // 2 for c in current[::2]]
    doubled[0] = (current[0] + 1) // 2
    return tuple(doubled)


CHEBYSHEV: Final = _Chebyshev()
