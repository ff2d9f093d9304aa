"""The network as a value: what was drawn, what drives it, what is read, what the parts are worth.

A Network is frozen; every change gives a new one. It says what was drawn and nothing about what follows from
it. Its text form (:meth:`Network.to_text`) reads back to an equal Network.
"""

from __future__ import annotations

import warnings
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, fields, replace
from decimal import Decimal
from fractions import Fraction
from math import isfinite
from typing import Final, TypeAlias

from symnet.circuit.devices import OPAMP_TERMINALS
from symnet.circuit.drawing import Drawing
from symnet.circuit.names import check, dimensions
from symnet.circuit.notes import UnusualValueWarning, code_note
from symnet.circuit.parts import (
    Branch,
    OpAmp,
    Value,
    dimension_of_class,
)
from symnet.circuit.reading import read_drawing, read_value
from symnet.circuit.sections import kept, placed_values
from symnet.circuit.series import settled
from symnet.circuit.spelling import write_expression
from symnet.circuit.writing import write_drive, write_network
from symnet.errors import Fault, NotationError, Span
from symnet.expressions import Number, names_in
from symnet.quantities import NUMBER, Dimension
from symnet.typeset.displayed import Displayed

__all__ = ["Network", "ValueLike", "read_network", "value_for"]

_PARASITICS: Final = {"C": {"ESR": "R", "ESL": "L"}, "L": {"DCR": "R", "Cw": "C"}}

ValueLike: TypeAlias = str | int | Fraction | Decimal | float | None


