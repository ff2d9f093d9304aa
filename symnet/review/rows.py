"""Equations as rows: what a line, or the network itself, says about the unknowns at a random point modulo a prime.

With every name a random number, an equation between unknowns is a row of coefficients; a nonlinear one is taken by
its derivative at the solution. Whether a line follows from others is then a question of rank. Modulo 2^127 - 1 a
wrong answer has a probability of about degree/2^127; whether a line is *true* is never decided here.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

from symnet.circuit.parts import GROUND, Branch, CurrentLaw, OpAmp, VoltageLaw
from symnet.exact.modular import PRIME
from symnet.expressions import names_in

if TYPE_CHECKING:
    from symnet.circuit.network import Network
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.algebra import Value
    from symnet.review.scope import Scope

__all__ = ["NetworkRow", "Row", "Rows", "Span", "ends_of"]

Row = tuple[int, ...]


class Span:
    """The rows that follow from those put in: an echelon form modulo the prime."""

    def __init__(self, rows: Iterable[Row] = ()) -> None:
        self._pivots: dict[int, list[int]] = {}
        for row in rows:
            self.add(row)

    def __len__(self) -> int:
        return len(self._pivots)

    def copy(self) -> Span:
        """One that can grow by itself."""
        other = Span()
        other._pivots = dict(self._pivots)
        return other

    def _reduced(self, row: Row) -> list[int]:
        left = [x % PRIME for x in row]
        for column, pivot in self._pivots.items():
            factor = left[column]
            if factor:
                left = [(a - factor * b) % PRIME for a, b in zip(left, pivot, strict=True)]
        return left

    def __contains__(self, row: Row) -> bool:
        return not any(self._reduced(row))

    def add(self, row: Row) -> bool:
        """Put a row in; whether it said anything new."""
        left = self._reduced(row)
        column = next((k for k, x in enumerate(left) if x), None)
        if column is None:
            return False
        inverse = pow(left[column], -1, PRIME)
        left = [x * inverse % PRIME for x in left]
        for known, pivot in self._pivots.items():
            factor = pivot[column]
            if factor:
                self._pivots[known] = [(a - factor * b) % PRIME for a, b in zip(pivot, left, strict=True)]
        self._pivots[column] = left
        return True

    def completed(self, free: Sequence[int]) -> list[int]:
        """The values with which every row in here is zero, from those of the columns that no row determines."""
        found = [x % PRIME for x in free]
        for column, pivot in self._pivots.items():
            others = (
                a * x for k, (a, x) in enumerate(zip(pivot, free, strict=True)) if k not in self._pivots
            )
            found[column] = -sum(others) % PRIME
        return found


@dataclass(frozen=True, slots=True)
class NetworkRow:
    """An equation of the network: the current law at a node, or the law of a part.

    ``value`` is what is zero, in the unknowns; ``names`` the parts, symbols and nodes that occur in it. ``free``
    marks a current law that only tells the current of a drive, an op amp or a voltage law.
    """

    kind: str  # "node" or "law"
    name: str
    value: Value
    names: frozenset[str]
    free: bool = False


def ends_of(network: Network) -> Iterator[tuple[str, str, str]]:
    """Every part and drive that carries a current, with the node where its current leaves and the one it goes to."""
    for name, drive in zip(network.drive_names, network.drives, strict=True):
        # A voltage drive takes its current in at plus; a current drive has it leave the network at its start.
        yield (name, *drive.nodes)
    for part in network.parts:
        match part:
            case Branch(name=name) | CurrentLaw(name=name):
                yield name, part.start, part.end
            case VoltageLaw(name=name):
                yield name, part.plus, part.minus
            case OpAmp(name=name):
                yield name, GROUND, part.out


class Rows:
    """The equations of one network as rows, at one random point."""

    def __init__(self, scope: Scope, trial: int = 0) -> None:
        self.scope = scope
        self.point: Mapping[str, int] = scope.solution.point(trial)

    @cached_property
    def equations(self) -> tuple[NetworkRow, ...]:
        """The current law at every node and the law of every op amp, voltage law and coupled coil."""
        network, scope = self.scope.network, self.scope
        carriers: set[str] = set()
        for drive in network.drives:
            carriers |= set(drive.nodes)
        for part in network.parts:
            if isinstance(part, VoltageLaw):
                carriers |= {part.plus, part.minus}
            elif isinstance(part, OpAmp):
                carriers.add(part.out)
        found = [
            NetworkRow("node", node, *self._leaving(node), free=node in carriers) for node in network.nodes
        ]
        for part in network.parts:
            if isinstance(part, OpAmp):
                value = scope.between(part.plus, part.minus)
                found.append(NetworkRow("law", part.name, value, frozenset({part.plus, part.minus})))
            elif isinstance(part, VoltageLaw):
                value = scope.between(part.plus, part.minus) - scope.in_network(part.value)
                names = {part.plus, part.minus, *(name.name for name in names_in(part.value))}
                found.append(NetworkRow("law", part.name, value, frozenset(names)))
        coils = dict.fromkeys(coil for each in network.couplings for coil in (each.first, each.second))
        return (*found, *(self._along(coil) for coil in coils))

    def _along(self, coil: str) -> NetworkRow:
        """The law of a coupled coil: its voltage by its own current and those of its partners."""
        scope, part = self.scope, self.scope.network[coil]
        s = scope.solution.algebra.generator("s")
        value = scope.between(*part.nodes[:2]) - s * scope.solution.worth(coil) * scope.current(coil)
        names = {coil, *part.nodes}
        for each in scope.network.couplings:
            if coil in {each.first, each.second}:
                other = each.second if coil == each.first else each.first
                value = value - s * scope.solution.worth(each.mutual) * scope.current(other)
                names |= {other, each.mutual}
        return NetworkRow("law", coil, value, frozenset(names))

    def _leaving(self, node: str) -> tuple[Value, frozenset[str]]:
        """The sum of the currents that leave a node, and the names in it."""
        scope = self.scope
        total, names = scope.number(0), {node}
        for name, start, end in ends_of(scope.network):
            if node in {start, end} and start != end:
                current = scope.current(name)
                total = total + current if node == start else total - current
                names |= {name, start, end}
        return total, frozenset(names)

    def row(self, polynomial: Polynomial) -> Row:
        """The derivative of a polynomial after every unknown, at the solution."""
        solution = self.scope.solution
        out = [0] * len(solution.unknowns)
        values = [self.point[f"{kind}:{name}"] for kind, name in solution.unknowns]
        for exponents, coefficient in solution.by_unknowns(polynomial).items():
            if not any(exponents):
                continue
            known = solution.algebra.modulo(coefficient, self.point, PRIME)
            for k, exponent in enumerate(exponents):
                if exponent:
                    term = known * exponent
                    for j, e in enumerate(exponents):
                        power = e - 1 if j == k else e
                        if power:
                            term = term * pow(values[j], power, PRIME) % PRIME
                    out[k] = (out[k] + term) % PRIME
        return tuple(out)

    @cached_property
    def network(self) -> tuple[Row, ...]:
        """The rows of ``equations``."""
        return tuple(self.row(equation.value.numerator) for equation in self.equations)

    @cached_property
    def laws(self) -> tuple[Row, ...]:
        """The rows of the laws alone, which every derivation may use without writing them down."""
        return tuple(
            row for row, equation in zip(self.network, self.equations, strict=True) if equation.kind == "law"
        )
