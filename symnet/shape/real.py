"""From the ideal to the real op amp, property by property: what each of them does to the poles.

A designer asks of every real property what it costs, and a single model with everything in it does not say. So the
properties are added one at a time, in the order in which they are given, each network is derived exactly, and its poles
are put beside those of the ideal one, nearest first. Poles that the ideal network has not are listed apart: they come
from far away as the property becomes real.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from symnet.circuit.network import Network, ValueLike
from symnet.circuit.parts import OpAmp
from symnet.errors import Fault, NotationError
from symnet.exact.derive import derive
from symnet.exact.roots import Root
from symnet.exact.transfer import Transfer
from symnet.shape.moves import Move, moves
from symnet.shape.stability import Stability, stability_of_factor
from symnet.typeset.displayed import Displayed

__all__ = ["RealOpAmps", "Step", "real_opamps"]


@dataclass(frozen=True, eq=False)
class Step:
    """H with the properties up to this one: ``added`` names it with its value, "ideal" comes first.

    ``poles`` are those of the ideal H, each with what has become of it (``exact`` is the ideal one, ``shortened`` the
    one now); ``more`` are poles that the ideal H has not, in rad/s.
    """

    added: str
    network: Network
    transfer: Transfer
    poles: tuple[Move, ...]
    more: tuple[Root, ...]
    stability: Stability

    def __repr__(self) -> str:
        return (
            f"<{self.added}: {', '.join(repr(move)[1:-1] for move in self.poles)}; {self.stability.verdict}>"
        )


@dataclass(frozen=True, eq=False)
class RealOpAmps(Displayed):
    """The steps from ideal op amps to those with all the properties; a sequence of them."""

    opamps: tuple[str, ...]
    steps: tuple[Step, ...]

    def __iter__(self) -> Iterator[Step]:
        return iter(self.steps)

    def __len__(self) -> int:
        return len(self.steps)

    def __getitem__(self, index: int) -> Step:
        return self.steps[index]

    def __repr__(self) -> str:
        last = self.steps[-1]
        said = "; ".join(repr(move)[1:-1] for move in last.poles[:3])
        return f"<{', '.join(self.opamps)} in {len(self.steps) - 1} steps from ideal: {said}>"


def real_opamps(
    network: Network,
    read: str | None = None,
    drive: str | None = None,
    **properties: ValueLike,
) -> RealOpAmps:
    """What finite gain, gain-bandwidth product, output resistance ... of its ideal op amps do to the poles of a network.

    ``properties`` are those of :meth:`Network.with_opamp`: ``gain``, ``gbw``, ``pole2``, ``Rin``, ``Cin``, ``Rout``;
    they are added one after the other in the order given, to all ideal op amps alike. All parts need values.

    Raises NotationError where the network has no ideal op amp or no property is given, MissingValueError where a part
    has no value.

    >>> import symnet as sn
    >>> unity = sn.network('''
    ...     # 100 kHz Butterworth section (invented)
    ...     in -- R1 -- x -- R2 -- p -- C2 -- gnd;  x -- C1 -- out
    ...     U1: opamp(plus=p, minus=out, out=out);  drive in;  read out
    ...     R1, R2 = 1125.4 ohm;  C1 = 2 nF;  C2 = 1 nF
    ... ''')
    >>> for step in real_opamps(unity, gbw="10 MHz"):
    ...     print(step.added, [round(move.shortened_f0 / 1e3, 2) for move in step.poles], len(step.more))
    ideal [100.0, 100.0] 0
    gbw = 10 MHz [99.29, 99.29] 1
    """
    opamps = tuple(part.name for part in network.parts if isinstance(part, OpAmp))
    if not opamps or not properties:
        said = "the network has no ideal op amp" if not opamps else "no property of an op amp is given"
        raise NotationError(
            Fault(said, 'for example: real_opamps(net, gain="100k", gbw="1 MHz", Rout="100 ohm")')
        )
    ideal = derive(network, read, drive)
    steps = [_step("ideal", network, ideal, ideal)]
    given: dict[str, ValueLike] = {}
    for word, value in properties.items():
        given[word] = value
        real = network
        for name in opamps:
            real = real.with_opamp(name, **given)
        steps.append(_step(f"{word} = {value}", real, ideal, derive(real, read, drive)))
    return RealOpAmps(opamps, tuple(steps))


def _step(added: str, network: Network, ideal: Transfer, now: Transfer) -> Step:
    before, after = ideal.numeric().den, now.numeric().den
    poles = moves("pole", before, after)
    taken = [move.shortened for move in poles]
    more = []
    for move in moves("pole", after, after):
        if move.exact in taken:
            taken.remove(move.exact)
        else:
            more.append(move.exact)
    return Step(added, network, now, poles, tuple(more), stability_of_factor(after))
