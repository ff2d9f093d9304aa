"""What differs between two drawings: parts added, removed, moved; laws and values changed; drives and reads.

Parts are the same part when they have the same name; laws that were given no name are matched by what they say,
since their names count lines. A node of the first drawing that is gone, and one of the second that is new, are one
node renamed when parts agree on it (most of them, each node once); so a new name for a node does not move the parts
on it. The order of writing and the declarations of free symbols are no difference; the direction of a part is one,
since the sign of its current hangs on it.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction

from symnet.circuit.network import Network
from symnet.circuit.parts import Branch, Coupling, CurrentLaw, Drive, Part, Value, VoltageLaw
from symnet.circuit.series import is_hidden
from symnet.expressions import Expression, Name, Number, substitute

__all__ = ["Changes", "Moved", "Revalued", "changes"]


@dataclass(frozen=True, slots=True)
class Moved:
    """A part of both drawings that lies between other nodes, or a law that says something else."""

    name: str
    before: Part
    after: Part

    @property
    def is_turned(self) -> bool:
        """Whether a two-terminal part lies between the same nodes, the other way round."""
        return len(self.before.nodes) == 2 and self.before.nodes == self.after.nodes[::-1]


@dataclass(frozen=True, slots=True)
class Revalued:
    """A name of both drawings with another value or tolerance; None where it is a symbol without value."""

    name: str
    before: Value | None
    after: Value | None

    @property
    def relative(self) -> Fraction | None:
        """after/before - 1, exact, where both are numbers and the first is not zero."""
        numbers = [value.expression for value in (self.before, self.after) if value is not None]
        if len(numbers) == 2 and isinstance(numbers[0], Number) and isinstance(numbers[1], Number):
            first, second = numbers[0].value, numbers[1].value
            return second / first - 1 if first else None
        return None


@dataclass(frozen=True, slots=True)
class Changes:
    """The differences between two drawings, in the order of writing; false when there is none.

    ``renamed`` are pairs of node names; ``moved`` names the nodes as each drawing does. ``drives``, ``reads``
    and ``couplings`` are those of only one drawing: (gone, new).
    """

    added: tuple[Part, ...] = ()
    removed: tuple[Part, ...] = ()
    moved: tuple[Moved, ...] = ()
    relaid: tuple[Moved, ...] = ()
    """Laws between the same nodes whose expression or kind has changed."""
    values: tuple[Revalued, ...] = ()
    renamed: tuple[tuple[str, str], ...] = ()
    drives: tuple[tuple[Drive, ...], tuple[Drive, ...]] = ((), ())
    reads: tuple[tuple[Expression, ...], tuple[Expression, ...]] = ((), ())
    couplings: tuple[tuple[Coupling, ...], tuple[Coupling, ...]] = ((), ())

    def __bool__(self) -> bool:
        lists = (self.added, self.removed, self.moved, self.relaid, self.values, self.renamed)
        return any(lists) or any(self.drives) or any(self.reads) or any(self.couplings)


def changes(before: Network, after: Network) -> Changes:
    """The differences between two networks as drawn.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- out -- C1 = 10n -- gnd; drive in; read out")
    >>> found = changes(net, net.add("out -- RL = 10k -- gnd").with_values(C1="12n"))
    >>> [part.name for part in found.added], found.values[0].name, found.values[0].relative
    (['RL'], 'C1', Fraction(1, 5))
    >>> bool(changes(net, sn.network("drive in; read out; C1 = 10n; out -- C1 -- gnd; in -- R1 -- out")))
    False
    """
    pairs, removed, added = _matched(before, after)
    renamed = _renamed(before, after, pairs)
    moved, relaid = [], []
    for old, new in pairs:
        translated = _translated(old, renamed)
        if translated.nodes != new.nodes:
            moved.append(Moved(old.name, old, new))
        elif replace(translated, name=new.name) != new:
            relaid.append(Moved(old.name, old, new))
    old_drives = tuple(_drive_renamed(drive, renamed) for drive in before.drives)
    old_reads = tuple(_reads_renamed(read, renamed) for read in before.reads)
    return Changes(
        tuple(added),
        tuple(removed),
        tuple(moved),
        tuple(relaid),
        tuple(_values(before, after)),
        tuple((old, new) for old, new in renamed.items() if not is_hidden(old) and not is_hidden(new)),
        (
            tuple(d for d, known in zip(before.drives, old_drives, strict=True) if known not in after.drives),
            tuple(drive for drive in after.drives if drive not in old_drives),
        ),
        (
            tuple(r for r, known in zip(before.reads, old_reads, strict=True) if known not in after.reads),
            tuple(read for read in after.reads if read not in old_reads),
        ),
        (
            tuple(each for each in before.couplings if each not in after.couplings),
            tuple(each for each in after.couplings if each not in before.couplings),
        ),
    )


def _matched(before: Network, after: Network) -> tuple[list[tuple[Part, Part]], list[Part], list[Part]]:
    """Pairs of one part, then the parts of only the first and of only the second."""
    named = {part.name: part for part in after.parts}
    pairs: list[tuple[Part, Part]] = []
    left: list[Part] = []
    for old in before.parts:
        new = named.get(old.name)
        if new is None or _has_default_name(old) or not _is_same_kind(old, new):
            left.append(old)
        else:
            pairs.append((old, named.pop(old.name)))
    renamed = _renamed(before, after, pairs)
    removed: list[Part] = []
    for says_the_same in (True, False):  # laws without a name: by what they say, and what is left by number
        removed = []
        for old in left:
            if says_the_same:
                told = _translated(old, renamed)
                found = (
                    n for n, new in named.items() if _has_default_name(new) and replace(told, name=n) == new
                )
                name = next(found, None) if _has_default_name(old) else None
            else:
                other = named.get(old.name)
                name = old.name if other is not None and _is_same_kind(old, other) else None
            if name is None:
                removed.append(old)
            else:
                pairs.append((old, named.pop(name)))
        left = removed
    order = {part.name: k for k, part in enumerate(before.parts)}
    return sorted(pairs, key=lambda pair: order[pair[0].name]), removed, list(named.values())


def _is_same_kind(old: Part, new: Part) -> bool:
    laws = isinstance(old, VoltageLaw | CurrentLaw), isinstance(new, VoltageLaw | CurrentLaw)
    return old.name == new.name and (type(old) is type(new) or all(laws))


def _has_default_name(part: Part) -> bool:
    law = isinstance(part, VoltageLaw | CurrentLaw)
    return law and part.name.startswith("law") and part.name[3:].isdigit()


def _renamed(before: Network, after: Network, pairs: list[tuple[Part, Part]]) -> dict[str, str]:
    """Nodes of the first drawing that the second calls something else: most parts in common first."""
    known_after, known_before = set(after.nodes), set(before.nodes)
    gone = {node for node in before.nodes if node not in known_after}
    fresh = {node for node in after.nodes if node not in known_before}
    votes: Counter[tuple[str, str]] = Counter()
    for old, new in pairs:
        if len(old.nodes) == len(new.nodes):
            votes.update(
                (a, b) for a, b in zip(old.nodes, new.nodes, strict=True) if a in gone and b in fresh
            )
    found: dict[str, str] = {}
    for (old_node, new_node), _ in votes.most_common():
        if old_node not in found and new_node not in found.values():
            found[old_node] = new_node
    return found


def _translated(part: Part, renamed: Mapping[str, str]) -> Part:
    """The part with the nodes that have a new name called by it."""

    def new(node: str) -> str:
        return renamed.get(node, node)

    match part:
        case Branch(name, start, end):
            return Branch(name, new(start), new(end))
        case VoltageLaw(name, plus, minus, value):
            return VoltageLaw(name, new(plus), new(minus), _reads_renamed(value, renamed))
        case CurrentLaw(name, start, end, value):
            return CurrentLaw(name, new(start), new(end), _reads_renamed(value, renamed))
        case _:
            return replace(part, plus=new(part.plus), minus=new(part.minus), out=new(part.out))


def _drive_renamed(drive: Drive, renamed: Mapping[str, str]) -> Drive:
    first, second = (renamed.get(node, node) for node in drive.nodes)
    return type(drive)(first, second, drive.name)


def _reads_renamed(expression: Expression, renamed: Mapping[str, str]) -> Expression:
    def new(name: Name) -> Name:
        if name.name.startswith("v_") and name.name[2:] in renamed:
            return Name(f"v_{renamed[name.name[2:]]}")
        return Name(renamed.get(name.name, name.name))

    return substitute(expression, new)


def _values(before: Network, after: Network) -> Iterator[Revalued]:
    old, new = dict(before.values), dict(after.values)
    parts_before = {part.name for part in before.parts}
    parts_before |= {each.name for each in before.couplings}
    one_sided = parts_before ^ {each.name for each in (*after.parts, *after.couplings)}
    for name in dict.fromkeys([*old, *new]):
        if name not in one_sided and old.get(name) != new.get(name):
            yield Revalued(name, old.get(name), new.get(name))
