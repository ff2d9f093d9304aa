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
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.circuit.network import Network
from symnet.circuit.parts import OpAmp, VoltageLaw
from symnet.errors import LimitError
from symnet.exact.derive import quotient_of
from symnet.expressions import Name, Product, Sum

if TYPE_CHECKING:
    from collections.abc import Mapping

__all__ = ["Polarity", "polarities"]

_GAIN: Final = "gain of "  # no name of a network has a space


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
    gain = _GAIN + part.name
    value = Product(((1, Name(gain)), (1, Sum(((1, _voltage(part.plus)), (-1, _voltage(part.minus)))))))
    law = VoltageLaw(part.name, part.out, "gnd", value)
    finite = replace(
        network, parts=tuple(law if other is part else other for other in network.parts), text=None
    )
    pieces, quotient = quotient_of(finite, finite.drives[0], Name(finite.nodes[0]))
    try:
        written = quotient.denominator.written()
    except LimitError:
        return Polarity(part.name, "open")
    names = pieces.naming.generators.names
    place = names.index(gain)
    sides: tuple[dict[int, list[tuple[int, tuple[int, ...]]]], ...] = ({}, {})
    for coefficient, exponents in written:
        sides[0 if exponents[place] else 1].setdefault(exponents[0], []).append((coefficient, exponents))
    with_gain, without = sides
    if not with_gain or not without or max(without) < max(with_gain):
        return Polarity(part.name, "negative")  # no pole comes from far away
    numbers = pieces.naming.numbers
    signs = [_sign(side[max(side)], names, numbers) for side in sides]
    if None in signs:
        return Polarity(part.name, "open")
    return Polarity(part.name, "negative" if signs[0] == signs[1] else "positive")


def _voltage(node: str) -> Name:
    return Name(f"v_{node}" if node != "gnd" else "gnd")


def _sign(
    terms: list[tuple[int, tuple[int, ...]]], names: tuple[str, ...], numbers: Mapping[str, Fraction]
) -> int | None:
    """The sign of a coefficient for positive parts, by the given values where the terms differ in sign."""
    signs = {c > 0 for c, _ in terms}
    if len(signs) == 1:
        return 1 if signs.pop() else -1
    used = {
        names[k]
        for _, exponents in terms
        for k, e in enumerate(exponents)
        if e and k and not names[k].startswith(_GAIN)
    }
    if not used <= set(numbers):
        return None
    total = Fraction(0)
    for coefficient, exponents in terms:
        term = Fraction(coefficient)
        for k, e in enumerate(exponents):
            if e and names[k] in numbers:
                term *= numbers[names[k]] ** e
        total += term
    return (total > 0) - (total < 0) or None
