"""A formula as several lines of plain text: the outermost fractions get a bar, long sums are broken.

Only what stands outermost is stacked, and everything inside is written as in the notation, so that each
numerator and denominator can still be copied and read back.
"""

from __future__ import annotations

from dataclasses import dataclass
from textwrap import wrap
from typing import Final

from symnet.typeset.tree import Constant, Product, Quotient, Sum, Tree
from symnet.typeset.writing import shorten, to_text

__all__ = ["WIDTH", "Block", "beside", "fraction", "stacked", "words"]

#: Columns that plain text keeps to.
WIDTH: Final = 100
_MOST_TEXT: Final = 2400


@dataclass(frozen=True, slots=True)
class Block:
    """Lines of equal width; ``middle`` is the line on which the next block continues."""

    lines: tuple[str, ...]
    middle: int = 0

    @property
    def width(self) -> int:
        """The width in columns."""
        return len(self.lines[0])


def words(text: str) -> Block:
    """One line of text as a block."""
    return Block((text,))


def beside(*blocks: Block) -> Block:
    """The blocks from left to right, their middles on one line."""
    above = max(block.middle for block in blocks)
    below = max(len(block.lines) - block.middle for block in blocks)
    rows = []
    for k in range(above + below):
        row = ""
        for block in blocks:
            at = k - above + block.middle
            row += block.lines[at] if 0 <= at < len(block.lines) else " " * block.width
        rows.append(row)
    return Block(tuple(rows), above)


def fraction(above: Block, below: Block) -> Block:
    """One block over another, with a bar between them."""
    width = max(above.width, below.width)
    rows = [line.center(width) for line in above.lines]
    rows += ["-" * width, *(line.center(width) for line in below.lines)]
    return Block(tuple(rows), len(above.lines))


def stacked(tree: Tree, width: int = WIDTH) -> Block:
    r"""The tree in lines of about this width, its outermost fractions stacked.

    >>> from symnet.typeset.tree import Atom
    >>> print("\n".join(stacked(Quotient(Atom("R2"), Sum(((1, Atom("R1")), (1, Atom("R2")))))).lines))
       R2
    -------
    R1 + R2
    """
    return _stacked(shorten(tree, _MOST_TEXT), width)


def _stacked(tree: Tree, width: int) -> Block:
    match tree:
        case Quotient(numerator, denominator):
            return fraction(_broken(numerator, width), _broken(denominator, width))
        case Constant(value) if value.denominator != 1 and value > 0:
            return fraction(words(str(value.numerator)), words(str(value.denominator)))
        case Sum(((-1, Quotient() | Product() as inner),)):
            return beside(
                words("- "), _stacked(inner, width - 2)
            )  # a sign at the bar would look like a part of it
        case Product(factors) if any(_is_fraction(factor) for factor in factors):
            pieces: list[Block] = []
            for factor in factors:
                if pieces:
                    pieces.append(words(" * "))
                if _is_fraction(factor):
                    pieces.append(_stacked(factor, width))
                else:
                    text = to_text(factor)
                    pieces.append(words(f"({text})" if isinstance(factor, Sum) else text))
            row = beside(*pieces)
            return row if row.width <= width else _broken(tree, width)
        case _:
            return _broken(tree, width)


def _is_fraction(tree: Tree) -> bool:
    return isinstance(tree, Quotient) or (
        isinstance(tree, Constant) and tree.value.denominator != 1 and tree.value > 0
    )


def _broken(tree: Tree, width: int) -> Block:
    """One line, or several that begin with the sign of a term of the outermost sum."""
    text = to_text(tree)
    if len(text) <= width or not isinstance(tree, Sum):
        return words(text)
    rows = [""]
    for k, (sign, term) in enumerate(tree.terms):
        piece = to_text(Sum(((1, term),)))
        if k or sign < 0:
            piece = f"{'-' if sign < 0 else '+'} {piece}"
        for part in wrap(piece, width, break_long_words=False, break_on_hyphens=False):
            if rows[-1] and len(rows[-1]) + 1 + len(part) > width:
                rows.append("")
            rows[-1] += f" {part}" if rows[-1] else part
    longest = max(map(len, rows))
    return Block(tuple(row.ljust(longest) for row in rows), 0)
