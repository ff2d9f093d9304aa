"""A network as rank-one pieces with exact weights: what the determinants are made of.

Rows are Kirchhoff's current law at each node and the law of each ideal source; columns are the node voltages
and the currents of those sources. Every part gives pieces ``take/leave * u * v^T``:

========================  =============================================================
resistor, inductor        admittance 1/R, 1/(sL): take 1, leave R or sL
capacitor                 admittance sC: take sC, leave 1
impedance p/q             take q, leave p
admittance p/q            take p, leave q
voltage source or law     its current into the two rows, its voltage in its own row
op amp                    its output current into one row, the row v_plus - v_minus = 0
current law p/q           take p, leave q, per controlling voltage or current
========================  =============================================================

A resistance of zero so becomes a short and an infinite one an open branch, without any division.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING

from symnet.errors import Fault, NotationError
from symnet.exact.linear import Bounded, LinearForm, linear_form
from symnet.exact.naming import Naming
from symnet.exact.trees import Piece
from symnet.expressions import Expression, Name
from symnet.network.network import Network
from symnet.network.parts import (
    GROUND,
    Branch,
    CurrentDrive,
    CurrentLaw,
    Drive,
    OpAmp,
    VoltageDrive,
    VoltageLaw,
)

if TYPE_CHECKING:
    from sympy.polys.fields import FracElement
    from sympy.polys.rings import PolyElement

__all__ = ["Pieces", "drive_column", "terms_of"]


@dataclass(frozen=True)
class Pieces:
    """The pieces of a network without a chosen drive or read, with their weights in the ring of its names."""

    network: Network
    naming: Naming
    size: int
    pieces: tuple[Piece, ...]
    take: tuple[PolyElement, ...]
    leave: tuple[PolyElement, ...]
    nodes: Mapping[str, int]
    currents: Mapping[str, int]

    @classmethod
    def of(cls, network: Network, symbols: frozenset[str] | None = None) -> Pieces:
        """The pieces of a network; ``symbols`` are the names that stay symbols although they have a number.

        Raises NotationError where a law is not linear.
        """
        return _Stamping(network, symbols).result()

    def column(self, unknown: tuple[str, str]) -> int | None:
        """The column of an unknown, ("v", node) or ("i", source); None for gnd."""
        kind, name = unknown
        return self.currents[name] if kind == "i" else self.nodes.get(name)

    def form(self, expression: Expression, what: str) -> LinearForm:
        """The linear form of an expression of voltages and currents in this network."""
        field = self.naming.field
        return linear_form(expression, field, self._form_of, what)

    def _form_of(self, name: Name) -> LinearForm:
        word = name.name
        if word in self.nodes or word == GROUND:
            return self._voltage(word)
        kind, _, rest = word.partition("_")
        if kind == "v" and rest and word not in self.naming.dimensions:
            return self._v(rest, name)
        if kind == "i" and rest and word not in self.naming.dimensions:
            return self._i(rest, name)
        return LinearForm(Bounded(self.naming.fraction(name)), {})

    def _voltage(self, node: str) -> LinearForm:
        one, zero = Bounded(self.naming.field.one), Bounded(self.naming.field.zero)
        return LinearForm(zero, {} if node == GROUND else {("v", node): one})

    def _v(self, rest: str, name: Name) -> LinearForm:
        if rest in self.nodes or rest == GROUND:
            return self._voltage(rest)
        plus, minus = self._terminals(rest, name)
        return self._voltage(plus) + -self._voltage(minus)

    def _i(self, rest: str, name: Name) -> LinearForm:
        if rest in self.currents:
            return LinearForm(Bounded(self.naming.field.zero), {("i", rest): Bounded(self.naming.field.one)})
        part = next((part for part in self.network.parts if part.name == rest), None)
        if isinstance(part, Branch):
            admittance = LinearForm(Bounded(_admittance(part, self.naming)), {})
            return admittance * self._v(rest, name)
        if isinstance(part, CurrentLaw):
            return self.form(part.value, f"the law {part.name}")
        raise self._stands_for_nothing(name)

    def _terminals(self, rest: str, name: Name) -> tuple[str, str]:
        for known, drive in zip(self.network.drive_names, self.network.drives, strict=True):
            if known == rest:
                return drive.nodes
        part = next((part for part in self.network.parts if part.name == rest), None)
        if part is None or isinstance(part, OpAmp):
            raise self._stands_for_nothing(name)
        return part.nodes

    def _stands_for_nothing(self, name: Name) -> NotationError:
        return NotationError(
            Fault(
                f"{name.name} stands for no voltage or current of this network",
                "a node's name is its voltage; i_R1 is the current through R1, v_R1 the voltage across it",
                span=name.span,
            )
        )


def _admittance(part: Branch, naming: Naming) -> FracElement:
    value = naming.value(part.name)
    s = naming.field.gens[0]
    match part.kind:
        case "C":
            return s * value
        case "Y":
            return value
        case "L":
            return _inverse(s * value, part)
        case _:
            return _inverse(value, part)


def _inverse(value: FracElement, part: Branch) -> FracElement:
    if not value:
        raise NotationError(
            Fault(
                f"the current through {part.name} cannot be written with its voltage, since {part.name} is zero",
                "read the current of a part in series with it",
                parts=(part.name,),
            )
        )
    return 1 / value


class _Stamping:
    """Collects the pieces of a network, part by part."""

    def __init__(self, network: Network, symbols: frozenset[str] | None) -> None:
        self.network = network
        self.naming = Naming.of(network, symbols)
        self.nodes = {node: k for k, node in enumerate(network.nodes)}
        self.currents: dict[str, int] = {}
        size = len(self.nodes)
        for name, drive in zip(network.drive_names, network.drives, strict=True):
            if isinstance(drive, VoltageDrive):
                self.currents[name] = size
                size += 1
        for part in network.parts:
            if isinstance(part, VoltageLaw | OpAmp):
                self.currents[part.name] = size
                size += 1
        self.size = size
        self.pieces: list[Piece] = []
        self.take: list[PolyElement] = []
        self.leave: list[PolyElement] = []

    def result(self) -> Pieces:
        frame = Pieces(self.network, self.naming, self.size, (), (), (), self.nodes, self.currents)
        for name, drive in zip(self.network.drive_names, self.network.drives, strict=True):
            if isinstance(drive, VoltageDrive):
                self._voltage_source(name, drive.plus, drive.minus)
        for part in self.network.parts:
            match part:
                case Branch():
                    self._branch(part)
                case VoltageLaw():
                    self._voltage_source(part.name, part.plus, part.minus)
                    row = self.currents[part.name]
                    form = frame.form(part.value, f"the law {part.name}")
                    for fraction, plus, minus in terms_of(form, frame):
                        self._add(Piece(row, None, plus, minus), -fraction.numer, fraction.denom)
                case CurrentLaw():
                    form = frame.form(part.value, f"the law {part.name}")
                    start, end = self.nodes.get(part.start), self.nodes.get(part.end)
                    for fraction, plus, minus in terms_of(form, frame):
                        self._add(Piece(start, end, plus, minus), fraction.numer, fraction.denom)
                case OpAmp():
                    at = self.currents[part.name]
                    self._add(Piece(None, self.nodes.get(part.out), at, None))
                    self._add(Piece(at, None, self.nodes.get(part.plus), self.nodes.get(part.minus)))
        return Pieces(
            self.network,
            self.naming,
            self.size,
            tuple(self.pieces),
            tuple(self.take),
            tuple(self.leave),
            self.nodes,
            self.currents,
        )

    def _voltage_source(self, name: str, plus: str, minus: str) -> None:
        at, a, b = self.currents[name], self.nodes.get(plus), self.nodes.get(minus)
        self._add(Piece(a, b, at, None))
        self._add(Piece(at, None, a, b))

    def _branch(self, part: Branch) -> None:
        value = self.naming.value(part.name)
        s = self.naming.ring.gens[0]
        one = self.naming.ring.one
        a, b = self.nodes.get(part.start), self.nodes.get(part.end)
        match part.kind:
            case "R" | "Z":
                take, leave = value.denom, value.numer
            case "L":
                take, leave = value.denom, s * value.numer
            case "C":
                take, leave = s * value.numer, value.denom
            case _:
                take, leave = value.numer, value.denom
        self._add(Piece(a, b, a, b), take * one, leave * one)

    def _add(self, piece: Piece, take: PolyElement | None = None, leave: PolyElement | None = None) -> None:
        one = self.naming.ring.one
        self.pieces.append(piece)
        self.take.append(one if take is None else take)
        self.leave.append(one if leave is None else leave)


def terms_of(form: LinearForm, frame: Pieces) -> list[tuple[FracElement, int | None, int | None]]:
    """A linear form as few terms ``weight * (x - y)``: opposite weights are paired, so that fewer terms cancel."""
    waiting: dict[int, FracElement] = {}
    out: list[tuple[FracElement, int | None, int | None]] = []
    for unknown, weight in form.weights.items():
        column = frame.column(unknown)
        if column is None:
            continue
        for other, value in waiting.items():
            if value == -weight.value:
                out.append((value, other, column))
                del waiting[other]
                break
        else:
            waiting[column] = weight.value
    out.extend((value, column, None) for column, value in waiting.items())
    return out


def drive_column(frame: Pieces, drive: Drive) -> tuple[int | None, int | None]:
    """The rows, (+) and (-), in which a drive of value 1 stands on the right-hand side."""
    if isinstance(drive, CurrentDrive):
        return frame.nodes.get(drive.end), frame.nodes.get(drive.start)
    name = frame.network.drive_names[frame.network.drives.index(drive)]
    return frame.currents[name], None
