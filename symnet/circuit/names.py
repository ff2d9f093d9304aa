"""Whether the names and expressions of a network make sense together: everything that parsing cannot see.

Works on a Drawing, so that one built in Python is judged by the same rules as one that was typed.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from typing import TYPE_CHECKING, Final

from symnet.circuit.couplings import coupling_faults
from symnet.circuit.inference import Inference
from symnet.circuit.laws import law_faults
from symnet.circuit.meanings import Meanings, NearNames, Use, is_part_name, near_name, uses
from symnet.circuit.parts import CLASS_LETTERS, Branch, class_letter
from symnet.errors import Fault, Span, nearest
from symnet.expressions import Name, Number, names_in
from symnet.quantities import NUMBER, Dimension

if TYPE_CHECKING:
    from symnet.circuit.drawing import Drawing

__all__ = ["MOST_PARTS", "check", "dimensions", "free_symbols", "names_of"]

MOST_PARTS: Final = 5000


def free_symbols(net: Drawing) -> tuple[str, ...]:
    """The symbols of a network that are no parts: those declared, then those with a value, then the others.

    >>> from symnet.circuit.reading import read_drawing
    >>> free_symbols(read_drawing("a -- R1 -- b -- Z1 -- gnd; hold a = mu*b; Z1 = R/(1 + s*tau)"))
    ('mu', 'R', 'tau')
    """
    return Meanings(net).free_symbols(net)


def dimensions(net: Drawing) -> Mapping[str, Dimension | None]:
    """The dimension of every part and symbol; None for a symbol whose use leaves it open.

    >>> from symnet.circuit.reading import read_drawing
    >>> net = read_drawing("a -- R1 -- b; hold a = mu*b; push from b to gnd = gm*(a - b)")
    >>> {name: str(dimension) for name, dimension in dimensions(net).items()}
    {'R1': 'ohm', 'mu': '1', 'gm': 'S'}
    """
    meanings = Meanings(net)
    inference = _inferred(net, meanings, set())
    return inference.result((*meanings.branches, *meanings.couplings, *meanings.free_symbols(net)))


def names_of(net: Drawing) -> set[str]:
    """Every name in a network, whatever it stands for, those in expressions too."""
    found = {name for name, _ in (*net.values, *net.free)} | {each.name for each in net.couplings}
    for piece in (*net.parts, *net.drives):
        found |= {piece.name or "", *piece.nodes}
    for use in uses(net):
        for name in names_in(use.expression):
            found.add(name.name)
    return found - {""}


def _inferred(net: Drawing, meanings: Meanings, bad: set[int]) -> Inference:
    inference = Inference(meanings)
    for use in sorted(uses(net), key=_rank):
        misplaced = use.where == "value" and (use.target in meanings.nodes or use.target in meanings.labels)
        if id(use.expression) not in bad and not misplaced:
            inference.add(use)
    return inference


def _rank(use: Use) -> int:
    """Quantities, laws, bare numbers, ties, reads: so a conflict is found where its reader will look for it."""
    if use.where == "value":
        if next(names_in(use.expression), None) is not None:
            return 3
        return 2 if isinstance(use.expression, Number) and use.expression.dimension == NUMBER else 0
    return 1 if use.is_law else 4


def check(
    net: Drawing,
    doubtful: Iterable[str] = (),
    places: Mapping[str, Span] | None = None,
    terminals: Iterable[str] = (),
) -> list[Fault]:
    """All faults of names, values and laws.

    ``doubtful`` names come from lines that could not be read; ``places`` says where names get their values or
    are declared free; ``terminals`` are nodes although no part may touch them, as those of a section.
    Faults of topology are found elsewhere (symnet.circuit.wiring).
    """
    if len(net.parts) > MOST_PARTS:
        return [Fault(f"the network has {len(net.parts)} parts; at most {MOST_PARTS} are read")]
    meanings = Meanings(net, doubtful, terminals)
    faults = [*_clashes(net, meanings, places or {}), *_ties(meanings)]
    names = _Names(net, meanings, places or {})
    names.judge()
    faults += names.faults
    bad = names.bad
    for use in uses(net):
        if use.where != "value" and id(use.expression) not in bad:
            found = law_faults(use, meanings)
            if found:
                faults += found
                bad.add(id(use.expression))
    inference = _inferred(net, meanings, bad)
    found = [*faults, *inference.faults, *inference.closing_faults(), *coupling_faults(net)]
    return list(_one_for_each_shipped(net, found))


def _one_for_each_shipped(net: Drawing, faults: Iterable[Fault]) -> Iterator[Fault]:
    """The faults, but only the first of those at a section that ships with symnet: its inside is not the writer's."""
    shipped = {instance.span for instance in net.instances if instance.section.origin and instance.span}
    told: set[Span] = set()
    for fault in faults:
        if fault.span not in told:
            yield fault
        if fault.span in shipped:
            told.add(fault.span)


