"""A member of a family put where H is: in its band and at its frequency, the prototype built when it is asked for.

The matcher makes one of these for every family and every H; of most of them nobody wants to know more than how far
away they are, and the references of a prototype (edges, delays) cost more than the distances.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import lru_cache
from typing import Final

from symnet.shape.families.family import Family, build
from symnet.shape.families.prototype import (
    ALL_PASS,
    HIGH_PASS,
    LOW_PASS,
    UNIT_DELAY,
    W0,
    Prototype,
    Setting,
)

__all__ = ["AS_FREQUENCY", "Placed"]

AS_FREQUENCY: Final = "T, the group delay at DC, as the frequency 1/T"


@dataclass(frozen=True, slots=True)
class Placed:
    """A family, an order and parameter values, in a band.

    ``w0`` in rad/s is that of the low-pass, of the high-pass, or of the poles of an all-pass; of a band-pass or a
    band-stop it is the centre, and ``width`` the bandwidth in rad/s that belongs to 1 rad/s of the low-pass whose w0
    is ``low_w0``.

    >>> from symnet.shape.families.butterworth import BUTTERWORTH
    >>> Placed(BUTTERWORTH, 2, (), "high-pass", 100.0).prototype.reference("w3dB").w
    100.0
    """

    family: Family
    order: int
    values: tuple[float, ...]
    band: str
    w0: float
    low_w0: float = 1.0
    width: float = 0.0

    @property
    def settings(self) -> tuple[Setting, ...]:
        """The parameters with their values and units."""
        parameters = self.family.parameters(self.order)
        return tuple(Setting(p.name, v, p.unit) for p, v in zip(parameters, self.values, strict=True))

    @property
    def prototype(self) -> Prototype:
        """The member with its poles, zeros and frequency references, remembered."""
        return _placed(self)


@lru_cache(maxsize=512)
def _fixed_shape(family: Family, order: int) -> Prototype:
    return build(family, order, (), exact=False)


@lru_cache(maxsize=256)
def _placed(member: Placed) -> Prototype:
    if member.values:
        low = build(member.family, member.order, member.values, exact=False)
    else:
        low = _fixed_shape(member.family, member.order)
    if member.band in {LOW_PASS, HIGH_PASS}:
        placed = low.scaled(W0, member.w0)
        return placed if member.band == LOW_PASS else placed.high_pass()
    if member.band == ALL_PASS:
        return _all_pass(low.scaled(W0, member.w0))
    return low.scaled(W0, member.low_w0).moved(member.band, member.w0, member.width)


def _all_pass(low: Prototype) -> Prototype:
    """D(-s)/D(s), whose delay is twice that of 1/D."""
    return replace(
        low,
        zeros=tuple(-r.conjugate() for r in low.poles),
        band=ALL_PASS,
        gain=1.0,
        references=tuple(
            replace(r, w=r.w / 2, label=AS_FREQUENCY) if r.name == UNIT_DELAY else r
            for r in low.references
            if r.name in {W0, UNIT_DELAY}
        ),
        equation="",
        exact=None,
        refined=None,
    )
