"""What follows from what: jumps, lines that follow from a wrong one, and the network as a wrong line has it.

A wrong line stands for one of the network's own equations: it is put in the place of that equation, and what the
altered network gives is what a person gets who goes on from the wrong line without another slip. Which equation
that is, the label of a node line says; for other lines it is the one that shares most names with the line, and where
a later line does not follow then, the others are tried in that order.

Everything here is a question of rank at a random point modulo a prime (:mod:`symnet.review.rows`).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import product
from typing import TYPE_CHECKING, Final

from symnet.expressions import names_in
from symnet.review.altered import Altered
from symnet.review.rows import Row, Rows, Span
from symnet.review.working import Equation, Line, expressions_of

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.algebra import Value

__all__ = ["Follower", "Wrong"]

_MOST_TRIED: Final = 64  # choices of replaced equations for one line


@dataclass(frozen=True, slots=True)
class Wrong:
    """A wrong line taken as true: its polynomial, its row, and the equations it may stand for, the likeliest first.

    ``places`` are numbers in :attr:`symnet.review.rows.Rows.equations`.
    """

    line: Line
    polynomial: Polynomial
    row: Row
    places: tuple[int, ...]


@dataclass(eq=False)
class Follower:
    """Keeps account of the lines of one network: what was said, and which of it was wrong."""

    rows: Rows
    wrong: list[Wrong] = field(default_factory=list)
    _said: Span | None = None
    _lines: int = 0

    @property
    def said(self) -> Span:
        """What the laws of the parts and the lines so far say together."""
        if self._said is None:
            self._said = Span(self.rows.laws)
        return self._said

    def row(self, difference: Value) -> Row | None:
        """What a line says of the unknowns; None where roots occur in it or nothing is said of them."""
        if self.rows.scope.solution.algebra.has_roots(difference.numerator):
            return None
        row = self.rows.row(difference.numerator)
        return row if any(row) else None

    def true(self, differences: Sequence[Value]) -> bool:
        """Take in a true line; whether it is a jump: neither an equation of the network nor a consequence of the lines."""
        jump = False
        for difference in differences:
            row = self.row(difference)
            if row is None:
                continue
            if row not in self.said and self._lines and not self._is_own(row):
                jump = True
            self.said.add(row)
        self._lines += 1
        return jump

    def _is_own(self, row: Row) -> bool:
        """Whether a row is one equation of the network, laws put in."""
        for equation, own in zip(self.rows.equations, self.rows.network, strict=True):
            if equation.kind == "node":
                span = Span(self.rows.laws)
                span.add(own)
                if row in span:
                    return True
        return row in Span(self.rows.laws)

    def is_of_node(self, node: str, differences: Sequence[Value]) -> bool:
        """Whether a true line is the current law at that node, laws of parts put in."""
        span = Span(self.rows.laws)
        for equation, row in zip(self.rows.equations, self.rows.network, strict=True):
            if equation.kind == "node" and equation.name == node:
                span.add(row)
        return all(row is None or row in span for row in map(self.row, differences))

    def false(self, line: Line, differences: Sequence[Value]) -> tuple[Line, ...]:
        """Take in a wrong line: the wrong lines it follows from; empty when it is wrong on its own."""
        rows = [(d, row) for d in differences if (row := self.row(d)) is not None]
        self._lines += 1
        for _, row in rows:
            self.said.add(row)
        own = [(d, row) for d, row in rows if row not in Span(self.rows.network)]
        if not own:
            return ()
        targets = [row for _, row in own]
        for wrong in self.wrong:
            if self.altered([wrong], targets) is not None:
                return (wrong.line,)
        if len(self.wrong) > 1 and self.altered(self.wrong, targets) is not None:
            return tuple(dict.fromkeys(wrong.line for wrong in self.wrong))
        for difference, row in own:
            self.wrong.append(Wrong(line, difference.numerator, row, self._places(line, row)))
        return ()

    def altered(self, wrong: Sequence[Wrong], targets: Sequence[Row]) -> tuple[int, ...] | None:
        """The equations that the wrong lines stand for when all targets follow from them; None when they do not."""
        for count, places in enumerate(product(*(w.places for w in wrong))):
            if count == _MOST_TRIED:
                break
            if len(set(places)) < len(places):
                continue
            span = self.with_wrong(wrong, places)
            if span is not None and all(target in span for target in targets):
                return places
        return None

    def solution(self, wrong: Sequence[Wrong], places: Sequence[int]) -> Altered:
        """The exact solution of the network with wrong lines in the places of some of its equations.

        Raises what :class:`~symnet.review.altered.Altered` raises.
        """
        kept = [e.value.numerator for k, e in enumerate(self.rows.equations) if k not in places]
        return Altered(self.rows.scope.solution, [*kept, *(w.polynomial for w in wrong)])

    def with_wrong(self, wrong: Sequence[Wrong], places: Sequence[int]) -> Span | None:
        """The equations of the network with wrong lines in the places of some; None when they are not independent."""
        span = Span(row for k, row in enumerate(self.rows.network) if k not in places)
        for w in wrong:
            if not span.add(w.row):
                return None
        return span

    def _places(self, line: Line, row: Row) -> tuple[int, ...]:
        equations = self.rows.equations
        statement = line.statement
        if isinstance(statement, Equation) and statement.node is not None:
            return tuple(k for k, e in enumerate(equations) if e.kind == "node" and e.name == statement.node)
        spoken = {name.name for side in expressions_of(statement) for name in names_in(side)}
        definitions = self.rows.scope.definitions
        for name in tuple(spoken):
            if name in definitions:
                spoken |= {inner.name for inner in names_in(definitions[name])}
        spoken = {name[2:] if name[:2] in {"i_", "v_"} else name for name in spoken} - {"s"}
        others = [
            k
            for k in range(len(equations))
            if row not in Span(own for j, own in enumerate(self.rows.network) if j != k)
        ]

        def likeness(k: int) -> tuple[bool, float]:
            names = equations[k].names
            return equations[k].free, -len(names & spoken) / len(names | spoken)

        return tuple(sorted(others, key=likeness))
