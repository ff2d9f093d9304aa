"""A network as rank-one pieces with exact weights: what the determinants are made of.

Rows are Kirchhoff's current law at each node and the law of each part with a current of its own; columns are
the node voltages and those currents. Every part gives pieces ``take/leave * u * v^T``:

========================  ===================================================================
resistor, inductor        admittance 1/R, 1/(sL): take 1, leave R or sL
capacitor                 admittance sC: take sC, leave 1
impedance p/q             take q, leave p
admittance p/q            take p, leave q
coupling of two coils     take -sM, in the row of either the current of the other
branch whose current      its current into the two rows; its row v = (p/q) i or i = (p/q) v
a law, a coupling or the
read names
voltage source or law     its current into the two rows, its voltage in its own row
op amp                    its output current into one row, the row v_plus - v_minus = 0
current law p/q           take p, leave q; with a row of its own when it has several fractions
========================  ===================================================================

A resistance of zero so becomes a short and an infinite one an open branch, without any division. Every
denominator is multiplied in once, so that the determinant has no natural frequency which the network has not.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import partial

from symnet.circuit.network import Network
from symnet.circuit.parts import (
    GROUND,
    Branch,
    Coupling,
    CurrentDrive,
    CurrentLaw,
    Drive,
    OpAmp,
    VoltageDrive,
    VoltageLaw,
)
from symnet.errors import Fault, NotationError
from symnet.exact.linear import Bounded, LinearForm, linear_form
from symnet.exact.naming import Naming, Words
from symnet.exact.polynomials import ONE, Terms, negated, times_s
from symnet.exact.trees import Piece
from symnet.expressions import Expression, Name, names_in

__all__ = ["Pieces", "named_currents"]


@dataclass(frozen=True)
class Pieces:
    """The pieces of a network without a chosen drive, with their weights in the names of its ring.

    ``nodes`` and ``currents`` give the column (and row) of each node voltage and each current of its own, ``owners``
    the part or drive that each piece belongs to.
    """

    network: Network
    naming: Naming
    size: int
    pieces: tuple[Piece, ...]
    take: tuple[Terms, ...]
    leave: tuple[Terms, ...]
    nodes: Mapping[str, int]
    currents: Mapping[str, int]
    owners: tuple[str, ...]

    @classmethod
    def of(
        cls,
        network: Network,
        symbols: frozenset[str] | None = None,
        currents: frozenset[str] = frozenset(),
    ) -> Pieces:
        """The pieces of a network.

        ``symbols`` are the names that stay symbols although they have a number; ``currents`` the parts whose
        current a read will ask for. Raises NotationError where a law is not linear.
        """
        return _Stamping(network, symbols, currents).result()

    def form(
        self, expression: Expression, what: str
    ) -> tuple[Terms, list[tuple[Terms, int | None, int | None]]]:
        """An expression of voltages and currents as ``(q, terms)``: the sum of ``weight * (x - y)`` over terms,
        divided by q.

        Opposite weights are paired, so that nothing cancels that a difference of voltages need not spell out.
        """
        words = self.naming.words(expression)
        form = linear_form(expression, words.field, partial(self._form_of, words), what)
        common = words.field.ring.one
        for bounded in form.weights.values():
            common = common.lcm(bounded.value.denom)
        waiting: dict[int, Terms] = {}
        out: list[tuple[Terms, int | None, int | None]] = []
        for (kind, name), bounded in form.weights.items():
            column = self.currents[name] if kind == "i" else self.nodes[name]
            weight = words.terms(bounded.value.numer * common.exquo(bounded.value.denom))
            opposite = next((other for other, value in waiting.items() if value == negated(weight)), None)
            if opposite is None:
                waiting[column] = weight
            else:
                out.append((waiting.pop(opposite), opposite, column))
        out.extend((weight, column, None) for column, weight in waiting.items())
        return words.terms(common), out

    def _form_of(self, words: Words, name: Name) -> LinearForm:
        word = name.name
        if word in self.nodes or word == GROUND:
            return _unknown(words, ("v", word))
        kind, _, rest = word.partition("_")
        if kind in ("v", "i") and rest and word not in self.naming.names:
            return self._v(words, rest, name) if kind == "v" else self._i(words, rest, name)
        return LinearForm(Bounded(words.fraction(name)), {})

    def _v(self, words: Words, rest: str, name: Name) -> LinearForm:
        if rest in self.nodes or rest == GROUND:
            return _unknown(words, ("v", rest))
        plus, minus = self._terminals(rest, name)
        return _unknown(words, ("v", plus)) + -_unknown(words, ("v", minus))

    def _i(self, words: Words, rest: str, name: Name) -> LinearForm:
        if rest in self.currents:
            return _unknown(words, ("i", rest))
        raise _stands_for_nothing(name)

    def _terminals(self, rest: str, name: Name) -> tuple[str, str]:
        for known, drive in zip(self.network.drive_names, self.network.drives, strict=True):
            if known == rest:
                return drive.nodes
        part = next((part for part in self.network.parts if part.name == rest), None)
        if part is None or isinstance(part, OpAmp):
            raise _stands_for_nothing(name)
        return part.nodes

    def drive_rows(self, drive: Drive) -> tuple[int | None, int | None]:
        """The rows, (+) and (-), in which a drive of value 1 stands on the right-hand side."""
        if isinstance(drive, CurrentDrive):
            return self.nodes.get(drive.end), self.nodes.get(drive.start)
        return self.currents[self.network.drive_names[self.network.drives.index(drive)]], None


def named_currents(network: Network, *expressions: Expression) -> frozenset[str]:
    """The parts whose current these expressions and the laws of the network name as ``i_...``."""
    parts = set(network.part_names)
    laws = (part.value for part in network.parts if isinstance(part, VoltageLaw | CurrentLaw))
    return frozenset(
        name.name[2:]
        for expression in (*laws, *expressions)
        for name in names_in(expression)
        if name.name.startswith("i_") and name.name[2:] in parts
    )


def _unknown(words: Words, unknown: tuple[str, str]) -> LinearForm:
    """One voltage or current; gnd is no unknown."""
    weights = {} if unknown == ("v", GROUND) else {unknown: Bounded(words.field.one)}
    return LinearForm(Bounded(words.field.zero), weights)


def _stands_for_nothing(name: Name) -> NotationError:
    return NotationError(
        Fault(
            f"{name.name} stands for no voltage or current of this network",
            "a node's name is its voltage; i_R1 is the current through R1, v_R1 the voltage across it",
            span=name.span,
        )
    )


class _Stamping:
    """Collects the pieces of a network, part by part."""

    def __init__(self, network: Network, symbols: frozenset[str] | None, currents: frozenset[str]) -> None:
        self.network = network
        self.naming = Naming.of(network, symbols)
        self.nodes = {node: k for k, node in enumerate(network.nodes)}
        coupled = {coil for each in network.couplings for coil in (each.first, each.second)}
        named = named_currents(network) | currents | coupled
        carriers = [
            name
            for name, drive in zip(network.drive_names, network.drives, strict=True)
            if isinstance(drive, VoltageDrive)
        ]
        carriers += [
            part.name for part in network.parts if isinstance(part, VoltageLaw | OpAmp) or part.name in named
        ]
        self.currents = {name: len(self.nodes) + k for k, name in enumerate(carriers)}
        self.size = len(self.nodes) + len(self.currents)
        self.frame = Pieces(network, self.naming, self.size, (), (), (), self.nodes, self.currents, ())
        self.pieces: list[Piece] = []
        self.take: list[Terms] = []
        self.leave: list[Terms] = []
        self.owners: list[str] = []

    def result(self) -> Pieces:
        for name, drive in zip(self.network.drive_names, self.network.drives, strict=True):
            if isinstance(drive, VoltageDrive):
                self._current(name, drive.plus, drive.minus)
                self._row(name, *self._columns(drive.plus, drive.minus))
            self._owned_by(name)
        for part in self.network.parts:
            match part:
                case Branch() if part.name in self.currents:
                    self._branch_with_current(part)
                case Branch():
                    self._branch(part)
                case VoltageLaw():
                    self._current(part.name, part.plus, part.minus)
                    self._law(part, *self._columns(part.plus, part.minus))
                case CurrentLaw():
                    self._current_law(part)
                case OpAmp():
                    at = self.currents[part.name]
                    self._add(Piece(None, self.nodes.get(part.out), at, None))
                    self._row(part.name, *self._columns(part.plus, part.minus))
            self._owned_by(part.name)
        for coupling in self.network.couplings:
            self._coupling(coupling)
            self._owned_by(coupling.name)
        return replace(
            self.frame,
            pieces=tuple(self.pieces),
            take=tuple(self.take),
            leave=tuple(self.leave),
            owners=tuple(self.owners),
        )

    def _owned_by(self, name: str) -> None:
        """The pieces added last belong to this part."""
        self.owners += [name] * (len(self.pieces) - len(self.owners))

    def _columns(self, plus: str, minus: str) -> tuple[int | None, int | None]:
        return self.nodes.get(plus), self.nodes.get(minus)

    def _current(self, name: str, start: str, end: str) -> None:
        """The current of its own of a part, leaving ``start`` and entering ``end``."""
        self._add(Piece(*self._columns(start, end), self.currents[name], None))

    def _row(self, name: str, plus: int | None, minus: int | None, take: Terms = ONE) -> None:
        """A term ``take * (x_plus - x_minus)`` in the row of a part with a current of its own."""
        self._add(Piece(self.currents[name], None, plus, minus), take)

    def _law(self, part: VoltageLaw | CurrentLaw, plus: int | None, minus: int | None) -> None:
        """The row ``q * (x_plus - x_minus) - q * value = 0``, with q the common denominator of the value."""
        common, terms = self.frame.form(part.value, f"the law {part.name}")
        self._row(part.name, plus, minus, common)
        for weight, a, b in terms:
            self._row(part.name, a, b, negated(weight))

    def _current_law(self, part: CurrentLaw) -> None:
        start, end = self._columns(part.start, part.end)
        if part.name in self.currents:
            self._current(part.name, part.start, part.end)
            self._law(part, self.currents[part.name], None)
            return
        common, terms = self.frame.form(part.value, f"the law {part.name}")
        if len(terms) == 1 or common == ONE:
            for weight, a, b in terms:
                self._add(Piece(start, end, a, b), weight, common)
            return
        at = self.size
        self.size += 1
        self.frame = replace(self.frame, size=self.size)
        self._add(Piece(start, end, at, None))
        self._add(Piece(at, None, at, None), common)
        for weight, a, b in terms:
            self._add(Piece(at, None, a, b), negated(weight))

    def _branch(self, part: Branch) -> None:
        impedance, admittance = self._value(part)
        a, b = self._columns(part.start, part.end)
        take, leave = admittance if admittance is not None else impedance[::-1]
        self._add(Piece(a, b, a, b), take, leave)

    def _branch_with_current(self, part: Branch) -> None:
        impedance, admittance = self._value(part)
        self._current(part.name, part.start, part.end)
        at, voltage = self.currents[part.name], self._columns(part.start, part.end)
        if admittance is None:
            numerator, denominator = impedance
            self._row(part.name, *voltage)
            self._add(Piece(at, None, at, None), negated(numerator), denominator)
        else:
            numerator, denominator = admittance
            self._row(part.name, at, None)
            self._add(Piece(at, None, *voltage), negated(numerator), denominator)

    def _coupling(self, coupling: Coupling) -> None:
        """The voltage s M i of each coil from the current of the other."""
        p, q = self.naming.terms(coupling.mutual)
        one, two = self.currents[coupling.first], self.currents[coupling.second]
        self._add(Piece(one, None, two, None), negated(times_s(p)), q)
        self._add(Piece(two, None, one, None), negated(times_s(p)), q)

    def _value(self, part: Branch) -> tuple[tuple[Terms, Terms], tuple[Terms, Terms] | None]:
        """Numerator and denominator of the impedance, and of the admittance for C and Y."""
        p, q = self.naming.terms(part.name)
        match part.kind:
            case "C":
                return (q, times_s(p)), (times_s(p), q)
            case "Y":
                return (q, p), (p, q)
            case "L":
                return (times_s(p), q), None
            case _:
                return (p, q), None

    def _add(self, piece: Piece, take: Terms = ONE, leave: Terms = ONE) -> None:
        self.pieces.append(piece)
        self.take.append(take)
        self.leave.append(leave)
