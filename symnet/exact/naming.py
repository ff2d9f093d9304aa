"""The ring of a network: which names remain after ties, in which order, and what each is worth.

A name whose value has no names in it stays a symbol and has a number (SI). A name whose value has names in
it is tied: it is replaced everywhere, and only the names it is tied to remain.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from types import MappingProxyType
from typing import TYPE_CHECKING

from symnet.circuit.names import dimensions
from symnet.circuit.network import Network
from symnet.circuit.parts import Branch
from symnet.errors import Fault, NotationError, SingularError
from symnet.exact.linear import fraction_of
from symnet.exact.polynomials import make_ring
from symnet.expressions import Expression, Name, Number, evaluate, names_in
from symnet.quantities import SECOND, Dimension

if TYPE_CHECKING:
    from sympy.polys.fields import FracElement, FracField
    from sympy.polys.rings import PolyRing

__all__ = ["Naming"]


@dataclass(frozen=True, eq=False)
class Naming:
    """What the names of a network mean in its ring.

    ``ring`` has s first, then the names that remain, in order of appearance. ``numbers`` are the values (SI)
    of those that have one.
    """

    ring: PolyRing
    field: FracField
    numbers: Mapping[str, Fraction]
    _network: Network
    _ties: Mapping[str, FracElement]

    @cached_property
    def names(self) -> frozenset[str]:
        """The names in the ring, s included."""
        return frozenset(map(str, self.ring.symbols))

    @cached_property
    def dimensions(self) -> Mapping[str, Dimension | None]:
        """The dimension of s (1/second) and of every name in the ring; None where nothing tells it."""
        found = {**dimensions(self._network), "s": SECOND**-1}
        return MappingProxyType({str(symbol): found.get(str(symbol)) for symbol in self.ring.symbols})

    @classmethod
    def of(cls, network: Network, symbols: frozenset[str] | None = None) -> Naming:
        """The naming of a network; with ``symbols``, only those names stay symbols beside the free ones.

        Raises NotationError for ties in a circle.
        """
        numbers: dict[str, Fraction] = {}
        ties: dict[str, Expression] = {}
        for name, value in network.values:
            if any(True for _ in names_in(value.expression)):
                ties[name] = value.expression
            else:
                numbers[name] = _number(name, value.expression)
        if symbols is not None:
            ties |= {n: Number(v) for n, v in numbers.items() if n not in symbols}
            numbers = {n: v for n, v in numbers.items() if n in symbols}
        order = _order_of_ties(ties)
        remaining: dict[str, None] = {}
        electric = set(network.nodes) | set(network.electric_names())

        def appear(name: str) -> None:
            waiting, seen = [name], set()
            while waiting:
                word = waiting.pop()
                if word in ties:
                    if word not in seen:
                        seen.add(word)
                        waiting.extend(reversed([inner.name for inner in names_in(ties[word])]))
                elif word != "s":
                    remaining[word] = None

        for part in network.parts:
            if isinstance(part, Branch):
                appear(part.name)
            elif hasattr(part, "value"):
                for inner in names_in(part.value):
                    if inner.name not in electric:
                        appear(inner.name)
        for read in network.reads:
            for inner in names_in(read):
                if inner.name not in electric:
                    appear(inner.name)
        ring = make_ring(remaining)
        field = ring.to_field()
        known: dict[str, FracElement] = dict(zip(map(str, ring.symbols), field.gens, strict=True))
        for name in order:
            if all(inner.name in known for inner in names_in(ties[name])):
                known[name] = fraction_of(
                    ties[name], field, lambda inner: known[inner.name], f"the value of {name}"
                )
        return cls(
            ring,
            field,
            MappingProxyType({name: numbers[name] for name in remaining if name in numbers}),
            network,
            MappingProxyType(known),
        )

    def with_numbers(self, network: Network, changed: Iterable[str]) -> Naming:
        """The same names with the numbers that the network now gives to the changed ones.

        Raises NotationError where it gives a tie instead of a number.
        """
        numbers = dict(self.numbers)
        for name in changed:
            value = network.value(name)
            if value is None:
                numbers.pop(name, None)
            elif any(True for _ in names_in(value.expression)):
                raise NotationError(
                    Fault(
                        f"{name} is to be tied to other names, which makes another H",
                        "derive the network that has the tie: derive(net.with_values(...))",
                        parts=(name,),
                    )
                )
            else:
                numbers[name] = _number(name, value.expression)
        return replace(self, numbers=MappingProxyType(numbers), _network=network)

    def value(self, name: str) -> FracElement:
        """What a name stands for, as a fraction of ring elements."""
        return self._ties[name]

    def fraction(self, name: Name) -> FracElement:
        """The same for a name in an expression; NotationError when it stands for nothing."""
        try:
            return self._ties[name.name]
        except KeyError:
            raise NotationError(
                Fault(f"{name.name} is no part or symbol of this network", span=name.span)
            ) from None


def _number(name: str, expression: Expression) -> Fraction:
    try:
        value = evaluate(expression, lambda _: None, lambda number: number.value)
    except ZeroDivisionError:
        raise SingularError(Fault(f"the value of {name} divides by zero", span=expression.span)) from None
    return Fraction(value)


def _order_of_ties(ties: Mapping[str, Expression]) -> list[str]:
    """The tied names, each after those it hangs on; NotationError for a circle."""
    order: dict[str, None] = {}
    path: dict[str, None] = {}
    waiting = [(name, False) for name in reversed(list(ties))]
    while waiting:
        name, done = waiting.pop()
        if done:
            del path[name]
            order[name] = None
            continue
        if name in order or name not in ties:
            continue
        if name in path:
            names = list(path)
            circle = " -> ".join([*names[names.index(name) :], name])
            raise NotationError(Fault(f"values are tied in a circle: {circle}", "give one of them a number"))
        path[name] = None
        waiting.append((name, True))
        waiting.extend((inner.name, False) for inner in names_in(ties[name]))
    return list(order)
