"""The equations a person sets up: currents in = currents out at each node, laws beside them.

A node that a source or an output holds has no equation of its own, since nobody asks for the current of the source
(where somebody does, it has). Nodes with a source between them share one equation, the sum of theirs.

A term knows how it is written and, as a linear form of voltages, what it is worth; the same terms are written
and computed with, so that the two cannot differ.
"""

from __future__ import annotations

from collections import deque
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING

from symnet.circuit.parts import (
    GROUND,
    Branch,
    CurrentDrive,
    CurrentLaw,
    OpAmp,
    VoltageDrive,
    VoltageLaw,
    class_letter,
)
from symnet.circuit.series import Group, Leaf
from symnet.exact.byhand.forms import Form, add, times
from symnet.exact.byhand.frame import Frame
from symnet.exact.byhand.writing import difference
from symnet.expressions import Expression, Name, substitute

if TYPE_CHECKING:
    from sympy.polys.fields import FracElement

__all__ = ["Equation", "Link", "Term", "node_equations"]


@dataclass(frozen=True, slots=True)
class Link:
    """The branch whose current a term is: ``admittance*(plus - minus)``, voltages by name; its name if it is one R."""

    plus: str
    minus: str
    admittance: FracElement
    resistor: str = ""


@dataclass(frozen=True, slots=True)
class Term:
    """A current (or, in a law, a voltage) with its sign: as written, and as a linear form.

    ``reverse`` is the same current written the other way round, as it stands with the opposite sign.
    """

    sign: int
    written: Expression
    form: Mapping[str, FracElement]
    link: Link | None = None
    reverse: Expression | None = None

    def signed(self, sign: int = 1) -> tuple[int, Expression]:
        """The term with its sign times another; a difference of voltages is turned round rather than negated."""
        sign *= self.sign
        if sign < 0 and self.reverse is not None:
            return 1, self.reverse
        return sign, self.written


@dataclass(frozen=True, slots=True)
class Equation:
    """``sum of left = sum of right``: at a node, or a law."""

    label: str
    left: tuple[Term, ...]
    right: tuple[Term, ...]
    is_law: bool = False

    def form(self) -> Form:
        """The right side minus the left side as one linear form: zero under the solution."""
        total: Form = {}
        for sign, side in ((1, self.right), (-1, self.left)):
            for term in side:
                total = add(total, {name: sign * term.sign * weight for name, weight in term.form.items()})
        return total


def node_equations(frame: Frame) -> tuple[Equation, ...]:
    """Every equation there is, laws first; as many as there are voltages to be found."""
    return tuple(_Equations(frame).all())


