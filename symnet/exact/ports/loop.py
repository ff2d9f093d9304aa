"""The return ratio of a dependent source, from the determinant: no loop is cut and nothing is injected.

The determinant of a network holds the law of a source in one row, so it is D0 + x D1 when the law is multiplied by x.
At x = 1 it is the determinant D of the network, at x = 0 that of the network with the source dead, a wire for a voltage
and a gap for a current. Bode's return difference is F = D/D0 = 1 + T, and T = D1/D0 the return ratio: what comes back to
the source, with its sign turned, when it sends out 1. So T is positive at DC where the feedback is negative. Every load
is where it always is. (H. W. Bode, Network Analysis and Feedback Amplifier Design, 1945, ch. IV; from memory.)
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from typing import TYPE_CHECKING, Any, Final

from symnet.circuit.network import Network
from symnet.circuit.parts import CurrentLaw, OpAmp, VoltageLaw
from symnet.errors import Fault, MissingValueError, NotationError, SingularError, UndefinedError
from symnet.exact.confirm import undetermined
from symnet.exact.derive import determinant_of
from symnet.exact.determinant import Determinant
from symnet.exact.mutual import coefficients
from symnet.exact.naming import Naming
from symnet.exact.polynomials import make_ring
from symnet.exact.ports.figures import Parameter, Worth
from symnet.exact.ratio import Ratio
from symnet.expressions import Name, Product
from symnet.quantities import NUMBER

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["ReturnRatio", "return_ratio", "sources"]

_SHARE: Final = "share of "  # no name of a network has a space


@dataclass(frozen=True, eq=False)
class ReturnRatio:
    """The determinant of a network in which the law of ``source`` is multiplied by a name of its own."""

    source: str
    network: Network
    naming: Naming
    determinant: Determinant
    place: int

    @cached_property
    def parts(self) -> tuple[PolyElement, PolyElement]:
        """D0, without the source, and D1, what the source adds: D = D0 + D1. LimitError where they are too long.

        SingularError where D0 or D is zero for all values.
        """
        written = self.determinant.written()
        names = self.naming.generators.names
        ring: Any = make_ring((*names[1 : self.place], *names[self.place + 1 :]))
        sides: tuple[dict[Any, Any], dict[Any, Any]] = ({}, {})
        for m, c in written.to_element(self.naming.ring).items():
            sides[m[self.place]][(*m[: self.place], *m[self.place + 1 :])] = c
        without, added = map(ring.from_dict, sides)
        if not without:
            raise SingularError(self._infinite())
        if without == -added:
            raise SingularError(undetermined(self.network, Naming.of(self.network)))
        return without, added

    @cached_property
    def ratio(self) -> Parameter:
        """T = D1/D0 in lowest terms."""
        without, added = self.parts
        return Parameter.of("T", added, without, NUMBER, self._worth)

    @cached_property
    def difference(self) -> Parameter:
        """1 + T = D/D0 in lowest terms."""
        without, added = self.parts
        return Parameter.of("1 + T", without + added, without, NUMBER, self._worth)

    @property
    def _worth(self) -> Worth:
        return Worth(self.naming.numbers, self.naming.irrational)

    @cached_property
    def numbers(self) -> tuple[list[Fraction], list[Fraction]]:
        """The coefficients of D0 and of D, ascending in s, for the values of the network; nothing is written out.

        MissingValueError while a name has none, SingularError where D0 or D is zero for these values.
        """
        names = self.naming.generators.names[1:]
        share = self.place - 1
        missing = [name for k, name in enumerate(names) if k != share and name not in self.naming.numbers]
        if missing:
            hint = f'give it one: net.with_values({{"{missing[0]}": "..."}})'
            raise MissingValueError(Fault(f"no value for {', '.join(missing)}", hint, parts=tuple(missing)))
        if self.naming.irrational:
            without, added = self.parts
            found = coefficients((without, without + added), self.naming.numbers, self.naming.irrational)
            dead, whole = ([Fraction(c) for c in side] for side in found)
        else:
            values = [
                Fraction(0) if k == share else self.naming.numbers[name] for k, name in enumerate(names)
            ]
            dead = self.determinant.coefficients(values)
            values[share] = Fraction(1)
            whole = self.determinant.coefficients(values)
        if not any(dead):
            raise SingularError(self._infinite())
        if not any(whole):
            fault = undetermined(self.network, self.naming, self.naming.numbers)
            raise SingularError(replace(fault, message=f"for these values {fault.message}"))
        return dead, whole

    def numeric(self) -> Ratio:
        """T as an exact rational function of s."""
        dead, whole = self.numbers
        length = max(len(dead), len(whole))
        d, w = ([*side, *[Fraction(0)] * (length - len(side))] for side in (dead, whole))
        return Ratio.of([a - b for a, b in zip(w, d, strict=True)], dead)

    def _infinite(self) -> Fault:
        return Fault(
            f"without {self.source} the network has no single solution, so that its return ratio is infinite",
            "is another op amp in the loop ideal? give it a gain too",
            parts=(self.source,),
        )


def sources(network: Network) -> tuple[str, ...]:
    """The laws of a network: each is a dependent source that has a return ratio."""
    return tuple(part.name for part in network.parts if isinstance(part, VoltageLaw | CurrentLaw))


def return_ratio(network: Network, source: str, symbols: str | Iterable[str] | None = None) -> ReturnRatio:
    """The return ratio of a law of the network; the name of a device that holds one law only stands for that law.

    ``symbols`` as for :func:`symnet.derive`. Raises UnknownNameError for what the network does not have,
    UndefinedError for an ideal op amp, NotationError for a part that is no dependent source.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- m -- R2 -- out; hold out = -A*m as amp; drive in; read out")
    >>> print(return_ratio(net, "amp").ratio)
    T = A*R1/(R1 + R2)
    """
    law = _law(network, source)
    share = _SHARE + law.name
    scaled = replace(law, value=Product(((1, Name(share)), (1, law.value))))
    parts = tuple(scaled if part is law else part for part in network.parts)
    kept = None if symbols is None else frozenset(_names(symbols)) | {share}
    for name in () if symbols is None else _names(symbols):
        if name not in network.symbols():
            raise network.unknown(name, network.symbols(), "part or symbol")
    pieces, determinant = determinant_of(replace(network, parts=parts, text=None), kept)
    names = pieces.naming.generators.names
    return ReturnRatio(law.name, network, pieces.naming, determinant, names.index(share))


def _names(symbols: str | Iterable[str]) -> list[str]:
    return symbols.replace(",", " ").split() if isinstance(symbols, str) else list(symbols)


def _law(network: Network, source: str) -> VoltageLaw | CurrentLaw:
    known = sources(network)
    inside = [name for name in known if name.startswith(f"{source}.")]
    wanted = source if source in network else inside[0] if len(inside) == 1 else source
    if wanted not in network:
        if inside:
            hint = f"say which: {', '.join(inside)}"
            raise NotationError(Fault(f"{source} holds {len(inside)} dependent sources", hint))
        raise network.unknown(source, [*known, *_ideal(network)], "dependent source or op amp")
    part = network[wanted]
    if isinstance(part, OpAmp):
        raise UndefinedError(
            Fault(
                f"{wanted} is an ideal op amp: its gain is infinite, and so is its return ratio",
                f'give it a gain: net.with_opamp("{wanted}", gbw="10 MHz"), or gain="100k", or both; '
                "None leaves a symbol",
                parts=(wanted,),
            )
        )
    if not isinstance(part, VoltageLaw | CurrentLaw):
        hint = (
            f"there are: {', '.join(known)}"
            if known
            else "hold and push draw one, and an op amp with a gain is one"
        )
        raise NotationError(Fault(f"{wanted} is no dependent source", hint, parts=(wanted,)))
    return part


def _ideal(network: Network) -> list[str]:
    return [part.name for part in network.parts if isinstance(part, OpAmp)]
