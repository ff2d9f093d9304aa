"""From a network to H(s): the one entry to the exact engine."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace
from functools import lru_cache
from random import Random

from symnet.circuit.network import Network
from symnet.circuit.parts import GROUND, CurrentDrive, Drive
from symnet.circuit.wiring import check_drives, check_wiring
from symnet.errors import Fault, NotationError, SingularError, WiringError, nearest
from symnet.exact.confirm import confirm, undetermined
from symnet.exact.determinant import Determinant
from symnet.exact.hidden import Aside, Reason
from symnet.exact.matrices import Matrix
from symnet.exact.modular import PRIME
from symnet.exact.naming import Naming
from symnet.exact.pieces import Pieces, named_currents
from symnet.exact.polynomials import ONE, Terms, negated
from symnet.exact.quotient import Quotient
from symnet.exact.structure import Structure, structure_of
from symnet.exact.transfer import Transfer
from symnet.exact.trees import ZERO, Diagram, Piece
from symnet.expressions import Expression, Name, dimension_of, names_in
from symnet.quantities import AMPERE, VOLT, Dimension

__all__ = [
    "derive",
    "derive_all",
    "derive_from",
    "determinant_of",
    "dimension_of_read",
    "driven_by",
    "quotient_of",
    "read_of",
]


def derive(
    network: Network,
    read: str | None = None,
    drive: str | None = None,
    symbols: str | Iterable[str] | None = None,
) -> Transfer:
    """The exact transfer function H(s) from a drive to a read, in the names of the parts, in lowest terms.

    H is the read divided by the drive with every other drive at zero: N = -det of the nodal matrix bordered by
    the drive's column and the read's row, D = its determinant (Cramer's rule), see :mod:`symnet.exact.trees`.

    ``read`` and ``drive`` stand for the sentences of the text: ``read="a"``, ``read="a - b"``,
    ``read="i_R1"``; ``drive="b"``, ``drive="current into b"``, or the name of a drive that the network has.
    They are needed only where the text has none or several. ``symbols`` (``"R1 C1"`` or a list) keeps only
    these names as symbols; every other name that has a value is replaced by its exact number.

    What is kept is a diagram of both determinants, 150 to 200 bytes a node and at most 200 000 nodes (40 MB); a
    network too dense for that gives numbers only. It is written out when it is looked at, at 9 bytes a term while it
    is in arrays and 200 to 300 as elements of ``ring``; more than 500 000 terms are refused with their count.
    An interrupt (Ctrl-C) leaves nothing behind.

    Raises WiringError when the network has no single solution by its wiring, SingularError when the values or
    gains make it so, NotationError for a read or drive that cannot be read.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- out -- C1 || RL -- gnd; drive in; read out; R1, RL = 10 kohm")
    >>> H = sn.derive(net)
    >>> H.numerator, H.denominator
    (RL, s*R1*C1*RL + R1 + RL)
    >>> sn.derive(net, symbols="C1").denominator
    10000*s*C1 + 2
    """
    if drive is not None:
        network, chosen = driven_by(network, drive)
    elif len(network.drives) > 1:
        names = ", ".join(network.drive_names)
        raise WiringError(
            Fault(
                f"the network has several drives ({names})",
                "say which: derive(net, drive=...), or derive_all(net) for one H each",
            )
        )
    reads = network.reads if read is None else (read_of(network, read),)
    if len(reads) > 1:
        raise WiringError(
            Fault(
                "the network has several reads",
                "say which: derive(net, read=...), or derive_all(net) for one H each",
            )
        )
    if not network.drives:
        raise WiringError(
            Fault("nothing drives the network", "write for example: drive in   (or drive current into a)")
        )
    if not reads:
        raise WiringError(Fault("nothing is read", "write for example: read out   (or read i_R1)"))
    if drive is None:
        chosen = network.drives[0]
    check_drives(network)
    return derive_from(network, chosen, reads[0], symbols)


def derive_all(
    network: Network,
    reads: Iterable[str] | None = None,
    symbols: str | Iterable[str] | None = None,
) -> tuple[Transfer, ...]:
    """One H for every drive and every read, drive by drive; the denominator's diagram is built once.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- a -- C1 -- gnd; a -- R2 -- out -- C2 -- gnd; drive in; read a; read out")
    >>> [H.label for H in sn.derive_all(net)]
    ['a/in', 'out/in']
    """
    if isinstance(symbols, str):
        symbols = symbols.replace(",", " ").split()
    kept = None if symbols is None else frozenset(symbols)
    wanted = network.reads if reads is None else tuple(read_of(network, read) for read in reads)
    if not network.drives or not wanted:
        derive(network)  # says what is missing
    check_drives(network)
    return tuple(derive_from(network, drive, read, kept) for drive in network.drives for read in wanted)


def derive_from(
    network: Network,
    drive: Drive,
    read: Expression,
    symbols: str | Iterable[str] | None = None,
) -> Transfer:
    """H from one drive of the network to one linear expression of its voltages and currents."""
    if isinstance(symbols, str):
        symbols = symbols.replace(",", " ").split()
    kept = None if symbols is None else frozenset(symbols)
    if kept is not None:
        known = network.symbols()
        for name in kept:
            if name not in known:
                raise network.unknown(name, known, "part or symbol")
    pieces, quotient = _between(network, drive, read, kept)
    return Transfer(
        network,
        drive,
        read,
        _label(network, drive, read),
        _dimension(pieces, drive, read),
        pieces.naming,
        quotient,
        confirm(network, pieces.naming, drive, read, quotient),
    )


def quotient_of(
    network: Network, drive: Drive, read: Expression, symbols: frozenset[str] | None = None
) -> tuple[Pieces, Quotient]:
    """The two determinants of H whole, not even without what the wiring cancels, and the pieces they are made of.

    Reads without currents of branches share their denominator. Raises SingularError where it is zero for all values.
    """
    pieces, structure = _prepared(network, symbols, named_currents(network, read))
    random = Random("zero")
    point = [random.randrange(1, PRIME) for _ in pieces.naming.generators.names]
    if not _whole(pieces, structure).modulo(point, PRIME):
        raise SingularError(undetermined(network, pieces.naming))
    factor, terms = pieces.form(read, "the read")
    bordered = structure_of(pieces.size + 1, (*pieces.pieces, *_border(pieces, drive, terms)), structure.tree)
    return pieces, Quotient(
        Determinant(
            pieces.naming.generators,
            ZERO if bordered is None else bordered.whole,
            (*pieces.take, *(weight for weight, _, _ in terms), negated(ONE)),
            (*pieces.leave, *(ONE for _ in terms), ONE),
        ),
        replace(_whole(pieces, structure), factor=factor),
    )


def determinant_of(network: Network, symbols: frozenset[str] | None = None) -> tuple[Pieces, Determinant]:
    """The determinant of a network with its drives at zero, whole, and the pieces it is made of."""
    pieces, structure = _prepared(network, symbols, named_currents(network))
    return pieces, _whole(pieces, structure)


def _between(
    network: Network, drive: Drive, read: Expression, symbols: frozenset[str] | None
) -> tuple[Pieces, Quotient]:
    """The determinants of what lies between the drive and the read, and what the wiring keeps aside."""
    pieces, structure = _prepared(network, symbols, named_currents(network, read))
    factor, terms = pieces.form(read, "the read")
    border = _border(pieces, drive, terms)
    seen = structure.seen((plus, minus) for _, plus, minus in terms)
    driven = structure.driven(pieces.drive_rows(drive))
    between = sorted(seen & driven)
    kept = sorted(k for number in between for k in structure.blocks[number])
    minor = structure.minor(kept, border)
    bordered = structure_of(minor.size, minor.pieces, minor.tree)
    whole = _whole(pieces, structure)
    below = whole.restricted(structure.determinant(between, minor.parity), kept, factor)
    return pieces, Quotient(
        Determinant(
            pieces.naming.generators,
            _numerator(bordered, below),
            (*below.take, *(weight for weight, _, _ in terms), negated(ONE)),
            (*below.leave, *(ONE for _ in terms), ONE),
        ),
        below,
        tuple([pieces.owners[k] for k in kept]),
        tuple(_aside(pieces, structure, whole, seen, driven)),
    )


def _numerator(bordered: Structure | None, below: Determinant) -> Diagram | Matrix:
    """The bordered determinant; where the one below has no diagram, none is tried."""
    if bordered is None:
        return ZERO
    return bordered.whole if below.is_built else bordered.matrix(range(len(bordered.blocks)), bordered.parity)


def _border(
    pieces: Pieces, drive: Drive, read: Sequence[tuple[Terms, int | None, int | None]]
) -> list[Piece]:
    """The row of the read and the column of the drive, in that order."""
    border = [Piece(pieces.size, None, plus, minus) for _, plus, minus in read]
    return [*border, Piece(*pieces.drive_rows(drive), pieces.size, None)]


def _aside(
    pieces: Pieces, structure: Structure, whole: Determinant, seen: frozenset[int], driven: frozenset[int]
) -> Iterator[Aside]:
    """The blocks that are not both seen and driven, without those that are 1 or -1 whatever the values."""
    for number, block in enumerate(structure.blocks):
        if number in seen and number in driven:
            continue
        if len(block) == 1:
            side = pieces.take if block[0] in structure.tree else pieces.leave
            if side[block[0]] in {ONE, negated(ONE)}:
                continue
        yield Aside(
            whole.restricted(structure.factors[number], block, ONE),
            tuple([pieces.owners[k] for k in block]),
            Reason.UNSEEN if number in driven else Reason.UNDRIVEN if number in seen else Reason.APART,
        )


@lru_cache(maxsize=16)
def _prepared(
    network: Network, symbols: frozenset[str] | None, currents: frozenset[str]
) -> tuple[Pieces, Structure]:
    """What every drive and read of a network shares: its pieces and the blocks of its determinant."""
    check_wiring(network)
    pieces = Pieces.of(network, symbols, currents)
    structure = structure_of(pieces.size, pieces.pieces)
    if structure is None:
        raise SingularError(undetermined(network, pieces.naming))
    return pieces, structure


def _whole(pieces: Pieces, structure: Structure) -> Determinant:
    """The determinant of the network."""
    return Determinant(pieces.naming.generators, structure.whole, pieces.take, pieces.leave)


def read_of(network: Network, text: str) -> Expression:
    """What a text such as ``a - b`` or ``i_R1`` reads; NotationError where the network has no such name."""
    from symnet.circuit.reading import read_reading

    expression = read_reading(text)
    known = {*network.nodes, *network.electric_names(), *network.symbols(), "s"}
    for name in names_in(expression):
        if name.name not in known:
            close = nearest(name.name, known)
            hint = f"did you mean {close[0]}?" if close else f"nodes: {', '.join(network.nodes)}"
            fault = Fault(f"the network has no node or part called {name.name}", hint, span=name.span)
            raise NotationError(fault, text=text)
    return expression


def driven_by(network: Network, text: str) -> tuple[Network, Drive]:
    """The network with the drive that ``text`` names or describes, added if it is not there yet."""
    from symnet.circuit.writing import write_drive

    for name, drive in zip(network.drive_names, network.drives, strict=True):
        if text == name or write_drive(drive) == f"drive {text}":
            return network, drive
    driven = replace(network, drives=()).add(f"drive {text}")
    return driven, driven.drives[0]


def _label(network: Network, drive: Drive, read: Expression) -> str:
    from symnet.circuit.spelling import write_expression

    top = write_expression(read)
    if not isinstance(read, Name):
        top = f"({top})"
    if drive.name:
        return f"{top}/{drive.name}"
    if isinstance(drive, CurrentDrive):
        return f"{top}/i_{network.drive_names[network.drives.index(drive)]}"
    below = drive.plus if drive.minus == GROUND else f"({drive.plus} - {drive.minus})"
    return f"{top}/{below}"


def _dimension(pieces: Pieces, drive: Drive, read: Expression) -> Dimension:
    top = dimension_of_read(pieces.naming, pieces.network, read)
    return top / (AMPERE if isinstance(drive, CurrentDrive) else VOLT)


def dimension_of_read(naming: Naming, network: Network, read: Expression) -> Dimension:
    """The dimension of a read: volt for a voltage, ampere for a current."""
    known: dict[str, Dimension] = {}
    for node in (*network.nodes, GROUND):
        known[node] = known[f"v_{node}"] = VOLT
    for name in (*network.part_names, *network.drive_names):
        known[f"i_{name}"], known[f"v_{name}"] = AMPERE, VOLT
    if any(name.name not in known for name in names_in(read)):  # only then are those of all names inferred
        for word, dimension in naming.dimensions.items():
            if dimension is not None:
                known.setdefault(word, dimension)
    return dimension_of(read, known) or VOLT
