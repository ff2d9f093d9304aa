"""From a network back to text that reads to an equal network.

Parts keep their order, since the order of writing is part of the network; branches that follow one another are
written as one chain, and nameless nodes go back into the series they came from. Values stand below, each exact.
"""

from __future__ import annotations

import itertools
from collections.abc import Iterable, Iterator
from typing import TYPE_CHECKING

from symnet.circuit.parts import (
    GROUND,
    Branch,
    Coupling,
    CurrentDrive,
    CurrentLaw,
    Drive,
    OpAmp,
    Part,
    Value,
    VoltageDrive,
    VoltageLaw,
    dimension_of_class,
)
from symnet.circuit.sections import Instance, Section, placed_values
from symnet.circuit.series import Group, Leaf, Series, ends_at, runs, settled
from symnet.circuit.spelling import write_dimension, write_expression, write_quantity
from symnet.expressions import Number
from symnet.quantities import HERTZ, TWO_PI, Dimension, engineering

if TYPE_CHECKING:
    from symnet.circuit.drawing import Drawing

__all__ = [
    "default_labels",
    "in_hertz",
    "write_coupling",
    "write_drive",
    "write_instance",
    "write_network",
    "write_part",
    "write_value",
    "written_argument",
]

_LONGEST_CHAIN = 6  # parts in one line
_SHORT_DIGITS = 12  # behind the point of a frequency that someone typed in Hz


def write_network(net: Drawing) -> str:
    """The whole network in the notation, one statement a line.

    >>> from symnet.circuit.reading import read_drawing
    >>> print(write_network(read_drawing("in--R1--out--C1=1e-9||R2--gnd".replace("=1e-9", "") + ";drive in")))
    in -- R1 -- out -- C1 || R2 -- gnd
    drive in
    """
    lines = [line for section in _sections(net) for line in _definition(section)]
    lines += _parts(net)
    lines += _couplings(net)
    lines += [write_drive(drive) for drive in net.drives]
    lines += [f"read {write_expression(read)}" for read in net.reads]
    lines += list(_free(net))
    lines += list(_values(net))
    return "\n".join(lines)


# -- parts ------------------------------------------------------------------------------------------------------------


def _parts(net: Drawing) -> Iterator[str]:
    silent = _default_named(net)
    # A network that was changed in Python may have nameless nodes where no series is left.
    parts = settled(net.parts)
    count = ends_at(parts)
    placed = {part.name: instance for instance in net.instances for part in instance.parts()}
    for instance, own in itertools.groupby(parts, key=lambda part: placed.get(part.name)):
        if instance is not None:
            yield write_instance(instance)
            continue
        for piece in runs(tuple(own), count):
            if isinstance(piece, list):
                yield from _chains(piece)
            else:
                yield write_part(piece, label=piece.name not in silent)


def _couplings(net: Drawing) -> Iterator[str]:
    placed = {coupling for instance in net.instances for coupling in instance.couplings()}
    for coupling in net.couplings:
        if coupling not in placed:
            yield write_coupling(coupling)


def write_coupling(coupling: Coupling) -> str:
    """A coupling as a statement; its value stands with the others."""
    return f"couple {coupling.first} to {coupling.second} with {coupling.name}"


def _sections(net: Drawing) -> Iterator[Section]:
    """The sections that a text must define, each after those that it places."""
    seen: list[Section] = []
    waiting = [(instance.section, False) for instance in reversed(net.instances)]
    while waiting:
        section, done = waiting.pop()
        if section.origin or section in seen:
            continue
        if done:
            seen.append(section)
            yield section
        else:
            waiting.append((section, True))
            waiting += [(inner.section, False) for inner in reversed(section.drawing.instances)]


def _definition(section: Section) -> Iterator[str]:
    free = dict(section.drawing.free)
    given = [
        name if default is None else f"{name} = {write_value(name, default, free.get(name))}"
        for name, default in section.parameters
    ]
    parameters = f"; {', '.join(given)}" if given else ""
    yield f"define {section.name}({', '.join(section.terminals)}{parameters})"
    inside = section.drawing
    lines = [*_parts(inside), *_couplings(inside), *_free(inside), *_values(inside)]
    yield from (f"  {line}" for line in lines)
    yield "done"


def write_instance(instance: Instance) -> str:
    """A section in its place as a statement."""
    free = dict(instance.section.drawing.free)
    arguments = [f"{terminal}={node}" for terminal, node in instance.connections]
    for name, value in instance.arguments:
        text = "" if value is None else written_argument(name, value, free.get(name))
        arguments.append(f"{name}={text}" if text else name)
    return f"{instance.name}: {instance.section.name}({', '.join(arguments)})"


def written_argument(name: str, value: Value, dimension: Dimension | None = None) -> str:
    """The value of a section's parameter, a frequency in Hz where it was given so."""
    return in_hertz(value) or write_value(name, value, dimension)


