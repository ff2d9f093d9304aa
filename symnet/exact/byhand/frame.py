"""The voltages of a network as a person names them, and what every expression is worth in them.

Fewer than the nodes: the two inputs of an ideal op amp, or what a buffer joins, are one voltage, and the nameless
nodes inside a series are none, since a series between two nodes is one impedance. Everything is computed in one
field of fractions: s, the names of the parts, and a spare name for each voltage, for what is abbreviated on the way.
"""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.circuit.network import Network
from symnet.circuit.parts import (
    GROUND,
    Branch,
    CurrentDrive,
    CurrentLaw,
    Drive,
    OpAmp,
    VoltageDrive,
    VoltageLaw,
    class_letter,
)
from symnet.circuit.series import Beside, Group, Leaf, Series, leaves, runs, wire
from symnet.errors import Fault, LimitError
from symnet.exact.byhand.forms import Form, add, times
from symnet.exact.byhand.writing import difference
from symnet.exact.linear import Bounded, LinearForm, linear_form
from symnet.exact.naming import Naming
from symnet.exact.pieces import named_currents
from symnet.exact.polynomials import make_ring
from symnet.expressions import Expression, Name, Number, Parallel, Product, Sum, substitute

if TYPE_CHECKING:
    from sympy.polys.fields import FracElement, FracField
    from sympy.polys.rings import PolyElement

__all__ = ["Frame"]

_ZERO = Number(Fraction(0))
_ONE = Number(Fraction(1))


