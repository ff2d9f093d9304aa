"""H seen from one of its parts: what it is without that part, and the two impedances that say what the part does.

N and D hold the impedance Z of a branch in the first power only, so that

    H = H_open (1 + Z_n/Z)/(1 + Z_d/Z) = H_short (1 + Z/Z_n)/(1 + Z/Z_d)

with H_open the H without the part, H_short the H with a wire in its place, Z_d the impedance that the part sees
with the drive at zero, and Z_n the one that it sees while the read is held at zero by the drive (R. D. Middlebrook,
Null double injection and the extra element theorem, IEEE Trans. Education 32, 1989, 167-180). The four are read off
the coefficients of Z; none is measured by injecting anything.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import TYPE_CHECKING

from symnet.circuit.network import Network
from symnet.circuit.parts import Branch
from symnet.errors import Fault, NotationError
from symnet.exact.derive import derive
from symnet.exact.ports.figures import Parameter, Worth
from symnet.quantities import OHM, Dimension
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.exact.transfer import Transfer

__all__ = ["ExtraElement", "extra_element"]


@dataclass(frozen=True, eq=False)
class ExtraElement(Displayed):
    """H as the part ``name`` makes it. A figure that is infinite or undetermined is None.

    ``opened`` is H without the part, ``shorted`` H with a wire in its place; ``driving_point`` is Z_d and
    ``nulled`` Z_n, in ohm.
    """

    name: str
    transfer: Transfer
    opened: Parameter | None
    shorted: Parameter | None
    driving_point: Parameter | None
    nulled: Parameter | None

    def __iter__(self) -> Iterator[tuple[str, Parameter | None]]:
        yield f"H without {self.name}", self.opened
        yield f"H with {self.name} shorted", self.shorted
        yield "Z_d, seen by it with the drive at zero", self.driving_point
        yield "Z_n, seen by it with the read held at zero", self.nulled

    def __repr__(self) -> str:
        return f"<H of {self.transfer.label} seen from {self.name}>"


def extra_element(
    network: Network, name: str, read: str | None = None, drive: str | None = None
) -> ExtraElement:
    """H of a network with respect to one of its branches; ``read`` and ``drive`` as for :func:`symnet.derive`.

    Raises UnknownNameError for a part the network does not have, NotationError for one that is no branch or whose
    current the read or a law names.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- out -- R2 -- gnd; out -- C1 -- gnd; drive in; read out")
    >>> seen = sn.extra_element(net, "C1")
    >>> print(seen.opened, "|", seen.driving_point, "|", seen.nulled)
    H_open = R2/(R1 + R2) | Z_d = R1||R2 | Z_n = 0
    """
    part = network[name]
    if not isinstance(part, Branch):
        hint = "an element is a resistor, inductor, capacitor or a branch Z or Y"
        raise NotationError(Fault(f"{name} is no branch", hint, parts=(name,)))
    whole = derive(network, read, drive)
    symbol = _fresh(network)
    changed = network.replace(name, symbol)
    transfer = derive(changed, read, drive)
    ring = transfer.ring
    place = [str(generator) for generator in ring.symbols].index(symbol) if symbol in transfer.names else None
    n, d = _split(transfer.numerator, place), _split(transfer.denominator, place)
    naming = transfer.naming
    worth = Worth(naming.numbers, naming.irrational)

    def quotient(
        label: str, top: PolyElement, bottom: PolyElement, dimension: Dimension | None
    ) -> Parameter | None:
        if not bottom:
            return None
        return Parameter.of(label, top, bottom, dimension, worth)

    return ExtraElement(
        name,
        whole,
        quotient("H_open", n[1], d[1], transfer.dimension),
        quotient("H_short", n[0], d[0], transfer.dimension),
        quotient("Z_d", d[0], d[1], OHM),
        quotient("Z_n", n[0], n[1], OHM),
    )


def _fresh(network: Network) -> str:
    """A name for the branch as an impedance that the network does not have."""
    name = "Zx"
    while name in network.symbols() or name in network.part_names:
        name += "x"
    return name


def _split(polynomial: PolyElement, place: int | None) -> tuple[PolyElement, PolyElement]:
    """The parts without the impedance and with it, the latter divided by it."""
    ring = polynomial.ring
    if place is None:  # H does not hang on the part: it is as good as open
        return ring.zero, polynomial
    sides: tuple[dict[tuple[int, ...], object], dict[tuple[int, ...], object]] = ({}, {})
    for monomial, coefficient in polynomial.terms():
        sides[monomial[place]][(*monomial[:place], 0, *monomial[place + 1 :])] = coefficient
    return ring.from_dict(sides[0]), ring.from_dict(sides[1])
