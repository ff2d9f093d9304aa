"""The network as a value: what was drawn, what drives it, what is read, what the parts are worth.

A Network is frozen; every change gives a new one. It says what was drawn and nothing about what follows from
it. Its text form (:meth:`Network.to_text`) reads back to an equal Network.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field, replace
from decimal import Decimal
from fractions import Fraction
from math import isfinite
from typing import TypeAlias

from symnet.errors import Fault, NotationError, Span, UnknownNameError, nearest
from symnet.expressions import Expression, Number, names_in
from symnet.network.parts import (
    GROUND,
    Branch,
    Drive,
    Part,
    Value,
    dimension_of_class,
)
from symnet.quantities import NUMBER, Dimension

__all__ = ["Network", "ValueLike"]

ValueLike: TypeAlias = str | int | Fraction | Decimal | float | None


@dataclass(frozen=True, slots=True)
class Network:
    """What was drawn: parts between nodes, drives, reads, values.

    Made by :func:`symnet.network` from text or from named constructors. ``values`` holds what each part or
    symbol is worth, in the order of writing; a part without an entry stays a symbol.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 = 1k -- out -- C1 = 100n -- gnd; drive in; read out")
    >>> net
    <Network: 2 parts, nodes in, out; drive in; read out>
    >>> net.nodes
    ('in', 'out')
    """

    parts: tuple[Part, ...] = ()
    drives: tuple[Drive, ...] = ()
    reads: tuple[Expression, ...] = ()
    values: tuple[tuple[str, Value], ...] = ()
    free: tuple[tuple[str, Dimension | None], ...] = ()
    text: str | None = field(default=None, compare=False, repr=False)

    # -- what there is ---------------------------------------------------------------------------------

    @property
    def nodes(self) -> tuple[str, ...]:
        """The nodes other than gnd, in order of appearance; those inside a series have a name with ``+``."""
        found: dict[str, None] = {}
        for piece in (*self.parts, *self.drives):
            found.update(dict.fromkeys(piece.nodes))
        found.pop(GROUND, None)
        return tuple(found)

    @property
    def part_names(self) -> tuple[str, ...]:
        """The names of branches, laws and devices in order of writing."""
        return tuple(part.name for part in self.parts)

    @property
    def drive_names(self) -> tuple[str, ...]:
        """The names of the drives: their own, or ``drive``, ``drive2``, ... in order of writing."""
        return tuple(
            drive.name or ("drive" if place == 0 else f"drive{place + 1}")
            for place, drive in enumerate(self.drives)
        )

    def branches(self) -> Iterator[Branch]:
        """The two-terminal parts R, L, C, Z, Y in order of writing."""
        return (part for part in self.parts if isinstance(part, Branch))

    def __getitem__(self, name: str) -> Part:
        """The part of that name; UnknownNameError, with the nearest name, when there is none."""
        for part in self.parts:
            if part.name == name:
                return part
        raise self.unknown(name, self.part_names, "part")

    def __contains__(self, name: object) -> bool:
        return any(part.name == name for part in self.parts)

    def _ipython_key_completions_(self) -> list[str]:
        return list(self.part_names)

    def value(self, name: str) -> Value | None:
        """What a part or symbol is worth: its Value, or None while it is only a symbol."""
        for known, value in self.values:
            if known == name:
                return value
        return None

    def symbols(self) -> tuple[str, ...]:
        """The names that stand for a quantity: branches and every symbol in values and laws, ties included."""
        found: dict[str, None] = {}
        for part in self.parts:
            if isinstance(part, Branch):
                found[part.name] = None
        found.update(dict.fromkeys(name for name, _ in self.values))
        found.update(dict.fromkeys(name for name, _ in self.free))
        nodes, electric = set(self.nodes), set(self.electric_names())
        for expression in self._expressions():
            for name in names_in(expression):
                if name.name != "s" and name.name not in nodes and name.name not in electric:
                    found[name.name] = None
        return tuple(found)

    def _expressions(self) -> Iterator[Expression]:
        for part in self.parts:
            if not isinstance(part, Branch) and hasattr(part, "value"):
                yield part.value
        for _, value in self.values:
            yield value.expression
        yield from self.reads

    def electric_names(self) -> Iterator[str]:
        """The ways to write a voltage or current in an expression, beside a node's own name."""
        for node in (*self.nodes, GROUND):
            yield f"v_{node}"
        yield GROUND
        for name in (*self.part_names, *self.drive_names):
            yield f"i_{name}"
            yield f"v_{name}"

    # -- new networks from this one -----------------------------------------------------------------------

    def with_values(self, values: Mapping[str, ValueLike] | None = None, /, **named: ValueLike) -> Network:
        """A network with other values: text as in the notation (IEC 60062 codes too), exact numbers, or None.

        ``None`` takes the value away: the part becomes a symbol. A float is read as the decimal number that
        Python prints for it (4.7e-9 is 47/10^10). Numbers are in SI units: ohm, henry, farad, siemens.

        Raises UnknownNameError for a name the network does not have, NotationError for text that is no value.

        >>> import symnet as sn
        >>> net = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")
        >>> print(net.with_values(R1="4k7", C1="u47").to_text())
        in -- R1 -- out -- C1 -- gnd
        drive in
        read out
        R1 = 4.7 kohm
        C1 = 470 nF
        """
        changed = dict(self.values)
        known = self.symbols()
        for name, given in {**(values or {}), **named}.items():
            if name not in known:
                raise self.unknown(name, known, "part or symbol")
            if given is None:
                changed.pop(name, None)
            else:
                changed[name] = self._read_value(name, given)
        return replace(self, values=tuple(changed.items()), text=None)

    def add(self, *pieces: str | Network) -> Network:
        """A network with more in it: statements as text, or what a named constructor gives.

        >>> import symnet as sn
        >>> net = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")
        >>> net.add("out -- RL = 10k -- gnd").part_names
        ('R1', 'C1', 'RL')
        """
        network = self
        for piece in pieces:
            network = network._add_text(piece) if isinstance(piece, str) else network._join(piece)
        return network

    def without(self, *names: str) -> Network:
        """A network without these parts, laws or devices; their values go with them."""
        for name in names:
            if name not in self:
                raise self.unknown(name, self.part_names, "part")
        gone = set(names)
        return replace(
            self,
            parts=tuple(part for part in self.parts if part.name not in gone),
            values=tuple((name, value) for name, value in self.values if name not in gone),
            text=None,
        )

    def replace(self, name: str, by: str | Network) -> Network:
        """A network with something else in the place of one branch.

        Text stands between the nodes of the branch, as in a chain: ``net.replace("C1", "C1 + Resr")`` keeps
        the symbol C1 and puts Resr in series with it. A fragment from a named constructor is taken as it is.
        """
        old = self[name]
        where = self.parts.index(old)
        if isinstance(by, str):
            if not isinstance(old, Branch):
                raise NotationError(
                    Fault(
                        f"{name} is not a branch between two nodes; give what shall stand there as a part",
                        "for example net.without(name).add(...)",
                        parts=(name,),
                    )
                )
            by = _between(by, old.start, old.end)
        kept = self.without(name)
        added = {part.name for part in by.parts}
        values = dict(kept.values)
        if name in added:
            values.update({n: v for n, v in self.values if n == name})
        values.update(by.values)
        parts = (*kept.parts[:where], *by.parts, *kept.parts[where:])
        _check_disjoint(part.name for part in parts)
        order = [n for n, _ in self.values if n in values]
        order += [n for n in values if n not in order]
        return replace(
            kept,
            parts=parts,
            drives=(*kept.drives, *by.drives),
            reads=(*kept.reads, *by.reads),
            values=tuple((n, values[n]) for n in order),
            free=(*kept.free, *(entry for entry in by.free if entry not in kept.free)),
        )

    def _add_text(self, text: str) -> Network:
        from symnet.network.reading import read_network

        prefix = self.to_text() + "\n"
        try:
            return replace(read_network(prefix + text), text=None)
        except NotationError as error:
            faults = [_shifted(fault, len(prefix)) for fault in error.faults]
            raise NotationError(faults, text=text) from None

    def _join(self, other: Network) -> Network:
        parts = (*self.parts, *other.parts)
        _check_disjoint(part.name for part in parts)
        values = dict(self.values)
        for name, value in other.values:
            if values.setdefault(name, value) != value:
                raise NotationError(Fault(f"{name} has two different values", parts=(name,)))
        free = (*self.free, *(entry for entry in other.free if entry not in self.free))
        return Network(
            parts,
            (*self.drives, *other.drives),
            (*self.reads, *other.reads),
            tuple(values.items()),
            free,
        )

    def _read_value(self, name: str, given: str | Fraction | Decimal | float) -> Value:
        if isinstance(given, str):
            from symnet.network.reading import read_value

            return read_value(given, name)
        if isinstance(given, float):
            given = _exact(name, given)
        return Value(Number(Fraction(given), dimension_of_class(name) or NUMBER))

    # -- words and showing ------------------------------------------------------------------------------------

    def to_text(self) -> str:
        """The network in symnet's notation; it reads back to an equal Network."""
        from symnet.network.writing import write_network

        return write_network(self)

    def __repr__(self) -> str:
        visible = [node for node in self.nodes if "+" not in node]
        listed = ", ".join(visible[:8]) + (f" and {len(visible) - 8} more" if len(visible) > 8 else "")
        from symnet.network.writing import write_drive, write_expression

        tail = [write_drive(drive) for drive in self.drives]
        tail += [f"read {write_expression(read)}" for read in self.reads]
        count = f"{len(self.parts)} part{'s' if len(self.parts) != 1 else ''}"
        return f"<Network: {count}, nodes {'; '.join([listed or 'none', *tail])}>"

    def unknown(self, name: str, known: Iterable[str], what: str) -> UnknownNameError:
        """The error, with the nearest known name, for a name that the network does not have."""
        close = nearest(name, known)
        hint = f"did you mean {close[0]}?" if close else "known: " + ", ".join(list(known)[:20])
        return UnknownNameError(Fault(f"the network has no {what} called {name}", hint))


