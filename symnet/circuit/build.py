"""Ways to make a Network: from text, from a file, from named constructors.

A constructor gives a Network with one piece in it; :func:`network` joins pieces and texts.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from os import PathLike
from pathlib import Path
from typing import Final

from symnet.circuit.devices import device_names
from symnet.circuit.network import Network, ValueLike, read_network, value_for
from symnet.circuit.parts import (
    CLASS_LETTERS,
    GROUND,
    Branch,
    CurrentDrive,
    CurrentLaw,
    OpAmp,
    Value,
    VoltageDrive,
    VoltageLaw,
    class_letter,
)
from symnet.circuit.reading import read_expression, read_reading, read_sections, shipped_section
from symnet.circuit.sections import Instance, Section
from symnet.circuit.words import node_fault
from symnet.errors import Fault, LimitError, NotationError, nearest
from symnet.expressions import Expression

__all__ = [
    "admittance",
    "capacitor",
    "define",
    "drive",
    "hold",
    "impedance",
    "inductor",
    "load",
    "network",
    "opamp",
    "place",
    "push",
    "read",
    "resistor",
]

_LARGEST_FILE: Final = 4_000_000

_WORDS: Final = {
    "a resistor": "R",
    "an inductor": "L",
    "a capacitor": "C",
    "an impedance": "Z",
    "an admittance": "Y",
}


def network(*pieces: str | Network) -> Network:
    """A network from text in symnet's notation, from named constructors, or from several of both.

    Never touches the disk: :func:`load` reads a file. Raises NotationError with every fault of the text, each
    with line, column and caret, and WiringError for faults of the wiring.

    >>> import symnet as sn
    >>> typed = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out; R1 = 4.7 kohm")
    >>> built = sn.network(
    ...     sn.resistor("R1", "in", "out", "4.7 kohm"),
    ...     sn.capacitor("C1", "out", "gnd"),
    ...     sn.drive("in"),
    ...     sn.read("out"),
    ... )
    >>> typed == built
    True
    """
    if len(pieces) == 1 and isinstance(pieces[0], str):
        return read_network(pieces[0])
    return Network().add(*pieces)


def load(path: str | PathLike[str]) -> Network:
    """The network in a text file (UTF-8). Raises OSError as open() does, NotationError for what it holds."""
    file = Path(path)
    size = file.stat().st_size
    if size > _LARGEST_FILE:
        raise LimitError(
            Fault(f"{file.name} has {size} bytes; the limit is {_LARGEST_FILE}", "is it the right file?")
        )
    data = file.read_bytes()
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data[: error.start].count(b"\n") + 1
        raise NotationError(
            Fault(f"{file.name} is not text in UTF-8 (byte {error.start}, line {line})", "save it as UTF-8")
        ) from None
    return read_network(text)


def _branch(word: str, name: str, nodes: tuple[str, str], value: ValueLike) -> Network:
    letter = _WORDS[word]
    if class_letter(name) != letter:
        raise NotationError(
            Fault(
                f"{name} is no name for {word}",
                f"its name begins with {letter}, as on the drawing",
                parts=(name,),
            )
        )
    for node in nodes:
        if class_letter(node) in {"", *CLASS_LETTERS}:
            raise NotationError(
                Fault(
                    f"{node or 'an empty name'} cannot be the name of a node",
                    f"names that begin with {', '.join(CLASS_LETTERS)} are parts",
                    nodes=(node,),
                )
            )
    part = Branch(name, *nodes)
    if value is None:
        return Network(parts=(part,))
    return Network(parts=(part,), values=((name, value_for(name, value)),))


def resistor(name: str, start: str, end: str, value: ValueLike = None) -> Network:
    """A resistor between two nodes; value in ohm, or text such as ``"4.7 kohm ±1%"``. Current runs start to end."""
    return _branch("a resistor", name, (start, end), value)


def inductor(name: str, start: str, end: str, value: ValueLike = None) -> Network:
    """An inductor between two nodes; value in henry, or text such as ``"10 mH"``."""
    return _branch("an inductor", name, (start, end), value)


def capacitor(name: str, start: str, end: str, value: ValueLike = None) -> Network:
    """A capacitor between two nodes; value in farad, or text such as ``"22 nF"``."""
    return _branch("a capacitor", name, (start, end), value)


def impedance(name: str, start: str, end: str, value: ValueLike = None) -> Network:
    """An impedance between two nodes; value in ohm, or an expression in s such as ``"R/(1 + s*R*C)"``."""
    return _branch("an impedance", name, (start, end), value)


def admittance(name: str, start: str, end: str, value: ValueLike = None) -> Network:
    """An admittance between two nodes; value in siemens, or an expression in s such as ``"G + s*C"``."""
    return _branch("an admittance", name, (start, end), value)


def opamp(name: str, plus: str, minus: str, out: str) -> Network:
    """An ideal op amp; its output current returns through gnd."""
    return Network(parts=(OpAmp(name, plus, minus, out),))


def hold(name: str, plus: str, value: str, minus: str = GROUND) -> Network:
    """A voltage law: the voltage from plus to minus equals ``value``, e.g. ``hold("amp1", "out", "mu*(p - m)")``."""
    return Network(parts=(VoltageLaw(name, plus, minus, _expression(value)),))


def push(name: str, start: str, end: str, value: str) -> Network:
    """A current law: the current from start to end (through the source) equals ``value`` in ampere."""
    return Network(parts=(CurrentLaw(name, start, end, _expression(value)),))


def define(
    name: str, terminals: str | Sequence[str], inside: str | Network, **parameters: ValueLike
) -> Section:
    """A section as ``define ... done`` draws it, to be placed with :func:`place`.

    ``terminals`` are nodes of ``inside``, a text or a network without drives and reads; ``parameters`` its names
    that each place may give a value, with their defaults, None for none. Raises NotationError with every fault.

    >>> import symnet as sn
    >>> rc = sn.define("rc", "in out", "in -- R -- out -- C -- gnd", R=None, C="10 nF")
    >>> sn.network(sn.place("A1", rc, {"in": "a", "out": "b"}, R="2 kohm")).part_names
    ('A1.R', 'A1.C')
    """
    nodes = terminals.replace(",", " ").split() if isinstance(terminals, str) else list(terminals)
    drawn = inside if isinstance(inside, str) else inside.to_text()
    given = ", ".join(parameters)
    header = f"define {name}({', '.join(nodes)}{f'; {given}' if given else ''})"
    section = read_sections(f"{header}\n{drawn}\ndone")[name]
    free = dict(section.drawing.free)
    values = tuple(
        (word, None if value is None else value_for(word, value, free.get(word)))
        for word, value in parameters.items()
    )
    return replace(section, parameters=values)


def place(name: str, section: Section | str, nodes: Mapping[str, str], **values: ValueLike) -> Network:
    """A section in its place: ``nodes`` says to which node each terminal is connected, ``values`` what is given.

    ``section`` is what :func:`define` gives, or the name of a device or section that ships with symnet; None as a
    value leaves a symbol. Raises NotationError for terminals and parameters that it has not or that are missing.

    >>> import symnet as sn
    >>> net = sn.network(
    ...     sn.resistor("R1", "in", "m"),
    ...     sn.resistor("R2", "m", "out"),
    ...     sn.place("U1", "opamp", {"plus": "gnd", "minus": "m", "out": "out"}, gbw="1 MHz"),
    ...     sn.drive("in"),
    ...     sn.read("out"),
    ... )
    >>> print(sn.derive(net))
    out/in = -(R2/R1)/(1 + s*(1 + R2/R1)/U1.gbw)
    """
    if isinstance(section, str):
        found = shipped_section(section, frozenset(values))
        if found is None:
            close = nearest(section, device_names())
            hint = f"did you mean {close[0]}?" if close else f"there are {', '.join(device_names()[:12])}"
            raise NotationError(Fault(f"{section} is no device or section that ships with symnet", hint))
        section = found
    known = dict(section.parameters)
    strange = [word for word in (*nodes, *values) if word not in section.terminals and word not in known]
    missing = [terminal for terminal in section.terminals if terminal not in nodes]
    if strange or missing:
        said = f"{name} has no {strange[0]}" if strange else f"{name} has no node at {' and '.join(missing)}"
        listed = f"terminals {', '.join(section.terminals)}; parameters {', '.join(known) or 'none'}"
        raise NotationError(Fault(said, listed, parts=(name,)))
    wrong = [node_fault(node) for node in nodes.values()]
    faults = [Fault(*each) for each in wrong if each is not None]
    if faults:
        raise NotationError(faults)
    free = dict(section.drawing.free)
    arguments: list[tuple[str, Value | None]] = []
    for word in known:
        given = values.get(word)
        if given is not None:
            arguments.append((word, value_for(f"{name}.{word}", given, free.get(word))))
        elif word in values:
            arguments.append((word, None))
    instance = Instance(
        name, section, tuple(nodes[terminal] for terminal in section.terminals), tuple(arguments)
    )
    return Network(
        parts=instance.parts(),
        values=instance.values(),
        free=instance.free(),
        couplings=instance.couplings(),
        instances=(instance,),
    )


def drive(plus: str, minus: str = GROUND, name: str | None = None, *, current: bool = False) -> Network:
    """What drives the network: a voltage from plus to minus, or with ``current=True`` a current into plus.

    The current leaves through ``minus``.
    """
    if current:
        return Network(drives=(CurrentDrive(minus, plus, name),))
    return Network(drives=(VoltageDrive(plus, minus, name),))


def read(what: str) -> Network:
    """What is read: a node, ``"a - b"``, ``"i_R1"``, or a linear expression of voltages and currents."""
    return Network(reads=(read_reading(what),))


def _expression(text: str) -> Expression:
    return read_expression(text)
