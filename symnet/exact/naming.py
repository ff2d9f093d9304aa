"""The ring of a network: which names remain after ties, in which order, and what each is worth.

A name whose value has no names in it stays a symbol and has a number (SI). A name whose value has names in
it is tied: it is replaced everywhere, and only the names it is tied to remain.

What a name is worth is kept as two lists of terms, numerator and denominator. Arithmetic with names, in a tie or
a law, happens in a small field of just the names that occur there: the work grows with what is written down, not
with the length of the network.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from types import MappingProxyType
from typing import TYPE_CHECKING, TypeAlias

from symnet.circuit.names import dimensions
from symnet.circuit.network import Network
from symnet.circuit.parts import Branch
from symnet.errors import Fault, NotationError, SingularError
from symnet.exact.linear import fraction_of
from symnet.exact.mutual import rational_mutuals, root, squared_mutuals
from symnet.exact.polynomials import ONE, Generators, Terms, sparse_terms
from symnet.expressions import Expression, Name, Number, evaluate, names_in
from symnet.quantities import HENRY, SECOND, Dimension

if TYPE_CHECKING:
    from sympy.polys.fields import FracElement, FracField
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["Naming", "Words"]

#: Numerator and denominator, in lowest terms.
_Worth: TypeAlias = tuple[Terms, Terms]


class Words:
    """The field of fractions in s and a few names of a network, and the way from there to the whole ring."""

    def __init__(self, generators: Generators, worth: Mapping[str, _Worth], names: Iterable[str]) -> None:
        places = {
            place
            for name in names
            for terms in worth.get(name, ())
            for _, powers in terms
            for place, _ in powers
        }
        self._worth = worth
        self._places = sorted(places | {0})
        self._generators = Generators(tuple(generators.names[place] for place in self._places))
        self.field: FracField = self._generators.field

    def fraction(self, name: Name) -> FracElement:
        """What a name stands for; NotationError when it stands for nothing."""
        try:
            sides = self._worth[name.name]
        except KeyError:
            raise NotationError(
                Fault(f"{name.name} is no part or symbol of this network", span=name.span)
            ) from None
        where = {place: k for k, place in enumerate(self._places)}
        numer, denom = (
            self._generators.element(
                tuple((c, tuple((where[k], e) for k, e in powers)) for c, powers in side)
            )
            for side in sides
        )
        return self.field.raw_new(numer, denom)

    def terms(self, polynomial: PolyElement) -> Terms:
        """An element of the ring below the field, in the places of the whole ring."""
        return tuple(
            (c, tuple((self._places[k], e) for k, e in powers)) for c, powers in sparse_terms(polynomial)
        )


@dataclass(frozen=True, eq=False)
class Naming:
    """What the names of a network mean in its ring.

    ``generators`` are s, then the names that remain, in order of appearance. ``numbers`` are the values (SI) of
    those that have one.
    """

    generators: Generators
    numbers: Mapping[str, Fraction]
    _network: Network
    _worth: Mapping[str, _Worth]

    @property
    def ring(self) -> PolyRing:
        """The integer polynomial ring of the generators."""
        return self.generators.ring

    @cached_property
    def names(self) -> frozenset[str]:
        """The names in the ring, s included."""
        return frozenset(self.generators.names)

    @cached_property
    def dimensions(self) -> Mapping[str, Dimension | None]:
        """The dimension of s (1/second) and of every name in the ring; None where nothing tells it."""
        found = {**dimensions(self._network), "s": SECOND**-1}
        found |= {coupling.mutual: HENRY for coupling in self._network.couplings}
        return MappingProxyType({name: found.get(name) for name in self.generators.names})

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
        ties |= {coupling.mutual: value for coupling, value in rational_mutuals(network)}
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
        for coupling in network.couplings:
            appear(coupling.mutual)
        numbers |= {name: number for name, number in _mutual(network).items() if name not in ties}
        for read in network.reads:
            for inner in names_in(read):
                if inner.name not in electric:
                    appear(inner.name)
        generators = Generators(("s", *remaining))
        known: dict[str, _Worth] = {
            name: (((1, ((place, 1),)),), ONE) for place, name in enumerate(generators.names)
        }
        for name in order:
            if all(inner.name in known for inner in names_in(ties[name])):
                known[name] = _worth(name, ties[name], generators, known)
        return cls(
            generators,
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
        for coupling in network.couplings:
            if coupling.is_coefficient:
                numbers.pop(coupling.mutual, None)
        numbers |= {name: number for name, number in _mutual(network).items() if name in self.names}
        return replace(self, numbers=MappingProxyType(numbers), _network=network)

    @cached_property
    def irrational(self) -> Mapping[str, Fraction]:
        """The square, with the sign of the root, of each mutual inductance that is no fraction."""
        found = {coupling.mutual: square for coupling, square in squared_mutuals(self._network)}
        return {
            name: square
            for name, square in found.items()
            if name in self.names and root(square) ** 2 != abs(square)
        }

    def value(self, name: str) -> FracElement:
        """What a name stands for, as a fraction of ring elements."""
        numer, denom = map(self.generators.element, self._worth[name])
        return self.generators.field.raw_new(numer, denom)

    def terms(self, name: str) -> tuple[Terms, Terms]:
        """The same as the terms of its numerator and of its denominator."""
        return self._worth[name]

    def knows(self, name: str) -> bool:
        """Whether a name stands for something that the parts, laws or reads hang on."""
        return name in self._worth

    def words(self, expression: Expression) -> Words:
        """The field of the names that occur in an expression."""
        return Words(self.generators, self._worth, {name.name for name in names_in(expression)})


def _worth(name: str, value: Expression, generators: Generators, known: Mapping[str, _Worth]) -> _Worth:
    """What a tied name is worth: a name or a number as it stands, anything else by arithmetic."""
    if isinstance(value, Name):
        return known[value.name]
    if isinstance(value, Number):
        number = Fraction(value.value)
        return ((number.numerator, ()),) if number else (), ((number.denominator, ()),)
    words = Words(generators, known, {inner.name for inner in names_in(value)})
    fraction = fraction_of(value, words.field, words.fraction, f"the value of {name}")
    return words.terms(fraction.numer), words.terms(fraction.denom)


def _mutual(network: Network) -> dict[str, Fraction]:
    """The mutual inductance k sqrt(L1 L2) of each coupling whose k, L1 and L2 are numbers, to 60 digits."""
    return {coupling.mutual: root(square) for coupling, square in squared_mutuals(network)}


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
