"""First and second order: the one shape that order 1 has, and order 2 by its Q."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from fractions import Fraction
from typing import Any, ClassVar, Final

import sympy
from sympy import Expr

from symnet.errors import Fault, NotationError
from symnet.quantities import read_number
from symnet.shape.families.arithmetic import as_typed
from symnet.shape.families.family import Family, Parameter, Points, Roots, member, with_conjugates
from symnet.shape.families.prototype import UNIT_DELAY, W0, W3DB, W3DB_PEAK, Prototype, Reference

__all__ = ["FIRST_ORDER", "SECOND_ORDER", "first_order", "poles_of_quality", "quality_of", "second_order"]


def first_order() -> Prototype:
    """The low-pass H(s) = 1/(1 + s): w0, -3.0103 dB and the inverse of the delay at DC are all 1 rad/s.

    >>> print(first_order().at(f3dB="159 Hz"))
    first order, order 1, low-pass
    """
    return member(FIRST_ORDER, 1, ())


def second_order(Q: str | float | Fraction) -> Prototype:
    """The low-pass H(s) = 1/(1 + s/Q + s^2), w0 = 1 rad/s.

    With z = 1/(2Q): the -3.0103 dB frequency relative to DC is sqrt(1 - 2z^2 + sqrt(4z^4 - 4z^2 + 2)), the group
    delay at DC 1/Q, and |H(j)| = Q |H(0)|. Above Q = 1/sqrt 2 there is a peak of height Q/sqrt(1 - z^2) at
    sqrt(1 - 2z^2), and -3.0103 dB can be counted from it too. Below Q = 1/2 both poles are real.

    Source: common practice; the figures follow from |H|^2 = 1/((1 - w^2)^2 + w^2/Q^2).

    Raises :class:`~symnet.errors.NotationError` for a Q that is no positive number.

    >>> for Q in ("0.5", "1", "2"):
    ...     print(Q, round(second_order(Q).reference("w3dB").w, 4))
    0.5 0.6436
    1 1.272
    2 1.4845
    """
    return member(SECOND_ORDER, 2, (quality_of(Q),))


def quality_of(Q: str | float | Fraction) -> float:
    """The Q as a double. Raises :class:`~symnet.errors.NotationError` for anything but a positive number."""
    value = float(read_number(Q.strip())) if isinstance(Q, str) else float(Q)
    if not (value > 0 and math.isfinite(value)):
        raise NotationError(
            Fault(f"Q is a positive number, not {Q}", hint="Q = 1/(2 zeta); a larger Q rings longer")
        )
    return value


def poles_of_quality(m: Any, q: Any) -> list[tuple[Any, Any]]:
    """The roots of s^2 + s/Q + 1 as (real, imaginary), over :mod:`math` or an mpmath context."""
    if 2 * q > 1:
        return with_conjugates([(-1 / (2 * q), m.sqrt((2 * q - 1) * (2 * q + 1)) / (2 * q))])
    far = (1 + m.sqrt((1 - 2 * q) * (1 + 2 * q))) / (2 * q)
    return with_conjugates((), (-far, -1 / far))


class _FirstOrder(Family):
    name: ClassVar[str] = "first order"
    source: ClassVar[str] = "common practice"

    def has_order(self, order: int) -> bool:
        """Order 1."""
        return order == 1

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """One at -1."""
        return (-1 + 0j,), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same."""
        return [(-1, 0)], []

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """All the same."""
        return tuple(Reference.named(name, 1.0) for name in (W0, W3DB, UNIT_DELAY))

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """D(s)."""
        return "D(s) = 1 + s"

    def exact(self, order: int, values: tuple[float, ...]) -> tuple[Expr, ...]:
        """The definition."""
        return sympy.Integer(1), sympy.Integer(1)


class _SecondOrder(Family):
    name: ClassVar[str] = "second order"
    source: ClassVar[str] = "common practice"

    def has_order(self, order: int) -> bool:
        """Order 2."""
        return order == 2

    def parameters(self, order: int) -> tuple[Parameter, ...]:
        """Q."""
        return (Parameter("Q", "", 0.01, 1000.0, logarithmic=True),)

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """On the unit circle, or real and inverse to each other."""
        return tuple(complex(*p) for p in poles_of_quality(math, values[0])), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same."""
        return poles_of_quality(m, as_typed(m, values[0])), []

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """All in closed form; see :func:`second_order`."""
        (q,) = values
        z2 = 1 / (4 * q * q)
        c = 1 - 2 * z2
        root = math.hypot(c, 1)
        found = [
            Reference.named(W0, 1.0),
            Reference.named(W3DB, math.sqrt(c + root if c > 0 else 1 / (root - c))),
            Reference.named(UNIT_DELAY, q),
        ]
        if c > 0:
            w = math.sqrt(c + 2 * math.sqrt(z2 * (1 - z2)))
            found.append(Reference(W3DB_PEAK, w, "-3.0103 dB relative to the peak"))
        return tuple(found)

    def gain(self, order: int, values: tuple[float, ...]) -> float:
        """1 without a peak."""
        z2 = 1 / (4 * values[0] ** 2)
        return 2 * math.sqrt(z2 * (1 - z2)) if 2 * z2 < 1 else 1.0

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """D(s)."""
        return f"D(s) = 1 + s/Q + s^2, Q = {values[0]:.6g}"


FIRST_ORDER: Final = _FirstOrder()
SECOND_ORDER: Final = _SecondOrder()
