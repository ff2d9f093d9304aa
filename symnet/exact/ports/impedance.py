"""The impedance between two nodes: what a current driven into them meets."""

from __future__ import annotations

from dataclasses import replace

from symnet.circuit.network import Network, read_network
from symnet.circuit.parts import CurrentDrive, VoltageDrive
from symnet.circuit.reading import read_reading
from symnet.errors import Fault, NotationError
from symnet.exact.derive import derive_from
from symnet.exact.transfer import Transfer

__all__ = ["driving_point"]


def driving_point(network: Network, port: str) -> Transfer:
    """The impedance, in ohm, at a node against gnd or between two nodes (``"a - b"``), as an exact H.

    A voltage that drives just there is taken away, since it is what the current takes the place of: at the node of
    the drive this is the input impedance. Every other drive stays, at zero: a voltage source is a short, a current
    source an open, so that elsewhere it is the output impedance. The admittance is its inverse.

    Raises UnknownNameError for a node the network does not have, and what :func:`symnet.derive` raises.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")
    >>> print(sn.driving_point(net, "in"))
    in/i_test = (1 + s*R1*C1)/(s*C1)
    >>> print(sn.driving_point(net, "out"))
    out/i_test = R1/(1 + s*R1*C1)
    """
    drive = read_network(f"drive {port}").drives[0]
    if not isinstance(drive, VoltageDrive):
        raise NotationError(Fault(f"{port} is no pair of nodes", 'write "out", or "a - b"'))
    for node in drive.nodes:
        if node != "gnd" and node not in network.nodes:
            raise network.unknown(node, network.nodes, "node")
    kept = tuple(
        other
        for other in network.drives
        if not (isinstance(other, VoltageDrive) and set(other.nodes) == set(drive.nodes))
    )
    name = "test"
    while name in {*network.nodes, *network.part_names, *network.symbols(), *network.drive_names}:
        name += "_"
    test = CurrentDrive(drive.minus, drive.plus, name)
    driven = replace(network, drives=(*kept, test), reads=(), text=None)
    found = derive_from(driven, test, read_reading(port))
    return replace(found, label=found.label.replace(f"/{name}", f"/i_{name}"))