# -- one name, one thing ----------------------------------------------------------------------------------------------


def _introduced(
    net: Drawing, meanings: Meanings, places: Mapping[str, Span]
) -> Iterator[tuple[str, str, Span | None]]:
    """Every name with what it is made to be, and where."""
    for instance in net.instances:
        yield instance.name, "a section", instance.span
    placed = {part.name for instance in net.instances for part in instance.parts()}
    for part in net.parts:
        if isinstance(part, Branch) and part.name not in placed:
            yield part.name, "a part", part.span
    nodes: dict[str, Span | None] = {}
    for piece in (*net.parts, *net.drives):
        for node in piece.nodes:
            nodes.setdefault(node, piece.span)
    for node, span in nodes.items():
        yield node, "a node", span
    for labelled in (*net.parts, *net.drives):
        if labelled.name and not isinstance(labelled, Branch) and labelled.name not in placed:
            yield labelled.name, meanings.labels[labelled.name], labelled.span
    for coupling in net.couplings:
        yield coupling.name, "a coupling", coupling.span
    for name, _ in net.free:
        yield name, "a free symbol", places.get(name)


def _clashes(net: Drawing, meanings: Meanings, places: Mapping[str, Span]) -> Iterator[Fault]:
    first: dict[str, str] = {}
    for name, kind, span in _introduced(net, meanings, places):
        if name not in first:
            first[name] = kind
        elif first[name] == kind == "a coupling":
            pass  # told with the couplings
        elif first[name] == kind == "a part":
            yield Fault(f"{name} is placed twice", "each part has a name of its own", span, parts=(name,))
        else:
            yield Fault(f"{name} is already the name of {first[name]}", "choose another name", span)
    assigned: set[str] = set()
    for name, value in net.values:
        if name in assigned:
            yield Fault(f"{name} has a value already", "give one value only", value.span, parts=(name,))
        assigned.add(name)
        span = places.get(name, value.span)
        if name in meanings.nodes:
            yield Fault(
                f"{name} is a node and has no value", "values belong to parts and symbols", value.span
            )
        elif name in meanings.labels:
            hint = "values belong to parts and symbols"
            yield Fault(f"{name} is {meanings.labels[name]} and has no value", hint, span)


# -- ties ---------------------------------------------------------------------------------------------------------------


def _ties(meanings: Meanings) -> Iterator[Fault]:
    """Ties in a circle, and parts tied to something that contains s."""
    ties = {
        name: [used.name for used in names_in(value.expression)] for name, value in meanings.assigned.items()
    }
    state: dict[str, str] = {}
    with_s: set[str] = set()
    for root, first in ties.items():
        path: list[tuple[str, Iterator[str]]] = []
        if root not in state:
            state[root] = "open"
            path.append((root, iter(first)))
        while path:
            name, rest = path[-1]
            used = next(rest, None)
            if used is None:
                state[name] = "done"
                path.pop()
                if "s" in ties[name] or any(other in with_s for other in ties[name]):
                    with_s.add(name)
            elif used == "s" or used not in ties:
                continue
            elif used not in state:
                state[used] = "open"
                path.append((used, iter(ties[used])))
            elif state[used] == "open":
                circle = [step for step, _ in path]
                circle = [*circle[circle.index(used) :], used]
                shown = " -> ".join(circle if len(circle) <= 6 else [*circle[:5], "...", used])
                message = (
                    f"{name} is tied to itself: {shown}" if len(circle) > 2 else f"{name} is tied to itself"
                )
                span = meanings.assigned[name].span
                yield Fault(message, "give one of them a value of its own", span, parts=tuple(circle[:-1]))
    for name, used_names in ties.items():
        # s written in the value itself is a fault of names, found where it stands.
        if name in with_s and class_letter(name) not in "ZY" and "s" not in used_names:
            other = next(used for used in used_names if used in with_s)
            message = f"{name} is tied to {other}, and {other} contains s"
            yield Fault(message, "only Z and Y may have s in their value", meanings.assigned[name].span)


# -- names in expressions -----------------------------------------------------------------------------------------------


