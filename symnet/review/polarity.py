"""Whether the feedback of an op amp is negative, which the ideal algebra cannot tell.

With its inputs exchanged an ideal op amp gives the same H. With a gain of 1/(s*T) in its place the determinant of the
network is A(s) + s*T*B(s), with A that of the ideal op amp and B that of the network without its gain: for a small T
the poles of the ideal network stay, and new ones come from far away at s = -a/(T*b), with a and b the leading
coefficients (where s*B is one degree higher than A). Where a and b differ in sign that pole lies in the right half
plane and the ideal result is never reached: the net feedback is positive. Each op amp is judged with the others
ideal.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from symnet.circuit.network import Network
from symnet.circuit.parts import OpAmp, VoltageLaw
from symnet.errors import LimitError, SingularError
from symnet.exact.polynomials import by_powers_of_s
from symnet.exact.ports.loop import return_ratio
from symnet.expressions import Name, Sum
from symnet.shape.closed import value_of
from symnet.shape.positive import sign_of

if TYPE_CHECKING:
    from collections.abc import Mapping
    from fractions import Fraction

    from sympy.polys.rings import PolyElement

__all__ = ["Polarity", "polarities"]


@dataclass(frozen=True, slots=True)
class Polarity:
    """The net feedback of one op amp: "negative", "positive", or "open" where signs of parts leave it so."""

    part: str
    feedback: str

    def __str__(self) -> str:
        match self.feedback:
            case "positive":
                return (
                    f"the feedback of {self.part} is net positive: with any real gain a pole lies in the right half plane "
                    "and the ideal result is not reached; are plus and minus exchanged?"
                )
            case "negative":
                return f"the feedback of {self.part} is net negative"
            case _:
                return f"whether the feedback of {self.part} is net negative hangs on the values of the parts"


def polarities(network: Network) -> tuple[Polarity, ...]:
    """The net feedback of every ideal op amp of a network that is driven.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- m -- R2 -- out; U1: opamp(plus=m, minus=gnd, out=out); drive in; read out")
    >>> [polarity.feedback for polarity in polarities(net)]
    ['positive']
    """
    return tuple(_polarity(network, part) for part in network.parts if isinstance(part, OpAmp))


def _polarity(network: Network, part: OpAmp) -> Polarity:
    difference = Sum(((1, _voltage(part.plus)), (-1, _voltage(part.minus))))
    law = VoltageLaw(part.name, part.out, "gnd", difference)
    finite = replace(
        network, parts=tuple(law if other is part else other for other in network.parts), text=None
    )
    try:
        loop = return_ratio(finite, part.name)
        without, with_gain = map(by_powers_of_s, loop.parts)
    except LimitError:
        return Polarity(part.name, "open")
    except SingularError:
        return Polarity(part.name, "negative")  # nothing but its gain ties the network down
    if len(without) < len(with_gain):
        return Polarity(part.name, "negative")  # no pole comes from far away
    signs = [_sign(side[-1], loop.naming.numbers) for side in (without, with_gain) if side]
    if None in signs:
        return Polarity(part.name, "open")
    return Polarity(part.name, "negative" if len(set(signs)) == 1 else "positive")


def _voltage(node: str) -> Name:
    return Name(f"v_{node}" if node != "gnd" else "gnd")


def _sign(coefficient: PolyElement, numbers: Mapping[str, Fraction]) -> int | None:
    """The sign of a coefficient for positive parts, by the given values where the terms differ in sign."""
    known = sign_of(coefficient)
    if known is not None:
        return known
    try:
        value = value_of(coefficient, numbers)
    except KeyError:
        return None
    return (value > 0) - (value < 0) or None