class Frame:
    """A network with one drive, as a person who derives H by hand sees it.

    ``groups`` are its branches, those in series as one. ``source`` is the name of the drive's voltage or current;
    ``spare`` gives the abbreviation that each voltage may use.
    """

    def __init__(self, network: Network, drive: Drive, read: Expression, naming: Naming) -> None:
        self.network, self.drive, self.read, self.naming = network, drive, read, naming
        self._joined: dict[str, str] = {}
        self._why: list[tuple[str, str, str]] = []
        self._named = named_currents(network, read)
        self._chosen = network.drive_names[network.drives.index(drive)]
        self.groups = list(self._links())
        self.coils = {coil: self._coupled_to(coil) for c in network.couplings for coil in (c.first, c.second)}
        self._refuse_buried_coils()
        hidden = {node for _, group, _ in self.groups for node in _inside(group)}
        self.nodes = tuple(node for node in network.nodes if node not in hidden)
        self._join_voltages()
        self.kept = tuple(self._kept_names())
        names = [*naming.generators.names[1:], *self.kept]
        self.spare = self._spare_names(names)
        self.ring = make_ring([*names, *self.spare.values()])
        self.field: FracField = self.ring.to_field()
        self._values: dict[str, FracElement] = dict(
            zip(map(str, self.ring.symbols), self.field.gens, strict=True)
        )
        self.source = self._source_name()

    # -- names ----------------------------------------------------------------------------------------------

    def _spare_names(self, names: list[str]) -> dict[str, str]:
        taken = {*names, *self.network.nodes, *self.network.symbols(), *self.network.electric_names()}
        spare: dict[str, str] = {}
        currents = [
            name for name in (*self.network.part_names, *self.network.drive_names) if self.is_asked(name)
        ]
        unknown = (*map(self.voltage, self.nodes), *(f"i_{name}" for name in (*self.coils, *currents)))
        for voltage in dict.fromkeys(unknown):
            name = f"D_{voltage.removeprefix('v_').replace('.', '_')}"
            while name in taken:
                name = f"D{name}"
            taken.add(name)
            spare[voltage] = name
        return spare

    def _kept_names(self) -> Iterator[str]:
        """Impedances and admittances given by a fraction or sum: they are written by their name until the end."""
        for part in self.network.branches():
            if part.kind in "ZY" and part.name not in self.naming.names:
                worth = self.naming.value(part.name)
                if len(worth.numer) > 1 or len(worth.denom) > 1:
                    yield part.name

    def voltage(self, node: str) -> str:
        """How the voltage of a node is written; of several that are equal, one is. ``gnd`` is zero."""
        while node in self._joined:
            node = self._joined[node]
        return node if node == GROUND or node[:1].isalpha() else f"v_{node}"

    def name(self, voltage: str) -> Expression:
        """A voltage in an expression."""
        return _ZERO if voltage == GROUND else Name(voltage)

    def _source_name(self) -> str:
        if isinstance(self.drive, CurrentDrive):
            return f"i_{self._chosen}"
        return self.voltage(self.drive.plus) if self.drive.minus == GROUND else f"v_{self._chosen}"

    def over(self) -> Expression:
        """What H is divided by: the source, as a difference of voltages where it stands between two nodes."""
        if isinstance(self.drive, VoltageDrive):
            return self.difference(*self.drive.nodes)
        return Name(self.source)

    def _join_voltages(self) -> None:
        """The inputs of op amps, and what a law of one voltage holds, are one voltage."""
        for name, drive in zip(self.network.drive_names, self.network.drives, strict=True):
            if drive is not self.drive and isinstance(drive, VoltageDrive):
                self._join(drive.plus, drive.minus, f"{name}, the other drive, is at zero")
        for part in self.network.parts:
            if isinstance(part, OpAmp):
                why = f"{part.name} is ideal: no voltage between its inputs, no current into them"
                self._join(part.minus, part.plus, why)
            elif isinstance(part, VoltageLaw) and part.minus == GROUND and isinstance(part.value, Name):
                node = (
                    part.value.name.removeprefix("v_")
                    if part.value.name not in self.nodes
                    else part.value.name
                )
                if node in self.nodes and node != part.plus:
                    self._join(node, part.plus, f"{part.name} holds {part.plus} at the voltage of {node}")

    def _join(self, one: str, other: str, why: str) -> None:
        a, b = self._root(one), self._root(other)
        if a == b:
            return
        if self._rank(a) < self._rank(b):
            a, b = b, a
        self._joined[a] = b
        self._why.append((a, b, why))

    def _root(self, node: str) -> str:
        while node in self._joined:
            node = self._joined[node]
        return node

    def _rank(self, node: str) -> tuple[bool, ...]:
        """Which of two equal voltages stays: gnd, then the driven node, then the one that is read."""
        driven = isinstance(self.drive, VoltageDrive) and node == self.drive.plus
        read = isinstance(self.read, Name) and self.read.name in {node, f"v_{node}"}
        return (node != GROUND, not driven, not read)

    def joined(self) -> Iterator[tuple[Expression, Expression, str]]:
        """``left = right`` and the reason, for each voltage that another stands for."""
        for one, other, why in self._why:
            left = one if one[:1].isalpha() else f"v_{one}"
            right = _ZERO if other == GROUND else Name(other if other[:1].isalpha() else f"v_{other}")
            yield Name(left), right, why

    def _links(self) -> Iterator[tuple[str, Group, str]]:
        """The branches, those in series as one, those in parallel apart."""
        for run in runs(self.network.parts):
            if isinstance(run, list):
                for start, group, end in run:
                    for item in group.items if isinstance(group, Beside) else (group,):
                        yield start, item, end

    def _coupled_to(self, coil: str) -> tuple[tuple[str, str], ...]:
        """The coils that share flux with one, each with the symbol of the mutual inductance."""
        return tuple(
            (c.second if coil == c.first else c.first, c.mutual)
            for c in self.network.couplings
            if coil in (c.first, c.second)
        )

    def _refuse_buried_coils(self) -> None:
        for _, group, _ in self.groups:
            items = group.items if isinstance(group, Series) else ()
            for item in items:
                for leaf in leaves(item) if not isinstance(item, Leaf) else ():
                    if leaf.name in self.coils:
                        raise LimitError(
                            Fault(
                                f"{leaf.name} is coupled and stands in a parallel group inside a series",
                                "give the nodes at both ends of it names, so that its current can be written",
                                parts=(leaf.name,),
                            )
                        )

    def coil_in(self, group: Group) -> str | None:
        """The first coupled coil of a branch: its current is an unknown of its own."""
        return next((leaf.name for leaf in leaves(group) if leaf.name in self.coils), None)

    def drop(self, group: Group) -> tuple[Expression, Form]:
        """The voltage along a branch with a coupled coil, by the currents: as written, and as a linear form."""
        coil = self.coil_in(group)
        terms: list[tuple[int, Expression]] = []
        form: Form = {}
        for item in group.items if isinstance(group, Series) else (group,):
            current = Name(f"i_{coil}")
            factors: tuple[tuple[int, Expression], ...] = ((1, self._spelled_impedance(item)), (1, current))
            if isinstance(item, Leaf) and class_letter(item.name) == "L":
                factors = ((1, Name("s")), (1, Name(item.name)), (1, current))
            terms.append((1, Product(factors)))
            form = add(form, {current.name: self.impedance(item)})
            for other, mutual in self.coils.get(item.name, ()) if isinstance(item, Leaf) else ():
                share = Name(f"i_{self._carrier(other)}")
                terms.append((1, Product(((1, Name("s")), (1, Name(mutual)), (1, share)))))
                form = add(form, {share.name: self._values["s"] * self.value(mutual)})
        return Sum(tuple(terms)), form

    def _carrier(self, coil: str) -> str:
        """The coil by whose current that of another in the same series is written."""
        for _, group, _ in self.groups:
            if any(leaf.name == coil for leaf in leaves(group)):
                return self.coil_in(group) or coil
        return coil

    def is_asked(self, name: str) -> bool:
        """Whether the read or a law names the current of this source."""
        return name in self._named or any(
            inner.name == f"i_{name}" for inner in (self.read,) if isinstance(inner, Name)
        )

    # -- values ---------------------------------------------------------------------------------------------

    def ratio(self, numerator: PolyElement, denominator: PolyElement) -> FracElement:
        """Two polynomials in the names of the parts, as a fraction in the larger field of this frame."""
        return self.field(numerator.set_ring(self.ring)) / self.field(denominator.set_ring(self.ring))

    def value(self, name: str) -> FracElement:
        """What the name of a part or symbol stands for; a kept one for itself."""
        if name not in self._values:
            self._values[name] = self.worth(name)
        return self._values[name]

    def worth(self, name: str) -> FracElement:
        """What the name of a part or symbol is worth in the names that remain."""
        worth = self.naming.value(name)
        return self.ratio(worth.numer, worth.denom)

    def linear(self, expression: Expression) -> Form:
        """The linear form of an expression of voltages and currents."""
        form = linear_form(expression, self.field, self._linear_name, "the expression")
        return {name: weight.value for (_, name), weight in form.weights.items()}

    def _linear_name(self, name: Name) -> LinearForm:
        word = name.name
        electric = self.electric(word)
        if electric is None:
            return LinearForm(Bounded(self.value(word)), {})
        return LinearForm(
            Bounded(self.field.zero), {("", voltage): Bounded(weight) for voltage, weight in electric.items()}
        )

    def electric(self, word: str) -> Form | None:
        """A voltage or current by its name, as a linear form; None where the name is neither."""
        if word in self.network.nodes or word == GROUND:
            return self.plain(word)
        kind, _, rest = word.partition("_")
        if kind not in {"v", "i"} or not rest or word in self.naming.names or word in self._values:
            return None
        if kind == "i":
            return self._current(rest)
        return (
            self.plain(rest) if rest in self.network.nodes or rest == GROUND else self._voltage_across(rest)
        )

    def plain(self, node: str) -> Form:
        """The voltage of a node as a linear form."""
        voltage = self.voltage(node)
        return {} if voltage == GROUND else {voltage: self.field.one}

    def across(self, plus: str, minus: str) -> Form:
        """The voltage between two nodes as a linear form."""
        return add(self.plain(plus), times(-self.field.one, self.plain(minus)))

    def _voltage_across(self, name: str) -> Form:
        """The voltage across a part or drive; inside a series, from its current."""
        for known, drive in zip(self.network.drive_names, self.network.drives, strict=True):
            if known == name:
                return self.across(*drive.nodes)
        for _, group, _ in self.groups:
            if not isinstance(group, Leaf) and any(leaf.name == name for leaf in leaves(group)):
                if name in self.coils:
                    return self.drop(Leaf(name))[1]
                return times(self.impedance(Leaf(name)), self._current(name))
        return self.across(*self._terminals(name))

    def _terminals(self, name: str) -> tuple[str, str]:
        first, second = self.network[name].nodes[:2]
        return first, second

    def _current(self, name: str) -> Form:
        part = None if name in self.network.drive_names else self.network[name]
        if isinstance(part, Branch):
            for start, group, end in self.groups:
                if any(leaf.name == name for leaf in leaves(group)):
                    if (coil := self.coil_in(group)) is not None:
                        return {f"i_{coil}": self.field.one}
                    share = self._share(group, name) / self.impedance(group)
                    return times(share, self.across(start, end))
        if isinstance(part, CurrentLaw):
            return self.linear(part.value)
        return {f"i_{name}": self.field.one}

    def _share(self, group: Group, name: str) -> FracElement:
        """The part of a group's current that flows through one of its parts."""
        share = self.field.one
        while not isinstance(group, Leaf):
            inner = next(item for item in group.items if any(leaf.name == name for leaf in leaves(item)))
            if isinstance(group, Beside):
                share = share * self.impedance(group) / self.impedance(inner)
            group = inner
        return share

    def impedance(self, group: Group) -> FracElement:
        """The impedance of a branch, or of branches in series and parallel."""
        match group:
            case Leaf(name):
                value, s = self.value(name), self._values["s"]
                return {"L": lambda: s * value, "C": lambda: 1 / (s * value), "Y": lambda: 1 / value}.get(
                    self.network[name].kind,  # type: ignore[union-attr]
                    lambda: value,
                )()
            case Series(items):
                return sum((self.impedance(item) for item in items), self.field.zero)
            case Beside(items):
                return 1 / sum((1 / self.impedance(item) for item in items), self.field.zero)

    # -- writing ----------------------------------------------------------------------------------------------

    def renamed(self, name: Name) -> Expression:
        """A voltage by the name that stands for it."""
        word = name.name
        node = word.removeprefix("v_") if word not in self.network.nodes else word
        if node in self.nodes and (word == node or word not in self.network.symbols()):
            return self.name(self.voltage(node))
        return name

    def spelled(self, expression: Expression) -> Expression:
        """An expression with the currents of branches and the voltages across parts written in node voltages."""

        def spell(name: Name) -> Expression:
            kind, _, rest = name.name.partition("_")
            if kind == "v" and rest in self.network and self.electric(name.name) is not None:
                return self.difference(*self._terminals(rest))
            for start, group, end in self.groups if kind == "i" else ():
                if isinstance(group, Leaf) and group.name == rest and rest not in self.coils:
                    return self.through(group, self.difference(start, end))
            return self.renamed(name)

        return substitute(expression, spell)

    def difference(self, plus: str, minus: str) -> Expression:
        """The voltage between two nodes."""
        return difference(self.name(self.voltage(plus)), self.name(self.voltage(minus)))

    def through(self, group: Group, across: Expression) -> Expression:
        """``across/R``, ``s*C*across`` and so on; a series is written with what stands above and below."""
        if isinstance(group, Leaf):
            name, s = Name(group.name), Name("s")
            kind = self.network[group.name].kind  # type: ignore[union-attr]
            match kind:
                case "C":
                    return Product(((1, s), (1, name), (1, across)))
                case "Y":
                    return Product(((1, name), (1, across)))
                case "L":
                    return Product(((1, across), (-1, Product(((1, s), (1, name))))))
                case _:
                    return Product(((1, across), (-1, name)))
        return Product(((1, across), (-1, self._spelled_impedance(group))))

    def _spelled_impedance(self, group: Group) -> Expression:
        """The impedance of a branch or group in the names of its parts: ``R2 + 1/(s*C2)``."""
        match group:
            case Leaf(name):
                value, s = Name(name), Name("s")
                match class_letter(name):
                    case "L":
                        return Product(((1, s), (1, value)))
                    case "C":
                        return Product(((1, _ONE), (-1, Product(((1, s), (1, value))))))
                    case "Y":
                        return Product(((1, _ONE), (-1, value)))
                    case _:
                        return value
            case Series(items):
                return Sum(tuple((1, self._spelled_impedance(item)) for item in items))
            case Beside(items):
                return Parallel(tuple(self._spelled_impedance(item) for item in items))


def _inside(group: Group) -> set[str]:
    """The nameless nodes inside a group."""
    return {node for branch in wire(group, "", "") for node in branch.nodes if node}
