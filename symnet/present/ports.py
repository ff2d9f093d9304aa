"""How two-ports, their matrices, a part seen by the others and the modes of two inputs are shown."""

from __future__ import annotations

from symnet.circuit.parts import GROUND
from symnet.errors import SymnetError
from symnet.exact.ports.element import ExtraElement
from symnet.exact.ports.extremes import Extremes
from symnet.exact.ports.figures import Parameter
from symnet.exact.ports.modes import Modes
from symnet.exact.ports.twoport import Matrix, TwoPort
from symnet.present.blocks import Block, Heading, Items, Line, Paragraph, Table
from symnet.quantities import NUMBER
from symnet.typeset.tree import ZERO

__all__ = ["element_blocks", "extremes_blocks", "matrix_blocks", "modes_blocks", "two_port_blocks"]


def matrix_blocks(matrix: Matrix) -> tuple[Block, ...]:
    """What the matrix means, and its four parameters."""
    rows = tuple(_row(entry.label, entry) for row in matrix for entry in row)
    return (Paragraph(f"{matrix.name}: {matrix.meaning}."), Table(("parameter", "value", "unit"), rows))


def two_port_blocks(found: TwoPort) -> tuple[Block, ...]:
    """The ports, what holds for both directions, and the chain matrix where there is one."""
    one, two = (a if b == GROUND else f"{a} - {b}" for a, b in found.ports)
    facts: list[Line] = [
        f"port 1: {one}, port 2: {two}; what drives the network is left out",
        "reciprocal: both directions pass the same, z12 = z21; the determinant of the chain matrix is 1"
        if found.is_reciprocal
        else "not reciprocal: the two directions pass different signals",
        "symmetric: the ports can be exchanged" if found.is_symmetric else "not symmetric",
        "open*short = z11*z22 - z12*z21 holds exactly (Jacobi)",
    ]
    try:
        return (Heading("Two-port"), Items(tuple(facts)), *matrix_blocks(found.chain()))
    except SymnetError as error:
        return (Heading("Two-port"), Items((*facts, error.faults[0].message)))


def element_blocks(found: ExtraElement) -> tuple[Block, ...]:
    """H without the part and with a wire in its place, and the two impedances."""
    rows = tuple((said, *_worth(entry)) for said, entry in found)
    name = found.name
    law = f"H = H_open (1 + Z_n/Z)/(1 + Z_d/Z) = H_short (1 + Z/Z_n)/(1 + Z/Z_d), with Z the impedance of {name}."
    return (Paragraph(law), Table(("figure", "value", "unit"), rows))


def extremes_blocks(found: Extremes) -> tuple[Block, ...]:
    """H with a name at zero and at infinity."""
    rows = tuple(
        (f"{found.name} -> {where}", *(("H grows without bound", "") if end is None else _worth(end)))
        for where, end in (("0", found.zero), ("infinity", found.infinite))
    )
    return (Table(("limit", "H", "unit"), rows),)


def modes_blocks(found: Modes) -> tuple[Block, ...]:
    """Differential and common-mode gain, and their ratio."""
    rows = [
        ("differential gain, read/(v_plus - v_minus)", *_worth(found.differential)),
        ("common-mode gain, read/v of both", *_worth(found.common)),
    ]
    if found.rejection is None:
        rows.append(("rejection", "infinite: nothing of the common mode comes through", ""))
    else:
        rows.append(("rejection, differential/common", *_worth(found.rejection)))
    return (Table(("figure", "value", "unit"), tuple(rows)),)


def _row(label: str, entry: Parameter) -> tuple[Line, ...]:
    return (label, *_worth(entry))


def _worth(entry: Parameter | None) -> tuple[Line, Line]:
    if entry is None:
        return "infinite, or not determined", ""
    unit = "" if entry.dimension is None else "1" if entry.dimension == NUMBER else str(entry.dimension)
    return (entry.tree if entry.numerator else ZERO), unit
