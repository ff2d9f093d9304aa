"""Sections: a drawing with terminals, drawn once and placed under a name of its own as often as one likes.

``define ... done`` draws a :class:`Section`; ``A1: my_section(in=a, out=b, R=2 kohm)`` places it, which is an
:class:`Instance`. Placing copies the parts into the network at once, so that nothing behind the reader need know
of sections: the terminals become the nodes they are connected to, and every other name inside, of node, part,
law or symbol, gets the name of the instance before it, ``A1.R1``. What a section may know from outside comes in
by its terminals and parameters only. The instance is kept beside the parts for what a person wants to see again:
the text, the parts table, the picture.

A section may hold others, down to any depth; one that holds itself has no end and is refused by the reader.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.circuit.parts import GROUND, Branch, Coupling, CurrentLaw, OpAmp, Part, Value, VoltageLaw
from symnet.errors import Span
from symnet.expressions import (
    Expression,
    Name,
    Number,
    Parallel,
    Power,
    Product,
    Root,
    Sum,
)

if TYPE_CHECKING:
    from symnet.circuit.drawing import Drawing
    from symnet.quantities import Dimension

__all__ = ["Instance", "Section", "kept", "placed_values"]


@dataclass(frozen=True, slots=True)
class Section:
    """What stands between ``define`` and ``done``: terminals, parameters with their defaults, and the drawing.

    ``origin`` is empty for a section of the text at hand; for one that ships with symnet it is its source.
    """

    name: str
    terminals: tuple[str, ...]
    parameters: tuple[tuple[str, Value | None], ...]
    drawing: Drawing
    origin: str = field(default="", compare=False)


@dataclass(frozen=True, slots=True)
class Instance:
    """A section in its place: ``nodes`` are those of its terminals, in order; ``arguments`` the values given.

    A parameter with the argument None is left a symbol, whatever its default.
    """

    name: str
    section: Section
    nodes: tuple[str, ...]
    arguments: tuple[tuple[str, Value | None], ...] = ()
    span: Span | None = field(default=None, compare=False, repr=False)

    @property
    def connections(self) -> tuple[tuple[str, str], ...]:
        """Each terminal with the node it is connected to."""
        return tuple(zip(self.section.terminals, self.nodes, strict=True))

    def parameters(self) -> Iterator[str]:
        """The parameters of the section, and of those that it places, under the names that they have here."""
        for name, _ in self.section.parameters:
            yield f"{self.name}.{name}"
        for inner in self.section.drawing.instances:
            yield from (f"{self.name}.{name}" for name in inner.parameters())

    def parts(self) -> tuple[Part, ...]:
        """The parts of the section under the names that they have here."""
        place = _Place(self)
        return tuple(place.part(part) for part in self.section.drawing.parts)

    def couplings(self) -> tuple[Coupling, ...]:
        """The couplings of its coils under the names that they have here."""
        place = _Place(self)
        return tuple(
            replace(
                each, name=place.name(each.name), first=place.name(each.first), second=place.name(each.second)
            )
            for each in self.section.drawing.couplings
        )

    def values(self) -> tuple[tuple[str, Value], ...]:
        """What the names of the section are worth here: arguments as given, then defaults, then its own values."""
        place, given = _Place(self), dict(self.arguments)
        found: list[tuple[str, Value]] = []
        for name, default in self.section.parameters:
            value = given.get(name)
            if value is not None:
                found.append((place.name(name), value))
            elif default is not None and name not in given:
                found.append((place.name(name), place.value(default)))
        for name, value in self.section.drawing.values:
            found.append((place.name(name), place.value(value)))
        return tuple(found)

    def free(self) -> tuple[tuple[str, Dimension | None], ...]:
        """The symbols declared free inside."""
        place = _Place(self)
        return tuple((place.name(name), dimension) for name, dimension in self.section.drawing.free)


class _Place:
    """How the names of a section are called in one place."""

    def __init__(self, instance: Instance) -> None:
        self._prefix = instance.name
        self._nodes: Mapping[str, str] = {GROUND: GROUND, **dict(instance.connections)}
        self._inner = frozenset(instance.section.drawing.nodes)
        self._is_shipped = bool(instance.section.origin)

    def name(self, name: str) -> str:
        return f"{self._prefix}.{name}"

    def node(self, node: str) -> str:
        known = self._nodes.get(node)
        if known is not None:
            return known
        return "+".join(self.name(piece) for piece in node.split("+"))  # R1+L1 is the node between the two

    def part(self, part: Part) -> Part:
        name = self.name(part.name)
        match part:
            case Branch():
                return replace(part, name=name, start=self.node(part.start), end=self.node(part.end))
            case VoltageLaw():
                plus, minus = self.node(part.plus), self.node(part.minus)
                return replace(part, name=name, plus=plus, minus=minus, value=self.expression(part.value))
            case CurrentLaw():
                start, end = self.node(part.start), self.node(part.end)
                return replace(part, name=name, start=start, end=end, value=self.expression(part.value))
            case OpAmp():
                plus, minus, out = (self.node(node) for node in part.nodes)
                return replace(part, name=name, plus=plus, minus=minus, out=out)

    def value(self, value: Value) -> Value:
        return replace(value, expression=self.expression(value.expression))

    def expression(self, expression: Expression) -> Expression:
        """The expression under the names of this place; a voltage of a terminal at gnd is left out.

        Places in a text that ships with symnet would mean nothing in the text at hand.
        """
        if self._is_shipped:
            expression = replace(expression, span=None)
        match expression:
            case Name(name, span):
                return self._electric(name, span)
            case Sum(terms, span):
                renamed = [(sign, self.expression(term)) for sign, term in terms]
                there = tuple((sign, term) for sign, term in renamed if term != _NOTHING)
                if len(there) == 1 and there[0][0] > 0:
                    return there[0][1]
                return Sum(there, span) if there else _NOTHING
            case Product(factors, span):
                renamed = [(power, self.expression(factor)) for power, factor in factors]
                if (1, _NOTHING) in renamed:
                    return _NOTHING
                return Product(tuple(renamed), span)
            case Power(base, exponent, span):
                return Power(self.expression(base), exponent, span)
            case Parallel(branches, span):
                return Parallel(tuple(self.expression(branch) for branch in branches), span)
            case Root(base, span):
                return Root(self.expression(base), span)
            case Number():
                return expression

    def _electric(self, name: str, span: Span | None) -> Expression:
        if name in {"s", GROUND}:
            return Name(name, span)
        kind, _, rest = name.partition("_")
        if name in self._nodes or (kind == "v" and rest in self._nodes):
            node = self._nodes[name if name in self._nodes else rest]
            if node == GROUND:
                return _NOTHING
            return Name(node if node[0].isalpha() and "+" not in node else f"v_{node}", span)
        if kind in {"v", "i"} and rest and name not in self._inner:
            return Name(f"{kind}_{self.name(rest)}", span)
        return Name(self.name(name), span)


_NOTHING = Number(Fraction(0))


def placed_values(instances: Iterable[Instance]) -> dict[str, Value]:
    """The values that the sections in their places give."""
    return {name: value for instance in instances for name, value in instance.values()}


def kept(
    instances: Iterable[Instance], parts: Iterable[Part], values: Mapping[str, Value]
) -> Iterator[Instance]:
    """The instances that still stand in a network with these parts and values, their arguments brought up to date.

    An instance whose parts were taken apart, or an inner value of which was taken away, is no longer one: its
    parts stay under their names.
    """
    there = {part.name: part for part in parts}
    for instance in instances:
        given, before = dict(instance.arguments), dict(instance.values())
        for name, _ in instance.section.parameters:
            here = values.get(f"{instance.name}.{name}")
            if here != before.get(f"{instance.name}.{name}"):
                given[name] = here
        order = [name for name, _ in instance.section.parameters if name in given]
        now = replace(instance, arguments=tuple((name, given[name]) for name in order))
        whole = all(there.get(part.name) == part for part in now.parts())
        if whole and all(name in values for name, _ in now.values()):
            yield now
