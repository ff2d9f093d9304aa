"""What symnet says when something is wrong: one small tree of errors, each carrying its faults as values.

A :class:`Fault` knows what is wrong, where it stands in the text, which nodes and parts it concerns and what
to do; it draws its own line and caret. A :class:`SymnetError` is what is raised: it holds all the faults that
one pass has found, so that nothing is flattened into a string before somebody has to read it.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from difflib import get_close_matches
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable

__all__ = [
    "DimensionError",
    "Fault",
    "LimitError",
    "MissingValueError",
    "NotationError",
    "SingularError",
    "Span",
    "SymnetError",
    "UndefinedError",
    "UnknownNameError",
    "WiringError",
    "nearest",
]

_LONGEST_LINE_SHOWN = 100


@dataclass(frozen=True, slots=True)
class Span:
    """Where something stands in a text: characters ``start`` up to but without ``end``, counted from 0."""

    start: int
    end: int

    def to(self, other: Span) -> Span:
        """The span from the start of this one to the end of the other."""
        return Span(min(self.start, other.start), max(self.end, other.end))


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing that is wrong: message, place, remedy, and the nodes and parts concerned."""

    message: str
    hint: str = ""
    span: Span | None = None
    nodes: tuple[str, ...] = ()
    parts: tuple[str, ...] = ()

    def at(self, span: Span | None) -> Fault:
        """The same fault with a place, unless it has one already."""
        return self if self.span is not None or span is None else replace(self, span=span)

    def draw(self, text: str | None = None) -> str:
        """The fault as a person reads it: place, message, the line with a caret, the remedy."""
        if self.span is None or text is None:
            return self.message + (f"\n    {self.hint}" if self.hint else "")
        start = min(self.span.start, len(text))
        line_start = text.rfind("\n", 0, start) + 1
        line_end = text.find("\n", start)
        line = text[line_start : len(text) if line_end < 0 else line_end].rstrip("\r")
        number = text.count("\n", 0, line_start) + 1
        column = start - line_start
        width = max(1, min(self.span.end - start, len(line) - column))
        shown, caret = _window(line, column, width)
        rows = [f"line {number}, column {column + 1}: {self.message}", f"    {shown}", f"    {caret}"]
        if self.hint:
            rows.append(f"    {self.hint}")
        return "\n".join(rows)


def _window(line: str, column: int, width: int) -> tuple[str, str]:
    """The piece of a long line around the caret, and the caret below it; tabs become single spaces."""
    printable = "".join(c if c.isprintable() else " " for c in line)
    first, last = 0, len(printable)
    if last > _LONGEST_LINE_SHOWN:
        first = max(0, column - _LONGEST_LINE_SHOWN // 2)
        last = min(last, first + _LONGEST_LINE_SHOWN)
    head = "..." if first else ""
    tail = "..." if last < len(printable) else ""
    shown = head + printable[first:last] + tail
    caret = " " * (len(head) + column - first) + "^" * max(1, min(width, last - column))
    return shown, caret


class SymnetError(Exception):
    """The root of everything that symnet raises on purpose.

    ``faults`` are the single findings; ``text`` is the text they stand in, when there is one.
    """

    def __init__(self, faults: Fault | str | Iterable[Fault], *, text: str | None = None) -> None:
        if isinstance(faults, str):
            faults = Fault(faults)
        if isinstance(faults, Fault):
            faults = (faults,)
        self.faults: tuple[Fault, ...] = tuple(faults)
        self.text = text
        super().__init__(self.faults, text)

    def __str__(self) -> str:
        drawn = [fault.draw(self.text) for fault in self.faults]
        if len(drawn) == 1:
            return drawn[0]
        return f"{len(drawn)} faults\n" + "\n".join(drawn)


class NotationError(SymnetError, ValueError):
    """A text, a value or an expression that cannot be read as it stands."""


class WiringError(SymnetError, ValueError):
    """A network that no derivation can start from: an island, a loop of ideal sources, a missing drive."""


class SingularError(SymnetError, ArithmeticError):
    """The equations have no single solution, in general or for these values."""


class UndefinedError(SymnetError, ArithmeticError):
    """The figure asked for does not exist for this H (no poles, H = 0, a limit that is infinite)."""


class UnknownNameError(SymnetError, KeyError):
    """A node, part or symbol that the network does not have."""


class MissingValueError(SymnetError, ValueError):
    """A number was asked for and a symbol has no value yet."""


class DimensionError(SymnetError, ValueError):
    """Terms of different dimension were added, or a value has not the dimension of its part."""


class LimitError(SymnetError, ValueError):
    """The work asked for is larger than a stated bound; the message says which and what to do instead."""


def nearest(name: str, known: Iterable[str], most: int = 1) -> list[str]:
    """The known names that look most like this one: equal but for case first, then by likeness."""
    known = list(dict.fromkeys(known))
    same = [k for k in known if k.lower() == name.lower() and k != name]
    close = [k for k in get_close_matches(name, known, n=most + 1, cutoff=0.6) if k not in same and k != name]
    return (same + close)[:most]
