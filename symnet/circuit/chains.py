"""Chains and values: what stands between two dashes, and right of an equals sign.

The grammar takes any word in any place of a chain; here the places are judged, so that ``in -- R1 -- C1 -- out``
gets a sentence about the node that was left out instead of a syntax error.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Any

from symnet.circuit.drafts import Draft, RightSide
from symnet.circuit.formulas import Formulas
from symnet.circuit.lines import Line
from symnet.circuit.meanings import RESERVED, is_part_name
from symnet.circuit.parts import CLASS_LETTERS, class_letter
from symnet.circuit.series import Beside, Group, Leaf, Series, leaves, wire
from symnet.circuit.words import node_fault, plain_fault
from symnet.errors import Span, SymnetError
from symnet.quantities import read_number

if TYPE_CHECKING:
    from lark import Token

__all__ = ["Chains"]


@dataclass(frozen=True, slots=True)
class _Link:
    group: Group
    span: Span
    value: RightSide | None = None

    @property
    def word(self) -> Leaf | None:
        return self.group if isinstance(self.group, Leaf) else None


class Chains(Formulas):
    """Adds a chain or an assignment to a draft, and judges names for all other statements."""

    def __init__(self, line: Line, draft: Draft) -> None:
        super().__init__(line)
        self.draft = draft

    # -- names --------------------------------------------------------------------------------------------------

    def on_word(self, children: Sequence[Token]) -> Leaf:
        """A word of a chain or a sentence: a node or a part, or the number of a node."""
        return Leaf(self.name(children[0]), self.span_of(children[0]))

    def node(self, word: Leaf) -> str:
        """The word as a node, faults noted."""
        said = node_fault(word.name)
        if said is not None:
            self.fault(*said, word.span)
        return word.name

    def plain(self, name: str, span: Span | None, what: str) -> None:
        """Note a fault when the name means something else already."""
        said = plain_fault(name, what)
        if said is not None:
            self.fault(*said, span)

    def label(self, token: Token, what: str) -> str:
        """The name of a law, a device or a drive."""
        name, span = self.name(token), self.span_of(token)
        if is_part_name(name):
            self.fault(
                f"{name} cannot be {what}", f"names that begin with {class_letter(name)} are branches", span
            )
        else:
            self.plain(name, span, what)
        return name

    # -- chains ------------------------------------------------------------------------------------------------------

    def on_beside(self, children: Sequence[Any]) -> Group:
        """Parts side by side."""
        return children[0] if len(children) == 1 else Beside(tuple(children))

    def on_series(self, children: Sequence[Any]) -> Group:
        """Parts one after the other."""
        items = children[::2]
        return items[0] if len(items) == 1 else Series(tuple(items))

    def on_inline_quantity(self, children: Sequence[Any]) -> RightSide:
        """A quantity inside a chain."""
        minus, number, unit, tolerance = children
        formed = self.on_number((number, unit))
        return RightSide(self.on_sign((minus, formed)) if minus else formed, tolerance)

    def on_inline_name(self, children: Sequence[Any]) -> RightSide:
        """A name as value inside a chain."""
        return RightSide(self.on_name(children[:1]), children[1])

    def on_link(self, children: Sequence[Any]) -> _Link:
        """What stands between two dashes."""
        group, _, value = children
        return _Link(group, _span_of(group), value)

    def on_chain(self, children: Sequence[Any]) -> None:
        """Node, part, node, part, node."""
        links = [_Link(children[0], _span_of(children[0])), *children[1:]]
        if not self._right_places(links):
            return
        nodes = [self.node(link.word) for link in links[::2] if link.word]
        for k, link in enumerate(links[1::2]):
            self._wire(link, nodes[k], nodes[k + 1])

    def _right_places(self, links: list[_Link]) -> bool:
        """Whether nodes and parts alternate; only the first wrong place is a fault, the rest follows from it."""
        for k, link in enumerate(links):
            word = link.word
            if k % 2 == 0:
                if word is None:
                    self.fault(
                        "a group of parts stands where a node must stand", _left_out(links, k), link.span
                    )
                    return False
                if is_part_name(word.name):
                    self.fault(f"{word.name} stands where a node must stand", _left_out(links, k), link.span)
                    return False
                if link.value is not None:
                    self.fault(f"node {word.name} cannot have a value", "values belong to parts", link.span)
                    return False
            else:
                wrong = next((leaf for leaf in leaves(link.group) if not is_part_name(leaf.name)), None)
                if wrong is not None:
                    self.fault(
                        f"{wrong.name} stands where a part must stand", _no_part(wrong.name), wrong.span
                    )
                    return False
        if len(links) % 2 == 0:
            last = links[-1]
            self.fault("the chain ends with a part", "write the node at its other end", last.span)
            return False
        return True

    def _wire(self, link: _Link, start: str, end: str) -> None:
        if start == end:
            names = " and ".join(leaf.name for leaf in leaves(link.group))
            message = f"both ends of {names} are at node {start}"
            self.fault(message, "a part stands between two different nodes", link.span)
        for leaf in leaves(link.group):
            if leaf.name in RESERVED or not leaf.name.isascii():
                self.plain(leaf.name, leaf.span, "a part")
        branches = wire(link.group, start, end)
        if link.value is not None:
            if link.word is None:
                self.fault("a value stands behind one part of a chain", "give each part its value", link.span)
            else:
                self.draft.values.append((link.word.name, link.value, link.span))
        self.draft.parts.extend(branches)

    # -- values ------------------------------------------------------------------------------------------------------

    def on_tolerance(self, children: Sequence[Token]) -> Fraction:
        """±1 % as 1/100."""
        _, number, _, below, _ = children
        span = self.span_of(number)
        try:
            value = read_number(str(number), span) / 100
            divisor = read_number(str(below), span) if below else Fraction(1)
        except SymnetError as error:
            self.faults.extend(error.faults)
            return Fraction(0)
        if not divisor or value / divisor >= 1:
            shown = f"{number}/{below}" if below else str(number)
            self.fault(f"a tolerance of {shown} % is no tolerance", "it lies below 100 %", span)
            return Fraction(0)
        return value / divisor

    def on_value(self, children: Sequence[Any]) -> RightSide:
        """An expression with or without tolerance."""
        return RightSide(self.whole(children[0]), children[1])

    def on_assignment(self, children: Sequence[Any]) -> None:
        """R1, R2 = 4.7 kohm ±1 %."""
        *targets, _, value = children
        for token in targets[::2]:
            name, span = self.name(token), self.span_of(token)
            if not is_part_name(name):
                self.plain(name, span, "given a value")
            self.draft.values.append((name, value, span))


def _span_of(group: Group) -> Span:
    spans = [leaf.span for leaf in leaves(group) if leaf.span is not None]
    return spans[0].to(spans[-1])


def _left_out(links: list[_Link], k: int) -> str:
    name = _shown(links[k].group)
    if k == 0:
        return f"a chain begins with a node: write a -- {name} -- b"
    before = _shown(links[k - 1].group)
    return f"did you leave out the node between {before} and {name}, or mean {before} + {name}?"


def _shown(group: Group) -> str:
    names = [leaf.name for leaf in leaves(group)]
    return (
        names[0]
        if len(names) == 1
        else f"({(' || ' if isinstance(group, Beside) else ' + ').join(names[:4])})"
    )


def _no_part(name: str) -> str:
    if name[0].upper() in CLASS_LETTERS and len(name) > 1 and not name[1:].isalpha():
        return f"names are case-sensitive: did you mean {name[0].upper()}{name[1:]}?"
    return "a part begins with R, L, C, Z or Y; two nodes that are joined by a wire are one node"