class _Equations:
    def __init__(self, frame: Frame) -> None:
        self.frame, self.network, self.drive = frame, frame.network, frame.drive

    def all(self) -> Iterator[Equation]:
        yield from self._laws()
        yield from self._coils()
        near = self._distances()
        for nodes in self._surfaces():
            yield self._kirchhoff(nodes, near)

    def _laws(self) -> Iterator[Equation]:
        if isinstance(self.drive, VoltageDrive) and self.drive.minus != GROUND:
            left = self._difference_term(*self.drive.nodes)
            right = Term(1, Name(self.frame.source), {self.frame.source: self.frame.field.one})
            yield Equation("drive", (left,), (right,), is_law=True)
        for part in self.network.parts:
            if isinstance(part, VoltageLaw):
                equation = Equation(
                    part.name,
                    (self._difference_term(part.plus, part.minus),),
                    (self._written_term(part.value),),
                    is_law=True,
                )
                if equation.form():
                    yield equation

    def _coils(self) -> Iterator[Equation]:
        """The voltage along each branch with a coupled coil, by its own current and those of its partners."""
        for start, group, end in self.frame.groups:
            coil = self.frame.coil_in(group)
            if coil is not None:
                right = Term(1, *self.frame.drop(group))
                yield Equation(coil, (self._difference_term(start, end),), (right,), is_law=True)

    def _difference_term(self, plus: str, minus: str) -> Term:
        x, y = self.frame.voltage(plus), self.frame.voltage(minus)
        return Term(1, difference(self.frame.name(x), self.frame.name(y)), self.frame.across(plus, minus))

    def _written_term(self, value: Expression) -> Term:
        return Term(1, substitute(value, self.frame.renamed), self.frame.linear(value))

    def _surfaces(self) -> Iterator[list[str]]:
        """The nodes with an equation of their own, and groups of nodes with sources between them."""
        root = {node: node for node in (*self.frame.nodes, GROUND)}

        def find(node: str) -> str:
            while root[node] != node:
                node = root[node]
            return node

        def tie(one: str, other: str) -> None:
            root[find(one)] = find(other)

        for name, drive in zip(self.network.drive_names, self.network.drives, strict=True):
            if isinstance(drive, VoltageDrive) and not self.frame.is_asked(name):
                tie(*drive.nodes)
        for part in self.network.parts:
            if isinstance(part, OpAmp) and not self.frame.is_asked(part.name):
                tie(part.out, GROUND)
            elif isinstance(part, VoltageLaw) and not self.frame.is_asked(part.name):
                tie(part.plus, part.minus)
        together: dict[str, list[str]] = {}
        for node in self.frame.nodes:
            if find(node) != find(GROUND):
                together.setdefault(find(node), []).append(node)
        yield from together.values()

    def _distances(self) -> dict[str, int]:
        """How many branches lie between the drive and each node: what enters a node comes from nearer."""
        start = self.drive.plus if isinstance(self.drive, VoltageDrive) else self.drive.end
        if start == GROUND:
            start = next(node for node in self.drive.nodes if node != GROUND)
        found = {start: 0}
        outputs = [
            node
            for part in self.network.parts
            for node in ((part.out,) if isinstance(part, OpAmp) else part.nodes)
            if not isinstance(part, Branch)
        ]
        # first what the drive reaches through branches, then from the outputs of sources on
        for begin in (start, *outputs):
            found.setdefault(begin, 1 + max(found.values()))
            waiting = deque([begin])
            while waiting:
                here = waiting.popleft()
                for a, _, b in self.frame.groups:
                    other = b if a == here else a
                    if here in (a, b) and other != GROUND and other not in found:
                        found[other] = found[here] + 1
                        waiting.append(other)
        return found

    def _kirchhoff(self, nodes: list[str], near: Mapping[str, int]) -> Equation:
        """Currents that come from nearer the drive = the currents that go on."""
        left: list[Term] = []
        right: list[Term] = []
        inside = set(nodes)
        far = len(near) + 1
        for start, group, end in self.frame.groups:
            if (start in inside) == (end in inside):
                continue
            if (coil := self.frame.coil_in(group)) is not None:
                (right if start in inside else left).append(self._symbol(f"i_{coil}"))
                continue
            here, there = (start, end) if start in inside else (end, start)
            x, y = self.frame.voltage(here), self.frame.voltage(there)
            # at a virtual ground a resistor is no part of a divider
            resistor = self._resistor(group) if y != GROUND or there == GROUND else ""
            if x == y:
                continue
            if there != GROUND and near.get(there, far) < near.get(here, far):
                left.append(self._flow(group, y, x, resistor))
            else:
                right.append(self._flow(group, x, y, resistor))
        for start, end, term in self._sources():
            if (start in inside) != (end in inside):
                if end in inside:
                    left.append(term)
                else:
                    right.append(term)
        if not left:
            left, right = right, left
        label = " and ".join(nodes)
        return Equation(f"node {label}" if len(nodes) == 1 else f"nodes {label}", tuple(left), tuple(right))

    def _sources(self) -> Iterator[tuple[str, str, Term]]:
        """Every current that is no branch's: from, to, the term."""
        for name, drive in zip(self.network.drive_names, self.network.drives, strict=True):
            if isinstance(drive, CurrentDrive):
                if drive is self.drive:
                    yield drive.start, drive.end, self._symbol(f"i_{name}")
            elif self.frame.is_asked(name):
                yield drive.plus, drive.minus, self._symbol(f"i_{name}")
        for part in self.network.parts:
            match part:
                case CurrentLaw():
                    yield part.start, part.end, self._written_term(part.value)
                case VoltageLaw() if self.frame.is_asked(part.name):
                    yield part.plus, part.minus, self._symbol(f"i_{part.name}")
                case OpAmp() if self.frame.is_asked(part.name):
                    yield GROUND, part.out, self._symbol(f"i_{part.name}")
                case _:
                    pass

    def _symbol(self, name: str) -> Term:
        return Term(1, Name(name), {name: self.frame.field.one})

    @staticmethod
    def _resistor(group: Group) -> str:
        return group.name if isinstance(group, Leaf) and class_letter(group.name) == "R" else ""

    def _flow(self, group: Group, plus: str, minus: str, resistor: str) -> Term:
        """The current of a branch from one voltage to another."""
        admittance = 1 / self.frame.impedance(group)
        one = self.frame.field.one
        form = add({} if plus == GROUND else {plus: one}, {} if minus == GROUND else {minus: -one})
        sign = -1 if plus == GROUND else 1
        across = difference(self.frame.name(plus), self.frame.name(minus))
        back = None
        if sign < 0:
            across = self.frame.name(minus)
        elif minus != GROUND:
            back = self.frame.through(group, difference(self.frame.name(minus), self.frame.name(plus)))
        return Term(
            sign,
            self.frame.through(group, across),
            times(sign * admittance, form),
            Link(*((plus, minus) if sign > 0 else (minus, plus)), admittance, resistor),
            back,
        )
