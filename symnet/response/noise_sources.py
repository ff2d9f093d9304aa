"""The sources of noise of a network, each put into it as a drive of its own.

A resistor has beside it a current source of the density 4kT/R (H. Nyquist, Phys. Rev. 32, 1928, 110-113); a branch Z or
Y, 4kT times the real part of its admittance on the jw axis. Where a law or the read asks for the current through the
branch, a voltage source of 4kT Re Z stands in series with it instead: the current through the part is then the one that
an ammeter in its lead shows, its own noise included. An op amp has its voltage noise in series with the plus input, in
front of everything that its model holds, and a current source to gnd at each input.

Not a source: L and C; the resistors inside the model of an amplifier (Rin, Rout of an op amp stand for what its
transistors do, and what they add is in its en and in), of a transistor (Rpi, Ro), and a resistor that is negative;
laws and transistors, of which only the ohmic resistances Rb and Rg are counted. All this is said with the result.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.circuit.parts import (
    GROUND,
    Branch,
    CurrentDrive,
    CurrentLaw,
    Drive,
    OpAmp,
    Part,
    VoltageDrive,
    VoltageLaw,
)
from symnet.circuit.sections import Instance
from symnet.exact.pieces import named_currents
from symnet.expressions import Expression, Name, Sum, substitute

if TYPE_CHECKING:
    from symnet.circuit.network import Network
    from symnet.response.noise_data import Amplifier

__all__ = ["Source", "Sources", "amplifiers_of", "sources_of"]


@dataclass(frozen=True, slots=True)
class Source:
    """One source: ``kind`` is "thermal", "en" or "in", ``part`` the branch or op amp, ``name`` what is shown.

    A thermal source is a voltage in series with its branch or a current beside it (``is_series``). Of the others
    ``density`` is in V/rtHz or A/rtHz, ``corner`` in Hz.
    """

    name: str
    kind: str
    part: str
    is_series: bool
    density: Fraction = Fraction(0)
    corner: Fraction = Fraction(0)


@dataclass(frozen=True, slots=True)
class Sources:
    """The network with one more drive for each source, what they are, and what is not counted, in sentences."""

    network: Network
    read: Expression
    drives: tuple[str, ...]
    sources: tuple[Source, ...]
    remarks: tuple[str, ...]


#: The resistors inside the models that stand for what a transistor does, and make no thermal noise of their own.
_DYNAMIC: Final = {
    "opamp": ("Rin", "Rout"),
    "ota": ("Rin", "Rout"),
    "cfa": ("Rt", "Rx"),
    "bjt": ("Rpi", "Ro"),
    "fet": ("Ro",),
}


def amplifiers_of(network: Network) -> tuple[str, ...]:
    """The names of op amps, and of other devices with inputs plus and minus, in order of writing."""
    placed = {place.name: place for place in _placed(network.instances)}
    inside = {
        part.name
        for place in placed.values()
        if place.section.origin
        for part in place.parts()
        if isinstance(part, OpAmp)
    }
    found = [part.name for part in network.parts if isinstance(part, OpAmp) and part.name not in inside]
    found += [name for name, place in placed.items() if {"plus", "minus"} <= {*place.section.terminals}]
    return tuple(found)


def sources_of(network: Network, read: Expression, amplifiers: Mapping[str, Amplifier]) -> Sources:
    """Every source of noise of a network as a drive, after the drives that it has."""
    return _Adding(network, read, amplifiers).result()


def _placed(instances: tuple[Instance, ...]) -> Iterator[Instance]:
    """The sections in their places, those inside of others too, under their whole names."""
    for instance in instances:
        yield instance
        nodes = {GROUND: GROUND, **dict(instance.connections)}
        inner = tuple(
            replace(
                each,
                name=f"{instance.name}.{each.name}",
                nodes=tuple(nodes.get(node, f"{instance.name}.{node}") for node in each.nodes),
            )
            for each in instance.section.drawing.instances
        )
        yield from _placed(inner)


class _Adding:
    def __init__(self, network: Network, read: Expression, amplifiers: Mapping[str, Amplifier]) -> None:
        self.network, self.read, self.amplifiers = network, read, amplifiers
        self.parts: dict[str, Part] = {part.name: part for part in network.parts}
        self.placed = {place.name: place for place in _placed(network.instances)}
        self.drives: list[Drive] = []
        self.sources: list[Source] = []
        self.across: dict[str, Expression] = {}

    def result(self) -> Sources:
        dynamic = {
            f"{place.name}.{name}": place
            for place in self.placed.values()
            if place.section.origin
            for name in _DYNAMIC.get(place.section.name, ())
        }
        named = named_currents(self.network, self.read)
        for part in self.network.parts:
            if isinstance(part, Branch) and part.kind in "RZY" and part.name not in dynamic:
                self._thermal(part, is_series=part.name in named)
        for name, data in self.amplifiers.items():
            self._amplifier(name, data)
        changed = replace(
            self.network,
            parts=tuple([self._renamed(self.parts[name]) for name in self.parts]),
            drives=(*self.network.drives, *self.drives),
        )
        names = changed.drive_names[len(self.network.drives) :]
        read = substitute(self.read, self._voltage)
        return Sources(changed, read, names, tuple(self.sources), tuple(self._remarks(dynamic)))

    def _thermal(self, part: Branch, *, is_series: bool) -> None:
        if is_series:
            inner = self._node(f"{part.name}.noise")
            self.parts[part.name] = replace(part, start=inner)
            self._add(VoltageDrive(part.start, inner))
            self.across[f"v_{part.name}"] = _difference(part.start, part.end)
        else:
            self._add(CurrentDrive(part.end, part.start))
        self.sources.append(Source(part.name, "thermal", part.name, is_series))

    def _amplifier(self, name: str, data: Amplifier) -> None:
        plus, minus = self._inputs(name)
        if data.en:
            inner = self._node(f"{name}.noise")
            self._add(VoltageDrive(inner, plus))
            part = self.parts.get(name)
            if isinstance(part, OpAmp):
                self.parts[name] = replace(part, plus=inner)
            else:
                place = self.placed[name]
                nodes = [inner if terminal == "plus" else node for terminal, node in place.connections]
                for each in replace(place, nodes=tuple(nodes)).parts():
                    self.parts[each.name] = each
            self.sources.append(Source(f"en of {name}", "en", name, True, data.en, data.en_corner))
        for sign, node, density in (("plus", plus, data.in_plus), ("minus", minus, data.in_minus)):
            if density and node != GROUND:
                self._add(CurrentDrive(GROUND, node))
                label = f"in of {name}, {sign}"
                self.sources.append(Source(label, "in", name, False, density, data.in_corner))

    def _inputs(self, name: str) -> tuple[str, str]:
        part = self.parts.get(name)
        if isinstance(part, OpAmp):
            return part.plus, part.minus
        nodes = dict(self.placed[name].connections)
        return nodes["plus"], nodes["minus"]

    def _add(self, drive: Drive) -> None:
        name = f"noise {len(self.drives) + 1}"  # no name that can be typed
        self.drives.append(replace(drive, name=name))

    def _node(self, name: str) -> str:
        while name in self.network.nodes or name in self.network.symbols():
            name += "_"
        return name

    def _renamed(self, part: Part) -> Part:
        if isinstance(part, VoltageLaw | CurrentLaw):
            return replace(part, value=substitute(part.value, self._voltage))
        return part

    def _voltage(self, name: Name) -> Expression:
        """The voltage across a branch with its noise inside."""
        return self.across.get(name.name, name)

    def _remarks(self, dynamic: Mapping[str, Instance]) -> Iterator[str]:
        quiet = [
            name
            for name in amplifiers_of(self.network)
            if name not in self.amplifiers and (name in self.parts or self.placed[name].section.origin)
        ]
        if quiet:
            yield f"taken to be noiseless, no noise data given: {', '.join(quiet)}"
        there = [name for name in dynamic if name in self.parts]
        if there:
            yield f"part of a device model and not counted as resistors: {', '.join(there)}"
        transistors = [
            p.name for p in self.placed.values() if p.section.name in {"bjt", "fet"} and p.section.origin
        ]
        if transistors:
            yield f"shot and channel noise of transistors is not included: {', '.join(transistors)}"
        laws = [
            part.name
            for part in self.network.parts
            if isinstance(part, VoltageLaw | CurrentLaw)
            and not any(part.name.startswith(f"{name}.") for name in self.placed)
        ]
        if laws:
            yield f"dependent sources are noiseless: {', '.join(laws)}"


def _difference(plus: str, minus: str) -> Expression:
    voltages = [(sign, Name(f"v_{node}")) for sign, node in ((1, plus), (-1, minus)) if node != GROUND]
    if len(voltages) == 1 and voltages[0][0] > 0:
        return voltages[0][1]
    return Sum(tuple(voltages))
