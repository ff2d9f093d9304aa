"""What is shown, before it is text, Markdown, HTML or LaTeX: headings, paragraphs, formulas, tables, lists.

A showing is built once, as blocks, and each writer in :mod:`symnet.present.writers` turns the same blocks into
its own marks; so that no two of them can say different things. A line of words may hold formulas (typeset
trees) and numbers with their unit, which the richer writers show with Ω and µ.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TypeAlias

from symnet.typeset.numbers import Written
from symnet.typeset.tree import Tree

__all__ = [
    "Block",
    "Folded",
    "Formula",
    "Heading",
    "Items",
    "Line",
    "Paragraph",
    "Row",
    "Steps",
    "Table",
    "Typed",
    "without_empty_columns",
]


#: Words, a formula, a number with its unit, or several of these in one line.
Line: TypeAlias = str | Tree | Written | tuple[str | Tree | Written, ...]


@dataclass(frozen=True, slots=True)
class Heading:
    """The title of what follows; level 1 is a whole showing, level 2 a piece of it."""

    text: str
    level: int = 2


@dataclass(frozen=True, slots=True)
class Paragraph:
    """Words, with formulas among them."""

    line: Line


@dataclass(frozen=True, slots=True)
class Formula:
    """H(s) = left = right, on a line of its own; ``function`` is the letter in front, for a function of s."""

    sides: tuple[Tree, ...]
    function: str = ""


@dataclass(frozen=True, slots=True)
class Table:
    """Rows under a header; ``omitted`` rows are counted and not shown. Without a header it is a list of pairs."""

    header: tuple[str, ...]
    rows: tuple[tuple[Line, ...], ...]
    omitted: int = 0


def without_empty_columns(header: Sequence[str], rows: Sequence[tuple[Line, ...]]) -> Table:
    """A table without the columns in which no row has anything."""
    kept = [k for k in range(len(header)) if any(row[k] != "" for row in rows)]
    return Table(tuple(header[k] for k in kept), tuple(tuple(row[k] for k in kept) for row in rows))


@dataclass(frozen=True, slots=True)
class Items:
    """A list of short statements."""

    lines: tuple[Line, ...]


@dataclass(frozen=True, slots=True)
class Typed:
    """Text that was typed, shown letter by letter."""

    text: str


@dataclass(frozen=True, slots=True)
class Folded:
    """Blocks that a notebook shows on demand; on paper they stand there open."""

    title: str
    blocks: tuple[Block, ...]


@dataclass(frozen=True, slots=True)
class Row:
    """``left = right`` with a word before it and a reason behind; without ``left`` it goes on from the row above."""

    left: Tree | None
    right: Tree
    label: str = ""
    reason: str = ""


@dataclass(frozen=True, slots=True)
class Steps:
    """A derivation: equations below each other, their equals signs in one column."""

    rows: tuple[Row, ...]


Block: TypeAlias = Heading | Paragraph | Formula | Table | Items | Typed | Folded | Steps
