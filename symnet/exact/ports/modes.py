"""Common and differential mode of two inputs, and how well the one is kept out of the other."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from symnet.circuit.network import Network
from symnet.errors import Fault, WiringError
from symnet.exact.derive import derive_from
from symnet.exact.ports.figures import Parameter, Worth
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer

__all__ = ["Modes", "common_mode"]


@dataclass(frozen=True, eq=False)
class Modes(Displayed):
    """The gains of two inputs taken together.

    ``differential`` is the read over v_plus - v_minus with v_plus = -v_minus, (H_plus - H_minus)/2; ``common`` the
    read over the voltage of both, H_plus + H_minus; ``rejection`` the one over the other, None where nothing of the
    common mode comes through.
    """

    plus: Transfer
    minus: Transfer
    differential: Parameter
    common: Parameter
    rejection: Parameter | None

    def rejection_db(self, f: float) -> float:
        """The common-mode rejection ratio, 20 log10 of its magnitude, in dB at a frequency in Hz.

        Infinite where there is no common-mode gain. Raises MissingValueError when a name has no number.
        """
        if self.rejection is None:
            return math.inf
        size = abs(self.rejection.numeric()(2j * math.pi * f))
        return 20 * math.log10(size) if size else -math.inf

    def __repr__(self) -> str:
        return f"<Modes: {self.differential}; {self.common}>"


def common_mode(network: Network, plus: str | None = None, minus: str | None = None) -> Modes:
    """Differential and common-mode gain of a network with two drives; by name, else in the order of writing.

    Raises WiringError when the network has not two drives and one read.

    >>> import symnet as sn
    >>> net = sn.network('''
    ...     a -- R1 -- m -- R2 -- out;  b -- R3 -- p -- R4 -- gnd
    ...     U1: opamp(plus=p, minus=m, out=out)
    ...     drive b as plus; drive a as minus; read out
    ... ''')
    >>> print(sn.common_mode(net).common)
    common-mode gain = (R4 - R2*R3/R1)/(R3 + R4)
    """
    names = network.drive_names
    if len(network.drives) < 2 or len(network.reads) != 1:
        hint = "write for example: drive b as plus; drive a as minus; read out"
        raise WiringError(Fault("common and differential mode need two drives and one read", hint))
    chosen = [names.index(_known(network, name)) if name else k for k, name in enumerate((plus, minus))]
    one, two = (derive_from(network, network.drives[k], network.reads[0]) for k in chosen)
    ring = one.ring
    n1, d1, n2, d2 = (
        part.set_ring(ring) for part in (one.numerator, one.denominator, two.numerator, two.denominator)
    )
    worth = Worth(one.naming.numbers, one.naming.irrational)
    apart, together, below = n1 * d2 - n2 * d1, n1 * d2 + n2 * d1, d1 * d2
    return Modes(
        one,
        two,
        Parameter.of("differential gain", apart, 2 * below, one.dimension, worth),
        Parameter.of("common-mode gain", together, below, one.dimension, worth),
        Parameter.of("rejection", apart, 2 * together, None, worth) if together else None,
    )


def _known(network: Network, name: str) -> str:
    if name not in network.drive_names:
        raise network.unknown(name, network.drive_names, "drive")
    return name