def _between(text: str, start: str, end: str) -> Network:
    """A fragment that stands between two nodes, read from the text of a chain's link."""
    from symnet.network.reading import read_network

    prefix = "start -- "
    try:
        fragment = read_network(f"{prefix}{text} -- end")
    except NotationError as error:
        raise NotationError([_shifted(f, len(prefix)) for f in error.faults], text=text) from None
    moved = {"start": start, "end": end}
    parts = tuple(
        Branch(part.name, moved.get(part.start, part.start), moved.get(part.end, part.end))
        for part in fragment.branches()
    )
    return replace(fragment, parts=parts)


def _shifted(fault: Fault, by: int) -> Fault:
    """A fault found in a longer text, placed in the part of it that begins at character ``by``."""
    if fault.span is None:
        return fault
    if fault.span.end <= by:
        return replace(fault, span=None)
    return replace(fault, span=Span(max(0, fault.span.start - by), fault.span.end - by))


def _check_disjoint(names: Iterable[str]) -> None:
    seen: set[str] = set()
    for name in names:
        if name in seen:
            raise NotationError(Fault(f"{name} stands in the network twice", "give one of them another name"))
        seen.add(name)


def _exact(name: str, given: float) -> Fraction:
    if not isfinite(given):
        raise NotationError(Fault(f"the value of {name} is not a finite number: {given}", parts=(name,)))
    return Fraction(repr(float(given)))
