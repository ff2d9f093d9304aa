"""What each name of a network means: node, part, law, symbol; and which names look like a slip of the pen.

Names one edit apart (a letter more, less, other, two exchanged, or only the case) are found by the words that
are left when one letter is taken away, so that comparing thousands of names stays linear.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

from symnet.circuit.parts import (
    CLASS_LETTERS,
    GROUND,
    Branch,
    CurrentLaw,
    OpAmp,
    VoltageLaw,
    class_letter,
    dimension_of_class,
)
from symnet.circuit.series import is_hidden
from symnet.errors import Span
from symnet.expressions import Expression, Name, names_in
from symnet.quantities import AMPERE, HERTZ, VOLT, Dimension

if TYPE_CHECKING:
    from symnet.circuit.drawing import Drawing

__all__ = ["RESERVED", "Meanings", "NearNames", "Use", "is_part_name", "one_edit", "uses"]

#: Words of the notation that cannot be names.
RESERVED: Final = frozenset(
    {
        *("drive", "read", "hold", "push", "free", "notation", "current", "into", "from", "to", "as", "with"),
        *("define", "done", "couple", "let", "node"),
    }
)

_LABELS: Final = {VoltageLaw: "a law", CurrentLaw: "a law", OpAmp: "an op amp"}


def is_part_name(name: str) -> bool:
    """Whether a name is that of a branch: it begins with R, L, C, Z or Y."""
    return class_letter(name) in CLASS_LETTERS


@dataclass(frozen=True, slots=True)
class Use:
    """An expression of the network and where it stands: a hold, a push, a read or the value of ``target``."""

    where: str  # "hold", "push", "read" or "value"
    target: str
    expression: Expression
    span: Span | None = None

    @property
    def takes_s(self) -> bool:
        """Whether the Laplace variable may stand in it."""
        return self.is_law or (self.where == "value" and class_letter(self.target) in "ZY")

    @property
    def is_law(self) -> bool:
        """Whether it is the right-hand side of a hold or push."""
        return self.where in {"hold", "push"}


def uses(net: Drawing) -> Iterator[Use]:
    """Every expression of the network: laws, reads, values."""
    for part in net.parts:
        if isinstance(part, VoltageLaw | CurrentLaw):
            yield Use("hold" if isinstance(part, VoltageLaw) else "push", part.name, part.value, part.span)
    for read in net.reads:
        yield Use("read", "", read, read.span)
    for name, value in net.values:
        yield Use("value", name, value.expression, value.span)


class Meanings:
    """Who is who in one network. ``doubtful`` names come from lines that could not be read."""

    def __init__(self, net: Drawing, doubtful: Iterable[str] = (), terminals: Iterable[str] = ()) -> None:
        self.doubtful = frozenset(doubtful)
        self.branches = {part.name: part for part in net.parts if isinstance(part, Branch)}
        self.labels = {part.name: _LABELS[type(part)] for part in net.parts if not isinstance(part, Branch)}
        self.labels |= {drive.name: "a drive" for drive in net.drives if drive.name}
        self.nodes = {
            node: None for piece in (*net.parts, *net.drives, *net.instances) for node in piece.nodes
        }
        self.nodes |= dict.fromkeys(terminals)
        self.nodes.pop(GROUND, None)
        self.couplings = {coupling.name: coupling for coupling in net.couplings}
        self.parameters = {name for instance in net.instances for name in instance.parameters()}
        self.declared = dict(net.free)
        self.assigned = dict(net.values)

    @property
    def shown_nodes(self) -> list[str]:
        """The nodes that have a name of their own."""
        return [node for node in self.nodes if not is_hidden(node)]

    def of(self, name: str) -> str:
        """The meaning of a name in an expression, in one word."""
        if name == "s":
            return "s"
        if name in {GROUND, f"v_{GROUND}"}:
            return "gnd"
        if name in self.nodes:
            return "voltage"
        if name in self.branches:
            return "part"
        known = (self.declared, self.assigned, self.couplings, self.parameters)
        if any(name in names for names in known):
            return "symbol"
        if name in self.doubtful or (name[1:2] == "_" and name[2:] in self.doubtful):
            return "doubtful"
        if name in self.labels:
            return "label"
        if name.startswith("v_") and name[2:]:
            return "voltage" if name[2:] in self.branches or name[2:] in self.nodes else "no voltage"
        if name.startswith("i_") and name[2:]:
            return "current" if name[2:] in self.branches or name[2:] in self.labels else "no current"
        return "reserved" if name in RESERVED else "unknown"

    def dimension(self, name: str) -> Dimension | None:
        """The dimension that a name has by what it is; None for a symbol whose use decides it."""
        match self.of(name):
            case "s":
                return HERTZ
            case "voltage":
                return VOLT
            case "current":
                return AMPERE
            case "part" | "symbol" | "unknown":
                if name in self.couplings:
                    return self.couplings[name].dimension
                return dimension_of_class(name) or self.declared.get(name)
        return None

    def free_symbols(self, net: Drawing) -> tuple[str, ...]:
        """The symbols that are no parts: those declared, then those with a value, then those only used."""
        found = dict.fromkeys(self.declared)
        for name, _ in net.values:
            if name not in self.branches and name not in self.couplings:
                found[name] = None
        for use in uses(net):
            for used in names_in(use.expression):
                if self.of(used.name) in {"symbol", "unknown"} and used.name not in self.couplings:
                    found[used.name] = None
        return tuple(found)


def one_edit(one: str, two: str) -> bool:
    """Whether one letter more, less or other, or two exchanged, or the case alone, makes one into the other.

    >>> one_edit("vout", "Vout"), one_edit("gian", "gain"), one_edit("a1", "b2")
    (True, True, False)
    """
    if one == two or abs(len(one) - len(two)) > 1:
        return False
    if one.lower() == two.lower():
        return True
    k = next((k for k, (x, y) in enumerate(zip(one, two, strict=False)) if x != y), min(len(one), len(two)))
    if len(one) != len(two):
        longer, shorter = (one, two) if len(one) > len(two) else (two, one)
        return longer[k + 1 :] == shorter[k:]
    return one[k + 1 :] == two[k + 1 :] or (
        one[k : k + 2] == two[k : k + 2][::-1] and one[k + 2 :] == two[k + 2 :]
    )


class NearNames:
    """An index of names that finds those one edit away."""

    def __init__(self, names: Iterable[str]) -> None:
        self._index: dict[str, list[str]] = {}
        for name in dict.fromkeys(names):
            for key in _keys(name):
                self._index.setdefault(key, []).append(name)

    def to(self, name: str) -> list[str]:
        """The names one edit away, those that differ in case alone first."""
        found = dict.fromkeys(k for key in _keys(name) for k in self._index.get(key, ()) if one_edit(name, k))
        return sorted(found, key=lambda k: k.lower() != name.lower())


def _keys(name: str) -> set[str]:
    low = name.lower()
    return {low, *(low[:k] + low[k + 1 :] for k in range(len(low)))}


def near_name(name: Name, meanings: Meanings, parts: NearNames, others: NearNames) -> str | None:
    """The known name that an unknown one was probably meant to be, or None.

    A bare class letter is always a symbol. Names of parts are compared with parts of the same letter at any
    length, since ``Z1 = R1 + s*L1`` is a good text; others only when both have three letters or the case alone
    differs: mu and m, g and gm are different names.
    """
    text = name.name
    if text in CLASS_LETTERS:
        return None
    for known in [*parts.to(text), *others.to(text)]:
        if known in meanings.doubtful:
            continue
        same_case = known.lower() == text.lower()
        both_parts = (
            class_letter(text) == class_letter(known) and is_part_name(text) and known in meanings.branches
        )
        if same_case or both_parts or (len(text) >= 3 and len(known) >= 3 and not is_part_name(text)):
            return known
    return None
