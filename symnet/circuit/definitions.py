"""From drafts to sections, and from placements to parts: what is done once all statements have been read.

A definition may stand before or behind the place where it is used; one that reaches itself through the sections
it holds is refused with the circle spelled out. A definition with a fault in it is faulted once, where it is
written, however often it is placed: the names that it would have given are doubtful and are not complained of.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field, replace

from symnet.circuit.devices import device_names, device_parameters
from symnet.circuit.drafts import Draft, Header, Placement, all_names, node_named, value_of
from symnet.circuit.drawing import Drawing
from symnet.circuit.names import check
from symnet.circuit.parts import GROUND, CurrentLaw, Part, Value, VoltageLaw, dimension_of_class
from symnet.circuit.sections import Instance, Section
from symnet.circuit.words import node_fault
from symnet.circuit.writing import default_labels
from symnet.errors import Fault, Span, SymnetError, nearest
from symnet.expressions import names_in
from symnet.quantities import Dimension

__all__ = ["Definition", "Definitions"]


@dataclass(slots=True)
class Definition:
    """A ``define`` with the statements up to its ``done``; ``faults`` are those of its lines."""

    header: Header
    draft: Draft
    faults: list[Fault] = field(default_factory=list)
    doubtful: set[str] = field(default_factory=set)


class Definitions:
    """The sections of one text, made when they are first asked for.

    ``shipped`` gives those that come with symnet, by name and the names of the arguments.
    """

    def __init__(
        self, definitions: list[Definition], shipped: Callable[[str, frozenset[str]], Section | None]
    ) -> None:
        self._shipped = shipped
        self.faults: list[Fault] = []
        self.doubtful: set[str] = set()
        self._drafts: dict[str, Definition] = {}
        self._made: dict[str, Section | None] = {}
        self._open: list[str] = []
        for definition in definitions:
            name = definition.header.kind
            if name in self._drafts:
                self.faults.append(
                    Fault(f"{name} is defined twice", "give one of them another name", definition.header.span)
                )
            self._drafts.setdefault(name, definition)

    def make_all(self) -> dict[str, Section]:
        """Every section, used or not, so that all faults are found."""
        made = {name: self._section(name) for name in self._drafts}
        return {name: section for name, section in made.items() if section is not None}

    def drawing(self, draft: Draft, text: str | None = None) -> Drawing:
        """The drawing of a draft: laws named, sections placed, values given the dimension of their names."""
        free: dict[str, Dimension | None] = {}
        for name, dimension, span in draft.free:
            if name in free:
                self.faults.append(Fault(f"{name} is declared free twice", "once is enough", span))
            free[name] = dimension
        coupled = {coupling.name: coupling.dimension for coupling in draft.couplings}
        values: dict[str, Value] = {}
        for name, side, span in draft.values:
            if name in values:
                hint = "give one value only"
                self.faults.append(Fault(f"{name} has a value already", hint, span, parts=(name,)))
                continue
            try:
                values[name] = value_of(
                    name, side, dimension_of_class(name) or coupled.get(name) or free.get(name)
                )
            except SymnetError as error:
                self.faults += error.faults
                self.doubtful.add(name)
        parts, instances = self._parts(draft)
        given: dict[str, Value] = {}
        for instance in instances:
            for name, value in instance.values():
                given[name] = values.pop(name, value)
            free |= dict(instance.free())
        return Drawing(
            parts,
            tuple(draft.drives),
            tuple(draft.reads),
            tuple({**given, **values}.items()),
            tuple(free.items()),
            (*draft.couplings, *(coupling for instance in instances for coupling in instance.couplings())),
            instances,
            text,
        )

    # -- parts ---------------------------------------------------------------------------------------------------

    def _parts(self, draft: Draft) -> tuple[tuple[Part, ...], tuple[Instance, ...]]:
        nameless = [p for p in draft.parts if isinstance(p, VoltageLaw | CurrentLaw) and not p.name]
        labels = iter(default_labels(len(nameless), all_names(draft)) if nameless else ())
        parts: list[Part] = []
        instances: list[Instance] = []
        for piece in draft.parts:
            if isinstance(piece, Placement):
                instance = self._instance(piece)
                if instance is None:
                    self.doubtful |= {piece.name, *_words(piece)}
                else:
                    instances.append(instance)
                    parts += [replace(part, span=piece.span) for part in instance.parts()]
            elif isinstance(piece, VoltageLaw | CurrentLaw) and not piece.name:
                parts.append(replace(piece, name=next(labels)))
            else:
                parts.append(piece)
        return tuple(parts), tuple(instances)

    def _instance(self, piece: Placement) -> Instance | None:
        """A placement with its section, or None with what is wrong noted."""
        before = len(self.faults)
        section = self._known(piece)
        if section is None:
            return None
        nodes: dict[str, str] = {}
        arguments: dict[str, Value | None] = {}
        parameters = dict(section.parameters)
        usage = f"write {piece.name}: {_usage(section)}"
        for name, side, span in piece.arguments:
            if name in nodes or name in arguments:
                self.faults.append(Fault(f"{name} is given twice", usage, span))
            elif side is None:
                if name in parameters:
                    arguments[name] = None
                else:
                    self.faults.append(Fault("terminals and values of a device are named", usage, span))
            elif name in section.terminals:
                node = node_named(side)
                said = node_fault(node) if node else (f"{name} is connected to a node", "write its name")
                if said is not None:
                    self.faults.append(Fault(*said, side.formed.span))
                nodes[name] = node or GROUND
            elif name in parameters:
                free = dict(section.drawing.free)
                try:
                    arguments[name] = value_of(name, side, dimension_of_class(name) or free.get(name))
                except SymnetError as error:
                    self.faults += error.faults
            else:
                close = nearest(name, [*section.terminals, *parameters, *device_parameters(piece.kind)])
                hint = f"did you mean {close[0]}?" if close else usage
                what = f"{_article(piece.kind)} {piece.kind} has no terminal or parameter {name}"
                self.faults.append(Fault(what, hint, span))
        missing = [terminal for terminal in section.terminals if terminal not in nodes]
        if missing and len(self.faults) == before:
            self.faults.append(Fault(f"{piece.name} has no {' and no '.join(missing)}", usage, piece.span))
        if len(self.faults) > before:
            return None
        order = tuple((name, arguments[name]) for name in parameters if name in arguments)
        places = tuple(nodes[terminal] for terminal in section.terminals)
        return Instance(piece.name, section, places, order, span=piece.span)

    def _known(self, piece: Placement) -> Section | None:
        if piece.kind in self._drafts:
            return self._section(piece.kind, piece.kind_span)
        found = self._shipped(piece.kind, frozenset(name for name, _, _ in piece.arguments))
        if found is None:
            known = [*self._drafts, *device_names()]
            close = nearest(piece.kind, known)
            hint = f"did you mean {close[0]}?" if close else f"there are {', '.join(known[:12])}"
            if not self._drafts and not close:
                hint += ", and what you define"
            self.faults.append(Fault(f"{piece.kind} is no device or section", hint, piece.kind_span))
        return found

    # -- sections ------------------------------------------------------------------------------------------------

    def _section(self, name: str, used_at: Span | None = None) -> Section | None:
        if name in self._open:
            circle = " -> ".join([*self._open[self._open.index(name) :], name])
            message = (
                f"{name} holds itself: {circle}" if circle.count(">") > 1 else f"{name} is placed in itself"
            )
            self.faults.append(Fault(message, "a section may hold only others", used_at))
            return None
        if name not in self._made:
            self._open.append(name)
            self._made[name] = self._make(self._drafts[name])
            self._open.pop()
        return self._made[name]

    def _make(self, definition: Definition) -> Section | None:
        header, draft = definition.header, definition.draft
        before = len(self.faults)
        self.faults += definition.faults
        outer, self.doubtful = self.doubtful, set(definition.doubtful)
        drawing = self.drawing(draft)
        parameters: list[tuple[str, Value | None]] = []
        free = dict(drawing.free)
        for name, side, _ in header.parameters:
            value = None
            if side is not None:
                try:
                    value = value_of(name, side, dimension_of_class(name) or free.get(name))
                except SymnetError as error:
                    self.faults += error.faults
            parameters.append((name, value))
        # Judged with its parameters as values, so that ties to them are known; their defaults go with the header.
        defaults = [(name, value) for name, value in parameters if value is not None]
        known = {*free, *drawing.part_names}
        unset = [(name, None) for name, value in parameters if value is None and name not in known]
        judged = replace(drawing, values=(*defaults, *drawing.values), free=(*drawing.free, *unset))
        places = {name: span for name, *_, span in (*draft.free, *draft.values, *header.parameters)}
        if len(self.faults) == before:
            self.faults += check(judged, self.doubtful, places, header.terminals)
            self.faults += _unused(header, judged)
        self.doubtful = outer
        if len(self.faults) > before:
            return None
        return Section(header.kind, header.terminals, tuple(parameters), drawing)


def _unused(header: Header, drawing: Drawing) -> Iterator[Fault]:
    """Terminals that nothing inside is connected to, and parameters that nothing inside hangs on."""
    if not drawing.parts:
        hint = "write its parts between define and done"
        yield Fault(f"the section {header.kind} is empty", hint, header.span)
        return
    touched = {node for part in drawing.parts for node in part.nodes}
    laws = [part.value for part in drawing.parts if isinstance(part, VoltageLaw | CurrentLaw)]
    named = {name.name for law in laws for name in names_in(law)}
    for terminal in header.terminals:
        if terminal not in touched and not {terminal, f"v_{terminal}"} & named:
            hint = "connect it, or leave it out"
            yield Fault(f"nothing inside {header.kind} is connected to {terminal}", hint, header.span)
    named |= {name.name for _, value in drawing.values for name in names_in(value.expression)}
    named |= {piece.name for piece in (*drawing.parts, *drawing.couplings)}
    for name, _, span in header.parameters:
        if name not in named:
            yield Fault(f"nothing inside {header.kind} hangs on {name}", "use it, or leave it out", span)


def _usage(section: Section) -> str:
    terminals = ", ".join(f"{terminal}=..." for terminal in section.terminals)
    names = device_parameters(section.name) or [name for name, _ in section.parameters]
    parameters = ", ".join(names)
    tail = f", and if wanted {parameters}" if parameters else ""
    return f"{section.name}({terminals}){tail}"


def _article(word: str) -> str:
    return "an" if word[:1] in "aeio" else "a"


def _words(piece: Placement) -> Iterator[str]:
    """The names that a placement would have given: its nodes."""
    for _, side, _ in piece.arguments:
        node = node_named(side) if side is not None else None
        if node is not None and node != GROUND:
            yield node