@dataclass(frozen=True, slots=True, repr=False)
class Network(Drawing, Displayed):
    """What was drawn: parts between nodes, drives, reads, values.

    Made by :func:`symnet.circuit` from text or from named constructors. ``values`` holds what each part or
    symbol is worth, in the order of writing; a part without an entry stays a symbol.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 = 1k -- out -- C1 = 100n -- gnd; drive in; read out")
    >>> net
    <Network: 2 parts, nodes in, out; drive in; read out>
    >>> net.nodes
    ('in', 'out')
    """

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
        known, found = self.symbols(), dimensions(self)
        changed = dict(self.values)
        for name, given in {**(values or {}), **named}.items():
            if name not in known:
                raise self.unknown(name, known, "part or symbol")
            if given is None:
                changed.pop(name, None)
            else:
                self._refuse_ambiguous(name, given)
                changed[name] = value_for(name, given, found.get(name))
        return _sound(replace(self, values=tuple(changed.items()), text=None))

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
        return _sound(network)

    def without(self, *names: str) -> Network:
        """A network without these parts, laws, devices or sections; their values go with them.

        Raises NotationError when what remains still hangs on one of them: a tied value, or a law that names its
        voltage or current.
        """
        placed = {instance.name: instance for instance in self.instances}
        gone: set[str] = set()
        for name in names:
            if name in placed:
                section = placed[name]
                gone |= {piece.name for piece in (*section.parts(), *section.couplings())}
                gone |= set(dict(section.values()))
            elif name in self or any(name == coupling.name for coupling in self.couplings):
                gone.add(name)
            else:
                raise self.unknown(name, (*self.part_names, *placed), "part or section" if placed else "part")
        left = replace(
            self,
            parts=tuple(part for part in self.parts if part.name not in gone),
            values=tuple((name, value) for name, value in self.values if name not in gone),
            couplings=tuple(coupling for coupling in self.couplings if coupling.name not in gone),
            text=None,
        )
        for name, value in left.values:
            for inner in names_in(value.expression):
                if inner.name in gone:
                    raise NotationError(
                        Fault(
                            f"the value of {name} is tied to {inner.name}, which is to go",
                            f"give {name} a value of its own first",
                            parts=(name, inner.name),
                        )
                    )
        return _sound(left)

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
        kept = replace(self, parts=tuple(part for part in self.parts if part is not old), text=None)
        added = {part.name for part in by.parts}
        values = {n: v for n, v in self.values if n != name or name in added} | dict(by.values)
        parts = (*kept.parts[:where], *by.parts, *kept.parts[where:])
        _check_disjoint(part.name for part in parts)
        order = [n for n, _ in self.values if n in values]
        order += [n for n in values if n not in order]
        network = replace(
            kept,
            parts=parts,
            drives=(*kept.drives, *by.drives),
            reads=(*kept.reads, *by.reads),
            values=tuple((n, values[n]) for n in order),
            free=(*kept.free, *(entry for entry in by.free if entry not in kept.free)),
        )
        return _sound(network)

    def with_parasitics(self, name: str, /, **values: ValueLike) -> Network:
        """A network in which a capacitor or inductor is a real one; the part keeps its name, and its value.

        A capacitor takes ``ESR`` and ``ESL`` in series, called ``R_C1`` and ``L_C1``; an inductor ``DCR`` in series,
        ``R_L1``, and ``Cw``, the capacitance of the winding, beside both, ``C_L1``. A value is given as to
        :meth:`with_values`; None leaves a symbol. With all of them at zero H is the one of the ideal part.

        Raises UnknownNameError for a part the network does not have, NotationError for a part or a property of
        another kind.

        >>> import symnet as sn
        >>> net = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")
        >>> print(sn.derive(net.with_parasitics("C1", ESR="1 ohm")))
        out/in = (1 + s*R_C1*C1)/(1 + s*(R1 + R_C1)*C1)
        """
        part = self[name]
        known = _PARASITICS.get(part.kind) if isinstance(part, Branch) else None
        if known is None:
            hint = "real parts are made of capacitors (ESR, ESL) and inductors (DCR, Cw)"
            raise NotationError(Fault(f"{name} is no capacitor or inductor", hint, parts=(name,)))
        strange = [word for word in values if word not in known]
        if strange or not values:
            listed = ", ".join(known)
            said = f"{name} has no {strange[0]}" if strange else f"no property of {name} is given"
            raise NotationError(Fault(said, f"a real one has {listed}"))
        path, dot, own = name.rpartition(".")
        called = {word: f"{path}{dot}{known[word]}_{own}" for word in known if word in values}
        text = " + ".join([name, *(new for word, new in called.items() if word != "Cw")])
        if "Cw" in called:
            text = f"({text}) || {called['Cw']}"
        return self.replace(name, text).with_values({called[word]: value for word, value in values.items()})

    def with_opamp(self, name: str, /, **properties: ValueLike) -> Network:
        """A network in which an op amp is the model with these properties, and no others; None leaves a symbol.

        ``gain`` and ``gbw`` (text in Hz, or a number in rad/s) make its gain finite; ``pole2``, ``Rin``, ``Cin`` and
        ``Rout`` as in the notation. Without any it is ideal. The symbols are called ``U1.gain`` and so on.

        Raises UnknownNameError for an op amp the network does not have, NotationError for another part or property.

        >>> import symnet as sn
        >>> net = sn.network("in -- R1 -- m -- R2 -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out")
        >>> print(sn.derive(net.with_opamp("U1", gbw=None)))
        out/in = -(R2/R1)/(1 + s*(1 + R2/R1)/U1.gbw)
        """
        placed = {
            each.name: dict(each.connections) for each in self.instances if each.section.name == "opamp"
        }
        ideal = {part.name: part.nodes for part in self.parts if isinstance(part, OpAmp)}
        if name in ideal and name not in placed:
            nodes = dict(zip(OPAMP_TERMINALS, ideal[name], strict=True))
        elif name in placed:
            nodes = placed[name]
        elif name in self:
            raise NotationError(Fault(f"{name} is no op amp", parts=(name,)))
        else:
            raise self.unknown(name, (*placed, *ideal), "op amp")
        given = [f"{terminal}={node}" for terminal, node in nodes.items()]
        given += [
            f"{word}=open_{word}" for word in properties
        ]  # until its value is put in, which may be none
        network = self.without(name).add(f"{name}: opamp({', '.join(given)})")
        return network.with_values({f"{name}.{word}": value for word, value in properties.items()})

    def with_probe(self, node: str, R: ValueLike, C: ValueLike, name: str = "probe") -> Network:
        """A network with a probe on a node: its resistance (ohm) and its capacitance (farad) to gnd.

        The parts are called ``R_probe`` and ``C_probe``; ``sn.compare(net, net.with_probe(...))`` shows what the
        measurement changes.

        >>> import symnet as sn
        >>> net = sn.network("in -- R1 = 1 Mohm -- out -- C1 = 10 pF -- gnd; drive in; read out")
        >>> sn.f3db(sn.derive(net.with_probe("out", R="10 Mohm", C="10 pF")))
        <-3.0103 dB relative to DC: <8753.52 Hz, falling>>
        """
        if node not in self.nodes:
            raise self.unknown(node, self.nodes, "node")
        parts = f"{node} -- R_{name} || C_{name} -- gnd"
        return self.add(parts).with_values({f"R_{name}": R, f"C_{name}": C})

    def _add_text(self, text: str) -> Network:
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
            (*self.couplings, *other.couplings),
            (*self.instances, *other.instances),
        )

    def _refuse_ambiguous(self, name: str, given: object) -> None:
        """``R2`` is a part and the code of 0.2 ohm: only the one who wrote it knows which is meant."""
        word = given.strip() if isinstance(given, str) else ""
        if word in self:
            raise NotationError(
                Fault(
                    f"{word} is a part of this network and may also be the code of a value",
                    f"write ({word}) to tie {name} to it, or the value with its unit",
                    parts=(name, word),
                )
            )

    # -- words and showing ------------------------------------------------------------------------------------

    def to_text(self) -> str:
        """The network in symnet's notation; it reads back to an equal Network."""
        return write_network(self)

    def __repr__(self) -> str:
        visible = [node for node in self.nodes if "+" not in node]
        listed = ", ".join(visible[:8]) + (f" and {len(visible) - 8} more" if len(visible) > 8 else "")
        tail = [write_drive(drive) for drive in self.drives]
        tail += [f"read {write_expression(read)}" for read in self.reads]
        count = f"{len(self.parts)} part{'s' if len(self.parts) != 1 else ''}"
        return f"<Network: {count}, nodes {'; '.join([listed or 'none', *tail])}>"


