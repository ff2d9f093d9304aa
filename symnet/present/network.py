"""The network as understood: what was typed, the parts with their values, what drives it, what is read.

This is where a slip of the pencil shows: a free symbol that was meant to be a part, a node with one part only,
a tolerance that was left out. Each note says what is assumed, so that nobody has to know it.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from fractions import Fraction
from typing import Final

from symnet.circuit.names import dimensions, free_symbols
from symnet.circuit.network import Network
from symnet.circuit.notes import notes as remarks
from symnet.circuit.parts import (
    Branch,
    CurrentLaw,
    OpAmp,
    Part,
    Value,
    VoltageDrive,
    VoltageLaw,
    dimension_of_class,
)
from symnet.circuit.sections import Instance
from symnet.circuit.series import spoken
from symnet.circuit.spelling import write_expression
from symnet.circuit.writing import in_hertz, written_argument
from symnet.expressions import Expression, Name, Number, dimension_of, names_in
from symnet.present.blocks import Block, Heading, Items, Line, Table, Typed
from symnet.present.formulas import amount
from symnet.quantities import NUMBER
from symnet.typeset.notation import tree_of
from symnet.typeset.numbers import plain_number

__all__ = ["network_blocks", "notes", "parts_table"]

_KINDS: Final = {"R": "resistor", "L": "inductor", "C": "capacitor", "Z": "impedance", "Y": "admittance"}
#: Rows of a table of parts; a longer one ends with a count.
MOST_PARTS: Final = 60


def network_blocks(network: Network, numbers: Mapping[str, Fraction]) -> tuple[Block, ...]:
    """What was typed, the parts and the notes. ``numbers`` are the values (SI) of the names that have one."""
    return (
        Heading("Network"),
        Typed(network.text or network.to_text()),
        parts_table(network, numbers),
        Items(tuple(notes(network))),
    )


def parts_table(network: Network, numbers: Mapping[str, Fraction]) -> Table:
    """One row for each part: name, what it is, where it lies, value, tolerance."""
    shown = network.parts[:MOST_PARTS]
    rows = [_section_row(instance) for instance in network.instances[:MOST_PARTS]]
    rows += [
        (part.name, _kind(part), _where(part), _worth(network, part, numbers), _tolerance(network, part.name))
        for part in shown
    ]
    rows += [
        (
            each.name,
            "coupling",
            f"{each.first}, {each.second}",
            _value(each.name, worth, numbers) if (worth := network.value(each.name)) else "symbol, no value",
            _tolerance(network, each.name),
        )
        for each in network.couplings
    ]
    known = {*network.part_names, *(each.name for each in network.couplings)}
    rows += [
        (name, "symbol", "", _value(name, value, numbers), _tolerance(network, name))
        for name, value in network.values
        if name not in known
    ]
    header = ("part", "what it is", "from, to", "value", "tolerance")
    return Table(header, tuple(rows), len(network.parts) - len(shown))


def _section_row(instance: Instance) -> tuple[Line, ...]:
    """A section in its place: what it is called, where it is connected, what it was given."""
    free = dict(instance.section.drawing.free)
    given = ", ".join(
        f"{name} = {written_argument(name, value, free.get(name))}"
        if value is not None
        else f"{name}, a symbol"
        for name, value in instance.arguments
    )
    where = ", ".join(f"{terminal} {_place(node)}" for terminal, node in instance.connections)
    return (instance.name, f"section {instance.section.name}", where, given, "")


def _kind(part: Part) -> str:
    match part:
        case Branch():
            return _KINDS[part.kind]
        case VoltageLaw():
            return "voltage law"
        case CurrentLaw():
            return "current law"
        case OpAmp():
            return "op amp, ideal"


def _where(part: Part) -> str:
    if isinstance(part, OpAmp):
        return f"plus {_place(part.plus)}, minus {_place(part.minus)}, out {_place(part.out)}"
    return ", ".join(map(_place, part.nodes))


def _place(node: str) -> str:
    """A node in a sentence: its name, or between which parts it lies."""
    return spoken(node).removeprefix("node ")


def _worth(network: Network, part: Part, numbers: Mapping[str, Fraction]) -> Line:
    if isinstance(part, VoltageLaw | CurrentLaw):
        return ("= ", tree_of(part.value))
    value = network.value(part.name)
    if value is None:
        return "" if isinstance(part, OpAmp) else "symbol, no value"
    return _value(part.name, value, numbers)


def _value(name: str, value: Value, numbers: Mapping[str, Fraction]) -> Line:
    tied = any(True for _ in names_in(value.expression))
    if tied:
        return ("= ", tree_of(value.expression))
    dimension = dimension_of_class(name) or dimension_of(value.expression, {}) or NUMBER
    number = numbers.get(name)
    if number is None and isinstance(value.expression, Number):
        number = value.expression.value
    return ("= ", tree_of(value.expression)) if number is None else amount(number, dimension, digits=6)


def _tolerance(network: Network, name: str) -> str:
    value = network.value(name)
    if value is None or value.tolerance is None:
        return ""
    return f"±{plain_number(100 * value.tolerance)} %"


def notes(network: Network) -> Iterator[Line]:
    """What is assumed, and what looks like a slip."""
    for drive in network.drives:
        called = f"{drive.name}: " if drive.name else ""
        if isinstance(drive, VoltageDrive):
            plus, minus = _place(drive.plus), _place(drive.minus)
            yield f"{called}driven by an ideal voltage source, + at {plus}, - at {minus}; its resistance is zero."
        else:
            start, end = _place(drive.start), _place(drive.end)
            yield f"{called}driven by an ideal current source from {start} into {end}; its conductance is zero."
    for read in network.reads:
        yield f"read: {write_expression(read)}{_read_note(network, read)}."
    known = dimensions(network)
    own = {name for instance in network.instances for name in instance.parameters()}
    for name in free_symbols(network):
        if name in own:
            continue
        dimension = known.get(name)
        unit = (
            "its dimension is open"
            if dimension is None
            else f"in {dimension}"
            if dimension != NUMBER
            else "a number"
        )
        yield f"{name} is a free symbol ({unit}): no part and no node has this name."
    sources = {each.section.name: each.section.origin for each in network.instances}
    yield from (
        f"{name}: a section that ships with symnet; source: {source.removesuffix('.')}."
        for name, source in sources.items()
        if source and not source.startswith("common practice")
    )
    for instance in network.instances:
        for name, value in instance.arguments:
            if value is not None and (hertz := in_hertz(value)):
                yield (
                    f"{instance.name}.{name} = {hertz} stands in H as the angular frequency 2 pi times as large, "
                    "in rad/s, with pi to 40 digits."
                )
    for each in network.couplings:
        pair = f"{each.first} and {each.second}"
        mutual = (
            f"{each.mutual} = {each.name} sqrt({each.first} {each.second})"
            if each.is_coefficient
            else each.name
        )
        yield (
            f"{pair} share flux: {mutual} is their mutual inductance; each has its dot at the end where its chain "
            "enters it."
        )
    valueless = [part.name for part in network.branches() if network.value(part.name) is None]
    if valueless and any(network.value(name) for name in network.part_names):
        yield f"Without a value: {', '.join(valueless)}; figures that need one are left out."
    yield from (f"{note}." for note in remarks(network))
    amplifiers = [part.name for part in network.parts if isinstance(part, OpAmp)]
    if amplifiers:
        are = "are ideal op amps" if len(amplifiers) > 1 else "is an ideal op amp"
        yield (
            f"{', '.join(amplifiers)} {are}: no input current, no voltage between the inputs, no limit of gain or "
            "speed. An ideal op amp gives the same H with plus and minus exchanged: check them on the drawing."
        )


def _read_note(network: Network, read: Expression) -> str:
    if isinstance(read, Name) and (
        read.name in network.nodes or read.name.removeprefix("v_") in network.nodes
    ):
        return ", a voltage against gnd; nothing loads it but the parts above"
    if isinstance(read, Name) and read.name.startswith("i_"):
        name = read.name.removeprefix("i_")
        part = next((branch for branch in network.branches() if branch.name == name), None)
        if part is not None:
            return f", the current through {name}, positive from {_place(part.start)} to {_place(part.end)}"
    return ""
