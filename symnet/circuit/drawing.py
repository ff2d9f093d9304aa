"""The drawing as plain data: parts between nodes, drives, reads, values, and what can be asked of them.

This is what a reader of text hands on. :class:`symnet.circuit.network.Network` adds what a user does with it.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field

from symnet.circuit.parts import GROUND, Branch, Coupling, Drive, Part, Value
from symnet.circuit.sections import Instance
from symnet.errors import Fault, UnknownNameError, nearest
from symnet.expressions import Expression, names_in
from symnet.quantities import Dimension

__all__ = ["Drawing"]


@dataclass(frozen=True, slots=True)
class Drawing:
    """What was drawn. ``values`` holds what each part or symbol is worth, in the order of writing; a part without
    an entry stays a symbol. ``free`` are the symbols declared with ``free``; ``couplings`` tie coils by
    their flux; ``instances`` are the sections in their places, whose parts are among the parts; ``text`` is the text as typed.
    """

    parts: tuple[Part, ...] = ()
    drives: tuple[Drive, ...] = ()
    reads: tuple[Expression, ...] = ()
    values: tuple[tuple[str, Value], ...] = ()
    free: tuple[tuple[str, Dimension | None], ...] = ()
    couplings: tuple[Coupling, ...] = ()
    instances: tuple[Instance, ...] = ()
    text: str | None = field(default=None, compare=False, repr=False)

    @property
    def nodes(self) -> tuple[str, ...]:
        """The nodes other than gnd, in order of appearance; those inside a series have a name with ``+``."""
        found: dict[str, None] = {}
        for piece in (*self.parts, *self.drives, *self.instances):
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
        found.update(dict.fromkeys(coupling.name for coupling in self.couplings))
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

    def unknown(self, name: str, known: Iterable[str], what: str) -> UnknownNameError:
        """The error, with the nearest known name, for a name that the network does not have."""
        close = nearest(name, known)
        hint = f"did you mean {close[0]}?" if close else "known: " + ", ".join(list(known)[:20])
        return UnknownNameError(Fault(f"the network has no {what} called {name}", hint))