def _sound(network: Network) -> Network:
    """The same with the nodes inside series named afresh; NotationError for names and values that clash.

    Sections that still are as they were placed keep their values first, as reading their text would give them.
    """
    parts, values = settled(network.parts), dict(network.values)
    instances = tuple(kept(network.instances, parts, values))
    ordered = {**{name: values[name] for name in placed_values(instances)}, **values}
    network = replace(network, parts=parts, values=tuple(ordered.items()), instances=instances)
    faults = check(network)
    if faults:
        raise NotationError([replace(fault, span=None) for fault in faults])
    return network


def _between(text: str, start: str, end: str) -> Network:
    """A fragment that stands between two nodes, read from the text of a chain's link."""
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


def read_network(text: str) -> Network:
    """The Network of a text. Raises NotationError with every fault of the text."""
    drawing = read_drawing(text)
    return Network(*(getattr(drawing, each.name) for each in fields(drawing)))


def value_for(
    name: str, given: str | Fraction | Decimal | float, dimension: Dimension | None = None
) -> Value:
    """The value of a name from text, an exact number or a float, in SI units.

    A name that begins with a class letter has the dimension of its class, any other the one given.
    """
    dimension = dimension_of_class(name) or dimension
    if isinstance(given, str):
        note = code_note(given, name)
        if "unusual" in note:
            warnings.warn(note, UnusualValueWarning, stacklevel=3)
        return read_value(given, name, dimension)
    if isinstance(given, float):
        given = _exact(name, given)
    return Value(Number(Fraction(given), dimension or NUMBER))


def _exact(name: str, given: float) -> Fraction:
    if not isfinite(given):
        raise NotationError(Fault(f"the value of {name} is not a finite number: {given}", parts=(name,)))
    return Fraction(repr(float(given)))