class _Names:
    """Judges single names; ``bad`` holds the expressions (by id) in which one is at fault."""

    def __init__(self, net: Drawing, meanings: Meanings, places: Mapping[str, Span]) -> None:
        self.net, self.meanings, self.places = net, meanings, places
        self.faults: list[Fault] = []
        self.bad: set[int] = set()
        self._uses = list(uses(net))
        self._used = {name.name for use in self._uses for name in names_in(use.expression)}
        self._told: set[str] = set()
        self._parts = NearNames(meanings.branches)
        self._known = [
            *meanings.nodes,
            *meanings.branches,
            *meanings.labels,
            *meanings.couplings,
            *meanings.declared,
        ]

    def judge(self) -> None:
        """Collect the faults."""
        # A symbol that has a value and is used nowhere is what a misspelt name was meant to be.
        unused = (name for name in self.meanings.assigned if name not in self._used)
        near = NearNames([*self._known, *(name for name in unused if name not in self.meanings.branches)])
        for use in self._uses:
            for name in names_in(use.expression):
                fault = _name_fault(name, use, self.meanings)
                unknown = self.meanings.of(name.name) == "unknown"
                if fault is None and unknown:
                    fault = _near_fault(name, self.meanings, self._parts, near)
                if fault is not None:
                    self.bad.add(id(use.expression))
                    if not (unknown and name.name in self._told):
                        self.faults.append(fault.at(use.span))
                    self._told.add(name.name)
        self._targets(NearNames(self._known))

    def _targets(self, near: NearNames) -> None:
        """Names that are given a value and are neither parts nor declared."""
        meanings, nothing = self.meanings, NearNames([])
        for target, value in self.net.values:
            known = any(
                target in names
                for names in (
                    meanings.branches,
                    meanings.couplings,
                    meanings.parameters,
                    meanings.declared,
                    meanings.doubtful,
                )
            )
            if known or target in CLASS_LETTERS or target in self._told or meanings.of(target) != "symbol":
                continue
            name = Name(target, self.places.get(target, value.span))
            fault = _near_fault(name, meanings, self._parts, nothing if target in self._used else near)
            if fault is None and is_part_name(target) and target not in self._used:
                hint = f"place it: a -- {target} -- b; or say: free {target}"
                fault = Fault(
                    f"{target} has a value and stands in no chain", hint, name.span, parts=(target,)
                )
            if fault is not None:
                self.faults.append(fault)


def _near_fault(name: Name, meanings: Meanings, parts: NearNames, others: NearNames) -> Fault | None:
    close = near_name(name, meanings, parts, others)
    if close is None or close == name.name:
        return None
    hint = f"did you mean {close}? If it is meant as a free symbol, say: free {name.name}"
    return Fault(f"{name.name} is not known", hint, name.span)


def _name_fault(name: Name, use: Use, meanings: Meanings) -> Fault | None:
    text = name.name
    said: tuple[str, str] | None = None
    match meanings.of(text):
        case "s" if not use.takes_s:
            if use.where == "read":
                said = "what is read cannot contain s", "read a voltage or a current, such as v_L1 or i_C1"
            else:
                said = "s may stand in the value of Z and Y only", "write an impedance: Z1 = R/(1 + s*R*C)"
        case "voltage" | "current" as what if use.where == "value":
            hint = "a source that follows it is a law: hold out = ..., push into out = ..."
            shown = f"{text} is the {what}" if text[1:2] == "_" else f"{text} is a node, its name a voltage,"
            shown += f" of {text[2:]}" if text[1:2] == "_" else ""
            said = f"{shown} and no value can depend on it", hint
        case "gnd":
            said = "gnd is the reference, its voltage is 0", "leave it out"
        case "label":
            said = f"{text} is {meanings.labels[text]}", f"its current is i_{text}"
        case "no voltage":
            other = text[2:]
            if other in meanings.labels:
                said = f"{text}: {other} is {meanings.labels[other]}", "v_ goes with a part or a node"
            else:
                said = _nothing_called(text, [*meanings.branches, *meanings.shown_nodes], "part or node")
                if other.isdigit():
                    said = (
                        f"the network has no node {other}",
                        f"nodes: {', '.join(meanings.shown_nodes[:12])}",
                    )
        case "no current":
            said = _nothing_called(text, [*meanings.branches], "part")
        case "reserved":
            said = f"{text} is a word of the notation", "choose another name"
        case "unknown" if text == "pi":
            said = "pi is no fraction, and values are exact fractions", "give angular frequencies in rad/s"
    return Fault(said[0], said[1], name.span) if said else None


def _nothing_called(text: str, known: list[str], what: str) -> tuple[str, str]:
    prefix, name = text[:2], text[2:]
    close = nearest(name, known)
    hint = f"did you mean {prefix}{close[0]}?" if close else ""
    if not hint and known:
        hint = "there are " + ", ".join(f"{prefix}{other}" for other in known[:8])
    return f"{text}: the network has no {what} {name}", hint
