"""Transitional Butterworth-Thomson: every pole moved from its Butterworth place towards its Bessel (Thomson) place."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction
from typing import Any, ClassVar, Final

from symnet.errors import Fault, NotationError
from symnet.quantities import read_number
from symnet.shape.families.arithmetic import as_typed
from symnet.shape.families.bessel import BESSEL
from symnet.shape.families.family import (
    Family,
    Parameter,
    Points,
    Roots,
    checked_order,
    member,
    with_conjugates,
)
from symnet.shape.families.prototype import W0, Prototype, Reference

__all__ = ["BUTTERWORTH_THOMSON", "butterworth_thomson"]


def butterworth_thomson(order: int, m: str | float | Fraction) -> Prototype:
    """The low-pass a part m of the way from Butterworth (m = 0) to Bessel (m = 1), w0 = 1 rad/s.

    Definition: with the poles of the Butterworth filter at exp(j b_k) and those of the Bessel filter, divided by
    the geometric mean of their magnitudes, at r_k exp(j t_k), both counted in the same order along the arc, the poles
    are r_k^m exp(j (b_k + m (t_k - b_k))): the angle goes linearly and the magnitude geometrically, so that w0
    stays 1 rad/s for every m.

    Source: Y. Peless, T. Murakami, "Analysis and synthesis of transitional Butterworth-Thomson filters and bandpass
    amplifiers", RCA Review 18 (1957), 60-94 (from memory).

    Raises :class:`~symnet.errors.NotationError` for an m that is no number from 0 to 1 or an order that is no whole
    number, and :class:`~symnet.errors.LimitError` for an order beyond 60.

    >>> print(butterworth_thomson(3, "0.5"))
    Butterworth-Thomson, order 3, m 0.5, low-pass
    >>> [round(c, 4) for c in butterworth_thomson(3, 0).denominator()]
    [1.0, 2.0, 2.0, 1.0]
    """
    return member(BUTTERWORTH_THOMSON, checked_order(order), (_part(m),))


def _part(m: str | float | Fraction) -> float:
    value = float(read_number(str(m).strip())) if isinstance(m, str) else float(m)
    if not 0 <= value <= 1:
        raise NotationError(
            Fault(f"m lies between 0 and 1, not at {m}", hint="0 is Butterworth and 1 is Bessel (Thomson)")
        )
    return value


def _poles(m: Any, thomson: Sequence[tuple[Any, Any]], part: Any) -> list[tuple[Any, Any]]:
    """From the Bessel poles (real, imaginary); those of Butterworth stand at odd or even multiples of pi/(2n)."""
    order = len(thomson)
    w0 = m.exp(m.fsum(m.log(m.hypot(*p)) for p in thomson) / order)
    upper = []
    for k, (x, y) in enumerate(sorted((p for p in thomson if p[1] > 0), key=lambda p: p[1])):
        start = (2 * k + 1 + order % 2) * m.pi / (2 * order)  # both angles from the negative real axis
        angle = start + part * (m.atan2(y, -x) - start)
        size = (m.hypot(x, y) / w0) ** part
        upper.append((-size * m.cos(angle), size * m.sin(angle)))
    return with_conjugates(upper, [-((-x / w0) ** part) for x, y in thomson if y == 0])


class _ButterworthThomson(Family):
    name: ClassVar[str] = "Butterworth-Thomson"
    source: ClassVar[str] = "Y. Peless, T. Murakami, RCA Review 18 (1957), 60-94 (from memory)"

    def parameters(self, order: int) -> tuple[Parameter, ...]:
        """The part of the way."""
        return (Parameter("m", "", 0.0, 1.0),)

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """Each pole along its own way."""
        thomson, _ = BESSEL.roots(order, ())
        return tuple(complex(*p) for p in _poles(math, [(p.real, p.imag) for p in thomson], values[0])), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same ways."""
        thomson, _ = BESSEL.points(m, order, ())
        return _poles(m, thomson, as_typed(m, values[0])), ()

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """The geometric mean is 1 by definition."""
        return (Reference.named(W0, 1.0),)

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """Where the poles stand."""
        return f"poles r_k^m exp(j (b_k + m (t_k - b_k))), m = {values[0]:.6g}, Butterworth at exp(j b_k), Bessel at r_k exp(j t_k)"


BUTTERWORTH_THOMSON: Final = _ButterworthThomson()
