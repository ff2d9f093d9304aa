"""Linear phase with equiripple error: the widest band in which the phase keeps to a straight line, within an error."""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from functools import lru_cache
from typing import Any, ClassVar, Final

from symnet.errors import Fault, NotationError
from symnet.shape.families.arithmetic import as_typed, context, measured
from symnet.shape.families.family import (
    Family,
    Parameter,
    Points,
    Roots,
    checked_order,
    member,
    with_conjugates,
)
from symnet.shape.families.phase_ripple import Swings, interpolated, polished, swings
from symnet.shape.families.prototype import PHASE_EDGE, PHASE_LINE, Prototype, Reference

__all__ = ["LINEAR_PHASE", "linear_phase"]

_SMALLEST_DEGREES: Final = 0.001
_LARGEST_DEGREES: Final = 5.0


def linear_phase(order: int, error: str = "0.5 deg") -> Prototype:
    """The all-pole low-pass whose phase swings about a straight line by that error, the line having the slope 1 s.

    Definition: the phase of 1/D(jw) is -(w T + d(w)) with T = 1 s, and d has as many extremes as D has poles, all
    of the height of the error, alternating in sign, from DC to the edge where d leaves the error for good. Tables
    usually bring it to 3 dB at w = 1: ``scaled("w3dB", 1.0)``. The smaller the error, the nearer to Bessel; at the
    same -3 dB frequency the phase stays linear further out.

    Source: A. I. Zverev, Handbook of Filter Synthesis, Wiley 1967, tables for errors of 0.05 and 0.5 degree (from
    memory). The poles here are computed from the definition (:mod:`symnet.shape.families.phase_ripple`).

    Raises :class:`~symnet.errors.NotationError` for an error that is not from 0.001 to 5 degrees ("0.5 deg" or
    "0.5°") and for an order below 2 (a single pole has one shape whatever the error);
    :class:`~symnet.errors.LimitError` for an order beyond 60.

    >>> p = linear_phase(3, "0.5 deg").scaled("w3dB", 1.0)
    >>> [f"{pole:.3f}" for pole in p.poles]
    ['-0.826+0.000j', '-0.697+1.132j', '-0.697-1.132j']
    >>> for r in p.references[2:4]:
    ...     print(f"{r.w:.4f} rad/s  {r.label}")
    0.5133 rad/s  1/T, T the slope of the straight line that the phase keeps to
    1.3563 rad/s  edge of the linear phase (within 0.5 deg up to here)
    """
    order = checked_order(order)
    if order == 1:
        raise NotationError(
            Fault(
                "a phase with equal ripples takes at least order 2, not 1", hint="order 1 has one shape only"
            )
        )
    degrees = measured(
        str(error).replace("°", " deg"),
        "deg",
        what="a phase error",
        above=_SMALLEST_DEGREES * (1 - 1e-12),
        up_to=_LARGEST_DEGREES,
        at_zero="the flattest delay, without any ripple of the phase, is Bessel",
    )
    return member(LINEAR_PHASE, order, (degrees,))


def _points(x: Any, order: int) -> Points:
    k, h = order % 2, (order + 1) // 2
    return with_conjugates([(-a, v) for a, v in zip(x[k:h], x[h:], strict=True)], [-a for a in x[:k]]), ()


@lru_cache(maxsize=256)
def _poles(order: int, degrees: float) -> Roots:
    """To the last place: the rounded values of 25 digits."""
    m = context(25)
    poles, _ = _points(polished(m, order, as_typed(m, degrees), swings(order, degrees)), order)
    return tuple(complex(float(x), float(y)) for x, y in poles), ()


def _edge(found: Swings, degrees: float) -> float:
    """Where the error, after its last extreme, has come down to its own negative height."""
    height = math.radians(degrees)
    w = 1.5 * found.at[-1:]
    while found.error(w)[0] > -height:
        w = 1.5 * w
    for _ in range(
        60
    ):  # the error falls ever more steeply out there, so that Newton steps come from one side
        step = (found.error(w) + height) / found.delay_error(w)[0]
        w = w - step
        if abs(step[0]) <= 2e-15 * w[0]:
            break
    return float(w[0])


class _LinearPhase(Family):
    name: ClassVar[str] = "equiripple linear phase"
    source: ClassVar[str] = "A. I. Zverev, Handbook of Filter Synthesis, Wiley 1967 (from memory)"

    def has_order(self, order: int) -> bool:
        """Of order 2 every Q above that of Bessel has some error, so that a Q says nothing of it (the constructor does)."""
        return order >= 3

    def parameters(self, order: int) -> tuple[Parameter, ...]:
        """The phase error, between what is hardly distinct from Bessel and what nobody calls linear."""
        return (Parameter("phase error", "deg", 2.0**-7, 2.0, logarithmic=True),)

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """Poles near to a row of equal spacing, the last ones nearer to the jw axis."""
        return _poles(order, values[0])

    def near(self, order: int, values: tuple[float, ...]) -> Roots:
        """The same without the last digits."""
        poles, _ = _points(interpolated(order, values[0]).x.tolist(), order)
        return tuple(complex(*p) for p in poles), ()

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same poles."""
        return _points(polished(m, order, as_typed(m, values[0]), swings(order, values[0])), order)

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """The slope of the line, 1 s by definition, and the edge of the band in which the phase keeps to it."""
        edge = _edge(swings(order, values[0]), values[0])
        return (
            Reference.named(PHASE_LINE, 1.0),
            Reference.named(PHASE_EDGE, edge, f"within {values[0]:.4g} deg up to here"),
        )

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """The phase."""
        return (
            f"phase of H(jw) = -(w T + d(w)), T = 1 s, d with {order} extremes of {values[0]:.6g} deg, "
            "alternating in sign"
        )


LINEAR_PHASE: Final = _LinearPhase()
