"""H as one of its names goes to zero or grows without bound: a part removed, shorted, made ideal.

With N and D as polynomials in the name, the terms of the lowest power that occurs in either decide at zero, those of
the highest at infinity. No value is put in, so nothing is divided by zero on the way: a resistor of infinite value is
gone, an op amp of infinite gain is ideal, whatever form the network was typed in.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from symnet.exact.ports.figures import Parameter, Worth
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.exact.transfer import Transfer

__all__ = ["Extremes", "extremes"]


@dataclass(frozen=True, eq=False)
class Extremes(Displayed):
    """H with a name at zero and at infinity; None where H itself grows without bound there."""

    name: str
    zero: Parameter | None
    infinite: Parameter | None

    def __repr__(self) -> str:
        return (
            f"<H for {self.name} -> 0: {_said(self.zero)}; {self.name} -> infinity: {_said(self.infinite)}>"
        )


def _said(found: Parameter | None) -> str:
    return "infinite" if found is None else str(found).partition(" = ")[2]


def extremes(transfer: Transfer, name: str) -> Extremes:
    """H as ``name`` goes to zero and to infinity, exactly, all other names as they are.

    Raises UnknownNameError, with the nearest name, for one that H does not hold.

    >>> import symnet as sn
    >>> H = sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; out -- RL -- gnd; drive in; read out"))
    >>> extremes(H, "RL")
    <H for RL -> 0: 0; RL -> infinity: 1/(1 + s*R1*C1)>
    """
    place = transfer.ring.symbols.index(transfer.symbol(name))
    return Extremes(name, _end(transfer, name, place, "0"), _end(transfer, name, place, "infinity"))


def _end(transfer: Transfer, name: str, place: int, where: str) -> Parameter | None:
    n, d = transfer.numerator, transfer.denominator
    powers = [monomial[place] for part in (n, d) for monomial in part.itermonoms()]
    power = min(powers) if where == "0" else max(powers)
    top, bottom = _of_power(n, place, power), _of_power(d, place, power)
    if not bottom:
        return None
    worth = Worth(transfer.naming.numbers, transfer.naming.irrational)
    label = f"{transfer.label} for {name} -> {where}"
    return Parameter.of(label, top, bottom, transfer.dimension, worth)


def _of_power(polynomial: PolyElement, place: int, power: int) -> PolyElement:
    kept = {(*m[:place], 0, *m[place + 1 :]): c for m, c in polynomial.terms() if m[place] == power}
    return polynomial.ring.from_dict(kept)