def in_hertz(value: Value) -> str:
    """An angular frequency that was given in Hz, as it was given; empty for any other value."""
    if not isinstance(value.expression, Number) or value.expression.dimension != HERTZ:
        return ""
    hertz = value.expression.value / TWO_PI
    if 10**_SHORT_DIGITS % hertz.denominator:
        return ""
    return engineering(hertz, HERTZ, exact=True) + _tolerance(value)


def write_part(part: Part, *, label: bool = True) -> str:
    """One part as a statement; ``label`` says whether a law shows its name."""
    match part:
        case Branch(name, start, end):
            return f"{start} -- {name} -- {end}"
        case VoltageLaw(name, plus, minus, value):
            text = f"hold {_pair(plus, minus)} = {write_expression(value)}"
        case CurrentLaw(name, start, end, value):
            text = f"push {_ends(start, end)} = {write_expression(value)}"
        case OpAmp(name, plus, minus, out):
            return f"{name}: opamp(plus={plus}, minus={minus}, out={out})"
    return f"{text} as {name}" if label else text


def default_labels(count: int, taken: Iterable[str]) -> list[str]:
    """The names that laws without a name of their own get, in order: law1, law2, ...

    >>> default_labels(2, ["law1", "a"])
    ['law2', 'law3']
    """
    used = set(taken)
    found: list[str] = []
    number = 1
    while len(found) < count:
        if f"law{number}" not in used:
            found.append(f"law{number}")
        number += 1
    return found


def _default_named(net: Drawing) -> set[str]:
    """The laws that would get their name anyhow when it is not written."""
    laws = [part.name for part in net.parts if isinstance(part, VoltageLaw | CurrentLaw)]
    silent = [name for name in laws if name.startswith("law") and name[3:].isdigit()]
    if not silent:
        return set()
    from symnet.circuit.names import names_of

    taken = names_of(net) - set(silent)
    return set(silent) if default_labels(len(silent), taken) == silent else set()


def _chains(edges: list[tuple[str, Group, str]]) -> Iterator[str]:
    text, last, count = "", "", 0
    for start, group, end in edges:
        if text and start == last and last != GROUND and count < _LONGEST_CHAIN:
            text += f" -- {_group(group)} -- {end}"
            count += 1
        else:
            if text:
                yield text
            text, count = f"{start} -- {_group(group)} -- {end}", 1
        last = end
    if text:
        yield text


def _group(group: Group, *, inside: bool = False) -> str:
    """A group as a link of a chain. Groups are at most as deep as the parentheses that were read."""
    if isinstance(group, Leaf):
        return group.name
    if isinstance(group, Series):
        text = " + ".join(_group(item, inside=True) for item in group.items)
        return f"({text})" if inside else text
    text = " || ".join(_group(item, inside=True) for item in group.items)
    return f"({text})" if inside else text


def _pair(plus: str, minus: str) -> str:
    return plus if minus == GROUND else f"{plus} - {minus}"


def _ends(start: str, end: str) -> str:
    return f"into {end}" if start == GROUND else f"from {start} to {end}"


def write_drive(drive: Drive) -> str:
    """A drive as a statement."""
    match drive:
        case VoltageDrive(plus, minus, name):
            text = f"drive {_pair(plus, minus)}"
        case CurrentDrive(start, end, name):
            text = f"drive current {_ends(start, end)}"
    return f"{text} as {name}" if name else text


# -- values -----------------------------------------------------------------------------------------------------------


def _free(net: Drawing) -> Iterator[str]:
    waiting: list[str] = []
    placed = {name for instance in net.instances for name, _ in instance.free()}
    for name, dimension in net.free:
        if name in placed:
            continue
        if dimension is None:
            waiting.append(name)
            continue
        if waiting:
            yield f"free {', '.join(waiting)}"
            waiting = []
        yield f"free {name} in {write_dimension(dimension)}"
    if waiting:
        yield f"free {', '.join(waiting)}"


def _values(net: Drawing) -> Iterator[str]:
    """One line for each run of names with the same number."""
    declared = dict(net.free)
    placed = placed_values(net.instances)
    names: list[str] = []
    last = ""
    for name, value in net.values:
        if placed.get(name) == value:
            continue
        text = write_value(name, value, declared.get(name))
        alike = isinstance(value.expression, Number) and text == last
        if names and not alike:
            yield f"{', '.join(names)} = {last}"
            names = []
        names.append(name)
        last = text
    if names:
        yield f"{', '.join(names)} = {last}"


def write_value(name: str, value: Value, dimension: Dimension | None = None) -> str:
    """What stands right of the equals sign; ``dimension`` is the one that the name has been declared with."""
    expression = value.expression
    if isinstance(expression, Number):
        text = write_quantity(expression.value, expression.dimension, dimension_of_class(name) or dimension)
    else:
        text = write_expression(expression)
    return text + _tolerance(value)


def _tolerance(value: Value) -> str:
    if value.tolerance is None:
        return ""
    return f" ±{engineering(value.tolerance * 100, exact=True)}%"
